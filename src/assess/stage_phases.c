/*
 * The stages as designed, found and left, and what the set itself showed: how far leakage explains
 * the grid volts measured. Methods: "Stage".
 */
#include "assess/assessment.h"

#include "assess/reconcile.h"

#include <math.h>
#include <string.h>

static const double near_rating_share = 0.85;

/* What a part leaks into its stage in a phase: cold on the bench, and warm; 0: nothing known. */
struct phase_leak {
    double cold_s, warm_s;
};

static struct phase_leak of_leak(const struct leak *leak, enum bound bound, double service_v)
{
    struct phase_leak result = {leak->service_a / service_v, leak->conductance_s};
    if (bound == BOUND_UNDER) /* anything from nothing up to the bound */
        result.cold_s = 0;
    return result;
}

/* The last reading on a new part; -1: none. */
static int last_left(const struct capacitor_findings *part)
{
    int last = -1;
    for (size_t i = 0; i < part->reading_count; i++)
        if (part->readings[i].reading->state == READING_LEFT &&
            !part->readings[i].reading->in_circuit)
            last = (int)i;
    return last;
}

static struct phase_leak leak_in(const struct assessment *assessment, size_t index,
                                 enum phase phase)
{
    const struct part_work *work = &assessment->work[index];
    const struct capacitor_findings *part = &assessment->capacitors[index];
    struct phase_leak none = {0, 0};
    if (phase == PHASE_DESIGNED || !(part->service_v > 0))
        return none;
    if (phase == PHASE_FOUND)
        return work->leaks_found
                   ? of_leak(&work->leak_found, part->readings[part->deciding_found].bound,
                             part->service_v)
                   : none;
    const struct marking *fitted = part_fitted(assessment->job, part->part);
    if (part_is_new(work->done, fitted)) {
        int left = last_left(part);
        if (left < 0)
            return none;
        struct leak_case given = part_leak_case(assessment, index, left);
        struct leak leak = leak_of(&given);
        return of_leak(&leak, part->readings[left].bound, part->service_v);
    }
    if (work->done == DONE_DISCONNECTED || !work->leaks)
        return none;
    return of_leak(&work->leak, part->readings[part->deciding].bound, part->service_v);
}

static void add_leaks(const struct assessment *assessment, const struct stage_group *group,
                      enum phase phase, bool warm, struct stage_circuit *circuits)
{
    memcpy(circuits, group->circuits[phase], group->count * sizeof *circuits);
    for (size_t i = 0; i < assessment->job->capacitor_count; i++) {
        const struct place_case *place = &assessment->work[i].place;
        if (place->group != group || place->screen_as_rail)
            continue;
        struct phase_leak in = leak_in(assessment, i, phase);
        struct stage_leak leak = place_leak(place, warm ? in.warm_s : in.cold_s);
        if (leak.leak_s > 0)
            stage_add_leak(&assessment->stages, group, circuits, &leak);
    }
}

static bool leaks_into(const struct assessment *assessment, const struct stage_group *group,
                       enum phase phase)
{
    for (size_t i = 0; i < assessment->job->capacitor_count; i++)
        if (assessment->work[i].place.group == group && leak_in(assessment, i, phase).warm_s > 0)
            return true;
    return false;
}

static struct stage_solution unknown_solution(void)
{
    return (struct stage_solution){.status = SOLVE_IMPOSSIBLE,
                                   .grid_v = NAN,
                                   .cathode_v = NAN,
                                   .anode_v = NAN,
                                   .screen_v = NAN,
                                   .anode_a = NAN,
                                   .screen_a = NAN,
                                   .cathode_a = NAN,
                                   .grid_a = NAN,
                                   .anode_w = NAN,
                                   .screen_w = NAN,
                                   .screen_resistor_w = NAN,
                                   .return_v = NAN};
}

