/*
 * Absorption fits: series made from the published laws must give their constants back, and with
 * noise of known size the stated errors must hold as often as they promise.
 */
#include "assess/absorption.h"
#include "assess/numeric.h"

#include "kit.h"

enum { SERIES = 8 };
static const double times_s[SERIES] = {15, 30, 60, 120, 180, 300, 600, 900};

static void power_series(double steady_a, double amplitude_a, double n,
                         struct absorption_reading *readings)
{
    for (int i = 0; i < SERIES; i++) {
        double current_a = steady_a + amplitude_a * pow(times_s[i] / 60, -n);
        readings[i] = (struct absorption_reading){times_s[i], current_a,
                                                  absorption_sigma(current_a, 0.005, 1e-9)};
    }
}

static void gives_the_constants_back(void **state)
{
    (void)state;
    static const double cases[][3] = {
        {0.9e-6, 1.5e-6, 0.8}, {50e-9, 400e-9, 1.1}, {2e-6, 0.6e-6, 0.5}, {1e-4, 3e-4, 0.95}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        struct absorption_reading readings[SERIES];
        power_series(cases[i][0], cases[i][1], cases[i][2], readings);
        struct absorption a = absorption_fit(readings, SERIES, NAN);
        assert_relative(a.steady_a, cases[i][0], 1e-4);
        assert_relative(a.a_a, cases[i][1], 1e-4);
        assert_close(a.n, cases[i][2], 1e-4);
        assert_close(a.chi2, 0, 1e-4);
        assert_int_equal(a.freedom, SERIES - 3);
        assert_true(isnan(a.wait_until_s));
    }
}

/* Polarization index of a pure t^-n current: I(1 min)/I(10 min) = 10^n; n 0.5: 3.162, 0.8: 6.310
   (IEEE 43's ratio, computed). Where there is no steady part none may be claimed. */
static void pure_absorption_has_no_leakage(void **state)
{
    (void)state;
    struct absorption_reading readings[SERIES];
    power_series(0, 1e-6, 0.8, readings);
    assert_relative(readings[2].current_a / readings[6].current_a, 6.310, 1e-4);
    struct absorption a = absorption_fit(readings, SERIES, NAN);
    assert_int_equal(a.status, ABSORPTION_NOT_RESOLVED);
    assert_close(a.steady_a, 0, 2e-9);
    assert_close(a.n, 0.8, 1e-2);
}

/* t = 60 s*(A/(L - I_s))^(1/n): by hand, A 4 uA, n 1, I_s 1 uA, L 1.25 uA: 16 min. */
static void wait_until(void **state)
{
    (void)state;
    struct absorption_reading readings[SERIES];
    power_series(1e-6, 4e-6, 1, readings);
    struct absorption a = absorption_fit(readings, SERIES, 1.25e-6);
    assert_int_equal(a.status, ABSORPTION_RESOLVED);
    assert_relative(a.wait_until_s, 960.0, 1e-3);
    assert_true(isnan(absorption_fit(readings, SERIES, 0.9e-6).wait_until_s)); /* below I_s */
    assert_true(isnan(absorption_fit(readings, SERIES, 2e-6).wait_until_s));   /* met already */
}

static void not_resolved(void **state)
{
    (void)state;
    struct absorption_reading readings[SERIES];
    power_series(1e-6, 1e-6, 0.8, readings);
    assert_int_equal(absorption_fit(readings, 4, NAN).status, ABSORPTION_NONE);
    assert_int_equal(absorption_fit(readings + 3, 5, NAN).status,
                     ABSORPTION_NONE); /* 2 to 15 min */
    assert_int_equal(absorption_fit(readings, SERIES, NAN).status, ABSORPTION_RESOLVED);
    /* rising */
    power_series(1e-6, -0.3e-6, 0.8, readings);
    assert_int_equal(absorption_fit(readings, SERIES, NAN).status, ABSORPTION_NOT_RESOLVED);
    /* one reading off by far more than the meter repeats: chi^2 says so */
    power_series(1e-6, 1e-6, 0.8, readings);
    readings[4].current_a *= 1.1;
    struct absorption a = absorption_fit(readings, SERIES, NAN);
    assert_int_equal(a.status, ABSORPTION_NOT_RESOLVED);
    assert_true(a.chi2 > numeric_chi2_quantile(0.99, a.freedom));
    /* slower than any absorption looked for */
    power_series(1e-6, 1e-6, 0.1, readings);
    assert_int_equal(absorption_fit(readings, SERIES, NAN).status, ABSORPTION_NOT_RESOLVED);
    /* all the same: nothing dies */
    power_series(1e-6, 0, 0.8, readings);
    assert_int_equal(absorption_fit(readings, SERIES, NAN).status, ABSORPTION_NOT_RESOLVED);
    for (int i = 0; i < SERIES; i++)
        readings[i] = (struct absorption_reading){times_s[i], 0, absorption_sigma(0, 0.005, 0)};
    assert_int_not_equal(absorption_fit(readings, SERIES, NAN).status, ABSORPTION_RESOLVED);
}

