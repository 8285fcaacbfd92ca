#include "reference/colour_code.h"

#include <math.h>
#include <string.h>
#include <strings.h>

bool colour_read(const char *text, size_t length, enum colour *colour)
{
    static const struct {
        const char *word;
        enum colour colour;
    } words[] = {{"black", COLOUR_BLACK},   {"brown", COLOUR_BROWN},   {"red", COLOUR_RED},
                 {"orange", COLOUR_ORANGE}, {"yellow", COLOUR_YELLOW}, {"green", COLOUR_GREEN},
                 {"blue", COLOUR_BLUE},     {"violet", COLOUR_VIOLET}, {"purple", COLOUR_VIOLET},
                 {"grey", COLOUR_GREY},     {"gray", COLOUR_GREY},     {"white", COLOUR_WHITE},
                 {"gold", COLOUR_GOLD},     {"silver", COLOUR_SILVER}, {"pink", COLOUR_PINK}};
    for (size_t i = 0; i < sizeof words / sizeof *words; i++)
        if (strlen(words[i].word) == length && strncasecmp(words[i].word, text, length) == 0) {
            *colour = words[i].colour;
            return true;
        }
    return false;
}

static bool is_digit(enum colour colour)
{
    return colour <= COLOUR_WHITE;
}

/* The power of ten of a multiplier; pink since IEC 60062:2016. */
static int exponent_of(enum colour colour)
{
    if (is_digit(colour))
        return (int)colour;
    return colour == COLOUR_GOLD ? -1 : colour == COLOUR_SILVER ? -2 : -3;
}

/* ---- resistors */

/* Per cent; NaN: no tolerance has this colour. Of four bands only the colours of carbon resistors,
   of five those of film besides. */
static double resistor_tolerance(enum colour colour, bool five)
{
    switch (colour) {
    case COLOUR_BROWN:
        return 1;
    case COLOUR_RED:
        return 2;
    case COLOUR_GOLD:
        return 5;
    case COLOUR_SILVER:
        return 10;
    case COLOUR_GREEN:
        return five ? 0.5 : NAN;
    case COLOUR_BLUE:
        return five ? 0.25 : NAN;
    case COLOUR_VIOLET:
        return five ? 0.1 : NAN;
    case COLOUR_GREY:
        return five ? 0.05 : NAN;
    case COLOUR_BLACK:
    case COLOUR_ORANGE:
    case COLOUR_YELLOW:
    case COLOUR_WHITE:
    case COLOUR_PINK:
    case COLOUR_COUNT:
        break;
    }
    return NAN;
}

bool colour_resistor(const enum colour *bands, size_t count, struct colour_value *value)
{
    if (count < 3 || count > COLOURS_MAX)
        return false;
    size_t figures = count >= 5 ? 3 : 2;
    double number = 0;
    for (size_t i = 0; i < figures; i++) {
        if (!is_digit(bands[i]) || (i == 0 && bands[i] == COLOUR_BLACK))
            return false;
        number = 10 * number + (double)bands[i];
    }
    double tolerance = count == 3 ? 20 : resistor_tolerance(bands[figures + 1], count >= 5);
    if (isnan(tolerance))
        return false;
    *value = (struct colour_value){.value = number * pow(10, exponent_of(bands[figures])),
                                   .tolerance_set = true,
                                   .tolerance_percent = tolerance,
                                   .rated_v = NAN,
                                   .source = SOURCE_COLOUR_CODE};
    return true;
}

/* ---- capacitors */

static bool picofarads(const enum colour *figures, enum colour zeros, double *value)
{
    bool small = zeros == COLOUR_GOLD || zeros == COLOUR_SILVER || zeros <= COLOUR_YELLOW;
    if (!is_digit(figures[0]) || !is_digit(figures[1]) || !small ||
        (figures[0] == COLOUR_BLACK && figures[1] == COLOUR_BLACK))
        return false;
    *value = (10 * (double)figures[0] + (double)figures[1]) * pow(10, exponent_of(zeros)) * 1e-12;
    return true;
}

/* Early moulded mica: the digit is the per cent, gold and silver 5 and 10. */
static double early_tolerance(enum colour colour)
{
    if (colour >= COLOUR_BROWN && colour <= COLOUR_WHITE)
        return (double)colour;
    return colour == COLOUR_GOLD ? 5 : colour == COLOUR_SILVER ? 10 : NAN;
}

static double early_volts(enum colour colour)
{
    if (colour >= COLOUR_BROWN && colour <= COLOUR_WHITE)
        return 100 * (double)colour;
    return colour == COLOUR_GOLD ? 1000 : colour == COLOUR_SILVER ? 2000 : NAN;
}

static bool early_mica(const enum colour *dots, size_t count, struct colour_value *value)
{
    struct colour_value found = {.rated_v = count == 3 ? 500 : NAN, .source = SOURCE_EARLY_MICA};
    if (!picofarads(dots, dots[2], &found.value))
        return false;
    if (count >= 4) {
        found.rated_v = early_volts(dots[3]);
        if (isnan(found.rated_v))
            return false;
    }
    found.tolerance_set = true;
    found.tolerance_percent = count == 5 ? early_tolerance(dots[4]) : 20;
    if (isnan(found.tolerance_percent))
        return false;
    *value = found;
    return true;
}

static double class_tolerance(enum colour colour)
{
    switch (colour) {
    case COLOUR_BLACK:
        return 20;
    case COLOUR_BROWN:
        return 1;
    case COLOUR_RED:
        return 2;
    case COLOUR_ORANGE:
        return 3;
    case COLOUR_YELLOW:
        return 4;
    case COLOUR_GREEN:
        return 5;
    case COLOUR_GOLD:
        return 5;
    case COLOUR_SILVER:
        return 10;
    case COLOUR_BLUE:
    case COLOUR_VIOLET:
    case COLOUR_GREY:
    case COLOUR_WHITE:
    case COLOUR_PINK:
    case COLOUR_COUNT:
        break;
    }
    return NAN;
}

static bool six_dots(const enum colour *dots, struct colour_value *value)
{
    struct colour_value found = {.rated_v = NAN, .paper = dots[0] == COLOUR_SILVER};
    bool typed = dots[0] == COLOUR_BLACK || dots[0] == COLOUR_WHITE || found.paper;
    /* the class: A to E, I, J by digit, grey and white for the last two */
    bool classed = dots[3] <= COLOUR_YELLOW || dots[3] == COLOUR_GREY || dots[3] == COLOUR_WHITE;
    if (!typed || !classed || !picofarads(&dots[1], dots[5], &found.value))
        return false;
    found.tolerance_set = true;
    found.tolerance_percent = class_tolerance(dots[4]);
    if (isnan(found.tolerance_percent))
        return false;
    found.source = dots[0] == COLOUR_WHITE ? SOURCE_MICA_CODE : SOURCE_AWS_MICA;
    *value = found;
    return true;
}

bool colour_capacitor(const enum colour *dots, size_t count, struct colour_value *value)
{
    if (count == COLOURS_MAX)
        return six_dots(dots, value);
    return count >= 3 && count < COLOURS_MAX && early_mica(dots, count, value);
}
