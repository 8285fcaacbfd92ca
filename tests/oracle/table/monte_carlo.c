/*
 * The propagated uncertainty against a Monte Carlo of the same inputs (JCGM 101:2008, clause 7):
 * a coupling limit, a stage, the plateau of a reform. Seeds are fixed; the count of draws is
 * DRAWS, 10^6 unless the environment says otherwise.
 */
#include "table.h"

#include "assess/absorption.h"
#include "assess/stage_solver.h"
#include "assess/uncertainty.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static long draw_count(void)
{
    const char *given = getenv("DRAWS");
    long count = given ? strtol(given, NULL, 10) : 0;
    return count > 0 ? count : 1000000;
}

struct moments {
    double sum, squares;
    long count;
};

static void add(struct moments *moments, double value)
{
    moments->sum += value;
    moments->squares += value * value;
    moments->count++;
}

static double sd_of(const struct moments *moments)
{
    double mean = moments->sum / (double)moments->count;
    return sqrt(moments->squares / (double)moments->count - mean * mean);
}

/* 6V6GT, 262.5 V, cathode bias; inputs: R_k, R_g, leak in S, volts behind it. */
enum { R_K, R_G, LEAK, SOURCE_V, STAGE_INPUTS };

static struct stage_circuit circuit_of(const double *inputs, const struct valve_law *law)
{
    return (struct stage_circuit){.law = *law,
                                  .supply_v = 262.5,
                                  .screen_supply_v = 262.5,
                                  .anode_ohm = 310,
                                  .cathode_ohm = inputs[R_K],
                                  .grid_leak_ohm = inputs[R_G],
                                  .coupling_source_v = inputs[SOURCE_V],
                                  .coupling_leak_s = inputs[LEAK],
                                  .cathode_node = -1,
                                  .screen_node = -1,
                                  .bias_node = -1};
}

static double cathode_current(const double *inputs, const void *law)
{
    struct stage_circuit circuit = circuit_of(inputs, law);
    struct stage_solution solution;
    stages_solve(&circuit, 1, &solution);
    return solution.cathode_a;
}

/* The leak at which the cathode current has risen by a tenth: secant on log G, few steps. */
static double coupling_limit(const double *inputs, const void *law)
{
    double tried[STAGE_INPUTS];
    memcpy(tried, inputs, sizeof tried);
    tried[LEAK] = 0;
    double wanted_a = 1.1 * cathode_current(tried, law);
    double at[2] = {1e-8, 3e-8}, off[2];
    for (int i = 0; i < 2; i++) {
        tried[LEAK] = at[i];
        off[i] = cathode_current(tried, law) - wanted_a;
    }
    for (int i = 0; i < 20 && fabs(at[1] / at[0] - 1) > 1e-9; i++) {
        double next = at[1] - off[1] * (at[1] - at[0]) / (off[1] - off[0]);
        at[0] = at[1];
        off[0] = off[1];
        at[1] = next;
        tried[LEAK] = next;
        off[1] = cathode_current(tried, law) - wanted_a;
    }
    return at[1];
}

static void rows_of_stage(uncertainty_function function, const char *what, unsigned long long seed)
{
    static const struct origin_of_rows jcgm = {
        "Monte Carlo", "JCGM 101:2008, clause 7: standard deviation of the draws", TRUST_SEEN};
    size_t count;
    const struct valve_row *rows = valve_rows_of("6V6GT", &count);
    struct valve_law law;
    for (size_t i = 0; i < count; i++)
        if (strcmp(rows[i].name, "A1-250") == 0)
            valve_law_fit(&rows[i], &law);
    static const double half_widths[STAGE_INPUTS] = {5, 10e3, 1e-9, 2};
    const double values[STAGE_INPUTS] = {266, 470e3, 20e-9, 98};
    struct uncertain inputs[STAGE_INPUTS];
    for (int i = 0; i < STAGE_INPUTS; i++)
        inputs[i] = (struct uncertain){values[i], half_widths[i] / sqrt(3), 0};
    const struct uncertainty_budget budget = {.inputs = inputs, .input_count = STAGE_INPUTS};
    struct uncertainty_result result = {.value = NAN};
    uncertainty_propagate(function, &law, &budget, &result);
    struct draws draws = draws_from(seed);
    struct moments moments = {0, 0, 0};
    for (long n = draw_count(); n > 0; n--) {
        double drawn[STAGE_INPUTS];
        for (int i = 0; i < STAGE_INPUTS; i++)
            drawn[i] = values[i] + draw_rectangular(&draws, half_widths[i]);
        add(&moments, (function(drawn, &law) - result.value) / result.value);
    }
    char text[120];
    snprintf(text, sizeof text,
             "%s: propagated standard uncertainty over that of the draws, seed %llu", what, seed);
    row_relative(&jcgm, text, 1, result.standard / result.value / sd_of(&moments), 0.03);
}

/* Ten readings of I_s + A*(t/60 s)^-n with 0.5 % of noise: the plateau's stated error against the
   spread of the plateaus found. */
static void rows_of_plateau(void)
{
    static const struct origin_of_rows jcgm = {
        "Monte Carlo", "JCGM 101:2008, clause 7: standard deviation of the draws", TRUST_SEEN};
    static const double times[] = {60, 120, 180, 300, 600, 900, 1200, 1800, 2700, 3600};
    enum { READINGS = sizeof times / sizeof *times };
    const unsigned long long seed = 20310210;
    struct absorption_reading readings[READINGS];
    for (int i = 0; i < READINGS; i++) {
        double current_a = 300e-6 + 900e-6 * pow(times[i] / 60, -0.7);
        readings[i] = (struct absorption_reading){times[i], current_a, 0.005 * current_a};
    }
    struct decay exact = decay_fit(DECAY_POWER, readings, READINGS);
    struct draws draws = draws_from(seed);
    struct moments moments = {0, 0, 0};
    for (long n = draw_count(); n > 0; n--) {
        struct absorption_reading drawn[READINGS];
        for (int i = 0; i < READINGS; i++) {
            drawn[i] = readings[i];
            drawn[i].current_a += readings[i].sigma_a * draw_normal(&draws);
        }
        struct decay fit = decay_fit(DECAY_POWER, drawn, READINGS);
        if (fit.fitted)
            add(&moments, fit.steady_a * 1e6);
    }
    row_close(&jcgm, "plateau of a reform without noise (uA)", 300, exact.steady_a * 1e6, 0.01);
    row_relative(&jcgm,
                 "plateau of a reform: stated standard error over that of the draws, seed 20310210",
                 1, exact.steady_error_a * 1e6 / sd_of(&moments), 0.05);
}

void rows_of_monte_carlo(void)
{
    rows_of_stage(cathode_current, "cathode current of a stage", 20310203);
    rows_of_stage(coupling_limit, "limit of a coupling part", 20310204);
    rows_of_plateau();
}
