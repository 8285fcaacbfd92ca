/* Tables on a terminal: columns where they fit, what does not fit on a second line. */
#include "write/terminal_parts.h"

#include "write/table_text.h"
#include "write/text_width.h"

#include <string.h>

enum { GAP = 2, BELOW_INDENT = 6, BLANK_WIDTH = 8 };

/* Where a column's cells stand. */
enum standing {
    SIDE_BY_SIDE,
    BELOW,   /* run on in a second line */
    LEFT_OUT /* blanks to write in: a terminal cannot be written on */
};

struct layout {
    struct terminal *terminal;
    struct table_text text;
    enum standing *places;
    const char **heads; /* head_lines lines of a head for each column, one line when all fits */
    size_t head_lines;
};

enum { HEAD_LINES_MAX = 4 };

static bool stands_inline(const struct layout *layout, size_t column)
{
    return layout->places[column] == SIDE_BY_SIDE;
}

static size_t width_of(const struct layout *layout, size_t column)
{
    bool blank = layout->text.table->columns[column].kind == COLUMN_BLANK;
    size_t width = layout->text.widths[column];
    return blank && width < BLANK_WIDTH ? BLANK_WIDTH : width;
}

static size_t inline_width(const struct layout *layout)
{
    size_t sum = 0;
    for (size_t i = 0; i < layout->text.table->column_count; i++)
        if (stands_inline(layout, i) && width_of(layout, i) > 0)
            sum += width_of(layout, i) + GAP;
    return sum > GAP ? sum - GAP : 0;
}

/* Blanks first, then the third rank, then the second, from the right, until the rest fits. */
static void make_room(struct layout *layout)
{
    const struct column *columns = layout->text.table->columns;
    for (unsigned pass = 4; pass >= 2; pass--)
        for (size_t i = layout->text.table->column_count; i-- > 1;) {
            if (inline_width(layout) <= layout->terminal->columns)
                return;
            bool blank = columns[i].kind == COLUMN_BLANK;
            if (pass == 4 && blank)
                layout->places[i] = LEFT_OUT;
            else if (!blank && columns[i].rank == pass)
                layout->places[i] = BELOW;
        }
}

static size_t cells_width(const struct layout *layout, size_t column)
{
    const struct table *table = layout->text.table;
    size_t widest = 0;
    for (size_t i = 0; i < table->row_count; i++) {
        const char *text = table_text_cell(&layout->text, i, column);
        bool runs_on = table->rows[i].group || table_text_runs_on(table, i, column);
        size_t width = runs_on ? 0 : text_columns(text, strlen(text));
        widest = width > widest ? width : widest;
    }
    return widest;
}

static size_t widest_word(const char *text)
{
    size_t widest = 0;
    while (*text) {
        size_t length = strcspn(text, " "), width = text_columns(text, length);
        widest = width > widest ? width : widest;
        text += length + strspn(text + length, " ");
    }
    return widest;
}

/* How much of the text makes a line of that width: whole words, one at the least. */
static size_t line_length(const char *text, size_t width)
{
    size_t length = strcspn(text, " ");
    for (;;) {
        size_t next = length + strspn(text + length, " ");
        next += strcspn(text + next, " ");
        if (next == length || text_columns(text, next) > width)
            return length;
        length = next;
    }
}

/* The lines of a head of that width, the last in the last place. */
static void fold_head(struct layout *layout, size_t column, size_t width)
{
    const char *text = layout->text.heads[column], *lines[HEAD_LINES_MAX] = {0};
    size_t count = 0;
    for (; *text && count < HEAD_LINES_MAX; count++) {
        size_t length = count + 1 < HEAD_LINES_MAX ? line_length(text, width) : strlen(text);
        lines[count] = arena_text(&layout->terminal->scratch, text, length);
        text += length + strspn(text + length, " ");
    }
    const char **place = layout->heads + column * HEAD_LINES_MAX;
    for (size_t i = 0; i < HEAD_LINES_MAX; i++)
        place[i] = i + count < HEAD_LINES_MAX ? "" : lines[i + count - HEAD_LINES_MAX];
    layout->head_lines = count > layout->head_lines ? count : layout->head_lines;
}

