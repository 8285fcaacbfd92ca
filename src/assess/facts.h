/*
 * Criteria that no leakage reading decides: safety class, ratings, capacitance, touch current,
 * pulse rating.
 */
#ifndef ASSESS_FACTS_H
#define ASSESS_FACTS_H

#include "assess/judge.h"

/* What decides besides the reading. */
struct facts_case {
    const struct job *job;
    const struct policy *policy;
    const struct capacitor *part;
    double leak_s; /* for the touch current; 0: none known */
    bool left;     /* the set as left; else as found */
};

/* No reading passes the part: at the mains without its class, or a pulse place. */
bool facts_no_reading_passes(const struct job *job, const struct capacitor *part);

/* Add the criteria. */
void facts_judge(const struct facts_case *facts, struct judgement *judgement);

#endif
