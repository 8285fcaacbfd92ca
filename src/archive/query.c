#include "archive/query.h"

#include "archive/fold.h"
#include "quantity/quantity.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

const enum job_column query_job_words[] = {
    JOB_NUMBER, JOB_MAKER,    JOB_MODEL,    JOB_CHASSIS,    JOB_SERIAL, JOB_DESCRIPTION, JOB_YEAR,
    JOB_SUPPLY, JOB_RECEIVED, JOB_RETURNED, JOB_TECHNICIAN, JOB_VALVES, JOB_COLUMN_COUNT};
const enum part_column query_part_words[] = {
    PART_REF, PART_KIND, PART_TYPE,    PART_MAKER,  PART_MARKED, PART_PLACE,       PART_VALVES,
    PART_WAS, PART_DONE, PART_OUTCOME, PART_FITTED, PART_BATCH,  PART_COLUMN_COUNT};
const char *const query_exact_keys[] = {"kind",   "type",   "place",   "was",
                                        "done",   "left",   "outcome", "in_progress",
                                        "supply", "decade", "unread",  NULL};

/* A column of parts of which some values meet a term. */
struct part_test {
    const uint32_t *codes;
    const bool *meets; /* by code */
};
struct term {
    bool *jobs; /* by job */
    struct part_test tests[PART_COLUMN_COUNT];
    size_t test_count;
    bool known;
};

struct query_work {
    const struct columns *columns;
    struct arena *arena;
    struct term *terms;
    size_t count;
};

/* ---- from a term to what meets it */

static bool meets_text(const char *folded, const char *value, bool exact)
{
    if (!*value)
        return *folded != '\0';
    return exact ? strcmp(folded, value) == 0 : fold_begins_word(folded, value);
}

/* Which codes meet it; NULL: none. */
static const bool *mask_of(const struct query_work *work, const struct column_data *column,
                           const char *value, bool exact)
{
    bool *mask = arena_array(work->arena, column->dictionary.count + 1, sizeof *mask), any = false;
    struct buffer folded = {0};
    for (uint32_t code = 1; code < column->dictionary.count; code++) {
        buffer_clear(&folded);
        fold(&folded, column->dictionary.entries[code].text);
        mask[code] = meets_text(buffer_string(&folded), value, exact);
        any = any || mask[code];
    }
    buffer_release(&folded);
    return any ? mask : NULL;
}

static void add_jobs(const struct query_work *work, struct term *term, enum job_column index,
                     const char *value, bool exact)
{
    const struct column_data *column = &work->columns->jobs[index];
    const bool *mask = mask_of(work, column, value, exact);
    for (size_t job = 0; mask && job < work->columns->job_count; job++)
        term->jobs[job] = term->jobs[job] || mask[column->codes[job]];
}

static void add_parts(const struct query_work *work, struct term *term, enum part_column index,
                      const char *value, bool exact)
{
    const struct column_data *column = &work->columns->parts[index];
    const bool *mask = mask_of(work, column, value, exact);
    if (mask)
        term->tests[term->test_count++] = (struct part_test){column->codes, mask};
}

static const char *date_of(const struct columns *columns, size_t job)
{
    const char *returned = column_text(&columns->jobs[JOB_RETURNED], job);
    return *returned ? returned : column_text(&columns->jobs[JOB_RECEIVED], job);
}

static bool meets_year(const struct columns *columns, size_t job, const char *value)
{
    char *end;
    long from = strtol(value, &end, 10), to = from;
    if (strncmp(end, "..", 2) == 0)
        to = end[2] ? strtol(end + 2, NULL, 10) : 9999;
    double first = column_number(&columns->jobs[JOB_YEAR_FIRST], job),
           last = column_number(&columns->jobs[JOB_YEAR_LAST], job);
    return first > 0 && first <= (double)to && last >= (double)from;
}

/* At or before a date that may be cut short: 2031-02 is to the end of February. */
static bool is_until(const char *date, const char *value)
{
    return *date && strncmp(date, value, strlen(value)) <= 0;
}

/* Facts worked out of columns; false: the key is none of these. */
static bool take_special(const struct query_work *work, struct term *term, const char *key,
                         const char *value)
{
    const struct columns *columns = work->columns;
    bool year = strcmp(key, "year") == 0, from = strcmp(key, "from") == 0,
         to = strcmp(key, "to") == 0, due = strcmp(key, "due") == 0;
    if (!year && !from && !to && !due)
        return false;
    for (size_t job = 0; job < columns->job_count; job++) {
        const char *date = date_of(columns, job);
        term->jobs[job] = year   ? meets_year(columns, job, value)
                          : from ? *date && strcmp(date, value) >= 0
                          : to   ? is_until(date, value)
                                 : is_until(column_text(&columns->jobs[JOB_CALL_BACK], job), value);
    }
    return true;
}

static bool is_exact(const char *key)
{
    for (size_t i = 0; query_exact_keys[i]; i++)
        if (strcmp(query_exact_keys[i], key) == 0)
            return true;
    return false;
}

