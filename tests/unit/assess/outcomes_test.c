/* Which reading decides and what it may decide: time, volts, temperature, bounds, reforming, joint
   judgement, advice, the bench sheet. The part is a coupling or a bypass with a limit by hand. */
#include "bench.h"

static void test_time(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 5 s 80 uA\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 5 s 20 uA\n"
        BYPASS("C3", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        BYPASS("C4", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 80 uA\n"
        BYPASS("C5", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 4 uA, 5 min 8 uA\n"
        BYPASS("C6", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA, 5 min 2 uA\n"
        BYPASS("C7", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        "      - 100 V 5 s 70 uA hot 20 C\n");
    /* clang-format on */
    bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_TOO_EARLY);
    bench_expect(&bench, "C2", OUTCOME_PASS, WHY_NONE); /* an early reading may pass */
    bench_expect(&bench, "C3", OUTCOME_FAIL, WHY_NONE);
    bench_expect(&bench, "C4", OUTCOME_NOT_JUDGED, WHY_TOO_EARLY); /* no time said */
    bench_expect(&bench, "C5", OUTCOME_FAIL, WHY_RISING); /* 8 uA is over a tenth of 50 uA */
    bench_expect(&bench, "C6", OUTCOME_CONDITIONAL_PASS, WHY_RISING);
    assert_int_equal(bench_part(&bench, "C6")->trend, TREND_RISING);
    bench_expect(&bench, "C7", OUTCOME_FAIL,
                 WHY_NONE); /* the hot one came too early: the soaked one */
    assert_int_equal(bench_part(&bench, "C7")->deciding, 0);
    assert_close(bench_part(&bench, "C3")->readings[0].t_min_s, 15, 1e-9);
    bench_release(&bench);
}

static void test_waiting_for_absorption(void **state)
{
    (void)state;
    struct bench bench;
    /* I = 20 uA + 60 uA*(t/60 s)^-0.8: 30 s 124.47, 60 s 80, 120 s 54.46... against 50 uA: the
       curve meets it at 60*(60/30)^(1/0.8) = 142.7 s, so a last reading at 120 s waits; ratio 12.
     */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 10 s 271.582 uA, 15 s 201.886 uA, 30 s 124.466 uA, 60 s 80.000 uA, 90 s 63.379 uA, 120 s 54.461 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_int_equal(part->absorption.status, ABSORPTION_RESOLVED);
    assert_relative(part->absorption.wait_until_s, 60 * pow(2, 1 / 0.8), 0.02);
    bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_WAIT);
    assert_int_equal(part->advice, ADVICE_MEASURE_AGAIN);
    bench_release(&bench);
}

static void test_volts(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 25 V 60 s 2 uA\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 25 V 60 s 20 uA\n"
        BYPASS("C3", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 200 V 60 s 80 uA\n"
        BYPASS("C4", "paper", "0.1 uF 150 V")
        "    readings:\n"
        "      - 200 V 60 s 1 uA\n"
        BYPASS("C5", "paper", "0.1 uF 50 V")
        "    readings:\n"
        "      - 50 V 60 s 1 uA\n"
        BYPASS("C6", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 50 V 60 s 1 uA\n"
        "      - 100 V 60 s 4 uA\n");
    /* clang-format on */
    bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_VOLTS_TOO_LOW);
    assert_true(bench_part(&bench, "C1")->readings[0].service_lower_bound);
    bench_expect(&bench, "C2", OUTCOME_FAIL, WHY_NONE); /* 80 uA at least */
    bench_expect(&bench, "C3", OUTCOME_PASS, WHY_NONE); /* 40 uA at 100 V */
    assert_relative(bench_part(&bench, "C3")->test_limit_a, 100e-6, 1e-4);
    assert_true(bench_part(&bench, "C4")->tested_above_marked);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_TESTED_ABOVE_MARKED), 1);
    assert_true(bench_part(&bench, "C5")->service_above_marked);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_SERVICE_ABOVE_MARKED), 1);
    /* four times the current at twice the volts */
    assert_close(bench_part(&bench, "C6")->exponent, 2, 1e-9);
    assert_true(bench_part(&bench, "C6")->exponent_warning);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_EXPONENT_HIGH), 1);
    bench_release(&bench);
}

