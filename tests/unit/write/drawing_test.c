#include "kit.h"
#include "sample_document.h"

#include "base/utf8.h"
#include "write/drawing.h"
#include "write/drawing_parts.h"
#include "write/text_width.h"

#include <hb-ot.h>

/* Against the fonts themselves, read by HarfBuzz: each sign of the table within one thousandth, and
   never too narrow for a sign that the table lacks. */
static void check_face(const char *path, bool semibold)
{
    hb_blob_t *blob = hb_blob_create_from_file(path);
    hb_face_t *face = hb_face_create(blob, 0);
    hb_font_t *font = hb_font_create(face);
    double unit = hb_face_get_upem(face);
    unsigned checked = 0;
    assert_true(unit > 0);
    for (hb_codepoint_t sign = 0x20; sign < 0x2300; sign++) {
        hb_codepoint_t glyph;
        if (sign == 0x7f || (sign >= 0x180 && sign < 0x2000 && sign != 0x3a9 && sign != 0x3bc) ||
            !hb_font_get_nominal_glyph(font, sign, &glyph))
            continue;
        double advance = hb_font_get_glyph_h_advance(font, glyph) * 1000 / unit;
        struct buffer text = {0};
        utf8_append(&text, sign);
        unsigned width = text_width_milli(buffer_string(&text), semibold);
        if (sign < 0x7f || sign == 0xb5 || sign == 0x2212 || sign == 0x2009)
            assert_close((double)width, advance, 1);
        else if (sign >= 0xc0 && sign < 0x180 && width + 60 < advance)
            fail_msg("U+%04X is %.0f wide, not %u", sign, advance, width);
        buffer_release(&text);
        checked++;
    }
    assert_true(checked > 200);
    hb_font_destroy(font);
    hb_face_destroy(face);
    hb_blob_destroy(blob);
}

static void widths_are_the_fonts(void **state)
{
    (void)state;
    check_face("/usr/share/fonts/truetype/open-sans/OpenSans-Regular.ttf", false);
    check_face("/usr/share/fonts/truetype/open-sans/OpenSans-Semibold.ttf", true);
}

static void texts_are_cut_to_fit(void **state)
{
    (void)state;
    struct arena arena = {0};
    const char *long_text = "smoothing and a few other things";
    assert_ptr_equal(text_fitted(&arena, long_text, 60000, false), long_text);
    const char *cut = text_fitted(&arena, long_text, 6000, false);
    assert_true(text_width_milli(cut, false) <= 6000);
    assert_non_null(strstr(cut, "…"));
    assert_int_equal(strncmp(cut, "smoothing", 9), 0);
    assert_null(text_fitted(&arena, NULL, 10, false));
    arena_release(&arena);
}

struct box {
    double left, right, top, bottom;
    const char *text;
};

static struct box box_of(const struct shape *shape)
{
    bool semibold = shape->text_class == TEXT_STRONG || shape->text_class == TEXT_LIMIT;
    double size = shape->small ? 11 : 12, x = shape->points[0].x, y = shape->points[0].y;
    double width = text_width_milli(shape->text, semibold) * size / 1000;
    double left = shape->anchor == ANCHOR_START    ? x
                  : shape->anchor == ANCHOR_MIDDLE ? x - width / 2
                                                   : x - width;
    /* From the top of digits to the baseline. */
    return (struct box){left, left + width, y - 0.71 * size, y, shape->text};
}

/* No text leaves the drawing, none touches another, and every coordinate is a number. */
static void check_drawing(const struct drawing *drawing, const char *what)
{
    static struct box boxes[2000];
    size_t count = 0;
    assert_true(drawing->height > 0 && drawing->height < 20000);
    for (size_t i = 0; i < drawing->shape_count; i++) {
        const struct shape *shape = &drawing->shapes[i];
        for (size_t j = 0; j < shape->point_count; j++) {
            assert_true(isfinite(shape->points[j].x) && isfinite(shape->points[j].y));
            assert_true(shape->points[j].x >= -16 && shape->points[j].x <= drawing->width + 16);
            assert_true(shape->points[j].y >= -1 && shape->points[j].y <= drawing->height + 1);
        }
        if (shape->kind == SHAPE_TEXT && count < SAMPLE_COUNT(boxes))
            boxes[count++] = box_of(shape);
    }
    assert_true(count > 0);
    for (size_t i = 0; i < count; i++) {
        if (boxes[i].left < -0.5 || boxes[i].right > drawing->width + 0.5)
            fail_msg("%s, %.0f wide: '%s' leaves it", what, drawing->width, boxes[i].text);
        for (size_t j = 0; j < i; j++)
            if (boxes[i].left < boxes[j].right && boxes[j].left < boxes[i].right &&
                boxes[i].top < boxes[j].bottom && boxes[j].top < boxes[i].bottom)
                fail_msg("%s, %.0f wide: '%s' lies on '%s'", what, drawing->width, boxes[i].text,
                         boxes[j].text);
    }
}

