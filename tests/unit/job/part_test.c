/* Parts of every kind through one struct: each member from where its kind keeps it. */
#include "job/part.h"

#include "kit.h"
#include "reading.h"

static const char text[] =
    "job: 1\nset: {maker: x}\n"
    "cans: {CAN1: {holds: C1, maker: Aldon, was: earlier repair, signed: inside}}\n"
    "capacitors: {C1: {marked: 16 uF 450 V}}\n"
    "resistors: {R1: {marked: 10k, seen: above, done: replaced, fitted: 10k 1 W, age: period,\n"
    "                 batch: B1, price: 2, reason: high, note: n}}\n"
    "controls: {VR1: {what: volume, done: replaced, fitted: a new one}}\n"
    "valves: {V1: {type: 6V6GT, maker: Orba, done: replaced, fitted: another}}\n";

static void every_kind(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_text(&reading, text);
    assert_int_equal(reading.diagnostics.errors, 0);
    const struct job *job = reading.job;
    static const size_t counts[PART_KIND_COUNT] = {[KIND_CAPACITOR] = 1,
                                                   [KIND_CAN] = 1,
                                                   [KIND_RESISTOR] = 1,
                                                   [KIND_CONTROL] = 1,
                                                   [KIND_VALVE] = 1};
    for (enum part_kind kind = 0; kind < PART_KIND_COUNT; kind++)
        assert_int_equal(part_count(job, kind), counts[kind]);

    struct part capacitor = part_of(job, KIND_CAPACITOR, 0);
    assert_string_equal(capacitor.ref, "C1");
    assert_string_equal(capacitor.marked_text, "16 uF 450 V");
    assert_ptr_equal(capacitor.marked, &job->capacitors[0].marked);

    struct part can = part_of(job, KIND_CAN, 0);
    assert_string_equal(can.maker, "Aldon");
    assert_string_equal(can.signed_where, "inside");
    assert_int_equal(can.was, WAS_EARLIER_REPAIR);
    assert_null(can.marked);

    struct part resistor = part_of(job, KIND_RESISTOR, 0);
    assert_int_equal(resistor.seen, SEEN_ABOVE);
    assert_int_equal(resistor.done, DONE_REPLACED);
    assert_int_equal(resistor.age, AGE_PERIOD);
    assert_string_equal(resistor.fitted_text, "10k 1 W");
    assert_string_equal(resistor.batch, "B1");
    assert_string_equal(resistor.price, "2");
    assert_string_equal(resistor.reason, "high");
    assert_string_equal(resistor.note, "n");

    struct part control = part_of(job, KIND_CONTROL, 0);
    assert_string_equal(control.marked_text, "volume");
    assert_string_equal(control.fitted_text, "a new one");
    assert_null(control.fitted);

    struct part valve = part_of(job, KIND_VALVE, 0);
    assert_string_equal(valve.marked_text, "6V6GT");
    assert_string_equal(valve.maker, "Orba");
    assert_string_equal(valve.fitted_text, "another");
    reading_release(&reading);
}

/* What is said of a can holds for its sections; C3 is in no can. */
static void sections_of_a_can(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_text(&reading,
              "job: 1\nset: {maker: x}\n"
              "cans: {CAN1: {holds: C1 C2, was: earlier repair, done: restuffed, fitted: 22 uF}}\n"
              "capacitors: {C1: {}, C2: {}, C3: {done: kept}}\n");
    assert_int_equal(reading.diagnostics.errors, 0);
    const struct job *job = reading.job;
    const struct capacitor *parts = job->capacitors;
    assert_ptr_equal(part_can(job, &parts[0]), &job->cans[0]);
    assert_null(part_can(job, &parts[2]));
    assert_int_equal(part_action(job, &parts[0]), DONE_RESTUFFED);
    assert_int_equal(part_action(job, &parts[1]), DONE_RESTUFFED);
    assert_int_equal(part_action(job, &parts[2]), DONE_KEPT);
    assert_string_equal(part_fitted(job, &parts[0])->written, "22 uF");
    assert_false(part_fitted(job, &parts[2])->set);
    assert_int_equal(part_origin(job, &parts[1]), WAS_EARLIER_REPAIR);
    assert_int_equal(part_origin(job, &parts[2]), WAS_ORIGINAL);
    assert_null(instrument_of(job, NOT_LISTED));
    reading_release(&reading);
}

static void changes(void **state)
{
    (void)state;
    static const bool is_change[ACTION_COUNT] = {
        [DONE_RESTUFFED] = true, [DONE_REPLACED] = true, [DONE_DISCONNECTED] = true};
    for (enum action done = 0; done < ACTION_COUNT; done++)
        assert_int_equal(action_is_change(done), is_change[done]);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(every_kind),
                                       cmocka_unit_test(sections_of_a_can),
                                       cmocka_unit_test(changes)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
