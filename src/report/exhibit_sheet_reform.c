/* The bench sheet's plan for reforming an electrolytic, and for bleeding it afterwards. */
#include "report/composition.h"

/* A step has done its work when the part shows 0.95 of the volts set. */
#define STEP_REACHED 0.95

/* The assessment's plan in figures that can be set and bought. */
bool reform_planned(const struct composition *composition, size_t index, struct reform_plan *plan)
{
    const struct reform_plan *const *plans = composition->findings->bench.plans;
    const struct reform_plan *made = plans ? plans[index] : NULL;
    if (!made)
        return false;
    *plan = *made;
    plan->limiter_ohm = round_figures(made->limiter_ohm, 2, true);
    for (size_t i = 0; i < REFORM_STEPS; i++)
        plan->step_v[i] = round_figures(made->step_v[i], 3, false);
    return true;
}

/* ---- steps */

enum { REFORM_BLANKS = 8 };

static const struct column_plan step_plan[] = {
    {"step", NULL, NULL, COLUMN_TEXT, 12, 1},   {"set", "V", NULL, COLUMN_NUMBER, 8, 1},
    {"until", "V", NULL, COLUMN_NUMBER, 8, 1},  {"at_once", "µA", NULL, COLUMN_BLANK, 9, 1},
    {"min_1", "µA", NULL, COLUMN_BLANK, 9, 1},  {"min_2", "µA", NULL, COLUMN_BLANK, 9, 1},
    {"min_5", "µA", NULL, COLUMN_BLANK, 9, 1},  {"min_10", "µA", NULL, COLUMN_BLANK, 9, 1},
    {"min_30", "µA", NULL, COLUMN_BLANK, 9, 1}, {"last", "time", NULL, COLUMN_BLANK, 9, 1},
    {NULL, "µA", NULL, COLUMN_BLANK, 9, 1},
};
_Static_assert(sizeof step_plan / sizeof *step_plan == 3 + REFORM_BLANKS, "eight blanks a step");

/* Without a limit at the end volts the sheet's own figures stand. */
static const char *reform_remark(const struct composition *composition,
                                 const struct capacitor_findings *part,
                                 const struct reform_plan *plan)
{
    bool known = isfinite(plan->limit_a);
    return phrase(
        &composition->say, "sheet.reform_remark", "limit",
        text_micro(composition->arena, known ? plan->limit_a : part->sheet_limit_a, 2), "volts",
        text_unit(composition, known ? plan->end_v : part->sheet_voltage_v, UNIT_VOLTAGE, 3),
        "series",
        text_unit(composition, known ? plan->deciding_ohm : part->sheet_series_max_ohm,
                  UNIT_RESISTANCE, 2),
        NULL);
}

void exhibit_sheet_reform(struct composition *composition, size_t index)
{
    struct reform_plan plan;
    if (index >= composition->findings->capacitor_count ||
        !reform_planned(composition, index, &plan))
        return;
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    struct table_builder builder =
        table_begin(composition, arena_print(composition->arena, "sheet-reform-%zu", index + 1),
                    step_plan, sizeof step_plan / sizeof *step_plan);
    builder.table->write_in = true;
    for (size_t i = 0; i < REFORM_STEPS; i++) {
        struct cell *cells = table_row(&builder);
        cells[0].text = arena_print(composition->arena, "%zu", i + 1);
        cells[1].figures = figures_plain(composition, plan.step_v[i], 1, 0);
        cells[2].figures = figures_plain(composition, STEP_REACHED * plan.step_v[i], 1, 0);
    }
    struct cell *rest = table_row(&builder);
    rest[0].text = phrase(&composition->say, "sheet.after_rest", NULL);
    rest[1].figures = figures_plain(composition, plan.end_v, 1, 0);
    builder.table->remark = reform_remark(composition, part, &plan);
    table_place(&builder, NUMBERED_SHEET,
                phrase(&composition->say, "caption.sheet_reform", "ref", part->part->ref, NULL));
}

/* ---- bleeding */

void exhibit_sheet_bleed(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan columns[] = {
        {"part", NULL, NULL, COLUMN_REF, 14, 1},
        {"volts", "V", NULL, COLUMN_NUMBER, 12, 1},
        {"energy", "J", NULL, COLUMN_NUMBER, 12, 1},
        {"through", NULL, NULL, COLUMN_TEXT, 22, 1},
        {"time_to_10", "s", NULL, COLUMN_NUMBER, 16, 1},
        {"volts_shown", NULL, NULL, COLUMN_BLANK, 24, 1},
    };
    struct table_builder builder =
        table_begin(composition, "sheet-bleed", columns, sizeof columns / sizeof *columns);
    builder.table->write_in = true;
    for (size_t i = 0; i < composition->findings->capacitor_count; i++) {
        struct reform_plan plan;
        if (!reform_planned(composition, i, &plan) || !isfinite(plan.energy_j))
            continue;
        struct cell *cells = table_row(&builder);
        cells[0].text = composition->findings->capacitors[i].part->ref;
        cells[1].figures = figures_plain(composition, plan.end_v, 1, 0);
        cells[2].figures = figures_plain(composition, plan.energy_j, 1, 1);
        cells[3].text = arena_print(composition->arena, "%s %s",
                                    text_unit(composition, plan.bleed_ohm, UNIT_RESISTANCE, 2),
                                    text_unit(composition, plan.bleed_w, UNIT_POWER, 2));
        cells[4].figures = figures_plain(composition, plan.bleed_s, 1, 1);
    }
    table_place(&builder, NUMBERED_SHEET, phrase(&composition->say, "caption.sheet_bleed", NULL));
}
