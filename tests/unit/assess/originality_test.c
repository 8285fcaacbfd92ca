/* Counting what is still original, on the example worked by hand. */
#include "assess/originality.h"
#include "kit.h"

enum { SINGLES = 17, SECTIONS = 2, CAPACITORS = SINGLES + SECTIONS };

/* 17 single capacitors (9 kept, 6 restuffed, 2 replaced), 1 two-section can reformed, 2 resistors
   and 1 winding kept, 3 valves kept: capacitors 10 of 18, headline 13 of 21, shells 6, valves 3 of
   3. */
struct example {
    struct capacitor capacitors[CAPACITORS];
    struct capacitor_findings found[CAPACITORS];
    int holds[SECTIONS];
    struct can can;
    struct resistor resistors[2];
    struct winding winding;
    struct valve valves[3];
    struct control control;
    struct job job;
};

static void set_state(struct example *e, size_t i)
{
    struct part_story story = {e->capacitors[i].was, e->capacitors[i].done, e->capacitors[i].age,
                               e->found[i].deciding >= 0};
    e->found[i].state = state_of_part(&story);
}

static void make_example(struct example *e)
{
    *e = (struct example){0};
    for (size_t i = 0; i < CAPACITORS; i++) {
        e->capacitors[i].can = i < SINGLES ? NOT_LISTED : 0;
        e->capacitors[i].done = i < 9    ? DONE_KEPT
                                : i < 15 ? DONE_RESTUFFED
                                : i < 17 ? DONE_REPLACED
                                         : DONE_REFORMED;
        e->found[i].part = &e->capacitors[i];
        e->found[i].deciding = i < 8 ? 0 : -1; /* the ninth was kept without a reading */
        set_state(e, i);
    }
    e->holds[0] = SINGLES;
    e->holds[1] = SINGLES + 1;
    e->can = (struct can){
        .holds = e->holds, .hold_count = SECTIONS, .seen = SEEN_ABOVE, .done = DONE_REFORMED};
    e->resistors[0].done = e->resistors[1].done = DONE_KEPT;
    e->resistors[0].measured.set = true;
    e->winding.done = DONE_KEPT;
    for (int i = 0; i < 3; i++)
        e->valves[i].done = DONE_KEPT;
    e->job = (struct job){.capacitors = e->capacitors,
                          .capacitor_count = CAPACITORS,
                          .cans = &e->can,
                          .can_count = 1,
                          .resistors = e->resistors,
                          .resistor_count = 2,
                          .windings = &e->winding,
                          .winding_count = 1,
                          .valves = e->valves,
                          .valve_count = 3};
}

static void assert_adds_up(const struct kept_count *count, unsigned open)
{
    assert_int_equal(count->kept, count->tested + count->untested + count->reformed);
    assert_int_equal(count->of,
                     count->kept + count->disconnected + count->restuffed + count->removed + open);
}

static void test_worked_example(void **state)
{
    (void)state;
    struct example e;
    make_example(&e);
    struct originality counts = originality_count(&e.job, e.found);
    assert_int_equal(counts.kinds[0].kept, 10);
    assert_int_equal(counts.kinds[0].of, 18);
    assert_int_equal(counts.total.kept, 13);
    assert_int_equal(counts.total.of, 21);
    assert_int_equal(counts.restuffed, 6);
    assert_int_equal(counts.replaced, 2);
    assert_int_equal(counts.valves.kept, 3);
    assert_int_equal(counts.valves.of, 3);
    assert_int_equal(counts.kinds[0].untested, 1);
    assert_int_equal(counts.total.reformed, 1);
    assert_int_equal(counts.seen[SEEN_ABOVE].kept + counts.seen[SEEN_BELOW].kept +
                         counts.seen[SEEN_HIDDEN].kept,
                     13);
    assert_adds_up(&counts.total, 0);
    assert_true(counts.of_the_parts_listed);
}

