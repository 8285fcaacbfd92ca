#include "assess/place.h"

#include <math.h>
#include <string.h>

static const double percent = 100;
/* Common practice where no valve row says more. */
static const double linear_ratio = 20;

static void add_value(struct place_values *values, struct place_value value)
{
    if (values->count < PLACE_VALUES_MAX)
        values->items[values->count++] = value;
}

static void add_percent(struct place_values *values, enum criterion_key key, double share,
                        double limit_share)
{
    add_value(values, (struct place_value){.key = key,
                                           .value = percent * share,
                                           .limit = percent * limit_share,
                                           .unit = UNIT_PERCENT,
                                           .source = SOURCE_POLICY});
}

static void add_policy(struct place_values *values, enum criterion_key key, double value,
                       double limit, enum unit unit)
{
    add_value(
        values,
        (struct place_value){
            .key = key, .value = value, .limit = limit, .unit = unit, .source = SOURCE_POLICY});
}

double place_heat(const struct place_case *place, double leak_s)
{
    return leak_s * place->service_v * place->service_v + place->ripple_w;
}

static void add_heat(const struct place_case *place, double leak_s, struct place_values *values)
{
    add_value(values, (struct place_value){.key = CRITERION_HEAT,
                                           .value = place_heat(place, leak_s) + place->can_others_w,
                                           .limit = place->heat_limit_w,
                                           .unit = UNIT_POWER,
                                           .source = place->heat_source});
}

/* R_L >= ratio * R, held as R/R_L <= 1/ratio so that it rises with the leak. */
static void add_ratio(struct place_values *values, enum criterion_key key, double leak_s,
                      double ohm, double ratio, enum source_key source)
{
    add_value(values, (struct place_value){.key = key,
                                           .value = leak_s * ohm,
                                           .limit = 1 / ratio,
                                           .unit = UNIT_NONE,
                                           .inverse = true,
                                           .source = source});
}

/* ---- stages */

struct stage_leak place_leak(const struct place_case *place, double leak_s)
{
    return (struct stage_leak){.place = place->part->place,
                               .stages = place->part->stages,
                               .stage_count = place->part->stage_count,
                               .leak_s = leak_s,
                               .source_v = place->source_v,
                               .source_ohm = place->source_ohm,
                               .feed_ohm = place->feed_ohm};
}

bool place_solve(const struct place_case *place, double leak_s, struct stage_solution *solutions)
{
    if (!place->group)
        return false;
    struct stage_circuit circuits[STAGE_GROUP_MAX];
    memcpy(circuits, place->circuits, place->group->count * sizeof *circuits);
    struct stage_leak leak = place_leak(place, leak_s);
    stage_add_leak(place->stages, place->group, circuits, &leak);
    return stages_solve(circuits, place->group->count, solutions) != SOLVE_IMPOSSIBLE;
}

static bool is_bottomed(const struct stage_solution *solution)
{
    return solution->status == SOLVE_BOTTOMED || solution->status == SOLVE_IMPOSSIBLE;
}

static double rise_of(double with, double without)
{
    return without > 0 ? (with - without) / without : NAN;
}

/* The largest rise of cathode current among the part's stages. */
static double worst_rise(const struct place_case *place, const struct stage_solution *with)
{
    double worst = NAN;
    for (size_t i = 0; i < place->part->stage_count; i++) {
        const struct stage_model *model = &place->stages->models[place->part->stages[i]];
        if (model->why != WHY_NONE || &place->stages->groups[model->group] != place->group)
            continue;
        double rise = rise_of(with[model->slot].cathode_a, place->bare[model->slot].cathode_a);
        worst = fmax(worst, rise);
    }
    return worst;
}

