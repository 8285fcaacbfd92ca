/* models/<page>.html: all jobs of one model, and how its parts fared from set to set. */
#include "archive/page_frame.h"

#include "archive/fold.h"
#include "base/memory.h"
#include "report/typography.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

enum { SLUG_BYTES_MAX = 60 };

/* "lindmere-tern-a42": folded, all else a hyphen. */
static void append_slug(struct buffer *slug, const char *text)
{
    struct buffer folded = {0};
    fold(&folded, text);
    for (size_t i = 0; i < folded.length && slug->length < SLUG_BYTES_MAX; i++) {
        char letter = folded.data[i];
        bool plain = (letter >= 'a' && letter <= 'z') || (letter >= '0' && letter <= '9');
        if (plain)
            buffer_byte(slug, letter);
        else if (slug->length && slug->data[slug->length - 1] != '-')
            buffer_byte(slug, '-');
    }
    buffer_release(&folded);
}

/* Maker and model as one key: the words as written. */
static void append_key(struct buffer *key, const struct columns *columns, size_t job)
{
    buffer_text(key, column_text(&columns->jobs[JOB_MAKER], job));
    buffer_byte(key, '\n');
    buffer_text(key, column_text(&columns->jobs[JOB_MODEL], job));
}

/* The page name of a model not met before: its slug, with a number when another has it already. */
static void name_page(struct columns *columns, struct dictionary *taken, size_t job,
                      struct buffer *name)
{
    append_slug(name, column_text(&columns->jobs[JOB_MAKER], job));
    if (name->length && name->data[name->length - 1] != '-')
        buffer_byte(name, '-');
    append_slug(name, column_text(&columns->jobs[JOB_MODEL], job));
    while (name->length && name->data[name->length - 1] == '-')
        name->length--;
    if (!name->length)
        buffer_text(name, "unnamed");
    size_t length = name->length;
    for (unsigned number = 2;; number++) {
        uint32_t known = taken->count;
        if (dictionary_code(taken, &columns->arena, name->data, name->length) >= known)
            return;
        name->length = length;
        buffer_print(name, "-%u", number);
    }
}

void page_models_name(struct columns *columns)
{
    struct dictionary models = {0}, taken = {0};
    struct buffer key = {0}, name = {0};
    uint32_t *pages = memory_get((columns->job_count + 2) * sizeof *pages);
    struct column_data *column = &columns->jobs[JOB_PAGE];
    column->count = 0;
    dictionary_code(&taken, &columns->arena, "", 0);
    dictionary_code(&models, &columns->arena, "", 0);
    for (size_t job = 0; job < columns->job_count; job++) {
        buffer_clear(&key);
        append_key(&key, columns, job);
        uint32_t known = models.count;
        uint32_t model = dictionary_code(&models, &columns->arena, key.data, key.length);
        if (model >= known) {
            buffer_clear(&name);
            name_page(columns, &taken, job, &name);
            pages[model] = (uint32_t)job; /* the first of its kind */
            column_push(column, &columns->arena, name.data, name.length);
        } else {
            const char *page = column_text(column, pages[model]);
            column_push(column, &columns->arena, page, strlen(page));
        }
    }
    free(pages);
    dictionary_release(&models);
    dictionary_release(&taken);
    buffer_release(&key);
    buffer_release(&name);
}

/* ---- one page */

/* How the part with one ref fared in all sets of a model. */
struct part_line {
    uint32_t ref, marked, place, type; /* codes; of the first set that has it */
    unsigned sets, read, failed;
};

struct model_work {
    struct page_frame *frame;
    size_t *first_part; /* of each job; job_count + 1 of them */
    uint32_t *line_of;  /* by code of ref: index + 1 of its line, 0: none */
    struct part_line *lines;
    size_t line_count, line_capacity;
    uint32_t capacitor; /* code of the kind */
};

