/* The small calculations: reading, soak, volts, temperature, heat, verdict, mains. */
#include "assess/heat.h"
#include "assess/mains.h"
#include "assess/reading.h"
#include "assess/soak.h"
#include "assess/temperature.h"
#include "assess/verdict.h"
#include "assess/voltage.h"
#include "kit.h"

#include <string.h>

static struct quantity amount(double value, enum unit unit, const char *written)
{
    return (struct quantity){.set = true, .value = value, .unit = unit, .written = written};
}

static struct reading reading_of(double volts_v, double value, enum unit unit, const char *written)
{
    return (struct reading){.set_volts = amount(volts_v, UNIT_VOLTAGE, ""),
                            .value = amount(value, unit, written),
                            .instrument = -1};
}

static const struct instrument tester = {
    .accuracy_set = true,
    .accuracy_percent = 2,
    .accuracy_absolute = 0.02e-6,
    .accuracy_unit = UNIT_CURRENT,
    .resolution = {.set = true, .value = 0.01e-6, .unit = UNIT_CURRENT},
    .series = {.set = true, .value = 10e3}};

static void test_series_resistance_takes_its_drop(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct reading_bench bench = {&tester, &shop.policy, 19};
    struct reading reading = reading_of(100, 100e-6, UNIT_CURRENT, "100 uA");
    struct reading_findings found;
    assert_true(reading_evaluate(&reading, &bench, &found));
    assert_close(found.part_v, 99, 1e-9); /* 100 V - 100 uA * 10 k */
    assert_close(found.temperature_c, 19, 0);
    reading = reading_of(100, 90e3, UNIT_RESISTANCE, "90k");
    assert_true(reading_evaluate(&reading, &bench, &found));
    assert_close(found.current_a, 1e-3, 1e-12); /* 100 V / (90 k + 10 k) */
    assert_close(found.part_v, 90, 1e-9);
    reading = reading_of(100, 20e-3, UNIT_CURRENT, "20 mA"); /* more than 100 V / 10 k = 10 mA */
    assert_false(reading_evaluate(&reading, &bench, &found));
    assert_close(found.part_v, 0.1, 1e-9);
}

static void test_uncertainty_of_a_reading(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct reading_bench bench = {&tester, &shop.policy, 20};
    struct reading reading = reading_of(100, 1e-6, UNIT_CURRENT, "1.00 uA");
    struct reading_uncertainty u = reading_uncertainty(&reading, &bench, 1e-6);
    /* JCGM 100:2008, 4.3.7: half-width 2 % of 1 uA + 0.02 uA = 0.04 uA, /sqrt(3); 0.01 uA/sqrt(12)
     */
    assert_relative(u.accuracy_a, 0.04e-6 / sqrt(3), 1e-12);
    assert_relative(u.resolution_a, 0.01e-6 / sqrt(12), 1e-12);
    assert_relative(u.set_v, 1 / sqrt(3), 1e-12); /* 1 % of 100 V */
    struct reading_findings found;
    reading_evaluate(&reading, &bench, &found);
    double by_volts = 1e-6 * 0.01 / sqrt(3);
    assert_relative(found.uncertainty_a,
                    2 * sqrt(pow(0.04e-6, 2) / 3 + pow(0.01e-6, 2) / 12 + by_volts * by_volts),
                    1e-9);
}

static void test_default_accuracy_is_named_digit(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct reading_bench bench = {NULL, &shop.policy, 20};
    struct reading reading = reading_of(100, 1.1e-6, UNIT_CURRENT, "1.1 uA");
    struct reading_uncertainty u = reading_uncertainty(&reading, &bench, 1.1e-6);
    /* 3 % of 1.1 uA + one digit, 0.1 uA */
    assert_relative(u.accuracy_a, (0.033e-6 + 0.1e-6) / sqrt(3), 1e-9);
    static const struct {
        const char *written;
        enum unit unit;
        double value, digit;
    } rows[] = {
        {"1.1 uA", UNIT_CURRENT, 1.1e-6, 0.1e-6}, {"0.00 uA", UNIT_CURRENT, 0, 0.01e-6},
        {"220 M", UNIT_RESISTANCE, 220e6, 1e6},   {"4k7", UNIT_RESISTANCE, 4700, 100},
        {"-0.5 V", UNIT_VOLTAGE, -0.5, 0.1},      {"12.62 V", UNIT_VOLTAGE, 12.62, 0.01},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct quantity value = amount(rows[i].value, rows[i].unit, rows[i].written);
        assert_relative(reading_last_digit(&value), rows[i].digit, 1e-9);
    }
    struct quantity none = {.set = true, .value = 1, .written = "uA"};
    assert_close(reading_last_digit(&none), 0, 0);
}

