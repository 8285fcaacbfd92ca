#include "write/pdf_drawing.h"

#include <string.h>

static const double halo_units = 3; /* half of it lies outside the letters */

struct line_look {
    double units;
    enum ink ink;
};

static struct line_look line_look(enum line_class line)
{
    switch (line) {
    case LINE_AXIS:
        return (struct line_look){0.9, INK_TEXT};
    case LINE_TICK:
        return (struct line_look){0.7, INK_TEXT};
    case LINE_GRID:
        return (struct line_look){0.8, INK_FAINT};
    case LINE_LEAD:
        return (struct line_look){0.6, INK_HAIR};
    case LINE_LIMIT:
        return (struct line_look){1.6, INK_ACCENT};
    case LINE_CURVE:
        return (struct line_look){1.1, INK_TEXT};
    case LINE_MARK:
        return (struct line_look){1.15, INK_TEXT};
    case LINE_INTERVAL:
        return (struct line_look){2.2, INK_TEXT};
    case LINE_BRACKET:
        return (struct line_look){0.9, INK_SOFT};
    }
    return (struct line_look){1, INK_TEXT};
}

static enum ink fill_ink(enum fill_class fill)
{
    switch (fill) {
    case FILL_NONE:
    case FILL_PAPER:
        return INK_PAPER;
    case FILL_INK:
        return INK_TEXT;
    case FILL_BAND:
        return INK_BAND;
    }
    return INK_TEXT;
}

static struct text_style text_look(const struct shape *shape, double scale)
{
    /* 7.6 pt and 7 pt where 720 units are as wide as the text block of A4 */
    struct text_style style = {FACE_REGULAR, (shape->small ? 10.6 : 11.5) * scale, 0, INK_TEXT};
    switch (shape->text_class) {
    case TEXT_INK:
        break;
    case TEXT_SOFT:
        style.ink = INK_SOFT;
        break;
    case TEXT_STRONG:
        style.face = FACE_SEMIBOLD;
        break;
    case TEXT_LIMIT:
        style.face = FACE_SEMIBOLD;
        style.ink = INK_ACCENT;
        break;
    }
    return style;
}

static void draw_text(struct pdf_canvas *canvas, const struct shape *shape, struct point at,
                      double scale)
{
    if (!shape->text)
        return;
    struct text_style style = text_look(shape, scale);
    size_t length = strlen(shape->text);
    double width =
        (double)pdf_text_width(canvas->fonts->resources, style.face, shape->text, length) *
        style.size_pt / 1000;
    if (shape->anchor == ANCHOR_MIDDLE)
        at.x -= width / 2;
    else if (shape->anchor == ANCHOR_END)
        at.x -= width;
    pdf_canvas_halo(canvas, at, &style, shape->text, halo_units * scale);
    pdf_canvas_text(canvas, at, &style, shape->text, length);
}

static void draw_path(struct pdf_canvas *canvas, const struct shape *shape, struct point origin,
                      double scale, const struct paint *paint)
{
    enum { SMALL = 64 };
    struct point small[SMALL];
    struct point *points = small;
    struct arena arena = {0};
    if (shape->point_count > SMALL)
        points = arena_array(&arena, shape->point_count, sizeof *points);
    for (size_t i = 0; i < shape->point_count; i++)
        points[i] = (struct point){origin.x + shape->points[i].x * scale,
                                   origin.y + shape->points[i].y * scale};
    if (shape->point_count == 2 && !paint->filled)
        pdf_canvas_line(canvas, points[0], points[1], paint->line_pt, paint->stroke);
    else
        pdf_canvas_path(canvas, points, shape->point_count, shape->closed, paint);
    arena_release(&arena);
}

static void draw_shape(struct pdf_canvas *canvas, const struct shape *shape, struct point origin,
                       double scale)
{
    if (shape->point_count == 0)
        return;
    struct line_look look = line_look(shape->line);
    struct paint paint = {.filled = shape->fill != FILL_NONE,
                          .fill = fill_ink(shape->fill),
                          .stroked = shape->stroked,
                          .stroke = look.ink,
                          .line_pt = look.units * scale};
    struct point first = {origin.x + shape->points[0].x * scale,
                          origin.y + shape->points[0].y * scale};
    switch (shape->kind) {
    case SHAPE_PATH:
        draw_path(canvas, shape, origin, scale, &paint);
        break;
    case SHAPE_CIRCLE:
        pdf_canvas_circle(canvas, first, shape->radius * scale, &paint);
        break;
    case SHAPE_HALF:
        paint = (struct paint){.filled = true, .fill = INK_TEXT};
        pdf_canvas_half(canvas, first, shape->radius * scale, &paint);
        break;
    case SHAPE_TEXT:
        draw_text(canvas, shape, first, scale);
        break;
    }
}

void pdf_drawing(struct pdf_canvas *canvas, const struct drawing *drawing, struct point at,
                 double scale)
{
    for (size_t i = 0; i < drawing->shape_count; i++)
        draw_shape(canvas, &drawing->shapes[i], at, scale);
}
