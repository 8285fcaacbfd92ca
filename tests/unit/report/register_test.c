/* Registers, measurements and soak curves of the record; what each says of the owner. */
#include "sample.h"

#include "report/composition.h"

#include "kit.h"

/* What the plain sample leaves out. */
struct extra {
    struct winding winding;
    struct control control;
    struct valve valve;
    struct can can;
    int held;
    struct voltage_point points[2];
    struct performance_row performance;
    struct safety_row safety;
    struct reading run[6];
    struct reading_findings judged[6];
};

static void add_parts(struct sample *sample, struct extra *extra)
{
    struct job *job = &sample->job;
    extra->winding = (struct winding){
        .ref = "T2",
        .marked = {.set = true,
                   .written = "310",
                   .value = sample_quantity(310, UNIT_RESISTANCE, "310")},
        .measured = sample_quantity(316, UNIT_RESISTANCE, "316"),
        .insulation = {.set = true, .value = 100e6, .unit = UNIT_RESISTANCE, .bound = BOUND_OVER},
        .temperature = sample_quantity(24, UNIT_TEMPERATURE, "24 C"),
        .done = DONE_KEPT,
        .note = sample_prose("hums a little", 90),
    };
    extra->control = (struct control){.ref = "VR1",
                                      .what = sample_prose("volume, 500k", 91),
                                      .done = DONE_REPLACED,
                                      .fitted = sample_prose("500k log", 92),
                                      .reason = sample_prose("worn through", 93)};
    extra->valve = (struct valve){.ref = "V4",
                                  .type = "6V6GT",
                                  .tested = sample_prose("78 %", 94),
                                  .done = DONE_KEPT,
                                  .was = WAS_EARLIER_REPAIR};
    extra->held = 1;
    extra->can = (struct can){.ref = "CAN1",
                              .holds = &extra->held,
                              .hold_count = 1,
                              .done = DONE_RESTUFFED,
                              .age = AGE_PERIOD,
                              .batch = "2030-E01",
                              .price = sample_prose("4.20", 95)};
    sample->capacitors[1].can = 0;
    sample->capacitors[1].done = DONE_OPEN;
    job->windings = &extra->winding;
    job->controls = &extra->control;
    job->valves = &extra->valve;
    job->cans = &extra->can;
    job->winding_count = job->control_count = job->valve_count = job->can_count = 1;
}

static void add_measurements(struct sample *sample, struct extra *extra)
{
    struct job *job = &sample->job;
    extra->points[0] = (struct voltage_point){.name = "V4 cathode",
                                              .sheet = sample_quantity(12.6, UNIT_VOLTAGE, ""),
                                              .found = sample_quantity(13.7, UNIT_VOLTAGE, ""),
                                              .left = sample_quantity(12, UNIT_VOLTAGE, "")};
    extra->points[1] = (struct voltage_point){.name = "HT 1",
                                              .sheet = sample_quantity(290, UNIT_VOLTAGE, ""),
                                              .found = sample_quantity(297, UNIT_VOLTAGE, "")};
    job->voltages = (struct voltages){.meter = sample_quantity(1000, UNIT_SENSITIVITY, ""),
                                      .found_mains = sample_quantity(232, UNIT_VOLTAGE, ""),
                                      .points = extra->points,
                                      .point_count = 2};
    extra->performance = (struct performance_row){.name = "hum",
                                                  .found = sample_quantity(38e-3, UNIT_VOLTAGE, ""),
                                                  .written_left = "none heard"};
    job->performance = &extra->performance;
    extra->safety = (struct safety_row){.name = "touch current",
                                        .value = sample_quantity(60e-6, UNIT_CURRENT, ""),
                                        .second = sample_quantity(40e-6, UNIT_CURRENT, ""),
                                        .at_volts = sample_quantity(230, UNIT_VOLTAGE, "")};
    job->safety = &extra->safety;
    job->performance_count = job->safety_count = 1;
    sample->stage.found =
        (struct stage_reading){.set = true, .cathode = sample_quantity(16.2, UNIT_VOLTAGE, "")};
}

