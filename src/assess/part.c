/* One part alone: its readings, its leak, its outcome. */
#include "assess/assessment.h"

#include "assess/absorption.h"
#include "assess/facts.h"
#include "assess/mains.h"
#include "assess/soak.h"
#include "assess/temperature.h"
#include "assess/voltage.h"

#include <math.h>

static const double exponent_high = 1.3;
/* A shorted part takes nearly all the volts in the tester's resistance: nothing to tell b from. */
static const double exponent_least_share = 0.01;
static const double same_volts_share = 0.005, same_temperature_k = 1;
static const double warmer_k = 5; /* "turns on temperature" */
static const double rising_share = 0.1;
enum { RUNS_OF_A_LOG = 10000 };

/* ---- limits at a reading */

/* The largest current that passes at the volts and the temperature of a reading. */
static double limit_at_reading(const struct assessment *assessment, size_t index,
                               const struct reading_findings *reading)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    double factor = temperature_factor(part->part->type, reading->temperature_c, part->working_c,
                                       reading->reading->hot.set);
    return voltage_limit_at(part->limit_a / factor, reading->part_v, part->service_v,
                            part->exponent, dielectric_is_electrolytic(part->part->type));
}

static void set_soak(const struct assessment *assessment, size_t index,
                     struct reading_findings *reading)
{
    const struct capacitor *part = assessment->capacitors[index].part;
    const struct instrument *instrument =
        instrument_of(assessment->job, reading->reading->instrument);
    struct soak soak = {.capacitance_f = soak_capacitance(part),
                        .set_v = reading->reading->set_volts.value,
                        .series_ohm = reading_series_ohm(instrument),
                        .supply_current_a =
                            instrument ? quantity_or(&instrument->supply_current, NAN) : NAN,
                        .limit_a = limit_at_reading(assessment, index, reading),
                        .electrolytic = dielectric_is_electrolytic(part->type)};
    reading->t_min_s = soak_least_s(&soak);
    reading->may_fail =
        reading->reading->time.set && reading->reading->time.value >= reading->t_min_s;
}

/* ---- collecting the readings: the part's own, then the tests after the rest of its reforms */

static size_t count_readings(const struct assessment *assessment, size_t index)
{
    size_t count = assessment->capacitors[index].part->reading_count;
    for (size_t i = 0; i < assessment->job->reform_count; i++)
        if (assessment->job->reforms[i].capacitor == (int)index)
            count += assessment->job->reforms[i].after_rest_count;
    return count;
}

/* Once a part. */
static void warn_above_marked(struct assessment *assessment, struct capacitor_findings *part,
                              const struct reading *reading)
{
    const struct marking *marked = &part->part->marked;
    if (!marked->rated.set || marked->rated_ac || part->tested_above_marked ||
        !reading->set_volts.set || reading->set_volts.value <= marked->rated.value)
        return;
    part->tested_above_marked = true;
    diagnostic_add(assessment->diagnostics, &assessment->job->source, reading->at,
                   DIAGNOSTIC_TESTED_ABOVE_MARKED, NULL, "%s tested at %g V, marked %g V",
                   part->part->ref, reading->set_volts.value, marked->rated.value);
}

static void add_reading(struct assessment *assessment, size_t index, const struct reading *reading,
                        int run)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    struct reading_bench bench = {instrument_of(assessment->job, reading->instrument),
                                  assessment->policy, assessment->bench_c};
    if (!reading->set_volts.set || !reading->value.set || !(reading->set_volts.value > 0))
        return;
    struct reading_findings *found = &work->readings[part->reading_count];
    work->runs[part->reading_count++] = run;
    if (!reading_evaluate(reading, &bench, found))
        diagnostic_add(assessment->diagnostics, &assessment->job->source, reading->at,
                       DIAGNOSTIC_READING_IMPOSSIBLE,
                       "check the volts, the current and the tester's `series`",
                       "more current than the tester's series resistance lets pass");
    warn_above_marked(assessment, part, reading);
}

