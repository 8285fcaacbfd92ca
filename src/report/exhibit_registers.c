/* Registers: resistors, windings, switches and controls, valves. */
#include "report/held_words.h"

/* What was done and what is there now, for the last column. */
static const char *done_text_of(const struct composition *composition, enum action done,
                                enum origin was)
{
    const struct phrasing *say = &composition->say;
    const char *parts[] = {
        phrase_in(say, "done", done == DONE_OPEN ? "open" : action_text(done)),
        was == WAS_ORIGINAL ? NULL : phrase_in(say, "origin", origin_text(was)),
    };
    return text_join(composition->arena, "; ", parts, 2);
}

/* "+12" of measured against marked, in whole per cent; empty when either is missing or a bound. */
static struct figures change_figures(const struct composition *composition,
                                     const struct quantity *measured, const struct quantity *marked)
{
    if (!measured->set || measured->bound != BOUND_NONE || !marked->set || marked->value == 0)
        return (struct figures){0};
    double percent = round(100 * (measured->value / marked->value - 1));
    struct figures figures = figures_plain(composition, percent, 1, 0);
    if (percent > 0)
        figures.whole = arena_print(composition->arena, "+%s", figures.whole);
    return figures;
}

static const char *tolerance_text(const struct composition *composition,
                                  const struct marking *marked)
{
    if (!marked->tolerance_set)
        return NULL;
    const char *high =
        text_set(composition->arena, marked->tolerance_high_percent, UNIT_PERCENT, 2);
    if (marked->tolerance_low_percent == -marked->tolerance_high_percent)
        return arena_print(composition->arena, "±%s", high);
    return arena_print(composition->arena, "%s/+%s",
                       text_set(composition->arena, marked->tolerance_low_percent, UNIT_PERCENT, 2),
                       high);
}

static bool out_of_tolerance(const struct quantity *measured, const struct marking *marked)
{
    if (!measured->set || !marked->value.set || !marked->tolerance_set)
        return false;
    double percent = 100 * (measured->value / marked->value.value - 1);
    return percent > marked->tolerance_high_percent || percent < marked->tolerance_low_percent;
}

/* What a resistor does in its stage by what it measures, and its watts. */
static void resistor_notes(struct table_builder *builder, const struct resistor_findings *found,
                           struct cell *cell)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    if (held_fails(&found->tolerance) && found->stage)
        table_note(
            builder, cell,
            phrase(say, found->harmless ? "note.resistor_harmless" : "note.resistor_moves", "stage",
                   found->stage, "percent",
                   text_signed(composition->arena,
                               fabs(found->effect_percent) < 0.05 ? 0 : found->effect_percent,
                               UNIT_PERCENT, 2),
                   NULL));
    if (isfinite(found->dissipation.value))
        table_note(
            builder, cell,
            phrase(
                say, held_fails(&found->dissipation) ? "note.resistor_hot" : "note.resistor_watts",
                "watts", quantity_text(composition->arena, found->dissipation.value, UNIT_POWER, 2),
                "rating", text_unit(composition, found->dissipation.high, UNIT_POWER, 2), NULL));
}

static void add_resistor(struct table_builder *builder, size_t index)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    const struct resistor *part = &composition->job->resistors[index];
    const struct resistor_findings *found = composition->findings->bench.resistors;
    bool outside = out_of_tolerance(&part->measured, &part->marked);
    struct cell *cells = table_row(builder);
    cells[0].text = part->ref;
    cells[1].figures = figures_quantity(composition, &part->marked.value);
    cells[2].figures = figures_quantity(composition, &part->marked.rated);
    cells[3].text = tolerance_text(composition, &part->marked);
    cells[4].figures = figures_quantity(composition, &part->measured);
    cells[5].figures = change_figures(composition, &part->measured, &part->marked.value);
    cells[5].strong = cells[4].strong = outside;
    cells[6].text = done_text_of(composition, part->done, part->was);
    if (outside && (part->done == DONE_KEPT || part->done == DONE_OPEN))
        table_note(builder, &cells[0],
                   phrase(say, "note.resistor_outside", "reason",
                          text_stopped(composition->arena, part->reason.text), NULL));
    if (part->marked.colours)
        table_note(builder, &cells[0],
                   phrase(say,
                          part->marked.colours_unknown ? "note.colours_unknown" : "note.colours",
                          "colours", part->marked.colours, NULL));
    if (found && part->marked.value.set && found[index].series == E_SERIES_COUNT)
        table_note(builder, &cells[0], phrase(say, "note.no_preferred_value", NULL));
    if (found)
        resistor_notes(builder, &found[index], &cells[0]);
    table_note(
        builder, &cells[0],
        text_stopped(composition->arena, text_sentence(composition->arena, part->note.text)));
}

