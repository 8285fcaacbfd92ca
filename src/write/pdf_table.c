#include "write/pdf_table.h"

#include <math.h>
#include <string.h>

static const double row_pad_pt = 1.9, grouped_pad_pt = 1.2, group_pad_pt = 3.4,
                    after_group_pad_pt = 0.6, write_in_height_mm = 8.2;
enum { KEPT_ROWS = 12, NEVER_PARTED_ROWS = 6 };

/* ---- rows of boxes */

static void put_box(struct composer *composer, struct strip *strip, const struct row_box *box,
                    const struct row_setting *setting, size_t line, double top)
{
    const struct text_line *text = &box->lines.items[line];
    double x = box->right ? box->x + box->width - text->width : box->x;
    struct point at = {x, top + line_baseline(setting->type.leading, setting->type.size)};
    strip_line(&composer->flow, strip, text, at);
}

static size_t line_limit(const struct composer *composer, const struct row_setting *setting)
{
    const struct page_geometry *page = composer->flow.page;
    double room = (page->bottom - page->top) * 0.7;
    return (size_t)(room / setting->type.leading);
}

/* How much lower fewer lines begin when they stand beside the middle of more. */
static double middle_offset(const struct row_setting *setting, size_t count, size_t lines)
{
    return setting->middle && count < lines ? (double)(lines - count) * setting->type.leading / 2
                                            : 0;
}

struct strip *compose_row(struct composer *composer, const struct row_box *boxes, size_t count,
                          const struct row_setting *setting)
{
    size_t lines = setting->least_lines > 0 ? setting->least_lines : 1;
    for (size_t i = 0; i < count; i++)
        lines = boxes[i].lines.count > lines ? boxes[i].lines.count : lines;
    size_t limit = line_limit(composer, setting);
    struct strip *first = NULL;
    for (size_t from = 0; from < lines; from += limit) {
        size_t to = from + limit < lines ? from + limit : lines;
        double above = from == 0 ? setting->pad_top : 0;
        double below = to == lines ? setting->pad_bottom : 0;
        double height = above + (double)(to - from) * setting->type.leading + below;
        if (height < setting->least_height) {
            above += (setting->least_height - height) / 2;
            height = setting->least_height;
        }
        struct strip *strip = flow_strip(&composer->flow, height);
        first = first ? first : strip;
        for (size_t i = 0; i < count; i++)
            for (size_t line = from; line < to && line < boxes[i].lines.count; line++)
                put_box(composer, strip, &boxes[i], setting, line,
                        above + (double)(line - from) * setting->type.leading +
                            middle_offset(setting, boxes[i].lines.count, lines));
    }
    return first;
}

static struct text_lines caption_lines(struct composer *composer, const char *number,
                                       const char *text, double width)
{
    struct text_runs runs = runs_in(composer);
    text_runs_add(&runs, number, style_of(FACE_SEMIBOLD, type_caption, INK_TEXT));
    if (runs.count > 0)
        text_runs_add(&runs, "  ", style_of(FACE_REGULAR, type_caption, INK_TEXT));
    text_runs_add(&runs, text, style_of(FACE_REGULAR, type_caption, INK_TEXT));
    return text_lines_break(&runs, composer->flow.resources, width);
}

void compose_caption(struct composer *composer, const char *number, const char *text, double width)
{
    struct text_lines lines = caption_lines(composer, number, text, width);
    struct text_setting setting = {0, type_caption.leading, type_caption.size};
    flow_lines(&composer->flow, &lines, &setting);
}

/* The mark of an outcome with its middle at `at`, as large as the look wants it in text. */
static void compose_mark(struct composer *composer, struct strip *strip, enum mark mark,
                         struct point at)
{
    if (mark == MARK_NONE)
        return;
    struct drawing *drawing = &composer->marks[mark];
    if (!drawing->shape_count)
        *drawing = drawing_of_mark(mark, composer->flow.arena);
    struct item item = {.kind = ITEM_DRAWING, .at = at};
    item.drawing.drawing = drawing;
    item.drawing.scale = 0.78 * type_table.size / composer->marks_units;
    strip_item(&composer->flow, strip, &item);
}

/* ---- head */

static struct text_lines head_lines(const struct table_layout *layout, size_t index, bool unit)
{
    const struct column *column = &layout->table->columns[index];
    struct text_runs runs = runs_in(layout->composer);
    if (unit)
        text_runs_add(&runs, column->unit, style_of(FACE_REGULAR, type_unit, INK_SOFT));
    else
        text_runs_add(&runs, column->head, style_of(FACE_SEMIBOLD, type_table, INK_TEXT));
    bool overhangs = column->kind == COLUMN_NUMBER && index > 0;
    return text_lines_break(&runs, layout->composer->flow.resources,
                            layout->columns[index].width + (overhangs ? head_reach_pt + 0.1 : 0.5));
}

