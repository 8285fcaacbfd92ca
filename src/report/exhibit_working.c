/*
 * The working: how the figures of one part came about, line by line. What goes in, the formula with
 * its numbers, what comes out, where it is from.
 */
#include "report/held_words.h"
#include "report/typography.h"

#include "job/part.h"

#include <strings.h>

enum { LINES_MAX = 60 };

struct sheet_of_working {
    struct composition *composition;
    struct working *working;
};

static void add(struct sheet_of_working *sheet, const char *key, const char *formula,
                const char *value, const char *source)
{
    struct arena *arena = sheet->composition->arena;
    if (sheet->working->line_count == LINES_MAX)
        return;
    sheet->working->lines[sheet->working->line_count++] =
        (struct working_line){.name = phrase_in(&sheet->composition->say, "working", key),
                              .formula = formula ? text_typeset(arena, formula) : "",
                              .value = value ? value : "",
                              .source = source ? text_typeset(arena, source) : ""};
}

/* ---- numbers; formulas are written with the signs of the trade */

static const char *amps(const struct sheet_of_working *sheet, double ampere)
{
    return text_micro(sheet->composition->arena, ampere, 3);
}

static const char *figure(const struct sheet_of_working *sheet, double value, enum unit unit)
{
    return text_unit(sheet->composition, value, unit, 4);
}

static const char *plain(const struct sheet_of_working *sheet, double value, unsigned digits)
{
    return isfinite(value) ? quantity_text(sheet->composition->arena, value, UNIT_NONE, digits)
                           : NULL;
}

/* "0.5576 mW ± 0.049 mW"; the uncertainty is left out where it is none. */
static const char *uncertain(const struct sheet_of_working *sheet, double value, double uncertainty,
                             enum unit unit)
{
    return text_uncertain(sheet->composition, value, uncertainty, unit, 4);
}

#define FORMULA(sheet, ...) arena_print((sheet)->composition->arena, __VA_ARGS__)

static const char *say(const struct sheet_of_working *sheet, const char *key)
{
    return phrase_in(&sheet->composition->say, "working", key);
}

static const char *source(const struct sheet_of_working *sheet, enum source_key key)
{
    return source_words(sheet->composition, key);
}

/* ---- a capacitor: from the reading to the warm leak */

static void add_reading(struct sheet_of_working *sheet, const struct capacitor_findings *part,
                        const struct part_working *given)
{
    const struct reading_findings *found = &part->readings[part->deciding];
    const struct reading *reading = found->reading;
    const struct instrument *instrument =
        instrument_of(sheet->composition->job, reading->instrument);
    add(sheet, "reading",
        FORMULA(sheet, "%s%s%s", reading->written, instrument ? ", " : "",
                instrument ? instrument->name : ""),
        amps(sheet, found->current_a),
        FORMULA(sheet, "%s %u", say(sheet, "line"), reading->at.line));
    if (given->series_ohm > 0)
        add(sheet, "part_volts",
            FORMULA(sheet, "V_c = V_set − I × R = %s − %s × %s",
                    figure(sheet, reading->set_volts.value, UNIT_VOLTAGE),
                    amps(sheet, found->current_a),
                    figure(sheet, given->series_ohm, UNIT_RESISTANCE)),
            figure(sheet, found->part_v, UNIT_VOLTAGE), NULL);
    const char *absolute = isfinite(given->instrument_absolute_a)
                               ? amps(sheet, given->instrument_absolute_a)
                               : say(sheet, "one_digit");
    add(sheet, "uncertainty",
        FORMULA(sheet, "U = 2√(((p I + a)/√3)² + r²/12 + …); p %s, a %s, r %s",
                figure(sheet, 100 * given->instrument_share, UNIT_PERCENT), absolute,
                amps(sheet, given->instrument_step_a)),
        amps(sheet, found->uncertainty_a), source(sheet, SOURCE_GUM));
    if (isfinite(found->t_min_s))
        add(sheet, "soak",
            FORMULA(sheet, "t ≥ RC ln(V/(0.1 I_limit R)); %s",
                    say(sheet, found->may_fail ? "may_fail" : "may_not_fail")),
            figure(sheet, found->t_min_s, UNIT_TIME), NULL);
}

