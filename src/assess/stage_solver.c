#include "assess/stage_solver.h"

#include <assert.h>
#include <float.h>
#include <math.h>

enum { STAGES_MAX = 8, GROUPS_MAX = 3 * STAGES_MAX };

/* Below this share of the row's current the law's stated bounds end. */
static const double least_of_row = 0.2;

/* How closely each level is solved, in volts; a level inside another one more closely than it. */
static const double anode_tolerance_v = 1e-11;
static const double screen_tolerance_v = 1e-10;
static const double cathode_tolerance_v = 1e-9;
static const double bias_tolerance_v = 1e-8;

/* A cathode this far above everything that could feed current into it passes none. */
static const double cut_off_v = 5;

/* A resistance seen from a node: e.m.f. behind ohms, with any leak to chassis folded in. */
struct feed {
    double emf_v, ohm;
};

/* Where a root was found last and how steep the function is there: a start for the next search. */
struct trail {
    double x, slope;
};

struct stage {
    const struct stage_circuit *circuit;
    struct feed anode, screen, cathode;
    double screen_leak_s;                /* counted once for a shared dropper */
    const struct stage_circuit *dropper; /* whose screen supply and resistor are its own */
    bool cathode_shared, screen_shared;
    struct trail anode_trail, screen_trail, cathode_trail;
    double screen_low_v, cathode_high_v; /* outer ends of the brackets */
    /* as tried now */
    double return_v, return_ohm; /* what the grid leak returns to: e.m.f. and its feed */
    double grid_v, cathode_v, anode_v, screen_v, grid_a;
    struct valve_currents currents;
};

/* From outside to inside: each is solved with those before it held. */
enum group_kind { GROUP_BIAS, GROUP_SCREEN, GROUP_CATHODE };

/* Stages that share one resistor. */
struct group {
    enum group_kind kind;
    struct stage *members[STAGES_MAX];
    size_t member_count;
    struct feed feed;
    double leak_s, others_a;
    struct trail trail;
};

struct network {
    struct stage stages[STAGES_MAX];
    size_t stage_count;
    struct group groups[GROUPS_MAX];
    size_t group_count;
};

typedef double (*falling_function)(double x, void *context);

struct bracket {
    double low, high; /* f(low) >= 0 >= f(high), known without evaluation */
    double tolerance;
};

/*
 * The root of a function that falls at least as fast as -x, so that |f| bounds the error and cuts
 * the bracket from both sides. Secants, the middle where they stop gaining. f leaves the network as
 * tried at the root when it returns.
 */
static double falling_root(falling_function f, void *context, struct bracket b, struct trail *trail)
{
    double x = fmin(fmax(trail->x, b.low), b.high), slope = trail->slope;
    double x_before = NAN, f_before = NAN, f_earlier = INFINITY;
    for (int round = 0; round < 120; round++) {
        double value = f(x, context);
        if (fabs(value) <= b.tolerance)
            break;
        if (value > 0) {
            b.low = fmax(b.low, x);
            b.high = fmin(b.high, x + value);
        } else {
            b.high = fmin(b.high, x);
            b.low = fmax(b.low, x + value);
        }
        if (b.high - b.low <= 4 * DBL_EPSILON * fmax(fabs(x), 1))
            break;
        double secant = (value - f_before) / (x - x_before);
        if (isfinite(secant))
            slope = fmin(secant, -1);
        double next = x - value / slope;
        bool slow = fabs(value) > 0.5 * f_earlier;
        f_earlier = fabs(f_before);
        if (isnan(f_earlier))
            f_earlier = INFINITY;
        x_before = x;
        f_before = value;
        x = slow || !(next > b.low && next < b.high) ? 0.5 * (b.low + b.high) : next;
    }
    trail->x = x;
    trail->slope = slope;
    return x;
}

static struct feed feed_of(double supply_v, double ohm, double leak_s)
{
    return (struct feed){supply_v / (1 + ohm * leak_s), ohm / (1 + ohm * leak_s)};
}

/* ---- one stage, with the volts of shared nodes held */

static void take_currents(struct stage *stage)
{
    stage->currents =
        valve_law_currents(&stage->circuit->law, stage->grid_v - stage->cathode_v,
                           stage->screen_v - stage->cathode_v, stage->anode_v - stage->cathode_v);
}

