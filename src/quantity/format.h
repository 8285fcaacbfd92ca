/*
 * Numbers for people: one way to write a quantity, used by every document, table and message.
 *
 * True minus (U+2212), no-break space before the unit, thin space in numbers of five digits and
 * more, no zero with a sign, "½" where a power rating is one half.
 */
#ifndef QUANTITY_FORMAT_H
#define QUANTITY_FORMAT_H

#include "base/arena.h"
#include "quantity/quantity.h"

/* A number apart, so that tables can align the decimal point. All owned by the arena. */
struct figures {
    const char *bound;    /* "<", ">", or "" */
    const char *whole;    /* "−12", "1 100" */
    const char *fraction; /* ".62" or "" */
    const char *unit;     /* "µA", "MΩ", "" */
};

/*
 * value in SI to `digits` significant figures with the prefix that suits it (pF nF µF, Ω kΩ MΩ GΩ,
 * nA µA mA A, mV V kV, mW W, s min h ...). NaN is a mistake of the caller.
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

#endif
