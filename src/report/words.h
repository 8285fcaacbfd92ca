/*
 * Words: every phrase that C puts into a table, plot, outcome or effect, by key. Read from
 * words.yaml, then overlays over it (words-us.yaml, a translation). Nested maps are joined with a
 * point: `outcome: {fail: ...}` is `outcome.fail`. A phrase may hold Mustache variables; those
 * under `term.` are at hand in every phrase and template (`{{term.valve}}`).
 */
#ifndef REPORT_WORDS_H
#define REPORT_WORDS_H

#include "base/arena.h"
#include "base/diagnostic.h"
#include "base/mustache.h"

struct words;

/* Lay the phrases in source over `below` (NULL: none). Mistakes are appended to diagnostics. A key
   of an overlay that is not in `below` is a mistake. Always returned. */
const struct words *words_read(const struct source *source, const struct words *below,
                               struct arena *arena, struct diagnostics *diagnostics);

/* The phrase of a key as written, its tags not filled; NULL: there is none. */
const char *words_get(const struct words *words, const char *key);

/* What `{{term.…}}` gives: a map. */
const struct mustache_value *words_terms(const struct words *words);

/* What is needed to speak. diagnostics may be NULL. */
struct phrasing {
    const struct words *words;
    struct arena *arena;
    struct diagnostics *diagnostics;
};

/*
 * The phrase of a key, filled, as plain text: phrase(&say, "headline.n_of_m", "n", kept, "m", of,
 * NULL). Behind the key pairs of name and text, ended by NULL; a NULL text is a name that is
 * absent. A missing key is a template error, and the key itself is returned, so that it is seen.
 */
#define phrase(phrasing, ...) phrase_list((phrasing), (const char *const[]){__VA_ARGS__})
const char *phrase_list(const struct phrasing *phrasing, const char *const *key_and_pairs);

/* The same from a map. values NULL: none. */
const char *phrase_of(const struct phrasing *phrasing, const char *key,
                      struct mustache_value *values);

/* phrase() of "group.name": `place`, "coupling" gives `place.coupling`. */
const char *phrase_in(const struct phrasing *phrasing, const char *group, const char *name);

#endif
