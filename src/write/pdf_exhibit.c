#include "write/pdf_layout.h"

#include <math.h>
#include <string.h>

static const double figure_text_pt = 370; /* 40 rem of 9.25 pt: captions of figures */

static double block_width(const struct composer *composer)
{
    return composer->flow.page->text_width;
}

static double smaller(double a, double b)
{
    return a < b ? a : b;
}

static struct text_lines lines_of(struct composer *composer, const char *text,
                                  struct text_style style, double width)
{
    struct text_runs runs = runs_in(composer);
    text_runs_add(&runs, text, style);
    return text_lines_break(&runs, composer->flow.resources, width);
}

static double text_width(const struct composer *composer, const char *text, struct text_style style)
{
    return (double)pdf_text_width(composer->flow.resources, style.face, text, strlen(text)) *
           style.size_pt / 1000;
}

/* ---- title, facts */

/* Two texts of a letterhead as one box of lines. */
static struct row_box letterhead_box(struct composer *composer, const char *first,
                                     const char *second, enum text_face first_face, double width)
{
    static const struct type_size type = {8, 11};
    struct text_runs runs = runs_in(composer);
    text_runs_add(&runs, first,
                  style_of(first_face, type, first_face == FACE_REGULAR ? INK_SOFT : INK_TEXT));
    if (runs.count > 0)
        runs.items[runs.count - 1].line_end = true;
    text_runs_add(&runs, second, style_of(FACE_REGULAR, type, INK_SOFT));
    return (struct row_box){.lines = text_lines_break(&runs, composer->flow.resources, width),
                            .width = width};
}

static double picture_width(const struct plate_picture *picture, double height)
{
    double ratio = picture->height_px ? (double)picture->width_px / picture->height_px : 1.5;
    return height * ratio;
}

static void put_picture(struct composer *composer, struct strip *strip,
                        const struct plate_picture *picture, struct point at, double height)
{
    if (!picture->picture)
        return;
    struct item item = {.kind = ITEM_IMAGE, .at = at};
    item.image.picture = picture->picture;
    item.image.width = picture_width(picture, height);
    item.image.height = height;
    strip_item(&composer->flow, strip, &item);
}

static void compose_letterhead(struct composer *composer, const struct title_block *title)
{
    double block = block_width(composer);
    double logo = 0, logo_height = mm(11);
    const struct plate_picture *picture = title->logo && title->logo->picture ? title->logo : NULL;
    if (picture) {
        logo = smaller(picture_width(picture, logo_height), block / 4);
        logo_height = logo / picture_width(picture, 1);
    }
    double indent = logo > 0 ? logo + mm(4) : 0;
    struct row_box boxes[2] = {
        letterhead_box(composer, title->shop_name, title->shop_trade, FACE_SEMIBOLD,
                       block * 0.58 - indent),
        letterhead_box(composer, title->shop_address, title->shop_contact, FACE_REGULAR,
                       block * 0.38),
    };
    boxes[0].x = indent;
    boxes[1].x = block * 0.62;
    boxes[1].right = true;
    if (boxes[0].lines.count + boxes[1].lines.count == 0 && logo <= 0)
        return;
    struct row_setting setting = {.type = {8, 11}, .least_height = logo > 0 ? logo_height : 0};
    struct strip *strip = compose_row(composer, boxes, 2, &setting);
    if (picture)
        put_picture(composer, strip, picture, (struct point){0, 0}, logo_height);
}

static void compose_title(struct composer *composer, const struct title_block *title)
{
    bool sheet = composer->document->kind == DOCUMENT_SHEET;
    struct type_size large = sheet ? (struct type_size){14, 17} : (struct type_size){20, 24};
    struct type_size small = sheet ? type_facts : (struct type_size){9.8, 14.5};
    struct flow *flow = &composer->flow;
    size_t first = flow->count;
    compose_letterhead(composer, title);
    if (flow->count > first)
        flow_space(flow, mm(sheet ? 2.6 : 7));
    struct text_lines lines = lines_of(
        composer, title->title, style_of(FACE_SEMIBOLD, large, INK_TEXT), block_width(composer));
    struct text_setting setting = {0, large.leading, large.size};
    flow_lines(flow, &lines, &setting);
    flow_space(flow, 2.3);
    lines = lines_of(composer, title->subtitle, style_of(FACE_REGULAR, small, INK_SOFT),
                     sheet ? block_width(composer) : composer->measure);
    setting = (struct text_setting){0, small.leading, small.size};
    flow_lines(flow, &lines, &setting);
    flow_space(flow, mm(sheet ? 2 : 4));
    if (flow->count - first <= 12)
        flow_keep(flow, first);
}

