#include "report/held_words.h"

const char *not_judged_words(const struct composition *composition, enum reason why,
                             const char *missing)
{
    const struct phrasing *say = &composition->say;
    return phrase(say, "held.not_judged", "why",
                  phrase(say, arena_print(composition->arena, "why.%s", reason_text(why)),
                         "missing", missing, NULL),
                  NULL);
}

const char *held_words(const struct composition *composition, const struct held *held)
{
    if (held->outcome == OUTCOME_NOT_JUDGED)
        return held->why == WHY_NO_FIGURE || held->why == WHY_NO_READING
                   ? NULL
                   : not_judged_words(composition, held->why, held->missing);
    return phrase_in(&composition->say, "held", outcome_text(held->outcome));
}

static const char *limit_text(const struct composition *composition, double value, enum unit unit)
{
    return unit == UNIT_PERCENT ? text_signed(composition->arena, value, unit, 2)
                                : text_unit(composition, value, unit, 3);
}

const char *held_limits(const struct composition *composition, const struct held *held)
{
    struct arena *arena = composition->arena;
    bool low = isfinite(held->low), high = isfinite(held->high);
    if (low && high && held->low == -held->high)
        return arena_print(arena, "±%s", text_unit(composition, held->high, held->unit, 2));
    if (low && high)
        return phrase(&composition->say, "held.between", "low",
                      limit_text(composition, held->low, held->unit), "high",
                      limit_text(composition, held->high, held->unit), NULL);
    if (high)
        return arena_print(arena, "≤ %s", limit_text(composition, held->high, held->unit));
    return low ? arena_print(arena, "≥ %s", text_unit(composition, held->low, held->unit, 3))
               : NULL;
}

bool held_fails(const struct held *held)
{
    return held->outcome == OUTCOME_FAIL || held->outcome == OUTCOME_CONDITIONAL_FAIL;
}

const char *source_words(const struct composition *composition, enum source_key source)
{
    const struct source_row *row = source_row(source);
    if (source == SOURCE_NONE)
        return NULL;
    if (source == SOURCE_JOB) /* the reader has it in hand */
        return row->title;
    return arena_print(composition->arena, "%s; %s", row->title,
                       trust_words(composition, row->trust));
}
