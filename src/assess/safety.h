/*
 * Measurements for safety against named published figures. The outcome is that of one figure on one
 * day; nothing here says that a set is safe.
 */
#ifndef ASSESS_SAFETY_H
#define ASSESS_SAFETY_H

#include "assess/findings.h"

/* One line of the job against the published figure of its kind; a text that names no kind is
   recorded as it stands (SAFETY_KIND_COUNT). */
struct safety_findings safety_assess(const struct job *job, const struct policy *policy,
                                     const struct safety_row *row);

#endif
