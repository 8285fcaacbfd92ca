/*
 * What the parts of a job have in common, whatever their kind: for those who list, count or print
 * parts of all kinds alike. What only one kind has stands in its own struct (job.h). And what a
 * part says by pointing elsewhere in the job: to its can, to an instrument.
 */
#ifndef JOB_PART_H
#define JOB_PART_H

#include "job/job.h"

#include <stdbool.h>
#include <stddef.h>

enum part_kind {
    KIND_CAPACITOR,
    KIND_CAN,
    KIND_RESISTOR,
    KIND_WINDING,
    KIND_CONTROL,
    KIND_VALVE,
    PART_KIND_COUNT
};

/* Texts are the job's own; NULL: not said, or nothing that this kind has. */
struct part {
    const char *ref;
    const char *maker;
    enum seen seen;
    enum origin was;
    enum action done;
    enum age age;                 /* of what was fitted; of a valve AGE_MODERN */
    const struct marking *marked; /* NULL: a can, a control, a valve */
    const struct marking *fitted; /* NULL: a control, a valve */
    const char *marked_text;      /* as written; of a control what it is, of a valve its type */
    const char *fitted_text;      /* as written */
    const char *batch, *signed_where, *price, *reason, *note;
};

/* "capacitor", "can", "resistor", "winding", "control", "valve". */
const char *part_kind_text(enum part_kind kind);

/* How many parts of the kind the job lists. */
size_t part_count(const struct job *job, enum part_kind kind);

/* The index-th part of the kind; index < part_count. */
struct part part_of(const struct job *job, enum part_kind kind, size_t index);

/* The can that holds a capacitor; NULL: it is a part by itself. */
const struct can *part_can(const struct job *job, const struct capacitor *part);

/* Of a capacitor, the can's where a section says nothing: what was done, what was fitted. */
enum action part_action(const struct job *job, const struct capacitor *part);
const struct marking *part_fitted(const struct job *job, const struct capacitor *part);

/* How it came: a section as its can did. */
enum origin part_origin(const struct job *job, const struct capacitor *part);

/* The instrument with this index, as readings name it; NULL: none named. */
const struct instrument *instrument_of(const struct job *job, int index);

/* What its accuracy is stated for: the unit of its fixed part or digits, of its full scale, or
   volts because it loads like a voltmeter; UNIT_NONE: per cent of the reading, whatever that is. */
enum unit instrument_unit(const struct instrument *instrument);

/* Whether it reads leakage or insulation: amperes or ohms, or nothing else by what it says. */
bool instrument_reads_leakage(const struct instrument *instrument);

/* Whether it applies test volts. Its ohms are insulation then, and no resistor's. */
bool instrument_applies_volts(const struct instrument *instrument);
bool instrument_reads_insulation(const struct instrument *instrument);

/* The first of the job's that reads leakage: of a reading that names none. NOT_LISTED: none. */
int leakage_instrument(const struct job *job);

/* What works in the set since then is another part, or another inside: restuffed, replaced,
   disconnected. */
bool action_is_change(enum action done);

#endif
