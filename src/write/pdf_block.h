/*
 * Strips: what a page is made of. A strip is an unbreakable band as wide as the text block, with
 * texts, rules and pictures at places from its upper left corner. Everything is laid out into
 * strips first; this module then decides, in one place, what stands on which page.
 */
#ifndef WRITE_PDF_BLOCK_H
#define WRITE_PDF_BLOCK_H

#include "write/pdf_lines.h"
#include "write/picture.h"

static inline double mm(double millimetres)
{
    return millimetres * 72 / 25.4;
}

enum item_kind { ITEM_TEXT, ITEM_RULE, ITEM_IMAGE, ITEM_DRAWING, ITEM_LINK, ITEM_OUTLINE };

struct item {
    enum item_kind kind;
    struct point at; /* text: start of the baseline; others: upper left */
    union {
        struct {
            const char *text;
            size_t length;
            struct text_style style;
            const char *copied; /* what a copy of it gives, ASCII; NULL: the text itself */
        } text;
        struct {
            struct point to;
            double line_pt;
            enum ink ink;
        } rule;
        struct {
            const struct picture *picture;
            double width, height;
        } image;
        struct {
            const struct drawing *drawing;
            double scale; /* points per unit */
        } drawing;
        struct {
            const char *uri;
            double width, height;
        } link;
        struct {
            const char *text; /* of a heading */
            unsigned level;   /* 2: section, 3 and more: below it */
        } outline;
    };
};

struct strip {
    double before; /* space above, dropped at the top of a page */
    double height;
    bool keep_next;     /* not parted from the next strip, if a page can hold both */
    bool may_part;      /* kept with the next, but parted when much of a page would stay empty */
    bool page_break;    /* begins a page */
    bool top_rule;      /* hairline on top, unless it begins a page or follows a repeated head */
    double least_scale; /* pictures may be made this much smaller to stay on a page; 0: not */
    double given_up;    /* how much smaller they are: a share of 1 */
    struct item *items;
    size_t item_count, item_capacity;
    const struct strip *head;      /* of its table, repeated when it begins a page; NULL: none */
    const struct strip *continued; /* line of its group, repeated below the head; NULL: none */
    const struct flow *columns;    /* set in two columns, as many pages as they need; NULL: none */
    double second_x;               /* of the second column */
};

/* Measures of a page, in points. */
struct page_geometry {
    double width, height;
    double left, text_width, top, bottom; /* top, bottom: of the text, from the page's top */
    double head_baseline;
    double measure; /* widest prose */
};

/* Strips while they are laid out. */
struct flow {
    struct arena *arena;
    const struct pdf_resources *resources;
    const struct page_geometry *page;
    struct strip **strips;
    size_t count, capacity;
    double space;                         /* wanted before the next strip */
    bool page_break;                      /* wanted before the next strip */
    const struct strip *head, *continued; /* of the strips to come */
};

/* At least this much space before the next strip. */
void flow_space(struct flow *flow, double space_pt);

/* Append an empty strip. */
struct strip *flow_strip(struct flow *flow, double height_pt);

/* One that stands in no flow: a head to be repeated. */
struct strip *flow_loose_strip(struct flow *flow, double height_pt);

/* Keep strips first.. to the last together. */
void flow_keep(struct flow *flow, size_t first);

/* Where the baseline is in a line of this leading. */
double line_baseline(double leading_pt, double size_pt);

/* Height of strips from..to from the top of a column. */
double flow_height(const struct flow *flow, size_t from, size_t to);

/* Append strips of a narrow flow, kept until the pages are made, in two columns of one height; not
   begun with less than a few lines. */
void flow_columns(struct flow *flow, const struct flow *narrow, double second_x);

/* Put something into a strip; points from its upper left corner, y downward. */
void strip_item(struct flow *flow, struct strip *strip, const struct item *item);
void strip_rule(struct flow *flow, struct strip *strip, struct point from, struct point to,
                double line_pt, enum ink ink);

/* A broken line with its start at x and its baseline at y; links too. */
void strip_line(struct flow *flow, struct strip *strip, const struct text_line *line,
                struct point at);

/* Text on one line, not broken. */
void strip_text(struct flow *flow, struct strip *strip, struct point at, struct text_style style,
                const char *text);

/* All items of another strip, moved. */
void strip_overlay(struct flow *flow, struct strip *strip, const struct strip *other,
                   struct point by);

/* All items of strips from..to of a narrow flow, one below the other from the strip's top on, with
   the hairlines between them; the answer is their height. */
double strip_overlay_flow(struct flow *flow, struct strip *strip, const struct flow *narrow,
                          size_t from, size_t to, double x);

struct text_setting {
    double x, leading, size;
};
/* A strip a line; never one line of a paragraph alone at the foot or top of a page. */
void flow_lines(struct flow *flow, const struct text_lines *lines,
                const struct text_setting *setting);

/* ---- pages */

struct placed {
    const struct strip *strip;
    unsigned page; /* from 0 */
    double y;      /* from the page's top */
    bool begins;   /* the page, or follows a repeated head */
    bool ends;     /* the table goes on on the next page */
};

struct page_plan {
    struct placed *items; /* page by page */
    size_t count, capacity;
    unsigned page_count; /* at least 1 */
};

/* Decide what stands where, and shrink pictures that may be. Belongs to the flow's arena. */
struct page_plan flow_paginate(struct flow *flow);

#endif
