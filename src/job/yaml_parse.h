/*
 * One run of libyaml over a text: its events become a tree, up to the end or to the first thing
 * that cannot go on. The only file that calls libyaml.
 */
#ifndef JOB_YAML_PARSE_H
#define JOB_YAML_PARSE_H

#include "job/yaml_tree.h"

/* What ended a parse. */
struct parse_failure {
    enum diagnostic_code code;
    struct position at;
    const char *text, *hint; /* hint NULL: none */
    bool final;              /* parsing again without this line would not help */
    bool from_here;          /* the mistake begins at the column; else the line is to blame */
    bool indent_wrong;       /* the line stands in a column that fits nothing above it */
};

struct parse_result {
    struct node *root;       /* of a failed parse: what there was, not complete */
    struct diagnostics told; /* mistakes that did not end the parse */
    bool good;
    struct parse_failure failure; /* when not good */
};

/* Parse text[0..length), which has the lines and columns of source (used in messages). */
struct parse_result yaml_parse(const struct source *source, const char *text, size_t length,
                               struct arena *arena);

#endif
