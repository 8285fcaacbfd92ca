#include "kit.h"

#include "quantity/quantity.h"

#include <locale.h>
#include <stdlib.h>
#include <string.h>

static enum quantity_status read_as(struct arena *arena, const char *text, enum unit unit,
                                    struct quantity *quantity)
{
    struct quantity_form form = {.unit = unit};
    return quantity_read(arena, text, strlen(text), &form, quantity, NULL);
}

/* Values follow from the definitions of the prefixes (SI Brochure 2019, table 7), of IEC 60062:2016
   clause 4, of the inch (25.4 mm) and of the Fahrenheit scale (C = (F - 32)*5/9). */
static void values_are_read(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        enum unit unit;
        double value;
    } rows[] = {
        {"0.05 uF", UNIT_CAPACITANCE, 0.05e-6},
        {"0.05 \xC2\xB5"
         "F",
         UNIT_CAPACITANCE, 0.05e-6},
        {"0.05 \xCE\xBC"
         "F",
         UNIT_CAPACITANCE, 0.05e-6},
        {".05mfd", UNIT_CAPACITANCE, 0.05e-6},
        {".05 mfd.", UNIT_CAPACITANCE, 0.05e-6},
        {"8MF", UNIT_CAPACITANCE, 8e-6},
        {"8 MFD", UNIT_CAPACITANCE, 8e-6},
        {"8 mF", UNIT_CAPACITANCE, 8e-6},
        {"50 mmfd", UNIT_CAPACITANCE, 50e-12},
        {"50 MMF", UNIT_CAPACITANCE, 50e-12},
        {"50 uuF", UNIT_CAPACITANCE, 50e-12},
        {"50 \xC2\xB5\xC2\xB5"
         "F",
         UNIT_CAPACITANCE, 50e-12},
        {"5 kpF", UNIT_CAPACITANCE, 5e-9},
        {"470 pF", UNIT_CAPACITANCE, 470e-12},
        {"100p", UNIT_CAPACITANCE, 100e-12},
        {"4n7", UNIT_CAPACITANCE, 4.7e-9},
        {"4n7F", UNIT_CAPACITANCE, 4.7e-9},
        {"4n7 F", UNIT_CAPACITANCE, 4.7e-9},
        {"p33", UNIT_CAPACITANCE, 0.33e-12},
        {"3p32", UNIT_CAPACITANCE, 3.32e-12},
        {"332p", UNIT_CAPACITANCE, 332e-12},
        {"\xC2\xB5"
         "47",
         UNIT_CAPACITANCE, 0.47e-6},
        {"2u2", UNIT_CAPACITANCE, 2.2e-6},
        {"0,05 uF", UNIT_CAPACITANCE, 0.05e-6},
        {"0,047 uF", UNIT_CAPACITANCE, 0.047e-6},
        {"470k", UNIT_RESISTANCE, 470e3},
        {"470 K", UNIT_RESISTANCE, 470e3},
        {"470 k ohm", UNIT_RESISTANCE, 470e3},
        {"470 kilohms", UNIT_RESISTANCE, 470e3},
        {"4k7", UNIT_RESISTANCE, 4700},
        {"4k7 ohm", UNIT_RESISTANCE, 4700},
        {"2K2", UNIT_RESISTANCE, 2200},
        {"4R7", UNIT_RESISTANCE, 4.7},
        {"R47", UNIT_RESISTANCE, 0.47},
        {"R12", UNIT_RESISTANCE, 0.12},
        {"1M0", UNIT_RESISTANCE, 1e6},
        {"59R04", UNIT_RESISTANCE, 59.04},
        {"10M", UNIT_RESISTANCE, 10e6},
        {"0.5 meg", UNIT_RESISTANCE, 0.5e6},
        {"0.5 Megohm", UNIT_RESISTANCE, 0.5e6},
        {"220 M", UNIT_RESISTANCE, 220e6},
        {"2,2 M", UNIT_RESISTANCE, 2.2e6},
        {"5.5 G", UNIT_RESISTANCE, 5.5e9},
        {"270 ohm", UNIT_RESISTANCE, 270},
        {"270R", UNIT_RESISTANCE, 270},
        {"270 \xCE\xA9", UNIT_RESISTANCE, 270},
        {"270 \xE2\x84\xA6", UNIT_RESISTANCE, 270},
        {"2.2 k\xCE\xA9", UNIT_RESISTANCE, 2200},
        {"80 m\xCE\xA9", UNIT_RESISTANCE, 0.08},
        {"1.5 M\xCE\xA9", UNIT_RESISTANCE, 1.5e6},
        {"2.4 uA", UNIT_CURRENT, 2.4e-6},
        {"12 nA", UNIT_CURRENT, 12e-9},
        {"2.0 mA", UNIT_CURRENT, 2e-3},
        {"1.1e-6 A", UNIT_CURRENT, 1.1e-6},
        {"-0.3 uA", UNIT_CURRENT, -0.3e-6},
        {"250 V", UNIT_VOLTAGE, 250},
        {"250V", UNIT_VOLTAGE, 250},
        {"230 V a.c.", UNIT_VOLTAGE, 230},
        {"6.3 V AC", UNIT_VOLTAGE, 6.3},
        {"0.3 A d.c.", UNIT_CURRENT, 0.3},
        {"310 V~", UNIT_VOLTAGE, 310},
        {"250\xC2\xA0V", UNIT_VOLTAGE, 250},
        {"262.5 volts", UNIT_VOLTAGE, 262.5},
        {"1,5 kV", UNIT_VOLTAGE, 1500},
        {"-19 V", UNIT_VOLTAGE, -19},
        {"\xE2\x88\x92"
         "19 V",
         UNIT_VOLTAGE, -19},
        {"- 28 V", UNIT_VOLTAGE, -28},
        {"+5 V", UNIT_VOLTAGE, 5},
        {"12\xE2\x80\x89"
         "345 V",
         UNIT_VOLTAGE, 12345},
        {"1/2 W", UNIT_POWER, 0.5},
        {"\xC2\xBD W", UNIT_POWER, 0.5},
        {"\xC2\xBC W", UNIT_POWER, 0.25},
        {"1\xC2\xBD W", UNIT_POWER, 1.5},
        {"1 1/2 W", UNIT_POWER, 1.5},
        {"500 mW", UNIT_POWER, 0.5},
        {"465 kc/s", UNIT_FREQUENCY, 465e3},
        {"465 Kc/s", UNIT_FREQUENCY, 465e3},
        {"1 Mc/s", UNIT_FREQUENCY, 1e6},
        {"470 kHz", UNIT_FREQUENCY, 470e3},
        {"50 c/s", UNIT_FREQUENCY, 50},
        {"50 Hz", UNIT_FREQUENCY, 50},
        {"60 s", UNIT_TIME, 60},
        {"5 min", UNIT_TIME, 300},
        {"1 h 10 min", UNIT_TIME, 4200},
        {"1h10min", UNIT_TIME, 4200},
        {"12 min 30 s", UNIT_TIME, 750},
        {"1 day 2 hours 3 min 4.5 s", UNIT_TIME, 93784.5},
        {"1/2 h", UNIT_TIME, 1800},
        {"19 C", UNIT_TEMPERATURE, 19},
        {"19 \xC2\xB0"
         "C",
         UNIT_TEMPERATURE, 19},
        {"-5 C", UNIT_TEMPERATURE, -5},
        {"32 F", UNIT_TEMPERATURE, 0},
        {"66 F", UNIT_TEMPERATURE, 34.0 * 5 / 9},
        {"-40 \xC2\xB0"
         "F",
         UNIT_TEMPERATURE, -40},
        {"212 deg F", UNIT_TEMPERATURE, 100},
        {"20 %", UNIT_PERCENT, 20},
        {"20%", UNIT_PERCENT, 20},
        {"20 per cent", UNIT_PERCENT, 20},
        {"6 mA/V", UNIT_CONDUCTANCE, 6e-3},
        {"4000 umho", UNIT_CONDUCTANCE, 4e-3},
        {"4000 micromhos", UNIT_CONDUCTANCE, 4e-3},
        {"4.1 mS", UNIT_CONDUCTANCE, 4.1e-3},
        {"1000 ohm/V", UNIT_SENSITIVITY, 1000},
        {"1000 ohms per volt", UNIT_SENSITIVITY, 1000},
        {"20 k\xCE\xA9/V", UNIT_SENSITIVITY, 20e3},
        {"10 H", UNIT_INDUCTANCE, 10},
        {"170 uH", UNIT_INDUCTANCE, 170e-6},
        {"51 mm", UNIT_LENGTH, 51e-3},
        {"2 in", UNIT_LENGTH, 50.8e-3},
        {"-6 dB", UNIT_DECIBEL, -6},
        {"20", UNIT_NONE, 20},
        {"0", UNIT_NONE, 0},
        {"  250 V  ", UNIT_VOLTAGE, 250},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        for (int any = 0; any < 2; any++) {
            struct quantity quantity = {0};
            bool fahrenheit = rows[i].unit == UNIT_TEMPERATURE && strchr(rows[i].text, 'F') != NULL;
            if (any && (rows[i].unit == UNIT_NONE || fahrenheit))
                continue;
            enum unit unit = any ? UNIT_COUNT : rows[i].unit;
            enum quantity_status status = read_as(&arena, rows[i].text, unit, &quantity);
            if (status != QUANTITY_OK)
                print_error("'%s'\n", rows[i].text);
            assert_int_equal(status, QUANTITY_OK);
            assert_int_equal(quantity.unit, rows[i].unit);
            if (fabs(quantity.value - rows[i].value) > 2e-16 * fabs(rows[i].value))
                print_error("'%s'\n", rows[i].text);
            assert_relative(quantity.value, rows[i].value, 2e-16);
        }
    }
    arena_release(&arena);
}

