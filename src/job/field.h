/*
 * Field tables: one row for each key of a job file and of shop.yaml. The rows drive reading, units,
 * ranges, choices, nearest-key help, the JSON Schema, the manual of keys and `start`, so that none
 * of them can know a key that the others do not.
 *
 * A new key is one row (and one member of the struct that it fills).
 */
#ifndef JOB_FIELD_H
#define JOB_FIELD_H

#include "job/job.h"
#include "job/yaml_tree.h"
#include "reference/source.h"

#include <stddef.h>

/* What a key takes, and the type of the member at `offset`. */
enum field_kind {
    FIELD_TEXT,       /* one line: const char * */
    FIELD_PROSE,      /* text of any length: struct prose */
    FIELD_CHOICE,     /* one of `choices`: an enum by their order */
    FIELD_FLAG,       /* yes or no, or the second of two `choices`: bool */
    FIELD_WHOLE,      /* a whole number, not negative: unsigned */
    FIELD_QUANTITY,   /* struct quantity, by `form` */
    FIELD_NUMBER,     /* the same, kept as a double in SI */
    FIELD_FRACTION,   /* per cent, kept as a double: 10 % is 0.10 */
    FIELD_RESISTANCE, /* struct resistance: a value, or the ref of a resistor or winding */
    FIELD_DATE,       /* struct date */
    FIELD_YEARS,      /* struct year_span */
    FIELD_SIZE,       /* struct dimensions */
    FIELD_LINE,       /* one line with a form of its own, by `read` */
    FIELD_LINES,      /* a list of such lines, or one, by `read` */
    FIELD_FREE,       /* keys of the writer's own, each with text: struct named_prose array */
    FIELD_RECORD,     /* keys below it, by `record`: a struct at `offset` */
    FIELD_TABLE,      /* records keyed by ref or name: array at `offset`, count at `count_offset` */
    FIELD_LIST        /* records in a list: the same */
};

/* What values are possible at all, in SI. */
enum field_limit {
    LIMIT_NONE,
    LIMIT_ABOVE_ZERO,
    LIMIT_NOT_NEGATIVE,
    LIMIT_RANGE /* min to max */
};

/* What `start` does with a key. */
enum field_start {
    START_OMIT,   /* not in a new job file */
    START_BLANK,  /* the key with nothing behind it, to be filled in */
    START_EXAMPLE /* in a comment, with its example */
};

struct reader;
struct field;
struct record;

/* Reads node into the record; mistakes go to the reader's diagnostics. */
typedef void field_read(struct reader *reader, const struct field *field, const struct node *node,
                        void *record);

struct field {
    const char *key;
    enum field_kind kind;
    size_t offset;       /* of the member in the record's struct */
    size_t count_offset; /* TABLE, LIST, FREE: of its size_t count */
    size_t at_offset;    /* of a struct position that takes where the value stands; 0: none */
    size_t set_offset;   /* of a bool that tells that the value was given; 0: none */
    struct quantity_form form;
    const char *const *choices; /* ends with NULL; "" is the unset one */
    const struct record *record;
    field_read *read;
    enum field_limit limit;
    double min, max;
    bool required;
    bool chassis;           /* a fact of the chassis or the bench: `start --like` keeps it */
    bool choices_are_hints; /* the schema must not refuse other values */
    enum field_start start;
    const char *text;    /* for manual and schema: what it is, in a few words */
    const char *example; /* as typed in a job file; of a policy limit its default */
    /* of a policy limit, for the manual: why it stands where it stands, and who says so;
       SOURCE_NONE: nobody but the shop */
    const char *why;
    enum source_key source;
};

struct record {
    const char *name;    /* "capacitor": in messages */
    const char *section; /* "capacitors": heading of the manual */
    const char *text;    /* what it is and how it is keyed */
    size_t size;
    const struct field *fields; /* NULL: a line, by `read` */
    size_t field_count;
    field_read *read;    /* a record that is one line: of `performance` ... */
    const char *example; /* of such a line */
    bool keyed;          /* in a table: the key goes to a const char * at key_offset */
    bool key_is_ref;     /* and must be a ref, unique in the job */
    size_t key_offset;
    bool has_at; /* its position goes to a struct position at at_offset */
    size_t at_offset;
    void (*prepare)(void *record); /* sets what is not zero when not given; NULL: nothing */
    const char *key_example;       /* "C14" */
};

#define FIELD_COUNT_OF(array) (sizeof(array) / sizeof *(array))

/* The whole job file, and shop.yaml. */
extern const struct record job_record;
extern const struct record shop_record;

/* Read a mapping into *out (record->size bytes, zeroed). */
void record_read(struct reader *reader, const struct record *record, const struct node *node,
                 void *out);

/* What the value of a key is, in words for the manual and the schema: "volts", "yes or no",
   "ohm, or the ref of a resistor or winding". */
const char *field_value_text(const struct field *field);

#endif
