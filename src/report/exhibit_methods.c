/* Methods: the instruments. What limits and sources were used: methods_values.c. */
#include "report/composition.h"

static const char *accuracy_text(const struct composition *composition,
                                 const struct instrument *instrument)
{
    if (instrument->accuracy_set)
        return text_with_micro(composition->arena, instrument->accuracy_written);
    struct quantity usual = {.set = true,
                             .value = 100 * composition->shop->policy.default_accuracy,
                             .unit = UNIT_PERCENT};
    return phrase(&composition->say, "instrument.default_accuracy", "percent",
                  text_quantity(composition, &usual), NULL);
}

static const char *details_text(const struct composition *composition,
                                const struct instrument *instrument)
{
    const struct phrasing *say = &composition->say;
    const struct {
        const char *key;
        const struct quantity *value;
    } items[] = {
        {"instrument.resolution", &instrument->resolution},
        {"instrument.series", &instrument->series},
        {"instrument.burden", &instrument->burden},
        {"instrument.sensitivity", &instrument->sensitivity},
        {"instrument.input", &instrument->input},
        {"instrument.supply_current", &instrument->supply_current},
        {"instrument.volts_accuracy", &instrument->volts_accuracy},
    };
    const char *texts[sizeof items / sizeof *items] = {0};
    for (size_t i = 0; i < sizeof items / sizeof *items; i++)
        if (items[i].value->set)
            texts[i] = phrase(say, items[i].key, "value",
                              text_quantity(composition, items[i].value), NULL);
    return text_join(composition->arena, ", ", texts, sizeof items / sizeof *items);
}

void exhibit_instruments(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"instrument", NULL, NULL, COLUMN_REF, 11, 1},
        {"description", NULL, "description", COLUMN_TEXT, 28, 1},
        {"accuracy", NULL, "accuracy", COLUMN_TEXT, 17, 1},
        {"details", NULL, "details", COLUMN_TEXT, 31, 1},
        {"compared", NULL, "compared", COLUMN_TEXT, 13, 1},
    };
    struct table_builder builder =
        table_begin(composition, "instruments", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < composition->job->instrument_count; i++) {
        const struct instrument *instrument = &composition->job->instruments[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = instrument->name;
        cells[1].text = instrument->description;
        cells[2].text = accuracy_text(composition, instrument);
        cells[3].text = details_text(composition, instrument);
        cells[4].text = instrument->compared.set
                            ? instrument->compared.written
                            : phrase(&composition->say, "instrument.never_compared", NULL);
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.instruments", NULL));
}
