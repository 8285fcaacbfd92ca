#include "write/writer.h"

#include "base/memory.h"
#include "base/mustache.h"
#include "write/html_parts.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

void html_text(struct html *html, const char *text)
{
    escape_html(html->out, text);
}

void html_number(struct html *html, double value)
{
    buffer_fixed(html->out, value, 2);
}

void html_caption(struct html *html, const struct exhibit *exhibit, const char *caption)
{
    if (exhibit->number) {
        html_raw(html, "<b>");
        html_text(html, exhibit->number);
        html_raw(html, "</b> ");
    }
    html_text(html, caption);
}

static void make_marks(struct html *html)
{
    for (int mark = MARK_PASS; mark <= MARK_FAIL; mark++) {
        struct drawing drawing = drawing_of_mark((enum mark)mark, &html->scratch);
        struct svg_frame frame = {.left = -5, .top = -5, .right = 5, .bottom = 5};
        svg_write(&drawing, &frame, &html->marks[mark]);
    }
}

/* ---- exhibits */

static void write_lines(struct html *html, const char *first, const char *second)
{
    bool named = first && first[0];
    html_raw(html, "<p>");
    if (named) {
        html_raw(html, "<strong>");
        html_text(html, first);
        html_raw(html, "</strong>");
    }
    html_raw(html, named && second && second[0] ? "<br>" : "");
    html_text(html, second);
    html_raw(html, "</p>");
}

static void write_address(struct html *html, const struct title_block *title)
{
    bool both = title->shop_address && title->shop_contact;
    html_raw(html, "<p>");
    html_text(html, title->shop_address);
    html_raw(html, both ? "<br>" : "");
    html_text(html, title->shop_contact);
    html_raw(html, "</p>");
}

static void write_title(struct html *html, const struct title_block *title)
{
    bool letterhead = title->shop_name || title->shop_address || title->shop_contact || title->logo;
    if (letterhead) {
        html_raw(html, "<header class=\"letterhead\">");
        if (title->logo) {
            html_raw(html, "<img class=\"logo\" src=\"pictures/");
            html_text(html, title->logo->file);
            html_raw(html, "\" alt=\"\">");
        }
        write_lines(html, title->shop_name, title->shop_trade);
        write_address(html, title);
        html_raw(html, "</header>\n");
    }
    html_raw(html, "<h1>");
    html_text(html, title->title);
    html_raw(html, "</h1>\n");
    if (title->subtitle && title->subtitle[0]) {
        html_raw(html, "<p class=\"sub\">");
        html_text(html, title->subtitle);
        html_raw(html, "</p>\n");
    }
}

static void write_fact_list(struct html *html, const struct fact *facts, size_t count)
{
    if (count == 0)
        return;
    html_raw(html, "<dl>");
    for (size_t i = 0; i < count; i++) {
        html_raw(html, "<dt>");
        html_text(html, facts[i].label);
        html_raw(html, "</dt><dd>");
        html_text(html, facts[i].text);
        html_raw(html, "</dd>");
    }
    html_raw(html, "</dl>");
}

static void write_facts(struct html *html, const struct facts *facts)
{
    html_raw(html, "<div class=\"facts\">");
    write_fact_list(html, facts->left, facts->left_count);
    write_fact_list(html, facts->right, facts->right_count);
    html_raw(html, "</div>\n");
}

static void write_write_ons(struct html *html, const struct write_ons *lines)
{
    html_raw(html, "<p class=\"writeon\">");
    for (size_t i = 0; i < lines->count; i++) {
        html_raw(html, "<span style=\"flex-grow:");
        html_number(html, lines->items[i].width);
        html_raw(html, "\">");
        html_text(html, lines->items[i].label);
        html_raw(html, " <span class=\"fill\"></span> ");
        html_text(html, lines->items[i].unit);
        html_raw(html, "</span> ");
    }
    html_raw(html, "</p>\n");
}