/* A leak may bring the dissipation to its maximum, or add a share of it where it was above. */
static void add_dissipation(const struct place_case *place, struct place_values *values,
                            enum criterion_key key, double with_w, double bare_w, double max_w)
{
    if (isnan(max_w))
        return;
    add_value(values, (struct place_value){
                          .key = key,
                          .value = with_w,
                          .limit = fmax(max_w, bare_w + place->policy->dissipation_share * max_w),
                          .unit = UNIT_POWER,
                          .source = SOURCE_VALVE_RATING});
}

static void add_pushpull(const struct place_case *place, struct place_values *values,
                         const struct stage_solution *with, bool split)
{
    if (place->model->partner < 0)
        return;
    const struct stage_model *partner = &place->stages->models[place->model->partner];
    if (partner->why != WHY_NONE || partner->group != place->model->group)
        return;
    double one = with[place->model->slot].anode_a, other = with[partner->slot].anode_a;
    double bare = place->bare[place->model->slot].anode_a;
    add_percent(values, CRITERION_PUSHPULL_DIFFERENCE,
                bare > 0 && split ? fabs(one - other) / bare : NAN,
                place->policy->pushpull_difference);
}

static void evaluate_coupling(const struct place_case *place, double leak_s,
                              struct place_values *values)
{
    struct stage_solution with[STAGE_GROUP_MAX];
    if (!place_solve(place, leak_s, with))
        return;
    int slot = place->model->slot;
    const struct stage_solution *leaking = &with[slot], *bare = &place->bare[slot];
    if (!place->model->is_output) {
        double bias_v = fabs(bare->grid_v - bare->cathode_v);
        add_percent(values, CRITERION_GRID_SHIFT,
                    bias_v > 0 ? (leaking->grid_v - bare->grid_v) / bias_v : NAN,
                    place->policy->grid_shift);
        return;
    }
    add_percent(values, CRITERION_CATHODE_CURRENT, rise_of(leaking->cathode_a, bare->cathode_a),
                place->policy->cathode_current_rise);
    /* A bottomed anode has no figure for the split; the row stays, so that figures keep their
       places whatever the leak. */
    bool split = !is_bottomed(leaking) && !is_bottomed(bare);
    const struct valve_law *law = &place->model->law;
    add_dissipation(place, values, CRITERION_ANODE_DISSIPATION, split ? leaking->anode_w : NAN,
                    bare->anode_w, law->pa_max_w);
    if (!law->triode)
        add_dissipation(place, values, CRITERION_SCREEN_DISSIPATION,
                        split ? leaking->screen_w : NAN, bare->screen_w, law->pg2_max_w);
    add_pushpull(place, values, with, split);
}

static void evaluate_screen(const struct place_case *place, double leak_s,
                            struct place_values *values)
{
    if (place->screen_as_rail) {
        add_percent(values, CRITERION_RAIL_DROP, leak_s * place->feed_ohm,
                    place->policy->rail_drop);
        add_heat(place, leak_s, values);
        return;
    }
    if (place->linear) {
        add_ratio(values, CRITERION_LINEAR_RATIO, leak_s, place->feed_ohm, linear_ratio,
                  SOURCE_TWENTY_TIMES);
        return;
    }
    struct stage_solution with[STAGE_GROUP_MAX];
    if (!place_solve(place, leak_s, with))
        return;
    double worst = NAN, dropper_w = NAN;
    for (size_t i = 0; i < place->part->stage_count; i++) {
        const struct stage_model *model = &place->stages->models[place->part->stages[i]];
        if (model->why != WHY_NONE || &place->stages->groups[model->group] != place->group)
            continue;
        double bare_v = place->bare[model->slot].screen_v;
        worst = fmax(worst, bare_v > 0 ? 1 - with[model->slot].screen_v / bare_v : NAN);
        dropper_w = fmax(dropper_w, with[model->slot].screen_resistor_w);
    }
    add_percent(values, CRITERION_SCREEN_FALL, worst, place->policy->screen_fall);
    if (!isnan(place->feed_rating_w))
        add_value(values, (struct place_value){.key = CRITERION_DROPPER_DISSIPATION,
                                               .value = dropper_w,
                                               .limit = place->feed_rating_w,
                                               .unit = UNIT_POWER,
                                               .source = SOURCE_MARKED_RATING});
}

