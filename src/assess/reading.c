#include "assess/reading.h"

#include "assess/absorption.h"
#include "assess/uncertainty.h"
#include "job/part.h"

#include <ctype.h>
#include <math.h>
#include <string.h>

enum { WRITTEN_MAX = 64 };

double reading_series_ohm(const struct instrument *instrument)
{
    if (!instrument)
        return 0;
    return quantity_or(&instrument->series, 0) + quantity_or(&instrument->burden, 0);
}

double reading_last_digit(const struct quantity *value)
{
    if (!value->written || strlen(value->written) >= WRITTEN_MAX)
        return 0;
    /* The same text with 1 as its last digit and 0 before it: "1.23 uA" becomes "0.01 uA". Only
       the first number counts: "4.7 M" has one, a unit has none. */
    char step[WRITTEN_MAX];
    size_t length = strlen(value->written), last = length;
    strcpy(step, value->written);
    for (size_t i = 0; i < length && (last == length || !isspace((unsigned char)step[i])); i++)
        if (isdigit((unsigned char)step[i])) {
            if (last < length)
                step[last] = '0';
            step[i] = '1';
            last = i;
        } else if (step[i] == '-' && last == length) {
            step[i] = ' ';
        }
    if (last == length)
        return 0;
    const char *start = step;
    while (*start == ' ')
        start++;
    struct arena scratch = {0};
    struct quantity digit = {0};
    struct quantity_form form = {.unit = value->unit, .unit_optional = true};
    enum quantity_status status =
        quantity_read(&scratch, start, strlen(start), &form, &digit, NULL);
    double step_si = status == QUANTITY_OK ? digit.value : 0;
    arena_release(&scratch);
    return step_si;
}

/* An instrument's figures in ampere for a reading of current_a at volts_v: an accuracy in ohm is
   brought to ampere by dI = I^2/V dR. Of volts or farads nothing can be said in ampere. */
static double to_ampere(double figure, enum unit unit, double current_a, double volts_v)
{
    if (unit == UNIT_RESISTANCE)
        return volts_v > 0 ? figure * current_a * current_a / volts_v : 0;
    return unit == UNIT_CURRENT ? figure : 0;
}

static double resolution_a(const struct reading *reading, const struct instrument *instrument,
                           double current_a)
{
    const struct quantity *step = instrument ? &instrument->resolution : NULL;
    double volts_v = reading->set_volts.value;
    if (step && step->set && (step->unit == UNIT_CURRENT || step->unit == UNIT_RESISTANCE))
        return to_ampere(step->value, step->unit, current_a, volts_v);
    return to_ampere(reading_last_digit(&reading->value), reading->value.unit, current_a, volts_v);
}

struct reading_accuracy reading_accuracy(const struct reading *reading,
                                         const struct reading_bench *bench, double current_a)
{
    const struct instrument *instrument = bench->instrument;
    double volts_v = reading->set_volts.value;
    struct reading_accuracy found = {.step_a = resolution_a(reading, instrument, current_a)};
    found.stated = instrument && instrument->accuracy_set && instrument_reads_leakage(instrument);
    if (!found.stated) {
        found.share = bench->policy->default_accuracy;
        found.absolute_a = found.step_a;
        return found;
    }
    found.share = instrument->accuracy_percent / 100;
    found.absolute_a =
        to_ampere(instrument->accuracy_absolute, instrument->accuracy_unit, current_a, volts_v);
    if (instrument->full_scale.set)
        found.absolute_a +=
            to_ampere(instrument->full_scale_percent / 100 * instrument->full_scale.value,
                      instrument->full_scale.unit, current_a, volts_v);
    return found;
}

struct reading_uncertainty reading_uncertainty(const struct reading *reading,
                                               const struct reading_bench *bench, double current_a)
{
    const struct instrument *instrument = bench->instrument;
    double volts_share = instrument && instrument->volts_accuracy.set
                             ? instrument->volts_accuracy.value / 100
                             : bench->policy->volts_accuracy;
    struct reading_accuracy accuracy = reading_accuracy(reading, bench, current_a);
    return (struct reading_uncertainty){
        .accuracy_a = uncertainty_of_accuracy(current_a, accuracy.share, accuracy.absolute_a),
        .resolution_a = uncertainty_of_resolution(accuracy.step_a),
        .set_v = uncertainty_of_accuracy(reading->set_volts.value, volts_share, 0),
        .series_ohm = uncertainty_of_accuracy(reading_series_ohm(instrument), volts_share, 0),
    };
}

/* The current that a reading tells, and volts across the part. */
static bool electrical(const struct reading *reading, double series_ohm,
                       struct reading_findings *found)
{
    double set_v = reading->set_volts.value, value = reading->value.value;
    found->bound = reading->value.bound;
    if (reading->value.unit == UNIT_RESISTANCE) {
        /* More ohms are less current: the bound turns round. */
        if (found->bound != BOUND_NONE)
            found->bound = found->bound == BOUND_OVER ? BOUND_UNDER : BOUND_OVER;
        found->current_a = set_v / (fmax(value, 0) + series_ohm);
        if (!isfinite(found->current_a))
            found->current_a = set_v; /* 0 ohm without series resistance: a short */
    } else {
        found->current_a = fmax(value, 0);
    }
    double least_v = set_v * 1e-3;
    found->part_v = set_v - found->current_a * series_ohm;
    bool possible = found->part_v >= 0;
    found->part_v = fmax(found->part_v, least_v);
    return possible;
}

bool reading_evaluate(const struct reading *reading, const struct reading_bench *bench,
                      struct reading_findings *found)
{
    *found = (struct reading_findings){.reading = reading,
                                       .t_min_s = NAN,
                                       .service_a = NAN,
                                       .warm_a = NAN,
                                       .temperature_c = quantity_or(&reading->hot, bench->bench_c)};
    bool possible = electrical(reading, reading_series_ohm(bench->instrument), found);
    struct reading_uncertainty u = reading_uncertainty(reading, bench, found->current_a);
    double by_volts =
        reading->set_volts.value > 0 ? found->current_a * u.set_v / reading->set_volts.value : 0;
    found->uncertainty_a = 2 * sqrt(u.accuracy_a * u.accuracy_a + u.resolution_a * u.resolution_a +
                                    by_volts * by_volts);
    found->repeatability_a =
        absorption_sigma(found->current_a, bench->policy->repeatability,
                         resolution_a(reading, bench->instrument, found->current_a));
    return possible;
}
