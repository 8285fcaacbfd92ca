#include "assess/visit.h"

#include "job/part.h"

#include <math.h>
#include <strings.h>

static const double days_per_year = 365.25;

bool visit_was_kept(enum action done)
{
    return done == DONE_KEPT || done == DONE_KEPT_UNTESTED || done == DONE_REFORMED;
}

static bool is_usable(const struct reading *reading)
{
    return !reading->in_circuit && !reading->hot.set && reading->set_volts.set &&
           reading->set_volts.value > 0 && reading->value.set &&
           (reading->value.unit == UNIT_CURRENT ||
            (reading->value.unit == UNIT_RESISTANCE && reading->value.value > 0));
}

/* A resistance is read as the current at its volts; "over" of it is "under" of the current. */
static double current_of(const struct reading *reading, enum bound *bound)
{
    *bound = reading->value.bound;
    if (reading->value.unit == UNIT_CURRENT)
        return reading->value.value;
    *bound = *bound == BOUND_OVER ? BOUND_UNDER : *bound == BOUND_UNDER ? BOUND_OVER : BOUND_NONE;
    return reading->set_volts.value / reading->value.value;
}

static double seconds_of(const struct reading *reading)
{
    return quantity_or(&reading->time, NAN);
}

/* How unlike two soaks are: |log of their ratio|, times that are not said count as far apart. */
static double soak_distance(const struct reading *then, const struct reading *now)
{
    double ratio = seconds_of(then) / seconds_of(now);
    return isfinite(ratio) && ratio > 0 ? fabs(log(ratio)) : 10;
}

static bool same_volts(const struct reading *then, const struct reading *now)
{
    return fabs(then->set_volts.value - now->set_volts.value) <=
           VISIT_VOLTS_TOLERANCE * now->set_volts.value;
}

static void compare_leakage(const struct job *then_job, const struct capacitor *then,
                            const struct capacitor *now, struct visit_change *change)
{
    /* What was read before the work does not speak of what works in the set since. */
    bool left_only = action_is_change(part_action(then_job, then));
    double nearest = INFINITY;
    for (size_t i = 0; i < then->reading_count; i++) {
        const struct reading *old = &then->readings[i];
        if (!is_usable(old) || (left_only && old->state != READING_LEFT))
            continue;
        for (size_t j = 0; j < now->reading_count; j++) {
            const struct reading *new = &now->readings[j];
            if (!is_usable(new) || new->state != READING_FOUND || !same_volts(old, new))
                continue;
            double distance = soak_distance(old, new);
            if (distance > nearest)
                continue;
            nearest = distance;
            change->test_v = new->set_volts.value;
            change->then_a = current_of(old, &change->then_bound);
            change->now_a = current_of(new, &change->now_bound);
            change->then_s = seconds_of(old);
            change->now_s = seconds_of(new);
        }
    }
}

static double number_of(const struct quantity *quantity)
{
    return quantity->set && quantity->bound == BOUND_NONE ? quantity->value : NAN;
}

static void compare_values(const struct quantity *then, const struct quantity *now,
                           struct visit_change *change)
{
    if (isnan(number_of(then)) || isnan(number_of(now)))
        return;
    change->then_value = number_of(then);
    change->now_value = number_of(now);
}

struct comparison {
    struct visit_change *items;
    size_t count;
};

static struct visit_change *begin(enum visit_kind kind, const char *ref, enum action done,
                                  struct visit_change *change)
{
    *change = (struct visit_change){.kind = kind,
                                    .ref = ref,
                                    .done_then = done,
                                    .capacitor = NOT_LISTED,
                                    .test_v = NAN,
                                    .then_a = NAN,
                                    .now_a = NAN,
                                    .then_s = NAN,
                                    .now_s = NAN,
                                    .then_value = NAN,
                                    .now_value = NAN};
    return change;
}

static void keep_if_compared(struct comparison *comparison, const struct visit_change *change)
{
    if (!isnan(change->then_a) || !isnan(change->then_value))
        comparison->items[comparison->count++] = *change;
}

static void compare_capacitors(const struct job *then, const struct job *now,
                               struct comparison *comparison)
{
    struct visit_change change;
    for (size_t j = 0; j < now->capacitor_count; j++) {
        const struct capacitor *part = &now->capacitors[j];
        for (size_t i = 0; part->ref && i < then->capacitor_count; i++) {
            const struct capacitor *old = &then->capacitors[i];
            if (!old->ref || strcasecmp(old->ref, part->ref) != 0)
                continue;
            enum action done = part_action(then, old);
            begin(VISIT_CAPACITOR, part->ref, done, &change)->capacitor = (int)j;
            compare_leakage(then, old, part, &change);
            /* `measured` of a part that was changed then may be the old one's. */
            if (!action_is_change(done))
                compare_values(&old->measured.value, &part->measured.value, &change);
            keep_if_compared(comparison, &change);
        }
    }
}

static void compare_resistors(const struct job *then, const struct job *now,
                              struct comparison *comparison)
{
    struct visit_change change;
    for (size_t j = 0; j < now->resistor_count; j++)
        for (size_t i = 0; now->resistors[j].ref && i < then->resistor_count; i++) {
            const struct resistor *old = &then->resistors[i], *part = &now->resistors[j];
            if (!old->ref || strcasecmp(old->ref, part->ref) != 0 || action_is_change(old->done))
                continue;
            begin(VISIT_RESISTOR, part->ref, old->done, &change);
            compare_values(&old->measured, &part->measured, &change);
            keep_if_compared(comparison, &change);
        }
}

static void compare_windings(const struct job *then, const struct job *now,
                             struct comparison *comparison)
{
    struct visit_change change;
    for (size_t j = 0; j < now->winding_count; j++)
        for (size_t i = 0; now->windings[j].ref && i < then->winding_count; i++) {
            const struct winding *old = &then->windings[i], *part = &now->windings[j];
            if (!old->ref || strcasecmp(old->ref, part->ref) != 0 || action_is_change(old->done))
                continue;
            begin(VISIT_WINDING, part->ref, old->done, &change);
            compare_values(&old->measured, &part->measured, &change);
            keep_if_compared(comparison, &change);
        }
}

void visits_compare(const struct job *earlier, struct findings *now, struct arena *arena)
{
    const struct job *job = now->job;
    size_t most = job->capacitor_count + job->resistor_count + job->winding_count;
    struct comparison comparison = {arena_array(arena, most, sizeof(struct visit_change)), 0};
    compare_capacitors(earlier, job, &comparison);
    compare_resistors(earlier, job, &comparison);
    compare_windings(earlier, job, &comparison);
    struct visit_changes *since = arena_get(arena, sizeof *since);
    const struct date *then_date = earlier->returned.set ? &earlier->returned : &earlier->received;
    since->earlier = earlier->number;
    since->then_date = then_date->set ? then_date->written : NULL;
    since->now_date = job->received.set ? job->received.written : NULL;
    since->years = then_date->set && job->received.set
                       ? (double)(date_days(&job->received) - date_days(then_date)) / days_per_year
                       : NAN;
    since->then_c = number_of(&earlier->conditions.bench);
    since->now_c = number_of(&job->conditions.bench);
    since->items = comparison.items;
    since->count = comparison.count;
    now->since = since;
}
