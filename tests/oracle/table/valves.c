/* The law against rows and tables that it was not fitted to. */
#include "table.h"

#include "assess/stage_solver.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static int by_size(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

enum { ERRORS_MAX = 512 };
struct errors {
    double values[ERRORS_MAX];
    size_t count;
};

/* Fit one row, predict another of its type, outside of cut-off. */
static void compare(const struct valve_row *fitted, const struct valve_row *other,
                    struct errors *errors)
{
    struct valve_law law;
    if (!fitted || other->doubtful || errors->count == ERRORS_MAX)
        return;
    enum law_status status = valve_law_fit(fitted, &law);
    if (status != LAW_OK && status != LAW_WARN_MU12)
        return;
    struct valve_currents got = valve_law_currents(&law, other->vg1_v, other->vg2_v, other->va_v);
    if (got.cathode_a < 0.2 * law.ik0_a) /* outside the stated bounds */
        return;
    errors->values[errors->count++] = fabs(got.anode_a / other->ia_a - 1);
}

/* The other row that the program would choose; seen: of those seen in a manual. */
static const struct valve_row *nearest_other(const struct valve_row *rows, size_t count,
                                             const struct valve_row *row, bool seen)
{
    struct valve_row others[32];
    const struct valve_row *sources[32];
    size_t found = 0;
    for (size_t i = 0; i < count && found < 32; i++)
        if (&rows[i] != row && isfinite(rows[i].gm_s) &&
            (!seen || rows[i].row_trust == TRUST_SEEN)) {
            sources[found] = &rows[i];
            others[found++] = rows[i];
        }
    const struct valve_row *best = valve_row_nearest(others, found, row->va_v, row->vg2_v);
    return best ? sources[best - others] : NULL;
}

static void print_errors(const struct origin_of_rows *origin, const char *family,
                         struct errors *errors, double median, double ninety)
{
    char what[100];
    if (errors->count == 0)
        return;
    qsort(errors->values, errors->count, sizeof *errors->values, by_size);
    snprintf(what, sizeof what, "%s, %zu pairs, median error (%%)", family, errors->count);
    row_between(origin, what, 0, median, 100 * errors->values[errors->count / 2]);
    snprintf(what, sizeof what, "%s, error of nine in ten (%%)", family);
    row_between(origin, what, 0, ninety, 100 * errors->values[errors->count * 9 / 10]);
}

/*
 * Bounds stated for the law: of all printed rows half lie within 5 %, nine in ten within 19 % of
 * the law fitted to the nearest other row; of those that were seen in the manual itself 6 and 20 %.
 * Triodes spread most: their rows reach from 90 to 250 V and down to a tenth of the current.
 */
static void rows_of_siblings(void)
{
    static const struct origin_of_rows manuals = {
        "Valve law", "rows of one type in the makers' manuals, fitted to one, held to the next",
        TRUST_SEEN};
    static const struct origin_of_rows book_rows = {
        "Valve law", "the same with the rows that are recalled", TRUST_RECALLED};
    static const struct {
        double median, ninety;
    } stated[] = {[VALVE_TRIODE] = {12, 36},       [VALVE_POWER_TRIODE] = {6, 13},
                  [VALVE_BEAM] = {6, 20},          [VALVE_OUTPUT_PENTODE] = {6, 20},
                  [VALVE_SMALL_PENTODE] = {5, 10}, [VALVE_REMOTE_PENTODE] = {10, 20}};
    size_t count;
    const struct valve_row *book = valve_book(&count);
    struct errors all = {.count = 0}, seen = {.count = 0}, family[VALVE_REMOTE_PENTODE + 1];
    memset(family, 0, sizeof family);
    for (size_t i = 0; i < count; i++) {
        size_t type_count;
        const struct valve_row *rows = valve_rows_of(book[i].type, &type_count);
        compare(nearest_other(rows, type_count, &book[i], false), &book[i], &all);
        if (book[i].row_trust != TRUST_SEEN)
            continue;
        const struct valve_row *fitted = nearest_other(rows, type_count, &book[i], true);
        compare(fitted, &book[i], &seen);
        compare(fitted, &book[i], &family[book[i].kind]);
    }
    print_errors(&book_rows, "all rows", &all, 5, 19);
    print_errors(&manuals, "seen rows", &seen, 6, 20);
    for (int kind = 0; kind <= VALVE_REMOTE_PENTODE; kind++)
        print_errors(&manuals, valve_kind_text((enum valve_kind)kind), &family[kind],
                     stated[kind].median, stated[kind].ninety);
}

