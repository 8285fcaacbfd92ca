/*
 * Pieces of a quantity's text, for the files of this module only: spaces, numbers, units.
 * All take text[0..end), move a cursor, and neither allocate nor depend on the locale.
 */
#ifndef QUANTITY_SCAN_H
#define QUANTITY_SCAN_H

#include "quantity/quantity.h"

/* A number exactly as written: sign, digits, power of ten, and a divisor for `1/2` and `1½`. */
struct decimal {
    bool negative;
    char digits[32]; /* without leading zeros; empty is zero */
    unsigned count;
    int exponent; /* value = digits * 10^exponent / divisor */
    unsigned divisor;
    char code; /* IEC 60062 letter that stood for the point: R k M G p n u; 0: none */
};

/* Behind spaces: blank, tab, no-break space, thin spaces. */
const char *scan_spaces(const char *cursor, const char *end);
/* The end of [start, end) without trailing spaces. */
const char *scan_trim_end(const char *start, const char *end);
/* Whether *cursor stands at `word` (ASCII, lower case), in any case; moves behind it. */
bool scan_word(const char **cursor, const char *end, const char *word);
/* A `-`, U+2212 or `+`: -1, or 1, and moves behind it; 0: no sign. */
int scan_sign(const char **cursor, const char *end);
/* Whether a number begins here: digit, point and digit, vulgar fraction, after an optional sign. */
bool scan_begins_number(const char *cursor, const char *end);

/*
 * Read a number. OK, UNREADABLE, COMMA or CLOCK; the cursor stands behind all that belongs to it
 * even when it is refused, so that a token can be cut; it does not move when no number begins here.
 */
enum quantity_status scan_number(const char **cursor, const char *end, struct decimal *number);

/* number * 10^exponent, correctly rounded unless there is a divisor; false out of 1e-30 .. 1e30. */
bool decimal_value(const struct decimal *number, int exponent, double *value);

enum unit_kind {
    UNIT_KIND_PLAIN,
    UNIT_KIND_OLD,        /* MF for microfarads */
    UNIT_KIND_BARE_M,     /* M alone */
    UNIT_KIND_FAHRENHEIT, /* needs an offset */
    UNIT_KIND_FACTOR      /* minutes, inches ...: times `factor` */
};

/* One spelling of a unit. */
struct unit_spelling {
    const char *text;
    unsigned char letters; /* how case counts: enum in unit.c */
    unsigned char kind;
    unsigned char unit;
    signed char exponent; /* power of ten to SI */
    unsigned factor;      /* UNIT_KIND_FACTOR: SI = number * factor * 10^exponent */
};

/* The unit spelt by exactly text[0..length); NULL: none. `F` is Fahrenheit where a temperature is
   wanted. */
const struct unit_spelling *unit_find(const char *text, size_t length, enum unit wanted);

/* Seconds of a unit of time; 0 where it is below a second or no time. */
unsigned unit_seconds(const struct unit_spelling *spelling);

#endif
