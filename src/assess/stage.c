#include "assess/stage.h"

#include "assess/accuracy.h"
#include "assess/stage_row.h"
#include "assess/uncertainty.h"

#include <math.h>
#include <string.h>

/* Node numbers: resistors by index, windings and capacitors behind them. */
enum { NODE_NONE = -1, NODE_WINDINGS = 1 << 20, NODE_CAPACITORS = 1 << 21, NODE_STAGES = 1 << 22 };
/* Stands for a grid leak that the job does not give, where none is needed. */
static const double no_grid_leak_ohm = 1;
/* Rounds of re-anchoring end when the scale moves by less than this share. */
static const double anchored_to = 1e-9;
enum { ANCHOR_ROUNDS = 60 };

/* The standard uncertainty of a measured resistance: by the job's instrument for ohms, else the
   policy's default accuracy. */
static double resistance_uncertainty(const struct job *job, const struct policy *policy, double ohm)
{
    struct accuracy accuracy = accuracy_in_job(job, UNIT_RESISTANCE, policy, 0);
    return uncertainty_of_accuracy(ohm, accuracy.share, accuracy.absolute);
}

static bool read_open(const struct job *job, const struct resistance *resistance)
{
    const struct quantity *measured = NULL;
    if (resistance->set && resistance->resistor != NOT_LISTED)
        measured = &job->resistors[resistance->resistor].measured;
    else if (resistance->set && resistance->winding != NOT_LISTED)
        measured = &job->windings[resistance->winding].measured;
    return measured && measured->set && measured->bound == BOUND_OVER;
}

struct found_ohms ohms_as_found(const struct job *job, const struct policy *policy,
                                const struct resistance *resistance)
{
    struct found_ohms found = {NAN, 0, read_open(job, resistance)};
    bool measured = false;
    if (!resistance->set || !job_resistance(job, resistance, found.open ? PHASE_LEFT : PHASE_FOUND,
                                            &found.ohm, &measured))
        found.ohm = NAN;
    else if (found.open && measured) /* nothing was fitted */
        found.ohm = NAN;
    else if (measured && found.ohm > 0)
        found.u_ohm = resistance_uncertainty(job, policy, found.ohm);
    return found;
}

static int node_of(const struct resistance *resistance)
{
    if (!resistance->set)
        return NODE_NONE;
    if (resistance->resistor != NOT_LISTED)
        return resistance->resistor;
    return resistance->winding != NOT_LISTED ? NODE_WINDINGS + resistance->winding : NODE_NONE;
}

static const struct resistance *resistor_of(const struct stage *stage, enum stage_resistor which)
{
    switch (which) {
    case STAGE_ANODE:
        return &stage->anode;
    case STAGE_SCREEN:
        return &stage->screen;
    case STAGE_CATHODE:
        return &stage->cathode;
    case STAGE_BIAS:
        return &stage->bias_resistance;
    case STAGE_GRID_LEAK:
        return &stage->grid_leak;
    case STAGE_RESISTOR_COUNT:
        break;
    }
    return NULL;
}

static double *circuit_resistor(struct stage_circuit *circuit, enum stage_resistor which)
{
    switch (which) {
    case STAGE_ANODE:
        return &circuit->anode_ohm;
    case STAGE_SCREEN:
        return &circuit->screen_ohm;
    case STAGE_CATHODE:
        return &circuit->cathode_ohm;
    case STAGE_BIAS:
        return &circuit->bias_ohm;
    case STAGE_GRID_LEAK:
        return &circuit->grid_leak_ohm;
    case STAGE_RESISTOR_COUNT:
        break;
    }
    return NULL;
}

static int circuit_node(const struct stage_circuit *circuit, enum stage_resistor which)
{
    switch (which) {
    case STAGE_CATHODE:
        return circuit->cathode_node;
    case STAGE_SCREEN:
        return circuit->screen_node;
    case STAGE_BIAS:
        return circuit->bias_node;
    case STAGE_ANODE:
    case STAGE_GRID_LEAK:
    case STAGE_RESISTOR_COUNT:
        break;
    }
    return NODE_NONE;
}

struct builder {
    const struct job *job;
    const struct policy *policy;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct stage_model *models;
};

/* ---- the circuit */