static void texts_are_refused(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        enum unit unit;
        enum quantity_status status;
        const char *hint;
    } rows[] = {
        {"1,000 V", UNIT_VOLTAGE, QUANTITY_COMMA, "write 1000 V or 1.000 V"},
        {"1,000", UNIT_NONE, QUANTITY_COMMA, "write 1000 or 1.000"},
        {"-12,500 V", UNIT_VOLTAGE, QUANTITY_COMMA, "write -12500 V or -12.500 V"},
        {"over 2,000 M", UNIT_RESISTANCE, QUANTITY_COMMA, "write over 2000 M or over 2.000 M"},
        {"1,000,000 ohm", UNIT_RESISTANCE, QUANTITY_COMMA,
         "write 1000000 ohm, without marks between thousands"},
        {"1.000,5 V", UNIT_VOLTAGE, QUANTITY_COMMA,
         "write 1000.5 V, without marks between thousands"},
        {"12,345.67 ohm", UNIT_RESISTANCE, QUANTITY_COMMA,
         "write 12345.67 ohm, without marks between thousands"},
        {"12:30", UNIT_TIME, QUANTITY_CLOCK, "write 12 min 30 s or 12 h 30 min"},
        {"12:30 min", UNIT_TIME, QUANTITY_CLOCK, "write 12 min 30 s or 12 h 30 min"},
        {"1 h 12:30", UNIT_TIME, QUANTITY_CLOCK, "write 12 min 30 s or 12 h 30 min"},
        {"1:02:03", UNIT_TIME, QUANTITY_CLOCK, "write 1 h 02 min 03 s"},
        {"80", UNIT_VOLTAGE, QUANTITY_NO_UNIT, "add the unit, as in 250 V"},
        {"1.5", UNIT_COUNT, QUANTITY_NO_UNIT, NULL},
        {"80 V", UNIT_CURRENT, QUANTITY_WRONG_UNIT, "a current is wanted, as in 2.4 uA"},
        {"80 V", UNIT_NONE, QUANTITY_WRONG_UNIT, "a plain number is wanted, as in 20"},
        {"", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"   ", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"5 ohm a.c.", UNIT_RESISTANCE, QUANTITY_UNREADABLE, NULL},
        {"-", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"over", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"400 X", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"0x10 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"inf V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"nan V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"1e400 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"1e+400 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"1e+40 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"6E5", UNIT_NONE, QUANTITY_UNREADABLE, NULL},
        {"99999999999999999999999999999999999999 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"1.2.3 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"5. V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"1 MA", UNIT_CURRENT, QUANTITY_UNREADABLE, NULL},
        {"4k7k", UNIT_RESISTANCE, QUANTITY_UNREADABLE, NULL},
        {"4n7 ohm", UNIT_CAPACITANCE, QUANTITY_UNREADABLE, NULL},
        {"4.7k2", UNIT_RESISTANCE, QUANTITY_UNREADABLE, NULL},
        {"250 V 10 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"10 min 1 h", UNIT_TIME, QUANTITY_UNREADABLE, NULL},
        {"1 h 90 min", UNIT_TIME, QUANTITY_UNREADABLE, NULL},
        {"12 min 30", UNIT_TIME, QUANTITY_UNREADABLE, NULL},
        {"1 h -5 min", UNIT_TIME, QUANTITY_UNREADABLE, NULL},
        {"3/2 W", UNIT_POWER, QUANTITY_UNREADABLE, NULL},
        {"1/0 W", UNIT_POWER, QUANTITY_UNREADABLE, NULL},
        {"1/2/2 W", UNIT_POWER, QUANTITY_UNREADABLE, NULL},
        {"12 345 V", UNIT_VOLTAGE, QUANTITY_UNREADABLE, NULL},
        {"0.05 \xFF"
         "F",
         UNIT_CAPACITANCE, QUANTITY_UNREADABLE, NULL},
        {"\xC2", UNIT_CAPACITANCE, QUANTITY_UNREADABLE, NULL},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct quantity quantity = {0};
        struct quantity_form form = {.unit = rows[i].unit};
        enum quantity_status status = read_as(&arena, rows[i].text, rows[i].unit, &quantity);
        if (status != rows[i].status)
            print_error("'%s'\n", rows[i].text);
        assert_int_equal(status, rows[i].status);
        if (status != QUANTITY_OK && status != QUANTITY_WRONG_UNIT)
            assert_false(quantity.set);
        const char *hint = quantity_hint(&arena, status, rows[i].text, &form);
        if (rows[i].hint == NULL) {
            assert_null(hint);
        } else {
            assert_non_null(hint);
            assert_string_equal(hint, rows[i].hint);
        }
    }
    arena_release(&arena);
}

static void bare_m_on_a_resistor_is_refused(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct quantity quantity = {0};
    struct quantity_form form = {.unit = UNIT_RESISTANCE, .bare_m_refused = true};
    static const char *const refused[] = {"50M", "50 M", "0.5M"};
    static const char *const hints[] = {"write 50k or 50 meg", "write 50k or 50 meg",
                                        "write 0.5k or 0.5 meg"};
    for (size_t i = 0; i < 3; i++) {
        assert_int_equal(
            quantity_read(&arena, refused[i], strlen(refused[i]), &form, &quantity, NULL),
            QUANTITY_MEGA_OR_KILO);
        assert_false(quantity.set);
        assert_string_equal(quantity_hint(&arena, QUANTITY_MEGA_OR_KILO, refused[i], &form),
                            hints[i]);
    }
    static const char *const clear[] = {"50 meg", "1M0", "50 M\xCE\xA9", "50k", "270R"};
    for (size_t i = 0; i < 5; i++)
        assert_int_equal(quantity_read(&arena, clear[i], strlen(clear[i]), &form, &quantity, NULL),
                         QUANTITY_OK);
    arena_release(&arena);
}

static void old_microfarads_are_told(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        bool old;
    } rows[] = {{"8 MF", true},   {"8 MFD", true}, {"8 mF", true},  {"8 Mfd.", true},
                {"8 mfd", false}, {"8 uF", false}, {"8 MMF", false}};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct quantity quantity = {0};
        struct quantity_form form = {.unit = UNIT_CAPACITANCE};
        bool old = !rows[i].old;
        assert_int_equal(
            quantity_read(&arena, rows[i].text, strlen(rows[i].text), &form, &quantity, &old),
            QUANTITY_OK);
        assert_int_equal(old, rows[i].old);
    }
    arena_release(&arena);
}

