/* Columns that were kept in a file and taken over are those that reading all lines would make. */
#include "archive/columns.h"

#include "archive/columns_file.h"

#include "kit.h"

#include <string.h>

enum { JOBS = 40 };

/* Small numbers that look random, the same everywhere. */
static unsigned chance(unsigned *seed, unsigned below)
{
    *seed = *seed * 1103515245u + 12345u;
    return (*seed >> 16) % below;
}

/* The line of a job in one of its editions: other makers, more or fewer parts. */
static void write_line(unsigned job, unsigned edition, struct buffer *out)
{
    unsigned seed = job * 7919u + edition;
    buffer_print(out, "{\"summary\":2,\"job\":\"2030-%03u\",\"broken\":false,\"maker\":\"M%u\"",
                 job, chance(&seed, 9));
    buffer_print(out, ",\"model\":\"é%u\",\"parts\":{\"ref\":[", chance(&seed, 5));
    unsigned parts = chance(&seed, 6);
    for (unsigned i = 0; i < parts; i++)
        buffer_print(out, "%s\"C%u\"", i ? "," : "", i + chance(&seed, 3));
    buffer_text(out, "],\"leakage\":[");
    for (unsigned i = 0; i < parts; i++)
        buffer_print(out, "%s\"0.%u\"", i ? "," : "", chance(&seed, 500));
    buffer_text(out, "]},\"again\":{\"ref\":[");
    for (unsigned i = 0; i < chance(&seed, 2); i++)
        buffer_text(out, "\"C1\"");
    buffer_text(out, "]}}\n");
}

static void assert_same_column(const struct column_data *one, const struct column_data *other)
{
    assert_int_equal(one->count, other->count);
    assert_int_equal(one->dictionary.count, other->dictionary.count);
    for (size_t row = 0; row < one->count; row++)
        assert_int_equal(one->codes[row], other->codes[row]);
    for (uint32_t code = 0; code < one->dictionary.count; code++)
        assert_string_equal(one->dictionary.entries[code].text,
                            other->dictionary.entries[code].text);
}

static void assert_same(const struct columns *one, const struct columns *other)
{
    assert_int_equal(one->job_count, other->job_count);
    assert_int_equal(one->part_count, other->part_count);
    assert_int_equal(one->again_count, other->again_count);
    assert_int_equal(one->bytes, other->bytes);
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        assert_same_column(&one->jobs[i], &other->jobs[i]);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        assert_same_column(&one->parts[i], &other->parts[i]);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        assert_same_column(&one->again[i], &other->again[i]);
    assert_same_column(&one->part_job, &other->part_job);
    assert_same_column(&one->again_job, &other->again_job);
    for (size_t job = 0; job < one->job_count; job++) {
        assert_int_equal(one->lines[job].offset, other->lines[job].offset);
        assert_int_equal(one->lines[job].length, other->lines[job].length);
    }
}

/* All jobs of the first edition, through a file. */
static void first_edition(struct columns *kept, struct buffer *file)
{
    struct columns columns = {0};
    struct buffer lines = {0};
    for (unsigned job = 0; job < JOBS; job++)
        write_line(job, 0, &lines);
    assert_int_equal(columns_add(&columns, lines.data, lines.length), 0);
    assert_int_equal(columns.bytes, lines.length);
    columns_file_write(&columns, file);
    struct buffer contents = {0};
    buffer_append(&contents, file->data, file->length);
    assert_true(columns_file_read(&contents, kept));
    columns_release(&columns);
    buffer_release(&lines);
}

/* Some jobs stay, some change, some go, some come: by taking over, and by reading all again. */
static void taking_over_is_reading_again(void **state)
{
    (void)state;
    for (unsigned round = 0; round < 50; round++) {
        struct columns kept = {0}, taken = {0}, read = {0};
        struct buffer file = {0}, line = {0};
        struct column_translation translation;
        first_edition(&kept, &file);
        column_translation_begin(&translation, &kept);
        unsigned seed = round;
        for (unsigned job = 0; job < JOBS + 3; job++) {
            unsigned fate = round == 0 ? 0 : chance(&seed, 10);
            if (fate == 1 || (job >= JOBS && round % 2 == 0))
                continue; /* gone */
            bool stays = fate != 2 && job < JOBS;
            buffer_clear(&line);
            write_line(job, stays ? 0 : round, &line);
            columns_add(&read, line.data, line.length);
            if (stays)
                columns_take(&taken, &translation, job);
            else
                columns_add(&taken, line.data, line.length);
        }
        assert_same(&taken, &read);
        column_translation_end(&translation);
        columns_release(&kept);
        columns_release(&taken);
        columns_release(&read);
        buffer_release(&file);
        buffer_release(&line);
    }
}

static bool is_read(const struct buffer *file, size_t length)
{
    struct columns columns = {0};
    struct buffer contents = {0};
    buffer_append(&contents, file->data, length);
    bool read = columns_file_read(&contents, &columns);
    /* Whatever was read can be used. */
    for (size_t part = 0; read && part < columns.part_count; part++)
        assert_true(strlen(column_text(&columns.parts[PART_LEAKAGE], part)) < 100);
    columns_release(&columns);
    buffer_release(&contents);
    return read;
}

/* A file cut short is not read; one with a byte changed is not, or stays within itself. */
static void damage_is_noticed(void **state)
{
    (void)state;
    struct columns kept = {0};
    struct buffer file = {0};
    first_edition(&kept, &file);
    assert_true(is_read(&file, file.length));
    for (size_t length = 0; length < file.length; length++)
        assert_false(is_read(&file, length));
    unsigned refused = 0;
    for (size_t i = 0; i < file.length; i++) {
        char before = file.data[i];
        file.data[i] = (char)~before;
        refused += !is_read(&file, file.length);
        file.data[i] = before;
    }
    assert_true(refused > 1000); /* counts, lengths and codes; not every letter of a text */
    buffer_byte(&file, 0);
    assert_false(is_read(&file, file.length));
    columns_release(&kept);
    buffer_release(&file);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(taking_over_is_reading_again),
        cmocka_unit_test(damage_is_noticed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
