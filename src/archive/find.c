#include "archive/find.h"

#include "base/utf8.h"
#include "write/json.h"
#include "write/text_width.h"

#include <string.h>

enum { LINE_COLUMNS = 80, SET_COLUMNS_MIN = 8, SUMMARIES_BYTES_MAX = 2000 << 20 };

enum file_status find_read(const char *output, struct columns *columns, size_t *damaged)
{
    struct buffer path = {0}, lines = {0};
    buffer_print(&path, "%s/summaries.jsonl", output);
    enum file_status status = file_read(buffer_string(&path), SUMMARIES_BYTES_MAX, &lines);
    *damaged = status == FILE_OK ? columns_add(columns, lines.data, lines.length) : 0;
    buffer_release(&lines);
    buffer_release(&path);
    return status;
}

/* Whether parts of the job are among the hits, and so listed before it. *part: the first hit that
   was not passed yet; jobs are asked for in rising order. */
static bool has_part_hit(const struct columns *columns, const struct query_hits *hits, size_t job,
                         size_t *part)
{
    while (*part < hits->part_count && columns->part_job.codes[hits->parts[*part]] < job)
        ++*part;
    return *part < hits->part_count && columns->part_job.codes[hits->parts[*part]] == job;
}

/* ---- lines for people */

static size_t columns_of(const char *text)
{
    return text_columns(text, strlen(text));
}

/* Text in `width` columns, cut with an ellipsis when it is longer. */
static void put_padded(struct buffer *out, const char *text, size_t width, bool last)
{
    size_t used = 0, room = columns_of(text) > width ? width - 1 : width;
    for (const char *end = text + strlen(text), *at = text; at < end;) {
        const char *start = at;
        utf8_next(&at, end);
        char sign[8] = {0};
        memcpy(sign, start, (size_t)(at - start));
        size_t sign_width = columns_of(sign);
        if (used + sign_width > room) {
            buffer_text(out, "…");
            used++;
            break;
        }
        buffer_append(out, start, (size_t)(at - start));
        used += sign_width;
    }
    for (; !last && used < width; used++)
        buffer_byte(out, ' ');
}

/* What stands in a line of a part; the last takes what room is left. */
enum { LINE_JOB, LINE_REF, LINE_TYPE, LINE_PLACE, LINE_OUTCOME, LINE_DONE, LINE_CELLS };
static const size_t cell_widths_max[LINE_CELLS] = {16, 8, 14, 14, 16, 13};

static const char *cell_text(const struct columns *columns, size_t part, int cell)
{
    const struct column_data *parts = columns->parts;
    switch (cell) {
    case LINE_JOB:
        return column_text(&columns->jobs[JOB_NUMBER], columns->part_job.codes[part]);
    case LINE_REF:
        return column_text(&parts[PART_REF], part);
    case LINE_TYPE: {
        const char *type = column_text(&parts[PART_TYPE], part);
        return *type ? type : column_text(&parts[PART_KIND], part);
    }
    case LINE_PLACE:
        return column_text(&parts[PART_PLACE], part);
    case LINE_OUTCOME:
        return column_text(&parts[PART_OUTCOME], part);
    default:
        return column_text(&parts[PART_DONE], part);
    }
}

static const char *set_text(const struct columns *columns, size_t job, struct buffer *text)
{
    const char *maker = column_text(&columns->jobs[JOB_MAKER], job);
    const char *model = column_text(&columns->jobs[JOB_MODEL], job);
    buffer_clear(text);
    buffer_print(text, "%s%s%s", maker, *maker && *model ? " " : "", model);
    return buffer_string(text);
}

static void write_part_lines(const struct columns *columns, const struct query_hits *hits,
                             struct buffer *out)
{
    size_t widths[LINE_CELLS] = {0}, used = 0;
    for (size_t i = 0; i < hits->part_count; i++)
        for (int cell = 0; cell < LINE_CELLS; cell++) {
            size_t width = columns_of(cell_text(columns, hits->parts[i], cell));
            width = width > cell_widths_max[cell] ? cell_widths_max[cell] : width;
            widths[cell] = width > widths[cell] ? width : widths[cell];
        }
    for (int cell = 0; cell < LINE_CELLS; cell++)
        used += widths[cell] ? widths[cell] + (cell == LINE_JOB ? 1 : 2) : 0;
    struct buffer set = {0};
    for (size_t i = 0; i < hits->part_count; i++) {
        size_t part = hits->parts[i];
        for (int cell = 0; cell < LINE_CELLS; cell++) {
            if (!widths[cell])
                continue;
            put_padded(out, cell_text(columns, part, cell), widths[cell], false);
            buffer_text(out, cell == LINE_JOB ? " " : "  ");
        }
        if (used + SET_COLUMNS_MIN <= LINE_COLUMNS)
            put_padded(out, set_text(columns, columns->part_job.codes[part], &set),
                       LINE_COLUMNS - used, true);
        while (out->length && out->data[out->length - 1] == ' ')
            out->length--;
        buffer_byte(out, '\n');
    }
    buffer_release(&set);
}

static void write_job_lines(const struct columns *columns, const struct query_hits *hits,
                            struct buffer *out)
{
    enum { SET_WIDTH = 34, YEAR_WIDTH = 13 };
    struct buffer set = {0};
    size_t part = 0;
    for (size_t i = 0; i < hits->job_count; i++) {
        size_t job = hits->jobs[i];
        if (has_part_hit(columns, hits, job, &part))
            continue;
        const char *returned = column_text(&columns->jobs[JOB_RETURNED], job);
        put_padded(out, column_text(&columns->jobs[JOB_NUMBER], job), 10, false);
        buffer_text(out, "  ");
        put_padded(out, set_text(columns, job, &set), SET_WIDTH, false);
        buffer_text(out, "  ");
        put_padded(out, column_text(&columns->jobs[JOB_YEAR], job), YEAR_WIDTH, false);
        buffer_print(out, "  %s\n", *returned ? returned : "in progress");
    }
    buffer_release(&set);
}

void find_write(const struct columns *columns, const struct query_hits *hits, struct buffer *out)
{
    write_part_lines(columns, hits, out);
    write_job_lines(columns, hits, out);
}

/* ---- JSON */

static void write_facts(const struct column_data *group, const char *const *keys, size_t row,
                        struct buffer *out)
{
    for (size_t i = 0; keys[i]; i++) {
        if (strcmp(keys[i], job_column_keys[JOB_PAGE]) == 0) /* named by the pages alone */
            continue;
        json_choice_member(out, keys[i], column_text(&group[i], row));
    }
}

void find_write_json(const struct columns *columns, const struct query_hits *hits,
                     struct buffer *out)
{
    size_t part = 0;
    for (size_t i = 0; i < hits->part_count; i++) {
        buffer_text(out, "{\"hit\":\"part\"");
        write_facts(columns->parts, part_column_keys, hits->parts[i], out);
        buffer_text(out, ",\"set\":{");
        write_facts(columns->jobs, job_column_keys, columns->part_job.codes[hits->parts[i]], out);
        buffer_text(out, "}}\n");
    }
    for (size_t i = 0; i < hits->job_count; i++) {
        if (has_part_hit(columns, hits, hits->jobs[i], &part))
            continue;
        buffer_text(out, "{\"hit\":\"job\"");
        write_facts(columns->jobs, job_column_keys, hits->jobs[i], out);
        buffer_text(out, "}\n");
    }
}
