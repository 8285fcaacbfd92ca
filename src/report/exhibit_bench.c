/* What the assessment says of reforms, the supply, replacements and date codes. */
#include "report/held_words.h"

static const struct bench_findings *bench_of(const struct composition *composition)
{
    return &composition->findings->bench;
}

/* ---- reforming, step by step */

static const struct reform_findings *reform_of(const struct composition *composition, size_t index)
{
    const struct reform_findings *reforms = bench_of(composition)->reforms;
    return reforms && index < composition->job->reform_count && reforms[index].reform
               ? &reforms[index]
               : NULL;
}

static const char *law_words(const struct composition *composition, const struct reform_step *step)
{
    const struct phrasing *say = &composition->say;
    if (step->decay.better < 0)
        return NULL;
    const struct decay *decay = &step->decay.laws[step->decay.better];
    return phrase(say, decay->law == DECAY_POWER ? "reform.power" : "reform.exponential", "steady",
                  text_micro(composition->arena, decay->steady_a, 3), NULL);
}

static const char *step_words(const struct composition *composition,
                              const struct reform_findings *reform, const struct reform_step *step)
{
    const struct phrasing *say = &composition->say;
    bool impossible = false;
    for (size_t i = step->first; i < step->first + step->count; i++)
        impossible = impossible || reform->part_v[i] < 0;
    const char *words[] = {
        impossible ? phrase(say, "reason.impossible", NULL) : NULL,
        step->in_order ? NULL : phrase(say, "reason.out of order", NULL),
        step->rising ? phrase(say, "reform.rising", NULL) : NULL,
        step->watts > reform->ceiling_w
            ? phrase(say, "reform.watts", "ceiling",
                     text_unit(composition, reform->ceiling_w, UNIT_POWER, 2), NULL)
            : NULL,
        step->in_order && !step->reached && isfinite(step->part_v)
            ? phrase(say, "reform.not_reached", NULL)
            : NULL,
        law_words(composition, step),
    };
    return text_join(composition->arena, "; ", words, sizeof words / sizeof *words);
}

static const char *time_text(const struct composition *composition, double seconds)
{
    return isfinite(seconds) && seconds > 0 ? text_unit(composition, seconds, UNIT_TIME, 2) : NULL;
}

/* "The last step levels at ... ± ...; it would meet the limit after ..." */
static const char *plateau_words(const struct composition *composition,
                                 const struct reform_findings *reform)
{
    const struct phrasing *say = &composition->say;
    if (reform->plateau_step < 0)
        return phrase(say, "reform.no_plateau", NULL);
    bool under =
        reform->plateau_a + reform->plateau_error_a < reform->steps[reform->plateau_step].limit_a;
    bool within = reform->to_limit_s <= reform->horizon_s;
    bool met = reform->steps[reform->plateau_step].current_a <=
               reform->steps[reform->plateau_step].limit_a;
    const char *late = reform->to_limit_late_s <= reform->horizon_s
                           ? time_text(composition, reform->to_limit_late_s)
                           : phrase(say, "reform.never", NULL);
    const char *sentences[] = {
        phrase(say, "reform.plateau", "step",
               arena_print(composition->arena, "%d", reform->plateau_step + 1), "steady",
               text_micro(composition->arena, reform->plateau_a, 3), "error",
               text_micro(composition->arena, reform->plateau_error_a, 2), "between",
               reform->between_laws ? "yes" : NULL, "alike",
               !reform->between_laws && !reform->steps[reform->plateau_step].decay.preferred ? "yes"
                                                                                             : NULL,
               NULL),
        within && !met
            ? phrase(say, "reform.to_limit", "time", time_text(composition, reform->to_limit_s),
                     "early", time_text(composition, reform->to_limit_early_s), "late", late, NULL)
        : under ? phrase(say, "reform.under", NULL)
                : NULL,
    };
    return text_join(composition->arena, " ", sentences, 2);
}

static const char *rest_words(const struct composition *composition,
                              const struct reform_findings *reform)
{
    const struct phrasing *say = &composition->say;
    if (reform->outcome == OUTCOME_NOT_JUDGED)
        return phrase(say, "reform.unjudged", "why",
                      phrase(say,
                             arena_print(composition->arena, "why.%s", reason_text(reform->why)),
                             "missing", reform->missing, NULL),
                      NULL);
    return phrase(say, reform->rebound ? "reform.rebound" : "reform.outcome", "value",
                  text_micro(composition->arena, reform->rest.value, 3), "uncertainty",
                  text_micro(composition->arena, reform->rest.uncertainty, 2), "limit",
                  text_micro(composition->arena, reform->rest.high, 2), "volts",
                  text_unit(composition, reform->rest_v, UNIT_VOLTAGE, 3), "outcome",
                  phrase_in(say, "outcome", outcome_text(reform->outcome)), NULL);
}

