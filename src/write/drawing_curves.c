/* Current against time, with the volts on the part below when they were raised in steps. */
#include "write/drawing_parts.h"

#include <string.h>

enum { PANELS = 2, DECADES_AT_MOST = 8 };

struct panel {
    const struct curve_panel *data;
    struct scale time;
    double left, right;
};

struct layout {
    const struct curves *curves;
    bool narrow;
    struct panel panels[PANELS];
    size_t panel_count;
    struct scale current, volts;
    double floor;                      /* y of the time axis */
    double limit_left, limit_baseline; /* of the limit's words when they stand in a panel */
    bool has_volts, limit_shown;
};

static const struct lettering soft = {.text_class = TEXT_SOFT};
static const struct lettering soft_small = {.text_class = TEXT_SOFT, .small = true};

/* ---- the range of the readings */

struct range {
    double low, high; /* of what is above 0; low > high: nothing is */
};

static void widen(struct range *range, double value)
{
    if (!(value > 0) || !isfinite(value))
        return;
    range->low = fmin(range->low, value);
    range->high = fmax(range->high, value);
}

static struct range current_range(const struct curves *curves)
{
    struct range range = {INFINITY, -INFINITY};
    for (size_t i = 0; i < curves->panel_count; i++)
        for (size_t j = 0; j < curves->panels[i].curve_count; j++) {
            const struct curve *curve = &curves->panels[i].curves[j];
            for (size_t k = 0; k < curve->point_count; k++)
                widen(&range, curve->points[k].y);
            for (size_t k = 0; k < curve->fit_count; k++)
                widen(&range, curve->fit_y[k]);
        }
    return range;
}

static void lay_out_current(struct layout *layout, double top, double bottom)
{
    const struct curves *curves = layout->curves;
    struct range range = current_range(curves);
    bool limited = curves->limit > 0 && isfinite(curves->limit);
    if (range.low > range.high)
        range = limited ? (struct range){curves->limit, curves->limit} : (struct range){1e-6, 1e-6};
    layout->current = (struct scale){.log = curves->y_log, .from = bottom, .to = top};
    if (curves->y_log) {
        if (limited)
            widen(&range, curves->limit);
        double low = floor(log10(range.low / curves->y_scale) + 1e-9),
               high = ceil(log10(range.high / curves->y_scale) - 1e-9);
        high = fmax(high, low + 1);
        low = fmax(low, high - DECADES_AT_MOST);
        layout->current.low = pow(10, low) * curves->y_scale;
        layout->current.high = pow(10, high) * curves->y_scale;
        layout->limit_shown = limited;
        return;
    }
    /* A limit far above would press the readings flat: it is then only named, with an arrow. */
    layout->limit_shown = limited && curves->limit <= 4 * range.high;
    double high = layout->limit_shown ? fmax(range.high, curves->limit) : range.high;
    double step = scale_step(high / curves->y_scale * 1.05, 5);
    layout->current.high = ceil(high / curves->y_scale * 1.02 / step) * step * curves->y_scale;
}

/* ---- time */

static double first_time(const struct curve_panel *panel)
{
    double first = INFINITY;
    for (size_t i = 0; i < panel->curve_count; i++) {
        if (panel->curves[i].point_count)
            first = fmin(first, panel->curves[i].points[0].x_s);
        if (panel->curves[i].fit_count)
            first = fmin(first, panel->curves[i].fit_from_s);
    }
    return first;
}

static struct scale time_scale(const struct curve_panel *panel, double left, double right)
{
    double last = fmax(panel->x_max_s, 1), first = first_time(panel);
    if (!panel->x_log)
        return (struct scale){.high = last, .from = left, .to = right - 6};
    if (!(first > 0) || first >= last)
        first = last / 10;
    return (struct scale){
        .log = true, .low = first * 0.8, .high = last * 1.15, .from = left, .to = right};
}

struct time_unit {
    double seconds;
    const char *text;
};

static struct time_unit unit_of_step(double step_s)
{
    if (fmod(step_s, 3600) == 0)
        return (struct time_unit){3600, "h"};
    if (fmod(step_s, 60) == 0)
        return (struct time_unit){60, "min"};
    return (struct time_unit){1, "s"};
}

/* The smallest step of the clock with at most max_steps of them. */
static double clock_step(double range_s, unsigned max_steps)
{
    static const double steps[] = {1,   2,   5,    10,   15,   30,    60,    120,   300,
                                   600, 900, 1800, 3600, 7200, 14400, 28800, 43200, 86400};
    for (size_t i = 0; i < sizeof steps / sizeof steps[0]; i++)
        if (range_s / steps[i] <= max_steps)
            return steps[i];
    return scale_step(range_s / 86400, max_steps) * 86400;
}

