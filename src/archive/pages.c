#include "archive/pages.h"

#include "base/mustache.h"

#include <cjson/cJSON.h>
#include <dirent.h>
#include <stdlib.h>
#include <string.h>

enum { SUMMARY_BYTES_MAX = 16 << 20 };

/* What is gathered while the summaries go by. */
struct index_work {
    struct arena arena;
    struct mustache_value *sets;   /* rows of the table */
    struct mustache_value *broken; /* jobs whose files have mistakes */
    struct buffer summaries;       /* summaries.jsonl */
};

static const char *text_of(const cJSON *object, const char *key)
{
    return cJSON_GetStringValue(cJSON_GetObjectItemCaseSensitive(object, key));
}

static void take_text(struct index_work *work, struct mustache_value *row, const cJSON *object,
                      const char *key)
{
    mustache_set_text(&work->arena, row, key, text_of(object, key));
}

static void take_number(struct index_work *work, struct mustache_value *row, const cJSON *object,
                        const char *key)
{
    const cJSON *number = cJSON_GetObjectItemCaseSensitive(object, key);
    if (cJSON_IsNumber(number))
        mustache_set_text(&work->arena, row, key,
                          arena_print(&work->arena, "%.0f", number->valuedouble));
}

static void add_broken(struct index_work *work, const cJSON *summary, const char *name)
{
    struct mustache_value *row = mustache_map(&work->arena);
    struct mustache_value *mistakes = mustache_list(&work->arena);
    mustache_set_text(&work->arena, row, "job", name);
    const cJSON *item;
    cJSON_ArrayForEach(item, cJSON_GetObjectItemCaseSensitive(summary, "diagnostics"))
    {
        struct mustache_value *mistake = mustache_map(&work->arena);
        take_number(work, mistake, item, "line");
        take_text(work, mistake, item, "text");
        mustache_push(&work->arena, mistakes, mistake);
    }
    mustache_set(&work->arena, row, "diagnostics", mistakes);
    mustache_push(&work->arena, work->broken, row);
}

static void add_set(struct index_work *work, const cJSON *summary, const char *name)
{
    static const char *const texts[] = {"maker",    "model",    "year",    "supply",
                                        "received", "returned", "chassis", NULL};
    static const char *const numbers[] = {"kept", "of", "capacitors", "capacitors_failed", NULL};
    struct mustache_value *row = mustache_map(&work->arena);
    mustache_set_text(&work->arena, row, "job", name);
    for (size_t i = 0; texts[i]; i++)
        take_text(work, row, summary, texts[i]);
    for (size_t i = 0; numbers[i]; i++)
        take_number(work, row, summary, numbers[i]);
    bool in_progress = cJSON_IsTrue(cJSON_GetObjectItemCaseSensitive(summary, "in_progress"));
    mustache_set_flag(&work->arena, row, "in_progress", in_progress);
    mustache_push(&work->arena, work->sets, row);
}

static void add_job(struct index_work *work, const char *output, const char *name)
{
    struct buffer contents = {0}, path = {0};
    buffer_print(&path, "%s/jobs/%s/summary.json", output, name);
    if (file_read(buffer_string(&path), SUMMARY_BYTES_MAX, &contents) == FILE_OK) {
        buffer_append(&work->summaries, contents.data, contents.length);
        cJSON *summary = cJSON_ParseWithLength(contents.data, contents.length);
        if (cJSON_IsTrue(cJSON_GetObjectItemCaseSensitive(summary, "broken")))
            add_broken(work, summary, name);
        else if (summary)
            add_set(work, summary, name);
        cJSON_Delete(summary);
    }
    buffer_release(&contents);
    buffer_release(&path);
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
static enum file_status remove_gone(const char *output, const struct job_names *names,
                                    struct arena *arena)
{
    DIR *folder = opendir(arena_print(arena, "%s/jobs", output));
    enum file_status status = FILE_OK;
    for (struct dirent *entry; folder && status == FILE_OK && (entry = readdir(folder));)
        if (entry->d_name[0] != '.' && !is_listed(names, entry->d_name))
            status = folder_remove(arena_print(arena, "%s/jobs/%s", output, entry->d_name));
    if (folder)
        closedir(folder);
    return status;
}

static void set_shop(struct index_work *work, const struct archive *archive,
                     struct mustache_value *values)
{
    const struct shop *shop = archive->shop;
    mustache_set_text(&work->arena, values, "shop", shop->name);
    mustache_set_text(&work->arena, values, "trade", shop->trade);
    mustache_set_text(&work->arena, values, "address", shop->address);
    mustache_set_text(&work->arena, values, "contact", shop->contact);
}

/* The one raw insertion: the style sheet, a template of the shop's own. */
static enum mustache_partial_answer insert_style(void *data, const struct mustache_partial *partial,
                                                 const struct source **found)
{
    const struct archive *archive = data;
    (void)found;
    if (strcmp(partial->name, "style") != 0)
        return MUSTACHE_PARTIAL_UNKNOWN;
    buffer_text(partial->out, archive->style);
    return MUSTACHE_PARTIAL_DONE;
}

static enum file_status write_index(struct index_work *work, const struct archive *archive,
                                    const char *output, struct buffer *failed)
{
    struct diagnostics mistakes = diagnostics_in(&work->arena);
    const char *text = templates_text(archive->templates, "index.html", &mistakes);
    struct mustache_value *values = mustache_map(&work->arena);
    set_shop(work, archive, values);
    mustache_set_text(&work->arena, values, "count",
                      arena_print(&work->arena, "%zu", work->sets->count));
    mustache_set(&work->arena, values, "sets", work->sets);
    mustache_set_flag(&work->arena, values, "any_broken", work->broken->count > 0);
    mustache_set(&work->arena, values, "broken", work->broken);
    struct archive shared = *archive;
    struct source source = {"index.html", text ? text : "", text ? strlen(text) : 0};
    struct mustache_target target = {mustache_escape_html, insert_style, &shared, &work->arena,
                                     &mistakes};
    struct buffer page = {0};
    mustache_render(&source, values, &target, &page);
    const char *path = arena_print(&work->arena, "%s/index.html", output);
    enum file_status status = file_write(path, page.data, page.length, NULL);
    if (status == FILE_OK) {
        path = arena_print(&work->arena, "%s/summaries.jsonl", output);
        status = file_write(path, work->summaries.data, work->summaries.length, NULL);
    }
    if (status != FILE_OK)
        buffer_text(failed, path);
    buffer_release(&page);
    return status;
}

enum file_status pages_publish(const struct archive *archive, const char *output,
                               struct buffer *failed)
{
    struct index_work work = {0};
    work.sets = mustache_list(&work.arena);
    work.broken = mustache_list(&work.arena);
    struct job_names names;
    enum file_status status = archive_job_names(archive->folder, &work.arena, &names);
    if (status == FILE_OK)
        status = folder_make(output);
    if (status == FILE_OK)
        status = remove_gone(output, &names, &work.arena);
    if (status == FILE_OK) {
        for (size_t i = 0; i < names.count; i++)
            add_job(&work, output, names.names[i]);
        status = write_index(&work, archive, output, failed);
    } else {
        buffer_text(failed, output);
    }
    buffer_release(&work.summaries);
    arena_release(&work.arena);
    return status;
}
