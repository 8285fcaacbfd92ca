/* The bench sheet's leakage table: what to lift, volts, soak, limit, and blanks. */
#include "report/composition.h"
#include "report/phrases.h"

#include <string.h>

enum {
    SHEET_REF,
    SHEET_PLACE,
    SHEET_MARKED,
    SHEET_SET,
    SHEET_SOAK,
    SHEET_LIMIT,
    SHEET_LIMIT_OHM,
    SHEET_EARLIER,
    SHEET_AT_SOAK,
    SHEET_MEASURED,
    SHEET_DONE,
    SHEET_COLUMNS
};

static const struct column_plan plan[SHEET_COLUMNS] = {
    [SHEET_REF] = {"ref", NULL, NULL, COLUMN_REF, 5.5, 1},
    [SHEET_PLACE] = {"place", NULL, NULL, COLUMN_TEXT, 16, 1},
    [SHEET_MARKED] = {"marked", NULL, NULL, COLUMN_NUMBER, 10.5, 1},
    [SHEET_SET] = {"set", NULL, NULL, COLUMN_NUMBER, 6, 1},
    [SHEET_SOAK] = {"soak", NULL, NULL, COLUMN_NUMBER, 6, 1},
    [SHEET_LIMIT] = {"limit", "µA", NULL, COLUMN_NUMBER, 7, 1},
    [SHEET_LIMIT_OHM] = {"or", "MΩ", NULL, COLUMN_NUMBER, 6.5, 1},
    [SHEET_EARLIER] = {"earlier", "time, µA", NULL, COLUMN_BLANK, 12.5, 1},
    [SHEET_AT_SOAK] = {"at_soak", "µA", NULL, COLUMN_BLANK, 12.5, 1},
    [SHEET_MEASURED] = {"measured", NULL, NULL, COLUMN_BLANK, 8.5, 1},
    [SHEET_DONE] = {"done", NULL, NULL, COLUMN_BLANK, 9, 1},
};

/* What to write down is set out for a part that a reading can decide. */
static void set_test(const struct composition *composition, struct cell *cells,
                     const struct capacitor_findings *part)
{
    cells[SHEET_SET].figures = figures_unit(composition, part->sheet_voltage_v, UNIT_VOLTAGE, 3);
    cells[SHEET_SOAK].figures = figures_unit(composition, part->sheet_soak_s, UNIT_TIME, 2);
    cells[SHEET_LIMIT].figures = figures_micro(composition, part->sheet_limit_a, 2);
    if (!isfinite(part->sheet_limit_ohm))
        return;
    /* Rounded up: a part at the printed figure is never above its limit. */
    double ohm = round_figures(part->sheet_limit_ohm, 2, true);
    bool in_kiloohms = ohm >= 1e3 && ohm < 1e4; /* no finer than a third decimal */
    if (in_kiloohms)
        ohm = round_figures(part->sheet_limit_ohm, 1, true);
    cells[SHEET_LIMIT_OHM].figures =
        figures_plain(composition, ohm, 1e6, in_kiloohms ? 3 : decimals_for(ohm, 1e6, 2));
}

/* "No limit yet: the job does not say: feed." */
static const char *no_limit_text(const struct composition *composition,
                                 const struct capacitor_findings *part)
{
    const struct phrasing *say = &composition->say;
    struct capacitor_findings asked = *part;
    asked.missing = part->sheet_missing;
    const char *why =
        phrase_of(say, arena_print(say->arena, "why.%s", reason_text(part->sheet_why)),
                  part_values(say, composition->job, &asked));
    return phrase(say, "sheet.no_limit", "why", why, NULL);
}

