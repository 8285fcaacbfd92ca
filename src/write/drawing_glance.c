/* All capacitors at a glance: one row a part, its leakage over its own limit on a log axis. */
#include "write/drawing_parts.h"

#include <stdlib.h>
#include <string.h>

enum { LOWEST_DECADE = -3, HIGHEST_AT_LEAST = 2, HIGHEST_AT_MOST = 6, MANY_ROWS = 40 };

struct layout {
    const struct glance *glance;
    bool narrow;
    double row_height, top, bottom;
    double ref_x, no_ratio_x, outcome_x;
    int highest;        /* decade at the right end */
    struct scale scale; /* ratio to x */
    double *row_tops;
};

static const struct lettering soft = {.text_class = TEXT_SOFT};
static const struct lettering strong = {.text_class = TEXT_STRONG};

static const char *outcome_of(const struct layout *layout, const struct glance_row *row)
{
    return layout->narrow ? row->outcome_narrow : row->outcome;
}

static struct lettering outcome_lettering(const struct layout *layout, const struct glance_row *row)
{
    return (struct lettering){.text_class = row->strong ? TEXT_STRONG : TEXT_INK,
                              .small = layout->narrow};
}

static bool starts_group(const struct glance *glance, size_t row)
{
    return row == 0 || strcmp(glance->rows[row].place, glance->rows[row - 1].place) != 0;
}

static double widest(const struct layout *layout, const char *(*text)(const struct glance_row *),
                     struct lettering lettering)
{
    double width = 0;
    for (size_t i = 0; i < layout->glance->row_count; i++)
        width = fmax(width, lettering_width(text(&layout->glance->rows[i]), lettering));
    return width;
}

static const char *place_text(const struct glance_row *row)
{
    return row->place;
}

static const char *ref_text(const struct glance_row *row)
{
    return row->ref;
}

static double widest_outcome(const struct layout *layout)
{
    double width = 0;
    for (size_t i = 0; i < layout->glance->row_count; i++) {
        const struct glance_row *row = &layout->glance->rows[i];
        width =
            fmax(width, lettering_width(outcome_of(layout, row), outcome_lettering(layout, row)));
    }
    return width;
}

/* Whole decades are added at the right for a part above 100 times its limit. */
static int highest_decade(const struct glance *glance)
{
    double highest = HIGHEST_AT_LEAST;
    for (size_t i = 0; i < glance->row_count; i++) {
        const struct glance_row *row = &glance->rows[i];
        if (row->ratio > 0)
            highest = fmax(highest, ceil(log10(row->ratio) - 1e-9));
        if (row->found_ratio > 0)
            highest = fmax(highest, ceil(log10(row->found_ratio) - 1e-9));
    }
    return (int)fmin(highest, HIGHEST_AT_MOST);
}

/* Columns from the texts they hold, within bounds, so that the axis keeps its room. */
static void lay_out_columns(struct layout *layout, double width)
{
    double ref_width, left, to_axis;
    if (layout->narrow) {
        ref_width = fmin(fmax(widest(layout, ref_text, strong) + 10, 40), 96);
        layout->ref_x = 0;
        layout->outcome_x = width - fmin(fmax(widest_outcome(layout) + 2, 60), 110);
        to_axis = 32;
    } else {
        ref_width = fmin(fmax(widest(layout, ref_text, strong) + 12, 44), 100);
        layout->ref_x = fmin(fmax(widest(layout, place_text, soft) + 16, 112), 170);
        layout->outcome_x = width - fmin(fmax(widest_outcome(layout) + 2, 164), 232);
        to_axis = 68;
    }
    left = layout->ref_x + ref_width;
    layout->no_ratio_x = layout->outcome_x - (layout->narrow ? 11 : 20);
    layout->scale = (struct scale){.log = true,
                                   .low = pow(10, LOWEST_DECADE),
                                   .high = pow(10, layout->highest),
                                   .from = left,
                                   .to = layout->outcome_x - to_axis};
}

static void lay_out_rows(struct layout *layout, struct arena *arena)
{
    size_t count = layout->glance->row_count;
    layout->row_tops = arena_array(arena, count + 1, sizeof *layout->row_tops);
    double y = layout->top + (layout->narrow ? 6 : 8);
    for (size_t i = 0; i < count; i++) {
        if (starts_group(layout->glance, i))
            y += layout->narrow ? 20 : i > 0 ? 6 : 0;
        layout->row_tops[i] = y;
        y += layout->row_height;
    }
    layout->bottom = y + 6;
}