static void draw_time_label(struct sketch *sketch, const struct layout *layout, double x,
                            const char *text)
{
    struct lettering lettering = {.text_class = TEXT_SOFT, .anchor = ANCHOR_MIDDLE};
    sketch_line(sketch, (struct point){x, layout->floor}, (struct point){x, layout->floor + 4},
                LINE_TICK);
    if (x + lettering_width(text, lettering) / 2 > sketch->drawing.width) {
        lettering.anchor = ANCHOR_END;
        x = sketch->drawing.width;
    }
    sketch_text(sketch, (struct point){x, layout->floor + 17}, text, lettering);
}

static void draw_linear_time(struct sketch *sketch, const struct layout *layout,
                             const struct panel *panel)
{
    double width = panel->right - panel->left, range = panel->time.high;
    double step = clock_step(range, (unsigned)fmax(width / (layout->narrow ? 50 : 80), 1));
    struct time_unit unit = unit_of_step(step);
    int last = (int)floor(range / step + 1e-9);
    for (int i = 0; i <= last; i++) {
        const char *text = scale_number(sketch->arena, i * step / unit.seconds);
        if (i == last)
            text = arena_print(sketch->arena, "%s\xc2\xa0%s", text, unit.text);
        draw_time_label(sketch, layout, scale_at(&panel->time, i * step), text);
    }
}

static void draw_log_time(struct sketch *sketch, const struct layout *layout,
                          const struct panel *panel)
{
    /* In order of importance; one that would touch a label already there is left out. */
    static const double times[] = {60, 3600, 10,   600,   36000, 1, 300, 120,
                                   30, 1800, 7200, 18000, 86400, 2, 5,   864000};
    double taken[16][2];
    size_t count = 0;
    for (size_t i = 0; i < sizeof times / sizeof times[0]; i++) {
        if (times[i] < panel->time.low || times[i] > panel->time.high)
            continue;
        struct time_unit unit = unit_of_step(times[i]);
        const char *text =
            arena_print(sketch->arena, "%s\xc2\xa0%s",
                        scale_number(sketch->arena, times[i] / unit.seconds), unit.text);
        double x = scale_at(&panel->time, times[i]), half = lettering_width(text, soft) / 2 + 4;
        bool clear = true;
        for (size_t j = 0; j < count; j++)
            clear = clear && (x + half < taken[j][0] || x - half > taken[j][1]);
        if (!clear)
            continue;
        taken[count][0] = x - half;
        taken[count++][1] = x + half;
        draw_time_label(sketch, layout, x, text);
    }
}

/* ---- axes */

static void draw_across(struct sketch *sketch, const struct layout *layout, double y,
                        enum line_class line)
{
    for (size_t i = 0; i < layout->panel_count; i++)
        sketch_line(sketch, (struct point){layout->panels[i].left, y},
                    (struct point){layout->panels[i].right, y}, line);
}

static void draw_value_label(struct sketch *sketch, const struct layout *layout, double y,
                             double value)
{
    struct lettering lettering = {.text_class = TEXT_SOFT, .anchor = ANCHOR_END};
    sketch_text(sketch, (struct point){layout->panels[0].left - 7, y + 4},
                scale_number(sketch->arena, value), lettering);
}

static int decades_of(const struct scale *scale)
{
    return (int)lround(log10(scale->high / scale->low));
}

static void draw_log_current(struct sketch *sketch, const struct layout *layout)
{
    int decades = decades_of(&layout->current), stride = decades > 6 ? 2 : 1;
    for (int i = 0; i <= decades; i++) {
        double value = layout->current.low * pow(10, i);
        double y = scale_at(&layout->current, value);
        draw_across(sketch, layout, y, LINE_GRID);
        if ((decades - i) % stride == 0)
            draw_value_label(sketch, layout, y, value / layout->curves->y_scale);
        static const double between[] = {2, 5};
        for (int j = 0; j < 2 && i < decades; j++) {
            double tick = scale_at(&layout->current, between[j] * value);
            for (size_t p = 0; p < layout->panel_count; p++)
                sketch_line(sketch, (struct point){layout->panels[p].left, tick},
                            (struct point){layout->panels[p].left + 3, tick}, LINE_TICK);
        }
    }
}

