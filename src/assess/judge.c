#include "assess/judge.h"

#include "assess/verdict.h"

#include <math.h>

/* The figures of a place at one leak, and how far each moves with every input's uncertainty. */
struct spread {
    struct place_values values;
    double variance[PLACE_VALUES_MAX];
};

static void add_difference(struct spread *spread, const struct place_case *place, double leak_s)
{
    struct place_values moved;
    place_evaluate(place, leak_s, &moved);
    for (size_t i = 0; i < spread->values.count && i < moved.count; i++) {
        double difference = moved.items[i].value - spread->values.items[i].value;
        spread->variance[i] += isnan(difference) ? 0 : difference * difference;
    }
}

/* The leak is moved both ways, or up only where down would be below nothing. */
static void add_leak_spread(struct spread *spread, const struct place_case *place,
                            const struct leak *leak)
{
    double u_s = leak->standard_s;
    if (!(u_s > 0))
        return;
    if (leak->conductance_s < u_s) {
        add_difference(spread, place, leak->conductance_s + u_s);
        return;
    }
    struct place_values up, down;
    place_evaluate(place, leak->conductance_s + u_s, &up);
    place_evaluate(place, leak->conductance_s - u_s, &down);
    for (size_t i = 0; i < spread->values.count; i++) {
        double half = (up.items[i].value - down.items[i].value) / 2;
        spread->variance[i] += isnan(half) ? 0 : half * half;
    }
}

static void add_resistor_spread(struct spread *spread, const struct place_case *place,
                                double leak_s)
{
    struct place_case moved = *place;
    if (place->feed_u_ohm > 0) {
        moved.feed_ohm += place->feed_u_ohm;
        add_difference(spread, &moved, leak_s);
        moved.feed_ohm = place->feed_ohm;
    }
    if (place->source_u_ohm > 0) {
        moved.source_ohm += place->source_u_ohm;
        add_difference(spread, &moved, leak_s);
        moved.source_ohm = place->source_ohm;
    }
    if (!place->group || place->linear || place->screen_as_rail ||
        place->part->place == PLACE_TONE || place->part->place == PLACE_DETECTOR)
        return;
    for (size_t i = 0; i < place->group->step_count; i++) {
        moved.circuits = place->group->steps[i].circuits;
        moved.bare = place->group->steps[i].bare;
        add_difference(spread, &moved, leak_s);
    }
}

/* A figure held as its inverse is printed as people say it: R_L over R, at least 20. */
static struct criterion printed(const struct place_value *value, double limit, double u,
                                enum bound bound)
{
    struct criterion criterion = {.key = value->key,
                                  .value = value->value,
                                  .uncertainty = u,
                                  .limit = limit,
                                  .unit = value->unit,
                                  .upper = true,
                                  .bound = bound,
                                  .source = value->source,
                                  .rule = value->rule};
    if (value->inverse) {
        criterion.upper = false;
        criterion.limit = 1 / limit;
        criterion.value = value->value > 0 ? 1 / value->value : INFINITY;
        criterion.uncertainty = value->value > 0 ? u / (value->value * value->value) : NAN;
        /* A leak of at most so much is an insulation of at least so much. */
        criterion.bound = bound == BOUND_UNDER  ? BOUND_OVER
                          : bound == BOUND_OVER ? BOUND_UNDER
                                                : BOUND_NONE;
    }
    return criterion;
}

static bool is_fail(enum outcome outcome)
{
    return outcome == OUTCOME_FAIL || outcome == OUTCOME_CONDITIONAL_FAIL;
}

static void not_judged(struct criterion *criterion, enum reason why)
{
    criterion->outcome = OUTCOME_NOT_JUDGED;
    criterion->why = why;
}

/* What the circumstances of the reading allow of an outcome (methods 1 to 3). */
static void temper(const struct judge_case *given, struct criterion *criterion)
{
    enum outcome outcome = criterion->outcome;
    if (outcome == OUTCOME_CONDITIONAL_PASS || outcome == OUTCOME_CONDITIONAL_FAIL)
        criterion->why = WHY_WITHIN_UNCERTAINTY;
    if (outcome == OUTCOME_NOT_JUDGED)
        criterion->why = given->bound == BOUND_NONE ? WHY_STAGE : WHY_BOUND;
    else if (is_fail(outcome) && !given->may_fail)
        not_judged(criterion, WHY_TOO_EARLY);
    else if (is_fail(outcome) && given->falling)
        not_judged(criterion, WHY_STILL_FALLING);
    else if (is_fail(outcome) && given->waiting)
        not_judged(criterion, WHY_WAIT);
    else if (given->leak->lower_bound && outcome != OUTCOME_FAIL)
        not_judged(criterion, WHY_VOLTS_TOO_LOW);
    else if (given->instrument && outcome != OUTCOME_FAIL)
        not_judged(criterion, WHY_INSTRUMENT);
}

void judge_add(struct judgement *judgement, const struct criterion *criterion)
{
    if (judgement->count == JUDGED_CRITERIA_MAX)
        return;
    judgement->criteria[judgement->count++] = *criterion;
    if (judgement->count == 1 || criterion->outcome > judgement->outcome) {
        judgement->outcome = criterion->outcome;
        judgement->why = criterion->why;
    }
}

void judge_leak(const struct judge_case *given, struct judgement *judgement)
{
    const struct place_case *place = given->place;
    double leak_s = given->leak->conductance_s;
    struct spread spread = {0};
    place_evaluate(place, leak_s, &spread.values);
    add_leak_spread(&spread, place, given->leak);
    add_resistor_spread(&spread, place, leak_s);
    for (size_t i = 0; i < spread.values.count; i++) {
        const struct place_value *value = &spread.values.items[i];
        double limit = i < given->limit->count ? given->limit->limits[i] : NAN;
        if (value->key == CRITERION_HEAT && isnan(limit)) /* its ripple alone is too much for it */
            limit = value->limit;
        double u = 2 * sqrt(spread.variance[i]);
        struct criterion criterion = printed(value, limit, u, given->bound);
        struct verdict_case judged = {.value = value->value,
                                      .limit = limit,
                                      .guard = place->policy->guard_band * u,
                                      .upper = true,
                                      .bound = given->bound};
        criterion.outcome = verdict_of(&judged);
        if (isnan(limit)) { /* outside without this part: no fault of the leak's */
            criterion.limit = value->inverse ? 1 / value->limit : value->limit;
            not_judged(&criterion, WHY_STAGE);
        } else {
            temper(given, &criterion);
        }
        judge_add(judgement, &criterion);
    }
    if (spread.values.count == 0)
        judge_add(judgement, &(struct criterion){.key = CRITERION_CATHODE_CURRENT,
                                                 .value = NAN,
                                                 .uncertainty = NAN,
                                                 .limit = NAN,
                                                 .upper = true,
                                                 .outcome = OUTCOME_NOT_JUDGED,
                                                 .why = WHY_STAGE});
}

bool judge_fails(const struct judge_case *given, double factor)
{
    struct place_case place = *given->place;
    place.to_20c /= factor;
    struct place_values values;
    place_evaluate(&place, given->leak->conductance_s * factor, &values);
    if (given->bound != BOUND_NONE)
        return false;
    for (size_t i = 0; i < values.count && i < given->limit->count; i++)
        if (values.items[i].value > given->limit->limits[i])
            return true;
    return false;
}
