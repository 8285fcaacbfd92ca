#include "write/pdf_block.h"

#include <string.h>

void flow_space(struct flow *flow, double space_pt)
{
    if (space_pt > flow->space)
        flow->space = space_pt;
}

struct strip *flow_loose_strip(struct flow *flow, double height_pt)
{
    struct strip *strip = arena_get(flow->arena, sizeof *strip);
    strip->height = height_pt;
    return strip;
}

struct strip *flow_strip(struct flow *flow, double height_pt)
{
    struct strip *strip = flow_loose_strip(flow, height_pt);
    strip->before = flow->space;
    strip->page_break = flow->page_break;
    strip->head = flow->head;
    strip->continued = flow->continued;
    flow->space = 0;
    flow->page_break = false;
    flow->strips =
        arena_grow(flow->arena, flow->strips, flow->count, &flow->capacity, sizeof *flow->strips);
    flow->strips[flow->count++] = strip;
    return strip;
}

void flow_keep(struct flow *flow, size_t first)
{
    for (size_t i = first; i + 1 < flow->count; i++)
        flow->strips[i]->keep_next = true;
}

double line_baseline(double leading_pt, double size_pt)
{
    /* Open Sans: ascent 1.069, descent 0.293 of the size (its hhea table), centred in the line */
    return leading_pt / 2 + size_pt * (1.069 - 0.293) / 2;
}

void strip_item(struct flow *flow, struct strip *strip, const struct item *item)
{
    strip->items = arena_grow(flow->arena, strip->items, strip->item_count, &strip->item_capacity,
                              sizeof *strip->items);
    strip->items[strip->item_count++] = *item;
}

void strip_rule(struct flow *flow, struct strip *strip, struct point from, struct point to,
                double line_pt, enum ink ink)
{
    const struct item item = {
        .kind = ITEM_RULE, .at = from, .rule = {.to = to, .line_pt = line_pt, .ink = ink}};
    strip_item(flow, strip, &item);
}

void strip_line(struct flow *flow, struct strip *strip, const struct text_line *line,
                struct point at)
{
    for (size_t i = 0; i < line->piece_count; i++) {
        const struct line_piece *piece = &line->pieces[i];
        struct item item = {.kind = ITEM_TEXT, .at = {at.x + piece->x, at.y}};
        item.text.text = piece->text;
        item.text.length = piece->length;
        item.text.style = piece->style;
        strip_item(flow, strip, &item);
        if (!piece->uri)
            continue;
        double height = piece->style.size_pt * 1.3;
        struct item link = {.kind = ITEM_LINK, .at = {at.x + piece->x, at.y - height * 0.75}};
        link.link.uri = piece->uri;
        link.link.width = piece->width;
        link.link.height = height;
        strip_item(flow, strip, &link);
    }
}

void strip_text(struct flow *flow, struct strip *strip, struct point at, struct text_style style,
                const char *text)
{
    struct text_runs runs = {.arena = flow->arena};
    text_runs_add(&runs, text, style);
    if (runs.count == 0)
        return;
    struct item item = {.kind = ITEM_TEXT, .at = at};
    item.text.text = runs.items[0].text;
    item.text.length = runs.items[0].length;
    item.text.style = style;
    strip_item(flow, strip, &item);
}

void strip_overlay(struct flow *flow, struct strip *strip, const struct strip *other,
                   struct point by)
{
    for (size_t i = 0; i < other->item_count; i++) {
        struct item item = other->items[i];
        item.at.x += by.x;
        item.at.y += by.y;
        if (item.kind == ITEM_RULE) {
            item.rule.to.x += by.x;
            item.rule.to.y += by.y;
        }
        strip_item(flow, strip, &item);
    }
}

double strip_overlay_flow(struct flow *flow, struct strip *strip, const struct flow *narrow,
                          size_t from, size_t to, double x)
{
    const double hairline_pt = 0.35;
    double y = 0;
    for (size_t i = from; i < to; i++) {
        y += i > from ? narrow->strips[i]->before : 0;
        if (narrow->strips[i]->top_rule && i > from)
            strip_rule(flow, strip, (struct point){x, y},
                       (struct point){x + narrow->page->text_width, y}, hairline_pt, INK_HAIR);
        strip_overlay(flow, strip, narrow->strips[i], (struct point){x, y});
        y += narrow->strips[i]->height;
    }
    return y;
}

double flow_height(const struct flow *flow, size_t from, size_t to)
{
    double height = 0;
    for (size_t i = from; i < to; i++)
        height += (i > from ? flow->strips[i]->before : 0) + flow->strips[i]->height;
    return height;
}

void flow_lines(struct flow *flow, const struct text_lines *lines,
                const struct text_setting *setting)
{
    for (size_t i = 0; i < lines->count; i++) {
        struct strip *strip = flow_strip(flow, setting->leading);
        strip_line(flow, strip, &lines->items[i],
                   (struct point){setting->x, line_baseline(setting->leading, setting->size)});
        strip->keep_next = i + 1 < lines->count && (i == 0 || i + 2 == lines->count);
    }
}

