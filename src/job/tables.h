/*
 * The records of a job file, one table each, and the short forms that the tables share. Inside
 * src/job only.
 */
#ifndef JOB_TABLES_H
#define JOB_TABLES_H

#include "job/field.h"

#include <stddef.h>

extern const struct record instrument_record; /* instrument_fields.c */
extern const struct record stage_record;      /* stage_fields.c */
extern const struct record capacitor_record;  /* capacitor_fields.c */
extern const struct record can_record;
extern const struct record resistor_record; /* part_fields.c */
extern const struct record winding_record;
extern const struct record control_record;
extern const struct record valve_record;
extern const struct record photo_record; /* history_fields.c */
extern const struct record reform_record;
extern const struct record voltages_record; /* bench_fields.c */
extern const struct record performance_record;
extern const struct record safety_record;

/* `marked` and `fitted` of a section, which capacitors and cans share. */
field_read capacitor_marking_read;

/* `readings`, `log`, `after_rest`: read when the instruments are known. */
field_read readings_read;

/* A piece of a line between commas with a space: `found 120 uV`. */
struct segment {
    const char *text;
    size_t length;
    size_t offset; /* in the line */
};
struct line;
/* The next piece, spaces at its ends away; false: no more. *offset begins at 0. */
bool segment_next(const struct line *line, size_t *offset, struct segment *segment);
/* What stands behind `name ` at the front of the segment; false: another name. */
bool segment_after(const struct segment *segment, const char *name, struct segment *rest);

/* Units of keys; `true`: a bare number is of this unit. */
#define FORM_VOLTS                                                                                 \
    {                                                                                              \
        UNIT_VOLTAGE, true, false, "V"                                                             \
    }
#define FORM_AMPERES                                                                               \
    {                                                                                              \
        UNIT_CURRENT, false, false, NULL                                                           \
    }
#define FORM_OHMS                                                                                  \
    {                                                                                              \
        UNIT_RESISTANCE, false, false, NULL                                                        \
    }
#define FORM_HERTZ                                                                                 \
    {                                                                                              \
        UNIT_FREQUENCY, true, false, "Hz"                                                          \
    }
#define FORM_WATTS                                                                                 \
    {                                                                                              \
        UNIT_POWER, true, false, "W"                                                               \
    }
#define FORM_CELSIUS                                                                               \
    {                                                                                              \
        UNIT_TEMPERATURE, false, false, NULL                                                       \
    }
#define FORM_PERCENT                                                                               \
    {                                                                                              \
        UNIT_PERCENT, true, false, "%"                                                             \
    }
#define FORM_TIME                                                                                  \
    {                                                                                              \
        UNIT_TIME, false, false, NULL                                                              \
    }

#endif