static void fact_boxes(struct composer *composer, const struct fact *fact, double x,
                       struct row_box *boxes)
{
    const double label = mm(22), half = block_width(composer) / 2;
    boxes[0] = (struct row_box){.x = x, .width = label};
    boxes[0].lines =
        lines_of(composer, fact->label, style_of(FACE_REGULAR, type_facts, INK_SOFT), label);
    double text_x = x + mm(24.5);
    boxes[1] = (struct row_box){.x = text_x, .width = half - mm(24.5) - mm(4)};
    boxes[1].lines = lines_of(composer, fact->text, style_of(FACE_REGULAR, type_facts, INK_TEXT),
                              boxes[1].width);
}

static void compose_facts(struct composer *composer, const struct facts *facts)
{
    struct flow *flow = &composer->flow;
    double block = block_width(composer), half = block / 2 + mm(1.7);
    size_t rows = facts->left_count > facts->right_count ? facts->left_count : facts->right_count;
    size_t first = flow->count;
    for (size_t i = 0; i < rows; i++) {
        struct row_box boxes[4] = {{.x = 0}};
        if (i < facts->left_count)
            fact_boxes(composer, &facts->left[i], 0, boxes);
        if (i < facts->right_count)
            fact_boxes(composer, &facts->right[i], half, boxes + 2);
        struct row_setting setting = {.type = type_facts,
                                      .pad_top = i == 0 ? 6 : 1.3,
                                      .pad_bottom = i + 1 == rows ? 5.5 : 1.3};
        compose_row(composer, boxes, 4, &setting);
    }
    if (flow->count == first)
        return;
    struct strip *top = flow->strips[first], *bottom = flow->strips[flow->count - 1];
    strip_rule(flow, top, (struct point){0, 0}, (struct point){block, 0}, rule_heavy_pt, INK_TEXT);
    strip_rule(flow, bottom, (struct point){0, bottom->height},
               (struct point){block, bottom->height}, rule_hair_pt, INK_HAIR);
    if (rows <= 12)
        flow_keep(flow, first);
    flow_space(flow, mm(5.7));
}

/* ---- headline */

static const struct type_size type_headline = {7.5, 10.9}, type_count = {20, 25};

/* The count, "of 50" soft beside it. */
static void headline_count(struct composer *composer, struct strip *strip,
                           const struct headline *headline, double top)
{
    struct text_runs runs = runs_in(composer);
    text_runs_add(&runs, headline->kept, style_of(FACE_REGULAR, type_count, INK_TEXT));
    text_runs_add(&runs, " ", style_of(FACE_REGULAR, type_count, INK_TEXT));
    text_runs_add(&runs, headline->of, style_of(FACE_REGULAR, type_count, INK_SOFT));
    struct text_lines lines = text_lines_break(&runs, composer->flow.resources, mm(52));
    if (lines.count > 0)
        strip_line(&composer->flow, strip, &lines.items[0],
                   (struct point){0, top + line_baseline(type_count.leading, type_count.size)});
}

/* Lines of text one below the other; the answer is where they end. */
static double stack_lines(struct composer *composer, struct strip *strip,
                          const struct text_lines *lines, struct point at, struct type_size type)
{
    for (size_t i = 0; i < lines->count; i++, at.y += type.leading)
        strip_line(&composer->flow, strip, &lines->items[i],
                   (struct point){at.x, at.y + line_baseline(type.leading, type.size)});
    return at.y;
}