/* Six readings of one run, the last of them decides. */
static void add_run(struct sample *sample, struct extra *extra)
{
    static const double times_s[] = {15, 30, 60, 120, 300, 600};
    struct capacitor_findings *part = &sample->parts[0];
    for (size_t i = 0; i < 6; i++) {
        extra->run[i] = (struct reading){.set_volts = sample_quantity(100, UNIT_VOLTAGE, ""),
                                         .time = sample_quantity(times_s[i], UNIT_TIME, "")};
        extra->judged[i] =
            (struct reading_findings){.reading = &extra->run[i],
                                      .part_v = 100,
                                      .current_a = 0.5e-6 + 0.3e-6 / pow(times_s[i] / 60, 0.9)};
    }
    part->readings = extra->judged;
    part->reading_count = 6;
    part->deciding = 5;
    part->absorption = (struct absorption){.status = ABSORPTION_RESOLVED,
                                           .reading_count = 6,
                                           .steady_a = 0.5e-6,
                                           .steady_error_a = 0.01e-6,
                                           .a_a = 0.3e-6,
                                           .n = 0.9,
                                           .wait_until_s = NAN};
}

static struct document *compose(struct sample *sample, struct extra *extra)
{
    *extra = (struct extra){0};
    add_parts(sample, extra);
    add_measurements(sample, extra);
    add_run(sample, extra);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    assert_non_null(document);
    assert_int_equal(sample->diagnostics.count, 0);
    return document;
}

static const struct table *table_of(const struct document *document, const char *id)
{
    const struct exhibit *exhibit = sample_exhibit(document, id);
    assert_non_null(exhibit);
    return &exhibit->table;
}

static const struct cell *cells_of(const struct table *table, const char *ref)
{
    for (size_t i = 0; i < table->row_count; i++)
        if (table->rows[i].cells[0].text && strcmp(table->rows[i].cells[0].text, ref) == 0)
            return table->rows[i].cells;
    fail_msg("no row %s", ref);
    return NULL;
}

static void test_registers(void **state)
{
    (void)state;
    struct extra extra;
    struct sample *sample = sample_begin();
    struct document *document = compose(sample, &extra);
    const struct cell *winding = cells_of(table_of(document, "windings"), "T2");
    assert_string_equal(winding[2].figures.whole, "316");
    assert_string_equal(winding[3].figures.bound, ">");
    const struct table *windings = table_of(document, "windings");
    assert_string_equal(windings->notes[0], "Measured at 24\u00A0°C.");
    assert_string_equal(windings->notes[1], "Hums a little.");
    assert_string_equal(cells_of(table_of(document, "controls"), "VR1")[2].text, "replaced");
    const struct table *valves = table_of(document, "valves");
    assert_int_equal(valves->column_count, 4); /* no maker is known: no column */
    assert_string_equal(cells_of(valves, "V4")[3].text, "kept; earlier repair");
    const struct cell *can = cells_of(table_of(document, "changed"), "CAN1");
    assert_string_equal(can[1].text, "C20 16\u00A0µF 450\u00A0V electrolytic");
    assert_string_equal(can[2].text, "not recorded");
    assert_string_equal(can[2].second, "period part, batch 2030-E01, price 4.20");
    assert_string_equal(can[4].text, "shell in place");
    const struct cell *control = cells_of(table_of(document, "changed"), "VR1");
    assert_string_equal(control[2].text, "500k log");
    assert_string_equal(control[3].text, "worn through");
    assert_string_equal(control[4].text, "not recorded");
    sample_end(sample, document);
}

/* 870 ohm, a wirewound of its day, is no value of IEC 60063; 270 ohm is one of E12. */
static void test_a_value_of_no_series_is_noted(void **state)
{
    (void)state;
    static const struct {
        enum e_series series;
        bool noted;
    } rows[] = {{E_SERIES_12, false}, {E_SERIES_COUNT, true}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct sample *sample = sample_begin();
        struct resistor_findings found = {
            .series = rows[i].series, .effect_percent = NAN, .dissipation = {.value = NAN}};
        sample->job.reform_count = 0;
        sample->findings.bench.resistors = &found;
        struct document *document = sample_compose(sample, DOCUMENT_RECORD);
        const struct table *table = table_of(document, "resistors");
        bool noted = false;
        for (size_t k = 0; k < table->note_count; k++)
            noted |= strstr(table->notes[k], "IEC 60063") != NULL;
        assert_true(noted == rows[i].noted);
        sample_end(sample, document);
    }
}

