#include "report/document.h"

#include <string.h>

const struct exhibit *document_exhibit(cmark_node *node)
{
    if (cmark_node_get_type(node) != CMARK_NODE_CUSTOM_BLOCK)
        return NULL;
    return cmark_node_get_user_data(node);
}

void document_plain_text(cmark_node *node, struct buffer *text)
{
    cmark_iter *walk = cmark_iter_new(node);
    cmark_event_type event;
    while ((event = cmark_iter_next(walk)) != CMARK_EVENT_DONE) {
        if (event != CMARK_EVENT_ENTER)
            continue;
        cmark_node *part = cmark_iter_get_node(walk);
        cmark_node_type type = cmark_node_get_type(part);
        if (type == CMARK_NODE_SOFTBREAK || type == CMARK_NODE_LINEBREAK) {
            buffer_byte(text, ' ');
        } else if (type == CMARK_NODE_TEXT || type == CMARK_NODE_CODE ||
                   type == CMARK_NODE_CODE_BLOCK) {
            const char *literal = cmark_node_get_literal(part);
            buffer_text(text, literal ? literal : "");
        }
    }
    cmark_iter_free(walk);
}

/* Letters and digits in lower case, one hyphen for each run of anything else. */
static void append_slug(struct buffer *id, const char *text, size_t length)
{
    size_t start = id->length;
    bool gap = false;
    for (size_t i = 0; i < length; i++) {
        char c = text[i];
        if (c >= 'A' && c <= 'Z')
            c = (char)(c - 'A' + 'a');
        if ((c >= 'a' && c <= 'z') || (c >= '0' && c <= '9')) {
            if (gap && id->length > start)
                buffer_byte(id, '-');
            gap = false;
            buffer_byte(id, c);
        } else if (c != '\'') {
            gap = true;
        }
    }
    if (id->length == start)
        buffer_text(id, "section");
}

static void append_heading_slug(cmark_node *heading, struct buffer *id)
{
    struct buffer text = {0};
    document_plain_text(heading, &text);
    append_slug(id, text.data, text.length);
    buffer_release(&text);
}

static bool same_slug(cmark_node *heading, const char *slug, size_t length)
{
    struct buffer other = {0};
    append_heading_slug(heading, &other);
    bool same = other.length == length && memcmp(other.data, slug, length) == 0;
    buffer_release(&other);
    return same;
}

/* How many claims on the id come before this heading's: the page's own ids, exhibits anywhere in
   the document, and headings above it. */
static unsigned claims_before(cmark_node *heading, const char *slug, size_t length)
{
    unsigned claims = length == 4 && memcmp(slug, "main", 4) == 0 ? 1 : 0;
    bool above = true;
    cmark_node *parent = cmark_node_parent(heading);
    for (cmark_node *node = parent ? cmark_node_first_child(parent) : NULL; node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        if (node == heading)
            above = false;
        else if (exhibit && exhibit->id && strlen(exhibit->id) == length &&
                 memcmp(exhibit->id, slug, length) == 0)
            claims++;
        else if (above && cmark_node_get_type(node) == CMARK_NODE_HEADING &&
                 same_slug(node, slug, length))
            claims++;
    }
    return claims;
}

void document_section_id(cmark_node *heading, struct buffer *id)
{
    size_t start = id->length;
    append_heading_slug(heading, id);
    unsigned claims = claims_before(heading, id->data + start, id->length - start);
    if (claims == 0)
        return;
    /* A slug never holds two hyphens in a row, so this cannot meet another heading's. */
    buffer_text(id, "--");
    buffer_decimal(id, claims + 1);
}

void document_release(struct document *document)
{
    if (document->root)
        cmark_node_free(document->root);
    document->root = NULL;
}