static const char *decade_text(const struct layout *layout, int decade, struct arena *arena)
{
    if (decade == 0)
        return layout->glance->limit_word;
    const char *number = scale_number(arena, pow(10, abs(decade)));
    return decade < 0 ? arena_print(arena, "1/%s", number)
                      : arena_print(arena, "%s\xc2\xa0%s", number, layout->glance->times_sign);
}

/* Labels go on from the limit outwards; one that would touch its neighbour is left out. */
static void draw_labels(struct sketch *sketch, const struct layout *layout, int direction)
{
    double taken = 0;
    for (int decade = 0; decade >= LOWEST_DECADE && decade <= layout->highest;
         decade += direction) {
        struct lettering lettering = {.text_class = decade == 0 ? TEXT_LIMIT : TEXT_SOFT,
                                      .anchor = ANCHOR_MIDDLE,
                                      .small = layout->narrow};
        const char *text = decade_text(layout, decade, sketch->arena);
        double half = lettering_width(text, lettering) / 2;
        double x = scale_at(&layout->scale, pow(10, decade));
        double from_limit = fabs(x - scale_at(&layout->scale, 1));
        if (decade != 0 && from_limit - half < taken + 2)
            continue;
        taken = from_limit + half;
        if (decade == 0 && direction < 0)
            continue; /* drawn on the way to the right */
        sketch_text(sketch, (struct point){x, layout->top - 6}, text, lettering);
        sketch_text(sketch, (struct point){x, layout->bottom + 15}, text, lettering);
    }
}

static void draw_axis(struct sketch *sketch, const struct layout *layout)
{
    for (int decade = LOWEST_DECADE; decade <= layout->highest; decade++) {
        double x = scale_at(&layout->scale, pow(10, decade));
        if (decade != 0)
            sketch_line(sketch, (struct point){x, layout->top}, (struct point){x, layout->bottom},
                        LINE_GRID);
    }
    for (int decade = LOWEST_DECADE; decade < layout->highest; decade++) {
        static const double between[] = {2, 5};
        for (int i = 0; i < 2; i++) {
            double x = scale_at(&layout->scale, between[i] * pow(10, decade));
            sketch_line(sketch, (struct point){x, layout->bottom},
                        (struct point){x, layout->bottom + 3}, LINE_TICK);
        }
    }
    draw_labels(sketch, layout, 1);
    draw_labels(sketch, layout, -1);
}

static bool has_ratio(const struct glance_row *row)
{
    return !isnan(row->ratio);
}

static void draw_no_ratio_head(struct sketch *sketch, const struct layout *layout)
{
    size_t without = 0;
    for (size_t i = 0; i < layout->glance->row_count; i++)
        without += !has_ratio(&layout->glance->rows[i]);
    if (without == 0)
        return;
    struct lettering small = {.text_class = TEXT_SOFT, .anchor = ANCHOR_MIDDLE, .small = true};
    const char *word = layout->glance->no_ratio_word;
    /* On a phone it would meet the last decade: it stands a line higher, and only once. */
    double lift = layout->narrow ? 20 : 6;
    sketch_text(sketch, (struct point){layout->no_ratio_x, layout->top - lift}, word, small);
    if (!layout->narrow)
        sketch_text(sketch, (struct point){layout->no_ratio_x, layout->bottom + 15}, word, small);
}

static void draw_bands(struct sketch *sketch, const struct layout *layout)
{
    for (size_t i = 0; i < layout->glance->row_count; i++) {
        const struct glance_row *row = &layout->glance->rows[i];
        if (isnan(row->band_low) || isnan(row->band_high))
            continue;
        sketch_rectangle(
            sketch, (struct point){scale_at(&layout->scale, row->band_low), layout->row_tops[i]},
            (struct point){scale_at(&layout->scale, row->band_high),
                           layout->row_tops[i] + layout->row_height},
            FILL_BAND);
    }
}

static void draw_found(struct sketch *sketch, const struct layout *layout,
                       const struct glance_row *row, struct point mark)
{
    struct point found = {scale_at(&layout->scale, row->found_ratio), mark.y};
    double side = found.x > mark.x ? 1 : -1;
    double reach = MARK_RADIUS + 1.6;
    if (fabs(found.x - mark.x) > reach + 6)
        sketch_arrow(sketch, found, (struct point){mark.x + side * reach, mark.y});
    sketch_mark(sketch, MARK_NOT_JUDGED, found);
}

