/* Voltages, performance and safety measurements, as they were written down, and what follows. */
#include "report/held_words.h"

static const struct bench_findings *bench_of(const struct composition *composition)
{
    return &composition->findings->bench;
}

/* Today's reading beside what the sheet's figure would be by this meter and these mains. */
static void compare_volts(struct table_builder *builder, const struct voltage_findings *found,
                          int which, struct cell *expected, struct cell *read)
{
    const struct composition *composition = builder->composition;
    if (isfinite(found->expected_v[which]))
        expected->figures = figures_plain(composition, found->expected_v[which], 1,
                                          found->expected_v[which] >= 100 ? 0 : 1);
    read->strong = held_fails(&found->compared[which]);
}

/* What a point cannot be compared for; the same for all points is said once. */
static const char *uncompared_words(const struct composition *composition,
                                    const struct voltage_point *point,
                                    const struct voltage_findings *found)
{
    const struct held *held = &found->compared[point->found.set ? 0 : 1];
    return point->sheet.set && held->outcome == OUTCOME_NOT_JUDGED ? held_words(composition, held)
                                                                   : NULL;
}

void exhibit_voltages(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"point", NULL, NULL, COLUMN_REF, 25, 1},
        {"sheet_volts", "V", "sheet_volts", COLUMN_NUMBER, 15, 1},
        {"expected_found", "V", "expected_found", COLUMN_NUMBER, 15, 2},
        {"found", "V", "found", COLUMN_NUMBER, 15, 1},
        {"expected_left", "V", "expected_left", COLUMN_NUMBER, 15, 2},
        {"left", "V", "left", COLUMN_NUMBER, 15, 1},
    };
    const struct voltage_findings *compared = bench_of(composition)->voltages;
    const struct voltages *voltages = &composition->job->voltages;
    struct table_builder builder =
        table_begin(composition, "voltages", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < voltages->point_count; i++) {
        const struct voltage_point *point = &voltages->points[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = point->name;
        cells[1].figures = figures_volts(composition, &point->sheet);
        cells[3].figures = figures_volts(composition, &point->found);
        cells[5].figures = figures_volts(composition, &point->left);
        if (!compared)
            continue;
        compare_volts(&builder, &compared[i], 0, &cells[2], &cells[3]);
        compare_volts(&builder, &compared[i], 1, &cells[4], &cells[5]);
        table_note(&builder, &cells[0], uncompared_words(composition, point, &compared[i]));
    }
    table_drop_empty(&builder);
    builder.table->remark = phrase(&composition->say, "voltages.remark", "meter",
                                   text_quantity(composition, &voltages->meter), NULL);
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.voltages", "sheet_mains",
                       text_quantity(composition, &voltages->sheet_mains), "found_mains",
                       text_quantity(composition, &voltages->found_mains), "left_mains",
                       text_quantity(composition, &voltages->left_mains), NULL));
}

/* "−17.4 dB"; NULL: the two do not compare. */
static const char *change_of(const struct composition *composition, size_t index)
{
    const struct performance_findings *found = bench_of(composition)->performance;
    if (!found)
        return NULL;
    double db = found[index].db, percent = found[index].percent;
    if (isfinite(db))
        return text_signed(composition->arena, fabs(db) < 0.05 ? 0 : db, UNIT_DECIBEL,
                           fabs(db) < 10 ? 2 : 3);
    return isfinite(percent)
               ? text_signed(composition->arena, fabs(percent) < 0.5 ? 0 : percent, UNIT_PERCENT, 2)
               : NULL;
}

void exhibit_performance(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"measured", NULL, NULL, COLUMN_REF, 28, 1},
        {"found", NULL, "found", COLUMN_NUMBER, 15, 1},
        {"left", NULL, "left", COLUMN_NUMBER, 15, 1},
        {"change", NULL, "change", COLUMN_TEXT, 13, 2},
        {"conditions", NULL, "conditions", COLUMN_TEXT, 29, 3},
    };
    struct table_builder builder =
        table_begin(composition, "performance", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->job->performance_count; i++) {
        const struct performance_row *row = &composition->job->performance[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = row->name;
        cells[1].figures = figures_quantity(composition, &row->found);
        cells[2].figures = figures_quantity(composition, &row->left);
        cells[1].text = row->found.set ? NULL : row->written_found;
        cells[2].text = row->left.set ? NULL : row->written_left;
        cells[3].text = change_of(composition, i);
        cells[4].text = row->conditions.text;
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.performance", NULL));
}

/* The published figure, where one is known, and what the reading is beside it. */
static void hold_safety(struct table_builder *builder, const struct safety_findings *found,
                        struct cell *cells)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    if (found->kind == SAFETY_KIND_COUNT || isnan(safety_figure(found->kind)->limit))
        return;
    const char *words[] = {held_limits(composition, &found->value),
                           held_words(composition, &found->value)};
    cells[3].text = text_join(composition->arena, ", ", words, 2);
    cells[1].strong = held_fails(&found->value);
    cells[2].strong = held_fails(&found->second);
    table_note(builder, &cells[3], source_words(composition, found->value.source));
    if (isfinite(found->predicted_a))
        table_note(builder, &cells[0],
                   phrase(say, "safety.predicted", "current",
                          text_unit(composition, found->predicted_a, UNIT_CURRENT, 2), NULL));
}

void exhibit_safety(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"measured", NULL, NULL, COLUMN_REF, 27, 1},
        {"value", NULL, "value", COLUMN_NUMBER, 13, 1},
        {"other_polarity", NULL, "other_polarity", COLUMN_NUMBER, 13, 2},
        {"published_figure", NULL, "published_figure", COLUMN_TEXT, 23, 2},
        {"conditions", NULL, "conditions", COLUMN_TEXT, 24, 3},
    };
    struct table_builder builder =
        table_begin(composition, "safety", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->job->safety_count; i++) {
        const struct safety_row *row = &composition->job->safety[i];
        const char *conditions[] = {
            text_quantity(composition, &row->at_volts),
            text_quantity(composition, &row->time),
            row->conditions.text,
        };
        struct cell *cells = table_row(&builder);
        cells[0].text = row->name;
        cells[1].figures = figures_quantity(composition, &row->value);
        cells[1].text = row->value.set ? NULL : row->written;
        cells[2].figures = figures_quantity(composition, &row->second);
        cells[4].text = text_join(composition->arena, ", ", conditions, 3);
        if (bench_of(composition)->safety)
            hold_safety(&builder, &bench_of(composition)->safety[i], cells);
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.safety", NULL));
}
