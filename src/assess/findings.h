/*
 * What the assessment found: the one structure that every document, the JSON and the archive are
 * made from. Plain data in the arena given to assess_job, const afterwards.
 *
 * SI units. NaN: unknown or not applicable (null in JSON). Names are those of the JSON.
 * Findings hold keys and numbers, never sentences; `text` members are filled by report_explain.
 */
#ifndef ASSESS_FINDINGS_H
#define ASSESS_FINDINGS_H

#include "assess/stage_solver.h"
#include "job/job.h"
#include "job/shop.h"
#include "quantity/quantity.h"
#include "reference/source.h"

#define OUTCOMES(X)                                                                                \
    X(OUTCOME_PASS, "pass")                                                                        \
    X(OUTCOME_CONDITIONAL_PASS, "conditional pass")                                                \
    X(OUTCOME_NOT_JUDGED, "not judged")                                                            \
    X(OUTCOME_CONDITIONAL_FAIL, "conditional fail")                                                \
    X(OUTCOME_FAIL, "fail")

/* Why a part is not judged, or what makes its outcome conditional. Words: `why.<key>`. */
#define REASONS(X)                                                                                 \
    X(WHY_NONE, "")                                                                                \
    X(WHY_NO_READING, "no reading")                                                                \
    X(WHY_NOT_LIFTED, "not lifted")       /* only read in circuit */                               \
    X(WHY_INSTRUMENT, "instrument")       /* U exceeds half the limit */                           \
    X(WHY_TOO_EARLY, "too early")         /* before the soak time, and over the limit */           \
    X(WHY_WAIT, "wait")                   /* absorption still running: wait until */               \
    X(WHY_STILL_FALLING, "still falling") /* electrolytic: reform */                               \
    X(WHY_VOLTS_TOO_LOW, "volts too low") /* scaling up gives a lower bound only */                \
    X(WHY_NO_ROW, "no row")               /* no valve row for the stage */                         \
    X(WHY_MISSING_FACT, "missing fact")   /* the place lacks what it needs */                      \
    X(WHY_STAGE, "stage")                 /* the stage has no figure */                            \
    X(WHY_BOUND, "bound")                 /* off scale on the wrong side of the limit */           \
    X(WHY_NO_READING_PASSES, "no reading passes")                                                  \
    X(WHY_WITHIN_UNCERTAINTY, "within uncertainty")                                                \
    X(WHY_RISING, "rising")                                                                        \
    X(WHY_JOINT, "joint")                 /* fails together with others */                         \
    X(WHY_NO_FIGURE, "no figure")         /* nobody publishes one */                               \
    X(WHY_OUT_OF_ORDER, "out of order")   /* times or volts of a log fall */                       \
    X(WHY_IMPOSSIBLE, "impossible")       /* more than the limiter can pass */                     \
    X(WHY_OPEN_RESISTOR, "open resistor") /* what feeds the part, or its stage, read open */

#define ADVICES(X)                                                                                 \
    X(ADVICE_NONE, "")                                                                             \
    X(ADVICE_KEEP, "keep")                                                                         \
    X(ADVICE_REFORM, "reform")                                                                     \
    X(ADVICE_MEASURE_AGAIN, "measure again")                                                       \
    X(ADVICE_REPLACE, "replace")                                                                   \
    X(ADVICE_REPLACE_SAFETY_CLASS, "replace with the safety class")

/* Originality: one state for each part. */
#define PART_STATES(X)                                                                             \
    X(STATE_TESTED_AND_KEPT, "tested and kept")                                                    \
    X(STATE_KEPT_UNTESTED, "kept untested")                                                        \
    X(STATE_REFORMED, "reformed")                                                                  \
    X(STATE_DISCONNECTED, "disconnected")                                                          \
    X(STATE_RESTUFFED, "restuffed")                                                                \
    X(STATE_REPLACED_PERIOD, "replaced by a period part")                                          \
    X(STATE_REPLACED_MODERN, "replaced by a modern part")                                          \
    X(STATE_EARLIER_REPAIR_KEPT, "earlier repair kept")                                            \
    X(STATE_EARLIER_REPAIR_REPLACED, "earlier repair replaced")                                    \
    X(STATE_MISSING, "missing")                                                                    \
    X(STATE_OPEN, "open")

