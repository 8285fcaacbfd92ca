#include "assess/safety.h"

#include "assess/held.h"
#include "assess/mains.h"

#include <math.h>

static struct held hold(const struct job *job, const struct policy *policy,
                        const struct safety_figure *figure, const struct quantity *value)
{
    bool insulation = isfinite(figure->test_v);
    struct held held = {.value = value->value,
                        .uncertainty = insulation ? held_insulation_uncertainty(job, policy, value)
                                                  : held_uncertainty(job, policy, value),
                        .low = figure->upper ? (double)NAN : figure->limit,
                        .high = figure->upper ? figure->limit : (double)NAN,
                        .unit = value->unit,
                        .source = figure->source};
    held_judge(&held, policy, value->bound);
    return held;
}

/* A residual voltage read earlier than the figure's time may pass, never fail; read later it proves
   nothing. Insulation at less than the figure's volts proves nothing either. */
static const char *wrong_conditions(const struct safety_figure *figure,
                                    const struct safety_row *row, enum outcome outcome)
{
    if (isfinite(figure->after_s) && row->time.set) {
        if (row->time.value > figure->after_s)
            return "time";
        if (row->time.value < figure->after_s && outcome != OUTCOME_PASS)
            return "time";
    }
    if (isfinite(figure->test_v) && row->at_volts.set && row->at_volts.value < figure->test_v)
        return "volts";
    return NULL;
}

static struct held judge(const struct job *job, const struct policy *policy,
                         const struct safety_row *row, const struct safety_figure *figure,
                         const struct quantity *value)
{
    if (!value->set)
        return held_unknown(figure->unit, WHY_NO_READING, NULL);
    if (isnan(figure->limit))
        return held_recorded(value->value, value->unit);
    if (value->unit != figure->unit)
        return held_unknown(value->unit, WHY_MISSING_FACT, unit_name(figure->unit));
    struct held held = hold(job, policy, figure, value);
    const char *missing = wrong_conditions(figure, row, held.outcome);
    if (missing) {
        held.outcome = OUTCOME_NOT_JUDGED;
        held.why = WHY_MISSING_FACT;
        held.missing = missing;
    }
    return held;
}

struct safety_findings safety_assess(const struct job *job, const struct policy *policy,
                                     const struct safety_row *row)
{
    bool double_insulated = job->set.supply == SUPPLY_LIVE_CHASSIS;
    struct safety_findings found = {.kind = safety_kind_named(row->name, double_insulated),
                                    .predicted_a = NAN};
    if (found.kind == SAFETY_KIND_COUNT) {
        found.value = row->value.set ? held_recorded(row->value.value, row->value.unit)
                                     : held_unknown(UNIT_NONE, WHY_NO_FIGURE, NULL);
        found.second = held_unknown(UNIT_NONE, WHY_NO_READING, NULL);
        return found;
    }
    const struct safety_figure *figure = safety_figure(found.kind);
    found.value = judge(job, policy, row, figure, &row->value);
    found.second = judge(job, policy, row, figure, &row->second);
    double isolators_f = mains_isolators(job, true);
    if (found.kind == SAFETY_TOUCH_CURRENT && job->set.mains.set && isolators_f > 0)
        found.predicted_a = mains_touch_current(policy->mains_rise * job->set.mains.value,
                                                mains_frequency(job), isolators_f, 0);
    return found;
}
