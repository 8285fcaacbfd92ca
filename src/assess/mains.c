#include "assess/mains.h"

#include "assess/assessment.h"
#include "assess/held.h"

#include <math.h>

static const double discharge_above_f = 0.1e-6;
static const double cautious_hz = 60;

static bool counts_as_across(const struct job *job, enum place place)
{
    return place == PLACE_ACROSS_MAINS ||
           (place == PLACE_MAINS_TO_CHASSIS && job->set.supply == SUPPLY_LIVE_CHASSIS);
}

enum safety_class mains_class_needed(const struct job *job, enum place place)
{
    if (counts_as_across(job, place))
        return CLASS_X2;
    if (place == PLACE_MAINS_TO_CHASSIS)
        return CLASS_Y2;
    return place_is_isolator(place) ? CLASS_Y1 : CLASS_NONE;
}

bool mains_class_borne(const struct job *job, enum place place, const struct marking *marking)
{
    enum safety_class class = marking->safety_class;
    if (!marking->set || class == CLASS_NONE)
        return false;
    if (counts_as_across(job, place))
        return true;
    bool is_y = class == CLASS_Y1 || class == CLASS_Y2;
    if (place == PLACE_MAINS_TO_CHASSIS)
        return is_y;
    return class == CLASS_Y1 || (class == CLASS_Y2 && marking->class_count >= 2);
}

double mains_touch_current(double rise_v, double frequency_hz, double capacitance_f, double leak_s)
{
    return rise_v * hypot(leak_s, 2 * M_PI * frequency_hz * capacitance_f);
}

double mains_touch_capacitance(double rise_v, double frequency_hz, double touch_a)
{
    return touch_a / (2 * M_PI * frequency_hz * rise_v);
}

double mains_frequency(const struct job *job)
{
    return quantity_or(&job->set.frequency, cautious_hz);
}

static double original_f(const struct capacitor *part)
{
    if (part->measured.value.set)
        return part->measured.value.value;
    return quantity_or(&part->marked.value, 0);
}

/* Whether the original is in circuit: as found, or left as it was. */
static bool is_original(const struct job *job, const struct capacitor *part, bool left)
{
    enum action done = part_action(job, part);
    const struct marking *fitted = part_fitted(job, part);
    return !left || (part_is_new(done, fitted) ? !fitted->value.set : done != DONE_DISCONNECTED);
}

static double isolator_f(const struct job *job, const struct capacitor *part, bool left)
{
    if (is_original(job, part, left))
        return original_f(part);
    const struct marking *fitted = part_fitted(job, part);
    return part_is_new(part_action(job, part), fitted) ? fitted->value.value : 0;
}

double mains_isolators(const struct job *job, bool left)
{
    double total_f = 0;
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        if (place_is_isolator(part->place))
            total_f += isolator_f(job, part, left);
    }
    return total_f;
}

double mains_isolators_uncertainty(const struct job *job, const struct policy *policy, bool left)
{
    double total_f = 0;
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        if (place_is_isolator(part->place) && part->measured.value.set &&
            is_original(job, part, left))
            total_f += held_uncertainty(job, policy, &part->measured.value);
    }
    return total_f;
}

bool mains_needs_discharge(const struct capacitor *part)
{
    return part->place == PLACE_ACROSS_MAINS && part->plug_side &&
           original_f(part) > discharge_above_f;
}
