/* Every place: its limit and its effect, held against hand arithmetic. */
#include "bench.h"

#define CAP(ref, type, marked, place)                                                              \
    "  " ref ":\n    type: " type "\n    marked: " marked "\n    place: " place "\n"

/* clang-format off */
#define STAGE_6V6                                                                                  \
    "stages:\n"                                                                                    \
    "  output:\n"                                                                                  \
    "    valve: V4 6V6GT\n" ROW_6V6                                                                \
    "    supply: 262.5 V\n"                                                                        \
    "    cathode: 252.5 ohm\n"                                                                     \
    "    grid_leak: 470k\n"
/* clang-format on */

static void test_coupling_into_an_amplifier(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  pre:\n"
        "    valve: V3 EL84\n"
        "    row: va 250 V, vg2 250 V, vg1 -7.3 V, ia 48 mA, ig2 5.5 mA, gm 11.3 mA/V\n"
        "    supply: 257.3 V\n"
        "    cathode: 136.4 ohm\n"
        "    grid_leak: 470k\n"
        "    use: amplifier\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.02 uF 400 V", "coupling")
        "    stage: pre\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 9.4 M\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* EL84, 7.3 V bias, 470 k, 10 % of the bias: 0.73 V/470 k = 1.553 uA, (100 - 0.73)/1.553 uA =
       63.9 M: "1.55 uA, 64 M at 100 V". */
    assert_relative(part->limit_a, 100 / 63.9e6, 0.005);
    assert_close(part->service_v, 100, 1e-9);
    /* "20 times the circuit resistance": 9.4 M from 100 V is 100*470/(9400 + 470) = 4.76 V. */
    const struct effect *effect = bench_effect(part, "grid_shift");
    assert_non_null(effect);
    assert_relative(effect->value, 4.762, 0.005);
    assert_relative(effect->of, 7.3, 0.01);
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_int_equal(part->advice, ADVICE_REPLACE);
    bench_release(&bench);
}

static void test_one_microampere_through_500k(void **state)
{
    (void)state;
    struct bench bench;
    /* Common practice: 1 uA through 500 k is 0.5 V of bias lost. 988 V less -12 V over 1000 M is
       1 uA. (Near -1 V the grid's own current would take some of it back.) */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  af:\n"
        "    valve: V2 6V6GT\n"
        ROW_6V6
        "    supply: 250 V\n"
        "    bias: -12.5 V\n"
        "    grid_leak: 500k\n"
        "    use: amplifier\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.01 uF 1200 V", "coupling")
        "    stage: af\n"
        "    source: 988 V\n"
        "    service: 1000 V\n"
        "    readings:\n"
        "      - 1000 V 60 s 1.0 uA\n");
    /* clang-format on */
    const struct effect *effect = bench_effect(bench_part(&bench, "C1"), "grid_shift");
    assert_non_null(effect);
    assert_relative(effect->value, 0.5, 0.002);
    assert_close(effect->of, 12.5, 1e-6);
    bench_release(&bench);
}

static void test_cathode_bypass(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER STAGE_6V6
        "capacitors:\n"
        CAP("C1", "paper", "2 uF 50 V", "cathode bypass")
        "    case: 40 mm x 60 mm\n" /* bears 0.16 W */
        "    stage: output\n"
        "    readings:\n"
        "      - 12.5 V 60 s 1 mA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* +10 % of 49.5 mA is 54.45 mA; D0 = 1.5*45/4.1 = 16.463 V; D must be 16.463*1.1^(2/3)
       = 17.543, 1.080 V more. k_a = (1/50k - 0.045*0.1/(250*1.1))/4.1 mS = 0.0009, mu12 = 250/28.74
       = 8.70; the cathode falls by 1.080/(1 + 1/8.70 + 0.0009) = 0.968 V to 11.532 V; 11.532/54.45
       mA = 211.8 ohm = 252.5 ohm || 1314 ohm; at 12.5 V that part passes 9.51 mA. */
    assert_relative(part->limit_a, 9.51e-3, 0.005);
    assert_int_equal(part->outcome, OUTCOME_PASS);
    assert_int_equal(part->advice, ADVICE_KEEP);
    assert_non_null(bench_criterion(part, CRITERION_CATHODE_CURRENT, false));
    bench_release(&bench);
}

