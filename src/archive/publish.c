#include "archive/publish.h"

#include "archive/job_files.h"
#include "archive/pages.h"
#include "base/memory.h"

#include <pthread.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

/* One job under way or finished. */
struct job_work {
    const char *path;
    bool finished;
    struct arena arena;
    struct diagnostics diagnostics;
    enum file_status status;
    struct buffer failed;
};

/* Shared by the threads; `mutex` guards all but archive and request. */
struct publish_work {
    const struct archive *archive;
    const struct publish_request *request;
    struct publish_result *result;
    struct arena *arena;
    pthread_mutex_t mutex;
    struct job_work *jobs;
    size_t count, next, told;
};

static void keep_failure(struct publish_work *work, const struct job_work *job)
{
    if (job->status == FILE_OK || work->result->failure != FILE_OK)
        return;
    work->result->failure = job->status;
    work->result->failed_path = arena_text(work->arena, job->failed.data, job->failed.length);
}

/* Tell of the jobs that are finished, in order, and give their memory back. */
static void tell_finished(struct publish_work *work)
{
    for (; work->told < work->count && work->jobs[work->told].finished; work->told++) {
        struct job_work *job = &work->jobs[work->told];
        struct publish_event event = {job_name_of(job->path, &job->arena), work->told + 1,
                                      work->count, &job->diagnostics};
        work->request->listener(&event, work->request->listener_context);
        work->result->broken += job->diagnostics.errors > 0;
        work->result->warnings += job->diagnostics.warnings;
        keep_failure(work, job);
        buffer_release(&job->failed);
        arena_release(&job->arena);
    }
}

static struct job_work *next_job(struct publish_work *work)
{
    pthread_mutex_lock(&work->mutex);
    bool more = work->next < work->count && work->result->failure == FILE_OK;
    struct job_work *job = more ? &work->jobs[work->next++] : NULL;
    pthread_mutex_unlock(&work->mutex);
    return job;
}

static void *publish_jobs(void *context)
{
    struct publish_work *work = context;
    for (struct job_work *job; (job = next_job(work));) {
        job->diagnostics = diagnostics_in(&job->arena);
        job->status = job_files_publish(work->archive, job->path, work->request->output,
                                        &job->arena, &job->diagnostics, &job->failed);
        diagnostics_sort(&job->diagnostics);
        pthread_mutex_lock(&work->mutex);
        job->finished = true;
        tell_finished(work);
        pthread_mutex_unlock(&work->mutex);
    }
    return NULL;
}

static void run_threads(struct publish_work *work)
{
    enum { THREADS_MAX = 64 };
    pthread_t threads[THREADS_MAX];
    unsigned wanted = work->request->threads ? work->request->threads : 2;
    wanted = wanted > THREADS_MAX ? THREADS_MAX : wanted;
    unsigned started = 0;
    while (started + 1 < wanted && started + 1 < work->count &&
           pthread_create(&threads[started], NULL, publish_jobs, work) == 0)
        started++;
    publish_jobs(work);
    for (unsigned i = 0; i < started; i++)
        pthread_join(threads[i], NULL);
}

static struct job_work *list_work(const struct archive *archive,
                                  const struct publish_request *request, struct arena *arena,
                                  size_t *count)
{
    struct job_names names = {0};
    if (request->job_path_count == 0)
        archive_job_names(archive->folder, arena, &names);
    *count = request->job_path_count ? request->job_path_count : names.count;
    struct job_work *jobs = arena_array(arena, *count, sizeof *jobs);
    for (size_t i = 0; i < *count; i++)
        jobs[i].path = request->job_path_count
                           ? request->job_paths[i]
                           : arena_print(arena, "%s/%s.yaml", archive->folder, names.names[i]);
    return jobs;
}

struct publish_result publish(const struct archive *archive, const struct publish_request *request,
                              struct arena *arena)
{
    struct publish_result result = {0};
    struct publish_work work = {
        .archive = archive, .request = request, .result = &result, .arena = arena};
    if (!request->pages_only) {
        pthread_mutex_init(&work.mutex, NULL);
        work.jobs = list_work(archive, request, arena, &work.count);
        run_threads(&work);
        pthread_mutex_destroy(&work.mutex);
        result.jobs = work.count;
    }
    if (request->job_path_count == 0 && result.failure == FILE_OK) {
        struct buffer failed = {0};
        result.failure = pages_publish(archive, request->output, &failed);
        if (result.failure != FILE_OK)
            result.failed_path = arena_text(arena, failed.data, failed.length);
        buffer_release(&failed);
    }
    return result;
}
