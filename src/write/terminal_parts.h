/*
 * Plain text in the making: what the files write/terminal*.c share. For them only.
 */
#ifndef WRITE_TERMINAL_PARTS_H
#define WRITE_TERMINAL_PARTS_H

#include "report/document.h"
#include "write/escape.h"

#include <stdbool.h>

struct terminal {
    const struct document *document;
    struct buffer *out;
    struct arena scratch;
    size_t columns;
    bool bold_allowed;
};

/* How far the first and the other lines of a wrapped text stand in. */
struct indent {
    size_t first, rest;
};

void terminal_spaces(struct terminal *terminal, size_t count);
/* Escaped, as it is; returns its width in columns. */
size_t terminal_text(struct terminal *terminal, const char *text);
/* The same, in bold where allowed. */
size_t terminal_bold(struct terminal *terminal, const char *text);
/* Padded to `width` columns. */
void terminal_field(struct terminal *terminal, const char *text, size_t width);
/* Wrapped at spaces, with a line end. Nothing for NULL and "". No-break spaces hold. */
void terminal_wrapped(struct terminal *terminal, const char *text, struct indent indent);
/* The same behind the indent.first columns that stand in the line already; a line end at least. */
void terminal_continued(struct terminal *terminal, const char *text, struct indent indent);
/* "Table 1 caption", wrapped, the number bold. */
void terminal_caption(struct terminal *terminal, const struct exhibit *exhibit,
                      const char *caption);

/* As wide as the terminal: columns that do not fit go below their row by rank, blanks are left out.
 */
void terminal_table(struct terminal *terminal, const struct table *table);
/* The picture of all capacitors with letters, shares as lines of text; curves: their numbers. */
void terminal_plot(struct terminal *terminal, const struct exhibit *exhibit);
void terminal_headline(struct terminal *terminal, const struct headline *headline);
/* One top-level node of prose. */
void terminal_prose(struct terminal *terminal, cmark_node *node);

#endif
