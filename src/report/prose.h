/*
 * Prose of a job as part of a document's tree, and the cleaning of every tree.
 */
#ifndef REPORT_PROSE_H
#define REPORT_PROSE_H

#include "report/composition.h"

/* Parse text by itself and append its blocks to root: its headings lowered below `level`, raw
   HTML, pictures and links other than http, https, mailto and tel taken out with a warning, the
   signs of print put in. */
void prose_graft(struct composition *composition, cmark_node *root, const struct prose *prose,
                 int level);

/* The same cleaning for a tree parsed from a template. at: of the first line, {0, 0}: unknown. */
void prose_clean(struct composition *composition, cmark_node *tree, const struct source *source,
                 struct position at);

/* Move all blocks of one tree to the end of another; the first is freed. */
void prose_move(cmark_node *from, cmark_node *to);

#endif
