/* Stages as designed, found and left, beside what the set itself showed. */
#include "report/composition.h"

enum {
    STAGE_LABEL,
    STAGE_UNIT,
    STAGE_PHASES,
    STAGE_SET_FOUND = STAGE_PHASES + PHASE_COUNT,
    STAGE_SET_LEFT,
    STAGE_RATING,
    STAGE_COLUMNS
};

static const struct column_plan plan[STAGE_COLUMNS] = {
    [STAGE_LABEL] = {NULL, NULL, NULL, COLUMN_TEXT, 22, 1},
    [STAGE_UNIT] = {NULL, NULL, NULL, COLUMN_TEXT, 6, 1},
    [STAGE_PHASES + PHASE_DESIGNED] = {"designed", NULL, "designed", COLUMN_NUMBER, 12, 2},
    [STAGE_PHASES + PHASE_FOUND] = {"found", NULL, "found", COLUMN_NUMBER, 12, 1},
    [STAGE_PHASES + PHASE_LEFT] = {"left", NULL, "left", COLUMN_NUMBER, 12, 1},
    [STAGE_SET_FOUND] = {"found", NULL, "found_at_the_set", COLUMN_NUMBER, 12, 2},
    [STAGE_SET_LEFT] = {"left", NULL, "left_at_the_set", COLUMN_NUMBER, 12, 2},
    [STAGE_RATING] = {"rating", NULL, "rating", COLUMN_NUMBER, 12, 2},
};

enum stage_row_kind { ROW_VOLTS, ROW_CURRENT, ROW_POWER };

/* One row: where its figure is in the solution and in what the set showed. */
static const struct stage_row {
    const char *key; /* of `stage_row.` */
    enum stage_row_kind kind;
    size_t solution; /* offset of the double in struct stage_solution */
    size_t at_set;   /* offset of the struct quantity in struct stage_reading */
    bool set_shows;
} rows[] = {
    {"grid", ROW_VOLTS, offsetof(struct stage_solution, grid_v),
     offsetof(struct stage_reading, grid), true},
    {"cathode", ROW_VOLTS, offsetof(struct stage_solution, cathode_v),
     offsetof(struct stage_reading, cathode), true},
    {"anode", ROW_VOLTS, offsetof(struct stage_solution, anode_v),
     offsetof(struct stage_reading, anode), true},
    {"screen", ROW_VOLTS, offsetof(struct stage_solution, screen_v),
     offsetof(struct stage_reading, screen), true},
    {"anode_current", ROW_CURRENT, offsetof(struct stage_solution, anode_a), 0, false},
    {"screen_current", ROW_CURRENT, offsetof(struct stage_solution, screen_a), 0, false},
    {"cathode_current", ROW_CURRENT, offsetof(struct stage_solution, cathode_a), 0, false},
    {"anode_dissipation", ROW_POWER, offsetof(struct stage_solution, anode_w), 0, false},
    {"screen_dissipation", ROW_POWER, offsetof(struct stage_solution, screen_w), 0, false},
};
enum { ROW_ANODE_DISSIPATION = 7, ROW_SCREEN_DISSIPATION = 8 };

static double solution_value(const struct stage_phase *phase, const struct stage_row *row)
{
    bool screen = row->solution == offsetof(struct stage_solution, screen_a) ||
                  row->solution == offsetof(struct stage_solution, screen_w);
    if (!phase->judged || (screen && isnan(phase->solution.screen_v)))
        return NAN;
    return *(const double *)(const void *)((const char *)&phase->solution + row->solution);
}

static const struct quantity *set_value(const struct stage_reading *reading,
                                        const struct stage_row *row)
{
    return (const struct quantity *)(const void *)((const char *)reading + row->at_set);
}

static double row_scale(const struct stage_row *row)
{
    return row->kind == ROW_CURRENT ? 1e-3 : 1;
}

/* One count of decimals for the whole row, so that its figures compare: that of its largest. */
static unsigned row_decimals(const struct stage_findings *stage, const struct stage_row *row)
{
    double largest = 0;
    for (int phase = 0; phase < PHASE_COUNT; phase++) {
        double value = solution_value(&stage->phases[phase], row);
        if (isfinite(value) && fabs(value) > largest)
            largest = fabs(value);
    }
    double shown = largest / row_scale(row);
    if (row->kind == ROW_POWER)
        return shown > 0 && shown < 0.1 ? 2 : 1;
    return shown >= 100 ? 0 : shown >= 10 ? 1 : row->kind == ROW_CURRENT && shown >= 3 ? 1 : 2;
}

