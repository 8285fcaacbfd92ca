#include "assess/accuracy.h"

static bool is_stated(const struct instrument *instrument, enum unit unit)
{
    return instrument && instrument->accuracy_set && instrument->accuracy_unit == unit;
}

struct accuracy accuracy_of(const struct instrument *instrument, enum unit unit,
                            const struct policy *policy, double last_digit)
{
    if (is_stated(instrument, unit))
        return (struct accuracy){instrument->accuracy_percent / 100, instrument->accuracy_absolute};
    return (struct accuracy){policy->default_accuracy, last_digit};
}

struct accuracy accuracy_in_job(const struct job *job, enum unit unit, const struct policy *policy,
                                double last_digit)
{
    for (size_t i = 0; i < job->instrument_count; i++)
        if (is_stated(&job->instruments[i], unit))
            return accuracy_of(&job->instruments[i], unit, policy, last_digit);
    return accuracy_of(NULL, unit, policy, last_digit);
}
