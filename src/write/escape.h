/*
 * Escaping: a text so that the target format shows exactly it. NULL is the empty text.
 */
#ifndef WRITE_ESCAPE_H
#define WRITE_ESCAPE_H

#include "base/buffer.h"

/* For HTML and SVG, in text and in quoted attributes. Control characters, which neither allows,
   become U+FFFD. */
void escape_html(struct buffer *out, const char *text);

/* For one line of CommonMark, in a table or at the beginning of a paragraph: signs that would be
   read as markup get a backslash, line ends become spaces. */
void escape_markdown(struct buffer *out, const char *text);

/* For the inside of a CSS string. The result holds nothing that HTML would read either. */
void escape_css(struct buffer *out, const char *text);

/* For a terminal: no byte of it can begin an escape sequence. Control characters of ASCII and of
   Latin-1 become U+FFFD, no-break and thin spaces ordinary ones, line ends spaces. */
void escape_terminal(struct buffer *out, const char *text);

#endif
