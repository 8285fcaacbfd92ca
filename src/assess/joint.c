/*
 * Parts that pass singly may fail together: all of one AVC line, of one group of stages, of one
 * can. Parts that fail by themselves are taken as replaced. Where the rest fails jointly, each part
 * that brings at least 1/(2N) of the joint figure is a conditional fail. Done once with every part
 * as its last readings show it, and once as found: the set as found decides `outcome_found`.
 */
#include "assess/assessment.h"

#include "assess/verdict.h"

#include <math.h>
#include <string.h>
#include <strings.h>

enum joint_kind { JOINT_NONE, JOINT_STAGE, JOINT_LINE, JOINT_CAN };

static enum joint_kind kind_of(const struct place_case *place)
{
    if (place->part->place == PLACE_AVC_BYPASS)
        return JOINT_LINE;
    if (place->group && !place->linear && !place->screen_as_rail &&
        (place->part->place == PLACE_COUPLING || place->part->place == PLACE_SCREEN_BYPASS ||
         place->part->place == PLACE_CATHODE_BYPASS || place->part->place == PLACE_BIAS_BYPASS))
        return JOINT_STAGE;
    return place->part->can != NOT_LISTED && place->electrolytic ? JOINT_CAN : JOINT_NONE;
}

/* Leaks, is judged, and does not fail by itself. */
static bool takes_part(const struct assessment *assessment, size_t index)
{
    const struct part_work *work = &assessment->work[index];
    return work->leaks && work->place.why == WHY_NONE &&
           !assessment->capacitors[index].no_reading_passes &&
           work->final.outcome != OUTCOME_FAIL && work->final.outcome != OUTCOME_CONDITIONAL_FAIL &&
           work->leak.conductance_s > 0;
}

static bool together(const struct assessment *assessment, size_t a, size_t b)
{
    const struct place_case *one = &assessment->work[a].place, *two = &assessment->work[b].place;
    enum joint_kind kind = kind_of(one);
    if (kind != kind_of(two))
        return false;
    switch (kind) {
    case JOINT_STAGE:
        return one->group == two->group;
    case JOINT_LINE:
        return strcasecmp(one->part->line, two->part->line) == 0;
    case JOINT_CAN:
        return one->part->can == two->part->can;
    case JOINT_NONE:
        return false;
    }
    return false;
}

/* All that share the line, the stage or the can with a part, the part itself among them. */
struct company {
    const size_t *parts;
    size_t count;
    struct place_values **effects; /* of each capacitor of the job; see effects_alone */
};

static struct company company_of(const struct assessment *assessment, size_t index,
                                 struct place_values **effects)
{
    size_t *parts = arena_array(assessment->arena, assessment->job->capacitor_count, sizeof *parts);
    struct company company = {parts, 0, effects};
    for (size_t i = 0; i < assessment->job->capacitor_count; i++)
        if (i == index || (takes_part(assessment, i) && together(assessment, index, i)))
            parts[company.count++] = i;
    return company;
}

/* What moves by its standard uncertainty: what one instrument's readings share, one reading's own
   last step, or one measured resistor. */
struct shift {
    const struct company *company;
    int instrument; /* NOT_SHIFTED: none */
    int own;        /* part; NOT_SHIFTED: none; OWN_OF_ALL */
    bool bench;     /* the bench's temperature, for all */
    const struct stage_step *step;
    bool feed, source; /* what the part itself hangs on, where that was measured */
    bool certain;      /* others of which only an upper figure is known count as nothing */
};
enum { NOT_SHIFTED = -2, OWN_OF_ALL = -3 };
/* With more parts than this on one line their last steps move together: an upper figure, and the
   work stays in proportion to the square of their number. */
enum { ONE_BY_ONE_MAX = 24 };

static int instrument_index(const struct assessment *assessment, size_t index)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    return part->readings[part->deciding].reading->instrument;
}

