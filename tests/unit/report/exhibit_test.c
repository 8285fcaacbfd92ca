/* Exhibits: what stands in their rows. Figures are the sample's own; the look is set elsewhere. */
#include "sample.h"

#include "kit.h"

#include <stdlib.h>

struct opened {
    struct sample *sample;
    struct document *document;
};

static struct opened record_of(struct sample *sample)
{
    struct opened opened = {sample, sample_compose(sample, DOCUMENT_RECORD)};
    assert_non_null(opened.document);
    return opened;
}

static void close_record(struct opened *opened)
{
    sample_end(opened->sample, opened->document);
}

static const struct table *table_of(const struct opened *opened, const char *id)
{
    const struct exhibit *exhibit = sample_exhibit(opened->document, id);
    assert_non_null(exhibit);
    assert_int_equal(exhibit->kind, EXHIBIT_TABLE);
    return &exhibit->table;
}

static const struct table_row *row_of(const struct table *table, const char *ref)
{
    for (size_t i = 0; i < table->row_count; i++)
        if (!table->rows[i].group && strcmp(table->rows[i].cells[0].text, ref) == 0)
            return &table->rows[i];
    fail_msg("no row %s", ref);
    return NULL;
}

static void assert_figures(const struct figures *figures, const char *bound, const char *whole,
                           const char *fraction)
{
    assert_string_equal(figures->bound, bound);
    assert_string_equal(figures->whole, whole);
    assert_string_equal(figures->fraction, fraction);
}

/* The note with the sign that a cell carries at `place` ("1 3": places 0 and 2). */
static const char *note_of(const struct table *table, const struct cell *cell, size_t place)
{
    assert_non_null(cell->notes);
    return table->notes[cell->notes[place] - '1'];
}

static void test_leakage_table(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct table *table = table_of(&opened, "leakage");
    assert_string_equal(sample_exhibit(opened.document, "leakage")->number, "Table 1");
    assert_int_equal(table->column_count, 9);
    /* 5 parts in 5 places, each under its own line, in the order of places */
    static const char *const order[] = {"coupling",         "C14", "AVC bypass", "C9",
                                        "reservoir",        "C20", "tuning",     "C7",
                                        "across the mains", "C22"};
    assert_int_equal(table->row_count, sizeof order / sizeof *order);
    for (size_t i = 0; i < table->row_count; i++) {
        assert_string_equal(table->rows[i].cells[0].text, order[i]);
        assert_int_equal(table->rows[i].group, i % 2 == 0);
    }
    const struct cell *failed = row_of(table, "C14")->cells;
    assert_figures(&failed[1].figures, "", "0", ".02");
    assert_string_equal(failed[1].figures.unit, "µF");
    assert_figures(&failed[1].second_figures, "", "400", "");
    assert_figures(&failed[2].figures, "", "100", "");
    assert_figures(&failed[4].figures, "", "0", ".62");
    assert_figures(&failed[5].figures, "", "0", ".13");
    assert_true(failed[4].strong);
    assert_string_equal(failed[6].text, "output grid +2.4\u00A0V; cathode current +22\u00A0%");
    assert_int_equal(failed[7].mark, MARK_FAIL);
    assert_string_equal(failed[7].text, "fail");
    assert_string_equal(failed[8].text, "restuffed");
    assert_figures(&row_of(table, "C9")->cells[4].figures, "<", "0", ".01");
    const struct cell *unread = row_of(table, "C7")->cells;
    assert_null(unread[4].figures.whole);
    assert_null(unread[7].second); /* "kept untested" says it */
    assert_int_equal(unread[7].mark, MARK_NOT_JUDGED);
    assert_string_equal(row_of(table, "C22")->cells[7].second, "no safety class");
    close_record(&opened);
}

/* The picture behind the last photograph stands in the letterhead; without it there is none. */
static void test_logo(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    assert_null(sample_exhibit(opened.document, "title")->title.logo);
    close_record(&opened);
    struct sample *sample = sample_begin();
    sample->pictures[2] = (struct report_picture){"logo.png", 400, 200, NULL};
    opened = record_of(sample);
    const struct plate_picture *logo = sample_exhibit(opened.document, "title")->title.logo;
    assert_non_null(logo);
    assert_string_equal(logo->file, "logo.png");
    assert_int_equal(logo->width_px, 400);
    close_record(&opened);
}

