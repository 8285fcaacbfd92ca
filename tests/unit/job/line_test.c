#include "unit/job/line_kit.h"

/* ---- readings ---- */

static const struct instrument instruments[] = {
    {.name = "leakage"}, {.name = "leakage low"}, {.name = "bridge"}};
static const struct reading_form reading_form = {.line = 3,
                                                 .state = READING_FOUND,
                                                 .instruments = instruments,
                                                 .instrument_count = 3,
                                                 .instrument = 0};

static void readings_carry_on(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        size_t count;
        struct {
            double volts, seconds, value;
        } readings[4];
    } rows[] = {
        {"100 V 60 s 1.1 uA, 5 min 0.9 uA", 2, {{100, 60, 1.1e-6}, {100, 300, 0.9e-6}}},
        {"1.1 uA 60 s 100 V", 1, {{100, 60, 1.1e-6}}},
        {"100 V 1.1 uA", 1, {{100, 0, 1.1e-6}}},
        {"100 V 60 s 1.1 uA, 250 V 2.9 uA", 2, {{100, 60, 1.1e-6}, {250, 60, 2.9e-6}}},
        {"50 V 30 s 170 uA, 5 min 21 uA, 12 min 30 s 9 uA",
         3,
         {{50, 30, 170e-6}, {50, 300, 21e-6}, {50, 750, 9e-6}}},
        {"500 V 1 h 10 min 220 M", 1, {{500, 4200, 220e6}}},
        {"440 V 5 min 2.0 mA", 1, {{440, 300, 2e-3}}},
        {"100 V 60 s -0.01 uA", 1, {{100, 60, -0.01e-6}}},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        const struct reading *readings = NULL;
        size_t count = 0;
        assert_true(line_readings(&line, &reading_form, &readings, &count));
        assert_int_equal(count, rows[i].count);
        for (size_t j = 0; j < count; j++) {
            assert_close(readings[j].set_volts.value, rows[i].readings[j].volts, 0);
            assert_close(readings[j].time.value, rows[i].readings[j].seconds, 0);
            assert_relative(readings[j].value.value, rows[i].readings[j].value, 1e-15);
            assert_int_equal(readings[j].line, 3);
            assert_int_equal(readings[j].state, READING_FOUND);
            assert_int_equal(readings[j].instrument, 0);
        }
    }
    arena_release(&arena);
}

static void readings_have_words(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct line line = line_in(&arena, "100 V 60 s over 2000 M hot 45 C in circuit 2031-02-10, "
                                       "reformed by leakage low 5 min 0.9 uA, left by Bridge 1 M");
    const struct reading *readings = NULL;
    size_t count = 0;
    assert_true(line_readings(&line, &reading_form, &readings, &count));
    assert_int_equal(count, 3);
    assert_int_equal(readings[0].value.bound, BOUND_OVER);
    assert_int_equal(readings[0].value.unit, UNIT_RESISTANCE);
    assert_close(readings[0].hot.value, 45, 0);
    assert_true(readings[0].in_circuit);
    assert_int_equal(readings[0].date.day, 10);
    assert_int_equal(readings[0].instrument, 0);
    assert_int_equal(readings[1].state, READING_REFORMED);
    assert_int_equal(readings[1].instrument, 1);
    assert_close(readings[1].hot.value, 45, 0); /* carried on */
    assert_int_equal(readings[1].value.bound, BOUND_NONE);
    assert_int_equal(readings[2].state, READING_LEFT);
    assert_int_equal(readings[2].instrument, 2);
    assert_int_equal(readings[2].at.column, 15 + 99 - 6);
    assert_string_equal(readings[2].written, "left by Bridge 1 M");

    line = line_in(&arena, "100 V 60 s 1.1 uA hot 113 F");
    assert_true(line_readings(&line, &reading_form, &readings, &count));
    assert_close(readings[0].hot.value, 45, 1e-12); /* 113 F is 45 C */
    arena_release(&arena);
}

