/* Resistors, windings, valves, replacements, date codes and stages as a job tells them. */
#include "assess/reconcile.h"

#include "bench.h"

static void resistors(void **state)
{
    (void)state;
    struct bench bench;
    /* methods of the trade: RMA colours with silver, 10 %; 20 % without a mark */
    bench_assess(&bench, HEAD
                 "stages:\n  output:\n    valve: V4 6V6GT\n    row: A1-250\n    supply: 262.5 V\n"
                 "    cathode: R1\n    grid_leak: R2\n"
                 "resistors:\n"
                 "  R1: {marked: red violet brown silver, measured: 400 ohm, volts: 20 V}\n"
                 "  R2: {marked: 0.5 meg, measured: 700k}\n"
                 "  R3: {marked: yellow violet orange gold, measured: 49k}\n"
                 "  R4: {marked: 47k 5 %, measured: open}\n"
                 "  R5: {marked: 100k}\n"
                 "  R6: {marked: white pink red gold, measured: 10k}\n");
    const struct resistor_findings *found = bench.findings->bench.resistors;
    assert_close(bench.job->resistors[0].marked.value.value, 270, 1e-9);
    assert_close(found[0].tolerance.value, 48.15, 0.01);
    assert_int_equal(found[0].tolerance.outcome, OUTCOME_FAIL);
    assert_string_equal(found[0].stage, "output");
    assert_true(found[0].effect_percent < -20); /* more resistance, less current */
    assert_false(found[0].harmless);
    assert_close(found[0].dissipation.value, 1.0, 1e-9);        /* 20 V across 400 ohm */
    assert_int_equal(found[1].tolerance.outcome, OUTCOME_FAIL); /* 40 % of 20 */
    assert_true(found[1].harmless); /* without a leak the grid leak carries nothing */
    assert_int_equal(found[1].series, E_SERIES_COUNT); /* 0.5 meg is older than the series */
    assert_int_equal(found[2].tolerance.outcome, OUTCOME_CONDITIONAL_PASS); /* 4.3 % of 5, +-3 % */
    assert_int_equal(found[2].series, E_SERIES_3);
    assert_int_equal(found[3].tolerance.outcome, OUTCOME_FAIL);
    assert_int_equal(found[4].tolerance.outcome, OUTCOME_NOT_JUDGED);
    assert_string_equal(found[4].tolerance.missing, "measured");
    assert_int_equal(found[5].tolerance.outcome, OUTCOME_NOT_JUDGED);
    assert_string_equal(found[5].tolerance.missing, "marked");
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_COLOURS_UNKNOWN), 1);
    bench_release(&bench);
}

static void windings_and_valves(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(
        &bench, HEAD
        "windings:\n"
        "  T1: {marked: 100 ohm, measured: 119.65 ohm, temperature: 70 C, insulation: over 100 M}\n"
        "  T2: {marked: 100 ohm, measured: 119.65 ohm, insulation: 0.4 M}\n"
        "valves:\n  V1: {type: 6V6GT, tested: 78 % by bench tester}\n"
        "  V2: {type: 6V6GT, tested: 24 mA of 32 mA}\n"
        "  V3: {type: 6V6GT, tested: 55 %}\n  V4: {type: 6V6GT, tested: 24 mA}\n"
        "  V5: {type: 6V6GT, tested: no emission}\n");
    const struct winding_findings *windings = bench.findings->bench.windings;
    assert_close(windings[0].resistance.value, 0, 0.01); /* copper, 0.393 % per kelvin */
    assert_int_equal(windings[0].resistance.outcome, OUTCOME_PASS);
    assert_int_equal(windings[0].insulation.outcome, OUTCOME_PASS);
    assert_int_equal(windings[1].resistance.outcome, OUTCOME_FAIL);
    assert_int_equal(windings[1].insulation.outcome, OUTCOME_FAIL); /* 1 M (second-hand) */
    const struct valve_findings *valves = bench.findings->bench.valves;
    assert_close(valves[0].share.value, 78, 0);
    assert_string_equal(valves[0].tester, "bench tester");
    assert_close(valves[1].share.value, 75, 1e-9);
    assert_int_equal(valves[2].share.outcome, OUTCOME_FAIL);
    assert_int_equal(valves[3].share.why, WHY_MISSING_FACT); /* of how many? */
    assert_int_equal(valves[4].share.why, WHY_NO_FIGURE);
    bench_release(&bench);
}

