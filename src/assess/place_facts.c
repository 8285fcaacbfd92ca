/* What a part's place needs, gathered from the job: which facts are missing, at what volts the part
   works, what it hangs on. */
#include "assess/place.h"

#include "assess/heat.h"
#include "assess/supply.h"
#include "assess/temperature.h"
#include "job/place_needs.h"

#include <math.h>
#include <string.h>

static double rating_of(const struct job *job, const struct resistance *resistance)
{
    if (!resistance->set || resistance->resistor == NOT_LISTED)
        return NAN;
    const struct resistor *part = &job->resistors[resistance->resistor];
    bool open = part->measured.set && part->measured.bound == BOUND_OVER;
    return quantity_or(open && part->fitted.rated.set ? &part->fitted.rated : &part->marked.rated,
                       NAN);
}

/* The key that is missing: not given, or a ref that gives no figure. */
static const char *missing_fact(const struct place_case *place)
{
    const struct capacitor *part = place->part;
    const char *key = place_missing_key(place->job, part);
    if (key)
        return key;
    if (part->feed.set && isnan(place->feed_ohm))
        return "feed";
    bool carries = part->place == PLACE_RESERVOIR || part->place == PLACE_SMOOTHING ||
                   part->place == PLACE_BATTERY_BYPASS;
    return carries && !(place->current_a > 0) ? "current" : NULL;
}

/* ---- the stage that it sits in */

static bool uses_group(enum place place)
{
    return place == PLACE_COUPLING || place == PLACE_SCREEN_BYPASS ||
           place == PLACE_CATHODE_BYPASS || place == PLACE_BIAS_BYPASS || place == PLACE_TONE;
}

static bool has_figure(const struct stage_solution *bare)
{
    return bare->status == SOLVE_OK || bare->status == SOLVE_BOTTOMED;
}

/* A resistor of its stage, or of one that hangs together with it, read open. */
static bool stage_is_open(const struct place_case *place)
{
    if (!place->model || !uses_group(place->part->place) || place->part->place == PLACE_TONE)
        return false;
    return place->model->open_unmended ||
           (place->group && stage_group_open(place->stages, place->group, true));
}

/* The resistor that a bypass bridges. */
static double bridged_ohm(const struct stage_model *model, enum place place, double *u_ohm)
{
    enum stage_resistor which = place == PLACE_SCREEN_BYPASS    ? STAGE_SCREEN
                                : place == PLACE_CATHODE_BYPASS ? STAGE_CATHODE
                                                                : STAGE_BIAS;
    *u_ohm = model->resistor_u_ohm[which];
    return model->ohms[PHASE_FOUND][which];
}

/* Without a row, or outside the law's stated bounds, a bypass is judged by its ratio. */
static void judge_linearly(struct place_case *place)
{
    if (isnan(place->feed_ohm))
        place->feed_ohm = bridged_ohm(place->model, place->part->place, &place->feed_u_ohm);
    place->linear = true;
    if (isnan(place->feed_ohm)) {
        place->why = WHY_MISSING_FACT;
        place->missing = place->part->place == PLACE_SCREEN_BYPASS ? "screen" : "cathode";
    }
}

static bool screen_is_rail(const struct place_case *place)
{
    double ohm = place->model->ohms[PHASE_FOUND][STAGE_SCREEN];
    return place->part->place == PLACE_SCREEN_BYPASS &&
           (isnan(ohm) || ohm < place->policy->screen_dropper_min_ohm);
}

static void find_stage(struct place_case *place)
{
    const struct capacitor *part = place->part;
    if (part->stage_count == 0)
        return;
    place->model = &place->stages->models[part->stages[0]];
    if (place->model->why == WHY_NONE) {
        place->group = &place->stages->groups[place->model->group];
        place->circuits = place->group->circuits[PHASE_FOUND];
        place->bare = place->group->bare[PHASE_FOUND];
    }
    if (!uses_group(part->place) || part->place == PLACE_TONE)
        return;
    if (screen_is_rail(place)) {
        place->screen_as_rail = true;
        double ohm = place->model->ohms[PHASE_FOUND][STAGE_SCREEN];
        place->feed_ohm = isnan(ohm) ? 0 : ohm;
        return;
    }
    bool coupling = part->place == PLACE_COUPLING;
    if (place->model->why != WHY_NONE) {
        place->why = place->model->why;
        place->missing = place->model->missing;
        if (!coupling && place->why == WHY_NO_ROW) {
            place->why = WHY_NONE;
            judge_linearly(place);
        }
    } else if (coupling && !place->model->grid_leak_known) {
        place->why = WHY_MISSING_FACT;
        place->missing = "grid_leak";
    } else if (!has_figure(&place->bare[place->model->slot])) {
        if (coupling)
            place->why = WHY_STAGE;
        else
            judge_linearly(place);
    }
}

