#include "report/composition.h"
#include "report/typography.h"

#include "job/part.h"

#include <stdlib.h>
#include <string.h>

struct exhibit *exhibit_begin(struct composition *composition, enum exhibit_kind kind,
                              const char *id)
{
    struct exhibit *exhibit = arena_get(composition->arena, sizeof *exhibit);
    exhibit->kind = kind;
    exhibit->id = arena_copy(composition->arena, id);
    return exhibit;
}

const char *exhibit_number(struct composition *composition, enum numbered kind)
{
    static const char *const names[NUMBERED_COUNT] = {"table", "figure", "plate", "sheet"};
    unsigned number = ++composition->numbers[kind];
    return phrase(&composition->say, arena_print(composition->arena, "number.%s", names[kind]), "n",
                  arena_print(composition->arena, "%u", number), NULL);
}

static bool is_placed(const struct composition *composition, const char *id)
{
    for (size_t i = 0; i < composition->piece_count; i++) {
        const struct exhibit *exhibit = composition->pieces[i].exhibit;
        if (exhibit && strcmp(exhibit->id, id) == 0)
            return true;
    }
    return false;
}

void exhibit_place(struct composition *composition, struct exhibit *exhibit)
{
    const char *id = exhibit->id;
    for (unsigned copy = 2; is_placed(composition, exhibit->id); copy++)
        exhibit->id = arena_print(composition->arena, "%s-%u", id, copy);
    composition->pieces =
        arena_grow(composition->arena, composition->pieces, composition->piece_count,
                   &composition->piece_capacity, sizeof *composition->pieces);
    composition->pieces[composition->piece_count++] =
        (struct piece){.offset = composition->text->length, .exhibit = exhibit};
}

/* ---- tables */

struct table_builder table_begin(struct composition *composition, const char *id,
                                 const struct column_plan *plan, size_t columns)
{
    const struct phrasing *say = &composition->say;
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_TABLE, id);
    struct table *table = &exhibit->table;
    table->column_count = columns;
    table->columns = arena_array(composition->arena, columns, sizeof *table->columns);
    for (size_t i = 0; i < columns; i++)
        table->columns[i] = (struct column){
            .head = plan[i].head ? phrase_in(say, "head", plan[i].head) : "",
            .unit = plan[i].unit,
            .label = plan[i].label ? phrase_in(say, "label", plan[i].label) : NULL,
            .kind = plan[i].kind,
            .width_percent = plan[i].width_percent,
            .rank = plan[i].rank,
        };
    return (struct table_builder){.composition = composition, .exhibit = exhibit, .table = table};
}

static struct table_row *new_row(struct table_builder *builder)
{
    struct table *table = builder->table;
    struct arena *arena = builder->composition->arena;
    table->rows = arena_grow(arena, table->rows, table->row_count, &builder->row_capacity,
                             sizeof *table->rows);
    struct table_row *row = &table->rows[table->row_count++];
    row->group = false;
    row->cells = arena_array(arena, table->column_count, sizeof *row->cells);
    return row;
}

struct cell *table_row(struct table_builder *builder)
{
    return new_row(builder)->cells;
}

void table_group(struct table_builder *builder, const char *text)
{
    struct table_row *row = new_row(builder);
    row->group = true;
    row->cells[0].text = text;
}

static size_t note_index(struct table_builder *builder, const char *text)
{
    struct table *table = builder->table;
    for (size_t i = 0; i < table->note_count; i++)
        if (strcmp(table->notes[i], text) == 0)
            return i;
    table->notes = arena_grow(builder->composition->arena, table->notes, table->note_count,
                              &builder->note_capacity, sizeof *table->notes);
    table->notes[table->note_count] = text;
    return table->note_count++;
}