static const char *missing_key(const struct stage *stage)
{
    if (!stage->supply.set)
        return "supply";
    switch (stage->bias) {
    case BIAS_CATHODE:
        return stage->cathode.set ? NULL : "cathode";
    case BIAS_FIXED:
        return stage->bias_volts.set ? NULL : "bias";
    case BIAS_BACK:
        return stage->bias_resistance.set ? NULL : "bias";
    case BIAS_CONTACT:
        return stage->grid_leak.set ? NULL : "grid_leak";
    }
    return NULL;
}

static void read_resistors(const struct builder *builder, struct stage_model *model)
{
    for (int which = 0; which < STAGE_RESISTOR_COUNT; which++) {
        const struct resistance *resistance = resistor_of(model->stage, which);
        struct found_ohms found = ohms_as_found(builder->job, builder->policy, resistance);
        double *ohms[PHASE_COUNT];
        for (int phase = 0; phase < PHASE_COUNT; phase++) {
            ohms[phase] = &model->ohms[phase][which];
            if (!resistance->set ||
                !job_resistance(builder->job, resistance, phase, ohms[phase], NULL))
                *ohms[phase] = NAN;
        }
        *ohms[PHASE_FOUND] = found.ohm;
        model->resistor_u_ohm[which] = found.u_ohm;
        model->open_found = model->open_found || found.open;
        if (found.open && isnan(found.ohm)) { /* only the stage as designed has figures */
            model->open_unmended = true;
            *ohms[PHASE_FOUND] = *ohms[PHASE_LEFT] = *ohms[PHASE_DESIGNED];
        }
    }
}

static double or_zero(double ohm)
{
    return isnan(ohm) ? 0 : ohm;
}

static struct stage_circuit circuit_of(const struct stage_model *model, int own_node,
                                       enum phase phase)
{
    const struct stage *stage = model->stage;
    const double *ohms = model->ohms[phase];
    bool back = stage->bias == BIAS_BACK;
    int bias_node = node_of(&stage->bias_resistance);
    return (struct stage_circuit){
        .law = model->law,
        .supply_v = stage->supply.value,
        .anode_ohm = or_zero(ohms[STAGE_ANODE]),
        .screen_supply_v = quantity_or(&stage->screen_volts, stage->supply.value),
        .screen_ohm = or_zero(ohms[STAGE_SCREEN]),
        .cathode_ohm = or_zero(ohms[STAGE_CATHODE]),
        .grid_leak_ohm = model->grid_leak_known ? ohms[STAGE_GRID_LEAK] : no_grid_leak_ohm,
        .return_v = stage->bias == BIAS_FIXED ? stage->bias_volts.value : 0,
        .contact_bias = stage->bias == BIAS_CONTACT,
        .cathode_node = node_of(&stage->cathode),
        .screen_node = node_of(&stage->screen),
        .bias_node = !back                    ? NODE_NONE
                     : bias_node != NODE_NONE ? bias_node
                                              : own_node,
        .bias_ohm = back ? or_zero(ohms[STAGE_BIAS]) : 0,
        .bias_others_a = back ? quantity_or(&stage->bias_others, 0) : 0,
    };
}

static int stage_named(const struct job *job, const char *name)
{
    for (size_t i = 0; name && i < job->stage_count; i++)
        if (strcmp(job->stages[i].name, name) == 0)
            return (int)i;
    return -1;
}

static void build_model(const struct builder *builder, struct stage_model *model)
{
    const struct stage *stage = model->stage;
    model->partner = stage_named(builder->job, stage->pushpull_with);
    model->group = -1;
    read_resistors(builder, model);
    model->missing = missing_key(stage);
    model->grid_leak_known = model->ohms[PHASE_DESIGNED][STAGE_GRID_LEAK] > 0;
    const struct row_telling telling = {builder->job, builder->arena, builder->diagnostics};
    stage_row_fit(&telling, model);
    if (model->why == WHY_NONE && model->missing)
        model->why = WHY_MISSING_FACT;
    if (model->why == WHY_NONE)
        for (int phase = 0; phase < PHASE_COUNT; phase++)
            model->circuits[phase] =
                circuit_of(model, NODE_STAGES + (int)(stage - builder->job->stages), phase);
}

/* ---- groups */

/* The node that a bypass at this place sits on. */
static int *bypassed_node(struct stage_circuit *circuit, enum place place)
{
    if (place == PLACE_SCREEN_BYPASS)
        return &circuit->screen_node;
    return place == PLACE_CATHODE_BYPASS ? &circuit->cathode_node : &circuit->bias_node;
}

