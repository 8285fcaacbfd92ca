#include "report/phrases.h"

#include "job/part.h"
#include "report/composition.h"

#include <string.h>
#include <strings.h>

static const char *quantity_or_null(struct arena *arena, double value, enum unit unit,
                                    unsigned digits)
{
    return isfinite(value) ? quantity_text(arena, value, unit, digits) : NULL;
}

/* ---- effects */

/* Below this a figure says no more than "none to speak of"; it is given as a bound. */
static double least_shown(enum unit unit)
{
    return unit == UNIT_PERCENT                           ? 0.1
           : unit == UNIT_VOLTAGE || unit == UNIT_CURRENT ? 1e-3
           : unit == UNIT_POWER                           ? 1e-4
                                                          : 0;
}

/* A ratio beyond this is as good as none: the circuit cannot tell. */
#define RATIO_MOST 1000.0

struct shown_figure {
    double value;
    const char *bound; /* key of the phrase around it; NULL: the figure itself */
};

static struct shown_figure shown(double value, enum unit unit, bool at_most)
{
    bool ratio = unit == UNIT_NONE; /* insulation over resistance: a leak of at most is a ratio of
                                       at least */
    double least = least_shown(unit);
    if (ratio && value > RATIO_MOST)
        return (struct shown_figure){RATIO_MOST, "effect_bound.over"};
    if (ratio)
        return (struct shown_figure){value, at_most ? "effect_bound.over" : NULL};
    if (fabs(value) < least)
        return (struct shown_figure){value < 0 ? -least : least, "effect_bound.under"};
    return (struct shown_figure){value, at_most ? "effect_bound.under" : NULL};
}

enum sign { SIGN_NONE, SIGN_RISE, SIGN_FALL };

static const char *figure_phrase(const struct phrasing *say, double value, enum unit unit,
                                 bool at_most, enum sign sign)
{
    if (!isfinite(value))
        return NULL;
    struct shown_figure figure = shown(value, unit, at_most);
    const char *text = figure.bound ? text_set(say->arena, figure.value, unit, 2)
                                    : quantity_text(say->arena, figure.value, unit, 2);
    if (sign != SIGN_NONE && figure.value > 0)
        text = arena_print(say->arena, "%s%s", sign == SIGN_RISE ? "+" : "−", text);
    return figure.bound ? phrase(say, figure.bound, "amount", text, NULL) : text;
}

/* An AVC line is named where the set has several. */
static bool has_several_lines(const struct job *job)
{
    const char *first = NULL;
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const char *line = job->capacitors[i].line;
        if (line && first && strcasecmp(line, first) != 0)
            return true;
        first = first ? first : line;
    }
    return false;
}

static const char *effect_phrase(const struct phrasing *say, const struct job *job,
                                 const struct effect *effect)
{
    struct arena *arena = say->arena;
    enum unit unit = effect->unit;
    bool at_most = effect->at_most;
    bool of_line = strncmp(effect->key, "line_", 5) == 0;
    if (unit == UNIT_NONE && effect->value > RATIO_MOST)
        return phrase(say, "effect.none", NULL);
    double share = effect->of > 0 ? 100 * effect->value / effect->of : NAN;
    if (share < least_shown(UNIT_PERCENT))
        share = NAN; /* the figure itself says enough */
    return phrase(say, arena_print(arena, "effect.%s", effect->key), "amount",
                  figure_phrase(say, effect->value, unit, at_most, SIGN_NONE), "rise",
                  figure_phrase(say, effect->value, unit, at_most, SIGN_RISE), "fall",
                  figure_phrase(say, effect->value, unit, at_most, SIGN_FALL), "of",
                  text_set(arena, effect->of, unit, 3), "share",
                  figure_phrase(say, share, UNIT_PERCENT, at_most, SIGN_NONE), "subject",
                  of_line && !has_several_lines(job) ? NULL : effect->subject, NULL);
}

/* ---- reasons */

/* Two figures; more where the value would read like its limit. */
static unsigned telling_digits(const struct phrasing *say, const struct criterion *criterion)
{
    unsigned digits = 2;
    while (digits < 4 && isfinite(criterion->value) && isfinite(criterion->limit) &&
           strcmp(quantity_text(say->arena, criterion->value, criterion->unit, digits),
                  quantity_text(say->arena, criterion->limit, criterion->unit, digits)) == 0)
        digits++;
    return digits;
}

/* "cathode current rises by 22 %, 10 % allowed": one criterion that is not met. */
static const char *criterion_phrase(const struct phrasing *say, const struct criterion *criterion)
{
    struct mustache_value *values = mustache_map(say->arena);
    unsigned digits = telling_digits(say, criterion);
    mustache_set_text(say->arena, values, "value",
                      quantity_or_null(say->arena, criterion->value, criterion->unit, digits));
    mustache_set_text(say->arena, values, "limit",
                      quantity_or_null(say->arena, criterion->limit, criterion->unit, digits));
    mustache_set_text(say->arena, values, "rule",
                      criterion->rule ? text_with_micro(say->arena, criterion->rule) : NULL);
    mustache_set_flag(say->arena, values, "joint", criterion->joint);
    return phrase_of(say, arena_print(say->arena, "over.%s", criterion_key_text(criterion->key)),
                     values);
}

/* The criterion that made the outcome what it is; NULL: none. */
static const struct criterion *criterion_deciding(const struct capacitor_findings *part)
{
    for (size_t i = 0; i < part->criterion_count; i++)
        if (part->criteria[i].outcome == part->outcome)
            return &part->criteria[i];
    return NULL;
}