void table_note(struct table_builder *builder, struct cell *cell, const char *text)
{
    if (!text || !*text)
        return;
    struct arena *arena = builder->composition->arena;
    size_t number = note_index(builder, text_stopped(arena, text)) + 1;
    const char *at = cell->notes; /* the first sign that stands behind this one */
    if (!at) {
        cell->notes = arena_print(arena, "%zu", number);
        return;
    }
    while (*at && strtoul(at, NULL, 10) < number) {
        at += strcspn(at, " ");
        at += strspn(at, " ");
    }
    cell->notes =
        *at ? arena_print(arena, "%.*s%zu %s", (int)(at - cell->notes), cell->notes, number, at)
            : arena_print(arena, "%s %zu", cell->notes, number);
}

static bool cell_is_empty(const struct cell *cell)
{
    return (!cell->text || !*cell->text) && !cell->figures.whole && !cell->second &&
           !cell->second_figures.whole && !cell->notes;
}

static bool column_is_empty(const struct table *table, size_t column)
{
    if (column == 0 || table->columns[column].kind == COLUMN_BLANK)
        return false;
    for (size_t i = 0; i < table->row_count; i++)
        if (!table->rows[i].group && !cell_is_empty(&table->rows[i].cells[column]))
            return false;
    return true;
}

static void drop_column(struct table *table, size_t column)
{
    size_t behind = table->column_count - column - 1;
    memmove(&table->columns[column], &table->columns[column + 1], behind * sizeof *table->columns);
    for (size_t i = 0; i < table->row_count; i++) {
        struct cell *cells = table->rows[i].cells;
        memmove(&cells[column], &cells[column + 1], behind * sizeof *cells);
    }
    table->column_count--;
}

void table_drop_empty(struct table_builder *builder)
{
    struct table *table = builder->table;
    double before = 0, after = 0;
    for (size_t i = table->column_count; i > 0; i--) {
        double width = table->columns[i - 1].width_percent;
        bool empty = column_is_empty(table, i - 1);
        before += width;
        after += empty ? 0 : width;
        if (empty)
            drop_column(table, i - 1);
    }
    for (size_t i = 0; i < table->column_count && after > 0; i++)
        table->columns[i].width_percent *= before / after;
}

static void typeset_table(struct arena *arena, struct table *table)
{
    for (size_t i = 0; i < table->row_count; i++)
        for (size_t j = 0; j < table->column_count; j++) {
            struct cell *cell = &table->rows[i].cells[j];
            cell->text = text_typeset(arena, cell->text);
            cell->second = text_typeset(arena, cell->second);
        }
    for (size_t i = 0; i < table->note_count; i++)
        table->notes[i] = text_typeset(arena, table->notes[i]);
}

void table_place(struct table_builder *builder, enum numbered kind, const char *caption)
{
    if (builder->table->row_count == 0)
        return;
    typeset_table(builder->composition->arena, builder->table);
    builder->table->caption = caption;
    builder->exhibit->number = exhibit_number(builder->composition, kind);
    exhibit_place(builder->composition, builder->exhibit);
}

/* ---- numbers */

double round_figures(double value, unsigned digits, bool up)
{
    if (value == 0 || !isfinite(value))
        return value;
    double step = pow(10, floor(log10(fabs(value))) + 1 - digits);
    /* 770 divided by 10 may be a hair above 77: not yet the next figure. */
    double steps = fabs(value) / step;
    steps = up ? ceil(steps - 1e-9) : round(steps);
    return copysign(steps * step, value);
}

struct figures figures_plain(const struct composition *composition, double value, double scale,
                             unsigned decimals)
{
    if (!isfinite(value))
        return (struct figures){0};
    return figures_scaled(composition->arena, value, scale, "", decimals);
}

struct figures figures_micro(const struct composition *composition, double ampere, unsigned digits)
{
    double value = round_figures(ampere, digits, false);
    return figures_plain(composition, value, 1e-6,
                         isfinite(value) ? decimals_for(value, 1e-6, digits) : 0);
}