/* Stages that one capacitor bypasses hang on one node, named or not. */
static void share_nodes(const struct builder *builder)
{
    for (size_t i = 0; i < builder->job->capacitor_count; i++) {
        const struct capacitor *part = &builder->job->capacitors[i];
        if (part->stage_count < 2 ||
            (part->place != PLACE_SCREEN_BYPASS && part->place != PLACE_CATHODE_BYPASS))
            continue;
        int node = *bypassed_node(&builder->models[part->stages[0]].circuits[0], part->place);
        node = node == NODE_NONE ? NODE_CAPACITORS + (int)i : node;
        for (size_t k = 0; k < part->stage_count; k++)
            for (int phase = 0; phase < PHASE_COUNT; phase++) {
                struct stage_circuit *circuit = &builder->models[part->stages[k]].circuits[phase];
                int *own = bypassed_node(circuit, part->place);
                *own = *own == NODE_NONE ? node : *own;
            }
    }
}

static bool same_node(int a, int b)
{
    return a != NODE_NONE && a == b;
}

static bool names_stage(const struct capacitor *part, int stage)
{
    for (size_t i = 0; i < part->stage_count; i++)
        if (part->stages[i] == stage)
            return true;
    return false;
}

/* One capacitor leaks into both. */
static bool share_capacitor(const struct job *job, int a, int b)
{
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        bool leaks_in = part->place == PLACE_COUPLING || part->place == PLACE_SCREEN_BYPASS ||
                        part->place == PLACE_CATHODE_BYPASS || part->place == PLACE_BIAS_BYPASS;
        if (part->stage_count > 1 && leaks_in && names_stage(part, a) && names_stage(part, b))
            return true;
    }
    return false;
}

static bool hang_together(const struct job *job, const struct stage_model *a,
                          const struct stage_model *b)
{
    const struct stage_circuit *one = &a->circuits[PHASE_FOUND], *two = &b->circuits[PHASE_FOUND];
    if (same_node(one->cathode_node, two->cathode_node) ||
        same_node(one->screen_node, two->screen_node) || same_node(one->bias_node, two->bias_node))
        return true;
    int index_a = (int)(a->stage - job->stages), index_b = (int)(b->stage - job->stages);
    return a->partner == index_b || b->partner == index_a || share_capacitor(job, index_a, index_b);
}

/* Add to the group all that hangs on its members, breadth first. */
static void gather(const struct builder *builder, struct stage_group *group, int number)
{
    const struct job *job = builder->job;
    bool refused = false;
    for (size_t member = 0; member < group->count; member++)
        for (size_t i = 0; i < job->stage_count; i++) {
            struct stage_model *other = &builder->models[i];
            if (other->why != WHY_NONE || other->group != -1 ||
                !hang_together(job, &builder->models[group->members[member]], other))
                continue;
            if (group->count == STAGE_GROUP_MAX) {
                refused = true;
                continue;
            }
            other->group = number;
            other->slot = (int)group->count;
            group->members[group->count++] = (int)i;
        }
    if (refused)
        diagnostic_add(builder->diagnostics, &job->source,
                       builder->models[group->members[0]].stage->at, DIAGNOSTIC_STAGES_TOO_MANY,
                       NULL, "more than %d stages hang together; the rest are solved apart",
                       STAGE_GROUP_MAX);
}

static void copy_circuits(const struct builder *builder, struct stage_group *group)
{
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        for (size_t i = 0; i < group->count; i++)
            group->circuits[phase][i] = builder->models[group->members[i]].circuits[phase];
}

/* The readings of the stage taken with the leaking parts lifted; NULL: none. */
static const struct stage_reading *lifted_reading(const struct stage *stage, enum phase *phase)
{
    *phase = stage->left.parts_lifted ? PHASE_LEFT : PHASE_FOUND;
    const struct stage_reading *read = *phase == PHASE_LEFT ? &stage->left : &stage->found;
    return read->parts_lifted && read->cathode.set && read->cathode.value > 0 ? read : NULL;
}

/* Stages of a group whose cathodes hang together with one of them. */
static bool on_cathode_of(const struct stage_group *group, size_t one, size_t other)
{
    return one == other || same_node(group->circuits[PHASE_FOUND][one].cathode_node,
                                     group->circuits[PHASE_FOUND][other].cathode_node);
}

/* By how much the valves on a cathode resistor pass more than their rows say, with cathode_v read
   across it; 1: nothing to tell it from. */
