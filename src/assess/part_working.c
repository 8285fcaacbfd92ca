#include "assess/part_working.h"

#include "assess/temperature.h"
#include "assess/voltage.h"

#include <math.h>

static double or_nan(double value)
{
    return value > 0 ? value : NAN;
}

/* Accuracy and step that the reading's uncertainty was made of. */
static void take_instrument(const struct assessment *assessment,
                            const struct capacitor_findings *part, struct part_working *working)
{
    const struct reading_findings *found = &part->readings[part->deciding];
    struct reading_bench bench = {instrument_of(assessment->job, found->reading->instrument),
                                  assessment->policy, assessment->bench_c};
    struct reading_accuracy accuracy = reading_accuracy(found->reading, &bench, found->current_a);
    working->series_ohm = reading_series_ohm(bench.instrument);
    working->instrument_share = accuracy.share;
    working->instrument_absolute_a = accuracy.stated ? accuracy.absolute_a : NAN;
    working->instrument_step_a = accuracy.step_a;
    working->volts_exponent = voltage_scale(found->part_v, part->service_v, part->exponent,
                                            dielectric_is_electrolytic(part->part->type))
                                  .exponent;
}

static void take_stage(const struct assessment *assessment, const struct place_case *place,
                       const struct stage_findings *stages, struct part_working *working)
{
    struct stage_solution with[STAGE_GROUP_MAX];
    double leak_s = isnan(working->conductance_s) ? 0 : working->conductance_s;
    if (!place->group || !place->model || place->why != WHY_NONE || place->linear ||
        place->screen_as_rail || !place_solve(place, leak_s, with))
        return;
    const struct stage_model *model = place->model;
    const struct valve_law *law = &place->circuits[model->slot].law;
    working->staged = true;
    working->stage = &stages[model->stage - assessment->job->stages];
    working->d0_v = law->d0_v;
    working->ik0_a = law->ik0_a;
    working->exponent = law->exponent;
    working->bare = place->bare[model->slot];
    working->leaking = with[model->slot];
}

struct part_working part_working_of(const struct assessment *assessment,
                                    const struct stage_findings *stages, size_t index)
{
    const struct part_work *work = &assessment->work[index];
    const struct capacitor_findings *part = &assessment->capacitors[index];
    const struct place_case *place = &work->place;
    struct part_working working = {
        .series_ohm = NAN,
        .instrument_share = NAN,
        .instrument_absolute_a = NAN,
        .instrument_step_a = NAN,
        .feed_ohm = or_nan(place->feed_ohm),
        .circuit_ohm = or_nan(place->circuit_ohm),
        .source_v = place->source_v,
        .source_ohm = place->source_ohm,
        .current_a = or_nan(place->current_a),
        .volts_exponent = NAN,
        .conductance_s = work->leaks ? work->leak.conductance_s : NAN,
        .rule_limit_a = place->rule_limit_a,
        .to_20c = place->to_20c,
        .rule = place->rule.name,
        .ripple_w = place->ripple_w,
        .heat_limit_w = place->heat_counts ? place->heat_limit_w : NAN,
        .d0_v = NAN,
        .ik0_a = NAN,
        .exponent = NAN,
    };
    if (part->deciding >= 0)
        take_instrument(assessment, part, &working);
    take_stage(assessment, place, stages, &working);
    return working;
}
