/*
 * From a reading on the bench to the leak in the warm chassis, with its uncertainty.
 */
#ifndef ASSESS_LEAK_H
#define ASSESS_LEAK_H

#include "assess/reading.h"

/* What a reading is brought to. */
struct leak_case {
    const struct reading_findings *reading;
    struct reading_bench bench;
    enum dielectric type;
    double exponent; /* b of I ~ V^b; NaN: 1 */
    double service_v;
    double working_c;
};

/* The leak warm at service volts; standard uncertainties (k = 1) of the conductance. */
struct leak {
    double service_a; /* at service volts, at the reading's temperature */
    double warm_a;    /* and warm */
    bool lower_bound; /* scaled up beyond 1/0.95 */
    /* may count in a joint fail: soaked, not falling or waiting, no mere upper bound. Set where the
       reading is judged. */
    bool proves_fail;
    double conductance_s;
    double common_s;   /* by what all readings of the instrument share: accuracy, volts, series
                          resistance */
    double bench_s;    /* by the bench's temperature, which all cold readings of the job share */
    double own_s;      /* by the last step of the display, and the temperature of a part read hot */
    double standard_s; /* all three */
};

struct leak leak_of(const struct leak_case *given);

/* Expanded uncertainty (k = 2) of a reading of current_a on the same range, ampere. */
double leak_reading_u(const struct leak_case *given, double current_a);

#endif