#define CRITERIA(X)                                                                                \
    X(CRITERION_CATHODE_CURRENT, "cathode current rise")                                           \
    X(CRITERION_ANODE_DISSIPATION, "anode dissipation")                                            \
    X(CRITERION_SCREEN_DISSIPATION, "screen dissipation")                                          \
    X(CRITERION_PUSHPULL_DIFFERENCE, "anode current difference")                                   \
    X(CRITERION_GRID_SHIFT, "grid shift")                                                          \
    X(CRITERION_LINE_LOSS, "line loss")                                                            \
    X(CRITERION_LINE_VOLTS, "line volts")                                                          \
    X(CRITERION_SCREEN_FALL, "screen fall")                                                        \
    X(CRITERION_DROPPER_DISSIPATION, "dropper dissipation")                                        \
    X(CRITERION_RAIL_DROP, "rail drop")                                                            \
    X(CRITERION_HEAT, "heat")                                                                      \
    X(CRITERION_HT_SHARE, "share of the HT current")                                               \
    X(CRITERION_CONTROL_VOLTS, "volts on the control")                                             \
    X(CRITERION_CIRCUIT_RATIO, "ratio to the circuit")                                             \
    X(CRITERION_CAPACITANCE, "capacitance")                                                        \
    X(CRITERION_BATTERY_SHARE, "share of the drain")                                               \
    X(CRITERION_LEAKAGE_RULE, "leakage rule")                                                      \
    X(CRITERION_SAFETY_CLASS, "safety class")                                                      \
    X(CRITERION_INSULATION, "insulation")                                                          \
    X(CRITERION_TOUCH_CURRENT, "touch current")                                                    \
    X(CRITERION_PULSE_RATING, "pulse rating")                                                      \
    X(CRITERION_SHIFT, "shift")                                                                    \
    X(CRITERION_RATED_VOLTS, "rated volts")                                                        \
    X(CRITERION_LINEAR_RATIO, "ratio to the resistor")

CHOICE_TYPE(outcome, OUTCOMES, OUTCOME_COUNT)
CHOICE_TYPE(reason, REASONS, WHY_COUNT)
CHOICE_TYPE(advice, ADVICES, ADVICE_COUNT)
CHOICE_TYPE(part_state, PART_STATES, STATE_COUNT)
CHOICE_TYPE(criterion_key, CRITERIA, CRITERION_COUNT)

/* One figure held against one limit. value is with the part warm at service volts. */
struct criterion {
    enum criterion_key key;
    double value, uncertainty, limit; /* uncertainty: expanded, k = 2 */
    enum unit unit;
    bool upper;       /* passes at or below the limit; false: at or above */
    bool joint;       /* all parts of the line or stage together */
    enum bound bound; /* of the value: UNDER at most this, OVER at least this */
    enum outcome outcome;
    enum reason why;
    enum source_key source;
    const char *rule; /* of a leakage rule: its name */
};

/*
 * What the leak does where the part sits: words `effect.<key>`. The keys (value; of):
 *   grid_volts (V by which the grid rises; V of bias), cathode_current (% rise), anode_watts (W;
 *   W of the rating), grid_shift (V; V of bias), line_loss (%), line_volts (V), screen_fall (V; V),
 *   rail_drop (V; V of the rail), part_watts (W), bias_loss (V; V of bias), ht_share (A; A of the
 *   HT), short_watts (W that a short would put into the primary; unknown: NaN), control_volts (V),
 *   circuit_ratio (R_L over the circuit's resistance), battery_share (A; A of the drain),
 *   mains_fire (no value), earth_current (A), touch_current (A of all isolators; A allowed),
 *   discharge_resistor (no value: one is needed besides), pulse_peak (V), shift (V; V allowed),
 *   linear_ratio (R_L over the resistor that it bridges: no valve row), primary_current (A through
 *   the output primary), capacitance (% off the marked value; % of tolerance on that side).
 */
