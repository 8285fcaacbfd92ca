/* The log of a reform: volts across the part, fits, plateau, stop signals, rebound after rest. */
#include "assess/reforming.h"

#include "assess/absorption.h"
#include "assess/accuracy.h"
#include "assess/heat.h"
#include "assess/held.h"
#include "assess/numeric.h"
#include "assess/reading.h"
#include "assess/uncertainty.h"
#include "assess/voltage.h"

#include <math.h>

static const double reached_share = 0.95, constant_share = 0.98;
/* Of the least current, below which a rise is no rise. */
static const double rise_share = 0.10;

struct log_case {
    const struct reforming_case *given;
    const struct reform *reform;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct reform_findings *found;
};

static double current_of(const struct reading *reading)
{
    if (!reading->value.set)
        return NAN;
    if (reading->value.unit == UNIT_RESISTANCE)
        return reading->value.value > 0 ? reading->set_volts.value / reading->value.value : NAN;
    return reading->value.value;
}

double reforming_part_volts(const struct reading *reading, double limiter_ohm, bool across_part)
{
    if (!reading->set_volts.set)
        return NAN;
    return across_part ? reading->set_volts.value
                       : reading->set_volts.value - current_of(reading) * limiter_ohm;
}

static const struct instrument *instrument_at(const struct log_case *log, size_t index)
{
    int instrument = log->reform->log[index].instrument;
    const struct job *job = log->given->job;
    return instrument >= 0 && (size_t)instrument < job->instrument_count
               ? &job->instruments[instrument]
               : NULL;
}

static double sigma_at(const struct log_case *log, size_t index)
{
    const struct instrument *instrument = instrument_at(log, index);
    const struct reading *reading = &log->reform->log[index];
    /* a bench meter steps with its range: the digits as written tell how finely it was read */
    double step_a = reading_last_digit(&reading->value);
    if (step_a <= 0 && instrument && instrument->resolution.set &&
        instrument->resolution.unit == UNIT_CURRENT)
        step_a = instrument->resolution.value;
    return absorption_sigma(current_of(reading), log->given->policy->repeatability, step_a);
}

static double limit_at(const struct capacitor_findings *part, double part_v)
{
    if (!(part->bench_limit_a > 0) || !(part->service_v > 0) || !(part_v > 0))
        return NAN;
    return voltage_limit_at(part->bench_limit_a, part_v, part->service_v, part->exponent, true);
}

/* ---- mistakes of the log */

/* Times rise within a step, steps do not fall in volts. */
static bool in_order(const struct log_case *log, const struct reform_step *step)
{
    const struct reading *readings = log->reform->log;
    for (size_t i = step->first; i < step->first + step->count; i++) {
        bool first = i == step->first;
        bool earlier = !first && readings[i].time.value <= readings[i - 1].time.value;
        bool lower =
            i > 0 && first && readings[i].set_volts.value < readings[i - 1].set_volts.value;
        if (!readings[i].time.set || earlier || lower) {
            diagnostic_add(log->diagnostics, &log->given->job->source, readings[i].at,
                           DIAGNOSTIC_LOG_OUT_OF_ORDER,
                           !readings[i].time.set ? "give the time since the volts were set"
                           : lower               ? "steps rise; a second run is a log of its own"
                                                 : "times count from the last change of volts",
                           !readings[i].time.set ? "a reading of the log has no time: '%s'"
                           : lower               ? "a step of the log is below the one before: '%s'"
                                                 : "the log goes back in time: '%s'",
                           readings[i].written);
            return false;
        }
    }
    return true;
}

