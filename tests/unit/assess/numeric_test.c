/*
 * Roots, least squares and quantiles against published figures.
 */
#include "assess/numeric.h"

#include "kit.h"
#include "published_rows.h"

/* ---- roots */

static double cubic(double x, const void *context)
{
    (void)context;
    return x * x * x - 2 * x - 5;
}
static double steep(double x, const void *context)
{
    (void)context;
    return exp(x) - 1e6;
}
static double straight(double x, const void *context)
{
    (void)context;
    return 1 - x;
}
static double step(double x, const void *context)
{
    (void)context;
    return x < 0.3 ? -1 : 1;
}

static void roots(void **state)
{
    (void)state;
    double root = 42;
    /* Wallis' cubic: 2.0945514815423265... (OEIS A007493) */
    assert_true(numeric_root(cubic, NULL, 2, 3, &root));
    assert_close(root, 2.0945514815423265, 1e-12);
    assert_true(numeric_root(steep, NULL, -50, 300, &root));
    assert_close(root, 6 * log(10), 1e-9);
    assert_true(numeric_root(step, NULL, 0, 1, &root));
    assert_close(root, 0.3, 1e-11);
    /* an end that is a root already; ends the other way round; no change of sign */
    assert_true(numeric_root(straight, NULL, 1, 300, &root));
    assert_close(root, 1, 0);
    assert_true(numeric_root(cubic, NULL, 3, 2, &root));
    assert_close(root, 2.0945514815423265, 1e-12);
    root = 42;
    assert_false(numeric_root(cubic, NULL, 3, 4, &root));
    assert_true(root == 42);
}

/* Certified figures of the NIST data sets, from both published starts: six digits of parameters and
   of standard errors. */
static void nist_nonlinear_regression(void **state)
{
    (void)state;
    for (size_t i = 0; i < PUBLISHED_COUNT(published_fits); i++)
        for (int start = 0; start < 2; start++) {
            const struct published_fit *set = &published_fits[i];
            struct numeric_fit fit;
            enum numeric_status status = published_fit_solve(set, start, &fit);
            if (status != NUMERIC_OK)
                print_error("%s from start %d: status %d\n", set->name, start + 1, status);
            assert_int_equal(status, NUMERIC_OK);
            assert_int_equal(fit.freedom, set->count - set->parameter_count);
            assert_relative(fit.sum_of_squares, set->sum, 1e-6);
            assert_relative(fit.residual_sd, set->sd, 1e-6);
            for (size_t p = 0; p < set->parameter_count; p++) {
                assert_relative(fit.parameters[p], set->certified[p], 1e-6);
                assert_relative(fit.standard_errors[p], set->errors[p], 1e-6);
            }
        }
}

static double line(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] + b[1] * x;
}
static double twice_the_same(double x, const double *b, const void *context)
{
    (void)context;
    return (b[0] + b[1]) * x;
}

/* With weights: a straight line has its errors in closed form, s_b = sigma/sqrt(sum (x-mean)^2). */
static void weighted_line(void **state)
{
    (void)state;
    const double x[] = {1, 2, 3, 4}, y[] = {3.1, 4.9, 7.2, 8.8}, sigma[] = {0.2, 0.2, 0.2, 0.2};
    const double start[] = {0, 1};
    struct numeric_fit fit;
    assert_int_equal(numeric_least_squares(line, NULL, x, y, sigma, 4, start, 2, &fit), NUMERIC_OK);
    assert_close(fit.parameters[1], 1.94, 1e-8);
    assert_close(fit.parameters[0], 1.15, 1e-8);
    assert_relative(fit.standard_errors[1], 0.2 / sqrt(5), 1e-8);
    assert_relative(fit.standard_errors[0], 0.2 * sqrt(30 / 20.0), 1e-8);
    assert_relative(fit.sum_of_squares, 0.082 / 0.04, 1e-7);
}

static void fits_that_are_none(void **state)
{
    (void)state;
    const double x[] = {1, 2, 3}, y[] = {1, 2, 4}, start[] = {1, 1};
    struct numeric_fit fit = {.freedom = 99};
    assert_int_equal(numeric_least_squares(line, NULL, x, y, NULL, 2, start, 2, &fit),
                     NUMERIC_TOO_FEW);
    assert_int_equal(numeric_least_squares(twice_the_same, NULL, x, y, NULL, 3, start, 2, &fit),
                     NUMERIC_SINGULAR);
    assert_int_equal(fit.freedom, 99);
}

/* Student's t, two-sided: JCGM 100:2008, table G.2; chi^2: NIST e-Handbook 1.3.6.7.4. */
static void quantiles(void **state)
{
    (void)state;
    static const double t95[][2] = {{1, 12.71}, {2, 4.30},  {3, 3.18},  {4, 2.78},  {5, 2.57},
                                    {8, 2.31},  {10, 2.23}, {16, 2.12}, {30, 2.04}, {100, 1.984}};
    for (size_t i = 0; i < sizeof t95 / sizeof t95[0]; i++)
        assert_close(numeric_t95(t95[i][0]), t95[i][1], 0.0051);
    assert_close(numeric_t95(INFINITY), 1.959964, 1e-6);
    assert_close(numeric_t_quantile(0.99, 16), 2.92, 0.005);
    assert_close(numeric_t_quantile(0.99, 1), 63.66, 0.005);
    /* one degree of freedom is Cauchy's: tan(0.475 pi); two have a closed form as well */
    assert_relative(numeric_t95(1), tan(0.475 * acos(-1)), 1e-9);
    assert_relative(numeric_t95(2), 0.95 * sqrt(2 / (1 - 0.95 * 0.95)), 1e-9);
    assert_close(numeric_chi2_quantile(0.99, 1), 6.635, 0.0005);
    assert_close(numeric_chi2_quantile(0.99, 2), 9.210, 0.0005);
    assert_close(numeric_chi2_quantile(0.99, 5), 15.086, 0.0005);
    assert_close(numeric_chi2_quantile(0.99, 30), 50.892, 0.0005);
    assert_close(numeric_chi2_quantile(0.95, 10), 18.307, 0.0005);
    assert_close(numeric_chi2_quantile(0.99, 100), 135.807, 0.0005);
    assert_relative(numeric_chi2_quantile(0.99, 2), -2 * log(0.01), 1e-9);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(roots),         cmocka_unit_test(nist_nonlinear_regression),
        cmocka_unit_test(weighted_line), cmocka_unit_test(fits_that_are_none),
        cmocka_unit_test(quantiles),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
