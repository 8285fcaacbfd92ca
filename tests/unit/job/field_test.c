/* The field tables: every row whole, every example readable, schema, manual and start in step. */
#include "job/field.h"

#include "job/manual.h"
#include "job/schema.h"
#include "job/start.h"
#include "kit.h"
#include "reading.h"

#include <stdlib.h>

/* ---- every record, once ---- */

typedef void visit_record(const struct record *record, void *context);

static void walk(const struct record *record, visit_record *visit, void *context)
{
    visit(record, context);
    for (size_t i = 0; i < record->field_count; i++) {
        if (record->fields[i].record)
            walk(record->fields[i].record, visit, context);
    }
}

static void check_rows(const struct record *record, void *context)
{
    (void)context;
    assert_non_null(record->name);
    assert_non_null(record->section);
    assert_non_null(record->text);
    assert_true(!record->keyed || record->key_example != NULL);
    assert_true(record->fields != NULL || (record->read && record->example));
    for (size_t i = 0; i < record->field_count; i++) {
        const struct field *field = &record->fields[i];
        bool sections = field->kind >= FIELD_RECORD;
        if (!field->text || (!field->example && !sections))
            print_error("%s.%s\n", record->section, field->key);
        assert_non_null(field->text);
        assert_true(field->example || sections);
        assert_true(field->offset < record->size);
        assert_true(field->kind != FIELD_CHOICE || field->choices);
        assert_true((field->kind != FIELD_LINE && field->kind != FIELD_LINES) || field->read);
        assert_true(!sections || field->record);
        assert_true((field->kind != FIELD_TABLE && field->kind != FIELD_LIST) ||
                    field->count_offset < record->size);
        for (size_t j = 0; j < i; j++)
            assert_string_not_equal(field->key, record->fields[j].key);
    }
}

static void test_rows(void **state)
{
    (void)state;
    walk(&job_record, check_rows, NULL);
    walk(&shop_record, check_rows, NULL);
}

/* ---- every example ---- */

static void examples_write(struct buffer *out, const struct record *record, int indent);

static void example_write(struct buffer *out, const struct field *field, int indent)
{
    const struct record *record = field->record;
    buffer_print(out, "%*s%s:", indent, "", field->key);
    switch (field->kind) {
    case FIELD_RECORD:
        buffer_text(out, "\n");
        examples_write(out, record, indent + 2);
        return;
    case FIELD_TABLE:
        buffer_print(out, "\n%*s%s:%s%s\n", indent + 2, "", record->key_example,
                     record->example ? " " : "", record->example ? record->example : "");
        examples_write(out, record, indent + 4);
        return;
    case FIELD_LIST:
        buffer_print(out, "\n%*s-\n", indent + 2, "");
        examples_write(out, record, indent + 4);
        return;
    case FIELD_LINES:
        buffer_print(out, "\n%*s- %s\n", indent + 2, "", field->example);
        return;
    case FIELD_FREE:
        buffer_print(out, "\n%*s%s\n", indent + 2, "", field->example);
        return;
    case FIELD_TEXT:
    case FIELD_PROSE:
    case FIELD_CHOICE:
    case FIELD_FLAG:
    case FIELD_WHOLE:
    case FIELD_QUANTITY:
    case FIELD_NUMBER:
    case FIELD_FRACTION:
    case FIELD_RESISTANCE:
    case FIELD_DATE:
    case FIELD_YEARS:
    case FIELD_SIZE:
    case FIELD_LINE:
        buffer_byte(out, ' ');
        yaml_scalar_write(out, field->example, (unsigned)indent + 2);
        buffer_byte(out, '\n');
    }
}

static void examples_write(struct buffer *out, const struct record *record, int indent)
{
    for (size_t i = 0; i < record->field_count; i++)
        example_write(out, &record->fields[i], indent);
}

/* All examples in one job. They name parts that it does not list, and contradict each other here
   and there; but each can be read. */
