/* Tables in HTML: the decimal point in one line on a page, folded lines on a phone. No ARIA roles:
   browsers keep those of table elements whatever their display is, and HTML forbids saying them
   again. */
#include "write/html_parts.h"

#include "write/text_width.h"

#include <string.h>

enum { SLOT_DIGITS_MAX = 6, FOLDED_COLUMNS_MAX = 4 };

/* The slots of a number column: the digits of its longest fraction and the width of its widest
   unit in thousandths of an em; 0: no slot. */
struct slots {
    size_t digits;
    unsigned unit_milli;
    bool second; /* numbers to the right of the first */
};

struct table_writing {
    struct html *html;
    const struct table *table;
    struct slots *slots;
    bool folded; /* cells become lines on a phone */
    size_t head; /* the column that names its row; column_count: none does */
};

/* The ref, or else the words in front. */
static size_t head_column(const struct table *table)
{
    for (size_t i = 0; i < table->column_count; i++)
        if (table->columns[i].kind == COLUMN_REF)
            return i;
    return table->column_count > 1 && table->columns[0].kind == COLUMN_TEXT ? 0
                                                                            : table->column_count;
}

/* In a table of texts every cell behind the first takes a line. */
static unsigned rank_of(const struct table *table, size_t column)
{
    unsigned rank = table->columns[column].rank;
    if (table->text_only)
        return column == 0 ? 1 : 3;
    return rank >= 1 && rank <= 3 ? rank : 3;
}

static bool is_number(const struct table *table, size_t column)
{
    return table->columns[column].kind == COLUMN_NUMBER;
}

static struct slots slots_of(const struct table *table, size_t column)
{
    struct slots slots = {0};
    for (size_t i = 0; i < table->row_count; i++) {
        const struct figures *figures = &table->rows[i].cells[column].figures;
        if (table->rows[i].group || !figures->whole)
            continue;
        if (table->rows[i].cells[column].second_figures.whole && !table->write_in)
            slots.second = true;
        size_t fraction = strlen(figures->fraction);
        if (fraction > slots.digits + 1)
            slots.digits = fraction - 1;
        unsigned unit_milli = text_width_milli(figures->unit, false);
        slots.unit_milli = unit_milli > slots.unit_milli ? unit_milli : slots.unit_milli;
    }
    if (slots.digits > SLOT_DIGITS_MAX)
        slots.digits = SLOT_DIGITS_MAX;
    return slots;
}

static void write_bound(struct html *html, const struct figures *figures)
{
    if (!figures->bound[0])
        return;
    html_text(html, figures->bound);
    html_raw(html, "\xe2\x80\x89");
}

/* Whole part, then a slot for the fraction, then one for the unit. */
static void write_figures(struct html *html, const struct figures *figures, struct slots slots)
{
    write_bound(html, figures);
    html_text(html, figures->whole);
    if (slots.digits > 0) {
        char slot[] = "<span class=\"f f0\">";
        slot[sizeof slot - 4] = (char)('0' + slots.digits);
        html_raw(html, slot);
        html_text(html, figures->fraction);
        html_raw(html, "</span>");
    } else {
        html_text(html, figures->fraction);
    }
    if (slots.unit_milli == 0)
        return;
    html_raw(html, slots.unit_milli <= 1450   ? "<span class=\"u\">"
                   : slots.unit_milli <= 2050 ? "<span class=\"u u3\">"
                                              : "<span class=\"u u5\">");
    html_text(html, figures->unit);
    html_raw(html, "</span>");
}

static void write_plain_figures(struct html *html, const struct figures *figures)
{
    write_bound(html, figures);
    html_text(html, figures->whole);
    html_text(html, figures->fraction);
    if (figures->unit[0]) {
        html_raw(html, "\xc2\xa0");
        html_text(html, figures->unit);
    }
}

static void write_number(const struct table_writing *writing, const struct cell *cell,
                         size_t column)
{
    struct html *html = writing->html;
    if (cell->strong)
        html_raw(html, "<strong>");
    if (cell->figures.whole)
        write_figures(html, &cell->figures, writing->slots[column]);
    else
        html_text(html, cell->text);
    if (cell->strong)
        html_raw(html, "</strong>");
    if (cell->second_figures.whole) {
        html_raw(html, writing->table->write_in ? "<span class=\"under\">" : "<span class=\"rv\">");
        write_plain_figures(html, &cell->second_figures);
        html_raw(html, "</span>");
    } else if (cell->figures.whole && writing->slots[column].second) {
        html_raw(html, "<span class=\"rv\"></span>"); /* keeps the first ones in line */
    }
    if (cell->second) {
        html_raw(html, "<span class=\"under\">");
        html_text(html, cell->second);
        html_raw(html, "</span>");
    }
}

static void write_outcome(struct html *html, const struct cell *cell)
{
    if (cell->text) {
        html_raw(html, cell->strong ? "<span class=\"o fail\">" : "<span class=\"o\">");
        buffer_append(html->out, html->marks[cell->mark].data, html->marks[cell->mark].length);
        html_text(html, cell->text);
        html_raw(html, "</span>");
    }
    if (cell->second) {
        html_raw(html, "<span class=\"why\">");
        html_text(html, cell->second);
        html_raw(html, "</span>");
    }
}

