/* What the methods section lists: the limits that this record used, and where figures come from. */
#include "report/composition.h"

#include <string.h>

/* ---- shop policy */

#define USES(criterion) (1u << CRITERION_##criterion)
#define EVERYWHERE      0u
#define SAID_ELSEWHERE  (1u << 31) /* in the section's text; listed when the shop changed it */

/* Held against something besides a leakage: which list of the job. */
enum { LIST_VOLTAGES, LIST_WINDINGS, LIST_VALVES, LIST_REFORMS };
#define OF_LIST(list) (SAID_ELSEWHERE | (1u << LIST_##list))

_Static_assert(CRITERION_COUNT < 31, "a bit for each criterion");

/* One limit: which member, how it is written, which figures are held against it. */
static const struct policy_row {
    const char *key; /* of `policy.` */
    size_t offset;
    enum unit unit;
    double factor; /* from the member to the unit: 100 for a fraction in per cent */
    unsigned criteria;
} rows[] = {
#define ROW(member, unit, factor, criteria)                                                        \
    {                                                                                              \
#member, offsetof(struct policy, member), unit, factor, criteria                           \
    }
    ROW(guard_band, UNIT_NONE, 1, SAID_ELSEWHERE),
    ROW(instrument_share, UNIT_PERCENT, 100, SAID_ELSEWHERE),
    ROW(cathode_current_rise, UNIT_PERCENT, 100, USES(CATHODE_CURRENT)),
    ROW(dissipation_share, UNIT_PERCENT, 100, USES(ANODE_DISSIPATION) | USES(SCREEN_DISSIPATION)),
    ROW(pushpull_difference, UNIT_PERCENT, 100, USES(PUSHPULL_DIFFERENCE)),
    ROW(grid_shift, UNIT_PERCENT, 100, USES(GRID_SHIFT)),
    ROW(avc_line_loss, UNIT_PERCENT, 100, USES(LINE_LOSS)),
    ROW(avc_feed_v, UNIT_VOLTAGE, 1, USES(LINE_VOLTS)),
    ROW(avc_feed_bias_share, UNIT_PERCENT, 100, USES(LINE_VOLTS)),
    ROW(screen_fall, UNIT_PERCENT, 100, USES(SCREEN_FALL)),
    ROW(rail_drop, UNIT_PERCENT, 100, USES(RAIL_DROP)),
    ROW(ht_current_share, UNIT_PERCENT, 100, USES(HT_SHARE)),
    ROW(detector_control_v, UNIT_VOLTAGE, 1, USES(CONTROL_VOLTS)),
    ROW(detector_grid_share, UNIT_PERCENT, 100, USES(CONTROL_VOLTS)),
    ROW(tuning_resistance_ratio, UNIT_NONE, 1, USES(CIRCUIT_RATIO)),
    ROW(battery_share, UNIT_PERCENT, 100, USES(BATTERY_SHARE)),
    ROW(battery_before_switch_a, UNIT_CURRENT, 1, USES(BATTERY_SHARE)),
    ROW(heat_paper_w, UNIT_POWER, 1, USES(HEAT)),
    ROW(heat_can_w, UNIT_POWER, 1, USES(HEAT)),
    ROW(heat_tubular_w, UNIT_POWER, 1, USES(HEAT)),
    ROW(isolator_insulation_ohm, UNIT_RESISTANCE, 1, USES(INSULATION)),
    ROW(touch_current_a, UNIT_CURRENT, 1, USES(TOUCH_CURRENT)),
    ROW(mains_rise, UNIT_NONE, 1, USES(TOUCH_CURRENT) | USES(RATED_VOLTS)),
    ROW(ageing_margin_waxed, UNIT_NONE, 1, SAID_ELSEWHERE),
    ROW(ageing_margin_other, UNIT_NONE, 1, SAID_ELSEWHERE),
    ROW(working_c, UNIT_TEMPERATURE, 1, SAID_ELSEWHERE),
    ROW(working_near_heat_c, UNIT_TEMPERATURE, 1, SAID_ELSEWHERE),
    ROW(default_accuracy, UNIT_PERCENT, 100, SAID_ELSEWHERE),
    ROW(volts_accuracy, UNIT_PERCENT, 100, EVERYWHERE),
    ROW(repeatability, UNIT_PERCENT, 100, EVERYWHERE),
    ROW(voltage_tolerance, UNIT_PERCENT, 100, OF_LIST(VOLTAGES)),
    ROW(winding_tolerance, UNIT_PERCENT, 100, OF_LIST(WINDINGS)),
    ROW(valve_least, UNIT_PERCENT, 100, OF_LIST(VALVES)),
    ROW(reform_current_a, UNIT_CURRENT, 1, OF_LIST(REFORMS)),
    ROW(reform_power_w, UNIT_POWER, 1, OF_LIST(REFORMS)),
#undef ROW
};

