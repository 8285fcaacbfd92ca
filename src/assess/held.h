/*
 * Figures held between two limits, by the same rule as leakage: ILAC-G8:09/2019 with guard band.
 */
#ifndef ASSESS_HELD_H
#define ASSESS_HELD_H

#include "assess/findings.h"

/* Nothing known: not judged, why. missing: NULL, or what the job does not say. */
struct held held_unknown(enum unit unit, enum reason why, const char *missing);

/* A figure of which only the value is recorded: nobody publishes a limit. */
struct held held_recorded(double value, enum unit unit);

/*
 * Set the outcome of a figure whose value, uncertainty and limits are set; a bound (over, under)
 * passes or fails by itself. policy: its guard band.
 */
void held_judge(struct held *held, const struct policy *policy, enum bound bound);

/* Expanded uncertainty of a measured quantity: by the job's instrument of its unit, else the
   policy's default accuracy and one digit as written. Of insulation by the one with test volts. */
double held_uncertainty(const struct job *job, const struct policy *policy,
                        const struct quantity *quantity);
double held_insulation_uncertainty(const struct job *job, const struct policy *policy,
                                   const struct quantity *insulation);

/* The worst outcome of both; NOT_JUDGED of one does not hide the other's fail. */
enum outcome held_worse(enum outcome a, enum outcome b);

#endif
