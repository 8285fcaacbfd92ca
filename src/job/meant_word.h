/*
 * What somebody meant who wrote a word that is none of those a place knows: the trade's own word
 * for one of them, a word with more or less beside it, a slip of the hand.
 */
#ifndef JOB_MEANT_WORD_H
#define JOB_MEANT_WORD_H

#include "base/arena.h"

/* A hint, `write valve`, `write one of: avc bypass, avc feed`, or `nearest key: readings` for
   nearest == "nearest key"; NULL when nothing is near. candidates ends with NULL. */
const char *meant_word_hint(struct arena *arena, const char *word, const char *const *candidates,
                            const char *nearest);

#endif
