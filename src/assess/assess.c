/* The order of things: stages, each part alone, parts together, what follows from it. */
#include "assess/assessment.h"

#include "assess/bench.h"
#include "assess/facts.h"
#include "assess/mains.h"
#include "assess/originality.h"
#include "assess/temperature.h"

#include <math.h>

static const double default_bench_c = 20;
/* Peak of the secondary with the mains a tenth high. */
static const double no_load_rise = 1.414 * 1.1;

bool part_is_new(enum action done, const struct marking *fitted)
{
    return done == DONE_RESTUFFED || done == DONE_REPLACED ||
           (done == DONE_DISCONNECTED && fitted->set);
}

struct leak_case part_leak_case(const struct assessment *assessment, size_t index, int reading)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    const struct reading_findings *found = &part->readings[reading];
    return (struct leak_case){.reading = found,
                              .bench = {instrument_of(assessment->job, found->reading->instrument),
                                        assessment->policy, assessment->bench_c},
                              .type = part->part->type,
                              .exponent = part->exponent,
                              .service_v = part->service_v,
                              .working_c = part->working_c};
}

/* ---- what follows for each part */

static void copy_criteria(struct assessment *assessment, size_t index)
{
    const struct judgement *judged = &assessment->work[index].final;
    struct criterion *criteria =
        arena_array(assessment->arena, judged->count + 1, sizeof *criteria);
    for (size_t i = 0; i < judged->count; i++)
        criteria[i] = judged->criteria[i];
    assessment->capacitors[index].criteria = criteria;
    assessment->capacitors[index].criterion_count = judged->count;
}

/* The rule used is among the criteria; the others are printed beside it, outcome and all. */
static void other_rules(struct assessment *assessment, size_t index)
{
    const struct place_case *place = &assessment->work[index].place;
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct marking *marked = &part->part->marked;
    if (!place->electrolytic || !marked->value.set || !marked->rated.set)
        return;
    size_t count;
    const struct leakage_rule *rules = leakage_rules(&count);
    struct criterion *others = arena_array(assessment->arena, count + 1, sizeof *others);
    for (size_t i = 0; i < count; i++) {
        double limit_a;
        enum leakage_status status =
            leakage_limit(&rules[i], marked->value.value, marked->rated.value, &limit_a);
        bool used = !isnan(place->rule_limit_a) && rules[i].source == place->rule.source &&
                    rules[i].coefficient == place->rule.coefficient &&
                    rules[i].constant_ua == place->rule.constant_ua;
        if (used || (status != LEAKAGE_OK && status != LEAKAGE_WARN_VOLTS))
            continue;
        double now_a = assessment->work[index].leaks ? part->leakage_warm_a * place->to_20c : NAN;
        others[part->other_rule_count++] =
            (struct criterion){.key = CRITERION_LEAKAGE_RULE,
                               .value = now_a,
                               .uncertainty = part->uncertainty_a * place->to_20c,
                               .limit = limit_a,
                               .unit = UNIT_CURRENT,
                               .upper = true,
                               .outcome = isnan(now_a)       ? OUTCOME_NOT_JUDGED
                                          : now_a <= limit_a ? OUTCOME_PASS
                                                             : OUTCOME_FAIL,
                               .source = rules[i].source,
                               .rule = rules[i].name};
    }
    part->other_rules = others;
}

static void set_state(struct assessment *assessment, size_t index)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct can *can = part_can(assessment->job, part->part);
    enum action done = assessment->work[index].done;
    bool own = part->part->done != DONE_OPEN;
    struct part_story story = {.was = part_origin(assessment->job, part->part),
                               .done = done,
                               .age = can && !own ? can->age : part->part->age,
                               .tested = part->deciding >= 0};
    part->state = state_of_part(&story);
    part->replaced_unmeasured = (done == DONE_REPLACED || done == DONE_RESTUFFED) &&
                                story.was != WAS_MISSING && part->deciding < 0;
}

static void warn(struct assessment *assessment, struct position at, enum diagnostic_code code,
                 const char *text)
{
    diagnostic_add(assessment->diagnostics, &assessment->job->source, at, code, NULL, "%s", text);
}

