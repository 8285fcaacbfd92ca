#include "job/part.h"

#include <assert.h>

const char *part_kind_text(enum part_kind kind)
{
    static const char *const texts[PART_KIND_COUNT] = {
        [KIND_CAPACITOR] = "capacitor", [KIND_CAN] = "can",         [KIND_RESISTOR] = "resistor",
        [KIND_WINDING] = "winding",     [KIND_CONTROL] = "control", [KIND_VALVE] = "valve",
    };
    return texts[kind];
}

size_t part_count(const struct job *job, enum part_kind kind)
{
    const size_t counts[PART_KIND_COUNT] = {
        [KIND_CAPACITOR] = job->capacitor_count, [KIND_CAN] = job->can_count,
        [KIND_RESISTOR] = job->resistor_count,   [KIND_WINDING] = job->winding_count,
        [KIND_CONTROL] = job->control_count,     [KIND_VALVE] = job->valve_count,
    };
    return counts[kind];
}

/* The members that capacitors, cans, resistors and windings share, by name. */
#define MARKED_PART(part)                                                                          \
    .ref = (part)->ref, .maker = (part)->maker, .seen = (part)->seen, .was = (part)->was,          \
    .done = (part)->done, .age = (part)->age, .fitted = &(part)->fitted,                           \
    .fitted_text = (part)->fitted.written, .batch = (part)->batch, .price = (part)->price.text,    \
    .reason = (part)->reason.text, .note = (part)->note.text

static struct part of_capacitor(const struct capacitor *part)
{
    return (struct part){MARKED_PART(part), .marked = &part->marked,
                         .marked_text = part->marked.written,
                         .signed_where = part->signed_where.text};
}

static struct part of_can(const struct can *part)
{
    return (struct part){MARKED_PART(part), .signed_where = part->signed_where.text};
}

static struct part of_resistor(const struct resistor *part)
{
    return (struct part){MARKED_PART(part), .marked = &part->marked,
                         .marked_text = part->marked.written};
}

static struct part of_winding(const struct winding *part)
{
    return (struct part){MARKED_PART(part), .marked = &part->marked,
                         .marked_text = part->marked.written};
}

static struct part of_control(const struct control *part)
{
    return (struct part){
        .ref = part->ref,
        .seen = part->seen,
        .was = part->was,
        .done = part->done,
        .age = part->age,
        .marked_text = part->what.text,
        .fitted_text = part->fitted.text,
        .price = part->price.text,
        .reason = part->reason.text,
    };
}

static struct part of_valve(const struct valve *part)
{
    return (struct part){
        .ref = part->ref,
        .maker = part->maker,
        .seen = part->seen,
        .was = part->was,
        .done = part->done,
        .age = AGE_MODERN,
        .marked_text = part->type,
        .fitted_text = part->fitted.text,
        .price = part->price.text,
        .reason = part->reason.text,
    };
}

struct part part_of(const struct job *job, enum part_kind kind, size_t index)
{
    assert(index < part_count(job, kind));
    switch (kind) {
    case KIND_CAPACITOR:
        return of_capacitor(&job->capacitors[index]);
    case KIND_CAN:
        return of_can(&job->cans[index]);
    case KIND_RESISTOR:
        return of_resistor(&job->resistors[index]);
    case KIND_WINDING:
        return of_winding(&job->windings[index]);
    case KIND_CONTROL:
        return of_control(&job->controls[index]);
    case KIND_VALVE:
        return of_valve(&job->valves[index]);
    case PART_KIND_COUNT:
        break;
    }
    return (struct part){0};
}

const struct can *part_can(const struct job *job, const struct capacitor *part)
{
    return part->can == NOT_LISTED ? NULL : &job->cans[part->can];
}

enum action part_action(const struct job *job, const struct capacitor *part)
{
    const struct can *can = part_can(job, part);
    return part->done == DONE_OPEN && can ? can->done : part->done;
}

const struct marking *part_fitted(const struct job *job, const struct capacitor *part)
{
    const struct can *can = part_can(job, part);
    return !part->fitted.set && can ? &can->fitted : &part->fitted;
}

enum origin part_origin(const struct job *job, const struct capacitor *part)
{
    const struct can *can = part_can(job, part);
    return can ? can->was : part->was;
}

const struct instrument *instrument_of(const struct job *job, int index)
{
    return index >= 0 && (size_t)index < job->instrument_count ? &job->instruments[index] : NULL;
}

static bool is_voltmeter(const struct instrument *instrument)
{
    return instrument->input.set || instrument->sensitivity.set;
}

enum unit instrument_unit(const struct instrument *instrument)
{
    if (instrument->accuracy_unit != UNIT_NONE)
        return instrument->accuracy_unit;
    if (instrument->full_scale.set)
        return instrument->full_scale.unit;
    return is_voltmeter(instrument) ? UNIT_VOLTAGE : UNIT_NONE;
}

static enum unit stated_or_step(const struct instrument *instrument)
{
    enum unit unit = instrument_unit(instrument);
    return unit == UNIT_NONE && instrument->resolution.set ? instrument->resolution.unit : unit;
}

bool instrument_reads_leakage(const struct instrument *instrument)
{
    enum unit unit = stated_or_step(instrument);
    return unit == UNIT_CURRENT || unit == UNIT_RESISTANCE || unit == UNIT_NONE;
}

bool instrument_applies_volts(const struct instrument *instrument)
{
    return instrument->volt_count > 0 && !is_voltmeter(instrument);
}

bool instrument_reads_insulation(const struct instrument *instrument)
{
    return instrument_applies_volts(instrument) && stated_or_step(instrument) == UNIT_RESISTANCE;
}

int leakage_instrument(const struct job *job)
{
    for (size_t i = 0; i < job->instrument_count; i++)
        if (instrument_reads_leakage(&job->instruments[i]))
            return (int)i;
    return NOT_LISTED;
}

bool action_is_change(enum action done)
{
    return done == DONE_RESTUFFED || done == DONE_REPLACED || done == DONE_DISCONNECTED;
}