static struct stage_circuit stage_of(const char *type, const char *name, double supply_v)
{
    struct stage_circuit circuit = {.supply_v = supply_v,
                                    .screen_supply_v = supply_v,
                                    .grid_leak_ohm = 1e6,
                                    .cathode_node = -1,
                                    .screen_node = -1,
                                    .bias_node = -1};
    size_t count;
    const struct valve_row *rows = valve_rows_of(type, &count);
    for (size_t i = 0; i < count; i++)
        if (strcmp(rows[i].name, name) == 0)
            valve_law_fit(&rows[i], &circuit.law);
    return circuit;
}

static void rows_of_tables(void)
{
    static const struct origin_of_rows ecc83 = {
        "Valve law", "Philips ECC83, resistance-coupled, R_a 100k: stated +1 to +3.3 % (mA)",
        TRUST_SEEN};
    static const struct origin_of_rows ef86 = {
        "Valve law", "Philips EF86, R_a 100k, R_g2 390k, R_k 1k: stated +3 to +7 % (mA)",
        TRUST_SEEN};
    static const struct origin_of_rows ef804s = {
        "Valve law", "Telefunken EF804S, 250 V: stated within 12 % (mA)", TRUST_SEEN};
    static const double triode[][3] = {
        {200, 1800, .65}, {250, 1500, .86}, {300, 1200, 1.11}, {350, 1000, 1.40}, {400, 820, 1.72}};
    static const double pentode[][2] = {
        {400, 3.2}, {350, 2.75}, {300, 2.4}, {250, 2.0}, {200, 1.55}};
    static const double telefunken[][5] = {{.3e6, 1.5e6, 2e3, .61, .11},
                                           {.2e6, 1e6, 1.5e3, .87, .16}};
    struct stage_solution solution;
    char what[80];
    for (size_t i = 0; i < 5; i++) {
        struct stage_circuit circuit = stage_of("ECC83", "A1-250", triode[i][0]);
        circuit.anode_ohm = 100e3;
        circuit.cathode_ohm = triode[i][1];
        circuit.grid_leak_ohm = 0;
        stages_solve(&circuit, 1, &solution);
        snprintf(what, sizeof what, "ECC83, %g V, %g ohm", triode[i][0], triode[i][1]);
        row_between(&ecc83, what, triode[i][2] * 1.005, triode[i][2] * 1.035,
                    1e3 * solution.anode_a);
    }
    for (size_t i = 0; i < 5; i++) {
        struct stage_circuit circuit = stage_of("EF86", "250/140", pentode[i][0]);
        circuit.anode_ohm = 100e3;
        circuit.screen_ohm = 390e3;
        circuit.cathode_ohm = 1e3;
        circuit.grid_leak_ohm = 0;
        stages_solve(&circuit, 1, &solution);
        snprintf(what, sizeof what, "EF86, %g V, cathode current", pentode[i][0]);
        row_between(&ef86, what, pentode[i][1] * 1.015, pentode[i][1] * 1.075,
                    1e3 * solution.cathode_a);
    }
    for (size_t i = 0; i < 2; i++) {
        struct stage_circuit circuit = stage_of("EF804S", "250/140 Rk500", 250);
        circuit.anode_ohm = telefunken[i][0];
        circuit.screen_ohm = telefunken[i][1];
        circuit.cathode_ohm = telefunken[i][2];
        stages_solve(&circuit, 1, &solution);
        snprintf(what, sizeof what, "EF804S, R_a %g k, anode", telefunken[i][0] / 1e3);
        row_relative(&ef804s, what, telefunken[i][3], 1e3 * solution.anode_a, 0.12);
        snprintf(what, sizeof what, "EF804S, R_a %g k, screen", telefunken[i][0] / 1e3);
        row_relative(&ef804s, what, telefunken[i][4], 1e3 * solution.screen_a, 0.12);
    }
}

/* 6V6GT at its own row: R_k and nothing else, RCA RC-19. */
static void rows_of_row(void)
{
    static const struct origin_of_rows row = {
        "Valve law", "RCA RC-19, 6V6GT 250 V, 250 V, -12.5 V: 45 + 4.5 mA through 252.5 ohm",
        TRUST_SEEN};
    struct stage_circuit circuit = stage_of("6V6GT", "A1-250", 262.5);
    circuit.cathode_ohm = 12.5 / 49.5e-3;
    struct stage_solution solution;
    stages_solve(&circuit, 1, &solution);
    row_relative(&row, "anode current (mA)", 45, 1e3 * solution.anode_a, 0.001);
    row_relative(&row, "screen current (mA)", 4.5, 1e3 * solution.screen_a, 0.001);
}

void rows_of_valves(void)
{
    rows_of_row();
    rows_of_siblings();
    rows_of_tables();
}
