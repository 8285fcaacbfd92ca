/*
 * The bytes of a file before YAML sees them: UTF-8, without control characters, and the lines
 * where YAML's own notation bites on that of the trade.
 */
#ifndef JOB_YAML_TEXT_H
#define JOB_YAML_TEXT_H

#include "base/buffer.h"
#include "base/diagnostic.h"

#include <stdbool.h>
#include <stdint.h>

/*
 * Check size, encoding and characters. true: the text can be parsed; when mistakes were told that
 * can be mended (Latin-1 bytes, control characters) *mended holds the text to parse instead, with
 * every line and column where it was. false: told, and there is nothing to parse.
 */
bool yaml_text_check(const struct source *source, struct diagnostics *diagnostics,
                     struct buffer *mended);

/*
 * The same of a value, where a quoted one may hold such characters as escapes ("\u202E"): each
 * becomes a space. true: there was one, *first. Line feeds and tabs may stand in a value.
 */
bool yaml_value_mend(char *text, size_t length, uint32_t *first);

/* A line that YAML takes otherwise than it was meant. */
struct bite {
    struct position at;
    const char *text;  /* what is wrong */
    const char *hint;  /* the line as it should be typed */
    size_t blank_from; /* bytes to blank so that the rest can be parsed: the value, */
    size_t blank_to;   /* or, without a key, the whole line */
};

/* Where to look: from the start of a line that is not inside a block of text. */
struct bite_search {
    struct arena *arena; /* owns the texts of a bite */
    const char *text;
    size_t length;
    size_t from;
    unsigned from_line; /* number of the line at `from`, from 1 */
    unsigned last_line;
};
/* The first bite up to last_line; false: none. */
bool yaml_bite_find(const struct bite_search *search, struct bite *bite);

/* The bite of one value that libyaml accepted but that means something else: `*R12`, `&x`, `!x`. */
const char *yaml_quoted_line_hint(struct arena *arena, const struct source *source, unsigned line);

#endif