static void test_examples(void **state)
{
    (void)state;
    struct buffer text = {0};
    struct reading_of_text reading;
    examples_write(&text, &job_record, 0);
    read_text(&reading, buffer_string(&text));
    for (size_t i = 0; i < reading.diagnostics.count; i++) {
        const struct diagnostic *item = &reading.diagnostics.items[i];
        bool cross = item->code == DIAGNOSTIC_REF_UNKNOWN ||
                     item->code == DIAGNOSTIC_CONTRADICTION || item->code == DIAGNOSTIC_JOB_NAME;
        if (!cross)
            print_error("%u: %s\n    %s\n", item->at.line, item->text, item->line);
        assert_true(cross);
    }
    assert_close(reading.job->capacitors[0].feed.quantity.value, 1e6, 0);
    reading_release(&reading);
    buffer_release(&text);
}

/* ---- what is made of the tables ---- */

static void keys_in(const struct record *record, void *context)
{
    const char *text = context;
    for (size_t i = 0; i < record->field_count; i++) {
        if (!strstr(text, record->fields[i].key))
            print_error("%s.%s is missing\n", record->section, record->fields[i].key);
        assert_non_null(strstr(text, record->fields[i].key));
    }
}

static void test_manual(void **state)
{
    (void)state;
    struct buffer text = {0};
    manual_write(&text);
    char *manual = strdup(buffer_string(&text));
    walk(&job_record, keys_in, manual);
    walk(&shop_record, keys_in, manual);
    for (char *line = manual; *line;) {
        size_t length = strcspn(line, "\n");
        assert_true(length <= 80);
        line += length + 1;
    }
    free(manual);
    buffer_release(&text);
}

static void test_schema(void **state)
{
    (void)state;
    struct buffer text = {0};
    schema_write(&text);
    const char *schema = buffer_string(&text);
    walk(&job_record, keys_in, (char *)schema);
    assert_non_null(strstr(schema, "\"enum\": [\"coupling\", \"avc bypass\""));
    assert_null(strstr(schema, "\"pattern\"")); /* a number would escape it */
    assert_null(strstr(schema, "\"format\""));
    buffer_release(&text);
}

/* ---- start ---- */

static void start_text(struct buffer *out, struct arena *arena, const struct source *like)
{
    struct diagnostics diagnostics = diagnostics_in(arena);
    const struct start start = {"1", "2031-02-03", like};
    start_write(out, &start, arena, &diagnostics);
}

static void test_start(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer text = {0};
    struct reading_of_text reading;
    start_text(&text, &arena, NULL);
    read_text(&reading, buffer_string(&text));
    assert_int_equal(reading.diagnostics.count, 0);
    assert_string_equal(reading.job->number, "1");
    assert_int_equal(reading.job->received.year, 2031);
    assert_int_equal(reading.job->capacitor_count, 0);
    reading_release(&reading);

    /* Every commented example is in its place when its # goes. */
    char *plain = strdup(buffer_string(&text)), *to = plain;
    for (const char *from = plain; *from;) {
        bool comment = strncmp(from, "# ", 2) == 0;
        size_t length = strcspn(from, "\n");
        size_t skip = comment ? 2 : 0;
        memmove(to, from + skip, length - skip);
        to += length - skip;
        from += length + (from[length] != '\0');
        *to++ = '\n';
    }
    *to = '\0';
    read_text(&reading, plain);
    for (size_t i = 0; i < reading.diagnostics.count; i++) {
        if (reading.diagnostics.items[i].code != DIAGNOSTIC_REF_UNKNOWN)
            print_error("%s\n", reading.diagnostics.items[i].text);
        assert_int_equal(reading.diagnostics.items[i].code, DIAGNOSTIC_REF_UNKNOWN);
    }
    assert_int_equal(reading.job->capacitor_count, 1);
    assert_int_equal(reading.job->reform_count, 1);
    reading_release(&reading);
    free(plain);
    buffer_release(&text);
    arena_release(&arena);
}

