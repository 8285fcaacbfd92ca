#include "unit/job/line_kit.h"

struct marking_row {
    const char *text;
    enum marking_kind kind;
    bool fitted;
    double value, rated, low, high;
    bool ac;
    enum dielectric type;
    enum safety_class safety_class;
    unsigned class_count;
    const char *other;
};

#define C MARKING_CAPACITOR
#define R MARKING_RESISTOR
#define W MARKING_WINDING

static void markings(void **state)
{
    (void)state;
    static const struct marking_row rows[] = {
        {"0.02 uF 400 V 20 %", C, 0, 0.02e-6, 400, -20, 20, 0, 0, 0, 1, NULL},
        {"20% 400V 0.02uF", C, 0, 0.02e-6, 400, -20, 20, 0, 0, 0, 1, NULL},
        {"0.02 uF, 400 V, 20 %", C, 0, 0.02e-6, 400, -20, 20, 0, 0, 0, 1, NULL},
        {".05mfd 200 V.", C, 0, 0.05e-6, 200, 0, 0, 0, 0, 0, 1, NULL},
        {"0.1 uF 350 V d.c. wkg", C, 0, 0.1e-6, 350, 0, 0, 0, 0, 0, 1, NULL},
        {"0.1 uF 350 V wkg. 1000 V test", C, 0, 0.1e-6, 350, 0, 0, 0, 0, 0, 1, "1000 V test"},
        {"1000 V test 0.1 uF 350 V", C, 0, 0.1e-6, 350, 0, 0, 0, 0, 0, 1, "1000 V test"},
        {"0.1 uF 400 V test 1000 V", C, 0, 0.1e-6, 400, 0, 0, 0, 0, 0, 1, "test 1000 V"},
        {"0.1 uF 400 V, tested 1000 V", C, 0, 0.1e-6, 400, 0, 0, 0, 0, 0, 1, "tested 1000 V"},
        {"0.1 uF 1000 V test 400 V wkg", C, 0, 0.1e-6, 400, 0, 0, 0, 0, 0, 1, "1000 V test"},
        {"0.1 uF tested 1000 V", C, 0, 0.1e-6, 0, 0, 0, 0, 0, 0, 1, "tested 1000 V"},
        {"test 1000 V 0.1 uF 400 V", C, 0, 0.1e-6, 400, 0, 0, 0, 0, 0, 1, "test 1000 V"},
        {"8 uF 450 V -20 +100 %", C, 0, 8e-6, 450, -20, 100, 0, 0, 0, 1, NULL},
        {"8 uF 450 V -20/+100 %", C, 0, 8e-6, 450, -20, 100, 0, 0, 0, 1, NULL},
        {"8 uF 450 V 525 V surge +100/-20%", C, 0, 8e-6, 450, -20, 100, 0, 0, 0, 1, "525 V surge"},
        {"8 uF 450 V -20 % +50 %", C, 0, 8e-6, 450, -20, 50, 0, 0, 0, 1, NULL},
        {"100 pF +/-5 %", C, 0, 100e-12, 0, -5, 5, 0, 0, 0, 1, NULL},
        {"100 pF \xC2\xB1"
         "5%",
         C, 0, 100e-12, 0, -5, 5, 0, 0, 0, 1, NULL},
        {"100 pF -0/+10 %", C, 0, 100e-12, 0, 0, 10, 0, 0, 0, 1, NULL},
        {"4n7 500 V", C, 0, 4.7e-9, 500, 0, 0, 0, 0, 0, 1, NULL},
        {"p33 500 V", C, 0, 0.33e-12, 500, 0, 0, 0, 0, 0, 1, NULL},
        {"400 V", C, 0, 0, 400, 0, 0, 0, 0, 0, 1, NULL},
        {"polypropylene 0.022 uF 630 V", C, 1, 0.022e-6, 630, 0, 0, 0, DIELECTRIC_POLYPROPYLENE, 0,
         1, NULL},
        {"Metallised Paper 0.1 uF 250 V", C, 1, 0.1e-6, 250, 0, 0, 0, DIELECTRIC_METALLISED_PAPER,
         0, 1, NULL},
        {"0.1 uF paper 250 V yellow", C, 1, 0.1e-6, 250, 0, 0, 0, DIELECTRIC_PAPER, 0, 1, "yellow"},
        {"paper 0.1 uF", C, 0, 0.1e-6, 0, 0, 0, 0, 0, 0, 1, "paper"},
        {"electrolytic 22 uF 450 V 105 C", C, 1, 22e-6, 450, 0, 0, 0, DIELECTRIC_ELECTROLYTIC, 0, 1,
         "105 C"},
        {"class X2 0.1 uF 310 V a.c.", C, 1, 0.1e-6, 310, 0, 0, 1, 0, CLASS_X2, 1, NULL},
        {"x2 0.1 uF 310 VAC", C, 1, 0.1e-6, 310, 0, 0, 1, 0, CLASS_X2, 1, NULL},
        {"X2 0.1 uF 310 V~", C, 1, 0.1e-6, 310, 0, 0, 1, 0, CLASS_X2, 1, NULL},
        {"Y1 1 nF 500 V ac 20 %", C, 1, 1e-9, 500, -20, 20, 1, 0, CLASS_Y1, 1, NULL},
        {"X1/Y2 4700 pF 250 V a.c.", C, 1, 4.7e-9, 250, 0, 0, 1, 0, CLASS_Y2, 1, NULL},
        {"two Y2 2200 pF 250 V a.c. in series", C, 1, 2.2e-9, 250, 0, 0, 1, 0, CLASS_Y2, 2, NULL},
        {"2 x Y2 2200 pF", C, 1, 2.2e-9, 0, 0, 0, 0, 0, CLASS_Y2, 2, NULL},
        {"2x Y2 2200 pF", C, 1, 2.2e-9, 0, 0, 0, 0, 0, CLASS_Y2, 2, NULL},
        {"two class Y2 2200 pF", C, 1, 2.2e-9, 0, 0, 0, 0, 0, CLASS_Y2, 2, NULL},
        {"ceramic 2 Y2 2200 pF in series", C, 1, 2.2e-9, 0, 0, 0, 0, DIELECTRIC_CERAMIC, CLASS_Y2,
         2, NULL},
        {"270 ohm 1 W 10 %", R, 0, 270, 1, -10, 10, 0, 0, 0, 1, NULL},
        {"47k 1/2 W", R, 0, 47e3, 0.5, 0, 0, 0, 0, 0, 1, NULL},
        {"47k \xC2\xBD W 20%", R, 0, 47e3, 0.5, -20, 20, 0, 0, 0, 1, NULL},
        {"1M0 1 1/2 W", R, 0, 1e6, 1.5, 0, 0, 0, 0, 0, 1, NULL},
        {"R47 2 W", R, 0, 0.47, 2, 0, 0, 0, 0, 0, 1, NULL},
        {"carbon film 270 ohm 1 W 500 V 5 %", R, 1, 270, 1, -5, 5, 0, 0, 0, 1, "carbon film 500 V"},
        {"310 ohm", W, 0, 310, 0, 0, 0, 0, 0, 0, 1, NULL},
        {"rewound 310 ohm 5 %", W, 1, 310, 0, -5, 5, 0, 0, 0, 1, "rewound"},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        struct marking marking = {0};
        bool good = line_marking(&line, rows[i].kind, rows[i].fitted, &marking);
        if (!good)
            print_error("'%s': %s\n", rows[i].text, line.problem.text);
        assert_true(good);
        assert_true(marking.set);
        assert_string_equal(marking.written, rows[i].text);
        assert_int_equal(marking.value.set, rows[i].value != 0);
        assert_relative(marking.value.value, rows[i].value, 1e-15);
        assert_int_equal(marking.rated.set, rows[i].rated != 0);
        assert_close(marking.rated.value, rows[i].rated, 0);
        assert_int_equal(marking.rated_ac, rows[i].ac);
        assert_int_equal(marking.tolerance_set, rows[i].low != 0 || rows[i].high != 0);
        assert_close(marking.tolerance_low_percent, rows[i].low, 0);
        assert_close(marking.tolerance_high_percent, rows[i].high, 0);
        assert_int_equal(marking.type, rows[i].type);
        assert_int_equal(marking.safety_class, rows[i].safety_class);
        assert_int_equal(marking.class_count, rows[i].class_count);
        if (rows[i].other == NULL)
            assert_null(marking.other_words);
        else
            assert_string_equal(marking.other_words, rows[i].other);
    }
    arena_release(&arena);
}