static void test_temperature_and_ageing(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        "job: T-1\n"
        "set:\n"
        "  maker: P\n"
        "  supply: transformer\n"
        "  mains: 230 V\n"
        "received: 2031-02-03\n"
        "conditions:\n"
        "  bench: 20 C\n"
        "  working: 45 C\n"
        METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        "      - 100 V 60 s 5 uA hot 45 C\n"
        BYPASS("C3", "waxed paper", "0.1 uF 400 V")
        BYPASS("C4", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 7.5 uA\n"
        BYPASS("C5", "polyester", "0.1 uF 400 V")
        "    near_heat: yes\n"
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    /* 2^(25/10) = 5.657 */
    assert_relative(part->leakage_warm_a, 5.657e-6, 1e-3);
    assert_relative(part->bench_limit_a, 50e-6 / 5.657, 1e-3);
    part = bench_part(&bench, "C2");
    assert_int_equal(part->deciding, 1);
    assert_close(part->leakage_warm_a, 5e-6, 1e-12);
    assert_true(isnan(part->theta_k));
    /* waxed paper keeps half */
    assert_relative(bench_part(&bench, "C3")->limit_a, 25e-6, 1e-4);
    /* 7.5*5.657 = 42.4 uA passes; with 5 K more, 60 uA, it does not */
    bench_expect(&bench, "C4", OUTCOME_PASS, WHY_NONE);
    assert_true(bench_part(&bench, "C4")->turns_on_temperature);
    assert_false(bench_part(&bench, "C1")->turns_on_temperature);
    /* 55 C near heat: 2^(35/15) */
    assert_relative(bench_part(&bench, "C5")->leakage_warm_a, 1e-6 * exp2(35.0 / 15), 1e-6);
    bench_release(&bench);
}

static void test_instrument_and_bounds(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n"
        "  leakage:\n"
        "    accuracy: 2 % + 50 uA\n"
        "    resolution: 1 uA\n"
        "  fine:\n"
        "    accuracy: 1 %\n"
        "    resolution: 0.01 uA\n"
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s over 2000 M by fine\n"
        BYPASS("C3", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s under 200 uA by fine\n"
        BYPASS("C4", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s over 200 uA by fine\n"
        BYPASS("C5", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 49.9 uA by fine\n"
        BYPASS("C6", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 50.1 uA by fine\n"
        BYPASS("C7", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA by fine in circuit\n");
    /* clang-format on */
    /* 50 uA/sqrt(3)*2 is more than half of 50 uA */
    bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_INSTRUMENT);
    /* At higher volts it can: 0.5*L = 2*sqrt(((2 %*L + 50 uA)/sqrt(3))^2 + (1 uA)^2/12) at 121 uA,
       that is 50 uA at 100 V brought to 242 V, set 250 V. */
    assert_false(bench_part(&bench, "C1")->sheet_not_with_this_meter);
    assert_close(bench_part(&bench, "C1")->sheet_voltage_v, 250, 1e-9);
    bench_expect(&bench, "C2", OUTCOME_PASS, WHY_NONE);
    assert_int_equal(bench_part(&bench, "C2")->test_bound, BOUND_UNDER);
    bench_expect(&bench, "C3", OUTCOME_NOT_JUDGED, WHY_BOUND);
    bench_expect(&bench, "C4", OUTCOME_FAIL, WHY_NONE);
    bench_expect(&bench, "C5", OUTCOME_CONDITIONAL_PASS, WHY_WITHIN_UNCERTAINTY);
    bench_expect(&bench, "C6", OUTCOME_CONDITIONAL_FAIL, WHY_WITHIN_UNCERTAINTY);
    bench_expect(&bench, "C7", OUTCOME_NOT_JUDGED, WHY_NOT_LIFTED);
    bench_release(&bench);
}

#define CAN(ref, marked)                                                                           \
    "  " ref ":\n    type: electrolytic\n    marked: " marked                                      \
    "\n    place: reservoir\n    current: 60 mA\n    service: 300 V\n"

static void test_electrolytics(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "cans:\n"
        "  CAN1:\n"
        "    holds: C7 C8\n"
        "    seen: above\n"
        "    done: reformed\n"
        "capacitors:\n"
        CAN("C1", "20 uF 450 V")
        "    readings:\n"
        "      - 300 V 60 s 4 mA, 5 min 2 mA\n"
        CAN("C2", "20 uF 450 V")
        "    readings:\n"
        "      - 300 V 60 s 2 mA, 5 min 2 mA\n"
        CAN("C3", "20 uF 450 V")
        "    readings:\n"
        "      - 300 V 60 s 2 mA\n"
        CAN("C4", "20 uF 450 V")
        "    readings:\n"
        "      - 300 V 60 s 0.1 mA, 5 min 0.1 mA\n"
        CAN("C5", "20 uF 450 V")
        "    rule: 0.01 CV or 3 uA\n"
        "    measured: 15.0 uF\n"
        CAN("C6", "20 uF 475 V")
        "    rule: nobody's\n"
        CAN("C7", "16 uF 450 V")
        CAN("C8", "16 uF 450 V")
        "reforms:\n"
        "  - capacitor: C7\n"
        "    date: 2031-02-10\n"
        "    limiter: 47k\n"
        "    log:\n"
        "      - 50 V 30 s 170 uA, 5 min 21 uA\n"
        "    rest: 12 h\n"
        "    after_rest: 300 V 5 min 0.4 mA\n"
        "  - capacitor: C8\n"
        "    date: 2031-02-10\n"
        "    limiter: 47k\n"
        "    log:\n"
        "      - 50 V 30 s 170 uA, 5 min 21 uA\n"
        "    rest: 12 h\n"
        "    after_rest: 300 V 5 min 0.6 mA\n");
    /* clang-format on */
    /* heat of a tubular: 0.05 W at 300 V is 167 uA, less than 2 % of 60 mA and than JAN-C-62 (1.1
     * mA) */
    assert_relative(bench_part(&bench, "C4")->limit_a, 0.05 / 300, 1e-4);
    bench_expect(&bench, "C1", OUTCOME_NOT_JUDGED, WHY_STILL_FALLING);
    assert_int_equal(bench_part(&bench, "C1")->advice, ADVICE_REFORM);
    bench_expect(&bench, "C2", OUTCOME_FAIL, WHY_NONE);
    bench_expect(&bench, "C3", OUTCOME_NOT_JUDGED,
                 WHY_STILL_FALLING); /* one reading shows no level */
    bench_expect(&bench, "C4", OUTCOME_PASS, WHY_NONE);
    const struct criterion *rule =
        bench_criterion(bench_part(&bench, "C4"), CRITERION_LEAKAGE_RULE, false);
    assert_non_null(rule);
    /* JAN-C-62 (amateur-radio list quoting it): 20 uF 450 V, 0.04*20 + 0.3 = 1.1 mA */
    assert_relative(rule->limit, 1.1e-3, 1e-9);
    assert_int_equal(rule->source, SOURCE_JAN_C_62);
    assert_true(bench_part(&bench, "C4")->other_rule_count >= 2);
    /* 15 uF of 20 uF is -25 %: below -20 % by more than U = 2*(3 %*15 + 0.1)/20/sqrt(3) = 3.2 %,
       accuracy not named: 3 % and one digit */
    assert_int_equal(bench_part(&bench, "C5")->outcome, OUTCOME_FAIL);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_RULE_UNKNOWN), 1);
    /* after the rest of a reform one reading decides: 0.25 W for the can at 300 V is 833 uA singly;
       together 300 V*(0.4 + 0.6) mA = 0.3 W is too much, each brings over a quarter of it */
    const struct capacitor_findings *part = bench_part(&bench, "C7");
    assert_int_equal(part->state, STATE_REFORMED);
    assert_relative(bench_criterion(part, CRITERION_HEAT, false)->value, 0.12, 1e-6);
    assert_relative(bench_criterion(part, CRITERION_HEAT, true)->value, 0.30, 1e-6);
    assert_int_equal(part->outcome_found, OUTCOME_NOT_JUDGED);
    bench_expect(&bench, "C7", OUTCOME_CONDITIONAL_FAIL, WHY_JOINT);
    bench_expect(&bench, "C8", OUTCOME_CONDITIONAL_FAIL, WHY_JOINT);
    /* one can, two sections, kept because reformed */
    assert_int_equal(bench.findings->originality.total.of, 7);
    assert_int_equal(bench.findings->originality.seen[SEEN_ABOVE].kept, 1);
    bench_release(&bench);
}

static void test_warnings_of_electrolytics(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        "job: T-1\n"
        "set:\n"
        "  maker: P\n"
        "  supply: transformer\n"
        "  mains: 230 V\n"
        "  ht_secondary: 350 V\n"
        "received: 2031-02-03\n"
        "capacitors:\n"
        CAN("C1", "8 uF 475 V")
        CAN("C2", "8 uF 600 V"));
    /* clang-format on */
    /* 1.414*1.1*350 = 544 V */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_NO_LOAD_ABOVE_MARKED), 1);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_RULE_EDGE), 2);
    bench_release(&bench);
}

