#include "assess/reforming.h"

#include "assess/heat.h"
#include "assess/voltage.h"

#include <math.h>

/* Below 100 V reforming is a matter of minutes on the tester itself. */
static const double least_v = 100;
/* End of reforming above the service volts, so that service is within what was formed. */
static const double over_service = 1.1;
/* A step has done its work when the part shows this share of the volts set. */
static const double reached_share = 0.95;
/* EIA-815 (1999): 12 to 48 h. */
static const double rest_s = 12 * 3600.0;
static const double bleed_ohm = 10e3, bleed_to_v = 10;
/* An old electrolytic may hold twice its marking (+100 %). */
static const double most_capacitance = 2;
static const double step_shares[REFORM_STEPS] = {0.10, 0.35, 0.60, 0.85, 1.00};

/* The next rating that the trade sells. */
static double power_rating(double watts)
{
    static const double ratings[] = {0.25, 0.5, 1, 2, 3, 4, 5, 7, 10, 15, 20, 25, 50, 100};
    for (size_t i = 0; i < sizeof ratings / sizeof *ratings; i++)
        if (ratings[i] >= watts)
            return ratings[i];
    return ceil(watts);
}

bool reforming_wanted(const struct reforming_case *given, enum action done)
{
    const struct capacitor_findings *part = given->part;
    if (part->part->type != DIELECTRIC_ELECTROLYTIC || !part->part->marked.rated.set ||
        part->part->marked.rated.value < least_v)
        return false;
    if (done != DONE_OPEN && done != DONE_REFORMED)
        return false;
    return part->advice == ADVICE_REFORM || part->deciding < 0 || done == DONE_REFORMED;
}

/* W that the part may turn into heat: of a can the policy's figure, which is for the whole. */
static double ceiling_w(const struct reforming_case *given)
{
    const struct capacitor *part = given->part->part;
    return part->can == NOT_LISTED ? heat_limit(given->job, part, given->policy)
                                   : given->policy->reform_power_w;
}

double reforming_bleed_time(double ohm, double capacitance_f, double from_v, double to_v)
{
    return from_v > to_v ? ohm * capacitance_f * log(from_v / to_v) : 0;
}

/* The limit on the bench at other volts than service; NaN: none. */
static double limit_at(const struct capacitor_findings *part, double part_v)
{
    if (!(part->bench_limit_a > 0) || !(part->service_v > 0) || !(part_v > 0))
        return NAN;
    return voltage_limit_at(part->bench_limit_a, part_v, part->service_v, part->exponent, true);
}

bool reforming_plan(const struct reforming_case *given, struct reform_plan *plan)
{
    const struct capacitor_findings *part = given->part;
    const struct capacitor *capacitor = part->part;
    if (!capacitor->marked.rated.set)
        return false;
    double marked_v = capacitor->marked.rated.value;
    double end_v = part->service_v > 0 ? fmin(marked_v, over_service * part->service_v) : marked_v;
    double current_a = given->policy->reform_current_a, watts = ceiling_w(given);
    if (!(end_v > 0) || !(current_a > 0) || !(watts > 0))
        return false;
    double farad = quantity_or(&capacitor->measured.value,
                               most_capacitance * quantity_or(&capacitor->marked.value, NAN));
    *plan =
        (struct reform_plan){.end_v = end_v,
                             .ceiling_a = current_a,
                             .ceiling_w = watts,
                             .limiter_ohm = fmax(end_v / current_a, end_v * end_v / (4 * watts)),
                             .rest_s = rest_s,
                             .limit_a = limit_at(part, end_v),
                             .bleed_ohm = bleed_ohm,
                             .bleed_w = power_rating(2 * end_v * end_v / bleed_ohm),
                             .bleed_s = reforming_bleed_time(bleed_ohm, farad, end_v, bleed_to_v),
                             .energy_j = farad * end_v * end_v / 2};
    plan->limiter_w = power_rating(2 * end_v * end_v / plan->limiter_ohm);
    plan->deciding_ohm = (1 - reached_share) * end_v / plan->limit_a;
    for (size_t i = 0; i < REFORM_STEPS; i++)
        plan->step_v[i] = step_shares[i] * end_v;
    return true;
}