static const struct replacement_findings *replacement_of(const struct bench *bench, const char *ref)
{
    for (size_t i = 0; i < bench->findings->bench.replacement_count; i++)
        if (strcmp(bench->findings->bench.replacements[i].ref, ref) == 0)
            return &bench->findings->bench.replacements[i];
    fail_msg("no replacement %s", ref);
    return NULL;
}

static void replacements(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(
        &bench,
        "job: T-1\nset:\n  supply: transformer\n  mains: 230 V\n  frequency: 50 Hz\n"
        "  ht_secondary: 275 V\nreceived: 2031-02-03\ncapacitors:\n"
        "  C1:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: reservoir\n"
        "    current: 60 mA\n    service: 290 V\n    done: replaced\n    fitted: 22 uF 400 V\n"
        "  C2:\n    type: paper\n    marked: 0.01 uF 1000 V\n    place: across mains\n"
        "    done: replaced\n    fitted: polypropylene 0.01 uF 630 V\n"
        "  C3:\n    type: paper\n    marked: 0.05 uF 350 V\n    place: decoupling\n    feed: 10k\n"
        "    current: 5 mA\n    service: 250 V\n    case: 12 mm x 38 mm\n    done: restuffed\n"
        "    fitted: polypropylene 0.047 uF 630 V 10 mm x 26 mm\n"
        "  C4:\n    type: paper\n    marked: 0.05 uF 350 V\n    place: decoupling\n    feed: 10k\n"
        "    current: 5 mA\n    service: 250 V\n    case: 12 mm x 38 mm\n    done: restuffed\n"
        "    fitted: polypropylene 0.1 uF 160 V 14 mm x 26 mm\n"
        "resistors:\n  R1: {marked: 18k 1 W, done: replaced, fitted: 18k 0.5 W}\n");
    /* 275 V * sqrt(2) * 1.1 = 428 V at switch-on */
    const struct replacement_findings *c1 = replacement_of(&bench, "C1");
    assert_int_equal(c1->checks[REPLACEMENT_RATING].outcome, OUTCOME_PASS);
    assert_close(c1->checks[REPLACEMENT_NO_LOAD].low, 427.7, 0.1);
    assert_int_equal(c1->checks[REPLACEMENT_NO_LOAD].outcome, OUTCOME_FAIL);
    const struct replacement_findings *c2 = replacement_of(&bench, "C2");
    assert_int_equal(c2->checks[REPLACEMENT_CLASS].outcome, OUTCOME_FAIL);
    assert_int_equal(replacement_of(&bench, "C3")->outcome, OUTCOME_PASS);
    assert_true(replacement_of(&bench, "C3")->checked[REPLACEMENT_SHELL]);
    const struct replacement_findings *c4 = replacement_of(&bench, "C4");
    assert_int_equal(c4->checks[REPLACEMENT_VALUE].outcome, OUTCOME_FAIL);
    assert_int_equal(c4->checks[REPLACEMENT_RATING].outcome, OUTCOME_FAIL);
    assert_close(c4->checks[REPLACEMENT_SHELL].value, 2e-3, 1e-9);
    assert_int_equal(c4->checks[REPLACEMENT_SHELL].outcome, OUTCOME_FAIL);
    const struct replacement_findings *r1 = replacement_of(&bench, "R1");
    assert_int_equal(r1->checks[REPLACEMENT_WATTS].outcome, OUTCOME_FAIL);
    /* no load, class (which brings the a.c. rating), working volts, watts */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_REPLACEMENT_UNFIT), 4);
    bench_release(&bench);
}

