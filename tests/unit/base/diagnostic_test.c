/* Diagnostics: what a person sees. */
#include "base/diagnostic.h"
#include "kit.h"

#include <string.h>

static const struct source file = {"job.yaml", "one: 1\n\ttwo: \xC2\xB5 x\nthree\r\n", 24};

static void a_diagnostic_shows_line_and_caret(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct diagnostics list = diagnostics_in(&arena);
    diagnostic_add(&list, &file, (struct position){2, 9}, DIAGNOSTIC_UNKNOWN_KEY,
                   "nearest key: two", "unknown key '%s'", "x");
    diagnostic_add(&list, &file, (struct position){1, 1}, DIAGNOSTIC_UNIT_OLD, NULL, "a note");
    diagnostic_add(&list, &file, (struct position){0, 0}, DIAGNOSTIC_FILE_EMPTY, NULL, "whole");
    diagnostic_add(&list, NULL, (struct position){0, 0}, DIAGNOSTIC_JOB_NAME, NULL, "no file");
    diagnostics_sort(&list);
    struct buffer out = {0};
    diagnostics_format(&list, &out);
    assert_string_equal(buffer_string(&out), "gridleak: error: no file\n"
                                             "job.yaml: error: whole\n"
                                             "job.yaml:1:1: note: a note\n"
                                             "    one: 1\n"
                                             "    ^\n"
                                             "job.yaml:2:9: error: unknown key 'x'\n"
                                             "    \ttwo: \xC2\xB5 x\n"
                                             "    \t       ^\n"
                                             "    nearest key: two\n");
    assert_int_equal(list.errors, 3);
    assert_string_equal(diagnostic_code_text(DIAGNOSTIC_UNKNOWN_KEY), "unknown-key");
    buffer_release(&out);
    arena_release(&arena);
}

static void lists_are_bounded(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct diagnostics list = diagnostics_in(&arena);
    for (unsigned i = 0; i < 1000; i++)
        diagnostic_add(&list, &file, (struct position){1, 1}, DIAGNOSTIC_UNKNOWN_KEY, NULL, "%u",
                       i);
    assert_int_equal(list.count, 200);
    assert_int_equal(list.errors, 1000);
    arena_release(&arena);
}

static void broken_and_long_lines_are_shown(void **state)
{
    (void)state;
    char text[600];
    memset(text, 'a', sizeof text);
    text[0] = '\x01';
    text[1] = '\xB5';
    const struct source wide = {"w", text, sizeof text};
    struct arena arena = {0};
    struct diagnostics list = diagnostics_in(&arena);
    diagnostic_add(&list, &wide, (struct position){1, 2}, DIAGNOSTIC_NOT_UTF8, NULL, "byte");
    diagnostic_add(&list, &wide, (struct position){1, 500}, DIAGNOSTIC_NOT_UTF8, NULL, "far");
    diagnostic_add(&list, &wide, (struct position){9, 1}, DIAGNOSTIC_NOT_UTF8, NULL, "no line");
    struct buffer out = {0};
    diagnostics_format(&list, &out);
    assert_non_null(strstr(buffer_string(&out), "    ?\?aaa"));
    for (const char *line = buffer_string(&out); line && *line;) {
        const char *end = strchr(line, '\n');
        assert_true(end - line < 200);
        line = end + 1;
    }
    buffer_release(&out);
    arena_release(&arena);
}

static void nearest_words_are_near(void **state)
{
    (void)state;
    static const char *const keys[] = {"readings", "reason", "rest", "feed", NULL};
    assert_string_equal(nearest_word("readigns", keys), "readings");
    assert_string_equal(nearest_word("Reason", keys), "reason");
    assert_null(nearest_word("capacitor", keys));
    /* What the hand does most counts least. */
    static const char *const refs[] = {"L1", "C1", "C11", "C19", "R1", "R10", "R11", NULL};
    assert_string_equal(nearest_word("C91", refs), "C19");
    assert_string_equal(nearest_word("Rll", refs), "R11");
    assert_string_equal(nearest_word("RlO", refs), "R10");
    static const char *const meters[] = {"meter", "megger", NULL};
    assert_string_equal(nearest_word("meger", meters), "megger");
    assert_null(nearest_word("0123456789012345678901234567890123456789012345", keys));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_diagnostic_shows_line_and_caret),
        cmocka_unit_test(lists_are_bounded),
        cmocka_unit_test(broken_and_long_lines_are_shown),
        cmocka_unit_test(nearest_words_are_near),
    };
    return cmocka_run_group_tests_name("diagnostic", tests, NULL, NULL);
}