static void write_working(struct html *html, const struct exhibit *exhibit)
{
    const struct working *working = &exhibit->working;
    html_raw(html, "<details id=\"");
    html_text(html, exhibit->id);
    html_raw(html, "\"><summary>");
    html_text(html, working->heading);
    html_raw(html, "</summary><table class=\"lined calc\"><tbody>\n");
    for (size_t i = 0; i < working->line_count; i++) {
        const struct working_line *line = &working->lines[i];
        html_raw(html, "<tr><th scope=\"row\">");
        html_text(html, line->name);
        html_raw(html, "</th><td>");
        html_text(html, line->formula);
        html_raw(html, "</td><td class=\"value\">");
        html_text(html, line->value);
        html_raw(html, "</td><td class=\"soft\">");
        html_text(html, line->source);
        html_raw(html, "</td></tr>\n");
    }
    html_raw(html, "</tbody></table></details>\n");
}

/* ---- headings and prose */

static bool is_section(cmark_node *node)
{
    return cmark_node_get_type(node) == CMARK_NODE_HEADING &&
           cmark_node_get_heading_level(node) <= 2;
}

static char *rendered(cmark_node *node)
{
    char *markup = cmark_render_html(node, CMARK_OPT_DEFAULT);
    if (!markup)
        memory_exhausted();
    return markup;
}

static void write_prose(struct html *html, cmark_node *node)
{
    char *markup = rendered(node);
    html_raw(html, markup);
    free(markup);
}

static void write_section_number(struct html *html, unsigned number)
{
    if (!html->document->sections_numbered)
        return;
    html_raw(html, "<span class=\"no\">");
    buffer_decimal(html->out, number);
    html_raw(html, "</span> ");
}

static void write_heading(struct html *html, cmark_node *node, unsigned number)
{
    html_raw(html, "<h2 id=\"");
    document_section_id(node, html->out);
    html_raw(html, "\">");
    write_section_number(html, number);
    /* What stands between <h2> and </h2> of the library's own rendering. */
    char *markup = rendered(node), *start = strchr(markup, '>'), *end = strrchr(markup, '<');
    if (start && end && end > start)
        buffer_append(html->out, start + 1, (size_t)(end - start - 1));
    free(markup);
    html_raw(html, "</h2>\n");
}

static void write_contents(struct html *html, const struct exhibit *exhibit)
{
    unsigned number = 0;
    struct buffer text = {0};
    html_raw(html, "<nav class=\"contents\" id=\"");
    html_text(html, exhibit->id);
    html_raw(html, "\" aria-label=\"");
    html_text(html, html->document->contents_word);
    html_raw(html, "\"><ol>\n");
    for (cmark_node *node = cmark_node_first_child(html->document->root); node;
         node = cmark_node_next(node)) {
        if (!is_section(node))
            continue;
        html_raw(html, "<li>");
        write_section_number(html, ++number);
        html_raw(html, "<a href=\"#");
        document_section_id(node, html->out);
        html_raw(html, "\">");
        buffer_clear(&text);
        document_plain_text(node, &text);
        html_text(html, buffer_string(&text));
        html_raw(html, "</a></li>\n");
    }
    html_raw(html, "</ol></nav>\n");
    buffer_release(&text);
}

/* Groups of eight for the eye, set apart without spaces: a copy is what sha256sum prints. */
static void write_fingerprint(struct html *html, const char *text)
{
    enum { GROUP = 8 };
    char group[GROUP + 1];
    html_raw(html, "<p class=\"finger\"><code>");
    for (size_t length; text && *text; text += length) {
        length = strnlen(text, GROUP);
        snprintf(group, sizeof group, "%.*s", GROUP, text);
        html_raw(html, "<span>");
        html_text(html, group);
        html_raw(html, text[length] ? "</span><wbr>" : "</span>");
    }
    html_raw(html, "</code></p>\n");
}

/* ---- the walk */