static double anode_gap(double anode_v, void *context)
{
    struct stage *stage = context;
    stage->anode_v = anode_v;
    take_currents(stage);
    return stage->anode.emf_v - stage->anode.ohm * stage->currents.anode_a - anode_v;
}

static void solve_anode(struct stage *stage)
{
    if (stage->anode.ohm > 0 && stage->anode.emf_v > stage->cathode_v) {
        falling_root(anode_gap, stage,
                     (struct bracket){stage->cathode_v, stage->anode.emf_v, anode_tolerance_v},
                     &stage->anode_trail);
        return;
    }
    stage->anode_v = stage->anode.emf_v;
    take_currents(stage);
}

static double screen_gap(double screen_v, void *context)
{
    struct stage *stage = context;
    stage->screen_v = screen_v;
    solve_anode(stage);
    return stage->screen.emf_v - stage->screen.ohm * stage->currents.screen_a - screen_v;
}

static void solve_screen(struct stage *stage)
{
    if (stage->circuit->law.triode || stage->screen_shared) {
        solve_anode(stage);
    } else if (stage->screen.ohm > 0) {
        falling_root(screen_gap, stage,
                     (struct bracket){stage->screen_low_v, stage->screen.emf_v, screen_tolerance_v},
                     &stage->screen_trail);
    } else {
        stage->screen_v = stage->screen.emf_v;
        solve_anode(stage);
    }
}

/* The grid leak and the leaking coupling capacitor as one e.m.f. behind one resistance. */
static struct feed grid_feed(const struct stage *stage)
{
    const struct stage_circuit *c = stage->circuit;
    double leak_s = c->coupling_leak_s / (1 + c->coupling_leak_s * c->coupling_source_ohm);
    double return_ohm = c->grid_leak_ohm + stage->return_ohm;
    double ohm = return_ohm / (1 + return_ohm * leak_s);
    return (struct feed){stage->return_v + ohm * leak_s * (c->coupling_source_v - stage->return_v),
                         ohm};
}

static void solve_at_cathode(struct stage *stage, double cathode_v)
{
    struct feed grid = grid_feed(stage);
    double vgk_v = valve_grid_volts(grid.emf_v - cathode_v, grid.ohm);
    stage->cathode_v = cathode_v;
    stage->grid_v = cathode_v + vgk_v;
    stage->grid_a = valve_grid_current(vgk_v);
    solve_screen(stage);
}

static double cathode_gap(double cathode_v, void *context)
{
    struct stage *stage = context;
    solve_at_cathode(stage, cathode_v);
    return stage->cathode.ohm * (stage->currents.cathode_a + stage->grid_a) - cathode_v;
}

static void solve_stage(struct stage *stage)
{
    if (stage->cathode_shared)
        solve_at_cathode(stage, stage->cathode_v);
    else if (stage->cathode.ohm > 0)
        falling_root(cathode_gap, stage,
                     (struct bracket){0, stage->cathode_high_v, cathode_tolerance_v},
                     &stage->cathode_trail);
    else
        solve_at_cathode(stage, 0);
}

/* ---- shared resistors, from the outside inwards */

static void solve_from(struct network *network, size_t level);

struct trial {
    struct network *network;
    size_t level;
};

static void hold_node(struct stage *stage, const struct group *group, double volts)
{
    const struct stage_circuit *c = stage->circuit;
    switch (group->kind) {
    case GROUP_BIAS:
        stage->return_v = (c->return_v - volts) / (1 + c->bias_feed_ohm * group->leak_s);
        stage->return_ohm = feed_of(0, c->bias_feed_ohm, group->leak_s).ohm;
        break;
    case GROUP_SCREEN:
        stage->screen_v = volts;
        break;
    case GROUP_CATHODE:
        stage->cathode_v = volts;
        break;
    }
}

static double current_into(const struct stage *stage, enum group_kind kind)
{
    switch (kind) {
    case GROUP_BIAS:
        return stage->currents.cathode_a + stage->grid_a +
               stage->circuit->anode_leak_s * stage->anode_v +
               (stage->circuit->law.triode ? 0 : stage->screen_leak_s * stage->screen_v);
    case GROUP_SCREEN:
        return stage->currents.screen_a;
    case GROUP_CATHODE:
        return stage->currents.cathode_a + stage->grid_a;
    }
    return 0;
}

