/* The bench sheet of one part: what to set, how long to wait, what passes at those volts. */
#include "assess/assessment.h"

#include "assess/soak.h"
#include "assess/temperature.h"
#include "assess/voltage.h"

#include <math.h>
#include <strings.h>

static const double series_share = 0.05; /* of the service volts, may drop at the limit */
static const double volts_step = 10;     /* what a supply that can be set to anything is set to */

/* An AVC line's allowance is for all its parts: each may use its share. */
static size_t sharers(const struct job *job, const struct capacitor *part)
{
    size_t count = 0;
    if (part->place != PLACE_AVC_BYPASS || !part->line)
        return 1;
    for (size_t i = 0; i < job->capacitor_count; i++)
        count += job->capacitors[i].place == PLACE_AVC_BYPASS && job->capacitors[i].line &&
                 strcasecmp(job->capacitors[i].line, part->line) == 0;
    return count;
}

static double soak_at(const struct instrument *instrument, const struct capacitor *part,
                      double volts_v, double limit_a)
{
    struct soak soak = {.capacitance_f = soak_capacitance(part),
                        .set_v = volts_v,
                        .series_ohm = reading_series_ohm(instrument),
                        .supply_current_a =
                            instrument ? quantity_or(&instrument->supply_current, NAN) : NAN,
                        .limit_a = limit_a,
                        .electrolytic = dielectric_is_electrolytic(part->type)};
    return soak_least_s(&soak);
}

static bool too_coarse(const struct assessment *assessment, const struct instrument *instrument,
                       double volts_v, double limit_a)
{
    if (!instrument)
        return false;
    struct reading reading = {.set_volts = {.set = true, .value = volts_v, .unit = UNIT_VOLTAGE},
                              .value = {.set = true, .value = limit_a, .unit = UNIT_CURRENT}};
    struct reading_findings found = {.reading = &reading};
    struct leak_case given = {.reading = &found,
                              .bench = {instrument, assessment->policy, assessment->bench_c}};
    return leak_reading_u(&given, limit_a) > assessment->policy->instrument_share * limit_a;
}

/* What the limit of one part asks of volts and instrument. */
struct plan {
    const struct assessment *assessment;
    const struct instrument *instrument;
    double service_v; /* NaN: not known */
    double most_v;    /* never above the marked volts; NaN: nothing marked, nothing known */
    double limit_a;   /* on the bench at service volts, the part's share; NaN: none */
    bool electrolytic;
};

static double limit_at(const struct plan *plan, double volts_v)
{
    if (!(plan->limit_a > 0))
        return NAN;
    return voltage_limit_at(plan->limit_a, volts_v, plan->service_v, NAN, plan->electrolytic);
}

static bool suffices(const struct plan *plan, double volts_v)
{
    double limit_a = limit_at(plan, volts_v);
    return isnan(limit_a) || !too_coarse(plan->assessment, plan->instrument, volts_v, limit_a);
}

/* "At voltage" from here on; without service volts only the most that may be set is sure to be. */
static double wanted_volts(const struct plan *plan)
{
    return isnan(plan->service_v) ? plan->most_v : VOLTAGE_SHARE_AT * plan->service_v;
}

/* The least volts from `from_v` up to `most_v` at which the instrument tells the limit; NaN: none.
   The limit grows with the volts, what the instrument cannot tell does not. */
static double least_sufficient(const struct plan *plan, double from_v, double most_v)
{
    if (!(from_v <= most_v) || !suffices(plan, most_v))
        return NAN;
    double low_v = from_v, high_v = most_v;
    for (int step = 0; step < 60 && !suffices(plan, low_v) && high_v - low_v > 0.01 * high_v;
         step++) {
        double middle_v = (low_v + high_v) / 2;
        if (suffices(plan, middle_v))
            high_v = middle_v;
        else
            low_v = middle_v;
    }
    return suffices(plan, low_v) ? low_v : high_v;
}

/* Of an instrument that can be set to anything: the service volts, more where it needs them. */
static double free_volts(const struct plan *plan)
{
    double base_v = isnan(plan->service_v) ? plan->most_v : fmin(plan->service_v, plan->most_v);
    double enough_v = least_sufficient(plan, base_v, plan->most_v);
    if (isnan(enough_v))
        return plan->most_v;
    return enough_v > base_v ? fmin(ceil(enough_v / volts_step) * volts_step, plan->most_v)
                             : base_v;
}

/* The setting nearest to the service volts that is "at voltage" and where the instrument suffices;
   else the highest that may be set. NaN: nothing may be set. */
