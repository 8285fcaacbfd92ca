/* index.html: every set in a plain table, latest first, and the job files with mistakes. */
#include "archive/page_frame.h"

#include <cjson/cJSON.h>
#include <stdlib.h>
#include <string.h>

/* What the order of the list hangs on. */
struct listed {
    const char *returned; /* "" in progress: first of all */
    size_t job;
};

static int latest_first(const void *a, const void *b)
{
    const struct listed *left = a, *right = b;
    bool left_open = !*left->returned, right_open = !*right->returned;
    if (left_open != right_open)
        return left_open ? -1 : 1;
    int order = strcmp(right->returned, left->returned);
    return order ? order : (left->job < right->job) - (left->job > right->job);
}

static struct mustache_value *list_sets(const struct page_frame *frame)
{
    const struct columns *columns = frame->columns;
    struct listed *listed = arena_array(frame->arena, columns->job_count + 1, sizeof *listed);
    for (size_t i = 0; i < columns->job_count; i++)
        listed[i] = (struct listed){column_text(&columns->jobs[JOB_RETURNED], i), i};
    qsort(listed, columns->job_count, sizeof *listed, latest_first);
    struct mustache_value *rows = mustache_list(frame->arena);
    for (size_t i = 0; i < columns->job_count; i++)
        mustache_push(frame->arena, rows, page_job_row(frame, listed[i].job));
    return rows;
}

static struct mustache_value *list_mistakes(const struct page_frame *frame,
                                            const struct broken_job *broken)
{
    struct mustache_value *mistakes = mustache_list(frame->arena);
    cJSON *summary = cJSON_ParseWithLength(broken->line, broken->line_length);
    const cJSON *item;
    cJSON_ArrayForEach(item, cJSON_GetObjectItemCaseSensitive(summary, "diagnostics"))
    {
        struct mustache_value *mistake = mustache_map(frame->arena);
        const cJSON *line = cJSON_GetObjectItemCaseSensitive(item, "line"),
                    *text = cJSON_GetObjectItemCaseSensitive(item, "text");
        if (cJSON_IsNumber(line) && line->valuedouble > 0)
            mustache_set_text(frame->arena, mistake, "line",
                              arena_print(frame->arena, "%.0f", line->valuedouble));
        mustache_set_text(frame->arena, mistake, "text", cJSON_GetStringValue(text));
        mustache_push(frame->arena, mistakes, mistake);
    }
    cJSON_Delete(summary);
    return mistakes;
}

static struct mustache_value *list_broken(const struct page_frame *frame)
{
    struct mustache_value *rows = mustache_list(frame->arena);
    for (size_t i = 0; i < frame->columns->broken_count; i++) {
        const struct broken_job *broken = &frame->columns->broken[i];
        struct mustache_value *row = mustache_map(frame->arena);
        mustache_set_text(frame->arena, row, "job", broken->name);
        mustache_set(frame->arena, row, "mistakes", list_mistakes(frame, broken));
        mustache_push(frame->arena, rows, row);
    }
    return rows;
}

enum file_status page_index_write(struct page_frame *frame)
{
    const struct columns *columns = frame->columns;
    struct mustache_value *values = page_values(frame);
    struct figures sets = figures_scaled(frame->arena, (double)columns->job_count, 1, "", 0),
                   parts = figures_scaled(frame->arena, (double)columns->part_count, 1, "", 0);
    mustache_set_text(frame->arena, values, "count", sets.whole);
    mustache_set_text(frame->arena, values, "parts", parts.whole);
    mustache_set(frame->arena, values, "sets", list_sets(frame));
    mustache_set_flag(frame->arena, values, "any_broken", columns->broken_count > 0);
    mustache_set(frame->arena, values, "broken", list_broken(frame));
    return page_write(frame, "index.html", values, "index.html");
}
