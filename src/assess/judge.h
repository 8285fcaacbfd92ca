/*
 * One reading of a part held against every criterion of its place.
 */
#ifndef ASSESS_JUDGE_H
#define ASSESS_JUDGE_H

#include "assess/leak.h"
#include "assess/place.h"

enum { JUDGED_CRITERIA_MAX = 20 };

/* What is known about the reading besides its value. */
struct judge_case {
    const struct place_case *place;
    const struct place_limit *limit;
    const struct leak *leak;
    enum bound bound;
    bool may_fail; /* soaked long enough */
    /* U at the limit exceeds the policy's share of it: neither a pass nor a conditional outcome can
       be told from the other. A fail stands: it lies above the limit by more than the U of the
       figure itself, which is what the guard band asks of any fail. */
    bool instrument;
    bool waiting; /* the fit says that absorption still runs, and falls below the limit */
    bool falling; /* electrolytic: still falling, or not known to be level */
};

struct judgement {
    enum outcome outcome;
    enum reason why;
    struct criterion criteria[JUDGED_CRITERIA_MAX];
    size_t count;
};

/* Add the criteria that the leak decides. The outcome is made worse as they say. */
void judge_leak(const struct judge_case *given, struct judgement *judgement);

/* Add one criterion that needs no leak (class, capacitance, ratings). */
void judge_add(struct judgement *judgement, const struct criterion *criterion);

/* Whether any figure of the place is outside with the leak `factor` times what it is, as in a
   chassis warmer by 5 K ("turns on temperature"). A leakage rule is written for 20 C and does not
   turn on the chassis; a reading that is only a bound proves no fail. */
bool judge_fails(const struct judge_case *given, double factor);

#endif
