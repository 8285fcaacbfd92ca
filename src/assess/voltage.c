#include "assess/voltage.h"

#include <math.h>

/* What rises faster than in proportion is allowed for when scaling up by at most 1/0.95. */
static const double allowance_exponent = 2, allowance_electrolytic = 5;
static const double exponent_span = 1.5;

struct scaled_current voltage_scale(double part_v, double service_v, double exponent,
                                    bool electrolytic)
{
    double x = service_v / part_v;
    double b = isnan(exponent) ? 1 : exponent;
    bool lower_bound = x > 1 / VOLTAGE_SHARE_AT;
    double by = x <= 1         ? fmin(b, 1)
                : lower_bound  ? 1
                : electrolytic ? allowance_electrolytic
                               : allowance_exponent;
    return (struct scaled_current){by == 1 ? x : pow(x, by), by, lower_bound};
}

double voltage_factor_near(double part_v, double service_v, double exponent, bool electrolytic,
                           bool lower_bound)
{
    struct scaled_current scaled = voltage_scale(part_v, service_v, exponent, electrolytic);
    if (scaled.lower_bound == lower_bound)
        return scaled.factor;
    double x = service_v / part_v;
    return lower_bound ? x : pow(x, electrolytic ? allowance_electrolytic : allowance_exponent);
}

double voltage_limit_at(double limit_a, double part_v, double service_v, double exponent,
                        bool electrolytic)
{
    return limit_a / voltage_scale(part_v, service_v, exponent, electrolytic).factor;
}

bool voltage_exponent(const double part_v[2], const double current_a[2], const double relative[2],
                      double *b, double *u_b)
{
    if (part_v[0] <= 0 || part_v[1] / part_v[0] < exponent_span || current_a[0] <= 0 ||
        current_a[1] <= 0)
        return false;
    double span = log(part_v[1] / part_v[0]);
    *b = log(current_a[1] / current_a[0]) / span;
    *u_b = sqrt(relative[0] * relative[0] + relative[1] * relative[1]) / span;
    return true;
}