static void evaluate_cathode(const struct place_case *place, double leak_s,
                             struct place_values *values)
{
    if (place->linear) {
        add_ratio(values, CRITERION_LINEAR_RATIO, leak_s, place->feed_ohm, linear_ratio,
                  SOURCE_TWENTY_TIMES);
        return;
    }
    struct stage_solution with[STAGE_GROUP_MAX];
    if (place_solve(place, leak_s, with))
        add_percent(values, CRITERION_CATHODE_CURRENT, worst_rise(place, with),
                    place->policy->cathode_current_rise);
}

/* ---- linear places */

static void evaluate_avc_bypass(const struct place_case *place, double leak_s,
                                struct place_values *values)
{
    double ratio = (leak_s + place->line_others_s) * place->feed_ohm;
    add_percent(values, CRITERION_LINE_LOSS, ratio / (1 + ratio), place->policy->avc_line_loss);
}

static void evaluate_avc_feed(const struct place_case *place, double leak_s,
                              struct place_values *values)
{
    double line_v = leak_s * place->source_v * place->feed_ohm /
                    (1 + leak_s * (place->feed_ohm + place->source_ohm));
    double limit_v = place->policy->avc_feed_v;
    if (!isnan(place->bias_v))
        limit_v = fmin(limit_v, place->policy->avc_feed_bias_share * place->bias_v);
    add_policy(values, CRITERION_LINE_VOLTS, line_v, limit_v, UNIT_VOLTAGE);
}

static void evaluate_decoupling(const struct place_case *place, double leak_s,
                                struct place_values *values)
{
    double leak_a = leak_s * place->service_v;
    add_percent(values, CRITERION_RAIL_DROP, leak_s * place->feed_ohm, place->policy->rail_drop);
    if (!isnan(place->feed_rating_w)) {
        double total_a = leak_a + place->current_a;
        add_value(values, (struct place_value){.key = CRITERION_DROPPER_DISSIPATION,
                                               .value = total_a * total_a * place->feed_ohm,
                                               .limit = place->feed_rating_w,
                                               .unit = UNIT_POWER,
                                               .source = SOURCE_MARKED_RATING});
    }
    add_heat(place, leak_s, values);
}

static void evaluate_supply(const struct place_case *place, double leak_s,
                            struct place_values *values)
{
    add_percent(values, CRITERION_HT_SHARE, leak_s * place->service_v / place->current_a,
                place->policy->ht_current_share);
    add_heat(place, leak_s, values);
}

static void evaluate_tone(const struct place_case *place, double leak_s,
                          struct place_values *values)
{
    add_heat(place, leak_s, values);
}

static void evaluate_detector(const struct place_case *place, double leak_s,
                              struct place_values *values)
{
    double control_v = leak_s * place->service_v * place->feed_ohm;
    if (isnan(place->bias_v))
        add_policy(values, CRITERION_CONTROL_VOLTS, control_v, place->policy->detector_control_v,
                   UNIT_VOLTAGE);
    else
        add_percent(values, CRITERION_GRID_SHIFT, control_v / place->bias_v,
                    place->policy->detector_grid_share);
}

static void evaluate_tuning(const struct place_case *place, double leak_s,
                            struct place_values *values)
{
    add_ratio(values, CRITERION_CIRCUIT_RATIO, leak_s, place->circuit_ohm,
              place->policy->tuning_resistance_ratio, SOURCE_POLICY);
}

static void evaluate_battery(const struct place_case *place, double leak_s,
                             struct place_values *values)
{
    double leak_a = leak_s * place->service_v;
    if (place->part->plug_side) /* before the switch: it drains day and night */
        add_policy(values, CRITERION_BATTERY_SHARE, leak_a, place->policy->battery_before_switch_a,
                   UNIT_CURRENT);
    else
        add_percent(values, CRITERION_BATTERY_SHARE, leak_a / place->current_a,
                    place->policy->battery_share);
}