static void bounds_and_optional_units(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct quantity quantity = {0};
    assert_int_equal(read_as(&arena, " over 2000 M ", UNIT_RESISTANCE, &quantity), QUANTITY_OK);
    assert_int_equal(quantity.bound, BOUND_OVER);
    assert_close(quantity.value, 2e9, 0);
    assert_string_equal(quantity.written, "over 2000 M");
    assert_int_equal(read_as(&arena, "Under 0.01 uA", UNIT_CURRENT, &quantity), QUANTITY_OK);
    assert_int_equal(quantity.bound, BOUND_UNDER);
    assert_close(quantity.value, 1e-8, 0);
    assert_int_equal(read_as(&arena,
                             "<\xE2\x80\x89"
                             "0.01\xC2\xA0\xC2\xB5"
                             "A",
                             UNIT_CURRENT, &quantity),
                     QUANTITY_OK);
    assert_int_equal(quantity.bound, BOUND_UNDER);

    struct quantity_form volts = {.unit = UNIT_VOLTAGE, .unit_optional = true};
    assert_int_equal(quantity_read(&arena, "80", 2, &volts, &quantity, NULL), QUANTITY_OK);
    assert_int_equal(quantity.unit, UNIT_VOLTAGE);
    assert_close(quantity.value, 80, 0);
    assert_int_equal(quantity_read(&arena, "80 A", 4, &volts, &quantity, NULL),
                     QUANTITY_WRONG_UNIT);
    assert_int_equal(quantity.unit, UNIT_CURRENT);

    /* No zero has a sign. */
    assert_int_equal(read_as(&arena, "-0 V", UNIT_VOLTAGE, &quantity), QUANTITY_OK);
    assert_false(signbit(quantity.value));
    arena_release(&arena);
}

