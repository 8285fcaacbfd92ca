/* The owner in the texts of a sale copy. */
#include "sample.h"

#include "kit.h"

static struct sample *named(const char *name, const char *contact)
{
    struct sample *sample = sample_begin();
    sample->job.owner.name.text = name;
    sample->job.owner.contact.text = contact;
    return sample;
}

static bool is_clean(struct sample *sample)
{
    return report_sale_copy_is_clean(&sample->job, &sample->arena, &sample->diagnostics);
}

static void test_texts(void **state)
{
    (void)state;
    static const struct {
        const char *name, *contact, *text;
        bool clean;
    } rows[] = {
        {"Maud Estcourt", NULL, "returned by post", true},
        {"Maud Estcourt", NULL, "Maud Estcourt asked", false},
        {"Maud Estcourt", NULL, "MAUD\n  ESTCOURT", false},
        {"Maud Estcourt", NULL, "Mrs. Estcourt’s set", false},
        {"Maud Estcourt", NULL, "for the Estcourts", false}, /* the family */
        {"Maud Estcourt", NULL, "the Estcourt's", false},
        {"Ada Finch", NULL, "the Finches asked", false},
        {"Ada Finch", NULL, "finchley, finching", true},
        {"Maud Estcourt", NULL, "maud was here", true}, /* a first name alone is nobody */
        {"M. Éstcoürt", NULL, "for estcourt", false},
        {"M. Estcourt", NULL, "for E\u0301stcou\u0308rt", false},
        {"M. Estcourt", NULL, "Est\u200Bcourt", false}, /* a space that nobody sees */
        {"M. Estcourt", NULL, "Ｅｓｔｃｏｕｒｔ", false},
        {"Jan Wax", NULL, "waxed paper, the wax ran", false},
        {"Jan Wax", NULL, "waxed paper", true},
        {"Li Wu", NULL, "wu", true}, /* two letters: too short to search alone */
        {"Li Wu", NULL, "for Li Wu", false},
        {"Straße", NULL, "STRASSE", false},
        {"A. Client", "maud@post.example, by post", "write to Maud@Post.example", false},
        {"A. Client", "01234 567890, by post", "call 01234  567890", false},
        {"A. Client", "by post", "returned by post", false}, /* the contact as it was typed */
        {"A. Client", "", "anything", true},
        {NULL, NULL, "anything", true},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct sample *sample = named(rows[i].name, rows[i].contact);
        sample->job.work = sample_prose(rows[i].text, 70);
        if (is_clean(sample) != rows[i].clean)
            fail_msg("row %zu, '%s' in '%s'", i, rows[i].name, rows[i].text);
        assert_int_equal(sample->diagnostics.count, !rows[i].clean);
        if (!rows[i].clean)
            assert_int_equal(sample->diagnostics.items[0].code, DIAGNOSTIC_OWNER_IN_SALE_COPY);
        sample_end(sample, NULL);
    }
}

static void test_line_of_a_long_text(void **state)
{
    (void)state;
    struct sample *sample = named("M. Estcourt", NULL);
    sample->job.work = sample_prose("one\ntwo\nfor Estcourt\n", 70);
    assert_false(is_clean(sample));
    assert_int_equal(sample->diagnostics.items[0].at.line, 72);
    assert_string_equal(sample->diagnostics.items[0].path, "2034-027.yaml");
    sample_end(sample, NULL);
}

/* Everything that a sale copy shows is looked at; what it leaves out is not. */
static void test_places(void **state)
{
    (void)state;
    struct sample *sample = named("M. Estcourt", NULL);
    const struct {
        const char **text;
        bool shown;
    } places[] = {
        {&sample->job.arrival.text, true},
        {&sample->job.plan.text, true},
        {&sample->job.not_done.text, true},
        {&sample->job.hazards.text, true},
        {&sample->job.set.description.text, true},
        {&sample->capacitors[0].note.text, true},
        {&sample->capacitors[0].reason.text, true},
        {&sample->capacitors[0].signed_where.text, true},
        {&sample->capacitors[0].batch, true},
        {&sample->resistor.reason.text, true},
        {&sample->removed.value.text, true},
        {&sample->removed.name, true},
        {&sample->photos[0].caption.text, true},
        {&sample->photos[0].shows.text, true},
        {&sample->photos[0].file, true},
        {&sample->reform.note.text, true},
        {&sample->instrument.description, true},
        {&sample->job.request.text, false},
        {&sample->job.approvals.text, false},
        {&sample->job.private_note.text, false},
        {&sample->capacitors[0].price.text, false},
    };
    for (size_t i = 0; i < sizeof places / sizeof *places; i++) {
        const char *before = *places[i].text;
        *places[i].text = "of M. Estcourt";
        if (is_clean(sample) == places[i].shown)
            fail_msg("place %zu", i);
        *places[i].text = before;
    }
    sample->photos[0].copies = COPY_CLIENT;
    sample->photos[0].caption.text = "of M. Estcourt";
    assert_true(is_clean(sample));
    sample_end(sample, NULL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_texts),
        cmocka_unit_test(test_line_of_a_long_text),
        cmocka_unit_test(test_places),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