static void write_words(struct html *html, const struct cell *cell, enum column_kind kind)
{
    bool strong = cell->strong && kind != COLUMN_REF;
    if (strong)
        html_raw(html, "<strong>");
    html_text(html, cell->text);
    if (strong)
        html_raw(html, "</strong>");
    if (cell->notes) {
        html_raw(html, "<sup>");
        html_text(html, cell->notes);
        html_raw(html, "</sup>");
    }
    if (cell->second) {
        html_raw(html, "<span class=\"under\">");
        html_text(html, cell->second);
        html_raw(html, "</span>");
    }
}

static bool is_empty(const struct cell *cell)
{
    return !cell->figures.whole && !cell->second_figures.whole && !(cell->text && cell->text[0]) &&
           !cell->second;
}

/* Words in a number column ("no reading passes") run on over the empty number cells behind them. */
static size_t span_of(const struct table *table, const struct cell *cells, size_t column)
{
    const struct cell *cell = &cells[column];
    size_t span = 1;
    if (!is_number(table, column) || cell->figures.whole || !cell->text)
        return span;
    while (column + span < table->column_count && is_number(table, column + span) &&
           is_empty(&cells[column + span]))
        span++;
    return span;
}

static const char *const kind_class[] = {[COLUMN_REF] = "c-ref",
                                         [COLUMN_TEXT] = "c-t",
                                         [COLUMN_NUMBER] = "n",
                                         [COLUMN_OUTCOME] = "c-o",
                                         [COLUMN_BLANK] = "blank"};

static void write_classes(const struct table_writing *writing, size_t column, bool words)
{
    const struct column *here = &writing->table->columns[column];
    html_raw(writing->html, " class=\"");
    html_raw(writing->html, words && here->kind == COLUMN_NUMBER ? "c-t" : kind_class[here->kind]);
    if (writing->folded) {
        char rank[] = " p1";
        rank[2] = (char)('0' + rank_of(writing->table, column));
        html_raw(writing->html, rank);
    }
    html_raw(writing->html, "\"");
}

/* The unit that stands in the head, for a cell that is read without it. */
static void write_folded_unit(struct html *html, const struct column *column,
                              const struct cell *cell)
{
    if (column->kind != COLUMN_NUMBER || !cell->figures.whole || !column->unit ||
        strchr(column->unit, ' '))
        return;
    html_raw(html, " data-u=\"");
    html_text(html, column->unit);
    html_raw(html, "\"");
}

static void write_cell(const struct table_writing *writing, const struct cell *cell, size_t column,
                       size_t span)
{
    struct html *html = writing->html;
    const struct column *here = &writing->table->columns[column];
    bool words = here->kind == COLUMN_NUMBER && !cell->figures.whole && cell->text;
    bool head = column == writing->head;
    html_raw(html, head ? "<th scope=\"row\"" : "<td");
    write_classes(writing, column, words);
    if (span > 1) {
        html_raw(html, " colspan=\"");
        buffer_decimal(html->out, (long long)span);
        html_raw(html, "\"");
    }
    if (writing->folded && here->label && !is_empty(cell)) {
        html_raw(html, " data-l=\"");
        html_text(html, here->label);
        html_raw(html, "\"");
        write_folded_unit(html, here, cell);
    }
    html_raw(html, ">");
    if (here->kind == COLUMN_NUMBER)
        write_number(writing, cell, column);
    else if (here->kind == COLUMN_OUTCOME)
        write_outcome(html, cell);
    else
        write_words(html, cell, here->kind);
    html_raw(html, head ? "</th>" : "</td>");
}

static void write_group_row(const struct table_writing *writing, const struct table_row *row)
{
    struct html *html = writing->html;
    html_raw(html, "<tr class=\"place\"><th scope=\"rowgroup\" colspan=\"");
    buffer_decimal(html->out, (long long)writing->table->column_count);
    html_raw(html, "\">");
    html_text(html, row->cells[0].text);
    html_raw(html, "</th></tr>\n");
}

static void write_row(const struct table_writing *writing, const struct table_row *row)
{
    html_raw(writing->html, "<tr>");
    for (size_t column = 0; column < writing->table->column_count;) {
        size_t span = span_of(writing->table, row->cells, column);
        write_cell(writing, &row->cells[column], column, span);
        column += span;
    }
    html_raw(writing->html, "</tr>\n");
}

static void write_body(const struct table_writing *writing)
{
    struct html *html = writing->html;
    const struct table *table = writing->table;
    bool open = false;
    for (size_t i = 0; i < table->row_count; i++) {
        const struct table_row *row = &table->rows[i];
        if (row->group || !open) {
            html_raw(html, open ? "</tbody><tbody" : "<tbody");
            html_raw(html, row->group ? " class=\"group\">\n" : ">\n");
            open = true;
        }
        if (row->group)
            write_group_row(writing, row);
        else
            write_row(writing, row);
    }
    if (open)
        html_raw(html, "</tbody>");
}

