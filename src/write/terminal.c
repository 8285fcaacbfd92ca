#include "write/terminal_parts.h"

#include "write/text_width.h"
#include "write/writer.h"

#include <string.h>

enum { FACT_WIDTH = 12 };

void terminal_spaces(struct terminal *terminal, size_t count)
{
    for (size_t i = 0; i < count; i++)
        buffer_byte(terminal->out, ' ');
}

size_t terminal_text(struct terminal *terminal, const char *text)
{
    size_t start = terminal->out->length;
    escape_terminal(terminal->out, text);
    return text_columns(terminal->out->data + start, terminal->out->length - start);
}

size_t terminal_bold(struct terminal *terminal, const char *text)
{
    if (!terminal->bold_allowed || !text || !text[0])
        return terminal_text(terminal, text);
    buffer_text(terminal->out, "\x1b[1m");
    size_t columns = terminal_text(terminal, text);
    buffer_text(terminal->out, "\x1b[0m");
    return columns;
}

void terminal_field(struct terminal *terminal, const char *text, size_t width)
{
    size_t used = terminal_text(terminal, text);
    terminal_spaces(terminal, width > used ? width - used : 0);
}

void terminal_continued(struct terminal *terminal, const char *text, struct indent indent)
{
    size_t at = indent.first;
    bool line_start = true;
    while (text) {
        text += strspn(text, " \n\t\r");
        size_t length = strcspn(text, " \n\t\r");
        if (length == 0)
            break;
        const char *word = arena_text(&terminal->scratch, text, length);
        size_t width = text_columns(word, length);
        if (!line_start && at + 1 + width > terminal->columns) {
            buffer_byte(terminal->out, '\n');
            terminal_spaces(terminal, indent.rest);
            at = indent.rest;
            line_start = true;
        }
        if (!line_start) {
            buffer_byte(terminal->out, ' ');
            at++;
        }
        at += terminal_text(terminal, word);
        line_start = false;
        text += length;
    }
    buffer_byte(terminal->out, '\n');
}

void terminal_wrapped(struct terminal *terminal, const char *text, struct indent indent)
{
    if (!text || !text[0])
        return;
    terminal_spaces(terminal, indent.first);
    terminal_continued(terminal, text, indent);
}

void terminal_caption(struct terminal *terminal, const struct exhibit *exhibit, const char *caption)
{
    if (!exhibit->number) {
        terminal_wrapped(terminal, caption, (struct indent){0, 0});
        return;
    }
    size_t number = terminal_bold(terminal, exhibit->number) + 2;
    terminal_spaces(terminal, 2);
    terminal_continued(terminal, caption, (struct indent){number, 0});
}

static void write_title(struct terminal *terminal, const struct title_block *title)
{
    terminal_bold(terminal, title->title);
    buffer_byte(terminal->out, '\n');
    terminal_wrapped(terminal, title->subtitle, (struct indent){0, 0});
    terminal_wrapped(terminal, title->shop_name, (struct indent){0, 0});
}

static void write_fact_list(struct terminal *terminal, const struct fact *facts, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        terminal_field(terminal, facts[i].label, FACT_WIDTH);
        terminal_continued(terminal, facts[i].text, (struct indent){FACT_WIDTH, FACT_WIDTH});
    }
}

static void write_notes(struct terminal *terminal, const struct table *table)
{
    for (size_t i = 0; i < table->note_count; i++) {
        const char *note = arena_print(&terminal->scratch, "%zu  %s", i + 1, table->notes[i]);
        terminal_wrapped(terminal, note, (struct indent){0, 3});
    }
    terminal_wrapped(terminal, table->remark, (struct indent){0, 0});
}

static void write_write_ons(struct terminal *terminal, const struct write_ons *lines)
{
    const char *text = "";
    for (size_t i = 0; i < lines->count; i++)
        text = arena_print(&terminal->scratch, "%s%s ........ %s ", text, lines->items[i].label,
                           lines->items[i].unit);
    terminal_wrapped(terminal, text, (struct indent){0, 0});
}

