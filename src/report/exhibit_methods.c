/* Methods: the limits used, where figures come from, the instruments. */
#include "report/composition.h"

#include <string.h>

/* ---- shop policy */

#define AT(place)   (1u << PLACE_##place)
#define EVERYWHERE  0u
#define GRID_PLACES (AT(COUPLING) | AT(CATHODE_BYPASS) | AT(BIAS_BYPASS))
#define ISOLATORS                                                                                  \
    (AT(AERIAL_ISOLATOR) | AT(EARTH_ISOLATOR) | AT(GRAM_ISOLATOR) | AT(CHASSIS_ISOLATOR))
#define MAINS_PLACES  (ISOLATORS | AT(ACROSS_MAINS) | AT(MAINS_TO_CHASSIS))
#define SUPPLY_PLACES (AT(RESERVOIR) | AT(SMOOTHING))
#define HEATED        (AT(DECOUPLING) | AT(TONE) | SUPPLY_PLACES)

/* One limit: which member, how it is written, where it is used (EVERYWHERE: in every record). */
static const struct policy_row {
    const char *key; /* of `policy.` */
    size_t offset;
    enum unit unit;
    double factor; /* from the member to the unit: 100 for a fraction in per cent */
    unsigned places;
} rows[] = {
#define ROW(member, unit, factor, places)                                                          \
    {                                                                                              \
#member, offsetof(struct policy, member), unit, factor, places                             \
    }
    ROW(guard_band, UNIT_NONE, 1, EVERYWHERE),
    ROW(instrument_share, UNIT_PERCENT, 100, EVERYWHERE),
    ROW(cathode_current_rise, UNIT_PERCENT, 100, GRID_PLACES),
    ROW(dissipation_share, UNIT_PERCENT, 100, AT(COUPLING)),
    ROW(pushpull_difference, UNIT_PERCENT, 100, AT(COUPLING)),
    ROW(grid_shift, UNIT_PERCENT, 100, AT(COUPLING)),
    ROW(avc_line_loss, UNIT_PERCENT, 100, AT(AVC_BYPASS)),
    ROW(avc_feed_v, UNIT_VOLTAGE, 1, AT(AVC_FEED)),
    ROW(avc_feed_bias_share, UNIT_PERCENT, 100, AT(AVC_FEED)),
    ROW(screen_fall, UNIT_PERCENT, 100, AT(SCREEN_BYPASS)),
    ROW(rail_drop, UNIT_PERCENT, 100, AT(DECOUPLING)),
    ROW(ht_current_share, UNIT_PERCENT, 100, SUPPLY_PLACES),
    ROW(detector_control_v, UNIT_VOLTAGE, 1, AT(DETECTOR)),
    ROW(detector_grid_share, UNIT_PERCENT, 100, AT(DETECTOR)),
    ROW(tuning_resistance_ratio, UNIT_NONE, 1, AT(TUNING)),
    ROW(battery_share, UNIT_PERCENT, 100, AT(BATTERY_BYPASS)),
    ROW(battery_before_switch_a, UNIT_CURRENT, 1, AT(BATTERY_BYPASS)),
    ROW(heat_paper_w, UNIT_POWER, 1, HEATED),
    ROW(heat_can_w, UNIT_POWER, 1, SUPPLY_PLACES),
    ROW(heat_tubular_w, UNIT_POWER, 1, SUPPLY_PLACES),
    ROW(isolator_insulation_ohm, UNIT_RESISTANCE, 1, MAINS_PLACES),
    ROW(touch_current_a, UNIT_CURRENT, 1, ISOLATORS),
    ROW(mains_rise, UNIT_NONE, 1, MAINS_PLACES),
    ROW(ageing_margin_waxed, UNIT_NONE, 1, EVERYWHERE),
    ROW(ageing_margin_other, UNIT_NONE, 1, EVERYWHERE),
    ROW(working_c, UNIT_TEMPERATURE, 1, EVERYWHERE),
    ROW(working_near_heat_c, UNIT_TEMPERATURE, 1, EVERYWHERE),
    ROW(default_accuracy, UNIT_PERCENT, 100, EVERYWHERE),
    ROW(volts_accuracy, UNIT_PERCENT, 100, EVERYWHERE),
    ROW(repeatability, UNIT_PERCENT, 100, EVERYWHERE),
#undef ROW
};

static double policy_value(const struct policy *policy, const struct policy_row *row)
{
    return *(const double *)(const void *)((const char *)policy + row->offset);
}

static unsigned places_of(const struct findings *findings)
{
    unsigned places = 0;
    for (size_t i = 0; i < findings->capacitor_count; i++)
        places |= 1u << findings->capacitors[i].part->place;
    return places;
}

