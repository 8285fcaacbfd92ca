#include "archive/state.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static const char heading[] = "gridleak state 2\n";
enum { STATE_BYTES_MAX = 1 << 30, INPUT_BYTES_MAX = 64 << 20 };

/* Cut the next field off a line of tab-separated fields; NULL at the end of the line. */
static char *next_field(char **cursor)
{
    if (!*cursor)
        return NULL;
    char *field = *cursor, *tab = strchr(field, '\t');
    if (tab)
        *tab = '\0';
    *cursor = tab ? tab + 1 : NULL;
    return field;
}

static bool read_hash(char **cursor, char hash[HASH_TEXT_BYTES])
{
    const char *field = next_field(cursor);
    if (!field || strlen(field) != HASH_TEXT_BYTES - 1)
        return false;
    memcpy(hash, field, HASH_TEXT_BYTES);
    return true;
}

static bool read_input(char **cursor, struct state_input *input)
{
    const char *size = next_field(cursor), *changed = next_field(cursor);
    if (!size || !changed || !read_hash(cursor, input->hash))
        return false;
    input->size = strtoull(size, NULL, 10);
    input->changed_ns = strtoull(changed, NULL, 10);
    input->path = next_field(cursor);
    return input->path != NULL;
}

static bool read_line(char *line, struct arena *arena, struct state_job *job)
{
    char *cursor = line;
    job->name = next_field(&cursor);
    const char *flags = next_field(&cursor);
    if (!flags || !read_hash(&cursor, job->setting) || !read_hash(&cursor, job->summary))
        return false;
    job->broken = strchr(flags, 'b') != NULL;
    job->warned = strchr(flags, 'w') != NULL;
    size_t capacity = 0;
    while (cursor) {
        job->inputs =
            arena_grow(arena, job->inputs, job->input_count, &capacity, sizeof *job->inputs);
        if (!read_input(&cursor, &job->inputs[job->input_count++]))
            return false;
    }
    return true;
}

void state_read(const char *output, struct state *state)
{
    *state = (struct state){0};
    struct buffer contents = {0};
    const char *path = arena_print(&state->arena, "%s/.gridleak/state", output);
    if (file_read(path, STATE_BYTES_MAX, &contents) == FILE_OK &&
        contents.length >= sizeof heading - 1 &&
        memcmp(contents.data, heading, sizeof heading - 1) == 0) {
        char *text = arena_text(&state->arena, contents.data, contents.length);
        size_t capacity = 0;
        for (char *line = strchr(text, '\n') + 1, *end; (end = strchr(line, '\n'));
             line = end + 1) {
            *end = '\0';
            struct state_job job = {0};
            if (!read_line(line, &state->arena, &job))
                continue; /* a damaged line: that job is made again */
            state->jobs =
                arena_grow(&state->arena, state->jobs, state->count, &capacity, sizeof job);
            state->jobs[state->count++] = job;
        }
    }
    buffer_release(&contents);
}

static int by_name(const void *name, const void *job)
{
    return strcmp(name, ((const struct state_job *)job)->name);
}

struct state_job *state_find(const struct state *state, const char *name)
{
    return state->count ? bsearch(name, state->jobs, state->count, sizeof *state->jobs, by_name)
                        : NULL;
}

static uint64_t nanoseconds(const struct stat *about)
{
    return (uint64_t)about->st_mtim.tv_sec * 1000000000u + (uint64_t)about->st_mtim.tv_nsec;
}

static const char no_hash[HASH_TEXT_BYTES] =
    "0000000000000000000000000000000000000000000000000000000000000000";

/* An input that is not there: a size that no file has, so that its coming is noticed. */
static struct state_input missing_input(const char *path, struct arena *arena)
{
    struct state_input input = {.path = arena_copy(arena, path), .size = UINT64_MAX};
    memcpy(input.hash, no_hash, HASH_TEXT_BYTES);
    return input;
}

