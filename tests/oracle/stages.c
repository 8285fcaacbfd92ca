/*
 * Prints circuits and what stages_solve makes of them, a line a stage of `key=value`, for
 * netlist.awk to build the same circuits for ngspice and for compare.awk to hold both together.
 * Of the valve only the figures of its row are printed: the law is written again in the netlist.
 */
#include "assess/stage_solver.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

struct oracle_stage {
    const char *type, *row;
    struct stage_circuit circuit; /* without its law; here a node 0 is shared with none */
};
struct oracle_case {
    const char *name;
    size_t count;
    struct oracle_stage stages[3];
};

#define STAGE(type, row, ...)                                                                      \
    {                                                                                              \
        type, row,                                                                                 \
        {                                                                                          \
            __VA_ARGS__                                                                            \
        }                                                                                          \
    }
#define ONE(name, type, row, ...)                                                                  \
    {                                                                                              \
        name, 1,                                                                                   \
        {                                                                                          \
            STAGE(type, row, __VA_ARGS__)                                                          \
        }                                                                                          \
    }
#define SUPPLY(volts)               .supply_v = (volts)
#define SUPPLIES(anode_v, screen_v) .supply_v = (anode_v), .screen_supply_v = (screen_v)
/* The capacitor leaks `ohm` between the source and the grid. */
#define COUPLING(source_v, source_ohm, ohm)                                                        \
    .coupling_source_v = (source_v), .coupling_source_ohm = (source_ohm),                          \
    .coupling_leak_s = 1 / (ohm)

