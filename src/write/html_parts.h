/*
 * HTML in the making: what the files write/html*.c share. For them only.
 */
#ifndef WRITE_HTML_PARTS_H
#define WRITE_HTML_PARTS_H

#include "report/document.h"
#include "write/escape.h"
#include "write/svg.h"

struct html {
    const struct document *document;
    struct buffer *out;
    struct arena scratch;               /* drawings; released at the end */
    struct buffer marks[MARK_FAIL + 1]; /* each mark's element, made once */
};

/* Raw markup of our own. */
static inline void html_raw(struct html *html, const char *markup)
{
    buffer_text(html->out, markup);
}
/* Somebody's text. */
void html_text(struct html *html, const char *text);
/* <b>Table 1</b> and the caption, for <caption> and <figcaption>. */
void html_caption(struct html *html, const struct exhibit *exhibit, const char *caption);
/* A number of our own, at most 2 decimals. */
void html_number(struct html *html, double value);

/* One exhibit of its kind, from its opening to its closing tag. */
void html_table(struct html *html, const struct exhibit *exhibit);
void html_plot(struct html *html, const struct exhibit *exhibit);
void html_plate(struct html *html, const struct exhibit *exhibit);
void html_headline(struct html *html, const struct exhibit *exhibit);

#endif
