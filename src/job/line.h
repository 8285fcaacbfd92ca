/*
 * The lines of a job file: several facts in one text, told apart by their units and a few words.
 * `0.02 uF 400 V 20 %`, `100 V 60 s 1.1 uA, 5 min 0.9 uA`, `grid -19 V, anode 380 V`.
 *
 * Knows nothing of keys or YAML: it is given a text and where that text begins, and says on failure
 * which bytes are wrong, why, and what to write instead. It adds no diagnostic; the reader does.
 *
 * Every function: true, and the result is complete; or false, `line->problem` says why, and the
 * result is untouched (named values and value slots: those before the mistake are set). Every
 * struct quantity, date ... of a result has its `written` (owned by the arena) and its `at`.
 * Words are compared without regard to case. Text that is empty or only spaces is a mistake, and so
 * is a line of several facts with more than LINE_BYTES_MAX bytes.
 */
#ifndef JOB_LINE_H
#define JOB_LINE_H

#include "job/job.h"

enum { LINE_BYTES_MAX = 4096 };

/* What is wrong, at text[offset .. offset + length). length >= 1 unless the text is empty. */
struct line_problem {
    enum diagnostic_code code;
    size_t offset, length;
    struct position at; /* of offset */
    const char *text;   /* "'400 X' is no quantity"; owned by the arena */
    const char *hint;   /* NULL: none */
};

/* A text to be read. The caller sets the first four; the rest is {0} before and read after. */
struct line {
    struct arena *arena;
    const char *text; /* need not end with NUL */
    size_t length;
    struct position at; /* of text[0]; columns count code points, the text is on one line */

    struct line_problem problem; /* after false */
    bool old_unit;               /* `MF`, `MFD` read as microfarads: deserves a note ... */
    struct position old_unit_at; /* ... here */
};

/* A line over text[0..length) that begins at `at`. */
struct line line_of(struct arena *arena, const char *text, size_t length, struct position at);

/* Line and column of a byte of the text. */
struct position line_position(const struct line *line, size_t offset);

/* ---- one value ---- */

/* The whole line is one quantity. */
bool line_quantity(struct line *line, const struct quantity_form *form, struct quantity *quantity);

/* The whole line is a resistance, or something that may be a ref. A text that reads as a
   resistance gives `quantity` set; any other well-formed ref gives quantity.set false with
   `written` and `at`. `R12` is both: the reader looks among the refs first, by `written`.
   resistor and winding are NOT_LISTED. */
bool line_resistance(struct line *line, struct resistance *resistance);

/* A measured resistance: a quantity, or `open`, which is BOUND_OVER with LINE_OPEN_OHM. */
#define LINE_OPEN_OHM 100e6 /* convention: what a common meter cannot show any more */
bool line_measured_resistance(struct line *line, struct quantity *quantity);

/* The whole line is a date; one year or a span of years; the size of a case. */
bool line_date(struct line *line, struct date *date);
bool line_years(struct line *line, struct year_span *years);
bool line_dimensions(struct line *line, struct dimensions *dimensions);

/* ---- values told apart by their units, in any order ---- */

/* One place for a value. Exactly one of quantity and resistance is not NULL; of resistance slots
   there is at most one, and words that are no quantity are its ref. */
struct value_slot {
    const char *what; /* for messages: "source volts" */
    enum unit unit;
    bool required;
    struct quantity *quantity;
    struct resistance *resistance; /* unit is UNIT_RESISTANCE */
};

/* `90 V 220k`, `250 V R12`, `10k`. Each slot takes one value of its unit; a second one, or a value
   that no slot takes, is a mistake. */
bool line_values(struct line *line, const struct value_slot *slots, size_t slot_count);

/* What a marking is on. */
enum marking_kind {
    MARKING_CAPACITOR, /* F, V, %; class */
    MARKING_RESISTOR,  /* ohm, W, %; a bare `M` is refused */
    MARKING_WINDING    /* ohm, % */
};