static void check_plot(const struct plot *plot, const char *what)
{
    static const double widths[] = {720, 350};
    for (int i = 0; i < 2; i++) {
        struct arena arena = {0};
        struct drawing drawing = drawing_of_plot(plot, widths[i], &arena);
        assert_close(drawing.width, widths[i], 0);
        check_drawing(&drawing, what);
        arena_release(&arena);
    }
}

static void sample_is_legible(void **state)
{
    (void)state;
    for (unsigned copies = 1; copies <= 3; copies++) {
        struct arena arena = {0};
        struct document *document = sample_document(&arena, copies);
        unsigned plots = 0;
        for (cmark_node *node = cmark_node_first_child(document->root); node;
             node = cmark_node_next(node)) {
            const struct exhibit *exhibit = document_exhibit(node);
            if (exhibit && exhibit->kind == EXHIBIT_PLOT) {
                check_plot(&exhibit->plot, exhibit->id);
                plots++;
            } else if (exhibit && exhibit->kind == EXHIBIT_HEADLINE) {
                struct drawing wide = drawing_of_headline(&exhibit->headline, 480, &arena),
                               narrow = drawing_of_headline(&exhibit->headline, 350, &arena);
                check_drawing(&wide, "headline");
                check_drawing(&narrow, "headline");
            }
        }
        assert_int_equal(plots, 4);
        sample_document_release(document);
        arena_release(&arena);
    }
}

static struct glance glance_of(struct glance_row *rows, size_t count)
{
    return (struct glance){.rows = rows,
                           .row_count = count,
                           .axis_text = "leakage as a multiple of the part’s own limit",
                           .limit_word = "limit",
                           .no_ratio_word = "no ratio",
                           .times_sign = "×"};
}

static void extremes_are_legible(void **state)
{
    (void)state;
    static const double ratios[] = {NONE, 0, 1e-12, 1, 99, 101, 5e5, 1e9, INFINITY};
    for (size_t i = 0; i < SAMPLE_COUNT(ratios); i++) {
        struct glance_row rows[] = {
            {"a place with a name that goes on and on and on", "CAN 12 red and blue tag", ratios[i],
             i % 2 == 0, NONE, NONE, 3e4, MARK_FAIL, "conditional fail, disconnected and then some",
             "conditional fail and some", true, i % 3 == 0},
            {"", "C1", 1, false, 0.001, 1000, NONE, MARK_PASS, "", "", false, false}};
        struct plot plot = {.kind = PLOT_GLANCE, .glance = glance_of(rows, 2)};
        check_plot(&plot, "extreme glance");
    }
}

static struct curves plain_curves(struct curve *curve)
{
    return (struct curves){.panels = {{.curves = curve, .curve_count = 1, .x_max_s = 600}},
                           .panel_count = 1,
                           .y_scale = 1e-6,
                           .y_unit = "µA",
                           .limit = NONE,
                           .limit_word = "limit",
                           .limit_text = "0.000 012 µA",
                           .deciding_text = "310 µA"};
}

static void curves_of_every_size(void **state)
{
    (void)state;
    static const double values[] = {0, 1e-12, 3e-9, 1e-6, 0.9e-3, 2};
    static const double limits[] = {NONE, 1e-12, 1e-6, 1e-3, 10};
    static const double ends[] = {15, 60, 600, 3700, 90000, 1e6};
    for (size_t i = 0; i < SAMPLE_COUNT(values); i++)
        for (size_t j = 0; j < SAMPLE_COUNT(limits); j++)
            for (size_t k = 0; k < SAMPLE_COUNT(ends) * 4; k++) {
                double end = ends[k / 4];
                struct curve_point points[] = {{end / 40, values[i] * 3, false, false},
                                               {end, values[i], true, true}};
                struct curve curve = {.points = points, .point_count = 2, .label = "1"};
                struct plot plot = {.kind = PLOT_CURVES, .curves = plain_curves(&curve)};
                double volts[] = {450};
                plot.curves.limit = limits[j];
                plot.curves.y_log = k & 1;
                plot.curves.panels[0].x_log = k & 2;
                plot.curves.panels[0].x_max_s = end;
                plot.curves.panels[0].step_volts = k & 1 ? volts : NULL;
                check_plot(&plot, "curve");
            }
}

static void curve_without_readings(void **state)
{
    (void)state;
    struct curve curve = {.label = "1"};
    struct plot plot = {.kind = PLOT_CURVES, .curves = plain_curves(&curve)};
    check_plot(&plot, "no readings");
    plot.curves.y_log = plot.curves.panels[0].x_log = true;
    check_plot(&plot, "no readings, log");
}

