/* Figures on a terminal: only where letters make a picture that can be read. */
#include "write/terminal_parts.h"

#include "write/text_width.h"

#include <math.h>
#include <string.h>

enum { DECADE = 8, LOWEST = -3, DECADES = 5, SCALE = DECADE * DECADES + 1, PLACE = 15 };

static char mark_letter(enum mark mark)
{
    switch (mark) {
    case MARK_NONE:
        return ' ';
    case MARK_PASS:
    case MARK_CONDITIONAL_PASS:
        return 'o';
    case MARK_NOT_JUDGED:
        return '-';
    case MARK_CONDITIONAL_FAIL:
    case MARK_FAIL:
        return '#';
    }
    return ' ';
}

static size_t scale_column(double ratio)
{
    double column = ratio > 0 ? round((log10(ratio) - LOWEST) * DECADE) : 0;
    return (size_t)fmin(fmax(column, 0), SCALE - 1);
}

static void draw_scale(char *line, const struct glance_row *row)
{
    memset(line, ' ', SCALE);
    line[SCALE] = '\0';
    line[scale_column(1)] = '|';
    if (isnan(row->ratio))
        return;
    size_t at = scale_column(row->ratio);
    if (!isnan(row->found_ratio)) {
        size_t found = scale_column(row->found_ratio);
        for (size_t i = at < found ? at : found; i <= (at < found ? found : at); i++)
            line[i] = line[i] == '|' ? '|' : '.';
        line[found] = '-';
    }
    line[at] = mark_letter(row->mark);
    if (row->at_most && at > 0)
        line[at - 1] = '<';
    if (row->at_least && at + 1 < SCALE)
        line[at + 1] = '>';
}

/* "1/1000  1/100   1/10    limit   10 ×    100 ×", each label from its decade on. */
static void write_scale_head(struct terminal *terminal, const struct glance *glance, size_t before)
{
    const char *const labels[] = {"1/1000", "1/100", "1/10", glance->limit_word, "10 ", "100 "};
    terminal_spaces(terminal, before);
    for (size_t i = 0; i < sizeof labels / sizeof labels[0]; i++) {
        const char *text =
            i < 4 ? labels[i]
                  : arena_print(&terminal->scratch, "%s%s", labels[i], glance->times_sign);
        bool last = i + 1 == sizeof labels / sizeof labels[0];
        size_t width = text_columns(text, strlen(text));
        if (last)
            terminal_text(terminal, text);
        else
            terminal_field(terminal, text, width > DECADE - 1 ? width + 1 : DECADE);
    }
    buffer_byte(terminal->out, '\n');
}

static size_t widest_ref(const struct glance *glance)
{
    size_t width = 4;
    for (size_t i = 0; i < glance->row_count; i++) {
        size_t here = text_columns(glance->rows[i].ref, strlen(glance->rows[i].ref));
        width = here > width ? here : width;
    }
    return width;
}

static void write_glance_row(struct terminal *terminal, const struct glance *glance, size_t index,
                             size_t ref_width)
{
    const struct glance_row *row = &glance->rows[index];
    char scale[SCALE + 1];
    draw_scale(scale, row);
    terminal_field(terminal, row->ref, ref_width + 1);
    buffer_text(terminal->out, scale);
    buffer_byte(terminal->out, ' ');
    size_t used;
    if (row->strong)
        used = terminal_bold(terminal, row->outcome_narrow);
    else
        used = terminal_text(terminal, row->outcome_narrow);
    size_t left = ref_width + 2 + SCALE + 17;
    if (left + PLACE <= terminal->columns + 1) {
        terminal_spaces(terminal, used < 17 ? 17 - used : 1);
        terminal_text(terminal, row->place);
    }
    buffer_byte(terminal->out, '\n');
}

static void write_glance(struct terminal *terminal, const struct glance *glance)
{
    size_t ref_width = widest_ref(glance);
    write_scale_head(terminal, glance, ref_width + 1);
    for (size_t i = 0; i < glance->row_count; i++)
        write_glance_row(terminal, glance, i, ref_width);
}

