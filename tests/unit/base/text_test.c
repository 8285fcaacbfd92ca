/* UTF-8, buffers, hashes, arenas. */
#include "base/arena.h"
#include "base/buffer.h"
#include "base/hash.h"
#include "base/utf8.h"
#include "kit.h"

#include <string.h>

/* Well-formed sequences: The Unicode Standard 15, table 3-7, first and last of each row;
   ill-formed: the same section's examples (C0 AF, E0 9F 80, ED A0 80, F4 91 92 93, cut sequences).
 */
static const struct {
    const char *bytes;
    uint32_t code_point;
} utf8_rows[] = {
    {"\x7F", 0x7F},
    {"\xC2\x80", 0x80},
    {"\xDF\xBF", 0x7FF},
    {"\xE0\xA0\x80", 0x800},
    {"\xE0\xBF\xBF", 0xFFF},
    {"\xEC\xBF\xBF", 0xCFFF},
    {"\xED\x9F\xBF", 0xD7FF},
    {"\xEE\x80\x80", 0xE000},
    {"\xEF\xBF\xBF", 0xFFFF},
    {"\xF0\x90\x80\x80", 0x10000},
    {"\xF3\xBF\xBF\xBF", 0xFFFFF},
    {"\xF4\x8F\xBF\xBF", 0x10FFFF},
    {"\xC0\xAF", UTF8_ILL_FORMED},
    {"\xE0\x9F\x80", UTF8_ILL_FORMED},
    {"\xED\xA0\x80", UTF8_ILL_FORMED},
    {"\xF4\x91\x92\x93", UTF8_ILL_FORMED},
    {"\xE2\x82", UTF8_ILL_FORMED},
    {"\x80", UTF8_ILL_FORMED},
    {"\xFF", UTF8_ILL_FORMED},
};

static void utf8_is_read_and_written(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof utf8_rows / sizeof *utf8_rows; i++) {
        const char *start = utf8_rows[i].bytes, *end = start + strlen(start), *cursor = start;
        assert_int_equal(utf8_next(&cursor, end), utf8_rows[i].code_point);
        if (utf8_rows[i].code_point == UTF8_ILL_FORMED) {
            assert_ptr_equal(cursor, start + 1);
            continue;
        }
        assert_ptr_equal(cursor, end);
        struct buffer again = {0};
        utf8_append(&again, utf8_rows[i].code_point);
        assert_string_equal(buffer_string(&again), start);
        buffer_release(&again);
    }
}

/* U+10437 is D801 DC37: The Unicode Standard 15, section 3.9, table 3-5 (UTF-16 bit distribution).
 */
static void utf16_has_surrogates(void **state)
{
    (void)state;
    struct buffer out = {0};
    utf8_append_utf16(&out, 0x10437);
    utf8_append_utf16(&out, 0x20AC);
    assert_int_equal(out.length, 6);
    assert_memory_equal(out.data, "\xD8\x01\xDC\x37\x20\xAC", 6);
    buffer_release(&out);
}

/* FIPS 180-4 example messages: "abc", and the 448-bit one. */
static void hashes_are_sha256(void **state)
{
    (void)state;
    static const struct {
        const char *message, *digest;
    } rows[] = {
        {"abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"},
        {"abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
         "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1"},
    };
    for (size_t i = 0; i < 2; i++) {
        struct hash hash = hash_of(rows[i].message, strlen(rows[i].message));
        char text[HASH_TEXT_BYTES];
        hash_text(&hash, text);
        assert_string_equal(text, rows[i].digest);
    }
}

/* Against the C library's own printf, trailing zeros taken off. */
static void fixed_numbers_agree_with_printf(void **state)
{
    (void)state;
    static const double values[] = {0,     0.5,    -0.25,     1234.5678, 0.001,  -0.0004, 99.9996,
                                    100.0, 719.95, 0.1 + 0.2, 1e8,       -12.34, 0.04,    3};
    for (size_t i = 0; i < sizeof values / sizeof *values; i++)
        for (unsigned decimals = 0; decimals <= 3; decimals++) {
            char expected[64];
            snprintf(expected, sizeof expected, "%.*f", (int)decimals, values[i]);
            if (strchr(expected, '.')) {
                char *end = expected + strlen(expected);
                while (end[-1] == '0')
                    *--end = '\0';
                if (end[-1] == '.')
                    *--end = '\0';
            }
            if (strcmp(expected, "-0") == 0)
                strcpy(expected, "0");
            struct buffer out = {0};
            buffer_fixed(&out, values[i], decimals);
            /* printf rounds halves to even where the double is exact; both neighbours are right */
            if (fabs(values[i] * pow(10, decimals) - floor(values[i] * pow(10, decimals)) - 0.5) >
                1e-9)
                assert_string_equal(buffer_string(&out), expected);
            buffer_release(&out);
        }
}

