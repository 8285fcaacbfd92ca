/*
 * What was found besides the leakage of capacitors: reforms, the supply, resistors, windings,
 * valves, the service sheet's voltages, performance, safety, replacements, date codes, and how far
 * the figures of each stage are explained. Part of the findings, and included by findings.h alone:
 * plain data, SI, NaN: unknown.
 */
#ifndef ASSESS_BENCH_FINDINGS_H
#define ASSESS_BENCH_FINDINGS_H

#include "assess/decay.h"
#include "reference/date_code.h"
#include "reference/preferred_value.h"
#include "reference/safety_figure.h"

/* A figure held between two limits; NaN: open on that side. `uncertainty` is expanded, k = 2. */
struct held {
    double value, uncertainty, low, high;
    enum unit unit;
    enum outcome outcome;
    enum reason why;     /* of "not judged" */
    const char *missing; /* WHY_MISSING_FACT: what the job does not say */
    enum source_key source;
};

/* ---- reforming */

enum { REFORM_STEPS = 5 };

/* For the bench sheet. */
struct reform_plan {
    double end_v;
    double ceiling_a, ceiling_w; /* in the part */
    double limiter_ohm, limiter_w;
    double step_v[REFORM_STEPS];
    double rest_s;
    double deciding_ohm; /* the most that may stand in series at the deciding test */
    double limit_a;      /* at end_v on the bench; NaN: none known */
    double bleed_ohm, bleed_w, bleed_s, energy_j;
};

enum reform_stop {
    REFORM_NO_STOP,
    REFORM_RISING,  /* current rising at constant volts */
    REFORM_PLATEAU, /* the plateau of the last step lies above the limit */
    REFORM_WATTS    /* more watts in the part than its ceiling */
};

struct reform_step {
    size_t first, count; /* of the log */
    double set_v;
    double part_v, current_a, watts; /* at its last reading; watts: the most */
    double duration_s;
    bool reached; /* the part showed 0.95 of the volts */
    bool rising;
    bool in_order;
    size_t fitted; /* readings with the part within 2 % of the volts */
    double limit_a;
    struct decay_comparison decay; /* better -1: no fit */
};

struct reform_findings {
    const struct reform *reform;
    int capacitor;
    double limiter_ohm;   /* NaN: not given */
    double ceiling_w;     /* of the part */
    const double *part_v; /* volts across the part, one for each reading of the log */
    const struct reform_step *steps;
    size_t step_count;
    int plateau_step;  /* the last step with a fit; -1: none */
    int plateau_law;   /* of its fits: the better one, or the more cautious one where ... */
    bool between_laws; /* ... neither follows the log (chi^2 above its 99 % point): the plateau is
                          then known to lie between them, and the error spans both */
    double plateau_a;
    double plateau_error_a;                               /* expanded: fit and meter */
    double to_limit_s, to_limit_early_s, to_limit_late_s; /* from the step's beginning; INFINITY:
                                                             never; NaN: not known */
    double horizon_s;
    enum reform_stop stop;
    int stop_step;
    struct held rest; /* the deciding test after the rest: current against its limit */
    double rest_v;
    double before_rest_a; /* last current of the log */
    bool rebound;         /* under the limit before the rest, over it after */
    enum outcome outcome; /* pass: it came back */
    enum reason why;
    const char *missing;
};

/* ---- supply */

/* Reservoir or smoothing capacitor: hum across it in one phase. */
struct hum {
    double capacitance_f, esr_ohm;
    double predicted_v; /* rms, an upper figure */
    double share;       /* of the node before; NaN: reservoir */
    double textbook_v;  /* reservoir: peak to peak, I/(fC); else NaN */
    double measured_v;
};
struct supply_node {
    int capacitor;
    double frequency_hz, current_a;
    double series_ohm, series_h; /* between the node before and this one */
    struct hum found, left;
    double predicted_db, measured_db; /* left against found; NaN */
    bool judged;
    enum reason why;
    const char *missing;
};

/* ---- parts */

struct resistor_findings {
    struct held tolerance;   /* per cent off the marked value, as found */
    enum e_series series;    /* coarsest that holds the marked value */
    struct held dissipation; /* watts by its volts, against its rating */
    const char *stage;       /* that it works in; NULL: none solved */
    double effect_percent;   /* change of that stage's cathode current by what it measures */
    bool harmless;           /* out of tolerance, and the stage hardly knows */
};

struct winding_findings {
    double temperature_c;
    double expected_ohm;    /* marked, brought to that temperature */
    struct held resistance; /* per cent off it */
    struct held insulation;
};

/* By one tester against its own figure; never to be compared with another tester's. */
struct valve_findings {
    double value, good; /* as read, and what that tester calls good; of one unit */
    enum unit unit;
    const char *tester; /* NULL: not said */
    struct held share;  /* per cent of good */
};