static void add_absorption(struct sheet_of_working *sheet, const struct capacitor_findings *part)
{
    const struct absorption *fit = &part->absorption;
    if (fit->status == ABSORPTION_NONE)
        return;
    add(sheet, "absorption",
        FORMULA(sheet, "I = I_s + A (t/60 s)^−n; A %s, n %s, χ² %s / %zu", amps(sheet, fit->a_a),
                plain(sheet, fit->n, 3), plain(sheet, fit->chi2, 3), fit->freedom),
        fit->status == ABSORPTION_RESOLVED ? FORMULA(sheet, "%s ± %s", amps(sheet, fit->steady_a),
                                                     amps(sheet, 2 * fit->steady_error_a))
                                           : say(sheet, "not_resolved"),
        source(sheet, SOURCE_CURIE_VON_SCHWEIDLER));
}

static void add_scaling(struct sheet_of_working *sheet, const struct capacitor_findings *part,
                        const struct part_working *given)
{
    const struct reading_findings *found = &part->readings[part->deciding];
    bool scaled = isfinite(given->volts_exponent) && given->volts_exponent != 1;
    add(sheet, "at_service",
        FORMULA(sheet, "I × (V_service/V_c)%s%s; %s / %s, I %s",
                scaled ? FORMULA(sheet, "^%.2g", given->volts_exponent) : "",
                found->service_lower_bound ? say(sheet, "lower_bound") : "",
                figure(sheet, part->service_v, UNIT_VOLTAGE),
                figure(sheet, found->part_v, UNIT_VOLTAGE), amps(sheet, found->current_a)),
        amps(sheet, found->service_a), NULL);
    if (isfinite(part->theta_k) && part->temperature_factor > 0)
        add(sheet, "warm",
            FORMULA(sheet, "I × 2^((T_working − T_bench)/θ); %s, %s, θ %s K, × %s",
                    figure(sheet, part->working_c, UNIT_TEMPERATURE),
                    figure(sheet, found->temperature_c, UNIT_TEMPERATURE),
                    plain(sheet, part->theta_k, 3), plain(sheet, part->temperature_factor, 3)),
            FORMULA(sheet, "%s ± %s", amps(sheet, found->warm_a),
                    text_micro(sheet->composition->arena, part->uncertainty_a, 2)),
            source(sheet, part->theta_source));
    if (given->conductance_s > 0)
        add(sheet, "leak", FORMULA(sheet, "R_L = V_service / I_warm"),
            figure(sheet, 1 / given->conductance_s, UNIT_RESISTANCE), NULL);
}

/* ---- its place */

static void add_facts(struct sheet_of_working *sheet, const struct part_working *given)
{
    const struct {
        const char *key;
        double value;
        enum unit unit;
    } facts[] = {{"feed", given->feed_ohm, UNIT_RESISTANCE},
                 {"circuit", given->circuit_ohm, UNIT_RESISTANCE},
                 {"source_volts", given->source_v, UNIT_VOLTAGE},
                 {"source_resistance", given->source_ohm, UNIT_RESISTANCE},
                 {"current", given->current_a, UNIT_CURRENT}};
    for (size_t i = 0; i < sizeof facts / sizeof *facts; i++)
        if (isfinite(facts[i].value) && facts[i].value != 0)
            add(sheet, facts[i].key, NULL, figure(sheet, facts[i].value, facts[i].unit),
                source(sheet, SOURCE_JOB));
}

static const char *row_source(const struct sheet_of_working *sheet,
                              const struct stage_findings *stage)
{
    if (!stage->row_source_text)
        return NULL;
    return FORMULA(sheet, "%s; %s", stage->row_source_text,
                   stage->row_given ? phrase(&sheet->composition->say, "methods.row_given", NULL)
                                    : trust_words(sheet->composition, stage->row_trust));
}

