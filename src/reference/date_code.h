/*
 * Date codes of components: what years a stamp can mean. A code often means several; all are given.
 */
#ifndef REFERENCE_DATE_CODE_H
#define REFERENCE_DATE_CODE_H

#include "reference/source.h"

#include <stdbool.h>
#include <stddef.h>

enum { DATE_READINGS_MAX = 12 };

/* One meaning. month, week: 0 when the code does not say. */
struct date_reading {
    int year, month, week;
};

struct date_code {
    struct date_reading readings[DATE_READINGS_MAX]; /* by year, earliest first */
    size_t count;
    bool decade_open; /* one figure of the year: a reading for each decade from 1930 to 1979 */
    const char *maker_code; /* EIA: three figures; owned by the text given; NULL: none */
    enum source_key source;
};

/*
 * Read a stamp. Known are
 *   plain          FEB 51, 2/51, 3 51, March 1951, 1951, 1951-03
 *   two letters    year and month, or month and year: British components, A 1946 to Z 1968 without
 *                  I, O, Q; months A to M without I, or A to L
 *   three letters  of WHITSUNDAY, its figures 1 to 0: week and year, or year and week (Hunts)
 *   letter, figure month A to L and the last figure of the year
 *   EIA            maker (3 figures), year (1 or 2), week (2): 235614, 2355614; or without the
 * maker false: no table has it; *code is untouched.
 */
bool date_code_read(const char *text, struct date_code *code);

#endif
