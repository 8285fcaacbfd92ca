/* Voltages, performance and safety measurements, as they were written down. */
#include "report/composition.h"

void exhibit_voltages(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"point", NULL, NULL, COLUMN_REF, 34, 1},
        {"sheet_volts", "V", "sheet_volts", COLUMN_NUMBER, 22, 1},
        {"found", "V", "found", COLUMN_NUMBER, 22, 1},
        {"left", "V", "left", COLUMN_NUMBER, 22, 1},
    };
    const struct voltages *voltages = &composition->job->voltages;
    struct table_builder builder =
        table_begin(composition, "voltages", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < voltages->point_count; i++) {
        const struct voltage_point *point = &voltages->points[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = point->name;
        cells[1].figures = figures_volts(composition, &point->sheet);
        cells[2].figures = figures_volts(composition, &point->found);
        cells[3].figures = figures_volts(composition, &point->left);
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

void exhibit_performance(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"measured", NULL, NULL, COLUMN_REF, 30, 1},
        {"found", NULL, "found", COLUMN_NUMBER, 18, 1},
        {"left", NULL, "left", COLUMN_NUMBER, 18, 1},
        {"conditions", NULL, "conditions", COLUMN_TEXT, 34, 3},
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
        cells[3].text = row->conditions.text;
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.performance", NULL));
}

void exhibit_safety(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"measured", NULL, NULL, COLUMN_REF, 34, 1},
        {"value", NULL, "value", COLUMN_NUMBER, 16, 1},
        {"other_polarity", NULL, "other_polarity", COLUMN_NUMBER, 16, 2},
        {"conditions", NULL, "conditions", COLUMN_TEXT, 34, 3},
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
        cells[3].text = text_join(composition->arena, ", ", conditions, 3);
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.safety", NULL));
}
