#include "write/table_text.h"

#include "write/text_width.h"

#include <string.h>

/* A number apart: what stands before the decimal point, behind it, and the unit. */
struct parts {
    const char *lead, *tail, *unit, *second;
};

struct slots {
    size_t lead, tail, unit, second;
};

/* One text is made at a time, so that all share the memory that the longest needs. */
struct composing {
    const struct table_text_style *style;
    struct arena *arena;
    struct buffer *made, *figures;
};

static struct buffer *begin(const struct composing *composing)
{
    buffer_clear(composing->made);
    return composing->made;
}

static const char *keep(const struct composing *composing)
{
    return arena_text(composing->arena, composing->made->data, composing->made->length);
}

static size_t columns_of(const char *text)
{
    return text_columns(text, strlen(text));
}

static const char *escaped(const struct composing *composing, const char *open, const char *text,
                           const char *close)
{
    if (!text || (!text[0] && !open[0] && !close[0]))
        return "";
    struct buffer *out = begin(composing);
    buffer_text(out, open);
    composing->style->escape(out, text);
    buffer_text(out, close);
    return keep(composing);
}

static void append_figures(struct buffer *out, const struct figures *figures)
{
    buffer_text(out, figures->bound);
    buffer_text(out, figures->bound[0] ? " " : "");
    buffer_text(out, figures->whole);
}

static struct parts parts_of(const struct composing *composing, const struct cell *cell)
{
    struct parts parts = {"", "", "", ""};
    struct buffer *figures = composing->figures;
    const char *open = cell->strong ? composing->style->strong_open : "",
               *close = cell->strong ? composing->style->strong_close : "";
    if (cell->figures.whole) {
        buffer_clear(figures);
        append_figures(figures, &cell->figures);
        parts.lead = escaped(composing, open, buffer_string(figures), "");
        parts.tail = escaped(composing, "", cell->figures.fraction, close);
        parts.unit = escaped(composing, "", cell->figures.unit, "");
    } else if (cell->text) {
        parts.lead = escaped(composing, open, cell->text, close);
    }
    if (cell->second_figures.whole) {
        buffer_clear(figures);
        append_figures(figures, &cell->second_figures);
        buffer_text(figures, cell->second_figures.fraction);
        buffer_text(figures, cell->second_figures.unit[0] ? " " : "");
        buffer_text(figures, cell->second_figures.unit);
        parts.second = escaped(composing, "", buffer_string(figures), "");
    } else if (cell->second) {
        parts.second = escaped(composing, "", cell->second, "");
    }
    return parts;
}

static size_t larger(size_t one, size_t other)
{
    return one > other ? one : other;
}

static void widen(struct slots *slots, const struct parts *parts, bool number)
{
    /* Words in a number column do not widen its slots. */
    if (number) {
        slots->lead = larger(slots->lead, columns_of(parts->lead));
        slots->tail = larger(slots->tail, columns_of(parts->tail));
        slots->unit = larger(slots->unit, columns_of(parts->unit));
    }
    slots->second = larger(slots->second, columns_of(parts->second));
}

static void pad(struct buffer *out, size_t columns)
{
    for (size_t i = 0; i < columns; i++)
        buffer_byte(out, ' ');
}

static void append_slot(struct buffer *out, const char *text, size_t slot, bool right)
{
    size_t used = columns_of(text), rest = slot > used ? slot - used : 0;
    if (right)
        pad(out, rest);
    buffer_text(out, text);
    if (!right)
        pad(out, rest);
}

static const char *number_text(const struct composing *composing, const struct parts *parts,
                               bool number, const struct slots *slots)
{
    if (!parts->lead[0] && !parts->second[0])
        return "";
    struct buffer *out = begin(composing);
    if (number) {
        append_slot(out, parts->lead, slots->lead, true);
        append_slot(out, parts->tail, slots->tail, false);
        if (slots->unit) {
            buffer_byte(out, ' ');
            append_slot(out, parts->unit, slots->unit, false);
        }
    } else {
        buffer_text(out, parts->lead);
    }
    if (slots->second) {
        buffer_byte(out, ' ');
        append_slot(out, parts->second, slots->second, true);
    }
    return keep(composing);
}

/* Raised figures, so that a ref stays a word for itself. */
static void append_notes(struct buffer *out, const char *notes)
{
    static const char *const raised[] = {"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"};
    buffer_byte(out, ' ');
    for (; *notes; notes++) {
        if (*notes >= '0' && *notes <= '9')
            buffer_text(out, raised[*notes - '0']);
        else
            buffer_byte(out, *notes);
    }
}

