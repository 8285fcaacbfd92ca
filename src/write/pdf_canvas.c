#include "write/pdf_canvas.h"

#include <math.h>
#include <string.h>

/* PDF 1.4, appendix C: reals up to 32,767. */
static const double place_limit = 32000;

static long hundredths(double value)
{
    if (!(value > -place_limit)) /* NaN as well */
        return -(long)place_limit * 100;
    return lround((value < place_limit ? value : place_limit) * 100);
}

static void append_hundredths(struct buffer *out, long value)
{
    char digits[24];
    size_t start = sizeof digits;
    unsigned long left = value < 0 ? 0 - (unsigned long)value : (unsigned long)value;
    unsigned long fraction = left % 100;
    digits[--start] = ' ';
    if (fraction % 10)
        digits[--start] = (char)('0' + fraction % 10);
    if (fraction) {
        digits[--start] = (char)('0' + fraction / 10);
        digits[--start] = '.';
    }
    left /= 100;
    if (left || !fraction)
        do {
            digits[--start] = (char)('0' + left % 10);
            left /= 10;
        } while (left);
    if (value < 0)
        digits[--start] = '-';
    buffer_append(out, digits + start, sizeof digits - start);
}

static void append_number(struct buffer *out, double value)
{
    append_hundredths(out, hundredths(value));
}

static void append_point(struct pdf_canvas *canvas, double x, double y)
{
    append_number(&canvas->contents, x);
    append_number(&canvas->contents, canvas->height_pt - y);
}

struct pdf_canvas pdf_canvas_begin(struct pdf_fonts *fonts, double height_pt, struct rgb accent)
{
    return (struct pdf_canvas){.fonts = fonts,
                               .height_pt = height_pt,
                               .accent = accent,
                               .face = FACE_COUNT,
                               .fill = INK_COUNT,
                               .stroke = INK_COUNT,
                               .line = -1};
}

void pdf_canvas_release(struct pdf_canvas *canvas)
{
    buffer_release(&canvas->contents);
    buffer_release(&canvas->codes);
}

static void leave_text(struct pdf_canvas *canvas)
{
    if (canvas->in_text)
        buffer_text(&canvas->contents, "ET\n");
    canvas->in_text = false;
}

void pdf_canvas_end(struct pdf_canvas *canvas)
{
    leave_text(canvas);
}

static double gray_of(enum ink ink)
{
    static const double grays[INK_COUNT] = {
        [INK_TEXT] = 0,
        [INK_SOFT] = 0x44 / 255.0,
        [INK_HAIR] = 0x88 / 255.0,
        [INK_FAINT] = 0xCC / 255.0,
        [INK_BAND] = 0xD5 / 255.0,
        [INK_PAPER] = 1,
    };
    return grays[ink];
}

static void append_colour(struct pdf_canvas *canvas, enum ink ink, bool stroke)
{
    struct buffer *out = &canvas->contents;
    if (ink == INK_ACCENT) {
        append_number(out, canvas->accent.red);
        append_number(out, canvas->accent.green);
        append_number(out, canvas->accent.blue);
        buffer_text(out, stroke ? "RG\n" : "rg\n");
    } else {
        append_number(out, gray_of(ink));
        buffer_text(out, stroke ? "G\n" : "g\n");
    }
}

static void set_fill(struct pdf_canvas *canvas, enum ink ink)
{
    if (canvas->fill == ink)
        return;
    append_colour(canvas, ink, false);
    canvas->fill = ink;
}

static void set_stroke(struct pdf_canvas *canvas, enum ink ink, double line_pt)
{
    if (canvas->stroke != ink) {
        append_colour(canvas, ink, true);
        canvas->stroke = ink;
    }
    long line = hundredths(line_pt);
    if (canvas->line != line) {
        append_hundredths(&canvas->contents, line);
        buffer_text(&canvas->contents, "w\n");
        canvas->line = line;
    }
}

