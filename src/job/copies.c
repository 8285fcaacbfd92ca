/* What each copy of a record may show. */
#include "job/job.h"

#include <string.h>

static void *copy_of(struct arena *arena, const void *items, size_t count, size_t item_bytes)
{
    void *copy = arena_array(arena, count, item_bytes);
    if (count)
        memcpy(copy, items, count * item_bytes);
    return copy;
}

/* Every list whose items carry a price, without it. */
static void drop_prices(struct job *copy, struct arena *arena)
{
    static const struct prose none = {0};
    struct can *cans = copy_of(arena, copy->cans, copy->can_count, sizeof *cans);
    struct capacitor *capacitors =
        copy_of(arena, copy->capacitors, copy->capacitor_count, sizeof *capacitors);
    struct resistor *resistors =
        copy_of(arena, copy->resistors, copy->resistor_count, sizeof *resistors);
    struct winding *windings =
        copy_of(arena, copy->windings, copy->winding_count, sizeof *windings);
    struct control *controls =
        copy_of(arena, copy->controls, copy->control_count, sizeof *controls);
    struct valve *valves = copy_of(arena, copy->valves, copy->valve_count, sizeof *valves);
    for (size_t i = 0; i < copy->can_count; i++)
        cans[i].price = none;
    for (size_t i = 0; i < copy->capacitor_count; i++)
        capacitors[i].price = none;
    for (size_t i = 0; i < copy->resistor_count; i++)
        resistors[i].price = none;
    for (size_t i = 0; i < copy->winding_count; i++)
        windings[i].price = none;
    for (size_t i = 0; i < copy->control_count; i++)
        controls[i].price = none;
    for (size_t i = 0; i < copy->valve_count; i++)
        valves[i].price = none;
    copy->cans = cans;
    copy->capacitors = capacitors;
    copy->resistors = resistors;
    copy->windings = windings;
    copy->controls = controls;
    copy->valves = valves;
}

static void drop_photos(struct job *copy, enum copy for_copy, struct arena *arena)
{
    struct photo *photos = arena_array(arena, copy->photo_count, sizeof *photos);
    size_t count = 0;
    for (size_t i = 0; i < copy->photo_count; i++) {
        if (copy->photos[i].copies >= for_copy)
            photos[count++] = copy->photos[i];
    }
    copy->photos = photos;
    copy->photo_count = count;
}

const struct job *job_for_copy(const struct job *job, enum copy copy, struct arena *arena)
{
    struct job *filtered = arena_get(arena, sizeof *filtered);
    *filtered = *job;
    if (copy == COPY_SHOP)
        return filtered;
    filtered->private_note = (struct prose){0};
    drop_photos(filtered, copy, arena);
    if (copy == COPY_SALE) {
        filtered->owner.name = filtered->owner.contact = (struct prose){0};
        filtered->request = filtered->approvals = (struct prose){0};
        drop_prices(filtered, arena);
    }
    return filtered;
}
