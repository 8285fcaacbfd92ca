#include "write/drawing.h"

#include "write/drawing_parts.h"

#include <assert.h>
#include <string.h>

static struct shape *add_shape(struct sketch *sketch, struct shape shape,
                               const struct point *points, size_t count)
{
    struct drawing *drawing = &sketch->drawing;
    drawing->shapes = arena_grow(sketch->arena, drawing->shapes, drawing->shape_count,
                                 &drawing->shape_capacity, sizeof *drawing->shapes);
    shape.points = arena_array(sketch->arena, count, sizeof *points);
    memcpy(shape.points, points, count * sizeof *points);
    shape.point_count = count;
    drawing->shapes[drawing->shape_count] = shape;
    return &drawing->shapes[drawing->shape_count++];
}

void sketch_path(struct sketch *sketch, const struct point *points, size_t count,
                 enum line_class line)
{
    if (count > 1)
        add_shape(sketch, (struct shape){.kind = SHAPE_PATH, .stroked = true, .line = line}, points,
                  count);
}

void sketch_line(struct sketch *sketch, struct point from, struct point to, enum line_class line)
{
    sketch_path(sketch, (struct point[]){from, to}, 2, line);
}

static void add_box(struct sketch *sketch, struct point top_left, struct point bottom_right,
                    struct shape shape)
{
    struct point corners[4] = {
        top_left, {bottom_right.x, top_left.y}, bottom_right, {top_left.x, bottom_right.y}};
    shape.kind = SHAPE_PATH;
    shape.closed = true;
    add_shape(sketch, shape, corners, 4);
}

void sketch_rectangle(struct sketch *sketch, struct point top_left, struct point bottom_right,
                      enum fill_class fill)
{
    add_box(sketch, top_left, bottom_right, (struct shape){.fill = fill});
}

void sketch_circle(struct sketch *sketch, struct point centre, double radius, enum fill_class fill)
{
    struct shape circle = {
        .kind = SHAPE_CIRCLE, .radius = radius, .stroked = true, .line = LINE_MARK, .fill = fill};
    add_shape(sketch, circle, &centre, 1);
}

void sketch_text(struct sketch *sketch, struct point at, const char *text,
                 struct lettering lettering)
{
    if (!text || !text[0])
        return;
    struct shape shape = {.kind = SHAPE_TEXT,
                          .text = text,
                          .text_class = lettering.text_class,
                          .anchor = lettering.anchor,
                          .small = lettering.small};
    add_shape(sketch, shape, &at, 1);
}

static void add_square(struct sketch *sketch, struct point centre, enum fill_class fill)
{
    double half = 0.9 * MARK_RADIUS;
    add_box(sketch, (struct point){centre.x - half, centre.y - half},
            (struct point){centre.x + half, centre.y + half},
            (struct shape){.stroked = true, .line = LINE_MARK, .fill = fill});
}

void sketch_mark(struct sketch *sketch, enum mark mark, struct point centre)
{
    double half = 0.9 * MARK_RADIUS;
    switch (mark) {
    case MARK_NONE:
        break;
    case MARK_PASS:
        sketch_circle(sketch, centre, MARK_RADIUS, FILL_PAPER);
        break;
    case MARK_CONDITIONAL_PASS:
        sketch_circle(sketch, centre, MARK_RADIUS, FILL_PAPER);
        add_shape(sketch,
                  (struct shape){.kind = SHAPE_HALF, .radius = MARK_RADIUS, .fill = FILL_INK},
                  &centre, 1);
        break;
    case MARK_NOT_JUDGED:
        sketch_rectangle(sketch, (struct point){centre.x - MARK_RADIUS, centre.y - 0.9},
                         (struct point){centre.x + MARK_RADIUS, centre.y + 0.9}, FILL_INK);
        break;
    case MARK_CONDITIONAL_FAIL:
        add_square(sketch, centre, FILL_PAPER);
        sketch_rectangle(sketch, (struct point){centre.x - half, centre.y},
                         (struct point){centre.x + half, centre.y + half}, FILL_INK);
        break;
    case MARK_FAIL:
        add_square(sketch, centre, FILL_INK);
        break;
    }
}

void sketch_arrow(struct sketch *sketch, struct point from, struct point to)
{
    double length = hypot(to.x - from.x, to.y - from.y);
    assert(length > 0);
    double along_x = (to.x - from.x) / length, along_y = (to.y - from.y) / length;
    const double back = 3.6, aside = 2.6;
    struct point base = {to.x - back * along_x, to.y - back * along_y};
    struct point head[3] = {{base.x - aside * along_y, base.y + aside * along_x},
                            to,
                            {base.x + aside * along_y, base.y - aside * along_x}};
    sketch_line(sketch, from, to, LINE_TICK);
    sketch_path(sketch, head, 3, LINE_TICK);
}