/* A bypass across the resistance in the negative HT lead: what feeds it is that resistance, and
   nothing lies between. */
static bool feeds_itself(const struct place_case *place)
{
    if (place->part->place != PLACE_BIAS_BYPASS || !place->model)
        return false;
    const struct resistance *feed = &place->part->feed;
    const struct resistance *bias = &place->model->stage->bias_resistance;
    return (feed->resistor != NOT_LISTED && feed->resistor == bias->resistor) ||
           (feed->winding != NOT_LISTED && feed->winding == bias->winding);
}

/* The least bias of the part's stages, as designed. */
static double least_bias(const struct place_case *place)
{
    double least = NAN;
    for (size_t i = 0; i < place->part->stage_count; i++) {
        const struct stage_model *model = &place->stages->models[place->part->stages[i]];
        if (model->why != WHY_NONE)
            continue;
        const struct stage_solution *bare =
            &place->stages->groups[model->group].bare[PHASE_DESIGNED][model->slot];
        if (bare->status != SOLVE_IMPOSSIBLE)
            least = fmin(least, fabs(bare->grid_v - bare->cathode_v));
    }
    return least;
}

/* ---- service volts */

static double stage_service(const struct stage_model *model, enum place place)
{
    const struct stage *stage = model->stage;
    bool solved = model->why == WHY_NONE;
    double supply_v = quantity_or(&stage->supply, NAN);
    if (place == PLACE_SCREEN_BYPASS && !solved)
        return quantity_or(&stage->screen_volts, supply_v);
    if (place == PLACE_TONE && !solved)
        return supply_v;
    if (place == PLACE_BIAS_BYPASS && stage->bias == BIAS_FIXED)
        return fabs(quantity_or(&stage->bias_volts, NAN));
    return NAN;
}

static double solved_service(const struct stage_solution *bare, enum place place)
{
    if (bare->status == SOLVE_IMPOSSIBLE)
        return NAN;
    if (place == PLACE_SCREEN_BYPASS)
        return bare->screen_v;
    if (place == PLACE_CATHODE_BYPASS)
        return bare->cathode_v;
    return place == PLACE_TONE ? bare->anode_v : fabs(bare->return_v);
}

static double return_volts(const struct place_case *place)
{
    const struct stage_model *model = place->model;
    if (model && model->why == WHY_NONE)
        return place->group->bare[PHASE_DESIGNED][model->slot].return_v;
    if (model && model->stage->bias == BIAS_FIXED && model->stage->bias_volts.set)
        return model->stage->bias_volts.value;
    return 0;
}

/* The highest of the part's stages. */
static double stages_service(const struct place_case *place)
{
    double highest = NAN;
    for (size_t i = 0; i < place->part->stage_count; i++) {
        const struct stage_model *model = &place->stages->models[place->part->stages[i]];
        double volts = stage_service(model, place->part->place);
        if (isnan(volts) && model->why == WHY_NONE)
            volts = solved_service(
                &place->stages->groups[model->group].bare[PHASE_DESIGNED][model->slot],
                place->part->place);
        highest = fmax(highest, volts);
    }
    return highest;
}

static double service_volts(const struct place_case *place)
{
    const struct capacitor *part = place->part;
    if (part->service.set)
        return fabs(part->service.value);
    if (place_is_mains(part->place))
        return quantity_or(&place->job->set.mains, NAN);
    if (part->place == PLACE_COUPLING)
        return fabs(place->source_v - return_volts(place));
    if (part->place == PLACE_AVC_FEED)
        return fabs(place->source_v);
    return uses_group(part->place) ? stages_service(place) : NAN;
}

/* ---- electrolytics */

