#include "archive/columns.h"

#include "archive/summary_scan.h"
#include "base/memory.h"

#include <stdlib.h>
#include <string.h>

#define COLUMN_KEY(name, key) key,
const char *const job_column_keys[] = {JOB_COLUMNS(COLUMN_KEY) NULL};
const char *const part_column_keys[] = {PART_COLUMNS(COLUMN_KEY) NULL};
const char *const again_column_keys[] = {AGAIN_COLUMNS(COLUMN_KEY) NULL};

/* ---- reading a line */

/* Make every column `count` long: cut what was added too much, fill up with "". */
static void level(struct columns *columns, struct column_data *group, size_t columns_of,
                  size_t count)
{
    for (size_t i = 0; i < columns_of; i++) {
        if (group[i].count > count)
            group[i].count = count;
        while (group[i].count < count)
            column_push(&group[i], &columns->arena, "", 0);
    }
}

static int key_index(const char *const *keys, const struct scan_text *key)
{
    for (int i = 0; keys[i]; i++)
        if (strlen(keys[i]) == key->length && memcmp(keys[i], key->text, key->length) == 0)
            return i;
    return -1;
}

/* The object of columns under "parts" or "again": lists of texts by key. The longest column is how
   many rows there are. */
static size_t read_group(struct columns *columns, struct summary_scan *scan,
                         struct column_data *group, const char *const *keys, size_t start)
{
    size_t longest = start;
    struct scan_text key;
    for (bool first = true; scan_member(scan, &first, &key);) {
        int index = key_index(keys, &key);
        if (index < 0) {
            scan_skip(scan);
            continue;
        }
        struct column_data *column = &group[index];
        column->count = start;
        struct scan_text last = {0}, text;
        for (bool first_item = true; scan_item(scan, &first_item, &text);) {
            /* Neighbours are often alike. */
            if (last.text && last.length == text.length &&
                memcmp(last.text, text.text, text.length) == 0 && !text.copied)
                column_push_code(column, column->codes[column->count - 1]);
            else
                column_push(column, &columns->arena, text.text, text.length);
            last = text;
            if (text.copied)
                last.text = NULL; /* its place is written over by the next */
        }
        if (column->count > longest)
            longest = column->count;
    }
    return longest;
}

/* Everything of one line; whether it is broken is told in *broken. */
static bool read_line(struct columns *columns, struct summary_scan *scan, bool *broken,
                      struct scan_text *name)
{
    size_t parts = columns->part_count, again = columns->again_count;
    bool version = false;
    struct scan_text key, value;
    for (bool first = true; scan_member(scan, &first, &key);) {
        if (scan_is(&key, "parts")) {
            parts = read_group(columns, scan, columns->parts, part_column_keys, parts);
        } else if (scan_is(&key, "again")) {
            again = read_group(columns, scan, columns->again, again_column_keys, again);
        } else if (!scan_scalar(scan, &value)) {
            scan_skip(scan);
        } else if (scan_is(&key, "summary")) {
            version = value.length == 1 && value.text[0] == '0' + SUMMARY_VERSION;
        } else if (scan_is(&key, "broken")) {
            *broken = scan_is(&value, "true");
        } else {
            int index = key_index(job_column_keys, &key);
            if (index == JOB_NUMBER)
                *name = (struct scan_text){arena_text(&columns->arena, value.text, value.length),
                                           value.length, false};
            if (index >= 0) {
                columns->jobs[index].count = columns->job_count;
                column_push(&columns->jobs[index], &columns->arena, value.text, value.length);
            }
        }
    }
    if (!version || scan->bad || !name->length)
        return false;
    if (*broken)
        return true;
    columns->part_count = parts;
    columns->again_count = again;
    return true;
}

/* The rows of a job are there: say whose they are, and where its line stands. */
static void close_job(struct columns *columns, uint64_t line_length)
{
    while (columns->part_job.count < columns->part_count)
        column_push_code(&columns->part_job, (uint32_t)columns->job_count);
    while (columns->again_job.count < columns->again_count)
        column_push_code(&columns->again_job, (uint32_t)columns->job_count);
    if (columns->job_count == columns->line_capacity) {
        columns->line_capacity = columns->line_capacity ? columns->line_capacity * 2 : 256;
        columns->lines =
            memory_resize(columns->lines, columns->line_capacity * sizeof *columns->lines);
    }
    columns->lines[columns->job_count++] = (struct job_line){columns->bytes, line_length};
}

