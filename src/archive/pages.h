/*
 * The pages over all jobs: list, search, models, statistics, and summaries.jsonl that they are made
 * from.
 */
#ifndef ARCHIVE_PAGES_H
#define ARCHIVE_PAGES_H

#include "archive/archive.h"

/* What of the pages may be taken over from the last time. */
struct pages_request {
    const struct archive *archive;
    const char *output;
    const char *setting; /* setting_hash: noted with the pages */
    /* The names of the jobs whose summaries may differ from the lines in summaries.jsonl, sorted;
       NULL: any may. */
    const struct job_names *changed;
};

/*
 * Write index.html, search.js, search-data.js, statistics.html, the CSV files, models/ and
 * summaries.jsonl into `output` from jobs/<job>/summary.json of every job of the archive; folders
 * of jobs that are gone are removed. *failed: the path, on failure. Mistakes of the templates are
 * appended to diagnostics; what could be rendered is written.
 */
enum file_status pages_publish(const struct pages_request *request, struct diagnostics *diagnostics,
                               struct buffer *failed);

/* Whether the pages were written whole by a program with this setting and none was begun since. */
bool pages_are_whole(const char *output, const char *setting);

/* The pages do not show what the jobs' folders hold: make all of them anew next time. */
void pages_forget(const char *output);

#endif