/* ---- two columns */

static bool may_end_column(const struct flow *column, size_t from, size_t to)
{
    return to > from && (to == column->count || !column->strips[to - 1]->keep_next);
}

/* Before which strip the second column begins so that both are short. */
static size_t balanced_break(const struct flow *column, size_t from)
{
    double all = flow_height(column, from, column->count), best = all, left = 0;
    size_t middle = column->count;
    for (size_t i = from; i + 1 < column->count; i++) {
        left += (i > from ? column->strips[i]->before : 0) + column->strips[i]->height;
        double right = all - left - column->strips[i + 1]->before;
        double higher = left > right ? left : right;
        if (may_end_column(column, from, i + 1) && higher < best) {
            best = higher;
            middle = i + 1;
        }
    }
    return middle;
}

/* Behind the last strip that a column of this height holds; one at least. */
static size_t full_column(const struct flow *column, size_t from, double height)
{
    size_t end = from + 1;
    double used = 0;
    for (size_t i = from; i < column->count; i++) {
        used += (i > from ? column->strips[i]->before : 0) + column->strips[i]->height;
        if (used <= height && may_end_column(column, from, i + 1))
            end = i + 1;
    }
    return end;
}

void flow_columns(struct flow *flow, const struct flow *narrow, double second_x)
{
    enum { LEAST_LINES = 4 };
    if (narrow->count == 0)
        return;
    double all = flow_height(narrow, 0, balanced_break(narrow, 0));
    double least = LEAST_LINES * narrow->strips[0]->height;
    struct strip *strip = flow_strip(flow, all < least ? all : least);
    struct flow *kept = arena_get(flow->arena, sizeof *kept);
    *kept = *narrow;
    strip->columns = kept;
    strip->second_x = second_x;
}

/* ---- pages */

struct paginator {
    struct flow *flow;
    struct page_plan plan;
    double y;
    bool at_top;      /* nothing stands on this page yet */
    double closeness; /* of the spaces between strips: 1 as wanted */
};

static double space_before(const struct paginator *paginator, const struct strip *strip)
{
    return strip->before * paginator->closeness;
}

static void put(struct paginator *paginator, const struct strip *strip, bool begins)
{
    struct page_plan *plan = &paginator->plan;
    plan->items = arena_grow(paginator->flow->arena, plan->items, plan->count, &plan->capacity,
                             sizeof *plan->items);
    plan->items[plan->count++] =
        (struct placed){strip, plan->page_count - 1, paginator->y, begins, false};
    paginator->y += strip->height;
}

static void next_page(struct paginator *paginator)
{
    paginator->plan.page_count++;
    paginator->y = paginator->flow->page->top;
    paginator->at_top = true;
}

static double repeated_height(const struct strip *strip)
{
    return (strip->head ? strip->head->height : 0) +
           (strip->head && strip->continued ? strip->continued->height : 0);
}

static double needed(const struct paginator *paginator, const struct strip *strip)
{
    return strip->height +
           (paginator->at_top ? repeated_height(strip) : space_before(paginator, strip));
}

/* Both columns of one page; the answer is where those of the next begin. */
static size_t put_columns(struct paginator *paginator, const struct strip *strip, size_t from)
{
    struct flow *flow = paginator->flow;
    const struct flow *column = strip->columns;
    double room = flow->page->bottom - paginator->y;
    size_t middle = balanced_break(column, from), to = column->count;
    if (flow_height(column, from, middle) > room || flow_height(column, middle, to) > room) {
        middle = full_column(column, from, room);
        to = middle < column->count ? full_column(column, middle, room) : middle;
    }
    struct strip *page = flow_loose_strip(flow, 0);
    double left = strip_overlay_flow(flow, page, column, from, middle, 0);
    double right = strip_overlay_flow(flow, page, column, middle, to, strip->second_x);
    page->height = left > right ? left : right;
    put(paginator, page, paginator->at_top);
    paginator->at_top = false;
    return to;
}

static void place_columns(struct paginator *paginator, const struct strip *strip)
{
    if (!paginator->at_top)
        paginator->y += space_before(paginator, strip);
    for (size_t from = put_columns(paginator, strip, 0); from < strip->columns->count;
         from = put_columns(paginator, strip, from))
        next_page(paginator);
}

static void place(struct paginator *paginator, const struct strip *strip)
{
    if (strip->columns) {
        place_columns(paginator, strip);
        return;
    }
    bool begins = paginator->at_top;
    struct page_plan *plan = &paginator->plan;
    if (begins && strip->head && plan->count > 0)
        plan->items[plan->count - 1].ends = plan->items[plan->count - 1].strip->head == strip->head;
    if (!begins)
        paginator->y += space_before(paginator, strip);
    else if (strip->head)
        put(paginator, strip->head, false);
    if (begins && strip->head && strip->continued)
        put(paginator, strip->continued, true);
    put(paginator, strip, begins);
    paginator->at_top = false;
}