static void test_what_was_done(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        "    done: kept\n"
        BYPASS("C2", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        "    done: kept\n"
        "    reason: a museum set\n"
        BYPASS("C3", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 1 uA\n"
        "    done: replaced\n"
        "    fitted: polypropylene 0.1 uF 630 V\n"
        BYPASS("C4", "paper", "0.1 uF 400 V")
        "    done: replaced\n"
        "    fitted: polypropylene 0.1 uF 630 V\n"
        "    age: period\n"
        BYPASS("C5", "paper", "0.1 uF 400 V")
        "    done: kept\n"
        BYPASS("C6", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        "      - 100 V 60 s 0.01 uA left\n"
        "    done: restuffed\n"
        "    fitted: polypropylene 0.1 uF 630 V\n"
        BYPASS("C7", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 80 uA\n"
        "      - 100 V 60 s 1 uA left\n"
        "    done: kept\n");
    /* clang-format on */
    assert_true(bench_part(&bench, "C1")->against_advice);
    assert_true(bench_part(&bench, "C2")->against_advice);
    assert_true(bench_part(&bench, "C3")->against_advice);               /* passed, yet replaced */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_AGAINST_ADVICE), 2); /* C2 gives its reason */
    assert_true(bench_part(&bench, "C4")->replaced_unmeasured);
    assert_int_equal(bench_part(&bench, "C4")->state, STATE_REPLACED_PERIOD);
    assert_int_equal(bench_part(&bench, "C5")->state, STATE_KEPT_UNTESTED);
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_KEPT_WITHOUT_READING), 1);
    /* what was read on the new part says nothing of the original */
    bench_expect(&bench, "C6", OUTCOME_FAIL, WHY_NONE);
    assert_int_equal(bench_part(&bench, "C6")->deciding, 0);
    /* ... but on a part that stayed it decides */
    bench_expect(&bench, "C7", OUTCOME_PASS, WHY_NONE);
    assert_int_equal(bench_part(&bench, "C7")->outcome_found, OUTCOME_FAIL);
    assert_close(bench_part(&bench, "C7")->found_leakage_a, 80e-6, 1e-12);
    assert_relative(bench_part(&bench, "C7")->found_limit_a, 50e-6, 1e-4);
    assert_true(bench.findings->in_progress);
    bench_release(&bench);
}