static void buffers_grow(void **state)
{
    (void)state;
    struct buffer out = {0};
    for (int i = 0; i < 1000; i++)
        buffer_decimal(&out, i - 500);
    buffer_print(&out, "%s", "end");
    buffer_hex(&out, 0xBEEF, 6);
    buffer_be16(&out, 0x4142);
    assert_memory_equal(out.data, "-500-499", 8);
    assert_string_equal(buffer_string(&out) + out.length - 11, "end00BEEFAB");
    buffer_clear(&out);
    buffer_decimal(&out, -9223372036854775807LL - 1);
    assert_string_equal(buffer_string(&out), "-9223372036854775808");
    buffer_release(&out);
    assert_null(out.data);
}

/* Against the C library's own printf: texts joined, other formats, longer than any first guess. */
static void printed_texts_are_those_of_printf(void **state)
{
    (void)state;
    static const char *const joining[] = {"",       "plain", "%s",     "%s.%s",  "%s%s%s",
                                          "a%sb%s", "%s/",   "%s.%sx", "(%s) %s"};
    static const char *const other[] = {"%s %d%%", "%.2s %04d", "%%%s", "%10s|%d"};
    static const size_t lengths[] = {0, 1, 20, 126, 127, 128, 129, 254, 255, 256, 257, 5000};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof lengths / sizeof *lengths; i++) {
        char *text = arena_get(&arena, lengths[i] + 1), expected[20000];
        memset(text, 'x', lengths[i]);
        for (size_t j = 0; j < sizeof joining / sizeof *joining; j++) {
            snprintf(expected, sizeof expected, joining[j], text, "yz", text);
            assert_string_equal(arena_print(&arena, joining[j], text, "yz", text), expected);
        }
        for (size_t j = 0; j < sizeof other / sizeof *other; j++) {
            struct buffer out = {0};
            snprintf(expected, sizeof expected, other[j], text, -17);
            assert_string_equal(arena_print(&arena, other[j], text, -17), expected);
            buffer_text(&out, "before");
            buffer_print(&out, other[j], text, -17);
            assert_int_equal(out.length, strlen("before") + strlen(expected));
            assert_string_equal(buffer_string(&out) + strlen("before"), expected);
            buffer_release(&out);
        }
    }
    arena_release(&arena);
}

static void arenas_hold_pieces_apart(void **state)
{
    (void)state;
    struct arena arena = {0};
    char *pieces[400];
    for (size_t i = 0; i < 400; i++) {
        pieces[i] = arena_get(&arena, i * 37 % 20000);
        memset(pieces[i], (int)i & 255, i * 37 % 20000);
        assert_int_equal((uintptr_t)pieces[i] % 16, 0);
    }
    for (size_t i = 0; i < 400; i++)
        for (size_t j = 0; j < i * 37 % 20000; j++)
            assert_int_equal((unsigned char)pieces[i][j], i & 255);
    size_t capacity = 0;
    int *numbers = NULL;
    for (int i = 0; i < 100; i++) {
        numbers = arena_grow(&arena, numbers, (size_t)i, &capacity, sizeof *numbers);
        numbers[i] = i * i;
    }
    assert_int_equal(numbers[99], 9801);
    assert_string_equal(arena_print(&arena, "%d-%s", 7, "x"), "7-x");
    assert_null(arena_copy(&arena, NULL));
    arena_release(&arena);
    assert_null(arena.newest);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(utf8_is_read_and_written),
        cmocka_unit_test(utf16_has_surrogates),
        cmocka_unit_test(hashes_are_sha256),
        cmocka_unit_test(fixed_numbers_agree_with_printf),
        cmocka_unit_test(buffers_grow),
        cmocka_unit_test(printed_texts_are_those_of_printf),
        cmocka_unit_test(arenas_hold_pieces_apart),
    };
    return cmocka_run_group_tests_name("text", tests, NULL, NULL);
}
