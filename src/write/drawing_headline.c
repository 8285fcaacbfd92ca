/* The headline's rows: one stroke a part, kept ones first, so that a row reads as one length. */
#include "write/drawing_parts.h"

enum { STROKES_A_LINE = 22, STROKES_AT_MOST = 120 };

struct layout {
    bool narrow;
    double strokes_x, pitch;
    unsigned a_line; /* strokes */
    bool words_only;
};

static const struct lettering soft = {.text_class = TEXT_SOFT};

static unsigned strokes_of(const struct headline_kind *kind)
{
    unsigned sum = 0;
    for (int i = 0; i < STROKE_COUNT; i++)
        sum += kind->strokes[i];
    return sum;
}

static struct layout lay_out(const struct headline *headline, double width)
{
    struct layout layout = {.narrow = width < 400};
    struct lettering label = {.text_class = TEXT_SOFT, .small = layout.narrow}, ink = {0};
    double labels = 0, counts = 0;
    unsigned strokes = 0;
    for (size_t i = 0; i < headline->kind_count; i++) {
        labels = fmax(labels, lettering_width(headline->kinds[i].label, label));
        counts = fmax(counts, lettering_width(headline->kinds[i].count_text, ink));
        strokes += strokes_of(&headline->kinds[i]);
    }
    layout.pitch = layout.narrow ? 9.2 : 12.4;
    layout.strokes_x = fmin(fmax(labels + 10, layout.narrow ? 0 : 140), width / 2);
    double room = width - counts - 10 - layout.strokes_x;
    layout.a_line = (unsigned)fmin(fmax(floor(room / layout.pitch), 1), STROKES_A_LINE);
    layout.words_only = strokes > STROKES_AT_MOST;
    return layout;
}

/* Returns how many lines of strokes the kind took. */
static unsigned draw_strokes(struct sketch *sketch, const struct layout *layout,
                             const struct headline_kind *kind, double top)
{
    unsigned drawn = 0, total = strokes_of(kind);
    for (int stroke = 0; stroke < STROKE_COUNT; stroke++)
        for (unsigned i = 0; i < kind->strokes[stroke]; i++, drawn++) {
            unsigned line = drawn / layout->a_line, place = drawn % layout->a_line;
            struct point at = {layout->strokes_x + layout->pitch * place, top + 22 * line};
            sketch_stroke(sketch, (enum stroke)stroke, at);
        }
    unsigned lines = (total + layout->a_line - 1) / layout->a_line;
    for (unsigned line = 0; line < lines; line++) {
        unsigned here = line + 1 < lines ? layout->a_line : total - line * layout->a_line;
        double y = top + 22 * line + 16.8;
        sketch_line(
            sketch, (struct point){layout->strokes_x, y},
            (struct point){layout->strokes_x + layout->pitch * here - (layout->pitch - 5), y},
            LINE_LEAD);
    }
    return lines > 0 ? lines : 1;
}

struct drawing drawing_of_headline(const struct headline *headline, double width,
                                   struct arena *arena)
{
    struct sketch sketch = {.drawing = {.width = width}, .arena = arena};
    struct layout layout = lay_out(headline, width);
    double y = 4;
    for (size_t i = 0; i < headline->kind_count; i++) {
        const struct headline_kind *kind = &headline->kinds[i];
        struct lettering label = soft, count = {.anchor = ANCHOR_END};
        label.small = layout.narrow;
        sketch_text(&sketch, (struct point){0, y + 13},
                    lettering_fitted(arena, kind->label, label, layout.strokes_x - 6), label);
        sketch_text(&sketch, (struct point){width, y + 13}, kind->count_text, count);
        unsigned lines = layout.words_only ? 1 : draw_strokes(&sketch, &layout, kind, y);
        y += layout.words_only ? 20 : 22 * lines + 4;
    }
    sketch.drawing.height = y;
    return sketch.drawing;
}