static double headline_left(struct composer *composer, struct strip *strip,
                            const struct headline *headline, double width)
{
    const double stroke_scale = 9.7 / 18.5; /* the stroke is as high as the text */
    struct text_style heading = style_of(FACE_SEMIBOLD, type_body, INK_TEXT);
    struct text_lines lines = lines_of(composer, headline->heading, heading, width);
    double y = stack_lines(composer, strip, &lines, (struct point){0, 0}, type_body);
    headline_count(composer, strip, headline, y + 0.5);
    y += 0.5 + type_count.leading;
    struct text_style style = style_of(FACE_REGULAR, type_headline, INK_TEXT);
    if (headline->qualifier) {
        lines = lines_of(composer, headline->qualifier,
                         style_of(FACE_REGULAR, type_headline, INK_SOFT), width);
        y = stack_lines(composer, strip, &lines, (struct point){0, y}, type_headline);
    }
    y += 3;
    for (size_t i = 0; i < headline->line_count; i++) {
        struct drawing *stroke = arena_get(composer->flow.arena, sizeof *stroke);
        *stroke = drawing_of_stroke(headline->lines[i].stroke, composer->flow.arena);
        struct item item = {.kind = ITEM_DRAWING, .at = {0, y + 0.6}};
        item.drawing.drawing = stroke;
        item.drawing.scale = stroke_scale;
        strip_item(&composer->flow, strip, &item);
        lines = lines_of(composer, headline->lines[i].text, style, width - 9);
        y = stack_lines(composer, strip, &lines, (struct point){9, y}, type_headline);
    }
    return y;
}

static double headline_right(struct composer *composer, struct strip *strip,
                             const struct headline *headline, double x)
{
    const double units = 480;
    double width = block_width(composer) - x;
    struct drawing *rows = arena_get(composer->flow.arena, sizeof *rows);
    *rows = drawing_of_headline(headline, units, composer->flow.arena);
    struct item item = {.kind = ITEM_DRAWING, .at = {x, 0}};
    item.drawing.drawing = rows;
    item.drawing.scale = width / units;
    strip_item(&composer->flow, strip, &item);
    double y = rows->height * item.drawing.scale + 5;
    struct text_lines lines =
        lines_of(composer, headline->below, style_of(FACE_REGULAR, type_headline, INK_SOFT), width);
    return stack_lines(composer, strip, &lines, (struct point){x, y}, type_headline);
}

static void compose_headline(struct composer *composer, const struct headline *headline)
{
    struct flow *flow = &composer->flow;
    flow_space(flow, mm(5.7));
    struct strip *strip = flow_strip(flow, 0);
    double left = headline_left(composer, strip, headline, mm(45));
    double right = headline_right(composer, strip, headline, mm(49));
    strip->height = left > right ? left : right;
    flow_space(flow, mm(5));
}

/* ---- plots and plates */

/* Height of the heading and the introduction that stay with what comes next. */
static double kept_height(const struct flow *flow)
{
    double height = 0;
    for (size_t i = flow->count; i > 0 && flow->strips[i - 1]->keep_next; i--)
        height += flow->strips[i - 1]->height + flow->strips[i - 1]->before;
    return height;
}

static void compose_plot(struct composer *composer, const char *number, const struct plot *plot)
{
    const double units = 720;
    const double least_scale = 0.83 * mm(168) / units; /* its text then is 6.3 pt */
    struct flow *flow = &composer->flow;
    struct drawing *drawing = arena_get(flow->arena, sizeof *drawing);
    *drawing = drawing_of_plot(plot, units, flow->arena);
    double scale = block_width(composer) / units;
    double room =
        flow->page->bottom - flow->page->top - kept_height(flow) - 4 * type_caption.leading - mm(6);
    if (drawing->height * scale > room)
        scale = room / drawing->height;
    flow_space(flow, mm(4));
    struct strip *strip = flow_strip(flow, drawing->height * scale);
    struct item item = {.kind = ITEM_DRAWING};
    item.drawing.drawing = drawing;
    item.drawing.scale = scale;
    strip_item(flow, strip, &item);
    strip->least_scale = least_scale / scale;
    flow_space(flow, mm(1.7));
    size_t before = flow->count;
    compose_caption(composer, number, plot->caption, figure_text_pt);
    strip->keep_next = flow->count > before;
    flow_space(flow, mm(5));
}

static struct row_box plate_text(struct composer *composer, const struct plate_picture *picture,
                                 double x, double width)
{
    static const struct type_size type = {7.5, 10.4};
    struct text_runs runs = runs_in(composer);
    text_runs_add(&runs, picture->when, style_of(FACE_SEMIBOLD, type, INK_TEXT));
    if (runs.count > 0)
        text_runs_add(&runs, " ", style_of(FACE_REGULAR, type, INK_TEXT));
    text_runs_add(&runs, picture->text, style_of(FACE_REGULAR, type, INK_TEXT));
    return (struct row_box){
        .lines = text_lines_break(&runs, composer->flow.resources, width), .x = x, .width = width};
}

