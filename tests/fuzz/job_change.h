/*
 * Job files made of parts of others: lines taken away, put in, exchanged for those of the same key
 * elsewhere, numbers changed. Most that come out can be read, so that what lies behind the reader
 * is tried too.
 */
#ifndef TESTS_JOB_CHANGE_H
#define TESTS_JOB_CHANGE_H

#include "base/arena.h"
#include "base/buffer.h"
#include "fuzz.h"

#include <ctype.h>

struct job_lines {
    const char **lines;
    size_t count, capacity;
};

/* The files that changed ones are made of. */
struct job_stock {
    struct job_lines *files;
    size_t count;
};

static inline void job_lines_add(struct job_lines *job, const char *line, struct arena *arena)
{
    job->lines = arena_grow(arena, job->lines, job->count, &job->capacity, sizeof *job->lines);
    job->lines[job->count++] = line;
}

static inline struct job_lines job_lines_of(const char *text, struct arena *arena)
{
    struct job_lines job = {0};
    while (*text) {
        size_t length = strcspn(text, "\n");
        job_lines_add(&job, arena_text(arena, text, length), arena);
        text += length + (text[length] != '\0');
    }
    return job;
}

static inline void job_lines_write(const struct job_lines *job, struct buffer *out)
{
    for (size_t i = 0; i < job->count; i++) {
        buffer_text(out, job->lines[i]);
        buffer_byte(out, '\n');
    }
}

static inline size_t line_indent(const char *line)
{
    return strspn(line, " ");
}

/* The length of `key:` behind the indent; 0: the line has none. */
static inline size_t line_key(const char *line)
{
    const char *key = line + line_indent(line);
    size_t length = strcspn(key, ": ");
    return key[length] == ':' ? length + 1 : 0;
}

static inline bool line_same_key(const char *a, const char *b)
{
    size_t length = line_key(a);
    return length && length == line_key(b) &&
           strncmp(a + line_indent(a), b + line_indent(b), length) == 0;
}

/* The line and all that stand deeper below it. */
static inline size_t block_end(const struct job_lines *job, size_t start)
{
    size_t end = start + 1, indent = line_indent(job->lines[start]);
    while (end < job->count && (!*job->lines[end] || line_indent(job->lines[end]) > indent))
        end++;
    return end;
}

/* The line that this one stands below; SIZE_MAX: none. */
static inline size_t line_above(const struct job_lines *job, size_t line)
{
    size_t indent = line_indent(job->lines[line]);
    while (line-- > 0)
        if (*job->lines[line] && line_indent(job->lines[line]) < indent)
            return line;
    return SIZE_MAX;
}

/* Lines start to end give way to others. */
static inline void lines_exchange(struct job_lines *job, size_t start, size_t end,
                                  const struct job_lines *others, struct arena *arena)
{
    struct job_lines whole = {0};
    for (size_t i = 0; i < start; i++)
        job_lines_add(&whole, job->lines[i], arena);
    for (size_t i = 0; i < others->count; i++)
        job_lines_add(&whole, others->lines[i], arena);
    for (size_t i = end; i < job->count; i++)
        job_lines_add(&whole, job->lines[i], arena);
    *job = whole;
}

static inline struct job_lines block_of(const struct job_lines *job, size_t start,
                                        struct arena *arena)
{
    struct job_lines block = {0};
    for (size_t i = start, end = block_end(job, start); i < end; i++)
        job_lines_add(&block, job->lines[i], arena);
    return block;
}

