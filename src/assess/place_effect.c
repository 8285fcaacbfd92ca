/* What the leak does where the part sits, as keys and numbers. */
#include "assess/assessment.h"

#include "assess/mains.h"

#include <math.h>

enum { EFFECTS_MAX = 6 };

/* Effects being gathered for one part. */
struct gathering {
    const struct place_case *place;
    double leak_s;
    bool at_most;
    struct effect effects[EFFECTS_MAX];
    size_t count;
};

static void add(struct gathering *to, const char *key, double value, enum unit unit, double of)
{
    const struct place_case *place = to->place;
    const char *subject = place->part->line      ? place->part->line
                          : place->model != NULL ? place->model->stage->name
                                                 : NULL;
    if (to->count < EFFECTS_MAX)
        to->effects[to->count++] = (struct effect){.key = key,
                                                   .value = value,
                                                   .unit = unit,
                                                   .at_most = to->at_most,
                                                   .of = of,
                                                   .subject = subject};
}

static void add_part_watts(struct gathering *to)
{
    add(to, "part_watts", place_heat(to->place, to->leak_s), UNIT_POWER, to->place->heat_limit_w);
}

static void coupling_effects(struct gathering *to)
{
    struct stage_solution with[STAGE_GROUP_MAX];
    if (!place_solve(to->place, to->leak_s, with))
        return;
    const struct stage_model *model = to->place->model;
    const struct stage_solution *leaking = &with[model->slot],
                                *bare = &to->place->bare[model->slot];
    double shift_v = leaking->grid_v - bare->grid_v;
    double bias_v = fabs(bare->grid_v - bare->cathode_v);
    if (!model->is_output) {
        add(to, "grid_shift", shift_v, UNIT_VOLTAGE, bias_v);
        return;
    }
    add(to, "grid_volts", shift_v, UNIT_VOLTAGE, bias_v);
    add(to, "cathode_current", 100 * (leaking->cathode_a / bare->cathode_a - 1), UNIT_PERCENT, NAN);
    if (leaking->status == SOLVE_OK)
        add(to, "anode_watts", leaking->anode_w, UNIT_POWER, model->law.pa_max_w);
}

static void linear_effect(struct gathering *to, const char *key, double ohm)
{
    double ratio = to->leak_s > 0 && ohm > 0 ? 1 / (to->leak_s * ohm) : NAN;
    add(to, key, ratio, UNIT_NONE, NAN);
}

static void bypass_effects(struct gathering *to)
{
    const struct place_case *place = to->place;
    if (place->screen_as_rail) {
        add(to, "rail_drop", to->leak_s * place->service_v * place->feed_ohm, UNIT_VOLTAGE,
            place->service_v);
        add_part_watts(to);
        return;
    }
    if (place->linear) {
        linear_effect(to, "linear_ratio", place->feed_ohm);
        return;
    }
    struct stage_solution with[STAGE_GROUP_MAX];
    if (!place_solve(place, to->leak_s, with))
        return;
    int slot = place->model->slot;
    const struct stage_solution *bare = &place->bare[slot];
    if (place->part->place == PLACE_SCREEN_BYPASS) {
        add(to, "screen_fall", bare->screen_v - with[slot].screen_v, UNIT_VOLTAGE, bare->screen_v);
        return;
    }
    if (place->part->place == PLACE_BIAS_BYPASS)
        add(to, "bias_loss", fabs(bare->return_v) - fabs(with[slot].return_v), UNIT_VOLTAGE,
            fabs(bare->return_v));
    add(to, "cathode_current", 100 * (with[slot].cathode_a / bare->cathode_a - 1), UNIT_PERCENT,
        NAN);
}

/* Watts that a short would put into the primary, or whatever feeds the anode. */
static void add_short(struct gathering *to)
{
    const struct stage_model *model = to->place->model;
    double ohm = model ? model->ohms[PHASE_FOUND][STAGE_ANODE] : NAN;
    double supply_v = model ? quantity_or(&model->stage->supply, NAN) : NAN;
    add(to, "short_watts", ohm > 0 ? supply_v * supply_v / ohm : NAN, UNIT_POWER, NAN);
    to->effects[to->count - 1].at_most = false;
}