static void put_head_line(struct table_layout *layout, struct strip *strip, size_t index,
                          const struct text_line *line, double baseline)
{
    const struct column_layout *column = &layout->columns[index];
    bool right = layout->table->columns[index].kind == COLUMN_NUMBER;
    double x = right ? column->x + column->width - line->width : column->x;
    strip_line(&layout->composer->flow, strip, line, (struct point){x, baseline});
}

/* Heads stand at the bottom of their cells, so they are put in upwards. */
static void put_head(struct table_layout *layout, struct strip *strip, size_t index, double leading)
{
    struct text_lines units = head_lines(layout, index, true);
    struct text_lines heads = head_lines(layout, index, false);
    double bottom = strip->height - 2.8;
    for (size_t i = units.count; i-- > 0; bottom -= type_unit.leading)
        put_head_line(layout, strip, index, &units.items[i],
                      bottom - type_unit.leading +
                          line_baseline(type_unit.leading, type_unit.size));
    for (size_t i = heads.count; i-- > 0; bottom -= leading)
        put_head_line(layout, strip, index, &heads.items[i],
                      bottom - leading + line_baseline(leading, type_table.size));
}

static void put_verticals(struct table_layout *layout, struct strip *strip)
{
    for (size_t i = 0; i < layout->table->column_count; i++) {
        double x = layout->columns[i].edge;
        if (layout->table->columns[i].kind == COLUMN_BLANK)
            strip_rule(&layout->composer->flow, strip, (struct point){x, 0},
                       (struct point){x, strip->height}, rule_hair_pt, INK_HAIR);
    }
}

static void make_head(struct table_layout *layout)
{
    const double leading = type_table.size * 1.3;
    struct flow *flow = &layout->composer->flow;
    double height = 0;
    for (size_t i = 0; i < layout->table->column_count; i++) {
        size_t units = head_lines(layout, i, true).count;
        size_t heads = head_lines(layout, i, false).count;
        double wanted = (double)units * type_unit.leading + (double)heads * leading;
        height = wanted > height ? wanted : height;
    }
    /* a head of words without end must not fill the page that it is repeated on */
    double most = (flow->page->bottom - flow->page->top) / 4;
    height = height > most ? most : height;
    struct strip *head = flow_loose_strip(flow, height > 0 ? height + 5.6 : 0);
    double width = flow->page->text_width;
    strip_rule(flow, head, (struct point){0, 0}, (struct point){width, 0}, rule_heavy_pt, INK_TEXT);
    if (height > 0) {
        for (size_t i = 0; i < layout->table->column_count; i++)
            put_head(layout, head, i, leading);
        strip_rule(flow, head, (struct point){0, head->height}, (struct point){width, head->height},
                   rule_middle_pt, INK_TEXT);
        put_verticals(layout, head);
    }
    layout->head = head;
}

/* ---- cells */

static struct text_style cell_style(enum text_face face, enum ink ink)
{
    return style_of(face, type_table, ink);
}

/* Text with raised note signs, and a second line under it. */
static struct text_runs cell_runs(const struct table_layout *layout, const struct cell *cell,
                                  bool bold, enum ink second_ink)
{
    struct text_runs runs = runs_in(layout->composer);
    enum text_face face = bold ? FACE_SEMIBOLD : FACE_REGULAR;
    text_runs_add(&runs, cell->text, cell_style(face, INK_TEXT));
    if (cell->notes) {
        struct text_style raised = cell_style(face, INK_TEXT);
        raised.size_pt *= 0.7;
        raised.raise_pt = 0.36 * type_table.size;
        /* a thin space, so that copied text does not run "C4" and "2" together */
        text_runs_add(&runs, arena_print(layout->composer->flow.arena, "\u2009%s", cell->notes),
                      raised);
    }
    if (cell->second && *cell->second) {
        if (runs.count > 0)
            runs.items[runs.count - 1].line_end = true;
        text_runs_add(&runs, cell->second, cell_style(FACE_REGULAR, second_ink));
    }
    return runs;
}

static bool is_empty(const struct cell *cell)
{
    return !(cell->text && *cell->text) && !cell->figures.whole && cell->mark == MARK_NONE &&
           !cell->second_figures.whole && !(cell->second && *cell->second);
}

