#include "assess/winding.h"

#include "assess/held.h"

#include <math.h>

static const double copper_per_k = 0.00393, reference_c = 20;

double winding_at(double ohm_20, double temperature_c)
{
    return ohm_20 * (1 + copper_per_k * (temperature_c - reference_c));
}

static struct held judge_resistance(const struct job *job, const struct policy *policy,
                                    const struct winding *part, double expected_ohm)
{
    const struct marking *marked = &part->marked;
    if (!part->measured.set || !(expected_ohm > 0))
        return held_unknown(UNIT_PERCENT, WHY_MISSING_FACT,
                            part->measured.set ? "marked" : "measured");
    struct held held = {
        .value = 100 * (part->measured.value / expected_ohm - 1),
        .uncertainty = 100 / expected_ohm * held_uncertainty(job, policy, &part->measured),
        .low = marked->tolerance_set ? marked->tolerance_low_percent
                                     : -100 * policy->winding_tolerance,
        .high = marked->tolerance_set ? marked->tolerance_high_percent
                                      : 100 * policy->winding_tolerance,
        .unit = UNIT_PERCENT,
        .source = marked->tolerance_set ? SOURCE_MARKED_TOLERANCE : SOURCE_WINDING_TOLERANCE};
    held_judge(&held, policy, part->measured.bound);
    return held;
}

/* The figure for the mains side of a set stands for every winding: nothing else is published. */
static struct held judge_insulation(const struct job *job, const struct policy *policy,
                                    const struct winding *part)
{
    if (!part->insulation.set)
        return held_unknown(UNIT_RESISTANCE, WHY_MISSING_FACT, "insulation");
    enum safety_kind kind = job->set.supply == SUPPLY_LIVE_CHASSIS ? SAFETY_INSULATION_DOUBLE
                                                                   : SAFETY_INSULATION_EARTHED;
    struct held held = {.value = part->insulation.value,
                        .uncertainty = held_insulation_uncertainty(job, policy, &part->insulation),
                        .low = safety_figure(kind)->limit,
                        .high = NAN,
                        .unit = UNIT_RESISTANCE,
                        .source = SOURCE_INSULATION};
    held_judge(&held, policy, part->insulation.bound);
    return held;
}

struct winding_findings winding_assess(const struct job *job, const struct policy *policy,
                                       double bench_c, size_t index)
{
    const struct winding *part = &job->windings[index];
    struct winding_findings found = {.temperature_c = quantity_or(&part->temperature, bench_c),
                                     .expected_ohm = NAN};
    if (part->marked.value.set)
        found.expected_ohm = winding_at(part->marked.value.value, found.temperature_c);
    found.resistance = judge_resistance(job, policy, part, found.expected_ohm);
    found.insulation = judge_insulation(job, policy, part);
    return found;
}
