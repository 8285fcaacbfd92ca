/*
 * Two visits of one set: what moved since the earlier one, for parts with the same ref.
 *
 * Then is the set as it left the earlier visit, now as it came to this one. Leakage is compared as
 * read, at the same volts, one lead lifted, neither reading hot; of several pairs the one whose
 * soak times are nearest, then the latest. A part that was replaced or restuffed at the earlier
 * visit is compared by its readings as left only.
 */
#ifndef ASSESS_VISIT_H
#define ASSESS_VISIT_H

#include "assess/findings.h"

/* How far the volts of two readings may differ to count as the same. */
#define VISIT_VOLTS_TOLERANCE 0.02

/* Compare and hang the result on `now->since`; earlier: the job of the earlier visit. Parts without
   any figure on both sides are left out. Everything belongs to the arena, or to `earlier`, which
   must outlive the findings. */
void visits_compare(const struct job *earlier, struct findings *now, struct arena *arena);

/* A part of the earlier visit that was left as it was: kept, kept untested or reformed. */
bool visit_was_kept(enum action done);

#endif
