/* What moved since the last visit, for parts with the same ref. */
#include "report/composition.h"

/* "+12 %", or "× 3.4" where a factor says it better. */
static const char *moved_text(const struct composition *composition, double then, double now)
{
    if (isnan(then) || isnan(now) || then <= 0)
        return NULL;
    double ratio = now / then;
    if (ratio >= 2 || ratio <= 0.5)
        return arena_print(composition->arena, "× %s",
                           quantity_text(composition->arena, ratio, UNIT_NONE, 2));
    double percent = 100 * (ratio - 1);
    return text_signed(composition->arena, fabs(percent) < 0.5 ? 0 : percent, UNIT_PERCENT,
                       fabs(percent) < 10 ? 1 : 2);
}

static struct figures visit_figures(const struct composition *composition, double current_a,
                                    enum bound bound)
{
    struct figures figures = figures_micro(composition, current_a, 2);
    if (figures.whole && bound != BOUND_NONE)
        figures.bound = bound == BOUND_UNDER ? "<" : ">";
    return figures;
}

static void fill_leakage(const struct composition *composition, const struct visit_change *change,
                         struct cell *cells)
{
    bool bound = change->then_bound != BOUND_NONE || change->now_bound != BOUND_NONE;
    if (isnan(change->then_a))
        return;
    cells[1].figures = figures_unit(composition, change->test_v, UNIT_VOLTAGE, 3);
    cells[2].figures = visit_figures(composition, change->then_a, change->then_bound);
    cells[3].figures = visit_figures(composition, change->now_a, change->now_bound);
    if (!bound)
        cells[4].text = moved_text(composition, change->then_a, change->now_a);
}

static void fill_value(const struct composition *composition, const struct visit_change *change,
                       struct cell *cells)
{
    enum unit unit = change->kind == VISIT_CAPACITOR ? UNIT_CAPACITANCE : UNIT_RESISTANCE;
    if (isnan(change->then_value))
        return;
    cells[5].figures = figures_unit(composition, change->then_value, unit, 3);
    cells[6].figures = figures_unit(composition, change->now_value, unit, 3);
    cells[7].text = moved_text(composition, change->then_value, change->now_value);
}

void exhibit_visits(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 8, 1},
        {"tested_at", NULL, "tested_at", COLUMN_NUMBER, 11, 2},
        {"leakage_then", "µA", "then", COLUMN_NUMBER, 13, 1},
        {"leakage_now", "µA", "now", COLUMN_NUMBER, 13, 1},
        {"moved", NULL, "moved", COLUMN_TEXT, 13, 1},
        {"value_then", NULL, "value_then", COLUMN_NUMBER, 15, 2},
        {"value_now", NULL, "value_now", COLUMN_NUMBER, 15, 2},
        {"moved", NULL, "moved", COLUMN_TEXT, 12, 2},
    };
    const struct visit_changes *since = composition->findings->since;
    struct table_builder builder =
        table_begin(composition, "visits", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; since && i < since->count; i++) {
        const struct visit_change *change = &since->items[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = change->ref;
        fill_leakage(composition, change, cells);
        fill_value(composition, change, cells);
        if (change->done_then != DONE_OPEN)
            table_note(
                &builder, &cells[0],
                change->done_then == DONE_KEPT
                    ? NULL
                    : phrase(&composition->say, "visits.done_then", "done",
                             phrase_in(&composition->say, "done", action_text(change->done_then)),
                             NULL));
    }
    table_drop_empty(&builder);
    if (!since)
        return;
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.visits", "then_bench",
                       text_set(composition->arena, since->then_c, UNIT_TEMPERATURE, 3),
                       "now_bench", text_set(composition->arena, since->now_c, UNIT_TEMPERATURE, 3),
                       NULL));
}
