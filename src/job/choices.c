#include "job/choices.h"

#define CHOICE_TEXT(name, text) [name] = text,
#define CHOICE_TABLE(type, LIST, count)                                                            \
    const char *const type##_choices[count + 1] = {LIST(CHOICE_TEXT)};                             \
    const char *type##_text(enum type value)                                                       \
    {                                                                                              \
        return type##_choices[value];                                                              \
    }

CHOICE_TABLE(supply, SUPPLIES, SUPPLY_COUNT)
CHOICE_TABLE(dielectric, DIELECTRICS, DIELECTRIC_COUNT)
CHOICE_TABLE(place, PLACES, PLACE_COUNT)
CHOICE_TABLE(seen, SEEN_SIDES, SEEN_COUNT)
CHOICE_TABLE(origin, ORIGINS, ORIGIN_COUNT)
CHOICE_TABLE(action, ACTIONS, ACTION_COUNT)
CHOICE_TABLE(age, AGES, AGE_COUNT)
CHOICE_TABLE(safety_class, SAFETY_CLASSES, CLASS_COUNT)
CHOICE_TABLE(stage_use, STAGE_USES, USE_COUNT)
CHOICE_TABLE(copy, COPIES, COPY_COUNT)
