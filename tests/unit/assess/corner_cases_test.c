/* What is easily got wrong: steps of a rule taken for slopes, one reading with two outcomes, open
   resistors, a bypass across its own feed, readings that may not fail a part and yet do together.
 */
#include "assess/voltage.h"
#include "bench.h"

/* Methods 3: up to 1/0.95 the current is scaled by x^2. Where the volts set are near that edge,
   their uncertainty must not bring the step there (x^2 against x, 5 %) into U: dI/I = 2*dV/V =
   2*1 %/sqrt(3), bench +-1 K/sqrt(3) over 10 K per doubling 4.00 %, accuracy 0.1 %/sqrt(3). */
static void test_edge_of_scaling_is_no_slope(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        "job: T-1\nset:\n  maker: P\n  supply: transformer\n  mains: 230 V\nreceived: 2031-02-03\n"
        "conditions:\n  bench: 20 C\n  working: 45 C\n"
        METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 95.5 V 60 s 1.0000 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    double warm_a = 1e-6 * pow(100 / 95.5, 2) * exp2(2.5);
    assert_relative(part->leakage_warm_a, warm_a, 1e-6);
    double volts = 2 * 0.01 / sqrt(3), bench_k = log(2) / 10 / sqrt(3), meter = 0.0011 / sqrt(3);
    double share = 2 * sqrt(volts * volts + bench_k * bench_k + meter * meter);
    assert_relative(part->uncertainty_a, share * warm_a, 0.005);
    /* 100 V over 95 V lies on either side of 1/0.95 for a hair's breadth; the law does not jump. */
    double above = voltage_factor_near(95.001, 100, NAN, false, false);
    double below = voltage_factor_near(94.999, 100, NAN, false, false);
    assert_relative(above, below, 1e-4);
    assert_true(voltage_scale(94.999, 100, NAN, false).lower_bound);
    bench_release(&bench);
}

/* Methods 2: before the soak time a reading may pass, never fail; a rise seen then is no proof. */
static void test_a_rise_read_too_early(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 5 s 6 uA, 10 s 9 uA\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 15 s 6 uA, 30 s 9 uA\n");
    /* clang-format on */
    bench_expect(&bench, "C1", OUTCOME_CONDITIONAL_PASS, WHY_RISING);
    bench_expect(&bench, "C2", OUTCOME_FAIL, WHY_RISING); /* 9 uA is over a tenth of 50 uA */
    bench_release(&bench);
}

/* Methods 6: a leakage rule holds at 20 C, so a chassis 5 K warmer changes nothing there. */
static void test_a_rule_does_not_turn_on_the_chassis(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        "job: T-1\nset:\n  maker: P\n  supply: transformer\n  mains: 230 V\nreceived: 2031-02-03\n"
        "conditions:\n  bench: 20 C\n  working: 45 C\n"
        METER
        "capacitors:\n"
        "  C1:\n"
        "    type: electrolytic\n"
        "    marked: 20 uF 450 V\n"
        "    place: reservoir\n"
        "    current: 600 mA\n"
        "    case: 60 mm x 120 mm\n"
        "    service: 300 V\n"
        "    readings:\n"
        "      - 300 V 60 s 1.05 mA, 5 min 1.05 mA\n");
    /* clang-format on */
    /* JAN-C-62: 0.04*20 + 0.3 = 1.1 mA; heat and share have room: 1.05*2^(25/30.3) = 1.86 mA, 0.56
       W of 30.3*12*0.0283/(4*e*ln 2) = 1.36 W, and of 2 % of 600 mA = 12 mA. */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_true(part->outcome <= OUTCOME_CONDITIONAL_PASS);
    assert_false(part->turns_on_temperature);
    bench_release(&bench);
}

/* Ohms in steps of 3 M against a limit of 2 M (0.5 V over 10 k at 100 V is 50 uA): 200 M are a
   pass, though at 2 M the tester, in steps of 3 M, could tell nothing; 2.2 M are not judged. */
static void test_insulation_in_coarse_steps(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n  megohms:\n    accuracy: 5 %\n    resolution: 3 M\n"
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 200 M by megohms\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 2.2 M by megohms\n");
    /* clang-format on */
    bench_expect(&bench, "C1", OUTCOME_PASS, WHY_NONE);
    bench_expect(&bench, "C2", OUTCOME_NOT_JUDGED, WHY_INSTRUMENT);
    bench_release(&bench);
}

