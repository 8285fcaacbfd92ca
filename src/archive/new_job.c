#include "archive/new_job.h"

#include "archive/archive.h"
#include "job/job.h"
#include "job/start.h"

#include <string.h>
#include <strings.h>

/* The job of this number, without regard to case; NULL: none. */
static const char *find_job(const char *folder, const char *number, struct arena *arena)
{
    struct job_names names;
    if (archive_job_names(folder, arena, &names) != FILE_OK)
        return NULL;
    for (size_t i = 0; i < names.count; i++)
        if (strcasecmp(names.names[i], number) == 0)
            return names.names[i];
    return NULL;
}

static bool is_path(const char *name)
{
    size_t length = strlen(name);
    return length > 5 && strcmp(name + length - 5, ".yaml") == 0;
}

static const char *path_of_like(const struct new_job_request *request, struct arena *arena)
{
    if (is_path(request->like))
        return request->like;
    const char *name = find_job(request->archive_folder, request->like, arena);
    return arena_print(arena, "%s/%s.yaml", request->archive_folder, name ? name : request->like);
}

static enum file_status read_like(const char *path, struct source *source, struct arena *arena)
{
    struct buffer contents = {0};
    enum file_status status = file_read(path, JOB_BYTES_MAX, &contents);
    if (status == FILE_OK)
        *source = (struct source){
            .path = path,
            .text = arena_text(arena, contents.data, contents.length),
            .length = contents.length,
        };
    buffer_release(&contents);
    return status;
}

static struct new_job create(const struct new_job_request *request, const struct source *like,
                             struct arena *arena, struct diagnostics *diagnostics)
{
    struct start start = {request->number, request->received, like};
    struct new_job result = {
        .path = arena_print(arena, "%s/%s.yaml", request->archive_folder, request->number)};
    struct buffer text = {0};
    start_write(&text, &start, arena, diagnostics);
    result.failure = file_create(result.path, text.data, text.length);
    buffer_release(&text);
    result.status = result.failure == FILE_OK       ? NEW_JOB_DONE
                    : result.failure == FILE_EXISTS ? NEW_JOB_THERE
                                                    : NEW_JOB_FAILED;
    return result;
}

struct new_job new_job(const struct new_job_request *request, struct arena *arena,
                       struct diagnostics *diagnostics)
{
    struct new_job result = {.status = NEW_JOB_NUMBER, .path = request->number};
    if (!job_number_is_valid(request->number))
        return result;
    const char *twin = find_job(request->archive_folder, request->number, arena);
    if (twin) {
        result.status = NEW_JOB_THERE;
        result.path = arena_print(arena, "%s/%s.yaml", request->archive_folder, twin);
        return result;
    }
    struct source source = {0};
    if (request->like) {
        result.path = path_of_like(request, arena);
        result.status = NEW_JOB_LIKE_MISSING;
        result.failure = read_like(result.path, &source, arena);
        if (result.failure != FILE_OK)
            return result;
    }
    return create(request, request->like ? &source : NULL, arena, diagnostics);
}
