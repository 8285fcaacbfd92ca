#include "write/markdown_table.h"

#include "write/escape.h"
#include "write/table_text.h"
#include "write/text_width.h"

#include <string.h>

struct table_writing {
    struct table_text text;
    struct buffer *out;
    /* A group line becomes a column behind the ref, so that one line says all of a part. */
    bool grouped;
    size_t group_width;
};

static void pad(struct buffer *out, char with, size_t count)
{
    for (size_t i = 0; i < count; i++)
        buffer_byte(out, with);
}

static void write_field(const struct table_writing *writing, const char *text, size_t width,
                        bool right)
{
    size_t used = text_columns(text, strlen(text)), rest = width > used ? width - used : 0;
    buffer_text(writing->out, "| ");
    if (right)
        pad(writing->out, ' ', rest);
    buffer_text(writing->out, text);
    pad(writing->out, ' ', right ? 1 : rest + 1);
}

static void write_rule_field(const struct table_writing *writing, size_t width, bool right)
{
    buffer_text(writing->out, "| ");
    pad(writing->out, '-', (width > 3 ? width : 3) - right);
    buffer_text(writing->out, right ? ": " : " ");
}

/* A field narrower than the rule of three hyphens would leave the pipes out of line. */
static size_t width_of(const struct table_writing *writing, size_t column)
{
    size_t width = writing->text.widths[column];
    return width > 3 ? width : 3;
}

static const char *group_head(const struct table *table)
{
    return table->group_head ? table->group_head : "";
}

static void write_head(const struct table_writing *writing)
{
    const struct table *table = writing->text.table;
    for (size_t i = 0; i < table->column_count; i++) {
        write_field(writing, writing->text.heads[i], width_of(writing, i),
                    writing->text.aligned_right[i]);
        if (i == 0 && writing->grouped)
            write_field(writing, group_head(table), writing->group_width, false);
    }
    buffer_text(writing->out, "|\n");
    for (size_t i = 0; i < table->column_count; i++) {
        write_rule_field(writing, width_of(writing, i), writing->text.aligned_right[i]);
        if (i == 0 && writing->grouped)
            write_rule_field(writing, writing->group_width, false);
    }
    buffer_text(writing->out, "|\n");
}

static void write_row(const struct table_writing *writing, size_t row, const char *group)
{
    for (size_t i = 0; i < writing->text.table->column_count; i++) {
        write_field(writing, table_text_cell(&writing->text, row, i), width_of(writing, i),
                    writing->text.aligned_right[i]);
        if (i == 0 && writing->grouped)
            write_field(writing, group, writing->group_width, false);
    }
    buffer_text(writing->out, "|\n");
}

static void measure_groups(struct table_writing *writing)
{
    const struct table *table = writing->text.table;
    size_t head = text_columns(group_head(table), strlen(group_head(table)));
    writing->group_width = head > 3 ? head : 3;
    for (size_t i = 0; i < table->row_count; i++) {
        if (!table->rows[i].group)
            continue;
        const char *group = table_text_cell(&writing->text, i, 0);
        size_t width = text_columns(group, strlen(group));
        writing->grouped = true;
        if (width > writing->group_width)
            writing->group_width = width;
    }
}

void markdown_table(const struct table *table, struct buffer *out)
{
    static const struct table_text_style style = {escape_markdown, "**", "**", false};
    struct arena scratch = {0};
    struct table_writing writing = {.text = table_text_of(table, &style, &scratch), .out = out};
    const char *group = "";
    measure_groups(&writing);
    write_head(&writing);
    for (size_t i = 0; i < table->row_count; i++) {
        if (table->rows[i].group)
            group = table_text_cell(&writing.text, i, 0);
        else
            write_row(&writing, i, group);
    }
    arena_release(&scratch);
}
