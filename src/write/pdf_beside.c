/* What stands side by side: prose in two columns, two short sections or tables. */
#include "write/pdf_layout.h"

/* For a block `width` points wide; *page becomes its page. */
static struct composer narrow_composer(const struct composer *composer, struct page_geometry *page,
                                       double width)
{
    struct composer narrow = *composer;
    *page = *composer->flow.page;
    page->text_width = page->measure = narrow.measure = width;
    narrow.flow = (struct flow){
        .arena = composer->flow.arena, .resources = composer->flow.resources, .page = page};
    return narrow;
}

static bool is_heading(cmark_node *node)
{
    return cmark_node_get_type(node) == CMARK_NODE_HEADING;
}

/* ---- prose in two columns */

cmark_node *compose_columns(struct composer *composer, cmark_node *node)
{
    const double gap = 14;
    struct page_geometry *page = arena_get(composer->flow.arena, sizeof *page);
    struct composer narrow =
        narrow_composer(composer, page, (composer->flow.page->text_width - gap) / 2);
    struct type_size type = composer->document->kind == DOCUMENT_SHEET ? type_small : type_columns;
    narrow.body = composer->body.size < type.size ? composer->body : type;
    for (; node && !is_heading(node) && !document_exhibit(node); node = cmark_node_next(node))
        compose_prose(&narrow, node);
    flow_columns(&composer->flow, &narrow.flow, page->text_width + gap);
    flow_space(&composer->flow, mm(2.2));
    return node;
}

/* ---- two blocks side by side */

/* A section with all below its heading, or one node without a heading. */
static cmark_node *behind_block(cmark_node *node)
{
    cmark_node *end = cmark_node_next(node);
    if (!is_heading(node))
        return end;
    int level = cmark_node_get_heading_level(node);
    while (end && !(is_heading(end) && cmark_node_get_heading_level(end) <= level)) {
        const struct exhibit *exhibit = document_exhibit(end);
        if (exhibit && exhibit->kind == EXHIBIT_SIDE_BY_SIDE)
            break;
        end = cmark_node_next(end);
    }
    return end;
}

/* Whether the block holds nothing but prose and tables; then it is composed. */
static bool compose_block(struct composer *narrow, cmark_node *node, cmark_node *end)
{
    for (cmark_node *at = node; at != end; at = cmark_node_next(at)) {
        const struct exhibit *exhibit = document_exhibit(at);
        if (exhibit && (exhibit->kind != EXHIBIT_TABLE || exhibit->table.write_in))
            return false;
    }
    while (node != end)
        node = compose_node(narrow, node);
    return narrow->flow.count > 0 && !narrow->crowded;
}

/* Beside each other they must take clearly less of the page than one below the other. */
static bool saves_room(const struct composer *composer, double left, double right)
{
    const double most_of_page = 0.5, least_of_other = 0.4;
    const struct page_geometry *page = composer->flow.page;
    double higher = left > right ? left : right, lower = left > right ? right : left;
    return higher <= most_of_page * (page->bottom - page->top) && lower >= least_of_other * higher;
}

/* Both blocks with this share of the width for the left one; false: they do not fit. */
static bool compose_both(struct composer *composer, cmark_node *const nodes[3], double share)
{
    const double gap = mm(12); /* the right section's number hangs in it */
    double room = composer->flow.page->text_width - gap;
    struct page_geometry left_page, right_page;
    struct composer left = narrow_composer(composer, &left_page, room * share);
    if (!compose_block(&left, nodes[0], nodes[1]))
        return false;
    struct composer right = narrow_composer(composer, &right_page, room * (1 - share));
    right.section = left.section;
    if (!compose_block(&right, nodes[1], nodes[2]))
        return false;
    size_t left_count = left.flow.count, right_count = right.flow.count;
    if (!saves_room(composer, flow_height(&left.flow, 0, left_count),
                    flow_height(&right.flow, 0, right_count)))
        return false;
    struct flow *flow = &composer->flow;
    flow_space(flow, left.flow.strips[0]->before);
    struct strip *strip = flow_strip(flow, 0);
    double left_pt = strip_overlay_flow(flow, strip, &left.flow, 0, left_count, 0);
    double right_pt =
        strip_overlay_flow(flow, strip, &right.flow, 0, right_count, room * share + gap);
    strip->height = left_pt > right_pt ? left_pt : right_pt;
    flow_space(flow, right.flow.space);
    composer->section = right.section;
    return true;
}

cmark_node *compose_side_by_side(struct composer *composer, cmark_node *node)
{
    static const double shares[] = {0.5, 0.6, 0.4};
    cmark_node *middle = node ? behind_block(node) : NULL;
    if (!middle)
        return node;
    cmark_node *const nodes[3] = {node, middle, behind_block(middle)};
    for (size_t i = 0; i < sizeof shares / sizeof *shares; i++)
        if (compose_both(composer, nodes, shares[i]))
            return nodes[2];
    return node;
}