static double rating_of(const struct stage_findings *stage, size_t row)
{
    return row == ROW_ANODE_DISSIPATION    ? stage->anode_max_w
           : row == ROW_SCREEN_DISSIPATION ? stage->screen_max_w
                                           : NAN;
}

/* Without a screen the cathode's current is the anode's: said once. */
static bool row_is_empty(const struct stage_findings *stage, const struct stage_row *row)
{
    const struct stage_solution *designed = &stage->phases[PHASE_DESIGNED].solution;
    if (row->solution == offsetof(struct stage_solution, cathode_a) && isnan(designed->screen_v))
        return true;
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        if (isfinite(solution_value(&stage->phases[phase], row)))
            return false;
    return !row->set_shows || (!set_value(&stage->stage->found, row)->set &&
                               !set_value(&stage->stage->left, row)->set);
}

static void add_row(struct table_builder *builder, const struct stage_findings *stage, size_t index)
{
    static const char *const units[] = {"V", "mA", "W"};
    const struct composition *composition = builder->composition;
    const struct stage_row *row = &rows[index];
    if (row_is_empty(stage, row))
        return;
    struct cell *cells = table_row(builder);
    unsigned decimals = row_decimals(stage, row);
    double rating = rating_of(stage, index);
    cells[STAGE_LABEL].text = phrase_in(&composition->say, "stage_row", row->key);
    cells[STAGE_UNIT].text = units[row->kind];
    for (int phase = 0; phase < PHASE_COUNT; phase++) {
        double value = solution_value(&stage->phases[phase], row);
        struct cell *cell = &cells[STAGE_PHASES + phase];
        cell->figures = figures_plain(composition, value, row_scale(row), decimals);
        cell->strong = isfinite(value) && isfinite(rating) && value > rating;
    }
    if (row->set_shows) {
        cells[STAGE_SET_FOUND].figures =
            figures_volts(composition, set_value(&stage->stage->found, row));
        cells[STAGE_SET_LEFT].figures =
            figures_volts(composition, set_value(&stage->stage->left, row));
    }
    cells[STAGE_RATING].figures = figures_plain(composition, rating, 1, 1);
}

static const char *stage_title(const struct composition *composition, const struct stage *stage)
{
    const char *valve[] = {stage->valve_ref, stage->valve_type};
    return phrase(&composition->say, "stage.group", "stage", stage->name, "valve",
                  text_join(composition->arena, " ", valve, 2), NULL);
}

static const char *grid_current_note(const struct composition *composition,
                                     const struct stage_findings *stage)
{
    if (!stage->grid_current_advice || !isfinite(stage->grid_current_a))
        return NULL;
    return phrase(&composition->say, "stage.grid_current", "current",
                  quantity_text(composition->arena, stage->grid_current_a, UNIT_CURRENT, 2), NULL);
}

static bool exceeds_rating(const struct stage_findings *stage)
{
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        for (size_t row = ROW_ANODE_DISSIPATION; row <= ROW_SCREEN_DISSIPATION; row++)
            if (solution_value(&stage->phases[phase], &rows[row]) > rating_of(stage, row))
                return true;
    return false;
}

/* Why phases have no figure; NULL when all have. */
static const char *not_judged_note(const struct composition *composition,
                                   const struct stage_findings *stage)
{
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        if (!stage->phases[phase].judged)
            return phrase(&composition->say, "stage.not_judged", "why",
                          phrase(&composition->say,
                                 arena_print(composition->arena, "why.%s",
                                             reason_text(stage->phases[phase].why)),
                                 "valve", stage->stage->valve_type, NULL),
                          NULL);
    return NULL;
}

static const char *node_name(const struct composition *composition, size_t node)
{
    static const char *const keys[STAGE_NODE_COUNT] = {"grid", "cathode", "anode", "screen"};
    return phrase_in(&composition->say, "stage_row", keys[node]);
}

/* "cathode 2.1 V above": what no leak and no spread of the valve explains. */
static const char *unexplained_words(const struct composition *composition,
                                     const struct reconciled_phase *phase)
{
    const char *words[STAGE_NODE_COUNT] = {0};
    for (size_t i = 0; i < STAGE_NODE_COUNT; i++) {
        double volts = phase->nodes[i].unexplained_v;
        if (isfinite(volts) && volts != 0)
            words[i] =
                phrase(&composition->say, volts > 0 ? "stage.above" : "stage.below", "node",
                       node_name(composition, i), "volts",
                       quantity_text(composition->arena, fabs(volts), UNIT_VOLTAGE, 2), NULL);
    }
    return text_join(composition->arena, ", ", words, STAGE_NODE_COUNT);
}

