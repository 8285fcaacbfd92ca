/*
 * Tables as plain text: every cell one string, decimal points of a number column in one line. For
 * Markdown and the terminal.
 */
#ifndef WRITE_TABLE_TEXT_H
#define WRITE_TABLE_TEXT_H

#include "base/arena.h"
#include "report/exhibit.h"

/* How the target wants its texts. */
struct table_text_style {
    void (*escape)(struct buffer *out, const char *text);
    const char *strong_open, *strong_close; /* around a fail and a figure above its rating */
    bool reasons_apart;                     /* the reason of an outcome is left to the caller */
};

struct table_text {
    const struct table *table;
    const char **heads;  /* "Leakage µA" */
    const char **cells;  /* row_count x column_count; "" is empty; of a group row only the first */
    size_t *widths;      /* of each column, in columns of a terminal, group rows left out */
    bool *aligned_right; /* numbers */
};

/* Everything belongs to the arena. */
struct table_text table_text_of(const struct table *table, const struct table_text_style *style,
                                struct arena *arena);

/* Words in a column of numbers with nothing behind them in their row, a group line not asked for:
   on a terminal they run on over the columns behind. */
bool table_text_runs_on(const struct table *table, size_t row, size_t column);

/* The text of one cell; "" when it is empty. */
const char *table_text_cell(const struct table_text *text, size_t row, size_t column);

#endif
