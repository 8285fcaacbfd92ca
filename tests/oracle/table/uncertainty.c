/* The GUM's examples, intervals of shares, decision rule. */
#include "table.h"

#include "assess/numeric.h"
#include "assess/share.h"
#include "assess/uncertainty.h"
#include "assess/verdict.h"

#include <stdio.h>

static double end_gauge(const double *x, const void *context)
{
    (void)context;
    return x[0] + x[1] - x[0] * (x[2] * x[3] + x[4] * x[5]);
}

static void rows_of_h1(void)
{
    static const struct origin_of_rows gum = {"Uncertainty", "JCGM 100:2008, H.1, end gauge (nm)",
                                              TRUST_SEEN};
    const struct uncertain inputs[] = {
        {50000623, 25, 18},          {215, 9.7, 25.6}, {0, 0.58e-6, 50}, {-0.1, 0.41, 0},
        {11.5e-6, 1.2e-6, INFINITY}, {0, 0.029, 2}};
    const struct uncertainty_budget budget = {.inputs = inputs, .input_count = 6};
    struct uncertainty_result result = {.value = NAN};
    uncertainty_propagate(end_gauge, NULL, &budget, &result);
    row_close(&gum, "length", 50000838, result.value, 0.5);
    row_close(&gum, "combined standard uncertainty", 32, result.standard, 0.5);
    row_close(&gum, "effective degrees of freedom", 16.7, result.freedom, 0.05);
}

static double resistance(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1] * cos(x[2]);
}
static double reactance(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1] * sin(x[2]);
}
static double impedance(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1];
}

static void rows_of_h2(void)
{
    static const struct origin_of_rows gum = {
        "Uncertainty", "JCGM 100:2008, H.2, resistance and reactance", TRUST_SEEN};
    static const double readings[5][3] = {{5.007, 19.663, 1.0456},
                                          {4.994, 19.639, 1.0438},
                                          {5.005, 19.640, 1.0468},
                                          {4.990, 19.685, 1.0428},
                                          {4.999, 19.678, 1.0433}};
    struct uncertain inputs[3] = {{0}};
    double products[3][3] = {{0}};
    for (int q = 0; q < 3; q++)
        for (int i = 0; i < 5; i++)
            inputs[q].value += readings[i][q] / 5;
    for (int p = 0; p < 3; p++)
        for (int q = 0; q < 3; q++)
            for (int i = 0; i < 5; i++)
                products[p][q] +=
                    (readings[i][p] - inputs[p].value) * (readings[i][q] - inputs[q].value) / 20;
    struct correlation pairs[3] = {{0, 1, 0}, {0, 2, 0}, {1, 2, 0}};
    for (int q = 0; q < 3; q++)
        inputs[q].standard = sqrt(products[q][q]);
    for (int i = 0; i < 3; i++)
        pairs[i].coefficient = products[pairs[i].first][pairs[i].second] /
                               (inputs[pairs[i].first].standard * inputs[pairs[i].second].standard);
    inputs[1].value *= 1e-3;
    inputs[1].standard *= 1e-3;
    const struct uncertainty_budget budget = {inputs, 3, pairs, 3};
    static const struct {
        const char *name;
        uncertainty_function function;
        double value, u;
    } rows[] = {{"R (ohm)", resistance, 127.732, 0.071},
                {"X (ohm)", reactance, 219.847, 0.295},
                {"Z (ohm)", impedance, 254.260, 0.236}};
    for (size_t i = 0; i < 3; i++) {
        struct uncertainty_result result = {.value = NAN};
        char what[60];
        uncertainty_propagate(rows[i].function, NULL, &budget, &result);
        row_close(&gum, rows[i].name, rows[i].value, result.value, 0.0006);
        snprintf(what, sizeof what, "%s, standard uncertainty", rows[i].name);
        row_close(&gum, what, rows[i].u, result.standard, 0.001);
    }
}

static void rows_of_wilson(void)
{
    static const struct origin_of_rows newcombe = {
        "Shares", "Newcombe 1998, Statistics in Medicine 17, 857, table I", TRUST_SEEN};
    static const struct {
        double x, n, low, high;
    } rows[] = {
        {81, 263, .2553, .3662}, {15, 148, .0624, .1605}, {0, 20, 0, .1611}, {1, 29, .0061, .1718}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double low = NAN, high = NAN;
        char what[60];
        share_wilson(rows[i].x / rows[i].n, rows[i].n, &low, &high);
        snprintf(what, sizeof what, "%g of %g, lower", rows[i].x, rows[i].n);
        row_close(&newcombe, what, rows[i].low, low, 0.00005);
        snprintf(what, sizeof what, "%g of %g, upper", rows[i].x, rows[i].n);
        row_close(&newcombe, what, rows[i].high, high, 0.00005);
    }
}

/* The greatest figure that passes a limit of 11 with a guard band of so many times U = 0.2. */
static double acceptance_limit(double multiple)
{
    double low = 0, high = 20;
    for (int i = 0; i < 60; i++) {
        double middle = (low + high) / 2;
        struct verdict_case judged = {
            .value = middle, .limit = 11, .guard = multiple * 0.2, .upper = true};
        if (verdict_of(&judged) == OUTCOME_PASS)
            low = middle;
        else
            high = middle;
    }
    return low;
}

static void rows_of_guard_bands(void)
{
    static const struct origin_of_rows g8 = {
        "Decision rule", "ILAC-G8:09/2019, 4 and table of multiples; limit 11, U 0.2", TRUST_SEEN};
    static const struct {
        const char *what;
        double multiple, limit;
    } rows[] = {{"w = 0", 0, 11.0},
                {"w = 0.83 U", 0.83, 10.834},
                {"w = U", 1, 10.8},
                {"w = 1.5 U", 1.5, 10.7},
                {"w = 3 U", 3, 10.4}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        row_close(&g8, rows[i].what, rows[i].limit, acceptance_limit(rows[i].multiple), 1e-6);
}

void rows_of_uncertainty(void)
{
    rows_of_h1();
    rows_of_h2();
    rows_of_wilson();
    rows_of_guard_bands();
}