static void collect(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    const struct capacitor *part = assessment->capacitors[index].part;
    size_t count = count_readings(assessment, index);
    work->readings = arena_array(assessment->arena, count + 1, sizeof *work->readings);
    work->runs = arena_array(assessment->arena, count + 1, sizeof *work->runs);
    for (size_t i = 0; i < part->reading_count; i++)
        add_reading(assessment, index, &part->readings[i], (int)part->readings[i].line);
    for (size_t i = 0; i < assessment->job->reform_count; i++) {
        const struct reform *reform = &assessment->job->reforms[i];
        if (reform->capacitor != (int)index)
            continue;
        for (size_t k = 0; k < reform->log_count; k++)
            warn_above_marked(assessment, &assessment->capacitors[index], &reform->log[k]);
        for (size_t k = 0; k < reform->after_rest_count; k++)
            add_reading(assessment, index, &reform->after_rest[k],
                        RUNS_OF_A_LOG * (int)(i + 1) + (int)reform->after_rest[k].line);
    }
    assessment->capacitors[index].readings = work->readings;
}

/* A test after the rest of a reform shows the part as reformed, whatever the line says. */
static enum reading_state state_of(const struct part_work *work, size_t reading)
{
    enum reading_state state = work->readings[reading].reading->state;
    return work->runs[reading] >= RUNS_OF_A_LOG && state == READING_FOUND ? READING_REFORMED
                                                                          : state;
}

/* ---- which reading decides */

struct choice {
    enum reading_state latest; /* no later state counts */
    bool soaked;               /* only readings that may fail */
};

static bool is_hot_enough(const struct capacitor_findings *part,
                          const struct reading_findings *reading)
{
    return reading->reading->hot.set &&
           reading->temperature_c >= part->working_c - TEMPERATURE_HOT_ENOUGH_K;
}

static double soak_time(const struct reading_findings *reading)
{
    return quantity_or(&reading->reading->time, 0);
}

/* Latest state, at voltage, hot before cold, longest soak, the later of two alike. */
static bool decides_before(const struct assessment *assessment, size_t index, size_t a, size_t b)
{
    const struct part_work *work = &assessment->work[index];
    const struct capacitor_findings *part = &assessment->capacitors[index];
    const struct reading_findings *one = &work->readings[a], *two = &work->readings[b];
    if (state_of(work, a) != state_of(work, b))
        return state_of(work, a) > state_of(work, b);
    double enough_v = VOLTAGE_SHARE_AT * part->service_v;
    bool one_at = !(one->part_v < enough_v), two_at = !(two->part_v < enough_v);
    if (one_at != two_at)
        return one_at;
    if (!one_at && fabs(one->part_v - two->part_v) > same_volts_share * two->part_v)
        return one->part_v > two->part_v;
    if (is_hot_enough(part, one) != is_hot_enough(part, two))
        return is_hot_enough(part, one);
    return soak_time(one) != soak_time(two) ? soak_time(one) > soak_time(two) : a > b;
}

static int choose(const struct assessment *assessment, size_t index, struct choice choice)
{
    const struct part_work *work = &assessment->work[index];
    int best = -1;
    for (size_t i = 0; i < assessment->capacitors[index].reading_count; i++) {
        const struct reading_findings *reading = &work->readings[i];
        if (reading->reading->in_circuit || state_of(work, i) > choice.latest ||
            (choice.soaked && !reading->may_fail))
            continue;
        if (best < 0 || decides_before(assessment, index, i, (size_t)best))
            best = (int)i;
    }
    return best;
}

/* ---- runs: the readings of one switching-on up to the one that decides */

static size_t run_up_to(const struct assessment *assessment, size_t index, size_t last,
                        struct reading_findings *run)
{
    const struct part_work *work = &assessment->work[index];
    const struct reading_findings *deciding = &work->readings[last];
    size_t count = 0;
    for (size_t i = 0; i <= last; i++) {
        const struct reading_findings *reading = &work->readings[i];
        bool same =
            work->runs[i] == work->runs[last] &&
            reading->reading->instrument == deciding->reading->instrument &&
            fabs(reading->part_v - deciding->part_v) <= same_volts_share * deciding->part_v &&
            fabs(reading->temperature_c - deciding->temperature_c) <= same_temperature_k &&
            reading->reading->time.set;
        if (same && (count == 0 || soak_time(reading) > soak_time(&run[count - 1])))
            run[count++] = *reading;
    }
    return count;
}