static inline void change_number(struct fuzz *fuzz, struct job_lines *job, struct arena *arena)
{
    static const char *const numbers[] = {"0",   "1",    "0.1",   "-1",    "7",       "100",
                                          "999", "1000", "65000", "0.001", "1000000", "1e9"};
    const char **line = &job->lines[fuzz_below(fuzz, job->count)];
    const char *start = *line + line_indent(*line) + line_key(*line);
    start += strcspn(start, "0123456789");
    for (size_t skip = fuzz_below(fuzz, 3); skip > 0; skip--) {
        size_t next = strspn(start, "0123456789.");
        next += strcspn(start + next, "0123456789");
        start += start[next] ? next : 0;
    }
    size_t length = strspn(start, "0123456789.");
    const char *number = numbers[fuzz_below(fuzz, sizeof numbers / sizeof *numbers)];
    size_t kept = fuzz_below(fuzz, 2) ? length : 0; /* a digit more, or another number */
    if (kept)
        number = arena_print(arena, "%zu", fuzz_below(fuzz, 10));
    if (length)
        *line = arena_print(arena, "%.*s%s%s", (int)(start - *line) + (int)kept, *line, number,
                            start + length);
}

static inline void take_away(struct fuzz *fuzz, struct job_lines *job, struct arena *arena)
{
    size_t start = fuzz_below(fuzz, job->count);
    if (line_indent(job->lines[start]) > 0 || fuzz_below(fuzz, 4) == 0)
        lines_exchange(job, start, block_end(job, start), &(struct job_lines){0}, arena);
}

/* A block gives way to that of the same key of any file. */
static inline void exchange_block(struct fuzz *fuzz, struct job_lines *job,
                                  const struct job_stock *stock, struct arena *arena)
{
    const struct job_lines *donor = &stock->files[fuzz_below(fuzz, stock->count)];
    size_t start = fuzz_below(fuzz, job->count), from = fuzz_below(fuzz, donor->count);
    for (size_t tried = 0; tried < donor->count; tried++, from = (from + 1) % donor->count) {
        if (!line_same_key(job->lines[start], donor->lines[from]) ||
            line_indent(job->lines[start]) != line_indent(donor->lines[from]))
            continue;
        struct job_lines block = block_of(donor, from, arena);
        lines_exchange(job, start, block_end(job, start), &block, arena);
        return;
    }
}

/* A block of any file beside those that stand below the same key. Refs get a letter, so that none
   is there twice. */
static inline void put_in(struct fuzz *fuzz, struct job_lines *job, const struct job_stock *stock,
                          struct arena *arena)
{
    const struct job_lines *donor = &stock->files[fuzz_below(fuzz, stock->count)];
    size_t from = fuzz_below(fuzz, donor->count), above = line_above(donor, from);
    if (above == SIZE_MAX)
        return;
    struct job_lines block = block_of(donor, from, arena);
    size_t indent = line_indent(block.lines[0]), key = line_key(block.lines[0]);
    if (key && isupper((unsigned char)block.lines[0][indent]))
        block.lines[0] =
            arena_print(arena, "%.*s%c%s", (int)(indent + key - 1), block.lines[0],
                        (char)('a' + fuzz_below(fuzz, 26)), block.lines[0] + indent + key - 1);
    size_t at = fuzz_below(fuzz, job->count);
    for (size_t tried = 0; tried < job->count; tried++, at = (at + 1) % job->count) {
        if (!line_same_key(job->lines[at], donor->lines[above]) ||
            line_indent(job->lines[at]) != line_indent(donor->lines[above]) ||
            block_end(job, at) == at + 1)
            continue;
        lines_exchange(job, at + 1, at + 1, &block, arena);
        return;
    }
}

static inline void job_change(struct fuzz *fuzz, struct job_lines *job,
                              const struct job_stock *stock, struct arena *arena)
{
    if (job->count == 0)
        return;
    switch (fuzz_below(fuzz, 6)) {
    case 0:
    case 1:
        change_number(fuzz, job, arena);
        break;
    case 2:
        take_away(fuzz, job, arena);
        break;
    case 3:
    case 4:
        exchange_block(fuzz, job, stock, arena);
        break;
    case 5:
        put_in(fuzz, job, stock, arena);
        break;
    }
}

#endif
