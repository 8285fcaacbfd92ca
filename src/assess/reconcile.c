#include "assess/reconcile.h"

#include "assess/accuracy.h"
#include "assess/held.h"

#include <math.h>

/* A real valve against the book's. */
static const double valve_spread = 0.25;

double reconcile_law_bound(bool cathode_bias, double emf_share, bool without_gm)
{
    static const struct {
        double share, bound;
    } by_cathode[] = {{1, 0.05}, {2, 0.08}}, fixed[] = {{0.25, 0.10}, {0.5, 0.20}, {1, 0.45}};
    if (without_gm)
        return 0.30;
    size_t count = cathode_bias ? 2 : 3;
    for (size_t i = 0; i < count; i++) {
        double share = cathode_bias ? by_cathode[i].share : fixed[i].share;
        if (emf_share <= share)
            return cathode_bias ? by_cathode[i].bound : fixed[i].bound;
    }
    return NAN;
}

struct stage_case {
    const struct assessment *assessment;
    const struct stage_model *model;
    const struct stage_findings *stage;
    enum phase phase;
    const struct stage_reading *read;
    const struct stage_solution *at; /* with the leaks that were there when it was read */
};

/* Expanded, V: what the readings of the coupling parts leave open of the volts they explain. */
static double leak_uncertainty(const struct stage_case *given, double explained_v)
{
    const struct assessment *assessment = given->assessment;
    double relative = 0;
    for (size_t i = 0; i < assessment->job->capacitor_count; i++) {
        const struct capacitor_findings *part = &assessment->capacitors[i];
        if (part->part->place != PLACE_COUPLING || !(part->leakage_warm_a > 0))
            continue;
        for (size_t k = 0; k < part->part->stage_count; k++)
            if (&assessment->job->stages[part->part->stages[k]] == given->stage->stage)
                relative = fmax(relative, part->uncertainty_a / part->leakage_warm_a);
    }
    return fabs(explained_v) * relative;
}

static struct reconciled_node unknown_node(void)
{
    return (struct reconciled_node){NAN, NAN, NAN, NAN, NAN};
}

/* Volts beyond the predicted range and its bound; the meter's own uncertainty is in the bound. */
static struct reconciled_node compare(const struct stage_case *given,
                                      const struct quantity *measured, double low_v, double high_v,
                                      double bound_v)
{
    struct reconciled_node node = unknown_node();
    if (!measured->set || measured->bound != BOUND_NONE || !isfinite(low_v) || !isfinite(high_v) ||
        isnan(bound_v))
        return node;
    double u_v = held_uncertainty(given->assessment->job, given->assessment->policy, measured);
    node = (struct reconciled_node){.measured_v = measured->value,
                                    .low_v = low_v,
                                    .high_v = high_v,
                                    .bound_v = hypot(bound_v, u_v)};
    double above = measured->value - high_v - node.bound_v;
    double below = low_v - node.bound_v - measured->value;
    node.unexplained_v = above > 0 ? above : below > 0 ? -below : 0;
    return node;
}

/* Where the grid stands without a meter, parts cold and warm. */
static void explained_grid(const struct stage_case *given, double *cold_v, double *warm_v)
{
    const struct stage_phase *found = &given->stage->phases[given->phase];
    *cold_v = given->read->parts_lifted ? given->at->grid_v : found->grid_cold_v;
    *warm_v = given->read->parts_lifted ? given->at->grid_v : found->grid_warm_v;
}

/* The meter loads the grid: it sees R_g || R_m, and only volts above the explained range, read
   through that, are called grid current. */
static void reconcile_grid(const struct stage_case *given, struct reconciled_phase *phase)
{
    double leak_ohm = given->model->ohms[given->phase][STAGE_GRID_LEAK];
    if (!(leak_ohm > 0))
        return;
    double meter = voltmeter_ohm(given->assessment->job, NULL);
    double seen_ohm = 1 / (1 / leak_ohm + 1 / meter), loading = seen_ohm / leak_ohm;
    double cold_v, warm_v;
    explained_grid(given, &cold_v, &warm_v);
    double high_v = fmax(cold_v, warm_v) * loading;
    double leak_u_v = given->read->parts_lifted
                          ? 0
                          : leak_uncertainty(given, (warm_v - given->at->return_v) * loading);
    struct reconciled_node *grid = &phase->nodes[NODE_GRID];
    *grid = compare(given, &given->read->grid, fmin(cold_v, warm_v) * loading, high_v, leak_u_v);
    if (!(grid->unexplained_v > 0))
        return;
    phase->grid_current_a = (grid->measured_v - high_v) / seen_ohm;
    phase->grid_current_error_a = grid->bound_v / seen_ohm;
}

