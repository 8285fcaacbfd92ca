/*
 * The power that a leaking part may turn into heat. Methods: "Heat limit of the part" (policy,
 * derived).
 */
#ifndef ASSESS_HEAT_H
#define ASSESS_HEAT_H

#include "job/job.h"
#include "job/shop.h"

/* Surface of a case, m2: cylinder or block; NaN without a size. */
double heat_surface(const struct dimensions *size);

/* Watts: theta/(4 e ln2 R_th) with R_th = 1/(12 W/(m2 K) * surface), a quarter of the power at
   which self-heating runs away. Without a case size the policy's figure (paper, can, tubular). */
double heat_limit(const struct job *job, const struct capacitor *part, const struct policy *policy);

/* Whether a case size is known, so that the limit is derived and not the policy's. */
bool heat_is_derived(const struct job *job, const struct capacitor *part);

#endif