/* Two sections still falling at 100 V, warm and brought to service volts too hot together: they
   are reformed, not failed. The same of an AVC line read too early. */
static void test_what_may_not_fail_alone_does_not_fail_jointly(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "cans:\n"
        "  CAN1:\n"
        "    holds: C1 C2\n"
        "capacitors:\n"
        "  C1:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: reservoir\n"
        "    current: 60 mA\n    service: 300 V\n"
        "    readings:\n      - 300 V 60 s 2.0 mA, 5 min 0.6 mA\n"
        "  C2:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: reservoir\n"
        "    current: 60 mA\n    service: 300 V\n"
        "    readings:\n      - 300 V 60 s 2.0 mA, 5 min 0.6 mA\n"
        "  C3:\n    type: paper\n    marked: 0.1 uF 150 V\n    place: avc bypass\n    line: A\n"
        "    feed: 1 meg\n    service: 12 V\n"
        "    readings:\n      - 12 V 60 s 0.4 uA\n"
        "  C4:\n    type: paper\n    marked: 0.1 uF 150 V\n    place: avc bypass\n    line: A\n"
        "    feed: 1 meg\n    service: 12 V\n"
        "    readings:\n      - 12 V 5 s 0.4 uA\n");
    /* clang-format on */
    /* 0.18 W each of 0.25 W, 0.36 W together */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_relative(bench_criterion(part, CRITERION_HEAT, false)->value, 0.18, 1e-6);
    assert_true(part->outcome != OUTCOME_CONDITIONAL_FAIL);
    assert_true(part->outcome_found != OUTCOME_CONDITIONAL_FAIL);
    /* 3.2 % each of 5 %, 6.3 % together, but one was read after 5 s */
    assert_true(bench_part(&bench, "C3")->outcome <= OUTCOME_CONDITIONAL_PASS);
    assert_true(bench_part(&bench, "C4")->outcome <= OUTCOME_CONDITIONAL_PASS);
    bench_release(&bench);
}

/* A capacitor across the resistance in the negative lead: 3 V across 100 ohm at 30 mA. A leak of
   1/(100*100 ohm) takes 1/101 of the current past it, so the bias falls by about 1 %, not 2 %. */
static void test_a_bypass_across_its_own_feed(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  output:\n"
        "    valve: V1 6V6GT\n"
        "    row: A1-250\n"
        "    supply: 250 V\n"
        "    bias: R1\n"
        "    others: 1 A\n"
        "    grid_leak: 470k\n"
        "capacitors:\n"
        "  C1:\n    type: electrolytic\n    marked: 50 uF 25 V\n    place: bias bypass\n"
        "    stage: output\n    feed: R1\n"
        "    readings:\n      - 15 V 60 s 11.6 mA, 5 min 11.6 mA\n"
        "resistors:\n"
        "  R1: {marked: 12 ohm, measured: 12 ohm, done: kept}\n");
    /* clang-format on */
    /* With 1 A of other current the bias hardly hangs on the valve: -12.5 V or so; R_L = V/11.6 mA
       is about 1080 ohm, 12/(12 + 1080) = 1.1 % of the bias is lost. */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    const struct effect *lost = bench_effect(part, "bias_loss");
    assert_non_null(lost);
    double leak_ohm = part->service_v / part->leakage_warm_a;
    /* The valve answers with its own slope, 4.1 mA/V and the screen's tenth of it, on 12 ohm. */
    assert_relative(lost->value / lost->of, 12 / (12 + leak_ohm) / (1 + 4.51e-3 * 12), 0.005);
    bench_release(&bench);
}

