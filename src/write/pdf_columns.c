#include "write/pdf_table.h"

#include <string.h>

static const double mark_indent = 1.18; /* of the size: mark and gap before an outcome's word */

double table_text_width(const struct table_layout *layout, enum text_face face, const char *text)
{
    if (!text || !*text)
        return 0;
    return (double)pdf_text_width(layout->composer->flow.resources, face, text, strlen(text)) *
           type_table.size / 1000;
}

const char *number_whole(const struct table_layout *layout, const struct figures *figures)
{
    if (!figures->bound || !*figures->bound)
        return figures->whole;
    return arena_print(layout->composer->flow.arena, "%s\u2009%s", figures->bound, figures->whole);
}

static double larger(double a, double b)
{
    return a > b ? a : b;
}

static void widen_slots(const struct table_layout *layout, struct number_slots *slots,
                        const struct figures *figures, enum text_face face)
{
    if (!figures->whole)
        return;
    double whole = table_text_width(layout, face, number_whole(layout, figures));
    slots->whole = larger(slots->whole, whole);
    slots->fraction = larger(slots->fraction, table_text_width(layout, face, figures->fraction));
    if (figures->unit && *figures->unit)
        slots->unit = larger(slots->unit, 0.25 * type_table.size +
                                              table_text_width(layout, face, figures->unit));
}

/* What a column wants: the width of its contents unbroken, and the least it can do with. */
struct wish {
    double natural, least;
};

static double head_width(const struct table_layout *layout, const struct column *column)
{
    double unit =
        table_text_width(layout, FACE_REGULAR, column->unit) * type_unit.size / type_table.size;
    return larger(table_text_width(layout, FACE_SEMIBOLD, column->head), unit);
}

static double number_width(const struct column_layout *column)
{
    double second = larger(slots_width(&column->second), column->second_text);
    double first = slots_width(&column->first);
    return column->beside ? first + beside_gap_pt + second : larger(first, second);
}

static void measure_numbers(struct table_layout *layout, size_t index)
{
    struct column_layout *column = &layout->columns[index];
    for (size_t i = 0; i < layout->table->row_count; i++) {
        const struct table_row *row = &layout->table->rows[i];
        if (row->group)
            continue;
        const struct cell *cell = &row->cells[index];
        enum text_face face = cell->strong ? FACE_SEMIBOLD : FACE_REGULAR;
        widen_slots(layout, &column->first, &cell->figures, face);
        widen_slots(layout, &column->second, &cell->second_figures, FACE_REGULAR);
        column->second_text =
            larger(column->second_text, table_text_width(layout, FACE_REGULAR, cell->second));
    }
}

static double widest_text(const struct table_layout *layout, size_t index, bool seconds)
{
    double widest = 0;
    for (size_t i = 0; i < layout->table->row_count; i++) {
        const struct table_row *row = &layout->table->rows[i];
        if (row->group)
            continue;
        const struct cell *cell = &row->cells[index];
        bool bold = cell->strong || layout->table->columns[index].kind == COLUMN_REF;
        double notes = cell->notes ? 0.7 * (table_text_width(layout, FACE_SEMIBOLD, "\u2009") +
                                            table_text_width(layout, FACE_SEMIBOLD, cell->notes))
                                   : 0;
        widest =
            larger(widest, notes + table_text_width(layout, bold ? FACE_SEMIBOLD : FACE_REGULAR,
                                                    cell->text));
        if (seconds)
            widest = larger(widest, table_text_width(layout, FACE_REGULAR, cell->second));
    }
    return widest;
}

static struct wish column_wish(struct table_layout *layout, size_t index)
{
    const struct column *column = &layout->table->columns[index];
    double block = layout->composer->flow.page->text_width;
    double head = head_width(layout, column);
    double least_head = larger(0, head < block / 6 ? head : block / 6);
    double text;
    switch (column->kind) {
    case COLUMN_NUMBER:
        measure_numbers(layout, index);
        text = number_width(&layout->columns[index]);
        return (struct wish){larger(head, text), text};
    case COLUMN_REF:
        text = larger(head, widest_text(layout, index, true));
        return (struct wish){text, text < block * 0.35 ? text : block * 0.35};
    case COLUMN_OUTCOME:
        text = larger(head, widest_text(layout, index, false) + mark_indent * type_table.size);
        return (struct wish){text, text < block * 0.2 ? text : block * 0.2};
    case COLUMN_TEXT:
        text = widest_text(layout, index, true);
        return (struct wish){larger(head, text), larger(least_head, block * 0.06)};
    case COLUMN_BLANK:
        return (struct wish){larger(head, block * 0.08), least_head};
    }
    return (struct wish){head, head};
}

static bool is_elastic(enum column_kind kind)
{
    return kind == COLUMN_TEXT || kind == COLUMN_OUTCOME || kind == COLUMN_BLANK;
}

static void set_gaps(struct table_layout *layout)
{
    const struct table *table = layout->table;
    for (size_t i = 0; i < table->column_count; i++) {
        struct column_layout *column = &layout->columns[i];
        enum column_kind kind = table->columns[i].kind;
        bool behind_number = i > 0 && table->columns[i - 1].kind == COLUMN_NUMBER;
        column->gap_right = i + 1 < table->column_count ? column_gap_pt : 0;
        if (kind == COLUMN_BLANK)
            column->gap_left = blank_pad_pt;
        else if (kind != COLUMN_NUMBER && behind_number)
            column->gap_left = after_number_pt;
    }
}

