/*
 * A document being composed, inside src/report: what every exhibit is built from, and where it is
 * put. Exhibits are handed over in the order of the template.
 */
#ifndef REPORT_COMPOSITION_H
#define REPORT_COMPOSITION_H

#include "base/mustache.h"
#include "report/report.h"

#include <math.h>

/* What stands between two runs of the template's text. */
struct piece {
    size_t offset; /* in the rendered text */
    const struct exhibit *exhibit;
    struct prose prose; /* when exhibit is NULL */
};

enum numbered { NUMBERED_TABLE, NUMBERED_FIGURE, NUMBERED_PLATE, NUMBERED_SHEET, NUMBERED_COUNT };

struct composition {
    const struct findings *findings;
    const struct job *job;
    const struct shop *shop;
    enum document_kind kind;
    const struct templates *templates;
    const struct report_picture *pictures;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct phrasing say;
    size_t working_of; /* 1 + which part's working is wanted; 0: as the template says */
    unsigned numbers[NUMBERED_COUNT]; /* handed out so far */
    struct buffer *text;              /* the template, rendered so far */
    struct piece *pieces;
    size_t piece_count, piece_capacity;
};

/* A new exhibit. */
struct exhibit *exhibit_begin(struct composition *composition, enum exhibit_kind kind,
                              const char *id);
/* "Table 3" for the next of its kind. */
const char *exhibit_number(struct composition *composition, enum numbered kind);
/* Put it where the template now is. A template that names it twice gets a second id. */
void exhibit_place(struct composition *composition, struct exhibit *exhibit);

/* ---- tables */

/* A column before its words are known: head and label are keys of `head.` and `label.`. */
struct column_plan {
    const char *head;  /* NULL: no head */
    const char *unit;  /* final text, NULL: none */
    const char *label; /* NULL: none */
    enum column_kind kind;
    double width_percent;
    unsigned rank;
};

struct table_builder {
    struct composition *composition;
    struct exhibit *exhibit;
    struct table *table;
    size_t row_capacity, note_capacity;
};

struct table_builder table_begin(struct composition *composition, const char *id,
                                 const struct column_plan *plan, size_t columns);
/* Cells of a new row, all empty. */
struct cell *table_row(struct table_builder *builder);
void table_group(struct table_builder *builder, const char *text);
/* Note `text` for a cell: equal notes share their number. NULL: none. */
void table_note(struct table_builder *builder, struct cell *cell, const char *text);
/* Take out columns in which no cell says anything, but the first and those to be written in. */
void table_drop_empty(struct table_builder *builder);
/* Number it, give it its caption and place it; a table without rows is dropped. */
void table_place(struct table_builder *builder, enum numbered kind, const char *caption);

/* ---- numbers; NaN and quantities not given give an empty cell or NULL */

struct figures figures_micro(const struct composition *composition, double ampere, unsigned digits);
struct figures figures_plain(const struct composition *composition, double value, double scale,
                             unsigned decimals);
struct figures figures_unit(const struct composition *composition, double value, enum unit unit,
                            unsigned digits);
/* "0.5576 mW ± 0.049 mW"; without the uncertainty when that is not finite; NULL: no value. */
const char *text_uncertain(const struct composition *composition, double value, double uncertainty,
                           enum unit unit, unsigned digits);
const char *text_unit(const struct composition *composition, double value, enum unit unit,
                      unsigned digits);
/* The same for values that were set, not measured: 50 V and 45 °C without idle zeros. */
const char *text_set(struct arena *arena, double value, enum unit unit, unsigned digits);
/* Leakage is given in µA everywhere, so that text, table and plot compare. NaN gives NULL. */
const char *text_micro(struct arena *arena, double ampere, unsigned digits);
/* "+2.4 V", "−5 %", "0 %". */
const char *text_signed(struct arena *arena, double value, enum unit unit, unsigned digits);
/* A quantity of the job with the figures that were typed, bound included: "> 100 MΩ". */
struct figures figures_quantity(const struct composition *composition,
                                const struct quantity *quantity);
const char *text_quantity(const struct composition *composition, const struct quantity *quantity);
/* Volts with the figures that were typed, a tenth at most. */
struct figures figures_volts(const struct composition *composition,
                             const struct quantity *quantity);
/* value with only its first `digits` figures kept; up: rounded away from zero. */
double round_figures(double value, unsigned digits, bool up);

/* "0.02 µF 400 V", with the type in front: of a marking; the words as typed when it has no value.
   NULL: not given. */
const char *text_marking(const struct composition *composition, const struct marking *marking);