static void draw_linear(struct sketch *sketch, const struct layout *layout,
                        const struct scale *scale, double unit, unsigned max_steps)
{
    double high = scale->high / unit, step = scale_step(high, max_steps);
    for (int i = 0; i * step <= high * (1 + 1e-9); i++) {
        double y = scale_at(scale, i * step * unit);
        draw_across(sketch, layout, y, LINE_GRID);
        draw_value_label(sketch, layout, y, i * step);
    }
}

static void draw_axes(struct sketch *sketch, const struct layout *layout)
{
    if (layout->curves->y_log)
        draw_log_current(sketch, layout);
    else
        draw_linear(sketch, layout, &layout->current, layout->curves->y_scale, 5);
    if (layout->has_volts)
        draw_linear(sketch, layout, &layout->volts, 1, 3);
}

/* Over the curves, so that nothing covers them. */
static void draw_frame(struct sketch *sketch, const struct layout *layout)
{
    for (size_t i = 0; i < layout->panel_count; i++) {
        const struct panel *panel = &layout->panels[i];
        if (layout->has_volts)
            sketch_line(sketch, (struct point){panel->left, layout->current.to},
                        (struct point){panel->left, layout->current.from}, LINE_AXIS);
        struct point corner[3] = {
            {panel->left, layout->has_volts ? layout->volts.to : layout->current.to},
            {panel->left, layout->floor},
            {panel->right, layout->floor}};
        sketch_path(sketch, corner, 3, LINE_AXIS);
        if (panel->time.log)
            draw_log_time(sketch, layout, panel);
        else
            draw_linear_time(sketch, layout, panel);
    }
    sketch_text(sketch, (struct point){0, layout->current.to - 9}, layout->curves->y_unit,
                soft_small);
    if (layout->has_volts)
        sketch_text(sketch, (struct point){0, layout->volts.to - 9}, layout->curves->volts_word,
                    soft_small);
}

/* ---- limit */

/* The words above the line at the right edge, below it where that would leave the panel. */
static void draw_limit_in_panel(struct sketch *sketch, struct layout *layout, double y, double edge)
{
    const struct curves *curves = layout->curves;
    struct lettering word = {.text_class = TEXT_LIMIT, .anchor = ANCHOR_END, .small = true};
    const char *text = curves->limit_text ? arena_print(sketch->arena, "%s %s", curves->limit_word,
                                                        curves->limit_text)
                                          : curves->limit_word;
    layout->limit_baseline = y - 5 < layout->current.to + 6 ? y + 13 : y - 5;
    layout->limit_left = edge - lettering_width(text, word);
    sketch_text(sketch, (struct point){edge, layout->limit_baseline}, text, word);
}

static void draw_limit(struct sketch *sketch, struct layout *layout)
{
    const struct curves *curves = layout->curves;
    struct lettering word = {.text_class = TEXT_LIMIT};
    if (!(curves->limit > 0))
        return;
    double y = scale_at(&layout->current, curves->limit);
    double right = layout->panels[layout->panel_count - 1].right;
    if (layout->limit_shown)
        draw_across(sketch, layout, y, LINE_LIMIT);
    else
        sketch_arrow(sketch, (struct point){right - 3, y + 12}, (struct point){right - 3, y});
    if (layout->narrow) {
        draw_limit_in_panel(sketch, layout, y, layout->limit_shown ? right : right - 9);
        return;
    }
    /* Beside the line's end, lifted where the labels of the time axis are near. */
    double baseline = fmin(y - 1, layout->current.from - 9);
    sketch_text(sketch, (struct point){right + 6, baseline}, curves->limit_word, word);
    sketch_text(sketch, (struct point){right + 6, baseline + 13}, curves->limit_text, word);
}

/* ---- curves */

/* Where the step of a curve begins: halfway between its first reading and the one before. */
static double step_start(const struct curve_panel *panel, size_t curve)
{
    if (curve == 0 || panel->curves[curve].point_count == 0)
        return panel->x_log ? first_time(panel) : 0;
    const struct curve *before = &panel->curves[curve - 1];
    double first = panel->curves[curve].points[0].x_s;
    return before->point_count ? (first + before->points[before->point_count - 1].x_s) / 2 : first;
}

static double step_end(const struct curve_panel *panel, size_t curve)
{
    return curve + 1 < panel->curve_count ? step_start(panel, curve + 1) : panel->x_max_s;
}

