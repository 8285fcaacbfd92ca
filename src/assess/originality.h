/*
 * How much of the set is still original: parts counted, never a percentage. Methods: "Originality".
 */
#ifndef ASSESS_ORIGINALITY_H
#define ASSESS_ORIGINALITY_H

#include "assess/findings.h"

/* The two facts about a part, and what decides between their states. */
struct part_story {
    enum origin was;
    enum action done;
    enum age age; /* of what was fitted */
    bool tested;  /* kept, and measured or tested */
};
enum part_state state_of_part(const struct part_story *story);

/* Kept in circuit as it came. */
bool state_is_kept(enum part_state state);

/* Count: capacitors as judged (for tested and unmeasured), everything else from the job. Unlisted
   originals (`counts`) are kept untested, out of sight below the chassis. */
struct originality originality_count(const struct job *job,
                                     const struct capacitor_findings *capacitors);

#endif