static double limit_line_x(const struct drawing *drawing)
{
    for (size_t i = 0; i < drawing->shape_count; i++)
        if (drawing->shapes[i].kind == SHAPE_PATH && drawing->shapes[i].stroked &&
            drawing->shapes[i].line == LINE_LIMIT)
            return drawing->shapes[i].points[0].x;
    return NONE;
}

/* A part at its limit stands on the line; ten times more is one decade to the right, as far as
   from 1/10 to the line; the band of U = 10 % reaches from 0.9 to 1.1 (log10 1.1 = 0.04139). */
static void marks_stand_where_their_ratio_is(void **state)
{
    (void)state;
    static const double ratios[] = {1, 10, 0.1, 100, 0.001};
    struct glance_row rows[5];
    for (int i = 0; i < 5; i++)
        rows[i] = (struct glance_row){.place = "place",
                                      .ref = "C1",
                                      .ratio = ratios[i],
                                      .band_low = 0.9,
                                      .band_high = 1.1,
                                      .found_ratio = NONE,
                                      .mark = MARK_PASS,
                                      .outcome = "pass",
                                      .outcome_narrow = "pass"};
    struct arena arena = {0};
    struct plot plot = {.kind = PLOT_GLANCE, .glance = glance_of(rows, 5)};
    struct drawing drawing = drawing_of_plot(&plot, 720, &arena);
    double x[5], limit = limit_line_x(&drawing), band_right = NONE;
    int marks = 0;
    for (size_t i = 0; i < drawing.shape_count; i++) {
        if (drawing.shapes[i].kind == SHAPE_CIRCLE && marks < 5)
            x[marks++] = drawing.shapes[i].points[0].x;
        if (drawing.shapes[i].fill == FILL_BAND)
            band_right = drawing.shapes[i].points[2].x;
    }
    assert_int_equal(marks, 5);
    assert_close(x[0], limit, 1e-9);
    double decade = x[1] - limit;
    assert_true(decade > 50);
    assert_close(limit - x[2], decade, 1e-9);
    assert_close(x[3] - limit, 2 * decade, 1e-9);
    assert_close(limit - x[4], 3 * decade, 1e-9);
    assert_close(band_right - limit, 0.04139 * decade, 0.01);
    arena_release(&arena);
}

static void scales(void **state)
{
    (void)state;
    static const struct {
        double range;
        unsigned steps;
        double expected;
    } rows[] = {{10, 5, 2}, {9, 5, 2}, {11, 5, 5}, {1, 4, 0.5}, {450, 3, 200}, {3.9, 5, 1}};
    for (size_t i = 0; i < SAMPLE_COUNT(rows); i++)
        assert_relative(scale_step(rows[i].range, rows[i].steps), rows[i].expected, 1e-12);
    struct arena arena = {0};
    assert_string_equal(scale_number(&arena, 10000), "10\xe2\x80\x89"
                                                     "000");
    assert_string_equal(scale_number(&arena, 1000), "1000");
    assert_string_equal(scale_number(&arena, 1234567), "1\xe2\x80\x89"
                                                       "234\xe2\x80\x89"
                                                       "567");
    assert_string_equal(scale_number(&arena, 0.05), "0.05");
    assert_string_equal(scale_number(&arena, -0.5), "−0.5");
    assert_string_equal(scale_number(&arena, 0), "0");
    arena_release(&arena);
}

static size_t filled_strokes(const struct drawing *drawing)
{
    size_t count = 0;
    for (size_t i = 0; i < drawing->shape_count; i++)
        count += drawing->shapes[i].fill == FILL_INK;
    return count;
}

static void one_stroke_a_part(void **state)
{
    (void)state;
    static struct headline_kind kinds[] = {{"capacitors", {40, 1, 0, 2}, "40 of 43"},
                                           {"resistors", {77, 0, 0, 0}, "77 of 77"}};
    struct headline headline = {.kinds = kinds, .kind_count = 2};
    struct arena arena = {0};
    struct drawing drawing = drawing_of_headline(&headline, 480, &arena);
    assert_int_equal(filled_strokes(&drawing), 120);
    check_drawing(&drawing, "wrapped headline");
    kinds[1].strokes[STROKE_KEPT]++; /* over 120 parts: words and numbers only */
    drawing = drawing_of_headline(&headline, 480, &arena);
    assert_int_equal(filled_strokes(&drawing), 0);
    check_drawing(&drawing, "headline in words");
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(widths_are_the_fonts),
        cmocka_unit_test(texts_are_cut_to_fit),
        cmocka_unit_test(sample_is_legible),
        cmocka_unit_test(extremes_are_legible),
        cmocka_unit_test(curves_of_every_size),
        cmocka_unit_test(curve_without_readings),
        cmocka_unit_test(marks_stand_where_their_ratio_is),
        cmocka_unit_test(scales),
        cmocka_unit_test(one_stroke_a_part),
    };
    return cmocka_run_group_tests_name("drawing", tests, NULL, NULL);
}