/* The double nearest to the number, prefix included: what the compiler makes of the same figures.
 */
static void values_are_correctly_rounded(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        double value;
    } rows[] = {{"0.1 uF", 0.1e-6},
                {"4.7 pF", 4.7e-12},
                {"0.3 pF", 0.3e-12},
                {"123456789.123456789 uF", 123.456789123456789},
                {"0.000000000000000001234567890123 F", 1.234567890123e-18},
                {"1e-25 F", 1e-25}};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct quantity quantity = {0};
        assert_int_equal(read_as(&arena, rows[i].text, UNIT_CAPACITANCE, &quantity), QUANTITY_OK);
        assert_true(quantity.value == rows[i].value);
    }
    arena_release(&arena);
}

/* Any decimal figure, against the C library's own conversion in the C locale. */
static void values_agree_with_the_c_library(void **state)
{
    (void)state;
    static const struct {
        const char *prefix;
        int power;
    } prefixes[] = {{"p", -12}, {"n", -9}, {"u", -6}, {"", 0}};
    struct arena arena = {0};
    unsigned long long seed = 1936;
    for (int round = 0; round < 40000; round++) {
        char whole[16] = "", decimals[16] = "", text[64], plain[64];
        seed = seed * 6364136223846793005ull + 1442695040888963407ull;
        size_t which = seed >> 62;
        snprintf(whole, sizeof whole, "%llu", (seed >> 20) % 10000000);
        snprintf(decimals, sizeof decimals, "%.*llu", 1 + (int)(seed >> 58) % 12, seed % 100000);
        snprintf(text, sizeof text, "%s%s%s %sF", whole, round & 1 ? "." : ",", decimals,
                 prefixes[which].prefix);
        snprintf(plain, sizeof plain, "%s.%se%d", whole, decimals, prefixes[which].power);
        struct quantity quantity = {0};
        enum quantity_status status = read_as(&arena, text, UNIT_CAPACITANCE, &quantity);
        if (status == QUANTITY_COMMA && strlen(decimals) == 3 && !(round & 1))
            continue;
        assert_int_equal(status, QUANTITY_OK);
        if (quantity.value != strtod(plain, NULL))
            print_error("'%s' is %.17g\n", text, quantity.value);
        assert_true(quantity.value == strtod(plain, NULL));
    }
    arena_release(&arena);
}