static void write_shares(struct terminal *terminal, const struct shares *shares)
{
    size_t label = 0, counts[3] = {0};
    for (size_t i = 0; i < shares->row_count; i++) {
        size_t width = text_columns(shares->rows[i].label, strlen(shares->rows[i].label));
        label = width > label ? width : label;
    }
    for (int column = 0; column < 3; column++) {
        const char *head = shares->count_heads[column] ? shares->count_heads[column] : "";
        counts[column] = text_columns(head, strlen(head));
        for (size_t i = 0; i < shares->row_count; i++) {
            const char *text = shares->rows[i].counts[column];
            size_t width = text ? text_columns(text, strlen(text)) : 0;
            counts[column] = width > counts[column] ? width : counts[column];
        }
    }
    for (size_t i = 0; i <= shares->row_count; i++) {
        const struct share_row *row = i > 0 ? &shares->rows[i - 1] : NULL;
        terminal_field(terminal, row ? row->label : "", label);
        for (int column = 0; column < 3; column++) {
            const char *text = row ? row->counts[column] : shares->count_heads[column];
            size_t width = text ? text_columns(text, strlen(text)) : 0;
            terminal_spaces(terminal, 2 + counts[column] - width);
            terminal_text(terminal, text);
        }
        buffer_byte(terminal->out, '\n');
    }
}

void terminal_plot(struct terminal *terminal, const struct exhibit *exhibit)
{
    const struct plot *plot = &exhibit->plot;
    switch (plot->kind) {
    case PLOT_GLANCE:
        terminal_caption(terminal, exhibit, plot->glance.axis_text);
        write_glance(terminal, &plot->glance);
        break;
    case PLOT_SHARES:
        terminal_caption(terminal, exhibit, plot->title);
        write_shares(terminal, &plot->shares);
        break;
    case PLOT_CURVES: /* letters would not show a curve: its numbers do */
        if (plot->numbers) {
            terminal_caption(terminal, exhibit, plot->title);
            terminal_table(terminal, plot->numbers);
        }
        break;
    }
}

static const char stroke_letters[STROKE_COUNT] = {'|', '\'', 'o', '.'};

static void write_strokes(struct terminal *terminal, const struct headline_kind *kind, size_t room)
{
    size_t all = 0;
    for (int stroke = 0; stroke < STROKE_COUNT; stroke++)
        all += kind->strokes[stroke];
    if (all == 0 || all > room)
        return;
    buffer_text(terminal->out, "  ");
    for (int stroke = 0; stroke < STROKE_COUNT; stroke++)
        for (unsigned i = 0; i < kind->strokes[stroke]; i++)
            buffer_byte(terminal->out, stroke_letters[stroke]);
}

static void write_kinds(struct terminal *terminal, const struct headline *headline)
{
    size_t labels = 0, counts = 0;
    for (size_t i = 0; i < headline->kind_count; i++) {
        const struct headline_kind *kind = &headline->kinds[i];
        size_t label = text_columns(kind->label, strlen(kind->label)),
               count = text_columns(kind->count_text, strlen(kind->count_text));
        labels = label > labels ? label : labels;
        counts = count > counts ? count : counts;
    }
    size_t used = labels + 2 + counts + 2;
    for (size_t i = 0; i < headline->kind_count; i++) {
        const struct headline_kind *kind = &headline->kinds[i];
        terminal_field(terminal, kind->label, labels + 2);
        terminal_field(terminal, kind->count_text, counts);
        write_strokes(terminal, kind, terminal->columns > used ? terminal->columns - used : 0);
        buffer_byte(terminal->out, '\n');
    }
}

void terminal_headline(struct terminal *terminal, const struct headline *headline)
{
    const char *count = arena_print(&terminal->scratch, "%s: %s %s", headline->heading,
                                    headline->kept, headline->of);
    terminal_bold(terminal, count);
    if (headline->qualifier) {
        buffer_byte(terminal->out, ' ');
        terminal_text(terminal, headline->qualifier);
    }
    buffer_byte(terminal->out, '\n');
    for (size_t i = 0; i < headline->line_count; i++) {
        const struct headline_line *line = &headline->lines[i];
        const char *text =
            arena_print(&terminal->scratch, "%c %s", stroke_letters[line->stroke], line->text);
        terminal_wrapped(terminal, text, (struct indent){0, 2});
    }
    write_kinds(terminal, headline);
    terminal_wrapped(terminal, headline->below, (struct indent){0, 0});
}
