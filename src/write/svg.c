#include "write/svg.h"

#include "write/escape.h"
#include "write/writer.h"

#include <stdbool.h>

enum { FILE_WIDTH = 720, FILE_MARGIN = 8 };

/* The rules of style.css for drawings, with the light colours. */
static const char file_rules[] =
    "text{font-family:\"Open Sans\",\"DejaVu Sans Condensed\",\"Noto Sans\",sans-serif;"
    "font-size:12px;font-variant-numeric:tabular-nums lining-nums;fill:#1a1b1c;"
    "stroke:#fdfdfb;stroke-width:3px;stroke-linejoin:round}"
    ".s{fill:#55595c}.b{font-weight:600}.e{text-anchor:end}.m{text-anchor:middle}"
    ".small{font-size:11px}path,circle{fill:none}"
    ".axis{stroke:#1a1b1c;stroke-width:.9}.tick{stroke:#1a1b1c;stroke-width:.7}"
    ".grid{stroke:#d9dcdd;stroke-width:.8}.lead{stroke:#a3a7a9;stroke-width:.6}"
    ".line{stroke:#1a1b1c;stroke-width:1.1}.ci{stroke:#1a1b1c;stroke-width:2.2}"
    ".ci2{stroke:#55595c;stroke-width:.9}.band{fill:#cfdde7}.bar{fill:#1a1b1c}"
    ".mk{stroke:#1a1b1c;stroke-width:1.15;fill:#fdfdfb}.in{fill:#1a1b1c}.hollow{fill:none}";

/* One decimal at most. Drawings are mostly coordinates: this is the hot path of a page. */
static void coordinate(struct buffer *out, double value)
{
    char digits[24];
    char *end = digits + sizeof digits, *start = end;
    long tenths = (long)(value * 10 + (value < 0 ? -0.5 : 0.5));
    unsigned long rest = tenths < 0 ? 0 - (unsigned long)tenths : (unsigned long)tenths;
    if (rest % 10 != 0) {
        *--start = (char)('0' + rest % 10);
        *--start = '.';
    }
    rest /= 10;
    do {
        *--start = (char)('0' + rest % 10);
        rest /= 10;
    } while (rest);
    if (tenths < 0)
        *--start = '-';
    buffer_append(out, start, (size_t)(end - start));
}

static const char *line_name(enum line_class line)
{
    switch (line) {
    case LINE_AXIS:
        return "axis";
    case LINE_TICK:
        return "tick";
    case LINE_GRID:
        return "grid";
    case LINE_LEAD:
        return "lead";
    case LINE_LIMIT:
        return "limit";
    case LINE_CURVE:
        return "line";
    case LINE_MARK:
        return "mk";
    case LINE_INTERVAL:
        return "ci";
    case LINE_BRACKET:
        return "ci2";
    }
    return "";
}

static const char *shape_classes(const struct shape *shape)
{
    bool mark = shape->stroked && shape->line == LINE_MARK;
    switch (shape->fill) {
    case FILL_NONE:
        return mark && shape->closed ? "mk hollow" : line_name(shape->line);
    case FILL_PAPER:
        return mark ? "mk" : "paper";
    case FILL_INK:
        return mark ? "mk in" : "bar";
    case FILL_BAND:
        return "band";
    }
    return "";
}

static void append_path(struct buffer *out, const struct shape *shape)
{
    const struct point *last = &shape->points[0];
    buffer_byte(out, 'M');
    coordinate(out, last->x);
    buffer_byte(out, ' ');
    coordinate(out, last->y);
    for (size_t i = 1; i < shape->point_count; i++) {
        const struct point *next = &shape->points[i];
        if (next->y == last->y) {
            buffer_byte(out, 'H');
            coordinate(out, next->x);
        } else if (next->x == last->x) {
            buffer_byte(out, 'V');
            coordinate(out, next->y);
        } else {
            buffer_byte(out, 'L');
            coordinate(out, next->x);
            buffer_byte(out, ' ');
            coordinate(out, next->y);
        }
        last = next;
    }
    if (shape->closed)
        buffer_byte(out, 'z');
}

