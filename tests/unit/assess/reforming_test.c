/* The plan and the log of a reform. */
#include "assess/reforming.h"

#include "bench.h"

#define CAPACITOR                                                                                  \
    "capacitors:\n  C20:\n    type: electrolytic\n    marked: 20 uF 450 V\n    place: reservoir\n" \
    "    current: 60 mA\n    service: 450 V\n"
/* In a can: 0.5 W. */
#define STEPS METER "cans:\n  CAN1:\n    holds: C20\n" CAPACITOR

/* 450 V and a ceiling of 0.5 W: 450^2/(4*0.5) = 101.25 k; into it at most 450^2/R = 2 W, rated
   twice that (arithmetic on Jacobi's matched load). 5 mA into a short is 90 k at 450 V, the
   practice of a seller of cans (seen). */
static void the_plan(void **state)
{
    (void)state;
    struct bench bench;
    bench_assess(&bench, HEAD STEPS);
    const struct reform_plan *plan = bench.findings->bench.plans[0];
    assert_non_null(plan);
    assert_close(plan->end_v, 450, 0);
    assert_close(plan->limiter_ohm, 101.25e3, 1);
    assert_close(plan->limiter_w, 4, 0);
    assert_close(plan->ceiling_w, 0.5, 0);
    static const double steps[] = {45, 157.5, 270, 382.5, 450};
    for (size_t i = 0; i < REFORM_STEPS; i++)
        assert_close(plan->step_v[i], steps[i], 1e-9);
    assert_close(plan->rest_s, 12 * 3600, 0); /* EIA-815: 12 to 48 h (seen) */
    /* JAN-C-62, 20 uF 450 V: 1.1 mA (seen); the heat of a can, 0.25 W, allows less */
    assert_close(plan->limit_a, 0.25 / 450, 1e-9);
    assert_relative(plan->deciding_ohm, 0.05 * 450 / plan->limit_a, 1e-9);
    assert_close(plan->bleed_s, 10e3 * 40e-6 * log(45), 1e-9);
    assert_close(plan->energy_j, 40e-6 * 450 * 450 / 2, 1e-9);
    bench_release(&bench);
}

/* I_s 300 uA and A*t^-n, A 500 uA at one minute, n 0.7: made by this law, found again. */
static void a_log_made_by_the_law(void **state)
{
    (void)state;
    static const double times[] = {60, 120, 180, 300, 600, 900, 1200, 1800, 2700, 3600};
    struct buffer text = {0};
    buffer_text(&text,
                HEAD STEPS "reforms:\n  - capacitor: C20\n    limiter: 100k\n    volts: "
                           "across the part\n    log:\n      - 45 V 30 s 200 uA, 5 min 20 uA\n"
                           "      - 450 V ");
    for (size_t i = 0; i < sizeof times / sizeof *times; i++)
        buffer_print(&text, "%s%.0f s %.2f uA", i ? ", " : "", times[i],
                     300 + 500 * pow(times[i] / 60, -0.7));
    buffer_text(&text, "\n    rest: 12 h\n    after_rest: 450 V 5 min 310 uA\n");
    struct bench bench;
    bench_assess(&bench, buffer_string(&text));
    const struct reform_findings *found = &bench.findings->bench.reforms[0];
    assert_int_equal(found->step_count, 2);
    assert_int_equal(found->plateau_step, 1);
    assert_close(found->plateau_a, 300e-6, 3e-6);
    assert_true(found->plateau_error_a > 0 && found->plateau_error_a < 30e-6);
    assert_int_equal(found->stop, REFORM_NO_STOP);
    assert_int_equal(found->outcome, OUTCOME_PASS);
    assert_false(found->rebound);
    assert_close(found->rest.high, 0.25 / 450, 1e-9);
    buffer_release(&text);
    bench_release(&bench);
}

struct log_row {
    const char *log; /* what stands behind `limiter: 100k` */
    enum reform_stop stop;
    enum outcome outcome;
    enum reason why;
    bool rebound;
    size_t out_of_order, above_limiter;
};

static void logs(void **state)
{
    (void)state;
    static const struct log_row rows[] = {
        /* set 450 V, 100 k: 4.5 mA at most */
        {"    log: 450 V 30 s 6 mA, 5 min 1 mA\n", REFORM_NO_STOP, OUTCOME_NOT_JUDGED,
         WHY_IMPOSSIBLE, false, 0, 1},
        {"    log:\n      - 450 V 5 min 1 mA, 30 s 2 mA\n", REFORM_NO_STOP, OUTCOME_NOT_JUDGED,
         WHY_OUT_OF_ORDER, false, 1, 0},
        {"    log:\n      - 450 V 5 min 1 mA\n      - 100 V 5 min 10 uA\n", REFORM_NO_STOP,
         OUTCOME_NOT_JUDGED, WHY_OUT_OF_ORDER, false, 1, 0},
        {"    log:\n      - 450 V 30 s 100 uA, 5 min 150 uA, 10 min 210 uA\n", REFORM_RISING,
         OUTCOME_CONDITIONAL_FAIL, WHY_RISING, false, 0, 0},
        /* 450 V less 100 k * 2.2 mA is 230 V: 0.51 W, more than the 0.5 W of a can */
        {"    log:\n      - 450 V 30 s 2.2 mA, 5 min 300 uA\n", REFORM_WATTS, OUTCOME_NOT_JUDGED,
         WHY_NO_READING, false, 0, 0},
        {"    log:\n      - 450 V 5 min 90 uA, 30 min 60 uA\n    rest: 12 h\n    after_rest: 450 V "
         "5 min 3 mA\n",
         REFORM_NO_STOP, OUTCOME_FAIL, WHY_NONE, true, 0, 0},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct buffer text = {0};
        buffer_print(&text, "%s%s", HEAD STEPS "reforms:\n  - capacitor: C20\n    limiter: 100k\n",
                     rows[i].log);
        struct bench bench;
        bench_assess(&bench, buffer_string(&text));
        const struct reform_findings *found = &bench.findings->bench.reforms[0];
        if (found->stop != rows[i].stop || found->outcome != rows[i].outcome ||
            found->why != rows[i].why || found->rebound != rows[i].rebound)
            fail_msg("row %zu: stop %d, outcome %s, why %s, rebound %d", i, found->stop,
                     outcome_text(found->outcome), reason_text(found->why), found->rebound);
        assert_int_equal(bench_count(&bench, DIAGNOSTIC_LOG_OUT_OF_ORDER), rows[i].out_of_order);
        assert_int_equal(bench_count(&bench, DIAGNOSTIC_LOG_ABOVE_LIMITER), rows[i].above_limiter);
        buffer_release(&text);
        bench_release(&bench);
    }
}

/* Set volts less the drop in the limiter (Ohm). */
static void volts_across_the_part(void **state)
{
    (void)state;
    struct reading reading = {.set_volts = {.set = true, .value = 450, .unit = UNIT_VOLTAGE},
                              .value = {.set = true, .value = 1e-3, .unit = UNIT_CURRENT}};
    assert_close(reforming_part_volts(&reading, 100e3, false), 350, 1e-9);
    assert_close(reforming_part_volts(&reading, 100e3, true), 450, 0);
    assert_true(isnan(reforming_part_volts(&reading, NAN, false)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_plan),
        cmocka_unit_test(a_log_made_by_the_law),
        cmocka_unit_test(logs),
        cmocka_unit_test(volts_across_the_part),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