static void test_bench_sheet(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n"
        "  leakage:\n"
        "    accuracy: 1 % + 0.01 uA\n"
        "    resolution: 0.01 uA\n"
        "    series: 10k\n"
        "    volts: 25 V, 50 V, 100 V, 250 V, 500 V\n"
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        BYPASS("C2", "paper", "0.1 uF 75 V")
        BYPASS("C3", "paper", "0.1 uF 10 V")
        "  C4:\n"
        "    type: paper\n"
        "    marked: 0.1 uF 400 V\n"
        "    place: other\n"
        "    feed: 10k\n"
        "    shift: 0.5 V\n"
        "    service: 160 V\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_close(part->sheet_voltage_v, 100, 1e-9);
    assert_relative(part->sheet_limit_a, 50e-6, 1e-4);
    assert_relative(part->sheet_limit_ohm, 2e6, 1e-4);
    assert_relative(part->sheet_series_max_ohm, 0.05 * 100 / 50e-6, 1e-4);
    assert_close(part->sheet_soak_s, 15, 1e-9);
    assert_false(part->sheet_not_with_this_meter);
    /* never above the marked volts; 50 V proves a fail only, from 25 uA on */
    part = bench_part(&bench, "C2");
    assert_close(part->sheet_voltage_v, 50, 1e-9);
    assert_relative(part->sheet_limit_a, 25e-6, 1e-4);
    assert_true(isnan(bench_part(&bench, "C3")->sheet_voltage_v)); /* nothing that may be set */
    /* 160 V in service: 250 V, where 50 uA*250/160 passes */
    part = bench_part(&bench, "C4");
    assert_close(part->sheet_voltage_v, 250, 1e-9);
    assert_relative(part->sheet_limit_a, 50e-6 * 250 / 160, 1e-4);
    bench_release(&bench);
}