static bool same_pen(const struct shape *one, const struct shape *other)
{
    return other->kind == SHAPE_PATH && one->stroked == other->stroked &&
           one->closed == other->closed && one->fill == other->fill &&
           (!one->stroked || one->line == other->line);
}

/* Neighbours drawn with the same pen go into one element. Returns how many. Marks stay apart: each
   must cover the lines below it, and two may overlap. */
static size_t write_paths(struct buffer *out, const struct shape *shapes, size_t count)
{
    size_t together = 0;
    buffer_text(out, "<path class=\"");
    buffer_text(out, shape_classes(&shapes[0]));
    buffer_text(out, "\" d=\"");
    do
        append_path(out, &shapes[together++]);
    while (together < count && shapes[0].line != LINE_MARK &&
           same_pen(&shapes[0], &shapes[together]));
    buffer_text(out, "\"/>");
    return together;
}

static void write_circle(struct buffer *out, const struct shape *shape)
{
    buffer_text(out, "<circle class=\"");
    buffer_text(out, shape_classes(shape));
    buffer_text(out, "\" cx=\"");
    coordinate(out, shape->points[0].x);
    buffer_text(out, "\" cy=\"");
    coordinate(out, shape->points[0].y);
    buffer_text(out, "\" r=\"");
    coordinate(out, shape->radius);
    buffer_text(out, "\"/>");
}

static void write_half(struct buffer *out, const struct shape *shape)
{
    buffer_text(out, "<path class=\"bar\" d=\"M");
    coordinate(out, shape->points[0].x - shape->radius);
    buffer_byte(out, ' ');
    coordinate(out, shape->points[0].y);
    buffer_byte(out, 'a');
    coordinate(out, shape->radius);
    buffer_byte(out, ' ');
    coordinate(out, shape->radius);
    buffer_text(out, " 0 0 0 ");
    coordinate(out, 2 * shape->radius);
    buffer_text(out, " 0z\"/>");
}

static const char *text_classes(const struct shape *shape)
{
    static const char *const names[4][3][2] = {
        {{"", "small"}, {"m", "m small"}, {"e", "e small"}},
        {{"s", "s small"}, {"s m", "s m small"}, {"s e", "s e small"}},
        {{"b", "b small"}, {"b m", "b m small"}, {"b e", "b e small"}},
        {{"limitword", "limitword small"},
         {"limitword m", "limitword m small"},
         {"limitword e", "limitword e small"}}};
    return names[shape->text_class][shape->anchor][shape->small];
}

static void write_text(struct buffer *out, const struct shape *shape)
{
    const char *classes = text_classes(shape);
    buffer_text(out, "<text");
    if (classes[0]) {
        buffer_text(out, " class=\"");
        buffer_text(out, classes);
        buffer_byte(out, '"');
    }
    buffer_text(out, " x=\"");
    coordinate(out, shape->points[0].x);
    buffer_text(out, "\" y=\"");
    coordinate(out, shape->points[0].y);
    buffer_text(out, "\">");
    escape_html(out, shape->text);
    buffer_text(out, "</text>");
}

static void write_lines_and_marks(struct buffer *out, const struct drawing *drawing)
{
    for (size_t i = 0; i < drawing->shape_count;) {
        const struct shape *shape = &drawing->shapes[i];
        switch (shape->kind) {
        case SHAPE_PATH:
            i += write_paths(out, shape, drawing->shape_count - i);
            continue;
        case SHAPE_CIRCLE:
            write_circle(out, shape);
            break;
        case SHAPE_HALF:
            write_half(out, shape);
            break;
        case SHAPE_TEXT:
            break;
        }
        i++;
    }
}

/* Texts above all else, their halo behind their own letters: said by an attribute of a group, for
   the validator does not know the property in style sheets, and marks must not inherit it. */