static void solve_phase(const struct assessment *assessment, const struct stage_group *group,
                        enum phase phase, struct stage_findings *stages)
{
    struct stage_solution cold[STAGE_GROUP_MAX], warm[STAGE_GROUP_MAX];
    memcpy(cold, group->bare[phase], sizeof cold);
    memcpy(warm, group->bare[phase], sizeof warm);
    bool possible = group->bare[phase][0].status != SOLVE_IMPOSSIBLE;
    bool open = phase != PHASE_DESIGNED &&
                stage_group_open(&assessment->stages, group, phase == PHASE_LEFT);
    if (possible && leaks_into(assessment, group, phase)) {
        struct stage_circuit circuits[STAGE_GROUP_MAX];
        add_leaks(assessment, group, phase, false, circuits);
        possible = stages_solve(circuits, group->count, cold) != SOLVE_IMPOSSIBLE;
        add_leaks(assessment, group, phase, true, circuits);
        possible = possible && stages_solve(circuits, group->count, warm) != SOLVE_IMPOSSIBLE;
    }
    for (size_t i = 0; i < group->count; i++) {
        struct stage_phase *found = &stages[group->members[i]].phases[phase];
        found->solution = warm[i];
        found->judged =
            possible && !open && (warm[i].status == SOLVE_OK || warm[i].status == SOLVE_BOTTOMED);
        found->why = open ? WHY_OPEN_RESISTOR : found->judged ? WHY_NONE : WHY_STAGE;
        if (open) {
            found->solution = unknown_solution();
            continue;
        }
        found->no_leak_cathode_a = group->bare[phase][i].cathode_a;
        found->grid_cold_v = cold[i].grid_v;
        found->grid_warm_v = warm[i].grid_v;
    }
}

static void begin(const struct stage_model *model, struct stage_findings *findings)
{
    const struct valve_row *row = model->row;
    bool given = row == &model->given;
    *findings = (struct stage_findings){
        .stage = model->stage,
        .row = given ? NULL : row,
        .row_name = row ? row->name : NULL,
        .row_source = given ? SOURCE_JOB
                      : row ? SOURCE_VALVE_BOOK
                            : SOURCE_NONE,
        .row_trust = row ? row->row_trust : TRUST_RECALLED,
        .row_source_text = row ? row->source : NULL,
        .row_given = given,
        .law_status = model->law_status,
        .anode_max_w = row ? row->pa_max_w : NAN,
        .screen_max_w = row ? row->pg2_max_w : NAN,
        .grid_current_a = NAN,
        .grid_current_error_a = NAN,
        .is_output = model->is_output,
    };
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        findings->phases[phase] = (struct stage_phase){.why = model->why,
                                                       .missing = model->missing,
                                                       .solution = unknown_solution(),
                                                       .no_leak_cathode_a = NAN,
                                                       .grid_cold_v = NAN,
                                                       .grid_warm_v = NAN};
}

/* What leakage does not explain, by what was read last. */
static void take_grid_current(const struct reconciled_findings *reconciled,
                              struct stage_findings *findings)
{
    const struct stage *stage = findings->stage;
    enum phase phase = stage->left.set && stage->left.grid.set ? PHASE_LEFT : PHASE_FOUND;
    findings->grid_current_a = reconciled->phases[phase].grid_current_a;
    findings->grid_current_error_a = reconciled->phases[phase].grid_current_error_a;
    findings->grid_current_advice = !isnan(findings->grid_current_a);
}

static bool is_near(double watts, double rating_w)
{
    return rating_w > 0 && watts >= near_rating_share * rating_w;
}

const struct stage_findings *stage_phases(struct assessment *assessment)
{
    const struct stage_set *set = &assessment->stages;
    struct stage_findings *stages = arena_array(assessment->arena, set->count + 1, sizeof *stages);
    for (size_t i = 0; i < set->count; i++)
        begin(&set->models[i], &stages[i]);
    for (size_t i = 0; i < set->group_count; i++)
        for (int phase = 0; phase < PHASE_COUNT; phase++)
            solve_phase(assessment, &set->groups[i], phase, stages);
    for (size_t i = 0; i < set->count; i++) {
        const struct stage_model *model = &set->models[i];
        if (model->why != WHY_NONE)
            continue;
        const struct stage_solution *bare =
            &set->groups[model->group].bare[PHASE_FOUND][model->slot];
        stages[i].near_rating =
            bare->status == SOLVE_OK && (is_near(bare->anode_w, stages[i].anode_max_w) ||
                                         is_near(bare->screen_w, stages[i].screen_max_w));
        struct reconciled_findings reconciled = reconcile_stage(assessment, &stages[i], i);
        take_grid_current(&reconciled, &stages[i]);
    }
    return stages;
}
