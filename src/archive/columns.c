#include "archive/columns.h"

#include "archive/summary_scan.h"
#include "base/memory.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define COLUMN_KEY(name, key) key,
const char *const job_column_keys[] = {JOB_COLUMNS(COLUMN_KEY) NULL};
const char *const part_column_keys[] = {PART_COLUMNS(COLUMN_KEY) NULL};
const char *const again_column_keys[] = {AGAIN_COLUMNS(COLUMN_KEY) NULL};

/* ---- dictionaries */

static uint32_t hash_text_of(const char *text, size_t length)
{
    uint64_t hash = 0x9E3779B97F4A7C15u ^ length;
    for (; length >= 8; length -= 8, text += 8) {
        uint64_t word;
        memcpy(&word, text, 8);
        hash = (hash ^ word) * 0xD6E8FEB86659FD93u;
        hash ^= hash >> 32;
    }
    uint64_t rest = 0;
    memcpy(&rest, text, length);
    hash = (hash ^ rest) * 0xD6E8FEB86659FD93u;
    return (uint32_t)(hash >> 32);
}

static void grow_slots(struct dictionary *dictionary)
{
    dictionary->slot_count = dictionary->slot_count ? dictionary->slot_count * 2 : 64;
    free(dictionary->slots);
    dictionary->slots = memory_get_cleared(dictionary->slot_count, sizeof *dictionary->slots);
    for (uint32_t code = 0; code < dictionary->count; code++) {
        uint32_t slot = dictionary->entries[code].hash & (dictionary->slot_count - 1);
        while (dictionary->slots[slot])
            slot = (slot + 1) & (dictionary->slot_count - 1);
        dictionary->slots[slot] = code + 1;
    }
}

static uint32_t add_entry(struct dictionary *dictionary, struct arena *arena,
                          struct dictionary_entry entry)
{
    if (dictionary->count == dictionary->capacity) {
        dictionary->capacity = dictionary->capacity ? dictionary->capacity * 2 : 16;
        dictionary->entries =
            memory_resize(dictionary->entries, dictionary->capacity * sizeof *dictionary->entries);
    }
    entry.text = arena_text(arena, entry.text, entry.length);
    dictionary->entries[dictionary->count] = entry;
    return dictionary->count++;
}

static uint32_t find_or_add(struct dictionary *dictionary, struct arena *arena, const char *text,
                            size_t length)
{
    if ((dictionary->count + 1) * 2 > dictionary->slot_count)
        grow_slots(dictionary);
    struct dictionary_entry entry = {text, (uint32_t)length, hash_text_of(text, length)};
    uint32_t slot = entry.hash & (dictionary->slot_count - 1);
    for (uint32_t found; (found = dictionary->slots[slot]) != 0;
         slot = (slot + 1) & (dictionary->slot_count - 1)) {
        const struct dictionary_entry *here = &dictionary->entries[found - 1];
        if (here->hash == entry.hash && here->length == length &&
            memcmp(here->text, text, length) == 0)
            return found - 1;
    }
    dictionary->slots[slot] = dictionary->count + 1;
    return add_entry(dictionary, arena, entry);
}

uint32_t dictionary_code(struct dictionary *dictionary, struct arena *arena, const char *text,
                         size_t length)
{
    if (dictionary->count == 0)
        find_or_add(dictionary, arena, "", 0);
    return length ? find_or_add(dictionary, arena, text, length) : 0;
}

/* ---- columns */

static void push_code(struct column_data *column, uint32_t code)
{
    if (column->count == column->capacity) {
        column->capacity = column->capacity ? column->capacity * 2 : 256;
        column->codes = memory_resize(column->codes, column->capacity * sizeof *column->codes);
    }
    column->codes[column->count++] = code;
}

void column_push(struct column_data *column, struct arena *arena, const char *text, size_t length)
{
    push_code(column, dictionary_code(&column->dictionary, arena, text, length));
}

const char *column_text(const struct column_data *column, size_t index)
{
    return column->dictionary.entries[column->codes[index]].text;
}

double column_number(const struct column_data *column, size_t index)
{
    const char *text = column_text(column, index);
    char *end;
    double value = strtod(text, &end);
    return end == text ? NAN : value;
}

static void column_release(struct column_data *column)
{
    free(column->codes);
    free(column->dictionary.entries);
    free(column->dictionary.slots);
}

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
                push_code(column, column->codes[column->count - 1]);
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
        columns->broken[columns->broken_count++] = (struct broken_job){name.text, line, length};
    } else if (good) {
        while (columns->part_job.count < columns->part_count)
            push_code(&columns->part_job, (uint32_t)columns->job_count);
        while (columns->again_job.count < columns->again_count)
            push_code(&columns->again_job, (uint32_t)columns->job_count);
        columns->job_count++;
    }
    level(columns, columns->jobs, JOB_COLUMN_COUNT, columns->job_count);
    level(columns, columns->parts, PART_COLUMN_COUNT, columns->part_count);
    level(columns, columns->again, AGAIN_COLUMN_COUNT, columns->again_count);
    buffer_release(&scan.unescaped);
    return good;
}

size_t columns_add_all(struct columns *columns, const char *text, size_t length)
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
    arena_release(&columns->arena);
    *columns = (struct columns){0};
}
