#include "reference/leakage_rule.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

/* JAN-C-62 in the copies known prints whole volts; the edges between are read as "up to". One copy
   ends the top band at 450 V, another at 500 V. */
static const struct {
    double up_to_v, coefficient_ma_per_uf;
} jan_bands[] = {{100, 0.01}, {250, 0.02}, {350, 0.025}, {450, 0.04}};
enum { JAN_BANDS = sizeof jan_bands / sizeof jan_bands[0] };
static const double jan_refuse_v = 500;

static const struct leakage_rule rules[] = {
    {"JAN-C-62", LEAKAGE_BANDS, NAN, 300, 0, NAN, SOURCE_JAN_C_62},
    {"0.01 CV or 3 uA at 2 min", LEAKAGE_LINEAR, 0.01, 0, 3, 120, SOURCE_VISHAY_038},
    {"0.002 CV + 3 uA at 5 min", LEAKAGE_LINEAR, 0.002, 3, 0, 300, SOURCE_VISHAY_038},
    {"3 sqrt(CV) at 5 min", LEAKAGE_ROOT, 3, 0, 0, 300, SOURCE_LARGE_CAN_SHEETS},
};
enum { RULE_COUNT = sizeof rules / sizeof rules[0] };

const struct leakage_rule *leakage_rules(size_t *count)
{
    *count = RULE_COUNT;
    return rules;
}

/* What may stand between the parts of a rule without meaning anything. */
static const char *skip(const char *at)
{
    for (;;) {
        if (*at == ' ' || *at == '\t' || *at == '*')
            at++;
        else if (strncmp(at, "\xC2\xB7", 2) == 0 || strncmp(at, "\xC3\x97", 2) == 0)
            at += 2; /* middle dot, multiplication sign */
        else
            return at;
    }
}

static bool take(const char **cursor, const char *word)
{
    const char *at = skip(*cursor);
    size_t length = strlen(word);
    if (strncasecmp(at, word, length) != 0)
        return false;
    *cursor = at + length;
    return true;
}

/* Decimal digits only: no sign, exponent, hexadecimal or NaN, and the same in every locale. */
static bool take_number(const char **cursor, double *number)
{
    const char *at = skip(*cursor);
    double value = 0, place = 1;
    bool digits = false, point = false;
    for (;; at++) {
        if (*at >= '0' && *at <= '9') {
            digits = true;
            value = value * 10 + (*at - '0');
            place *= point ? 10 : 1;
        } else if ((*at == '.' || *at == ',') && !point) {
            point = true;
        } else {
            break;
        }
    }
    if (!digits || !isfinite(value) || !isfinite(place))
        return false;
    *number = value / place;
    *cursor = at;
    return true;
}

static bool take_current(const char **cursor, double *current_ua)
{
    if (!take_number(cursor, current_ua))
        return false;
    if (take(cursor, "mA")) {
        *current_ua *= 1000;
        return true;
    }
    return take(cursor, "uA") ||
           take(cursor, "\xC2\xB5"
                        "A") ||
           take(cursor, "\xCE\xBC"
                        "A");
}

static bool take_time(const char **cursor, double *time_s)
{
    if (!take_number(cursor, time_s))
        return false;
    if (take(cursor, "min"))
        *time_s *= 60;
    else if (take(cursor, "h"))
        *time_s *= 3600;
    else
        return take(cursor, "s");
    return true;
}

static bool take_product(const char **cursor)
{
    return take(cursor, "C") && take(cursor, "V");
}

/* The first half of a rule: `0.02 CV`, `3 sqrt(CV)`. */
static bool take_law(const char **cursor, struct leakage_rule *rule)
{
    if (!take_number(cursor, &rule->coefficient) || rule->coefficient <= 0)
        return false;
    if (take(cursor, "sqrt") || take(cursor, "\xE2\x88\x9A")) {
        rule->shape = LEAKAGE_ROOT;
        bool bracket = take(cursor, "(");
        return take_product(cursor) && (!bracket || take(cursor, ")"));
    }
    rule->shape = LEAKAGE_LINEAR;
    return take_product(cursor);
}

/* Each of the three endings once, in any order. */
static bool take_rest(const char **cursor, struct leakage_rule *rule)
{
    bool constant = false, least = false, time = false;
    while (*skip(*cursor)) {
        bool *ending, good;
        if (take(cursor, "+")) {
            ending = &constant;
            good = take_current(cursor, &rule->constant_ua);
        } else if (take(cursor, "or")) {
            ending = &least;
            good = take_current(cursor, &rule->floor_ua);
        } else if (take(cursor, "at")) {
            ending = &time;
            good = take_time(cursor, &rule->soak_s);
        } else {
            return false;
        }
        if (!good || *ending)
            return false;
        *ending = true;
    }
    return true;
}

static bool same_figures(const struct leakage_rule *a, const struct leakage_rule *b)
{
    return a->shape == b->shape && a->coefficient == b->coefficient &&
           a->constant_ua == b->constant_ua && a->floor_ua == b->floor_ua &&
           (isnan(a->soak_s) || a->soak_s == b->soak_s);
}

bool leakage_rule_read(const char *text, struct leakage_rule *rule)
{
    for (size_t i = 0; i < RULE_COUNT; i++)
        if (strcasecmp(text, rules[i].name) == 0) {
            *rule = rules[i];
            return true;
        }
    struct leakage_rule own = {.name = text, .soak_s = NAN, .source = SOURCE_POLICY};
    const char *cursor = text;
    if (!take_law(&cursor, &own) || !take_rest(&cursor, &own))
        return false;
    for (size_t i = 0; i < RULE_COUNT; i++)
        if (same_figures(&own, &rules[i]))
            own = rules[i];
    *rule = own;
    return true;
}

static enum leakage_status band_limit(double capacitance_uf, double rated_v, double *limit_ua)
{
    if (rated_v > jan_refuse_v)
        return LEAKAGE_REFUSE_VOLTS;
    size_t band = 0;
    while (band + 1 < JAN_BANDS && rated_v > jan_bands[band].up_to_v)
        band++;
    *limit_ua = jan_bands[band].coefficient_ma_per_uf * 1000 * capacitance_uf;
    return rated_v > jan_bands[band].up_to_v ? LEAKAGE_WARN_VOLTS : LEAKAGE_OK;
}

enum leakage_status leakage_limit(const struct leakage_rule *rule, double capacitance_f,
                                  double rated_v, double *limit_a)
{
    if (!(capacitance_f > 0) || !(rated_v > 0) || isinf(capacitance_f) || isinf(rated_v))
        return LEAKAGE_IMPOSSIBLE;
    double capacitance_uf = capacitance_f * 1e6, limit_ua = 0;
    enum leakage_status status = LEAKAGE_OK;
    switch (rule->shape) {
    case LEAKAGE_BANDS:
        status = band_limit(capacitance_uf, rated_v, &limit_ua);
        break;
    case LEAKAGE_LINEAR:
        limit_ua = rule->coefficient * capacitance_uf * rated_v;
        break;
    case LEAKAGE_ROOT:
        limit_ua = rule->coefficient * sqrt(capacitance_uf * rated_v);
        break;
    }
    if (status != LEAKAGE_REFUSE_VOLTS)
        *limit_a = fmax(limit_ua + rule->constant_ua, rule->floor_ua) * 1e-6;
    return status;
}