static void leak_effects(struct gathering *to)
{
    const struct place_case *place = to->place;
    double leak_a = to->leak_s * place->service_v, ratio = to->leak_s * place->feed_ohm;
    switch (place->part->place) {
    case PLACE_AVC_BYPASS:
        add(to, "line_loss", 100 * ratio / (1 + ratio), UNIT_PERCENT, NAN);
        break;
    case PLACE_AVC_FEED:
        add(to, "line_volts",
            place->source_v * ratio / (1 + to->leak_s * (place->feed_ohm + place->source_ohm)),
            UNIT_VOLTAGE, place->bias_v);
        break;
    case PLACE_DECOUPLING:
        add(to, "rail_drop", leak_a * place->feed_ohm, UNIT_VOLTAGE, place->service_v);
        add_part_watts(to);
        break;
    case PLACE_RESERVOIR:
    case PLACE_SMOOTHING:
        add(to, "ht_share", leak_a, UNIT_CURRENT, place->current_a);
        add_part_watts(to);
        break;
    case PLACE_TONE:
        add_part_watts(to);
        add(to, "primary_current", leak_a, UNIT_CURRENT, NAN);
        break;
    case PLACE_DETECTOR:
        add(to, "control_volts", leak_a * place->feed_ohm, UNIT_VOLTAGE, place->bias_v);
        break;
    case PLACE_TUNING:
        linear_effect(to, "circuit_ratio", place->circuit_ohm);
        break;
    case PLACE_BATTERY_BYPASS:
        add(to, "battery_share", leak_a, UNIT_CURRENT, place->current_a);
        break;
    case PLACE_OTHER:
        add(to, "shift", leak_a * place->feed_ohm, UNIT_VOLTAGE,
            place->part->shift.unit == UNIT_PERCENT
                ? place->part->shift.value / 100 * place->service_v
                : fabs(place->part->shift.value));
        break;
    case PLACE_COUPLING:
        coupling_effects(to);
        break;
    case PLACE_SCREEN_BYPASS:
    case PLACE_CATHODE_BYPASS:
    case PLACE_BIAS_BYPASS:
        bypass_effects(to);
        break;
    case PLACE_UNKNOWN:
    case PLACE_ACROSS_MAINS:
    case PLACE_MAINS_TO_CHASSIS:
    case PLACE_AERIAL_ISOLATOR:
    case PLACE_EARTH_ISOLATOR:
    case PLACE_GRAM_ISOLATOR:
    case PLACE_CHASSIS_ISOLATOR:
    case PLACE_COUNT:
        break;
    }
}

static void mains_effects(struct gathering *to)
{
    const struct place_case *place = to->place;
    const struct job *job = place->job;
    to->at_most = false;
    double rise_v = job->set.mains.set ? place->policy->mains_rise * job->set.mains.value : NAN;
    if (mains_class_needed(job, place->part->place) == CLASS_X2)
        add(to, "mains_fire", NAN, UNIT_NONE, NAN);
    else if (place->part->place == PLACE_MAINS_TO_CHASSIS)
        add(to, "earth_current",
            mains_touch_current(rise_v, mains_frequency(job),
                                quantity_or(&place->part->marked.value, NAN), to->leak_s),
            UNIT_CURRENT, NAN);
    else
        add(to, "touch_current",
            mains_touch_current(rise_v, mains_frequency(job), mains_isolators(job, false),
                                to->leak_s),
            UNIT_CURRENT, place->policy->touch_current_a);
    if (mains_needs_discharge(place->part))
        add(to, "discharge_resistor", NAN, UNIT_NONE, NAN);
}

/* A capacitance outside its tolerance is what goes wrong, whatever the insulation. */
static void add_capacitance(struct gathering *to, const struct judgement *judged)
{
    for (size_t i = 0; i < judged->count; i++) {
        const struct criterion *criterion = &judged->criteria[i];
        if (criterion->key != CRITERION_CAPACITANCE ||
            criterion->outcome < OUTCOME_CONDITIONAL_FAIL)
            continue;
        add(to, "capacitance", criterion->value, UNIT_PERCENT, criterion->limit);
        to->effects[to->count - 1].at_most = false;
    }
}

void place_effects(struct assessment *assessment, size_t index)
{
    struct part_work *work = &assessment->work[index];
    struct capacitor_findings *part = &assessment->capacitors[index];
    struct gathering to = {.place = &work->place,
                           .leak_s = work->leaks ? work->leak.conductance_s : 0,
                           .at_most = part->test_bound == BOUND_UNDER};
    if (part->part->place == PLACE_TUNING)
        add_capacitance(&to, &work->final);
    if (part->part->pulse)
        add(&to, "pulse_peak", quantity_or(&part->part->pulse_peak, NAN), UNIT_VOLTAGE, NAN);
    else if (place_is_mains(part->part->place))
        mains_effects(&to);
    else if (work->leaks && work->place.why == WHY_NONE)
        leak_effects(&to);
    if (part->part->place == PLACE_TONE)
        add_short(&to);
    struct effect *effects = arena_array(assessment->arena, to.count + 1, sizeof *effects);
    for (size_t i = 0; i < to.count; i++)
        effects[i] = to.effects[i];
    part->effects = effects;
    part->effect_count = to.count;
}
