/*
 * Words: every phrase that C puts into a table, plot, outcome or effect, by key. Read from
 * words.yaml, then overlays over it (words-us.yaml, a translation). A phrase may hold Mustache
 * variables.
 */
#ifndef REPORT_WORDS_H
#define REPORT_WORDS_H

#include "base/arena.h"
#include "base/diagnostic.h"

struct words;

/* Lay the phrases in source over `below` (NULL: none). Mistakes are appended to diagnostics. */
const struct words *words_read(const struct source *source, const struct words *below,
                               struct arena *arena, struct diagnostics *diagnostics);

/* The phrase of a key. A missing key is a template error, remembered in *words: words_missing. */
const char *words_get(const struct words *words, const char *key);

#endif
