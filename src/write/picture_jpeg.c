#include "base/memory.h"
#include "write/picture_pixels.h"

#include <stdbool.h>
#include <string.h>
#include <turbojpeg.h>

/* Warnings are errors: a cut or broken file is a warning to libjpeg. Scans are limited
   because a small progressive file can ask for thousands of passes over a large picture. */
enum { STRICT = TJFLAG_STOPONWARNING | TJFLAG_LIMITSCANS };

/* A TIFF block inside the EXIF segment; reads beyond its end give 0. */
struct tiff {
    const unsigned char *data;
    size_t length;
    bool little_endian;
};

static unsigned tiff_u16(const struct tiff *tiff, size_t offset)
{
    if (offset > tiff->length || tiff->length - offset < 2)
        return 0;
    unsigned low = tiff->data[offset + !tiff->little_endian];
    unsigned high = tiff->data[offset + tiff->little_endian];
    return high << 8 | low;
}

static size_t tiff_u32(const struct tiff *tiff, size_t offset)
{
    size_t first = tiff_u16(tiff, offset);
    size_t second = tiff_u16(tiff, offset + 2);
    return tiff->little_endian ? second << 16 | first : first << 16 | second;
}

/* Tag 0x0112 of the first directory (TIFF 6.0): type 3 SHORT, one value. */
static enum orientation tiff_orientation(const unsigned char *data, size_t length)
{
    struct tiff tiff = {data, length, length > 1 && data[0] == 'I'};
    if (tiff_u16(&tiff, 2) != 42)
        return ORIENTATION_UPRIGHT;
    size_t directory = tiff_u32(&tiff, 4);
    unsigned count = tiff_u16(&tiff, directory);
    for (unsigned i = 0; i < count; i++) {
        size_t entry = directory + 2 + 12 * (size_t)i;
        if (tiff_u16(&tiff, entry) != 0x0112 || tiff_u16(&tiff, entry + 2) != 3)
            continue;
        unsigned value = tiff_u16(&tiff, entry + 8);
        return value >= 1 && value <= 8 ? (enum orientation)value : ORIENTATION_UPRIGHT;
    }
    return ORIENTATION_UPRIGHT;
}

/* Walk the marker segments before the first scan; file begins with SOI. */
static enum orientation exif_orientation(const unsigned char *file, size_t length)
{
    size_t at = 2;
    while (at + 4 <= length && file[at] == 0xFF && file[at + 1] != 0xDA) {
        size_t segment = (size_t)file[at + 2] << 8 | file[at + 3];
        if (segment < 2 || segment > length - at - 2)
            break;
        const unsigned char *body = file + at + 4;
        if (file[at + 1] == 0xE1 && segment > 8 && memcmp(body, "Exif\0", 6) == 0)
            return tiff_orientation(body + 6, segment - 8);
        at += 2 + segment;
    }
    return ORIENTATION_UPRIGHT;
}

/* The header of a JPEG, and what it means for the work. */
struct jpeg {
    const unsigned char *file;
    size_t length;
    int width_px, height_px; /* as stored */
    int subsampling;         /* TJSAMP_... */
    int components;
    enum orientation orientation;
};

/* Why the handle's last call failed. What libjpeg-turbo has no memory for is no fault of the file:
   "Memory allocation failure", "Insufficient memory (case 4)". */
static enum picture_status failure_of(tjhandle handle)
{
    if (!handle || strstr(tjGetErrorStr2(handle), "emory"))
        memory_exhausted();
    return PICTURE_DAMAGED;
}

static enum picture_status read_header(struct jpeg *jpeg, const struct picture_limits *limits)
{
    int colour_space;
    tjhandle handle = tjInitDecompress();
    int failed =
        tjDecompressHeader3(handle, jpeg->file, (unsigned long)jpeg->length, &jpeg->width_px,
                            &jpeg->height_px, &jpeg->subsampling, &colour_space);
    enum picture_status status = failed ? failure_of(handle) : PICTURE_OK;
    tjDestroy(handle);
    if (failed)
        return status;
    if ((uint64_t)jpeg->width_px * (uint64_t)jpeg->height_px > limits->opened_px)
        return PICTURE_TOO_LARGE;
    if (colour_space == TJCS_CMYK || colour_space == TJCS_YCCK)
        return PICTURE_UNSUPPORTED;
    jpeg->components = colour_space == TJCS_GRAY ? 1 : 3;
    jpeg->orientation = exif_orientation(jpeg->file, jpeg->length);
    return PICTURE_OK;
}

/* Take over a buffer of libjpeg-turbo, read its size from its own header. */
static enum picture_status take_jpeg(unsigned char *data, unsigned long length,
                                     const struct jpeg *jpeg, struct picture *picture)
{
    struct jpeg made = *jpeg;
    made.file = data;
    made.length = length;
    const struct picture_limits any = {.opened_px = UINT64_MAX};
    enum picture_status status = read_header(&made, &any);
    if (status == PICTURE_OK) {
        *picture = (struct picture){.kind = PICTURE_JPEG,
                                    .width_px = (unsigned)made.width_px,
                                    .height_px = (unsigned)made.height_px,
                                    .components = (unsigned)made.components};
        buffer_append(&picture->data, data, length);
    }
    tjFree(data);
    return status;
}

