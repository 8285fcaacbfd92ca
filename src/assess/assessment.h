/*
 * A job being assessed: shared by the files of this module, seen by no other.
 */
#ifndef ASSESS_ASSESSMENT_H
#define ASSESS_ASSESSMENT_H

#include "assess/judge.h"
#include "assess/place.h"
#include "job/part.h"

/* One part being assessed, beside its findings. */
struct part_work {
    struct place_case place;
    struct place_limit limit;
    enum action done; /* the can's, where the part is a section that says nothing itself */
    struct reading_findings *readings;
    int *runs; /* which run under voltage each reading belongs to */
    /* the part as found, and as its last readings on the original show it */
    struct leak leak_found, leak;
    bool leaks_found, leaks; /* a lifted reading decides */
    struct judgement found, final;
};

struct assessment {
    const struct job *job;
    const struct shop *shop;
    const struct policy *policy;
    struct arena *arena;
    struct diagnostics *diagnostics;
    double bench_c;
    struct stage_set stages;
    struct part_work *work;                /* one for each capacitor */
    struct capacitor_findings *capacitors; /* the same */
};

/* part.c: everything about one part alone. */
void part_assess(struct assessment *assessment, size_t index);

/* joint.c: parts that work on one line, stage or can, together. Changes outcomes. */
void joint_assess(struct assessment *assessment);

/* sheet.c: what to set, how long to wait, what to accept. */
void sheet_plan(struct assessment *assessment, size_t index);

/* stage_phases.c: the stages as designed, found and left. */
const struct stage_findings *stage_phases(struct assessment *assessment);

/* advice.c: what to do, and whether something else was done. */
void advice_give(struct assessment *assessment, size_t index);

/* place_effect.c: what the leak does there. leaks false: no reading, only what needs none. */
void place_effects(struct assessment *assessment, size_t index);

/* assess.c: a reading (its index among the part's) as leak.h wants it. */
struct leak_case part_leak_case(const struct assessment *assessment, size_t index, int reading);

/* Whether what works there since the work is new: what was read before does not speak of it. */
bool part_is_new(enum action done, const struct marking *fitted);

#endif
