/*
 * The summary of a job: one JSON object on one line, jobs/<job>/summary.json. What `find`, the
 * index and the statistics read; never what a client sees.
 */
#ifndef ARCHIVE_SUMMARY_H
#define ARCHIVE_SUMMARY_H

#include "assess/findings.h"
#include "base/buffer.h"

/* Of a job that was published. report_explain first. */
void summary_write(const struct findings *findings, struct buffer *out);

/* Of a job whose file has mistakes: its name and diagnostics. */
void summary_write_broken(const char *name, const struct diagnostics *diagnostics,
                          struct buffer *out);

#endif