static void warn_electrolytic(struct assessment *assessment, size_t index)
{
    const struct place_case *place = &assessment->work[index].place;
    const struct capacitor *part = assessment->capacitors[index].part;
    struct arena *arena = assessment->arena;
    if (!place->electrolytic)
        return;
    if (place->reversed)
        warn(assessment, part->source_at.line ? part->source_at : part->at,
             DIAGNOSTIC_ELECTROLYTIC_REVERSED,
             arena_print(arena, "%s is an electrolytic with its grid above its source", part->ref));
    if (place->rule_unknown)
        warn(assessment, part->rule.text ? part->rule.at : part->at, DIAGNOSTIC_RULE_UNKNOWN,
             arena_print(arena, "no leakage rule '%s'",
                         part->rule.text ? part->rule.text : assessment->policy->leakage_rule));
    if (place->rule_status == LEAKAGE_WARN_VOLTS || place->rule_status == LEAKAGE_REFUSE_VOLTS)
        warn(assessment, part->marked.at, DIAGNOSTIC_RULE_EDGE,
             arena_print(arena, "%s: %s is not written for %g V", part->ref, place->rule.name,
                         part->marked.rated.value));
    const struct quantity *secondary = &assessment->job->set.ht_secondary;
    if ((part->place == PLACE_RESERVOIR || part->place == PLACE_SMOOTHING) && secondary->set &&
        part->marked.rated.set && secondary->value * no_load_rise > part->marked.rated.value)
        warn(assessment, part->marked.at, DIAGNOSTIC_NO_LOAD_ABOVE_MARKED,
             arena_print(arena, "%s: %.0f V at switch-on with no load, marked %g V", part->ref,
                         secondary->value * no_load_rise, part->marked.rated.value));
}

static void warn_volts(struct assessment *assessment, size_t index)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    if (part->service_above_marked)
        warn(assessment, part->part->marked.at, DIAGNOSTIC_SERVICE_ABOVE_MARKED,
             arena_print(assessment->arena, "%s works at up to %.0f V, marked %g V",
                         part->part->ref, part->service_v, part->part->marked.rated.value));
}

/* What is left in the set may not pass more than the isolators are allowed together. */
static void warn_touch(struct assessment *assessment)
{
    const struct job *job = assessment->job;
    double total_f = mains_isolators(job, true);
    if (!job->set.mains.set || total_f <= 0)
        return;
    double rise_v = assessment->policy->mains_rise * job->set.mains.value;
    double allowed_f =
        mains_touch_capacitance(rise_v, mains_frequency(job), assessment->policy->touch_current_a);
    if (total_f <= allowed_f)
        return;
    const struct capacitor *first = NULL;
    for (size_t i = 0; i < job->capacitor_count && !first; i++)
        if (place_is_isolator(job->capacitors[i].place))
            first = &job->capacitors[i];
    if (first)
        diagnostic_add(assessment->diagnostics, &job->source,
                       first->fitted.set ? first->fitted.at : first->at,
                       DIAGNOSTIC_TOUCH_CURRENT_HIGH,
                       "a smaller value is needed even where the original was larger",
                       "the isolators of the set are %.2f nF together, allowed %.2f nF",
                       total_f * 1e9, allowed_f * 1e9);
}

/* A valve without a row matters where a part that was read is not judged for want of it. */
static void tell_unknown_valves(struct assessment *assessment)
{
    const struct job *job = assessment->job;
    bool *needed = arena_array(assessment->arena, job->stage_count + 1, sizeof *needed);
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor_findings *part = &assessment->capacitors[i];
        for (size_t k = 0; k < part->part->stage_count; k++)
            if (part->deciding >= 0 && part->why == WHY_NO_ROW)
                needed[part->part->stages[k]] = true;
    }
    stages_tell_unknown(&assessment->stages, job, needed, assessment->arena,
                        assessment->diagnostics);
}

static void conclude(struct assessment *assessment, size_t index)
{
    copy_criteria(assessment, index);
    other_rules(assessment, index);
    set_state(assessment, index);
    sheet_plan(assessment, index);
    place_effects(assessment, index);
    advice_give(assessment, index);
    warn_volts(assessment, index);
    warn_electrolytic(assessment, index);
}

struct findings *assess_job(const struct job *job, const struct shop *shop, const char *program,
                            struct arena *arena, struct diagnostics *diagnostics)
{
    size_t count = job->capacitor_count;
    struct assessment assessment = {
        .job = job,
        .shop = shop,
        .policy = &shop->policy,
        .arena = arena,
        .diagnostics = diagnostics,
        .bench_c = quantity_or(&job->conditions.bench, default_bench_c),
        .stages = stages_prepare(job, &shop->policy, arena, diagnostics),
        .work = arena_array(arena, count + 1, sizeof *assessment.work),
        .capacitors = arena_array(arena, count + 1, sizeof *assessment.capacitors)};
    for (size_t i = 0; i < count; i++)
        part_assess(&assessment, i);
    joint_assess(&assessment);
    for (size_t i = 0; i < count; i++)
        conclude(&assessment, i);
    warn_touch(&assessment);
    tell_unknown_valves(&assessment);
    struct findings *findings = arena_get(arena, sizeof *findings);
    *findings = (struct findings){
        .program = program,
        .copy = COPY_SHOP,
        .job = job,
        .shop = shop,
        .in_progress = !job->returned.set,
        .bench_c = assessment.bench_c,
        .working_c = quantity_or(&job->conditions.working, shop->policy.working_c),
        .capacitors = assessment.capacitors,
        .capacitor_count = count,
        .stages = stage_phases(&assessment),
        .stage_count = job->stage_count,
        .originality = originality_count(job, assessment.capacitors),
        .diagnostics = diagnostics,
    };
    bench_assess_job(&assessment, findings);
    return findings;
}
