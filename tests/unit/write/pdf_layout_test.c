/*
 * Line breaking, page breaks and the alignment of numbers, looked at as strips before they are
 * drawn. Rules checked: the look's own (keep together, decimal points in one line, no orphans).
 */
#include "kit.h"
#include "pdf_kit.h"
#include "sample_document.h"

#include "write/pdf_layout.h"

static struct pdf_resources *resources;

static const struct page_geometry small_page = {.width = 300,
                                                .height = 200,
                                                .left = 10,
                                                .text_width = 280,
                                                .top = 20,
                                                .bottom = 180,
                                                .measure = 280};

static struct flow flow_in(struct arena *arena)
{
    return (struct flow){.arena = arena, .resources = resources, .page = &small_page};
}

static const struct text_style plain = {FACE_REGULAR, 10, 0, INK_TEXT};

/* The lines of text, joined with "|". */
static const char *broken(struct arena *arena, const char *text, double width)
{
    struct text_runs runs = {.arena = arena};
    text_runs_add(&runs, text, plain);
    struct text_lines lines = text_lines_break(&runs, resources, width);
    struct buffer joined = {0};
    for (size_t i = 0; i < lines.count; i++) {
        buffer_text(&joined, i > 0 ? "|" : "");
        for (size_t piece = 0; piece < lines.items[i].piece_count; piece++)
            buffer_append(&joined, lines.items[i].pieces[piece].text,
                          lines.items[i].pieces[piece].length);
    }
    const char *answer = arena_text(arena, buffer_string(&joined), joined.length);
    buffer_release(&joined);
    return answer;
}

static double width_of(const char *text)
{
    return (double)pdf_text_width(resources, FACE_REGULAR, text, strlen(text)) / 100;
}

static void test_lines_end_where_they_may(void **state)
{
    (void)state;
    struct arena arena = {0};
    static const struct {
        const char *text, *as_wide_as, *lines;
    } rows[] = {
        {"one two three", "one two", "one two|three"},
        {"one two three", "one two ", "one two|three"},
        {"one two three", "one two thre", "one two|three"},
        {"one two three", "one two three", "one two three"},
        {"one   two", "one t", "one|two"},
        {"a 630 V part", "a 630 ", "a|630 V|part"},
        {"a 630 Volt part", "a 630", "a 630|Volt|part"},
        {"near 5 % more", "near 5", "near|5 %|more"},
        {"1\u00A0100 x", "1\u00A01", "1\u00A01|00|x"},
        {"push-pull", "push-p", "push-|pull"},
        {"2031-022 x", "2031-0", "2031-0|22 x"},
        {"abcdefghij", "abcd", "abcd|efgh|ij"},
        {"ab abcdefghij", "abcd", "ab|abcd|efgh|ij"},
        {"soft\u00ADhyphen", "softhyphen", "softhyphen"},
        {"line\nend\ttab", "line end tab", "line end tab"},
        {"xyz", "", "x|y|z"},
        {"", "one", ""},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++)
        assert_string_equal(broken(&arena, rows[i].text, width_of(rows[i].as_wide_as)),
                            rows[i].lines);
    arena_release(&arena);
}

static void test_every_character_is_on_a_line(void **state)
{
    (void)state;
    struct arena arena = {0};
    char text[2000];
    for (size_t i = 0; i < sizeof text - 1; i++)
        text[i] = i % 7 == 6 || i % 31 == 30 ? ' ' : (char)('a' + i % 26);
    text[sizeof text - 1] = 0;
    size_t letters = 0, kept = 0;
    for (const char *at = text; *at; at++)
        letters += *at != ' ';
    for (double width = 1; width < 300; width *= 1.7) {
        const char *lines = broken(&arena, text, width);
        kept = 0;
        for (const char *at = lines; *at; at++)
            kept += *at != ' ' && *at != '|';
        assert_int_equal(kept, letters);
    }
    arena_release(&arena);
}

/* Greedy, by its definition: no line is wider than the limit, and none had room for the next word,
   or for the next letter of a word that is broken. */
static void test_lines_hold_what_fits(void **state)
{
    (void)state;
    struct arena arena = {0};
    char text[600];
    for (size_t i = 0; i < sizeof text - 1; i++)
        text[i] = i % 5 == 4 || i % 23 == 22 ? ' ' : "aWm0Zi~9:w"[i * i % 10];
    text[sizeof text - 1] = '\0';
    for (double limit = 20; limit < 500; limit *= 1.13) {
        struct text_runs runs = {.arena = &arena};
        text_runs_add_part(&runs, text, 200, plain, NULL); /* within a word */
        text_runs_add(&runs, text + 200, plain);
        struct text_lines lines = text_lines_break(&runs, resources, limit);
        for (size_t i = 0; i < lines.count; i++) {
            const struct text_line *line = &lines.items[i];
            const struct line_piece *last = &line->pieces[line->piece_count - 1];
            assert_true(line->width <= limit + 0.01);
            if (i + 1 == lines.count)
                break;
            const char *end = last->text + last->length;
            const char *next = lines.items[i + 1].pieces[0].text;
            size_t more = end == next ? 1 : (size_t)(next - end) + strcspn(next, " ");
            double wider = (double)pdf_text_width(resources, FACE_REGULAR, end, more) / 100;
            assert_true(line->width + wider > limit + 0.01 - 1e-9);
        }
    }
    arena_release(&arena);
}