static void evaluate_mains(const struct place_case *place, double leak_s,
                           struct place_values *values)
{
    add_value(values, (struct place_value){.key = CRITERION_INSULATION,
                                           .value = leak_s,
                                           .limit = 1 / place->policy->isolator_insulation_ohm,
                                           .unit = UNIT_RESISTANCE,
                                           .inverse = true,
                                           .source = SOURCE_POLICY});
}

static void evaluate_other(const struct place_case *place, double leak_s,
                           struct place_values *values)
{
    const struct quantity *shift = &place->part->shift;
    if (shift->unit == UNIT_PERCENT)
        add_percent(values, CRITERION_SHIFT, leak_s * place->feed_ohm, shift->value / percent);
    else
        add_policy(values, CRITERION_SHIFT, leak_s * place->service_v * place->feed_ohm,
                   fabs(shift->value), UNIT_VOLTAGE);
    /* The shift allowed stands in the job, not in the policy. */
    values->items[values->count - 1].source = SOURCE_JOB;
}

typedef void (*evaluate)(const struct place_case *, double, struct place_values *);
static const evaluate evaluations[PLACE_COUNT] = {
    [PLACE_COUPLING] = evaluate_coupling,      [PLACE_AVC_BYPASS] = evaluate_avc_bypass,
    [PLACE_AVC_FEED] = evaluate_avc_feed,      [PLACE_SCREEN_BYPASS] = evaluate_screen,
    [PLACE_DECOUPLING] = evaluate_decoupling,  [PLACE_CATHODE_BYPASS] = evaluate_cathode,
    [PLACE_BIAS_BYPASS] = evaluate_cathode,    [PLACE_RESERVOIR] = evaluate_supply,
    [PLACE_SMOOTHING] = evaluate_supply,       [PLACE_TONE] = evaluate_tone,
    [PLACE_DETECTOR] = evaluate_detector,      [PLACE_TUNING] = evaluate_tuning,
    [PLACE_BATTERY_BYPASS] = evaluate_battery, [PLACE_ACROSS_MAINS] = evaluate_mains,
    [PLACE_MAINS_TO_CHASSIS] = evaluate_mains, [PLACE_AERIAL_ISOLATOR] = evaluate_mains,
    [PLACE_EARTH_ISOLATOR] = evaluate_mains,   [PLACE_GRAM_ISOLATOR] = evaluate_mains,
    [PLACE_CHASSIS_ISOLATOR] = evaluate_mains, [PLACE_OTHER] = evaluate_other,
};

void place_evaluate(const struct place_case *place, double leak_s, struct place_values *values)
{
    values->count = 0;
    if (evaluations[place->part->place])
        evaluations[place->part->place](place, leak_s, values);
    if (!place->heat_counts)
        return;
    bool has_heat = false;
    for (size_t i = 0; i < values->count; i++)
        has_heat = has_heat || values->items[i].key == CRITERION_HEAT;
    if (!has_heat)
        add_heat(place, leak_s, values);
    if (place->electrolytic && !isnan(place->rule_limit_a))
        add_value(values, (struct place_value){.key = CRITERION_LEAKAGE_RULE,
                                               .value = leak_s * place->service_v * place->to_20c,
                                               .limit = place->rule_limit_a,
                                               .unit = UNIT_CURRENT,
                                               .source = place->rule.source,
                                               .rule = place->rule.name});
}

bool place_is_isolator(enum place place)
{
    return place == PLACE_AERIAL_ISOLATOR || place == PLACE_EARTH_ISOLATOR ||
           place == PLACE_GRAM_ISOLATOR || place == PLACE_CHASSIS_ISOLATOR;
}
