/*
 * Time: absorption is not leakage. When a reading may fail a part, and which way a run of readings
 * goes. Methods: "Time".
 */
#ifndef ASSESS_SOAK_H
#define ASSESS_SOAK_H

#include "assess/findings.h"

struct soak {
    double capacitance_f; /* measured, else marked + tolerance; electrolytic twice that */
    double set_v;
    double series_ohm;       /* tester and meter */
    double supply_current_a; /* the most that the test supply gives; NaN: not limited */
    double limit_a;          /* limit at these volts; NaN: not known, only the least time counts */
    bool electrolytic;
};

/* Earliest time in seconds at which a reading may fail a part: charging to a tenth of the limit
   through the series resistance, the supply's own limit, at least 15 s (electrolytic 60 s). */
double soak_least_s(const struct soak *soak);

/* The capacitance to count with, farad; NaN: unknown. */
double soak_capacitance(const struct capacitor *part);

/*
 * Which way a run goes: readings[count] under the same volts (V_c within 0.5 %), temperature and
 * range, in the order of time. Rising: last minus least > 2 sqrt(u1^2 + u2^2) (repeatability) and
 * > 10 % of the least; falling the same from the first to the last. Fewer than two, or bounds:
 * unknown.
 */
enum trend soak_trend(const struct reading_findings *readings, size_t count);

#endif
