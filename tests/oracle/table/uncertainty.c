/* The GUM's examples, intervals of shares, decision rule. */
#include "table.h"

#include "assess/share.h"
#include "assess/verdict.h"
#include "published_rows.h"

#include <stdio.h>

static void rows_of_h1(void)
{
    static const struct origin_of_rows gum = {"Uncertainty", "JCGM 100:2008, H.1, end gauge (nm)",
                                              TRUST_SEEN};
    const struct uncertainty_budget budget = gum_h1_budget();
    struct uncertainty_result result = {.value = NAN};
    uncertainty_propagate(gum_h1_length, NULL, &budget, &result);
    row_close(&gum, "length", GUM_H1_LENGTH_NM, result.value, 0.5);
    row_close(&gum, "combined standard uncertainty", GUM_H1_U_NM, result.standard, 0.5);
    row_close(&gum, "effective degrees of freedom", GUM_H1_FREEDOM, result.freedom, 0.05);
}

static void rows_of_h2(void)
{
    static const struct origin_of_rows gum = {
        "Uncertainty", "JCGM 100:2008, H.2, resistance and reactance", TRUST_SEEN};
    struct gum_h2 h2;
    gum_h2_means(&h2);
    const struct uncertainty_budget budget = {h2.inputs, 3, h2.pairs, 3};
    for (size_t i = 0; i < PUBLISHED_COUNT(gum_h2_results); i++) {
        const struct gum_h2_result *row = &gum_h2_results[i];
        struct uncertainty_result result = {.value = NAN};
        char what[60];
        uncertainty_propagate(row->function, NULL, &budget, &result);
        row_close(&gum, row->name, row->value, result.value, 0.0006);
        snprintf(what, sizeof what, "%s, standard uncertainty", row->name);
        row_close(&gum, what, row->u, result.standard, 0.001);
    }
}

static void rows_of_wilson(void)
{
    static const struct origin_of_rows newcombe = {
        "Shares", "Newcombe 1998, Statistics in Medicine 17, 857, table I", TRUST_SEEN};
    for (size_t i = 0; i < PUBLISHED_COUNT(newcombe_rows); i++) {
        const struct newcombe_row *row = &newcombe_rows[i];
        double low = NAN, high = NAN;
        char what[60];
        share_wilson(row->x / row->n, row->n, &low, &high);
        snprintf(what, sizeof what, "%g of %g, lower", row->x, row->n);
        row_close(&newcombe, what, row->low, low, 0.00005);
        snprintf(what, sizeof what, "%g of %g, upper", row->x, row->n);
        row_close(&newcombe, what, row->high, high, 0.00005);
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
