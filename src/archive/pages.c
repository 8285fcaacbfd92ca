#include "archive/pages.h"

#include "archive/columns_file.h"
#include "archive/manual_page.h"
#include "archive/page_frame.h"

#include <pthread.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum { SUMMARY_BYTES_MAX = 16 << 20, COLUMNS_BYTES_MAX = 2000 << 20 };

struct pages_work {
    const struct pages_request *request;
    struct arena arena;
    struct job_names names;
    struct columns columns;
    struct buffer *failed;
};

/* ---- the note that the pages are whole: present only while they are */

static const char *note_path(const char *output, struct arena *arena)
{
    return arena_print(arena, "%s/.gridleak/pages", output);
}

bool pages_are_whole(const char *output, const char *setting)
{
    static const char *const pages[] = {"index.html",      "search.js",      "search-data.js",
                                        "statistics.html", "site-style.css", "summaries.jsonl",
                                        "manual.html"};
    struct arena arena = {0};
    struct buffer note = {0};
    bool whole = file_read(note_path(output, &arena), 4096, &note) == FILE_OK &&
                 strcmp(buffer_string(&note), setting) == 0;
    for (size_t i = 0; whole && i < sizeof pages / sizeof *pages; i++)
        whole = access(arena_print(&arena, "%s/%s", output, pages[i]), F_OK) == 0;
    buffer_release(&note);
    arena_release(&arena);
    return whole;
}

void pages_forget(const char *output)
{
    struct arena arena = {0};
    unlink(note_path(output, &arena));
    arena_release(&arena);
}

/* ---- gathering the summaries */

static const char *summaries_path(struct pages_work *work)
{
    return arena_print(&work->arena, "%s/summaries.jsonl", work->request->output);
}

static const char *columns_path(struct pages_work *work)
{
    return arena_print(&work->arena, "%s/.gridleak/columns", work->request->output);
}

static bool is_listed(const struct job_names *names, const char *name)
{
    for (size_t low = 0, high = names->count; low < high;) {
        size_t middle = (low + high) / 2;
        int order = strcmp(names->names[middle], name);
        if (order == 0)
            return true;
        if (order < 0)
            low = middle + 1;
        else
            high = middle;
    }
    return false;
}

/* Folders below jobs/ whose job file is gone. */
static enum file_status remove_gone(struct pages_work *work)
{
    const char *jobs = arena_print(&work->arena, "%s/jobs", work->request->output);
    struct folder_names found;
    enum file_status status = folder_list(jobs, &work->arena, &found);
    status = status == FILE_MISSING ? FILE_OK : status; /* of an archive without jobs */
    for (size_t i = 0; i < found.count && status == FILE_OK; i++)
        if (found.names[i][0] != '.' && !is_listed(&work->names, found.names[i]))
            status = folder_remove(arena_print(&work->arena, "%s/%s", jobs, found.names[i]));
    if (status != FILE_OK)
        buffer_text(work->failed, jobs);
    return status;
}

/* Lines of the summaries.jsonl that is there, one behind the other. */
struct old_lines {
    uint64_t offset, length;
};

static void put_old_lines(struct file_writer *summaries, struct old_lines *lines)
{
    if (lines->length)
        file_put_old(summaries, lines->offset, lines->length);
    *lines = (struct old_lines){0};
}

/* The job's line, as summary.json has it; a job that nobody has published yet has none. */
static void add_summary(struct pages_work *work, const char *name, struct file_writer *summaries)
{
    struct buffer path = {0}, line = {0};
    buffer_print(&path, "%s/jobs/%s/summary.json", work->request->output, name);
    enum file_status status = file_read(buffer_string(&path), SUMMARY_BYTES_MAX, &line);
    if (status != FILE_OK && status != FILE_MISSING && summaries->status == FILE_OK) {
        buffer_append(work->failed, path.data, path.length);
        summaries->status = status;
    }
    if (line.length && line.data[line.length - 1] != '\n')
        buffer_byte(&line, '\n');
    columns_add(&work->columns, line.data, line.length);
    file_put(summaries, line.data, line.length);
    buffer_release(&line);
    buffer_release(&path);
}

/* The columns of the last time; they stay empty when no line may be taken over. */
static void read_old_columns(struct pages_work *work, struct columns *old)
{
    const struct pages_request *request = work->request;
    struct buffer contents = {0};
    struct stat about;
    if (!request->changed || !pages_are_whole(request->output, request->setting) ||
        stat(summaries_path(work), &about) != 0)
        return;
    if (file_read(columns_path(work), COLUMNS_BYTES_MAX, &contents) == FILE_OK &&
        columns_file_read(&contents, old) && (uint64_t)about.st_size != old->bytes)
        columns_release(old);
    buffer_release(&contents);
}

/* Every job in the columns, and its line in summaries.jsonl: from the old ones, which are sorted as
   the names are, when it is there and has not changed. */