struct effect {
    const char *key;
    double value;
    enum unit unit;
    bool at_most;        /* the reading is a bound; a ratio is then "at least" */
    double of;           /* second figure ("of 85 V"), NaN: none */
    const char *subject; /* stage or line named, NULL: none */
    const char *text;    /* filled by report_explain */
};

/* A reading as judged. */
struct reading_findings {
    const struct reading *reading;
    double part_v;          /* V across the part: set volts less the drop in series resistance */
    double current_a;       /* A; of a bound, the bound */
    enum bound bound;       /* UNDER: at most; OVER: at least */
    double uncertainty_a;   /* expanded; all of methods 1 but temperature */
    double repeatability_a; /* standard */
    double temperature_c;
    double t_min_s; /* from when it may fail a part; NaN: no limit known */
    bool may_fail;
    double service_a;         /* brought to service volts at this temperature */
    bool service_lower_bound; /* scaled up beyond 1/0.95: a lower bound */
    double warm_a;            /* at service volts, chassis warm */
};

enum absorption_status {
    ABSORPTION_NONE, /* fewer than 5 readings, or too short a span */
    ABSORPTION_RESOLVED,
    ABSORPTION_NOT_RESOLVED
};
struct absorption {
    enum absorption_status status;
    size_t reading_count;
    double steady_a, steady_error_a; /* I_s, s */
    double a_a, n;                   /* I_s + A (t/60 s)^-n */
    double chi2;
    size_t freedom;
    double wait_until_s; /* when the curve meets the limit; NaN */
};
enum trend { TREND_UNKNOWN, TREND_FALLING, TREND_LEVEL, TREND_RISING };

struct capacitor_findings {
    const struct capacitor *part;
    enum part_state state;
    bool replaced_unmeasured;
    enum outcome outcome_found, outcome;
    enum reason why;
    const char *missing; /* WHY_MISSING_FACT: the key that is missing */
    enum advice advice;
    bool against_advice; /* what was done differs from the advice */
    double service_v;
    bool service_above_marked;
    bool tested_above_marked;
    /* the reading that decides, and the same among the readings as found; -1: none */
    int deciding, deciding_found;
    const struct reading_findings *readings;
    size_t reading_count;
    enum trend trend;
    struct absorption absorption;
    double exponent, exponent_error; /* I ~ V^b; NaN: not measured */
    bool exponent_warning;
    double theta_k; /* K for a doubling; NaN: read hot */
    enum source_key theta_source;
    double temperature_factor;
    bool turns_on_temperature;
    double working_c;
    double ageing_margin;
    /* at service volts */
    double leakage_a, leakage_warm_a, uncertainty_a;
    double limit_a, bench_limit_a; /* after the ageing margin; NaN: no figure */
    bool limit_none;               /* already outside without this part */
    bool limit_is_heat;
    /* for the table and the picture: at the deciding reading's volts, on the bench */
    double test_v, test_s, test_leakage_a, test_uncertainty_a, test_limit_a;
    enum bound test_bound;
    double test_c;                         /* NaN: bench */
    double found_leakage_a, found_limit_a; /* the same for outcome_found, when another reading */
    /* for the bench sheet */
    double sheet_voltage_v, sheet_soak_s, sheet_limit_a, sheet_limit_ohm, sheet_series_max_ohm;
    int sheet_instrument; /* index: what tells the limit, else the one for leakage; -1: none named
                           */
    /* why the sheet gives no limit, read or not (WHY_NONE: it does), and what the job leaves out */
    enum reason sheet_why;
    const char *sheet_missing;
    bool sheet_proves_fail_only; /* the volts stay so far below service that no reading passes */
    bool sheet_not_with_this_meter;
    /* where it is not: volts at which this meter would do, within the marked (NaN: none would), and
       the expanded uncertainty of a meter that would do at sheet_voltage_v */
    double sheet_volts_needed_v, sheet_uncertainty_max_a;
    bool no_reading_passes;
    enum safety_class class_needed;
    const struct effect *effects;
    size_t effect_count;
    const struct criterion *criteria;
    size_t criterion_count;
    /* electrolytics: the other rules beside the one used */
    const struct criterion *other_rules;
    size_t other_rule_count;
    const char *why_text, *advice_text; /* filled by report_explain */
};

