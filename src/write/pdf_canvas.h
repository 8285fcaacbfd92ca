/*
 * The contents of one page: text, lines, shapes and pictures as PDF operators (PDF 1.4, 4 and 5)
 * in a buffer of our own, with no operator for a state that holds already.
 *
 * Places are in points from the upper left corner of the page, y downwards; they are clipped to
 * what PDF 1.4 allows. Widths are in points.
 */
#ifndef WRITE_PDF_CANVAS_H
#define WRITE_PDF_CANVAS_H

#include "write/drawing.h"
#include "write/pdf_text.h"

/* The colours of the look; the accent is the shop's. */
enum ink { INK_TEXT, INK_SOFT, INK_HAIR, INK_FAINT, INK_BAND, INK_PAPER, INK_ACCENT, INK_COUNT };

struct rgb {
    double red, green, blue; /* 0 to 1 */
};

struct text_style {
    enum text_face face;
    double size_pt;
    double raise_pt; /* of note signs */
    enum ink ink;
};

/* How a shape is painted. */
struct paint {
    bool filled, stroked;
    enum ink fill, stroke;
    double line_pt;
};

struct pdf_canvas {
    struct buffer contents;
    struct pdf_fonts *fonts;
    double height_pt;
    struct rgb accent;
    struct buffer codes; /* scratch */
    /* what the graphics state holds; fill and stroke INK_COUNT: not known */
    bool in_text;
    enum text_face face;
    long size, text_x, text_y; /* hundredths of a point */
    enum ink fill, stroke;
    long line;
};

/* An empty page of this height. Release with pdf_canvas_release. */
struct pdf_canvas pdf_canvas_begin(struct pdf_fonts *fonts, double height_pt, struct rgb accent);
void pdf_canvas_release(struct pdf_canvas *canvas);

/* After the last operator. */
void pdf_canvas_end(struct pdf_canvas *canvas);

/* Text from x on the baseline y. */
void pdf_canvas_text(struct pdf_canvas *canvas, struct point at, const struct text_style *style,
                     const char *text, size_t length);

/* Paper colour round a text that is to come at this place, so that lines do not cross it. */
void pdf_canvas_halo(struct pdf_canvas *canvas, struct point at, const struct text_style *style,
                     const char *text, double line_pt);

/* What a copy of the text up to the end gives in its place (PDF 1.4, 9.8.3): ASCII. */
void pdf_canvas_actual_text(struct pdf_canvas *canvas, const char *text);
void pdf_canvas_actual_text_end(struct pdf_canvas *canvas);

/* Shapes; points in points from the upper left corner of the page, y downward. */
void pdf_canvas_line(struct pdf_canvas *canvas, struct point from, struct point to, double line_pt,
                     enum ink ink);
void pdf_canvas_path(struct pdf_canvas *canvas, const struct point *points, size_t count,
                     bool closed, const struct paint *paint);
void pdf_canvas_circle(struct pdf_canvas *canvas, struct point centre, double radius,
                       const struct paint *paint);
/* The lower half of a disc. */
void pdf_canvas_half(struct pdf_canvas *canvas, struct point centre, double radius,
                     const struct paint *paint);

/* The image named I<number> in the resources, with its upper left corner at `at`. */
void pdf_canvas_image(struct pdf_canvas *canvas, unsigned number, struct point at, double width,
                      double height);

#endif