static void the_locale_changes_nothing(void **state)
{
    (void)state;
    static const char *const names[] = {"de_DE.UTF-8", "fr_FR.UTF-8", "C.UTF-8", "C"};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
        struct quantity quantity = {0};
        if (setlocale(LC_ALL, names[i]) == NULL)
            continue;
        assert_int_equal(
            read_as(&arena, "0.00000000000000000012345678901234 F", UNIT_CAPACITANCE, &quantity),
            QUANTITY_OK);
        assert_true(quantity.value == 1.2345678901234e-19);
    }
    setlocale(LC_ALL, "C");
    arena_release(&arena);
}

/* Cut or mangled texts never read beyond their end, and give a value or a status. */
static void every_prefix_is_safe(void **state)
{
    (void)state;
    static const char *const texts[] = {"over 1 1/2 \xC2\xB5\xC2\xB5"
                                        "F",
                                        "-12,345,678.9e-12 k\xCE\xA9/V", "1 h 10 min 30 s",
                                        "\xE2\x88\x92\xC2\xBD \xE2\x84\x83"};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof texts / sizeof texts[0]; i++) {
        for (size_t length = 0; length <= strlen(texts[i]); length++) {
            char *exact = test_malloc(length + 1);
            memcpy(exact, texts[i], length);
            struct quantity quantity = {0};
            struct quantity_form form = {.unit = UNIT_COUNT};
            enum quantity_status status =
                quantity_read(&arena, exact, length, &form, &quantity, NULL);
            assert_true(status <= QUANTITY_MEGA_OR_KILO);
            if (status == QUANTITY_OK)
                assert_true(isfinite(quantity.value));
            test_free(exact);
        }
    }
    arena_release(&arena);
}

