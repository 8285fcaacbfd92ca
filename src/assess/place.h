/*
 * What a leak does where the part sits, and how much of it the place allows. One row a place
 * (place.c). Methods: "Place".
 *
 * Here a leak is one conductance: the part's warm current at service volts over those volts. The
 * figures of a place rise with it; each passes up to its limit.
 */
#ifndef ASSESS_PLACE_H
#define ASSESS_PLACE_H

#include "assess/stage.h"
#include "job/place_needs.h"
#include "reference/leakage_rule.h"

enum { PLACE_VALUES_MAX = 10 };

/* One figure at one leak. NaN: the stage gives no figure there. */
struct place_value {
    enum criterion_key key;
    double value, limit;
    enum unit unit;
    bool inverse; /* printed as 1/value, which must not fall below 1/limit */
    enum source_key source;
    const char *rule;
};
struct place_values {
    size_t count;
    struct place_value items[PLACE_VALUES_MAX];
};

/* A part in its place with every fact that the figures need. */
struct place_case {
    const struct job *job;
    const struct policy *policy;
    const struct stage_set *stages;
    const struct capacitor *part;
    enum reason why;     /* WHY_NONE: judged by its leak */
    const char *missing; /* WHY_MISSING_FACT: the key */
    double service_v;    /* highest d.c. in service; NaN: unknown */
    bool reversed;       /* coupling: the grid's return is above the source */
    double source_v, source_ohm;
    double feed_ohm, circuit_ohm;
    double source_u_ohm, feed_u_ohm, circuit_u_ohm; /* standard; 0: not measured */
    double feed_rating_w;                           /* NaN: unknown */
    double current_a;
    double bias_v;       /* least bias that the leak works against; NaN */
    double heat_limit_w; /* of the part */
    enum source_key heat_source;
    bool electrolytic; /* leakage rule and heat are judged wherever it sits */
    bool heat_counts;  /* heat is judged: an electrolytic, or nothing limits the leak sooner */
    double margin;     /* ageing */
    struct leakage_rule rule;
    bool rule_unknown; /* the job or the shop names no rule that is known */
    enum leakage_status rule_status;
    double rule_limit_a; /* NaN: no rule */
    double to_20c;       /* from the warm current to 20 C */
    bool linear;         /* no valve row: judged by ratio */
    bool screen_as_rail; /* dropper below the policy's least */
    /* where the figures are taken: the group as found, or one step of it; other leaks included
       when judged jointly */
    const struct stage_model *model;
    const struct stage_group *group;
    const struct stage_circuit *circuits;
    const struct stage_solution *bare;
    double ripple_w;      /* heat in the series resistance of a reservoir; 0: not known */
    double line_others_s; /* of the same AVC line */
    double can_others_w;  /* of the same can */
};

struct place_bench {
    const struct job *job;
    const struct policy *policy;
    const struct stage_set *stages;
};

/* Gather the facts of one part. */
struct place_case place_prepare(const struct place_bench *bench, const struct capacitor *part);

/* All figures at a leak in siemens (>= 0). Only for why == WHY_NONE. */
void place_evaluate(const struct place_case *place, double leak_s, struct place_values *values);

/* W in the part: of its leak, and of the ripple. */
double place_heat(const struct place_case *place, double leak_s);

/* The stages of the place's group with the leak in them; false: no stage, or no solution. */
bool place_solve(const struct place_case *place, double leak_s, struct stage_solution *solutions);

/* The part's leak as the stage solver wants it. */
struct stage_leak place_leak(const struct place_case *place, double leak_s);

/* How much the place allows. */
struct place_limit {
    double leak_s;                   /* after the ageing margin; NaN: no figure */
    bool none;                       /* outside without this part */
    bool heat;                       /* the place would bear more: the heat limit */
    double limits[PLACE_VALUES_MAX]; /* of each figure, after the margin; NaN: already outside */
    size_t count;
};

/* Find it and, where heat in the part limits the leak sooner than its place does, have heat judged
   too: a screen fed through 1 k would bear a leak that cooks any paper capacitor. */
struct place_limit place_set_limit(struct place_case *place);

/* The same limit holds for both: same place, same facts. */
bool place_same_limit(const struct place_case *a, const struct place_case *b);

/* Metal that people touch, tied to the mains through the part. */
bool place_is_isolator(enum place place);

#endif