void exhibit_reform_steps(struct composition *composition, size_t index)
{
    static const struct column_plan plan[] = {
        {"step", NULL, NULL, COLUMN_REF, 8, 1},
        {"set", "V", NULL, COLUMN_NUMBER, 10, 1},
        {"volts_on_part", "V", NULL, COLUMN_NUMBER, 12, 1},
        {"last", "µA", NULL, COLUMN_NUMBER, 12, 1},
        {"time", NULL, "time", COLUMN_NUMBER, 14, 2},
        {"heat", "W", "heat", COLUMN_NUMBER, 10, 2},
        {"remarks", NULL, NULL, COLUMN_TEXT, 34, 3},
    };
    const struct reform_findings *reform = reform_of(composition, index);
    if (!reform || reform->step_count == 0)
        return;
    struct table_builder builder =
        table_begin(composition, arena_print(composition->arena, "reform-steps-%zu", index + 1),
                    plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 0; i < reform->step_count; i++) {
        const struct reform_step *step = &reform->steps[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = arena_print(composition->arena, "%zu", i + 1);
        cells[1].figures = figures_plain(composition, step->set_v, 1, 0);
        cells[2].figures = figures_plain(composition, step->part_v, 1, 0);
        cells[3].figures = figures_micro(composition, step->current_a, 3);
        cells[4].figures = figures_unit(composition, step->duration_s, UNIT_TIME, 3);
        cells[5].figures = figures_plain(composition, step->watts, 1, 2);
        cells[5].strong = step->watts > reform->ceiling_w;
        cells[6].text = step_words(composition, reform, step);
    }
    const char *sentences[] = {plateau_words(composition, reform), rest_words(composition, reform)};
    builder.table->remark = text_join(composition->arena, " ", sentences, 2);
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.reform_steps", "ref",
                       composition->job->capacitors[reform->capacitor].ref, NULL));
}

/* ---- supply */

static struct figures volts_of(const struct composition *composition, double volts)
{
    return isfinite(volts) ? figures_plain(composition, volts, 1,
                                           volts >= 10  ? 0
                                           : volts >= 1 ? 1
                                                        : 3)
                           : (struct figures){0};
}

static const char *decibels(const struct composition *composition, double db)
{
    return isfinite(db) ? text_signed(composition->arena, fabs(db) < 0.05 ? 0 : db, UNIT_DECIBEL,
                                      fabs(db) < 10 ? 2 : 3)
                        : NULL;
}

static const char *path_words(const struct composition *composition, const struct supply_node *node)
{
    const char *parts[] = {
        isfinite(node->series_ohm) ? text_unit(composition, node->series_ohm, UNIT_RESISTANCE, 3)
                                   : NULL,
        node->series_h > 0 ? text_unit(composition, node->series_h, UNIT_INDUCTANCE, 2) : NULL,
    };
    return text_join(composition->arena, ", ", parts, 2);
}

void exhibit_hum(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 9, 1},
        {"fed_through", NULL, "fed_through", COLUMN_TEXT, 17, 2},
        {"found", NULL, "calculated_found", COLUMN_NUMBER, 12, 2},
        {"found", NULL, "measured_found", COLUMN_NUMBER, 12, 1},
        {"left", NULL, "calculated_left", COLUMN_NUMBER, 12, 2},
        {"left", NULL, "measured_left", COLUMN_NUMBER, 12, 1},
        {"change", NULL, "change", COLUMN_TEXT, 26, 2},
    };
    const struct bench_findings *bench = bench_of(composition);
    struct table_builder builder =
        table_begin(composition, "hum", plan, sizeof plan / sizeof *plan);
    builder.table->lined = true;
    for (size_t i = 2; i <= 5; i++)
        builder.table->columns[i].unit =
            phrase(&composition->say, i % 2 ? "head.measured_v" : "head.calculated_v", NULL);
    for (size_t i = 0; i < bench->node_count; i++) {
        const struct supply_node *node = &bench->nodes[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = composition->job->capacitors[node->capacitor].ref;
        cells[1].text = path_words(composition, node);
        cells[2].figures = volts_of(composition, node->found.predicted_v);
        cells[3].figures = volts_of(composition, node->found.measured_v);
        cells[4].figures = volts_of(composition, node->left.predicted_v);
        cells[5].figures = volts_of(composition, node->left.measured_v);
        cells[6].text = phrase(&composition->say, "hum.change", "calculated",
                               decibels(composition, node->predicted_db), "measured",
                               decibels(composition, node->measured_db), NULL);
        if (!node->judged)
            table_note(&builder, &cells[0],
                       not_judged_words(composition, node->why, node->missing));
        if (isfinite(node->found.textbook_v))
            table_note(
                &builder, &cells[0],
                phrase(&composition->say, "hum.textbook", "found",
                       text_unit(composition, node->found.textbook_v, UNIT_VOLTAGE, 2), "left",
                       text_unit(composition, node->left.textbook_v, UNIT_VOLTAGE, 2), "frequency",
                       text_unit(composition, node->frequency_hz, UNIT_FREQUENCY, 3), NULL));
    }
    builder.table->remark = phrase(&composition->say, "hum.remark", NULL);
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.hum", NULL));
}

