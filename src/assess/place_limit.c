/* How much leak a place allows: the root of "the worst figure is at its limit". */
#include "assess/place.h"

#include <math.h>

/* Searched between 1 pS and 1 mS. */
static const double least_s = 1e-12, most_s = 1e-3;
static const double tolerance_log = 1e-7;
enum { STEPS_MAX = 60 };

/* What stands still while the leak is varied. */
struct search {
    const struct place_case *place;
    const struct place_values *bare;
    size_t binding; /* figure that is worst at the last leak tried */
};

/*
 * The largest use that a figure makes of what its limit leaves: 0 without the leak, 1 at the limit.
 * Figures that are outside without the leak do not count.
 */
static double use_of(struct search *search, double leak_s)
{
    struct place_values values;
    place_evaluate(search->place, leak_s, &values);
    double worst = 0;
    for (size_t i = 0; i < values.count && i < search->bare->count; i++) {
        const struct place_value *bare = &search->bare->items[i];
        double room = bare->limit - bare->value;
        double use = (values.items[i].value - bare->value) / room;
        if (room > 0 && use > worst) {
            worst = use;
            search->binding = i;
        }
    }
    return worst;
}

/* The use is nearly in proportion to the leak, so a secant on log against log lands in a few steps;
   the bracket holds it where it is not. */
static double root_of(struct search *search, double start_s)
{
    double low = log(least_s), high = log(most_s), at = log(start_s);
    double last = NAN, last_use = NAN;
    for (int step = 0; step < STEPS_MAX && high - low > tolerance_log; step++) {
        double use = log(fmax(use_of(search, exp(at)), 1e-12));
        if (fabs(use) < tolerance_log)
            break;
        if (use > 0)
            high = at;
        else
            low = at;
        double slope = isnan(last) || at == last ? 1 : (use - last_use) / (at - last);
        last = at;
        last_use = use;
        at -= use / (slope > 0.05 ? slope : 1);
        if (!(at > low && at < high))
            at = (low + high) / 2;
    }
    return exp(at);
}

/* After the ageing margin: the binding figure's limit is its value at the limit that is left. */
static void margin_limits(const struct place_case *place, const struct search *search,
                          struct place_limit *limit)
{
    struct place_values at_limit;
    place_evaluate(place, limit->leak_s, &at_limit);
    for (size_t i = 0; i < limit->count && i < at_limit.count; i++) {
        const struct place_value *bare = &search->bare->items[i];
        double share = bare->value + (bare->limit - bare->value) / place->margin;
        limit->limits[i] =
            i == search->binding ? at_limit.items[i].value : fmax(share, at_limit.items[i].value);
    }
}

/* No figure of the place ever fails: heat in the part is judged instead, whatever the leak. */
static struct place_limit heat_limit_of(const struct place_case *place)
{
    struct place_case with_heat = *place;
    with_heat.heat_counts = true;
    struct place_values bare;
    place_evaluate(&with_heat, 0, &bare);
    double heat_s = place->heat_limit_w / (place->service_v * place->service_v);
    struct place_limit limit = {
        .leak_s = heat_s / place->margin, .heat = true, .count = bare.count};
    for (size_t i = 0; i < bare.count; i++) {
        double room = bare.items[i].limit - bare.items[i].value;
        limit.limits[i] = room > 0 ? bare.items[i].value + room / place->margin : NAN;
    }
    return limit;
}

static struct place_limit place_find_limit(const struct place_case *place)
{
    struct place_limit limit = {.leak_s = NAN};
    struct place_values bare;
    place_evaluate(place, 0, &bare);
    size_t usable = 0, figures = 0;
    limit.count = bare.count;
    for (size_t i = 0; i < bare.count; i++) {
        bool inside = bare.items[i].limit > bare.items[i].value;
        limit.limits[i] = inside ? bare.items[i].limit : NAN;
        usable += inside ? 1 : 0;
        figures += isnan(bare.items[i].value) ? 0 : 1;
    }
    limit.none = figures > 0 && usable == 0;
    if (usable == 0)
        return limit;
    struct search search = {place, &bare, 0};
    if (use_of(&search, most_s) < 1 && !place->heat_counts)
        return heat_limit_of(place);
    double start_s = 1e-9, use = use_of(&search, start_s);
    limit.leak_s = root_of(&search, fmin(fmax(start_s / fmax(use, 1e-6), least_s), most_s));
    if (place->margin != 1) {
        use_of(&search, limit.leak_s); /* which figure binds */
        limit.leak_s /= place->margin;
        margin_limits(place, &search, &limit);
    }
    return limit;
}

/* Of several grids behind one capacitor the one that bears least is judged. */
static void choose_grid(struct place_case *place)
{
    double least_leak_s = INFINITY;
    struct place_case tried = *place;
    for (size_t i = 0; i < place->part->stage_count; i++) {
        tried.model = &place->stages->models[place->part->stages[i]];
        if (tried.model->why != WHY_NONE || tried.model->group != place->model->group ||
            !tried.model->grid_leak_known)
            continue;
        double leak_s = place_find_limit(&tried).leak_s;
        if (leak_s < least_leak_s) {
            least_leak_s = leak_s;
            place->model = tried.model;
        }
    }
}

struct place_limit place_set_limit(struct place_case *place)
{
    if (place->part->place == PLACE_COUPLING && place->part->stage_count > 1)
        choose_grid(place);
    struct place_limit limit = place_find_limit(place);
    double heat_w = limit.leak_s * place->margin * place->service_v * place->service_v;
    if (!place->heat_counts && heat_w > place->heat_limit_w) {
        place->heat_counts = true;
        limit = place_find_limit(place);
        limit.heat = true;
    }
    place->heat_counts = place->heat_counts || limit.heat;
    return limit;
}

static bool same(double a, double b)
{
    return a == b || (isnan(a) && isnan(b));
}

bool place_same_limit(const struct place_case *a, const struct place_case *b)
{
    if (a->part->place != b->part->place || a->model != b->model || a->group != b->group ||
        a->part->stage_count != b->part->stage_count || a->linear != b->linear ||
        a->screen_as_rail != b->screen_as_rail || a->electrolytic != b->electrolytic ||
        a->part->plug_side != b->part->plug_side)
        return false;
    for (size_t i = 0; i < a->part->stage_count; i++)
        if (a->part->stages[i] != b->part->stages[i])
            return false;
    return same(a->service_v, b->service_v) && same(a->source_v, b->source_v) &&
           same(a->source_ohm, b->source_ohm) && same(a->feed_ohm, b->feed_ohm) &&
           same(a->circuit_ohm, b->circuit_ohm) && same(a->current_a, b->current_a) &&
           same(a->feed_rating_w, b->feed_rating_w) && same(a->bias_v, b->bias_v) &&
           same(a->heat_limit_w, b->heat_limit_w) && same(a->ripple_w, b->ripple_w) &&
           same(a->margin, b->margin) && same(a->rule_limit_a, b->rule_limit_a) &&
           same(a->to_20c, b->to_20c) && same(a->part->shift.value, b->part->shift.value) &&
           a->part->shift.unit == b->part->shift.unit;
}
