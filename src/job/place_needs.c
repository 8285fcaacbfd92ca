#include "job/place_needs.h"

#include <stddef.h>
#include <string.h>

enum need {
    NEED_STAGE = 1,
    NEED_SOURCE = 2,
    NEED_LINE = 4,
    NEED_FEED = 8,
    NEED_CURRENT = 16,
    NEED_CIRCUIT = 32,
    NEED_SHIFT = 64,
    NEED_SERVICE = 128,
    NEED_MAINS = 256
};

static const struct {
    unsigned needs;
    const char *text;
} rows[PLACE_COUNT] = {
    [PLACE_UNKNOWN] = {0, ""},
    [PLACE_COUPLING] = {NEED_STAGE | NEED_SOURCE, "stage, source"},
    [PLACE_AVC_BYPASS] = {NEED_LINE | NEED_FEED | NEED_SERVICE, "line, feed, service"},
    [PLACE_AVC_FEED] = {NEED_SOURCE | NEED_FEED, "source, feed"},
    [PLACE_SCREEN_BYPASS] = {NEED_STAGE, "stage"},
    [PLACE_DECOUPLING] = {NEED_FEED | NEED_CURRENT | NEED_SERVICE, "feed, current, service"},
    [PLACE_CATHODE_BYPASS] = {NEED_STAGE, "stage"},
    [PLACE_BIAS_BYPASS] = {NEED_STAGE | NEED_FEED, "stage, feed"},
    [PLACE_RESERVOIR] = {NEED_CURRENT | NEED_SERVICE, "current, service"},
    [PLACE_SMOOTHING] = {NEED_CURRENT | NEED_SERVICE, "current, service"},
    [PLACE_TONE] = {NEED_STAGE, "stage"},
    [PLACE_DETECTOR] = {NEED_FEED | NEED_SERVICE, "feed, service"},
    [PLACE_TUNING] = {NEED_CIRCUIT | NEED_SERVICE, "circuit, service"},
    [PLACE_BATTERY_BYPASS] = {NEED_CURRENT | NEED_SERVICE, "current, service"},
    [PLACE_ACROSS_MAINS] = {NEED_MAINS, "mains of the set"},
    [PLACE_MAINS_TO_CHASSIS] = {NEED_MAINS, "mains of the set"},
    [PLACE_AERIAL_ISOLATOR] = {NEED_MAINS, "mains of the set"},
    [PLACE_EARTH_ISOLATOR] = {NEED_MAINS, "mains of the set"},
    [PLACE_GRAM_ISOLATOR] = {NEED_MAINS, "mains of the set"},
    [PLACE_CHASSIS_ISOLATOR] = {NEED_MAINS, "mains of the set"},
    [PLACE_OTHER] = {NEED_FEED | NEED_SHIFT | NEED_SERVICE, "feed, shift, service"},
};
_Static_assert(sizeof rows / sizeof *rows == PLACE_COUNT, "a row for every place");

bool place_is_mains(enum place place)
{
    return rows[place].needs & NEED_MAINS;
}

const char *place_needs_text(enum place place)
{
    return rows[place].text;
}

const char *place_missing_key(const struct job *job, const struct capacitor *capacitor)
{
    if (capacitor->place == PLACE_UNKNOWN)
        return "place";
    if (capacitor->pulse) /* no d.c. reading passes: only the peak counts */
        return capacitor->pulse_peak.set ? NULL : "pulse_peak";
    const struct {
        enum need need;
        bool given;
        const char *key;
    } facts[] = {
        {NEED_STAGE, capacitor->stage_count > 0, "stage"},
        {NEED_SOURCE, capacitor->source_volts.set, "source"},
        {NEED_LINE, capacitor->line != NULL, "line"},
        {NEED_FEED, capacitor->feed.set, "feed"},
        {NEED_CURRENT, capacitor->current.set, "current"},
        {NEED_CIRCUIT, capacitor->circuit.set, "circuit"},
        {NEED_SHIFT, capacitor->shift.set, "shift"},
        {NEED_SERVICE, capacitor->service.set, "service"},
        {NEED_MAINS, job->set.mains.set, "mains"},
    };
    for (size_t i = 0; i < sizeof facts / sizeof *facts; i++) {
        if ((rows[capacitor->place].needs & facts[i].need) && !facts[i].given)
            return facts[i].key;
    }
    return NULL;
}