static void write_working(struct terminal *terminal, const struct working *working)
{
    terminal_bold(terminal, working->heading);
    buffer_byte(terminal->out, '\n');
    for (size_t i = 0; i < working->line_count; i++) {
        const struct working_line *line = &working->lines[i];
        const char *const parts[] = {line->formula, line->value, line->source};
        const char *text = line->name, *before = ": ";
        for (size_t j = 0; j < sizeof parts / sizeof parts[0]; j++) {
            if (!parts[j] || !parts[j][0])
                continue;
            text = arena_print(&terminal->scratch, "%s%s%s", text, before, parts[j]);
            before = "; ";
        }
        terminal_wrapped(terminal, text, (struct indent){2, 4});
    }
}

static void write_plate(struct terminal *terminal, const struct exhibit *exhibit)
{
    terminal_caption(terminal, exhibit, exhibit->plate.caption);
    for (size_t i = 0; i < exhibit->plate.picture_count; i++) {
        const struct plate_picture *picture = &exhibit->plate.pictures[i];
        const char *text =
            arena_print(&terminal->scratch, "pictures/%s  %s %s", picture->file,
                        picture->when ? picture->when : "", picture->text ? picture->text : "");
        terminal_wrapped(terminal, text, (struct indent){2, 4});
    }
}

static void write_exhibit(struct terminal *terminal, const struct exhibit *exhibit)
{
    switch (exhibit->kind) {
    case EXHIBIT_TITLE:
        write_title(terminal, &exhibit->title);
        break;
    case EXHIBIT_FACTS:
        write_fact_list(terminal, exhibit->facts.left, exhibit->facts.left_count);
        write_fact_list(terminal, exhibit->facts.right, exhibit->facts.right_count);
        break;
    case EXHIBIT_HEADLINE:
        terminal_headline(terminal, &exhibit->headline);
        break;
    case EXHIBIT_TABLE:
        terminal_caption(terminal, exhibit, exhibit->table.caption);
        terminal_table(terminal, &exhibit->table);
        write_notes(terminal, &exhibit->table);
        break;
    case EXHIBIT_PLOT:
        terminal_plot(terminal, exhibit);
        break;
    case EXHIBIT_PLATE:
        write_plate(terminal, exhibit);
        break;
    case EXHIBIT_WRITE_ON:
        write_write_ons(terminal, &exhibit->write_on);
        break;
    case EXHIBIT_WORKING:
        write_working(terminal, &exhibit->working);
        break;
    case EXHIBIT_FINGERPRINT:
        terminal_wrapped(terminal, exhibit->fingerprint.text, (struct indent){0, 0});
        break;
    case EXHIBIT_TWO_COLUMNS:
    case EXHIBIT_SIDE_BY_SIDE:
    case EXHIBIT_CONTENTS:
    case EXHIBIT_PAGE_BREAK:
    case EXHIBIT_SMALL:
        break;
    }
}

static void write_heading(struct terminal *terminal, cmark_node *node, unsigned number)
{
    struct buffer text = {0};
    if (number) {
        buffer_decimal(&text, number);
        buffer_text(&text, "  ");
    }
    document_plain_text(node, &text);
    terminal_bold(terminal, buffer_string(&text));
    buffer_byte(terminal->out, '\n');
    buffer_release(&text);
}

void terminal_write(const struct document *document, unsigned columns, bool bold_allowed,
                    struct buffer *out)
{
    struct terminal terminal = {.document = document,
                                .out = out,
                                .columns = columns < 40 ? 40 : columns,
                                .bold_allowed = bold_allowed};
    unsigned section = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        size_t start = out->length;
        if (exhibit)
            write_exhibit(&terminal, exhibit);
        else if (cmark_node_get_type(node) == CMARK_NODE_HEADING)
            write_heading(&terminal, node,
                          document->sections_numbered && cmark_node_get_heading_level(node) <= 2
                              ? ++section
                              : 0);
        else
            terminal_prose(&terminal, node);
        if (out->length > start && cmark_node_next(node))
            buffer_byte(out, '\n');
    }
    while (out->length > 1 && out->data[out->length - 1] == '\n' &&
           out->data[out->length - 2] == '\n')
        out->length--;
    arena_release(&terminal.scratch);
}
