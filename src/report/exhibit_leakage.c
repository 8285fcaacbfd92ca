/* The leakage table: every capacitor by its place, against its own limit. */
#include "job/part.h"
#include "report/leakage_notes.h"
#include "report/phrases.h"

#include <string.h>

enum {
    COLUMN_OF_REF,
    COLUMN_OF_MARKED,
    COLUMN_OF_VOLTS,
    COLUMN_OF_SOAK,
    COLUMN_OF_LEAKAGE,
    COLUMN_OF_LIMIT,
    COLUMN_OF_EFFECT,
    COLUMN_OF_OUTCOME,
    COLUMN_OF_DONE,
    LEAKAGE_COLUMNS
};

static const struct column_plan plan[LEAKAGE_COLUMNS] = {
    [COLUMN_OF_REF] = {"ref", NULL, NULL, COLUMN_REF, 6.2, 1},
    [COLUMN_OF_MARKED] = {"marked", NULL, "marked", COLUMN_NUMBER, 15.5, 2},
    [COLUMN_OF_VOLTS] = {"tested_at", NULL, "tested_at", COLUMN_NUMBER, 8.4, 2},
    [COLUMN_OF_SOAK] = {"soak", NULL, "soak", COLUMN_NUMBER, 6.8, 2},
    [COLUMN_OF_LEAKAGE] = {"leakage", "µA", NULL, COLUMN_NUMBER, 7.4, 1},
    [COLUMN_OF_LIMIT] = {"limit", "µA", NULL, COLUMN_NUMBER, 7.2, 1},
    [COLUMN_OF_EFFECT] = {"effect", NULL, NULL, COLUMN_TEXT, 23.0, 3},
    [COLUMN_OF_OUTCOME] = {"outcome", NULL, NULL, COLUMN_OUTCOME, 14.9, 1},
    [COLUMN_OF_DONE] = {"done", NULL, NULL, COLUMN_TEXT, 10.6, 3},
};

/* A bound is what the instrument's range ends at: as few figures as it takes, rounded up. */
static struct figures bound_figures(const struct composition *composition,
                                    const struct capacitor_findings *part)
{
    bool under = part->test_bound == BOUND_UNDER;
    struct quantity quantity = {.set = true,
                                .value = round_figures(part->test_leakage_a, 2, under),
                                .unit = UNIT_CURRENT,
                                .bound = part->test_bound};
    struct figures figures = figures_quantity(composition, &quantity);
    if (fabs(quantity.value) >= 1e-3)
        figures = figures_micro(composition, quantity.value, 2);
    figures.bound = under ? "<" : ">";
    figures.unit = "";
    return figures;
}

/* Three figures, but none finer than the instrument shows. */
struct figures leakage_figures(const struct composition *composition,
                               const struct capacitor_findings *part)
{
    double value = round_figures(part->test_leakage_a, 3, false);
    if (!isfinite(value) || part->deciding < 0)
        return (struct figures){0};
    if (part->test_bound != BOUND_NONE)
        return bound_figures(composition, part);
    unsigned decimals = decimals_for(value, 1e-6, 3);
    const struct instrument *instrument =
        instrument_of(composition->job, part->readings[part->deciding].reading->instrument);
    if (instrument && instrument->resolution.set && instrument->resolution.unit == UNIT_CURRENT &&
        instrument->resolution.value > 0) {
        unsigned finest = decimals_for(instrument->resolution.value, 1e-6, 1);
        decimals = decimals < finest ? decimals : finest;
    }
    return figures_plain(composition, value, 1e-6, decimals);
}

/* Heat that no hand would feel, a current that nothing would notice: left out beside the rest. */
static bool is_idle(const struct capacitor_findings *part, const struct effect *effect)
{
    const double felt_w = 1e-3, noticed_a = 1e-3;
    if (part->effect_count < 2)
        return false;
    return (strcmp(effect->key, "part_watts") == 0 && effect->value < felt_w) ||
           (strcmp(effect->key, "primary_current") == 0 && effect->value < noticed_a);
}