static bool possible(const struct log_case *log, size_t index)
{
    const struct reform_findings *found = log->found;
    const struct reading *reading = &log->reform->log[index];
    if (!(found->part_v[index] < 0))
        return true;
    diagnostic_add(log->diagnostics, &log->given->job->source, reading->at,
                   DIAGNOSTIC_LOG_ABOVE_LIMITER,
                   "say `volts: across the part` if they were read there, or mend the limiter",
                   "%g V through %g ohm can pass %.3g mA, the log says %.3g mA",
                   reading->set_volts.value, found->limiter_ohm,
                   1e3 * reading->set_volts.value / found->limiter_ohm, 1e3 * current_of(reading));
    return false;
}

/* ---- steps */

static size_t fit_step(const struct log_case *log, struct reform_step *step)
{
    struct absorption_reading *readings =
        arena_array(log->arena, step->count + 1, sizeof *readings);
    size_t count = 0;
    for (size_t i = step->first; i < step->first + step->count; i++) {
        const struct reading *reading = &log->reform->log[i];
        double current_a = current_of(reading);
        if (log->found->part_v[i] < constant_share * step->set_v || !(current_a > 0) ||
            reading->value.bound != BOUND_NONE)
            continue;
        readings[count++] =
            (struct absorption_reading){reading->time.value, current_a, sigma_at(log, i)};
    }
    step->decay = decay_compare(readings, count, step->limit_a);
    return count;
}

/* Last less least by more than both readings' repeatability, and by a tenth. */
static bool is_rising(const struct log_case *log, const struct reform_step *step)
{
    size_t last = step->first + step->count - 1, least = step->first;
    for (size_t i = step->first; i <= last; i++)
        if (current_of(&log->reform->log[i]) < current_of(&log->reform->log[least]))
            least = i;
    double last_a = current_of(&log->reform->log[last]);
    double least_a = current_of(&log->reform->log[least]);
    double u_a = hypot(sigma_at(log, last), sigma_at(log, least));
    return last_a - least_a > 2 * u_a && last_a - least_a > rise_share * least_a;
}

static void assess_step(const struct log_case *log, struct reform_step *step)
{
    const struct reading *readings = log->reform->log;
    size_t last = step->first + step->count - 1;
    step->set_v = readings[step->first].set_volts.value;
    step->part_v = log->found->part_v[last];
    step->current_a = current_of(&readings[last]);
    step->duration_s = quantity_or(&readings[last].time, NAN);
    step->limit_a = limit_at(log->given->part, step->part_v);
    step->watts = NAN;
    for (size_t i = step->first; i <= last; i++)
        step->watts = fmax(step->watts, log->found->part_v[i] * current_of(&readings[i]));
    step->reached = step->part_v >= reached_share * step->set_v;
    step->decay = (struct decay_comparison){.better = -1,
                                            .to_limit_s = NAN,
                                            .to_limit_early_s = NAN,
                                            .to_limit_late_s = NAN,
                                            .horizon_s = NAN};
    step->in_order = in_order(log, step);
    bool good = step->in_order;
    for (size_t i = step->first; i <= last; i++)
        good = possible(log, i) && good;
    if (!good)
        return;
    step->rising = is_rising(log, step);
    step->fitted = fit_step(log, step);
}

static void cut_steps(const struct log_case *log)
{
    const struct reform *reform = log->reform;
    struct reform_step *steps = arena_array(log->arena, reform->log_count + 1, sizeof *steps);
    size_t count = 0;
    for (size_t i = 0; i < reform->log_count; i++) {
        if (i == 0 || reform->log[i].line != reform->log[i - 1].line)
            steps[count++].first = i;
        steps[count - 1].count++;
    }
    for (size_t i = 0; i < count; i++)
        assess_step(log, &steps[i]);
    log->found->steps = steps;
    log->found->step_count = count;
}

/* ---- what follows */

static const struct decay *better_of(const struct reform_step *step)
{
    return step->decay.better >= 0 ? &step->decay.laws[step->decay.better] : NULL;
}

/* Whether a law follows the log at all. */
static bool follows(const struct decay *decay)
{
    return decay->fitted && decay->freedom > 0 && !decay->at_end &&
           decay->chi2 <= numeric_chi2_quantile(0.99, decay->freedom);
}