static double policy_value(const struct policy *policy, const struct policy_row *row)
{
    return *(const double *)(const void *)((const char *)policy + row->offset);
}

/* A bit for each criterion that a part of the record was held against. */
static unsigned criteria_of(const struct findings *findings)
{
    unsigned criteria = 0;
    for (size_t i = 0; i < findings->capacitor_count; i++)
        for (size_t j = 0; j < findings->capacitors[i].criterion_count; j++)
            criteria |= 1u << findings->capacitors[i].criteria[j].key;
    return criteria;
}

/* A bit for each list of the job that has anything in it. */
static unsigned lists_of(const struct job *job)
{
    return (job->voltages.point_count > 0) << LIST_VOLTAGES |
           (job->winding_count > 0) << LIST_WINDINGS | (job->valve_count > 0) << LIST_VALVES |
           (job->reform_count > 0) << LIST_REFORMS;
}

static bool is_listed(const struct policy_row *row, unsigned criteria, unsigned lists, bool changed)
{
    if (row->criteria & SAID_ELSEWHERE)
        return changed || (row->criteria & ~SAID_ELSEWHERE & lists);
    return row->criteria == EVERYWHERE || row->criteria & criteria;
}

static const char *policy_text(const struct composition *composition, double value,
                               const struct policy_row *row)
{
    struct quantity quantity = {.set = true, .value = value * row->factor, .unit = row->unit};
    return text_quantity(composition, &quantity);
}

static void put_policy(const struct composition *composition, struct mustache_value *root)
{
    const struct shop defaults = shop_default();
    unsigned criteria = criteria_of(composition->findings);
    unsigned lists = lists_of(composition->job);
    struct arena *arena = composition->arena;
    struct mustache_value *list = mustache_list(arena);
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double value = policy_value(&composition->shop->policy, &rows[i]);
        double usual = policy_value(&defaults.policy, &rows[i]);
        bool changed = value != usual;
        if (!is_listed(&rows[i], criteria, lists, changed))
            continue;
        struct mustache_value *item = mustache_map(arena);
        mustache_set_text(arena, item, "name", phrase_in(&composition->say, "policy", rows[i].key));
        mustache_set_text(arena, item, "value", policy_text(composition, value, &rows[i]));
        mustache_set_text(arena, item, "usual",
                          changed ? policy_text(composition, usual, &rows[i]) : NULL);
        mustache_set_flag(arena, item, "more", list->count > 0);
        mustache_push(arena, list, item);
    }
    mustache_set(arena, root, "policy", list);
}

/* ---- sources */

static void mark_source(bool *used, enum source_key source)
{
    if (source != SOURCE_NONE && source != SOURCE_POLICY && source < SOURCE_COUNT)
        used[source] = true;
}

static void mark_used(const struct findings *findings, bool *used)
{
    mark_source(used, SOURCE_GUM);
    mark_source(used, SOURCE_ILAC_G8);
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        const struct capacitor_findings *part = &findings->capacitors[i];
        for (size_t j = 0; j < part->criterion_count; j++)
            mark_source(used, part->criteria[j].source);
        for (size_t j = 0; j < part->other_rule_count; j++)
            mark_source(used, part->other_rules[j].source);
        if (part->deciding >= 0)
            mark_source(used, part->theta_source);
        if (part->absorption.status == ABSORPTION_RESOLVED)
            mark_source(used, SOURCE_CURIE_VON_SCHWEIDLER);
    }
    for (size_t i = 0; i < findings->stage_count; i++) {
        mark_source(used, findings->stages[i].row_source);
        if (findings->stages[i].phases[PHASE_DESIGNED].judged)
            mark_source(used, SOURCE_THREE_HALVES_LAW);
    }
}