static void test_bias_bypass_of_a_fixed_bias(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 250 V\n"
        "    bias: -12.5 V\n"
        "    grid_leak: 470k\n"
        "capacitors:\n"
        CAP("C1", "paper", "1 uF 50 V", "bias bypass")
        "    stage: output\n"
        "    feed: 100k\n"
        "    readings:\n"
        "      - 12.5 V 60 s 1 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* The same 1.080 V of drive, all of it at the grid: -12.5/(1 + g*100k) = -11.42 V, g = 0.946
       uS, at 12.5 V 11.8 uA. */
    assert_close(part->service_v, 12.5, 1e-6);
    assert_relative(part->limit_a, 11.82e-6, 0.005);
    assert_non_null(bench_effect(part, "bias_loss"));
    bench_release(&bench);
}

static void test_back_bias_bypass(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R9: {marked: 150 ohm 2 W, measured: 150 ohm, done: kept}\n"
        "stages:\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 250 V\n"
        "    bias: R9\n"
        "    others: 33.8 mA\n"
        "    grid_leak: 470k\n"
        "capacitors:\n"
        CAP("C1", "paper", "1 uF 50 V", "bias bypass")
        "    stage: output\n"
        "    feed: 100k\n"
        "    readings:\n"
        "      - 12.5 V 60 s 1 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* 49.5 mA + 33.8 mA through 150 ohm is 12.5 V: the row itself. */
    assert_relative(part->service_v, 12.5, 0.01);
    assert_relative(bench.findings->stages[0].phases[PHASE_DESIGNED].solution.cathode_a, 49.5e-3,
                    0.01);
    /* The bias resistor brings part of the loss back: more is allowed than with a fixed bias. */
    assert_true(part->limit_a > 11.82e-6);
    bench_release(&bench);
}

static void test_screen_bypass(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R5: {marked: 22k 1 W, measured: 22k, done: kept}\n"
        "stages:\n"
        "  mixer:\n"
        "    valve: V1 6SA7\n"
        "    supply: 250 V\n"
        "    screen: R5\n"
        "    cathode: 220 ohm\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        "    supply: 250 V\n"
        "    cathode: 252.5 ohm\n"
        "    grid_leak: 470k\n"
        "  if:\n"
        "    valve: V2 6J7\n"
        "    row: va 250 V, vg2 100 V, vg1 -3 V, ia 2 mA, ig2 0.5 mA, gm 1.225 mA/V\n"
        "    supply: 253 V\n"
        "    screen: 253 V 300k\n"
        "    cathode: 1200 ohm\n"
        "    grid_leak: 1 meg\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.1 uF 400 V", "screen bypass")
        "    case: 40 mm x 60 mm\n" /* bears 0.16 W */
        "    stage: mixer\n"
        "    readings:\n"
        "      - 250 V 60 s 1 uA\n"
        CAP("C2", "paper", "0.1 uF 400 V", "screen bypass")
        "    stage: output\n"
        "    readings:\n"
        "      - 250 V 60 s 1 uA\n"
        CAP("C3", "paper", "0.1 uF 400 V", "screen bypass")
        "    stage: if\n"
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        CAP("C4", "paper", "25 uF 25 V", "cathode bypass")
        "    stage: mixer\n"
        "    service: 2 V\n"
        "    readings:\n"
        "      - 10 V 60 s 1 uA\n");
    /* clang-format on */
    /* No row for a converter: 20 times the dropper, 250 V/(20*22 k) = 568 uA. */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_relative(part->limit_a, 250 / (20 * 22e3), 1e-4);
    assert_non_null(bench_effect(part, "linear_ratio"));
    const struct criterion *ratio = bench_criterion(part, CRITERION_LINEAR_RATIO, false);
    assert_non_null(ratio);
    assert_false(ratio->upper);
    assert_close(ratio->limit, 20, 1e-9);
    assert_relative(ratio->value, 250e6 / 22e3, 1e-3); /* 250 V/1 uA is 250 M */
    assert_int_equal(ratio->source, SOURCE_TWENTY_TIMES);
    /* A screen at the supply is judged as decoupling: nothing drops, the heat limits: 0.02 W. */
    part = bench_part(&bench, "C2");
    assert_relative(part->limit_a, 0.02 / 250, 1e-3);
    /* 5 % of 103 V is 5.15 V; the dropper gives 5.15/300 k = 17.2 uA more, the screen takes less
       by its own slope: dI/dV = 1.5*0.5 mA/D0/mu12 = 0.75 mA/(2.449*18.35) = 16.7 uS less the
       share m = 0; the cathode gives back a little. Between the drop alone and drop + slope. */
    part = bench_part(&bench, "C3");
    assert_relative(part->service_v, 103, 0.02);
    assert_true(part->limit_a > 17.2e-6 && part->limit_a < 17.2e-6 + 5.15 * 16.7e-6);
    /* Linear cathode bypass: 2 V/(20*220) = 455 uA. */
    assert_relative(bench_part(&bench, "C4")->limit_a, 2 / (20 * 220.0), 1e-4);
    /* Judged without a row: no more than a note. */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_UNKNOWN), 0);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_NOT_NEEDED), 1);
    assert_int_equal(bench.findings->stages[0].phases[PHASE_FOUND].why, WHY_NO_ROW);
    bench_release(&bench);
}