static void enter_text(struct pdf_canvas *canvas)
{
    if (canvas->in_text)
        return;
    buffer_text(&canvas->contents, "BT\n");
    canvas->in_text = true;
    canvas->text_x = canvas->text_y = 0;
}

/* Td counts from the start of the line before: the difference of rounded places adds up right. */
static void move_text(struct pdf_canvas *canvas, double x, double y)
{
    long to_x = hundredths(x);
    long to_y = hundredths(canvas->height_pt - y);
    append_hundredths(&canvas->contents, to_x - canvas->text_x);
    append_hundredths(&canvas->contents, to_y - canvas->text_y);
    buffer_text(&canvas->contents, "Td\n");
    canvas->text_x = to_x;
    canvas->text_y = to_y;
}

static void set_font(struct pdf_canvas *canvas, enum text_face face, double size_pt)
{
    long size = hundredths(size_pt);
    if (canvas->face == face && canvas->size == size)
        return;
    buffer_text(&canvas->contents, "/F");
    buffer_byte(&canvas->contents, (char)('0' + face));
    buffer_byte(&canvas->contents, ' ');
    append_hundredths(&canvas->contents, size);
    buffer_text(&canvas->contents, "Tf\n");
    canvas->face = face;
    canvas->size = size;
}

/* A literal string: only parentheses, the backslash and a carriage return need care. */
static void append_string(struct buffer *out, const struct buffer *codes)
{
    static const char escapes[256] = {['\r'] = 'r', ['('] = '(', [')'] = ')', ['\\'] = '\\'};
    buffer_reserve(out, 2 * codes->length + 5);
    char *at = out->data + out->length;
    *at++ = '(';
    for (size_t i = 0; i < codes->length; i++) {
        char byte = codes->data[i], escape = escapes[(unsigned char)byte];
        if (escape)
            *at++ = '\\';
        *at++ = escape ? escape : byte;
    }
    *at++ = ')';
    *at++ = 'T';
    *at++ = 'j';
    *at++ = '\n';
    out->length = (size_t)(at - out->data);
}

static void show_text(struct pdf_canvas *canvas, struct point at, const struct text_style *style,
                      const char *text, size_t length)
{
    const char *end = text + length;
    move_text(canvas, at.x, at.y - style->raise_pt);
    while (text < end) {
        buffer_clear(&canvas->codes);
        enum text_face face =
            pdf_text_encode(canvas->fonts, style->face, &text, end, &canvas->codes);
        set_font(canvas, face, style->size_pt);
        append_string(&canvas->contents, &canvas->codes);
    }
}

void pdf_canvas_text(struct pdf_canvas *canvas, struct point at, const struct text_style *style,
                     const char *text, size_t length)
{
    if (length == 0)
        return;
    enter_text(canvas);
    set_fill(canvas, style->ink);
    show_text(canvas, at, style, text, length);
}

/* Stroked only, with round joins; no part of what is read or copied. */
void pdf_canvas_halo(struct pdf_canvas *canvas, struct point at, const struct text_style *style,
                     const char *text, double line_pt)
{
    leave_text(canvas);
    buffer_text(&canvas->contents, "/Artifact BMC\n");
    enter_text(canvas);
    set_stroke(canvas, INK_PAPER, line_pt);
    buffer_text(&canvas->contents, "1 Tr 1 j\n");
    show_text(canvas, at, style, text, strlen(text));
    buffer_text(&canvas->contents, "0 Tr 0 j\n");
    leave_text(canvas);
    buffer_text(&canvas->contents, "EMC\n");
}

void pdf_canvas_actual_text(struct pdf_canvas *canvas, const char *text)
{
    leave_text(canvas);
    buffer_text(&canvas->contents, "/Span <</ActualText <");
    for (; *text; text++)
        buffer_print(&canvas->contents, "%02X", (unsigned)(unsigned char)*text);
    buffer_text(&canvas->contents, ">>> BDC\n");
}

void pdf_canvas_actual_text_end(struct pdf_canvas *canvas)
{
    leave_text(canvas);
    buffer_text(&canvas->contents, "EMC\n");
}