static void compose_plate(struct composer *composer, const char *number, const struct plate *plate)
{
    const double gap = mm(4), most_height = mm(100);
    struct flow *flow = &composer->flow;
    double block = block_width(composer), half = (block - gap) / 2;
    size_t count = plate->picture_count < 2 ? plate->picture_count : 2;
    if (count == 0)
        return;
    /* a pair has one height and fills the block; a single picture has half the width */
    double ratios = 0;
    for (size_t i = 0; i < count; i++)
        ratios += picture_width(&plate->pictures[i], 1);
    double height = smaller((count == 2 ? block - gap : half) / ratios, most_height);
    size_t first = flow->count;
    flow_space(flow, mm(5));
    struct strip *strip = flow_strip(flow, height);
    strip->least_scale = 0.68;
    struct row_box boxes[2] = {{.x = 0}};
    double x = 0;
    for (size_t i = 0; i < count; i++) {
        double width = picture_width(&plate->pictures[i], height);
        put_picture(composer, strip, &plate->pictures[i], (struct point){x, 0}, height);
        double text = width > mm(40) || count == 2 ? width : half;
        boxes[i] = plate_text(composer, &plate->pictures[i], x, text > mm(20) ? text : mm(20));
        x += width + gap;
    }
    flow_space(flow, mm(1.7));
    struct row_setting setting = {.type = {7.5, 10.4}};
    compose_row(composer, boxes, count, &setting);
    flow_space(flow, 2);
    compose_caption(composer, number, plate->caption, figure_text_pt);
    if (flow->count - first < 12)
        flow_keep(flow, first);
    else
        flow->strips[first]->keep_next = true;
    flow_space(flow, mm(5));
}

/* ---- bench sheet */

static const double write_on_gap_pt = 9;

static double write_on_share(const struct write_on *item)
{
    return item->width > 0 ? item->width : 1;
}

static double write_on_labels(const struct composer *composer, const struct write_on *item,
                              struct text_style style)
{
    double width = text_width(composer, item->label, style) + 3;
    return item->unit && *item->unit ? width + 3 + text_width(composer, item->unit, style) : width;
}

/* How many items from `from` on fit a line with blanks of a useful length. */
static size_t write_on_fitting(const struct composer *composer, const struct write_ons *write_on,
                               size_t from, struct text_style style)
{
    const double least_blank = mm(13);
    double labels = 0, shares = 0, least_share = INFINITY;
    size_t to = from;
    for (; to < write_on->count; to++) {
        double share = write_on_share(&write_on->items[to]);
        labels += write_on_labels(composer, &write_on->items[to], style) +
                  (to > from ? write_on_gap_pt : 0);
        shares += share;
        least_share = smaller(least_share, share);
        double blank = (block_width(composer) - labels) * least_share / shares;
        if (blank < least_blank && to > from)
            break;
    }
    return to;
}

static void write_on_line(struct composer *composer, const struct write_ons *write_on, size_t from,
                          size_t to, struct text_style style)
{
    double labels = write_on_gap_pt * (double)(to - from - 1), shares = 0;
    for (size_t i = from; i < to; i++) {
        labels += write_on_labels(composer, &write_on->items[i], style);
        shares += write_on_share(&write_on->items[i]);
    }
    double rest = block_width(composer) - labels;
    rest = rest > 0 ? rest : 0;
    struct flow *flow = &composer->flow;
    struct strip *strip = flow_strip(flow, mm(6));
    struct point at = {0, mm(4.6)};
    for (size_t i = from; i < to; i++) {
        const struct write_on *item = &write_on->items[i];
        strip_text(flow, strip, at, style, item->label);
        at.x += text_width(composer, item->label, style) + 3;
        double blank = rest * write_on_share(item) / shares;
        strip_rule(flow, strip, (struct point){at.x, at.y + 1.5},
                   (struct point){at.x + blank, at.y + 1.5}, rule_middle_pt, INK_TEXT);
        at.x += blank;
        if (item->unit && *item->unit) {
            strip_text(flow, strip, (struct point){at.x + 3, at.y}, style, item->unit);
            at.x += 3 + text_width(composer, item->unit, style);
        }
        at.x += write_on_gap_pt;
    }
}

static void compose_write_on(struct composer *composer, const struct write_ons *write_on)
{
    struct text_style style = style_of(FACE_REGULAR, (struct type_size){7.5, 11}, INK_TEXT);
    flow_space(&composer->flow, mm(1));
    for (size_t from = 0; from < write_on->count;) {
        size_t to = write_on_fitting(composer, write_on, from, style);
        write_on_line(composer, write_on, from, to, style);
        from = to;
    }
    flow_space(&composer->flow, mm(2.2));
}

