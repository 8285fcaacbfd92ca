#include "archive/columns_file.h"

#include "base/memory.h"

#include <string.h>

/* What a file must begin with: the layout below, the facts of a summary, and the byte order. */
struct heading {
    char name[24];
    uint32_t layout, summary_version, byte_order, columns;
    uint64_t job_count, part_count, again_count, bytes;
};
enum { LAYOUT = 1, BYTE_ORDER_MARK = 0x01020304 };
enum { ALL_COLUMNS = JOB_COLUMN_COUNT + PART_COLUMN_COUNT + AGAIN_COLUMN_COUNT };

static struct heading heading_of(const struct columns *columns)
{
    return (struct heading){"gridleak columns",  LAYOUT,
                            SUMMARY_VERSION,     BYTE_ORDER_MARK,
                            ALL_COLUMNS,         columns->job_count,
                            columns->part_count, columns->again_count,
                            columns->bytes};
}

/* Bytes that a code below `count` needs: 1, 2 or 4. */
static size_t code_bytes(uint64_t count)
{
    return count <= 1u << 8 ? 1 : count <= 1u << 16 ? 2 : 4;
}

/* ---- writing */

static void write_codes(const struct column_data *column, uint64_t codes, struct buffer *out)
{
    size_t bytes = code_bytes(codes);
    buffer_reserve(out, column->count * bytes);
    unsigned char *at = (unsigned char *)out->data + out->length;
    for (size_t row = 0; row < column->count; row++)
        for (size_t byte = 0; byte < bytes; byte++)
            *at++ = (unsigned char)(column->codes[row] >> (8 * byte));
    out->length += column->count * bytes;
}

static void write_column(const struct column_data *column, struct buffer *out)
{
    const struct dictionary *dictionary = &column->dictionary;
    buffer_append(out, &dictionary->count, sizeof dictionary->count);
    for (uint32_t code = 0; code < dictionary->count; code++)
        buffer_append(out, &dictionary->entries[code].length,
                      sizeof dictionary->entries[code].length);
    for (uint32_t code = 0; code < dictionary->count; code++)
        buffer_append(out, dictionary->entries[code].text, dictionary->entries[code].length + 1);
    write_codes(column, dictionary->count, out);
}

void columns_file_write(const struct columns *columns, struct buffer *out)
{
    struct heading heading = heading_of(columns);
    buffer_append(out, &heading, sizeof heading);
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        if (i != JOB_PAGE)
            write_column(&columns->jobs[i], out);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        write_column(&columns->parts[i], out);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        write_column(&columns->again[i], out);
    write_codes(&columns->part_job, columns->job_count, out);
    write_codes(&columns->again_job, columns->job_count, out);
    buffer_append(out, columns->lines, columns->job_count * sizeof *columns->lines);
}

/* ---- reading: nothing is believed that the file does not hold */

struct reading {
    const char *at, *end;
    bool bad;
};

/* The next `count` things of `size` bytes; NULL: they are not there. */
static const char *take(struct reading *reading, uint64_t count, size_t size)
{
    if (reading->bad || count > (uint64_t)(reading->end - reading->at) / size) {
        reading->bad = true;
        return NULL;
    }
    const char *start = reading->at;
    reading->at += count * size;
    return start;
}

static uint32_t code_at(const unsigned char *at, size_t bytes)
{
    uint32_t code = at[0];
    if (bytes > 1)
        code |= (uint32_t)at[1] << 8;
    if (bytes > 2)
        code |= (uint32_t)at[2] << 16 | (uint32_t)at[3] << 24;
    return code;
}

static void read_codes(struct reading *reading, struct column_data *column, uint64_t codes,
                       uint64_t rows)
{
    size_t bytes = code_bytes(codes);
    const char *first = take(reading, rows, bytes);
    if (!first)
        return;
    column_reserve(column, rows);
    const unsigned char *at = (const unsigned char *)first;
    bool bad = false;
    for (; column->count < rows; at += bytes) {
        uint32_t code = code_at(at, bytes);
        bad = bad || code >= codes;
        column->codes[column->count++] = code;
    }
    reading->bad = reading->bad || bad;
}

static void read_dictionary(struct reading *reading, struct dictionary *dictionary)
{
    const char *count_at = take(reading, 1, sizeof dictionary->count);
    uint32_t count = 0;
    if (count_at)
        memcpy(&count, count_at, sizeof count);
    const char *length_at = take(reading, count, sizeof(uint32_t));
    if (!length_at)
        return;
    dictionary->entries = memory_get((count + (size_t)1) * sizeof *dictionary->entries);
    dictionary->capacity = count + 1;
    for (uint32_t code = 0; code < count; code++, length_at += sizeof(uint32_t)) {
        struct dictionary_entry entry = {0};
        memcpy(&entry.length, length_at, sizeof entry.length);
        entry.text = take(reading, entry.length + (uint64_t)1, 1);
        if (!entry.text)
            return;
        reading->bad = reading->bad || entry.text[entry.length] != '\0';
        dictionary->entries[dictionary->count++] = entry;
    }
}

static void read_column(struct reading *reading, struct column_data *column, uint64_t rows)
{
    read_dictionary(reading, &column->dictionary);
    read_codes(reading, column, column->dictionary.count, rows);
}

static void read_lines(struct reading *reading, struct columns *columns)
{
    const char *lines = take(reading, columns->job_count, sizeof *columns->lines);
    if (!lines)
        return;
    columns->lines = memory_get((columns->job_count + 1) * sizeof *columns->lines);
    if (columns->job_count)
        memcpy(columns->lines, lines, columns->job_count * sizeof *columns->lines);
    columns->line_capacity = columns->job_count + 1;
    uint64_t end = 0;
    for (size_t i = 0; i < columns->job_count; i++) {
        const struct job_line *line = &columns->lines[i];
        reading->bad = reading->bad || line->offset < end || line->offset > columns->bytes ||
                       line->length > columns->bytes - line->offset;
        end = line->offset + line->length;
    }
}

/* Parts stand in the order of their jobs. */
static bool is_rising(const struct column_data *column)
{
    for (size_t row = 1; row < column->count; row++)
        if (column->codes[row] < column->codes[row - 1])
            return false;
    return true;
}

static void read_all(struct reading *reading, struct columns *columns)
{
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        if (i != JOB_PAGE)
            read_column(reading, &columns->jobs[i], columns->job_count);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        read_column(reading, &columns->parts[i], columns->part_count);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        read_column(reading, &columns->again[i], columns->again_count);
    read_codes(reading, &columns->part_job, columns->job_count, columns->part_count);
    read_codes(reading, &columns->again_job, columns->job_count, columns->again_count);
    read_lines(reading, columns);
    reading->bad = reading->bad || reading->at != reading->end || !is_rising(&columns->part_job) ||
                   !is_rising(&columns->again_job);
}

bool columns_file_read(struct buffer *contents, struct columns *columns)
{
    struct heading heading;
    if (contents->length < sizeof heading)
        return false;
    memcpy(&heading, contents->data, sizeof heading);
    columns->job_count = heading.job_count;
    columns->part_count = heading.part_count;
    columns->again_count = heading.again_count;
    columns->bytes = heading.bytes;
    struct heading wanted = heading_of(columns);
    struct reading reading = {contents->data + sizeof heading, contents->data + contents->length,
                              memcmp(&heading, &wanted, sizeof heading) != 0};
    if (!reading.bad)
        read_all(&reading, columns);
    if (reading.bad) {
        columns_release(columns);
        return false;
    }
    columns->file_text = *contents;
    *contents = (struct buffer){0};
    return true;
}
