/*
 * How wide a text will be, without a font at hand: for drawings and for the terminal. An estimate
 * for screens, where the reader's browser may substitute the face; the PDF has its own metrics.
 */
#ifndef WRITE_TEXT_WIDTH_H
#define WRITE_TEXT_WIDTH_H

#include "base/arena.h"

#include <stdbool.h>
#include <stddef.h>

/* Width of the text in thousandths of its size, set in Open Sans Regular or Semibold. Signs that
   the table lacks count as a wide capital, so the estimate errs on the wide side. NULL is 0. */
unsigned text_width_milli(const char *text, bool semibold);

/* Columns on a terminal: wide East Asian signs take two, combining ones none. */
size_t text_columns(const char *text, size_t length);

/* The text, or its beginning with an ellipsis, so that it is at most limit_milli wide. */
const char *text_fitted(struct arena *arena, const char *text, unsigned limit_milli, bool semibold);

#endif
