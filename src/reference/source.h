/*
 * Where published figures come from, and how far each is to be trusted. Every criterion, limit and
 * constant that a record prints names a row of this table.
 */
#ifndef REFERENCE_SOURCE_H
#define REFERENCE_SOURCE_H

enum trust {
    TRUST_SEEN,            /* the figure stood in the text named */
    TRUST_SECOND_HAND,     /* seen in a text that quotes it */
    TRUST_RECALLED,        /* from memory, not seen: a labelled default */
    TRUST_COMMON_PRACTICE, /* a fact of the trade */
    TRUST_POLICY,          /* the shop's own limit */
    TRUST_DERIVED          /* arithmetic on other rows */
};

/* SOURCE(NAME, trust, "stable-key", "title, clause, year"). Rows are added in source_rows.h. */
enum source_key {
#define SOURCE(name, trust, key, title) SOURCE_##name,
#include "reference/source_rows.h"
#undef SOURCE
    SOURCE_COUNT
};

struct source_row {
    const char *key;
    enum trust trust;
    const char *title;
};

/* The row of a key below SOURCE_COUNT. */
const struct source_row *source_row(enum source_key key);

/* "seen", "second-hand", "recalled", "common practice" ... */
const char *trust_text(enum trust trust);

#endif