void pdf_canvas_line(struct pdf_canvas *canvas, struct point from, struct point to, double line_pt,
                     enum ink ink)
{
    leave_text(canvas);
    set_stroke(canvas, ink, line_pt);
    append_point(canvas, from.x, from.y);
    buffer_text(&canvas->contents, "m\n");
    append_point(canvas, to.x, to.y);
    buffer_text(&canvas->contents, "l S\n");
}

static void prepare(struct pdf_canvas *canvas, const struct paint *paint)
{
    leave_text(canvas);
    if (paint->filled)
        set_fill(canvas, paint->fill);
    if (paint->stroked)
        set_stroke(canvas, paint->stroke, paint->line_pt);
}

static void paint_path(struct pdf_canvas *canvas, bool closed, const struct paint *paint)
{
    const char *operator_name = "n\n";
    if (paint->filled && paint->stroked)
        operator_name = closed ? "b\n" : "B\n";
    else if (paint->filled)
        operator_name = "f\n";
    else if (paint->stroked)
        operator_name = closed ? "s\n" : "S\n";
    buffer_text(&canvas->contents, operator_name);
}

void pdf_canvas_path(struct pdf_canvas *canvas, const struct point *points, size_t count,
                     bool closed, const struct paint *paint)
{
    if (count < 2)
        return;
    prepare(canvas, paint);
    for (size_t i = 0; i < count; i++) {
        append_point(canvas, points[i].x, points[i].y);
        buffer_text(&canvas->contents, i == 0 ? "m\n" : "l\n");
    }
    paint_path(canvas, closed, paint);
}

/* A quarter of a circle from angle quarter * 90 degrees on, clockwise on the page: the usual
   cubic, off by less than 0.03 % of the radius. */
static void append_quarter(struct pdf_canvas *canvas, struct point centre, double radius,
                           int quarter)
{
    static const double handle = 0.5522847498;
    static const double cosines[5] = {1, 0, -1, 0, 1};
    static const double sines[5] = {0, 1, 0, -1, 0};
    double from_x = cosines[quarter], from_y = sines[quarter];
    double to_x = cosines[quarter + 1], to_y = sines[quarter + 1];
    append_point(canvas, centre.x + radius * (from_x - handle * from_y),
                 centre.y + radius * (from_y + handle * from_x));
    append_point(canvas, centre.x + radius * (to_x + handle * to_y),
                 centre.y + radius * (to_y - handle * to_x));
    append_point(canvas, centre.x + radius * to_x, centre.y + radius * to_y);
    buffer_text(&canvas->contents, "c\n");
}

static void append_arc(struct pdf_canvas *canvas, struct point centre, double radius, int quarters)
{
    append_point(canvas, centre.x + radius, centre.y);
    buffer_text(&canvas->contents, "m\n");
    for (int quarter = 0; quarter < quarters; quarter++)
        append_quarter(canvas, centre, radius, quarter);
}

void pdf_canvas_circle(struct pdf_canvas *canvas, struct point centre, double radius,
                       const struct paint *paint)
{
    prepare(canvas, paint);
    append_arc(canvas, centre, radius, 4);
    paint_path(canvas, true, paint);
}

void pdf_canvas_half(struct pdf_canvas *canvas, struct point centre, double radius,
                     const struct paint *paint)
{
    prepare(canvas, paint);
    append_arc(canvas, centre, radius, 2);
    paint_path(canvas, true, paint);
}

void pdf_canvas_image(struct pdf_canvas *canvas, unsigned number, struct point at, double width,
                      double height)
{
    leave_text(canvas);
    buffer_text(&canvas->contents, "q\n");
    append_number(&canvas->contents, width);
    buffer_text(&canvas->contents, "0 0 ");
    append_number(&canvas->contents, height);
    append_point(canvas, at.x, at.y + height);
    buffer_print(&canvas->contents, "cm\n/I%u Do\nQ\n", number);
}
