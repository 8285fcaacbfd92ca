#include "report/words_check.h"

#include "assess/findings.h"

/* Keys of effects, as findings.h lists them. */
static const char *const effects[] = {
    "grid_volts", "cathode_current", "anode_watts",     "grid_shift",         "line_loss",
    "line_volts", "screen_fall",     "rail_drop",       "part_watts",         "bias_loss",
    "ht_share",   "short_watts",     "control_volts",   "circuit_ratio",      "battery_share",
    "mains_fire", "earth_current",   "touch_current",   "discharge_resistor", "pulse_peak",
    "shift",      "linear_ratio",    "primary_current", "capacitance",        NULL};

/* A group of phrases and the keys below it; `from` skips the unset choice. */
static const struct {
    const char *group;
    const char *const *keys;
    size_t from;
} groups[] = {
    {"place", place_choices, 0},
    {"lift", place_choices, 0},
    {"short", place_choices, 0},
    {"type", dielectric_choices, 1},
    {"outcome", outcome_choices, 0},
    {"done", action_choices, 1},
    {"reason", reason_choices, 1},
    {"why", reason_choices, 0},
    {"again", reason_choices, 1},
    {"advice", advice_choices, 1},
    {"advice_short", advice_choices, 1},
    {"over", criterion_key_choices, 0},
    {"criterion", criterion_key_choices, 0},
    {"held", outcome_choices, 0},
    {"copy", copy_choices, 0},
    {"supply", supply_choices, 1},
    {"effect", effects, 0},
};

void words_check(const struct words *words, struct arena *arena, struct diagnostics *diagnostics)
{
    struct phrasing say = {words, arena, diagnostics};
    for (size_t i = 0; i < sizeof groups / sizeof *groups; i++)
        for (size_t j = groups[i].from; groups[i].keys[j]; j++) {
            const char *key = arena_print(arena, "%s.%s", groups[i].group, groups[i].keys[j]);
            if (!words_get(words, key))
                phrase_of(&say, key, NULL);
        }
}