static void take_pair(const struct query_work *work, struct term *term, const char *key,
                      const char *value)
{
    if (strcmp(key, "valve") == 0)
        key = "valves";
    term->known = take_special(work, term, key, value);
    if (term->known || strcmp(key, job_column_keys[JOB_PAGE]) == 0)
        return;
    bool exact = is_exact(key);
    for (int i = 0; i < JOB_COLUMN_COUNT; i++)
        if (strcmp(job_column_keys[i], key) == 0) {
            term->known = true;
            add_jobs(work, term, (enum job_column)i, value, exact);
        }
    for (int i = 0; i < PART_COLUMN_COUNT; i++)
        if (strcmp(part_column_keys[i], key) == 0) {
            term->known = true;
            add_parts(work, term, (enum part_column)i, value, exact);
        }
}

static void take_word(const struct query_work *work, struct term *term, const char *word)
{
    term->known = true;
    for (size_t i = 0; query_job_words[i] != JOB_COLUMN_COUNT; i++)
        add_jobs(work, term, query_job_words[i], word, false);
    for (size_t i = 0; query_part_words[i] != PART_COLUMN_COUNT; i++)
        add_parts(work, term, query_part_words[i], word, false);
}

/* The length of a key before `=`; 0: a word. */
static size_t key_length(const char *term)
{
    size_t length = strspn(term, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_");
    return term[length] == '=' ? length : 0;
}

/* Dates are compared as texts: 2031, 2031-02 and 2031-02-10 are good, 3/2/31 is not. */
static bool takes_date(const char *key, size_t length)
{
    static const char *const keys[] = {"from", "to", "due"};
    for (size_t i = 0; i < sizeof keys / sizeof *keys; i++)
        if (strlen(keys[i]) == length && strncasecmp(key, keys[i], length) == 0)
            return true;
    return false;
}

const char *query_mistake(const char *term, struct arena *arena)
{
    size_t length = key_length(term);
    if (!length)
        return NULL;
    const char *value = term + length + 1;
    if (!*value)
        return arena_print(arena, "nothing stands behind '%s'", term);
    if (!takes_date(term, length) || strspn(value, "0123456789-") == strlen(value))
        return NULL;
    return arena_print(arena, "'%s' is no date: %s", value, date_hint(arena, value, strlen(value)));
}

static const char *folded_trimmed(const struct query_work *work, const char *text, size_t length)
{
    while (length && strchr(" \t\"", *text)) {
        text++;
        length--;
    }
    while (length && strchr(" \t\"", text[length - 1]))
        length--;
    struct buffer folded = {0};
    fold(&folded, arena_text(work->arena, text, length));
    const char *kept = arena_text(work->arena, folded.data, folded.length);
    buffer_release(&folded);
    return kept;
}

/* false: the pair's name is not known. */
static bool compile(const struct query_work *work, struct term *term, const char *text)
{
    size_t length = key_length(text);
    term->jobs = arena_array(work->arena, work->columns->job_count + 1, sizeof *term->jobs);
    const char *value_start = length ? text + length + 1 : text;
    const char *value = folded_trimmed(work, value_start, strlen(value_start));
    if (length)
        take_pair(work, term, folded_trimmed(work, text, length), value);
    else
        take_word(work, term, value);
    return term->known;
}

/* ---- from the terms to the hits */

static bool part_meets(const struct term *term, size_t part)
{
    for (size_t i = 0; i < term->test_count; i++)
        if (term->tests[i].meets[term->tests[i].codes[part]])
            return true;
    return false;
}

/* Every term that the set does not meet, and at least one. */
static bool is_part_hit(const struct query_work *work, size_t job, size_t part)
{
    bool any_needed = false, any_met = false;
    for (size_t i = 0; i < work->count; i++) {
        const struct term *term = &work->terms[i];
        if (!term->jobs[job]) {
            any_needed = true;
            if (!part_meets(term, part))
                return false;
        } else if (!any_met) {
            any_met = part_meets(term, part);
        }
    }
    return any_needed || any_met;
}

static bool job_meets_all(const struct query_work *work, size_t job)
{
    for (size_t i = 0; i < work->count; i++)
        if (!work->terms[i].jobs[job])
            return false;
    return true;
}

static void collect(const struct query_work *work, struct query_hits *hits)
{
    const struct columns *columns = work->columns;
    hits->parts = arena_array(work->arena, columns->part_count + 1, sizeof *hits->parts);
    hits->jobs = arena_array(work->arena, columns->job_count + 1, sizeof *hits->jobs);
    size_t part = 0;
    for (size_t job = 0; job < columns->job_count; job++) {
        size_t before = hits->part_count;
        for (; part < columns->part_count && columns->part_job.codes[part] == job; part++)
            if (is_part_hit(work, job, part))
                hits->parts[hits->part_count++] = part;
        if (hits->part_count > before || job_meets_all(work, job))
            hits->jobs[hits->job_count++] = job;
    }
}

struct query_hits query_run(const struct columns *columns, const char *const *terms, size_t count,
                            struct arena *arena)
{
    struct query_hits hits = {0};
    struct query_work work = {columns, arena, arena_array(arena, count, sizeof(struct term)),
                              count};
    for (size_t i = 0; i < count; i++)
        if (!compile(&work, &work.terms[i], terms[i])) {
            hits.unknown_key = arena_text(arena, terms[i], key_length(terms[i]));
            return hits;
        }
    collect(&work, &hits);
    return hits;
}
