#include "base/memory.h"
#include "write/escape.h"
#include "write/markdown_table.h"
#include "write/writer.h"

#include <stdlib.h>

static void write_bold(struct buffer *out, const char *text)
{
    if (!text || !text[0])
        return;
    buffer_text(out, "**");
    escape_markdown(out, text);
    buffer_text(out, "**");
}

/* "**Table 1** caption", a paragraph. */
static void write_caption(struct buffer *out, const struct exhibit *exhibit, const char *caption)
{
    bool numbered = exhibit->number != NULL, captioned = caption && caption[0];
    if (!numbered && !captioned)
        return;
    write_bold(out, exhibit->number);
    buffer_text(out, numbered && captioned ? " " : "");
    escape_markdown(out, caption);
    buffer_text(out, "\n\n");
}

static void write_paragraph(struct buffer *out, const char *text)
{
    if (!text || !text[0])
        return;
    escape_markdown(out, text);
    buffer_text(out, "\n\n");
}

static void write_title(struct buffer *out, const struct title_block *title)
{
    write_bold(out, title->shop_name);
    const char *const lines[] = {title->shop_trade, title->shop_address, title->shop_contact};
    bool any = title->shop_name && title->shop_name[0];
    for (size_t i = 0; i < sizeof lines / sizeof lines[0]; i++) {
        if (!lines[i] || !lines[i][0])
            continue;
        buffer_text(out, any ? "\\\n" : "");
        escape_markdown(out, lines[i]);
        any = true;
    }
    buffer_text(out, any ? "\n\n# " : "# ");
    escape_markdown(out, title->title);
    buffer_text(out, "\n\n");
    write_paragraph(out, title->subtitle);
}

static void write_fact_list(struct buffer *out, const struct fact *facts, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        buffer_text(out, "- ");
        escape_markdown(out, facts[i].label);
        buffer_text(out, ": ");
        escape_markdown(out, facts[i].text);
        buffer_byte(out, '\n');
    }
}

static void write_headline(struct buffer *out, const struct headline *headline)
{
    buffer_text(out, "**");
    escape_markdown(out, headline->heading);
    buffer_text(out, ": ");
    escape_markdown(out, headline->kept);
    buffer_byte(out, ' ');
    escape_markdown(out, headline->of);
    buffer_text(out, "**");
    if (headline->qualifier) {
        buffer_byte(out, ' ');
        escape_markdown(out, headline->qualifier);
    }
    buffer_text(out, "\n\n");
    for (size_t i = 0; i < headline->line_count; i++) {
        buffer_text(out, "- ");
        escape_markdown(out, headline->lines[i].text);
        buffer_byte(out, '\n');
    }
    buffer_text(out, headline->line_count ? "\n" : "");
    for (size_t i = 0; i < headline->kind_count; i++) {
        buffer_text(out, i ? "; " : "");
        escape_markdown(out, headline->kinds[i].label);
        buffer_byte(out, ' ');
        escape_markdown(out, headline->kinds[i].count_text);
    }
    buffer_text(out, headline->kind_count ? "\n\n" : "");
    write_paragraph(out, headline->below);
}

static void write_table(struct buffer *out, const struct exhibit *exhibit)
{
    const struct table *table = &exhibit->table;
    write_caption(out, exhibit, table->caption);
    markdown_table(table, out);
    buffer_byte(out, '\n');
    for (size_t i = 0; i < table->note_count; i++) {
        buffer_decimal(out, (long long)i + 1);
        buffer_text(out, ". ");
        escape_markdown(out, table->notes[i]);
        buffer_byte(out, '\n');
    }
    buffer_text(out, table->note_count ? "\n" : "");
    write_paragraph(out, table->remark);
}

static void write_picture(struct buffer *out, const char *alt, const char *file, const char *suffix)
{
    buffer_text(out, "![");
    escape_markdown(out, alt);
    buffer_text(out, "](pictures/");
    buffer_text(out, file);
    buffer_text(out, suffix);
    buffer_text(out, ")\n\n");
}

static void write_plot(struct buffer *out, const struct exhibit *exhibit)
{
    write_picture(out, exhibit->plot.title, exhibit->id, ".svg");
    write_caption(out, exhibit, exhibit->plot.caption);
    if (!exhibit->plot.numbers)
        return;
    markdown_table(exhibit->plot.numbers, out);
    buffer_byte(out, '\n');
}

