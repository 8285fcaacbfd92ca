/* What a copy may show, and the ohms of a resistance in each state. */
#include "job/job.h"

#include "kit.h"
#include "reading.h"

#include <stdlib.h>

static const char text[] =
    "job: 1\nset: {maker: x}\nowner: {name: A. Client, contact: by post}\n"
    "request: asked\nprivate: secret\napprovals: agreed\nplan: plan\n"
    "stages:\n  a: {anode: T2, cathode: R12, grid_leak: 470k, valve: 6V6GT, screen: R2}\n"
    "  b: {anode: R3, cathode: R4, valve: 6V6GT}\n"
    "cans: {CAN1: {holds: C1, price: 1}}\n"
    "capacitors: {C1: {price: 2}}\n"
    "resistors:\n"
    "  R12: {marked: 270 ohm 1 W 10 %, measured: 266 ohm, fitted: 280 ohm, price: 3}\n"
    "  R2: {marked: 33k, measured: 41k}\n"
    "  R3: {measured: 41k}\n"
    "  R4: {marked: 1k}\n"
    "windings: {T2: {marked: 310 ohm, measured: 316 ohm, price: 4}}\n"
    "controls: {VR1: {price: 5}}\n"
    "valves: {V1: {price: 6}}\n"
    "photos: [{file: a.jpg}, {file: b.jpg, copies: client}, {file: c.jpg, copies: shop}]\n";

static void test_copies(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_text(&reading, text);
    assert_int_equal(reading.diagnostics.count, 0);
    const struct job *all = reading.job;
    const struct job *shop = job_for_copy(all, COPY_SHOP, &reading.arena);
    const struct job *client = job_for_copy(all, COPY_CLIENT, &reading.arena);
    const struct job *sale = job_for_copy(all, COPY_SALE, &reading.arena);
    assert_string_equal(shop->private_note.text, "secret");
    assert_int_equal(shop->photo_count, 3);

    assert_null(client->private_note.text);
    assert_string_equal(client->owner.name.text, "A. Client");
    assert_string_equal(client->approvals.text, "agreed");
    assert_string_equal(client->capacitors[0].price.text, "2");
    assert_int_equal(client->photo_count, 2);

    assert_null(sale->private_note.text);
    assert_null(sale->owner.name.text);
    assert_null(sale->owner.contact.text);
    assert_null(sale->request.text);
    assert_null(sale->approvals.text);
    assert_string_equal(sale->plan.text, "plan");
    assert_null(sale->cans[0].price.text);
    assert_null(sale->capacitors[0].price.text);
    assert_null(sale->resistors[0].price.text);
    assert_null(sale->windings[0].price.text);
    assert_null(sale->controls[0].price.text);
    assert_null(sale->valves[0].price.text);
    assert_int_equal(sale->photo_count, 1);
    assert_string_equal(sale->photos[0].file, "a.jpg");

    /* The job itself is as before. */
    assert_string_equal(all->capacitors[0].price.text, "2");
    assert_int_equal(all->photo_count, 3);
    reading_release(&reading);
}

static void test_resistances(void **state)
{
    (void)state;
    struct reading_of_text reading;
    read_text(&reading, text);
    const struct job *job = reading.job;
    const struct stage *a = &job->stages[0], *b = &job->stages[1];
    /* What the job file above says of each, in the three states. */
    const struct {
        const struct resistance *resistance;
        double ohm[PHASE_COUNT];
        bool measured[PHASE_COUNT];
    } rows[] = {
        {&a->cathode, {270, 266, 280}, {false, true, false}},
        {&a->anode, {310, 316, 316}, {false, true, true}},
        {&a->screen, {33e3, 41e3, 41e3}, {false, true, true}},
        {&a->grid_leak, {470e3, 470e3, 470e3}, {false, false, false}},
        {&b->anode, {41e3, 41e3, 41e3}, {true, true, true}},
        {&b->cathode, {1e3, 1e3, 1e3}, {false, false, false}},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        for (int phase = 0; phase < PHASE_COUNT; phase++) {
            double ohm = 0;
            bool measured = false;
            assert_true(
                job_resistance(job, rows[i].resistance, (enum phase)phase, &ohm, &measured));
            assert_close(ohm, rows[i].ohm[phase], 1e-9);
            assert_int_equal(measured, rows[i].measured[phase]);
        }
    }
    double ohm = 5;
    bool measured = true;
    assert_false(job_resistance(job, &b->grid_leak, PHASE_FOUND, &ohm, &measured));
    assert_close(ohm, 5, 0); /* untouched */
    reading_release(&reading);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_copies),
        cmocka_unit_test(test_resistances),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