static void tokens(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        const char *tokens; /* between strokes; ',' before one behind a comma, '#' a number */
    } rows[] = {
        {"0.02 uF 400 V 20 %", "#0.02 uF|#400 V|#20 %"},
        {"0.02uF 400V 20%", "#0.02uF|#400V|#20%"},
        {"polypropylene 0.022 uF 630 V", "polypropylene|#0.022 uF|#630 V"},
        {"1 h 10 min 3 uA", "#1 h 10 min|#3 uA"},
        {"12 min 30 s 9 uA", "#12 min 30 s|#9 uA"},
        {"50 V 30 s 170 uA, 5 min 21 uA", "#50 V|#30 s|#170 uA|,#5 min|#21 uA"},
        {"500 V over 2000 M", "#500 V|#over 2000 M"},
        {"500 V < 0.01 uA", "#500 V|#< 0.01 uA"},
        {"8 uF -20/+100 %", "#8 uF|#-20/+100 %"},
        {"8 uF +100/-20%", "#8 uF|#+100/-20%"},
        {"8 uF \xC2\xB1"
         "20 % +/-5 %",
         "#8 uF|#\xC2\xB1"
         "20 %|#+/-5 %"},
        {"90 V 220k", "#90 V|#220k"},
        {"4k7 1/2 W", "#4k7|#1/2 W"},
        {"4k7 1 1/2 W 10 %", "#4k7|#1 1/2 W|#10 %"},
        {"270 ohm 1 W", "#270 ohm|#1 W"},
        {"470 k ohm 1 W", "#470 k ohm|#1 W"},
        {"1000 ohms per volt 250 V", "#1000 ohms per volt|#250 V"},
        {"grid -19 V, anode 380 V", "grid|#-19 V|,anode|#380 V"},
        {"22 mm x 51 mm", "#22 mm x 51 mm"},
        {"8 uF 22 x 51 mm 450 V", "#8 uF|#22 x 51 mm|#450 V"},
        {"35x12x60mm", "#35x12x60mm"},
        {"35 \xC3\x97 12 \xC3\x97 60 mm", "#35 \xC3\x97 12 \xC3\x97 60 mm"},
        {"two Y2 4700 pF in series", "two|Y2|#4700 pF|in|series"},
        {"2 Y2 1 nF", "#2|Y2|#1 nF"},
        {"2 x 2200 pF", "#2|x|#2200 pF"},
        {"2 x Y2", "#2|x|Y2"},
        {"1.1 uA in circuit", "#1.1 uA|in|circuit"},
        {"9 in series", "#9|in|series"},
        {"1 in x 2 in", "#1 in x 2 in"},
        {"0.3 uA 2031-02-10 left", "#0.3 uA|#2031-02-10|left"},
        {"1,5 V", "#1,5 V"},
        {"1,000 V 5 s", "#1,000 V|#5 s"},
        {"12:30 3 uA", "#12:30|#3 uA"},
        {"400 X 5 V", "#400|X|#5 V"},
        {"400X 5 V", "#400X|#5 V"},
        {"100 V,60 s", "#100 V,60|s"},
        {"hot 45 C by bridge", "hot|#45 C|by|bridge"},
        {"a, b", "a|,b"},
        {" , a , , b", ",a|,b"},
        {"a ,, b", "a|,|,b"},
        {"", ""},
        {" , ", ""},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        char joined[256] = "";
        const char *cursor = rows[i].text, *end = cursor + strlen(cursor);
        struct quantity_token token;
        while (quantity_token_next(&cursor, end, &token)) {
            size_t at = strlen(joined);
            snprintf(joined + at, sizeof joined - at, "%s%s%s%.*s", at > 0 ? "|" : "",
                     token.after_comma ? "," : "", token.is_number ? "#" : "", (int)token.length,
                     token.start);
        }
        assert_string_equal(joined, rows[i].tokens);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(values_are_read),
        cmocka_unit_test(texts_are_refused),
        cmocka_unit_test(bare_m_on_a_resistor_is_refused),
        cmocka_unit_test(old_microfarads_are_told),
        cmocka_unit_test(bounds_and_optional_units),
        cmocka_unit_test(values_are_correctly_rounded),
        cmocka_unit_test(values_agree_with_the_c_library),
        cmocka_unit_test(the_locale_changes_nothing),
        cmocka_unit_test(every_prefix_is_safe),
        cmocka_unit_test(tokens),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
