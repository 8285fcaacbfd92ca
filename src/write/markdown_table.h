/* Tables as Markdown: pipes that line up in a pager. For write/markdown.c only. */
#ifndef WRITE_MARKDOWN_TABLE_H
#define WRITE_MARKDOWN_TABLE_H

#include "base/buffer.h"
#include "report/exhibit.h"

/* The rows, without caption and notes. */
void markdown_table(const struct table *table, struct buffer *out);

#endif