/* Columns with a width in per cent, and what is left for the others by what they want. */
static void share_out(struct table_layout *layout, const struct wish *wishes)
{
    const struct table *table = layout->table;
    double block = layout->composer->flow.page->text_width;
    double fixed = 0, wanted = 0;
    for (size_t i = 0; i < table->column_count; i++) {
        const struct column_layout *column = &layout->columns[i];
        if (table->columns[i].width_percent > 0)
            fixed += table->columns[i].width_percent / 100 * block;
        else
            wanted += wishes[i].natural + column->gap_left + column->gap_right;
    }
    double scale = fixed > block ? block / fixed : 1;
    double left = larger(0, block - fixed);
    for (size_t i = 0; i < table->column_count; i++) {
        struct column_layout *column = &layout->columns[i];
        double gaps = column->gap_left + column->gap_right;
        double outer = table->columns[i].width_percent > 0
                           ? table->columns[i].width_percent / 100 * block * scale
                           : (wishes[i].natural + gaps) / wanted * left;
        column->width = outer - gaps;
    }
    if (wanted <= 0 && fixed < block && fixed > 0) /* nobody takes the rest: all grow */
        for (size_t i = 0; i < table->column_count; i++)
            layout->columns[i].width *= block / fixed;
}

/* What cannot be broken gets its least width from those that can. */
static void settle(struct table_layout *layout, const struct wish *wishes)
{
    const struct table *table = layout->table;
    double missing = 0, spare = 0;
    for (size_t i = 0; i < table->column_count; i++) {
        double short_of = wishes[i].least - layout->columns[i].width;
        if (short_of > 0)
            missing += short_of;
        else
            spare += is_elastic(table->columns[i].kind) ? -short_of : -short_of * 0.5;
    }
    if (missing <= 0 || spare <= 0)
        return;
    double given = missing < spare ? 1 : spare / missing; /* of what is missing */
    double taken = missing * given / spare;               /* of what is spare */
    for (size_t i = 0; i < table->column_count; i++) {
        double short_of = wishes[i].least - layout->columns[i].width;
        if (short_of > 0)
            layout->columns[i].width += short_of * given;
        else
            layout->columns[i].width +=
                short_of * taken * (is_elastic(table->columns[i].kind) ? 1 : 0.5);
    }
}

/* A column whose texts fit on one line each is not made narrower than they are. */
static void keep_unbroken(const struct table_layout *layout, struct wish *wishes)
{
    const double nearly_pt = 5; /* a column of numbers grows by this for its head, no more */
    for (size_t i = 0; i < layout->table->column_count; i++) {
        const struct column *column = &layout->table->columns[i];
        double width = layout->columns[i].width;
        double head = head_width(layout, column) - head_reach_pt;
        if (is_elastic(column->kind) && wishes[i].natural <= width + 1.5)
            wishes[i].least = larger(wishes[i].least, wishes[i].natural);
        else if (column->kind == COLUMN_NUMBER && head <= width + nearly_pt)
            wishes[i].least = larger(wishes[i].least, head);
    }
}

static double widest_word(const struct table_layout *layout, const char *text)
{
    double widest = 0;
    for (size_t length; text && *text; text += length + strspn(text + length, " ")) {
        length = strcspn(text, " ");
        widest = larger(widest, (double)pdf_text_width(layout->composer->flow.resources,
                                                       FACE_SEMIBOLD, text, length) *
                                    type_table.size / 1000);
    }
    return widest;
}

/* Whether a word of a head would be broken, or what may not be broken is. */
static bool is_crowded(const struct table_layout *layout, const struct wish *wishes)
{
    const double slack_pt = 0.5;
    for (size_t i = 0; i < layout->table->column_count; i++) {
        double width = layout->columns[i].width + slack_pt;
        double reach = layout->table->columns[i].kind == COLUMN_NUMBER && i > 0 ? head_reach_pt : 0;
        if (wishes[i].least > width + reach ||
            widest_word(layout, layout->table->columns[i].head) > width + reach)
            return true;
    }
    return false;
}

void table_columns(struct table_layout *layout)
{
    const struct table *table = layout->table;
    struct arena *arena = layout->composer->flow.arena;
    layout->columns = arena_array(arena, table->column_count, sizeof *layout->columns);
    struct wish *wishes = arena_array(arena, table->column_count, sizeof *wishes);
    for (size_t i = 0; i < table->column_count; i++)
        wishes[i] = column_wish(layout, i);
    set_gaps(layout);
    share_out(layout, wishes);
    for (size_t i = 0; i < table->column_count && !table->write_in; i++) {
        struct column_layout *column = &layout->columns[i];
        column->beside = true;
        double both = number_width(column);
        column->beside =
            slots_width(&column->second) + column->second_text > 0 && column->width + 2 >= both;
        wishes[i].least = larger(wishes[i].least, column->beside ? both : 0);
    }
    keep_unbroken(layout, wishes);
    settle(layout, wishes);
    layout->composer->crowded |= is_crowded(layout, wishes);
    double x = 0;
    for (size_t i = 0; i < table->column_count; i++) {
        struct column_layout *column = &layout->columns[i];
        column->width = larger(column->width, 4);
        column->edge = x;
        column->x = x + column->gap_left;
        x = column->x + column->width + column->gap_right;
    }
}