static const struct oracle_case cases[] = {
    ONE("beam_cathode_bias_coupling_leak", "6V6GT", "A1-250", SUPPLIES(300, 300), .anode_ohm = 300,
        .screen_ohm = 10e3, .cathode_ohm = 253, .grid_leak_ohm = 470e3, COUPLING(90, 100e3, 20e6)),
    ONE("beam_cathode_bias_no_leak", "6V6GT", "A1-250", SUPPLIES(300, 300), .anode_ohm = 300,
        .screen_ohm = 10e3, .cathode_ohm = 253, .grid_leak_ohm = 470e3),
    ONE("beam_fixed_bias_coupling_leak", "6L6", "A1-350", SUPPLIES(360, 270), .anode_ohm = 120,
        .return_v = -19, .grid_leak_ohm = 100e3, COUPLING(160, 47e3, 5e6)),
    ONE("beam_grid_driven_positive", "50L6GT", "A1-110", SUPPLIES(130, 120), .anode_ohm = 150,
        .cathode_ohm = 150, .grid_leak_ohm = 470e3, COUPLING(100, 220e3, 0.5e6)),
    ONE("beam_screen_and_cathode_bypass_leak", "35L6GT", "A1-110", SUPPLIES(120, 115),
        .anode_ohm = 200, .screen_ohm = 1e3, .cathode_ohm = 170, .grid_leak_ohm = 470e3,
        .screen_leak_s = 1 / 50e3, .cathode_leak_s = 1 / 900.0),
    ONE("output_pentode_coupling_leak", "EL84", "A-250", SUPPLIES(265, 260), .anode_ohm = 450,
        .screen_ohm = 1e3, .cathode_ohm = 140, .grid_leak_ohm = 680e3, COUPLING(95, 80e3, 40e6)),
    ONE("output_pentode_cathode_bypass_leak", "EL84", "A-250", SUPPLIES(257, 257), .anode_ohm = 500,
        .cathode_ohm = 136, .grid_leak_ohm = 1e6, .cathode_leak_s = 1 / 1360.0),
    ONE("output_pentode_two_leaks", "6F6", "A1-250", SUPPLIES(280, 270), .anode_ohm = 400,
        .screen_ohm = 2.2e3, .cathode_ohm = 407, .grid_leak_ohm = 500e3, COUPLING(110, 60e3, 12e6),
        .cathode_leak_s = 1 / 4e3),
    ONE("output_pentode_fixed_bias", "6K6GT", "A1-250", SUPPLIES(250, 250), .anode_ohm = 500,
        .return_v = -18, .grid_leak_ohm = 1e6, COUPLING(120, 0, 50e6)),
    ONE("fixed_bias_bypass_and_coupling_leak", "KT66", "A1-250 Rk170", SUPPLIES(260, 255),
        .anode_ohm = 150, .return_v = -16, .grid_leak_ohm = 100e3, COUPLING(180, 33e3, 20e6),
        .bias_feed_ohm = 47e3, .bias_leak_s = 1 / 0.8e6),
    ONE("fixed_bias_with_leaking_bias_bypass", "6F6", "A1-250", SUPPLIES(250, 250),
        .anode_ohm = 300, .return_v = -16.5, .grid_leak_ohm = 470e3, .bias_feed_ohm = 100e3,
        .bias_leak_s = 1 / 1e6),
    ONE("back_bias", "6V6GT", "A1-250", SUPPLIES(250, 250), .bias_node = 5, .bias_ohm = 165,
        .bias_others_a = 26e-3, .anode_ohm = 350, .grid_leak_ohm = 470e3),
    ONE("back_bias_leaking_bypass_and_coupling", "41", "A1-250", SUPPLIES(245, 240), .bias_node = 5,
        .bias_ohm = 220, .bias_others_a = 45e-3, .anode_ohm = 500, .screen_ohm = 500,
        .grid_leak_ohm = 500e3, COUPLING(95, 70e3, 18e6), .bias_feed_ohm = 220e3,
        .bias_leak_s = 1 / 2e6),
    {"back_bias_of_two_stages",
     2,
     {STAGE("6F6", "A1-250", SUPPLIES(260, 255), .bias_node = 4, .bias_ohm = 250,
            .bias_others_a = 8e-3, .anode_ohm = 400, .grid_leak_ohm = 500e3,
            COUPLING(90, 100e3, 15e6)),
      STAGE("6SK7", "250", SUPPLIES(250, 250), .bias_node = 4, .bias_ohm = 250,
            .bias_others_a = 8e-3, .screen_ohm = 60e3, .cathode_ohm = 300, .return_v = 17,
            .grid_leak_ohm = 0)}},
    ONE("triode_cathode_bias", "12AX7", "A1-250", SUPPLY(250), .anode_ohm = 100e3,
        .cathode_ohm = 1500, .grid_leak_ohm = 1e6),
    ONE("triode_coupling_leak", "12AU7", "A1-250", SUPPLY(280), .anode_ohm = 47e3,
        .cathode_ohm = 1500, .grid_leak_ohm = 470e3, COUPLING(110, 50e3, 60e6)),
    ONE("triode_direct_coupled", "6SN7", "A1-250", SUPPLY(320), .anode_ohm = 22e3,
        .cathode_ohm = 22e3, .return_v = 98, .grid_leak_ohm = 1e6),
    ONE("triode_anode_and_cathode_leak", "6SL7", "A1-250", SUPPLY(300), .anode_ohm = 220e3,
        .cathode_ohm = 2.2e3, .grid_leak_ohm = 1e6, .cathode_leak_s = 1 / 30e3,
        .anode_leak_s = 1 / 2e6),
    ONE("triode_contact_bias", "12AX7", "A1-250", SUPPLY(250), .anode_ohm = 220e3,
        .grid_leak_ohm = 10e6, .contact_bias = true),
    ONE("triode_contact_bias_coupling_leak", "6SQ7", "A1-250 (later issue)", SUPPLY(250),
        .anode_ohm = 220e3, .grid_leak_ohm = 10e6, COUPLING(100, 0, 1e9), .contact_bias = true),
    ONE("power_triode_cathode_bias", "2A3", "A1-250", SUPPLY(300), .anode_ohm = 100,
        .cathode_ohm = 750, .grid_leak_ohm = 250e3, COUPLING(130, 40e3, 3e6)),
    ONE("power_triode_without_gm", "2A3", "AB1-300 per valve", SUPPLY(300), .anode_ohm = 80,
        .return_v = -60, .grid_leak_ohm = 50e3, COUPLING(100, 0, 1e6)),
    ONE("small_pentode_resistance_coupled", "EF86", "250/140", SUPPLIES(250, 250),
        .anode_ohm = 220e3, .screen_ohm = 1e6, .cathode_ohm = 2.2e3, .grid_leak_ohm = 1e6,
        COUPLING(100, 0.1e6, 100e6)),
    ONE("small_pentode_screen_leak", "6SJ7", "A1-250", SUPPLIES(250, 250), .anode_ohm = 100e3,
        .screen_ohm = 470e3, .cathode_ohm = 800, .grid_leak_ohm = 1e6, .screen_leak_s = 1 / 3e6),
    ONE("small_pentode_bottomed", "EF86", "250/140", SUPPLIES(250, 250), .anode_ohm = 470e3,
        .screen_ohm = 470e3, .cathode_ohm = 1e3, .grid_leak_ohm = 1e6),
    ONE("remote_pentode_screen_and_cathode_leak", "6BA6", "250 Rk68", SUPPLIES(240, 240),
        .screen_ohm = 33e3, .cathode_ohm = 68, .grid_leak_ohm = 1e6, .screen_leak_s = 1 / 400e3,
        .cathode_leak_s = 1 / 1e3),
    {"two_beam_valves_on_one_cathode_resistor",
     2,
     {STAGE("6V6GT", "A1-250", SUPPLIES(262.5, 262.5), .cathode_node = 1, .cathode_ohm = 126.3,
            .grid_leak_ohm = 470e3, COUPLING(120, 50e3, 8e6)),
      STAGE("6V6GT", "A1-250", SUPPLIES(262.5, 262.5), .cathode_node = 1, .cathode_ohm = 126.3,
            .grid_leak_ohm = 470e3)}},
    {"push_pull_common_cathode_and_dropper",
     2,
     {STAGE("EL84", "A-250", SUPPLIES(300, 300), .cathode_node = 1, .screen_node = 2,
            .anode_ohm = 150, .screen_ohm = 2.2e3, .cathode_ohm = 82, .grid_leak_ohm = 470e3,
            COUPLING(120, 50e3, 30e6), .cathode_leak_s = 1 / 2e3),
      STAGE("EL84", "A-250", SUPPLIES(300, 300), .cathode_node = 1, .screen_node = 2,
            .anode_ohm = 170, .screen_ohm = 2.2e3, .cathode_ohm = 82, .grid_leak_ohm = 470e3)}},
    {"two_stages_on_one_dropper",
     2,
     {STAGE("6BA6", "250 Rk68", SUPPLIES(250, 245), .screen_node = 6, .screen_ohm = 15e3,
            .cathode_ohm = 68, .grid_leak_ohm = 1e6, .screen_leak_s = 1 / 300e3),
      STAGE("6AU6", "250/125 Rk100", SUPPLIES(250, 245), .screen_node = 6, .anode_ohm = 10e3,
            .screen_ohm = 15e3, .cathode_ohm = 150, .grid_leak_ohm = 470e3)}},
    {"three_triodes_on_one_cathode_resistor",
     3,
     {STAGE("12AT7", "A1-250 Rk200", SUPPLY(250), .cathode_node = 3, .anode_ohm = 22e3,
            .cathode_ohm = 470, .grid_leak_ohm = 1e6, COUPLING(50, 0, 100e6)),
      STAGE("12AU7", "A1-250", SUPPLY(250), .cathode_node = 3, .anode_ohm = 33e3,
            .cathode_ohm = 470, .grid_leak_ohm = 1e6),
      STAGE("12AX7", "A1-250", SUPPLY(250), .cathode_node = 3, .anode_ohm = 100e3,
            .cathode_ohm = 470, .grid_leak_ohm = 1e6)}},
};