/* What an exhibit does to the nodes behind it. */
struct walk {
    unsigned section;
    bool small;      /* a <div class="small"> is open up to the next heading */
    bool in_columns; /* and one inside it up to the next heading or exhibit */
};

static void write_exhibit(struct html *html, const struct exhibit *exhibit, struct walk *walk)
{
    switch (exhibit->kind) {
    case EXHIBIT_TITLE:
        write_title(html, &exhibit->title);
        break;
    case EXHIBIT_FACTS:
        write_facts(html, &exhibit->facts);
        break;
    case EXHIBIT_HEADLINE:
        html_headline(html, exhibit);
        break;
    case EXHIBIT_TABLE:
        html_table(html, exhibit);
        break;
    case EXHIBIT_PLOT:
        html_plot(html, exhibit);
        break;
    case EXHIBIT_PLATE:
        html_plate(html, exhibit);
        break;
    case EXHIBIT_TWO_COLUMNS:
        html_raw(html, "<div class=\"before\">\n");
        walk->in_columns = true;
        break;
    case EXHIBIT_SIDE_BY_SIDE:
        break;
    case EXHIBIT_WRITE_ON:
        write_write_ons(html, &exhibit->write_on);
        break;
    case EXHIBIT_WORKING:
        write_working(html, exhibit);
        break;
    case EXHIBIT_FINGERPRINT:
        write_fingerprint(html, exhibit->fingerprint.text);
        break;
    case EXHIBIT_CONTENTS:
        write_contents(html, exhibit);
        break;
    case EXHIBIT_PAGE_BREAK:
        html_raw(html, "<div class=\"page-break\"></div>\n");
        break;
    case EXHIBIT_SMALL:
        html_raw(html, walk->small ? "" : "<div class=\"small\">\n");
        walk->small = true;
        break;
    }
}

static void write_node(struct html *html, cmark_node *node, struct walk *walk)
{
    const struct exhibit *exhibit = document_exhibit(node);
    bool heading = cmark_node_get_type(node) == CMARK_NODE_HEADING;
    if ((heading || exhibit) && walk->in_columns) {
        html_raw(html, "</div>\n");
        walk->in_columns = false;
    }
    if (heading && walk->small) {
        html_raw(html, "</div>\n");
        walk->small = false;
    }
    if (exhibit) {
        write_exhibit(html, exhibit, walk);
    } else if (is_section(node)) {
        write_heading(html, node, ++walk->section);
    } else {
        write_prose(html, node);
    }
}

void html_write_body(const struct document *document, struct buffer *out)
{
    struct html html = {.document = document, .out = out};
    struct walk walk = {0};
    make_marks(&html);
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node))
        write_node(&html, node, &walk);
    html_raw(&html, walk.in_columns ? "</div>\n" : "");
    html_raw(&html, walk.small ? "</div>\n" : "");
    for (size_t i = 0; i < sizeof html.marks / sizeof html.marks[0]; i++)
        buffer_release(&html.marks[i]);
    arena_release(&html.scratch);
}

void html_write_exhibit(const struct exhibit *exhibit, struct buffer *out)
{
    struct html html = {.out = out};
    struct walk walk = {0};
    assert(exhibit->kind != EXHIBIT_CONTENTS);
    make_marks(&html);
    write_exhibit(&html, exhibit, &walk);
    for (size_t i = 0; i < sizeof html.marks / sizeof html.marks[0]; i++)
        buffer_release(&html.marks[i]);
    arena_release(&html.scratch);
}

/* ---- the page around it */

struct page {
    const struct document *document; /* NULL: only the template is checked */
    const char *style;
};

/* Nothing but a colour may stand here, whatever shop.yaml says. */
static const char *colour_or(const char *colour, const char *otherwise)
{
    bool good = colour && colour[0] == '#' && (strlen(colour) == 4 || strlen(colour) == 7) &&
                strspn(colour + 1, "0123456789abcdefABCDEF") == strlen(colour) - 1;
    return good ? colour : otherwise;
}

