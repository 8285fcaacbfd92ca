#include "archive/publish.h"

#include "archive/job_files.h"
#include "archive/lock.h"
#include "archive/pages.h"
#include "archive/setting.h"
#include "archive/state.h"

#include <assert.h>
#include <pthread.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

/* One job under way or finished. */
struct job_work {
    const char *path, *name;
    const char *twin; /* another job of the same name, but for case perhaps; NULL: none */
    bool finished;
    struct timespec began;
    bool was_unsettled;      /* before this run */
    struct state_job *old;   /* what the pages show of it; NULL: nothing, or not known */
    struct state_job *state; /* what its files were made from; in the publish's own arena */
    struct arena arena;      /* of the job, given back when it has been told */
    struct diagnostics diagnostics;
    struct job_files_result files;
};

/* Shared by the threads; `mutex` guards all but archive, request, setting and lock. */
struct publish_work {
    const struct archive *archive;
    const struct publish_request *request;
    struct publish_result *result;
    struct arena *arena;
    char setting[HASH_TEXT_BYTES];
    struct lock lock;
    bool named; /* these jobs only */
    pthread_mutex_t mutex;
    struct job_work *jobs;
    size_t count, next, told;
};

/* Whether a file may have changed since: as files are stamped, by the coarse clock. */
static bool changed_since(const char *path, const struct timespec *began)
{
    struct stat about;
    if (stat(path, &about) != 0)
        return false;
    return about.st_ctim.tv_sec != began->tv_sec ? about.st_ctim.tv_sec > began->tv_sec
                                                 : about.st_ctim.tv_nsec >= began->tv_nsec;
}

/* Note what a job was made from, for the next run. Inputs are noted after they were read: where one
   may have changed in between nothing is noted, and the job is made again. */
static void note_state(struct publish_work *work, struct job_work *job)
{
    struct state_job *state = arena_get(work->arena, sizeof *state);
    state->name = job->name;
    memcpy(state->setting, work->setting, HASH_TEXT_BYTES);
    state->broken = job->diagnostics.errors > 0;
    state->warned = job->diagnostics.warnings > 0;
    state_note_summary(work->request->output, job->name, state->summary);
    state->inputs = arena_array(work->arena, job->files.input_count, sizeof *state->inputs);
    for (size_t i = 0; i < job->files.input_count; i++)
        state->input_count +=
            state_note_input(job->files.inputs[i], work->arena, &state->inputs[state->input_count]);
    for (size_t i = 0; i < job->files.input_count; i++)
        if (changed_since(job->files.inputs[i], &job->began))
            return;
    job->state = state;
}

static void count_job(struct publish_work *work, struct job_work *job)
{
    struct publish_result *result = work->result;
    result->broken += job->diagnostics.errors > 0;
    result->warned += job->diagnostics.warnings > 0;
    if (job->files.failure != FILE_OK && result->failure == FILE_OK) {
        result->failure = job->files.failure;
        result->failed_path = arena_copy(work->arena, job->files.failed_path);
    }
}

/* Tell of the jobs that are finished, in order, and give their memory back. */
static void tell_finished(struct publish_work *work)
{
    for (; work->told < work->count && work->jobs[work->told].finished; work->told++) {
        struct job_work *job = &work->jobs[work->told];
        if (!job->diagnostics.arena)
            continue; /* unchanged: nothing to tell */
        struct publish_event event = {job->name, work->told + 1, work->count, &job->diagnostics};
        work->request->listener(&event, work->request->listener_context);
        count_job(work, job);
        if (job->files.failure == FILE_OK)
            note_state(work, job);
        arena_release(&job->arena);
    }
}

static struct job_work *next_job(struct publish_work *work)
{
    struct job_work *job = NULL;
    pthread_mutex_lock(&work->mutex);
    while (work->next < work->count && work->jobs[work->next].finished)
        work->next++;
    if (work->next < work->count && work->result->failure == FILE_OK)
        job = &work->jobs[work->next++];
    pthread_mutex_unlock(&work->mutex);
    return job;
}

static void tell_twin(struct job_work *job)
{
    const struct source file = {job->path, NULL, 0};
    const struct position whole_file = {0};
    if (strcmp(job->twin, job->name) == 0)
        diagnostic_add(&job->diagnostics, &file, whole_file, DIAGNOSTIC_JOB_CASE_TWIN,
                       "name it once", "job '%s' is named twice", job->name);
    else
        diagnostic_add(&job->diagnostics, &file, whole_file, DIAGNOSTIC_JOB_CASE_TWIN,
                       "rename one of the two", "its number differs from '%s' in case only",
                       job->twin);
}

