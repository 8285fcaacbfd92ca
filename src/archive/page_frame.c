#include "archive/page_frame.h"

#include "write/writer.h"

#include <string.h>

static void put(const struct page_frame *frame, struct mustache_value *values, const char *key,
                const char *text)
{
    mustache_set_text(frame->arena, values, key, text);
}

struct mustache_value *page_values(const struct page_frame *frame)
{
    const struct shop *shop = frame->archive->shop;
    struct mustache_value *values = mustache_map(frame->arena);
    put(frame, values, "shop", shop->name);
    put(frame, values, "trade", shop->trade);
    put(frame, values, "address", shop->address);
    put(frame, values, "contact", shop->contact);
    put(frame, values, "language", phrase(&frame->say, "document.language", NULL));
    mustache_set(frame->arena, values, "term", words_terms(frame->say.words));
    return values;
}

struct exhibit *page_exhibit(struct page_frame *frame, enum exhibit_kind kind, const char *id)
{
    struct exhibit *exhibit = arena_get(frame->arena, sizeof *exhibit);
    bool table = kind == EXHIBIT_TABLE;
    exhibit->kind = kind;
    exhibit->id = arena_copy(frame->arena, id);
    exhibit->number =
        phrase(&frame->say, table ? "number.table" : "number.figure", "n",
               arena_print(frame->arena, "%u", table ? ++frame->tables : ++frame->figures), NULL);
    frame->exhibits = arena_grow(frame->arena, frame->exhibits, frame->exhibit_count,
                                 &frame->exhibit_capacity, sizeof *frame->exhibits);
    frame->exhibits[frame->exhibit_count++] = exhibit;
    return exhibit;
}

struct column page_column(const struct page_frame *frame, const char *head, enum column_kind kind,
                          double width_percent, unsigned rank)
{
    struct column column = {.head = "", .kind = kind, .width_percent = width_percent, .rank = rank};
    if (head)
        column.head = phrase_in(&frame->say, "statistics.head", head);
    if (rank > 1)
        column.label = column.head;
    return column;
}

static enum mustache_partial_answer insert(void *data, const struct mustache_partial *partial,
                                           const struct source **found)
{
    const struct page_frame *frame = data;
    (void)found;
    for (size_t i = 0; i < frame->exhibit_count; i++)
        if (strcmp(frame->exhibits[i]->id, partial->name) == 0) {
            html_write_exhibit(frame->exhibits[i], partial->out);
            return MUSTACHE_PARTIAL_DONE;
        }
    /* A shop's own template may name an exhibit that has nothing to show today. */
    return MUSTACHE_PARTIAL_DONE;
}

enum file_status page_write_file(struct page_frame *frame, const char *path,
                                 const struct buffer *contents)
{
    struct buffer whole = {0};
    buffer_print(&whole, "%s/%s", frame->output, path);
    enum file_status status =
        file_write(buffer_string(&whole), contents->data, contents->length, NULL);
    if (status != FILE_OK)
        buffer_text(frame->failed, buffer_string(&whole));
    buffer_release(&whole);
    return status;
}

enum file_status page_style_write(struct page_frame *frame)
{
    const struct shop *shop = frame->archive->shop;
    const char *own = templates_text(frame->archive->templates, "site.css", frame->diagnostics);
    struct buffer style = {0};
    buffer_print(&style, "%s\n%s\n", frame->archive->style, own ? own : "");
    buffer_print(&style, ":root { --accent-light: %s; --accent-dark: %s; }\n", shop->accent,
                 shop->accent_dark);
    buffer_print(&style, "@page { size: %s; }\n", shop->page == PAGE_LETTER ? "letter" : "A4");
    enum file_status status = page_write_file(frame, "site-style.css", &style);
    buffer_release(&style);
    return status;
}

enum file_status page_write(struct page_frame *frame, const char *template_name,
                            const struct mustache_value *values, const char *path)
{
    const char *text = templates_text(frame->archive->templates, template_name, frame->diagnostics);
    struct source source = {template_name, text ? text : "", text ? strlen(text) : 0};
    struct mustache_target target = {mustache_escape_html, insert, frame, frame->arena,
                                     frame->diagnostics};
    struct buffer page = {0};
    mustache_render(&source, values, &target, &page);
    enum file_status status = page_write_file(frame, path, &page);
    buffer_release(&page);
    frame->exhibit_count = 0;
    frame->tables = frame->figures = 0;
    return status;
}

struct mustache_value *page_job_row(const struct page_frame *frame, size_t job)
{
    static const struct {
        const char *key;
        enum job_column column;
    } facts[] = {
        {"job", JOB_NUMBER}, {"maker", JOB_MAKER},   {"model", JOB_MODEL},
        {"year", JOB_YEAR},  {"supply", JOB_SUPPLY}, {"returned", JOB_RETURNED},
        {"kept", JOB_KEPT},  {"of", JOB_OF},         {"failed", JOB_FAILED},
        {"page", JOB_PAGE},  {"serial", JOB_SERIAL}, {"capacitors", JOB_CAPACITORS},
    };
    struct mustache_value *row = mustache_map(frame->arena);
    for (size_t i = 0; i < sizeof facts / sizeof *facts; i++) {
        const char *text = column_text(&frame->columns->jobs[facts[i].column], job);
        /* Texts of the columns outlive the page: no copy. */
        if (*text)
            put(frame, row, facts[i].key, text);
    }
    const char *progress = column_text(&frame->columns->jobs[JOB_IN_PROGRESS], job);
    mustache_set_flag(frame->arena, row, "in_progress", strcmp(progress, "true") == 0);
    return row;
}