static const struct valve_row *find_row(const struct oracle_stage *stage)
{
    size_t count;
    const struct valve_row *rows = valve_rows_of(stage->type, &count);
    for (size_t i = 0; rows && i < count; i++)
        if (strcmp(rows[i].name, stage->row) == 0)
            return &rows[i];
    return NULL;
}

static void print_value(const char *key, double value)
{
    if (!isnan(value))
        printf(" %s=%.12g", key, value);
}

static void print_stage(const struct valve_row *row, const struct stage_circuit *c,
                        const struct stage_solution *s)
{
    const struct {
        const char *key;
        double value;
    } values[] = {
        {"va0", row->va_v},
        {"vg20", row->vg2_v},
        {"vg10", row->vg1_v},
        {"ia0", row->ia_a},
        {"ig20", row->ig2_a},
        {"gm", row->gm_s},
        {"mu", row->mu},
        {"mu12", row->mu12},
        {"ra", row->ra_ohm},
        {"supply", c->supply_v},
        {"anode_ohm", c->anode_ohm},
        {"screen_supply", c->screen_supply_v},
        {"screen_ohm", c->screen_ohm},
        {"cathode_ohm", c->cathode_ohm},
        {"grid_leak", c->grid_leak_ohm},
        {"return", c->return_v},
        {"source", c->coupling_source_v},
        {"source_ohm", c->coupling_source_ohm},
        {"coupling_leak", c->coupling_leak_s},
        {"screen_leak", c->screen_leak_s},
        {"cathode_leak", c->cathode_leak_s},
        {"anode_leak", c->anode_leak_s},
        {"bias_ohm", c->bias_ohm},
        {"bias_leak", c->bias_leak_s},
        {"bias_feed", c->bias_feed_ohm},
        {"others", c->bias_others_a},
        {"VG", s->grid_v},
        {"VK", s->cathode_v},
        {"VA", s->anode_v},
        {"VS", s->screen_v},
        {"IA", s->anode_a},
        {"IS", row->kind == VALVE_TRIODE || row->kind == VALVE_POWER_TRIODE ? NAN : s->screen_a},
    };
    printf(" cathode_node=%d screen_node=%d bias_node=%d", c->cathode_node, c->screen_node,
           c->bias_node);
    for (size_t i = 0; i < sizeof values / sizeof values[0]; i++)
        print_value(values[i].key, values[i].value);
    printf("\n");
}