static void dates(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, "job: T-1\nset:\n  year: 1951\nreceived: 2031-02-03\ncapacitors:\n"
                         "  C1: {type: paper, marked: 0.1 uF, date_code: FEB 51}\n"
                         "  C2: {type: paper, marked: 0.1 uF, date_code: WH}\n"
                         "  C3: {type: paper, marked: 0.1 uF, date_code: 235014}\n"
                         "  C4: {type: paper, marked: 0.1 uF, date_code: XE, was: earlier repair}\n"
                         "  C5: {type: paper, marked: 0.1 uF, date_code: lot 9}\n"
                         "  C6: {type: paper, marked: 0.1 uF, date_code: NOV 50}\n");
    const struct date_findings *dates = bench.findings->bench.dates;
    assert_int_equal(bench.findings->bench.date_count, 6);
    assert_close(dates[0].years_off, 0, 0);
    assert_true(dates[1].refutes); /* August 1965 */
    assert_false(dates[2].refutes);
    assert_int_equal(dates[2].code.readings[dates[2].nearest].year, 1950);
    assert_true(dates[3].refutes);
    assert_false(dates[4].known);
    assert_close(dates[5].years_off, -2.0 / 12, 1e-9);                   /* normal stock */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_LATER_THAN_SET), 1); /* C2 alone */
    bench_release(&bench);
}

#define OUTPUT                                                                                     \
    "instruments:\n  leakage:\n    accuracy: 0.1 % + 0.0001 uA\n    resolution: 0.0001 uA\n"       \
    "  volts:\n    accuracy: 0.1 % + 0.01 V\n    input: 10 meg\n"                                  \
    "stages:\n  output:\n    valve: V4 6V6GT\n    row: A1-250\n    supply: 262.5 V\n"              \
    "    cathode: 253 ohm\n    grid_leak: 470k\n    measured:\n      found: "

/* 6V6GT at 250/250/-12.5 with 253 ohm: 12.5 V at the cathode, 49.5 mA (RCA RC-19). */
static void stages_beside_the_set(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, HEAD OUTPUT "grid 0.0 V, cathode 12.6 V\n");
    const struct reconciled_findings *found = &bench.findings->bench.reconciled[0];
    const struct reconciled_phase *phase = &found->phases[PHASE_FOUND];
    assert_true(phase->compared);
    assert_close(phase->nodes[NODE_CATHODE].low_v, 12.5, 0.05);
    assert_close(phase->nodes[NODE_CATHODE].unexplained_v, 0, 0);
    assert_close(phase->measured_cathode_a, 12.6 / 253, 1e-9);
    assert_true(isnan(phase->grid_current_a));
    assert_close(found->law_bound, 0.05, 0);
    bench_release(&bench);

    /* 2 V on the grid that no part explains: 2 V through 470 k parallel 10 M is 4.46 uA */
    bench_assess(&bench, HEAD OUTPUT "grid 2.0 V, cathode 14 V\n");
    phase = &bench.findings->bench.reconciled[0].phases[PHASE_FOUND];
    assert_close(phase->grid_current_a, 2.0 * (1 / 470e3 + 1 / 10e6), 1e-9);
    assert_true(phase->grid_current_error_a > 0 && phase->grid_current_error_a < 1e-7);
    bench_release(&bench);

    /* with the parts lifted the cathode voltage is the valve's own: half the current, scaled */
    bench_assess(&bench, HEAD OUTPUT "cathode 9.0 V, lifted\n");
    found = &bench.findings->bench.reconciled[0];
    assert_true(found->anchored);
    assert_true(found->anchor_scale < 1);
    assert_close(found->valve_bound, 0, 0);
    assert_close(found->phases[PHASE_FOUND].nodes[NODE_CATHODE].low_v, 9.0, 0.01);
    bench_release(&bench);
}

/* The bounds as the manual states them. */
static void bounds_of_the_law(void **state)
{
    (void)state;
    assert_close(reconcile_law_bound(true, 1, false), 0.05, 0);
    assert_close(reconcile_law_bound(true, 1.5, false), 0.08, 0);
    assert_true(isnan(reconcile_law_bound(true, 2.1, false)));
    assert_close(reconcile_law_bound(false, 0.2, false), 0.10, 0);
    assert_close(reconcile_law_bound(false, 0.5, false), 0.20, 0);
    assert_close(reconcile_law_bound(false, 0.9, false), 0.45, 0);
    assert_close(reconcile_law_bound(true, 0.1, true), 0.30, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(resistors),
        cmocka_unit_test(windings_and_valves),
        cmocka_unit_test(replacements),
        cmocka_unit_test(dates),
        cmocka_unit_test(stages_beside_the_set),
        cmocka_unit_test(bounds_of_the_law),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