static double group_gap(double volts, void *context)
{
    struct trial *trial = context;
    struct group *group = &trial->network->groups[trial->level];
    for (size_t i = 0; i < group->member_count; i++)
        hold_node(group->members[i], group, volts);
    solve_from(trial->network, trial->level + 1);
    double current_a = group->others_a;
    for (size_t i = 0; i < group->member_count; i++)
        current_a += current_into(group->members[i], group->kind);
    double drop_v = group->feed.ohm * current_a;
    return (group->kind == GROUP_SCREEN ? group->feed.emf_v - drop_v : drop_v) - volts;
}

static struct bracket group_bracket(const struct group *group, struct trial *trial)
{
    struct bracket b = {0, 0, cathode_tolerance_v};
    switch (group->kind) {
    case GROUP_BIAS:
        /* Without any bias the most current flows, and that current gives the most bias. */
        b.high = fmax(group_gap(0, trial), 0);
        b.tolerance = bias_tolerance_v;
        break;
    case GROUP_SCREEN:
        b.low = b.high = group->feed.emf_v;
        for (size_t i = 0; i < group->member_count; i++)
            b.low = fmin(b.low, group->members[i]->screen_low_v);
        break;
    case GROUP_CATHODE:
        for (size_t i = 0; i < group->member_count; i++)
            b.high = fmax(b.high, group->members[i]->cathode_high_v);
        break;
    }
    return b;
}

static void solve_from(struct network *network, size_t level)
{
    if (level == network->group_count) {
        for (size_t i = 0; i < network->stage_count; i++)
            solve_stage(&network->stages[i]);
        return;
    }
    struct trial trial = {network, level};
    struct group *group = &network->groups[level];
    if (group->feed.ohm > 0)
        falling_root(group_gap, &trial, group_bracket(group, &trial), &group->trail);
    else
        group_gap(group->kind == GROUP_SCREEN ? group->feed.emf_v : 0, &trial);
}

/* ---- setting up */

static void prepare_stage(struct stage *stage, const struct stage_circuit *c)
{
    const struct valve_law *law = &c->law;
    *stage = (struct stage){
        .circuit = c, .dropper = c, .screen_v = NAN, .screen_leak_s = c->screen_leak_s};
    stage->anode = feed_of(c->supply_v, c->anode_ohm, c->anode_leak_s);
    stage->screen = feed_of(c->screen_supply_v, c->screen_ohm, c->screen_leak_s);
    stage->cathode = feed_of(0, c->cathode_ohm, c->cathode_leak_s);
    struct feed bias = feed_of(c->return_v, c->bias_feed_ohm, c->bias_leak_s);
    stage->return_v = bias.emf_v;
    stage->return_ohm = bias.ohm;

    double grid_v = fmax(fmax(grid_feed(stage).emf_v, c->coupling_source_v), c->return_v);
    double gm_s = law->exponent * law->ik0_a / law->d0_v;
    stage->cathode_high_v = fmax(fmax(stage->anode.emf_v, grid_v), 0) + cut_off_v;
    stage->cathode_trail =
        (struct trail){grid_feed(stage).emf_v - law->vg10_v, -(1 + stage->cathode.ohm * gm_s)};
    stage->anode_trail.x =
        fmax(stage->anode.emf_v - stage->anode.ohm * law->ik0_a, 0.3 * stage->anode.emf_v);
    if (law->triode) {
        stage->anode_trail.slope = -(1 + stage->anode.ohm * gm_s / law->mu);
        return;
    }
    stage->anode_trail.slope = -(1 + stage->anode.ohm * gm_s * law->ka);
    stage->cathode_high_v = fmax(stage->cathode_high_v, c->screen_supply_v + cut_off_v);
    double drive_v =
        law->d0_v + (fmax(grid_v, 0) - law->vg10_v) + law->ka * (stage->anode.emf_v - law->va0_v);
    stage->screen_low_v = fmin(fmin(law->vg20_v - law->mu12 * drive_v, 0), stage->screen.emf_v) - 1;
    stage->screen_trail =
        (struct trail){fmin(stage->screen.emf_v, law->vg20_v),
                       -(1 + stage->screen.ohm * gm_s / law->mu12 * law->q0 / (1 + law->q0))};
}