static void test_runs_follow_one_another(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct text_runs runs = {.arena = &arena};
    struct text_style bold = {FACE_SEMIBOLD, 12, 0, INK_TEXT};
    text_runs_add(&runs, "plain ", plain);
    text_runs_add(&runs, "bold", bold);
    text_runs_add(&runs, " end", plain);
    struct text_lines lines = text_lines_break(&runs, resources, 1000);
    assert_int_equal(lines.count, 1);
    assert_int_equal(lines.items[0].piece_count, 3);
    double x = 0;
    for (size_t i = 0; i < 3; i++) {
        assert_close(lines.items[0].pieces[i].x, x, 1e-9);
        x += lines.items[0].pieces[i].width;
    }
    assert_close(lines.items[0].width, text_runs_width(&runs, resources), 1e-9);
    arena_release(&arena);
}

/* ---- pages */

static void add_strips(struct flow *flow, size_t count, double height)
{
    for (size_t i = 0; i < count; i++)
        flow_strip(flow, height);
}

static void test_kept_strips_move_together(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct flow flow = flow_in(&arena);
    add_strips(&flow, 7, 20); /* 140 of 160 */
    flow_space(&flow, 10);
    size_t first = flow.count;
    add_strips(&flow, 2, 15);
    flow_keep(&flow, first);
    struct page_plan plan = flow_paginate(&flow);
    assert_int_equal(plan.page_count, 2);
    assert_int_equal(plan.items[6].page, 0);
    assert_int_equal(plan.items[7].page, 1);
    assert_close(plan.items[7].y, small_page.top, 1e-9); /* no space before at the top */
    assert_int_equal(plan.items[8].page, 1);
    arena_release(&arena);
}

static void test_what_no_page_holds_is_broken(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct flow flow = flow_in(&arena);
    add_strips(&flow, 40, 20);
    flow_keep(&flow, 0);
    struct page_plan plan = flow_paginate(&flow);
    assert_int_equal(plan.page_count, 5);
    for (size_t i = 0; i < plan.count; i++)
        assert_true(plan.items[i].y + 20 <= small_page.bottom + 0.01);
    arena_release(&arena);
}

static void test_heads_and_groups_repeat(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct flow flow = flow_in(&arena);
    struct strip *head = flow_loose_strip(&flow, 12), *group = flow_loose_strip(&flow, 9);
    add_strips(&flow, 1, 12);
    flow.head = head;
    flow.continued = group;
    add_strips(&flow, 20, 20);
    struct page_plan plan = flow_paginate(&flow);
    size_t heads = 0, groups = 0;
    for (size_t i = 0; i < plan.count; i++) {
        heads += plan.items[i].strip == head;
        groups += plan.items[i].strip == group;
        if (plan.items[i].strip == head) {
            assert_close(plan.items[i].y, small_page.top, 1e-9);
            assert_ptr_equal(plan.items[i + 1].strip, group);
            assert_close(plan.items[i + 2].y, small_page.top + 21, 1e-9);
        }
    }
    assert_int_equal(heads, plan.page_count - 1);
    assert_int_equal(groups, plan.page_count - 1);
    arena_release(&arena);
}

static void test_no_line_alone(void **state)
{
    (void)state;
    struct arena arena = {0};
    for (size_t above = 0; above < 9; above++) {
        struct flow flow = flow_in(&arena);
        add_strips(&flow, above, 20);
        struct text_runs runs = {.arena = &arena};
        text_runs_add(&runs, "a b c d e", plain);
        struct text_lines lines = text_lines_break(&runs, resources, 1);
        assert_int_equal(lines.count, 5);
        flow_lines(&flow, &lines, &(struct text_setting){0, 20, 10});
        struct page_plan plan = flow_paginate(&flow);
        size_t on_first = 0;
        for (size_t i = above; i < plan.count; i++)
            on_first += plan.items[i].page == plan.items[above].page;
        assert_true(on_first == 5 || (on_first >= 2 && on_first <= 3));
    }
    arena_release(&arena);
}