/* Another stage's current flows through the cathode resistor as well. */
static bool shares_cathode(const struct stage_case *given)
{
    const struct stage_set *set = &given->assessment->stages;
    int node = given->model->circuits[given->phase].cathode_node;
    for (size_t i = 0; i < set->count && node >= 0; i++)
        if (&set->models[i] != given->model &&
            set->models[i].circuits[given->phase].cathode_node == node)
            return true;
    return false;
}

/* The law's stated bound for what is leaking onto the grid. */
static double law_bound_of(const struct stage_case *given)
{
    const struct stage_group *group = &given->assessment->stages.groups[given->model->group];
    const struct stage_solution *bare = &group->bare[given->phase][given->model->slot];
    enum bias_kind bias = given->stage->stage->bias;
    double bias_v = fabs(bare->grid_v - bare->cathode_v);
    double emf_v = fabs(given->at->grid_v - bare->grid_v);
    return reconcile_law_bound(bias == BIAS_CATHODE || bias == BIAS_BACK,
                               bias_v > 0 ? emf_v / bias_v : NAN, given->model->law.without_gm);
}

static void reconcile_phase(const struct stage_case *given, double valve_bound,
                            struct reconciled_phase *phase)
{
    const struct stage *stage = given->stage->stage;
    const struct stage_reading *read = given->read;
    const struct stage_solution *at = given->at;
    double cathode_ohm = given->model->ohms[given->phase][STAGE_CATHODE];
    phase->compared = true;
    reconcile_grid(given, phase);
    /* Beyond the stated bounds nothing but the grid is compared. */
    double share = hypot(law_bound_of(given), valve_bound);
    double anode_drop = fabs(stage->supply.value - at->anode_v);
    double screen_drop =
        fabs(quantity_or(&stage->screen_volts, stage->supply.value) - at->screen_v);
    phase->nodes[NODE_CATHODE] =
        compare(given, &read->cathode, at->cathode_v, at->cathode_v, share * fabs(at->cathode_v));
    phase->nodes[NODE_ANODE] =
        compare(given, &read->anode, at->anode_v, at->anode_v, share * anode_drop);
    phase->nodes[NODE_SCREEN] =
        compare(given, &read->screen, at->screen_v, at->screen_v, share * screen_drop);
    if (read->cathode.set && cathode_ohm > 0 && !shares_cathode(given))
        phase->measured_cathode_a = read->cathode.value / cathode_ohm;
}

struct reconciled_findings reconcile_stage(const struct assessment *assessment,
                                           const struct stage_findings *stage, size_t index)
{
    const struct stage_model *model = &assessment->stages.models[index];
    struct reconciled_findings found = {
        .anchor_scale = 1, .law_bound = NAN, .valve_bound = valve_spread};
    for (int phase = 0; phase < PHASE_COUNT; phase++) {
        for (int node = 0; node < STAGE_NODE_COUNT; node++)
            found.phases[phase].nodes[node] = unknown_node();
        found.phases[phase].grid_current_a = NAN;
        found.phases[phase].grid_current_error_a = NAN;
        found.phases[phase].measured_cathode_a = NAN;
    }
    if (model->why != WHY_NONE)
        return found;
    const struct stage_group *group = &assessment->stages.groups[model->group];
    double book_a = model->law.ik0_a;
    found.anchor_scale = group->circuits[PHASE_FOUND][model->slot].law.ik0_a / book_a;
    found.anchored = fabs(found.anchor_scale - 1) > 1e-9;
    if (found.anchored)
        found.valve_bound = 0;
    for (int phase = PHASE_FOUND; phase < PHASE_COUNT; phase++) {
        const struct stage_reading *read =
            phase == PHASE_LEFT ? &stage->stage->left : &stage->stage->found;
        struct stage_case given = {
            assessment,
            model,
            stage,
            (enum phase)phase,
            read,
            read->parts_lifted ? &group->bare[phase][model->slot] : &stage->phases[phase].solution};
        if (phase == PHASE_FOUND)
            found.law_bound = law_bound_of(&given);
        if (read->set && stage->phases[phase].judged)
            reconcile_phase(&given, found.valve_bound, &found.phases[phase]);
    }
    return found;
}