bool state_note_input(const char *path, struct arena *arena, struct state_input *input)
{
    struct stat about;
    if (access(path, F_OK) != 0) {
        *input = missing_input(path, arena);
        return true;
    }
    struct buffer contents = {0};
    bool good = stat(path, &about) == 0 && file_read(path, INPUT_BYTES_MAX, &contents) == FILE_OK;
    if (good) {
        struct hash hash = hash_of(contents.data, contents.length);
        input->path = arena_copy(arena, path);
        input->size = (uint64_t)about.st_size;
        input->changed_ns = nanoseconds(&about);
        hash_text(&hash, input->hash);
    }
    buffer_release(&contents);
    return good;
}

static bool input_is_current(struct state_input *input)
{
    struct stat about;
    if (stat(input->path, &about) != 0)
        return input->size == UINT64_MAX;
    if ((uint64_t)about.st_size == input->size && nanoseconds(&about) == input->changed_ns)
        return true;
    struct arena arena = {0};
    struct state_input now;
    bool same = state_note_input(input->path, &arena, &now) && strcmp(now.hash, input->hash) == 0;
    if (same) {
        input->size = now.size;
        input->changed_ns = now.changed_ns;
    }
    arena_release(&arena);
    return same;
}

bool state_is_current(struct state_job *job, const char *setting)
{
    if (strcmp(job->setting, setting) != 0)
        return false;
    for (size_t i = 0; i < job->input_count; i++)
        if (!input_is_current(&job->inputs[i]))
            return false;
    return true;
}

void state_note_summary(const char *output, const char *name, char hash[HASH_TEXT_BYTES])
{
    struct buffer path = {0}, summary = {0};
    buffer_print(&path, "%s/jobs/%s/summary.json", output, name);
    memcpy(hash, no_hash, HASH_TEXT_BYTES);
    if (file_read(buffer_string(&path), INPUT_BYTES_MAX, &summary) == FILE_OK) {
        struct hash of_summary = hash_of(summary.data, summary.length);
        hash_text(&of_summary, hash);
    }
    buffer_release(&summary);
    buffer_release(&path);
}

/* The folder of the marks, or the mark of a job. */
static void unsettled_path(struct buffer *path, const char *output, const char *name)
{
    buffer_print(path, "%s/.gridleak/unsettled%s%s", output, name ? "/" : "", name ? name : "");
}

enum file_status state_unsettle(const char *output, const char *name)
{
    struct buffer folder = {0}, mark = {0};
    unsettled_path(&folder, output, NULL);
    unsettled_path(&mark, output, name);
    enum file_status status = folder_make(buffer_string(&folder));
    if (status == FILE_OK)
        status = file_write(buffer_string(&mark), "", 0, NULL);
    buffer_release(&folder);
    buffer_release(&mark);
    return status;
}

bool state_is_unsettled(const char *output, const char *name)
{
    struct buffer mark = {0};
    unsettled_path(&mark, output, name);
    bool there = access(buffer_string(&mark), F_OK) == 0;
    buffer_release(&mark);
    return there;
}

enum file_status state_settle(const char *output)
{
    struct buffer folder = {0};
    unsettled_path(&folder, output, NULL);
    enum file_status status = folder_remove(buffer_string(&folder));
    buffer_release(&folder);
    return status;
}

enum file_status state_write(const char *output, const struct state_job *const *jobs, size_t count)
{
    struct buffer text = {0}, path = {0};
    buffer_text(&text, heading);
    for (size_t i = 0; i < count; i++) {
        const struct state_job *job = jobs[i];
        if (!job)
            continue;
        buffer_print(&text, "%s\t%s%s\t%s\t%s", job->name, job->broken ? "b" : "-",
                     job->warned ? "w" : "", job->setting, job->summary);
        for (size_t j = 0; j < job->input_count; j++) {
            const struct state_input *input = &job->inputs[j];
            buffer_print(&text, "\t%llu\t%llu\t%s\t%s", (unsigned long long)input->size,
                         (unsigned long long)input->changed_ns, input->hash, input->path);
        }
        buffer_byte(&text, '\n');
    }
    buffer_print(&path, "%s/.gridleak/state", output);
    enum file_status status = file_write(buffer_string(&path), text.data, text.length, NULL);
    buffer_release(&text);
    buffer_release(&path);
    return status;
}

void state_release(struct state *state)
{
    arena_release(&state->arena);
    *state = (struct state){0};
}
