/* Findings for a terminal: what was read, what it does, what it means, what to do. */
#include "report/composition.h"

static const struct column_plan part_plan[] = {
    {"ref", NULL, NULL, COLUMN_REF, 8, 1},          {"leakage", "µA", NULL, COLUMN_NUMBER, 12, 1},
    {"limit", "µA", NULL, COLUMN_NUMBER, 11, 1},    {"effect", NULL, NULL, COLUMN_TEXT, 29, 3},
    {"outcome", NULL, NULL, COLUMN_OUTCOME, 22, 1}, {"advice", NULL, NULL, COLUMN_TEXT, 18, 3},
};

static void add_part(struct table_builder *builder, size_t index)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    double limit_a = part->deciding < 0 ? part->sheet_limit_a : part->test_limit_a;
    struct cell *cells = table_row(builder);
    cells[0].text = part->part->ref;
    cells[1].figures = leakage_figures(composition, part);
    if (!part->no_reading_passes)
        cells[2].figures = figures_micro(composition, limit_a, 2);
    cells[3].text = effects_text(composition, part);
    cells[4] = (struct cell){
        .text = phrase_in(say, "outcome", outcome_text(part->outcome)),
        .second = part->outcome == OUTCOME_PASS || part->why == WHY_NONE
                      ? NULL
                      : phrase_in(say, "reason", reason_text(part->why)),
        .mark = mark_of(part->outcome),
        .strong = part->outcome == OUTCOME_FAIL,
    };
    cells[5].text = part->advice == ADVICE_NONE
                        ? NULL
                        : phrase_in(say, "advice_short", advice_text(part->advice));
    if (part->outcome == OUTCOME_NOT_JUDGED && part->advice_text)
        table_note(builder, &cells[0], part->advice_text);
    if (part->tested_above_marked)
        table_note(builder, &cells[0], phrase(say, "note.tested_above_marked", NULL));
}

void exhibit_assessed_capacitors(struct composition *composition, size_t index)
{
    (void)index;
    struct table_builder builder =
        table_begin(composition, "leakage", part_plan, sizeof part_plan / sizeof *part_plan);
    table_by_place(&builder, add_part);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.assessed", NULL));
}

static const struct column_plan stage_plan[] = {
    {"stage", NULL, NULL, COLUMN_REF, 28, 1},
    {"designed", "mA", NULL, COLUMN_NUMBER, 12, 1},
    {"found", "mA", NULL, COLUMN_NUMBER, 12, 1},
    {"left", "mA", NULL, COLUMN_NUMBER, 12, 1},
    {"anode_found", "W", NULL, COLUMN_NUMBER, 18, 1},
    {"anode_rating", "W", NULL, COLUMN_NUMBER, 18, 1},
};

static void add_stage(struct table_builder *builder, const struct stage_findings *stage)
{
    const struct composition *composition = builder->composition;
    const char *names[] = {stage->stage->name, stage->stage->valve_type};
    struct cell *cells = table_row(builder);
    cells[0].text = text_join(composition->arena, ", ", names, 2);
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        if (stage->phases[phase].judged)
            cells[1 + phase].figures =
                figures_plain(composition, stage->phases[phase].solution.cathode_a, 1e-3,
                              decimals_for(stage->phases[phase].solution.cathode_a, 1e-3, 2));
    if (stage->phases[PHASE_FOUND].judged) {
        double watts = stage->phases[PHASE_FOUND].solution.anode_w;
        cells[4].figures = figures_plain(composition, watts, 1, 1);
        cells[4].strong = watts > stage->anode_max_w;
    }
    cells[5].figures = figures_plain(composition, stage->anode_max_w, 1, 1);
}

void exhibit_assessed_stages(struct composition *composition, size_t index)
{
    (void)index;
    struct table_builder builder =
        table_begin(composition, "stages", stage_plan, sizeof stage_plan / sizeof *stage_plan);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->findings->stage_count; i++)
        add_stage(&builder, &composition->findings->stages[i]);
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.assessed_stages", NULL));
}