static int run_case(const struct oracle_case *task)
{
    struct stage_circuit circuits[3];
    struct stage_solution solutions[3];
    const struct valve_row *rows[3];
    for (size_t i = 0; i < task->count; i++) {
        circuits[i] = task->stages[i].circuit;
        circuits[i].cathode_node--;
        circuits[i].screen_node--;
        circuits[i].bias_node--;
        rows[i] = find_row(&task->stages[i]);
        if (!rows[i] || valve_law_fit(rows[i], &circuits[i].law) >= LAW_NO_CURRENT) {
            fprintf(stderr, "%s: no law for %s %s\n", task->name, task->stages[i].type,
                    task->stages[i].row);
            return 1;
        }
    }
    if (stages_solve(circuits, task->count, solutions) == SOLVE_IMPOSSIBLE) {
        fprintf(stderr, "%s: not solved\n", task->name);
        return 1;
    }
    for (size_t i = 0; i < task->count; i++) {
        const char *kind = valve_kind_text(rows[i]->kind);
        printf("case=%s stage=%zu kind=", task->name, i + 1);
        for (; *kind; kind++)
            putchar(*kind == ' ' ? '_' : *kind);
        print_stage(rows[i], &circuits[i], &solutions[i]);
    }
    return 0;
}

int main(void)
{
    int failed = 0;
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++)
        failed |= run_case(&cases[i]);
    return failed;
}
