/* The bench sheet's plan for reforming an electrolytic, and for bleeding it afterwards. */
#include "report/composition.h"

#include "assess/heat.h"

/* Which parts: below 100 V reforming is a matter of minutes on the tester itself. */
#define REFORM_LEAST_V 100.0
#define BLEED_OHM      10e3
#define BLEED_TO_V     10.0
/* A step has done its work when the part shows 0.95 of the volts set. */
#define STEP_REACHED 0.95

static const double step_shares[REFORM_STEPS] = {0.10, 0.35, 0.60, 0.85, 1.00};

/* The next rating that the trade sells. */
static double power_rating(double watts)
{
    static const double ratings[] = {0.25, 0.5, 1, 2, 3, 4, 5, 7, 10, 15, 20, 25, 50, 100};
    for (size_t i = 0; i < sizeof ratings / sizeof *ratings; i++)
        if (ratings[i] >= watts)
            return ratings[i];
    return round_figures(watts, 2, true);
}

static bool wants_reforming(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    enum action done = capacitor_done(composition, index);
    if (part->part->type != DIELECTRIC_ELECTROLYTIC || !part->part->marked.rated.set ||
        part->part->marked.rated.value < REFORM_LEAST_V)
        return false;
    if (done != DONE_OPEN && done != DONE_REFORMED)
        return false;
    return part->advice == ADVICE_REFORM || part->deciding < 0 || done == DONE_REFORMED;
}

static double power_ceiling(const struct composition *composition, const struct capacitor *part)
{
    const struct policy *policy = &composition->shop->policy;
    return part->can == NOT_LISTED ? heat_limit(composition->job, part, policy)
                                   : policy->reform_power_w;
}

/* Marked capacitance may hold +100 % in an old electrolytic. */
static double bleed_farad(const struct capacitor *part)
{
    return part->measured.value.set ? part->measured.value.value
           : part->marked.value.set ? 2 * part->marked.value.value
                                    : NAN;
}

bool reform_planned(const struct composition *composition, size_t index, struct reform_plan *plan)
{
    if (!wants_reforming(composition, index))
        return false;
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    double marked_v = part->part->marked.rated.value;
    double end_v = isfinite(part->service_v) ? fmin(marked_v, 1.1 * part->service_v) : marked_v;
    double ceiling_a = composition->shop->policy.reform_current_a;
    double ceiling_w = power_ceiling(composition, part->part);
    if (!(end_v > 0) || !(ceiling_a > 0) || !(ceiling_w > 0))
        return false;
    double limiter = fmax(end_v / ceiling_a, end_v * end_v / (4 * ceiling_w));
    double farad = bleed_farad(part->part);
    plan->end_v = end_v;
    plan->limiter_ohm = round_figures(limiter, 2, true);
    plan->limiter_w = power_rating(2 * end_v * end_v / plan->limiter_ohm);
    for (size_t i = 0; i < REFORM_STEPS; i++)
        plan->step_v[i] = round_figures(step_shares[i] * end_v, 3, false);
    plan->bleed_ohm = BLEED_OHM;
    plan->bleed_w = power_rating(2 * end_v * end_v / BLEED_OHM);
    plan->bleed_s = end_v > BLEED_TO_V ? BLEED_OHM * farad * log(end_v / BLEED_TO_V) : 0;
    plan->energy_j = farad * end_v * end_v / 2;
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

/* The sheet's limit brought to the volts that the deciding test is made at. Between service and
   test volts leakage is taken in proportion (at or above service volts); below them the sheet's own
   figures stand. */
static const char *reform_remark(const struct composition *composition,
                                 struct capacitor_findings part, const struct reform_plan *plan)
{
    if (part.sheet_voltage_v >= part.service_v && plan->end_v >= part.service_v) {
        part.sheet_limit_a *= plan->end_v / part.sheet_voltage_v;
        part.sheet_voltage_v = plan->end_v;
    }
    return phrase(&composition->say, "sheet.reform_remark", "limit",
                  text_micro(composition->arena, part.sheet_limit_a, 2), "volts",
                  text_unit(composition, part.sheet_voltage_v, UNIT_VOLTAGE, 3), "series",
                  text_unit(composition, part.sheet_series_max_ohm, UNIT_RESISTANCE, 2), NULL);
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
    builder.table->remark = reform_remark(composition, *part, &plan);
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
