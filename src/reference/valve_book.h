/*
 * The built-in valve book: operating rows and limits as valve manuals print them, each with its
 * source and whether the figure was seen or only recalled. Volts to the cathode, amperes, siemens,
 * ohm, watts. NaN: the manual gives none.
 */
#ifndef REFERENCE_VALVE_BOOK_H
#define REFERENCE_VALVE_BOOK_H

#include "reference/source.h"

#include <stdbool.h>
#include <stddef.h>

enum valve_kind {
    VALVE_TRIODE,
    VALVE_POWER_TRIODE,
    VALVE_BEAM,
    VALVE_OUTPUT_PENTODE,
    VALVE_SMALL_PENTODE,
    VALVE_REMOTE_PENTODE /* remote cut-off */
};

struct valve_row {
    const char *type; /* "6V6GT", "ECL82 triode" */
    enum valve_kind kind;
    const char *name; /* "A1-250" */
    double va_v, vg2_v, vg1_v, ia_a, ig2_a, gm_s, mu, mu12, ra_ohm;
    double pa_max_w, pg2_max_w, grid_leak_max_fixed_ohm, grid_leak_max_cathode_ohm;
    const char *source;
    enum trust row_trust, limits_trust;
    bool doubtful; /* the figures of different issues disagree */
};

/* All rows, sorted by type as listed. */
const struct valve_row *valve_book(size_t *count);

/*
 * The rows of a type: names are compared without case, space and hyphen, and through synonyms
 * (6V6 = 6V6GT, ECC83 = 12AX7); a half is named `ECL82 triode`. NULL: not in the book.
 */
const struct valve_row *valve_rows_of(const char *type, size_t *count);

/* "triode", "beam tetrode" ... */
const char *valve_kind_text(enum valve_kind kind);
bool valve_kind_is_output(enum valve_kind kind);
bool valve_kind_is_triode(enum valve_kind kind);

#endif
