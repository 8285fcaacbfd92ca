#include "write/pdf_layout.h"

#include <string.h>

enum { LEVELS_MAX = 6, LABEL_MAX = 24 };

static const double indent_pt = 12, label_gap_pt = 3, least_width_pt = 100;

struct level {
    bool ordered, tight;
    unsigned next; /* number of the next item */
    double indent; /* of its items' text */
};

/* State of the walk over one top-level node: counters instead of recursion. */
struct prose_walk {
    struct composer *composer;
    struct text_runs runs;
    struct level levels[LEVELS_MAX]; /* of lists; deeper ones share the last */
    unsigned list_depth, quote_depth;
    unsigned strong, emphasis;
    const char *uri;
    char label[LABEL_MAX]; /* bullet or number of an item whose first line is to come */
};

static const struct type_size type_section = {11.5, 15};

static enum text_face prose_face(const struct prose_walk *prose)
{
    if (prose->strong)
        return prose->emphasis ? FACE_SEMIBOLD_ITALIC : FACE_SEMIBOLD;
    return prose->emphasis ? FACE_ITALIC : FACE_REGULAR;
}

static void add_text(struct prose_walk *prose, const char *text)
{
    if (!text || !*text)
        return;
    struct text_style style = style_of(prose_face(prose), prose->composer->body, INK_TEXT);
    text_runs_add_part(&prose->runs, text, strlen(text), style, prose->uri);
}

static void add_code(struct prose_walk *prose, const char *text)
{
    if (!text || !*text)
        return;
    struct text_style style = style_of(FACE_MONO, prose->composer->body, INK_TEXT);
    style.size_pt *= 0.87; /* its x-height then is that of the text */
    text_runs_add_part(&prose->runs, text, strlen(text), style, prose->uri);
}

static double indent_of(const struct prose_walk *prose)
{
    double indent = 0;
    for (unsigned i = 0; i < prose->list_depth && i < LEVELS_MAX; i++)
        indent += prose->levels[i].indent;
    unsigned quotes = prose->quote_depth < LEVELS_MAX ? prose->quote_depth : LEVELS_MAX;
    indent += indent_pt * quotes;
    double most = prose->composer->measure - least_width_pt;
    return indent < most ? indent : most;
}

static struct level *level_of(struct prose_walk *prose)
{
    unsigned depth = prose->list_depth < LEVELS_MAX ? prose->list_depth : LEVELS_MAX;
    return &prose->levels[depth > 0 ? depth - 1 : 0];
}

static double gap_after(struct prose_walk *prose)
{
    return prose->list_depth && level_of(prose)->tight ? 2.3 : mm(2.2);
}

/* The bullet or number left of an item's first line. */
static void put_label(struct prose_walk *prose, struct strip *strip)
{
    if (!prose->label[0])
        return;
    struct composer *composer = prose->composer;
    struct text_style style = style_of(FACE_REGULAR, composer->body, INK_TEXT);
    struct point at = {indent_of(prose) - level_of(prose)->indent,
                       line_baseline(composer->body.leading, style.size_pt)};
    if (prose->label[0] >= '0' && prose->label[0] <= '9') {
        double width = (double)pdf_text_width(composer->flow.resources, style.face, prose->label,
                                              strlen(prose->label)) *
                       style.size_pt / 1000;
        at.x = indent_of(prose) - label_gap_pt - width;
    }
    at.x = at.x > 0 ? at.x : 0;
    const char *label = arena_copy(composer->flow.arena, prose->label);
    strip_text(&composer->flow, strip, at, style, label);
    prose->label[0] = 0;
}

static void emit_paragraph(struct prose_walk *prose)
{
    struct composer *composer = prose->composer;
    struct flow *flow = &composer->flow;
    double indent = indent_of(prose);
    struct text_lines lines =
        text_lines_break(&prose->runs, flow->resources, composer->measure - indent);
    size_t first = flow->count;
    struct text_setting setting = {indent, composer->body.leading, composer->body.size};
    flow_lines(flow, &lines, &setting);
    if (flow->count > first)
        put_label(prose, flow->strips[first]);
    flow_space(flow, gap_after(prose));
    prose->runs = runs_in(composer);
}

/* Runs in another type: a heading is composed like prose. */
static void set_type(struct prose_walk *prose, struct type_size type, enum text_face face)
{
    for (size_t i = 0; i < prose->runs.count; i++) {
        struct text_style *style = &prose->runs.items[i].style;
        style->size_pt *= type.size / prose->composer->body.size;
        if (style->face != FACE_MONO)
            style->face = face;
    }
}