static void test_open_resistors(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  if:\n"
        "    valve: V1 6SK7\n"
        "    supply: 250 V\n"
        "    screen: R1\n"
        "    cathode: 270 ohm\n"
        "  af:\n"
        "    valve: V2 6SK7\n"
        "    supply: 250 V\n"
        "    screen: R2\n"
        "    cathode: 270 ohm\n"
        "capacitors:\n"
        "  C1:\n    type: paper\n    marked: 0.1 uF 400 V\n    place: screen bypass\n    stage: if\n"
        "    readings:\n      - 100 V 60 s 1 uA\n"
        "  C2:\n    type: paper\n    marked: 0.1 uF 400 V\n    place: screen bypass\n    stage: af\n"
        "    readings:\n      - 100 V 60 s 1 uA\n"
        "  C3:\n    type: paper\n    marked: 0.1 uF 400 V\n    place: decoupling\n    feed: R1\n"
        "    current: 1 mA\n    service: 250 V\n"
        "    readings:\n      - 250 V 60 s 1 uA\n"
        "  C4:\n    type: paper\n    marked: 0.1 uF 400 V\n    place: decoupling\n    feed: R2\n"
        "    current: 1 mA\n    service: 250 V\n"
        "    readings:\n      - 250 V 60 s 1 uA\n"
        "resistors:\n"
        "  R1: {marked: 56k 1 W, measured: open, done: kept, reason: the owner fits one}\n"
        "  R2: {marked: 56k 1 W, measured: open, done: replaced, fitted: 50k 1 W}\n");
    /* clang-format on */
    const struct capacitor_findings *part =
        bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_OPEN_RESISTOR);
    assert_true(isnan(part->limit_a));
    assert_close(part->sheet_voltage_v, fmin(part->service_v, 400),
                 1e-9); /* may be read all the same */
    part = bench_expect(&bench, "C3", OUTCOME_NOT_JUDGED, WHY_OPEN_RESISTOR);
    assert_null(part->missing);
    /* With the new one fitted its ohms count: 2 % of 250 V over 50 k is 100 uA; by heat 80 uA. */
    part = bench_expect(&bench, "C4", OUTCOME_PASS, WHY_NONE);
    assert_relative(part->limit_a, 0.02 / 250, 1e-3);
    bench_expect(&bench, "C2", OUTCOME_PASS, WHY_NONE);
    const struct stage_findings *stages = bench.findings->stages;
    assert_true(stages[0].phases[PHASE_DESIGNED].judged);
    assert_int_equal(stages[0].phases[PHASE_FOUND].why, WHY_OPEN_RESISTOR);
    assert_int_equal(stages[0].phases[PHASE_LEFT].why, WHY_OPEN_RESISTOR);
    assert_int_equal(stages[1].phases[PHASE_FOUND].why, WHY_OPEN_RESISTOR);
    assert_true(stages[1].phases[PHASE_LEFT].judged);
    bench_release(&bench);
}

static void test_effects_that_say_what_goes_wrong(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  output: {valve: V1 6V6GT, row: A1-250, supply: 250 V, cathode: 250 ohm}\n"
        "capacitors:\n"
        "  C1:\n    type: mica\n    marked: 100 pF 350 V 5 %\n    place: tuning\n    circuit: 10k\n"
        "    service: 10 V\n    measured: 80.0 pF\n"
        "    readings:\n      - 100 V 60 s over 20000 M\n"
        "  C2:\n    type: paper\n    marked: 0.005 uF 1000 V\n    place: tone\n    stage: output\n"
        "    readings:\n      - 250 V 60 s 1 uA\n");
    /* clang-format on */
    /* -20 % of 100 pF with 5 % allowed: the capacitance fails, and is the effect shown */
    const struct capacitor_findings *part = bench_expect(&bench, "C1", OUTCOME_FAIL, WHY_NONE);
    assert_string_equal(part->effects[0].key, "capacitance");
    assert_close(part->effects[0].value, -20, 1e-9);
    assert_close(part->effects[0].of, -5, 1e-9);
    /* over 20000 M is a leak of at most so much, and a ratio of at least 20000 M over 10 k */
    const struct criterion *ratio = bench_criterion(part, CRITERION_CIRCUIT_RATIO, false);
    assert_int_equal(part->readings[0].bound, BOUND_UNDER);
    assert_int_equal(ratio->bound, BOUND_OVER);
    assert_relative(ratio->value, 2e6, 1e-6);
    /* anode at the supply: what leaks flows through the output primary */
    const struct effect *primary = bench_effect(bench_part(&bench, "C2"), "primary_current");
    assert_non_null(primary);
    assert_relative(primary->value, bench_part(&bench, "C2")->leakage_warm_a, 1e-9);
    bench_release(&bench);
}

/* A screen fed through 1 k falls by 5 % at some 13 mA, 3 W in the part; of the 0.02 W that a paper
   capacitor without a case size may make, 80 uA are left at 250 V. */
