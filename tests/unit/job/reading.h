/*
 * A job file in a test: text in, job and diagnostics out.
 */
#ifndef TESTS_UNIT_JOB_READING_H
#define TESTS_UNIT_JOB_READING_H

#include "job/job.h"

#include <string.h>

struct reading_of_text {
    struct arena arena;
    struct diagnostics diagnostics;
    struct source source;
    const struct job *job;
};

/* Read text as the file "1.yaml". Release with reading_release. */
static inline void read_text(struct reading_of_text *reading, const char *text)
{
    *reading = (struct reading_of_text){.source = {"1.yaml", text, strlen(text)}};
    reading->diagnostics = diagnostics_in(&reading->arena);
    reading->job = job_read(&reading->source, &reading->arena, &reading->diagnostics);
}

static inline void reading_release(struct reading_of_text *reading)
{
    arena_release(&reading->arena);
}

/* How many diagnostics of this code. */
static inline size_t count_of(const struct diagnostics *diagnostics, enum diagnostic_code code)
{
    size_t count = 0;
    for (size_t i = 0; i < diagnostics->count; i++)
        count += diagnostics->items[i].code == code;
    return count;
}

#endif
