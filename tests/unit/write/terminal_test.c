#include "golden.h"
#include "sample_document.h"

#include "write/text_width.h"
#include "write/writer.h"

static struct buffer sample_text(unsigned columns, bool bold)
{
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, 1);
    terminal_write(document, columns, bold, &out);
    sample_document_release(document);
    arena_release(&arena);
    return out;
}

static void sample_as_before(void **state)
{
    (void)state;
    struct buffer out = sample_text(80, false);
    golden_compare(&out, "tests/golden/write/sample.txt");
    buffer_release(&out);
}

static void lines_fit(void **state)
{
    (void)state;
    static const unsigned columns[] = {80, 100, 132};
    for (size_t i = 0; i < SAMPLE_COUNT(columns); i++) {
        struct buffer out = sample_text(columns[i], false);
        for (const char *line = buffer_string(&out); *line; line += strcspn(line, "\n") + 1) {
            size_t length = strcspn(line, "\n");
            if (text_columns(line, length) > columns[i])
                print_error("too long: %.*s\n", (int)length, line);
            assert_true(text_columns(line, length) <= columns[i]);
            assert_true(length == 0 || line[length - 1] != ' ');
        }
        buffer_release(&out);
    }
}

/* Bold adds its two sequences of ECMA-48 (SGR 1 and 0) and changes nothing else. */
static void bold_only_when_allowed(void **state)
{
    (void)state;
    struct buffer plain = sample_text(80, false), bold = sample_text(80, true), back = {0};
    assert_null(memchr(plain.data, '\x1b', plain.length));
    const char *text = buffer_string(&bold);
    size_t opened = 0, closed = 0;
    while (*text) {
        if (strncmp(text, "\x1b[1m", 4) == 0) {
            opened++;
            text += 4;
        } else if (strncmp(text, "\x1b[0m", 4) == 0) {
            closed++;
            text += 4;
        } else {
            buffer_byte(&back, *text++);
        }
    }
    assert_true(opened > 20);
    assert_int_equal(opened, closed);
    assert_string_equal(buffer_string(&back), buffer_string(&plain));
    buffer_release(&plain);
    buffer_release(&bold);
    buffer_release(&back);
}

/* Nothing in a job can steer the terminal: ESC, C1 (U+009B is CSI), BEL, bidirectional overrides.
 */
static void no_control_gets_through(void **state)
{
    (void)state;
    static char hostile[] = "\x1b[2J\x07 \xc2\x9b"
                            "31m \xe2\x80\xae back \x7f\xff";
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, 1);
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        struct exhibit *exhibit = (struct exhibit *)document_exhibit(node);
        if (!exhibit || exhibit->kind != EXHIBIT_TABLE)
            continue;
        exhibit->table.caption = hostile;
        for (size_t i = 0; i < exhibit->table.row_count; i++)
            exhibit->table.rows[i].cells[0].text = hostile;
    }
    sample_prose(document, "A note \x1b]0;title\x07 \xc2\x9b"
                           "1m.\n\n    code \x1b[1m\n");
    terminal_write(document, 80, false, &out);
    const char *text = buffer_string(&out);
    for (size_t i = 0; i < out.length; i++)
        assert_true((unsigned char)text[i] >= 0x20 || text[i] == '\n');
    assert_null(strstr(text, "\xc2\x9b"));
    assert_null(strstr(text, "\xe2\x80\xae"));
    assert_null(strchr(text, 0x7f));
    assert_null(strchr(text, '\xff'));
    buffer_release(&out);
    sample_document_release(document);
    arena_release(&arena);
}

static void prose_of_every_kind(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    struct document document = {.root = cmark_node_new(CMARK_NODE_DOCUMENT), .arena = &arena};
    sample_prose(&document,
                 "A *b* `c` [d](https://e.example)\nsame line.\n\n> quoted\n>\n> - in it\n\n"
                 "3. three\n4. four\n\n   more of four\n\n```\ncode  kept\n```\n\n***\n");
    terminal_write(&document, 80, false, &out);
    assert_string_equal(buffer_string(&out), "A b c d <https://e.example> same line.\n\n"
                                             "    quoted\n    - in it\n\n"
                                             " 3. three\n 4. four\n\n    more of four\n\n"
                                             "    code  kept\n\n----\n");
    buffer_release(&out);
    cmark_node_free(document.root);
    arena_release(&arena);
}

/* Deep nesting is no recursion and no line of a thousand spaces. */
static void deep_nesting(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0}, text = {0};
    struct document document = {.root = cmark_node_new(CMARK_NODE_DOCUMENT), .arena = &arena};
    for (int i = 0; i < 20000; i++)
        buffer_text(&text, "> ");
    buffer_text(&text, "deep");
    sample_prose(&document, buffer_string(&text));
    terminal_write(&document, 80, false, &out);
    assert_string_equal(buffer_string(&out), "                        deep\n");
    buffer_release(&out);
    buffer_release(&text);
    cmark_node_free(document.root);
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sample_as_before),       cmocka_unit_test(lines_fit),
        cmocka_unit_test(bold_only_when_allowed), cmocka_unit_test(no_control_gets_through),
        cmocka_unit_test(prose_of_every_kind),    cmocka_unit_test(deep_nesting),
    };
    return cmocka_run_group_tests_name("terminal", tests, NULL, NULL);
}