static void test_accuracy_in_ohm_and_of_full_scale(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct instrument megger = {.accuracy_set = true,
                                .accuracy_percent = 5,
                                .accuracy_absolute = 1e6,
                                .accuracy_unit = UNIT_RESISTANCE,
                                .resolution = amount(1e6, UNIT_RESISTANCE, "1 M")};
    struct reading_bench bench = {&megger, &shop.policy, 20};
    struct reading reading = reading_of(100, 100e6, UNIT_RESISTANCE, "100 M");
    struct reading_uncertainty u = reading_uncertainty(&reading, &bench, 1e-6);
    /* 1 M at 100 M is 1 % of 1 uA: dI = I^2/V * dR = 1e-12/100*1e6 = 10 nA */
    assert_relative(u.accuracy_a, (0.05e-6 + 0.01e-6) / sqrt(3), 1e-9);
    assert_relative(u.resolution_a, 0.01e-6 / sqrt(12), 1e-9);
    struct instrument scaled = {.accuracy_set = true,
                                .full_scale_percent = 2,
                                .full_scale = amount(50e-6, UNIT_CURRENT, "50 uA"),
                                .accuracy_unit = UNIT_CURRENT,
                                .volts_accuracy = amount(3, UNIT_PERCENT, "3 %")};
    bench.instrument = &scaled;
    u = reading_uncertainty(&reading, &bench, 1e-6);
    assert_relative(u.accuracy_a, 1e-6 / sqrt(3), 1e-9); /* 2 % of 50 uA */
    assert_relative(u.set_v, 3 / sqrt(3), 1e-9);
}

static void test_bounds_and_negatives(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct reading_bench bench = {NULL, &shop.policy, 20};
    struct reading reading = reading_of(250, 2000e6, UNIT_RESISTANCE, "2000 M");
    reading.value.bound = BOUND_OVER;
    struct reading_findings found;
    reading_evaluate(&reading, &bench, &found);
    assert_int_equal(found.bound, BOUND_UNDER); /* more ohms, less current */
    assert_relative(found.current_a, 0.125e-6, 1e-9);
    reading = reading_of(250, -0.02e-6, UNIT_CURRENT, "-0.02 uA");
    reading_evaluate(&reading, &bench, &found);
    assert_close(found.current_a, 0, 0);
    reading = reading_of(50, 0, UNIT_RESISTANCE, "0 ohm");
    reading_evaluate(&reading, &bench, &found);
    assert_true(isfinite(found.current_a) && found.current_a > 1);
}

static void test_temperature(void **state)
{
    (void)state;
    /* Oil-paper insulation correction table (oil-filled transformers, seen): resistance at 45 C is
       1/5.60 of that at 20 C, at 30 C 1/1.98; the table and 2^(dT/10) agree within 5 %. */
    assert_relative(temperature_factor(DIELECTRIC_PAPER, 20, 45, false), 5.60, 0.05);
    assert_relative(temperature_factor(DIELECTRIC_WAXED_PAPER, 20, 30, false), 1.98, 0.05);
    /* Film makers' general data (recalled): 1.59 at 30 C, 2.00 at 35 C. */
    assert_relative(temperature_factor(DIELECTRIC_POLYESTER, 20, 30, false), 1.59, 0.01);
    assert_relative(temperature_factor(DIELECTRIC_POLYPROPYLENE, 20, 35, false), 2.00, 0.01);
    /* ... and below 20 C a film counts as 20 C. */
    assert_relative(temperature_factor(DIELECTRIC_POLYSTYRENE, 10, 35, false), 2.00, 0.01);
    /* Aluminium electrolytics: 2.5 times from 20 to 60 C. */
    assert_relative(temperature_factor(DIELECTRIC_ELECTROLYTIC, 20, 60, false), 2.5, 0.002);
    assert_close(temperature_factor(DIELECTRIC_PAPER, 50, 45, false), 1, 0);
    assert_close(temperature_factor(DIELECTRIC_PAPER, 42, 45, true), 1, 0);
    assert_relative(temperature_factor(DIELECTRIC_PAPER, 40, 45, true), sqrt(2), 1e-9);
    assert_relative(temperature_to_20c(DIELECTRIC_ELECTROLYTIC, 60), 1 / 2.5, 0.002);
    for (int kind = 0; kind < DIELECTRIC_COUNT; kind++)
        assert_true(temperature_doubling(kind).theta_k > 0);
}

