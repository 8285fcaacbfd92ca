/*
 * A drawing: lines, marks and words in units (720 wide on pages, 350 on phones, y downwards), laid
 * out once from a plot or headline and then written as SVG or into a PDF. Classes, not colours:
 * the look is the writer's.
 */
#ifndef WRITE_DRAWING_H
#define WRITE_DRAWING_H

#include "base/arena.h"
#include "report/exhibit.h"

enum line_class {
    LINE_AXIS,     /* ink 0.9 */
    LINE_TICK,     /* ink 0.7 */
    LINE_GRID,     /* faint 0.8 */
    LINE_LEAD,     /* hair 0.6 */
    LINE_LIMIT,    /* accent 1.6 */
    LINE_CURVE,    /* ink 1.1 */
    LINE_MARK,     /* ink 1.15: outline of marks, arrows */
    LINE_INTERVAL, /* ink 2.2 */
    LINE_BRACKET   /* soft 0.9 */
};
enum fill_class { FILL_NONE, FILL_PAPER, FILL_INK, FILL_BAND };
enum text_class { TEXT_INK, TEXT_SOFT, TEXT_STRONG, TEXT_LIMIT };
enum anchor { ANCHOR_START, ANCHOR_MIDDLE, ANCHOR_END };

enum shape_kind {
    SHAPE_PATH,   /* polyline through points; closed with a fill */
    SHAPE_CIRCLE, /* centre points[0], radius */
    SHAPE_HALF,   /* lower half of a circle, filled ink */
    SHAPE_TEXT
};

struct point {
    double x, y;
};
struct shape {
    enum shape_kind kind;
    struct point *points;
    size_t point_count;
    double radius;
    bool closed;
    bool stroked;
    enum line_class line;
    enum fill_class fill;
    const char *text;
    enum text_class text_class;
    enum anchor anchor;
    bool small;
};
struct drawing {
    double width, height;
    struct shape *shapes; /* in order of drawing */
    size_t shape_count, shape_capacity;
};

/* Lay out a plot for a width of 720 or 350 units. */
struct drawing drawing_of_plot(const struct plot *plot, double width, struct arena *arena);

/* The rows of strokes of the headline, for a width of 480 or 350 units. */
struct drawing drawing_of_headline(const struct headline *headline, double width,
                                   struct arena *arena);

/* One stroke, as beside the counts: 9 x 18.5 units. */
struct drawing drawing_of_stroke(enum stroke stroke, struct arena *arena);

/* The mark of an outcome about (0, 0), 8.6 units across. */
struct drawing drawing_of_mark(enum mark mark, struct arena *arena);

#endif
