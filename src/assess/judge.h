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
    bool may_fail;   /* soaked long enough */
    bool instrument; /* U at the limit exceeds the policy's share of it; a clear fail stands */
    bool waiting;    /* the fit says that absorption still runs, and falls below the limit */
    bool falling;    /* electrolytic: still falling, or not known to be level */
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

/* What a leak brought to +5 K more would be judged, for "turns on temperature". */
enum outcome judge_simple(const struct judge_case *given, double factor);

#endif