static void test_only_heat_limits(void **state)
{
    (void)state;
    struct bench bench;
    /* 2 uF across 10 ohm of a cathode: no leak up to 1 mS matters; 0.02 W at 10 V is 2 mA, of waxed
       paper half. */
    /* clang-format off */
    bench_assess(&bench,
        HEAD METER
        "capacitors:\n"
        "  C1:\n"
        "    type: waxed paper\n"
        "    marked: 2 uF 50 V\n"
        "    place: other\n"
        "    feed: 10 ohm\n"
        "    shift: 5 V\n"
        "    service: 10 V\n"
        "    readings:\n"
        "      - 10 V 60 s 1.5 mA\n");
    /* clang-format on */
    const struct capacitor_findings *part = bench_part(&bench, "C1");
    assert_true(part->limit_is_heat);
    assert_relative(part->limit_a, 1e-3, 1e-4);
    assert_non_null(bench_criterion(part, CRITERION_HEAT, false));
    assert_int_equal(part->outcome, OUTCOME_FAIL);
    bench_release(&bench);
}

static void test_impossible_reading(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "instruments:\n"
        "  leakage:\n"
        "    series: 100k\n"
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    readings:\n"
        "      - 100 V 60 s 5 mA\n");
    /* clang-format on */
    assert_int_equal(bench_count(&bench, DIAGNOSTIC_READING_IMPOSSIBLE), 1);
    assert_int_equal(bench_part(&bench, "C1")->outcome, OUTCOME_FAIL);
    bench_release(&bench);
}

static void test_copies(void **state)
{
    (void)state;
    struct bench bench;
    /* clang-format off */
    bench_assess(&bench,
        HEAD
        "owner:\n"
        "  name: A. Client\n"
        "private: |\n"
        "  secret\n"
        "capacitors:\n"
        BYPASS("C1", "paper", "0.1 uF 400 V")
        "    price: 12\n");
    /* clang-format on */
    struct findings *sale = findings_for_copy(bench.findings, COPY_SALE, &bench.arena);
    assert_int_equal(sale->copy, COPY_SALE);
    assert_null(sale->job->owner.name.text);
    assert_null(sale->job->private_note.text);
    assert_null(sale->capacitors[0].part->price.text);
    assert_non_null(bench.findings->capacitors[0].part->price.text);
    struct findings *client = findings_for_copy(bench.findings, COPY_CLIENT, &bench.arena);
    assert_non_null(client->job->owner.name.text);
    assert_null(client->job->private_note.text);
    bench_release(&bench);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_time),
        cmocka_unit_test(test_waiting_for_absorption),
        cmocka_unit_test(test_volts),
        cmocka_unit_test(test_temperature_and_ageing),
        cmocka_unit_test(test_instrument_and_bounds),
        cmocka_unit_test(test_electrolytics),
        cmocka_unit_test(test_warnings_of_electrolytics),
        cmocka_unit_test(test_what_was_done),
        cmocka_unit_test(test_bench_sheet),
        cmocka_unit_test(test_only_heat_limits),
        cmocka_unit_test(test_impossible_reading),
        cmocka_unit_test(test_copies),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