static void test_a_drawing_shrinks_to_stay(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct drawing drawing = {.width = 100, .height = 100};
    for (int may = 0; may < 2; may++) {
        struct flow flow = flow_in(&arena);
        add_strips(&flow, 1, 70);
        struct strip *strip = flow_strip(&flow, 100);
        struct item item = {.kind = ITEM_DRAWING};
        item.drawing.drawing = &drawing;
        item.drawing.scale = 1;
        strip_item(&flow, strip, &item);
        strip->least_scale = may ? 0.86 : 0;
        struct page_plan plan = flow_paginate(&flow);
        assert_int_equal(plan.page_count, may ? 1 : 2);
        assert_close(strip->height, may ? 90 : 100, 1e-9);
        assert_close(strip->items[0].drawing.scale, may ? 0.9 : 1, 1e-9);
    }
    arena_release(&arena);
}

static struct page_plan paginate_rows(struct flow *flow, size_t count, double height, double space)
{
    for (size_t i = 0; i < count; i++) {
        flow_space(flow, space);
        flow_strip(flow, height);
    }
    return flow_paginate(flow);
}

/* On pages of 160 pt. */
static void test_closer_spaces_save_a_last_page(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct flow saved = flow_in(&arena), kept = flow_in(&arena);
    /* 8 * 17.5 + 7 * 3 = 161; with 0.85 of the spaces 157.85 */
    struct page_plan plan = paginate_rows(&saved, 8, 17.5, 3);
    assert_int_equal(plan.page_count, 1);
    assert_close(plan.items[1].y, small_page.top + 17.5 + 0.85 * 3, 1e-9);
    /* 9 * 18 = 162 without any space */
    plan = paginate_rows(&kept, 9, 18, 1);
    assert_int_equal(plan.page_count, 2);
    assert_close(plan.items[1].y, small_page.top + 18 + 1, 1e-9);
    arena_release(&arena);
}

/* Where closer spaces save no page, what was made smaller in trying is as large as before: with 0.7
   of the space 80 + 14 + 66 fill the page, but the last strip still needs another. */
static void test_a_drawing_grows_back(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct flow flow = flow_in(&arena);
    add_strips(&flow, 1, 80);
    flow_space(&flow, 20);
    struct strip *strip = flow_strip(&flow, 72);
    strip->least_scale = 0.9;
    add_strips(&flow, 1, 5);
    struct page_plan plan = flow_paginate(&flow);
    assert_int_equal(plan.page_count, 2);
    assert_int_equal(plan.items[1].page, 1);
    assert_close(strip->height, 72, 1e-9);
    arena_release(&arena);
}

/* ---- tables */

static struct composer composer_in(struct arena *arena, const struct document *document,
                                   const struct page_geometry *page)
{
    struct composer composer = {
        .document = document, .body = type_body, .measure = 200, .marks_units = 8.6};
    composer.flow = (struct flow){.arena = arena, .resources = resources, .page = page};
    return composer;
}

/* Where the decimal point of a text item stands; with no point, its right edge. */
static double point_of(const struct item *item)
{
    const char *point = memchr(item->text.text, '.', item->text.length);
    size_t length = point ? (size_t)(point - item->text.text) : item->text.length;
    return item->at.x +
           (double)pdf_text_width(resources, item->text.style.face, item->text.text, length) *
               item->text.style.size_pt / 1000;
}

static void test_decimal_points_in_one_line(void **state)
{
    (void)state;
    static const char *const numbers[][4] = {{"", "2", ".10", "µA"},
                                             {"<", "0", ".01", "µA"},
                                             {"", "1\u2009480", "", "MΩ"},
                                             {"", "−12", ".625", ""},
                                             {"≥", "100", "", "kΩ"}};
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Leakage", "µA", NULL, COLUMN_NUMBER, 30, 1},
                                            {"Text", NULL, NULL, COLUMN_TEXT, 0, 1}};
    struct arena arena = {0};
    struct document document = {.kind = DOCUMENT_RECORD, .arena = &arena, .continued = ""};
    struct table table = {.caption = "Caption."};
    sample_table_of(&document, &table, columns, 3, 5);
    table.row_count = 5;
    for (size_t i = 0; i < 5; i++) {
        table.rows[i].cells[0].text = "C1";
        table.rows[i].cells[1].figures =
            sample_figures(numbers[i][0], numbers[i][1], numbers[i][2], numbers[i][3]);
        table.rows[i].cells[1].strong = i == 2;
        table.rows[i].cells[2].text = "text";
    }
    struct page_geometry page = small_page;
    page.bottom = 1000;
    struct composer composer = composer_in(&arena, &document, &page);
    compose_table(&composer, "Table 1", &table);
    double point = 0, unit = 0;
    size_t found = 0;
    for (size_t i = 2; i < composer.flow.count; i++) {
        const struct strip *strip = composer.flow.strips[i];
        const struct item *number = NULL, *unit_item = NULL;
        for (size_t k = 0; k < strip->item_count; k++) {
            const struct item *item = &strip->items[k];
            if (item->kind != ITEM_TEXT)
                continue;
            if (memchr("0123456789<", item->text.text[0], 11) || item->text.text[0] == '\xE2')
                number = item;
            if (item->text.length >= 3 && strchr("A\xA9", item->text.text[item->text.length - 1]))
                unit_item = item;
        }
        assert_non_null(number);
        if (found++ == 0)
            point = point_of(number);
        assert_close(point_of(number), point, 0.005);
        if (unit_item && unit == 0)
            unit = unit_item->at.x;
        if (unit_item)
            assert_close(unit_item->at.x, unit, 0.005);
    }
    assert_int_equal(found, 5);
    assert_true(unit > point);
    arena_release(&arena);
}