struct stage_phase {
    bool judged;
    enum reason why;
    const char *missing; /* WHY_MISSING_FACT: the key that is missing */
    struct stage_solution solution;
    double no_leak_cathode_a; /* same resistors, no leaks */
    double grid_cold_v,
        grid_warm_v; /* explained grid volts, parts cold and at working temperature */
};
struct stage_findings {
    const struct stage *stage;
    const struct valve_row *row; /* NULL: given in the job, or none */
    const char *row_name;        /* of the row used */
    enum source_key row_source;
    enum trust row_trust;
    const char *row_source_text;
    bool row_given;
    enum law_status law_status;
    struct stage_phase phases[PHASE_COUNT];
    double anode_max_w, screen_max_w;
    bool near_rating;                            /* no-leak watts >= 85 % of the rating */
    double grid_current_a, grid_current_error_a; /* unexplained by leakage; NaN: none */
    bool grid_current_advice;
    bool is_output;
};

/* n of m of one kind or one side. */
struct kept_count {
    const char *name; /* "capacitors", "above" */
    unsigned kept, of;
    unsigned tested, untested, reformed; /* kept = their sum */
    unsigned disconnected, restuffed, removed;
    bool complete; /* a full list or `counts` */
};
struct originality {
    struct kept_count total;
    struct kept_count kinds[4]; /* capacitors, resistors, windings, switches and controls */
    struct kept_count seen[SEEN_COUNT];
    unsigned restuffed, replaced, replaced_unmeasured, earlier_repairs_kept,
        earlier_repairs_replaced, missing, open;
    struct kept_count valves; /* a register of their own */
    bool of_the_parts_listed; /* some kind has neither a full list nor counts */
};

/* A part that is there at this visit and was at the earlier one. NaN: not on both sides. */
enum visit_kind { VISIT_CAPACITOR, VISIT_RESISTOR, VISIT_WINDING };
struct visit_change {
    enum visit_kind kind;
    const char *ref;
    enum action done_then; /* at the earlier visit */
    int capacitor;         /* index into job->capacitors, NOT_LISTED for other kinds */
    double test_v;         /* V of both readings */
    double then_a, now_a;  /* A, as read */
    enum bound then_bound, now_bound;
    double then_s, now_s;         /* s, soak of each; NaN: not said */
    double then_value, now_value; /* F or ohm, measured */
};
struct visit_changes {
    const char *earlier;              /* its job number */
    const char *then_date, *now_date; /* returned then, received now; NULL: not given */
    double years;                     /* between them; NaN: not known */
    double then_c, now_c;             /* C of the bench; NaN: not given */
    const struct visit_change *items;
    size_t count;
};

#include "assess/bench_findings.h" /* needs the outcomes and reasons above */

struct findings {
    const char *program; /* version */
    enum copy copy;
    const struct job *job; /* already filtered for the copy */
    const struct shop *shop;
    bool in_progress;
    double bench_c, working_c;
    const struct capacitor_findings *capacitors; /* one for each of job->capacitors, same order */
    size_t capacitor_count;
    const struct stage_findings *stages; /* one for each of job->stages */
    size_t stage_count;
    struct originality originality;
    struct bench_findings bench;       /* all that is no capacitor's leakage */
    const struct visit_changes *since; /* the earlier visit; NULL: none, or it cannot be read */
    const char *fingerprint; /* SHA-256 in hex of this copy's findings.json; NULL: not yet */
    const struct diagnostics *diagnostics;
};

/*
 * Assess a job. Findings of the assessment that concern the file (a test above the marked volts,
 * done against advice without reason) are appended to diagnostics as warnings. Never fails: what
 * cannot be judged is "not judged" with its reason. program: the version.
 */
struct findings *assess_job(const struct job *job, const struct shop *shop, const char *program,
                            struct arena *arena, struct diagnostics *diagnostics);

/* The same findings on a job filtered for a copy: a shallow copy. */
struct findings *findings_for_copy(const struct findings *findings, enum copy copy,
                                   struct arena *arena);

#endif
