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

/* ---- pages */

struct paginator {
    struct flow *flow;
    struct page_plan plan;
    double y;
    bool at_top; /* nothing stands on this page yet */
};

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
    return strip->height + (paginator->at_top ? repeated_height(strip) : strip->before);
}

static void place(struct paginator *paginator, const struct strip *strip)
{
    bool begins = paginator->at_top;
    struct page_plan *plan = &paginator->plan;
    if (begins && strip->head && plan->count > 0)
        plan->items[plan->count - 1].ends = plan->items[plan->count - 1].strip->head == strip->head;
    if (!begins)
        paginator->y += strip->before;
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
        height += paginator->flow->strips[i]->before + paginator->flow->strips[i]->height;
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

static void shrink(struct strip *strip, double scale)
{
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
        double scale = 1 - excess / strip->height;
        if (strip->least_scale > 0 && scale >= strip->least_scale) {
            shrink(strip, scale);
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

struct page_plan flow_paginate(struct flow *flow)
{
    struct paginator paginator = {
        .flow = flow, .plan = {.page_count = 1}, .y = flow->page->top, .at_top = true};
    for (size_t from = 0; from < flow->count;) {
        size_t to = from + 1;
        while (to < flow->count && flow->strips[to - 1]->keep_next && !flow->strips[to]->page_break)
            to++;
        place_unit(&paginator, from, to);
        from = to;
    }
    return paginator.plan;
}
