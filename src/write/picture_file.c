#include "write/picture_file.h"

#include "base/memory.h"

#include <png.h>

const char *picture_file_extension(const struct picture *picture)
{
    switch (picture->kind) {
    case PICTURE_JPEG:
        return "jpg";
    case PICTURE_PIXELS:
        return "png";
    }
    return "";
}

static void write_png(const struct picture *picture, struct buffer *out)
{
    png_image image = {
        .version = PNG_IMAGE_VERSION,
        .width = picture->width_px,
        .height = picture->height_px,
        .format = picture->components == 1 ? PNG_FORMAT_GRAY : PNG_FORMAT_RGB,
    };
    png_alloc_size_t length = 0;
    /* Fails for want of memory only: the pixels are in memory and whole. */
    if (!png_image_write_get_memory_size(image, length, 0, picture->data.data, 0, NULL))
        memory_exhausted();
    buffer_reserve(out, length);
    if (!png_image_write_to_memory(&image, out->data + out->length, &length, 0, picture->data.data,
                                   0, NULL))
        memory_exhausted();
    out->length += length;
}

void picture_file_write(const struct picture *picture, struct buffer *out)
{
    switch (picture->kind) {
    case PICTURE_JPEG:
        buffer_append(out, picture->data.data, picture->data.length);
        return;
    case PICTURE_PIXELS:
        write_png(picture, out);
        return;
    }
}