/* What of the set's own figures in a phase is not explained; NULL: nothing, or not compared. */
static const char *unexplained_note(const struct composition *composition,
                                    const struct reconciled_findings *found, enum phase phase)
{
    const struct phrasing *say = &composition->say;
    const struct reconciled_phase *at = &found->phases[phase];
    const char *unexplained = at->compared ? unexplained_words(composition, at) : NULL;
    if (!unexplained)
        return NULL;
    const char *grid = NULL;
    if (isfinite(at->grid_current_a))
        grid = phrase(
            say, "stage.grid_estimate", "current",
            quantity_text(composition->arena, at->grid_current_a, UNIT_CURRENT, 2), "error",
            quantity_text(composition->arena, at->grid_current_error_a, UNIT_CURRENT, 1), NULL);
    return phrase(say, "stage.unexplained", "phase",
                  phrase(say, phase == PHASE_LEFT ? "head.left" : "head.found", NULL), "volts",
                  unexplained, "grid", grid, NULL);
}

static const char *explained_note(const struct composition *composition,
                                  const struct reconciled_findings *found)
{
    for (int phase = PHASE_FOUND; phase < PHASE_COUNT; phase++)
        if (found->phases[phase].compared && unexplained_words(composition, &found->phases[phase]))
            return NULL;
    return found->phases[PHASE_FOUND].compared || found->phases[PHASE_LEFT].compared
               ? phrase(&composition->say, "stage.explained", NULL)
               : NULL;
}

static const char *bounds_note(const struct composition *composition,
                               const struct reconciled_findings *found)
{
    if (!found->phases[PHASE_FOUND].compared && !found->phases[PHASE_LEFT].compared)
        return NULL;
    return phrase(
        &composition->say, "stage.bounds", "law",
        isfinite(found->law_bound) ? text_unit(composition, 100 * found->law_bound, UNIT_PERCENT, 2)
                                   : NULL,
        "valve",
        found->valve_bound > 0 ? text_unit(composition, 100 * found->valve_bound, UNIT_PERCENT, 2)
                               : NULL,
        "anchored",
        found->anchored ? text_unit(composition, 100 * found->anchor_scale, UNIT_PERCENT, 3) : NULL,
        NULL);
}

/* What is to be said of one stage stands at its first row. */
static void add_notes(struct table_builder *builder, const struct stage_findings *stage,
                      struct cell *cell)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    table_note(builder, cell, stage->near_rating ? phrase(say, "stage.near_rating", NULL) : NULL);
    table_note(builder, cell, not_judged_note(composition, stage));
    table_note(builder, cell,
               stage->law_status == LAW_WARN_MU12 ? phrase(say, "stage.mu12", NULL) : NULL);
    const struct reconciled_findings *all = composition->findings->bench.reconciled;
    if (!all) {
        table_note(builder, cell, grid_current_note(composition, stage));
        return;
    }
    const struct reconciled_findings *found = &all[stage - composition->findings->stages];
    table_note(builder, cell, unexplained_note(composition, found, PHASE_FOUND));
    table_note(builder, cell, unexplained_note(composition, found, PHASE_LEFT));
    table_note(builder, cell, explained_note(composition, found));
    table_note(builder, cell, bounds_note(composition, found));
}

/* A stage of which nothing is known gets no line. */
static bool add_stage(struct table_builder *builder, const struct stage_findings *stage)
{
    struct table *table = builder->table;
    size_t first = table->row_count + 1;
    table_group(builder, stage_title(builder->composition, stage->stage));
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        add_row(builder, stage, i);
    if (table->row_count == first) {
        table->row_count--;
        return false;
    }
    add_notes(builder, stage, &table->rows[first].cells[STAGE_LABEL]);
    return true;
}

void exhibit_stages(struct composition *composition, size_t index)
{
    (void)index;
    const struct findings *findings = composition->findings;
    struct table_builder builder = table_begin(composition, "stage-figures", plan, STAGE_COLUMNS);
    builder.table->group_head = phrase(&composition->say, "head.in_stage", NULL);
    bool bold = false, any = false;
    for (size_t i = 0; i < findings->stage_count; i++) {
        any |= add_stage(&builder, &findings->stages[i]);
        bold |= exceeds_rating(&findings->stages[i]);
    }
    if (!any)
        return;
    const char *at_the_set = phrase(&composition->say, "head.at_the_set", NULL);
    builder.table->columns[STAGE_SET_FOUND].unit = at_the_set;
    builder.table->columns[STAGE_SET_LEFT].unit = at_the_set;
    const char *sentences[] = {
        bold ? phrase(&composition->say, "stage.bold", NULL) : NULL,
        phrase(&composition->say, "stage.book_valve", NULL),
    };
    builder.table->remark = text_join(composition->arena, " ", sentences, 2);
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.stages", NULL));
}
