/*
 * Performance before and after, as a ratio. Conditions are the job's words and are not compared.
 */
#ifndef ASSESS_PERFORMANCE_H
#define ASSESS_PERFORMANCE_H

#include "assess/findings.h"

/* Left against found: 20 log of volts and current, 10 log of watts, the difference of decibels;
   per cent of anything else. NaN where either is a word or a bound. */
struct performance_findings performance_assess(const struct performance_row *row);

#endif