/* All codes are read and written again: this checks the file, drops its markers, turns it. */
static enum picture_status transform(const struct jpeg *jpeg, struct picture *picture)
{
    static const int operations[] = {
        [ORIENTATION_UPRIGHT] = TJXOP_NONE,
        [ORIENTATION_MIRRORED] = TJXOP_HFLIP,
        [ORIENTATION_HALF_TURN] = TJXOP_ROT180,
        [ORIENTATION_FLIPPED] = TJXOP_VFLIP,
        [ORIENTATION_TRANSPOSED] = TJXOP_TRANSPOSE,
        [ORIENTATION_QUARTER_TURN] = TJXOP_ROT90,
        [ORIENTATION_TRANSVERSED] = TJXOP_TRANSVERSE,
        [ORIENTATION_THREE_QUARTER_TURN] = TJXOP_ROT270,
    };
    tjtransform operation = {.op = operations[jpeg->orientation],
                             .options = TJXOPT_COPYNONE | TJXOPT_TRIM};
    unsigned char *data = NULL;
    unsigned long length = 0;
    tjhandle handle = tjInitTransform();
    int failed = tjTransform(handle, jpeg->file, (unsigned long)jpeg->length, 1, &data, &length,
                             &operation, STRICT);
    enum picture_status status = failed ? failure_of(handle) : PICTURE_OK;
    tjDestroy(handle);
    if (failed) {
        tjFree(data);
        return status;
    }
    return take_jpeg(data, length, jpeg, picture);
}

/* Of libjpeg's cheap scalings (n/8) the smallest that is not below the wanted size. */
static tjscalingfactor choose_scaling(const struct jpeg *jpeg, unsigned width_px,
                                      unsigned height_px)
{
    int count = 0;
    const tjscalingfactor *factors = tjGetScalingFactors(&count);
    tjscalingfactor best = {1, 1};
    for (int i = 0; i < count; i++) {
        int width = TJSCALED(jpeg->width_px, factors[i]);
        int height = TJSCALED(jpeg->height_px, factors[i]);
        if (width >= (int)width_px && height >= (int)height_px &&
            factors[i].num * best.denom < best.num * factors[i].denom)
            best = factors[i];
    }
    return best;
}

static enum picture_status decode_pixels(const struct jpeg *jpeg, tjscalingfactor scaling,
                                         struct picture *pixels)
{
    int width = TJSCALED(jpeg->width_px, scaling);
    int height = TJSCALED(jpeg->height_px, scaling);
    *pixels = (struct picture){.kind = PICTURE_PIXELS,
                               .width_px = (unsigned)width,
                               .height_px = (unsigned)height,
                               .components = (unsigned)jpeg->components};
    size_t size = (size_t)width * (size_t)height * pixels->components;
    buffer_reserve(&pixels->data, size);
    pixels->data.length = size;
    tjhandle handle = tjInitDecompress();
    int failed = tjDecompress2(
        handle, jpeg->file, (unsigned long)jpeg->length, (unsigned char *)pixels->data.data, width,
        0, height, jpeg->components == 1 ? TJPF_GRAY : TJPF_RGB, STRICT | TJFLAG_ACCURATEDCT);
    enum picture_status status = failed ? failure_of(handle) : PICTURE_OK;
    tjDestroy(handle);
    if (failed)
        picture_release(pixels);
    return status;
}

static enum picture_status encode_pixels(const struct picture *pixels, int quality,
                                         const struct jpeg *jpeg, struct picture *picture)
{
    unsigned char *data = NULL;
    unsigned long length = 0;
    bool gray = pixels->components == 1;
    tjhandle handle = tjInitCompress();
    int failed =
        tjCompress2(handle, (const unsigned char *)pixels->data.data, (int)pixels->width_px, 0,
                    (int)pixels->height_px, gray ? TJPF_GRAY : TJPF_RGB, &data, &length,
                    gray ? TJSAMP_GRAY : TJSAMP_420, quality, TJFLAG_ACCURATEDCT);
    enum picture_status status = failed ? failure_of(handle) : PICTURE_OK;
    tjDestroy(handle);
    if (failed) {
        tjFree(data);
        return status;
    }
    return take_jpeg(data, length, jpeg, picture);
}

static enum picture_status rescale(const struct jpeg *jpeg, const struct picture_limits *limits,
                                   struct picture *picture)
{
    unsigned width_px = (unsigned)jpeg->width_px;
    unsigned height_px = (unsigned)jpeg->height_px;
    pixels_fit(limits->longest_side_px, &width_px, &height_px);
    struct picture pixels;
    enum picture_status status =
        decode_pixels(jpeg, choose_scaling(jpeg, width_px, height_px), &pixels);
    if (status != PICTURE_OK)
        return status;
    pixels_shrink(&pixels, width_px, height_px);
    pixels_turn(&pixels, jpeg->orientation);
    status = encode_pixels(&pixels, limits->jpeg_quality, jpeg, picture);
    picture_release(&pixels);
    return status;
}

/* Blocks that cannot be turned are trimmed; a picture smaller than a block would vanish. */
static bool can_be_turned(const struct jpeg *jpeg)
{
    return jpeg->orientation == ORIENTATION_UPRIGHT ||
           (jpeg->subsampling >= 0 && jpeg->subsampling < TJ_NUMSAMP &&
            jpeg->width_px >= tjMCUWidth[jpeg->subsampling] &&
            jpeg->height_px >= tjMCUHeight[jpeg->subsampling]);
}

enum picture_status jpeg_decode(const unsigned char *file, size_t length,
                                const struct picture_limits *limits, struct picture *picture)
{
    struct jpeg jpeg = {.file = file, .length = length};
    enum picture_status status = read_header(&jpeg, limits);
    if (status != PICTURE_OK)
        return status;
    unsigned longest = (unsigned)(jpeg.width_px > jpeg.height_px ? jpeg.width_px : jpeg.height_px);
    if (longest <= limits->longest_side_px && can_be_turned(&jpeg))
        return transform(&jpeg, picture);
    return rescale(&jpeg, limits, picture);
}