static void fit_run(struct assessment *assessment, size_t index, size_t deciding)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    struct reading_findings *run = arena_array(assessment->arena, deciding + 1, sizeof *run);
    size_t count = run_up_to(assessment, index, deciding, run);
    part->trend = soak_trend(run, count);
    struct absorption_reading *fit = arena_array(assessment->arena, deciding + 1, sizeof *fit);
    size_t fitted = 0;
    for (size_t i = 0; i < count; i++)
        if (run[i].bound == BOUND_NONE && soak_time(&run[i]) > 0)
            fit[fitted++] = (struct absorption_reading){soak_time(&run[i]), run[i].current_a,
                                                        run[i].repeatability_a};
    part->absorption = absorption_fit(
        fit, fitted,
        limit_at_reading(assessment, index, &assessment->work[index].readings[deciding]));
}

/* ---- the exponent of volts */

static void find_exponent(struct assessment *assessment, size_t index, size_t deciding)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct reading_findings *low = NULL, *high = NULL;
    for (size_t i = 0; i < part->reading_count; i++) {
        const struct reading_findings *reading = &work->readings[i];
        bool usable = reading->may_fail && reading->bound == BOUND_NONE &&
                      reading->part_v > exponent_least_share * reading->reading->set_volts.value &&
                      !reading->reading->in_circuit &&
                      state_of(work, i) == state_of(work, deciding) &&
                      fabs(reading->temperature_c - work->readings[deciding].temperature_c) <=
                          same_temperature_k;
        if (!usable)
            continue;
        if (!low || reading->part_v < low->part_v * (1 - same_volts_share) ||
            (reading->part_v <= low->part_v * (1 + same_volts_share) &&
             soak_time(reading) > soak_time(low)))
            low = reading;
        if (!high || reading->part_v > high->part_v * (1 + same_volts_share) ||
            (reading->part_v >= high->part_v * (1 - same_volts_share) &&
             soak_time(reading) > soak_time(high)))
            high = reading;
    }
    if (!low || !high || !(low->current_a > 0) || !(high->current_a > 0))
        return;
    double volts[2] = {low->part_v, high->part_v}, amperes[2] = {low->current_a, high->current_a};
    double relative[2] = {low->uncertainty_a / 2 / low->current_a,
                          high->uncertainty_a / 2 / high->current_a};
    if (!voltage_exponent(volts, amperes, relative, &part->exponent, &part->exponent_error))
        return;
    part->exponent_warning = !dielectric_is_electrolytic(part->part->type) &&
                             part->exponent - 2 * part->exponent_error > exponent_high;
    if (part->exponent_warning)
        diagnostic_add(assessment->diagnostics, &assessment->job->source, high->reading->at,
                       DIAGNOSTIC_EXPONENT_HIGH,
                       "a part that conducts more than in proportion is on its way out",
                       "%s: current rises as the %.2f power of the volts", part->part->ref,
                       part->exponent);
}

/* ---- judging a reading */

/* Not level and not rising, or not known to be: an electrolytic is then reformed, not failed. A
   part already reformed, or read as left, has had its chance: one reading decides. */
static bool still_falling(const struct assessment *assessment, size_t index, size_t reading)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    if (!dielectric_is_electrolytic(part->part->type) || part->trend == TREND_LEVEL ||
        part->trend == TREND_RISING)
        return false;
    return part->trend == TREND_FALLING ||
           state_of(&assessment->work[index], reading) == READING_FOUND;
}

static bool instrument_too_coarse(const struct assessment *assessment, size_t index,
                                  const struct reading_findings *reading)
{
    double limit_a = limit_at_reading(assessment, index, reading);
    /* Of an insulation tester the amperes that it cannot tell grow with the square of the current:
       at 200 M it knows well that a part is above 1 M, which its own steps of 1 M could not show.
     */
    double at_a = reading->reading->value.unit == UNIT_RESISTANCE
                      ? fmin(limit_a, reading->current_a)
                      : limit_a;
    struct leak_case given = {
        .reading = reading,
        .bench = {instrument_of(assessment->job, reading->reading->instrument), assessment->policy,
                  assessment->bench_c}};
    return limit_a > 0 &&
           leak_reading_u(&given, at_a) > assessment->policy->instrument_share * limit_a;
}