static enum file_status gather_summaries(struct pages_work *work, const struct columns *old)
{
    const char *path = summaries_path(work);
    struct column_translation translation;
    struct old_lines lines = {0};
    struct file_writer summaries;
    column_translation_begin(&translation, old);
    file_begin(&summaries, path);
    for (size_t i = 0, job = 0; i < work->names.count; i++) {
        const char *name = work->names.names[i];
        while (job < old->job_count && strcmp(column_text(&old->jobs[JOB_NUMBER], job), name) < 0)
            job++;
        bool there = job < old->job_count &&
                     strcmp(column_text(&old->jobs[JOB_NUMBER], job), name) == 0 &&
                     !is_listed(work->request->changed, name);
        if (!there || lines.offset + lines.length != old->lines[job].offset)
            put_old_lines(&summaries, &lines);
        if (!there) {
            add_summary(work, name, &summaries);
            continue;
        }
        columns_take(&work->columns, &translation, job);
        if (!lines.length)
            lines.offset = old->lines[job].offset;
        lines.length += old->lines[job].length;
    }
    put_old_lines(&summaries, &lines);
    column_translation_end(&translation);
    enum file_status status = file_finish(&summaries);
    if (status != FILE_OK && work->failed->length == 0)
        buffer_text(work->failed, path);
    return status;
}

/* ---- writing */

/* The pages are made by two threads, each with a frame of its own. */
typedef enum file_status page_writer(struct page_frame *frame);
static page_writer *const first_pages[] = {page_style_write, page_index_write, page_search_write,
                                           NULL};
static page_writer *const second_pages[] = {page_models_write, page_statistics_write,
                                            manual_page_write, NULL};

struct pages_task {
    page_writer *const *writers;
    struct page_frame frame;
    struct arena arena;
    struct diagnostics diagnostics;
    struct buffer failed;
    enum file_status status;
};

static struct pages_task *task_begin(struct pages_work *work, page_writer *const *writers)
{
    const struct archive *archive = work->request->archive;
    struct pages_task *task = arena_get(&work->arena, sizeof *task);
    task->writers = writers;
    task->diagnostics = diagnostics_in(&task->arena);
    task->frame = (struct page_frame){
        .archive = archive,
        .output = work->request->output,
        .columns = &work->columns,
        .arena = &task->arena,
        .say = {templates_words(archive->templates), &task->arena, &task->diagnostics},
        .diagnostics = &task->diagnostics,
        .failed = &task->failed,
    };
    return task;
}

static void *task_run(void *context)
{
    struct pages_task *task = context;
    for (size_t i = 0; task->writers[i] && task->status == FILE_OK; i++)
        task->status = task->writers[i](&task->frame);
    return NULL;
}

static enum file_status task_end(struct pages_work *work, struct pages_task *task,
                                 struct diagnostics *diagnostics)
{
    diagnostics_append(diagnostics, &task->diagnostics);
    if (task->status != FILE_OK && work->failed->length == 0)
        buffer_append(work->failed, task->failed.data, task->failed.length);
    buffer_release(&task->failed);
    arena_release(&task->arena);
    return task->status;
}

static enum file_status write_pages(struct pages_work *work, struct diagnostics *diagnostics)
{
    struct pages_task *first = task_begin(work, first_pages),
                      *second = task_begin(work, second_pages);
    pthread_t thread;
    bool beside = pthread_create(&thread, NULL, task_run, second) == 0;
    task_run(first);
    if (beside)
        pthread_join(thread, NULL);
    else
        task_run(second);
    enum file_status first_status = task_end(work, first, diagnostics),
                     second_status = task_end(work, second, diagnostics);
    return first_status != FILE_OK ? first_status : second_status;
}

static enum file_status write_columns(struct pages_work *work)
{
    struct buffer contents = {0};
    columns_file_write(&work->columns, &contents);
    enum file_status status = file_write(columns_path(work), contents.data, contents.length, NULL);
    buffer_release(&contents);
    if (status != FILE_OK)
        buffer_text(work->failed, columns_path(work));
    return status;
}

/* Say that the pages are whole. */
static enum file_status write_note(struct pages_work *work)
{
    const char *note = note_path(work->request->output, &work->arena);
    const char *setting = work->request->setting;
    enum file_status status = file_write(note, setting, strlen(setting), NULL);
    if (status != FILE_OK)
        buffer_text(work->failed, note);
    return status;
}

/* The note goes before the first page is touched, and comes back behind the last. */
static enum file_status publish_all(struct pages_work *work, struct diagnostics *diagnostics)
{
    struct columns old = {0};
    read_old_columns(work, &old);
    pages_forget(work->request->output);
    enum file_status status =
        folder_make(arena_print(&work->arena, "%s/.gridleak", work->request->output));
    if (status == FILE_OK)
        status = gather_summaries(work, &old);
    columns_release(&old);
    if (status == FILE_OK)
        status = write_columns(work);
    page_models_name(&work->columns);
    if (status == FILE_OK)
        status = write_pages(work, diagnostics);
    if (status == FILE_OK)
        status = write_note(work);
    return status;
}

enum file_status pages_publish(const struct pages_request *request, struct diagnostics *diagnostics,
                               struct buffer *failed)
{
    struct pages_work work = {.request = request, .failed = failed};
    enum file_status status = archive_job_names(request->archive->folder, &work.arena, &work.names);
    if (status == FILE_OK)
        status = folder_make(request->output);
    if (status != FILE_OK)
        buffer_text(failed, request->output);
    if (status == FILE_OK)
        status = remove_gone(&work);
    if (status == FILE_OK)
        status = publish_all(&work, diagnostics);
    columns_release(&work.columns);
    arena_release(&work.arena);
    return status;
}