static void test_avc_line_singly_and_jointly(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        CAP("C1", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: A\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s 0.4 uA\n"
        CAP("C2", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: A\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s 0.4 uA\n"
        CAP("C3", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: A\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s 0.001 uA\n"
        CAP("C4", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: B\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s 0.4 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* G*1 M/(1 + G*1 M) = 5 %: G = 52.6 nS, at 12 V 0.632 uA; the line's sheet limit by three. */
    assert_relative(part->limit_a, 0.6316e-6, 1e-3);
    assert_relative(part->sheet_limit_a, 0.6316e-6 / 3, 1e-3);
    /* singly 0.0333/1.0333 = 3.2 %; together 0.06675/1.06675 = 6.26 % */
    assert_relative(bench_criterion(part, CRITERION_LINE_LOSS, false)->value, 3.226, 1e-3);
    assert_relative(bench_criterion(part, CRITERION_LINE_LOSS, true)->value, 6.257, 1e-3);
    /* Relative standard uncertainty of each leak, chassis as warm as the bench (both kinks count):
       bench +-1 K: 2^(0.577/10) - 1 = 4.08 %; volts 1 %/sqrt(3) low is scaled up by its square:
       1.16 %; accuracy (0.4 + 0.1 nA)/sqrt(3)/400 nA = 0.07 %: together 4.24 %. Common to all
       readings of the instrument, so the loss moves by 4.24 % of 6.257*(1 - 0.06257) = 0.249 and
       U is 0.497; were the readings independent it would be 0.352. */
    assert_relative(bench_criterion(part, CRITERION_LINE_LOSS, true)->uncertainty, 0.497, 0.01);
    /* One reading, one outcome: as found they leaked together too. */
    assert_int_equal(part->outcome_found, OUTCOME_CONDITIONAL_FAIL);
    assert_int_equal(part->outcome, OUTCOME_CONDITIONAL_FAIL);
    assert_int_equal(part->why, WHY_JOINT);
    assert_int_equal(part->advice, ADVICE_REPLACE);
    /* Brings far less than 1/(2*3) of the loss: not blamed. */
    assert_int_equal(bench_part(&bench, "C3")->outcome, OUTCOME_CONDITIONAL_PASS);
    assert_int_equal(bench_part(&bench, "C4")->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

static void test_bounds_do_not_fail_a_line(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        CAP("C1", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: A\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s 0.4 uA\n"
        CAP("C2", "paper", "0.1 uF 150 V", "avc bypass")
        "    line: A\n"
        "    feed: 1 meg\n"
        "    service: 12 V\n"
        "    readings:\n"
        "      - 12 V 60 s under 0.4 uA\n");
    /* clang-format on */
    /* at most 6.26 % together, of which 3.2 % is certain */
    assert_int_equal(bench_part(&bench, "C1")->outcome, OUTCOME_PASS);
    assert_int_equal(bench_part(&bench, "C2")->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

static void test_many_on_one_line_and_a_short(void **state)
{
    (void)state;
    static char text[32768];
    int length = snprintf(text, sizeof text, "%s",
                          HEAD METER STAGE_6V6 "capacitors:\n" CAP(
                              "C0", "paper", "0.02 uF 400 V",
                              "coupling") "    stage: output\n    source: 250 V\n    readings:\n"
                                          "      - 250 V 60 s 100 ohm\n");
    for (int i = 1; i <= 30; i++)
        length += snprintf(text + length, sizeof text - (size_t)length,
                           "  C%d:\n    type: paper\n    marked: 0.1 uF 150 V\n"
                           "    place: avc bypass\n    line: A\n    feed: 1 meg\n"
                           "    service: 12 V\n    readings:\n      - 12 V 60 s 0.04 uA\n",
                           i);
    struct bench bench;
    bench_assess(&bench, text);
    assert_int_equal(bench_part(&bench, "C0")->outcome, OUTCOME_FAIL);
    assert_true(bench_effect(bench_part(&bench, "C0"), "grid_volts")->value > 20);
    /* 30*3.33 nS*1 M = 0.1: 9.1 % of the line together, a thirtieth each */
    const struct capacitor_findings *part = bench_part(&bench, "C7");
    assert_relative(bench_criterion(part, CRITERION_LINE_LOSS, true)->value, 9.09, 0.003);
    assert_int_equal(part->outcome, OUTCOME_CONDITIONAL_FAIL);
    bench_release(&bench);
}

static void test_linear_places(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R1: {marked: 2.2k 1 W, done: kept}\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.1 uF 400 V", "decoupling")
        "    feed: R1\n"
        "    current: 20 mA\n"
        "    service: 250 V\n"
        "    readings:\n"
        "      - 250 V 60 s 1 uA\n"
        CAP("C2", "paper", "50 pF 600 V", "avc feed")
        "    source: 200 V\n"
        "    feed: 1 meg\n"
        "    readings:\n"
        "      - 200 V 60 s 0.001 uA\n"
        CAP("C3", "mica", "100 pF 350 V", "detector")
        "    feed: 500k\n"
        "    service: 10 V\n"
        "    readings:\n"
        "      - 10 V 60 s 0.001 uA\n"
        CAP("C4", "mica", "100 pF 350 V 5 %", "tuning")
        "    circuit: 100k\n"
        "    service: 100 V\n"
        "    measured: 110 pF\n"
        "    readings:\n"
        "      - 100 V 60 s 0.001 uA\n"
        CAP("C5", "paper", "2 uF 150 V", "battery bypass")
        "    current: 10 mA\n"
        "    service: 90 V\n"
        "    readings:\n"
        "      - 90 V 60 s 1 uA\n"
        CAP("C6", "paper", "0.1 uF 400 V", "other")
        "    feed: 10k\n"
        "    shift: 0.5 V\n"
        "    service: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        CAP("C7", "paper", "0.1 uF 400 V", "other")
        "    feed: 10k\n"
        "    shift: 1 %\n"
        "    service: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n");
    /* clang-format on */
    /* drop 2 % of 250 V over 2.2 k is 2.27 mA; (20 mA + I)^2*2.2 k <= 1 W is 1.32 mA; heat 0.02 W
       at 250 V is 80 uA: the least. */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_relative(part->limit_a, 80e-6, 1e-4);
    assert_non_null(bench_criterion(part, CRITERION_DROPPER_DISSIPATION, false));
    assert_non_null(bench_criterion(part, CRITERION_RAIL_DROP, false));
    /* 0.2 V on the line of 1 M: 200*g*1M/(1 + g*1M) = 0.2, g = 1.001 nS, 0.2002 uA */
    assert_relative(bench_part(&bench, "C2")->limit_a, 0.2002e-6, 1e-3);
    /* 10 mV on a control of 500 k is 20 nA */
    assert_relative(bench_part(&bench, "C3")->limit_a, 20e-9, 1e-4);
    assert_non_null(bench_effect(bench_part(&bench, "C3"), "control_volts"));
    /* 20*100 k = 2 M at 100 V is 50 uA; 110 pF is +10 %, marked 5 % */
    part = bench_part(&bench, "C4");
    assert_relative(part->limit_a, 50e-6, 1e-4);
    assert_relative(bench_criterion(part, CRITERION_CAPACITANCE, false)->value, 10, 1e-9);
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    /* 2 % of 10 mA */
    assert_relative(bench_part(&bench, "C5")->limit_a, 200e-6, 1e-4);
    /* 0.5 V over 10 k; 1 % of 100 V over 10 k */
    assert_relative(bench_part(&bench, "C6")->limit_a, 50e-6, 1e-4);
    assert_relative(bench_part(&bench, "C7")->limit_a, 100e-6, 1e-4);
    for (int i = 1; i <= 7; i++)
        assert_true(bench.findings->capacitors[i - 1].effect_count > 0);
    bench_release(&bench);
}

static void test_detector_on_a_grid_and_tone(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER STAGE_6V6
        "    anode: 310 ohm\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.01 uF 400 V", "detector")
        "    stage: output\n"
        "    feed: 500k\n"
        "    service: 10 V\n"
        "    readings:\n"
        "      - 10 V 60 s 0.1 uA\n"
        CAP("C2", "paper", "0.01 uF 1000 V", "tone")
        "    stage: output\n"
        "    readings:\n"
        "      - 250 V 60 s 1 uA\n"
        CAP("C3", "paper", "0.01 uF 1000 V", "avc feed")
        "    stage: output\n"
        "    source: 200 V\n"
        "    feed: 1 meg\n"
        "    delay: 1 V\n"
        "    readings:\n"
        "      - 200 V 60 s 0.01 uA\n");
    /* clang-format on */
    /* 10 % of 12.5 V over 500 k is 2.5 uA (the stage without load resistance sits at its row) */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_relative(part->limit_a, 2.5e-6, 0.02);
    assert_non_null(bench_criterion(part, CRITERION_GRID_SHIFT, false));
    part = bench_part(&bench, "C2");
    assert_relative(bench_effect(part, "short_watts")->value, 262.5 * 262.5 / 310, 1e-6);
    assert_relative(part->limit_a, 0.02 / part->service_v, 1e-4);
    /* a delay of 1 V allows a tenth of it: 0.1 V over 1 M */
    assert_relative(bench_part(&bench, "C3")->limit_a, 0.1e-6, 0.002);
    bench_release(&bench);
}

static void test_mains_places(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        CAP("C1", "paper", "0.22 uF 600 V", "across mains")
        "    plug_side: yes\n"
        "    readings:\n"
        "      - 500 V 60 s over 5000 M\n"
        "    done: replaced\n"
        "    fitted: polypropylene 0.1 uF 310 V a.c. X2\n"
        CAP("C2", "paper", "0.01 uF 600 V", "mains to chassis")
        "    done: kept\n"
        CAP("C3", "ceramic", "4700 pF 300 V a.c. Y2", "mains to chassis")
        "    readings:\n"
        "      - 230 V 60 s over 5000 M\n"
        "    done: kept\n"
        CAP("C4", "ceramic", "2200 pF 300 V a.c. Y1", "aerial isolator")
        "    readings:\n"
        "      - 230 V 60 s over 5000 M\n"
        "    done: kept\n"
        CAP("C5", "ceramic", "4700 pF 300 V a.c. Y1", "earth isolator")
        "    readings:\n"
        "      - 230 V 60 s over 5000 M\n"
        CAP("C6", "ceramic", "4700 pF 250 V a.c. Y2", "mains to chassis")
        "    readings:\n"
        "      - 230 V 60 s 50 M\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_true(part->no_reading_passes);
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_int_equal(part->why, WHY_NO_READING_PASSES);
    assert_int_equal(part->advice, ADVICE_REPLACE_SAFETY_CLASS);
    assert_false(part->against_advice);
    assert_int_equal(part->class_needed, CLASS_X2);
    assert_non_null(bench_effect(part, "mains_fire"));
    assert_non_null(bench_effect(part, "discharge_resistor"));
    assert_true(isnan(part->sheet_voltage_v));
    part = bench_part(&bench, "C2");
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_true(part->against_advice);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_AGAINST_ADVICE), 2); /* C2 and C4 */
    /* 253 V * 2*pi*50*0.01 uF = 0.795 mA */
    assert_relative(bench_effect(part, "earth_current")->value, 0.7948e-3, 1e-3);
    assert_int_equal(bench_part(&bench, "C3")->outcome, OUTCOME_PASS);
    /* The isolators are 6.9 nF together, above 6.29 nF: both fail though each bears its class. */
    part = bench_part(&bench, "C4");
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_relative(bench_criterion(part, CRITERION_TOUCH_CURRENT, true)->value,
                    253 * 2 * M_PI * 50 * 6.9e-9, 1e-3);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_TOUCH_CURRENT_HIGH), 1);
    /* 250 V a.c. is less than 1.1*230 V, 50 M less than 100 M */
    part = bench_part(&bench, "C6");
    assert_int_equal(bench_criterion(part, CRITERION_RATED_VOLTS, false)->outcome, OUTCOME_FAIL);
    assert_int_equal(bench_criterion(part, CRITERION_INSULATION, false)->outcome, OUTCOME_FAIL);
    bench_release(&bench);
}

static void test_pulse_place(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        CAP("C1", "paper", "0.01 uF 1600 V", "other")
        "    pulse: yes\n"
        "    pulse_peak: 900 V\n"
        "    readings:\n"
        "      - 500 V 60 s 0.01 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_close(bench_criterion(part, CRITERION_PULSE_RATING, false)->limit, 1800, 1e-9);
    assert_non_null(bench_effect(part, "pulse_peak"));
    bench_release(&bench);
}

static void test_pushpull_pair_on_one_cathode_resistor(void **state)
{
    (void)state;
    struct bench bench;
    /* Two 6V6GT, 262.5 V, common R_k 126.3 ohm, EMF 6.25 V at one grid: its cathode current +42.7
       %, the other's -16.3 % (computed, agrees with ngspice). 100 V through 7.05 M into 470 k is
       100*470/7520 = 6.25 V. */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R12: {marked: 126.3 ohm 2 W}\n"
        "stages:\n"
        "  a:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 262.5 V\n"
        "    cathode: R12\n"
        "    grid_leak: 470k\n"
        "    pushpull_with: b\n"
        "  b:\n"
        "    valve: V5 6V6GT\n"
        ROW_6V6
        "    supply: 262.5 V\n"
        "    cathode: R12\n"
        "    grid_leak: 470k\n"
        "    pushpull_with: a\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.1 uF 400 V", "coupling")
        "    stage: a\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 7.05 M\n"
        CAP("C2", "paper", "0.1 uF 400 V", "coupling")
        "    stage: b\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s over 50000 M\n");
    /* clang-format on */
    const struct stage_findings *stages = bench.findings->stages;
    const struct stage_phase *a = &stages[0].phases[PHASE_FOUND],
                             *b = &stages[1].phases[PHASE_FOUND];
    assert_close(100 * (a->solution.cathode_a / a->no_leak_cathode_a - 1), 42.7, 0.3);
    assert_close(100 * (b->solution.cathode_a / b->no_leak_cathode_a - 1), -16.3, 0.3);
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    assert_non_null(bench_criterion(part, CRITERION_PUSHPULL_DIFFERENCE, false));
    assert_int_equal(bench_part(&bench, "C2")->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

static void test_missing_facts(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  af:\n"
        "    valve: V2 12AX7\n"
        "    anode: 100k\n"
        "capacitors:\n"
        CAP("C1", "paper", "0.02 uF 400 V", "coupling")
        "    stage: af\n"
        "    source: 90 V\n"
        CAP("C2", "paper", "0.02 uF 400 V", "decoupling"));
    /* clang-format on */
    assert_int_equal(bench_part(&bench, "C1")->outcome, OUTCOME_NOT_JUDGED);
    assert_int_equal(bench_part(&bench, "C1")->why, WHY_NO_READING);
    assert_int_equal(bench_part(&bench, "C1")->advice, ADVICE_MEASURE_AGAIN);
    assert_true(isnan(bench_part(&bench, "C2")->limit_a));
    /* The sheet comes before any reading and names what a limit wants. */
    assert_int_equal(bench_part(&bench, "C2")->sheet_why, WHY_MISSING_FACT);
    assert_non_null(bench_part(&bench, "C2")->sheet_missing);
    assert_string_equal(bench.findings->stages[0].phases[PHASE_FOUND].missing, "supply");
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_coupling_into_an_amplifier),
        cmocka_unit_test(test_one_microampere_through_500k),
        cmocka_unit_test(test_cathode_bypass),
        cmocka_unit_test(test_bias_bypass_of_a_fixed_bias),
        cmocka_unit_test(test_back_bias_bypass),
        cmocka_unit_test(test_screen_bypass),
        cmocka_unit_test(test_avc_line_singly_and_jointly),
        cmocka_unit_test(test_bounds_do_not_fail_a_line),
        cmocka_unit_test(test_many_on_one_line_and_a_short),
        cmocka_unit_test(test_linear_places),
        cmocka_unit_test(test_detector_on_a_grid_and_tone),
        cmocka_unit_test(test_mains_places),
        cmocka_unit_test(test_pulse_place),
        cmocka_unit_test(test_pushpull_pair_on_one_cathode_resistor),
        cmocka_unit_test(test_missing_facts),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
