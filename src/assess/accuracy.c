#include "assess/accuracy.h"

#include "job/part.h"

#include <math.h>

/* Where it says nothing of the unit, its per cent counts for whatever it read. */
static bool is_stated(const struct instrument *instrument, enum unit unit)
{
    if (!instrument || !instrument->accuracy_set)
        return false;
    enum unit stated = instrument_unit(instrument);
    return stated == unit || stated == UNIT_NONE;
}

static double of_full_scale(const struct instrument *instrument, enum unit unit)
{
    const struct quantity *scale = &instrument->full_scale;
    return scale->set && scale->unit == unit ? instrument->full_scale_percent / 100 * scale->value
                                             : 0;
}

struct accuracy accuracy_of(const struct instrument *instrument, enum unit unit,
                            const struct policy *policy, double last_digit)
{
    if (is_stated(instrument, unit))
        return (struct accuracy){instrument->accuracy_percent / 100,
                                 instrument->accuracy_absolute + of_full_scale(instrument, unit)};
    return (struct accuracy){policy->default_accuracy, last_digit};
}

struct accuracy accuracy_in_job(const struct job *job, enum unit unit, const struct policy *policy,
                                double last_digit)
{
    for (size_t i = 0; i < job->instrument_count; i++) {
        const struct instrument *instrument = &job->instruments[i];
        if (instrument->accuracy_set && instrument_unit(instrument) == unit &&
            !instrument_reads_insulation(instrument))
            return accuracy_of(instrument, unit, policy, last_digit);
    }
    return accuracy_of(NULL, unit, policy, last_digit);
}

struct accuracy accuracy_of_insulation(const struct job *job, const struct policy *policy,
                                       double last_digit)
{
    for (size_t i = 0; i < job->instrument_count; i++)
        if (instrument_reads_insulation(&job->instruments[i]))
            return accuracy_of(&job->instruments[i], UNIT_RESISTANCE, policy, last_digit);
    return accuracy_of(NULL, UNIT_RESISTANCE, policy, last_digit);
}

double voltmeter_ohm(const struct job *job, const struct quantity *range)
{
    for (size_t i = 0; i < job->instrument_count; i++) {
        const struct instrument *instrument = &job->instruments[i];
        if (instrument->input.set)
            return instrument->input.value;
        if (instrument->sensitivity.set && range && range->set)
            return instrument->sensitivity.value * range->value;
    }
    return INFINITY;
}
