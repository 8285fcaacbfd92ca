/* What to do with a part, and whether something else was done. */
#include "assess/assessment.h"

#include "assess/heat.h"
#include "assess/mains.h"
#include "assess/temperature.h"
#include "job/part.h"
#include "job/place_needs.h"

#include <math.h>

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

/* A can comes out whole: what one of its sections asks for is done to all of them. */
static bool can_asks_for_change(const struct assessment *assessment, const struct capacitor *part)
{
    const struct can *can = part_can(assessment->job, part);
    for (size_t i = 0; can && i < can->hold_count; i++) {
        enum advice advice = advice_of(&assessment->capacitors[can->holds[i]]);
        if (advice == ADVICE_REPLACE || advice == ADVICE_REPLACE_SAFETY_CLASS)
            return true;
    }
    return false;
}

static bool went_against(const struct assessment *assessment, const struct capacitor_findings *part,
                         enum action done)
{
    const struct marking *fitted = part_fitted(assessment->job, part->part);
    switch (part->advice) {
    case ADVICE_NONE:
        return false;
    case ADVICE_KEEP:
        return action_is_change(done) && !can_asks_for_change(assessment, part->part);
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

/* A part still to be read: what its place needs before the bench sheet has a limit for it. */
static void tell_no_limit(const struct assessment *assessment, const struct capacitor *part)
{
    const char *key = place_missing_key(assessment->job, part);
    if (!key || part->place == PLACE_UNKNOWN || place_is_mains(part->place) ||
        part->reading_count > 0 || part_origin(assessment->job, part) == WAS_MISSING)
        return;
    diagnostic_add(assessment->diagnostics, &assessment->job->source, part->place_at,
                   DIAGNOSTIC_LIMIT_WITHOUT_FACT,
                   arena_print(assessment->arena, "place %s needs: %s", place_text(part->place),
                               part->pulse ? key : place_needs_text(part->place)),
                   dielectric_is_electrolytic(part->type)
                       ? "the limit of %s is its leakage rule's alone: '%s' is missing"
                       : "%s has no limit: '%s' is missing",
                   part->ref, key);
}

/* Whether the heat in the part is what limits its leak. */
static bool heat_decides(const struct assessment *assessment, const struct capacitor_findings *part)
{
    double heat_w = heat_limit(assessment->job, part->part, assessment->policy);
    return fabs(part->limit_a * part->service_v - heat_w) < heat_w / 1000;
}

/* The heat that an electrolytic bears grows with its case; where none is given it is taken as
   small, and may ask ten times too much of a large one. */
static void tell_no_case(const struct assessment *assessment, const struct capacitor_findings *part)
{
    const struct capacitor *of = part->part;
    bool in_can = of->can != NOT_LISTED;
    if (!dielectric_is_electrolytic(of->type) || heat_is_derived(assessment->job, of) ||
        !heat_decides(assessment, part))
        return;
    diagnostic_add(
        assessment->diagnostics, &assessment->job->source, of->at, DIAGNOSTIC_LIMIT_WITHOUT_CASE,
        in_can ? "give the can its size: `case: 35 x 75 mm`" : "give its size: `case: 22 x 51 mm`",
        "the limit of %s is heat, %g W for any %s: 'case' is missing", of->ref,
        heat_limit(assessment->job, of, assessment->policy), in_can ? "can" : "tubular part");
}

void advice_give(struct assessment *assessment, size_t index)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    enum action done = assessment->work[index].done;
    struct position at = part->part->done_at.line ? part->part->done_at : part->part->at;
    part->advice = advice_of(part);
    part->against_advice = went_against(assessment, part, done);
    if (!action_is_change(done))
        tell_no_case(assessment, part);
    if (done == DONE_OPEN)
        tell_no_limit(assessment, part->part);
    /* A new part without the class is told where it stands: what was fitted. */
    bool of_class = part->advice == ADVICE_REPLACE_SAFETY_CLASS && action_is_change(done);
    if (part->against_advice && !of_class && !has_reason(assessment->job, part->part))
        diagnostic_add(assessment->diagnostics, &assessment->job->source, at,
                       DIAGNOSTIC_AGAINST_ADVICE,
                       part->part->can == NOT_LISTED
                           ? "say why: `reason: ...`"
                           : arena_print(assessment->arena, "say why, under %s: `reason: ...`",
                                         assessment->job->cans[part->part->can].ref),
                       "%s was %s against the advice to %s", part->part->ref, action_text(done),
                       advice_text(part->advice));
    if (done == DONE_KEPT && part->reading_count == 0 && part->part->was != WAS_MISSING)
        diagnostic_add(assessment->diagnostics, &assessment->job->source, at,
                       DIAGNOSTIC_KEPT_WITHOUT_READING, "say `done: kept untested`, or measure it",
                       "%s was kept without a reading", part->part->ref);
}