/* Height of strips from..to as they would stand from here. */
static double unit_height(const struct paginator *paginator, size_t from, size_t to)
{
    double height = needed(paginator, paginator->flow->strips[from]);
    for (size_t i = from + 1; i < to; i++)
        height += space_before(paginator, paginator->flow->strips[i]) +
                  paginator->flow->strips[i]->height;
    return height;
}

/* A unit that no page holds is broken between its strips; not begun at the foot of a page. */
static void place_long(struct paginator *paginator, size_t from, size_t to)
{
    const struct page_geometry *page = paginator->flow->page;
    if (paginator->y > page->top + 0.6 * (page->bottom - page->top))
        next_page(paginator);
    for (size_t i = from; i < to; i++) {
        const struct strip *strip = paginator->flow->strips[i];
        if (!paginator->at_top && paginator->y + needed(paginator, strip) > page->bottom)
            next_page(paginator);
        place(paginator, strip);
    }
}

/* Pictures and drawings to this part of the size they were composed in. */
static void set_size(struct strip *strip, double size)
{
    double scale = size / (1 - strip->given_up);
    strip->given_up = 1 - size;
    strip->height *= scale;
    for (size_t i = 0; i < strip->item_count; i++) {
        struct item *item = &strip->items[i];
        if (item->kind == ITEM_DRAWING) {
            item->drawing.scale *= scale;
        } else if (item->kind == ITEM_IMAGE) {
            item->image.width *= scale;
            item->image.height *= scale;
        }
    }
}

/* Whether a drawing or pictures among strips from..to could give up `excess` of its height; then it
 * does. */
static bool shrink_by(struct paginator *paginator, size_t from, size_t to, double excess)
{
    for (size_t i = from; i < to; i++) {
        struct strip *strip = paginator->flow->strips[i];
        double size = (1 - strip->given_up) * (1 - excess / strip->height);
        if (strip->least_scale > 0 && size >= strip->least_scale) {
            set_size(strip, size);
            return true;
        }
    }
    return false;
}

/* Where a unit that does not fit here is parted, so that no large part of a page stays empty;
   `from`: nowhere. */
static size_t parting(const struct paginator *paginator, size_t from, size_t to)
{
    const double much = 0.16; /* of the page's text */
    const struct page_geometry *page = paginator->flow->page;
    double room = page->bottom - paginator->y;
    if (room < much * (page->bottom - page->top))
        return from;
    for (size_t i = to - 1; i > from; i--)
        if (paginator->flow->strips[i - 1]->may_part && unit_height(paginator, from, i) <= room)
            return i;
    return from;
}

static void place_unit(struct paginator *paginator, size_t from, size_t to)
{
    const struct page_geometry *page = paginator->flow->page;
    const double slack = 0.01;
    if (paginator->flow->strips[from]->page_break && !paginator->at_top)
        next_page(paginator);
    double excess = paginator->y + unit_height(paginator, from, to) - page->bottom;
    if (excess > slack && !shrink_by(paginator, from, to, excess)) {
        size_t part = paginator->at_top ? from : parting(paginator, from, to);
        if (part > from) {
            for (size_t i = from; i < part; i++)
                place(paginator, paginator->flow->strips[i]);
            next_page(paginator);
            place_unit(paginator, part, to);
            return;
        }
        if (unit_height(paginator, from, to) > page->bottom - page->top) {
            place_long(paginator, from, to);
            return;
        }
        if (!paginator->at_top)
            next_page(paginator);
    }
    for (size_t i = from; i < to; i++)
        place(paginator, paginator->flow->strips[i]);
}

static struct page_plan paginate(struct flow *flow, double closeness)
{
    struct paginator paginator = {.flow = flow,
                                  .plan = {.page_count = 1},
                                  .y = flow->page->top,
                                  .at_top = true,
                                  .closeness = closeness};
    for (size_t i = 0; i < flow->count; i++)
        if (flow->strips[i]->given_up > 0)
            set_size(flow->strips[i], 1);
    for (size_t from = 0; from < flow->count;) {
        size_t to = from + 1;
        while (to < flow->count && flow->strips[to - 1]->keep_next && !flow->strips[to]->page_break)
            to++;
        place_unit(&paginator, from, to);
        from = to;
    }
    return paginator.plan;
}

static bool ends_early(const struct flow *flow, const struct page_plan *plan)
{
    if (plan->page_count < 2 || plan->count == 0)
        return false;
    const double early = 0.7; /* of the page's text */
    const struct page_geometry *page = flow->page;
    const struct placed *last = &plan->items[plan->count - 1];
    return last->y + last->strip->height < page->top + early * (page->bottom - page->top);
}

/* A last page that is not nearly full is saved where somewhat closer spaces do. */
struct page_plan flow_paginate(struct flow *flow)
{
    static const double closer[] = {0.85, 0.7, 0.6};
    struct page_plan plan = paginate(flow, 1);
    if (!ends_early(flow, &plan))
        return plan;
    for (size_t i = 0; i < sizeof closer / sizeof *closer; i++) {
        struct page_plan shorter = paginate(flow, closer[i]);
        if (shorter.page_count < plan.page_count)
            return shorter;
    }
    return paginate(flow, 1);
}
