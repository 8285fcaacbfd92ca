/*
 * Whether what was fitted does for what came out: value, ratings, class, room in the old shell.
 */
#ifndef ASSESS_REPLACEMENT_H
#define ASSESS_REPLACEMENT_H

#include "assess/findings.h"

/* All parts that were restuffed, replaced or bridged, capacitors before resistors. What does not
   do is a warning (ratings, class, pulse; a value or a size is a finding only). */
const struct replacement_findings *replacements_assess(const struct findings *findings,
                                                       struct arena *arena,
                                                       struct diagnostics *diagnostics,
                                                       size_t *count);

#endif
