/* Stages of a job: rows, circuits, phases, what the set itself showed. */
#include "bench.h"

static const struct stage_findings *stage(const struct bench *bench, const char *name)
{
    for (size_t i = 0; i < bench->findings->stage_count; i++)
        if (strcmp(bench->findings->stages[i].stage->name, name) == 0)
            return &bench->findings->stages[i];
    fail_msg("no stage %s", name);
    return NULL;
}

static void test_designed_found_left(void **state)
{
    (void)state;
    struct bench bench;
    /* 6V6GT with load and dropper (agrees with ngspice): HT 300, R_a 300, R_g2 10 k, R_k 253, R_g
       470 k, 90 V through 20.1 M: V_g 2.0564, V_k 13.239, I_a 48.029, I_g2 4.2989 mA; no
       leak 44.793, 4.0390, V_k 12.354. */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 300 V\n"
        "    anode: 300 ohm\n"
        "    screen: 300 V 10k\n"
        "    cathode: 253 ohm\n"
        "    grid_leak: 470k\n"
        "    measured:\n"
        "      found: grid 2.0 V, cathode 13.2 V\n"
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.02 uF 400 V\n"
        "    place: coupling\n"
        "    stage: output\n"
        "    source: 90 V\n"
        "    readings:\n"
        "      - 90 V 60 s 20.1 M\n"
        "      - 90 V 60 s over 90000 M left\n"
        "    done: restuffed\n"
        "    fitted: polypropylene 0.022 uF 630 V\n");
    /* clang-format on */
    const struct stage_findings *found = stage(&bench, "output");
    const struct stage_solution *designed = &found->phases[PHASE_DESIGNED].solution;
    const struct stage_solution *leaking = &found->phases[PHASE_FOUND].solution;
    assert_relative(designed->anode_a, 44.793e-3, 5e-5);
    assert_relative(designed->cathode_v, 12.354, 5e-5);
    assert_relative(leaking->grid_v, 2.0564, 2e-4);
    assert_relative(leaking->anode_a, 48.029e-3, 5e-5);
    assert_relative(leaking->screen_a, 4.2989e-3, 5e-5);
    /* left: the new part's own reading, as good as none */
    assert_relative(found->phases[PHASE_LEFT].solution.cathode_v, 12.354, 1e-3);
    assert_true(found->row_given);
    assert_true(found->is_output);
    assert_true(isnan(found->grid_current_a)); /* explained */
    bench_release(&bench);
}

static void test_contact_bias(void **state)
{
    (void)state;
    struct bench bench;
    /* 12AX7, 250 V, 220 k, 10 M: V_g -1.125 V; with 100 V through 1 G: -0.993 V (computed). */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  af:\n"
        "    valve: V2 12AX7\n"
        "    row: va 250 V, vg1 -2 V, ia 1.2 mA, gm 1.6 mA/V, mu 100\n"
        "    supply: 250 V\n"
        "    anode: 220k\n"
        "    bias: contact\n"
        "    grid_leak: 10 meg\n"
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.01 uF 400 V\n"
        "    place: coupling\n"
        "    stage: af\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 1000 M\n");
    /* clang-format on */
    const struct stage_findings *af = stage(&bench, "af");
    assert_close(af->phases[PHASE_DESIGNED].solution.grid_v, -1.125, 0.002);
    assert_close(af->phases[PHASE_FOUND].solution.grid_v, -0.993, 0.002);
    assert_false(af->is_output);
    /* 0.132 V of 1.125 V is 11.7 %: over 10 % */
    assert_int_equal(bench.findings->capacitors[0].outcome, OUTCOME_FAIL);
    bench_release(&bench);
}

