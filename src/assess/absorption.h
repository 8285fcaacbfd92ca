/*
 * Absorption is not leakage: readings against time are fitted by a steady current plus a dying one.
 * The fit is printed; it never passes a part, and may only turn a fail into "wait until".
 *
 *   power law    I(t) = I_s + A*(t/60 s)^-n      (Curie - von Schweidler with conduction)
 *   exponential  I(t) = I_s + A*exp(-t/tau)      (reforming only)
 *
 * The readings given must belong together: same volts, range and temperature, in the order of time.
 */
#ifndef ASSESS_ABSORPTION_H
#define ASSESS_ABSORPTION_H

#include "assess/decay.h"
#include "assess/findings.h"

#include <stdbool.h>
#include <stddef.h>

enum {
    ABSORPTION_READINGS_MIN = 5, /* and t_last/t_first >= 10 */
    DECAY_COMPARE_MIN = 6        /* for both laws side by side */
};

struct absorption_reading {
    double time_s;    /* since the volts were applied; > 0, rising */
    double current_a; /* at those volts */
    double sigma_a;   /* standard, repeatability and resolution only: accuracy is common to all */
};

/* Standard uncertainty that counts within one series: sqrt((share*I)^2 + (r/sqrt(12))^2). share is
   policy.repeatability; never below 1e-15 A, so that a weight stays finite. */
double absorption_sigma(double current_a, double repeatability_share, double resolution_a);

/*
 * The power law through a series, status and all. limit_a: the limit at these volts and this
 * temperature, for wait_until_s; NaN: none. status ABSORPTION_NONE with the rest NaN when there are
 * too few readings or too short a span; ABSORPTION_NOT_RESOLVED keeps the figures of the fit.
 * steady_error_a is s = s(I_s)*max(1, sqrt(chi2/nu)), standard; accuracy is still to be added.
 * wait_until_s is NaN unless resolved, limit_a > I_s and the last reading is above limit_a.
 */
struct absorption absorption_fit(const struct absorption_reading *readings, size_t count,
                                 double limit_a);

/* One law through a series; fitted is false when there are no more than 3 readings. */
struct decay decay_fit(enum decay_law law, const struct absorption_reading *readings, size_t count);

/* The current of a fitted decay at time_s. */
double decay_current(const struct decay *decay, double time_s);

/* When the decay falls to limit_a with its plateau moved by steady_shift_a; INFINITY: never. */
double decay_time_to(const struct decay *decay, double limit_a, double steady_shift_a);

/*
 * A reforming log: both laws from DECAY_COMPARE_MIN readings, else the power law from
 * ABSORPTION_READINGS_MIN, else none. `better` has the smaller chi^2; when the ratio of the sums is
 * below exp(4/N) neither is preferred and `better` is the more cautious one, the higher plateau.
 */
struct decay_comparison decay_compare(const struct absorption_reading *readings, size_t count,
                                      double limit_a);

#endif
