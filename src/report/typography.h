/*
 * What a keyboard has no key for: a text as typed, with the signs of print.
 */
#ifndef REPORT_TYPOGRAPHY_H
#define REPORT_TYPOGRAPHY_H

#include "base/arena.h"

/*
 * "the maker's 0.5 uA" as "the maker’s 0.5 µA": the apostrophe inside a word, the micro sign behind
 * a number, and a space that does not break between a number and its unit or root. Nothing else is
 * touched; a text with none of them is given back itself. NULL stays NULL.
 */
const char *text_typeset(struct arena *arena, const char *text);

#endif
