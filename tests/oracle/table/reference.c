/* Published tables: leakage rules, preferred numbers, colours, date codes. */
#include "table.h"

#include "reference/colour_code.h"
#include "reference/date_code.h"
#include "reference/leakage_rule.h"
#include "reference/preferred_value.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static void rows_of_rules(void)
{
    static const struct origin_of_rows jan = {
        "Leakage rules", "JAN-C-62 as quoted by a list of radio amateurs", TRUST_SECOND_HAND};
    static const struct origin_of_rows arithmetic = {"Leakage rules", "arithmetic on the rule",
                                                     TRUST_DERIVED};
    static const struct origin_of_rows vishay = {
        "Leakage rules", "Vishay BCcomponents 038 RSU, document 28309, 2005", TRUST_SEEN};
    static const struct {
        const struct origin_of_rows *origin;
        const char *rule;
        double uf, volts, ua;
    } rows[] = {{&jan, "JAN-C-62", 20, 450, 1100},
                {&jan, "JAN-C-62", 20, 250, 700},
                {&arithmetic, "JAN-C-62", 8, 450, 620},
                {&arithmetic, "JAN-C-62", 40, 450, 1900},
                {&arithmetic, "JAN-C-62", 16, 350, 700},
                {&arithmetic, "JAN-C-62", 10, 25, 400},
                {&arithmetic, "JAN-C-62", 100, 100, 1300},
                {&arithmetic, "JAN-C-62", 100, 101, 2300},
                {&vishay, "0.01 CV or 3 uA", 100, 25, 25},
                {&vishay, "0.01 CV or 3 uA", 10, 25, 3},
                {&vishay, "0.002 CV + 3 uA", 100, 25, 8},
                {&vishay, "0.002 CV + 3 uA", 40, 450, 39},
                {&arithmetic, "3 sqrt(CV)", 20, 450, 284.605}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct leakage_rule rule;
        double limit_a = NAN;
        char what[80];
        if (leakage_rule_read(rows[i].rule, &rule))
            leakage_limit(&rule, rows[i].uf * 1e-6, rows[i].volts, &limit_a);
        snprintf(what, sizeof what, "%s, %g uF %g V (uA)", rows[i].rule, rows[i].uf, rows[i].volts);
        row_relative(rows[i].origin, what, rows[i].ua, limit_a * 1e6, 1e-5);
    }
}

/* IEC 60063 as printed: E3 to E24 and E48 whole; E96 and E192 by its rule, with its exception. */
static void rows_of_series(void)
{
    static const int e24[] = {10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30,
                              33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91};
    static const int e48[] = {100, 105, 110, 115, 121, 127, 133, 140, 147, 154, 162, 169,
                              178, 187, 196, 205, 215, 226, 237, 249, 261, 274, 287, 301,
                              316, 332, 348, 365, 383, 402, 422, 442, 464, 487, 511, 536,
                              562, 590, 619, 649, 681, 715, 750, 787, 825, 866, 909, 953};
    static const char *const names[] = {"E3", "E6", "E12", "E24", "E48", "E96", "E192"};
    for (int series = 0; series < E_SERIES_COUNT; series++) {
        const struct origin_of_rows iec = {"Preferred numbers",
                                           series == E_SERIES_3 ? "IEC 60063, every second of E6"
                                           : series <= E_SERIES_48
                                               ? "IEC 60063, list"
                                               : "IEC 60063, rule, with 920 for 919",
                                           series == E_SERIES_3 ? TRUST_RECALLED : TRUST_SEEN};
        size_t size = e_series_size((enum e_series)series), wrong = 0;
        for (size_t i = 0; i < size; i++) {
            int value = e_series_value((enum e_series)series, i);
            int printed = series <= E_SERIES_24 ? e24[i * 24 / size]
                          : series == E_SERIES_48
                              ? e48[i]
                              : (int)lround(100 * pow(10, (double)i / (double)size));
            if (series == E_SERIES_192 && i == 185)
                printed = 920;
            wrong += value != printed;
        }
        char what[60];
        snprintf(what, sizeof what, "%s, values of %zu that differ", names[series], size);
        row_close(&iec, what, 0, (double)wrong, 0);
    }
}

static size_t colours_of(const char *words, enum colour *colours)
{
    size_t count = 0;
    while (*words && count < COLOURS_MAX) {
        size_t length = strcspn(words, " ");
        if (!colour_read(words, length, &colours[count++]))
            return 0;
        words += length + (words[length] == ' ');
    }
    return count;
}

static void rows_of_colours(void)
{
    static const struct origin_of_rows iec = {"Colour codes", "IEC 60062, table of colours",
                                              TRUST_SEEN};
    static const struct origin_of_rows aws = {"Colour codes", "AN 16-40BC224-2, example",
                                              TRUST_SECOND_HAND};
    static const struct origin_of_rows army = {"Colour codes", "US Army text, example", TRUST_SEEN};
    static const struct origin_of_rows rma = {"Colour codes", "early RMA mica, example",
                                              TRUST_SEEN};
    static const struct {
        const struct origin_of_rows *origin;
        bool capacitor;
        const char *words;
        double value; /* ohm, pF */
    } rows[] = {{&iec, false, "yellow violet red gold", 4700},
                {&iec, false, "red red red silver", 2200},
                {&iec, false, "brown black green gold", 1e6},
                {&iec, false, "yellow violet gold gold", 4.7},
                {&iec, false, "brown black black red brown", 10e3},
                {&aws, true, "black green brown red yellow black", 51},
                {&army, true, "white brown red red silver red", 1200},
                {&rma, true, "red green black", 25}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        enum colour colours[COLOURS_MAX];
        struct colour_value value = {.value = NAN};
        size_t count = colours_of(rows[i].words, colours);
        bool read = rows[i].capacitor ? colour_capacitor(colours, count, &value)
                                      : colour_resistor(colours, count, &value);
        row_relative(rows[i].origin, rows[i].words, rows[i].value,
                     read ? value.value * (rows[i].capacitor ? 1e12 : 1) : NAN, 1e-9);
    }
}

static void rows_of_dates(void)
{
    static const struct origin_of_rows letters = {
        "Date codes", "dated British amplifiers of the 1960s", TRUST_SECOND_HAND};
    static const struct origin_of_rows hunts = {"Date codes", "Hunts, key word WHITSUNDAY",
                                                TRUST_SECOND_HAND};
    static const struct origin_of_rows eia = {"Date codes", "EIA, maker, year, week",
                                              TRUST_RECALLED};
    static const struct {
        const struct origin_of_rows *origin;
        const char *stamp;
        int year;
    } rows[] = {{&letters, "WH", 1965}, {&letters, "XE", 1966}, {&letters, "SC", 1961},
                {&letters, "TL", 1962}, {&letters, "JT", 1962}, {&hunts, "IYT", 1964},
                {&hunts, "YIU", 1966},  {&hunts, "ITD", 1963},  {&hunts, "D YW", 1968},
                {&eia, "235614", 1956}, {&eia, "2355231", 1952}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct date_code code;
        double got = NAN;
        if (date_code_read(rows[i].stamp, &code))
            for (size_t k = 0; k < code.count; k++)
                if (isnan(got) ||
                    abs(code.readings[k].year - rows[i].year) < fabs(got - rows[i].year))
                    got = code.readings[k].year;
        row_close(rows[i].origin, rows[i].stamp, rows[i].year, got, 0);
    }
}

void rows_of_reference(void)
{
    rows_of_rules();
    rows_of_series();
    rows_of_colours();
    rows_of_dates();
}