static void test_volts(void **state)
{
    (void)state;
    struct scaled_current scaled = voltage_scale(200, 100, NAN, false);
    assert_close(scaled.factor, 0.5, 1e-12);
    assert_false(scaled.lower_bound);
    /* A part that rises more than in proportion is not scaled down more than in proportion. */
    assert_close(voltage_scale(200, 100, 1.5, false).factor, 0.5, 1e-12);
    assert_relative(voltage_scale(200, 100, 0.5, false).factor, sqrt(0.5), 1e-12);
    assert_relative(voltage_scale(97, 100, NAN, false).factor, pow(100.0 / 97, 2), 1e-12);
    assert_relative(voltage_scale(97, 100, NAN, true).factor, pow(100.0 / 97, 5), 1e-12);
    assert_close(voltage_scale(97, 100, NAN, true).exponent, 5, 0);
    assert_close(voltage_scale(200, 100, 0.5, false).exponent, 0.5, 0);
    scaled = voltage_scale(50, 100, NAN, false);
    assert_close(scaled.factor, 2, 1e-12);
    assert_true(scaled.lower_bound);
    assert_close(voltage_limit_at(1e-6, 200, 100, NAN, false), 2e-6, 1e-15);
    double volts[2] = {100, 200}, amperes[2] = {1e-6, 4e-6}, relative[2] = {0.03, 0.04}, b, u;
    assert_true(voltage_exponent(volts, amperes, relative, &b, &u));
    assert_close(b, 2, 1e-12);                /* four times at twice the volts */
    assert_relative(u, 0.05 / log(2), 1e-12); /* sqrt(0.03^2 + 0.04^2) = 0.05 */
    volts[1] = 140;
    assert_false(voltage_exponent(volts, amperes, relative, &b, &u));
    volts[1] = 200;
    amperes[0] = 0;
    assert_false(voltage_exponent(volts, amperes, relative, &b, &u));
}

static void test_soak(void **state)
{
    (void)state;
    struct soak soak = {.capacitance_f = 0.02e-6,
                        .set_v = 100,
                        .series_ohm = 10e3,
                        .supply_current_a = NAN,
                        .limit_a = 1e-6};
    assert_close(soak_least_s(&soak), 15, 0); /* tau is 0.2 ms */
    soak.electrolytic = true;
    assert_close(soak_least_s(&soak), 60, 0);
    soak.capacitance_f = 100e-6;
    soak.series_ohm = 100e3;
    /* tau = 10 s; 10*ln(100/(0.1*1e-6*1e5)) = 10*ln(10000) = 92.10 s */
    assert_close(soak_least_s(&soak), 10 * log(1e4), 1e-9);
    soak.supply_current_a = 1e-3; /* + C*V/I = 100e-6*100/1e-3 = 10 s */
    assert_close(soak_least_s(&soak), 10 * log(1e4) + 10, 1e-9);
    soak.capacitance_f = NAN;
    assert_close(soak_least_s(&soak), 60, 0);
    struct capacitor part = {.type = DIELECTRIC_PAPER};
    assert_true(isnan(soak_capacitance(&part)));
    part.marked.value = amount(1e-6, UNIT_CAPACITANCE, "1 uF");
    part.marked.tolerance_set = true;
    part.marked.tolerance_high_percent = 20;
    assert_relative(soak_capacitance(&part), 1.2e-6, 1e-12);
    part.measured.value = amount(1.1e-6, UNIT_CAPACITANCE, "1.1 uF");
    part.type = DIELECTRIC_ELECTROLYTIC;
    assert_relative(soak_capacitance(&part), 2.2e-6, 1e-12);
}