/* ---- replacements */

static const char *const check_names[REPLACEMENT_CHECK_COUNT] = {
    "value", "rating", "no_load", "ac_rating", "class", "pulse", "watts", "shell"};

/* "value +4 %": one check in words. */
static const char *check_words(const struct composition *composition,
                               const struct replacement_findings *found, size_t check)
{
    const struct held *held = &found->checks[check];
    const char *value =
        held->unit == UNIT_PERCENT  ? text_signed(composition->arena, held->value, UNIT_PERCENT, 2)
        : held->unit == UNIT_LENGTH ? text_unit(composition, fabs(held->value), UNIT_LENGTH, 2)
                                    : text_unit(composition, held->value, held->unit, 3);
    bool good = !held_fails(held);
    const char *key =
        arena_print(composition->arena, "replacement.%s%s", check_names[check], good ? "" : "_not");
    const char *limit =
        isfinite(held->low) ? text_unit(composition, held->low, held->unit, 3) : NULL;
    return phrase(&composition->say, key, "value", value, "limit", limit, NULL);
}

bool has_replacements(const struct composition *composition)
{
    const struct bench_findings *bench = bench_of(composition);
    for (size_t i = 0; i < bench->replacement_count; i++)
        for (size_t k = 0; k < REPLACEMENT_CHECK_COUNT; k++)
            if (bench->replacements[i].checked[k])
                return true;
    return false;
}

void exhibit_replacements(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 10, 1},
        {"meets", NULL, "meets", COLUMN_TEXT, 52, 1},
        {"does_not_meet", NULL, "does_not_meet", COLUMN_TEXT, 38, 1},
    };
    const struct bench_findings *bench = bench_of(composition);
    struct table_builder builder =
        table_begin(composition, "replacements", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < bench->replacement_count; i++) {
        const struct replacement_findings *found = &bench->replacements[i];
        const char *good[REPLACEMENT_CHECK_COUNT] = {0}, *bad[REPLACEMENT_CHECK_COUNT] = {0};
        for (size_t k = 0; k < REPLACEMENT_CHECK_COUNT; k++)
            if (found->checked[k])
                *(held_fails(&found->checks[k]) ? &bad[k] : &good[k]) =
                    check_words(composition, found, k);
        struct cell *cells = table_row(&builder);
        cells[0].text = found->ref;
        cells[1].text = text_join(composition->arena, "; ", good, REPLACEMENT_CHECK_COUNT);
        cells[2].text = text_join(composition->arena, "; ", bad, REPLACEMENT_CHECK_COUNT);
        cells[2].strong = true;
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.replacements", NULL));
}

/* ---- date codes */

static const char *date_words(const struct composition *composition,
                              const struct date_reading *reading)
{
    const struct phrasing *say = &composition->say;
    const char *year = arena_print(composition->arena, "%d", reading->year);
    if (reading->month)
        return arena_print(composition->arena, "%d-%02d", reading->year, reading->month);
    return reading->week ? phrase(say, "date.week", "year", year, "week",
                                  arena_print(composition->arena, "%d", reading->week), NULL)
                         : year;
}

static const char *fit_words(const struct composition *composition,
                             const struct date_findings *found)
{
    const struct phrasing *say = &composition->say;
    if (!found->known)
        return phrase(say, "date.unknown", NULL);
    if (found->nearest < 0)
        return NULL;
    if (found->refutes)
        return phrase(say, found->original ? "date.refutes" : "date.later", NULL);
    return phrase(say,
                  found->years_off == 0   ? "date.same"
                  : found->years_off > -2 ? "date.stock"
                                          : "date.older",
                  NULL);
}

void exhibit_date_codes(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"ref", NULL, NULL, COLUMN_REF, 12, 1},
        {"stamp", NULL, "stamp", COLUMN_TEXT, 18, 1},
        {"means", NULL, "means", COLUMN_TEXT, 26, 1},
        {"beside_the_set", NULL, "beside_the_set", COLUMN_TEXT, 44, 1},
    };
    const struct bench_findings *bench = bench_of(composition);
    struct table_builder builder =
        table_begin(composition, "date-codes", plan, sizeof plan / sizeof *plan);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < bench->date_count; i++) {
        const struct date_findings *found = &bench->dates[i];
        size_t nearest = found->nearest >= 0 ? (size_t)found->nearest : 0;
        struct cell *cells = table_row(&builder);
        cells[0].text = found->ref;
        cells[1].text = found->written;
        if (found->known) {
            cells[2].text = date_words(composition, &found->code.readings[nearest]);
            cells[2].second = found->code.decade_open
                                  ? phrase(&composition->say, "date.decade_open", NULL)
                                  : NULL;
            if (found->code.source != SOURCE_DATE_PLAIN)
                table_note(&builder, &cells[2], source_words(composition, found->code.source));
        }
        cells[3].text = fit_words(composition, found);
        cells[3].strong = found->refutes && found->original;
    }
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.date_codes", NULL));
}
