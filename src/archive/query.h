/*
 * Searching the columns of an archive: terms as typed, parts and jobs that meet them.
 *
 * A word is met by a fact in which a word begins so; `key=value` by the fact of that name (fixed
 * choices whole, free text where a word begins so). All terms must be met. A part is found when it
 * meets every term that its set does not, and at least one itself; a job when it meets all, or has
 * a part that is found. The search script of the pages follows the same rules from the same lists.
 */
#ifndef ARCHIVE_QUERY_H
#define ARCHIVE_QUERY_H

#include "archive/columns.h"

/* Columns that a bare word is looked for in, and keys whose value must be met whole; ended by
   JOB_COLUMN_COUNT, PART_COLUMN_COUNT and NULL. */
extern const enum job_column query_job_words[];
extern const enum part_column query_part_words[];
extern const char *const query_exact_keys[];

struct query_hits {
    size_t *parts, part_count; /* rows of the part columns, in order */
    size_t *jobs, job_count;
    const char *unknown_key; /* a pair of no known name; nothing is found then. NULL: none */
};

/* What is wrong with a term, whatever the archive holds: a pair without a value, a date in another
   form than year-month-day, which may be cut short. NULL: nothing. */
const char *query_mistake(const char *term, struct arena *arena);

/* terms: each a word, several words to be met together, or key=value. Result in the arena. */
struct query_hits query_run(const struct columns *columns, const char *const *terms, size_t count,
                            struct arena *arena);

#endif