static int node_of(const struct stage_circuit *c, enum group_kind kind)
{
    switch (kind) {
    case GROUP_BIAS:
        return c->bias_node;
    case GROUP_SCREEN:
        return c->law.triode ? -1 : c->screen_node;
    case GROUP_CATHODE:
        return c->cathode_node;
    }
    return -1;
}

static double leak_of(const struct stage_circuit *c, enum group_kind kind)
{
    switch (kind) {
    case GROUP_BIAS:
        return c->bias_leak_s;
    case GROUP_SCREEN:
        return c->screen_leak_s;
    case GROUP_CATHODE:
        return c->cathode_leak_s;
    }
    return 0;
}

static void finish_group(struct group *group)
{
    struct stage *first = group->members[0];
    const struct stage_circuit *c = first->circuit;
    double count = (double)group->member_count;
    switch (group->kind) {
    case GROUP_BIAS: {
        double behind_s = group->leak_s / (1 + c->bias_feed_ohm * group->leak_s);
        group->feed = feed_of(0, c->bias_ohm, behind_s);
        double gm_s = c->law.exponent * c->law.ik0_a / c->law.d0_v;
        group->trail = (struct trail){-c->law.vg10_v, -(1 + count * group->feed.ohm * gm_s)};
        break;
    }
    case GROUP_SCREEN:
        group->feed = feed_of(c->screen_supply_v, c->screen_ohm, group->leak_s);
        group->trail =
            (struct trail){first->screen_trail.x, -(1 + count * (-first->screen_trail.slope - 1))};
        for (size_t i = 0; i < group->member_count; i++) {
            group->members[i]->screen_shared = true;
            group->members[i]->dropper = c;
            group->members[i]->screen_leak_s = i == 0 ? group->leak_s : 0;
        }
        break;
    case GROUP_CATHODE:
        group->feed = feed_of(0, c->cathode_ohm, group->leak_s);
        group->trail = (struct trail){first->cathode_trail.x,
                                      -(1 + count * (-first->cathode_trail.slope - 1))};
        for (size_t i = 0; i < group->member_count; i++)
            group->members[i]->cathode_shared = true;
        break;
    }
}

/* The groups of one kind; a resistor with one stage on it is that stage's own, but for the bias. */
static void find_groups(struct network *network, enum group_kind kind)
{
    for (size_t i = 0; i < network->stage_count; i++) {
        int node = node_of(network->stages[i].circuit, kind);
        bool seen = node < 0;
        for (size_t j = 0; j < i && !seen; j++)
            seen = node_of(network->stages[j].circuit, kind) == node;
        if (seen)
            continue;
        struct group group = {.kind = kind};
        for (size_t j = i; j < network->stage_count; j++) {
            const struct stage_circuit *c = network->stages[j].circuit;
            if (node_of(c, kind) != node)
                continue;
            group.members[group.member_count++] = &network->stages[j];
            group.leak_s = fmax(group.leak_s, leak_of(c, kind));
            if (kind == GROUP_BIAS)
                group.others_a = fmax(group.others_a, c->bias_others_a);
        }
        if (group.member_count == 1 && kind != GROUP_BIAS)
            continue;
        finish_group(&group);
        network->groups[network->group_count++] = group;
    }
}

static bool not_negative(const double *values, size_t count)
{
    for (size_t i = 0; i < count; i++)
        if (!(values[i] >= 0) || isinf(values[i]))
            return false;
    return true;
}

static bool circuit_possible(const struct stage_circuit *c)
{
    const double parts[] = {c->anode_ohm,       c->cathode_ohm,
                            c->grid_leak_ohm,   c->coupling_source_ohm,
                            c->coupling_leak_s, c->cathode_leak_s,
                            c->anode_leak_s,    c->bias_node >= 0 ? c->bias_ohm : 0,
                            c->bias_leak_s,     c->bias_feed_ohm,
                            c->bias_others_a};
    const double screen_parts[] = {c->screen_ohm, c->screen_leak_s};
    if (!not_negative(parts, sizeof parts / sizeof parts[0]) || !(c->supply_v > 0) ||
        !isfinite(c->supply_v) || !isfinite(c->return_v) || !isfinite(c->coupling_source_v) ||
        !(c->law.ik0_a > 0) || !(c->law.d0_v > 0))
        return false;
    return c->law.triode || (not_negative(screen_parts, 2) && c->screen_supply_v > 0 &&
                             isfinite(c->screen_supply_v));
}