/* A part that rises is not stable: it fails from a tenth of its limit on. */
static void judge_rise(const struct assessment *assessment, size_t index, const struct leak *leak,
                       bool may_fail, struct judgement *judgement)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    if (part->trend != TREND_RISING || judgement->outcome == OUTCOME_FAIL || isnan(part->limit_a))
        return;
    if (may_fail && leak->warm_a > rising_share * part->limit_a)
        judgement->outcome = OUTCOME_FAIL;
    else if (judgement->outcome == OUTCOME_PASS)
        judgement->outcome = OUTCOME_CONDITIONAL_PASS;
    else
        return;
    judgement->why = WHY_RISING;
}

/* The leak against what the place can bear. */
static void judge_at_place(struct assessment *assessment, size_t index, size_t reading,
                           struct leak *leak, struct judgement *judgement)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct reading_findings *found = &work->readings[reading];
    if (leak->warm_a > 0)
        work->place.to_20c = leak->service_a *
                             temperature_to_20c(part->part->type, found->temperature_c) /
                             leak->warm_a;
    struct judge_case given = {.place = &work->place,
                               .limit = &work->limit,
                               .leak = leak,
                               .bound = found->bound,
                               .may_fail = found->may_fail,
                               .instrument = instrument_too_coarse(assessment, index, found),
                               .waiting = part->absorption.status == ABSORPTION_RESOLVED &&
                                          !isnan(part->absorption.wait_until_s),
                               .falling = still_falling(assessment, index, reading)};
    leak->proves_fail =
        given.may_fail && !given.falling && !given.waiting && given.bound != BOUND_UNDER;
    judge_leak(&given, judgement);
    judge_rise(assessment, index, leak, found->may_fail, judgement);
    double warmer = exp2(warmer_k / temperature_doubling(part->part->type).theta_k);
    part->turns_on_temperature =
        !is_hot_enough(part, found) && !judge_fails(&given, 1) && judge_fails(&given, warmer);
}

/* What is known of the part besides its leak. A leak that was not judged stays what is said of the
   part, unless a fact says worse. */
static void judge_facts(const struct facts_case *facts, struct judgement *judgement)
{
    bool leak_unjudged = judgement->count == 0 && judgement->why != WHY_NONE;
    enum outcome outcome = judgement->outcome;
    enum reason why = judgement->why;
    facts_judge(facts, judgement);
    if (leak_unjudged && (judgement->count == 0 || judgement->outcome < outcome)) {
        judgement->outcome = outcome;
        judgement->why = why;
    }
}

static void judge_reading(struct assessment *assessment, size_t index, size_t reading, bool left,
                          struct leak *leak, struct judgement *judgement)
{
    const struct place_case *place = &assessment->work[index].place;
    struct leak_case leak_case = part_leak_case(assessment, index, (int)reading);
    *leak = leak_of(&leak_case);
    *judgement = (struct judgement){0};
    fit_run(assessment, index, reading);
    if (place->why != WHY_NONE) {
        judgement->outcome = OUTCOME_NOT_JUDGED;
        judgement->why = place->why;
    } else {
        judge_at_place(assessment, index, reading, leak, judgement);
    }
    struct facts_case facts = {assessment->job, assessment->policy,
                               assessment->capacitors[index].part, leak->conductance_s, left};
    judge_facts(&facts, judgement);
}

/* No lifted reading: what needs none may still fail it. */
static void judge_unread(const struct assessment *assessment, size_t index, bool left,
                         struct judgement *judgement)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    struct facts_case facts = {assessment->job, assessment->policy, part->part, 0, left};
    *judgement = (struct judgement){0};
    facts_judge(&facts, judgement);
    if (judgement->count > 0 && judgement->outcome > OUTCOME_NOT_JUDGED)
        return;
    judgement->outcome = OUTCOME_NOT_JUDGED;
    judgement->why = part->reading_count > 0 ? WHY_NOT_LIFTED : WHY_NO_READING;
}