static double test_volts(const struct plan *plan)
{
    const struct instrument *instrument = plan->instrument;
    if (isnan(plan->most_v))
        return NAN;
    if (!instrument || instrument->volt_count == 0)
        return free_volts(plan);
    double best_v = NAN, highest_v = NAN, wanted_v = wanted_volts(plan);
    for (size_t i = 0; i < instrument->volt_count; i++) {
        double volts_v = instrument->volts_v[i];
        if (volts_v > plan->most_v)
            continue;
        highest_v = fmax(highest_v, volts_v);
        if (volts_v >= wanted_v && suffices(plan, volts_v))
            best_v = fmin(best_v, volts_v);
    }
    return isnan(best_v) ? highest_v : best_v;
}

/*
 * The limit on the bench at service volts. A part whose place lacks a fact has none, but of an
 * electrolytic its leakage rule asks no place: that is held against the volts it is marked for.
 */
static void find_limit(const struct assessment *assessment, size_t index, struct plan *plan)
{
    const struct capacitor_findings *part = &assessment->capacitors[index];
    const struct place_case *place = &assessment->work[index].place;
    plan->limit_a = part->bench_limit_a > 0
                        ? part->bench_limit_a / (double)sharers(assessment->job, part->part)
                        : NAN;
    if (!isnan(plan->limit_a) || part->limit_none || !plan->electrolytic ||
        !(place->rule_limit_a > 0))
        return;
    plan->limit_a = place->rule_limit_a / temperature_to_20c(part->part->type, assessment->bench_c);
    if (isnan(plan->service_v))
        plan->service_v = part->part->marked.rated.value;
}

/* A part that was not read has that as its reason; the sheet asks for more before it is. */
static void say_why_none(struct assessment *assessment, size_t index, const struct plan *plan)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct place_case *place = &assessment->work[index].place;
    if (!isnan(plan->limit_a) || part->limit_none)
        return;
    part->sheet_why = place->why;
    part->sheet_missing = place->why == WHY_MISSING_FACT ? place->missing : NULL;
}

/* What would do where this meter does not: volts that the part bears, or a finer meter. */
static void say_what_would_do(const struct plan *plan, struct capacitor_findings *part)
{
    part->sheet_not_with_this_meter = !suffices(plan, part->sheet_voltage_v);
    if (!part->sheet_not_with_this_meter)
        return;
    part->sheet_volts_needed_v = least_sufficient(plan, part->sheet_voltage_v, plan->most_v);
    part->sheet_uncertainty_max_a =
        plan->assessment->policy->instrument_share * part->sheet_limit_a;
}

/* Where the instrument for leakage cannot tell the limit at any volts, another of the job may. */
static int better_instrument(struct plan plan, int number)
{
    const struct job *job = plan.assessment->job;
    if (isnan(plan.limit_a) || suffices(&plan, test_volts(&plan)))
        return number;
    for (size_t i = 0; i < job->instrument_count; i++) {
        plan.instrument = &job->instruments[i];
        double volts_v = instrument_applies_volts(plan.instrument) ? test_volts(&plan) : NAN;
        if (volts_v >= wanted_volts(&plan) && suffices(&plan, volts_v))
            return (int)i;
    }
    return number;
}

void sheet_plan(struct assessment *assessment, size_t index)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct quantity *rated = &part->part->marked.rated;
    part->sheet_voltage_v = part->sheet_soak_s = NAN;
    part->sheet_limit_a = part->sheet_limit_ohm = part->sheet_series_max_ohm = NAN;
    part->sheet_volts_needed_v = part->sheet_uncertainty_max_a = NAN;
    part->sheet_why = WHY_NONE;
    part->sheet_missing = NULL;
    part->sheet_instrument = leakage_instrument(assessment->job);
    if (part->no_reading_passes)
        return;
    struct plan plan = {.assessment = assessment,
                        .instrument = instrument_of(assessment->job, part->sheet_instrument),
                        .service_v = part->service_v > 0 ? part->service_v : NAN,
                        .most_v = rated->set ? rated->value : part->service_v,
                        .electrolytic = dielectric_is_electrolytic(part->part->type)};
    find_limit(assessment, index, &plan);
    say_why_none(assessment, index, &plan);
    part->sheet_instrument = better_instrument(plan, part->sheet_instrument);
    plan.instrument = instrument_of(assessment->job, part->sheet_instrument);
    double volts_v = test_volts(&plan);
    part->sheet_voltage_v = volts_v;
    if (isnan(volts_v))
        return;
    part->sheet_proves_fail_only = volts_v < VOLTAGE_SHARE_AT * plan.service_v;
    double limit_a = limit_at(&plan, volts_v);
    part->sheet_soak_s = soak_at(plan.instrument, part->part, volts_v, limit_a);
    if (isnan(limit_a))
        return;
    part->sheet_limit_a = limit_a;
    part->sheet_limit_ohm = volts_v / limit_a;
    /* At the limit the part is still to see 0.95 of its service volts. */
    part->sheet_series_max_ohm =
        fmax(series_share * plan.service_v, volts_v - VOLTAGE_SHARE_AT * plan.service_v) /
        plan.limit_a;
    say_what_would_do(&plan, part);
}
