/*
 * Resistors: measured against marked value and tolerance, watts, and what a drifted one does in its
 * stage. Methods: "Resistors, windings, valves".
 */
#ifndef ASSESS_RESISTOR_H
#define ASSESS_RESISTOR_H

#include "assess/assessment.h"

/* 20 % where a resistor bears no tolerance (common practice). */
#define RESISTOR_TOLERANCE_PERCENT 20.0

/* One of the job. The effect in its stage is the change of cathode current when this resistor alone
   is as measured and all else is as designed. */
struct resistor_findings resistor_assess(const struct assessment *assessment, size_t index);

#endif