static void test_trend(void **state)
{
    (void)state;
    struct reading_findings run[3] = {{.current_a = 1e-6, .repeatability_a = 1e-8},
                                      {.current_a = 1.2e-6, .repeatability_a = 1e-8},
                                      {.current_a = 1.5e-6, .repeatability_a = 1e-8}};
    assert_int_equal(soak_trend(run, 3), TREND_RISING);
    assert_int_equal(soak_trend(run, 1), TREND_UNKNOWN);
    run[2].current_a = 1.02e-6;
    assert_int_equal(soak_trend(run, 3), TREND_FALLING); /* from the most, 1.2 uA */
    run[1].current_a = 1.01e-6;
    assert_int_equal(soak_trend(run, 3), TREND_LEVEL);
    run[0].current_a = 2e-6;
    assert_int_equal(soak_trend(run, 3), TREND_FALLING);
    run[1].bound = BOUND_UNDER;
    assert_int_equal(soak_trend(run, 3), TREND_UNKNOWN);
}

static void test_heat(void **state)
{
    (void)state;
    struct shop shop = shop_default();
    struct can can = {.ref = "CAN1"};
    struct job job = {.cans = &can, .can_count = 1};
    struct capacitor part = {.type = DIELECTRIC_PAPER, .can = NOT_LISTED};
    assert_close(heat_limit(&job, &part, &shop.policy), 0.02, 0);
    part.type = DIELECTRIC_ELECTROLYTIC;
    assert_close(heat_limit(&job, &part, &shop.policy), 0.05, 0);
    part.can = 0;
    assert_close(heat_limit(&job, &part, &shop.policy), 0.25, 0);
    can.case_size = (struct dimensions){.set = true, .diameter_m = 0.035, .length_m = 0.08};
    /* surface pi*0.035*(0.08 + 0.0175) = 0.010721 m2; R_th = 1/(12*0.010721) = 7.773 K/W;
       30.3/(4*e*ln 2*7.773) = 30.3/58.58 = 0.517 W */
    assert_relative(heat_limit(&job, &part, &shop.policy), 0.5172, 0.001);
    struct dimensions block = {.set = true, .length_m = 0.03, .width_m = 0.02, .height_m = 0.01};
    assert_relative(heat_surface(&block), 2 * (6e-4 + 2e-4 + 3e-4), 1e-12);
    assert_true(isnan(heat_surface(&(struct dimensions){0})));
}

static void test_guard_bands(void **state)
{
    (void)state;
    /* ILAC-G8:09/2019, clause 4: specification 10 +- 1, U = 0.2; upper acceptance limits for
       w = 0, 0.83 U, U, 1.5 U, 3 U are 11.0, 10.834, 10.8, 10.7, 10.4. */
    static const double rows[][2] = {{0, 11.0}, {0.83, 10.834}, {1, 10.8}, {1.5, 10.7}, {3, 10.4}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct verdict_case judged = {.limit = 11, .guard = rows[i][0] * 0.2, .upper = true};
        judged.value = rows[i][1] - 1e-9;
        assert_int_equal(verdict_of(&judged), OUTCOME_PASS);
        judged.value = rows[i][1] + 1e-9;
        assert_true(verdict_of(&judged) != OUTCOME_PASS);
    }
    struct verdict_case judged = {.value = 10.9, .limit = 11, .guard = 0.2, .upper = true};
    assert_int_equal(verdict_of(&judged), OUTCOME_CONDITIONAL_PASS);
    judged.value = 11.1;
    assert_int_equal(verdict_of(&judged), OUTCOME_CONDITIONAL_FAIL);
    judged.value = 11.3;
    assert_int_equal(verdict_of(&judged), OUTCOME_FAIL);
    judged.bound = BOUND_OVER;
    assert_int_equal(verdict_of(&judged), OUTCOME_FAIL);
    judged.bound = BOUND_UNDER;
    assert_int_equal(verdict_of(&judged), OUTCOME_NOT_JUDGED);
    judged.value = 10;
    assert_int_equal(verdict_of(&judged), OUTCOME_PASS);
    judged.bound = BOUND_OVER;
    assert_int_equal(verdict_of(&judged), OUTCOME_NOT_JUDGED);
    /* the lower limit of the same example: 9 */
    judged = (struct verdict_case){.value = 9.3, .limit = 9, .guard = 0.2, .upper = false};
    assert_int_equal(verdict_of(&judged), OUTCOME_PASS);
    judged.value = 8.7;
    assert_int_equal(verdict_of(&judged), OUTCOME_FAIL);
    judged.value = NAN;
    assert_int_equal(verdict_of(&judged), OUTCOME_NOT_JUDGED);
    assert_int_equal(verdict_worse(OUTCOME_NOT_JUDGED, OUTCOME_CONDITIONAL_FAIL),
                     OUTCOME_CONDITIONAL_FAIL);
    assert_int_equal(verdict_worse(OUTCOME_NOT_JUDGED, OUTCOME_CONDITIONAL_PASS),
                     OUTCOME_NOT_JUDGED);
}