/* Words in a column of numbers run on over empty cells to their right. */
static void box_of_words(const struct table_layout *layout, const struct table_row *row,
                         size_t index, struct row_box *box)
{
    const struct cell *cell = &row->cells[index];
    struct text_runs runs = cell_runs(layout, cell, cell->strong, INK_SOFT);
    const struct column_layout *column = &layout->columns[index];
    box->right = text_runs_width(&runs, layout->composer->flow.resources) <= column->width;
    if (!box->right) {
        size_t last = index;
        while (last + 1 < layout->table->column_count &&
               layout->table->columns[last + 1].kind != COLUMN_BLANK &&
               is_empty(&row->cells[last + 1]))
            last++;
        const struct column_layout *end = &layout->columns[last];
        box->x += after_number_pt;
        box->width = end->x + end->width - box->x;
    }
    box->lines = text_lines_break(&runs, layout->composer->flow.resources, box->width);
}

static struct row_box box_of(const struct table_layout *layout, const struct table_row *row,
                             size_t index)
{
    const struct cell *cell = &row->cells[index];
    const struct column_layout *column = &layout->columns[index];
    const struct pdf_resources *resources = layout->composer->flow.resources;
    struct row_box box = {.x = column->x, .width = column->width};
    struct text_runs runs;
    switch (layout->table->columns[index].kind) {
    case COLUMN_REF:
        runs = cell_runs(layout, cell, true, INK_SOFT);
        box.lines = text_lines_break(&runs, resources, box.width + 0.5);
        break;
    case COLUMN_TEXT:
        runs = cell_runs(layout, cell, cell->strong, INK_SOFT);
        box.lines = text_lines_break(&runs, resources, box.width);
        break;
    case COLUMN_OUTCOME:
        if (cell->mark != MARK_NONE) {
            box.x += 1.18 * type_table.size;
            box.width -= 1.18 * type_table.size;
        }
        runs = cell_runs(layout, cell, cell->strong, INK_TEXT);
        box.lines = text_lines_break(&runs, resources, box.width > 4 ? box.width : 4);
        break;
    case COLUMN_NUMBER:
        if (!cell->figures.whole && cell->text && *cell->text)
            box_of_words(layout, row, index, &box);
        break;
    case COLUMN_BLANK:
        break;
    }
    return box;
}

static bool has_number(const struct table_layout *layout, const struct table_row *row, size_t index)
{
    return layout->table->columns[index].kind == COLUMN_NUMBER && row->cells[index].figures.whole;
}

/* Lines of the number in a cell; 0: there is none. */
static size_t cell_number_lines(const struct table_layout *layout, const struct table_row *row,
                                size_t index)
{
    const struct cell *cell = &row->cells[index];
    if (!has_number(layout, row, index))
        return 0;
    bool second = cell->second_figures.whole || (cell->second && *cell->second);
    return second && !layout->columns[index].beside ? 2 : 1;
}

static size_t number_lines(const struct table_layout *layout, const struct table_row *row)
{
    size_t lines = 0;
    for (size_t i = 0; i < layout->table->column_count; i++) {
        size_t wanted = cell_number_lines(layout, row, i);
        lines = wanted > lines ? wanted : lines;
    }
    return lines;
}

/* How far down the lines of a row begin; they stand in the middle of a write-in row. */
static double first_line_top(const struct row_setting *setting)
{
    double height = setting->pad_top + (double)setting->least_lines * setting->type.leading +
                    setting->pad_bottom;
    double extra = height < setting->least_height ? (setting->least_height - height) / 2 : 0;
    return setting->pad_top + extra;
}

struct number_place {
    double right, baseline;
    struct text_style style;
};

/* One number: its point stands left of the slots for fraction and unit. */
static void put_number(struct table_layout *layout, struct strip *strip,
                       const struct figures *figures, const struct number_slots *slots,
                       const struct number_place *place)
{
    struct flow *flow = &layout->composer->flow;
    const char *whole = number_whole(layout, figures);
    double point = place->right - slots->unit - slots->fraction;
    double x = point - table_text_width(layout, place->style.face, whole);
    const char *fraction = figures->fraction ? figures->fraction : "";
    strip_text(flow, strip, (struct point){x, place->baseline}, place->style,
               *fraction ? arena_print(flow->arena, "%s%s", whole, fraction) : whole);
    if (figures->unit && *figures->unit)
        strip_text(
            flow, strip,
            (struct point){point + slots->fraction + 0.25 * type_table.size, place->baseline},
            place->style, figures->unit);
}