/* Up to 12 rows; longer ones are parted, and so are short ones when much would stay empty. */
static void test_a_short_table_stays_whole(void **state)
{
    (void)state;
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Text", NULL, NULL, COLUMN_TEXT, 0, 1}};
    struct arena arena = {0};
    struct document document = {.kind = DOCUMENT_RECORD, .arena = &arena, .continued = ""};
    struct page_geometry page = small_page;
    page.bottom = 400;
    static const struct {
        size_t rows, above; /* strips of 40 points above the table */
        bool parted;
    } cases[] = {{12, 8, false}, {12, 5, true}, {13, 5, true}, {6, 7, false}};
    for (size_t n = 0; n < sizeof cases / sizeof *cases; n++) {
        size_t rows = cases[n].rows, above = cases[n].above;
        struct table table = {.caption = "Caption.", .remark = "A remark."};
        sample_table_of(&document, &table, columns, 2, rows);
        table.row_count = rows;
        for (size_t i = 0; i < rows; i++)
            table.rows[i].cells[0].text = table.rows[i].cells[1].text = "text";
        struct composer composer = composer_in(&arena, &document, &page);
        add_strips(&composer.flow, above, 40);
        compose_table(&composer, "Table 1", &table);
        struct page_plan plan = flow_paginate(&composer.flow);
        size_t first_page = 0;
        for (size_t i = above; i < plan.count; i++)
            first_page += plan.items[i].page == 0;
        if (cases[n].parted)
            assert_true(first_page >= 4);
        else
            assert_int_equal(first_page, 0);
        assert_int_equal(plan.page_count, 2);
    }
    arena_release(&arena);
}

static void test_a_row_higher_than_a_page_is_broken(void **state)
{
    (void)state;
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Text", NULL, NULL, COLUMN_TEXT, 0, 1}};
    struct arena arena = {0};
    struct document document = {.kind = DOCUMENT_RECORD, .arena = &arena, .continued = ""};
    struct table table = {.caption = "Caption."};
    char *text = arena_get(&arena, 9001);
    for (size_t i = 0; i < 9000; i++)
        text[i] = i % 6 == 5 ? ' ' : 'x';
    sample_table_of(&document, &table, columns, 2, 1);
    table.row_count = 1;
    table.rows[0].cells[0].text = "C1";
    table.rows[0].cells[1].text = text;
    struct composer composer = composer_in(&arena, &document, &small_page);
    compose_table(&composer, "Table 1", &table);
    struct page_plan plan = flow_paginate(&composer.flow);
    assert_true(plan.page_count > 2);
    for (size_t i = 0; i < plan.count; i++)
        assert_true(plan.items[i].y + plan.items[i].strip->height <= small_page.bottom + 0.01);
    arena_release(&arena);
}

int main(int argc, char **argv)
{
    (void)argc;
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_lines_end_where_they_may),
        cmocka_unit_test(test_every_character_is_on_a_line),
        cmocka_unit_test(test_lines_hold_what_fits),
        cmocka_unit_test(test_runs_follow_one_another),
        cmocka_unit_test(test_kept_strips_move_together),
        cmocka_unit_test(test_what_no_page_holds_is_broken),
        cmocka_unit_test(test_heads_and_groups_repeat),
        cmocka_unit_test(test_no_line_alone),
        cmocka_unit_test(test_a_drawing_shrinks_to_stay),
        cmocka_unit_test(test_closer_spaces_save_a_last_page),
        cmocka_unit_test(test_a_drawing_grows_back),
        cmocka_unit_test(test_decimal_points_in_one_line),
        cmocka_unit_test(test_a_short_table_stays_whole),
        cmocka_unit_test(test_a_row_higher_than_a_page_is_broken),
    };
    resources = pdf_resources_of(argv[0]);
    int failed = cmocka_run_group_tests(tests, NULL, NULL);
    pdf_resources_close(resources);
    return failed;
}