/* As many figures as it takes to show the value to `most` figures: 0.02, 0.047, 12.5. */
static unsigned digits_needed(double value, unsigned most)
{
    unsigned digits = 1;
    double wanted = round_figures(value, most, false);
    while (digits < most &&
           fabs(round_figures(value, digits, false) - wanted) > 1e-9 * fabs(wanted))
        digits++;
    return digits;
}

struct figures figures_unit(const struct composition *composition, double value, enum unit unit,
                            unsigned digits)
{
    if (!isfinite(value))
        return (struct figures){0};
    return figures_of(composition->arena, value, unit, digits_needed(value, digits));
}

const char *text_set(struct arena *arena, double value, enum unit unit, unsigned digits)
{
    return isfinite(value) ? quantity_text(arena, value, unit, digits_needed(value, digits)) : NULL;
}

const char *text_unit(const struct composition *composition, double value, enum unit unit,
                      unsigned digits)
{
    return text_set(composition->arena, value, unit, digits);
}

const char *text_uncertain(const struct composition *composition, double value, double uncertainty,
                           enum unit unit, unsigned digits)
{
    if (!isfinite(value) || !isfinite(uncertainty))
        return text_unit(composition, value, unit, digits);
    return uncertain_text(composition->arena, value, uncertainty, unit,
                          digits_needed(value, digits));
}

const char *text_micro(struct arena *arena, double ampere, unsigned digits)
{
    if (!isfinite(ampere))
        return NULL;
    double value = round_figures(ampere, digits, false);
    struct figures figures =
        figures_scaled(arena, value, 1e-6, "µA", decimals_for(value, 1e-6, digits));
    return figures_text(arena, &figures);
}

const char *text_signed(struct arena *arena, double value, enum unit unit, unsigned digits)
{
    const char *text = quantity_text(arena, value, unit, digits);
    return value > 0 ? arena_print(arena, "+%s", text) : text;
}

struct figures figures_quantity(const struct composition *composition,
                                const struct quantity *quantity)
{
    if (!quantity->set || !isfinite(quantity->value))
        return (struct figures){0};
    enum { DIGITS_TYPED = 6 };
    unsigned digits = digits_needed(quantity->value, DIGITS_TYPED);
    struct figures figures =
        quantity->unit == UNIT_CURRENT && fabs(quantity->value) < 1e-3
            ? figures_scaled(composition->arena, quantity->value, 1e-6, "µA",
                             decimals_for(quantity->value, 1e-6, digits))
            : figures_of(composition->arena, quantity->value, quantity->unit, digits);
    if (quantity->bound != BOUND_NONE)
        figures.bound = quantity->bound == BOUND_OVER ? ">" : "<";
    return figures;
}

struct figures figures_volts(const struct composition *composition, const struct quantity *quantity)
{
    if (!quantity->set || !isfinite(quantity->value))
        return (struct figures){0};
    bool whole =
        fabs(quantity->value) >= 100 || fabs(quantity->value - round(quantity->value)) < 0.05;
    struct figures figures = figures_plain(composition, quantity->value, 1, whole ? 0 : 1);
    if (quantity->bound != BOUND_NONE)
        figures.bound = quantity->bound == BOUND_OVER ? ">" : "<";
    return figures;
}

const char *text_quantity(const struct composition *composition, const struct quantity *quantity)
{
    struct figures figures = figures_quantity(composition, quantity);
    return figures.whole ? figures_text(composition->arena, &figures) : NULL;
}

/* ---- text */

const char *text_join(struct arena *arena, const char *separator, const char *const *texts,
                      size_t count)
{
    struct buffer joined = {0};
    for (size_t i = 0; i < count; i++) {
        if (!texts[i] || !*texts[i])
            continue;
        if (joined.length)
            buffer_text(&joined, separator);
        buffer_text(&joined, texts[i]);
    }
    const char *text = joined.length ? arena_text(arena, joined.data, joined.length) : NULL;
    buffer_release(&joined);
    return text;
}