static void put_second(struct table_layout *layout, struct strip *strip, const struct cell *cell,
                       const struct column_layout *column, struct number_place place)
{
    if (cell->second_figures.whole) {
        put_number(layout, strip, &cell->second_figures, &column->second, &place);
    } else if (cell->second && *cell->second) {
        double x = place.right - table_text_width(layout, place.style.face, cell->second);
        strip_text(&layout->composer->flow, strip, (struct point){x, place.baseline}, place.style,
                   cell->second);
    }
}

static void put_numbers(struct table_layout *layout, struct strip *strip,
                        const struct table_row *row, const struct row_setting *setting)
{
    double first = first_line_top(setting) + line_baseline(type_table.leading, type_table.size);
    for (size_t i = 0; i < layout->table->column_count; i++) {
        const struct cell *cell = &row->cells[i];
        const struct column_layout *column = &layout->columns[i];
        if (!has_number(layout, row, i))
            continue;
        double baseline =
            first + middle_offset(setting, cell_number_lines(layout, row, i), setting->least_lines);
        double right = column->x + column->width;
        double second_width = slots_width(&column->second);
        second_width = column->second_text > second_width ? column->second_text : second_width;
        struct number_place place = {
            column->beside ? right - second_width - beside_gap_pt : right, baseline,
            cell_style(cell->strong ? FACE_SEMIBOLD : FACE_REGULAR, INK_TEXT)};
        put_number(layout, strip, &cell->figures, &column->first, &place);
        place.right = right;
        place.style = cell_style(FACE_REGULAR, column->beside ? INK_TEXT : INK_SOFT);
        if (!column->beside)
            place.baseline += type_table.leading;
        put_second(layout, strip, cell, column, place);
    }
}

static void put_marks(struct table_layout *layout, struct strip *strip, const struct table_row *row,
                      double top)
{
    for (size_t i = 0; i < layout->table->column_count; i++) {
        double x = layout->columns[i].x + 0.39 * type_table.size;
        double y =
            top + line_baseline(type_table.leading, type_table.size) - 0.36 * type_table.size;
        if (layout->table->columns[i].kind == COLUMN_OUTCOME)
            compose_mark(layout->composer, strip, row->cells[i].mark, (struct point){x, y});
    }
}

/* ---- rows */

static void compose_cells(struct table_layout *layout, const struct table_row *row,
                          bool after_group)
{
    struct composer *composer = layout->composer;
    const struct table *table = layout->table;
    struct row_box *boxes = arena_array(composer->flow.arena, table->column_count, sizeof *boxes);
    size_t lines = number_lines(layout, row);
    lines = lines > 0 ? lines : 1;
    double pad = table->lined ? row_pad_pt : grouped_pad_pt;
    struct row_setting setting = {
        .type = type_table, .pad_top = after_group ? after_group_pad_pt : pad, .pad_bottom = pad};
    if (table->write_in) {
        setting.pad_top = setting.pad_bottom = 0.5;
        setting.least_height = mm(write_in_height_mm);
        setting.middle = true;
    }
    for (size_t i = 0; i < table->column_count; i++) {
        boxes[i] = box_of(layout, row, i);
        lines = boxes[i].lines.count > lines ? boxes[i].lines.count : lines;
    }
    setting.least_lines = lines;
    size_t first_index = composer->flow.count;
    struct strip *strip = compose_row(composer, boxes, table->column_count, &setting);
    put_numbers(layout, strip, row, &setting);
    put_marks(layout, strip, row, first_line_top(&setting));
    for (size_t i = first_index; i < composer->flow.count; i++)
        put_verticals(layout, composer->flow.strips[i]);
}

/* A strip with a group's words; rarely more than one line. */
static void fill_group(struct table_layout *layout, struct strip *strip, const char *text)
{
    enum { LINES_MAX = 8 };
    struct text_runs runs = runs_in(layout->composer);
    text_runs_add(&runs, text, cell_style(FACE_REGULAR, INK_SOFT));
    struct text_lines lines = text_lines_break(&runs, layout->composer->flow.resources,
                                               layout->composer->flow.page->text_width);
    double y = group_pad_pt;
    for (size_t i = 0; i < lines.count && i < LINES_MAX; i++, y += type_table.leading)
        strip_line(&layout->composer->flow, strip, &lines.items[i],
                   (struct point){0, y + line_baseline(type_table.leading, type_table.size)});
    strip->height = y + 0.5;
}