static double shifted_leak(const struct assessment *assessment, size_t index,
                           const struct shift *shift)
{
    const struct leak *leak = &assessment->work[index].leak;
    double leak_s = leak->conductance_s;
    if (instrument_index(assessment, index) == shift->instrument)
        leak_s += leak->common_s;
    if (shift->bench)
        leak_s += leak->bench_s;
    bool own = (int)index == shift->own || shift->own == OWN_OF_ALL;
    return own ? leak_s + leak->own_s : leak_s;
}

/* The part's figures with the others in place. */
static void evaluate_with(const struct assessment *assessment, size_t index,
                          const struct shift *shift, struct place_values *values)
{
    struct place_case place = assessment->work[index].place;
    place.feed_ohm += shift->feed ? place.feed_u_ohm : 0;
    place.source_ohm += shift->source ? place.source_u_ohm : 0;
    struct stage_circuit circuits[STAGE_GROUP_MAX];
    enum joint_kind kind = kind_of(&place);
    if (kind == JOINT_STAGE) {
        place.bare = shift->step ? shift->step->bare : place.bare;
        memcpy(circuits, shift->step ? shift->step->circuits : place.circuits,
               place.group->count * sizeof *circuits);
        place.circuits = circuits;
    }
    for (size_t k = 0; k < shift->company->count; k++) {
        size_t i = shift->company->parts[k];
        if (i == index || (shift->certain && !assessment->work[i].leak.proves_fail))
            continue;
        const struct part_work *other = &assessment->work[i];
        double leak_s = shifted_leak(assessment, i, shift);
        if (kind == JOINT_STAGE) {
            struct stage_leak leak = place_leak(&other->place, leak_s);
            stage_add_leak(place.stages, place.group, circuits, &leak);
        } else if (kind == JOINT_LINE) {
            place.line_others_s += leak_s;
        } else {
            place.can_others_w += place_heat(&other->place, leak_s);
        }
    }
    place_evaluate(&place, shifted_leak(assessment, index, shift), values);
}

/* The joint figures and the variance of each. */
struct joint_figures {
    struct place_values at;
    double variance[PLACE_VALUES_MAX];
};

static void add_shift(const struct assessment *assessment, size_t index, const struct shift *shift,
                      struct joint_figures *figures)
{
    struct place_values moved;
    evaluate_with(assessment, index, shift, &moved);
    for (size_t i = 0; i < figures->at.count && i < moved.count; i++) {
        double difference = moved.items[i].value - figures->at.items[i].value;
        figures->variance[i] += isnan(difference) ? 0 : difference * difference;
    }
}

/* Covariance by cause: all readings of one instrument move together, all cold readings with the
   bench's temperature, the rest one by one. */
static void find_figures(const struct assessment *assessment, size_t index,
                         const struct company *company, bool certain, struct joint_figures *figures)
{
    const struct place_case *place = &assessment->work[index].place;
    const struct shift none = {
        .company = company, .instrument = NOT_SHIFTED, .own = NOT_SHIFTED, .certain = certain};
    struct shift shift = none;
    *figures = (struct joint_figures){0};
    evaluate_with(assessment, index, &none, &figures->at);
    for (int i = NOT_LISTED; i < (int)assessment->job->instrument_count; i++) {
        shift.instrument = i;
        add_shift(assessment, index, &shift, figures);
    }
    shift = none;
    shift.bench = true;
    add_shift(assessment, index, &shift, figures);
    shift = none;
    if (company->count > ONE_BY_ONE_MAX) {
        shift.own = OWN_OF_ALL;
        add_shift(assessment, index, &shift, figures);
    } else {
        for (size_t k = 0; k < company->count; k++) {
            shift.own = (int)company->parts[k];
            add_shift(assessment, index, &shift, figures);
        }
    }
    shift = none;
    shift.feed = true;
    if (place->feed_u_ohm > 0)
        add_shift(assessment, index, &shift, figures);
    shift = none;
    shift.source = true;
    if (place->source_u_ohm > 0)
        add_shift(assessment, index, &shift, figures);
    shift = none;
    for (size_t i = 0; kind_of(place) == JOINT_STAGE && i < place->group->step_count; i++) {
        shift.step = &place->group->steps[i];
        add_shift(assessment, index, &shift, figures);
    }
}

