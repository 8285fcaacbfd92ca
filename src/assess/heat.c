#include "assess/heat.h"

#include "job/part.h"

#include "assess/temperature.h"

#include <math.h>

static const double cooling_w_per_m2_k = 12;

double heat_surface(const struct dimensions *size)
{
    if (!size->set)
        return NAN;
    if (size->diameter_m > 0)
        return M_PI * size->diameter_m * (size->length_m + size->diameter_m / 2);
    return 2 * (size->length_m * size->width_m + size->width_m * size->height_m +
                size->height_m * size->length_m);
}

static const struct dimensions *case_of(const struct job *job, const struct capacitor *part)
{
    const struct can *can = part_can(job, part);
    return !part->case_size.set && can ? &can->case_size : &part->case_size;
}

bool heat_is_derived(const struct job *job, const struct capacitor *part)
{
    return heat_surface(case_of(job, part)) > 0;
}

double heat_limit(const struct job *job, const struct capacitor *part, const struct policy *policy)
{
    double surface_m2 = heat_surface(case_of(job, part));
    if (surface_m2 > 0)
        return temperature_doubling(part->type).theta_k * cooling_w_per_m2_k * surface_m2 /
               (4 * M_E * M_LN2);
    if (!dielectric_is_electrolytic(part->type))
        return policy->heat_paper_w;
    return part->can != NOT_LISTED ? policy->heat_can_w : policy->heat_tubular_w;
}
