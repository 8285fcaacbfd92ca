/* What to do with a part, and whether something else was done. */
#include "assess/assessment.h"

#include "assess/mains.h"
#include "job/part.h"

static enum advice for_not_judged(const struct capacitor_findings *part)
{
    if (part->why != WHY_STILL_FALLING)
        return ADVICE_MEASURE_AGAIN;
    /* Wet electrolytics are not reformed. */
    return part->part->type == DIELECTRIC_WET_ELECTROLYTIC ? ADVICE_MEASURE_AGAIN : ADVICE_REFORM;
}

static enum advice advice_of(const struct capacitor_findings *part)
{
    if (part->part->was == WAS_MISSING)
        return ADVICE_NONE;
    switch (part->outcome) {
    case OUTCOME_PASS:
    case OUTCOME_CONDITIONAL_PASS:
        return ADVICE_KEEP;
    case OUTCOME_NOT_JUDGED:
        return for_not_judged(part);
    case OUTCOME_CONDITIONAL_FAIL:
    case OUTCOME_FAIL:
        return part->class_needed != CLASS_NONE ? ADVICE_REPLACE_SAFETY_CLASS : ADVICE_REPLACE;
    case OUTCOME_COUNT:
        break;
    }
    return ADVICE_NONE;
}

static bool was_kept(enum action done)
{
    return done == DONE_KEPT || done == DONE_KEPT_UNTESTED;
}

static bool went_against(const struct assessment *assessment, const struct capacitor_findings *part,
                         enum action done)
{
    const struct marking *fitted = part_fitted(assessment->job, part->part);
    switch (part->advice) {
    case ADVICE_NONE:
        return false;
    case ADVICE_KEEP:
        return action_is_change(done);
    case ADVICE_REFORM:
        return was_kept(done);
    case ADVICE_MEASURE_AGAIN: /* leaving it unmeasured has a word of its own */
        return done == DONE_KEPT && part->why != WHY_NO_READING;
    case ADVICE_REPLACE:
        return was_kept(done) || done == DONE_REFORMED;
    case ADVICE_REPLACE_SAFETY_CLASS:
        return was_kept(done) || done == DONE_REFORMED ||
               (part_is_new(done, fitted) &&
                !mains_class_borne(assessment->job, part->part->place, fitted));
    case ADVICE_COUNT:
        break;
    }
    return false;
}

static bool has_reason(const struct job *job, const struct capacitor *part)
{
    return part->reason.text || (part->can != NOT_LISTED && job->cans[part->can].reason.text);
}

void advice_give(struct assessment *assessment, size_t index)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    enum action done = assessment->work[index].done;
    struct position at = part->part->done_at.line ? part->part->done_at : part->part->at;
    part->advice = advice_of(part);
    part->against_advice = went_against(assessment, part, done);
    if (part->against_advice && !has_reason(assessment->job, part->part))
        diagnostic_add(assessment->diagnostics, &assessment->job->source, at,
                       DIAGNOSTIC_AGAINST_ADVICE, "say why: `reason: ...`",
                       "%s was %s against the advice to %s", part->part->ref, action_text(done),
                       advice_text(part->advice));
    if (done == DONE_KEPT && part->reading_count == 0 && part->part->was != WAS_MISSING)
        diagnostic_add(assessment->diagnostics, &assessment->job->source, at,
                       DIAGNOSTIC_KEPT_WITHOUT_READING, "say `done: kept untested`, or measure it",
                       "%s was kept without a reading", part->part->ref);
}