static double noise(uint64_t *seed)
{
    double sum = -6; /* twelve even draws less 6: variance 1 */
    for (int i = 0; i < 12; i++) {
        *seed = *seed * 6364136223846793005u + 1442695040888963407u;
        sum += (double)(*seed >> 11) / 9007199254740992.0;
    }
    return sum;
}

/* The 95 % interval I_s +- t95*s must hold the true plateau in about 95 % of noisy series; s is
   never below chi^2 = 1, so it may hold more often. */
static void errors_hold_their_promise(void **state)
{
    (void)state;
    uint64_t seed = 60;
    int held = 0, count = 2000, resolved = 0;
    for (int i = 0; i < count; i++) {
        struct absorption_reading readings[SERIES];
        power_series(1e-6, 2e-6, 0.8, readings);
        for (int k = 0; k < SERIES; k++)
            readings[k].current_a += readings[k].sigma_a * noise(&seed);
        struct absorption a = absorption_fit(readings, SERIES, NAN);
        resolved += a.status == ABSORPTION_RESOLVED;
        held += fabs(a.steady_a - 1e-6) <= numeric_t95((double)a.freedom) * a.steady_error_a;
    }
    assert_in_range(held, 1880, 2000);
    assert_in_range(resolved, 1000, 2000);
}

/* Exponential reforming: tau back, and the chosen law. Time to the limit by hand:
   tau*ln(A/(L - I_s)). */
static void reforming_laws(void **state)
{
    (void)state;
    struct absorption_reading readings[SERIES];
    for (int i = 0; i < SERIES; i++) {
        double current_a = 40e-6 + 500e-6 * exp(-times_s[i] / 200);
        readings[i] = (struct absorption_reading){times_s[i], current_a,
                                                  absorption_sigma(current_a, 0.005, 1e-7)};
    }
    struct decay_comparison c = decay_compare(readings, SERIES, 50e-6);
    assert_int_equal(c.better, DECAY_EXPONENTIAL);
    assert_true(c.preferred);
    assert_relative(c.laws[c.better].shape, 200.0, 1e-4);
    assert_relative(c.laws[c.better].steady_a, 40e-6, 1e-4);
    assert_relative(c.to_limit_s, 200 * log(50), 1e-3);
    assert_true(c.to_limit_early_s < c.to_limit_s && c.to_limit_s < c.to_limit_late_s);
    assert_relative(c.horizon_s, 9000.0, 1e-12);
    c = decay_compare(readings, SERIES, 39e-6);
    assert_true(isinf(c.to_limit_s) && isinf(c.to_limit_late_s));
    power_series(40e-6, 500e-6, 0.9, readings);
    c = decay_compare(readings, SERIES, 50e-6);
    assert_int_equal(c.better, DECAY_POWER);
    assert_true(c.preferred);
    assert_relative(c.to_limit_s, 60 * pow(50, 1 / 0.9), 1e-3);
    c = decay_compare(readings, 5, 50e-6);
    assert_int_equal(c.better, DECAY_POWER);
    assert_false(c.laws[DECAY_EXPONENTIAL].fitted);
    c = decay_compare(readings, 4, 50e-6);
    assert_int_equal(c.better, -1);
    assert_true(isnan(c.to_limit_s));
}

static void sigma(void **state)
{
    (void)state;
    assert_relative(absorption_sigma(1e-6, 0.005, 0), 5e-9, 1e-12);
    assert_relative(absorption_sigma(0, 0.005, 1e-8), 1e-8 / sqrt(12), 1e-12);
    assert_true(absorption_sigma(0, 0, 0) > 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(gives_the_constants_back),
        cmocka_unit_test(pure_absorption_has_no_leakage),
        cmocka_unit_test(wait_until),
        cmocka_unit_test(not_resolved),
        cmocka_unit_test(errors_hold_their_promise),
        cmocka_unit_test(reforming_laws),
        cmocka_unit_test(sigma),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
