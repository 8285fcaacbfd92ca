#include "reference/safety_figure.h"

#include <math.h>
#include <string.h>
#include <strings.h>

static const struct safety_figure figures[SAFETY_KIND_COUNT] = {
    [SAFETY_TOUCH_CURRENT] = {"touch current", 0.5e-3, UNIT_CURRENT, true, NAN, NAN,
                              SOURCE_TOUCH_CURRENT},
    [SAFETY_EARTH_CURRENT] = {"earth current", 3.5e-3, UNIT_CURRENT, true, NAN, NAN,
                              SOURCE_EARTH_CURRENT},
    /* for a lead of 5 m or less and 1.5 mm2 */
    [SAFETY_EARTH_BOND] = {"earth bond", 0.3, UNIT_RESISTANCE, true, NAN, NAN, SOURCE_EARTH_BOND},
    [SAFETY_INSULATION_EARTHED] = {"insulation", 1e6, UNIT_RESISTANCE, false, NAN, 500,
                                   SOURCE_INSULATION},
    [SAFETY_INSULATION_DOUBLE] = {"insulation", 2e6, UNIT_RESISTANCE, false, NAN, 500,
                                  SOURCE_INSULATION},
    [SAFETY_RESIDUAL_PLUG] = {"residual at the plug", 34, UNIT_VOLTAGE, true, 1, NAN,
                              SOURCE_RESIDUAL_PLUG},
    [SAFETY_RESIDUAL_INSIDE] = {"residual", 60, UNIT_VOLTAGE, true, 5, NAN, SOURCE_RESIDUAL_INSIDE},
    [SAFETY_FUSE] = {"fuse", NAN, UNIT_NONE, true, NAN, NAN, SOURCE_NONE},
    [SAFETY_POLARITY] = {"polarity", NAN, UNIT_NONE, true, NAN, NAN, SOURCE_NONE},
};

const struct safety_figure *safety_figure(enum safety_kind kind)
{
    return &figures[kind];
}

static bool holds(const char *name, const char *word)
{
    return strcasestr(name, word) != NULL;
}

enum safety_kind safety_kind_named(const char *name, bool double_insulated)
{
    if (holds(name, "touch"))
        return SAFETY_TOUCH_CURRENT;
    if (holds(name, "insulation"))
        return double_insulated ? SAFETY_INSULATION_DOUBLE : SAFETY_INSULATION_EARTHED;
    if (holds(name, "bond") || holds(name, "earth resistance") || holds(name, "earth continuity"))
        return SAFETY_EARTH_BOND;
    if (holds(name, "earth current") || holds(name, "earth leakage") ||
        holds(name, "conductor current"))
        return SAFETY_EARTH_CURRENT;
    if (holds(name, "fuse"))
        return SAFETY_FUSE;
    if (holds(name, "polarity"))
        return SAFETY_POLARITY;
    if (holds(name, "residual") || holds(name, "discharge") || holds(name, "after pulling"))
        return holds(name, "plug") ? SAFETY_RESIDUAL_PLUG : SAFETY_RESIDUAL_INSIDE;
    return SAFETY_KIND_COUNT;
}