/* C9 has the note of C14 and one of its own that is found before it: the signs of a cell rise. */
static void test_note_signs_rise(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->parts[0].turns_on_temperature = true;
    for (size_t i = 1; i < 5; i++)
        sample->parts[i].tested_above_marked = sample->parts[i].turns_on_temperature = true;
    struct opened opened = record_of(sample);
    const char *notes = row_of(table_of(&opened, "leakage"), "C9")->cells[0].notes;
    assert_non_null(strchr(notes, ' '));
    for (unsigned long last = 0; *notes;) {
        char *end;
        unsigned long number = strtoul(notes, &end, 10);
        assert_true(number > last);
        last = number;
        notes = end;
    }
    close_record(&opened);
}

static void test_leakage_notes(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->parts[0].tested_above_marked = true;
    sample->parts[0].against_advice = true;
    sample->capacitors[0].reason = sample_prose("kept for its label", 23);
    struct opened opened = record_of(sample);
    const struct table *table = table_of(&opened, "leakage");
    const struct cell *cell = row_of(table, "C14")->cells;
    assert_string_equal(note_of(table, cell, 0), "Tested above its marked volts.");
    assert_string_equal(note_of(table, cell, 2),
                        "Advice was: replace. Done: restuffed. Reason given: kept for its label.");
    cell = row_of(table, "C9")->cells;
    assert_string_equal(note_of(table, cell, 0), "Earlier repair; not counted as original.");
    cell = row_of(table, "C20")->cells;
    assert_string_equal(note_of(table, cell, 2),
                        "Against the rule named JAN-C-62, 1100\u00A0µA. Other rules for "
                        "16\u00A0µF 450\u00A0V: 25\u00A0µA (0.002 CV + 3\u00A0µA).");
    close_record(&opened);
}

/* Equal notes share a number. */
static void test_notes_are_shared(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    for (size_t i = 0; i < 5; i++)
        sample->capacitors[i].was = WAS_EARLIER_REPAIR;
    struct opened opened = record_of(sample);
    const struct table *table = table_of(&opened, "leakage");
    for (size_t i = 1; i < table->row_count; i += 2)
        assert_int_equal(table->rows[i].cells[0].notes[0], '1');
    close_record(&opened);
}

static void test_glance(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct glance *glance = &sample_exhibit(opened.document, "glance")->plot.glance;
    assert_int_equal(glance->row_count, 5);
    const struct glance_row *failed = &glance->rows[0], *bound = &glance->rows[1],
                            *reformed = &glance->rows[2], *unread = &glance->rows[3],
                            *mains = &glance->rows[4];
    /* ratio = leakage/limit; band = (limit -+ U)/limit, U = 0.02 µA */
    assert_close(failed->ratio, 0.62 / 0.13, 1e-9);
    assert_close(failed->band_low, 1 - 0.02 / 0.13, 1e-9);
    assert_close(failed->band_high, 1 + 0.02 / 0.13, 1e-9);
    assert_string_equal(failed->outcome, "fail, restuffed");
    assert_true(bound->at_most);
    assert_close(reformed->ratio, 310.0 / 1100, 1e-9);
    assert_close(reformed->found_ratio, 2500.0 / 1100, 1e-9);
    assert_true(isnan(failed->found_ratio));
    assert_true(isnan(unread->ratio));
    assert_true(isnan(mains->ratio));
    close_record(&opened);
}

static void test_headline(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct headline *headline = &sample_exhibit(opened.document, "kept")->headline;
    assert_string_equal(headline->kept, "13");
    assert_string_equal(headline->of, "of 21");
    assert_int_equal(headline->line_count, 3);
    assert_string_equal(headline->lines[0].text, "13 kept: 12 tested, 1 reformed");
    assert_string_equal(headline->lines[2].text, "2 removed, in bag 1");
    assert_int_equal(headline->kind_count, 3);
    assert_int_equal(headline->kinds[0].strokes[STROKE_KEPT], 10);
    assert_int_equal(headline->kinds[0].strokes[STROKE_SHELL], 6);
    assert_int_equal(headline->kinds[0].strokes[STROKE_REMOVED], 2);
    assert_string_equal(headline->kinds[0].count_text, "10 of 18");
    assert_string_equal(headline->below,
                        "Seen from below 13 of 21. Valves 3 of 3, counted apart. One earlier "
                        "repair is kept and not counted.");
    close_record(&opened);
}

