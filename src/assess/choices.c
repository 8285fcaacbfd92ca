#include "assess/findings.h"

#define CHOICE_TEXT(name, text) [name] = text,
#define CHOICE_TABLE(type, LIST, count)                                                            \
    const char *const type##_choices[count + 1] = {LIST(CHOICE_TEXT)};                             \
    const char *type##_text(enum type value)                                                       \
    {                                                                                              \
        return type##_choices[value];                                                              \
    }

CHOICE_TABLE(outcome, OUTCOMES, OUTCOME_COUNT)
CHOICE_TABLE(reason, REASONS, WHY_COUNT)
CHOICE_TABLE(advice, ADVICES, ADVICE_COUNT)
CHOICE_TABLE(part_state, PART_STATES, STATE_COUNT)
CHOICE_TABLE(criterion_key, CRITERIA, CRITERION_COUNT)
