#include "archive/pages.h"

#include "archive/manual_page.h"
#include "archive/page_frame.h"

#include <pthread.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

enum { SUMMARY_BYTES_MAX = 16 << 20, SUMMARIES_BYTES_MAX = 2000 << 20 };

struct pages_work {
    const struct pages_request *request;
    struct arena arena;
    struct job_names names;
    struct buffer old, summaries; /* summaries.jsonl as it is, and as it will be */
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

/* A line of the old summaries.jsonl, which is sorted as the names are. */
struct old_line {
    const char *text;
    size_t length;
};

/* Go on to the line of job `name`: false when there is none. *at stands before the first line that
   was not passed over. */
static bool find_old_line(const struct buffer *old, const char **at, const char *name,
                          struct old_line *line)
{
    static const char begins[] = ",\"job\":\"";
    const char *end = old->data + old->length;
    while (*at && *at < end) {
        const char *line_end = memchr(*at, '\n', (size_t)(end - *at));
        size_t length = (size_t)((line_end ? line_end : end) - *at);
        const char *key = memmem(*at, length < 64 ? length : 64, begins, sizeof begins - 1);
        const char *found = key ? key + sizeof begins - 1 : NULL;
        const char *quote = found ? memchr(found, '"', length - (size_t)(found - *at)) : NULL;
        if (!quote)
            return false; /* not as we write it: read the summaries one by one */
        size_t found_length = (size_t)(quote - found), name_length = strlen(name);
        size_t common = found_length < name_length ? found_length : name_length;
        int order = memcmp(found, name, common);
        if (order == 0)
            order = (found_length > name_length) - (found_length < name_length);
        if (order > 0)
            return false;
        *line = (struct old_line){*at, length};
        *at += length + (line_end ? 1 : 0);
        if (order == 0)
            return true;
    }
    return false;
}

/* A job that nobody has published yet has none. */
static enum file_status read_summary(struct pages_work *work, const char *name)
{
    struct buffer path = {0};
    buffer_print(&path, "%s/jobs/%s/summary.json", work->request->output, name);
    enum file_status status = file_read(buffer_string(&path), SUMMARY_BYTES_MAX, &work->summaries);
    if (status == FILE_MISSING)
        status = FILE_OK;
    if (status != FILE_OK)
        buffer_append(work->failed, path.data, path.length);
    buffer_release(&path);
    return status;
}

static enum file_status gather_summaries(struct pages_work *work)
{
    const struct pages_request *request = work->request;
    const char *path = arena_print(&work->arena, "%s/summaries.jsonl", request->output);
    /* NULL: no line of the old file may be taken over. */
    const struct job_names *changed =
        pages_are_whole(request->output, request->setting) ? request->changed : NULL;
    if (changed)
        file_read(path, SUMMARIES_BYTES_MAX, &work->old);
    buffer_reserve(&work->summaries, work->old.length + 4096);
    const char *at = work->old.data;
    enum file_status status = FILE_OK;
    for (size_t i = 0; i < work->names.count && status == FILE_OK; i++) {
        const char *name = work->names.names[i];
        struct old_line line;
        if (changed && work->old.length && !is_listed(changed, name) &&
            find_old_line(&work->old, &at, name, &line)) {
            buffer_append(&work->summaries, line.text, line.length);
            buffer_byte(&work->summaries, '\n');
        } else {
            status = read_summary(work, name);
        }
    }
    buffer_release(&work->old);
    return status;
}

/* ---- writing */

/* summaries.jsonl is by far the largest file and needs nothing of the others: written beside them,
   by a thread of its own. */
struct summaries_task {
    const char *path;
    const struct buffer *summaries;
    enum file_status status;
};

static void *write_summaries(void *context)
{
    struct summaries_task *task = context;
    task->status = file_write(task->path, task->summaries->data, task->summaries->length, NULL);
    return NULL;
}

static enum file_status write_pages(struct pages_work *work, struct diagnostics *diagnostics)
{
    struct page_frame frame = {
        .archive = work->request->archive,
        .output = work->request->output,
        .columns = &work->columns,
        .arena = &work->arena,
        .say = {templates_words(work->request->archive->templates), &work->arena, diagnostics},
        .diagnostics = diagnostics,
        .failed = work->failed,
    };
    static enum file_status (*const writers[])(struct page_frame *) = {
        page_style_write,  page_index_write,      page_search_write,
        page_models_write, page_statistics_write, manual_page_write};
    struct summaries_task task = {
        arena_print(&work->arena, "%s/summaries.jsonl", work->request->output), &work->summaries,
        FILE_OK};
    pthread_t thread;
    bool beside = pthread_create(&thread, NULL, write_summaries, &task) == 0;
    if (!beside)
        write_summaries(&task);
    enum file_status status = FILE_OK;
    for (size_t i = 0; i < sizeof writers / sizeof *writers && status == FILE_OK; i++)
        status = writers[i](&frame);
    if (beside)
        pthread_join(thread, NULL);
    if (status == FILE_OK && task.status != FILE_OK) {
        status = task.status;
        buffer_text(work->failed, task.path);
    }
    return status;
}

static enum file_status publish_gathered(struct pages_work *work, struct diagnostics *diagnostics)
{
    const char *note = note_path(work->request->output, &work->arena);
    const char *setting = work->request->setting;
    enum file_status status = gather_summaries(work);
    if (status != FILE_OK)
        return status;
    columns_add_all(&work->columns, work->summaries.data, work->summaries.length);
    page_models_name(&work->columns);
    pages_forget(work->request->output);
    status = write_pages(work, diagnostics);
    if (status == FILE_OK) {
        status = folder_make(arena_print(&work->arena, "%s/.gridleak", work->request->output));
        if (status == FILE_OK)
            status = file_write(note, setting, strlen(setting), NULL);
        if (status != FILE_OK)
            buffer_text(work->failed, note);
    }
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
        status = publish_gathered(&work, diagnostics);
    buffer_release(&work.summaries);
    columns_release(&work.columns);
    arena_release(&work.arena);
    return status;
}