static void compose_group(struct table_layout *layout, const struct table_row *row, bool first)
{
    struct flow *flow = &layout->composer->flow;
    const char *text = row->cells[0].text ? row->cells[0].text : "";
    flow->continued = NULL;
    struct strip *strip = flow_strip(flow, 0);
    strip->top_rule = !first;
    fill_group(layout, strip, text);
    const char *word = layout->composer->document->continued;
    struct strip *continued = flow_loose_strip(flow, 0);
    fill_group(layout, continued, arena_print(flow->arena, "%s %s", text, word ? word : ""));
    flow->continued = continued;
}

static void compose_rows(struct table_layout *layout)
{
    const struct table *table = layout->table;
    struct flow *flow = &layout->composer->flow;
    bool after_group = false;
    flow->head = layout->head;
    for (size_t i = 0; i < table->row_count; i++) {
        const struct table_row *row = &table->rows[i];
        size_t first = flow->count;
        if (row->group) {
            compose_group(layout, row, i == 0);
            flow->strips[first]->keep_next = true;
        } else {
            compose_cells(layout, row, after_group);
            flow->strips[first]->top_rule =
                i > 0 && !after_group && (table->lined || table->write_in);
        }
        after_group = row->group;
    }
    flow->head = flow->continued = NULL;
}

static void compose_notes(struct table_layout *layout)
{
    const struct table *table = layout->table;
    struct composer *composer = layout->composer;
    struct text_runs runs = runs_in(composer);
    struct text_style style = style_of(FACE_REGULAR, type_note, INK_SOFT);
    struct text_style raised = style;
    raised.size_pt *= 0.7;
    raised.raise_pt = 0.36 * style.size_pt;
    for (size_t i = 0; i < table->note_count; i++) {
        text_runs_add(&runs, arena_print(composer->flow.arena, "%zu", i + 1), raised);
        text_runs_add(&runs, "\u00A0", style);
        text_runs_add(&runs, table->notes[i], style);
        text_runs_add(&runs, " ", style);
    }
    text_runs_add(&runs, table->remark, style);
    struct text_lines lines =
        text_lines_break(&runs, composer->flow.resources, composer->flow.page->text_width);
    if (lines.count > 0)
        flow_space(&composer->flow, mm(1.5));
    struct text_setting setting = {0, type_note.leading, type_note.size};
    flow_lines(&composer->flow, &lines, &setting);
}

static size_t plain_rows(const struct table *table)
{
    size_t count = 0;
    for (size_t i = 0; i < table->row_count; i++)
        count += !table->rows[i].group;
    return count;
}

/* The strips of a table: its first, the head, the last row. */
struct table_strips {
    size_t first, head, last;
};

/*
 * Short tables stay whole; of long ones the head with two rows, and the last two with the notes. A
 * bench sheet rather has all its rows on one page, and the notes on the next.
 */
static void keep_rows(struct flow *flow, const struct table *table,
                      const struct table_strips *strips)
{
    bool whole = plain_rows(table) <= KEPT_ROWS;
    size_t end = whole ? strips->last : strips->head + 2;
    for (size_t i = strips->first; i < strips->last && i <= end; i++) {
        flow->strips[i]->keep_next = true;
        flow->strips[i]->may_part = whole && plain_rows(table) > NEVER_PARTED_ROWS &&
                                    i > strips->head + 1 && i + 2 < strips->last;
    }
    if (strips->last > strips->head + 1)
        flow->strips[strips->last - 1]->keep_next = true;
    if (strips->last + 1 < flow->count && !table->write_in)
        flow->strips[strips->last]->keep_next = true;
}

void compose_table(struct composer *composer, const char *number, const struct table *table)
{
    struct flow *flow = &composer->flow;
    struct table_layout layout = {.composer = composer, .table = table};
    if (table->column_count == 0)
        return;
    double around = mm(composer->document->kind == DOCUMENT_SHEET ? 2.4 : 3.6);
    flow_space(flow, around);
    size_t first = flow->count;
    compose_caption(composer, number, table->caption, flow->page->text_width);
    if (flow->count > first)
        flow_space(flow, mm(1.2));
    table_columns(&layout);
    make_head(&layout);
    size_t head = flow->count;
    struct strip *strip = flow_strip(flow, layout.head->height);
    strip_overlay(flow, strip, layout.head, (struct point){0, 0});
    compose_rows(&layout);
    size_t last = flow->count - 1;
    strip = flow->strips[last];
    strip_rule(flow, strip, (struct point){0, strip->height},
               (struct point){flow->page->text_width, strip->height}, rule_heavy_pt, INK_TEXT);
    compose_notes(&layout);
    keep_rows(flow, table, &(struct table_strips){first, head, last});
    flow_space(flow, around);
}
