/*
 * A document: a cmark tree whose top level holds headings, prose and exhibits.
 *
 * An exhibit is a custom block at top level; cmark_node_get_user_data gives its const struct
 * exhibit. The tree is clean: no raw HTML nodes, no links but http, https, mailto and tel.
 * Headings of level 1 do not occur: the title is an exhibit. Level 2 are sections, numbered by the
 * writers in order from 1; a section's id comes from document_section_id.
 */
#ifndef REPORT_DOCUMENT_H
#define REPORT_DOCUMENT_H

#include "base/arena.h"
#include "base/buffer.h"
#include "job/shop.h"
#include "report/exhibit.h"

#include <cmark.h>

enum document_kind {
    DOCUMENT_RECORD,
    DOCUMENT_SHEET,
    DOCUMENT_MANUAL,
    DOCUMENT_ASSESSMENT,
    DOCUMENT_WORKING
};

struct document {
    enum document_kind kind;
    cmark_node *root;     /* owned: document_release */
    struct arena *arena;  /* owns the exhibits */
    const char *language; /* "en" */
    const char *title;    /* plain: window title, PDF title */
    const char *author, *subject;
    const char *running_head; /* "Record 2034-027, client’s copy" */
    const char *page_word_of; /* "page %u of %u" as two words: "page", "of" */
    const char *page_word;
    const char *continued;     /* "(continued)" */
    const char *contents_word; /* "Contents" */
    const char *skip_word;     /* "To the text" */
    const char *footer;        /* the one closing line on screen; NULL */
    enum page_size page;
    bool sections_numbered;
    const char *accent, *accent_dark;
    struct date date;        /* of the record: PDF's creation date; not the clock */
    const char *fingerprint; /* hex; for the PDF's identifier; NULL */
};

/* The exhibit of a top-level node; NULL: it is prose or a heading. */
const struct exhibit *document_exhibit(cmark_node *node);

/* Append [a-z0-9-]+ from a heading's text to *id: unique among the headings and exhibits of its
   document, and never "main", which is the page's own. */
void document_section_id(cmark_node *heading, struct buffer *id);

/* Append the plain text of a node and its children; a line end becomes a space. */
void document_plain_text(cmark_node *node, struct buffer *text);

void document_release(struct document *document);

#endif