static void test_unlisted_and_others(void **state)
{
    (void)state;
    struct example e;
    make_example(&e);
    e.job.counts = (struct counts){.set = true,
                                   .capacitors_set = true,
                                   .resistors_set = true,
                                   .windings_set = true,
                                   .controls_set = true,
                                   .resistors = 30,
                                   .controls = 2};
    e.capacitors[0].was = WAS_MISSING;
    e.capacitors[1].was = WAS_EARLIER_REPAIR;
    e.capacitors[9].was = WAS_EARLIER_REPAIR; /* restuffed */
    e.capacitors[2].done = DONE_OPEN;
    e.capacitors[3].done = DONE_DISCONNECTED;
    e.capacitors[15].age = AGE_PERIOD;
    e.found[4].replaced_unmeasured = true;
    for (size_t i = 0; i < CAPACITORS; i++)
        set_state(&e, i);
    e.control.done = DONE_KEPT;
    e.job.controls = &e.control;
    e.job.control_count = 1;
    struct originality counts = originality_count(&e.job, e.found);
    /* 18 capacitors less 3 that are no originals = 15, 2 + 30 resistors, 1 winding, 1 + 2 controls
     */
    assert_int_equal(counts.total.of, 15 + 32 + 1 + 3);
    /* kept capacitors: 9 less missing, earlier repair, open, disconnected = 5, and the can */
    assert_int_equal(counts.total.kept, 6 + 32 + 1 + 3);
    assert_int_equal(counts.missing, 1);
    assert_int_equal(counts.earlier_repairs_kept, 1);
    assert_int_equal(counts.earlier_repairs_replaced, 1);
    assert_int_equal(counts.open, 1);
    assert_int_equal(counts.total.disconnected, 1);
    assert_int_equal(counts.replaced_unmeasured, 1);
    assert_false(counts.of_the_parts_listed);
    assert_true(counts.total.complete);
    assert_adds_up(&counts.total, 1);
    assert_int_equal(e.found[15].state, STATE_REPLACED_PERIOD);
}

static void test_a_can_is_kept_only_whole(void **state)
{
    (void)state;
    struct example e;
    make_example(&e);
    e.capacitors[SINGLES].done = DONE_DISCONNECTED;
    struct originality counts = originality_count(&e.job, e.found);
    assert_int_equal(counts.kinds[0].kept, 9);
    assert_int_equal(counts.kinds[0].disconnected, 1);
    /* a can that says nothing itself goes by what all its sections say */
    e.can.done = DONE_OPEN;
    e.capacitors[SINGLES].done = DONE_KEPT;
    e.capacitors[SINGLES + 1].done = DONE_KEPT;
    assert_int_equal(originality_count(&e.job, e.found).kinds[0].kept, 10);
    e.capacitors[SINGLES + 1].done = DONE_REFORMED;
    assert_int_equal(originality_count(&e.job, e.found).open, 1);
}

static void test_earlier_repairs(void **state)
{
    (void)state;
    static const struct {
        enum action done;
        enum part_state state;
    } rows[] = {
        {DONE_KEPT, STATE_EARLIER_REPAIR_KEPT},
        {DONE_KEPT_UNTESTED, STATE_EARLIER_REPAIR_KEPT},
        {DONE_REFORMED, STATE_EARLIER_REPAIR_KEPT},
        {DONE_RESTUFFED, STATE_EARLIER_REPAIR_REPLACED},
        {DONE_REPLACED, STATE_EARLIER_REPAIR_REPLACED},
        {DONE_DISCONNECTED, STATE_EARLIER_REPAIR_REPLACED},
        {DONE_OPEN, STATE_OPEN},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct part_story story = {WAS_EARLIER_REPAIR, rows[i].done, AGE_MODERN, true};
        assert_int_equal(state_of_part(&story), rows[i].state);
        assert_false(state_is_kept(state_of_part(&story)));
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_worked_example),
        cmocka_unit_test(test_unlisted_and_others),
        cmocka_unit_test(test_a_can_is_kept_only_whole),
        cmocka_unit_test(test_earlier_repairs),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
