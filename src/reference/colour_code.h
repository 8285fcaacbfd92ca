/*
 * Colour codes of resistors and moulded capacitors: bands and dots read by the published tables.
 * Colours in the order in which they are read; a code that no table has gives no value.
 */
#ifndef REFERENCE_COLOUR_CODE_H
#define REFERENCE_COLOUR_CODE_H

#include "reference/source.h"

#include <stdbool.h>
#include <stddef.h>

/* 0 to 9 are their own digits. */
enum colour {
    COLOUR_BLACK,
    COLOUR_BROWN,
    COLOUR_RED,
    COLOUR_ORANGE,
    COLOUR_YELLOW,
    COLOUR_GREEN,
    COLOUR_BLUE,
    COLOUR_VIOLET,
    COLOUR_GREY,
    COLOUR_WHITE,
    COLOUR_GOLD,
    COLOUR_SILVER,
    COLOUR_PINK,
    COLOUR_COUNT
};

/* The colour of exactly text[0..length), in any case ("purple", "gray" too); false: none. */
bool colour_read(const char *text, size_t length, enum colour *colour);

enum { COLOURS_MAX = 6 };

struct colour_value {
    double value; /* ohm or F */
    bool tolerance_set;
    double tolerance_percent; /* plus and minus */
    double rated_v;           /* V; NaN: the code says nothing */
    bool paper;               /* the type dot says paper, not mica */
    enum source_key source;
};

/*
 * Resistor, bands from the end or body, end, dot: three (20 %), four (gold 5, silver 10, brown 1,
 * red 2 %), five (three figures) or six (a temperature coefficient behind). IEC 60062. false: no
 * table has it; *value is untouched.
 */
bool colour_resistor(const enum colour *bands, size_t count, struct colour_value *value);

/*
 * Moulded mica or paper capacitor, dots in the order of the arrows, top row first:
 *   3  two figures, zeros (pF)                                            early RMA
 *   4  the same, volts/100                                                early RMA
 *   5  the same, tolerance                                                early RMA
 *   6  type (black, white: mica; silver: paper), two figures; class, tolerance, zeros
 *                                                                         AWS, JAN, RETMA REC-115A
 * The lower row of six is read as it stands, left to right.
 */
bool colour_capacitor(const enum colour *dots, size_t count, struct colour_value *value);

#endif