static const char *solution_text(const struct sheet_of_working *sheet,
                                 const struct stage_solution *solution)
{
    return FORMULA(sheet, "V_g %s, V_k %s, V_a %s", figure(sheet, solution->grid_v, UNIT_VOLTAGE),
                   figure(sheet, solution->cathode_v, UNIT_VOLTAGE),
                   figure(sheet, solution->anode_v, UNIT_VOLTAGE));
}

static void add_stage(struct sheet_of_working *sheet, const struct part_working *given)
{
    const struct stage_findings *stage = given->stage;
    if (!given->staged)
        return;
    add(sheet, "law",
        FORMULA(sheet, "I_k = %s (D/D₀)^%s, D₀ %s%s%s", figure(sheet, given->ik0_a, UNIT_CURRENT),
                plain(sheet, given->exponent, 2), figure(sheet, given->d0_v, UNIT_VOLTAGE),
                stage->row_name ? "; " : "", stage->row_name ? stage->row_name : ""),
        stage->stage->valve_type, row_source(sheet, stage));
    add(sheet, "without_leak", solution_text(sheet, &given->bare),
        figure(sheet, given->bare.cathode_a, UNIT_CURRENT), source(sheet, SOURCE_THREE_HALVES_LAW));
    if (given->conductance_s > 0)
        add(sheet, "with_leak", solution_text(sheet, &given->leaking),
            figure(sheet, given->leaking.cathode_a, UNIT_CURRENT),
            source(sheet, SOURCE_THREE_HALVES_LAW));
}

/* How each figure of a place follows from the leak G. */
static const char *formula_of(enum criterion_key key)
{
    switch (key) {
    case CRITERION_CATHODE_CURRENT:
        return "I_k/I_k0 − 1";
    case CRITERION_ANODE_DISSIPATION:
        return "V_ak I_a";
    case CRITERION_SCREEN_DISSIPATION:
        return "V_g2k I_g2";
    case CRITERION_PUSHPULL_DIFFERENCE:
        return "|I_a1 − I_a2| / I_a";
    case CRITERION_GRID_SHIFT:
        return "V_g − V_g0";
    case CRITERION_LINE_LOSS:
        return "R_feed G / (1 + R_feed G)";
    case CRITERION_LINE_VOLTS:
    case CRITERION_RAIL_DROP:
    case CRITERION_CONTROL_VOLTS:
    case CRITERION_SHIFT:
        return "I R_feed";
    case CRITERION_SCREEN_FALL:
        return "V_g2,0 − V_g2";
    case CRITERION_DROPPER_DISSIPATION:
        return "I² R";
    case CRITERION_HEAT:
        return "V² G";
    case CRITERION_HT_SHARE:
    case CRITERION_BATTERY_SHARE:
        return "I / I_line";
    case CRITERION_CIRCUIT_RATIO:
    case CRITERION_LINEAR_RATIO:
        return "R_L / R";
    case CRITERION_CAPACITANCE:
        return "C/C_marked − 1";
    case CRITERION_LEAKAGE_RULE:
    case CRITERION_SAFETY_CLASS:
    case CRITERION_INSULATION:
    case CRITERION_RATED_VOLTS:
    case CRITERION_PULSE_RATING:
        return "";
    case CRITERION_TOUCH_CURRENT:
        return "1.1 V √(G² + (2πfC)²)";
    case CRITERION_COUNT:
        break;
    }
    return "";
}

static const char *criterion_limit(const struct sheet_of_working *sheet,
                                   const struct criterion *criterion)
{
    return criterion->unit == UNIT_CURRENT ? amps(sheet, criterion->limit)
                                           : figure(sheet, criterion->limit, criterion->unit);
}

static const char *criterion_figure(const struct sheet_of_working *sheet,
                                    const struct criterion *criterion)
{
    if (criterion->unit != UNIT_CURRENT)
        return uncertain(sheet, criterion->value, criterion->uncertainty, criterion->unit);
    const char *current = amps(sheet, criterion->value);
    const char *spread = text_micro(sheet->composition->arena, criterion->uncertainty, 2);
    return current && spread ? FORMULA(sheet, "%s ± %s", current, spread) : current;
}

