#include "assess/stage_nodes.h"

#include <float.h>
#include <math.h>

/* How closely each level is solved, in volts; a level inside another one more closely than it. */
static const double anode_tolerance_v = 1e-11;
static const double screen_tolerance_v = 1e-10;
static const double cathode_tolerance_v = 1e-9;
static const double bias_tolerance_v = 1e-8;

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

struct feed feed_of(double supply_v, double ohm, double leak_s)
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

struct feed stage_grid_feed(const struct stage *stage)
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
    struct feed grid = stage_grid_feed(stage);
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
    const struct group *group = context;
    for (size_t i = 0; i < group->member_count; i++)
        hold_node(group->members[i], group, volts);
    branch_solve(&group->inside);
    double current_a = group->others_a;
    for (size_t i = 0; i < group->member_count; i++)
        current_a += current_into(group->members[i], group->kind);
    double drop_v = group->feed.ohm * current_a;
    return (group->kind == GROUP_SCREEN ? group->feed.emf_v - drop_v : drop_v) - volts;
}

static struct bracket group_bracket(struct group *group)
{
    struct bracket b = {0, 0, cathode_tolerance_v};
    switch (group->kind) {
    case GROUP_BIAS:
        /* Without any bias the most current flows, and that current gives the most bias. */
        b.high = fmax(group_gap(0, group), 0);
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

static void solve_group(struct group *group)
{
    if (group->feed.ohm > 0)
        falling_root(group_gap, group, group_bracket(group), &group->trail);
    else
        group_gap(group->kind == GROUP_SCREEN ? group->feed.emf_v : 0, group);
}

void branch_solve(const struct branch *branch)
{
    for (size_t i = 0; i < branch->stage_count; i++)
        solve_stage(branch->stages[i]);
    for (size_t i = 0; i < branch->group_count; i++)
        solve_group(branch->groups[i]);
}
