/*
 * Leakage rules for electrolytic capacitors: what current a published rule, or the shop's own,
 * allows at rated volts and 20 C. Rules are never mixed; a record names the one it used.
 */
#ifndef REFERENCE_LEAKAGE_RULE_H
#define REFERENCE_LEAKAGE_RULE_H

#include "reference/source.h"

#include <stdbool.h>
#include <stddef.h>

enum leakage_shape {
    LEAKAGE_BANDS,  /* coefficient*C + constant, the coefficient by bands of rated volts */
    LEAKAGE_LINEAR, /* coefficient*C*V + constant, or the floor when that is greater */
    LEAKAGE_ROOT    /* coefficient*sqrt(C*V) + constant, or the floor */
};

/* Coefficients as the trade writes them: microfarads, volts, microamperes. */
struct leakage_rule {
    const char *name; /* "JAN-C-62"; of a shop's own rule the text as written */
    enum leakage_shape shape;
    double coefficient;
    double constant_ua;
    double floor_ua; /* "or 3 uA": the greater counts; 0: none */
    double soak_s;   /* the rule's reading time; NaN: not stated */
    enum source_key source;
};

enum leakage_status {
    LEAKAGE_OK,
    LEAKAGE_WARN_VOLTS,   /* above the top band as one copy prints it (450 to 500 V): limit given */
    LEAKAGE_REFUSE_VOLTS, /* above 500 V: the rule says nothing */
    LEAKAGE_IMPOSSIBLE    /* capacitance or volts not positive */
};

/* All published rules, in the order in which a record lists them. */
const struct leakage_rule *leakage_rules(size_t *count);

/*
 * The rule a shop names: a published one by its name without case, or one that it writes:
 *     0.02 CV + 10 uA          0.01CV or 3 uA          3 sqrt(CV)          0.03 CV at 5 min
 * A factor, `CV` or `sqrt(CV)`, then any of `+ CURRENT`, `or CURRENT` (the greater counts),
 * `at TIME`; C in microfarads, V in volts, the result in microamperes. Currents in uA or mA, times
 * in s, min or h. A decimal comma is read as a point. rule->name points to `text`, which must
 * outlive it. false: neither; *rule is untouched.
 */
bool leakage_rule_read(const char *text, struct leakage_rule *rule);

/* The largest current in ampere at the rated (marked) capacitance in farad and volts. *limit_a is
   set on LEAKAGE_OK and LEAKAGE_WARN_VOLTS only. */
enum leakage_status leakage_limit(const struct leakage_rule *rule, double capacitance_f,
                                  double rated_v, double *limit_a);

#endif
