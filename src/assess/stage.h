/*
 * The stages of a job as circuits: which valve row, which resistors as designed, found and left,
 * which stages hang together. Built once for a job; then const.
 *
 * Stages that name the same resistor (or stand in one push-pull pair, or have one capacitor leak
 * into them) form a group that is solved together.
 */
#ifndef ASSESS_STAGE_H
#define ASSESS_STAGE_H

#include "assess/findings.h"

enum { STAGE_GROUP_MAX = 8 };

enum stage_resistor {
    STAGE_ANODE,
    STAGE_SCREEN,
    STAGE_CATHODE,
    STAGE_BIAS,
    STAGE_GRID_LEAK,
    STAGE_RESISTOR_COUNT
};

/* One stage of the job. */
struct stage_model {
    const struct stage *stage;
    const char *valve_type;
    const struct valve_row *row; /* used; of the book, or &given */
    struct valve_row given;
    enum law_status law_status;
    struct valve_law law;
    enum reason why;     /* WHY_NONE: it can be solved */
    const char *missing; /* WHY_MISSING_FACT: the key */
    bool grid_leak_known;
    bool open_found;    /* a resistor of it read open: as found it does not work */
    bool open_unmended; /* and nothing was fitted for it: nothing can be said of its leaks either */
    bool is_output;
    bool is_triode;
    struct stage_circuit circuits[PHASE_COUNT];     /* without leaks */
    double resistor_u_ohm[STAGE_RESISTOR_COUNT];    /* standard, as found; 0: not measured */
    double ohms[PHASE_COUNT][STAGE_RESISTOR_COUNT]; /* NaN: not given; of a stage without row too */
    int partner;                                    /* push-pull; -1: none */
    int group, slot;
};

/* The stages of a group as found, with one measured resistor moved by its standard uncertainty. */
struct stage_step {
    struct stage_circuit circuits[STAGE_GROUP_MAX];
    struct stage_solution bare[STAGE_GROUP_MAX];
};

struct stage_group {
    size_t count;
    int members[STAGE_GROUP_MAX]; /* indices of stages, all solvable */
    struct stage_circuit circuits[PHASE_COUNT][STAGE_GROUP_MAX];
    struct stage_solution bare[PHASE_COUNT][STAGE_GROUP_MAX]; /* no leaks */
    const struct stage_step *steps;
    size_t step_count;
};

struct stage_set {
    const struct stage_model *models; /* as job->stages */
    size_t count;
    const struct stage_group *groups;
    size_t group_count;
};

/* Build all. Stages that name several valves, or an unusable row, are warnings; of those without
   any row stages_tell_unknown speaks, when it is known what hangs on them. */
struct stage_set stages_prepare(const struct job *job, const struct policy *policy,
                                struct arena *arena, struct diagnostics *diagnostics);

/* Tell of the stages without a row: a warning for those in needed[], by which a part that was read
   is not judged, a note for the rest. needed: as job->stages. */
void stages_tell_unknown(const struct stage_set *set, const struct job *job, const bool *needed,
                         struct arena *arena, struct diagnostics *diagnostics);

/* A leak to be put into the circuits of a group. */
struct stage_leak {
    enum place place; /* coupling, screen, cathode, bias bypass, tone */
    const int *stages;
    size_t stage_count;
    double leak_s;
    double source_v, source_ohm; /* coupling */
    double feed_ohm;             /* bias bypass of a fixed bias: what feeds it */
};

/* Add it (leaks add up). Only the leaks of stages in this group count. */
void stage_add_leak(const struct stage_set *set, const struct stage_group *group,
                    struct stage_circuit *circuits, const struct stage_leak *leak);

/*
 * Ohms that leaks are judged with: as found. Of one that read open (`open`, or over what the meter
 * shows) what was fitted counts, since nothing leaks into a stage that does not work; NaN where
 * nothing was fitted.
 */
struct found_ohms {
    double ohm;   /* NaN: not known */
    double u_ohm; /* standard; 0: not measured */
    bool open;
};
struct found_ohms ohms_as_found(const struct job *job, const struct policy *policy,
                                const struct resistance *resistance);

/* Whether a stage of the group has an open resistor as found; unmended: and none fitted for it. */
bool stage_group_open(const struct stage_set *set, const struct stage_group *group, bool unmended);

#endif
