/*
 * Which row of valve data a stage is worked out by: the one that the job gives, the one that it
 * names, else the row of the valve book nearest to the stage's volts.
 */
#ifndef ASSESS_STAGE_ROW_H
#define ASSESS_STAGE_ROW_H

#include "assess/stage.h"

/* Where rows are told of. */
struct row_telling {
    const struct job *job;
    struct arena *arena;
    struct diagnostics *diagnostics;
};

/*
 * Set valve_type, row, given, the law with its status, is_triode and is_output of a model whose
 * stage is set. why becomes WHY_NO_ROW where there is none, or none that can be used; an unusable
 * row and an unknown name of one are told.
 */
void stage_row_fit(const struct row_telling *telling, struct stage_model *model);

/* Tell of a stage without a row: a warning when it is needed, else a note. */
void stage_row_tell_unknown(const struct row_telling *telling, const struct stage_model *model,
                            bool needed);

#endif