static const char *plain_text(const struct prose_walk *prose)
{
    struct buffer text = {0};
    for (size_t i = 0; i < prose->runs.count; i++)
        buffer_append(&text, prose->runs.items[i].text, prose->runs.items[i].length);
    const char *plain =
        arena_text(prose->composer->flow.arena, text.data ? text.data : "", text.length);
    buffer_release(&text);
    return plain;
}

static void hang_number(struct prose_walk *prose, struct strip *strip)
{
    struct composer *composer = prose->composer;
    struct text_style style = style_of(FACE_REGULAR, type_section, INK_SOFT);
    const char *number = arena_print(composer->flow.arena, "%u", composer->section);
    double width =
        (double)pdf_text_width(composer->flow.resources, style.face, number, strlen(number)) *
        style.size_pt / 1000;
    struct point at = {-mm(2.5) - width, line_baseline(type_section.leading, style.size_pt)};
    strip_text(&composer->flow, strip, at, style, number);
}

static void emit_heading(struct prose_walk *prose, unsigned level)
{
    struct composer *composer = prose->composer;
    struct flow *flow = &composer->flow;
    bool section = level <= 2;
    bool sheet = composer->document->kind == DOCUMENT_SHEET;
    struct type_size type = section ? type_section : type_body;
    set_type(prose, type, level >= 4 ? FACE_SEMIBOLD_ITALIC : FACE_SEMIBOLD);
    struct text_lines lines =
        text_lines_break(&prose->runs, flow->resources, flow->page->text_width);
    size_t first = flow->count;
    flow_space(flow, section && !sheet ? mm(6.8) : mm(4.2));
    struct text_setting setting = {0, type.leading, type.size};
    flow_lines(flow, &lines, &setting);
    for (size_t i = first; i < flow->count; i++)
        flow->strips[i]->keep_next = true;
    if (section)
        composer->section++;
    if (flow->count > first) {
        struct item outline = {.kind = ITEM_OUTLINE};
        outline.outline.text = plain_text(prose);
        outline.outline.level = level < 2 ? 2 : level;
        strip_item(flow, flow->strips[first], &outline);
        if (section && composer->document->sections_numbered)
            hang_number(prose, flow->strips[first]);
    }
    flow_space(flow, section ? mm(1.8) : mm(1.2));
    prose->runs = runs_in(composer);
}

/* Lines as written; one too long is broken. */
static void emit_code(struct prose_walk *prose, const char *text)
{
    struct composer *composer = prose->composer;
    struct text_runs runs = runs_in(composer);
    struct text_style style = style_of(FACE_MONO, type_table, INK_TEXT);
    while (text && *text) {
        size_t length = strcspn(text, "\n");
        text_runs_add_part(&runs, text, length, style, NULL);
        runs.items[runs.count - 1].line_end = true;
        text += length + (text[length] == '\n');
    }
    struct text_lines lines = text_lines_break(&runs, composer->flow.resources,
                                               composer->flow.page->text_width - indent_of(prose));
    size_t first = composer->flow.count;
    struct text_setting setting = {indent_of(prose), type_table.leading, type_table.size};
    flow_lines(&composer->flow, &lines, &setting);
    if (composer->flow.count > first)
        put_label(prose, composer->flow.strips[first]);
    flow_space(&composer->flow, gap_after(prose));
}

static void emit_break(struct prose_walk *prose)
{
    struct flow *flow = &prose->composer->flow;
    flow_space(flow, mm(2.2));
    struct strip *strip = flow_strip(flow, rule_hair_pt);
    strip_rule(flow, strip, (struct point){0, 0}, (struct point){prose->composer->measure, 0},
               rule_hair_pt, INK_HAIR);
    flow_space(flow, mm(2.2));
}

/* Room for a list's last number; deep lists share what the levels above left. */
static double list_indent(const struct prose_walk *prose, cmark_node *list)
{
    if (cmark_node_get_list_type(list) != CMARK_ORDERED_LIST)
        return indent_pt;
    unsigned last = (unsigned)cmark_node_get_list_start(list);
    for (cmark_node *item = cmark_node_first_child(list); item; item = cmark_node_next(item))
        last++;
    char label[LABEL_MAX];
    int length = snprintf(label, sizeof label, "%u.", last);
    double width = (double)pdf_text_width(prose->composer->flow.resources, FACE_REGULAR, label,
                                          (size_t)length) *
                       prose->composer->body.size / 1000 +
                   label_gap_pt;
    return width > indent_pt ? width : indent_pt;
}

