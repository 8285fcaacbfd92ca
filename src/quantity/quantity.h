/*
 * Values with units, as the trade writes them and as numbers in SI.
 *
 * The text as written is kept for printing beside the value. A number never goes by without a
 * unit, unless its key has one obvious unit. Nothing here knows keys or files: a reader gives the
 * text and gets a status; it makes the diagnostic.
 */
#ifndef QUANTITY_QUANTITY_H
#define QUANTITY_QUANTITY_H

#include "base/arena.h"
#include "base/diagnostic.h"

#include <stdbool.h>
#include <stddef.h>

/* What a number measures; values are in the SI unit named. */
enum unit {
    UNIT_NONE,        /* a pure number */
    UNIT_CAPACITANCE, /* farad */
    UNIT_RESISTANCE,  /* ohm */
    UNIT_INDUCTANCE,  /* henry */
    UNIT_VOLTAGE,     /* volt */
    UNIT_CURRENT,     /* ampere */
    UNIT_POWER,       /* watt */
    UNIT_FREQUENCY,   /* hertz */
    UNIT_TIME,        /* second */
    UNIT_TEMPERATURE, /* degree Celsius */
    UNIT_PERCENT,     /* per cent: 20 for 20 % */
    UNIT_CONDUCTANCE, /* siemens: mA/V, umho */
    UNIT_LENGTH,      /* metre */
    UNIT_SENSITIVITY, /* ohm per volt of a meter */
    UNIT_DECIBEL,     /* dB */
    UNIT_COUNT
};

/* "capacitance", "volts" ...: the word for messages and the manual; and an example "0.05 uF". */
const char *unit_name(enum unit unit);
const char *unit_example(enum unit unit);

/* Off scale: `over 2000 M`, `under 0.01 uA`. */
enum bound { BOUND_NONE, BOUND_OVER, BOUND_UNDER };

/* A value of a job. {0} means: not given. */
struct quantity {
    bool set;
    double value; /* SI */
    enum unit unit;
    enum bound bound;
    const char *written; /* as in the file, trimmed; owned by the arena */
    struct position at;
};

static inline double quantity_or(const struct quantity *quantity, double otherwise)
{
    return quantity->set ? quantity->value : otherwise;
}

enum quantity_status {
    QUANTITY_OK,
    QUANTITY_UNREADABLE,  /* not a number with a unit */
    QUANTITY_NO_UNIT,     /* a bare number where the unit is not obvious */
    QUANTITY_WRONG_UNIT,  /* a good quantity of another unit; *quantity holds it */
    QUANTITY_COMMA,       /* `1,000`: decimal sign or thousands? */
    QUANTITY_CLOCK,       /* `12:30`: hours or minutes? */
    QUANTITY_MEGA_OR_KILO /* `50M` on a resistor: old drawings write M for thousand */
};

/* How a text is to be read. */
struct quantity_form {
    enum unit unit;           /* what is wanted; UNIT_COUNT: any */
    bool unit_optional;       /* the key has one obvious unit, SI: `80` is 80 of it */
    bool bare_m_refused;      /* `marked` of a resistor */
    const char *unit_written; /* the obvious unit as written when optional ("V"); for the manual */
};

/*
 * How numbers are read
 * - Sign `-`, `+` or U+2212; point or, between digits, comma; `1/2`, `1 1/2`, `½`, `1½`. A comma
 *   before exactly three digits is refused with both readings, unless only one makes sense
 *   (`0,047 uF`). Thin spaces may part thousands.
 * - IEC 60062: `4R7`, `2K2`, `1M0`, `4n7`, `p33`; for these alone the letter stands for the point.
 * - A power of ten needs a sign, `1.1e-6 A`, so that the valve 6E5 is no number.
 * - No hexadecimal, no "inf", no "nan"; not more than 27 figures; 0 or 1e-30 to 1e30.
 * - Nothing depends on the locale. Values are the double nearest to what was written.
 *
 * How units are read: with or without a space before them; µ in both code points or u; Ω in both or
 * ohm; a full stop behind is dropped (`mfd.`). `M` alone is megohm. `mF`, `MF`, `MFD` in any case
 * are microfarads: on old parts they always were, and nobody measures millifarads in a valve set;
 * all but `mfd`, which cannot be mistaken, set *old_unit. `F` is Fahrenheit where a temperature is
 * wanted, else farad. `mc/s` is Mc/s. `a.c.`, `d.c.` or `rms` may follow volts and current; in a
 * line of values they are words of their own. Times may go on in falling units (`1 h 10 min`).
 *
 * Read all of text[0..length). On QUANTITY_OK *quantity is set (written copied to the arena,
 * `at` left to the caller). *old_unit (may be NULL) tells that `MF` or `MFD` was read as
 * microfarads, which deserves a note. On failure *quantity is untouched, but for WRONG_UNIT.
 */
enum quantity_status quantity_read(struct arena *arena, const char *text, size_t length,
                                   const struct quantity_form *form, struct quantity *quantity,
                                   bool *old_unit);

/* What to write instead, e.g. "write 1000 V or 1.000 V"; NULL when there is nothing better than
   unit_example. */
const char *quantity_hint(struct arena *arena, enum quantity_status status, const char *text,
                          const struct quantity_form *form);

/*
 * Cut the next quantity or word off the front of a values line: `0.02 uF 400 V 20 %` gives
 * `0.02 uF`, `400 V`, `20 %`; `polypropylene 0.022 uF 630 V` gives a word first; `1 h 10 min`
 * stays together; `over 2000 M` and `-20/+100 %` too. A token never crosses `, ` (comma and
 * space): such a comma is skipped and *after_comma set. false at the end.
 */
struct quantity_token {
    const char *start;
    size_t length;
    bool is_number; /* begins like a quantity; else a word */
    bool after_comma;
};
bool quantity_token_next(const char **cursor, const char *end, struct quantity_token *token);

/* A calendar date, ISO 8601 `2031-02-10`; {0}: not given. */
struct date {
    bool set;
    int year, month, day;
    const char *written;
    struct position at;
};
/* false when it is not a date of the calendar. `at` is left to the caller. */
bool date_read(struct arena *arena, const char *text, size_t length, struct date *date);
/* What to write instead of a text that is no date: `3/2/31` both ways, `14 Jan 2031` as it is
   meant, else an example. */
const char *date_hint(struct arena *arena, const char *text, size_t length);
/* Days since 1970-01-01; for order and differences. */
long date_days(const struct date *date);

/* `1951`, `about 1951`, `1948 to 1950`. */
struct year_span {
    bool set, about;
    int first, last;
    const char *written;
    struct position at;
};
bool year_read(struct arena *arena, const char *text, size_t length, struct year_span *years);

/* Case of a part: `22 mm x 51 mm` diameter by length, or `35 x 12 x 60 mm` for a block. Metres. */
struct dimensions {
    bool set;
    double diameter_m, length_m; /* block: diameter_m is 0 */
    double width_m, height_m;
    const char *written;
    struct position at;
};
bool dimensions_read(struct arena *arena, const char *text, size_t length,
                     struct dimensions *dimensions);

#endif
