#include "assess/resistor.h"

#include "assess/held.h"

#include <math.h>
#include <string.h>

static struct held unknown_tolerance(const struct resistor *part)
{
    return held_unknown(UNIT_PERCENT, WHY_MISSING_FACT,
                        part->marked.value.set ? "measured" : "marked");
}

static struct held judge_tolerance(const struct assessment *assessment, const struct resistor *part)
{
    const struct marking *marked = &part->marked;
    if (!part->measured.set || !marked->value.set || !(marked->value.value > 0))
        return unknown_tolerance(part);
    struct held held = {
        .value = 100 * (part->measured.value / marked->value.value - 1),
        .uncertainty = 100 / marked->value.value *
                       held_uncertainty(assessment->job, assessment->policy, &part->measured),
        .low = marked->tolerance_set ? marked->tolerance_low_percent : -RESISTOR_TOLERANCE_PERCENT,
        .high = marked->tolerance_set ? marked->tolerance_high_percent : RESISTOR_TOLERANCE_PERCENT,
        .unit = UNIT_PERCENT,
        .source = marked->tolerance_set ? SOURCE_MARKED_TOLERANCE : SOURCE_RESISTOR_TOLERANCE};
    held_judge(&held, assessment->policy, part->measured.bound);
    return held;
}

static struct held judge_watts(const struct assessment *assessment, const struct resistor *part)
{
    double ohm = quantity_or(&part->measured, quantity_or(&part->marked.value, NAN));
    if (!part->volts.set || !(ohm > 0) || part->measured.bound != BOUND_NONE)
        return held_unknown(UNIT_POWER, WHY_MISSING_FACT, part->volts.set ? "marked" : "volts");
    double u_v = held_uncertainty(assessment->job, assessment->policy, &part->volts);
    double volts = fabs(part->volts.value);
    struct held held = {.value = volts * volts / ohm,
                        .uncertainty = 2 * volts * u_v / ohm,
                        .low = NAN,
                        .high = quantity_or(&part->marked.rated, NAN),
                        .unit = UNIT_POWER,
                        .source = SOURCE_MARKED_RATING};
    held_judge(&held, assessment->policy, BOUND_NONE);
    return held;
}

/* ---- in its stage */

/* Put it into every place of the stage where it stands; false: nowhere. */
static bool put(const struct stage_model *model, int resistor, double ohm,
                struct stage_circuit *circuit)
{
    const struct stage *stage = model->stage;
    const struct {
        const struct resistance *resistance;
        double *member;
    } places[] = {{&stage->anode, &circuit->anode_ohm},
                  {&stage->screen, &circuit->screen_ohm},
                  {&stage->cathode, &circuit->cathode_ohm},
                  {&stage->bias_resistance, &circuit->bias_ohm},
                  {&stage->grid_leak, &circuit->grid_leak_ohm}};
    bool found = false;
    for (size_t i = 0; i < sizeof places / sizeof *places; i++)
        if (places[i].resistance->set && places[i].resistance->resistor == resistor) {
            *places[i].member = ohm;
            found = true;
        }
    return found;
}

/* Of the stages in which it stands the one that it moves most. */
static void find_effect(const struct assessment *assessment, size_t index,
                        struct resistor_findings *found)
{
    const struct resistor *part = &assessment->job->resistors[index];
    const struct stage_set *set = &assessment->stages;
    if (!part->measured.set || part->measured.bound != BOUND_NONE)
        return;
    for (size_t i = 0; i < set->group_count; i++) {
        const struct stage_group *group = &set->groups[i];
        struct stage_circuit circuits[STAGE_GROUP_MAX];
        struct stage_solution solutions[STAGE_GROUP_MAX];
        bool any = false;
        memcpy(circuits, group->circuits[PHASE_DESIGNED], group->count * sizeof *circuits);
        for (size_t k = 0; k < group->count; k++)
            any = put(&set->models[group->members[k]], (int)index, part->measured.value,
                      &circuits[k]) ||
                  any;
        if (!any || stages_solve(circuits, group->count, solutions) == SOLVE_IMPOSSIBLE)
            continue;
        for (size_t k = 0; k < group->count; k++) {
            double designed_a = group->bare[PHASE_DESIGNED][k].cathode_a;
            double percent = 100 * (solutions[k].cathode_a / designed_a - 1);
            if (!(designed_a > 0) || (fabs(percent) <= fabs(found->effect_percent) && found->stage))
                continue;
            found->stage = set->models[group->members[k]].stage->name;
            found->effect_percent = percent;
        }
    }
}

struct resistor_findings resistor_assess(const struct assessment *assessment, size_t index)
{
    const struct resistor *part = &assessment->job->resistors[index];
    struct resistor_findings found = {.tolerance = judge_tolerance(assessment, part),
                                      .series =
                                          part->marked.value.set && part->marked.value.value > 0
                                              ? e_series_of(part->marked.value.value)
                                              : E_SERIES_COUNT,
                                      .dissipation = judge_watts(assessment, part),
                                      .effect_percent = NAN};
    find_effect(assessment, index, &found);
    bool outside = found.tolerance.outcome == OUTCOME_FAIL ||
                   found.tolerance.outcome == OUTCOME_CONDITIONAL_FAIL;
    found.harmless = outside && found.stage &&
                     fabs(found.effect_percent) <= 100 * assessment->policy->cathode_current_rise;
    return found;
}