static void enter_list(struct prose_walk *prose, cmark_node *node)
{
    prose->list_depth++;
    int start = cmark_node_get_list_start(node);
    if (prose->list_depth > LEVELS_MAX)
        start = 1;
    *level_of(prose) = (struct level){
        .ordered = cmark_node_get_list_type(node) == CMARK_ORDERED_LIST,
        .tight = cmark_node_get_list_tight(node) != 0,
        .next = start > 0 ? (unsigned)start : 0,
        .indent = list_indent(prose, node),
    };
}

static void enter_item(struct prose_walk *prose)
{
    struct level *level = level_of(prose);
    if (level->ordered)
        snprintf(prose->label, sizeof prose->label, "%u.", level->next++);
    else
        strcpy(prose->label, "•");
}

static void leave_item(struct prose_walk *prose)
{
    if (!prose->label[0])
        return;
    put_label(prose, flow_strip(&prose->composer->flow, prose->composer->body.leading));
    flow_space(&prose->composer->flow, gap_after(prose));
}

static bool link_allowed(const char *url)
{
    static const char *const schemes[] = {"http://", "https://", "mailto:", "tel:"};
    for (size_t i = 0; url && i < sizeof schemes / sizeof schemes[0]; i++)
        if (strncasecmp(url, schemes[i], strlen(schemes[i])) == 0)
            return true;
    return false;
}

static void enter(struct prose_walk *prose, cmark_node *node)
{
    switch (cmark_node_get_type(node)) {
    case CMARK_NODE_TEXT:
        add_text(prose, cmark_node_get_literal(node));
        break;
    case CMARK_NODE_CODE:
        add_code(prose, cmark_node_get_literal(node));
        break;
    case CMARK_NODE_SOFTBREAK:
        add_text(prose, " ");
        break;
    case CMARK_NODE_LINEBREAK:
        if (prose->runs.count > 0)
            prose->runs.items[prose->runs.count - 1].line_end = true;
        break;
    case CMARK_NODE_EMPH:
        prose->emphasis++;
        break;
    case CMARK_NODE_STRONG:
        prose->strong++;
        break;
    case CMARK_NODE_LINK:
        prose->uri = link_allowed(cmark_node_get_url(node)) ? cmark_node_get_url(node) : NULL;
        break;
    case CMARK_NODE_LIST:
        enter_list(prose, node);
        break;
    case CMARK_NODE_ITEM:
        enter_item(prose);
        break;
    case CMARK_NODE_BLOCK_QUOTE:
        prose->quote_depth++;
        break;
    case CMARK_NODE_CODE_BLOCK:
        emit_code(prose, cmark_node_get_literal(node));
        break;
    case CMARK_NODE_THEMATIC_BREAK:
        emit_break(prose);
        break;
    case CMARK_NODE_NONE:
    case CMARK_NODE_DOCUMENT:
    case CMARK_NODE_PARAGRAPH:
    case CMARK_NODE_HEADING:
    case CMARK_NODE_IMAGE: /* its children are the text in its place */
    case CMARK_NODE_HTML_BLOCK:
    case CMARK_NODE_HTML_INLINE:
    case CMARK_NODE_CUSTOM_BLOCK:
    case CMARK_NODE_CUSTOM_INLINE:
        break;
    }
}

static void leave(struct prose_walk *prose, cmark_node *node)
{
    cmark_node_type type = cmark_node_get_type(node);
    if (type == CMARK_NODE_PARAGRAPH) {
        emit_paragraph(prose);
    } else if (type == CMARK_NODE_HEADING) {
        emit_heading(prose, (unsigned)cmark_node_get_heading_level(node));
    } else if (type == CMARK_NODE_EMPH) {
        prose->emphasis--;
    } else if (type == CMARK_NODE_STRONG) {
        prose->strong--;
    } else if (type == CMARK_NODE_LINK) {
        prose->uri = NULL;
    } else if (type == CMARK_NODE_ITEM) {
        leave_item(prose);
    } else if (type == CMARK_NODE_BLOCK_QUOTE) {
        prose->quote_depth--;
    } else if (type == CMARK_NODE_LIST) {
        prose->list_depth--;
        flow_space(&prose->composer->flow, gap_after(prose));
    }
}

void compose_prose(struct composer *composer, cmark_node *node)
{
    struct prose_walk prose = {.composer = composer, .runs = runs_in(composer)};
    cmark_iter *walk = cmark_iter_new(node);
    for (cmark_event_type event = cmark_iter_next(walk); event != CMARK_EVENT_DONE;
         event = cmark_iter_next(walk)) {
        if (event == CMARK_EVENT_ENTER)
            enter(&prose, cmark_iter_get_node(walk));
        else
            leave(&prose, cmark_iter_get_node(walk));
    }
    cmark_iter_free(walk);
}