static void write_plate(struct buffer *out, const struct exhibit *exhibit)
{
    const struct plate *plate = &exhibit->plate;
    for (size_t i = 0; i < plate->picture_count; i++) {
        const struct plate_picture *picture = &plate->pictures[i];
        write_picture(out, picture->text, picture->file, "");
        write_bold(out, picture->when);
        buffer_text(out, picture->when ? " " : "");
        write_paragraph(out, picture->text);
    }
    write_caption(out, exhibit, plate->caption);
}

static void write_write_ons(struct buffer *out, const struct write_ons *lines)
{
    for (size_t i = 0; i < lines->count; i++) {
        escape_markdown(out, lines->items[i].label);
        buffer_text(out, " ................ ");
        escape_markdown(out, lines->items[i].unit);
        buffer_text(out, i + 1 < lines->count && lines->items[i].unit[0] ? " " : "");
    }
    buffer_text(out, "\n\n");
}

static void write_working(struct buffer *out, const struct working *working)
{
    write_bold(out, working->heading);
    buffer_text(out, "\n\n");
    for (size_t i = 0; i < working->line_count; i++) {
        const struct working_line *line = &working->lines[i];
        const char *const rest[] = {line->formula, line->value, line->source};
        buffer_text(out, "- ");
        escape_markdown(out, line->name);
        const char *before = ": ";
        for (size_t j = 0; j < sizeof rest / sizeof rest[0]; j++) {
            if (!rest[j] || !rest[j][0])
                continue;
            buffer_text(out, before);
            escape_markdown(out, rest[j]);
            before = "; ";
        }
        buffer_byte(out, '\n');
    }
    buffer_text(out, working->line_count ? "\n" : "");
}

static void write_exhibit(struct buffer *out, const struct exhibit *exhibit)
{
    switch (exhibit->kind) {
    case EXHIBIT_TITLE:
        write_title(out, &exhibit->title);
        break;
    case EXHIBIT_FACTS:
        write_fact_list(out, exhibit->facts.left, exhibit->facts.left_count);
        write_fact_list(out, exhibit->facts.right, exhibit->facts.right_count);
        buffer_byte(out, '\n');
        break;
    case EXHIBIT_HEADLINE:
        write_headline(out, &exhibit->headline);
        break;
    case EXHIBIT_TABLE:
        write_table(out, exhibit);
        break;
    case EXHIBIT_PLOT:
        write_plot(out, exhibit);
        break;
    case EXHIBIT_PLATE:
        write_plate(out, exhibit);
        break;
    case EXHIBIT_WRITE_ON:
        write_write_ons(out, &exhibit->write_on);
        break;
    case EXHIBIT_WORKING:
        write_working(out, &exhibit->working);
        break;
    case EXHIBIT_FINGERPRINT:
        buffer_text(out, "    ");
        buffer_text(out, exhibit->fingerprint.text);
        buffer_text(out, "\n\n");
        break;
    case EXHIBIT_TWO_COLUMNS:
    case EXHIBIT_SIDE_BY_SIDE:
    case EXHIBIT_CONTENTS: /* for the screen: a reader of Markdown makes its own */
    case EXHIBIT_PAGE_BREAK:
    case EXHIBIT_SMALL:
        break;
    }
}

static char *rendered(cmark_node *node)
{
    char *text = cmark_render_commonmark(node, CMARK_OPT_DEFAULT, 0);
    if (!text)
        memory_exhausted();
    return text;
}

/* The library writes "## Title": the number goes between. */
static void write_heading(struct buffer *out, cmark_node *node, unsigned number)
{
    char *text = rendered(node);
    const char *title = text;
    while (*title == '#')
        buffer_byte(out, *title++);
    buffer_byte(out, ' ');
    if (number) {
        buffer_decimal(out, number);
        buffer_byte(out, ' ');
    }
    buffer_text(out, *title == ' ' ? title + 1 : title);
    buffer_byte(out, '\n');
    free(text);
}

static void write_prose(struct buffer *out, cmark_node *node)
{
    char *text = rendered(node);
    buffer_text(out, text);
    buffer_byte(out, '\n');
    free(text);
}

void markdown_write(const struct document *document, struct buffer *out)
{
    unsigned section = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        bool heading = cmark_node_get_type(node) == CMARK_NODE_HEADING &&
                       cmark_node_get_heading_level(node) <= 2;
        if (exhibit)
            write_exhibit(out, exhibit);
        else if (heading)
            write_heading(out, node, document->sections_numbered ? ++section : 0);
        else
            write_prose(out, node);
    }
    while (out->length > 1 && out->data[out->length - 1] == '\n' &&
           out->data[out->length - 2] == '\n')
        out->length--;
}
