/*
 * Reading summaries fast: a forward scan over one line of JSON as summary_write makes it, without a
 * tree. A general parser needs ten times as long for the lines of a large archive.
 */
#ifndef ARCHIVE_SUMMARY_SCAN_H
#define ARCHIVE_SUMMARY_SCAN_H

#include "base/buffer.h"

#include <stdbool.h>

struct summary_scan {
    const char *at, *end;
    bool bad;                /* the line is not what was expected; nothing more is read */
    struct buffer unescaped; /* the last text that held escapes; the owner releases it */
};

/* A text inside the line or, copied, in the scan's buffer until the next is read. */
struct scan_text {
    const char *text;
    size_t length;
    bool copied;
};

/* The next member of an object, standing before its value; *first is true before the first.
   false at the end of the object. */
bool scan_member(struct summary_scan *scan, bool *first, struct scan_text *key);

/* The next text of a list of texts; false at its end. */
bool scan_item(struct summary_scan *scan, bool *first, struct scan_text *text);

/* A text, number, true, false (its letters) or null (empty). false, and nothing read, when an
   object or list stands there. */
bool scan_scalar(struct summary_scan *scan, struct scan_text *value);

/* Pass over any value. */
void scan_skip(struct summary_scan *scan);

/* Whether the text is this word, letter by letter. */
bool scan_is(const struct scan_text *text, const char *word);

#endif
