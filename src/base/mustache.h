/*
 * Mustache templates: variables, sections, inverted sections, partials and comments of the
 * published spec (mustache(5)), and nothing else. `{{{x}}}`, `{{&x}}` and set-delimiter tags are
 * errors: what a variable gives is always escaped, by the callback of the target format.
 *
 * Knows nothing of radios, files or formats. All memory comes from the arena given.
 */
#ifndef BASE_MUSTACHE_H
#define BASE_MUSTACHE_H

#include "base/arena.h"
#include "base/buffer.h"
#include "base/diagnostic.h"

#include <stdbool.h>
#include <stddef.h>

/* ---- what a template sees: a tree of texts */

enum mustache_kind { MUSTACHE_FALSE, MUSTACHE_TRUE, MUSTACHE_TEXT, MUSTACHE_MAP, MUSTACHE_LIST };

struct mustache_value;
struct mustache_member {
    const char *key;
    const struct mustache_value *value;
};
struct mustache_value {
    enum mustache_kind kind;
    const char *text;                    /* TEXT */
    struct mustache_member *members;     /* MAP */
    const struct mustache_value **items; /* LIST */
    size_t count, capacity;
};

/* Empty ones, owned by the arena. */
struct mustache_value *mustache_map(struct arena *arena);
struct mustache_value *mustache_list(struct arena *arena);
struct mustache_value *mustache_text(struct arena *arena, const char *text);

/* Put a value under a key (copied). A later key of the same name wins nothing: the first stays.
   NULL value or text: no key. */
void mustache_set(struct arena *arena, struct mustache_value *map, const char *key,
                  const struct mustache_value *value);
void mustache_set_text(struct arena *arena, struct mustache_value *map, const char *key,
                       const char *text);
/* A key that is true; false leaves it absent. */
void mustache_set_flag(struct arena *arena, struct mustache_value *map, const char *key, bool flag);
void mustache_push(struct arena *arena, struct mustache_value *list,
                   const struct mustache_value *value);

/* ---- rendering */

/* Append text[0..length) so that the target format shows exactly it. */
typedef void mustache_escape(struct buffer *out, const char *text, size_t length);

/* As it is (plain text), for HTML text and quoted attributes, and as one phrase of CommonMark:
   trimmed, line ends and tabs to spaces, a backslash before every ASCII punctuation mark. */
void mustache_escape_nothing(struct buffer *out, const char *text, size_t length);
void mustache_escape_html(struct buffer *out, const char *text, size_t length);
void mustache_escape_commonmark(struct buffer *out, const char *text, size_t length);

struct mustache_context; /* the stack of values at one point of a template */

/* What a (dotted) name means there; NULL: nothing. */
const struct mustache_value *mustache_find(const struct mustache_context *context,
                                           const char *name);

struct mustache_partial {
    const char *name;
    bool standalone;               /* alone on its line */
    size_t indent;                 /* white space before it, when standalone */
    const struct source *template; /* where it is used */
    struct position at;
    const struct mustache_context *context;
    struct buffer *out; /* the callback may append to it: raw, not escaped */
};
enum mustache_partial_answer {
    MUSTACHE_PARTIAL_UNKNOWN,  /* an error is reported */
    MUSTACHE_PARTIAL_TEMPLATE, /* *found is another template: rendered in place */
    MUSTACHE_PARTIAL_DONE      /* the callback did it, or reported an error itself */
};

struct mustache_target {
    mustache_escape *escape;
    /* NULL: no partials */
    enum mustache_partial_answer (*partial)(void *data, const struct mustache_partial *partial,
                                            const struct source **found);
    void *data;
    struct arena *arena;
    struct diagnostics *diagnostics;
};

/* Bounds: sections in sections, partials in partials, bytes of output. */
enum { MUSTACHE_SECTIONS_MAX = 32, MUSTACHE_PARTIALS_MAX = 16, MUSTACHE_BYTES_MAX = 64 << 20 };

/*
 * Append the template in `source`, filled from `values`, to *out. Every mistake of the template is
 * a diagnostic; false when there was one (*out then holds what could be rendered).
 */
bool mustache_render(const struct source *source, const struct mustache_value *values,
                     const struct mustache_target *target, struct buffer *out);

#endif
