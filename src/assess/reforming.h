/*
 * Reforming an electrolytic: the plan before it, the log of it, the bleeding after it. Methods:
 * "Reforming". Pure, but for the arena that the findings go to.
 */
#ifndef ASSESS_REFORMING_H
#define ASSESS_REFORMING_H

#include "assess/findings.h"

/* What a plan and a log are made with. */
struct reforming_case {
    const struct job *job;
    const struct policy *policy;
    const struct capacitor_findings *part;
    double bench_c;
};

/* Whether the bench sheet plans to reform the part: an electrolytic (not a wet one) marked for 100
   V or more that is open or reformed, and unread or advised to be reformed. */
bool reforming_wanted(const struct reforming_case *given, enum action done);

/*
 * The plan. Limiter V_end/I_ceiling or V_end^2/(4*P_ceiling), the greater: into a short it passes
 * no more than the ceiling, and it can put no more than P_ceiling into any load (at matched
 * resistance). V_end is the lesser of the marked volts and 1.1 x service. false: volts not known.
 */
bool reforming_plan(const struct reforming_case *given, struct reform_plan *plan);

/* s until a capacitor at `from_v` shows `to_v` through ohm: R*C*ln(from/to). */
double reforming_bleed_time(double ohm, double capacitance_f, double from_v, double to_v);

/* Volts across the part of one reading of a log: set volts less the drop in the limiter, unless
   they were read across the part. NaN without a limiter; negative when the current is more than
   the limiter can pass. */
double reforming_part_volts(const struct reading *reading, double limiter_ohm, bool across_part);

/* A log step by step. Mistakes of the log are warnings; the rest is still assessed. */
struct reform_findings reforming_assess(const struct reforming_case *given,
                                        const struct reform *reform, struct arena *arena,
                                        struct diagnostics *diagnostics);

#endif