const char *text_sentence(struct arena *arena, const char *text)
{
    char *copy = arena_copy(arena, text_typeset(arena, text));
    if (copy && copy[0] >= 'a' && copy[0] <= 'z')
        copy[0] = (char)(copy[0] - 'a' + 'A');
    return copy;
}

const char *text_stopped(struct arena *arena, const char *text)
{
    size_t length = text ? strlen(text) : 0;
    if (length == 0 || strchr(".!?", text[length - 1]))
        return text;
    return arena_print(arena, "%s.", text);
}

/* Length of a ref at the beginning of text: capitals, then figures, as C14 or VR1; 0: none. */
static size_t ref_length(const char *text)
{
    size_t letters = strspn(text, "ABCDEFGHIJKLMNOPQRSTUVWXYZ");
    size_t figures = strspn(text + letters, "0123456789");
    size_t length = letters + figures;
    return letters && letters <= 4 && figures && (!text[length] || strchr(" ,.;:", text[length]))
               ? length
               : 0;
}

const char *text_refs(struct arena *arena, const char *text)
{
    struct buffer out = {0};
    if (!text)
        return NULL;
    for (bool begins = true; *text; begins = text[-1] == ' ') {
        size_t length = begins ? ref_length(text) : 0;
        bool listed = length && text[length] == ' ' && ref_length(text + length + 1);
        buffer_append(&out, text, length ? length : 1);
        buffer_text(&out, listed ? "," : "");
        text += length ? length : 1;
    }
    const char *copy = arena_text(arena, out.data ? out.data : "", out.length);
    buffer_release(&out);
    return copy;
}

const char *text_with_micro(struct arena *arena, const char *text)
{
    static const char root[] = "sqrt";
    struct buffer signs = {0};
    for (const char *at = text; *at; at++) {
        bool unit_begins = at > text && (at[-1] == ' ' || (at[-1] >= '0' && at[-1] <= '9'));
        if (*at == 'u' && unit_begins && (at[1] == 'A' || at[1] == 'F' || at[1] == 'V')) {
            buffer_text(&signs, "µ");
        } else if (strncmp(at, root, strlen(root)) == 0) {
            buffer_text(&signs, "√");
            at += strlen(root) - 1;
        } else if (*at == '-' && (at == text || at[-1] == ' ') && at[1] >= '0' && at[1] <= '9') {
            buffer_text(&signs, "−");
        } else if (*at == '*') {
            buffer_text(&signs, "×");
        } else {
            buffer_byte(&signs, *at);
        }
    }
    const char *shown = arena_text(arena, signs.data, signs.length);
    buffer_release(&signs);
    return shown;
}

static const char *class_text(const struct composition *composition, const struct marking *marking)
{
    if (marking->safety_class == CLASS_NONE)
        return NULL;
    const char *key = marking->class_count == 2 ? "part.two_classes" : "part.class";
    return phrase(&composition->say, key, "class", safety_class_text(marking->safety_class), NULL);
}

static const char *rated_text(const struct composition *composition, const struct marking *marking)
{
    const char *rated = text_quantity(composition, &marking->rated);
    return rated && marking->rated_ac ? phrase(&composition->say, "part.ac", "volts", rated, NULL)
                                      : rated;
}

const char *text_marking(const struct composition *composition, const struct marking *marking)
{
    if (!marking->set)
        return NULL;
    if (!marking->value.set)
        return marking->written;
    const char *parts[] = {
        marking->type == DIELECTRIC_UNKNOWN
            ? NULL
            : phrase_in(&composition->say, "type", dielectric_text(marking->type)),
        marking->other_words,
        class_text(composition, marking),
        text_quantity(composition, &marking->value),
        rated_text(composition, marking),
    };
    return text_join(composition->arena, " ", parts, sizeof parts / sizeof *parts);
}

const char *date_text(const struct date *date)
{
    return date->set ? date->written : NULL;
}

/* ---- parts */

