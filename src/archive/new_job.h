/*
 * A new job file in an archive, never over one that is there.
 */
#ifndef ARCHIVE_NEW_JOB_H
#define ARCHIVE_NEW_JOB_H

#include "base/diagnostic.h"
#include "base/file.h"

struct new_job_request {
    const char *archive_folder;
    const char *number;   /* of the new job */
    const char *received; /* today, "2031-02-03" */
    const char *like;     /* number of an earlier job of the archive, or the path of its file (it
                             ends in .yaml); NULL: none */
};

enum new_job_status {
    NEW_JOB_DONE,
    NEW_JOB_NUMBER,       /* no job can have this number */
    NEW_JOB_THERE,        /* `path` is there already, perhaps in another case */
    NEW_JOB_LIKE_MISSING, /* `path` cannot be read: `failure` */
    NEW_JOB_FAILED        /* `path` cannot be written: `failure` */
};

struct new_job {
    enum new_job_status status;
    const char *path; /* in the arena */
    enum file_status failure;
};

/* Write the file. Mistakes in the earlier job are appended to diagnostics and hinder nothing. */
struct new_job new_job(const struct new_job_request *request, struct arena *arena,
                       struct diagnostics *diagnostics);

#endif