static void write_texts(struct buffer *out, const struct drawing *drawing)
{
    bool open = false;
    for (size_t i = 0; i < drawing->shape_count; i++) {
        if (drawing->shapes[i].kind != SHAPE_TEXT)
            continue;
        buffer_text(out, open ? "" : "<g paint-order=\"stroke\">");
        open = true;
        write_text(out, &drawing->shapes[i]);
    }
    buffer_text(out, open ? "</g>" : "");
}

static void write_shapes(struct buffer *out, const struct drawing *drawing)
{
    write_lines_and_marks(out, drawing);
    write_texts(out, drawing);
}

static void write_view_box(struct buffer *out, const struct svg_frame *frame)
{
    buffer_text(out, " viewBox=\"");
    coordinate(out, frame->left);
    buffer_byte(out, ' ');
    coordinate(out, frame->top);
    buffer_byte(out, ' ');
    coordinate(out, frame->right - frame->left);
    buffer_byte(out, ' ');
    coordinate(out, frame->bottom - frame->top);
    buffer_byte(out, '"');
}

static void write_name(struct buffer *out, const char *title)
{
    if (!title) {
        buffer_text(out, " aria-hidden=\"true\">");
        return;
    }
    buffer_text(out, " role=\"img\"><title>");
    escape_html(out, title);
    buffer_text(out, "</title>");
}

struct svg_frame svg_frame_of(const struct drawing *drawing, const char *classes, const char *title)
{
    return (struct svg_frame){
        .classes = classes, .title = title, .right = drawing->width, .bottom = drawing->height};
}

void svg_write(const struct drawing *drawing, const struct svg_frame *frame, struct buffer *out)
{
    buffer_text(out, "<svg");
    if (frame->classes) {
        buffer_text(out, " class=\"");
        buffer_text(out, frame->classes);
        buffer_byte(out, '"');
    }
    write_view_box(out, frame);
    write_name(out, frame->title);
    write_shapes(out, drawing);
    buffer_text(out, "</svg>");
}

static void write_file(struct buffer *out, const struct drawing *drawing, const char *title,
                       const char *accent)
{
    struct svg_frame frame = {.left = -FILE_MARGIN,
                              .top = -FILE_MARGIN,
                              .right = drawing->width + FILE_MARGIN,
                              .bottom = drawing->height + FILE_MARGIN};
    buffer_text(out, "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"");
    coordinate(out, frame.right - frame.left);
    buffer_text(out, "\" height=\"");
    coordinate(out, frame.bottom - frame.top);
    buffer_byte(out, '"');
    write_view_box(out, &frame);
    write_name(out, title ? title : "");
    buffer_text(out, "<style>");
    buffer_text(out, file_rules);
    buffer_text(out, ".limit{stroke-width:1.6;stroke:");
    escape_html(out, accent);
    buffer_text(out, "}.limitword{font-weight:600;fill:");
    escape_html(out, accent);
    buffer_text(out, "}</style><rect x=\"-8\" y=\"-8\" width=\"100%\" height=\"100%\" "
                     "fill=\"#fdfdfb\"/>\n");
    write_shapes(out, drawing);
    buffer_text(out, "</svg>\n");
}

void svg_write_file(const struct exhibit *exhibit, const char *accent, struct buffer *out)
{
    accent = accent ? accent : "#1b4b6b";
    struct arena arena = {0};
    if (exhibit->kind == EXHIBIT_PLOT) {
        struct drawing drawing = drawing_of_plot(&exhibit->plot, FILE_WIDTH, &arena);
        write_file(out, &drawing, exhibit->plot.title, accent);
    } else if (exhibit->kind == EXHIBIT_HEADLINE) {
        struct drawing drawing = drawing_of_headline(&exhibit->headline, 480, &arena);
        write_file(out, &drawing, exhibit->headline.title, accent);
    }
    arena_release(&arena);
}
