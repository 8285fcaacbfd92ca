#include "assess/valve_test.h"

#include "assess/held.h"

#include <math.h>
#include <string.h>
#include <strings.h>

/* What stands behind "by": the tester; *end is where the figures end. */
static const char *tester_of(const char *text, size_t *end, struct arena *arena)
{
    const char *by = strcasestr(text, " by ");
    *end = by ? (size_t)(by - text) : strlen(text);
    return by && by[4] ? arena_copy(arena, by + 4) : NULL;
}

static bool read_figure(struct arena *arena, const struct quantity_token *token,
                        struct quantity *quantity)
{
    struct quantity_form any = {.unit = UNIT_COUNT};
    return token->is_number &&
           quantity_read(arena, token->start, token->length, &any, quantity, NULL) == QUANTITY_OK;
}

struct valve_findings valve_test_assess(const struct job *job, const struct policy *policy,
                                        size_t index, struct arena *arena)
{
    const char *text = job->valves[index].tested.text;
    struct valve_findings found = {.value = NAN,
                                   .good = NAN,
                                   .unit = UNIT_NONE,
                                   .share = held_unknown(UNIT_PERCENT, WHY_NO_READING, NULL)};
    if (!text)
        return found;
    size_t length;
    found.tester = tester_of(text, &length, arena);
    struct quantity figures[2] = {{0}};
    size_t count = 0;
    struct quantity_token token;
    const char *cursor = text;
    while (count < 2 && quantity_token_next(&cursor, text + length, &token))
        if (read_figure(arena, &token, &figures[count]))
            count++;
    if (count == 0) {
        found.share = held_unknown(UNIT_PERCENT, WHY_NO_FIGURE, NULL);
        return found;
    }
    found.value = figures[0].value;
    found.unit = figures[0].unit;
    bool percent = count == 1 && figures[0].unit == UNIT_PERCENT;
    if (percent)
        found.good = 100;
    else if (count == 2 && figures[1].unit == figures[0].unit && figures[1].value > 0)
        found.good = figures[1].value;
    if (isnan(found.good)) {
        found.share = held_unknown(UNIT_PERCENT, WHY_MISSING_FACT, "tested");
        return found;
    }
    /* the tester's own accuracy is part of its good figure; only the digit read counts */
    found.share = (struct held){.value = 100 * found.value / found.good,
                                .uncertainty = 0,
                                .low = 100 * policy->valve_least,
                                .high = NAN,
                                .unit = UNIT_PERCENT,
                                .source = SOURCE_POLICY};
    held_judge(&found.share, policy, BOUND_NONE);
    return found;
}