static size_t folded_width(const struct layout *layout, size_t column)
{
    size_t cells = cells_width(layout, column);
    size_t word = widest_word(layout->text.heads[column]);
    return cells > word ? cells : word;
}

/* While the table is too wide, the head that stands out furthest takes several lines. */
static void narrow_heads(struct layout *layout)
{
    while (inline_width(layout) > layout->terminal->columns) {
        size_t furthest = 0, gained = 0;
        for (size_t i = 0; i < layout->text.table->column_count; i++) {
            size_t gain = layout->text.widths[i] - folded_width(layout, i);
            if (stands_inline(layout, i) && gain > gained) {
                furthest = i;
                gained = gain;
            }
        }
        if (gained == 0)
            return;
        layout->text.widths[furthest] -= gained;
    }
}

static void fold_heads(struct layout *layout)
{
    size_t columns = layout->text.table->column_count;
    layout->heads =
        arena_array(&layout->terminal->scratch, columns * HEAD_LINES_MAX, sizeof *layout->heads);
    for (size_t i = 0; i < columns; i++)
        fold_head(layout, i, layout->text.widths[i]);
}

/* The widest column of words or numbers that stands beside others; 0: none. */
static size_t widest_column(const struct layout *layout)
{
    const struct table *table = layout->text.table;
    size_t widest = 0;
    for (size_t i = 1; i < table->column_count; i++) {
        enum column_kind kind = table->columns[i].kind;
        if (stands_inline(layout, i) && (kind == COLUMN_TEXT || kind == COLUMN_NUMBER) &&
            (widest == 0 || width_of(layout, i) > width_of(layout, widest)))
            widest = i;
    }
    return widest;
}

/* When all that is not enough: the widest column goes below, then the next. */
static void make_more_room(struct layout *layout)
{
    while (inline_width(layout) > layout->terminal->columns) {
        size_t widest = widest_column(layout);
        if (widest == 0)
            return;
        layout->places[widest] = BELOW;
    }
}

static size_t trimmed(const char *text)
{
    size_t length = strlen(text);
    while (length > 0 && text[length - 1] == ' ')
        length--;
    return length;
}

static void write_field(const struct layout *layout, size_t column, const char *text, bool strong,
                        bool last)
{
    struct terminal *terminal = layout->terminal;
    size_t width = width_of(layout, column), used = text_columns(text, strlen(text));
    size_t rest = width > used ? width - used : 0;
    bool right = layout->text.aligned_right[column];
    if (width == 0)
        return;
    if (right)
        terminal_spaces(terminal, rest);
    if (last)
        text = arena_text(&terminal->scratch, text, trimmed(text));
    if (strong)
        terminal_bold(terminal, text);
    else
        terminal_text(terminal, text);
    if (!last)
        terminal_spaces(terminal, GAP + (right ? 0 : rest));
}

/* Whether nothing but empty cells follows in the line. */
static bool is_last(const struct layout *layout, size_t row, size_t column)
{
    const struct table *table = layout->text.table;
    for (size_t i = column + 1; i < table->column_count; i++)
        if (stands_inline(layout, i) && table_text_cell(&layout->text, row, i)[0])
            return false;
    return true;
}

static const char *head_line(const struct layout *layout, size_t column, size_t line)
{
    return layout->heads[column * HEAD_LINES_MAX + line];
}

static bool is_last_head(const struct layout *layout, size_t line, size_t column)
{
    for (size_t i = column + 1; i < layout->text.table->column_count; i++)
        if (stands_inline(layout, i) && head_line(layout, i, line)[0])
            return false;
    return true;
}

static void write_head_line(const struct layout *layout, size_t line)
{
    for (size_t i = 0; i < layout->text.table->column_count; i++) {
        bool last = is_last_head(layout, line, i);
        if (stands_inline(layout, i))
            write_field(layout, i, head_line(layout, i, line), true, last);
        if (last)
            break;
    }
    buffer_byte(layout->terminal->out, '\n');
}

static void write_head(const struct layout *layout)
{
    for (size_t i = HEAD_LINES_MAX - layout->head_lines; i < HEAD_LINES_MAX; i++)
        write_head_line(layout, i);
}

