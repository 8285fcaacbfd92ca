/*
 * The direct voltages and currents of one or several coupled stages with leaking capacitors.
 *
 * Circuit voltages are to chassis. Every stage has: grid leak to `return_v` (plus the back bias),
 * a coupling leak (a source behind a resistance), anode and screen fed through resistances, a
 * cathode resistance. Leaks are conductances in siemens, 0: none. Stages that name the same node
 * share one resistor and are solved together: its ohms and supply are those of the first of them,
 * its leak (and bias_others_a) is the largest figure that any of them gives, counted once. Nested
 * brackets: every unknown is the root of a falling function whose signs at both ends are known.
 *
 * The resistance in the negative HT lead carries the cathode currents of its stages, what their
 * anodes and screens leak to chassis, and bias_others_a. A coupling leak comes from the HT and
 * returns to it through the grid leak, past that resistance. A bias bypass sits at the far end of
 * the grid leak behind bias_feed_ohm; with bias_node < 0 it loads the fixed bias return_v in the
 * same way. Of a feed that several grids share each stage sees its own grid's current only.
 */
#ifndef ASSESS_STAGE_SOLVER_H
#define ASSESS_STAGE_SOLVER_H

#include "assess/valve_law.h"

struct stage_circuit {
    struct valve_law law;
    double supply_v;        /* HT at the anode load's far end */
    double anode_ohm;       /* d.c. resistance of the load */
    double screen_supply_v; /* screen valves */
    double screen_ohm;      /* the dropper */
    double cathode_ohm;     /* 0: cathode at chassis */
    double grid_leak_ohm;
    double return_v;          /* volts at the far end of the grid leak, without back bias */
    bool contact_bias;        /* grounded cathode, bias out of the grid current */
    double coupling_source_v; /* e.m.f. behind the coupling capacitor */
    double coupling_source_ohm;
    double coupling_leak_s; /* all leaks onto this grid together */
    double screen_leak_s;   /* screen to chassis */
    double cathode_leak_s;  /* across the cathode resistor */
    double anode_leak_s;    /* anode to chassis */
    int cathode_node;       /* stages with the same number >= 0 share one cathode resistor */
    int screen_node;        /* the same for one screen dropper */
    int bias_node;          /* the same for one resistance in the negative HT lead */
    double bias_ohm;        /* of that resistance; 0: none */
    double bias_leak_s;     /* of the bias bypass */
    double bias_feed_ohm;   /* between the bias and that bypass; 0: across the bias itself */
    double bias_others_a;   /* current of the rest of the set through it */
};

enum solve_status {
    SOLVE_OK,
    SOLVE_BOTTOMED,     /* the anode is below V_g2/5: voltages stand, no figure for the split */
    SOLVE_BELOW_BOUNDS, /* under 20 % of the row's current: outside the law's stated bounds */
    SOLVE_IMPOSSIBLE    /* a negative resistance or a supply of 0 V; solution untouched */
};

struct stage_solution {
    enum solve_status status;
    double grid_v, cathode_v, anode_v, screen_v; /* screen NaN for a triode */
    double anode_a, screen_a, cathode_a, grid_a;
    double anode_w, screen_w; /* dissipation in the valve */
    double screen_resistor_w;
    double return_v; /* far end of the grid leak, back bias and bias bypass included */
};

/* Solve `count` stages (1 to 8) that are coupled through their nodes; solutions[i] for circuits[i].
   The worst status is returned. */
enum solve_status stages_solve(const struct stage_circuit *circuits, size_t count,
                               struct stage_solution *solutions);

#endif