/* Words joined with ", " and the like, NULL and "" left out. */
const char *text_join(struct arena *arena, const char *separator, const char *const *texts,
                      size_t count);
/* A sentence of a text as typed: its first letter and its signs; its full stop. NULL stays NULL. */
const char *text_sentence(struct arena *arena, const char *text);
const char *text_stopped(struct arena *arena, const char *text);
/* Refs one after the other get commas between them: "C7, C14". NULL stays. */
const char *text_refs(struct arena *arena, const char *text);
/* A text as typed with its signs: "0.02 uA", "3 sqrt(CV)", "-2 V" as "0.02 µA", "3 √(CV)", "−2 V".
 */
const char *text_with_micro(struct arena *arena, const char *text);

/* ---- what several exhibits ask of a part */

/* What the leak does there, in one line; NULL: nothing is known. */
const char *effects_text(const struct composition *composition,
                         const struct capacitor_findings *part);
/* The deciding reading in µA: three figures, none finer than the instrument shows; the bound. */
struct figures leakage_figures(const struct composition *composition,
                               const struct capacitor_findings *part);

enum mark mark_of(enum outcome outcome);
const char *date_text(const struct date *date);
/* Indices of the capacitors in the order of places, those without a place last. */
const size_t *capacitors_by_place(const struct composition *composition);
/* Add rows of all capacitors in that order, each place below a line with its name. */
void table_by_place(struct table_builder *builder,
                    void (*add_part)(struct table_builder *builder, size_t index));
/* The marked value, or the marking as typed when it has none. */
void set_marked_value(const struct composition *composition, struct cell *cell,
                      const struct marking *marked);
/* part_action and part_origin of the index-th capacitor. */
enum action capacitor_done(const struct composition *composition, size_t index);
enum origin capacitor_was(const struct composition *composition, size_t index);
/* The current of a reading as typed: A; a resistance is turned into the current at its volts. */
double reading_current(const struct reading *reading);

/* ---- exhibits; `index`: which of several (a stage, a reform), else unused */

typedef void exhibit_builder(struct composition *composition, size_t index);
exhibit_builder exhibit_title, exhibit_facts, exhibit_headline, exhibit_contents,
    exhibit_page_break, exhibit_small, exhibit_two_columns, exhibit_side_by_side,
    exhibit_fingerprint, exhibit_glance, exhibit_leakage, exhibit_soak_curves, exhibit_changed,
    exhibit_removed, exhibit_resistors, exhibit_windings, exhibit_controls, exhibit_valves,
    exhibit_stages, exhibit_voltages, exhibit_performance, exhibit_safety, exhibit_plates,
    exhibit_reform_curves, exhibit_instruments, exhibit_assessed_bench, exhibit_working,
    exhibit_reform_steps, exhibit_hum, exhibit_replacements, exhibit_date_codes, exhibit_visits,
    exhibit_write_on, exhibit_sheet_leakage, exhibit_sheet_reform, exhibit_sheet_bleed,
    exhibit_assessed_capacitors, exhibit_assessed_stages, exhibit_fields, exhibit_policy_limits,
    exhibit_rule_sources;

/* ---- reforming: the plan of one electrolytic, for the bench sheet */

/* Whether the sheet plans to reform this part; *plan is set when it does. */
bool reform_planned(const struct composition *composition, size_t index, struct reform_plan *plan);

/* ---- whether an exhibit would hold anything; for the values of a template */
bool has_changed(const struct composition *composition);
/* The part of a ref, without regard to case, as exhibit_working counts them; false: none. */
bool working_find(const struct composition *composition, const char *ref, size_t *number);
bool has_replacements(const struct composition *composition);
bool has_plates(const struct composition *composition);
bool has_soak_curves(const struct composition *composition);

/* ---- what a template sees */

struct mustache_value *values_of(struct composition *composition);
/* Lists `policy` (name, value, usual where the shop changed it) and `sources` (trust, titles): the
   limits and the sources that this record used. */
void methods_values(struct composition *composition, struct mustache_value *root);
/* "second-hand": how a source is known, in words. */
const char *trust_words(const struct composition *composition, enum trust trust);
/* What manual.md sees besides: `keys` (section, text, example, index) and `has_numbers`. */
void manual_values(struct composition *composition, struct mustache_value *values);
/* A prose field of the job by its name in templates; NULL: no such field, or empty. */
const struct prose *composition_prose(const struct composition *composition, const char *name,
                                      size_t index);
bool composition_is_prose(const char *name);

#endif