static void draw_ratio(struct sketch *sketch, const struct layout *layout,
                       const struct glance_row *row, double middle)
{
    struct point at = {scale_at(&layout->scale, row->ratio), middle};
    if (!isnan(row->found_ratio))
        draw_found(sketch, layout, row, at);
    double edge = MARK_RADIUS;
    if (row->at_most || row->ratio < layout->scale.low)
        sketch_arrow(sketch, (struct point){at.x - edge, middle},
                     (struct point){at.x - edge - 9, middle});
    else if (row->at_least || row->ratio > layout->scale.high)
        sketch_arrow(sketch, (struct point){at.x + edge, middle},
                     (struct point){at.x + edge + 9, middle});
    sketch_mark(sketch, row->mark, at);
}

static void draw_row(struct sketch *sketch, const struct layout *layout, size_t index)
{
    const struct glance_row *row = &layout->glance->rows[index];
    double top = layout->row_tops[index], middle = top + layout->row_height / 2,
           baseline = middle + 4;
    if (starts_group(layout->glance, index)) {
        struct lettering lettering = {.text_class = TEXT_SOFT, .small = layout->narrow};
        double room = layout->narrow ? sketch->drawing.width : layout->ref_x - 8;
        sketch_text(sketch, (struct point){0, layout->narrow ? top - 5 : baseline},
                    lettering_fitted(sketch->arena, row->place, lettering, room), lettering);
        double rule = layout->narrow ? top - 18.5 : top - 3;
        if (index > 0)
            sketch_line(sketch, (struct point){0, rule},
                        (struct point){sketch->drawing.width, rule}, LINE_LEAD);
    }
    double ref_room = layout->scale.from - layout->ref_x - 6;
    sketch_text(sketch, (struct point){layout->ref_x, baseline},
                lettering_fitted(sketch->arena, row->ref, strong, ref_room), strong);
    if (has_ratio(row))
        draw_ratio(sketch, layout, row, middle);
    else
        sketch_mark(sketch, row->mark, (struct point){layout->no_ratio_x, middle});
    struct lettering lettering = outcome_lettering(layout, row);
    const char *outcome = outcome_of(layout, row);
    sketch_text(sketch, (struct point){layout->outcome_x, baseline},
                lettering_fitted(sketch->arena, outcome, lettering,
                                 sketch->drawing.width - layout->outcome_x),
                lettering);
}

static void draw_axis_text(struct sketch *sketch, const struct layout *layout)
{
    struct lettering small = {.text_class = TEXT_SOFT, .small = true};
    double width = lettering_width(layout->glance->axis_text, small);
    double middle = (layout->scale.from + layout->scale.to) / 2;
    double x = fmax(fmin(middle - width / 2, sketch->drawing.width - width), 0);
    sketch_text(sketch, (struct point){x, layout->bottom + 30}, layout->glance->axis_text, small);
}

void drawing_glance(struct sketch *sketch, const struct glance *glance)
{
    struct layout layout = {.glance = glance, .narrow = sketch->drawing.width < 500};
    layout.row_height = layout.narrow ? 18.5 : glance->row_count > MANY_ROWS ? 13 : 15.5;
    layout.top = layout.narrow ? 34 : 22;
    layout.highest = highest_decade(glance);
    lay_out_columns(&layout, sketch->drawing.width);
    lay_out_rows(&layout, sketch->arena);
    sketch->drawing.height = layout.bottom + 35;
    draw_axis(sketch, &layout);
    draw_no_ratio_head(sketch, &layout);
    draw_bands(sketch, &layout);
    double limit_x = scale_at(&layout.scale, 1);
    sketch_line(sketch, (struct point){limit_x, layout.top}, (struct point){limit_x, layout.bottom},
                LINE_LIMIT);
    for (size_t i = 0; i < glance->row_count; i++)
        draw_row(sketch, &layout, i);
    sketch_line(sketch, (struct point){layout.scale.from, layout.bottom},
                (struct point){layout.scale.to, layout.bottom}, LINE_AXIS);
    draw_axis_text(sketch, &layout);
}
