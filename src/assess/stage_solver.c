#include "assess/stage_solver.h"

#include "assess/stage_nodes.h"

#include <assert.h>
#include <math.h>

/* Below this share of the row's current the law's stated bounds end. */
static const double least_of_row = 0.2;

/* A cathode this far above everything that could feed current into it passes none. */
static const double cut_off_v = 5;

struct network {
    struct stage stages[STAGES_MAX];
    size_t stage_count;
    struct group groups[GROUPS_MAX];
    size_t group_count;
};

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

    double grid_v = fmax(fmax(stage_grid_feed(stage).emf_v, c->coupling_source_v), c->return_v);
    double gm_s = law->exponent * law->ik0_a / law->d0_v;
    stage->cathode_high_v = fmax(fmax(stage->anode.emf_v, grid_v), 0) + cut_off_v;
    stage->cathode_trail = (struct trail){stage_grid_feed(stage).emf_v - law->vg10_v,
                                          -(1 + stage->cathode.ohm * gm_s)};
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

/* ---- nesting: sets of stages and groups as bits */

static unsigned members_of(const struct network *network, size_t group)
{
    unsigned members = 0;
    for (size_t i = 0; i < network->groups[group].member_count; i++)
        members |= 1u << (network->groups[group].members[i] - network->stages);
    return members;
}

/* All that hangs together with the stages already in *stages through the groups given; the groups
   that do it are returned. */
static unsigned spread(const struct network *network, unsigned groups, unsigned *stages)
{
    unsigned used = 0, before;
    do {
        before = used;
        for (size_t g = 0; g < network->group_count; g++)
            if ((groups >> g & 1) && (members_of(network, g) & *stages)) {
                used |= 1u << g;
                *stages |= members_of(network, g);
            }
    } while (used != before);
    return used;
}

/*
 * The stages given fall apart into those that share nothing more and into clusters. Of a cluster
 * the outermost group is solved with all the rest of it inside; when that is held the rest falls
 * apart again. So effort grows with the depth of what is really entangled, not with the set.
 */
static void nest(struct network *network, unsigned stages, unsigned groups, struct branch *branch)
{
    for (size_t i = 0; i < network->stage_count; i++) {
        if (!(stages >> i & 1))
            continue;
        unsigned cluster = 1u << i;
        unsigned used = spread(network, groups, &cluster);
        stages &= ~cluster;
        if (!used) {
            branch->stages[branch->stage_count++] = &network->stages[i];
            continue;
        }
        size_t outermost = 0;
        while (!(used >> outermost & 1))
            outermost++;
        struct group *group = &network->groups[outermost];
        branch->groups[branch->group_count++] = group;
        nest(network, cluster, used & ~(1u << outermost), &group->inside);
    }
}

enum solve_status stages_solve(const struct stage_circuit *circuits, size_t count,
                               struct stage_solution *solutions)
{
    assert(count >= 1 && count <= STAGES_MAX);
    for (size_t i = 0; i < count; i++)
        if (!circuit_possible(&circuits[i]))
            return SOLVE_IMPOSSIBLE;
    struct network network;
    network.stage_count = count;
    network.group_count = 0;
    for (size_t i = 0; i < count; i++)
        prepare_stage(&network.stages[i], &circuits[i]);
    for (enum group_kind kind = GROUP_BIAS; kind <= GROUP_CATHODE; kind++)
        find_groups(&network, kind);
    struct branch whole = {.stage_count = 0};
    nest(&network, (1u << count) - 1, (1u << network.group_count) - 1, &whole);
    branch_solve(&whole);
    enum solve_status worst = SOLVE_OK;
    for (size_t i = 0; i < count; i++) {
        solutions[i] = solution_of(&network.stages[i]);
        if (solutions[i].status > worst)
            worst = solutions[i].status;
    }
    return worst;
}