static void readings_are_refused(void **state)
{
    (void)state;
    static const struct refusal rows[] = {
        {"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "100 V 60 s 1.1 uA"},
        {"100 V 60 s", DIAGNOSTIC_QUANTITY_UNREADABLE, "100 V 60 s", "current or insulation"},
        {"60 s 1.1 uA", DIAGNOSTIC_QUANTITY_UNREADABLE, "60 s 1.1 uA", "volts"},
        {"100 V 60 s 1.1 uA, 5 min", DIAGNOSTIC_QUANTITY_UNREADABLE, "5 min", NULL},
        {"100 V 60 s 1.1 uA 5 min 0.9 uA", DIAGNOSTIC_DUPLICATE_KEY, "5 min", "a comma"},
        {"100 V 60 s 1.1 uA 0.9 uA", DIAGNOSTIC_DUPLICATE_KEY, "0.9 uA", "a comma"},
        {"100 V 60 s 1.1", DIAGNOSTIC_UNIT_MISSING, "1.1", "unit"},
        {"100 V 12:30 1.1 uA", DIAGNOSTIC_QUANTITY_AMBIGUOUS, "12:30", "12 min 30 s"},
        {"1,000 V 60 s 1 uA", DIAGNOSTIC_QUANTITY_AMBIGUOUS, "1,000 V", "1000 V or 1.000 V"},
        {"100 V 60 s 1.1 uA 45 C", DIAGNOSTIC_UNIT_WRONG, "45 C", "write hot 45 C"},
        {"100 V 60 s 1.1 uA hot", DIAGNOSTIC_QUANTITY_UNREADABLE, "hot", "hot 45 C"},
        {"100 V 60 s 1.1 uA hot 45 V", DIAGNOSTIC_UNIT_WRONG, "45 V", "temperature"},
        {"100 V 60 s 1.1 uA refomed", DIAGNOSTIC_UNKNOWN_CHOICE, "refomed",
         "nearest word: reformed"},
        {"100 V 60 s infinity", DIAGNOSTIC_UNKNOWN_CHOICE, "infinity", "over 2000 M"},
        {"100 V 60 s 1.1 uA in cabinet", DIAGNOSTIC_UNKNOWN_CHOICE, "in", "in circuit"},
        {"100 V 60 s 1.1 uA by brigde", DIAGNOSTIC_REF_UNKNOWN, "brigde", "bridge"},
        {"100 V 60 s 1.1 uA by", DIAGNOSTIC_REF_UNKNOWN, "by", NULL},
        {"100 V 60 s 1.1 uA left found", DIAGNOSTIC_DUPLICATE_KEY, "found", NULL},
        {"100 V 60 s 1.1 uA 2031-02-30", DIAGNOSTIC_DATE_UNREADABLE, "2031-02-30", "no such day"},
        {"-100 V 60 s 1.1 uA", DIAGNOSTIC_VALUE_IMPOSSIBLE, "-100 V", "write 100 V;"},
        {"100 V 60 s ~0.35 uA", DIAGNOSTIC_UNKNOWN_CHOICE, "~0.35", "write the figure alone"},
        {"100 V 60 s approx. 1 uA", DIAGNOSTIC_UNKNOWN_CHOICE, "approx.", "the figure alone"},
        {"1 uA @ 100 V", DIAGNOSTIC_UNKNOWN_CHOICE, "@", "leave it out"},
        {"250 V OL", DIAGNOSTIC_UNKNOWN_CHOICE, "OL", "over 2000 M"},
        {"100 V 60 s 3,3 uA;", DIAGNOSTIC_UNIT_MISSING, "3,3", "write 3,3 uA"},
        {"over 100 V 60 s 1.1 uA", DIAGNOSTIC_VALUE_IMPOSSIBLE, "over 100 V", NULL},
        {"100 V -60 s 1.1 uA", DIAGNOSTIC_VALUE_IMPOSSIBLE, "-60 s", NULL},
        {"100 V 60 s 0 M", DIAGNOSTIC_VALUE_IMPOSSIBLE, "0 M", NULL},
        {"100 V,60 s 1 uA", DIAGNOSTIC_QUANTITY_UNREADABLE, "100 V,60", "a space behind the comma"},
        {"100 V 60 s 0.1 uF", DIAGNOSTIC_UNIT_WRONG, "0.1 uF", "100 V 60 s 1.1 uA"},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        const struct reading *readings = NULL;
        size_t count = 0;
        bool good = line_readings(&line, &reading_form, &readings, &count);
        if (good)
            print_error("'%s'\n", rows[i].text);
        assert_false(good);
        assert_null(readings);
        assert_refused(&line, &rows[i]);
    }
    arena_release(&arena);
}

/* ---- named values and slots ---- */

struct electrodes {
    struct quantity grid, grid_leak, anode, mu;
    bool lifted;
};

static bool electrodes_read(struct line *line, struct electrodes *read)
{
    *read = (struct electrodes){0};
    const struct named_value names[] = {
        {.name = "grid", .unit = UNIT_VOLTAGE, .quantity = &read->grid},
        {.name = "grid leak", .unit = UNIT_RESISTANCE, .quantity = &read->grid_leak},
        {.name = "anode", .unit = UNIT_VOLTAGE, .unit_optional = true, .quantity = &read->anode},
        {.name = "mu", .unit = UNIT_NONE, .quantity = &read->mu},
        {.name = "lifted", .flag = &read->lifted},
    };
    return line_named_values(line, names, sizeof names / sizeof names[0]);
}

static void named_values(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct electrodes read;
    struct line line = line_in(&arena, "grid -19 V, Anode 380, mu 20, grid leak 470k, lifted");
    assert_true(electrodes_read(&line, &read));
    assert_close(read.grid.value, -19, 0);
    assert_int_equal(read.grid.at.column, 20);
    assert_close(read.anode.value, 380, 0);
    assert_int_equal(read.anode.unit, UNIT_VOLTAGE);
    assert_close(read.mu.value, 20, 0);
    assert_close(read.grid_leak.value, 470e3, 0);
    assert_true(read.lifted);
    line = line_in(&arena, "anode 380 V");
    assert_true(electrodes_read(&line, &read));
    assert_false(read.grid.set || read.lifted);

    static const struct refusal rows[] = {
        {"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "grid -19 V, anode 380 V"},
        {"grid -19 V, anod 380 V", DIAGNOSTIC_UNKNOWN_KEY, "anod", "nearest name: anode"},
        {"heater 6.3 V", DIAGNOSTIC_UNKNOWN_KEY, "heater", "names here: grid, grid leak, anode"},
        {"-19 V", DIAGNOSTIC_UNKNOWN_KEY, "-19 V", NULL},
        {"grid -19 V anode 380 V", DIAGNOSTIC_QUANTITY_UNREADABLE, "anode 380 V", "a comma"},
        {"grid -19 V, grid -18 V", DIAGNOSTIC_DUPLICATE_KEY, "grid", NULL},
        {"grid", DIAGNOSTIC_QUANTITY_UNREADABLE, "grid", "write grid 250 V"},
        {"grid -19", DIAGNOSTIC_UNIT_MISSING, "-19", "250 V"},
        {"grid -19 mA", DIAGNOSTIC_UNIT_WRONG, "-19 mA", "a voltage is wanted"},
        {"lifted 5 V", DIAGNOSTIC_QUANTITY_UNREADABLE, "5 V", "stands alone"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        line = line_in(&arena, rows[i].text);
        assert_false(electrodes_read(&line, &read));
        assert_refused(&line, &rows[i]);
    }
    arena_release(&arena);
}

static bool source_read(struct line *line, struct quantity *volts, struct resistance *resistance)
{
    *volts = (struct quantity){0};
    *resistance = (struct resistance){0};
    const struct value_slot slots[] = {
        {.what = "source volts", .unit = UNIT_VOLTAGE, .required = true, .quantity = volts},
        {.what = "source resistance", .unit = UNIT_RESISTANCE, .resistance = resistance},
    };
    return line_values(line, slots, 2);
}

static void slots(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct quantity volts;
    struct resistance resistance;
    struct line line = line_in(&arena, "90 V 220k");
    assert_true(source_read(&line, &volts, &resistance));
    assert_close(volts.value, 90, 0);
    assert_close(resistance.quantity.value, 220e3, 0);
    assert_int_equal(resistance.resistor, NOT_LISTED);
    line = line_in(&arena, "T2 primary 90 V");
    assert_true(source_read(&line, &volts, &resistance));
    assert_true(resistance.set);
    assert_false(resistance.quantity.set);
    assert_string_equal(resistance.quantity.written, "T2 primary");
    line = line_in(&arena, "90 V, R12");
    assert_true(source_read(&line, &volts, &resistance));
    assert_string_equal(resistance.quantity.written, "R12");
    assert_close(resistance.quantity.value, 0.12, 0); /* IEC 60062, unless R12 is listed */
    line = line_in(&arena, "90 V");
    assert_true(source_read(&line, &volts, &resistance));
    assert_false(resistance.set);

    static const struct refusal rows[] = {
        {"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "add the source volts"},
        {"220k", DIAGNOSTIC_QUANTITY_UNREADABLE, "220k", "add the source volts, as in 250 V"},
        {"90 V 91 V", DIAGNOSTIC_DUPLICATE_KEY, "91 V", NULL},
        {"90 V 220k R12", DIAGNOSTIC_DUPLICATE_KEY, "R12", NULL},
        {"90 V 5 uA", DIAGNOSTIC_UNIT_WRONG, "5 uA", "source resistance, as in 470k"},
        {"90 V 220", DIAGNOSTIC_UNIT_MISSING, "220", NULL},
        {"90 V #4", DIAGNOSTIC_QUANTITY_UNREADABLE, "#4", NULL},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        line = line_in(&arena, rows[i].text);
        assert_false(source_read(&line, &volts, &resistance));
        assert_refused(&line, &rows[i]);
    }
    arena_release(&arena);
}

/* ---- single values ---- */

static void resistances(void **state)
{
    (void)state;
    struct arena arena = {0};
    static const struct {
        const char *text;
        double ohm; /* 0: a ref */
    } good[] = {{"470k", 470e3}, {" 0.5 meg ", 0.5e6}, {"R12", 0.12}, {"T2", 0},
                {"T2 pri", 0},   {"CH1/a", 0},         {"1T2", 0},    {"4R7", 4.7}};
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        struct line line = line_in(&arena, good[i].text);
        struct resistance resistance = {0};
        assert_true(line_resistance(&line, &resistance));
        assert_int_equal(resistance.quantity.set, good[i].ohm != 0);
        assert_close(resistance.quantity.value, good[i].ohm, 0);
        assert_int_equal(resistance.winding, NOT_LISTED);
    }
    static const struct refusal rows[] = {
        {"470", DIAGNOSTIC_UNIT_MISSING, "470", "470k"},
        {"220 kohmm", DIAGNOSTIC_QUANTITY_UNREADABLE, "220 kohmm", NULL},
        {"5 V", DIAGNOSTIC_UNIT_WRONG, "5 V", "a resistance is wanted"},
        {"T2_a", DIAGNOSTIC_QUANTITY_UNREADABLE, "T2_a", NULL},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        struct resistance resistance = {0};
        assert_false(line_resistance(&line, &resistance));
        assert_false(resistance.set);
        assert_refused(&line, &rows[i]);
    }
    struct quantity measured = {0};
    struct line line = line_in(&arena, "Open");
    assert_true(line_measured_resistance(&line, &measured));
    assert_int_equal(measured.bound, BOUND_OVER);
    assert_close(measured.value, LINE_OPEN_OHM, 0);
    assert_string_equal(measured.written, "Open");
    line = line_in(&arena, "over 20 M");
    assert_true(line_measured_resistance(&line, &measured));
    assert_close(measured.value, 20e6, 0);
    line = line_in(&arena, "opn");
    assert_false(line_measured_resistance(&line, &measured));
    arena_release(&arena);
}

static void measured_capacitors(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        double farad, esr, loss;
    } good[] = {
        {"0.023 uF", 0.023e-6, 0, 0},
        {"18 uF 2.4 ohm", 18e-6, 2.4, 0},
        {"18 uF esr 2.4 ohm tan 6 %", 18e-6, 2.4, 6},
        {"18 uF ESR 2.4 ohm, 6 %", 18e-6, 2.4, 6},
        {"7.6 uF tan 0.08", 7.6e-6, 0, 8},
        {"7.6 uF tan delta 0.08", 7.6e-6, 0, 8},
        {"p33", 0.33e-12, 0, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        struct line line = line_in(&arena, good[i].text);
        struct measured_capacitor measured = {0};
        bool read = line_measured_capacitor(&line, &measured);
        if (!read)
            print_error("'%s': %s\n", good[i].text, line.problem.text);
        assert_true(read);
        assert_relative(measured.value.value, good[i].farad, 1e-15);
        assert_close(measured.esr.value, good[i].esr, 0);
        assert_close(measured.tan_delta.value, good[i].loss, 1e-12);
        assert_string_equal(measured.written, good[i].text);
    }
    static const struct refusal rows[] = {
        {"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "0.05 uF"},
        {"esr", DIAGNOSTIC_QUANTITY_UNREADABLE, "esr", "0.05 uF"},
        {"18", DIAGNOSTIC_UNIT_MISSING, "18", NULL},
        {"18 uF 19 uF", DIAGNOSTIC_DUPLICATE_KEY, "19 uF", NULL},
        {"18 uF 5 V", DIAGNOSTIC_UNIT_WRONG, "5 V", "18 uF 2.4 ohm"},
        {"18 uF good", DIAGNOSTIC_UNKNOWN_CHOICE, "good", "esr, tan"},
        {"18 uF tan 2 ohm", DIAGNOSTIC_UNIT_WRONG, "2 ohm", "percentage"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        struct measured_capacitor measured = {0};
        assert_false(line_measured_capacitor(&line, &measured));
        assert_false(measured.set);
        assert_refused(&line, &rows[i]);
    }
    arena_release(&arena);
}

static void accuracies(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        struct accuracy expected;
        double full_scale;
    } good[] = {
        {"2 % + 0.02 uA",
         {.reading_percent = 2, .absolute = 0.02e-6, .absolute_unit = UNIT_CURRENT},
         0},
        {"+/-2 %+0.02 uA",
         {.reading_percent = 2, .absolute = 0.02e-6, .absolute_unit = UNIT_CURRENT},
         0},
        {"0.5 % of reading + 2 digits", {.reading_percent = 0.5, .digits = 2}, 0},
        {"0.5 % rdg + 1 digit", {.reading_percent = 0.5, .digits = 1}, 0},
        {"1 % of full scale + 2 digits", {.full_scale_percent = 1, .digits = 2}, 0},
        {"1 % fsd", {.full_scale_percent = 1}, 0},
        {"3 % of 50 uA", {.full_scale_percent = 3}, 50e-6},
        {"1 % + 0.5 % of range + 3 counts",
         {.reading_percent = 1, .full_scale_percent = 0.5, .digits = 3},
         0},
        {"0.02 uA", {.absolute = 0.02e-6, .absolute_unit = UNIT_CURRENT}, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        struct line line = line_in(&arena, good[i].text);
        struct accuracy accuracy = {0};
        bool read = line_accuracy(&line, &accuracy);
        if (!read)
            print_error("'%s': %s\n", good[i].text, line.problem.text);
        assert_true(read);
        assert_close(accuracy.reading_percent, good[i].expected.reading_percent, 0);
        assert_close(accuracy.full_scale_percent, good[i].expected.full_scale_percent, 0);
        assert_close(accuracy.digits, good[i].expected.digits, 0);
        assert_close(accuracy.absolute, good[i].expected.absolute, 1e-20);
        assert_int_equal(accuracy.absolute_unit, good[i].expected.absolute_unit);
        assert_close(accuracy.full_scale.value, good[i].full_scale, 1e-18);
    }
    static const struct refusal rows[] = {
        {"", DIAGNOSTIC_QUANTITY_UNREADABLE, "", "2 % + 0.02 uA"},
        {"good", DIAGNOSTIC_QUANTITY_UNREADABLE, "good", "2 % + 0.02 uA"},
        {"2 % +", DIAGNOSTIC_QUANTITY_UNREADABLE, "+", "2 % + 0.02 uA"},
        {"2", DIAGNOSTIC_QUANTITY_UNREADABLE, "2", "2 % + 0.02 uA"},
        {"2 % + 3 %", DIAGNOSTIC_DUPLICATE_KEY, "2 % + 3 %", NULL},
        {"2 % of moon", DIAGNOSTIC_QUANTITY_UNREADABLE, "moon", NULL},
        {"-2 %", DIAGNOSTIC_VALUE_IMPOSSIBLE, "-2 %", NULL},
        {"1 uA + 2 uA", DIAGNOSTIC_DUPLICATE_KEY, "2 uA", NULL},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct line line = line_in(&arena, rows[i].text);
        struct accuracy accuracy = {0};
        assert_false(line_accuracy(&line, &accuracy));
        assert_refused(&line, &rows[i]);
    }
    arena_release(&arena);
}

static void lists(void **state)
{
    (void)state;
    struct arena arena = {0};
    const double *values = NULL;
    const struct line_name *names = NULL;
    size_t count = 0;
    struct line line = line_in(&arena, "25 V, 50 V, 1 kV");
    assert_true(line_list(&line, UNIT_VOLTAGE, &values, &count));
    assert_int_equal(count, 3);
    assert_close(values[2], 1000, 0);
    line = line_in(&arena, "25 V, 50 mA");
    assert_false(line_list(&line, UNIT_VOLTAGE, &values, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_UNIT_WRONG, "50 mA", "voltage"});
    line = line_in(&arena, "25 V 50 V");
    assert_false(line_list(&line, UNIT_VOLTAGE, &values, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_QUANTITY_UNREADABLE, "25 V 50 V", NULL});

    line = line_in(&arena, " C20  C21 ");
    assert_true(line_refs(&line, &names, &count));
    assert_int_equal(count, 2);
    assert_string_equal(names[1].text, "C21");
    assert_int_equal(names[1].at.column, 21);
    line = line_in(&arena, "C20 a, C21");
    assert_true(line_refs(&line, &names, &count));
    assert_int_equal(count, 2);
    assert_string_equal(names[0].text, "C20 a");
    line = line_in(&arena, "output, first IF");
    assert_true(line_names(&line, &names, &count));
    assert_int_equal(count, 2);
    assert_string_equal(names[1].text, "first IF");
    line = line_in(&arena, "C20 c20");
    assert_false(line_refs(&line, &names, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_REF_DUPLICATE, "c20", NULL});
    line = line_in(&arena, "C20 C#1");
    assert_false(line_refs(&line, &names, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_REF_INVALID, "C#1", "letters"});
    line = line_in(&arena, "");
    assert_false(line_refs(&line, &names, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_REF_INVALID, "", "C20 C21"});
    arena_release(&arena);
}

static void dates_and_sizes(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct date date = {0};
    struct year_span years = {0};
    struct dimensions size = {0};
    struct line line = line_in(&arena, " 2031-02-10");
    assert_true(line_date(&line, &date));
    assert_int_equal(date.at.column, 16);
    line = line_in(&arena, "10 February");
    assert_false(line_date(&line, &date));
    assert_refused(&line,
                   &(struct refusal){"", DIAGNOSTIC_DATE_UNREADABLE, "10 February", "2031-02-10"});
    line = line_in(&arena, "about 1951");
    assert_true(line_years(&line, &years));
    assert_true(years.about);
    line = line_in(&arena, "fifties");
    assert_false(line_years(&line, &years));
    assert_refused(&line,
                   &(struct refusal){"", DIAGNOSTIC_DATE_UNREADABLE, "fifties", "about 1951"});
    line = line_in(&arena, "22 x 51 mm");
    assert_true(line_dimensions(&line, &size));
    line = line_in(&arena, "22 mm");
    assert_false(line_dimensions(&line, &size));
    assert_refused(&line,
                   &(struct refusal){"", DIAGNOSTIC_QUANTITY_UNREADABLE, "22 mm", "22 x 51 mm"});
    arena_release(&arena);
}

static void long_lines_are_refused(void **state)
{
    (void)state;
    struct arena arena = {0};
    static char text[LINE_BYTES_MAX + 8];
    const double *values = NULL;
    size_t count = 0;
    memset(text, ' ', sizeof text);
    for (size_t i = 0; i + 5 <= LINE_BYTES_MAX; i += 5)
        memcpy(text + i, "5 V, ", 5);
    struct line line = line_of(&arena, text, LINE_BYTES_MAX, start);
    assert_true(line_list(&line, UNIT_VOLTAGE, &values, &count));
    assert_int_equal(count, LINE_BYTES_MAX / 5);
    memcpy(text + LINE_BYTES_MAX, "5 V, 5 V", 8);
    line = line_of(&arena, text, sizeof text, start);
    assert_false(line_list(&line, UNIT_VOLTAGE, &values, &count));
    assert_refused(&line, &(struct refusal){"", DIAGNOSTIC_TEXT_TOO_LONG, "5", "several lines"});
    arena_release(&arena);
}

/* Any bytes whatever: an answer, and a problem that lies inside the text. */
static void any_text_is_safe(void **state)
{
    (void)state;
    static const char *const pieces[] = {
        "100 V", "60 s",       " ",    ", ",    ",",   "1.1 uA", "hot", "by",  "in",  "circuit",
        "over",  "-20/+100 %", "two",  "Y2",    "x",   "2",      "R47", "p33", "+/-", "\xC2\xB5",
        "\xE2",  "\xCE\xA9",   "grid", "anode", "8 x", "mm",     "/",   "%",   "+",   "-",
        "12:3",  "1,000",      "of",   "esr",   "tan", "leakage"};
    struct arena arena = {0};
    unsigned long long seed = 66;
    for (int round = 0; round < 30000; round++) {
        char text[256] = "";
        for (int i = 0; i < 8; i++) {
            seed = seed * 6364136223846793005ull + 1442695040888963407ull;
            strcat(text, pieces[(seed >> 40) % (sizeof pieces / sizeof pieces[0])]);
            if (seed >> 62 & 1)
                strcat(text, " ");
        }
        size_t length = strlen(text);
        char *exact = test_malloc(length + 1);
        memcpy(exact, text, length);
        struct line line = line_of(&arena, exact, length, start);
        struct marking marking;
        const struct reading *readings;
        struct electrodes electrodes;
        struct quantity volts;
        struct resistance resistance;
        struct measured_capacitor measured;
        struct accuracy accuracy;
        const struct line_name *names;
        size_t count;
        for (int which = 0; which < 8; which++) {
            bool good = which == 0 ? line_marking(&line, (enum marking_kind)(round % 3), round & 1,
                                                  &marking)
                        : which == 1 ? line_readings(&line, &reading_form, &readings, &count)
                        : which == 2 ? electrodes_read(&line, &electrodes)
                        : which == 3 ? source_read(&line, &volts, &resistance)
                        : which == 4 ? line_measured_capacitor(&line, &measured)
                        : which == 5 ? line_accuracy(&line, &accuracy)
                        : which == 6 ? line_refs(&line, &names, &count)
                                     : line_resistance(&line, &resistance);
            if (!good) {
                assert_non_null(line.problem.text);
                assert_true(line.problem.offset + line.problem.length <= length);
            }
        }
        test_free(exact);
        if (round % 500 == 0)
            arena_release(&arena);
    }
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(readings_carry_on),
        cmocka_unit_test(readings_have_words),
        cmocka_unit_test(readings_are_refused),
        cmocka_unit_test(named_values),
        cmocka_unit_test(slots),
        cmocka_unit_test(resistances),
        cmocka_unit_test(measured_capacitors),
        cmocka_unit_test(accuracies),
        cmocka_unit_test(lists),
        cmocka_unit_test(dates_and_sizes),
        cmocka_unit_test(long_lines_are_refused),
        cmocka_unit_test(any_text_is_safe),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