/* A class or a pulse rating decides, not the leak; the reading is shown all the same. */
static void judge_unpassable(struct assessment *assessment, size_t index, bool left, int reading,
                             struct judgement *judgement)
{
    struct part_work *work = &assessment->work[index];
    judge_unread(assessment, index, left, judgement);
    if (reading >= 0 && work->place.service_v > 0) {
        struct leak_case given = part_leak_case(assessment, index, reading);
        work->leak = leak_of(&given);
    }
}

/* Judge the reading that decides; an early one that does not pass gives way to a soaked one. */
static int decide(struct assessment *assessment, size_t index, struct choice choice,
                  struct leak *leak, struct judgement *judgement)
{
    bool left = choice.latest != READING_FOUND;
    int reading = choose(assessment, index, choice);
    if (facts_no_reading_passes(assessment->job, assessment->capacitors[index].part)) {
        judge_unpassable(assessment, index, left, reading, judgement);
        return reading;
    }
    if (reading < 0) {
        judge_unread(assessment, index, left, judgement);
        return -1;
    }
    judge_reading(assessment, index, (size_t)reading, left, leak, judgement);
    if (judgement->outcome != OUTCOME_NOT_JUDGED || judgement->why != WHY_TOO_EARLY)
        return reading;
    choice.soaked = true;
    int soaked = choose(assessment, index, choice);
    const struct part_work *work = &assessment->work[index];
    if (soaked < 0 || state_of(work, (size_t)soaked) != state_of(work, (size_t)reading))
        return reading;
    judge_reading(assessment, index, (size_t)soaked, left, leak, judgement);
    return soaked;
}

/* ---- putting it together */

static void set_limits(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    part->limit_a = part->bench_limit_a = NAN;
    work->limit.leak_s = NAN;
    if (work->place.why != WHY_NONE || part->no_reading_passes)
        return;
    work->place.to_20c =
        temperature_to_20c(part->part->type, assessment->bench_c) /
        temperature_factor(part->part->type, assessment->bench_c, part->working_c, false);
    bool known = false;
    for (size_t i = 0; i < index && !known; i++) {
        known = assessment->work[i].place.why == WHY_NONE &&
                !assessment->capacitors[i].no_reading_passes &&
                place_same_limit(&assessment->work[i].place, &work->place);
        if (known) {
            work->limit = assessment->work[i].limit;
            work->place.heat_counts = assessment->work[i].place.heat_counts;
        }
    }
    if (!known)
        work->limit = place_set_limit(&work->place);
    part->limit_none = work->limit.none;
    part->limit_is_heat = work->limit.heat;
    part->limit_a = work->limit.leak_s * part->service_v;
    part->bench_limit_a = part->limit_a / temperature_factor(part->part->type, assessment->bench_c,
                                                             part->working_c, false);
}

static double working_temperature(const struct assessment *assessment, const struct capacitor *part)
{
    const struct quantity *given = part->near_heat ? &assessment->job->conditions.working_near_heat
                                                   : &assessment->job->conditions.working;
    if (given->set)
        return given->value;
    return part->near_heat ? assessment->policy->working_near_heat_c
                           : assessment->policy->working_c;
}

static void begin(struct assessment *assessment, size_t index)
{
    const struct capacitor *part = &assessment->job->capacitors[index];
    struct part_work *work = &assessment->work[index];
    struct place_bench bench = {assessment->job, assessment->policy, &assessment->stages};
    struct doubling doubling = temperature_doubling(part->type);
    work->place = place_prepare(&bench, part);
    work->done = part_action(assessment->job, part);
    assessment->capacitors[index] = (struct capacitor_findings){
        .part = part,
        .service_v = work->place.service_v,
        .deciding = -1,
        .deciding_found = -1,
        .exponent = NAN,
        .exponent_error = NAN,
        .theta_k = doubling.theta_k,
        .theta_source = doubling.source,
        .temperature_factor = NAN,
        .working_c = working_temperature(assessment, part),
        .ageing_margin = work->place.margin,
        .leakage_a = NAN,
        .leakage_warm_a = NAN,
        .uncertainty_a = NAN,
        .test_v = NAN,
        .test_s = NAN,
        .test_leakage_a = NAN,
        .test_uncertainty_a = NAN,
        .test_limit_a = NAN,
        .test_c = NAN,
        .found_leakage_a = NAN,
        .found_limit_a = NAN,
        .no_reading_passes = facts_no_reading_passes(assessment->job, part),
        .class_needed = mains_class_needed(assessment->job, part->place),
        .service_above_marked = part->marked.rated.set && !part->marked.rated_ac &&
                                !place_is_mains(part->place) &&
                                work->place.service_v > part->marked.rated.value,
        .absorption = {.steady_a = NAN,
                       .steady_error_a = NAN,
                       .a_a = NAN,
                       .n = NAN,
                       .chi2 = NAN,
                       .wait_until_s = NAN},
    };
}