static void test_valves_by_name(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  a:\n"
        "    valve: V1 ECL82\n"
        "    supply: 200 V\n"
        "    cathode: 2k\n"
        "  b:\n"
        "    valve: V1 ECL82 triode\n"
        "    supply: 200 V\n"
        "    cathode: 2k\n"
        "  c:\n"
        "    valve: V2 6V6GT\n"
        "    row: A1-251\n"
        "    supply: 250 V\n"
        "    cathode: 250 ohm\n"
        "  d:\n"
        "    valve: V3 6v6 gt\n"
        "    supply: 250 V\n"
        "    cathode: 250 ohm\n"
        "  e:\n"
        "    valve: V4 6ZZ9\n"
        "    supply: 250 V\n"
        "    cathode: 250 ohm\n"
        "  f:\n"
        "    valve: V5\n"
        "    supply: 250 V\n"
        "    cathode: 1k\n"
        "  g:\n"
        "    valve: V6 6V6GT\n"
        "    row: va 250 V, vg2 250 V\n"
        "    supply: 250 V\n"
        "    cathode: 250 ohm\n"
        "  h:\n"
        "    valve: V7 6V6GT\n"
        "    row: va 250 V, vg2 250 V, vg1 -12.5 V, ia 45 mA, ig2 4.5 mA\n"
        "    supply: 250 V\n"
        "    cathode: 250 ohm\n"
        "valves:\n"
        "  V5: {type: 12AX7, tested: 80 %, done: kept}\n");
    /* clang-format on */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_AMBIGUOUS), 1);
    assert_null(stage(&bench, "a")->row_name);
    assert_non_null(stage(&bench, "b")->row_name);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_ROW_UNKNOWN), 1);
    assert_non_null(stage(&bench, "c")->row_name); /* the nearest instead */
    assert_non_null(stage(&bench, "d")->row_name);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_NOT_NEEDED), 1);   /* 6ZZ9 */
    assert_true(stage(&bench, "f")->phases[PHASE_DESIGNED].judged);          /* type under valves */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_ROW_UNUSABLE), 2); /* g, h */
    assert_int_equal(stage(&bench, "g")->phases[PHASE_DESIGNED].why, WHY_NO_ROW);
    bench_release(&bench);
}

static void test_grid_current_is_what_leakage_leaves(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n"
        "  leakage:\n"
        "    accuracy: 1 % + 0.001 uA\n"
        "    resolution: 0.001 uA\n"
        "  volts:\n"
        "    accuracy: 1 % + 0.01 V\n"
        "    input: 10 meg\n"
        "stages:\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 262.5 V\n"
        "    cathode: 252.5 ohm\n"
        "    grid_leak: 470k\n"
        "    measured:\n"
        "      found: grid 4.0 V\n"
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.02 uF 400 V\n"
        "    place: coupling\n"
        "    stage: output\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 46.53 M\n");
    /* clang-format on */
    const struct stage_findings *output = stage(&bench, "output");
    /* 100 V through 46.53 M into 470 k is 1.00 V, read 0.955 V through 470 k || 10 M = 448.9 k; 4.0
       V leaves 3.045 V, 6.78 uA. */
    assert_true(output->grid_current_advice);
    assert_relative(output->grid_current_a, 6.78e-6, 0.003);
    /* the meter's 2*(1 % of 4.0 V + 0.01 V)/sqrt(3) and, of the 0.955 V explained, 2 u of the leak:
       0.60 % by its meter, 4.0 % by the bench's +-1 K: hypot(0.0577, 0.0773) V through 448.9 k */
    assert_relative(output->grid_current_error_a, 0.215e-6, 0.02);
    assert_true(output->near_rating); /* 45 mA at 250 V is 11.25 W of 12 W */
    bench_release(&bench);
}

static void test_anchor_on_a_lifted_cathode_voltage(void **state)
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
        "    supply: 262.5 V\n"
        "    cathode: 252.5 ohm\n"
        "    grid_leak: 470k\n"
        "    measured:\n"
        "      found: cathode 10.1 V, lifted\n");
    /* clang-format on */
    /* The valve's own 10.1 V/252.5 ohm = 40 mA. */
    assert_relative(stage(&bench, "output")->phases[PHASE_FOUND].solution.cathode_a, 40e-3, 1e-3);
    bench_release(&bench);
}

/* Two alike on one resistor bear the deviation alike: 11.0 V over 126 ohm are 43.65 mA each. What
   leaks when the set is put together again is no part of what was read with it lifted. */
static void test_anchor_of_two_on_one_resistor(void **state)
{
    (void)state;
    struct bench bench;
#define HALF(name, valve)                                                                          \
    "  " name ":\n    valve: " valve " 6V6GT\n" ROW_6V6                                            \
    "    supply: 262.5 V\n    cathode: R1\n    grid_leak: 470k\n"                                  \
    "    measured:\n      found: grid 0.0 V, cathode 11.0 V, lifted\n"
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R1: {marked: 126 ohm 2 W, measured: 126 ohm}\n"
        "stages:\n"
        HALF("upper", "V4") HALF("lower", "V5")
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.02 uF 400 V\n"
        "    place: coupling\n"
        "    stage: upper\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 46.53 M\n");
    /* clang-format on */
#undef HALF
    const char *const names[] = {"upper", "lower"};
    for (size_t i = 0; i < 2; i++) {
        const struct stage_phase *found = &stage(&bench, names[i])->phases[PHASE_FOUND];
        assert_relative(found->no_leak_cathode_a, 11.0 / 126 / 2, 1e-6);
        const struct reconciled_phase *beside =
            &bench.findings->bench.reconciled[i].phases[PHASE_FOUND];
        assert_close(beside->nodes[NODE_CATHODE].low_v, 11.0, 1e-6);
        assert_close(beside->nodes[NODE_GRID].high_v, 0, 1e-6); /* without the leak's 1.0 V */
    }
    assert_relative(stage(&bench, "upper")->phases[PHASE_FOUND].grid_warm_v, 1.0, 1e-3);
    bench_release(&bench);
}