/* A reservoir's heat has a part that no leak makes. */
static const char *whole_formula(const struct sheet_of_working *sheet,
                                 const struct part_working *given, enum criterion_key key)
{
    const char *formula = formula_of(key);
    if (key != CRITERION_HEAT || !(given->ripple_w > 0))
        return formula;
    return FORMULA(sheet, "%s + (k I_line)² ESR, %s", formula,
                   figure(sheet, given->ripple_w, UNIT_POWER));
}

static void add_criteria(struct sheet_of_working *sheet, const struct capacitor_findings *part,
                         const struct part_working *given)
{
    struct composition *composition = sheet->composition;
    for (size_t i = 0; i < part->criterion_count; i++) {
        const struct criterion *criterion = &part->criteria[i];
        const char *limit = criterion_limit(sheet, criterion);
        const char *value = criterion_figure(sheet, criterion);
        const char *name =
            phrase_in(&composition->say, "criterion", criterion_key_text(criterion->key));
        const char *parts[] = {
            name,
            criterion->joint ? say(sheet, "joint") : NULL,
            criterion->rule,
            whole_formula(sheet, given, criterion->key),
            limit ? FORMULA(sheet, "%s %s", criterion->upper ? "≤" : "≥", limit) : NULL,
        };
        add(sheet, "criterion", text_join(composition->arena, ", ", parts, 5),
            FORMULA(sheet, "%s; %s", value ? value : "",
                    phrase_in(&composition->say, "outcome", outcome_text(criterion->outcome))),
            criterion->source == SOURCE_POLICY ? say(sheet, "policy")
                                               : source(sheet, criterion->source));
    }
}

static void add_limit(struct sheet_of_working *sheet, const struct capacitor_findings *part)
{
    if (!isfinite(part->limit_a))
        return;
    add(sheet, "limit_warm",
        part->ageing_margin > 1 ? FORMULA(sheet, "%s, ÷ %s", say(sheet, "largest_leak"),
                                          plain(sheet, part->ageing_margin, 2))
                                : say(sheet, part->limit_is_heat ? "largest_heat" : "largest_leak"),
        amps(sheet, part->limit_a), NULL);
    add(sheet, "limit_bench", FORMULA(sheet, "÷ %s", plain(sheet, part->temperature_factor, 3)),
        amps(sheet, part->bench_limit_a), NULL);
    if (isfinite(part->test_limit_a))
        add(sheet, "limit_test",
            FORMULA(sheet, "%s %s", say(sheet, "at"), figure(sheet, part->test_v, UNIT_VOLTAGE)),
            amps(sheet, part->test_limit_a), NULL);
}

static void capacitor_lines(struct sheet_of_working *sheet, size_t index)
{
    const struct capacitor_findings *part = &sheet->composition->findings->capacitors[index];
    const struct part_working *given = &sheet->composition->findings->bench.workings[index];
    if (part->deciding >= 0) {
        add_reading(sheet, part, given);
        add_absorption(sheet, part);
        add_scaling(sheet, part, given);
    }
    add_facts(sheet, given);
    add_stage(sheet, given);
    add_criteria(sheet, part, given);
    add_limit(sheet, part);
    add(sheet, "outcome", part->why_text,
        phrase_in(&sheet->composition->say, "outcome", outcome_text(part->outcome)),
        source(sheet, SOURCE_ILAC_G8));
}

/* ---- other parts */

static void held_line(struct sheet_of_working *sheet, const char *key, const char *formula,
                      const struct held *held)
{
    const char *limits = held_limits(sheet->composition, held);
    const char *words = held_words(sheet->composition, held);
    if (!isfinite(held->value) && held->outcome == OUTCOME_NOT_JUDGED)
        return;
    add(sheet, key,
        FORMULA(sheet, "%s%s%s", formula ? formula : "", formula && limits ? "; " : "",
                limits ? limits : ""),
        FORMULA(sheet, "%s%s%s", uncertain(sheet, held->value, held->uncertainty, held->unit),
                words ? "; " : "", words ? words : ""),
        held->source == SOURCE_POLICY ? say(sheet, "policy") : source(sheet, held->source));
}

