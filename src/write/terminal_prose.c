/* Prose on a terminal: paragraphs wrapped, lists and quotations indented. Walked, not recursed: a
   note may be nested as deep as it likes. */
#include "write/terminal_parts.h"

#include "write/text_width.h"

#include <string.h>

enum { INDENT_AT_MOST = 24 };

struct prose_walk {
    struct terminal *terminal;
    struct buffer text; /* of the paragraph being read */
    size_t indent;      /* of the blocks around it */
    char marker[24];    /* before the next paragraph: "- " or "3. " */
    bool any;           /* something was written */
};

static size_t bounded(size_t indent)
{
    return indent < INDENT_AT_MOST ? indent : INDENT_AT_MOST;
}

static void write_paragraph(struct prose_walk *prose, bool apart)
{
    if (apart && prose->any && !prose->marker[0])
        buffer_byte(prose->terminal->out, '\n');
    size_t marker = strlen(prose->marker), indent = bounded(prose->indent);
    const char *text =
        arena_print(&prose->terminal->scratch, "%s%s", prose->marker, buffer_string(&prose->text));
    size_t first = indent > marker ? indent - marker : 0;
    terminal_wrapped(prose->terminal, text, (struct indent){first, indent});
    prose->marker[0] = '\0';
    prose->any = true;
    buffer_clear(&prose->text);
}

static void write_code(struct prose_walk *prose, const char *literal)
{
    while (literal && *literal) {
        size_t length = strcspn(literal, "\n");
        terminal_spaces(prose->terminal, bounded(prose->indent) + 4);
        terminal_text(prose->terminal, arena_text(&prose->terminal->scratch, literal, length));
        buffer_byte(prose->terminal->out, '\n');
        literal += length + (literal[length] == '\n');
    }
    prose->any = true;
}

static unsigned number_in_list(cmark_node *item)
{
    unsigned number = 0;
    for (cmark_node *node = item; node && number < 100000; node = cmark_node_previous(node))
        number++;
    return number - 1 + (unsigned)cmark_node_get_list_start(cmark_node_parent(item));
}

static size_t item_indent(cmark_node *item)
{
    return cmark_node_get_list_type(cmark_node_parent(item)) == CMARK_ORDERED_LIST ? 4 : 2;
}

static void enter_item(struct prose_walk *prose, cmark_node *item)
{
    prose->indent += item_indent(item);
    if (item_indent(item) == 2)
        memcpy(prose->marker, "- ", 3);
    else {
        struct buffer number = {0};
        buffer_decimal(&number, number_in_list(item));
        buffer_text(&number, ". ");
        strncpy(prose->marker, buffer_string(&number), sizeof prose->marker - 1);
        buffer_release(&number);
    }
}

static void append(struct prose_walk *prose, const char *text)
{
    buffer_text(&prose->text, text ? text : "");
}

static void leave_link(struct prose_walk *prose, cmark_node *link)
{
    const char *url = cmark_node_get_url(link);
    if (!url || !url[0])
        return;
    append(prose, " <");
    append(prose, url);
    append(prose, ">");
}

static bool in_tight_list(cmark_node *paragraph)
{
    cmark_node *item = cmark_node_parent(paragraph);
    return item && cmark_node_get_type(item) == CMARK_NODE_ITEM &&
           cmark_node_get_list_tight(cmark_node_parent(item));
}

static void visit(struct prose_walk *prose, cmark_node *node, bool entering)
{
    switch (cmark_node_get_type(node)) {
    case CMARK_NODE_BLOCK_QUOTE:
        prose->indent = entering ? prose->indent + 4 : prose->indent - 4;
        break;
    case CMARK_NODE_ITEM:
        if (entering)
            enter_item(prose, node);
        else
            prose->indent -= item_indent(node);
        break;
    case CMARK_NODE_PARAGRAPH:
    case CMARK_NODE_HEADING:
        if (!entering)
            write_paragraph(prose, !in_tight_list(node));
        break;
    case CMARK_NODE_CODE_BLOCK:
        write_code(prose, cmark_node_get_literal(node));
        break;
    case CMARK_NODE_THEMATIC_BREAK:
        append(prose, "----");
        write_paragraph(prose, true);
        break;
    case CMARK_NODE_TEXT:
    case CMARK_NODE_CODE:
        append(prose, cmark_node_get_literal(node));
        break;
    case CMARK_NODE_SOFTBREAK:
    case CMARK_NODE_LINEBREAK:
        append(prose, " ");
        break;
    case CMARK_NODE_LINK:
        if (!entering)
            leave_link(prose, node);
        break;
    case CMARK_NODE_NONE:
    case CMARK_NODE_DOCUMENT:
    case CMARK_NODE_LIST:
    case CMARK_NODE_CUSTOM_BLOCK:
    case CMARK_NODE_HTML_BLOCK:
    case CMARK_NODE_CUSTOM_INLINE:
    case CMARK_NODE_HTML_INLINE:
    case CMARK_NODE_EMPH:
    case CMARK_NODE_STRONG:
    case CMARK_NODE_IMAGE:
        break;
    }
}

void terminal_prose(struct terminal *terminal, cmark_node *node)
{
    struct prose_walk prose = {.terminal = terminal};
    cmark_iter *walk = cmark_iter_new(node);
    cmark_event_type event;
    while ((event = cmark_iter_next(walk)) != CMARK_EVENT_DONE)
        visit(&prose, cmark_iter_get_node(walk), event == CMARK_EVENT_ENTER);
    cmark_iter_free(walk);
    buffer_release(&prose.text);
}