static void publish_one(const struct publish_work *work, struct job_work *job)
{
    job->diagnostics = diagnostics_in(&job->arena);
    clock_gettime(CLOCK_REALTIME_COARSE, &job->began);
    if (job->twin) {
        tell_twin(job);
        return;
    }
    struct job_files_request request = {work->archive, job->path, work->request->output,
                                        &job->arena, &job->diagnostics};
    if (work->named)
        lock_job(&work->lock, job->name);
    job->files.failure = state_unsettle(work->request->output, job->name);
    job->files.failed_path = arena_print(&job->arena, "%s/.gridleak", work->request->output);
    if (job->files.failure == FILE_OK)
        job->files = job_files_publish(&request);
    if (work->named)
        unlock_job(&work->lock, job->name);
    diagnostics_sort(&job->diagnostics);
}

static void *publish_jobs(void *context)
{
    struct publish_work *work = context;
    for (struct job_work *job; (job = next_job(work));) {
        publish_one(work, job);
        pthread_mutex_lock(&work->mutex);
        job->finished = true;
        tell_finished(work);
        pthread_mutex_unlock(&work->mutex);
    }
    return NULL;
}

static void run_threads(struct publish_work *work)
{
    pthread_t threads[PUBLISH_THREADS_MAX];
    unsigned wanted = work->request->threads ? work->request->threads : 2;
    assert(wanted <= PUBLISH_THREADS_MAX);
    unsigned started = 0;
    pthread_mutex_init(&work->mutex, NULL);
    while (started + 1 < wanted && started + 1 < work->count &&
           pthread_create(&threads[started], NULL, publish_jobs, work) == 0)
        started++;
    publish_jobs(work);
    for (unsigned i = 0; i < started; i++)
        pthread_join(threads[i], NULL);
    tell_finished(work);
    pthread_mutex_destroy(&work->mutex);
}

static int by_folded_name(const void *a, const void *b)
{
    const struct job_work *const *left = a, *const *right = b;
    return strcasecmp((*left)->name, (*right)->name);
}

/* Two names that differ in case only would share a folder on some file systems. */
static void mark_case_twins(struct publish_work *work)
{
    struct job_work **sorted = arena_array(work->arena, work->count + 1, sizeof *sorted);
    for (size_t i = 0; i < work->count; i++)
        sorted[i] = &work->jobs[i];
    qsort(sorted, work->count, sizeof *sorted, by_folded_name);
    for (size_t i = 1; i < work->count; i++)
        if (strcasecmp(sorted[i - 1]->name, sorted[i]->name) == 0) {
            sorted[i]->twin = sorted[i - 1]->name;
            sorted[i - 1]->twin = sorted[i]->name;
        }
}

/* Another archive may have been published into this folder before, with jobs of the same names. */
static bool is_made_from(const struct state_job *state, const char *path)
{
    return state->input_count > 0 && strcmp(state->inputs[0].path, path) == 0;
}

static void fail(struct publish_work *work, enum file_status status, const char *path)
{
    if (status == FILE_OK || work->result->failure != FILE_OK)
        return;
    work->result->failure = status;
    work->result->failed_path = arena_copy(work->arena, path);
}

/* Whether what an earlier publish made of the job can stay. A broken file is read again, so that
   its mistakes are told again. */
static bool can_stay(const struct publish_work *work, const struct job_work *job)
{
    if (!job->old || job->was_unsettled || job->old->broken || !is_made_from(job->old, job->path) ||
        !state_is_current(job->old, work->setting))
        return false;
    const char *summary =
        arena_print(work->arena, "%s/jobs/%s/summary.json", work->request->output, job->name);
    return access(summary, F_OK) == 0;
}

static void list_archive(struct publish_work *work, const struct state *old)
{
    struct job_names names = {0};
    fail(work, archive_job_names(work->archive->folder, work->arena, &names),
         work->archive->folder);
    work->count = names.count;
    work->jobs = arena_array(work->arena, names.count, sizeof *work->jobs);
    for (size_t i = 0; i < names.count; i++) {
        struct job_work *job = &work->jobs[i];
        job->name = names.names[i];
        job->path = arena_print(work->arena, "%s/%s.yaml", work->archive->folder, job->name);
    }
    mark_case_twins(work);
    for (size_t i = 0; i < names.count; i++) {
        struct job_work *job = &work->jobs[i];
        job->old = state_find(old, job->name);
        job->was_unsettled = state_is_unsettled(work->request->output, job->name);
        if (!can_stay(work, job))
            continue;
        job->finished = true;
        job->state = job->old;
        work->result->unchanged++;
        work->result->warned += job->state->warned;
    }
}

