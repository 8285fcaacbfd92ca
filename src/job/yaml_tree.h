/*
 * A YAML file as a tree of text, with the place of every key and value. The only part of the
 * program that sees libyaml, and the one that holds a file to its bounds (job.h).
 *
 * Every scalar is text exactly as written; numbers, booleans, dates and nulls do not exist. Tags,
 * anchors, aliases, duplicate keys and a second document are mistakes. libyaml stops at its first
 * syntax error: the error is noted, that line is blanked in a copy, and the copy is parsed again.
 */
#ifndef JOB_YAML_TREE_H
#define JOB_YAML_TREE_H

#include "base/arena.h"
#include "base/buffer.h"
#include "base/diagnostic.h"

#include <stdbool.h>
#include <stddef.h>

enum node_kind { NODE_SCALAR, NODE_MAPPING, NODE_SEQUENCE };

/* How a scalar is written; of a mapping or sequence only PLAIN (block) and FLOW. */
enum node_style { STYLE_PLAIN, STYLE_QUOTED, STYLE_BLOCK, STYLE_FLOW };

/* What follows a plain scalar on its line. A # in the middle of a note is taken by YAML as the
   beginning of a comment, and the rest of the note is lost without a word. */
enum comment_place {
    COMMENT_NONE,
    COMMENT_APART, /* two spaces and more before the #, and one behind it */
    COMMENT_NEAR,  /* one space before it */
    COMMENT_TIGHT  /* no space behind it: `stock #4` */
};

struct node {
    enum node_kind kind;
    enum node_style style;
    const char *key; /* in a mapping; NULL in a sequence and at the root */
    struct position key_at;
    struct position at; /* of the first character of the text, of the first key or item */
    unsigned end_line;  /* the first line behind the node */
    const char *text;   /* scalar: valid UTF-8, NUL-terminated; "" when nothing is written */
    size_t length;
    enum comment_place comment;
    struct node *first; /* children */
    struct node *next;
    size_t count;
    bool damaged; /* a mistake already told took something away here: say no more about it */
};

/*
 * The tree of source->text; NULL when nothing could be read. Nodes belong to the arena. Mistakes
 * are appended to diagnostics.
 */
struct node *yaml_tree_read(const struct source *source, struct arena *arena,
                            struct diagnostics *diagnostics);

/* The child with this key; NULL: none. */
const struct node *node_child(const struct node *mapping, const char *key);

/* Nothing was written: `key:` alone. */
bool node_is_empty(const struct node *node);

/* Append text as a YAML scalar that reads back the same: plain, in quotes, or after `|` with its
   lines indented by `indent` spaces. No line end behind it, but after a block. */
void yaml_scalar_write(struct buffer *buffer, const char *text, unsigned indent);

#endif