/*
 * Which law the plateau is taken from. Absorption is seldom one exponential and seldom a pure power
 * law: the first levels too early and too high, the second too late and too low. Where the better
 * of them does not follow the log the truth lies between, and the higher one is the cautious one.
 */
static void choose_law(struct reform_findings *found, const struct reform_step *step)
{
    const struct decay *laws = step->decay.laws;
    found->plateau_law = step->decay.better;
    if (follows(&laws[step->decay.better]) || !laws[DECAY_POWER].fitted ||
        !laws[DECAY_EXPONENTIAL].fitted)
        return;
    found->between_laws = true;
    found->plateau_law = laws[DECAY_POWER].steady_a > laws[DECAY_EXPONENTIAL].steady_a
                             ? DECAY_POWER
                             : DECAY_EXPONENTIAL;
}

/* Expanded: what the fit cannot tell, the other law where neither follows, and the meter's
   accuracy, which all its readings share. */
static double plateau_error(const struct log_case *log, const struct reform_step *step)
{
    const struct decay *decay = &step->decay.laws[log->found->plateau_law];
    const struct decay *other = &step->decay.laws[1 - log->found->plateau_law];
    const struct instrument *instrument = instrument_at(log, step->first + step->count - 1);
    struct accuracy accuracy = accuracy_of(instrument, UNIT_CURRENT, log->given->policy, 0);
    double fit_a = numeric_t95((double)decay->freedom) * decay->steady_error_a;
    if (log->found->between_laws)
        fit_a = fmax(fit_a, decay->steady_a - other->steady_a);
    return hypot(fit_a,
                 2 * uncertainty_of_accuracy(decay->steady_a, accuracy.share, accuracy.absolute));
}

static void find_plateau(const struct log_case *log)
{
    struct reform_findings *found = log->found;
    for (size_t i = 0; i < found->step_count; i++)
        if (better_of(&found->steps[i]))
            found->plateau_step = (int)i;
    if (found->plateau_step < 0)
        return;
    const struct reform_step *step = &found->steps[found->plateau_step];
    choose_law(found, step);
    const struct decay *decay = &step->decay.laws[found->plateau_law];
    found->plateau_a = decay->steady_a;
    found->plateau_error_a = plateau_error(log, step);
    found->horizon_s = step->decay.horizon_s;
    if (isnan(step->limit_a))
        return;
    found->to_limit_s = decay_time_to(decay, step->limit_a, 0);
    found->to_limit_early_s = decay_time_to(decay, step->limit_a, -found->plateau_error_a);
    found->to_limit_late_s = decay_time_to(decay, step->limit_a, found->plateau_error_a);
}

static void find_stop(const struct log_case *log)
{
    struct reform_findings *found = log->found;
    for (size_t i = 0; i < found->step_count && found->stop == REFORM_NO_STOP; i++) {
        const struct reform_step *step = &found->steps[i];
        bool last = i + 1 == found->step_count && (int)i == found->plateau_step;
        found->stop = step->rising                     ? REFORM_RISING
                      : step->watts > found->ceiling_w ? REFORM_WATTS
                      : last && found->plateau_a - found->plateau_error_a > step->limit_a
                          ? REFORM_PLATEAU
                          : REFORM_NO_STOP;
        found->stop_step = (int)i;
    }
}

/* The last reading after the rest, as the part's own findings hold it. */
static const struct reading_findings *after_rest(const struct log_case *log)
{
    const struct reform *reform = log->reform;
    const struct capacitor_findings *part = log->given->part;
    if (reform->after_rest_count == 0)
        return NULL;
    const struct reading *wanted = &reform->after_rest[reform->after_rest_count - 1];
    for (size_t i = 0; i < part->reading_count; i++)
        if (part->readings[i].reading == wanted)
            return &part->readings[i];
    return NULL;
}