static void test_heat_limits_sooner_than_the_place(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  output:\n    valve: V1 6V6GT\n    row: A1-250\n    supply: 262.5 V\n    screen: 1k\n"
        "    cathode: 250 ohm\n"
        "capacitors:\n"
        "  C1:\n    type: paper\n    marked: 0.1 uF 400 V\n    place: screen bypass\n    stage: output\n"
        "    service: 250 V\n"
        "    readings:\n      - 250 V 60 s 120 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_expect(&bench, "C1", OUTCOME_FAIL, WHY_NONE);
    assert_relative(part->limit_a, 0.02 / 250, 1e-4);
    assert_true(part->limit_is_heat);
    assert_int_equal(bench_criterion(part, CRITERION_SCREEN_FALL, false)->outcome, OUTCOME_PASS);
    assert_relative(bench_criterion(part, CRITERION_HEAT, false)->value, 0.03, 1e-4);
    bench_release(&bench);
}

/* JCGM 100:2008, 5.2.2: what two readings share counts in full. Two instruments, one bench: 1 K of
   it moves both leaks by log(2)/10 the same way. */
static void test_one_bench_for_two_instruments(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        "job: T-1\nset:\n  maker: P\n  supply: transformer\n  mains: 230 V\nreceived: 2031-02-03\n"
        "conditions:\n  bench: 20 C\n  working: 45 C\n"
        "instruments:\n"
        "  leakage:\n    accuracy: 0.01 %\n    resolution: 0.00001 uA\n    volts_accuracy: 0.01 %\n"
        "  other:\n    accuracy: 0.01 %\n    resolution: 0.00001 uA\n    volts_accuracy: 0.01 %\n"
        "capacitors:\n"
        "  C1:\n    type: paper\n    marked: 0.1 uF 150 V\n    place: avc bypass\n    line: A\n"
        "    feed: 10k\n    service: 10 V\n    readings:\n      - 20 V 60 s 0.4 uA\n"
        "  C2:\n    type: paper\n    marked: 0.1 uF 150 V\n    place: avc bypass\n    line: A\n"
        "    feed: 10k\n    service: 10 V\n    readings:\n      - 20 V 60 s 0.4 uA by other\n");
    /* clang-format on */
    const struct criterion *joint =
        bench_criterion(bench_part(&bench, "C1"), CRITERION_LINE_LOSS, true);
    assert_non_null(joint);
    /* loss is small, so it moves in proportion: U = 2*log(2)/10*1 K/sqrt(3) = 8.0 % of it; taken as
       independent it would be 5.7 % */
    assert_relative(joint->uncertainty / joint->value, 2 * log(2) / 10 / sqrt(3), 0.01);
    bench_release(&bench);
}

#define SHEET_METER                                                                                \
    "instruments:\n  leakage:\n    accuracy: 2 % + 0.02 uA\n    resolution: 0.01 uA\n"             \
    "    volts: 25 V, 50 V, 100 V, 250 V, 500 V\n"

/* The feed's ohms set the limit: shift 0.1 V over `feed` at 10 V. */
#define SMALL(ref, marked, feed)                                                                   \
    "  " ref ":\n    type: paper\n    marked: " marked "\n    place: other\n    feed: " feed       \
    "\n    shift: 0.1 V\n    service: 10 V\n"

/* U of the meter at L: 2*sqrt(((2 %*L + 20 nA)/sqrt(3))^2 + (10 nA)^2/12) = L/2 at L = 49.8 nA, so
   the limit at the test volts must reach that. */