static void test_mains(void **state)
{
    (void)state;
    /* 2*pi*50*230*4.7 nF = 0.33961 mA; 100 nF on 240 V 50 Hz is 7.5398 mA (arithmetic) */
    assert_relative(mains_touch_current(230, 50, 4.7e-9, 0), 0.33961e-3, 1e-4);
    assert_relative(mains_touch_current(240, 50, 100e-9, 0), 7.5398e-3, 1e-4);
    /* a resistive part in quadrature: 230 V over 1 M is 0.23 mA; sqrt(0.33961^2 + 0.23^2) */
    assert_relative(mains_touch_current(230, 50, 4.7e-9, 1e-6), 0.41016e-3, 1e-4);
    /* 0.5 mA at 1.1 x 230 V 50 Hz and 1.1 x 120 V 60 Hz; without the 1.1: 6.92 and 11.05 nF */
    assert_relative(mains_touch_capacitance(1.1 * 230, 50, 0.5e-3), 6.29e-9, 1e-3);
    assert_relative(mains_touch_capacitance(1.1 * 120, 60, 0.5e-3), 10.05e-9, 1e-3);
    assert_relative(mains_touch_capacitance(230, 50, 0.5e-3), 6.92e-9, 1e-3);
    assert_relative(mains_touch_capacitance(120, 60, 0.5e-3), 11.05e-9, 1e-3);
    struct job job = {0};
    assert_close(mains_frequency(&job), 60, 0);
    struct marking x2 = {.set = true, .safety_class = CLASS_X2, .class_count = 1};
    struct marking y2 = {.set = true, .safety_class = CLASS_Y2, .class_count = 1};
    struct marking two_y2 = {.set = true, .safety_class = CLASS_Y2, .class_count = 2};
    struct marking y1 = {.set = true, .safety_class = CLASS_Y1, .class_count = 1};
    assert_true(mains_class_borne(&job, PLACE_ACROSS_MAINS, &x2));
    assert_true(mains_class_borne(&job, PLACE_ACROSS_MAINS, &y2));
    assert_false(mains_class_borne(&job, PLACE_MAINS_TO_CHASSIS, &x2));
    assert_true(mains_class_borne(&job, PLACE_MAINS_TO_CHASSIS, &y2));
    assert_false(mains_class_borne(&job, PLACE_AERIAL_ISOLATOR, &y2));
    assert_true(mains_class_borne(&job, PLACE_AERIAL_ISOLATOR, &two_y2));
    assert_true(mains_class_borne(&job, PLACE_AERIAL_ISOLATOR, &y1));
    assert_false(mains_class_borne(&job, PLACE_AERIAL_ISOLATOR, &(struct marking){0}));
    job.set.supply = SUPPLY_LIVE_CHASSIS;
    assert_true(mains_class_borne(&job, PLACE_MAINS_TO_CHASSIS, &x2));
    assert_int_equal(mains_class_needed(&job, PLACE_MAINS_TO_CHASSIS), CLASS_X2);
    assert_int_equal(mains_class_needed(&job, PLACE_GRAM_ISOLATOR), CLASS_Y1);
    assert_int_equal(mains_class_needed(&job, PLACE_COUPLING), CLASS_NONE);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_series_resistance_takes_its_drop),
        cmocka_unit_test(test_uncertainty_of_a_reading),
        cmocka_unit_test(test_default_accuracy_is_named_digit),
        cmocka_unit_test(test_accuracy_in_ohm_and_of_full_scale),
        cmocka_unit_test(test_bounds_and_negatives),
        cmocka_unit_test(test_temperature),
        cmocka_unit_test(test_volts),
        cmocka_unit_test(test_soak),
        cmocka_unit_test(test_trend),
        cmocka_unit_test(test_heat),
        cmocka_unit_test(test_guard_bands),
        cmocka_unit_test(test_mains),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
