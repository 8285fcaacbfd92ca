/*
 * The inside of the stage solver: nodes, their feeds, and the nesting in which they are solved.
 * stage_solver.c sets a network up from circuits, stage_nodes.c finds its roots. Not for others.
 */
#ifndef ASSESS_STAGE_NODES_H
#define ASSESS_STAGE_NODES_H

#include "assess/stage_solver.h"

enum { STAGES_MAX = 8, GROUPS_MAX = 3 * STAGES_MAX };

/* A resistance seen from a node: e.m.f. behind ohms, with any leak to chassis folded in. */
struct feed {
    double emf_v, ohm;
};

/* A supply behind a resistance, with a leak from the node to chassis. */
struct feed feed_of(double supply_v, double ohm, double leak_s);

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

/* The grid leak and the leaking coupling capacitor as one e.m.f. behind one resistance. */
struct feed stage_grid_feed(const struct stage *stage);

/* Which resistor stages share. From outside to inside: a bias holds before a screen, a screen
   before a cathode. */
enum group_kind { GROUP_BIAS, GROUP_SCREEN, GROUP_CATHODE };

struct group;

/* What can be solved by itself once the nodes outside of it are held. */
struct branch {
    struct stage *stages[STAGES_MAX]; /* that share nothing more */
    size_t stage_count;
    struct group *groups[STAGES_MAX];
    size_t group_count;
};

/* Stages that share one resistor. */
struct group {
    enum group_kind kind;
    struct stage *members[STAGES_MAX];
    size_t member_count;
    struct feed feed;
    double leak_s, others_a;
    struct trail trail;
    struct branch inside; /* all that hangs together with the members */
};

/* Find the volts of every node of the branch. */
void branch_solve(const struct branch *branch);

#endif
