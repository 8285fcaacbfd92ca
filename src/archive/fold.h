/*
 * Texts as searches compare them: without regard to case, accents and width (Unicode: compatibility
 * decomposition, case folding, marks dropped).
 */
#ifndef ARCHIVE_FOLD_H
#define ARCHIVE_FOLD_H

#include "base/buffer.h"

#include <stdbool.h>

/* Append text folded. Ill-formed UTF-8 goes through as it is. */
void fold(struct buffer *out, const char *text);

/* Whether a word of `text` begins with `word`; both folded. A word begins where no letter or digit
   comes before. */
bool fold_begins_word(const char *text, const char *word);

#endif