/* ---- the set */

struct voltage_findings {
    double source_ohm;       /* seen from the point; 0: low */
    double sheet_ohm;        /* the sheet's meter there */
    double meter_ohm;        /* today's; INFINITY: not loading */
    double true_v;           /* what the sheet's reading stands for, without a meter */
    double expected_v[2];    /* found, left: today's meter, the mains of the day */
    struct held compared[2]; /* per cent off it */
};

struct performance_findings {
    double db;      /* left against found: volts and current 20 log, watts 10 log; NaN */
    double percent; /* the same in per cent, of other units; NaN */
};

struct safety_findings {
    enum safety_kind kind; /* SAFETY_KIND_COUNT: no published figure is known */
    struct held value;
    struct held second; /* the other polarity */
    double predicted_a; /* touch current by the isolators alone; NaN */
};

enum replacement_check {
    REPLACEMENT_VALUE,
    REPLACEMENT_RATING,  /* against service volts */
    REPLACEMENT_NO_LOAD, /* against the HT at switch-on */
    REPLACEMENT_AC,      /* against the mains */
    REPLACEMENT_CLASS,
    REPLACEMENT_PULSE,
    REPLACEMENT_WATTS,
    REPLACEMENT_SHELL, /* fits the old shell: diameter or length over it */
    REPLACEMENT_CHECK_COUNT
};
struct replacement_findings {
    const char *ref;
    int capacitor, resistor; /* index; NOT_LISTED */
    struct held checks[REPLACEMENT_CHECK_COUNT];
    bool checked[REPLACEMENT_CHECK_COUNT];
    enum outcome outcome;
};

struct date_findings {
    const char *ref, *written;
    bool known;
    struct date_code code;
    int nearest;      /* of its readings, to the set's years; -1 */
    double years_off; /* of that one after (+) or before (-) the set's years; 0 within them */
    bool refutes;     /* every reading is later than the set's latest year */
    bool original;    /* counted as original */
};

/* What a stage shows beside what its law and the leaks say. */
enum stage_node { NODE_GRID, NODE_CATHODE, NODE_ANODE, NODE_SCREEN, STAGE_NODE_COUNT };
struct reconciled_node {
    double measured_v;
    double low_v, high_v; /* predicted, parts cold and warm, as the meter would show it */
    double bound_v;       /* what the law and a real valve may add on either side */
    double unexplained_v; /* beyond that; 0: explained; NaN: not compared */
};
struct reconciled_phase {
    bool compared;
    struct reconciled_node nodes[STAGE_NODE_COUNT];
    double grid_current_a, grid_current_error_a; /* expanded; NaN: none shown */
    double measured_cathode_a;                   /* by the volts across its resistor; NaN */
};
struct reconciled_findings {
    struct reconciled_phase phases[PHASE_COUNT]; /* designed: never compared */
    bool anchored;       /* the law was scaled to a cathode voltage with the leaks lifted */
    double anchor_scale; /* 1: the book valve */
    double law_bound;    /* share of the cathode current: 0.05, 0.08, 0.30 ... */
    double valve_bound;  /* 0.25: a real valve against the book's; 0 when anchored */
};

/* What the calculation of one capacitor went through, for the working shown: facts of its place,
   and its stage without the leak and with this part's leak alone. NaN: not used there. */
struct part_working {
    double series_ohm;                                                 /* of tester and meter */
    double instrument_share, instrument_absolute_a, instrument_step_a; /* of the reading's U */
    double feed_ohm, circuit_ohm, source_v, source_ohm, current_a;
    double volts_exponent;       /* (V_service/V_c)^this brings it to service volts */
    double conductance_s;        /* warm, of the deciding reading; NaN: none */
    double rule_limit_a, to_20c; /* leakage rule at rated volts, 20 C; the reading's share there */
    const char *rule;
    double heat_limit_w, ripple_w; /* of a reservoir with its resistance measured; 0 */
    bool staged;                   /* solved in a stage: what follows is set */
    const struct stage_findings *stage;
    double d0_v, ik0_a, exponent; /* of the law */
    struct stage_solution bare, leaking;
};

struct bench_findings {
    const struct part_working *workings;    /* one for each capacitor */
    const struct reform_plan *const *plans; /* one for each capacitor; NULL: none planned */
    const struct reform_findings *reforms;  /* as job->reforms */
    const struct supply_node *nodes;
    size_t node_count;
    const struct resistor_findings *resistors;
    const struct winding_findings *windings;
    const struct valve_findings *valves;
    const struct voltage_findings *voltages;
    const struct performance_findings *performance;
    const struct safety_findings *safety;
    const struct replacement_findings *replacements;
    size_t replacement_count;
    const struct date_findings *dates;
    size_t date_count;
    const struct reconciled_findings *reconciled; /* as job->stages */
};

#endif
