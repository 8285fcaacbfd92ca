/*
 * Circuits for the tests of the stage solver, made from rows of the valve book.
 */
#ifndef TESTS_STAGES_H
#define TESTS_STAGES_H

#include "assess/stage_solver.h"

#include <string.h>

#include "kit.h"

/* The law of one row of the valve book. */
static inline struct valve_law law_of(const char *type, const char *row_name)
{
    size_t count;
    const struct valve_row *rows = valve_rows_of(type, &count);
    for (size_t i = 0; rows && i < count; i++) {
        struct valve_law law;
        if (strcmp(rows[i].name, row_name) == 0) {
            enum law_status status = valve_law_fit(&rows[i], &law);
            assert_true(status == LAW_OK || status == LAW_WARN_MU12);
            return law;
        }
    }
    print_error("no row %s %s\n", type, row_name);
    fail();
    return (struct valve_law){0};
}

/* A stage that shares nothing: supplies in volts, no resistances, no leaks. */
static inline struct stage_circuit stage_of(const char *type, const char *row_name, double supply_v,
                                            double screen_supply_v)
{
    return (struct stage_circuit){.law = law_of(type, row_name),
                                  .supply_v = supply_v,
                                  .screen_supply_v = screen_supply_v,
                                  .cathode_node = -1,
                                  .screen_node = -1,
                                  .bias_node = -1};
}

#endif
