/*
 * The fixed words of a job file: one list each gives the enum, its English spelling (in YAML, JSON,
 * `find`) and the choices of the schema. Spelt as in prose.
 */
#ifndef JOB_CHOICES_H
#define JOB_CHOICES_H

#include <stddef.h>

#define SUPPLIES(X)                                                                                \
    X(SUPPLY_UNKNOWN, "")                                                                          \
    X(SUPPLY_TRANSFORMER, "transformer")                                                           \
    X(SUPPLY_LIVE_CHASSIS, "live chassis")                                                         \
    X(SUPPLY_BATTERY, "battery")                                                                   \
    X(SUPPLY_VIBRATOR, "vibrator")

/* Part `type`. */
#define DIELECTRICS(X)                                                                             \
    X(DIELECTRIC_UNKNOWN, "")                                                                      \
    X(DIELECTRIC_PAPER, "paper")                                                                   \
    X(DIELECTRIC_WAXED_PAPER, "waxed paper")                                                       \
    X(DIELECTRIC_MOULDED_PAPER, "moulded paper")                                                   \
    X(DIELECTRIC_OIL_PAPER, "oil paper")                                                           \
    X(DIELECTRIC_METALLISED_PAPER, "metallised paper")                                             \
    X(DIELECTRIC_MICA, "mica")                                                                     \
    X(DIELECTRIC_CERAMIC, "ceramic")                                                               \
    X(DIELECTRIC_POLYSTYRENE, "polystyrene")                                                       \
    X(DIELECTRIC_POLYESTER, "polyester")                                                           \
    X(DIELECTRIC_POLYPROPYLENE, "polypropylene")                                                   \
    X(DIELECTRIC_ELECTROLYTIC, "electrolytic")                                                     \
    X(DIELECTRIC_WET_ELECTROLYTIC, "wet electrolytic")                                             \
    X(DIELECTRIC_TANTALUM, "tantalum")                                                             \
    X(DIELECTRIC_AIR, "air")

/* In the order of methods and of every table and picture. */
#define PLACES(X)                                                                                  \
    X(PLACE_UNKNOWN, "")                                                                           \
    X(PLACE_COUPLING, "coupling")                                                                  \
    X(PLACE_AVC_BYPASS, "avc bypass")                                                              \
    X(PLACE_AVC_FEED, "avc feed")                                                                  \
    X(PLACE_SCREEN_BYPASS, "screen bypass")                                                        \
    X(PLACE_DECOUPLING, "decoupling")                                                              \
    X(PLACE_CATHODE_BYPASS, "cathode bypass")                                                      \
    X(PLACE_BIAS_BYPASS, "bias bypass")                                                            \
    X(PLACE_RESERVOIR, "reservoir")                                                                \
    X(PLACE_SMOOTHING, "smoothing")                                                                \
    X(PLACE_TONE, "tone")                                                                          \
    X(PLACE_DETECTOR, "detector")                                                                  \
    X(PLACE_TUNING, "tuning")                                                                      \
    X(PLACE_BATTERY_BYPASS, "battery bypass")                                                      \
    X(PLACE_ACROSS_MAINS, "across mains")                                                          \
    X(PLACE_MAINS_TO_CHASSIS, "mains to chassis")                                                  \
    X(PLACE_AERIAL_ISOLATOR, "aerial isolator")                                                    \
    X(PLACE_EARTH_ISOLATOR, "earth isolator")                                                      \
    X(PLACE_GRAM_ISOLATOR, "gram isolator")                                                        \
    X(PLACE_CHASSIS_ISOLATOR, "chassis isolator")                                                  \
    X(PLACE_OTHER, "other")

#define SEEN_SIDES(X)                                                                              \
    X(SEEN_BELOW, "below")                                                                         \
    X(SEEN_ABOVE, "above")                                                                         \
    X(SEEN_HIDDEN, "hidden")

#define ORIGINS(X)                                                                                 \
    X(WAS_ORIGINAL, "original")                                                                    \
    X(WAS_EARLIER_REPAIR, "earlier repair")                                                        \
    X(WAS_MISSING, "missing")

#define ACTIONS(X)                                                                                 \
    X(DONE_OPEN, "")                                                                               \
    X(DONE_KEPT, "kept")                                                                           \
    X(DONE_KEPT_UNTESTED, "kept untested")                                                         \
    X(DONE_REFORMED, "reformed")                                                                   \
    X(DONE_RESTUFFED, "restuffed")                                                                 \
    X(DONE_REPLACED, "replaced")                                                                   \
    X(DONE_DISCONNECTED, "disconnected")

#define AGES(X)                                                                                    \
    X(AGE_MODERN, "modern")                                                                        \
    X(AGE_PERIOD, "period")

/* Class of a mains capacitor (IEC 60384-14). */
#define SAFETY_CLASSES(X)                                                                          \
    X(CLASS_NONE, "")                                                                              \
    X(CLASS_X1, "X1")                                                                              \
    X(CLASS_X2, "X2")                                                                              \
    X(CLASS_Y1, "Y1")                                                                              \
    X(CLASS_Y2, "Y2")

#define STAGE_USES(X)                                                                              \
    X(USE_BY_VALVE, "")                                                                            \
    X(USE_OUTPUT, "output")                                                                        \
    X(USE_AMPLIFIER, "amplifier")

#define COPIES(X)                                                                                  \
    X(COPY_SHOP, "shop")                                                                           \
    X(COPY_CLIENT, "client")                                                                       \
    X(COPY_SALE, "sale")

#define CHOICE_ENUM(name, text) name,
#define CHOICE_TYPE(type, LIST, count)                                                             \
    enum type { LIST(CHOICE_ENUM) count };                                                         \
    const char *type##_text(enum type value);  /* English spelling; "" for the unset one */        \
    extern const char *const type##_choices[]; /* all spellings by value, then NULL */

/* The words of such a list, once for all, in a .c file. */
#define CHOICE_TEXT(name, text) [name] = text,
#define CHOICE_TABLE(type, LIST, count)                                                            \
    const char *const type##_choices[count + 1] = {LIST(CHOICE_TEXT)};                             \
    const char *type##_text(enum type value)                                                       \
    {                                                                                              \
        return type##_choices[value];                                                              \
    }

CHOICE_TYPE(supply, SUPPLIES, SUPPLY_COUNT)
CHOICE_TYPE(dielectric, DIELECTRICS, DIELECTRIC_COUNT)
CHOICE_TYPE(place, PLACES, PLACE_COUNT)
CHOICE_TYPE(seen, SEEN_SIDES, SEEN_COUNT)
CHOICE_TYPE(origin, ORIGINS, ORIGIN_COUNT)
CHOICE_TYPE(action, ACTIONS, ACTION_COUNT)
CHOICE_TYPE(age, AGES, AGE_COUNT)
CHOICE_TYPE(safety_class, SAFETY_CLASSES, CLASS_COUNT)
CHOICE_TYPE(stage_use, STAGE_USES, USE_COUNT)
CHOICE_TYPE(copy, COPIES, COPY_COUNT)

#endif
