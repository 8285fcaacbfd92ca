/* The program's least squares on NIST's reference data: certified parameters, standard errors. */
#include "table.h"

#include "published_rows.h"

#include <stdio.h>

void rows_of_fits(void)
{
    static const struct origin_of_rows nist = {
        "Fits", "NIST StRD, nonlinear regression, certified values", TRUST_SEEN};
    for (size_t i = 0; i < PUBLISHED_COUNT(published_fits); i++) {
        const struct published_fit *set = &published_fits[i];
        struct numeric_fit fit = {.parameters = {NAN, NAN, NAN, NAN, NAN, NAN}};
        published_fit_solve(set, 0, &fit);
        for (size_t k = 0; k < set->parameter_count; k++) {
            char what[60];
            snprintf(what, sizeof what, "%s b%zu", set->name, k + 1);
            row_relative(&nist, what, set->certified[k], fit.parameters[k], 1e-4);
            snprintf(what, sizeof what, "%s b%zu, standard error", set->name, k + 1);
            row_relative(&nist, what, set->errors[k], fit.standard_errors[k], 1e-3);
        }
    }
}
