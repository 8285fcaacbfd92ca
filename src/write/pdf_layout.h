/*
 * From a document's nodes to strips: prose, tables and the other exhibits. All measures are those
 * of the look.
 */
#ifndef WRITE_PDF_LAYOUT_H
#define WRITE_PDF_LAYOUT_H

#include "report/document.h"
#include "write/pdf_block.h"

struct type_size {
    double size, leading;
};

static const struct type_size type_body = {9.25, 13.5}, type_facts = {8.1, 11.7},
                              type_caption = {8, 11.6}, type_table = {7.75, 10.4},
                              type_unit = {7, 9.5}, type_note = {7, 10.5},
                              type_columns = {8.25, 12}, type_small = {7.25, 10.2};

/* Rules: 0.8, 0.5 and 0.35 pt. */
static const double rule_heavy_pt = 0.8, rule_middle_pt = 0.5, rule_hair_pt = 0.35;

/* State while a document is laid out. */
struct composer {
    struct flow flow;
    const struct document *document;
    struct type_size body; /* of prose: smaller after EXHIBIT_SMALL and in cautions */
    double measure;        /* width of prose */
    unsigned section;      /* the last section's number */
    bool crowded;          /* a table was wider than its page */
    double marks_units;    /* 8.6: across a mark */
    struct drawing marks[MARK_FAIL + 1];
};

static inline struct text_style style_of(enum text_face face, struct type_size type, enum ink ink)
{
    return (struct text_style){face, type.size, 0, ink};
}

/* Empty runs in the flow's arena. */
static inline struct text_runs runs_in(const struct composer *composer)
{
    return (struct text_runs){.arena = composer->flow.arena};
}

/* A top-level node of whatever kind; the answer is the one to be composed next. */
cmark_node *compose_node(struct composer *composer, cmark_node *node);

/* A top-level heading, paragraph, list, quotation or code block, nested to any depth. */
void compose_prose(struct composer *composer, cmark_node *node);

/* "Table 1" semibold, then the text, set in lines of at most `width` points. */
void compose_caption(struct composer *composer, const char *number, const char *text, double width);

void compose_table(struct composer *composer, const char *number, const struct table *table);

/* *next: the node behind the exhibit; moved on when the exhibit takes in what follows. */
void compose_exhibit(struct composer *composer, const struct exhibit *exhibit, cmark_node **next);

/* Prose up to the next heading or exhibit, in two columns; the answer is the node behind it. */
cmark_node *compose_columns(struct composer *composer, cmark_node *node);

/* Two sections, or two nodes without headings, beside each other where both are short and narrow
   enough; the answer is the node behind them, or `node` where they are not. */
cmark_node *compose_side_by_side(struct composer *composer, cmark_node *node);

/* A row of boxes side by side, in strips of at most `line_limit` lines. */
struct row_box {
    struct text_lines lines;
    double x, width;
    bool right; /* aligned to the right edge */
};
struct row_setting {
    struct type_size type;
    double pad_top, pad_bottom;
    double least_height; /* of the whole row; lines stand in its middle */
    size_t least_lines;
    bool middle; /* fewer lines stand beside the middle of more */
};
/* The first of the row's strips. */
struct strip *compose_row(struct composer *composer, const struct row_box *boxes, size_t count,
                          const struct row_setting *setting);

#endif