static void count_part(struct model_work *work, size_t part)
{
    const struct columns *columns = work->frame->columns;
    const struct column_data *parts = columns->parts;
    uint32_t ref = parts[PART_REF].codes[part];
    if (!work->line_of[ref]) {
        work->lines = arena_grow(work->frame->arena, work->lines, work->line_count,
                                 &work->line_capacity, sizeof *work->lines);
        work->lines[work->line_count++] = (struct part_line){ref,
                                                             parts[PART_MARKED].codes[part],
                                                             parts[PART_PLACE].codes[part],
                                                             parts[PART_TYPE].codes[part],
                                                             0,
                                                             0,
                                                             0};
        work->line_of[ref] = (uint32_t)work->line_count;
    }
    struct part_line *line = &work->lines[work->line_of[ref] - 1];
    const char *outcome = column_text(&parts[PART_OUTCOME], part);
    bool read = *outcome && strcmp(outcome, outcome_text(OUTCOME_NOT_JUDGED)) != 0;
    line->sets++;
    line->read += read;
    line->failed += strcmp(outcome, outcome_text(OUTCOME_FAIL)) == 0;
}

static void count_parts(struct model_work *work, const size_t *jobs, size_t count)
{
    const struct columns *columns = work->frame->columns;
    work->line_count = 0;
    for (size_t i = 0; i < count; i++) {
        if (columns->jobs[JOB_CONTINUES].codes[jobs[i]])
            continue; /* the same set again */
        for (size_t part = work->first_part[jobs[i]]; part < work->first_part[jobs[i] + 1]; part++)
            if (columns->parts[PART_KIND].codes[part] == work->capacitor)
                count_part(work, part);
    }
    for (size_t i = 0; i < work->line_count; i++)
        work->line_of[work->lines[i].ref] = 0;
}

static const char *entry_text(const struct column_data *column, uint32_t code)
{
    const char *text = column->dictionary.entries[code].text;
    return *text ? text : NULL;
}

/* The shop's words for a place or a type of the summaries. */
static const char *entry_phrase(const struct model_work *work, const char *group,
                                const struct column_data *column, uint32_t code)
{
    const char *key = entry_text(column, code);
    return key ? phrase_in(&work->frame->say, group, key) : NULL;
}

static struct mustache_value *part_rows(struct model_work *work)
{
    struct arena *arena = work->frame->arena;
    const struct column_data *parts = work->frame->columns->parts;
    struct mustache_value *rows = mustache_list(arena);
    for (size_t i = 0; i < work->line_count; i++) {
        const struct part_line *line = &work->lines[i];
        struct mustache_value *row = mustache_map(arena);
        mustache_set_text(arena, row, "ref", entry_text(&parts[PART_REF], line->ref));
        mustache_set_text(arena, row, "marked",
                          text_typeset(arena, entry_text(&parts[PART_MARKED], line->marked)));
        mustache_set_text(arena, row, "place",
                          entry_phrase(work, "place", &parts[PART_PLACE], line->place));
        mustache_set_text(arena, row, "type",
                          entry_phrase(work, "type", &parts[PART_TYPE], line->type));
        mustache_set_text(arena, row, "sets", arena_print(arena, "%u", line->sets));
        mustache_set_text(arena, row, "read", arena_print(arena, "%u", line->read));
        mustache_set_text(arena, row, "failed", arena_print(arena, "%u", line->failed));
        mustache_set_flag(arena, row, "any_failed", line->failed > 0);
        mustache_push(arena, rows, row);
    }
    return rows;
}

