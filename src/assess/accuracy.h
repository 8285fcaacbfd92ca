/*
 * How accurate a meter is: by what the job says of its instruments, else the shop's usual figure.
 *
 * A reading of leakage names its instrument, or the job's first that reads leakage is meant. Other
 * figures name none: they are by the first instrument that reads their unit.
 */
#ifndef ASSESS_ACCURACY_H
#define ASSESS_ACCURACY_H

#include "job/job.h"
#include "job/shop.h"

/* A half-width share*|reading| + absolute, as uncertainty_of_accuracy takes it. */
struct accuracy {
    double share;
    double absolute; /* in the unit of the reading, SI; what is of full scale included */
};

/* What the instrument states for readings of this unit. instrument NULL, nothing stated, or stated
   of another unit: the policy's default accuracy and `last_digit`, one step as written (0: none).
 */
struct accuracy accuracy_of(const struct instrument *instrument, enum unit unit,
                            const struct policy *policy, double last_digit);

/* The same by the first of the job's instruments whose accuracy is stated for this unit. One that
   applies test volts reads insulation, not the ohms of parts. */
struct accuracy accuracy_in_job(const struct job *job, enum unit unit, const struct policy *policy,
                                double last_digit);

/* Of insulation in ohms, by the first that reads it at test volts. */
struct accuracy accuracy_of_insulation(const struct job *job, const struct policy *policy,
                                       double last_digit);

/* Ohms of the job's voltmeter: its input, or ohms per volt times the range (NULL: not known).
   INFINITY: none is named that loads. */
double voltmeter_ohm(const struct job *job, const struct quantity *range);

#endif
