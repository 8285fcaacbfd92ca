/*
 * Words for figures held between limits, shared by the exhibits of the bench.
 */
#ifndef REPORT_HELD_WORDS_H
#define REPORT_HELD_WORDS_H

#include "report/composition.h"

/* "within", "over by more than the uncertainty" ...; of one not judged "not judged: why". NULL: no
   figure exists and nothing is to be said. */
const char *held_words(const struct composition *composition, const struct held *held);

/* "not judged: the job does not say: range"; for a reason and the key that is missing. */
const char *not_judged_words(const struct composition *composition, enum reason why,
                             const char *missing);

/* "≤ 0.5 mA", "≥ 1 MΩ", "−10 % to +10 %"; NULL: no limit. */
const char *held_limits(const struct composition *composition, const struct held *held);

/* Fail or conditional fail. */
bool held_fails(const struct held *held);

/* "EN 50678 ...; seen in a text that quotes it": a source with its trust. NULL: none. */
const char *source_words(const struct composition *composition, enum source_key source);

#endif