static void show_deciding(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    if (part->deciding < 0)
        return;
    const struct reading_findings *reading = &work->readings[part->deciding];
    part->test_v = reading->reading->set_volts.value;
    part->test_s = quantity_or(&reading->reading->time, NAN);
    part->test_leakage_a = reading->current_a;
    part->test_uncertainty_a = reading->uncertainty_a;
    part->test_bound = reading->bound;
    part->test_c = reading->reading->hot.set ? reading->temperature_c : NAN;
    if (!(part->service_v > 0))
        return;
    part->test_limit_a = limit_at_reading(assessment, index, reading);
    part->leakage_a = work->leak.service_a;
    part->leakage_warm_a = work->leak.warm_a;
    part->uncertainty_a = 2 * work->leak.standard_s * part->service_v;
    part->temperature_factor = temperature_factor(part->part->type, reading->temperature_c,
                                                  part->working_c, reading->reading->hot.set);
    if (is_hot_enough(part, reading))
        part->theta_k = NAN;
    if (part->deciding_found >= 0 && part->deciding_found != part->deciding) {
        const struct reading_findings *found = &work->readings[part->deciding_found];
        part->found_leakage_a = found->current_a;
        part->found_limit_a = limit_at_reading(assessment, index, found);
    }
}

static void finish_readings(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    if (!(part->service_v > 0))
        return;
    for (size_t i = 0; i < part->reading_count; i++) {
        struct leak_case given = part_leak_case(assessment, index, (int)i);
        struct leak leak = leak_of(&given);
        work->readings[i].service_a = leak.service_a;
        work->readings[i].service_lower_bound = leak.lower_bound;
        work->readings[i].warm_a = leak.warm_a;
    }
}

void part_assess(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    begin(assessment, index);
    set_limits(assessment, index);
    collect(assessment, index);
    for (size_t i = 0; i < part->reading_count; i++)
        set_soak(assessment, index, &work->readings[i]);
    /* What was read as left on a new part says nothing of the original. */
    const struct marking *fitted = part_fitted(assessment->job, part->part);
    enum reading_state latest = part_is_new(work->done, fitted) ? READING_REFORMED : READING_LEFT;
    int deciding = choose(assessment, index, (struct choice){latest, false});
    if (deciding >= 0)
        find_exponent(assessment, index, (size_t)deciding);
    finish_readings(assessment, index);
    part->deciding_found = decide(assessment, index, (struct choice){READING_FOUND, false},
                                  &work->leak_found, &work->found);
    work->leaks_found = part->deciding_found >= 0;
    bool same = deciding == choose(assessment, index, (struct choice){READING_FOUND, false}) &&
                !place_is_mains(part->part->place);
    if (same) {
        part->deciding = part->deciding_found;
        work->leak = work->leak_found;
        work->final = work->found;
    } else {
        part->deciding =
            decide(assessment, index, (struct choice){latest, false}, &work->leak, &work->final);
    }
    work->leaks = part->deciding >= 0;
    if (part->no_reading_passes)
        work->leak_found = work->leak;
    part->outcome_found = work->found.outcome;
    part->outcome = work->final.outcome;
    part->why = work->final.why;
    part->missing = work->final.why == WHY_MISSING_FACT ? work->place.missing : NULL;
    show_deciding(assessment, index);
}
