/*
 * Preferred values: the E series of IEC 60063, and the tolerance each is made for.
 */
#ifndef REFERENCE_PREFERRED_VALUE_H
#define REFERENCE_PREFERRED_VALUE_H

#include "reference/source.h"

#include <stdbool.h>
#include <stddef.h>

enum e_series {
    E_SERIES_3,
    E_SERIES_6,
    E_SERIES_12,
    E_SERIES_24,
    E_SERIES_48,
    E_SERIES_96,
    E_SERIES_192,
    E_SERIES_COUNT
};

/* How many values a decade has: 3 to 192. */
size_t e_series_size(enum e_series series);
/* The tolerance in per cent that the series is meant for: 40 to 0.5. */
double e_series_tolerance_percent(enum e_series series);
enum source_key e_series_source(enum e_series series);

/* The value of a place in the decade as an integer of two digits (E3 to E24) or three: 10 to 91,
   100 to 988. index < e_series_size. */
int e_series_value(enum e_series series, size_t index);

/* The preferred value nearest to value (by ratio), any decade; value > 0 and finite. */
double e_series_nearest(enum e_series series, double value);

/* Whether value is a preferred value of the series within rounding (1e-6). */
bool e_series_holds(enum e_series series, double value);

/* The coarsest series that holds value; E_SERIES_COUNT: none (values older than the series, 50 k,
   0.25 meg, are no fault of a part). */
enum e_series e_series_of(double value);

#endif