void exhibit_resistors(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 9, 1},
        {"marked", NULL, "marked", COLUMN_NUMBER, 14, 1},
        {"rating", NULL, "rating", COLUMN_NUMBER, 10, 2},
        {"tolerance", NULL, "tolerance", COLUMN_TEXT, 11, 2},
        {"measured", NULL, "measured", COLUMN_NUMBER, 14, 1},
        {"change", "%", "change", COLUMN_NUMBER, 10, 2},
        {"done", NULL, NULL, COLUMN_TEXT, 32, 1},
    };
    struct table_builder builder =
        table_begin(composition, "resistors", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->job->resistor_count; i++)
        add_resistor(&builder, i);
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.resistors", NULL));
}

/* Off the marked value brought to the temperature of the copper. */
static void winding_figures(struct table_builder *builder, const struct winding_findings *found,
                            struct cell *cells)
{
    const struct composition *composition = builder->composition;
    double percent = found->resistance.value;
    if (isfinite(percent)) {
        cells[3].text = text_signed(composition->arena, fabs(percent) < 0.5 ? 0 : percent,
                                    UNIT_PERCENT, fabs(percent) < 10 ? 1 : 2);
        cells[3].strong = cells[2].strong = held_fails(&found->resistance);
    }
    cells[4].strong = held_fails(&found->insulation);
    if (held_fails(&found->insulation))
        table_note(builder, &cells[0],
                   phrase(&composition->say, "note.winding_insulation", "limit",
                          held_limits(composition, &found->insulation), "source",
                          source_words(composition, found->insulation.source), NULL));
}

void exhibit_windings(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 12, 1},
        {"marked", NULL, "marked", COLUMN_NUMBER, 15, 1},
        {"measured", NULL, "measured", COLUMN_NUMBER, 15, 1},
        {"change", NULL, "change", COLUMN_TEXT, 12, 2},
        {"insulation", NULL, "insulation", COLUMN_NUMBER, 16, 2},
        {"done", NULL, NULL, COLUMN_TEXT, 30, 1},
    };
    struct table_builder builder =
        table_begin(composition, "windings", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->job->winding_count; i++) {
        const struct winding *part = &composition->job->windings[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = part->ref;
        cells[1].figures = figures_quantity(composition, &part->marked.value);
        cells[2].figures = figures_quantity(composition, &part->measured);
        cells[4].figures = figures_quantity(composition, &part->insulation);
        cells[5].text = done_text_of(composition, part->done, part->was);
        if (composition->findings->bench.windings)
            winding_figures(&builder, &composition->findings->bench.windings[i], cells);
        const char *warm = text_quantity(composition, &part->temperature);
        if (warm)
            table_note(&builder, &cells[0],
                       phrase(&composition->say, "note.winding_warm", "temperature", warm, NULL));
        table_note(
            &builder, &cells[0],
            text_stopped(composition->arena, text_sentence(composition->arena, part->note.text)));
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.windings", NULL));
}

void exhibit_controls(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 16, 1},
        {"what", NULL, "what", COLUMN_TEXT, 42, 1},
        {"done", NULL, "done", COLUMN_TEXT, 42, 1},
    };
    struct table_builder builder =
        table_begin(composition, "controls", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < composition->job->control_count; i++) {
        const struct control *part = &composition->job->controls[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = part->ref;
        cells[1].text = part->what.text;
        cells[2].text = done_text_of(composition, part->done, part->was);
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.controls", NULL));
}

static void valve_figures(struct table_builder *builder, const struct valve_findings *found,
                          struct cell *cell)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    if (isfinite(found->share.value) && found->unit != UNIT_PERCENT)
        cell->second = phrase(say, "valve_test.share", "percent",
                              text_unit(composition, found->share.value, UNIT_PERCENT, 2), NULL);
    cell->strong = held_fails(&found->share);
    if (held_fails(&found->share))
        table_note(builder, cell,
                   phrase(say, "valve_test.weak", "limit",
                          text_unit(composition, found->share.low, UNIT_PERCENT, 2), NULL));
    if (isfinite(found->value) && isnan(found->good))
        table_note(builder, cell, phrase(say, "valve_test.no_figure", NULL));
}

void exhibit_valves(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 12, 1},
        {"valve_type", NULL, "valve_type", COLUMN_TEXT, 18, 1},
        {"maker", NULL, "maker", COLUMN_TEXT, 20, 1},
        {"tested", NULL, "tested", COLUMN_TEXT, 22, 1},
        {"done", NULL, "done", COLUMN_TEXT, 28, 1},
    };
    struct table_builder builder =
        table_begin(composition, "valves", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < composition->job->valve_count; i++) {
        const struct valve *part = &composition->job->valves[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = part->ref;
        cells[1].text = part->type;
        cells[2].text = part->maker;
        cells[3].text = part->tested.text;
        if (composition->findings->bench.valves)
            valve_figures(&builder, &composition->findings->bench.valves[i], &cells[3]);
        cells[4].text = done_text_of(composition, part->done, part->was);
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.valves", NULL));
}
