#include "assess/bench.h"

#include "assess/component_date.h"
#include "assess/part_working.h"
#include "assess/performance.h"
#include "assess/reconcile.h"
#include "assess/reforming.h"
#include "assess/replacement.h"
#include "assess/resistor.h"
#include "assess/safety.h"
#include "assess/sheet_voltage.h"
#include "assess/supply.h"
#include "assess/valve_test.h"
#include "assess/winding.h"

static struct reforming_case reforming_of(const struct assessment *assessment, size_t capacitor)
{
    return (struct reforming_case){assessment->job, assessment->policy,
                                   &assessment->capacitors[capacitor], assessment->bench_c};
}

static void assess_reforms(const struct assessment *assessment, struct bench_findings *bench)
{
    const struct job *job = assessment->job;
    const struct reform_plan **plans =
        arena_array(assessment->arena, job->capacitor_count + 1, sizeof *plans);
    for (size_t i = 0; i < job->capacitor_count; i++) {
        struct reforming_case given = reforming_of(assessment, i);
        struct reform_plan plan;
        if (!reforming_wanted(&given, part_action(job, &job->capacitors[i])) ||
            !reforming_plan(&given, &plan))
            continue;
        struct reform_plan *kept = arena_get(assessment->arena, sizeof *kept);
        *kept = plan;
        plans[i] = kept;
    }
    struct reform_findings *reforms =
        arena_array(assessment->arena, job->reform_count + 1, sizeof *reforms);
    for (size_t i = 0; i < job->reform_count; i++) {
        const struct reform *reform = &job->reforms[i];
        if (reform->capacitor == NOT_LISTED)
            continue; /* its ref was no capacitor: an error already */
        struct reforming_case given = reforming_of(assessment, (size_t)reform->capacitor);
        reforms[i] = reforming_assess(&given, reform, assessment->arena, assessment->diagnostics);
    }
    bench->plans = plans;
    bench->reforms = reforms;
}

static void assess_parts(const struct assessment *assessment, struct bench_findings *bench)
{
    const struct job *job = assessment->job;
    struct arena *arena = assessment->arena;
    struct resistor_findings *resistors =
        arena_array(arena, job->resistor_count + 1, sizeof *resistors);
    struct winding_findings *windings =
        arena_array(arena, job->winding_count + 1, sizeof *windings);
    struct valve_findings *valves = arena_array(arena, job->valve_count + 1, sizeof *valves);
    for (size_t i = 0; i < job->resistor_count; i++)
        resistors[i] = resistor_assess(assessment, i);
    for (size_t i = 0; i < job->winding_count; i++)
        windings[i] = winding_assess(job, assessment->policy, assessment->bench_c, i);
    for (size_t i = 0; i < job->valve_count; i++)
        valves[i] = valve_test_assess(job, assessment->policy, i, arena);
    bench->resistors = resistors;
    bench->windings = windings;
    bench->valves = valves;
}

static void assess_set(const struct assessment *assessment, struct bench_findings *bench)
{
    const struct job *job = assessment->job;
    struct arena *arena = assessment->arena;
    struct performance_findings *performance =
        arena_array(arena, job->performance_count + 1, sizeof *performance);
    struct safety_findings *safety = arena_array(arena, job->safety_count + 1, sizeof *safety);
    for (size_t i = 0; i < job->performance_count; i++)
        performance[i] = performance_assess(&job->performance[i]);
    for (size_t i = 0; i < job->safety_count; i++)
        safety[i] = safety_assess(job, assessment->policy, &job->safety[i]);
    bench->performance = performance;
    bench->safety = safety;
    bench->voltages =
        sheet_voltages_assess(job, assessment->policy, arena, assessment->diagnostics);
    bench->nodes = supply_assess(job, arena, assessment->diagnostics, &bench->node_count);
}

void bench_assess_job(const struct assessment *assessment, struct findings *findings)
{
    struct bench_findings *bench = &findings->bench;
    struct arena *arena = assessment->arena;
    assess_reforms(assessment, bench);
    assess_parts(assessment, bench);
    assess_set(assessment, bench);
    bench->replacements =
        replacements_assess(findings, arena, assessment->diagnostics, &bench->replacement_count);
    bench->dates =
        component_dates_assess(assessment->job, arena, assessment->diagnostics, &bench->date_count);
    struct part_working *workings =
        arena_array(arena, findings->capacitor_count + 1, sizeof *workings);
    for (size_t i = 0; i < findings->capacitor_count; i++)
        workings[i] = part_working_of(assessment, findings->stages, i);
    bench->workings = workings;
    struct reconciled_findings *reconciled =
        arena_array(arena, findings->stage_count + 1, sizeof *reconciled);
    for (size_t i = 0; i < findings->stage_count; i++)
        reconciled[i] = reconcile_stage(assessment, &findings->stages[i], i);
    bench->reconciled = reconciled;
}