static void mark_held(bool *used, const struct held *held)
{
    if (held->outcome != OUTCOME_NOT_JUDGED)
        mark_source(used, held->source);
}

/* What the bench was held against. */
static void mark_bench(const struct findings *findings, bool *used)
{
    const struct bench_findings *bench = &findings->bench;
    const struct job *job = findings->job;
    if (!bench->resistors) /* not assessed */
        return;
    for (size_t i = 0; i < job->reform_count; i++)
        mark_held(used, &bench->reforms[i].rest);
    for (size_t i = 0; i < job->resistor_count; i++)
        mark_held(used, &bench->resistors[i].tolerance);
    for (size_t i = 0; i < job->winding_count; i++) {
        mark_held(used, &bench->windings[i].resistance);
        mark_held(used, &bench->windings[i].insulation);
        if (bench->windings[i].resistance.outcome != OUTCOME_NOT_JUDGED)
            mark_source(used, SOURCE_COPPER);
    }
    for (size_t i = 0; i < job->voltages.point_count; i++)
        for (int k = 0; k < 2; k++)
            mark_held(used, &bench->voltages[i].compared[k]);
    for (size_t i = 0; i < job->safety_count; i++)
        mark_held(used, &bench->safety[i].value);
    for (size_t i = 0; i < bench->replacement_count; i++)
        for (size_t k = 0; k < REPLACEMENT_CHECK_COUNT; k++)
            if (bench->replacements[i].checked[k])
                mark_held(used, &bench->replacements[i].checks[k]);
    for (size_t i = 0; i < bench->date_count; i++)
        if (bench->dates[i].known)
            mark_source(used, bench->dates[i].code.source);
    for (size_t i = 0; i < bench->node_count; i++)
        if (bench->nodes[i].judged)
            mark_source(used, SOURCE_RIPPLE);
}

const char *trust_words(const struct composition *composition, enum trust trust)
{
    return phrase_in(&composition->say, "trust", trust_text(trust));
}

static bool is_used(const bool *used, size_t index, int trust)
{
    return used[index] && (int)source_row((enum source_key)index)->trust == trust;
}

/* Sources of one kind of trust: "trust", and "titles" of "title". */
static struct mustache_value *sources_known(const struct composition *composition, const bool *used,
                                            int trust)
{
    struct arena *arena = composition->arena;
    struct mustache_value *titles = mustache_list(arena), *map = mustache_map(arena);
    for (size_t i = 0; i < SOURCE_COUNT; i++) {
        if (!is_used(used, i, trust))
            continue;
        struct mustache_value *item = mustache_map(arena);
        mustache_set_text(arena, item, "title", source_row((enum source_key)i)->title);
        mustache_set_flag(arena, item, "more", titles->count > 0);
        mustache_push(arena, titles, item);
    }
    if (titles->count == 0)
        return NULL;
    mustache_set_text(arena, map, "trust",
                      text_sentence(arena, trust_words(composition, (enum trust)trust)));
    mustache_set(arena, map, "titles", titles);
    return map;
}

static void put_sources(const struct composition *composition, struct mustache_value *root)
{
    bool used[SOURCE_COUNT] = {false};
    mark_used(composition->findings, used);
    mark_bench(composition->findings, used);
    struct mustache_value *list = mustache_list(composition->arena);
    for (int trust = 0; trust <= TRUST_DERIVED; trust++) {
        struct mustache_value *known = sources_known(composition, used, trust);
        if (known)
            mustache_push(composition->arena, list, known);
    }
    mustache_set(composition->arena, root, "sources", list);
}

void methods_values(struct composition *composition, struct mustache_value *root)
{
    put_policy(composition, root);
    put_sources(composition, root);
}