static void find_rule(struct place_case *place)
{
    const struct capacitor *part = place->part;
    const char *text = part->rule.text ? part->rule.text : place->policy->leakage_rule;
    place->rule_limit_a = NAN;
    place->rule_status = LEAKAGE_OK;
    if (!place->electrolytic || !text)
        return;
    place->rule_unknown = !leakage_rule_read(text, &place->rule);
    if (place->rule_unknown || !part->marked.value.set || !part->marked.rated.set)
        return;
    place->rule_status = leakage_limit(&place->rule, part->marked.value.value,
                                       part->marked.rated.value, &place->rule_limit_a);
}

static double ageing_margin(const struct policy *policy, enum dielectric type)
{
    bool ages = type == DIELECTRIC_WAXED_PAPER || type == DIELECTRIC_MOULDED_PAPER;
    return ages ? policy->ageing_margin_waxed : policy->ageing_margin_other;
}

/* Resistances, current and heat as the job gives them. */
static void read_facts(struct place_case *place, const struct found_ohms *feed,
                       const struct found_ohms *source)
{
    const struct job *job = place->job;
    const struct capacitor *part = place->part;
    place->source_v = quantity_or(&part->source_volts, NAN);
    place->current_a = quantity_or(&part->current, NAN);
    place->circuit_ohm = quantity_or(&part->circuit, NAN);
    place->feed_ohm = feed->ohm;
    place->feed_u_ohm = feed->u_ohm;
    place->source_ohm = isnan(source->ohm) ? 0 : source->ohm; /* the cautious default */
    place->source_u_ohm = source->u_ohm;
    place->feed_rating_w = rating_of(job, &part->feed);
    place->heat_limit_w = heat_limit(job, part, place->policy);
    place->heat_source = heat_is_derived(job, part) ? SOURCE_SELF_HEATING : SOURCE_POLICY;
    place->electrolytic = place->heat_counts = dielectric_is_electrolytic(part->type);
    place->margin = ageing_margin(place->policy, part->type);
    if (part->place == PLACE_RESERVOIR && part->measured.esr.set && part->current.set)
        place->ripple_w = supply_ripple_watts(part->current.value, supply_is_full_wave(job),
                                              part->measured.esr.value);
}

/* What the stage, once it is found, says of a place. */
static void read_stage(struct place_case *place)
{
    const struct capacitor *part = place->part;
    if (feeds_itself(place))
        place->feed_ohm = place->feed_u_ohm = 0;
    if (part->place == PLACE_AVC_FEED || part->place == PLACE_DETECTOR)
        place->bias_v = least_bias(place);
    if (part->place == PLACE_AVC_FEED && part->delay.set)
        place->bias_v = fmin(place->bias_v, fabs(part->delay.value));
    if (part->place == PLACE_SCREEN_BYPASS && place->model)
        place->feed_rating_w = quantity_or(&place->model->stage->screen_rating,
                                           rating_of(place->job, &place->model->stage->screen));
    place->service_v = service_volts(place);
    place->reversed = part->place == PLACE_COUPLING && place->source_v < return_volts(place);
}

/* Why nothing can be judged here, beyond what was found before. */
static void find_obstacle(struct place_case *place, const struct found_ohms *feed)
{
    const char *missing = missing_fact(place);
    if (missing || (place->why == WHY_NONE && !(place->service_v > 0))) {
        place->why = WHY_MISSING_FACT;
        place->missing = missing                              ? missing
                         : place_is_mains(place->part->place) ? "mains"
                                                              : "service";
    }
    if ((feed->open && isnan(feed->ohm)) || stage_is_open(place)) {
        place->why = WHY_OPEN_RESISTOR;
        place->missing = NULL;
    }
}

struct place_case place_prepare(const struct place_bench *bench, const struct capacitor *part)
{
    struct place_case place = {.job = bench->job,
                               .policy = bench->policy,
                               .stages = bench->stages,
                               .part = part,
                               .bias_v = NAN,
                               .to_20c = 1};
    const struct found_ohms feed = ohms_as_found(bench->job, bench->policy, &part->feed);
    const struct found_ohms source =
        ohms_as_found(bench->job, bench->policy, &part->source_resistance);
    read_facts(&place, &feed, &source);
    find_rule(&place);
    find_stage(&place);
    read_stage(&place);
    find_obstacle(&place, &feed);
    return place;
}