static void add_sheet_notes(struct table_builder *builder, struct cell *cell,
                            const struct capacitor_findings *part)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    struct mustache_value *values = part_values(say, composition->job, part);
    if (part->no_reading_passes)
        return;
    if (part->sheet_not_with_this_meter)
        table_note(builder, cell, phrase_of(say, "sheet.not_with_this_meter", values));
    else if (part->sheet_why != WHY_NONE)
        table_note(builder, cell, no_limit_text(composition, part));
    else if (isnan(part->sheet_voltage_v) && part->part->marked.rated.set)
        table_note(builder, cell,
                   phrase(say, "sheet.no_volts", "rated",
                          text_quantity(composition, &part->part->marked.rated), NULL));
    else if (part->sheet_proves_fail_only)
        table_note(builder, cell, phrase_of(say, "sheet.proves_a_fail", values));
    else if (part->limit_none)
        table_note(builder, cell, phrase_of(say, "sheet.limit_none", values));
    if (part->sheet_instrument > 0 &&
        strcmp(composition->job->instruments[part->sheet_instrument].name, "leakage") != 0)
        table_note(builder, cell,
                   phrase(say, "sheet.by_instrument", "instrument",
                          composition->job->instruments[part->sheet_instrument].name, NULL));
    if (isfinite(part->sheet_series_max_ohm))
        table_note(builder, cell,
                   phrase(say, "sheet.series_max", "ohm",
                          text_unit(composition, part->sheet_series_max_ohm, UNIT_RESISTANCE, 2),
                          NULL));
}

/* The tester's resistance matters where the instrument has more than the part allows. */
static bool series_too_large(const struct composition *composition,
                             const struct capacitor_findings *part)
{
    for (size_t i = 0; i < composition->job->instrument_count; i++)
        if (composition->job->instruments[i].series.set &&
            composition->job->instruments[i].series.value > part->sheet_series_max_ohm)
            return true;
    return false;
}

static void add_part(struct table_builder *builder, size_t index)
{
    const struct composition *composition = builder->composition;
    struct capacitor_findings part = composition->findings->capacitors[index];
    struct cell *cells = table_row(builder);
    const char *place = place_text(part.part->place);
    if (!series_too_large(composition, &part))
        part.sheet_series_max_ohm = NAN;
    cells[SHEET_REF].text = part.part->ref;
    cells[SHEET_PLACE].text = phrase_in(&composition->say, "place", place);
    cells[SHEET_PLACE].second = part.no_reading_passes
                                    ? phrase(&composition->say, "sheet.not_tested", NULL)
                                    : phrase_in(&composition->say, "lift", place);
    set_marked_value(composition, &cells[SHEET_MARKED], &part.part->marked);
    cells[SHEET_MARKED].second = text_quantity(composition, &part.part->marked.rated);
    if (part.no_reading_passes)
        cells[SHEET_SET].text = phrase_of(&composition->say, "sheet.no_reading_passes",
                                          part_values(&composition->say, composition->job, &part));
    else
        set_test(composition, cells, &part);
    add_sheet_notes(builder, &cells[SHEET_REF], &part);
}

void exhibit_sheet_leakage(struct composition *composition, size_t index)
{
    (void)index;
    struct table_builder builder = table_begin(composition, "sheet-leakage", plan, SHEET_COLUMNS);
    builder.table->write_in = true;
    builder.table->columns[SHEET_PLACE].unit = phrase(&composition->say, "head.end_to_lift", NULL);
    builder.table->columns[SHEET_MEASURED].unit = "C";
    const size_t *order = capacitors_by_place(composition);
    for (size_t i = 0; i < composition->findings->capacitor_count; i++)
        add_part(&builder, order[i]);
    table_place(&builder, NUMBERED_SHEET, phrase(&composition->say, "caption.sheet_leakage", NULL));
}

void exhibit_write_on(struct composition *composition, size_t index)
{
    (void)index;
    static const struct {
        const char *key, *unit;
        double width;
    } items[] = {
        {"date", "", 2}, {"bench", "°C", 1}, {"humidity", "%", 1}, {"meter", "", 3}, {"by", "", 2},
    };
    enum { COUNT = sizeof items / sizeof *items };
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_WRITE_ON, "write-on");
    exhibit->write_on.items =
        arena_array(composition->arena, COUNT, sizeof *exhibit->write_on.items);
    exhibit->write_on.count = COUNT;
    for (size_t i = 0; i < COUNT; i++)
        exhibit->write_on.items[i] = (struct write_on){
            phrase_in(&composition->say, "write_on", items[i].key), items[i].unit, items[i].width};
    exhibit_place(composition, exhibit);
}
