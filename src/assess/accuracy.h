/*
 * How accurate a meter is: by what the job says of its instruments, else the shop's usual figure.
 */
#ifndef ASSESS_ACCURACY_H
#define ASSESS_ACCURACY_H

#include "job/job.h"
#include "job/shop.h"

/* A half-width share*|reading| + absolute, as uncertainty_of_accuracy takes it. */
struct accuracy {
    double share;
    double absolute; /* in the unit of the reading, SI */
};

/* What the instrument states for readings of this unit. instrument NULL, nothing stated, or stated
   of another unit: the policy's default accuracy and `last_digit`, one step as written (0: none).
 */
struct accuracy accuracy_of(const struct instrument *instrument, enum unit unit,
                            const struct policy *policy, double last_digit);

/* The same by the first of the job's instruments that states one for this unit. */
struct accuracy accuracy_in_job(const struct job *job, enum unit unit, const struct policy *policy,
                                double last_digit);

#endif