static void list_named(struct publish_work *work)
{
    work->count = work->request->job_path_count;
    work->jobs = arena_array(work->arena, work->count, sizeof *work->jobs);
    for (size_t i = 0; i < work->count; i++) {
        work->jobs[i].path = work->request->job_paths[i];
        work->jobs[i].name = job_name_of(work->jobs[i].path, work->arena);
    }
    mark_case_twins(work);
}

/* Whether the pages may show something else of the job than its summary says now. */
static bool is_changed(const struct job_work *job)
{
    if (job->was_unsettled || !job->old || !job->state)
        return true;
    return strcmp(job->old->summary, job->state->summary) != 0;
}

static struct job_names changed_jobs(const struct publish_work *work)
{
    struct job_names changed = {arena_array(work->arena, work->count + 1, sizeof *changed.names),
                                0};
    for (size_t i = 0; i < work->count; i++)
        if (is_changed(&work->jobs[i]))
            changed.names[changed.count++] = work->jobs[i].name;
    return changed;
}

/* changed NULL: nothing is known of any job. */
static void publish_pages(struct publish_work *work, const struct job_names *changed)
{
    struct buffer failed = {0};
    struct arena arena = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct pages_request request = {work->archive, work->request->output, work->setting, changed};
    enum file_status status = pages_publish(&request, &diagnostics, &failed);
    fail(work, status, buffer_string(&failed));
    if (diagnostics.count) {
        struct publish_event event = {"", work->count, work->count, &diagnostics};
        work->request->listener(&event, work->request->listener_context);
        work->result->pages_wrong = diagnostics.errors > 0;
    }
    buffer_release(&failed);
    arena_release(&arena);
}

static void publish_all(struct publish_work *work)
{
    struct state old;
    state_read(work->request->output, &old);
    list_archive(work, &old);
    run_threads(work);
    const struct state_job **jobs = arena_array(work->arena, work->count, sizeof *jobs);
    for (size_t i = 0; i < work->count; i++)
        jobs[i] = work->jobs[i].state;
    struct job_names changed = changed_jobs(work);
    bool same = changed.count == 0 && old.count == work->count &&
                pages_are_whole(work->request->output, work->setting);
    if (work->result->failure == FILE_OK && !same)
        publish_pages(work, &changed);
    if (work->result->failure != FILE_OK)
        pages_forget(work->request->output);
    /* Also after a failure: what was made need not be made again. */
    enum file_status status = state_write(work->request->output, jobs, work->count);
    if (status == FILE_OK)
        status = state_settle(work->request->output);
    fail(work, status, work->request->output);
    state_release(&old);
}

static void publish_named(struct publish_work *work)
{
    list_named(work);
    run_threads(work);
}

/* What a publish that was killed left aside; a job's folder is cleared when it is made again. */
static void clear_left_over(const char *output, struct arena *arena)
{
    folder_clear_aside(output);
    folder_clear_aside(arena_print(arena, "%s/.gridleak", output));
}

enum output_kind publish_output_kind(const char *output, struct arena *arena, const char **folder)
{
    static const char *const swept[] = {"jobs", "models"};
    *folder = output;
    if (archive_is_at(output))
        return OUTPUT_IS_ARCHIVE;
    if (folder_exists(arena_print(arena, "%s/.gridleak", output)))
        return OUTPUT_GOOD;
    for (size_t i = 0; i < sizeof swept / sizeof *swept; i++) {
        *folder = arena_print(arena, "%s/%s", output, swept[i]);
        if (folder_exists(*folder))
            return OUTPUT_IS_FOREIGN;
    }
    return OUTPUT_GOOD;
}

struct publish_result publish(const struct archive *archive, const struct publish_request *request,
                              struct arena *arena)
{
    struct publish_result result = {0};
    struct publish_work work = {
        .archive = archive, .request = request, .result = &result, .arena = arena};
    work.named = request->job_path_count > 0;
    /* Before any waiting: of what the archive was opened with. */
    setting_hash(archive, work.setting);
    fail(&work, folder_make(request->output), request->output);
    if (result.failure != FILE_OK)
        return result;
    enum file_status failure;
    enum lock_status locked = lock_take(request->output, work.named ? LOCK_SHARED : LOCK_ALONE,
                                        request->wait, &work.lock, &result.holder, &failure);
    result.busy = locked == LOCK_BUSY;
    if (locked == LOCK_FAILED)
        fail(&work, failure, request->output);
    if (locked != LOCK_HELD)
        return result;
    if (!work.named)
        clear_left_over(request->output, arena);
    if (work.named)
        publish_named(&work);
    else if (request->pages_only)
        publish_pages(&work, NULL);
    else
        publish_all(&work);
    result.jobs = work.count;
    lock_release(&work.lock);
    return result;
}
