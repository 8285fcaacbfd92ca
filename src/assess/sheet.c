/* The bench sheet of one part: what to set, how long to wait, what passes at those volts. */
#include "assess/assessment.h"

#include "assess/soak.h"
#include "assess/temperature.h"
#include "assess/voltage.h"

#include <math.h>
#include <strings.h>

static const double series_share = 0.05; /* of the service volts, dropped at the limit */

/* The instrument for leakage: the one so named, else the first that reads current or insulation. */
static int leakage_instrument(const struct job *job)
{
    for (size_t i = 0; i < job->instrument_count; i++)
        if (strcasecmp(job->instruments[i].name, "leakage") == 0)
            return (int)i;
    for (size_t i = 0; i < job->instrument_count; i++)
        if (job->instruments[i].volt_count > 0 ||
            (job->instruments[i].accuracy_set && job->instruments[i].accuracy_unit == UNIT_CURRENT))
            return (int)i;
    return NOT_LISTED;
}

/*
 * Never above the marked volts, and only what can be set: the least setting that counts as "at
 * voltage", else the most that may be set. NaN: nothing may be set.
 */
static double test_volts(const struct instrument *instrument, double service_v, double marked_v)
{
    double most_v = isnan(marked_v) ? service_v : marked_v;
    if (!instrument || instrument->volt_count == 0)
        return isnan(service_v) ? most_v : fmin(service_v, most_v);
    double wanted_v = isnan(service_v) ? most_v : VOLTAGE_SHARE_AT * service_v;
    double enough = NAN, highest = NAN;
    for (size_t i = 0; i < instrument->volt_count; i++) {
        double volts_v = instrument->volts_v[i];
        if (volts_v > most_v)
            continue;
        highest = fmax(highest, volts_v);
        if (volts_v >= wanted_v)
            enough = fmin(enough, volts_v);
    }
    return isnan(enough) ? highest : enough;
}

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
                        .supply_current_a = instrument && instrument->supply_current.set
                                                ? instrument->supply_current.value
                                                : NAN,
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

void sheet_plan(struct assessment *assessment, size_t index)
{
    struct capacitor_findings *part = &assessment->capacitors[index];
    const struct job *job = assessment->job;
    int number = leakage_instrument(job);
    const struct instrument *instrument = instrument_of(job, number);
    const struct quantity *rated = &part->part->marked.rated;
    part->sheet_voltage_v = part->sheet_soak_s = NAN;
    part->sheet_limit_a = part->sheet_limit_ohm = part->sheet_series_max_ohm = NAN;
    if (part->no_reading_passes)
        return;
    double volts_v = test_volts(instrument, part->service_v, rated->set ? rated->value : NAN);
    part->sheet_voltage_v = volts_v;
    if (isnan(volts_v))
        return;
    part->sheet_soak_s = soak_at(instrument, part->part, volts_v, NAN);
    if (!(part->bench_limit_a > 0))
        return;
    double share = (double)sharers(job, part->part);
    bool electrolytic = dielectric_is_electrolytic(part->part->type);
    double limit_a =
        voltage_limit_at(part->bench_limit_a / share, volts_v, part->service_v, NAN, electrolytic);
    part->sheet_limit_a = limit_a;
    part->sheet_limit_ohm = volts_v / limit_a;
    part->sheet_series_max_ohm = series_share * part->service_v / limit_a;
    part->sheet_soak_s = soak_at(instrument, part->part, volts_v, limit_a);
    part->sheet_not_with_this_meter = too_coarse(assessment, instrument, volts_v, limit_a);
}