/* No reading of leakage is to blame, nor would other test volts help. */
static bool is_by_capacitance(const struct capacitor_findings *part)
{
    const struct criterion *deciding = criterion_deciding(part);
    return deciding && deciding->key == CRITERION_CAPACITANCE;
}

static const char *resolution_text(const struct phrasing *say, const struct job *job,
                                   const struct capacitor_findings *part)
{
    if (part->deciding < 0 || is_by_capacitance(part))
        return NULL;
    const struct instrument *instrument =
        instrument_of(job, part->readings[part->deciding].reading->instrument);
    if (!instrument || !instrument->resolution.set)
        return NULL;
    if (instrument->resolution.unit == UNIT_CURRENT)
        return text_micro(say->arena, instrument->resolution.value, 1);
    return text_set(say->arena, instrument->resolution.value, instrument->resolution.unit, 2);
}

struct mustache_value *part_values(const struct phrasing *say, const struct job *job,
                                   const struct capacitor_findings *part)
{
    struct arena *arena = say->arena;
    struct mustache_value *values = mustache_map(arena);
    mustache_set_text(arena, values, "missing", part->missing);
    mustache_set_text(arena, values, "volts",
                      text_set(arena, part->sheet_voltage_v, UNIT_VOLTAGE, 3));
    mustache_set_text(arena, values, "tested", text_set(arena, part->test_v, UNIT_VOLTAGE, 3));
    mustache_set_text(arena, values, "service", text_set(arena, part->service_v, UNIT_VOLTAGE, 3));
    /* Volts at which the meter would do, where it did not. */
    double enough_v = is_by_capacitance(part)                ? NAN
                      : part->sheet_not_with_this_meter      ? part->sheet_volts_needed_v
                      : part->sheet_voltage_v > part->test_v ? part->sheet_voltage_v
                                                             : NAN;
    mustache_set_text(arena, values, "enough", text_set(arena, enough_v, UNIT_VOLTAGE, 2));
    mustache_set_text(arena, values, "finer", text_micro(arena, part->sheet_uncertainty_max_a, 1));
    mustache_set_text(arena, values, "soak", text_set(arena, part->sheet_soak_s, UNIT_TIME, 2));
    mustache_set_text(arena, values, "wait",
                      text_set(arena, part->absorption.wait_until_s, UNIT_TIME, 2));
    mustache_set_text(arena, values, "limit", text_micro(arena, part->test_limit_a, 2));
    mustache_set_text(arena, values, "margin", text_set(arena, part->ageing_margin, UNIT_NONE, 2));
    mustache_set_text(arena, values, "working",
                      text_set(arena, part->working_c, UNIT_TEMPERATURE, 2));
    mustache_set_text(arena, values, "hot", text_set(arena, part->test_c, UNIT_TEMPERATURE, 2));
    mustache_set_text(arena, values, "exponent", text_set(arena, part->exponent, UNIT_NONE, 2));
    mustache_set_text(arena, values, "resolution", resolution_text(say, job, part));
    mustache_set_text(arena, values, "marked",
                      part->part->marked.rated.set ? part->part->marked.rated.written : NULL);
    const struct criterion *criterion =
        part->outcome == OUTCOME_PASS ? NULL : criterion_deciding(part);
    if (criterion)
        mustache_set_text(arena, values, "figure", criterion_phrase(say, criterion));
    if (part->class_needed != CLASS_NONE)
        mustache_set_text(arena, values, "class", safety_class_text(part->class_needed));
    if (part->part->stage_count && job->stage_count > (size_t)part->part->stages[0])
        mustache_set_text(arena, values, "valve", job->stages[part->part->stages[0]].valve_type);
    return values;
}

static const char *why_phrase(const struct phrasing *say, const struct job *job,
                              const struct capacitor_findings *part)
{
    if (part->outcome == OUTCOME_PASS)
        return NULL;
    bool figure_first = part->why == WHY_NONE || part->why == WHY_WITHIN_UNCERTAINTY;
    const struct criterion *criterion = figure_first ? criterion_deciding(part) : NULL;
    if (criterion)
        return criterion_phrase(say, criterion);
    if (part->why == WHY_NONE)
        return NULL;
    const char *key = arena_print(say->arena, "why.%s", reason_text(part->why));
    return phrase_of(say, key, part_values(say, job, part));
}

static const char *advice_phrase(const struct phrasing *say, const struct job *job,
                                 const struct capacitor_findings *part)
{
    if (part->advice == ADVICE_NONE)
        return NULL;
    struct mustache_value *values = part_values(say, job, part);
    if (part->advice == ADVICE_MEASURE_AGAIN && part->why != WHY_NONE) {
        const char *key = arena_print(say->arena, "again.%s", reason_text(part->why));
        mustache_set_text(say->arena, values, "how", phrase_of(say, key, values));
    }
    return phrase_of(say, arena_print(say->arena, "advice.%s", advice_text(part->advice)), values);
}

static void explain_part(struct capacitor_findings *part, const struct phrasing *say,
                         const struct job *job)
{
    struct effect *effects = arena_array(say->arena, part->effect_count, sizeof *effects);
    for (size_t i = 0; i < part->effect_count; i++) {
        effects[i] = part->effects[i];
        effects[i].text = effect_phrase(say, job, &effects[i]);
    }
    part->effects = effects;
    part->why_text = why_phrase(say, job, part);
    part->advice_text = advice_phrase(say, job, part);
}

void report_explain(struct findings *findings, const struct words *words, struct arena *arena)
{
    struct phrasing say = {words, arena, NULL};
    struct capacitor_findings *parts = arena_array(arena, findings->capacitor_count, sizeof *parts);
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        parts[i] = findings->capacitors[i];
        explain_part(&parts[i], &say, findings->job);
    }
    findings->capacitors = parts;
}