static const struct criterion *single_of(const struct judgement *judgement, enum criterion_key key)
{
    for (size_t i = 0; i < judgement->count; i++)
        if (judgement->criteria[i].key == key && !judgement->criteria[i].joint)
            return &judgement->criteria[i];
    return NULL;
}

/* What a part does by itself. Asked for by each of its company, and worked out once: a stage is
   solved for it. */
static const struct place_values *effects_alone(const struct assessment *assessment, size_t index,
                                                const struct company *company)
{
    if (company->effects[index])
        return company->effects[index];
    const struct part_work *work = &assessment->work[index];
    struct place_values *alone = arena_get(assessment->arena, sizeof *alone), bare;
    place_evaluate(&work->place, work->leak.conductance_s, alone);
    place_evaluate(&work->place, 0, &bare);
    if (bare.count < alone->count)
        alone->count = bare.count;
    for (size_t n = 0; n < alone->count; n++)
        alone->items[n].value = fmax(alone->items[n].value - bare.items[n].value, 0);
    return company->effects[index] = alone;
}

/* The share of a joint figure that one part brings, by what each does alone. */
static double share_of(const struct assessment *assessment, size_t index,
                       const struct company *company, enum criterion_key key)
{
    double own = 0, all = 0;
    for (size_t k = 0; k < company->count; k++) {
        size_t i = company->parts[k];
        const struct place_values *alone = effects_alone(assessment, i, company);
        for (size_t n = 0; n < alone->count; n++)
            if (alone->items[n].key == key) {
                all += alone->items[n].value;
                own = i == index ? alone->items[n].value : own;
            }
    }
    return all > 0 ? own / all : 0;
}

static struct criterion joint_criterion(const struct assessment *assessment, size_t index,
                                        const struct company *company, const struct place_value *at,
                                        double u)
{
    const struct part_work *work = &assessment->work[index];
    const struct criterion *single = single_of(&work->final, at->key);
    struct criterion criterion = {.key = at->key,
                                  .value = at->value,
                                  .uncertainty = u,
                                  .limit = single ? single->limit : at->limit,
                                  .unit = at->unit,
                                  .upper = true,
                                  .joint = true,
                                  .source = at->source};
    struct verdict_case judged = {.value = criterion.value,
                                  .limit = criterion.limit,
                                  .guard = assessment->policy->guard_band * criterion.uncertainty,
                                  .upper = true};
    criterion.outcome = verdict_of(&judged);
    criterion.why = WHY_JOINT;
    if (criterion.outcome == OUTCOME_PASS || criterion.outcome == OUTCOME_NOT_JUDGED) {
        criterion.why = criterion.outcome == OUTCOME_PASS ? WHY_NONE : WHY_STAGE;
    } else if (criterion.outcome >= OUTCOME_CONDITIONAL_FAIL) {
        double share = share_of(assessment, index, company, at->key);
        criterion.outcome = share >= 1 / (2.0 * (double)company->count) ? OUTCOME_CONDITIONAL_FAIL
                                                                        : OUTCOME_CONDITIONAL_PASS;
    }
    return criterion;
}

/* A can heats as one; what a rule allows a part is its own; the rest belongs to line or stage. */
static bool is_joint_figure(enum joint_kind kind, enum criterion_key key)
{
    if (kind == JOINT_CAN || key == CRITERION_HEAT)
        return kind == JOINT_CAN && key == CRITERION_HEAT;
    return key != CRITERION_LEAKAGE_RULE;
}

static void judge_figures(const struct assessment *assessment, size_t index,
                          const struct company *company, bool certain, struct judgement *judgement)
{
    enum joint_kind kind = kind_of(&assessment->work[index].place);
    struct joint_figures figures;
    *judgement = (struct judgement){0};
    find_figures(assessment, index, company, certain, &figures);
    for (size_t i = 0; i < figures.at.count; i++)
        if (is_joint_figure(kind, figures.at.items[i].key)) {
            struct criterion criterion = joint_criterion(
                assessment, index, company, &figures.at.items[i], 2 * sqrt(figures.variance[i]));
            judge_add(judgement, &criterion);
        }
}

