/*
 * All files of one job: the three copies as Markdown, HTML and PDF, the bench sheet, pictures,
 * findings, manifest and summary.
 */
#ifndef ARCHIVE_JOB_FILES_H
#define ARCHIVE_JOB_FILES_H

#include "archive/archive.h"
#include "archive/folder_image.h"
#include "assess/findings.h"

/* A job file read and assessed. Everything belongs to the arena. */
struct opened_job {
    const struct job *job;
    struct findings
        *findings; /* the shop's copy, explained; with errors: from what could be read */
};

/*
 * Read and assess the file `path` (`-`: standard input). Diagnostics are appended; when
 * diagnostics->errors grew the job must not be published.
 */
struct opened_job job_open(const struct archive *archive, const char *path, struct arena *arena,
                           struct diagnostics *diagnostics);

/* "2031-014" of "jobs/2031-014.yaml". */
const char *job_name_of(const char *path, struct arena *arena);

enum { JOB_DEFLATE_LEVEL = 1 };

/*
 * Make and write all files of a job below `output`/jobs/<name>/. With errors in the file only
 * summary.json is written, which says so; files of an earlier publish stay. FILE_OK, or what
 * failed, with the path in *failed. archive->pdf must be open.
 */
enum file_status job_files_publish(const struct archive *archive, const char *path,
                                   const char *output, struct arena *arena,
                                   struct diagnostics *diagnostics, struct buffer *failed);

#endif