static const char earlier[] =
    "job: 0\nset: {maker: 'Pell: worth', serial: 5, mains: 230 V}\nowner: {name: A. Client}\n"
    "received: 2029-01-01\nprivate: secret\n"
    "instruments:\n  leakage: {accuracy: 2 % + 0.02 uA}\n"
    "stages:\n  output:\n    valve: V4 6V6GT\n    cathode: R12\n"
    "    measured: {found: cathode 16 V}\n"
    "capacitors:\n  C14:\n    type: paper\n    marked: 0.02 uF\n    place: coupling\n"
    "    stage: output\n    source: 90 V\n    readings: 100 V 60 s 1 uA\n    done: restuffed\n"
    "    fitted: polypropylene 0.022 uF\n    was: earlier repair\n    reason: leaky\n"
    "resistors:\n  R12: {marked: 270 ohm, measured: 266 ohm, done: kept}\n"
    "voltages:\n  points:\n    V4 anode: sheet 248 V, found 255 V, range 500 V, left 257 V\n"
    "work: done\n";

static void test_start_like(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer text = {0};
    struct reading_of_text reading;
    const struct source like = {"0.yaml", earlier, sizeof earlier - 1};
    start_text(&text, &arena, &like);
    read_text(&reading, buffer_string(&text));
    const struct job *job = reading.job;
    assert_int_equal(reading.diagnostics.count, 0);
    assert_string_equal(job->set.maker.text, "Pell: worth");
    assert_close(job->set.mains.value, 230, 0);
    assert_null(job->set.serial.text);
    assert_null(job->owner.name.text);
    assert_null(job->private_note.text);
    assert_null(job->work.text);
    assert_int_equal(job->instrument_count, 1);
    assert_true(job->instruments[0].accuracy_set);
    const struct capacitor *part = &job->capacitors[0];
    assert_int_equal(part->place, PLACE_COUPLING);
    assert_int_equal(part->stage_count, 1);
    assert_close(part->source_volts.value, 90, 0);
    assert_int_equal(part->reading_count, 0);
    assert_int_equal(part->done, DONE_OPEN);
    assert_int_equal(part->was, WAS_ORIGINAL);
    assert_false(part->fitted.set);
    assert_null(part->reason.text);
    assert_int_equal(job->stages[0].cathode.resistor, 0);
    assert_false(job->stages[0].found.set);
    assert_true(job->resistors[0].marked.set && !job->resistors[0].measured.set);
    assert_close(job->voltages.points[0].sheet.value, 248, 0);
    assert_close(job->voltages.points[0].range.value, 500, 0);
    assert_false(job->voltages.points[0].found.set || job->voltages.points[0].left.set);
    reading_release(&reading);
    buffer_release(&text);
    arena_release(&arena);
}

/* A mapping or a list where one line stands is no entry of its table: not kept. */
static void test_start_like_mistaken(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer text = {0};
    static const char mistaken[] = "voltages:\n  points:\n    V4 anode: sheet 248 V\n"
                                   "    V5 anode:\n      sheet: 90 V\n    V6 anode: [90 V]\n";
    const struct source like = {"0.yaml", mistaken, sizeof mistaken - 1};
    start_text(&text, &arena, &like);
    assert_non_null(strstr(buffer_string(&text), "V4 anode: sheet 248 V"));
    assert_null(strstr(buffer_string(&text), "V5 anode"));
    assert_null(strstr(buffer_string(&text), "V6 anode"));
    buffer_release(&text);
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_rows),
        cmocka_unit_test(test_examples),
        cmocka_unit_test(test_manual),
        cmocka_unit_test(test_schema),
        cmocka_unit_test(test_start),
        cmocka_unit_test(test_start_like),
        cmocka_unit_test(test_start_like_mistaken),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
