/*
 * Propagation of uncertainty against the examples of the GUM (JCGM 100:2008, annex H).
 */
#include "assess/uncertainty.h"

#include "assess/numeric.h"
#include "kit.h"
#include "published_rows.h"

static void gum_h1_end_gauge(void **state)
{
    (void)state;
    const struct uncertainty_budget budget = gum_h1_budget();
    struct uncertainty_result result;
    assert_int_equal(uncertainty_propagate(gum_h1_length, NULL, &budget, &result), UNCERTAINTY_OK);
    assert_close(result.value, GUM_H1_LENGTH_NM, 0.5);
    assert_close(result.standard, 31.71, 0.005);
    assert_close(result.expanded, 63.42, 0.01);
    assert_close(fabs(result.contributions[0]), 25, 0.01);
    assert_close(fabs(result.contributions[1]), 9.7, 0.001);
    assert_close(fabs(result.contributions[2]), 2.9, 0.05);
    assert_close(result.contributions[3], 0, 1e-6);
    assert_close(result.contributions[4], 0, 1e-6);
    assert_close(fabs(result.contributions[5]), 16.7, 0.05);
    assert_close(result.freedom, GUM_H1_FREEDOM, 0.05);
    /* U99 = 2.92 * 32 = 93 nm as printed, with u and nu cut to 32 and 16 */
    assert_close(numeric_t_quantile(0.99, floor(result.freedom)) * ceil(result.standard), 93, 0.5);
}

/* Printed with 0.295 for X; exact is 0.2956. */
static void gum_h2_impedance(void **state)
{
    (void)state;
    struct gum_h2 h2;
    gum_h2_means(&h2);
    assert_close(h2.pairs[0].coefficient, -0.36, 0.005);
    assert_close(h2.pairs[1].coefficient, 0.86, 0.005);
    assert_close(h2.pairs[2].coefficient, -0.65, 0.005);
    const struct uncertainty_budget budget = {h2.inputs, 3, h2.pairs, 3};
    for (size_t i = 0; i < PUBLISHED_COUNT(gum_h2_results); i++) {
        const struct gum_h2_result *row = &gum_h2_results[i];
        struct uncertainty_result result;
        assert_int_equal(uncertainty_propagate(row->function, NULL, &budget, &result),
                         UNCERTAINTY_OK);
        assert_close(result.value, row->value, 0.0005);
        assert_close(result.standard, row->u, row->u_tolerance);
    }
}

static double sum(const double *x, const void *context)
{
    (void)context;
    return x[0] + x[1] + x[2] + x[3];
}

/* JCGM 101:2008, 9.2: a sum of four inputs of u = 1 has u = 2; each nu 10, nu_eff 40 (G.2b). */
static void sum_of_four(void **state)
{
    (void)state;
    const struct uncertain inputs[] = {{0, 1, 10}, {0, 1, 10}, {0, 1, 10}, {0, 1, 10}};
    struct uncertainty_budget budget = {inputs, 4, NULL, 0};
    struct uncertainty_result result;
    uncertainty_propagate(sum, NULL, &budget, &result);
    assert_relative(result.standard, 2.0, 1e-12);
    assert_relative(result.freedom, 40.0, 1e-12);
    /* JCGM 100:2008, 5.2.2 note 1: full correlation adds the parts themselves */
    const struct correlation pairs[] = {{0, 1, 1}, {0, 2, 1}, {0, 3, 1},
                                        {1, 2, 1}, {1, 3, 1}, {2, 3, 1}};
    budget.correlations = pairs;
    budget.correlation_count = 6;
    uncertainty_propagate(sum, NULL, &budget, &result);
    assert_relative(result.standard, 4.0, 1e-12);
}

static double difference(const double *x, const void *context)
{
    (void)context;
    return x[0] - x[1];
}
static double clamped(const double *x, const void *context)
{
    (void)context;
    return fmax(x[0], 0);
}
static double root_of(const double *x, const void *context)
{
    (void)context;
    return sqrt(x[0]);
}

/* Cases worked by hand. */
static void kinks_and_cancellation(void **state)
{
    (void)state;
    const struct uncertain pair[] = {{5, 0.3, 0}, {5, 0.3, 0}};
    const struct correlation full[] = {{0, 1, 1}};
    struct uncertainty_budget budget = {pair, 2, full, 1};
    struct uncertainty_result result;
    assert_int_equal(uncertainty_propagate(difference, NULL, &budget, &result), UNCERTAINTY_OK);
    assert_close(result.standard, 0, 1e-8);
    const struct uncertain at_zero = {0, 2, 0};
    budget = (struct uncertainty_budget){&at_zero, 1, NULL, 0};
    assert_int_equal(uncertainty_propagate(clamped, NULL, &budget, &result), UNCERTAINTY_OK);
    assert_close(result.standard, 2, 1e-12);  /* not 1, the mean of both sides */
    const struct uncertain small = {1, 2, 0}; /* below the step the root has no value */
    budget.inputs = &small;
    assert_int_equal(uncertainty_propagate(root_of, NULL, &budget, &result), UNCERTAINTY_OK);
    assert_close(result.standard, sqrt(3) - 1, 1e-12);
    const struct uncertain negative = {-1, 0.1, 0};
    budget.inputs = &negative;
    result.value = 7;
    assert_int_equal(uncertainty_propagate(root_of, NULL, &budget, &result), UNCERTAINTY_UNDEFINED);
    assert_true(result.value == 7);
    /* three inputs cannot all be opposed to each other */
    const struct uncertain three[] = {{0, 1, 0}, {0, 1, 0}, {0, 1, 0}, {0, 0, 0}};
    const struct correlation opposed[] = {{0, 1, -1}, {0, 2, -1}, {1, 2, -1}};
    budget = (struct uncertainty_budget){three, 4, opposed, 3};
    assert_int_equal(uncertainty_propagate(sum, NULL, &budget, &result), UNCERTAINTY_INCONSISTENT);
}

/* JCGM 100:2008, 4.3.7: u = a/sqrt(3) of a half-width; F.2.2.1: u = 0.29 of one step. */
static void instrument(void **state)
{
    (void)state;
    assert_close(uncertainty_of_accuracy(-10e-6, 0.02, 0.02e-6), 0.22e-6 / sqrt(3), 1e-15);
    assert_close(uncertainty_of_resolution(0.01e-6), 0.29 * 0.01e-6, 0.002e-8);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(gum_h1_end_gauge), cmocka_unit_test(gum_h2_impedance),
        cmocka_unit_test(sum_of_four),      cmocka_unit_test(kinks_and_cancellation),
        cmocka_unit_test(instrument),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
