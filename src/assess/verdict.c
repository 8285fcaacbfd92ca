#include "assess/verdict.h"

#include <math.h>

static enum outcome upper_outcome(double value, double limit, double guard)
{
    if (value <= limit - guard)
        return OUTCOME_PASS;
    if (value <= limit)
        return OUTCOME_CONDITIONAL_PASS;
    return value <= limit + guard ? OUTCOME_CONDITIONAL_FAIL : OUTCOME_FAIL;
}

enum outcome verdict_of(const struct verdict_case *judged)
{
    if (isnan(judged->value) || isnan(judged->limit) || isnan(judged->guard))
        return OUTCOME_NOT_JUDGED;
    double sign = judged->upper ? 1 : -1;
    enum outcome outcome = upper_outcome(sign * judged->value, sign * judged->limit, judged->guard);
    bool passes = outcome == OUTCOME_PASS || outcome == OUTCOME_CONDITIONAL_PASS;
    if (judged->bound == BOUND_NONE)
        return outcome;
    /* "at most" is on the good side of an upper limit, "at least" of a lower one. */
    bool good_side = (judged->bound == BOUND_UNDER) == judged->upper;
    return good_side == passes ? outcome : OUTCOME_NOT_JUDGED;
}

enum outcome verdict_worse(enum outcome a, enum outcome b)
{
    return a > b ? a : b;
}
