#include "write/picture.h"

#include "base/memory.h"
#include "write/picture_pixels.h"

#include <assert.h>
#include <png.h>
#include <stdbool.h>
#include <string.h>

const char *picture_status_text(enum picture_status status)
{
    switch (status) {
    case PICTURE_OK:
        return "no error";
    case PICTURE_UNKNOWN:
        return "neither JPEG nor PNG";
    case PICTURE_DAMAGED:
        return "the file is damaged, incomplete or of an unusual kind";
    case PICTURE_TOO_LARGE:
        return "it has too many pixels";
    case PICTURE_UNSUPPORTED:
        return "its colours are neither gray nor RGB";
    }
    return "unknown status";
}

void picture_release(struct picture *picture)
{
    buffer_release(&picture->data);
    *picture = (struct picture){0};
}

enum picture_status picture_decode(const unsigned char *file, size_t length,
                                   const struct picture_limits *limits, struct picture *picture)
{
    static const unsigned char png[8] = {0x89, 'P', 'N', 'G', '\r', '\n', 0x1A, '\n'};
    static const unsigned char jpeg[3] = {0xFF, 0xD8, 0xFF};
    if (length > sizeof png && memcmp(file, png, sizeof png) == 0)
        return png_decode(file, length, limits, picture);
    if (length > sizeof jpeg && memcmp(file, jpeg, sizeof jpeg) == 0)
        return jpeg_decode(file, length, limits, picture);
    return PICTURE_UNKNOWN;
}

/* Why libpng failed; what it has no memory for is no fault of the file. */
static enum picture_status failure_of(const png_image *image)
{
    if (strcasestr(image->message, "out of memory") ||
        strcasestr(image->message, "insufficient memory"))
        memory_exhausted();
    return PICTURE_DAMAGED;
}

enum picture_status png_decode(const unsigned char *file, size_t length,
                               const struct picture_limits *limits, struct picture *picture)
{
    png_image image = {.version = PNG_IMAGE_VERSION};
    if (!png_image_begin_read_from_memory(&image, file, length))
        return failure_of(&image);
    if ((uint64_t)image.width * image.height > limits->opened_px) {
        png_image_free(&image);
        return PICTURE_TOO_LARGE;
    }
    bool colour = image.format & PNG_FORMAT_FLAG_COLOR;
    image.format = colour ? PNG_FORMAT_RGB : PNG_FORMAT_GRAY;
    struct picture read = {.kind = PICTURE_PIXELS,
                           .width_px = image.width,
                           .height_px = image.height,
                           .components = colour ? 3 : 1};
    size_t size = (size_t)image.width * image.height * read.components;
    assert(size > 0); /* libpng refuses a picture without pixels */
    buffer_reserve(&read.data, size);
    read.data.length = size;
    const png_color white = {255, 255, 255};
    if (!png_image_finish_read(&image, &white, read.data.data, 0, NULL)) {
        picture_release(&read);
        return failure_of(&image);
    }
    unsigned width_px = read.width_px;
    unsigned height_px = read.height_px;
    pixels_fit(limits->longest_side_px, &width_px, &height_px);
    pixels_shrink(&read, width_px, height_px);
    *picture = read;
    return PICTURE_OK;
}

void pixels_fit(unsigned limit_px, unsigned *width_px, unsigned *height_px)
{
    uint64_t longest = *width_px > *height_px ? *width_px : *height_px;
    if (longest <= limit_px)
        return;
    uint64_t width = (*width_px * (uint64_t)limit_px + longest / 2) / longest;
    uint64_t height = (*height_px * (uint64_t)limit_px + longest / 2) / longest;
    *width_px = width ? (unsigned)width : 1;
    *height_px = height ? (unsigned)height : 1;
}

/* Whole source pixels first..last-1 that an output pixel covers; at least one. */
struct span {
    size_t first, last;
};

static struct span source_span(unsigned index, unsigned new_size, unsigned old_size)
{
    struct span span = {(size_t)index * old_size / new_size,
                        ((size_t)index + 1) * old_size / new_size};
    if (span.last == span.first)
        span.last++;
    return span;
}

static void append_mean(struct buffer *out, const struct picture *pixels, struct span rows,
                        struct span columns)
{
    uint64_t sums[3] = {0};
    for (size_t row = rows.first; row < rows.last; row++) {
        const unsigned char *at = (const unsigned char *)pixels->data.data +
                                  (row * pixels->width_px + columns.first) * pixels->components;
        for (size_t column = columns.first; column < columns.last; column++)
            for (size_t component = 0; component < pixels->components; component++)
                sums[component] += *at++;
    }
    uint64_t count = (rows.last - rows.first) * (columns.last - columns.first);
    for (size_t component = 0; component < pixels->components; component++)
        out->data[out->length++] = (char)((sums[component] + count / 2) / count);
}

void pixels_shrink(struct picture *pixels, unsigned width_px, unsigned height_px)
{
    if (width_px == pixels->width_px && height_px == pixels->height_px)
        return;
    struct buffer small = {0};
    buffer_reserve(&small, (size_t)width_px * height_px * pixels->components);
    for (unsigned y = 0; y < height_px; y++)
        for (unsigned x = 0; x < width_px; x++)
            append_mean(&small, pixels, source_span(y, height_px, pixels->height_px),
                        source_span(x, width_px, pixels->width_px));
    buffer_release(&pixels->data);
    pixels->data = small;
    pixels->width_px = width_px;
    pixels->height_px = height_px;
}

void pixels_turn(struct picture *pixels, enum orientation orientation)
{
    if (orientation == ORIENTATION_UPRIGHT)
        return;
    bool swapped = orientation >= ORIENTATION_TRANSPOSED;
    bool from_right = orientation == ORIENTATION_MIRRORED || orientation == ORIENTATION_HALF_TURN ||
                      orientation == ORIENTATION_TRANSVERSED ||
                      orientation == ORIENTATION_THREE_QUARTER_TURN;
    bool from_below = orientation == ORIENTATION_HALF_TURN || orientation == ORIENTATION_FLIPPED ||
                      orientation == ORIENTATION_QUARTER_TURN ||
                      orientation == ORIENTATION_TRANSVERSED;
    size_t width = pixels->width_px;
    size_t height = pixels->height_px;
    size_t turned_width = swapped ? height : width;
    size_t turned_height = swapped ? width : height;
    struct buffer turned = {0};
    assert(pixels->data.length > 0);
    buffer_reserve(&turned, pixels->data.length);
    for (size_t y = 0; y < turned_height; y++) {
        for (size_t x = 0; x < turned_width; x++) {
            size_t column = swapped ? y : x;
            size_t row = swapped ? x : y;
            column = from_right ? width - 1 - column : column;
            row = from_below ? height - 1 - row : row;
            const char *from = pixels->data.data + (row * width + column) * pixels->components;
            for (size_t component = 0; component < pixels->components; component++)
                turned.data[turned.length++] = from[component];
        }
    }
    buffer_release(&pixels->data);
    pixels->data = turned;
    pixels->width_px = (unsigned)turned_width;
    pixels->height_px = (unsigned)turned_height;
}
