/*
 * Columns kept as they are, so that one changed job does not have the summaries of all others read
 * again. In this machine's byte order and for this program only; the columns can always be made
 * anew from summaries.jsonl.
 */
#ifndef ARCHIVE_COLUMNS_FILE_H
#define ARCHIVE_COLUMNS_FILE_H

#include "archive/columns.h"

#include <stdbool.h>

/* Append the columns to *out: all but JOB_PAGE, which belongs to the pages, and broken jobs. */
void columns_file_write(const struct columns *columns, struct buffer *out);

/* Fill empty columns from what columns_file_write made; *contents moves into them. false, and the
   columns stay empty, when it was made by another version or is damaged. columns_take may take
   jobs from them; columns_add may not add to them. */
bool columns_file_read(struct buffer *contents, struct columns *columns);

#endif
