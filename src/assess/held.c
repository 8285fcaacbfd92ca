#include "assess/held.h"

#include "assess/accuracy.h"
#include "assess/reading.h"
#include "assess/uncertainty.h"
#include "assess/verdict.h"

#include <math.h>

struct held held_unknown(enum unit unit, enum reason why, const char *missing)
{
    return (struct held){.value = NAN,
                         .uncertainty = NAN,
                         .low = NAN,
                         .high = NAN,
                         .unit = unit,
                         .outcome = OUTCOME_NOT_JUDGED,
                         .why = why,
                         .missing = missing};
}

struct held held_recorded(double value, enum unit unit)
{
    struct held held = held_unknown(unit, WHY_NO_FIGURE, NULL);
    held.value = value;
    return held;
}

enum outcome held_worse(enum outcome a, enum outcome b)
{
    return verdict_worse(a, b);
}

void held_judge(struct held *held, const struct policy *policy, enum bound bound)
{
    held->outcome = OUTCOME_NOT_JUDGED;
    if (isnan(held->low) && isnan(held->high)) {
        held->why = WHY_NO_FIGURE;
        return;
    }
    struct verdict_case judged = {.value = held->value,
                                  .guard = policy->guard_band *
                                           (isnan(held->uncertainty) ? 0 : held->uncertainty),
                                  .bound = bound};
    bool low_is_near = isnan(held->high) ||
                       (!isnan(held->low) && held->value - held->low < held->high - held->value);
    judged.upper = !low_is_near;
    judged.limit = low_is_near ? held->low : held->high;
    held->outcome = verdict_of(&judged);
    /* between two limits less apart than the guard bands the other one may be the worse */
    if (!isnan(held->low) && !isnan(held->high)) {
        judged.upper = low_is_near;
        judged.limit = low_is_near ? held->high : held->low;
        held->outcome = verdict_worse(held->outcome, verdict_of(&judged));
    }
    held->why =
        held->outcome == OUTCOME_CONDITIONAL_PASS || held->outcome == OUTCOME_CONDITIONAL_FAIL
            ? WHY_WITHIN_UNCERTAINTY
        : held->outcome == OUTCOME_NOT_JUDGED ? (bound == BOUND_NONE ? WHY_MISSING_FACT : WHY_BOUND)
                                              : WHY_NONE;
}

double held_uncertainty(const struct job *job, const struct policy *policy,
                        const struct quantity *quantity)
{
    struct accuracy accuracy =
        accuracy_in_job(job, quantity->unit, policy, reading_last_digit(quantity));
    return 2 * uncertainty_of_accuracy(quantity->value, accuracy.share, accuracy.absolute);
}

double held_insulation_uncertainty(const struct job *job, const struct policy *policy,
                                   const struct quantity *insulation)
{
    struct accuracy accuracy = accuracy_of_insulation(job, policy, reading_last_digit(insulation));
    return 2 * uncertainty_of_accuracy(insulation->value, accuracy.share, accuracy.absolute);
}
