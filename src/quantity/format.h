/*
 * Numbers for people: one way to write a quantity, used by every document, table and message.
 *
 * True minus (U+2212), no-break space before the unit, thin space in numbers of five digits and
 * more, no zero with a sign, "½" where a power rating is one half.
 *
 * A half is rounded away from zero, and what differs from a half by less than 1e-13 of the value is
 * one: 0.0995 to two figures is 0.10, as on paper, though no double is 0.0995. Readings are not
 * averaged from printed figures, so rounding half to even would gain nothing and surprise people.
 */
#ifndef QUANTITY_FORMAT_H
#define QUANTITY_FORMAT_H

#include "base/arena.h"
#include "quantity/quantity.h"

/* A number apart, so that tables can align the decimal point. All owned by the arena. */
struct figures {
    const char *bound;    /* "<", ">", or "" */
    const char *whole;    /* "−12", "1100", "11 000" */
    const char *fraction; /* ".62" or "" */
    const char *unit;     /* "µA", "MΩ", "" */
};

/*
 * value in SI to `digits` (1 to 12) significant figures with the prefix the trade gives it: pF
 * below 1 nF, then µF (0.005 µF); µA from 0.1 µA (0.62 µA); V to 10 kV; Ω kΩ MΩ GΩ; s, min from 2
 * min, h from 2 h. 0 is "0", a time without a broken part is whole ("5 min"). One digit and 0.5 W
 * is "½". NaN is a mistake of the caller; infinity is printed as 1e18 in SI, never as a word.
 */
struct figures figures_of(struct arena *arena, double value, enum unit unit, unsigned digits);

/* The same in a fixed prefix, 1e-6 for µA, with a fixed count of decimals. unit_text is "µA". */
struct figures figures_scaled(struct arena *arena, double value, double scale,
                              const char *unit_text, unsigned decimals);

/* Decimals that show value/scale with `digits` significant figures: 0.0234 and 2 gives 3. */
unsigned decimals_for(double value, double scale, unsigned digits);

/* In one string, "0.62 µA" (no-break space between number and unit). */
const char *figures_text(struct arena *arena, const struct figures *figures);
const char *quantity_text(struct arena *arena, double value, enum unit unit, unsigned digits);

/* "0.5576 mW ± 0.049 mW": the value to `digits` figures, its expanded uncertainty, at least 0, to
   two and in the value's prefix. */
const char *uncertain_text(struct arena *arena, double value, double uncertainty, enum unit unit,
                           unsigned digits);

#endif