static void write_head(const struct table_writing *writing)
{
    struct html *html = writing->html;
    html_raw(html, "<thead><tr>");
    for (size_t i = 0; i < writing->table->column_count; i++) {
        const struct column *column = &writing->table->columns[i];
        bool named = column->head[0] || (column->unit && column->unit[0]);
        html_raw(html, named ? "<th scope=\"col\"" : "<td");
        write_classes(writing, i, false);
        html_raw(html, ">");
        html_text(html, column->head);
        if (column->unit && column->unit[0]) {
            html_raw(html, "<span class=\"unit\">");
            html_text(html, column->unit);
            html_raw(html, "</span>");
        }
        html_raw(html, named ? "</th>" : "</td>");
    }
    html_raw(html, "</tr></thead>\n");
}

static bool has_widths(const struct table *table)
{
    for (size_t i = 0; i < table->column_count; i++)
        if (table->columns[i].width_percent > 0)
            return true;
    return false;
}

static void write_widths(const struct table_writing *writing)
{
    if (!has_widths(writing->table))
        return;
    html_raw(writing->html, "<colgroup>");
    for (size_t i = 0; i < writing->table->column_count; i++) {
        double width = writing->table->columns[i].width_percent;
        if (width > 0) {
            html_raw(writing->html, "<col style=\"width:");
            html_number(writing->html, width);
            html_raw(writing->html, "%\">");
        } else {
            html_raw(writing->html, "<col>");
        }
    }
    html_raw(writing->html, "</colgroup>");
}

static size_t first_rank_columns(const struct table *table)
{
    size_t count = 0;
    for (size_t i = 0; i < table->column_count; i++)
        count += rank_of(table, i) == 1;
    return count;
}

static bool has_outcome(const struct table *table)
{
    for (size_t i = 0; i < table->column_count; i++)
        if (table->columns[i].kind == COLUMN_OUTCOME && table->columns[i].rank == 1)
            return true;
    return false;
}

/* Classes say how it looks (lined, write, fixed) and how it folds (judged, r1 to r4, nohead). */
static void write_table_classes(const struct table_writing *writing)
{
    struct html *html = writing->html;
    const struct table *table = writing->table;
    html_raw(html, table->write_in ? "write" : writing->folded ? "fold" : "scroll");
    if (table->lined)
        html_raw(html, " lined");
    if (table->text_only)
        html_raw(html, " nohead");
    if (has_widths(table) && !table->write_in)
        html_raw(html, " fixed");
    if (!writing->folded)
        return;
    if (has_outcome(table) && first_rank_columns(table) == FOLDED_COLUMNS_MAX) {
        html_raw(html, " judged");
    } else {
        char columns[] = " r0";
        columns[2] = (char)('0' + first_rank_columns(table));
        html_raw(html, columns);
    }
}

static void write_notes(struct html *html, const struct table *table)
{
    if (table->note_count == 0 && !table->remark)
        return;
    html_raw(html, "<p class=\"note\">");
    for (size_t i = 0; i < table->note_count; i++) {
        html_raw(html, "<sup>");
        buffer_decimal(html->out, (long long)i + 1);
        html_raw(html, "</sup>\xc2\xa0");
        html_text(html, table->notes[i]);
        html_raw(html, i + 1 < table->note_count || table->remark ? " " : "");
    }
    html_text(html, table->remark);
    html_raw(html, "</p>");
}

void html_table(struct html *html, const struct exhibit *exhibit)
{
    const struct table *table = &exhibit->table;
    size_t columns = first_rank_columns(table);
    struct table_writing writing = {
        .html = html,
        .table = table,
        .head = head_column(table),
        .slots = arena_array(&html->scratch, table->column_count, sizeof(struct slots)),
        .folded = !table->write_in && columns >= 1 && columns <= FOLDED_COLUMNS_MAX};
    for (size_t i = 0; i < table->column_count; i++)
        if (is_number(table, i))
            writing.slots[i] = slots_of(table, i);
    /* Up to twelve rows stay together on paper. */
    html_raw(html,
             table->row_count <= 12 ? "<div class=\"exhibit keep\"" : "<div class=\"exhibit\"");
    html_raw(html, " id=\"");
    html_text(html, exhibit->id);
    html_raw(html, "\"");
    if (!writing.folded) { /* a phone scrolls it sideways: the keyboard must reach it */
        html_raw(html, " tabindex=\"0\" role=\"group\" aria-label=\"");
        html_text(html, exhibit->number ? exhibit->number : table->caption);
        html_raw(html, "\"");
    }
    html_raw(html, "><table class=\"");
    write_table_classes(&writing);
    html_raw(html, "\">");
    if (exhibit->number || table->caption) {
        html_raw(html, "<caption>");
        html_caption(html, exhibit, table->caption);
        html_raw(html, "</caption>");
    }
    write_widths(&writing);
    write_head(&writing);
    write_body(&writing);
    html_raw(html, "</table>");
    write_notes(html, table);
    html_raw(html, "</div>\n");
}
