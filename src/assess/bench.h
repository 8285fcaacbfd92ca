/*
 * All that a job says besides the leakage of its capacitors, assessed once these are.
 */
#ifndef ASSESS_BENCH_H
#define ASSESS_BENCH_H

#include "assess/assessment.h"

/* Fill findings->bench; capacitors, stages and the job must be there. */
void bench_assess_job(const struct assessment *assessment, struct findings *findings);

#endif
