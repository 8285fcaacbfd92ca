#include "assess/sheet_voltage.h"

#include "assess/accuracy.h"
#include "assess/held.h"

#include <math.h>

double meter_reading(double true_v, double source_ohm, double meter_ohm)
{
    return isinf(meter_ohm) ? true_v : true_v * meter_ohm / (meter_ohm + source_ohm);
}

double meter_true_volts(double reading_v, double source_ohm, double meter_ohm)
{
    return isinf(meter_ohm) ? reading_v : reading_v * (meter_ohm + source_ohm) / meter_ohm;
}

static const char *missing_key(const struct voltages *voltages, const struct voltage_point *point)
{
    if (!point->sheet.set)
        return "sheet";
    if (!voltages->meter.set)
        return "meter";
    return point->range.set ? NULL : "range";
}

static struct held compare(const struct job *job, const struct policy *policy, double expected_v,
                           const struct quantity *measured)
{
    double allowed = 100 * policy->voltage_tolerance;
    struct held held = {.value = 100 * (measured->value / expected_v - 1),
                        .uncertainty =
                            100 / fabs(expected_v) * held_uncertainty(job, policy, measured),
                        .low = -allowed,
                        .high = allowed,
                        .unit = UNIT_PERCENT,
                        .source = SOURCE_METER_LOADING};
    held_judge(&held, policy, measured->bound);
    return held;
}

static struct voltage_findings assess_point(const struct job *job, const struct policy *policy,
                                            const struct voltage_point *point)
{
    const struct voltages *voltages = &job->voltages;
    struct voltage_findings found = {.source_ohm = 0,
                                     .sheet_ohm = NAN,
                                     .meter_ohm = voltmeter_ohm(job, &point->range),
                                     .true_v = NAN,
                                     .expected_v = {NAN, NAN}};
    double ohm;
    bool measured;
    if (point->source.set && job_resistance(job, &point->source, PHASE_FOUND, &ohm, &measured))
        found.source_ohm = ohm;
    const char *missing = missing_key(voltages, point);
    const struct quantity *read[2] = {&point->found, &point->left};
    const struct quantity *mains[2] = {&voltages->found_mains, &voltages->left_mains};
    if (!missing) {
        found.sheet_ohm = voltages->meter.value * point->range.value;
        found.true_v = meter_true_volts(point->sheet.value, found.source_ohm, found.sheet_ohm);
    }
    for (int i = 0; i < 2; i++) {
        found.compared[i] = held_unknown(UNIT_PERCENT, WHY_MISSING_FACT,
                                         missing ? missing
                                         : i     ? "left"
                                                 : "found");
        if (missing || found.true_v == 0)
            continue;
        double scale = mains[i]->set && voltages->sheet_mains.set
                           ? mains[i]->value / voltages->sheet_mains.value
                           : 1;
        found.expected_v[i] =
            meter_reading(found.true_v * scale, found.source_ohm, found.meter_ohm);
        if (read[i]->set)
            found.compared[i] = compare(job, policy, found.expected_v[i], read[i]);
    }
    return found;
}

static void warn(const struct job *job, struct diagnostics *diagnostics)
{
    const struct voltages *voltages = &job->voltages;
    for (size_t i = 0; i < voltages->point_count; i++) {
        const struct voltage_point *point = &voltages->points[i];
        if (!point->sheet.set || (voltages->meter.set && point->range.set))
            continue;
        diagnostic_add(diagnostics, &job->source, point->at, DIAGNOSTIC_SHEET_WITHOUT_METER,
                       voltages->meter.set ? "give its range there: range 250 V"
                                           : "give it under voltages: meter: 1000 ohm/V",
                       "the service sheet's %g V at '%s' cannot be compared: its meter%s is not "
                       "known",
                       point->sheet.value, point->name, voltages->meter.set ? "'s range" : "");
        if (!voltages->meter.set)
            return; /* said once for all points */
    }
}

const struct voltage_findings *sheet_voltages_assess(const struct job *job,
                                                     const struct policy *policy,
                                                     struct arena *arena,
                                                     struct diagnostics *diagnostics)
{
    size_t count = job->voltages.point_count;
    struct voltage_findings *found = arena_array(arena, count + 1, sizeof *found);
    for (size_t i = 0; i < count; i++)
        found[i] = assess_point(job, policy, &job->voltages.points[i]);
    warn(job, diagnostics);
    return found;
}
