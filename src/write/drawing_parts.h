/*
 * Pens for drawings: what the plots are put together from. For write/drawing*.c only.
 */
#ifndef WRITE_DRAWING_PARTS_H
#define WRITE_DRAWING_PARTS_H

#include "write/drawing.h"
#include "write/text_width.h"

#include <math.h>

#define MARK_RADIUS     4.3 /* marks are 8.6 units across */
#define TEXT_SIZE       12.0
#define TEXT_SIZE_SMALL 11.0

/* A drawing being made. */
struct sketch {
    struct drawing drawing;
    struct arena *arena; /* owns shapes, points and texts */
};

/* How a text is set. */
struct lettering {
    enum text_class text_class;
    enum anchor anchor;
    bool small;
};

/* Add a shape; points in units from the upper left corner, y downward. Points are copied. */
void sketch_line(struct sketch *sketch, struct point from, struct point to, enum line_class line);
void sketch_path(struct sketch *sketch, const struct point *points, size_t count,
                 enum line_class line);
/* Filled, not stroked. */
void sketch_rectangle(struct sketch *sketch, struct point top_left, struct point bottom_right,
                      enum fill_class fill);
void sketch_circle(struct sketch *sketch, struct point centre, double radius, enum fill_class fill);
/* Empty and NULL texts leave no shape. */
void sketch_text(struct sketch *sketch, struct point at, const char *text,
                 struct lettering lettering);
void sketch_mark(struct sketch *sketch, enum mark mark, struct point centre);
/* A shaft from `from` to `to` with a small open head at `to`; horizontal or vertical. */
void sketch_arrow(struct sketch *sketch, struct point from, struct point to);
/* One stroke of the headline, 5 units wide, its line under it at top + 16.3. */
void sketch_stroke(struct sketch *sketch, enum stroke stroke, struct point top_left);

/* Width of a text in units. */
double lettering_width(const char *text, struct lettering lettering);
/* The text cut with an ellipsis to `width` units. */
const char *lettering_fitted(struct arena *arena, const char *text, struct lettering lettering,
                             double width);

/* A scale from values to units. On a log scale low and high are above 0. */
struct scale {
    bool log;
    double low, high; /* values at the ends */
    double from, to;  /* units at the ends */
};
/* The place of a value; outside [low, high] it is the nearer end. */
double scale_at(const struct scale *scale, double value);

/* 1, 2 or 5 times a power of ten, so that range/step is at most max_steps. */
double scale_step(double range, unsigned max_steps);

/* A plain number for an axis: true minus, thin space from five digits on. */
const char *scale_number(struct arena *arena, double value);

/* Each draws its plot into a sketch whose drawing has a width, and sets the height. */
void drawing_glance(struct sketch *sketch, const struct glance *glance);
void drawing_curves(struct sketch *sketch, const struct curves *curves);
void drawing_shares(struct sketch *sketch, const struct shares *shares);

#endif
