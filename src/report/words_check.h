/*
 * Whether words hold every phrase that is chosen by a key of the findings: a shop's own words.yaml
 * replaces the whole file, and a phrase missing there would else be found by a reader.
 */
#ifndef REPORT_WORDS_CHECK_H
#define REPORT_WORDS_CHECK_H

#include "report/words.h"

/* A diagnostic for each that is missing. */
void words_check(const struct words *words, struct arena *arena, struct diagnostics *diagnostics);

#endif
