/* Colours against published tables and examples; the source stands beside each row. */
#include "reference/colour_code.h"

#include <string.h>

#include "kit.h"

static size_t colours_of(const char *words, enum colour *colours)
{
    size_t count = 0;
    while (*words) {
        size_t length = strcspn(words, " ");
        if (!colour_read(words, length, &colours[count++]))
            fail_msg("no colour: %s", words);
        words += length + (words[length] == ' ');
    }
    return count;
}

/* RETMA, EIA RS-279, IEC 60062: the colour table (seen); the values are arithmetic on it. */
static void resistors(void **state)
{
    (void)state;
    static const struct {
        const char *bands;
        double ohm, percent;
    } rows[] = {
        {"brown black red", 1000, 20},          {"yellow violet yellow", 470e3, 20},
        {"yellow violet red gold", 4700, 5}, /* 4K7 of IEC 60062 (seen) */
        {"red red red silver", 2200, 10},    /* 2K2 (seen) */
        {"brown black green gold", 1e6, 5},  /* 1M0 (seen) */
        {"yellow violet gold gold", 4.7, 5}, /* 4R7 (seen) */
        {"green blue silver silver", 0.56, 10}, {"brown black black red brown", 10e3, 1},
        {"red violet black black red", 270, 2}, {"white brown orange silver", 91e3, 10},
        {"brown black pink gold", 0.010, 5}, /* pink 10^-3, IEC 60062:2016 (seen) */
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        enum colour colours[8];
        struct colour_value value;
        size_t count = colours_of(rows[i].bands, colours);
        assert_true(colour_resistor(colours, count, &value));
        assert_relative(value.value, rows[i].ohm, 1e-12);
        assert_close(value.tolerance_percent, rows[i].percent, 0);
    }
}

static void no_table_has_these(void **state)
{
    (void)state;
    static const char *const rows[] = {"black brown red",        "gold brown red gold",
                                       "brown black red orange", "brown black",
                                       "red gold red silver",    "brown black red white"};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        enum colour colours[8];
        struct colour_value value = {.value = 7};
        size_t count = colours_of(rows[i], colours);
        assert_false(colour_resistor(colours, count, &value));
        assert_close(value.value, 7, 0);
    }
    enum colour colours[8];
    struct colour_value value;
    size_t count = colours_of("orange brown red red gold red", colours); /* no type has orange */
    assert_false(colour_capacitor(colours, count, &value));
    count = colours_of("red green violet", colours); /* no mica of 250 uF */
    assert_false(colour_capacitor(colours, count, &value));
}

static void capacitors(void **state)
{
    (void)state;
    static const struct {
        const char *dots;
        double farad, percent, volts;
        bool paper;
    } rows[] = {
        /* early RMA, printed example 25 pF (seen) */
        {"red green black", 25e-12, 20, 500, false},
        /* the same table: volts in hundreds, tolerance by the digit (seen) */
        {"red green brown green green", 250e-12, 5, 500, false},
        /* AWS, AN 16-40BC224-2: printed example 51 pF (second-hand) */
        {"black green brown red yellow black", 51e-12, 4, NAN, false},
        /* US Army text: white brown red, multiplier red, 1200 pF (seen) */
        {"white brown red red silver red", 1200e-12, 10, NAN, false},
        {"silver brown black brown black orange", 10e-9, 20, NAN, true},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        enum colour colours[8];
        struct colour_value value;
        size_t count = colours_of(rows[i].dots, colours);
        assert_true(colour_capacitor(colours, count, &value));
        assert_relative(value.value, rows[i].farad, 1e-12);
        assert_close(value.tolerance_percent, rows[i].percent, 0);
        assert_true(isnan(rows[i].volts) ? isnan(value.rated_v) : value.rated_v == rows[i].volts);
        assert_int_equal(value.paper, rows[i].paper);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(resistors),
        cmocka_unit_test(no_table_has_these),
        cmocka_unit_test(capacitors),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
