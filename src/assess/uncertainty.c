#include "assess/uncertainty.h"

#include <assert.h>
#include <math.h>
#include <stdbool.h>

/* Halves of a step that differ by more than this factor show a kink. */
static const double kink_factor = 2;

/* What the input's uncertainty adds to the result, from the change to either side; NaN: neither
   side has a value. */
static double contribution(double below, double middle, double above)
{
    double rise = above - middle, run_up = middle - below;
    if (!isfinite(rise) || !isfinite(run_up))
        return isfinite(rise) ? rise : isfinite(run_up) ? run_up : NAN;
    double larger = fabs(rise) >= fabs(run_up) ? rise : run_up;
    double smaller = larger == rise ? run_up : rise;
    bool kink = larger * smaller <= 0 || fabs(larger) > kink_factor * fabs(smaller);
    return kink ? larger : 0.5 * (rise + run_up);
}

static double combined_variance(const struct uncertainty_budget *budget,
                                const double *contributions)
{
    double variance = 0;
    for (size_t i = 0; i < budget->input_count; i++)
        variance += contributions[i] * contributions[i];
    for (size_t i = 0; i < budget->correlation_count; i++) {
        const struct correlation *pair = &budget->correlations[i];
        assert(pair->first < budget->input_count && pair->second < budget->input_count &&
               pair->first != pair->second);
        variance +=
            2 * pair->coefficient * contributions[pair->first] * contributions[pair->second];
    }
    return variance;
}

/* Welch-Satterthwaite, JCGM 100:2008, G.2b. */
static double effective_freedom(const struct uncertainty_budget *budget,
                                const double *contributions, double standard)
{
    double sum = 0;
    for (size_t i = 0; i < budget->input_count; i++) {
        double freedom = budget->inputs[i].freedom;
        if (freedom > 0 && isfinite(freedom))
            sum += pow(contributions[i], 4) / freedom;
    }
    return sum > 0 ? pow(standard, 4) / sum : INFINITY;
}

enum uncertainty_status uncertainty_propagate(uncertainty_function function, const void *context,
                                              const struct uncertainty_budget *budget,
                                              struct uncertainty_result *result)
{
    size_t count = budget->input_count;
    assert(count >= 1 && count <= UNCERTAINTY_INPUTS_MAX);
    double inputs[UNCERTAINTY_INPUTS_MAX];
    struct uncertainty_result found = {0};
    for (size_t i = 0; i < count; i++)
        inputs[i] = budget->inputs[i].value;
    found.value = function(inputs, context);
    if (!isfinite(found.value))
        return UNCERTAINTY_UNDEFINED;
    double squares = 0;
    for (size_t i = 0; i < count; i++) {
        double step = budget->inputs[i].standard;
        if (step == 0)
            continue;
        inputs[i] = budget->inputs[i].value + step;
        double above = function(inputs, context);
        inputs[i] = budget->inputs[i].value - step;
        double below = function(inputs, context);
        inputs[i] = budget->inputs[i].value;
        found.contributions[i] = contribution(below, found.value, above);
        if (isnan(found.contributions[i]))
            return UNCERTAINTY_UNDEFINED;
        squares += found.contributions[i] * found.contributions[i];
    }
    double variance = combined_variance(budget, found.contributions);
    /* Full correlation may cancel everything; what rounding leaves of that is not a mistake. */
    if (!(variance >= -1e-9 * squares))
        return UNCERTAINTY_INCONSISTENT;
    found.standard = sqrt(fmax(variance, 0));
    found.expanded = 2 * found.standard;
    found.freedom = effective_freedom(budget, found.contributions, found.standard);
    *result = found;
    return UNCERTAINTY_OK;
}

double uncertainty_of_accuracy(double reading, double accuracy_share, double accuracy_absolute)
{
    return (accuracy_share * fabs(reading) + accuracy_absolute) / sqrt(3);
}

double uncertainty_of_resolution(double resolution)
{
    return resolution / sqrt(12);
}