static void write_page_style(const struct document *document, struct buffer *out)
{
    buffer_text(out, ":root { --accent-light: ");
    buffer_text(out, colour_or(document->accent, "#1b4b6b"));
    buffer_text(out, "; --accent-dark: ");
    buffer_text(out, colour_or(document->accent_dark, "#8fc3e6"));
    buffer_text(out, "; }\n@page { size: ");
    buffer_text(out, document->page == PAGE_LETTER ? "letter" : "A4");
    buffer_text(out, "; @top-left { content: \"");
    escape_css(out, document->running_head);
    buffer_text(out, "\"; } @top-right { content: \"");
    escape_css(out, document->page_word);
    buffer_text(out, " \" counter(page) \" ");
    escape_css(out, document->page_word_of);
    buffer_text(out, " \" counter(pages); } }\n");
}

static enum mustache_partial_answer page_partial(void *data, const struct mustache_partial *partial,
                                                 const struct source **found)
{
    const struct page *page = data;
    (void)found;
    bool style = strcmp(partial->name, "style") == 0,
         page_style = strcmp(partial->name, "page_style") == 0,
         body = strcmp(partial->name, "document") == 0;
    if (!style && !page_style && !body)
        return MUSTACHE_PARTIAL_UNKNOWN;
    if (!page->document)
        return MUSTACHE_PARTIAL_DONE;
    if (style)
        buffer_text(partial->out, page->style);
    else if (page_style)
        write_page_style(page->document, partial->out);
    else
        html_write_body(page->document, partial->out);
    return MUSTACHE_PARTIAL_DONE;
}

static const char *kind_name(enum document_kind kind)
{
    switch (kind) {
    case DOCUMENT_RECORD:
        return "record";
    case DOCUMENT_SHEET:
        return "sheet";
    case DOCUMENT_MANUAL:
        return "page";
    case DOCUMENT_ASSESSMENT:
        return "assessment";
    case DOCUMENT_WORKING:
        return "working";
    }
    return "";
}

static const struct mustache_value *page_values(const struct document *document,
                                                struct arena *arena)
{
    struct mustache_value *values = mustache_map(arena);
    mustache_set_text(arena, values, "language", document->language ? document->language : "en");
    mustache_set_text(arena, values, "title", document->title);
    mustache_set_text(arena, values, "author", document->author);
    mustache_set_text(arena, values, "subject", document->subject);
    mustache_set_text(arena, values, "kind", kind_name(document->kind));
    mustache_set_text(arena, values, "skip", document->skip_word);
    mustache_set_text(arena, values, "footer", document->footer);
    return values;
}

static void escape_for_page(struct buffer *out, const char *text, size_t length)
{
    char *copy = memory_get(length + 1);
    memcpy(copy, text, length);
    copy[length] = '\0';
    escape_html(out, copy);
    free(copy);
}

void html_write(const struct document *document, const char *style, const char *page_template,
                struct buffer *out)
{
    struct arena arena = {0};
    struct diagnostics ignored = diagnostics_in(&arena); /* html_check_page reports them */
    struct page page = {.document = document, .style = style};
    struct source source = {
        .path = "page.html", .text = page_template, .length = strlen(page_template)};
    struct mustache_target target = {.escape = escape_for_page,
                                     .partial = page_partial,
                                     .data = &page,
                                     .arena = &arena,
                                     .diagnostics = &ignored};
    mustache_render(&source, page_values(document, &arena), &target, out);
    arena_release(&arena);
}

bool html_check_page(const struct source *page, struct arena *arena,
                     struct diagnostics *diagnostics)
{
    struct buffer nowhere = {0};
    struct page none = {0};
    struct mustache_target target = {.escape = escape_for_page,
                                     .partial = page_partial,
                                     .data = &none,
                                     .arena = arena,
                                     .diagnostics = diagnostics};
    bool good = mustache_render(page, mustache_map(arena), &target, &nowhere);
    buffer_release(&nowhere);
    return good;
}