static void test_changed(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->removed.value = sample_prose("C222 R8", 40); /* C22 is not named */
    struct opened opened = record_of(sample);
    const struct table *table = table_of(&opened, "changed");
    assert_int_equal(table->row_count, 3);
    const struct cell *cells = row_of(table, "C14")->cells;
    assert_string_equal(cells[1].text, "0.02\u00A0µF 400\u00A0V waxed paper");
    assert_string_equal(cells[2].text, "polypropylene 0.022\u00A0µF 630\u00A0V");
    assert_string_equal(cells[3].text, "cathode current rises by 22\u00A0%, 10\u00A0% allowed");
    assert_string_equal(cells[4].text, "shell in place, signed inside end cap");
    assert_string_equal(row_of(table, "C22")->cells[4].text, "not recorded");
    assert_string_equal(row_of(table, "R8")->cells[4].text, "bag 1");
    close_record(&opened);
}

static void test_stage(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct table *table = table_of(&opened, "stage-figures");
    size_t strong = 0;
    for (size_t i = 0; i < table->row_count; i++)
        for (size_t j = 0; j < table->column_count; j++)
            strong += !table->rows[i].group && table->rows[i].cells[j].strong;
    assert_int_equal(strong, 1); /* the anode's 13.4 W over 12 W, as found */
    assert_non_null(strstr(table->remark, "Bold: above the valve’s rating."));
    close_record(&opened);
}

/* A triode has no screen, a stage without figures no table. */
static void test_stage_without_figures(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        sample->stage_findings.phases[phase] = (struct stage_phase){.why = WHY_NO_ROW};
    struct opened opened = record_of(sample);
    assert_null(sample_exhibit(opened.document, "stage-figures"));
    struct buffer text = {0};
    document_plain_text(opened.document->root, &text);
    assert_non_null(strstr(buffer_string(&text), "was not calculated: there is no operating row"));
    buffer_release(&text);
    close_record(&opened);
}

static void test_plates(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct plate *plate = &sample_exhibit(opened.document, "plate-1")->plate;
    assert_int_equal(plate->picture_count, 2);
    assert_string_equal(plate->pictures[0].when, "Before.");
    assert_string_equal(plate->pictures[0].file, "02.jpg");
    assert_string_equal(plate->pictures[1].when, "After.");
    assert_string_equal(plate->caption, "Underside of the chassis.");
    close_record(&opened);
    struct sample *sample = sample_begin();
    sample->pictures[0].file = NULL; /* damaged: left out, the other stands alone */
    opened = record_of(sample);
    plate = &sample_exhibit(opened.document, "plate-1")->plate;
    assert_int_equal(plate->picture_count, 1);
    assert_null(plate->pictures[0].when);
    close_record(&opened);
}

static void test_reform_curves(void **state)
{
    (void)state;
    struct opened opened = record_of(sample_begin());
    const struct curves *curves = &sample_exhibit(opened.document, "reform-1")->plot.curves;
    assert_int_equal(curves->panel_count, 2);
    assert_int_equal(curves->panels[0].curve_count, 2);
    assert_close(curves->panels[0].step_volts[1], 160, 0);
    /* the second step begins where the first ended, at 300 s */
    assert_close(curves->panels[0].curves[1].points[0].x_s, 330, 1e-9);
    assert_true(curves->panels[1].curves[0].points[0].deciding);
    assert_close(curves->limit, 1100e-6, 1e-12);
    assert_string_equal(curves->limit_text, "1100\u00A0µA");
    /* 50 V less 170 µA through 47 kΩ */
    const struct table *numbers = sample_exhibit(opened.document, "reform-1")->plot.numbers;
    assert_figures(&numbers->rows[0].cells[1].figures, "", "42", ".0");
    close_record(&opened);
}

/* Methods 8: 450 V in a can through max(V/5 mA, V^2/(4*0.5 W)) = 101.25 kΩ; 10 kΩ bleeds 2*16 µF
   from 450 V to 10 V in R*C*ln(45) = 1.22 s; C*V^2/2 = 3.24 J. Worked by hand. */
static void test_reform_plan(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    int held = 1;
    struct can can = {.ref = "CAN1", .holds = &held, .hold_count = 1, .done = DONE_OPEN};
    sample->job.cans = &can;
    sample->job.can_count = 1;
    sample->capacitors[1].can = 0;
    sample->parts[1].service_v = 430; /* 1.1 x service is above the marked volts */
    struct document *sheet = sample_compose(sample, DOCUMENT_SHEET);
    assert_non_null(sheet);
    const struct table *steps = &sample_exhibit(sheet, "sheet-reform-2")->table;
    static const char *const volts[] = {"45", "158", "270", "383", "450", "450"};
    assert_int_equal(steps->row_count, 6);
    for (size_t i = 0; i < 6; i++)
        assert_string_equal(steps->rows[i].cells[1].figures.whole, volts[i]);
    const struct table *bleed = &sample_exhibit(sheet, "sheet-bleed")->table;
    assert_figures(&bleed->rows[0].cells[2].figures, "", "3", ".2");
    assert_figures(&bleed->rows[0].cells[4].figures, "", "1", ".2");
    struct buffer text = {0};
    document_plain_text(sheet->root, &text);
    assert_non_null(strstr(buffer_string(&text), "Limiter 110\u00A0kΩ, 4\u00A0W or more"));
    buffer_release(&text);
    sample_end(sample, sheet);
}