static double anchor_scale(const struct stage_group *group, enum phase phase, size_t stage,
                           double cathode_v, const struct stage_solution *now)
{
    double wanted_a = cathode_v / group->circuits[phase][stage].cathode_ohm, by_rows_a = 0;
    for (size_t i = 0; i < group->count; i++) {
        if (!on_cathode_of(group, stage, i))
            continue;
        wanted_a -= now[i].grid_a;
        by_rows_a += valve_law_currents(&group->circuits[phase][i].law, now[i].grid_v - cathode_v,
                                        now[i].screen_v - cathode_v, now[i].anode_v - cathode_v)
                         .cathode_a;
    }
    double scale = wanted_a / by_rows_a;
    return isfinite(scale) && scale > 0 ? scale : 1;
}

static bool is_anchored_before(const struct builder *builder, const struct stage_group *group,
                               size_t stage)
{
    enum phase phase;
    for (size_t i = 0; i < stage; i++)
        if (on_cathode_of(group, stage, i) &&
            lifted_reading(builder->models[group->members[i]].stage, &phase))
            return true;
    return false;
}

/*
 * Re-anchor on cathode voltages taken with the leaking parts lifted: the valves' own currents are
 * measured then, and the row's currents and slope are scaled alike, of all valves on the resistor.
 * The stage as designed keeps the book's valve. Other nodes follow, so it takes a few rounds.
 */
static void anchor(const struct builder *builder, struct stage_group *group)
{
    double largest = INFINITY;
    for (int round = 0; round < ANCHOR_ROUNDS && largest > anchored_to; round++) {
        struct stage_solution now[PHASE_COUNT][STAGE_GROUP_MAX];
        for (int phase = PHASE_FOUND; phase < PHASE_COUNT; phase++)
            if (stages_solve(group->circuits[phase], group->count, now[phase]) == SOLVE_IMPOSSIBLE)
                return;
        largest = 0;
        for (size_t i = 0; i < group->count; i++) {
            enum phase phase;
            const struct stage_reading *read =
                lifted_reading(builder->models[group->members[i]].stage, &phase);
            if (!read || is_anchored_before(builder, group, i))
                continue;
            double scale = anchor_scale(group, phase, i, read->cathode.value, now[phase]);
            for (size_t k = 0; k < group->count; k++)
                if (on_cathode_of(group, i, k)) {
                    group->circuits[PHASE_FOUND][k].law.ik0_a *= scale;
                    group->circuits[PHASE_LEFT][k].law.ik0_a *= scale;
                }
            largest = fmax(largest, fabs(scale - 1));
        }
    }
}

static void solve_bare(struct stage_group *group)
{
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        if (stages_solve(group->circuits[phase], group->count, group->bare[phase]) ==
            SOLVE_IMPOSSIBLE)
            for (size_t i = 0; i < group->count; i++)
                group->bare[phase][i].status = SOLVE_IMPOSSIBLE;
}

/* Whether two stages of the group share this resistor. */
static bool is_shared(const struct stage_group *group, size_t a, size_t b, int which)
{
    return same_node(circuit_node(&group->circuits[PHASE_FOUND][a], which),
                     circuit_node(&group->circuits[PHASE_FOUND][b], which));
}

/* The group as found with one resistor moved by its uncertainty, in all stages that share it. */
static void add_step(struct stage_group *group, struct stage_step *steps, size_t stage, int which,
                     double u_ohm)
{
    for (size_t before = 0; before < stage; before++)
        if (is_shared(group, before, stage, which))
            return; /* moved already */
    struct stage_step *step = &steps[group->step_count];
    memcpy(step->circuits, group->circuits[PHASE_FOUND], sizeof step->circuits);
    for (size_t i = stage; i < group->count; i++)
        if (i == stage || is_shared(group, i, stage, which))
            *circuit_resistor(&step->circuits[i], which) += u_ohm;
    if (stages_solve(step->circuits, group->count, step->bare) != SOLVE_IMPOSSIBLE)
        group->step_count++;
}

/* One step for each measured resistor. */
static void make_steps(const struct builder *builder, struct stage_group *group)
{
    struct stage_step *steps =
        arena_array(builder->arena, group->count * STAGE_RESISTOR_COUNT, sizeof *steps);
    for (size_t i = 0; i < group->count; i++)
        for (int which = 0; which < STAGE_RESISTOR_COUNT; which++) {
            double u_ohm = builder->models[group->members[i]].resistor_u_ohm[which];
            if (u_ohm > 0)
                add_step(group, steps, i, which, u_ohm);
        }
    group->steps = steps;
}

