/*
 * The pages over all jobs: the list of the archive, made from the jobs' summaries.
 */
#ifndef ARCHIVE_PAGES_H
#define ARCHIVE_PAGES_H

#include "archive/archive.h"

/* Write index.html and summaries.jsonl into `output` from jobs/<job>/summary.json of every job of
   the archive; folders of jobs that are gone are removed. *failed: the path, on failure. */
enum file_status pages_publish(const struct archive *archive, const char *output,
                               struct buffer *failed);

#endif
