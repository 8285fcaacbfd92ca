/*
 * Diagnostics: what is wrong with an input, said to the person who wrote it.
 *
 * A user's mistake is appended to a list and work goes on; our own mistake is an assert. Nothing
 * here prints: diagnostics_format fills a buffer, main.c shows it.
 * Text: English, lower case, no full stop; `hint` is what to write or do instead.
 */
#ifndef BASE_DIAGNOSTIC_H
#define BASE_DIAGNOSTIC_H

#include "base/arena.h"
#include "base/buffer.h"

#include <stdbool.h>
#include <stddef.h>

enum severity { SEVERITY_NOTE, SEVERITY_WARNING, SEVERITY_ERROR };

/* One row for each kind of diagnostic: diagnostic_codes.h. Tests count the golden files against it.
 */
enum diagnostic_code {
#define DIAGNOSTIC(name, severity, text) DIAGNOSTIC_##name,
#include "base/diagnostic_codes.h"
#undef DIAGNOSTIC
    DIAGNOSTIC_COUNT
};

/* Where in a file: both from 1, column in code points; {0, 0}: the file as a whole. */
struct position {
    unsigned line, column;
};

/* A file being read. Must outlive the diagnostics about it. */
struct source {
    const char *path; /* as the user named it */
    const char *text; /* NUL-terminated, NULL when it could not be read */
    size_t length;
};

struct diagnostic {
    enum diagnostic_code code;
    enum severity severity;
    const char *path;
    struct position at;
    const char *text;
    const char *hint; /* NULL: none */
    const char *line; /* the source line, NULL: none */
};

struct diagnostics {
    struct arena *arena; /* owns all texts */
    struct diagnostic *items;
    size_t count, capacity;
    size_t errors, warnings; /* how many of each */
};

/* An empty list whose texts will belong to the arena. */
struct diagnostics diagnostics_in(struct arena *arena);

/*
 * Append one. The severity is the code's own. source may be NULL: no file. The text is printf;
 * hint may be NULL. At most 200 are kept per list; errors and warnings are still counted.
 */
void diagnostic_add(struct diagnostics *list, const struct source *source, struct position at,
                    enum diagnostic_code code, const char *hint, const char *format, ...)
    __attribute__((format(printf, 6, 7)));

/* Append copies of all of `more`, whose texts need not stay. */
void diagnostics_append(struct diagnostics *list, const struct diagnostics *more);

/* "unknown-key": stable, for JSON and tests. */
const char *diagnostic_code_text(enum diagnostic_code code);
/* "error", "warning", "note". */
const char *severity_text(enum severity severity);

/* Sort by path, line, column; equal ones keep their order. */
void diagnostics_sort(struct diagnostics *list);

/* Append `path:line:column: severity: text`, the line, a caret, the hint, for each of the list. */
void diagnostics_format(const struct diagnostics *list, struct buffer *buffer);

/* The candidate nearest to `word` by edit distance, NULL when none is near. candidates ends with
 * NULL. */
const char *nearest_word(const char *word, const char *const *candidates);

#endif
