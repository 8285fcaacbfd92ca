/* Two visits of one set. */
#include "assess/visit.h"

#include "kit.h"

#include <string.h>

static const struct job *read_job(const char *text, const char *path, struct arena *arena)
{
    struct source *source = arena_get(arena, sizeof *source);
    *source = (struct source){path, text, strlen(text)};
    struct diagnostics diagnostics = diagnostics_in(arena);
    const struct job *job = job_read(source, arena, &diagnostics);
    for (size_t i = 0; i < diagnostics.count; i++)
        if (diagnostics.items[i].severity == SEVERITY_ERROR)
            print_error("%s: %s\n", path, diagnostics.items[i].text);
    assert_int_equal(diagnostics.errors, 0);
    return job;
}

#define HEAD(job, received, returned)                                                              \
    "job: " job "\nset:\n  maker: M\n  model: X\n  supply: transformer\n  mains: 230 V\n"          \
    "  frequency: 50 Hz\nreceived: " received "\nreturned: " returned "\n"                         \
    "conditions:\n  bench: 19 C\n"                                                                 \
    "instruments:\n  leakage:\n    accuracy: 2 % + 0.02 uA\n    resolution: 0.01 "                 \
    "uA\ncapacitors:\n"

static const char earlier_text[] =
    HEAD("2031-001", "2031-01-01",
         "2031-02-01") "  C1:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n"
                       "      - 100 V 60 s 1.0 uA, 5 min 0.5 uA\n    measured: 0.100 uF\n    done: "
                       "kept\n"
                       "  C2:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n      - "
                       "100 V 5 min 9 uA\n"
                       "      - 100 V 5 min 0.02 uA left\n    done: restuffed\n    fitted: "
                       "polyester 0.1 uF 400 V\n"
                       "  C3:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n      - "
                       "50 V 60 s 1 uA\n"
                       "    done: kept\n"
                       "  C4:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n"
                       "      - 100 V 60 s 1 uA hot 45 C\n      - 100 V 60 s 2 uA in circuit\n    "
                       "done: kept\n"
                       "  C5:\n    type: mica\n    marked: 100 pF 400 V\n    readings:\n"
                       "      - 100 V 60 s over 10000 M\n    done: kept\n"
                       "resistors:\n  R1: {marked: 100k, measured: 100k, done: kept}\n"
                       "  R2: {marked: 100k, measured: 150k, done: replaced, fitted: 100k}\n"
                       "windings:\n  T1: {marked: 300 ohm, measured: 310 ohm, done: kept}\n";

static const char later_text[] = HEAD(
    "2036-001", "2036-02-01",
    "2036-03-01") "  c1:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n"
                  "      - 101 V 60 s 3.0 uA, 5 min 1.5 uA, 10 min 1.4 uA\n    measured: 0.105 uF\n"
                  "    done: kept\n"
                  "  C2:\n    type: polyester\n    marked: 0.1 uF 400 V\n    was: earlier repair\n"
                  "    readings:\n      - 100 V 5 min 0.04 uA\n    done: kept\n"
                  "  C3:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n      - 100 V "
                  "60 s 1 uA\n"
                  "    done: kept\n"
                  "  C4:\n    type: paper\n    marked: 0.1 uF 400 V\n    readings:\n      - 100 V "
                  "60 s 1 uA\n"
                  "    done: kept\n"
                  "  C5:\n    type: mica\n    marked: 100 pF 400 V\n    readings:\n"
                  "      - 100 V 60 s under 0.01 uA\n    done: kept\n"
                  "  C6:\n    type: mica\n    marked: 100 pF 400 V\n    readings:\n"
                  "      - 100 V 60 s under 0.01 uA\n    done: kept\n"
                  "resistors:\n  R1: {marked: 100k, measured: 110k, done: kept}\n"
                  "  R2: {marked: 100k, measured: 101k, done: kept}\n"
                  "windings:\n  T1: {marked: 300 ohm, measured: 311 ohm, done: kept}\n";

static const struct visit_changes *compare(struct arena *arena)
{
    const struct job *earlier = read_job(earlier_text, "2031-001.yaml", arena);
    struct shop *shop = arena_get(arena, sizeof *shop);
    *shop = shop_default();
    struct diagnostics diagnostics = diagnostics_in(arena);
    struct findings *findings =
        assess_job(read_job(later_text, "2036-001.yaml", arena), shop, "test", arena, &diagnostics);
    assert_null(findings->since);
    visits_compare(earlier, findings, arena);
    assert_non_null(findings->since);
    return findings->since;
}

static const struct visit_change *change_of(const struct visit_changes *since, const char *ref)
{
    for (size_t i = 0; i < since->count; i++)
        if (strcmp(since->items[i].ref, ref) == 0)
            return &since->items[i];
    return NULL;
}

static void same_volts_nearest_soak(void **state)
{
    (void)state;
    struct arena arena = {0};
    const struct visit_changes *since = compare(&arena);
    const struct visit_change *change = change_of(since, "c1"); /* C1 but for case */
    assert_non_null(change);
    assert_close(change->then_a, 0.5e-6, 1e-12); /* 5 min with 5 min, not with 10 min */
    assert_close(change->now_a, 1.5e-6, 1e-12);
    assert_close(change->then_value, 0.1e-6, 1e-12);
    assert_close(change->now_value, 0.105e-6, 1e-12);
    assert_int_equal(change->done_then, DONE_KEPT);
    assert_close(since->years, 5.0, 0.01);
    assert_string_equal(since->earlier, "2031-001");
    arena_release(&arena);
}

static void a_changed_part_is_compared_as_left(void **state)
{
    (void)state;
    struct arena arena = {0};
    const struct visit_changes *since = compare(&arena);
    const struct visit_change *change = change_of(since, "C2");
    assert_non_null(change);
    assert_close(change->then_a, 0.02e-6, 1e-12);
    assert_true(isnan(change->then_value));
    assert_null(change_of(since, "R2")); /* another resistor since */
    arena_release(&arena);
}

static void unlike_readings_are_not_compared(void **state)
{
    (void)state;
    struct arena arena = {0};
    const struct visit_changes *since = compare(&arena);
    assert_null(change_of(since, "C3")); /* 50 V and 100 V */
    assert_null(change_of(since, "C4")); /* hot, and in circuit */
    assert_null(change_of(since, "C6")); /* not there then */
    const struct visit_change *change = change_of(since, "C5");
    assert_int_equal(change->then_bound, BOUND_UNDER); /* over megohms is under microamperes */
    assert_int_equal(change->now_bound, BOUND_UNDER);
    assert_close(change->then_a, 100 / 10000e6, 1e-15);
    arena_release(&arena);
}

static void resistors_and_windings(void **state)
{
    (void)state;
    struct arena arena = {0};
    const struct visit_changes *since = compare(&arena);
    const struct visit_change *change = change_of(since, "R1");
    assert_int_equal(change->kind, VISIT_RESISTOR);
    assert_close(change->now_value / change->then_value, 1.1, 1e-9);
    assert_close(change_of(since, "T1")->now_value, 311, 1e-9);
    assert_true(visit_was_kept(DONE_REFORMED) && !visit_was_kept(DONE_RESTUFFED) &&
                !visit_was_kept(DONE_OPEN));
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(same_volts_nearest_soak),
        cmocka_unit_test(a_changed_part_is_compared_as_left),
        cmocka_unit_test(unlike_readings_are_not_compared),
        cmocka_unit_test(resistors_and_windings),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
