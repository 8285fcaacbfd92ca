/* Whose accuracy counts: a reading's own instrument, else the first that reads such a figure.
   Expanded uncertainties are worked by hand, 2*(p*|x| + a)/sqrt(3) (JCGM 100:2008, 4.3.7). */
#include "bench.h"

#include <math.h>

/* The voltmeter stands first, and reads no leakage; of two that read farads the first counts. */
#define CASE                                                                                       \
    "instruments:\n"                                                                               \
    "  volts:\n    accuracy: 0.5 % + 0.1 V\n    resolution: 0.1 V\n    input: 10 M\n"              \
    "  leakage:\n    accuracy: 2 % + 0.02 uA\n    resolution: 0.01 uA\n"                           \
    "  megohms:\n    accuracy: 5 %\n    resolution: 1 M\n    volts: 250 V, 500 V\n"                \
    "  ohms:\n    accuracy: 0.8 % + 0.1 ohm\n"                                                     \
    "  farads:\n    accuracy: 1 % + 1 pF\n"                                                        \
    "  box:\n    accuracy: 10 % + 20 pF\n"

#define TUNED(ref, marked, measured)                                                               \
    "  " ref ":\n    type: mica\n    marked: " marked "\n    measured: " measured                  \
    "\n    place: tuning\n    circuit: 100k\n    service: 100 V\n    readings:\n"

static void which_instrument(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD CASE
        "resistors:\n"
        "  R1: {marked: 100 ohm 10 %, measured: 102 ohm}\n"
        "windings:\n"
        "  T1: {marked: 300 ohm, measured: 300 ohm, insulation: 50 M}\n"
        "capacitors:\n"
        TUNED("C1", "300 pF 350 V 5 %", "312 pF")
        "      - 100 V 60 s 1.00 uA\n"
        TUNED("C2", "300 pF 350 V", "300 pF")
        "      - 250 V 60 s 500 M by megohms\n");
    /* clang-format on */
    /* 2 % + 0.02 uA, a step of 0.01 uA, and the volts' 1 %: 2*sqrt(0.04^2/3 + 0.01^2/12 + 0.01^2/3)
     */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_relative(part->test_uncertainty_a, 0.0479583e-6, 1e-5);
    assert_relative(bench_criterion(part, CRITERION_CAPACITANCE, false)->uncertainty,
                    200.0 / 300 * (0.01 * 312 + 1) / sqrt(3), 1e-9);
    /* 0.5 uA: 5 %, and 1 M of 500 M are 0.001 uA: as amperes in the working */
    const struct part_working *working = &bench.findings->bench.workings[1];
    assert_relative(working->instrument_share, 0.05, 1e-12);
    assert_close(working->instrument_absolute_a, 0, 0);
    assert_relative(working->instrument_step_a, 0.001e-6, 1e-9);
    assert_relative(bench.findings->bench.resistors[0].tolerance.uncertainty,
                    2 * (0.008 * 102 + 0.1) / sqrt(3), 1e-9);
    assert_relative(bench.findings->bench.windings[0].insulation.uncertainty,
                    2 * 0.05 * 50e6 / sqrt(3), 1e-9);
    bench_release(&bench);
}

/* A moving coil of 300 V full scale is uncertain by 1.5 % of it at every deflection. */
static void per_cent_of_full_scale(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n"
        "  coil:\n    accuracy: 1.5 % of full scale\n    full_scale: 300 V\n"
        "    sensitivity: 20 kohm/V\n"
        "voltages:\n"
        "  meter: 20 kohm/V\n"
        "  points:\n"
        "    HT: sheet 200 V, range 300 V, found 190 V\n");
    /* clang-format on */
    const struct voltage_findings *point = &bench.findings->bench.voltages[0];
    assert_close(point->expected_v[0], 200, 1e-9);
    assert_relative(point->compared[0].uncertainty, 100 / 200.0 * 2 * 0.015 * 300 / sqrt(3), 1e-9);
    bench_release(&bench);
}

/* Methods 1, of capacitance: where U at the limit is over half of the limit only a fail is told. At
   2 % of 110 pF U is 200/110*(0.01*112.2 + 1)/sqrt(3) = 2.23 %. */
static void too_coarse_for_a_tolerance(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD CASE
        "capacitors:\n"
        TUNED("C1", "110 pF 350 V 2 %", "110 pF")
        "      - 100 V 60 s under 0.01 uA\n"
        TUNED("C2", "110 pF 350 V 2 %", "121 pF")
        "      - 100 V 60 s under 0.01 uA\n"
        TUNED("C3", "110 pF 350 V 5 %", "110 pF")
        "      - 100 V 60 s under 0.01 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_int_equal(part->outcome, OUTCOME_NOT_JUDGED);
    assert_int_equal(part->why, WHY_INSTRUMENT);
    assert_int_equal(bench_part(&bench, "C2")->outcome, OUTCOME_FAIL);
    assert_int_equal(bench_part(&bench, "C3")->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

/* The touch current of what was measured is as uncertain as the bridge: 253 V * 2 pi 50 Hz * 4.6 nF
   is 365.6 uA, and 2*(1 % of 4.6 nF + 1 pF)/sqrt(3) of it 4.31 uA. What is only marked counts as it
   is marked. */
static void touch_current_of_a_measured_isolator(void **state)
{
    (void)state;
    struct bench bench;
#define ISOLATOR(measured)                                                                         \
    HEAD CASE "capacitors:\n  C1:\n    type: ceramic\n    marked: 0.0047 uF 500 V a.c. Y1\n"       \
              "    place: aerial isolator\n" measured "    readings:\n"                            \
              "      - 500 V 60 s over 10000 M by megohms\n"
    bench_assess(&bench, ISOLATOR("    measured: 4.6 nF\n"));
    const struct criterion *touch =
        bench_criterion(bench_part(&bench, "C1"), CRITERION_TOUCH_CURRENT, true);
    assert_relative(touch->value, 365.6e-6, 1e-3);
    assert_relative(touch->uncertainty, 4.31e-6, 1e-3);
    bench_release(&bench);
    bench_assess(&bench, ISOLATOR(""));
    touch = bench_criterion(bench_part(&bench, "C1"), CRITERION_TOUCH_CURRENT, true);
    assert_relative(touch->value, 373.6e-6, 1e-3);
    assert_close(touch->uncertainty, 0, 0);
    bench_release(&bench);
#undef ISOLATOR
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(which_instrument),
        cmocka_unit_test(per_cent_of_full_scale),
        cmocka_unit_test(too_coarse_for_a_tolerance),
        cmocka_unit_test(touch_current_of_a_measured_isolator),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