enum mark mark_of(enum outcome outcome)
{
    switch (outcome) {
    case OUTCOME_PASS:
        return MARK_PASS;
    case OUTCOME_CONDITIONAL_PASS:
        return MARK_CONDITIONAL_PASS;
    case OUTCOME_NOT_JUDGED:
        return MARK_NOT_JUDGED;
    case OUTCOME_CONDITIONAL_FAIL:
        return MARK_CONDITIONAL_FAIL;
    case OUTCOME_FAIL:
        return MARK_FAIL;
    case OUTCOME_COUNT:
        break;
    }
    return MARK_NONE;
}

static unsigned place_rank(enum place place)
{
    return place == PLACE_UNKNOWN ? PLACE_COUNT : (unsigned)place;
}

const size_t *capacitors_by_place(const struct composition *composition)
{
    size_t count = composition->findings->capacitor_count, found = 0;
    size_t *order = arena_array(composition->arena, count + 1, sizeof *order);
    for (unsigned rank = 0; rank <= PLACE_COUNT; rank++)
        for (size_t i = 0; i < count; i++)
            if (place_rank(composition->findings->capacitors[i].part->place) == rank)
                order[found++] = i;
    return order;
}

void table_by_place(struct table_builder *builder,
                    void (*add_part)(struct table_builder *builder, size_t index))
{
    const struct composition *composition = builder->composition;
    const struct findings *findings = composition->findings;
    const size_t *order = capacitors_by_place(composition);
    builder->table->group_head = phrase(&composition->say, "head.place", NULL);
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        enum place place = findings->capacitors[order[i]].part->place;
        if (i == 0 || findings->capacitors[order[i - 1]].part->place != place)
            table_group(builder, phrase_in(&composition->say, "place", place_text(place)));
        add_part(builder, order[i]);
    }
}

void set_marked_value(const struct composition *composition, struct cell *cell,
                      const struct marking *marked)
{
    if (marked->value.set)
        cell->figures = figures_quantity(composition, &marked->value);
    else
        cell->text = marked->written;
}

enum action capacitor_done(const struct composition *composition, size_t index)
{
    return part_action(composition->job, composition->findings->capacitors[index].part);
}

enum origin capacitor_was(const struct composition *composition, size_t index)
{
    return part_origin(composition->job, composition->findings->capacitors[index].part);
}

double reading_current(const struct reading *reading)
{
    if (!reading->value.set)
        return NAN;
    if (reading->value.unit == UNIT_RESISTANCE)
        return reading->value.value > 0 ? reading->set_volts.value / reading->value.value : NAN;
    return reading->value.value;
}

/* ---- exhibits without content of their own */

void exhibit_contents(struct composition *composition, size_t index)
{
    (void)index;
    exhibit_place(composition, exhibit_begin(composition, EXHIBIT_CONTENTS, "contents"));
}

static void place_silent(struct composition *composition, enum exhibit_kind kind, const char *name)
{
    const char *id = arena_print(composition->arena, "%s-%zu", name, composition->piece_count + 1);
    exhibit_place(composition, exhibit_begin(composition, kind, id));
}

void exhibit_page_break(struct composition *composition, size_t index)
{
    (void)index;
    place_silent(composition, EXHIBIT_PAGE_BREAK, "page-break");
}

void exhibit_small(struct composition *composition, size_t index)
{
    (void)index;
    place_silent(composition, EXHIBIT_SMALL, "small");
}

void exhibit_two_columns(struct composition *composition, size_t index)
{
    (void)index;
    place_silent(composition, EXHIBIT_TWO_COLUMNS, "two-columns");
}

void exhibit_side_by_side(struct composition *composition, size_t index)
{
    (void)index;
    place_silent(composition, EXHIBIT_SIDE_BY_SIDE, "side-by-side");
}

void exhibit_fingerprint(struct composition *composition, size_t index)
{
    (void)index;
    if (!composition->findings->fingerprint)
        return;
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_FINGERPRINT, "sha-256");
    exhibit->fingerprint.text = composition->findings->fingerprint;
    exhibit_place(composition, exhibit);
}