static void markings_keep_size_and_places(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct line line = line_in(&arena, "\xC2\xBD \xCE\xA9 8 x 21 mm 1 W");
    struct marking marking = {0};
    assert_true(line_marking(&line, MARKING_RESISTOR, true, &marking));
    assert_true(marking.size.set);
    assert_close(marking.size.diameter_m, 8e-3, 1e-12);
    assert_close(marking.size.length_m, 21e-3, 1e-12);
    /* Columns are counted in characters. */
    assert_int_equal(marking.value.at.column, 15);
    assert_int_equal(marking.size.at.column, 19);
    assert_int_equal(marking.rated.at.column, 29);
    assert_string_equal(marking.rated.written, "1 W");

    line = line_in(&arena, "450 V 8 MF");
    assert_true(line_marking(&line, MARKING_CAPACITOR, false, &marking));
    assert_true(line.old_unit);
    assert_int_equal(line.old_unit_at.column, 21);
    line = line_in(&arena, "450 V 8 uF");
    assert_true(line_marking(&line, MARKING_CAPACITOR, false, &marking));
    assert_false(line.old_unit);
    arena_release(&arena);
}

static void markings_are_refused(void **state)
{
    (void)state;
    static const struct {
        struct refusal refusal;
        enum marking_kind kind;
    } rows[] = {
        {{"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "0.02 uF 400 V"}, MARKING_CAPACITOR},
        {{"  ,", DIAGNOSTIC_QUANTITY_UNREADABLE, ",", "0.02 uF 400 V"}, MARKING_CAPACITOR},
        {{"0.02 uF 400", DIAGNOSTIC_UNIT_MISSING, "400", "add the unit"}, MARKING_CAPACITOR},
        {{"0.02 uF 400X 20 %", DIAGNOSTIC_QUANTITY_UNREADABLE, "400X", NULL}, MARKING_CAPACITOR},
        {{"0.02 uF 0.05 uF", DIAGNOSTIC_DUPLICATE_KEY, "0.05 uF", NULL}, MARKING_CAPACITOR},
        {{"0.02 uF 400 V 600 V", DIAGNOSTIC_DUPLICATE_KEY, "600 V", NULL}, MARKING_CAPACITOR},
        {{"0.02 uF 20 % 10 %", DIAGNOSTIC_DUPLICATE_KEY, "10 %", NULL}, MARKING_CAPACITOR},
        {{"0.02 uF -20/+20", DIAGNOSTIC_UNIT_MISSING, "+20", "20 %"}, MARKING_CAPACITOR},
        {{"0.02 uF 1,000 V", DIAGNOSTIC_QUANTITY_AMBIGUOUS, "1,000 V", "1000 V or 1.000 V"},
         MARKING_CAPACITOR},
        {{"0.02 uF 270 ohm", DIAGNOSTIC_UNIT_WRONG, "270 ohm", "0.02 uF"}, MARKING_CAPACITOR},
        {{"0.02 uF X2 Y2", DIAGNOSTIC_DUPLICATE_KEY, "Y2", NULL}, MARKING_CAPACITOR},
        {{"class Y 4700 pF", DIAGNOSTIC_UNKNOWN_CHOICE, "class", "X1, X2, Y1 or Y2"},
         MARKING_CAPACITOR},
        {{"16-16 uF 450 V", DIAGNOSTIC_QUANTITY_UNREADABLE, "16-16", "each section"},
         MARKING_CAPACITOR},
        {{"0.1/400", DIAGNOSTIC_QUANTITY_UNREADABLE, "0.1/400", "0.02 uF 400 V 20 %"},
         MARKING_CAPACITOR},
        {{"8 uF -20 +100", DIAGNOSTIC_UNIT_MISSING, "+100", NULL}, MARKING_CAPACITOR},
        {{"paper mica 100 pF", DIAGNOSTIC_DUPLICATE_KEY, "mica", NULL}, MARKING_CAPACITOR},
        {{"50M 1 W", DIAGNOSTIC_QUANTITY_AMBIGUOUS, "50M", "write 50k or 50 meg"},
         MARKING_RESISTOR},
        {{"270 ohm 0.1 uF", DIAGNOSTIC_UNIT_WRONG, "0.1 uF", "270 ohm 1 W"}, MARKING_RESISTOR},
        {{"8 x 21 mm 8 x 22 mm", DIAGNOSTIC_DUPLICATE_KEY, "8 x 22 mm", NULL}, MARKING_RESISTOR},
        {{"310 ohm 10 H", DIAGNOSTIC_UNIT_WRONG, "10 H", "310 ohm"}, MARKING_WINDING},
        {{"310", DIAGNOSTIC_UNIT_MISSING, "310", NULL}, MARKING_WINDING},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].refusal.text);
        struct marking marking = {0};
        assert_false(line_marking(&line, rows[i].kind, true, &marking));
        assert_false(marking.set);
        assert_refused(&line, &rows[i].refusal);
    }
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(markings),
        cmocka_unit_test(markings_keep_size_and_places),
        cmocka_unit_test(markings_are_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