static enum file_status write_model(struct model_work *work, const size_t *jobs, size_t count)
{
    struct page_frame *frame = work->frame;
    const struct columns *columns = frame->columns;
    /* Pages are made one by one: their values need not stay. */
    struct arena own = {0}, *whole = frame->arena;
    frame->arena = &own;
    struct mustache_value *values = page_values(frame), *sets = mustache_list(&own);
    const char *maker = column_text(&columns->jobs[JOB_MAKER], jobs[0]);
    const char *model = column_text(&columns->jobs[JOB_MODEL], jobs[0]);
    mustache_set_text(&own, values, "maker", *maker ? maker : NULL);
    mustache_set_text(&own, values, "model", *model ? model : NULL);
    mustache_set_text(&own, values, "count", arena_print(&own, "%zu", count));
    mustache_set_flag(&own, values, "several", count > 1);
    for (size_t i = count; i > 0; i--)
        mustache_push(&own, sets, page_job_row(frame, jobs[i - 1]));
    mustache_set(&own, values, "sets", sets);
    work->lines = NULL;
    work->line_capacity = 0;
    count_parts(work, jobs, count);
    mustache_set(&own, values, "parts", part_rows(work));
    mustache_set_flag(&own, values, "any_parts", work->line_count > 0);
    enum file_status status = page_write(
        frame, "model.html", values,
        arena_print(&own, "models/%s.html", column_text(&columns->jobs[JOB_PAGE], jobs[0])));
    frame->arena = whole;
    arena_release(&own);
    return status;
}

/* ---- all pages */

/* Pages of models that are gone. */
static enum file_status remove_gone(const struct page_frame *frame)
{
    const struct dictionary *pages = &frame->columns->jobs[JOB_PAGE].dictionary;
    struct dictionary known = {0};
    struct arena arena = {0};
    for (uint32_t code = 1; code < pages->count; code++) {
        const char *name = arena_print(&arena, "%s.html", pages->entries[code].text);
        dictionary_code(&known, &arena, name, strlen(name));
    }
    const char *folder = arena_print(&arena, "%s/models", frame->output);
    struct folder_names found;
    enum file_status status = folder_list(folder, &arena, &found);
    status = status == FILE_MISSING ? FILE_OK : status; /* no job names a model */
    for (size_t i = 0; i < found.count && status == FILE_OK; i++) {
        const char *name = found.names[i];
        uint32_t before = known.count;
        if (name[0] == '.')
            continue;
        uint32_t code = dictionary_code(&known, &arena, name, strlen(name));
        if (code >= before && unlink(arena_print(&arena, "%s/%s", folder, name)) != 0)
            status = FILE_FAILED;
    }
    dictionary_release(&known);
    arena_release(&arena);
    return status;
}

static size_t *first_parts(const struct page_frame *frame)
{
    const struct columns *columns = frame->columns;
    size_t *first = arena_array(frame->arena, columns->job_count + 1, sizeof *first), part = 0;
    for (size_t job = 0; job <= columns->job_count; job++) {
        while (part < columns->part_count && columns->part_job.codes[part] < job)
            part++;
        first[job] = part;
    }
    return first;
}

enum file_status page_models_write(struct page_frame *frame)
{
    const struct columns *columns = frame->columns;
    const struct column_data *pages = &columns->jobs[JOB_PAGE];
    struct model_work work = {.frame = frame, .first_part = first_parts(frame)};
    work.capacitor = dictionary_find(&columns->parts[PART_KIND].dictionary, "capacitor");
    work.line_of = arena_array(frame->arena, columns->parts[PART_REF].dictionary.count + 1,
                               sizeof *work.line_of);
    /* Jobs by page, in order: starts by counting, then filling. */
    uint32_t count = pages->dictionary.count;
    size_t *start = arena_array(frame->arena, (size_t)count + 2, sizeof *start);
    size_t *jobs = arena_array(frame->arena, columns->job_count + 1, sizeof *jobs);
    for (size_t job = 0; job < columns->job_count; job++)
        start[pages->codes[job] + 2]++;
    for (uint32_t code = 2; code < count + 2; code++)
        start[code] += start[code - 1];
    for (size_t job = 0; job < columns->job_count; job++)
        jobs[start[pages->codes[job] + 1]++] = job;
    enum file_status status = folder_make(arena_print(frame->arena, "%s/models", frame->output));
    if (status == FILE_OK)
        status = remove_gone(frame);
    if (status != FILE_OK)
        buffer_print(frame->failed, "%s/models", frame->output);
    for (uint32_t code = 1; code < count && status == FILE_OK; code++)
        if (start[code + 1] > start[code])
            status = write_model(&work, jobs + start[code], start[code + 1] - start[code]);
    return status;
}
