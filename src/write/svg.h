/*
 * Drawings as SVG. The classes are those of style.css; a standalone file carries its own rules.
 */
#ifndef WRITE_SVG_H
#define WRITE_SVG_H

#include "base/buffer.h"
#include "write/drawing.h"

/* What stands around a drawing. */
struct svg_frame {
    const char *classes; /* NULL: none */
    const char *title; /* its name for screen readers; NULL: it is ornament and hidden from them */
    double left, top, right, bottom; /* what to show, in units of the drawing */
};

/* Show the whole of a drawing. */
struct svg_frame svg_frame_of(const struct drawing *drawing, const char *classes,
                              const char *title);

/* Append an <svg> element for use inside HTML. */
void svg_write(const struct drawing *drawing, const struct svg_frame *frame, struct buffer *out);

#endif
