/* Inside of the table layout: shared by pdf_table.c (rows) and pdf_columns.c (widths). */
#ifndef WRITE_PDF_TABLE_H
#define WRITE_PDF_TABLE_H

#include "write/pdf_layout.h"

/* Space right of a column's contents, what more there is left of text behind numbers, and the space
   left of what is written in; a number's head may reach into the gap at its left. */
static const double column_gap_pt = 4.6, head_reach_pt = 2.4, after_number_pt = 4,
                    blank_pad_pt = 2.8;

/* The widest parts of a column's numbers: slots in which they stand. */
struct number_slots {
    double whole, fraction, unit; /* unit with the gap before it; 0: none carries one */
};

struct column_layout {
    double x, width; /* of the contents */
    double edge;     /* left edge of the column: where a vertical hairline stands */
    struct number_slots first, second;
    double second_text; /* widest `second` of a number column */
    bool beside;        /* the second number stands right of the first, not under it */
    double gap_left, gap_right;
};

struct table_layout {
    struct composer *composer;
    const struct table *table;
    struct column_layout *columns;
    struct strip *head;
};

/* Space between the first number and the second beside it. */
static const double beside_gap_pt = 5;

static inline double slots_width(const struct number_slots *slots)
{
    return slots->whole + slots->fraction + slots->unit;
}

/* Width of text in the table's type. */
double table_text_width(const struct table_layout *layout, enum text_face face, const char *text);

/* "< 0.01" without its fraction: bound, thin space, whole part. */
const char *number_whole(const struct table_layout *layout, const struct figures *figures);

/* Fill layout->columns: slots, then places and widths. */
void table_columns(struct table_layout *layout);

#endif