static void test_volts_of_the_sheet(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD SHEET_METER
        "  megohms:\n    accuracy: 5 %\n    resolution: 1 M\n    volts: 100 V, 250 V, 500 V\n"
        "capacitors:\n"
        SMALL("C1", "0.1 uF 400 V", "1 meg")
        SMALL("C2", "0.1 uF 400 V", "11 meg")
        SMALL("C3", "0.1 uF 400 V", "22 meg")
        SMALL("C4", "0.1 uF 75 V", "22 meg")
        "  C5:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: smoothing\n"
        "  C6:\n    type: mica\n    marked: 100 pF 350 V\n    place: tuning\n"
        "  C7:\n    type: paper\n    marked: 0.1 uF 150 V\n    place: other\n    feed: 10k\n"
        "    shift: 0.5 V\n    service: 200 V\n");
    /* clang-format on */
    /* 100 nA at 10 V, 250 nA at 25 V: the lowest setting does. In series at most what leaves 9.5 V
       of the 25 V on a part that passes 100 nA: 155 M. */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_close(part->sheet_voltage_v, 25, 1e-9);
    assert_relative(part->sheet_limit_a, 250e-9, 1e-3);
    assert_relative(part->sheet_series_max_ohm, 155e6, 1e-3);
    /* 9.09 nA at 10 V: 22.7 nA at 25 V and 45.5 nA at 50 V are too little, 90.9 nA at 100 V is
     * enough */
    part = bench_part(&bench, "C2");
    assert_close(part->sheet_voltage_v, 100, 1e-9);
    assert_relative(part->sheet_limit_a, 90.9e-9, 1e-3);
    /* 4.55 nA at 10 V: 114 nA at 250 V */
    assert_close(bench_part(&bench, "C3")->sheet_voltage_v, 250, 1e-9);
    /* Marked 75 V: never above it; 22.7 nA at 50 V, and the insulation tester starts at 100 V */
    part = bench_part(&bench, "C4");
    assert_close(part->sheet_voltage_v, 50, 1e-9);
    assert_true(part->sheet_not_with_this_meter);
    assert_true(isnan(part->sheet_volts_needed_v)); /* 34 nA at 75 V would not do either */
    assert_relative(part->sheet_uncertainty_max_a, 22.7e-9 / 2, 0.01);
    /* Facts missing: volts and soak, and of an electrolytic what its leakage rule allows:
       JAN-C-62, 0.04*16 + 0.3 = 0.94 mA at the 450 V marked, 250/450 of it at 250 V */
    part = bench_part(&bench, "C5");
    assert_int_equal(part->why, WHY_NO_READING);
    assert_close(part->sheet_voltage_v, 250, 1e-9);
    assert_close(part->sheet_soak_s, 60, 1e-9);
    assert_relative(part->sheet_limit_a, 0.94e-3 * 250 / 450, 1e-3);
    part = bench_part(&bench, "C6");
    assert_close(part->sheet_voltage_v, 250, 1e-9);
    assert_true(isnan(part->sheet_limit_a));
    /* 100 V of 200 V: no reading there passes */
    assert_true(bench_part(&bench, "C7")->sheet_proves_fail_only);
    assert_false(bench_part(&bench, "C1")->sheet_proves_fail_only);
    bench_release(&bench);
}

/* Where the leakage meter cannot, the insulation tester may; and what would do is named. */
static void test_what_would_do(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n  leakage:\n    accuracy: 2 % + 0.02 uA\n    resolution: 0.01 uA\n"
        "    volts: 25 V, 50 V\n"
        "  megohms:\n    accuracy: 5 %\n    resolution: 1 M\n    volts: 100 V\n"
        "capacitors:\n"
        SMALL("C1", "0.1 uF 400 V", "11 meg")
        SMALL("C2", "0.1 uF 75 V", "11 meg"));
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_int_equal(part->sheet_instrument, 1);
    assert_close(part->sheet_voltage_v, 100, 1e-9);
    assert_false(part->sheet_not_with_this_meter);
    /* 45.5 nA at 50 V is short; 49.8 nA at 54.8 V would do, and the part bears it */
    part = bench_part(&bench, "C2");
    assert_int_equal(part->sheet_instrument, 0);
    assert_true(part->sheet_not_with_this_meter);
    assert_true(part->sheet_volts_needed_v > 54.5 && part->sheet_volts_needed_v < 55.5);
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_edge_of_scaling_is_no_slope),
        cmocka_unit_test(test_a_rise_read_too_early),
        cmocka_unit_test(test_a_rule_does_not_turn_on_the_chassis),
        cmocka_unit_test(test_what_may_not_fail_alone_does_not_fail_jointly),
        cmocka_unit_test(test_insulation_in_coarse_steps),
        cmocka_unit_test(test_a_bypass_across_its_own_feed),
        cmocka_unit_test(test_open_resistors),
        cmocka_unit_test(test_effects_that_say_what_goes_wrong),
        cmocka_unit_test(test_heat_limits_sooner_than_the_place),
        cmocka_unit_test(test_one_bench_for_two_instruments),
        cmocka_unit_test(test_volts_of_the_sheet),
        cmocka_unit_test(test_what_would_do),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