/* One capacitor on two grids, or one bypass on two fixed biases, is judged by the stage that bears
   least, whichever is named first; alone on it the same leak is allowed. */
static void test_the_stage_that_bears_least(void **state)
{
    (void)state;
    struct bench bench;
#define GRID(name, valve, leak)                                                                    \
    "  " name ":\n    valve: " valve " 6V6GT\n" ROW_6V6                                            \
    "    supply: 250 V\n    bias: -12.5 V\n    grid_leak: " leak "\n"
#define COUPLED(ref, stages)                                                                       \
    "  " ref                                                                                       \
    ":\n    type: mica\n    marked: 0.02 uF 400 V\n    place: coupling\n    stage: " stages        \
    "\n    source: 100 V\n"
    bench_assess(&bench, HEAD METER "stages:\n" GRID("low", "V4", "100k") GRID("high", "V5", "470k")
                             GRID("apart", "V6", "470k") "capacitors:\n" COUPLED("C1", "low, high")
                                 COUPLED("C2", "high, low") COUPLED("C3", "apart"));
#undef GRID
#undef COUPLED
    double alone_a = bench_part(&bench, "C3")->limit_a;
    assert_true(alone_a > 0);
    assert_relative(bench_part(&bench, "C1")->limit_a, alone_a, 1e-6);
    assert_relative(bench_part(&bench, "C2")->limit_a, alone_a, 1e-6);
    bench_release(&bench);
}

static void test_measured_resistors_and_joint_leaks(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "resistors:\n"
        "  R1: {marked: 250 ohm 1 W, measured: 300 ohm, done: replaced, fitted: 250 ohm 2 W}\n"
        "  R2: {marked: 470k, measured: 520k, done: kept}\n"
        "stages:\n"
        "  output:\n"
        "    valve: V4 6V6GT\n"
        ROW_6V6
        "    supply: 262.5 V\n"
        "    cathode: R1\n"
        "    grid_leak: R2\n"
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.02 uF 400 V\n"
        "    place: coupling\n"
        "    stage: output\n"
        "    source: 100 V\n"
        "    readings:\n"
        "      - 100 V 60 s 32 M\n"
        "  C2:\n"
        "    type: paper\n"
        "    case: 40 mm x 60 mm\n"
        "    marked: 25 uF 25 V\n"
        "    place: cathode bypass\n"
        "    stage: output\n"
        "    readings:\n"
        "      - 15 V 60 s 6 mA\n");
    /* clang-format on */
    const struct stage_findings *output = stage(&bench, "output");
    assert_true(output->phases[PHASE_FOUND].no_leak_cathode_a <
                output->phases[PHASE_DESIGNED].no_leak_cathode_a);
    assert_relative(output->phases[PHASE_LEFT].no_leak_cathode_a,
                    output->phases[PHASE_DESIGNED].no_leak_cathode_a, 1e-9);
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    const struct criterion *single = bench_criterion(part, CRITERION_CATHODE_CURRENT, false);
    const struct criterion *joint = bench_criterion(part, CRITERION_CATHODE_CURRENT, true);
    assert_non_null(single);
    assert_non_null(joint);
    assert_true(joint->value > single->value);
    /* two measured resistors, 3 % each, count besides the meter */
    assert_true(single->uncertainty > 0.01 * single->value);
    bench_release(&bench);
}

static void test_stages_that_one_capacitor_bypasses(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  rf:\n"
        "    valve: V1 6J7\n"
        "    row: va 250 V, vg2 100 V, vg1 -3 V, ia 2 mA, ig2 0.5 mA, gm 1.225 mA/V\n"
        "    supply: 253 V\n"
        "    screen: 253 V 150k\n"
        "    cathode: 1200 ohm\n"
        "    grid_leak: 1 meg\n"
        "  if:\n"
        "    valve: V2 6J7\n"
        "    row: va 250 V, vg2 100 V, vg1 -3 V, ia 2 mA, ig2 0.5 mA, gm 1.225 mA/V\n"
        "    supply: 253 V\n"
        "    screen: 253 V 150k\n"
        "    cathode: 1200 ohm\n"
        "    grid_leak: 1 meg\n"
        "capacitors:\n"
        "  C1:\n"
        "    type: paper\n"
        "    marked: 0.1 uF 400 V\n"
        "    place: screen bypass\n"
        "    stage: rf, if\n"
        "    readings:\n"
        "      - 100 V 60 s 10 uA\n");
    /* clang-format on */
    /* One dropper for both: at the row 253 - 150 k*(0.5 + 0.5 mA) = 103 V, the row's own 100 V
       above the cathode's 3 V. */
    const struct stage_solution *rf = &stage(&bench, "rf")->phases[PHASE_DESIGNED].solution;
    const struct stage_solution *other = &stage(&bench, "if")->phases[PHASE_DESIGNED].solution;
    assert_close(rf->screen_v, 103, 0.1);
    assert_close(rf->screen_v, other->screen_v, 1e-6);
    assert_relative(rf->cathode_a, 2.5e-3, 2e-3);
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_non_null(bench_criterion(part, CRITERION_SCREEN_FALL, false));
    assert_int_equal(part->outcome, OUTCOME_PASS);
    bench_release(&bench);
}