const char *effects_text(const struct composition *composition,
                         const struct capacitor_findings *part)
{
    const char **texts = arena_array(composition->arena, part->effect_count + 1, sizeof *texts);
    for (size_t i = 0; i < part->effect_count; i++)
        texts[i] = is_idle(part, &part->effects[i]) ? NULL : part->effects[i].text;
    if (part->effect_count == 0 && part->no_reading_passes)
        return phrase_in(&composition->say, "short", place_text(part->part->place));
    return text_join(composition->arena, "; ", texts, part->effect_count);
}

static const char *reason_under(const struct composition *composition,
                                const struct capacitor_findings *part, enum action done)
{
    bool said = part->why == WHY_NONE || part->why == WHY_WITHIN_UNCERTAINTY; /* "conditional" */
    if (part->outcome == OUTCOME_PASS || (said && part->outcome != OUTCOME_NOT_JUDGED))
        return NULL;
    if (part->why == WHY_NO_READING && done == DONE_KEPT_UNTESTED)
        return NULL; /* "kept untested" */
    return phrase_in(&composition->say, "reason", reason_text(part->why));
}

static void set_reading(const struct composition *composition, struct cell *cells,
                        const struct capacitor_findings *part)
{
    if (part->deciding < 0)
        return;
    cells[COLUMN_OF_VOLTS].figures = figures_unit(composition, part->test_v, UNIT_VOLTAGE, 3);
    cells[COLUMN_OF_SOAK].figures = figures_unit(composition, part->test_s, UNIT_TIME, 2);
    cells[COLUMN_OF_LEAKAGE].figures = leakage_figures(composition, part);
    cells[COLUMN_OF_LIMIT].figures = figures_micro(composition, part->test_limit_a, 2);
    cells[COLUMN_OF_LEAKAGE].strong = part->outcome == OUTCOME_FAIL && !part->no_reading_passes;
}

static void add_part(struct table_builder *builder, size_t index)
{
    const struct composition *composition = builder->composition;
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    enum action done = capacitor_done(composition, index);
    struct cell *cells = table_row(builder);
    cells[COLUMN_OF_REF].text = part->part->ref;
    set_marked_value(composition, &cells[COLUMN_OF_MARKED], &part->part->marked);
    cells[COLUMN_OF_MARKED].second_figures =
        figures_quantity(composition, &part->part->marked.rated);
    set_reading(composition, cells, part);
    cells[COLUMN_OF_EFFECT].text = effects_text(composition, part);
    cells[COLUMN_OF_OUTCOME] = (struct cell){
        .text = phrase_in(&composition->say, "outcome", outcome_text(part->outcome)),
        .second = reason_under(composition, part, done),
        .mark = mark_of(part->outcome),
        .strong = part->outcome == OUTCOME_FAIL,
    };
    cells[COLUMN_OF_DONE].text =
        phrase_in(&composition->say, "done", done == DONE_OPEN ? "open" : action_text(done));
    leakage_notes(builder, &cells[COLUMN_OF_REF], index);
}

static const char *caption(const struct composition *composition)
{
    const struct policy *policy = &composition->shop->policy;
    const char *margin = NULL;
    for (size_t i = 0; i < composition->findings->capacitor_count && !margin; i++)
        if (composition->findings->capacitors[i].ageing_margin > 1)
            margin = text_unit(composition, policy->ageing_margin_waxed, UNIT_NONE, 2);
    return phrase(&composition->say, "caption.leakage", "bench",
                  text_unit(composition, composition->findings->bench_c, UNIT_TEMPERATURE, 2),
                  "working",
                  text_unit(composition, composition->findings->working_c, UNIT_TEMPERATURE, 2),
                  "margin", margin, NULL);
}

void exhibit_leakage(struct composition *composition, size_t index)
{
    (void)index;
    struct table_builder builder = table_begin(composition, "leakage", plan, LEAKAGE_COLUMNS);
    table_by_place(&builder, add_part);
    table_place(&builder, NUMBERED_TABLE, caption(composition));
}