void sketch_stroke(struct sketch *sketch, enum stroke stroke, struct point top_left)
{
    double x = top_left.x, y = top_left.y;
    switch (stroke) {
    case STROKE_KEPT:
        sketch_rectangle(sketch, top_left, (struct point){x + 5, y + 15}, FILL_INK);
        break;
    case STROKE_LIFTED:
        sketch_rectangle(sketch, (struct point){x, y - 1}, (struct point){x + 5, y + 8.5},
                         FILL_INK);
        break;
    case STROKE_SHELL:
        add_box(sketch, (struct point){x + 0.6, y + 0.6}, (struct point){x + 4.4, y + 14.4},
                (struct shape){.stroked = true, .line = LINE_MARK, .fill = FILL_NONE});
        break;
    case STROKE_REMOVED:
        sketch_rectangle(sketch, (struct point){x, y + 13}, (struct point){x + 5, y + 15},
                         FILL_INK);
        break;
    case STROKE_COUNT:
        assert(false);
    }
}

static double text_size(struct lettering lettering)
{
    return lettering.small ? TEXT_SIZE_SMALL : TEXT_SIZE;
}

static bool is_semibold(struct lettering lettering)
{
    return lettering.text_class == TEXT_STRONG || lettering.text_class == TEXT_LIMIT;
}

double lettering_width(const char *text, struct lettering lettering)
{
    return text_width_milli(text, is_semibold(lettering)) * text_size(lettering) / 1000;
}

const char *lettering_fitted(struct arena *arena, const char *text, struct lettering lettering,
                             double width)
{
    double limit_milli = fmax(width, 0) * 1000 / text_size(lettering);
    return text_fitted(arena, text, (unsigned)fmin(limit_milli, 1e6), is_semibold(lettering));
}

double scale_at(const struct scale *scale, double value)
{
    double share = scale->log
                       ? log(fmax(value, scale->low) / scale->low) / log(scale->high / scale->low)
                       : (value - scale->low) / (scale->high - scale->low);
    return scale->from + fmin(fmax(share, 0), 1) * (scale->to - scale->from);
}

double scale_step(double range, unsigned max_steps)
{
    double power = pow(10, floor(log10(range / max_steps)));
    static const double factors[] = {1, 2, 5};
    for (int i = 0; i < 3; i++)
        if (range / (factors[i] * power) <= max_steps * (1 + 1e-9))
            return factors[i] * power;
    return 10 * power;
}

const char *scale_number(struct arena *arena, double value)
{
    struct buffer digits = {0};
    buffer_fixed(&digits, fabs(value), fabs(value) < 1e-4 ? 6 : 4);
    const char *text = buffer_string(&digits);
    size_t whole = strcspn(text, ".");
    char *number = arena_get(arena, digits.length + digits.length + 4);
    char *end = number;
    if (value < 0 && strcmp(text, "0") != 0)
        end = stpcpy(end, "−");
    for (size_t i = 0; text[i]; i++) {
        if (whole > 4 && i > 0 && i < whole && (whole - i) % 3 == 0)
            end = stpcpy(end, "\xe2\x80\x89");
        *end++ = text[i];
    }
    buffer_release(&digits);
    return number;
}

struct drawing drawing_of_plot(const struct plot *plot, double width, struct arena *arena)
{
    struct sketch sketch = {.drawing = {.width = width}, .arena = arena};
    switch (plot->kind) {
    case PLOT_GLANCE:
        drawing_glance(&sketch, &plot->glance);
        break;
    case PLOT_CURVES:
        drawing_curves(&sketch, &plot->curves);
        break;
    case PLOT_SHARES:
        drawing_shares(&sketch, &plot->shares);
        break;
    }
    return sketch.drawing;
}

struct drawing drawing_of_mark(enum mark mark, struct arena *arena)
{
    struct sketch sketch = {.drawing = {.width = 2 * MARK_RADIUS, .height = 2 * MARK_RADIUS},
                            .arena = arena};
    sketch_mark(&sketch, mark, (struct point){0, 0});
    return sketch.drawing;
}

struct drawing drawing_of_stroke(enum stroke stroke, struct arena *arena)
{
    struct sketch sketch = {.drawing = {.width = 9, .height = 18.5}, .arena = arena};
    sketch_stroke(&sketch, stroke, (struct point){2, 1});
    sketch_line(&sketch, (struct point){0, 17.8}, (struct point){9, 17.8}, LINE_LEAD);
    return sketch.drawing;
}
