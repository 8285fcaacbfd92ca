#include "assess/facts.h"

#include "assess/accuracy.h"
#include "assess/mains.h"
#include "assess/reading.h"
#include "assess/temperature.h"
#include "assess/uncertainty.h"
#include "assess/verdict.h"

#include <math.h>

static const double pulse_times_peak = 2;
static const double published_touch_a = 0.5e-3;
/* Old electrolytics were sold to -20/+100 %, others without a mark to 20 %. */
static const double electrolytic_low = -20, electrolytic_high = 100, plain_tolerance = 20;

bool facts_no_reading_passes(const struct job *job, const struct capacitor *part)
{
    if (part->pulse)
        return true;
    return place_is_mains(part->place) && !mains_class_borne(job, part->place, &part->marked);
}

static void add(struct judgement *judgement, const struct policy *policy,
                struct criterion criterion, bool too_coarse)
{
    struct verdict_case judged = {.value = criterion.value,
                                  .limit = criterion.limit,
                                  .guard = policy->guard_band * criterion.uncertainty,
                                  .upper = criterion.upper};
    criterion.outcome = verdict_of(&judged);
    if (criterion.outcome == OUTCOME_NOT_JUDGED)
        criterion.why = WHY_MISSING_FACT;
    else if (criterion.outcome == OUTCOME_CONDITIONAL_PASS ||
             criterion.outcome == OUTCOME_CONDITIONAL_FAIL)
        criterion.why = WHY_WITHIN_UNCERTAINTY;
    if (too_coarse && criterion.outcome != OUTCOME_FAIL) {
        criterion.outcome = OUTCOME_NOT_JUDGED;
        criterion.why = WHY_INSTRUMENT;
    }
    judge_add(judgement, &criterion);
}

/* ---- capacitance */

static bool capacitance_matters(const struct facts_case *facts)
{
    const struct capacitor *part = facts->part;
    return part->measured.value.set && part->marked.value.set && part->marked.value.value > 0 &&
           (part->place == PLACE_TUNING || dielectric_is_electrolytic(part->type) ||
            (place_is_mains(part->place) && !facts_no_reading_passes(facts->job, part)));
}

/* Expanded, of a measurement of value_f, in per cent of the marked value. */
static double capacitance_u(const struct facts_case *facts, double value_f)
{
    struct accuracy accuracy = accuracy_in_job(facts->job, UNIT_CAPACITANCE, facts->policy,
                                               reading_last_digit(&facts->part->measured.value));
    return 100 * 2 * uncertainty_of_accuracy(value_f, accuracy.share, accuracy.absolute) /
           facts->part->marked.value.value;
}

/* As of leakage: an instrument that is uncertain by half the limit tells a fail, and no more. */
static bool capacitance_too_coarse(const struct facts_case *facts, double limit_percent)
{
    double at_limit_f = facts->part->marked.value.value * (1 + limit_percent / 100);
    return capacitance_u(facts, at_limit_f) > facts->policy->instrument_share * fabs(limit_percent);
}

static void judge_capacitance(const struct facts_case *facts, struct judgement *judgement)
{
    const struct marking *marked = &facts->part->marked;
    bool electrolytic = dielectric_is_electrolytic(facts->part->type);
    double low = electrolytic ? electrolytic_low : -plain_tolerance;
    double high = electrolytic ? electrolytic_high : plain_tolerance;
    enum source_key source =
        electrolytic ? SOURCE_ELECTROLYTIC_TOLERANCE : SOURCE_CAPACITOR_TOLERANCE;
    if (marked->tolerance_set) {
        low = marked->tolerance_low_percent;
        high = marked->tolerance_high_percent;
        source = SOURCE_MARKED_TOLERANCE;
    }
    double measured_f = facts->part->measured.value.value;
    double deviation = 100 * (measured_f / marked->value.value - 1);
    double limit = deviation >= 0 ? high : low;
    add(judgement, facts->policy,
        (struct criterion){.key = CRITERION_CAPACITANCE,
                           .value = deviation,
                           .uncertainty = capacitance_u(facts, measured_f),
                           .limit = limit,
                           .unit = UNIT_PERCENT,
                           .upper = deviation >= 0,
                           .source = source},
        capacitance_too_coarse(facts, limit));
}

/* ---- the mains */

static void judge_class(const struct facts_case *facts, struct judgement *judgement)
{
    bool borne = mains_class_borne(facts->job, facts->part->place, &facts->part->marked);
    judge_add(judgement, &(struct criterion){.key = CRITERION_SAFETY_CLASS,
                                             .value = NAN,
                                             .uncertainty = NAN,
                                             .limit = NAN,
                                             .outcome = borne ? OUTCOME_PASS : OUTCOME_FAIL,
                                             .why = borne ? WHY_NONE : WHY_NO_READING_PASSES,
                                             .source = SOURCE_SAFETY_CLASS});
}

static void judge_rating(const struct facts_case *facts, struct judgement *judgement)
{
    if (!facts->part->marked.rated.set || !facts->job->set.mains.set)
        return;
    add(judgement, facts->policy,
        (struct criterion){.key = CRITERION_RATED_VOLTS,
                           .value = facts->part->marked.rated.value,
                           .limit = facts->policy->mains_rise * facts->job->set.mains.value,
                           .unit = UNIT_VOLTAGE,
                           .upper = false,
                           .source = SOURCE_POLICY},
        false);
}

static void judge_touch(const struct facts_case *facts, struct judgement *judgement)
{
    if (!facts->job->set.mains.set)
        return;
    double rise_v = facts->policy->mains_rise * facts->job->set.mains.value;
    double hertz = mains_frequency(facts->job);
    double total_f = mains_isolators(facts->job, facts->left);
    double u_f = mains_isolators_uncertainty(facts->job, facts->policy, facts->left);
    double touch_a = mains_touch_current(rise_v, hertz, total_f, facts->leak_s);
    add(judgement, facts->policy,
        (struct criterion){
            .key = CRITERION_TOUCH_CURRENT,
            .value = touch_a,
            .uncertainty =
                mains_touch_current(rise_v, hertz, total_f + u_f, facts->leak_s) - touch_a,
            .limit = facts->policy->touch_current_a,
            .unit = UNIT_CURRENT,
            .upper = true,
            .joint = true,
            .source = facts->policy->touch_current_a == published_touch_a ? SOURCE_TOUCH_CURRENT
                                                                          : SOURCE_POLICY},
        false);
}

static void judge_pulse(const struct facts_case *facts, struct judgement *judgement)
{
    const struct capacitor *part = facts->part;
    judge_add(judgement,
              &(struct criterion){
                  .key = CRITERION_PULSE_RATING,
                  .value = quantity_or(&part->marked.rated, NAN),
                  .uncertainty = NAN,
                  .limit = part->pulse_peak.set ? pulse_times_peak * part->pulse_peak.value : NAN,
                  .unit = UNIT_VOLTAGE,
                  .outcome = OUTCOME_FAIL,
                  .why = WHY_NO_READING_PASSES,
                  .source = SOURCE_POLICY});
}

void facts_judge(const struct facts_case *facts, struct judgement *judgement)
{
    if (facts->part->pulse)
        judge_pulse(facts, judgement);
    if (place_is_mains(facts->part->place)) {
        judge_class(facts, judgement);
        if (!facts_no_reading_passes(facts->job, facts->part)) {
            judge_rating(facts, judgement);
            if (place_is_isolator(facts->part->place))
                judge_touch(facts, judgement);
        }
    }
    if (capacitance_matters(facts))
        judge_capacitance(facts, judgement);
}
