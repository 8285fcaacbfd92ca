/*
 * gridleak find: hits of a query as lines for people, 80 columns wide, or as JSON Lines.
 */
#ifndef ARCHIVE_FIND_H
#define ARCHIVE_FIND_H

#include "archive/query.h"
#include "base/file.h"

/* Read output/summaries.jsonl into *columns (columns_release, also after a failure). *damaged
   counts lines that are no summaries. */
enum file_status find_read(const char *output, struct columns *columns, size_t *damaged);

/* One line a part found, then one a job found in which no part is. */
void find_write(const struct columns *columns, const struct query_hits *hits, struct buffer *out);

/* The same as JSON, one object a line: "hit" is "part" or "job", then every fact by its key in
   summaries; a part has its job's facts under "set". Unknown is null. */
void find_write_json(const struct columns *columns, const struct query_hits *hits,
                     struct buffer *out);

#endif