static const char *policy_text(const struct composition *composition, double value,
                               const struct policy_row *row)
{
    struct quantity quantity = {.set = true, .value = value * row->factor, .unit = row->unit};
    return text_quantity(composition, &quantity);
}

void exhibit_policy(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"limit_of", NULL, NULL, COLUMN_TEXT, 56, 1},
        {"value", NULL, "value", COLUMN_TEXT, 16, 1},
        {"set_by", NULL, "set_by", COLUMN_TEXT, 28, 1},
    };
    const struct shop defaults = shop_default();
    unsigned places = places_of(composition->findings);
    struct table_builder builder =
        table_begin(composition, "policy", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        if (rows[i].places != EVERYWHERE && !(rows[i].places & places))
            continue;
        double value = policy_value(&composition->shop->policy, &rows[i]);
        double usual = policy_value(&defaults.policy, &rows[i]);
        struct cell *cells = table_row(&builder);
        cells[0].text = phrase_in(&composition->say, "policy", rows[i].key);
        cells[1].text = policy_text(composition, value, &rows[i]);
        cells[2].text = value == usual
                            ? phrase(&composition->say, "methods.policy_default", NULL)
                            : phrase(&composition->say, "methods.policy_changed", "usual",
                                     policy_text(composition, usual, &rows[i]), NULL);
    }
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.policy", NULL));
}

/* ---- sources */

static void mark_source(bool *used, enum source_key source)
{
    if (source != SOURCE_NONE && source != SOURCE_POLICY && source < SOURCE_COUNT)
        used[source] = true;
}

static void mark_used(const struct findings *findings, bool *used)
{
    mark_source(used, SOURCE_GUM);
    mark_source(used, SOURCE_ILAC_G8);
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        const struct capacitor_findings *part = &findings->capacitors[i];
        for (size_t j = 0; j < part->criterion_count; j++)
            mark_source(used, part->criteria[j].source);
        for (size_t j = 0; j < part->other_rule_count; j++)
            mark_source(used, part->other_rules[j].source);
        if (part->deciding >= 0)
            mark_source(used, part->theta_source);
        if (part->absorption.status == ABSORPTION_RESOLVED)
            mark_source(used, SOURCE_CURIE_VON_SCHWEIDLER);
    }
    for (size_t i = 0; i < findings->stage_count; i++) {
        mark_source(used, findings->stages[i].row_source);
        if (findings->stages[i].phases[PHASE_DESIGNED].judged)
            mark_source(used, SOURCE_THREE_HALVES_LAW);
    }
}

static const char *trust_words(const struct composition *composition, enum trust trust)
{
    return phrase_in(&composition->say, "trust", trust_text(trust));
}

static void add_stage_source(struct table_builder *builder, const struct stage_findings *stage)
{
    const struct composition *composition = builder->composition;
    if (!stage->row_source_text)
        return;
    struct cell *cells = table_row(builder);
    cells[0].text = phrase(&composition->say, "methods.stage_source", "stage", stage->stage->name,
                           "valve", stage->stage->valve_type, "row", stage->row_name, "source",
                           stage->row_source_text, NULL);
    cells[1].text = stage->row_given ? phrase(&composition->say, "methods.row_given", NULL)
                                     : trust_words(composition, stage->row_trust);
}

void exhibit_sources(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"taken_from", NULL, "taken_from", COLUMN_TEXT, 70, 1},
        {"trust", NULL, "trust", COLUMN_TEXT, 30, 1},
    };
    bool used[SOURCE_COUNT] = {false};
    mark_used(composition->findings, used);
    struct table_builder builder =
        table_begin(composition, "sources", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < SOURCE_COUNT; i++) {
        if (!used[i])
            continue;
        const struct source_row *source = source_row((enum source_key)i);
        struct cell *cells = table_row(&builder);
        cells[0].text = source->title;
        cells[1].text = trust_words(composition, source->trust);
    }
    for (size_t i = 0; i < composition->findings->stage_count; i++)
        add_stage_source(&builder, &composition->findings->stages[i]);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.sources", NULL));
}

/* ---- instruments */

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
        {"instrument", NULL, NULL, COLUMN_REF, 14, 1},
        {"description", NULL, "description", COLUMN_TEXT, 24, 1},
        {"accuracy", NULL, "accuracy", COLUMN_TEXT, 20, 1},
        {"details", NULL, "details", COLUMN_TEXT, 28, 1},
        {"compared", NULL, "compared", COLUMN_TEXT, 14, 1},
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