/*
 * What is written on a part (fitted false), or what was fitted: `0.02 uF 400 V 20 %`,
 * `270 ohm 1 W 10 %`, `8 uF 450 V -20/+100 %`, `polypropylene 0.022 uF 630 V 8 x 21 mm`,
 * `class X2 0.1 uF 310 V a.c.`, `two Y2 2200 pF 250 V a.c. in series` (value: each of the two).
 * `type` is looked for only in what was fitted; `400 V test`, `525 V surge` or `peak` is no rating
 * and goes to other_words with whatever words are left; so do a temperature and the limiting volts
 * of a resistor. Of `X1/Y2` the Y counts. Three to six colours stand for the value, `yellow violet
 * yellow silver`, or `body red end violet dot yellow`; a code that no table has leaves it unset.
 * The value may be missing (a part with its marks gone): marking.value.set is false then, but
 * something must be there.
 */
bool line_marking(struct line *line, enum marking_kind kind, bool fitted, struct marking *marking);

/* `0.023 uF`, `18 uF 2.4 ohm`, `18 uF esr 2.4 ohm tan 6 %`, `7.6 uF tan 0.08` (8 per cent). */
bool line_measured_capacitor(struct line *line, struct measured_capacitor *measured);

/* ---- readings ---- */

struct reading_form {
    unsigned line;                        /* goes into every reading */
    enum reading_state state;             /* when the line does not say */
    const struct instrument *instruments; /* for `by NAME`; may be NULL */
    size_t instrument_count;
    int instrument; /* when the line does not say; NOT_LISTED where there is none */
};

/*
 * `100 V 60 s 1.1 uA, 5 min 0.9 uA`. Volts and current or insulation; time; `hot 45 C`, `found`,
 * `reformed`, `left`, `in circuit`, a date, `by INSTRUMENT`. After a comma and a space only what
 * changed: everything but the current or insulation is carried on. *readings: an array in the
 * arena, at least one.
 */
bool line_readings(struct line *line, const struct reading_form *form,
                   const struct reading **readings, size_t *count);

/* ---- named values ---- */

/* One name of a table; quantity, or flag for a word that stands alone (`lifted`). */
struct named_value {
    const char *name; /* may be of several words */
    enum unit unit;
    bool unit_optional; /* a bare number is of this unit, SI (mu: UNIT_NONE always is) */
    struct quantity *quantity;
    bool *flag;
};

/* `grid -19 V, anode 380 V`: comma and space between, each name at most once. Unknown names get
   the nearest of the table as hint. */
bool line_named_values(struct line *line, const struct named_value *names, size_t name_count);

/* ---- instruments ---- */

/* |error| <= reading_percent of reading + full_scale_percent of full scale + digits of the last
   place + absolute. Whatever is not said is 0. */
struct accuracy {
    double reading_percent;
    double full_scale_percent;
    struct quantity full_scale; /* when the line names it: `3 % of 50 uA` */
    double digits;              /* times the instrument's resolution */
    double absolute;            /* SI, in absolute_unit */
    enum unit absolute_unit;    /* UNIT_NONE: absolute is 0 */
};

/* `2 % + 0.02 uA`, `0.5 % + 2 digits`, `1 % of full scale`, `3 % of 50 uA`, `0.02 uA`. */
bool line_accuracy(struct line *line, struct accuracy *accuracy);

/* ---- lists ---- */

/* `25 V, 50 V, 100 V`: values of one unit, SI. */
bool line_list(struct line *line, enum unit unit, const double **values, size_t *count);

struct line_name {
    const char *text;
    struct position at;
};

/* Refs: `C20 C21`, or with commas `C20, C21 a`, where a ref may hold spaces. */
bool line_refs(struct line *line, const struct line_name **refs, size_t *count);

/* Names of stages: commas only, so that a name may hold spaces. */
bool line_names(struct line *line, const struct line_name **names, size_t *count);

/* Letters, digits, space, `.`, `-`, `/`; begins with a letter or digit; 1 to 32 bytes, no space at
   an end. */
bool line_is_ref(const char *text, size_t length);

#endif
