/*
 * What a place must know about a part before its reading can be judged.
 */
#ifndef JOB_PLACE_NEEDS_H
#define JOB_PLACE_NEEDS_H

#include "job/job.h"

/*
 * The first key that the part's place needs and the job does not give: "source", "service", "mains"
 * ... ; NULL: nothing is missing. "place" when the part has none.
 */
const char *place_missing_key(const struct job *job, const struct capacitor *capacitor);

/* Places where no reading passes: `across mains` to `chassis isolator`. */
bool place_is_mains(enum place place);

/* The keys that a place needs, for manual and sheet: "stage, source"; "" for none. */
const char *place_needs_text(enum place place);

#endif
