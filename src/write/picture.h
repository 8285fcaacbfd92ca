/*
 * Photographs and drawings made fit for an archival PDF: checked to the last byte,
 * without camera data (position, serial numbers, thumbnails), upright, not larger
 * than needed, in gray or RGB.
 *
 * Damaged input gives a status, never an abort. No global state; threads may read
 * pictures at the same time.
 */
#ifndef WRITE_PICTURE_H
#define WRITE_PICTURE_H

#include "base/buffer.h"

#include <stddef.h>
#include <stdint.h>

enum picture_kind {
    PICTURE_JPEG,  /* data is a JPEG file */
    PICTURE_PIXELS /* data is rows from the top, components bytes a pixel, no padding */
};

enum picture_status {
    PICTURE_OK,
    PICTURE_UNKNOWN,    /* neither JPEG nor PNG */
    PICTURE_DAMAGED,    /* cut off, its codes broken, or an odd JPEG sampling (4x2, 3x1) */
    PICTURE_TOO_LARGE,  /* more pixels than picture_limits allow to be opened */
    PICTURE_UNSUPPORTED /* CMYK or another kind that cannot go into an RGB archive */
};

/* English, without capital or full stop; for a message after "cannot use picture 'x': ". */
const char *picture_status_text(enum picture_status status);

struct picture_limits {
    unsigned longest_side_px; /* a longer picture is scaled down to this */
    uint64_t opened_px;       /* a picture with more pixels is refused unopened */
    int jpeg_quality;         /* 1 to 100, for a JPEG that has to be scaled */
};

struct picture {
    enum picture_kind kind;
    unsigned width_px, height_px; /* as shown, after turning upright */
    unsigned components;          /* 1 gray, 3 RGB */
    struct buffer data;
};

/*
 * Make a picture of a JPEG or PNG file's bytes.
 *
 * JPEG: turned upright by its EXIF orientation. When it need not be scaled this is
 * done on its coefficients, without loss; a side that is not a whole number of JPEG
 * blocks then loses its incomplete last blocks (at most 15 pixels). All markers but
 * the necessary ones are dropped, an embedded colour profile included.
 * PNG: any depth and kind becomes 8 bits, transparency is laid on white.
 *
 * *picture is set on PICTURE_OK only and is then freed with picture_release.
 */
enum picture_status picture_decode(const unsigned char *file, size_t length,
                                   const struct picture_limits *limits, struct picture *picture);

void picture_release(struct picture *picture);

#endif
