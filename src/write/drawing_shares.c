/* Shares with intervals: a point, a heavy line for the interval, a thin bracket for the unread. */
#include "write/drawing_parts.h"

enum { COUNT_COLUMNS = 3, AXIS_WORDS = 6 };

struct layout {
    const struct shares *shares;
    bool narrow;
    double row_height, top, bottom;
    double count_right[COUNT_COLUMNS];
    struct scale scale;
};

static const struct lettering soft_small = {.text_class = TEXT_SOFT, .small = true};

static double count_width(const struct shares *shares, int column)
{
    struct lettering soft = {.text_class = TEXT_SOFT};
    double width = lettering_width(shares->count_heads[column], soft_small);
    for (size_t i = 0; i < shares->row_count; i++)
        width = fmax(width, lettering_width(shares->rows[i].counts[column], soft));
    return width;
}

static double label_width(const struct shares *shares)
{
    double width = 0;
    for (size_t i = 0; i < shares->row_count; i++)
        width = fmax(width, lettering_width(shares->rows[i].label, (struct lettering){0}));
    return width;
}

static struct layout lay_out(const struct shares *shares, double width)
{
    struct layout layout = {.shares = shares, .narrow = width < 500, .top = 20};
    layout.row_height = layout.narrow ? 36 : 24;
    layout.bottom = layout.top + layout.row_height * (double)shares->row_count + 4;
    layout.scale = (struct scale){.high = 1, .from = 4, .to = width - 4};
    if (layout.narrow)
        return layout;
    double right = width - 2;
    for (int column = COUNT_COLUMNS - 1; column >= 0; column--) {
        layout.count_right[column] = right;
        double used = count_width(shares, column);
        right -= used > 0 ? used + 18 : 0;
    }
    layout.scale.from = fmin(fmax(label_width(shares) + 20, 140), 220);
    layout.scale.to = right - 10;
    return layout;
}

static void draw_axis(struct sketch *sketch, const struct layout *layout)
{
    for (int i = 0; i < AXIS_WORDS; i++) {
        double x = scale_at(&layout->scale, i / (AXIS_WORDS - 1.0));
        sketch_line(sketch, (struct point){x, layout->top}, (struct point){x, layout->bottom},
                    LINE_GRID);
        /* A phone has room for the ends and every second word. */
        if (layout->narrow && i % 2 == 1 && i != AXIS_WORDS - 1)
            continue;
        struct lettering lettering = soft_small;
        lettering.anchor = !layout->narrow       ? ANCHOR_MIDDLE
                           : i == 0              ? ANCHOR_START
                           : i == AXIS_WORDS - 1 ? ANCHOR_END
                                                 : ANCHOR_MIDDLE;
        sketch_text(sketch, (struct point){x, layout->top - 6}, layout->shares->axis_words[i],
                    lettering);
        sketch_text(sketch, (struct point){x, layout->bottom + 15}, layout->shares->axis_words[i],
                    lettering);
    }
}

static void draw_words(struct sketch *sketch, const struct layout *layout,
                       const struct share_row *row, double middle)
{
    struct lettering ink = {.text_class = layout->narrow ? TEXT_STRONG : TEXT_INK};
    if (!layout->narrow) {
        sketch_text(sketch, (struct point){0, middle + 4},
                    lettering_fitted(sketch->arena, row->label, ink, layout->scale.from - 12), ink);
        struct lettering soft = {.text_class = TEXT_SOFT, .anchor = ANCHOR_END};
        for (int column = 0; column < COUNT_COLUMNS; column++)
            sketch_text(sketch, (struct point){layout->count_right[column], middle + 4},
                        row->counts[column], soft);
        return;
    }
    ink.small = true;
    double counts_x = lettering_width(row->label, ink) + 8, y = middle - 15;
    sketch_text(sketch, (struct point){0, y}, row->label, ink);
    const char *counts = row->counts[0] ? row->counts[0] : "";
    if (row->counts[1] && row->counts[1][0])
        counts = arena_print(sketch->arena, "%s, %s", counts, row->counts[1]);
    sketch_text(
        sketch, (struct point){counts_x, y},
        lettering_fitted(sketch->arena, counts, soft_small, sketch->drawing.width - counts_x),
        soft_small);
}

static void draw_row(struct sketch *sketch, const struct layout *layout,
                     const struct share_row *row, double middle)
{
    draw_words(sketch, layout, row, middle);
    if (!isnan(row->bracket_low) && !isnan(row->bracket_high)) {
        double low = scale_at(&layout->scale, row->bracket_low),
               high = scale_at(&layout->scale, row->bracket_high), y = middle + 7;
        struct point bracket[4] = {{low, y - 3}, {low, y}, {high, y}, {high, y - 3}};
        sketch_path(sketch, bracket, 4, LINE_BRACKET);
    }
    if (isnan(row->low) || isnan(row->high))
        return; /* too few sets: the counts say it */
    sketch_line(sketch, (struct point){scale_at(&layout->scale, row->low), middle},
                (struct point){scale_at(&layout->scale, row->high), middle}, LINE_INTERVAL);
    sketch_circle(sketch, (struct point){scale_at(&layout->scale, row->share), middle}, 3.8,
                  FILL_INK);
}

void drawing_shares(struct sketch *sketch, const struct shares *shares)
{
    struct layout layout = lay_out(shares, sketch->drawing.width);
    sketch->drawing.height = layout.bottom + 22;
    draw_axis(sketch, &layout);
    if (!layout.narrow) {
        struct lettering head = {.text_class = TEXT_SOFT, .anchor = ANCHOR_END, .small = true};
        for (int column = 0; column < COUNT_COLUMNS; column++)
            sketch_text(sketch, (struct point){layout.count_right[column], layout.top - 6},
                        shares->count_heads[column], head);
    }
    for (size_t i = 0; i < shares->row_count; i++)
        draw_row(sketch, &layout, &shares->rows[i],
                 layout.top + layout.row_height * ((double)i + (layout.narrow ? 0.75 : 0.58)));
    sketch_line(sketch, (struct point){layout.scale.from, layout.bottom},
                (struct point){layout.scale.to, layout.bottom}, LINE_AXIS);
}