static void test_rows_given_for_unknown_types(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "stages:\n"
        "  power:\n"
        "    valve: V1 QX45\n"
        "    row: va 250 V, vg1 -45 V, ia 60 mA, gm 5.25 mA/V, mu 4.2\n"
        "    supply: 295 V\n"
        "    cathode: 750 ohm\n"
        "    grid_leak: 470k\n"
        "  small:\n"
        "    valve: V2 QX9\n"
        "    row: va 250 V, vg1 -8.5 V, ia 5.5 mA, gm 2.2 mA/V, mu 17.5\n"
        "    supply: 250 V\n"
        "    bias: -8.5 V\n"
        "  pentode:\n"
        "    valve: V3 QX7\n"
        "    row: va 250 V, vg2 100 V, vg1 -3 V, ia 2 mA, ig2 0.5 mA, gm 1.225 mA/V\n"
        "    supply: 250 V\n"
        "    screen: 100 V 0 ohm\n"
        "    bias: -3 V\n"
        "  output:\n"
        "    valve: V4 QX6\n"
        "    row: va 250 V, vg2 250 V, vg1 -12.5 V, ia 45 mA, ig2 4.5 mA, gm 4.1 mA/V\n"
        "    supply: 250 V\n"
        "    bias: 150 ohm\n"
        "    others: 33.8 mA\n");
    /* clang-format on */
    assert_true(stage(&bench, "power")->is_output);
    assert_relative(stage(&bench, "power")->phases[PHASE_DESIGNED].solution.anode_a, 60e-3, 1e-3);
    assert_false(stage(&bench, "small")->is_output);
    assert_relative(stage(&bench, "small")->phases[PHASE_DESIGNED].solution.anode_a, 5.5e-3, 1e-3);
    assert_false(stage(&bench, "pentode")->is_output);
    assert_relative(stage(&bench, "pentode")->phases[PHASE_DESIGNED].solution.anode_a, 2e-3, 1e-3);
    assert_true(stage(&bench, "output")->is_output);
    /* 49.5 + 33.8 mA through 150 ohm is 12.5 V, the row's bias */
    assert_relative(stage(&bench, "output")->phases[PHASE_DESIGNED].solution.return_v, -12.5, 2e-3);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_VALVE_UNKNOWN), 0);
    bench_release(&bench);
}

static void test_more_than_eight_on_one_resistor(void **state)
{
    (void)state;
    char text[8192];
    struct bench bench;
    int length = snprintf(text, sizeof text,
                          HEAD "resistors:\n  R1: {marked: 10 ohm 5 W, done: kept}\nstages:\n");
    for (int i = 0; i < 10; i++)
        length += snprintf(text + length, sizeof text - (size_t)length,
                           "  s%d:\n    valve: V%d 6V6GT\n    supply: 250 V\n    cathode: R1\n", i,
                           i + 1);
    bench_assess(&bench, text);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_STAGES_TOO_MANY), 1);
    assert_true(stage(&bench, "s9")->phases[PHASE_DESIGNED].judged);
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_designed_found_left),
        cmocka_unit_test(test_contact_bias),
        cmocka_unit_test(test_valves_by_name),
        cmocka_unit_test(test_grid_current_is_what_leakage_leaves),
        cmocka_unit_test(test_anchor_on_a_lifted_cathode_voltage),
        cmocka_unit_test(test_anchor_of_two_on_one_resistor),
        cmocka_unit_test(test_the_stage_that_bears_least),
        cmocka_unit_test(test_measured_resistors_and_joint_leaks),
        cmocka_unit_test(test_stages_that_one_capacitor_bypasses),
        cmocka_unit_test(test_rows_given_for_unknown_types),
        cmocka_unit_test(test_more_than_eight_on_one_resistor),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
