#include "report/prose.h"
#include "report/tree_memory.h"
#include "report/typography.h"

#include "base/memory.h"

#include <string.h>
#include <strings.h>

enum { HEADING_LEVEL_MAX = 6 };

/* Nodes to change after a walk: cmark's iterator does not survive changes. */
struct node_list {
    cmark_node **items;
    size_t count, capacity;
};

static bool is_html(cmark_node *node)
{
    cmark_node_type type = cmark_node_get_type(node);
    return type == CMARK_NODE_HTML_BLOCK || type == CMARK_NODE_HTML_INLINE;
}

/* A PDF says a link's address again on each of its lines: without a limit one text of 64 KiB made
   a record of 100 MB. */
enum { LINK_BYTES_MAX = 2048 };

static bool is_allowed_link(cmark_node *node)
{
    static const char *const schemes[] = {"http:", "https:", "mailto:", "tel:"};
    const char *url = cmark_node_get_url(node);
    if (!url || strlen(url) > LINK_BYTES_MAX)
        return false;
    for (size_t i = 0; i < sizeof schemes / sizeof *schemes; i++)
        if (strncasecmp(url, schemes[i], strlen(schemes[i])) == 0)
            return true;
    return false;
}

static bool is_unwanted(cmark_node *node)
{
    cmark_node_type type = cmark_node_get_type(node);
    return is_html(node) || type == CMARK_NODE_IMAGE ||
           (type == CMARK_NODE_LINK && !is_allowed_link(node));
}

static struct node_list nodes_where(struct arena *arena, cmark_node *tree,
                                    bool (*wanted)(cmark_node *))
{
    struct node_list list = {0};
    cmark_iter *walk = cmark_iter_new(tree);
    for (cmark_event_type event; (event = cmark_iter_next(walk)) != CMARK_EVENT_DONE;) {
        cmark_node *node = cmark_iter_get_node(walk);
        if (event != CMARK_EVENT_ENTER || !wanted(node))
            continue;
        list.items = arena_grow(arena, list.items, list.count, &list.capacity, sizeof *list.items);
        list.items[list.count++] = node;
    }
    cmark_iter_free(walk);
    return list;
}

/* Take a node out and leave what stands inside it in its place. */
static void unwrap(cmark_node *node)
{
    for (cmark_node *child; (child = cmark_node_first_child(node)) != NULL;)
        cmark_node_insert_before(node, child);
    cmark_node_unlink(node);
    cmark_node_free(node);
}

static void remove_html(cmark_node *node)
{
    cmark_node *parent = cmark_node_parent(node);
    cmark_node_unlink(node);
    cmark_node_free(node);
    /* An inline that was its paragraph's only content leaves an empty paragraph. */
    if (parent && cmark_node_get_type(parent) == CMARK_NODE_PARAGRAPH &&
        !cmark_node_first_child(parent)) {
        cmark_node_unlink(parent);
        cmark_node_free(parent);
    }
}

static struct position position_in(struct position at, cmark_node *node)
{
    int line = cmark_node_get_start_line(node);
    for (cmark_node *up = node; line == 0 && (up = cmark_node_parent(up)) != NULL;)
        line = cmark_node_get_start_line(up);
    if (at.line && line > 1)
        at.line += (unsigned)line - 1;
    return at;
}

/* An opening and a closing tag of one line are one mistake, and so is what stands in each copy. */
static bool is_told(const struct diagnostics *list, const struct source *source, struct position at,
                    enum diagnostic_code code)
{
    for (size_t i = 0; i < list->count; i++) {
        const struct diagnostic *item = &list->items[i];
        if (item->code == code && item->path == source->path && item->at.line == at.line)
            return true;
    }
    return false;
}

static void warn(struct composition *composition, const struct source *source, struct position at,
                 cmark_node *node)
{
    struct diagnostics *list = composition->diagnostics;
    at = position_in(at, node);
    bool picture = cmark_node_get_type(node) == CMARK_NODE_IMAGE;
    enum diagnostic_code code = is_html(node) ? DIAGNOSTIC_RAW_HTML_DROPPED
                                : picture     ? DIAGNOSTIC_PICTURE_DROPPED
                                              : DIAGNOSTIC_LINK_DROPPED;
    if (is_told(list, source, at, code))
        return;
    if (is_html(node))
        diagnostic_add(list, source, at, code,
                       "write it in Markdown, or put a backslash before the <",
                       "raw HTML is left out of the record");
    else if (picture)
        diagnostic_add(list, source, at, code, "list it under photos",
                       "a picture in a text is left out of the record, its words are kept");
    else
        diagnostic_add(
            list, source, at, code,
            arena_print(
                composition->arena,
                "links begin with http:, https:, mailto: or tel:, and have %d bytes at most",
                LINK_BYTES_MAX),
            "a link is left out of the record, its words are kept");
}

static bool is_text(cmark_node *node)
{
    return cmark_node_get_type(node) == CMARK_NODE_TEXT;
}

static void typeset(struct arena *arena, cmark_node *tree)
{
    struct node_list list = nodes_where(arena, tree, is_text);
    for (size_t i = 0; i < list.count; i++) {
        const char *text = cmark_node_get_literal(list.items[i]);
        const char *set = text_typeset(arena, text);
        if (set != text && !cmark_node_set_literal(list.items[i], set))
            memory_exhausted();
    }
}

void prose_clean(struct composition *composition, cmark_node *tree, const struct source *source,
                 struct position at)
{
    struct node_list list = nodes_where(composition->arena, tree, is_unwanted);
    for (size_t i = 0; i < list.count; i++)
        warn(composition, source, at, list.items[i]);
    for (size_t i = 0; i < list.count; i++) {
        if (is_html(list.items[i]))
            remove_html(list.items[i]);
        else
            unwrap(list.items[i]);
    }
    if (list.count)
        cmark_consolidate_text_nodes(tree);
    typeset(composition->arena, tree);
}

static bool is_heading(cmark_node *node)
{
    return cmark_node_get_type(node) == CMARK_NODE_HEADING;
}

static void lower_headings(struct composition *composition, cmark_node *tree, int level)
{
    struct node_list list = nodes_where(composition->arena, tree, is_heading);
    for (size_t i = 0; i < list.count; i++) {
        int lowered = cmark_node_get_heading_level(list.items[i]) + level;
        cmark_node_set_heading_level(
            list.items[i], lowered < HEADING_LEVEL_MAX ? lowered : (int)HEADING_LEVEL_MAX);
    }
}

void prose_move(cmark_node *from, cmark_node *to)
{
    for (cmark_node *child; (child = cmark_node_first_child(from)) != NULL;)
        if (!cmark_node_append_child(to, child))
            memory_exhausted();
    cmark_node_free(from);
}

void prose_graft(struct composition *composition, cmark_node *root, const struct prose *prose,
                 int level)
{
    const struct source *source = &composition->job->source;
    size_t length = strlen(prose->text);
    if (length > JOB_PROSE_BYTES_MAX) {
        diagnostic_add(composition->diagnostics, source, prose->at, DIAGNOSTIC_TEXT_TOO_LONG, NULL,
                       "text is longer than 64 KB");
        return;
    }
    cmark_node *tree = tree_of(prose->text, length);
    prose_clean(composition, tree, source, prose->at);
    lower_headings(composition, tree, level);
    prose_move(tree, root);
}