static struct stage_solution solution_of(const struct stage *stage)
{
    const struct stage_circuit *c = stage->circuit;
    struct stage_solution s = {
        .grid_v = stage->grid_v,
        .cathode_v = stage->cathode_v,
        .anode_v = stage->anode_v,
        .screen_v = c->law.triode ? NAN : stage->screen_v,
        .anode_a = stage->currents.anode_a,
        .screen_a = stage->currents.screen_a,
        .cathode_a = stage->currents.cathode_a + stage->grid_a,
        .grid_a = stage->grid_a,
        .return_v = stage->return_v,
    };
    double grid_return_ohm = c->grid_leak_ohm + stage->return_ohm;
    if (stage->return_ohm > 0)
        s.return_v += stage->return_ohm * (s.grid_v - stage->return_v) / grid_return_ohm;
    s.anode_w = s.anode_a * (s.anode_v - s.cathode_v);
    if (!c->law.triode) {
        s.screen_w = s.screen_a * (s.screen_v - s.cathode_v);
        double drop_v = stage->dropper->screen_supply_v - s.screen_v;
        if (stage->dropper->screen_ohm > 0)
            s.screen_resistor_w = drop_v * drop_v / stage->dropper->screen_ohm;
    }
    if (stage->currents.cathode_a < least_of_row * c->law.ik0_a)
        s.status = SOLVE_BELOW_BOUNDS;
    else if (stage->currents.bottomed)
        s.status = SOLVE_BOTTOMED;
    return s;
}

/* Whether two stages share any resistor. */
static bool coupled(const struct stage_circuit *a, const struct stage_circuit *b)
{
    for (enum group_kind kind = GROUP_BIAS; kind <= GROUP_CATHODE; kind++)
        if (node_of(a, kind) >= 0 && node_of(a, kind) == node_of(b, kind))
            return true;
    return false;
}

/* Marks every stage that hangs together with `first`, through any number of others. */
static void mark_coupled(const struct stage_circuit *circuits, size_t count, size_t first,
                         bool marked[STAGES_MAX])
{
    marked[first] = true;
    for (size_t i = 0; i < count; i++)
        if (!marked[i] && coupled(&circuits[first], &circuits[i]))
            mark_coupled(circuits, count, i, marked);
}

static void solve_network(const struct stage_circuit *circuits, size_t count,
                          const bool marked[STAGES_MAX], struct stage_solution *solutions)
{
    struct network network = {.stage_count = 0};
    size_t place[STAGES_MAX] = {0};
    for (size_t i = 0; i < count; i++)
        if (marked[i]) {
            place[network.stage_count] = i;
            prepare_stage(&network.stages[network.stage_count++], &circuits[i]);
        }
    for (enum group_kind kind = GROUP_BIAS; kind <= GROUP_CATHODE; kind++)
        find_groups(&network, kind);
    solve_from(&network, 0);
    for (size_t i = 0; i < network.stage_count; i++)
        solutions[place[i]] = solution_of(&network.stages[i]);
}

enum solve_status stages_solve(const struct stage_circuit *circuits, size_t count,
                               struct stage_solution *solutions)
{
    assert(count >= 1 && count <= STAGES_MAX);
    for (size_t i = 0; i < count; i++)
        if (!circuit_possible(&circuits[i]))
            return SOLVE_IMPOSSIBLE;
    bool done[STAGES_MAX] = {false};
    enum solve_status worst = SOLVE_OK;
    for (size_t i = 0; i < count; i++) {
        if (!done[i]) {
            bool marked[STAGES_MAX] = {false};
            mark_coupled(circuits, count, i, marked);
            solve_network(circuits, count, marked, solutions);
            for (size_t j = 0; j < count; j++)
                done[j] = done[j] || marked[j];
        }
    }
    for (size_t i = 0; i < count; i++)
        if (solutions[i].status > worst)
            worst = solutions[i].status;
    return worst;
}
