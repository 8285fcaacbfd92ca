/*
 * A file being read: what the readers of single keys share. Inside src/job only; the way in is
 * job_read and shop_read.
 */
#ifndef JOB_READER_H
#define JOB_READER_H

#include "job/field.h"
#include "job/job.h"
#include "job/line.h"

/* A ref of the job, for finding it again and for telling that it is there twice. */
enum ref_kind {
    REF_STAGE,
    REF_CAN,
    REF_CAPACITOR,
    REF_RESISTOR,
    REF_WINDING,
    REF_CONTROL,
    REF_VALVE,
    REF_KIND_COUNT
};
struct ref_entry {
    const char *ref;
    enum ref_kind kind;
    int index; /* in its list */
    struct position at;
};

/* Something that can be read only when everything else is: a ref, a reading `by` an instrument. */
typedef void later_read(struct reader *reader, const struct node *node, void *target);
struct later {
    later_read *read;
    const struct node *node;
    void *target;
};

struct reader {
    const struct source *source;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct job *job; /* being filled; NULL for shop.yaml */
    const struct node *root;
    struct later *later;
    size_t later_count, later_capacity;
    struct ref_entry *refs; /* sorted without regard to case, once all are listed */
    size_t ref_count;
    bool damaged[REF_KIND_COUNT]; /* a mistake told already may have taken refs of this kind away */
};

/* Say that something is wrong at a place. hint may be NULL. */
void reader_tell(struct reader *reader, struct position at, enum diagnostic_code code,
                 const char *hint, const char *format, ...) __attribute__((format(printf, 5, 6)));

/* Say what a line's problem says. */
void reader_tell_line(struct reader *reader, const struct line *line);

/* Note for `MF`, when the line had it. */
void reader_note_units(struct reader *reader, const struct line *line);

/* The node's text as a line, spaces at its ends away. false: not one line, and told. */
bool reader_line(struct reader *reader, const char *key, const struct node *node,
                 struct line *line);

/* Call read(node, target) when the whole file is read. */
void reader_later(struct reader *reader, later_read *read, const struct node *node, void *target);

/* ---- refs.c ---- */

/* List the refs of the job; tell invalid and double ones. */
void refs_collect(struct reader *reader);

/* The entry of a ref, without regard to case; NULL: none. */
const struct ref_entry *ref_find(const struct reader *reader, const char *ref);

/* Index in the list of this kind, or NOT_LISTED and told with the nearest ref. */
int ref_index(struct reader *reader, enum ref_kind kind, const char *ref, struct position at);

/* later_read for a struct resistance that line.h has read: resolve its ref. */
later_read resistance_resolve;

/* ---- checks.c ---- */

/* What no single key can tell: dates, places, cans, pairs, the job's number. */
void job_check(struct reader *reader);

/* A quantity held against a limit; told when it is impossible. `what`: for the message. */
void quantity_check(struct reader *reader, const struct quantity *quantity, const char *what,
                    enum field_limit limit);
void quantity_check_range(struct reader *reader, const struct quantity *quantity,
                          const struct field *field);

/* `triode` of `ECL82 triode`: a word for half of a valve. In stage_fields.c. */
bool valve_is_half(const char *word);

/* The valves' types, said once in a stage or under `valves`. */
void valves_join(struct reader *reader);

#endif