static void draw_step(struct sketch *sketch, const struct layout *layout, const struct panel *panel,
                      size_t index)
{
    const struct curve *curve = &panel->data->curves[index];
    double from = scale_at(&panel->time, step_start(panel->data, index)),
           to = scale_at(&panel->time, step_end(panel->data, index));
    bool last = index + 1 == panel->data->curve_count;
    double room = (last ? panel->right : to) - from - 6;
    if (index > 0)
        sketch_line(sketch, (struct point){from, layout->current.to},
                    (struct point){from, layout->floor}, LINE_LEAD);
    if (curve->label && lettering_width(curve->label, soft_small) <= room)
        sketch_text(sketch, (struct point){from + 4, layout->current.to - 9}, curve->label,
                    soft_small);
    if (!layout->has_volts || !panel->data->step_volts)
        return;
    double volts = panel->data->step_volts[index], y = scale_at(&layout->volts, volts);
    sketch_line(sketch, (struct point){from, y}, (struct point){to, y}, LINE_CURVE);
    struct lettering lettering = {.small = layout->narrow};
    const char *number = scale_number(sketch->arena, round(volts * 10) / 10);
    const char *text = arena_print(sketch->arena, "%s\xc2\xa0V", number);
    if (lettering_width(text, lettering) > room)
        text = number;
    if (lettering_width(text, lettering) <= room + 2)
        sketch_text(sketch, (struct point){from + 3, y - 6}, text, lettering);
}

static struct point reading_at(const struct layout *layout, const struct panel *panel,
                               const struct curve_point *point)
{
    return (struct point){scale_at(&panel->time, point->x_s), scale_at(&layout->current, point->y)};
}

static void draw_join(struct sketch *sketch, const struct layout *layout, const struct panel *panel,
                      size_t index)
{
    const struct curve *curve = &panel->data->curves[index];
    struct point *points = arena_array(sketch->arena, curve->point_count + 1, sizeof *points);
    size_t count = 0;
    if (index > 0 && !curve->broken) {
        const struct curve *before = curve - 1;
        if (before->point_count)
            points[count++] = reading_at(layout, panel, &before->points[before->point_count - 1]);
    }
    for (size_t i = 0; i < curve->point_count; i++)
        points[count++] = reading_at(layout, panel, &curve->points[i]);
    sketch_path(sketch, points, count, LINE_TICK);
}

static void draw_fit(struct sketch *sketch, const struct layout *layout, const struct panel *panel,
                     const struct curve *curve)
{
    struct point *points = arena_array(sketch->arena, curve->fit_count, sizeof *points);
    for (size_t i = 0; i < curve->fit_count; i++) {
        double share = curve->fit_count > 1 ? (double)i / (double)(curve->fit_count - 1) : 0;
        double time_s = panel->time.log
                            ? curve->fit_from_s * pow(curve->fit_to_s / curve->fit_from_s, share)
                            : curve->fit_from_s + share * (curve->fit_to_s - curve->fit_from_s);
        points[i] = (struct point){scale_at(&panel->time, time_s),
                                   scale_at(&layout->current, curve->fit_y[i])};
    }
    sketch_path(sketch, points, curve->fit_count, LINE_CURVE);
}

static bool clear_of_limit(const struct layout *layout, double right, double baseline)
{
    double top = baseline - 9;
    bool words = layout->limit_baseline > 0 && right > layout->limit_left &&
                 fabs(layout->limit_baseline - baseline) < 11;
    double line = scale_at(&layout->current, layout->curves->limit);
    bool crossed = layout->limit_shown && line > top - 2 && line < baseline + 3;
    return !words && !crossed;
}

/* Below the reading or above it, further off where the limit is in the way. */
static double deciding_baseline(const struct layout *layout, struct point at, double right)
{
    const double offsets[] = {17, -9, 31, -23, 45, -37};
    double otherwise = at.y - 9;
    for (int i = 0; i < 6; i++) {
        double baseline = at.y + offsets[i];
        bool inside = baseline <= layout->current.from - 2 && baseline - 9 >= layout->current.to;
        if (inside && clear_of_limit(layout, right, baseline))
            return baseline;
    }
    return otherwise;
}

static void draw_readings(struct sketch *sketch, const struct layout *layout,
                          const struct panel *panel, const struct curve *curve)
{
    for (size_t i = 0; i < curve->point_count; i++) {
        const struct curve_point *point = &curve->points[i];
        struct point at = reading_at(layout, panel, point);
        if (point->bound)
            sketch_arrow(sketch, (struct point){at.x, at.y + 3}, (struct point){at.x, at.y + 11});
        sketch_circle(sketch, at, point->deciding ? 3.4 : 2.6,
                      point->deciding ? FILL_INK : FILL_PAPER);
        if (!point->deciding)
            continue;
        struct lettering value = {
            .text_class = TEXT_STRONG, .anchor = ANCHOR_MIDDLE, .small = layout->narrow};
        double half = lettering_width(layout->curves->deciding_text, value) / 2, x = at.x;
        x = fmax(fmin(x, panel->right - half), panel->left + half + 2);
        sketch_text(sketch, (struct point){x, deciding_baseline(layout, at, x + half)},
                    layout->curves->deciding_text, value);
    }
}

