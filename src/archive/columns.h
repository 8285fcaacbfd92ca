/*
 * The archive as columns: every job, every part and every part measured again at a later visit, one
 * array a fact, each value a code into the column's dictionary. Read from the lines of
 * summaries.jsonl; what find, the list of the archive, the search and the statistics work on.
 *
 * Facts are texts as the summary gives them (numbers too); "" is unknown and always code 0.
 */
#ifndef ARCHIVE_COLUMNS_H
#define ARCHIVE_COLUMNS_H

#include "archive/dictionary.h"
#include "base/buffer.h"

/* X(enum, key in the summary, and in find) */
#define JOB_COLUMNS(X)                                                                             \
    X(JOB_NUMBER, "job")                                                                           \
    X(JOB_IN_PROGRESS, "in_progress") /* "true" or "false" */                                      \
    X(JOB_MAKER, "maker")                                                                          \
    X(JOB_MODEL, "model")                                                                          \
    X(JOB_CHASSIS, "chassis")                                                                      \
    X(JOB_SERIAL, "serial")                                                                        \
    X(JOB_DESCRIPTION, "description")                                                              \
    X(JOB_YEAR, "year")                                                                            \
    X(JOB_YEAR_FIRST, "year_first")                                                                \
    X(JOB_YEAR_LAST, "year_last")                                                                  \
    X(JOB_DECADE, "decade") /* "1950s": of the middle of the years */                              \
    X(JOB_SUPPLY, "supply")                                                                        \
    X(JOB_RECEIVED, "received")                                                                    \
    X(JOB_RETURNED, "returned")                                                                    \
    X(JOB_TECHNICIAN, "technician")                                                                \
    X(JOB_CALL_BACK, "call_back")                                                                  \
    X(JOB_CONTINUES, "continues")                                                                  \
    X(JOB_KEPT, "kept")                                                                            \
    X(JOB_OF, "of")                                                                                \
    X(JOB_FAILED, "failed")         /* capacitors that failed as found */                          \
    X(JOB_CAPACITORS, "capacitors") /* how many */                                                 \
    X(JOB_VALVES, "valves")         /* types, with commas */                                       \
    X(JOB_PAGE, "page")             /* its model's page: not in the summary */

#define PART_COLUMNS(X)                                                                            \
    X(PART_REF, "ref")                                                                             \
    X(PART_KIND, "kind") /* capacitor, resistor, winding, control, valve */                        \
    X(PART_TYPE, "type")                                                                           \
    X(PART_MAKER, "maker")                                                                         \
    X(PART_MARKED, "marked")                                                                       \
    X(PART_PLACE, "place")                                                                         \
    X(PART_VALVES, "valves") /* of the stages it serves; of a valve its type */                    \
    X(PART_WAS, "was")                                                                             \
    X(PART_DONE, "done")                                                                           \
    X(PART_OUTCOME, "outcome") /* as found */                                                      \
    X(PART_LEFT, "left")       /* outcome as left */                                               \
    X(PART_LEAKAGE, "leakage") /* uA on the bench, as found: "0.62", "<0.01" */                    \
    X(PART_LIMIT, "limit")     /* uA, at the same volts */                                         \
    X(PART_UNREAD, "unread")   /* "unread": replaced without a reading */                          \
    X(PART_FITTED, "fitted")                                                                       \
    X(PART_BATCH, "batch")

/* Parts that were kept at an earlier visit and are there again. */
#define AGAIN_COLUMNS(X)                                                                           \
    X(AGAIN_REF, "ref")                                                                            \
    X(AGAIN_TYPE, "type")                                                                          \
    X(AGAIN_YEARS, "years")                   /* between the visits */                             \
    X(AGAIN_LEAKAGE_FACTOR, "leakage_factor") /* now over then, at the same volts */               \
    X(AGAIN_VALUE_FACTOR, "value_factor")     /* capacitance or ohms, now over then */             \
    X(AGAIN_OUTCOME, "outcome")               /* as found now */

#define COLUMN_ENUM(name, key) name,
enum job_column { JOB_COLUMNS(COLUMN_ENUM) JOB_COLUMN_COUNT };
enum part_column { PART_COLUMNS(COLUMN_ENUM) PART_COLUMN_COUNT };
enum again_column { AGAIN_COLUMNS(COLUMN_ENUM) AGAIN_COLUMN_COUNT };

/* Keys by column, then NULL. */
extern const char *const job_column_keys[];
extern const char *const part_column_keys[];
extern const char *const again_column_keys[];

/* A job file with mistakes. */
struct broken_job {
    const char *name, *line; /* of summaries.jsonl */
    size_t line_length;
};

/* Where the line of a job stands in summaries.jsonl, in bytes; its line end counts. */
struct job_line {
    uint64_t offset, length;
};

struct columns {
    struct arena arena;      /* texts */
    struct buffer file_text; /* texts of columns that were read from a file of their own */
    struct column_data jobs[JOB_COLUMN_COUNT];
    struct column_data parts[PART_COLUMN_COUNT];
    struct column_data again[AGAIN_COLUMN_COUNT];
    struct column_data part_job, again_job; /* codes: index of the job; no dictionary */
    size_t job_count, part_count, again_count;
    struct job_line *lines; /* one a job */
    size_t line_capacity;
    uint64_t bytes; /* of summaries.jsonl so far */
    struct broken_job *broken;
    size_t broken_count, broken_capacity;
};

/*
 * Add the jobs of these lines of summaries.jsonl, which follow upon those added before. Returns how
 * many lines were no summary of this version and added nothing. {0} is empty and valid;
 * columns_release.
 */
size_t columns_add(struct columns *columns, const char *text, size_t length);

/* What codes of one archive's columns are in those of another: for columns_take. */
struct column_translation {
    const struct columns *from;
    struct arena arena;
    size_t next_part, next_again; /* rows of `from` behind those of the jobs taken */
    uint32_t *jobs[JOB_COLUMN_COUNT], *parts[PART_COLUMN_COUNT], *again[AGAIN_COLUMN_COUNT];
};

/* *from must stay as it is until column_translation_end. */
void column_translation_begin(struct column_translation *translation, const struct columns *from);
void column_translation_end(struct column_translation *translation);

/* Add job `job` of translation->from: every code comes out as if its line had been added. Jobs are
   taken in rising order. */
void columns_take(struct columns *columns, struct column_translation *translation, size_t job);

void columns_release(struct columns *columns);

/* The summary's version: a line of another one is made again. */
enum { SUMMARY_VERSION = 2 };

#endif