static void append_below(struct buffer *line, const char *label, const char *text)
{
    buffer_text(line, line->length ? "; " : "");
    buffer_text(line, label ? label : "");
    buffer_text(line, label ? " " : "");
    buffer_append(line, text, trimmed(text));
}

/* "not lifted; tested at 100 V; output grid +2.4 V; restuffed" */
static void write_below(const struct layout *layout, size_t row)
{
    struct buffer line = {0};
    const struct table *table = layout->text.table;
    for (size_t i = 0; i < table->column_count; i++)
        if (table->columns[i].kind == COLUMN_OUTCOME && table->rows[row].cells[i].second)
            append_below(&line, NULL, table->rows[row].cells[i].second);
    for (size_t i = 0; i < table->column_count; i++) {
        const char *text = table_text_cell(&layout->text, row, i);
        if (layout->places[i] == BELOW && text[0])
            append_below(&line, table->columns[i].label, text);
    }
    if (line.length)
        terminal_wrapped(layout->terminal, buffer_string(&line),
                         (struct indent){BELOW_INDENT, BELOW_INDENT});
    buffer_release(&line);
}

static void write_row(const struct layout *layout, size_t row)
{
    const struct table *table = layout->text.table;
    for (size_t i = 0; i < table->column_count; i++) {
        bool last = is_last(layout, row, i);
        const struct cell *cell = &table->rows[row].cells[i];
        if (stands_inline(layout, i))
            write_field(layout, i, table_text_cell(&layout->text, row, i),
                        cell->strong || table->columns[i].kind == COLUMN_REF, last);
        if (last)
            break;
    }
    buffer_byte(layout->terminal->out, '\n');
    write_below(layout, row);
}

static const char *label_of(const struct layout *layout, size_t column)
{
    const struct column *here = &layout->text.table->columns[column];
    return here->label ? here->label : here->head;
}

static size_t widest_label(const struct layout *layout)
{
    size_t widest = 0;
    for (size_t i = 1; i < layout->text.table->column_count; i++) {
        const char *label = label_of(layout, i);
        size_t width = text_columns(label, strlen(label));
        widest = width > widest ? width : widest;
    }
    return widest;
}

/* Every cell a labelled line, the ref before the first: for tables of text too wide for columns. */
static void write_text_row(const struct layout *layout, size_t row)
{
    struct terminal *terminal = layout->terminal;
    size_t ref_width = layout->text.widths[0] + GAP, label_width = widest_label(layout) + 1;
    const char *ref = table_text_cell(&layout->text, row, 0);
    for (size_t i = 1; i < layout->text.table->column_count; i++) {
        const char *text = table_text_cell(&layout->text, row, i);
        if (!text[0])
            continue;
        size_t used = terminal_bold(terminal, ref);
        terminal_spaces(terminal, ref_width - used);
        terminal_field(terminal, label_of(layout, i), label_width);
        size_t at = ref_width + label_width;
        terminal_continued(terminal, text, (struct indent){at, at});
        ref = "";
    }
    if (ref[0]) { /* nothing is known of it */
        terminal_bold(terminal, ref);
        buffer_byte(terminal->out, '\n');
    }
}

void terminal_table(struct terminal *terminal, const struct table *table)
{
    static const struct table_text_style style = {escape_terminal, "", "", true};
    struct layout layout = {
        .terminal = terminal,
        .text = table_text_of(table, &style, &terminal->scratch),
        .places = arena_array(&terminal->scratch, table->column_count, sizeof(enum standing))};
    bool lines = table->text_only && inline_width(&layout) > terminal->columns;
    make_room(&layout);
    narrow_heads(&layout);
    make_more_room(&layout);
    fold_heads(&layout);
    if (!lines)
        write_head(&layout);
    for (size_t i = 0; i < table->row_count; i++) {
        if (table->rows[i].group)
            terminal_wrapped(terminal, table_text_cell(&layout.text, i, 0), (struct indent){0, 2});
        else if (lines)
            write_text_row(&layout, i);
        else
            write_row(&layout, i);
    }
}
