#include "golden.h"
#include "sample_document.h"

#include "write/escape.h"
#include "write/markdown_table.h"
#include "write/text_width.h"
#include "write/writer.h"

static struct buffer sample_markdown(unsigned copies)
{
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, copies);
    markdown_write(document, &out);
    sample_document_release(document);
    arena_release(&arena);
    return out;
}

static void sample_as_before(void **state)
{
    (void)state;
    struct buffer out = sample_markdown(1);
    golden_compare(&out, "tests/golden/write/sample.md");
    buffer_release(&out);
}

/* What cmark reads is what was written: the text comes back as it is, as a paragraph. */
static void check_survival(const char *written)
{
    struct buffer out = {0}, back = {0};
    escape_markdown(&out, written);
    cmark_node *node = cmark_parse_document(out.data, out.length, CMARK_OPT_DEFAULT);
    cmark_node *paragraph = cmark_node_first_child(node);
    assert_int_equal(cmark_node_get_type(paragraph), CMARK_NODE_PARAGRAPH);
    assert_null(cmark_node_next(paragraph));
    /* nothing but text: no link, code, emphasis or raw HTML */
    for (cmark_node *part = cmark_node_first_child(paragraph); part; part = cmark_node_next(part)) {
        if (cmark_node_get_type(part) != CMARK_NODE_TEXT)
            print_error("'%s' became %s\n", written, cmark_node_get_type_string(part));
        assert_int_equal(cmark_node_get_type(part), CMARK_NODE_TEXT);
        buffer_text(&back, cmark_node_get_literal(part));
    }
    assert_string_equal(buffer_string(&back), written);
    cmark_node_free(node);
    buffer_release(&out);
    buffer_release(&back);
}

static void texts_survive_the_parser(void **state)
{
    (void)state;
    static const char *const texts[] = {"<script>alert(1)</script>",
                                        "*not* _emphasis_ `nor code`",
                                        "[link](http://x.example)",
                                        "![image](x)",
                                        "# no heading",
                                        "#no heading either",
                                        "> no quote",
                                        "- no list",
                                        "+ no list",
                                        "1. no list",
                                        "27) no list",
                                        "--- no rule",
                                        "---",
                                        "===",
                                        "a & b &amp; c &#65;",
                                        "back\\slash \\* end\\",
                                        "1.5 uF",
                                        "-3 %",
                                        "~~kept~~ |pipes|",
                                        "<https://x.example>",
                                        "C7 < C8 > C9",
                                        "five ** stars",
                                        "&copy",
                                        "<!-- comment",
                                        "![]()",
                                        "2.",
                                        "-"};
    for (size_t i = 0; i < SAMPLE_COUNT(texts); i++)
        check_survival(texts[i]);
}

static void every_pair_survives_the_parser(void **state)
{
    (void)state;
    for (char first = '!'; first <= '~'; first++)
        for (char second = ' '; second <= '~'; second++) {
            char beginning[] = {first, second, 'x', '\0'};
            char within[] = {'x', ' ', first, second, 'x', first, '\0'};
            check_survival(beginning);
            check_survival(within);
        }
}

static void needless_backslashes_stay_away(void **state)
{
    (void)state;
    static const char *const plain[] = {"Marsh & Tolley",
                                        "< 0.01",
                                        "−3.1 %",
                                        "+6.1 V",
                                        "0.05 µF",
                                        "2031-05-20",
                                        "shell in place, signed inside the end!"};
    for (size_t i = 0; i < SAMPLE_COUNT(plain); i++) {
        struct buffer out = {0};
        escape_markdown(&out, plain[i]);
        assert_string_equal(buffer_string(&out), plain[i]);
        buffer_release(&out);
    }
}

/* In a pager with fixed pitch all pipes of a table stand below each other. */
static void pipes_line_up(void **state)
{
    (void)state;
    struct buffer out = sample_markdown(3);
    const char *line = buffer_string(&out);
    size_t width = 0, tables = 0, rows = 0;
    for (; *line; line += strcspn(line, "\n") + 1) {
        size_t length = strcspn(line, "\n");
        if (*line != '|') {
            width = 0;
            continue;
        }
        size_t here = text_columns(line, length);
        tables += width == 0;
        rows++;
        assert_true(width == 0 || here == width);
        width = here;
    }
    assert_int_equal(tables, 6);
    assert_true(rows > 66);
    buffer_release(&out);
}

/* grep for a part gives its line, with place and outcome. */
static void one_line_a_part(void **state)
{
    (void)state;
    struct buffer out = sample_markdown(1);
    const char *text = buffer_string(&out), *line = strstr(text, "\n| C18 ");
    assert_non_null(line);
    struct arena arena = {0};
    const char *copy = arena_text(&arena, line + 1, strcspn(line + 1, "\n"));
    assert_non_null(strstr(copy, "decoupling"));
    assert_non_null(strstr(copy, "conditional fail"));
    assert_non_null(strstr(copy, "restuffed"));
    arena_release(&arena);
    buffer_release(&out);
}

static void hostile_cells_stay_cells(void **state)
{
    (void)state;
    struct column columns[] = {{"a|b", NULL, NULL, COLUMN_REF, 0, 1},
                               {"c\nd", NULL, NULL, COLUMN_TEXT, 0, 1}};
    struct cell cells[] = {{.text = "x|y\\|z`"}, {.text = "line\nbreak\r\n| more"}};
    struct table_row row = {.cells = cells};
    struct table table = {.columns = columns, .column_count = 2, .rows = &row, .row_count = 1};
    struct buffer out = {0};
    markdown_table(&table, &out);
    assert_string_equal(buffer_string(&out), "| a\\|b        | c d                 |\n"
                                             "| ----------- | ------------------- |\n"
                                             "| x\\|y\\\\\\|z\\` | line break  \\| more |\n");
    buffer_release(&out);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sample_as_before),
        cmocka_unit_test(texts_survive_the_parser),
        cmocka_unit_test(every_pair_survives_the_parser),
        cmocka_unit_test(needless_backslashes_stay_away),
        cmocka_unit_test(pipes_line_up),
        cmocka_unit_test(one_line_a_part),
        cmocka_unit_test(hostile_cells_stay_cells),
    };
    return cmocka_run_group_tests_name("markdown", tests, NULL, NULL);
}
