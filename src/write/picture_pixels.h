/*
 * Work on pixels that the picture readers share. Not for use outside picture*.c.
 */
#ifndef WRITE_PICTURE_PIXELS_H
#define WRITE_PICTURE_PIXELS_H

#include "write/picture.h"

/* EXIF orientation, tag 0x0112: where row 0 and column 0 of the stored picture are shown. */
enum orientation {
    ORIENTATION_UPRIGHT = 1,
    ORIENTATION_MIRRORED,
    ORIENTATION_HALF_TURN,
    ORIENTATION_FLIPPED,
    ORIENTATION_TRANSPOSED,
    ORIENTATION_QUARTER_TURN, /* to be turned clockwise */
    ORIENTATION_TRANSVERSED,
    ORIENTATION_THREE_QUARTER_TURN
};

/* The size that fits width x height into a square of side limit_px; never larger, at least 1. */
void pixels_fit(unsigned limit_px, unsigned *width_px, unsigned *height_px);

/* Scale down by averaging areas. width_px, height_px: new size, at most the present one. */
void pixels_shrink(struct picture *pixels, unsigned width_px, unsigned height_px);

/* Turn and mirror as the orientation says. */
void pixels_turn(struct picture *pixels, enum orientation orientation);

/* Readers of one format; contracts as picture_decode. */
enum picture_status jpeg_decode(const unsigned char *file, size_t length,
                                const struct picture_limits *limits, struct picture *picture);
enum picture_status png_decode(const unsigned char *file, size_t length,
                               const struct picture_limits *limits, struct picture *picture);

#endif