static void resistor_lines(struct sheet_of_working *sheet, size_t index)
{
    const struct resistor_findings *found = &sheet->composition->findings->bench.resistors[index];
    held_line(sheet, "deviation", "R/R_marked − 1", &found->tolerance);
    held_line(sheet, "dissipation", "V²/R", &found->dissipation);
    if (found->stage)
        add(sheet, "stage_effect", FORMULA(sheet, "I_k/I_k0 − 1; %s", found->stage),
            figure(sheet, found->effect_percent, UNIT_PERCENT),
            source(sheet, SOURCE_THREE_HALVES_LAW));
}

static void winding_lines(struct sheet_of_working *sheet, size_t index)
{
    const struct winding_findings *found = &sheet->composition->findings->bench.windings[index];
    if (isfinite(found->expected_ohm))
        add(sheet, "expected",
            FORMULA(sheet, "R_20 (1 + 0.00393 (T − 20 °C)); T %s",
                    figure(sheet, found->temperature_c, UNIT_TEMPERATURE)),
            figure(sheet, found->expected_ohm, UNIT_RESISTANCE), source(sheet, SOURCE_COPPER));
    held_line(sheet, "deviation", "R/R_T − 1", &found->resistance);
    held_line(sheet, "insulation", NULL, &found->insulation);
}

static void valve_lines(struct sheet_of_working *sheet, size_t index)
{
    const struct valve_findings *found = &sheet->composition->findings->bench.valves[index];
    held_line(sheet, "tested", found->tester, &found->share);
}

/* ---- which part */

typedef void lines_of(struct sheet_of_working *sheet, size_t index);

/* Lines of one part of the job; the n-th of capacitors, resistors, windings, valves in turn. */
static const char *part_at(const struct composition *composition, size_t number, lines_of **lines,
                           size_t *index)
{
    const struct job *job = composition->job;
    const size_t counts[] = {job->capacitor_count, job->resistor_count, job->winding_count,
                             job->valve_count};
    static lines_of *const makers[] = {capacitor_lines, resistor_lines, winding_lines, valve_lines};
    for (size_t kind = 0; kind < sizeof counts / sizeof *counts; kind++) {
        if (number >= counts[kind]) {
            number -= counts[kind];
            continue;
        }
        *lines = makers[kind];
        *index = number;
        return kind == 0   ? job->capacitors[number].ref
               : kind == 1 ? job->resistors[number].ref
               : kind == 2 ? job->windings[number].ref
                           : job->valves[number].ref;
    }
    return NULL;
}

bool working_find(const struct composition *composition, const char *ref, size_t *number)
{
    lines_of *lines;
    size_t index;
    const char *name;
    for (size_t i = 0; (name = part_at(composition, i, &lines, &index)); i++)
        if (strcasecmp(name, ref) == 0) {
            *number = i;
            return true;
        }
    return false;
}

void exhibit_working(struct composition *composition, size_t index)
{
    if (!composition->findings->bench.workings)
        return;
    lines_of *lines = NULL;
    size_t part = 0;
    size_t number = composition->working_of ? composition->working_of - 1 : index;
    const char *ref = part_at(composition, number, &lines, &part);
    if (!ref)
        return;
    struct exhibit *exhibit = exhibit_begin(
        composition, EXHIBIT_WORKING, arena_print(composition->arena, "working-%zu", number + 1));
    exhibit->working.heading = phrase(&composition->say, "working.heading", "ref", ref, NULL);
    exhibit->working.lines =
        arena_array(composition->arena, LINES_MAX, sizeof *exhibit->working.lines);
    exhibit->working.screen_only = composition->kind == DOCUMENT_RECORD;
    struct sheet_of_working sheet = {composition, &exhibit->working};
    lines(&sheet, part);
    if (exhibit->working.line_count)
        exhibit_place(composition, exhibit);
}