static const char *words_text(const struct composing *composing, const struct cell *cell,
                              enum column_kind kind)
{
    struct buffer *out = begin(composing);
    bool strong = cell->strong && kind != COLUMN_REF && cell->text && cell->text[0];
    buffer_text(out, strong ? composing->style->strong_open : "");
    composing->style->escape(out, cell->text);
    buffer_text(out, strong ? composing->style->strong_close : "");
    if (cell->notes)
        append_notes(out, cell->notes);
    bool apart = kind == COLUMN_OUTCOME && composing->style->reasons_apart;
    if (cell->second && cell->second[0] && !apart) {
        buffer_text(out, out->length ? ", " : "");
        composing->style->escape(out, cell->second);
    }
    return keep(composing);
}

static const char *head_text(const struct composing *composing, const struct column *column)
{
    struct buffer *out = begin(composing);
    composing->style->escape(out, column->head);
    if (column->unit && column->unit[0]) {
        buffer_text(out, out->length ? " " : "");
        composing->style->escape(out, column->unit);
    }
    return keep(composing);
}

static const char **cell_at(struct table_text *text, size_t row, size_t column)
{
    return &text->cells[row * text->table->column_count + column];
}

static void compose_numbers(const struct composing *composing, struct table_text *text,
                            size_t column)
{
    const struct table *table = text->table;
    struct parts *parts = arena_array(composing->arena, table->row_count, sizeof *parts);
    struct slots slots = {0};
    for (size_t i = 0; i < table->row_count; i++) {
        const struct cell *cell = &table->rows[i].cells[column];
        if (table->rows[i].group)
            continue;
        parts[i] = parts_of(composing, cell);
        widen(&slots, &parts[i], cell->figures.whole != NULL);
    }
    for (size_t i = 0; i < table->row_count; i++)
        if (!table->rows[i].group)
            *cell_at(text, i, column) = number_text(
                composing, &parts[i], table->rows[i].cells[column].figures.whole, &slots);
}

bool table_text_runs_on(const struct table *table, size_t row, size_t column)
{
    const struct cell *cells = table->rows[row].cells;
    if (table->columns[column].kind != COLUMN_NUMBER || cells[column].figures.whole)
        return false;
    for (size_t i = column + 1; i < table->column_count; i++)
        if (cells[i].figures.whole || (cells[i].text && cells[i].text[0]))
            return false;
    return true;
}

static void compose_column(const struct composing *composing, struct table_text *text,
                           size_t column)
{
    const struct table *table = text->table;
    enum column_kind kind = table->columns[column].kind;
    text->heads[column] = head_text(composing, &table->columns[column]);
    text->widths[column] = columns_of(text->heads[column]);
    text->aligned_right[column] = kind == COLUMN_NUMBER;
    if (kind == COLUMN_NUMBER)
        compose_numbers(composing, text, column);
    for (size_t i = 0; i < table->row_count; i++) {
        const struct cell *cell = &table->rows[i].cells[column];
        const char **made = cell_at(text, i, column);
        if (table->rows[i].group)
            *made = column == 0 ? escaped(composing, "", cell->text, "") : "";
        else if (kind != COLUMN_NUMBER)
            *made = words_text(composing, cell, kind);
        bool runs_on = composing->style->reasons_apart && table_text_runs_on(table, i, column);
        if (!table->rows[i].group && !runs_on)
            text->widths[column] = larger(text->widths[column], columns_of(*made));
    }
}

struct table_text table_text_of(const struct table *table, const struct table_text_style *style,
                                struct arena *arena)
{
    struct buffer made = {0}, figures = {0};
    struct composing composing = {style, arena, &made, &figures};
    size_t columns = table->column_count;
    struct table_text text = {
        .table = table,
        .heads = arena_array(arena, columns, sizeof *text.heads),
        .cells = arena_array(arena, columns * table->row_count, sizeof *text.cells),
        .widths = arena_array(arena, columns, sizeof *text.widths),
        .aligned_right = arena_array(arena, columns, sizeof *text.aligned_right)};
    for (size_t column = 0; column < columns; column++)
        compose_column(&composing, &text, column);
    buffer_release(&made);
    buffer_release(&figures);
    return text;
}

const char *table_text_cell(const struct table_text *text, size_t row, size_t column)
{
    return text->cells[row * text->table->column_count + column];
}