/* ---- working and fingerprint */

static void compose_working(struct composer *composer, const char *number,
                            const struct working *working)
{
    struct arena *arena = composer->flow.arena;
    struct column columns[] = {
        {.head = "", .kind = COLUMN_TEXT, .width_percent = 24},
        {.head = "", .kind = COLUMN_TEXT, .width_percent = 38},
        {.head = "", .kind = COLUMN_TEXT, .width_percent = 14},
        {.head = "", .kind = COLUMN_TEXT, .width_percent = 24},
    };
    struct table table = {.caption = working->heading,
                          .columns = columns,
                          .column_count = sizeof columns / sizeof columns[0],
                          .row_count = working->line_count,
                          .lined = true};
    table.rows = arena_array(arena, table.row_count, sizeof *table.rows);
    for (size_t i = 0; i < working->line_count; i++) {
        const struct working_line *line = &working->lines[i];
        struct cell *cells = arena_array(arena, table.column_count, sizeof *cells);
        cells[0].text = line->name;
        cells[1].text = line->formula;
        cells[2].text = line->value;
        cells[3].text = line->source;
        table.rows[i].cells = cells;
    }
    compose_table(composer, number, &table);
}

/* Groups of eight for the eye; who copies the line gets it without the spaces, as sha256sum prints
   it. */
static void compose_fingerprint(struct composer *composer, const struct fingerprint *fingerprint)
{
    enum { GROUP = 8, GROUPS_MAX = 8 };
    const struct type_size type = {7.5, 12};
    struct flow *flow = &composer->flow;
    const char *text = fingerprint->text ? fingerprint->text : "";
    while (*text) {
        size_t length = strnlen(text, GROUP * GROUPS_MAX), at = 0;
        const char *shown = "";
        for (; at < length; at += GROUP)
            shown =
                arena_print(flow->arena, "%s%s%.*s", shown, at > 0 ? " " : "", GROUP, text + at);
        struct strip *strip = flow_strip(flow, type.leading);
        struct item item = {.kind = ITEM_TEXT, .at = {0, line_baseline(type.leading, type.size)}};
        item.text.text = shown;
        item.text.length = strlen(shown);
        item.text.copied = arena_text(flow->arena, text, length);
        item.text.style = style_of(FACE_MONO, type, INK_TEXT);
        strip_item(flow, strip, &item);
        text += length;
    }
    flow_space(flow, mm(2.2));
}

void compose_exhibit(struct composer *composer, const struct exhibit *exhibit, cmark_node **next)
{
    switch (exhibit->kind) {
    case EXHIBIT_TITLE:
        compose_title(composer, &exhibit->title);
        break;
    case EXHIBIT_FACTS:
        compose_facts(composer, &exhibit->facts);
        break;
    case EXHIBIT_HEADLINE:
        compose_headline(composer, &exhibit->headline);
        break;
    case EXHIBIT_TABLE:
        compose_table(composer, exhibit->number, &exhibit->table);
        break;
    case EXHIBIT_PLOT:
        compose_plot(composer, exhibit->number, &exhibit->plot);
        break;
    case EXHIBIT_PLATE:
        compose_plate(composer, exhibit->number, &exhibit->plate);
        break;
    case EXHIBIT_TWO_COLUMNS:
        *next = compose_columns(composer, *next);
        break;
    case EXHIBIT_SIDE_BY_SIDE:
        *next = compose_side_by_side(composer, *next);
        break;
    case EXHIBIT_WRITE_ON:
        compose_write_on(composer, &exhibit->write_on);
        break;
    case EXHIBIT_WORKING:
        if (!exhibit->working.screen_only)
            compose_working(composer, exhibit->number, &exhibit->working);
        break;
    case EXHIBIT_FINGERPRINT:
        compose_fingerprint(composer, &exhibit->fingerprint);
        break;
    case EXHIBIT_CONTENTS:
        break; /* for the screen */
    case EXHIBIT_PAGE_BREAK:
        composer->flow.page_break = true;
        break;
    case EXHIBIT_SMALL:
        composer->body = type_small;
        composer->measure =
            composer->document->kind == DOCUMENT_SHEET ? block_width(composer) : figure_text_pt;
        break;
    }
}
