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
    /* job files of earlier visits that were looked at, whether they are there or not */
    const char **visit_paths;
    size_t visit_count;
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

/* One job to be made. archive->pdf must be open. */
struct job_files_request {
    const struct archive *archive;
    const char *path; /* of the job file */
    const char *output;
    struct arena *arena; /* everything of this job */
    struct diagnostics *diagnostics;
};

struct job_files_result {
    enum file_status failure; /* FILE_OK, or why `failed_path` could not be written */
    const char *failed_path;
    const char **inputs; /* what the files were made from: the job file, its photographs,
                            job files of earlier visits */
    size_t input_count;
};

/*
 * Make and write all files of a job below output/jobs/<name>/. With errors in the file only
 * summary.json is written, which says so; files of an earlier publish stay.
 */
struct job_files_result job_files_publish(const struct job_files_request *request);

#endif