/* Small effects are bounds: a figure far below what matters is no news. */
static void test_effect_words(void **state)
{
    (void)state;
    static const struct {
        struct effect effect;
        const char *text;
    } rows[] = {
        {{.key = "cathode_current", .value = 0.0002, .unit = UNIT_PERCENT, .of = NAN},
         "cathode current under +0.1\u00A0%"},
        {{.key = "line_loss", .value = 2.4, .unit = UNIT_PERCENT, .of = NAN, .subject = "avc"},
         "AVC line −2.4\u00A0%"},
        {{.key = "screen_fall", .value = 0.2, .unit = UNIT_VOLTAGE, .of = 85, .subject = "if"},
         "screen −0.20\u00A0V of 85\u00A0V"},
        {{.key = "line_volts", .value = 0.06, .unit = UNIT_VOLTAGE, .of = NAN, .at_most = true},
         "AVC line under +60\u00A0mV"},
        {{.key = "circuit_ratio", .value = 75000, .unit = UNIT_NONE, .of = NAN, .at_most = true},
         "none measurable"},
        {{.key = "anode_watts", .value = 11.4, .unit = UNIT_POWER, .of = 12},
         "anode 11\u00A0W of 12\u00A0W"},
        {{.key = "ht_share", .value = 0.5e-3, .unit = UNIT_CURRENT, .of = 70e-3},
         "0.71\u00A0% of HT current"},
        {{.key = "rail_drop", .value = 62e-3, .unit = UNIT_VOLTAGE, .of = 240}, "rail −62\u00A0mV"},
        {{.key = "rail_drop", .value = 2.1, .unit = UNIT_VOLTAGE, .of = 190},
         "rail −2.1\u00A0V (1.1\u00A0%)"},
        {{.key = "short_watts", .value = NAN, .unit = UNIT_POWER, .of = NAN},
         "the anode load burns, if it shorts"},
        {{.key = "mains_fire", .value = NAN, .of = NAN}, "fire, if it shorts"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct sample *sample = sample_begin();
        sample->effects[0] = rows[i].effect;
        sample->parts[0].effect_count = 1;
        report_explain(&sample->findings, templates_words(sample_templates(sample)),
                       &sample->arena);
        assert_string_equal(sample->findings.capacitors[0].effects[0].text, rows[i].text);
        sample_end(sample, NULL);
    }
}

static void test_advice_says_what_is_missing(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->parts[4].why = WHY_MISSING_FACT;
    sample->parts[4].missing = "circuit";
    report_explain(&sample->findings, templates_words(sample_templates(sample)), &sample->arena);
    assert_string_equal(sample->findings.capacitors[4].advice_text,
                        "measure again: give the job: circuit");
    assert_string_equal(sample->findings.capacitors[4].why_text, "the job does not say: circuit");
    assert_string_equal(sample->findings.capacitors[3].advice_text,
                        "replace with class X2 or better");
    assert_null(sample->findings.capacitors[1].why_text);
    sample_end(sample, NULL);
}

static void test_changed_policy_is_named(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->shop.policy.cathode_current_rise = 0.2;
    struct opened opened = record_of(sample);
    struct buffer text = {0};
    document_plain_text(opened.document->root, &text);
    assert_non_null(strstr(buffer_string(&text),
                           "rise of cathode current 20\u00A0% (changed by this "
                           "shop; usual: 10\u00A0%)"));
    buffer_release(&text);
    close_record(&opened);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_leakage_table),
        cmocka_unit_test(test_logo),
        cmocka_unit_test(test_note_signs_rise),
        cmocka_unit_test(test_leakage_notes),
        cmocka_unit_test(test_notes_are_shared),
        cmocka_unit_test(test_glance),
        cmocka_unit_test(test_headline),
        cmocka_unit_test(test_changed),
        cmocka_unit_test(test_stage),
        cmocka_unit_test(test_stage_without_figures),
        cmocka_unit_test(test_plates),
        cmocka_unit_test(test_reform_curves),
        cmocka_unit_test(test_reform_plan),
        cmocka_unit_test(test_effect_words),
        cmocka_unit_test(test_advice_says_what_is_missing),
        cmocka_unit_test(test_changed_policy_is_named),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