static void judge_rest(const struct log_case *log)
{
    struct reform_findings *found = log->found;
    const struct reading_findings *reading = after_rest(log);
    found->rest = held_unknown(UNIT_CURRENT, WHY_NO_READING, NULL);
    if (!reading)
        return;
    found->rest_v = reading->part_v;
    found->rest.value = reading->current_a;
    found->rest.uncertainty = reading->uncertainty_a;
    found->rest.high = limit_at(log->given->part, reading->part_v);
    found->rest.source = SOURCE_REFORM_REST;
    if (isnan(found->rest.high)) {
        found->rest.why = WHY_MISSING_FACT;
        found->rest.missing = log->given->part->missing;
        return;
    }
    held_judge(&found->rest, log->given->policy, reading->bound);
    const struct reform_step *last =
        found->step_count ? &found->steps[found->step_count - 1] : NULL;
    bool over =
        found->rest.outcome == OUTCOME_FAIL || found->rest.outcome == OUTCOME_CONDITIONAL_FAIL;
    found->rebound = over && last && last->current_a <= last->limit_a;
}

/* It came back when the deciding test says so; a stop signal or a log that cannot be read leaves
   that to the test, and without a test nothing is proved. */
static void conclude(const struct log_case *log)
{
    struct reform_findings *found = log->found;
    bool orderly = true, can = true;
    for (size_t i = 0; i < found->step_count; i++) {
        const struct reform_step *step = &found->steps[i];
        orderly = orderly && step->in_order;
        for (size_t k = step->first; k < step->first + step->count; k++)
            can = can && !(found->part_v[k] < 0);
    }
    found->outcome = found->rest.outcome;
    found->why = found->rest.why;
    found->missing = found->rest.missing;
    if (found->stop == REFORM_RISING && found->outcome != OUTCOME_FAIL) {
        found->outcome = OUTCOME_CONDITIONAL_FAIL;
        found->why = WHY_RISING;
    } else if (found->rest.why == WHY_NO_READING && found->stop == REFORM_PLATEAU) {
        found->outcome = OUTCOME_FAIL;
        found->why = WHY_NONE;
    } else if (found->outcome == OUTCOME_NOT_JUDGED && (!orderly || !can)) {
        found->why = !can ? WHY_IMPOSSIBLE : WHY_OUT_OF_ORDER;
    }
}

struct reform_findings reforming_assess(const struct reforming_case *given,
                                        const struct reform *reform, struct arena *arena,
                                        struct diagnostics *diagnostics)
{
    struct reform_findings found = {.reform = reform,
                                    .capacitor = reform->capacitor,
                                    .limiter_ohm = NAN,
                                    .plateau_step = -1,
                                    .plateau_a = NAN,
                                    .plateau_error_a = NAN,
                                    .to_limit_s = NAN,
                                    .to_limit_early_s = NAN,
                                    .to_limit_late_s = NAN,
                                    .horizon_s = NAN,
                                    .rest_v = NAN,
                                    .before_rest_a = NAN};
    struct reform_plan plan;
    found.ceiling_w = reforming_plan(given, &plan) ? plan.ceiling_w : NAN;
    double ohm;
    bool measured;
    if (reform->limiter.set &&
        job_resistance(given->job, &reform->limiter, PHASE_LEFT, &ohm, &measured))
        found.limiter_ohm = ohm;
    double *part_v = arena_array(arena, reform->log_count + 1, sizeof *part_v);
    for (size_t i = 0; i < reform->log_count; i++)
        part_v[i] = reforming_part_volts(&reform->log[i], found.limiter_ohm, reform->across_part);
    found.part_v = part_v;
    if (reform->log_count)
        found.before_rest_a = current_of(&reform->log[reform->log_count - 1]);
    struct log_case log = {given, reform, arena, diagnostics, &found};
    cut_steps(&log);
    find_plateau(&log);
    find_stop(&log);
    judge_rest(&log);
    conclude(&log);
    return found;
}