struct stage_set stages_prepare(const struct job *job, const struct policy *policy,
                                struct arena *arena, struct diagnostics *diagnostics)
{
    struct builder builder = {job, policy, arena, diagnostics,
                              arena_array(arena, job->stage_count + 1, sizeof *builder.models)};
    struct stage_group *groups = arena_array(arena, job->stage_count + 1, sizeof *groups);
    size_t group_count = 0;
    for (size_t i = 0; i < job->stage_count; i++) {
        builder.models[i].stage = &job->stages[i];
        build_model(&builder, &builder.models[i]);
    }
    share_nodes(&builder);
    for (size_t i = 0; i < job->stage_count; i++) {
        struct stage_model *model = &builder.models[i];
        if (model->why != WHY_NONE || model->group != -1)
            continue;
        struct stage_group *group = &groups[group_count];
        model->group = (int)group_count++;
        group->members[group->count++] = (int)i;
        gather(&builder, group, model->group);
        copy_circuits(&builder, group);
        anchor(&builder, group);
        solve_bare(group);
        make_steps(&builder, group);
    }
    return (struct stage_set){builder.models, job->stage_count, groups, group_count};
}

void stages_tell_unknown(const struct stage_set *set, const struct job *job, const bool *needed,
                         struct arena *arena, struct diagnostics *diagnostics)
{
    const struct row_telling telling = {job, arena, diagnostics};
    for (size_t i = 0; i < set->count; i++)
        if (!set->models[i].row)
            stage_row_tell_unknown(&telling, &set->models[i], needed[i]);
}

bool stage_group_open(const struct stage_set *set, const struct stage_group *group, bool unmended)
{
    for (size_t i = 0; i < group->count; i++) {
        const struct stage_model *model = &set->models[group->members[i]];
        if (unmended ? model->open_unmended : model->open_found)
            return true;
    }
    return false;
}

/* ---- leaks */

/* Several sources on one grid are one source of their parallel conductance. */
static void add_coupling(struct stage_circuit *circuit, const struct stage_leak *leak)
{
    double into_s = leak->leak_s / (1 + leak->leak_s * leak->source_ohm);
    double before_s =
        circuit->coupling_leak_s / (1 + circuit->coupling_leak_s * circuit->coupling_source_ohm);
    double total_s = into_s + before_s;
    if (total_s <= 0)
        return;
    circuit->coupling_source_v =
        (into_s * leak->source_v + before_s * circuit->coupling_source_v) / total_s;
    circuit->coupling_leak_s = total_s;
    circuit->coupling_source_ohm = 0;
}

/* The leak across one node's resistor: the solver counts the largest figure of the stages that
   share it once, so all of them get it. */
static double *node_leak(struct stage_circuit *circuit, enum place place)
{
    if (place == PLACE_SCREEN_BYPASS)
        return &circuit->screen_leak_s;
    return place == PLACE_CATHODE_BYPASS ? &circuit->cathode_leak_s : &circuit->bias_leak_s;
}

static void add_at_node(const struct stage_group *group, struct stage_circuit *circuits, int slot,
                        const struct stage_leak *leak, bool done[STAGE_GROUP_MAX])
{
    int node = *bypassed_node(&circuits[slot], leak->place);
    for (int i = 0; i < (int)group->count; i++)
        if (!done[i] && (i == slot || same_node(node, *bypassed_node(&circuits[i], leak->place)))) {
            *node_leak(&circuits[i], leak->place) += leak->leak_s;
            done[i] = true;
        }
}

void stage_add_leak(const struct stage_set *set, const struct stage_group *group,
                    struct stage_circuit *circuits, const struct stage_leak *leak)
{
    bool done[STAGE_GROUP_MAX] = {false};
    for (size_t i = 0; i < leak->stage_count; i++) {
        const struct stage_model *model = &set->models[leak->stages[i]];
        if (model->why != WHY_NONE || &set->groups[model->group] != group)
            continue;
        struct stage_circuit *circuit = &circuits[model->slot];
        if (leak->place == PLACE_COUPLING) {
            add_coupling(circuit, leak);
        } else if (leak->place == PLACE_TONE) {
            circuit->anode_leak_s += leak->leak_s;
        } else {
            if (leak->place == PLACE_BIAS_BYPASS && leak->feed_ohm > 0)
                circuit->bias_feed_ohm = leak->feed_ohm;
            add_at_node(group, circuits, model->slot, leak, done);
        }
    }
}
