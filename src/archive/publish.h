/*
 * Publishing: every job of an archive into an output folder, and the pages over all of them.
 */
#ifndef ARCHIVE_PUBLISH_H
#define ARCHIVE_PUBLISH_H

#include "archive/archive.h"

/* What happened to one job, told in the order of names while others are still being made. */
struct publish_event {
    const char *job;
    size_t done, of;                       /* how many jobs are finished, of how many */
    const struct diagnostics *diagnostics; /* of this job */
};
typedef void (*publish_listener)(const struct publish_event *event, void *context);

enum { PUBLISH_THREADS_MAX = 64 };

struct publish_request {
    const char *output;           /* folder to publish into */
    const char *const *job_paths; /* these jobs only; count 0: all of the archive */
    size_t job_path_count;
    bool pages_only;
    bool wait;                 /* for another publish into the same folder to end */
    unsigned threads;          /* at most PUBLISH_THREADS_MAX; 0: two */
    publish_listener listener; /* called from one thread at a time; never NULL */
    void *listener_context;
};

struct publish_result {
    size_t jobs, unchanged, broken, warned; /* warned: jobs with warnings, unchanged ones too */
    bool pages_wrong;                       /* a template of the pages has mistakes */
    bool busy;                /* another publish holds the output folder: nothing was done */
    long holder;              /* its process number, 0: not known */
    enum file_status failure; /* FILE_OK, or the first file that could not be written */
    const char *failed_path;
};

/*
 * Whether a folder may be published into. In its jobs/ and models/ publish removes what it does not
 * make any more, so these must not be somebody else's. *folder: the one that is in the way.
 */
enum output_kind {
    OUTPUT_GOOD,
    OUTPUT_IS_ARCHIVE,
    OUTPUT_IS_FOREIGN /* jobs/ or models/ are there, and no publish made them */
};
enum output_kind publish_output_kind(const char *output, struct arena *arena, const char **folder);

/* archive->pdf must be open. Strings of the result belong to the arena. */
struct publish_result publish(const struct archive *archive, const struct publish_request *request,
                              struct arena *arena);

#endif
