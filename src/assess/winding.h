/*
 * Windings: resistance against the service sheet at the temperature of the copper, insulation.
 */
#ifndef ASSESS_WINDING_H
#define ASSESS_WINDING_H

#include "assess/findings.h"

/* ohm at `temperature_c` of copper that has ohm_20 at 20 C: 0.393 % per kelvin. */
double winding_at(double ohm_20, double temperature_c);

/* bench_c: of a winding whose own temperature is not given. */
struct winding_findings winding_assess(const struct job *job, const struct policy *policy,
                                       double bench_c, size_t index);

#endif