static void test_refs_are_set_apart(void **state)
{
    (void)state;
    static const char *const rows[][2] = {
        {"C7 C14 CAN1", "C7, C14, CAN1"},
        {"C19 R3, tied inside", "C19, R3, tied inside"},
        {"V1 V2.", "V1, V2."},
        {"the C14 C15 pair", "the C14, C15 pair"},
        {"C14 seen from CAN1", "C14 seen from CAN1"},
        {"EL84 6V6", "EL84 6V6"},
        {"C1a C2", "C1a C2"},
        {"", ""},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        assert_string_equal(text_refs(&arena, rows[i][0]), rows[i][1]);
    assert_null(text_refs(&arena, NULL));
    arena_release(&arena);
}

static void test_measurements(void **state)
{
    (void)state;
    struct extra extra;
    struct sample *sample = sample_begin();
    struct document *document = compose(sample, &extra);
    const struct table *voltages = table_of(document, "voltages");
    const struct cell *cathode = cells_of(voltages, "V4 cathode");
    assert_string_equal(cathode[1].figures.whole, "12");
    assert_string_equal(cathode[1].figures.fraction, ".6");
    assert_string_equal(cathode[3].figures.fraction, ""); /* 12 V as typed */
    assert_null(cells_of(voltages, "HT 1")[3].figures.whole);
    assert_non_null(strstr(voltages->remark, "1000\u00A0Ω/V"));
    assert_non_null(strstr(voltages->caption, "found with the mains at 232\u00A0V"));
    const struct table *performance = table_of(document, "performance");
    assert_int_equal(performance->column_count, 3); /* no conditions */
    assert_string_equal(performance->rows[0].cells[1].figures.unit, "mV");
    assert_string_equal(performance->rows[0].cells[2].text, "none heard");
    const struct cell *touch = cells_of(table_of(document, "safety"), "touch current");
    assert_string_equal(touch[1].figures.unit, "µA");
    assert_string_equal(touch[2].figures.whole, "40");
    assert_string_equal(touch[3].text, "230\u00A0V");
    const struct cell *stage = cells_of(table_of(document, "stage-figures"), "cathode");
    assert_string_equal(stage[5].figures.whole, "16");
    assert_string_equal(stage[5].figures.fraction, ".2");
    sample_end(sample, document);
}

static void test_soak_curve(void **state)
{
    (void)state;
    struct extra extra;
    struct sample *sample = sample_begin();
    struct document *document = compose(sample, &extra);
    const struct exhibit *exhibit = sample_exhibit(document, "soak-1");
    assert_non_null(exhibit);
    const struct curves *curves = &exhibit->plot.curves;
    const struct curve *curve = &curves->panels[0].curves[0];
    assert_int_equal(curves->panel_count, 1);
    assert_int_equal(curve->point_count, 6);
    assert_true(curve->points[5].deciding);
    assert_close(curves->panels[0].x_max_s, 600, 0);
    /* the fitted line is the law the points were made by */
    assert_close(curve->fit_from_s, 15, 0);
    assert_relative(curve->fit_y[0], curve->points[0].y, 1e-9);
    assert_relative(curve->fit_y[curve->fit_count - 1], curve->points[5].y, 1e-9);
    assert_int_equal(exhibit->plot.numbers->row_count, 6);
    assert_non_null(strstr(exhibit->plot.caption, "levels at 0.50\u00A0µA ± 0.02\u00A0µA"));
    sample_end(sample, document);
}

/* Every text of these parts is shown by a sale copy, so each is searched for the owner. */
static void test_owner_in_registers(void **state)
{
    (void)state;
    struct extra extra;
    struct sample *sample = sample_begin();
    struct document *document = compose(sample, &extra);
    const char **texts[] = {
        &extra.winding.note.text,
        &extra.winding.reason.text,
        &extra.winding.maker,
        &extra.control.what.text,
        &extra.control.fitted.text,
        &extra.control.reason.text,
        &extra.valve.tested.text,
        &extra.valve.maker,
        &extra.valve.fitted.text,
        &extra.can.note.text,
        &extra.can.maker,
        &extra.can.signed_where.text,
        &extra.points[0].name,
        &extra.performance.name,
        &extra.performance.written_left,
        &extra.safety.written,
        &extra.safety.conditions.text,
    };
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        const char *before = *texts[i];
        *texts[i] = "for Maud Estcourt";
        if (report_sale_copy_is_clean(&sample->job, &sample->arena, &sample->diagnostics))
            fail_msg("text %zu is not searched", i);
        *texts[i] = before;
    }
    sample_end(sample, document);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_registers),
        cmocka_unit_test(test_a_value_of_no_series_is_noted),
        cmocka_unit_test(test_refs_are_set_apart),
        cmocka_unit_test(test_measurements),
        cmocka_unit_test(test_soak_curve),
        cmocka_unit_test(test_owner_in_registers),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
