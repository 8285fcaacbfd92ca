/*
 * What a valve tester showed, against its own figure for a good valve. Testers differ in what they
 * measure: their figures are never compared with one another.
 */
#ifndef ASSESS_VALVE_TEST_H
#define ASSESS_VALVE_TEST_H

#include "assess/findings.h"

/*
 * `78 %`, `24 mA of 32 mA`, `2.1 mA/V, good 3.0 mA/V`, each `by TESTER`: value and good figure. A
 * per cent is of that tester's good figure. A text without a figure ("good", "no emission") is not
 * judged.
 */
struct valve_findings valve_test_assess(const struct job *job, const struct policy *policy,
                                        size_t index, struct arena *arena);

#endif