static void draw_panel(struct sketch *sketch, const struct layout *layout,
                       const struct panel *panel)
{
    for (size_t i = 0; i < panel->data->curve_count; i++)
        draw_step(sketch, layout, panel, i);
    for (size_t i = 0; i < panel->data->curve_count; i++) {
        const struct curve *curve = &panel->data->curves[i];
        if (curve->fit_count > 1)
            draw_fit(sketch, layout, panel, curve);
        else
            draw_join(sketch, layout, panel, i);
        draw_readings(sketch, layout, panel, curve);
    }
    if (!panel->data->title)
        return;
    /* A title wider than its panel reaches back over the gap rather than over the edge. */
    double width = lettering_width(panel->data->title, soft_small);
    double x = panel->left + 2 + width <= sketch->drawing.width ? panel->left + 2
                                                                : sketch->drawing.width - width;
    sketch_text(sketch, (struct point){x, layout->current.to - 9}, panel->data->title, soft_small);
}

/* ---- layout */

static double widest_value_label(const struct layout *layout, struct arena *arena)
{
    const struct scale *scale = &layout->current;
    double unit = layout->curves->y_scale;
    double width =
        fmax(lettering_width(scale_number(arena, scale->high / unit), soft),
             scale->low > 0 ? lettering_width(scale_number(arena, scale->low / unit), soft) : 0);
    if (!layout->curves->y_log)
        width = fmax(width,
                     lettering_width(scale_number(arena, scale_step(scale->high / unit, 5)), soft));
    return layout->has_volts
               ? fmax(width, lettering_width(scale_number(arena, layout->volts.high), soft))
               : width;
}

static void lay_out_panels(struct layout *layout, double width, struct arena *arena)
{
    const struct curves *curves = layout->curves;
    struct lettering limit = {.text_class = TEXT_LIMIT};
    double margin = 4;
    if (!layout->narrow && curves->limit > 0)
        margin = 10 + fmax(lettering_width(curves->limit_word, limit),
                           lettering_width(curves->limit_text, limit));
    double left = fmax(widest_value_label(layout, arena) + 9, layout->narrow ? 36 : 60);
    double right = width - margin, gap = layout->narrow ? 24 : 44;
    /* The test after the rest is short: a sixth of the width, but room for its labels. */
    double last = fmax((right - left) / 6, layout->narrow ? 78 : 96);
    for (size_t i = 0; i < layout->panel_count; i++) {
        struct panel *panel = &layout->panels[i];
        panel->data = &curves->panels[i];
        panel->left = i == 0 ? left : right - last;
        panel->right = i + 1 == layout->panel_count ? right : right - last - gap;
        panel->time = time_scale(panel->data, panel->left, panel->right);
    }
}

static void lay_out_volts(struct layout *layout)
{
    double high = 0;
    for (size_t i = 0; i < layout->panel_count; i++) {
        const struct curve_panel *panel = &layout->curves->panels[i];
        for (size_t j = 0; panel->step_volts && j < panel->curve_count; j++)
            high = fmax(high, panel->step_volts[j]);
    }
    layout->has_volts = high > 0;
    if (!layout->has_volts)
        return;
    double step = scale_step(high * 1.1, 3);
    layout->volts = (struct scale){.high = ceil(high * 1.1 / step) * step, .from = 246, .to = 188};
}

void drawing_curves(struct sketch *sketch, const struct curves *curves)
{
    struct layout layout = {.curves = curves,
                            .narrow = sketch->drawing.width < 500,
                            .panel_count = curves->panel_count};
    lay_out_volts(&layout);
    lay_out_current(&layout, 26, layout.has_volts ? 162 : 166);
    layout.floor = layout.has_volts ? layout.volts.from : layout.current.from;
    lay_out_panels(&layout, sketch->drawing.width, sketch->arena);
    sketch->drawing.height = layout.floor + 24;
    draw_axes(sketch, &layout);
    draw_limit(sketch, &layout);
    for (size_t i = 0; i < layout.panel_count; i++)
        draw_panel(sketch, &layout, &layout.panels[i]);
    draw_frame(sketch, &layout);
}
