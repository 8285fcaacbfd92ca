/*
 * What a stage showed beside what its law and the leaks say: how much is explained, and what is
 * left over. Methods: "Stage".
 */
#ifndef ASSESS_RECONCILE_H
#define ASSESS_RECONCILE_H

#include "assess/assessment.h"

/*
 * Stated bounds of the law, as a share of the cathode current. emf_share: volts that a leak puts on
 * the grid, of the bias. Cathode bias 5 % up to the bias, 8 % to twice; fixed bias (the true
 * current may be higher by so much) 10, 20, 45 % at a quarter, a half, all of it; a row without gm
 * 30 %. NaN: beyond what is stated.
 */
double reconcile_law_bound(bool cathode_bias, double emf_share, bool without_gm);

/* The stages are those of stage_phases. */
struct reconciled_findings reconcile_stage(const struct assessment *assessment,
                                           const struct stage_findings *stage, size_t index);

#endif