/* A reading that is only a bound, too early or still falling says how much at most: with it a joint
   figure may pass, and only without it may the figure fail; a part known by such a reading alone
   cannot be blamed. */
static void judge_jointly(struct assessment *assessment, size_t index,
                          const struct company *company, struct judgement *result)
{
    struct judgement joint;
    judge_figures(assessment, index, company, false, &joint);
    if (joint.outcome >= OUTCOME_CONDITIONAL_FAIL)
        judge_figures(assessment, index, company, true, &joint);
    bool blameless = assessment->capacitors[index].test_bound != BOUND_NONE ||
                     !assessment->work[index].leak.proves_fail;
    for (size_t i = 0; i < joint.count; i++)
        if (!blameless || joint.criteria[i].outcome <= OUTCOME_CONDITIONAL_PASS)
            judge_add(result, &joint.criteria[i]);
}

static void assess_together(struct assessment *assessment)
{
    size_t count = assessment->job->capacitor_count;
    struct judgement *results = arena_array(assessment->arena, count + 1, sizeof *results);
    struct place_values **effects = arena_array(assessment->arena, count + 1, sizeof *effects);
    /* All are judged on the single outcomes before any of them is changed. */
    for (size_t i = 0; i < count; i++) {
        results[i] = assessment->work[i].final;
        if (kind_of(&assessment->work[i].place) == JOINT_NONE || !takes_part(assessment, i))
            continue;
        struct company company = company_of(assessment, i, effects);
        if (company.count > 1)
            judge_jointly(assessment, i, &company, &results[i]);
    }
    for (size_t i = 0; i < count; i++) {
        assessment->work[i].final = results[i];
        if (results[i].outcome > assessment->capacitors[i].outcome) {
            assessment->capacitors[i].outcome = results[i].outcome;
            assessment->capacitors[i].why = results[i].why;
        }
    }
}

static bool all_decided_as_found(const struct assessment *assessment)
{
    for (size_t i = 0; i < assessment->job->capacitor_count; i++)
        if (assessment->capacitors[i].deciding != assessment->capacitors[i].deciding_found &&
            kind_of(&assessment->work[i].place) != JOINT_NONE)
            return false;
    return true;
}

/* The same set with every part as its readings found it. */
static struct assessment as_found(const struct assessment *assessment)
{
    size_t count = assessment->job->capacitor_count;
    struct assessment found = *assessment;
    found.work = arena_array(assessment->arena, count + 1, sizeof *found.work);
    found.capacitors = arena_array(assessment->arena, count + 1, sizeof *found.capacitors);
    for (size_t i = 0; i < count; i++) {
        struct part_work *work = &found.work[i];
        struct capacitor_findings *part = &found.capacitors[i];
        *work = assessment->work[i];
        *part = assessment->capacitors[i];
        work->leak = work->leak_found;
        work->leaks = work->leaks_found;
        work->final = work->found;
        part->deciding = part->deciding_found;
        part->outcome = part->outcome_found;
        part->test_bound = part->deciding < 0 ? BOUND_NONE : part->readings[part->deciding].bound;
    }
    return found;
}

void joint_assess(struct assessment *assessment)
{
    size_t count = assessment->job->capacitor_count;
    bool alike = all_decided_as_found(assessment);
    struct assessment found = alike ? *assessment : as_found(assessment);
    assess_together(assessment);
    if (!alike)
        assess_together(&found);
    for (size_t i = 0; i < count; i++) {
        struct capacitor_findings *part = &assessment->capacitors[i];
        if (kind_of(&assessment->work[i].place) == JOINT_NONE)
            continue;
        part->outcome_found = verdict_worse(part->outcome_found, found.capacitors[i].outcome);
        /* The others leaked no less as found than after they were reformed: one reading, one
           outcome. */
        if (part->deciding == part->deciding_found)
            part->outcome_found = verdict_worse(part->outcome_found, part->outcome);
    }
}