/* false: the line is no summary of this version and nothing was added. */
static bool add_line(struct columns *columns, const char *line, size_t length)
{
    struct summary_scan scan = {line, line + length, false, {0}};
    struct scan_text name = {0};
    bool broken = false;
    bool good = read_line(columns, &scan, &broken, &name);
    if (good && broken) {
        columns->broken = arena_grow(&columns->arena, columns->broken, columns->broken_count,
                                     &columns->broken_capacity, sizeof *columns->broken);
        columns->broken[columns->broken_count++] =
            (struct broken_job){name.text, arena_text(&columns->arena, line, length), length};
    } else if (good) {
        close_job(columns, length + 1);
    }
    columns->bytes += length + 1;
    level(columns, columns->jobs, JOB_COLUMN_COUNT, columns->job_count);
    level(columns, columns->parts, PART_COLUMN_COUNT, columns->part_count);
    level(columns, columns->again, AGAIN_COLUMN_COUNT, columns->again_count);
    buffer_release(&scan.unescaped);
    return good;
}

size_t columns_add(struct columns *columns, const char *text, size_t length)
{
    size_t bad = 0;
    for (const char *end = text + length; text < end;) {
        const char *line_end = memchr(text, '\n', (size_t)(end - text));
        size_t line_length = (size_t)((line_end ? line_end : end) - text);
        bad += !add_line(columns, text, line_length);
        text += line_length + 1;
    }
    return bad;
}

/* ---- taking jobs over */

static uint32_t *unknown_codes(struct arena *arena, const struct column_data *column)
{
    uint32_t *codes = arena_array(arena, column->dictionary.count + 1, sizeof *codes);
    memset(codes, 0xFF, (column->dictionary.count + 1) * sizeof *codes);
    return codes;
}

void column_translation_begin(struct column_translation *translation, const struct columns *from)
{
    *translation = (struct column_translation){.from = from};
    struct arena *arena = &translation->arena;
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        translation->jobs[i] = unknown_codes(arena, &from->jobs[i]);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        translation->parts[i] = unknown_codes(arena, &from->parts[i]);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        translation->again[i] = unknown_codes(arena, &from->again[i]);
}

void column_translation_end(struct column_translation *translation)
{
    arena_release(&translation->arena);
}

/* Rows of one job: start up to end. */
struct row_span {
    size_t start, end;
};

/* The rows of a job, at or behind `from`; job_of_row rises. */
static struct row_span rows_of_job(const struct column_data *job_of_row, size_t from, size_t job)
{
    struct row_span rows = {from, from};
    while (rows.start < job_of_row->count && job_of_row->codes[rows.start] < job)
        rows.start++;
    rows.end = rows.start;
    while (rows.end < job_of_row->count && job_of_row->codes[rows.end] == job)
        rows.end++;
    return rows;
}

static void take_rows(struct column_data *to, const struct column_data *from, uint32_t *translated,
                      struct row_span rows, struct arena *arena)
{
    column_reserve(to, rows.end - rows.start);
    for (size_t row = rows.start; row < rows.end; row++) {
        uint32_t code = from->codes[row];
        if (translated[code] == UINT32_MAX) {
            const struct dictionary_entry *entry = &from->dictionary.entries[code];
            translated[code] = dictionary_code(&to->dictionary, arena, entry->text, entry->length);
        }
        to->codes[to->count++] = translated[code];
    }
}

void columns_take(struct columns *columns, struct column_translation *translation, size_t job)
{
    const struct columns *from = translation->from;
    struct arena *arena = &columns->arena;
    const struct row_span jobs = {job, job + 1},
                          parts = rows_of_job(&from->part_job, translation->next_part, job),
                          again = rows_of_job(&from->again_job, translation->next_again, job);
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        if (i == JOB_PAGE) /* named when all jobs are there */
            column_push(&columns->jobs[i], arena, "", 0);
        else
            take_rows(&columns->jobs[i], &from->jobs[i], translation->jobs[i], jobs, arena);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        take_rows(&columns->parts[i], &from->parts[i], translation->parts[i], parts, arena);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        take_rows(&columns->again[i], &from->again[i], translation->again[i], again, arena);
    translation->next_part = parts.end;
    translation->next_again = again.end;
    columns->part_count += parts.end - parts.start;
    columns->again_count += again.end - again.start;
    close_job(columns, from->lines[job].length);
    columns->bytes += from->lines[job].length;
}

void columns_release(struct columns *columns)
{
    for (size_t i = 0; i < JOB_COLUMN_COUNT; i++)
        column_release(&columns->jobs[i]);
    for (size_t i = 0; i < PART_COLUMN_COUNT; i++)
        column_release(&columns->parts[i]);
    for (size_t i = 0; i < AGAIN_COLUMN_COUNT; i++)
        column_release(&columns->again[i]);
    column_release(&columns->part_job);
    column_release(&columns->again_job);
    free(columns->lines);
    buffer_release(&columns->file_text);
    arena_release(&columns->arena);
    *columns = (struct columns){0};
}
