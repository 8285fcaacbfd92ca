/* The findings of one copy: the same figures on the job as that copy may show it. */
#include "assess/findings.h"

/* Findings point into the job's lists: let them point into those of the filtered one. */
static const struct capacitor_findings *capacitors_for(const struct findings *findings,
                                                       const struct job *job, struct arena *arena)
{
    struct capacitor_findings *copies =
        arena_array(arena, findings->capacitor_count + 1, sizeof *copies);
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        copies[i] = findings->capacitors[i];
        if (i < job->capacitor_count)
            copies[i].part = &job->capacitors[i];
    }
    return copies;
}

static const struct stage_findings *stages_for(const struct findings *findings,
                                               const struct job *job, struct arena *arena)
{
    struct stage_findings *copies = arena_array(arena, findings->stage_count + 1, sizeof *copies);
    for (size_t i = 0; i < findings->stage_count; i++) {
        copies[i] = findings->stages[i];
        if (i < job->stage_count)
            copies[i].stage = &job->stages[i];
    }
    return copies;
}

struct findings *findings_for_copy(const struct findings *findings, enum copy copy,
                                   struct arena *arena)
{
    struct findings *filtered = arena_get(arena, sizeof *filtered);
    *filtered = *findings;
    filtered->copy = copy;
    filtered->job = job_for_copy(findings->job, copy, arena);
    filtered->capacitors = capacitors_for(findings, filtered->job, arena);
    filtered->stages = stages_for(findings, filtered->job, arena);
    return filtered;
}
