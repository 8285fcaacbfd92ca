/*
 * Date codes of the parts against the years of the set. Methods: "Originality".
 */
#ifndef ASSESS_COMPONENT_DATE_H
#define ASSESS_COMPONENT_DATE_H

#include "assess/findings.h"

/* All parts with a date code: cans, capacitors, resistors, valves. An original of which every
   reading is later than the set is a warning. */
const struct date_findings *component_dates_assess(const struct job *job, struct arena *arena,
                                                   struct diagnostics *diagnostics, size_t *count);

#endif
