/* Findings as JSON: numbers that read back the same, every key, what a copy leaves out. */
#include "kit.h"
#include "write/json.h"

#include <stdlib.h>
#include <string.h>

static void test_numbers_read_back_the_same(void **state)
{
    (void)state;
    /* shortest digits: those that Python 3 prints for the same double */
    static const struct {
        double value;
        const char *text;
    } rows[] = {
        {0, "0"},
        {1, "1"},
        {-3, "-3"},
        {0.1, "0.1"},
        {2.4e-6, "2.4e-6"},
        {1.0 / 3, "0.3333333333333333"},
        {0.1 + 0.2, "0.30000000000000004"},
        {1e22, "1e22"},
        {1e-320, "1e-320"},
        {5e-324, "5e-324"},
        {1.7976931348623157e308, "1.7976931348623157e308"},
        {9007199254740993e3, "9.007199254740993e18"},
        {123456.789, "123456.789"},
        {4.7e-9, "4.7e-9"},
    };
    struct buffer out = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        buffer_clear(&out);
        json_number(&out, rows[i].value);
        assert_true(strtod(buffer_string(&out), NULL) == rows[i].value);
        assert_string_equal(buffer_string(&out), rows[i].text);
    }
    /* a walk over doubles of all sizes */
    unsigned long long bits = 88172645463325252ULL;
    for (int i = 0; i < 200000; i++) {
        bits ^= bits << 13;
        bits ^= bits >> 7;
        bits ^= bits << 17;
        double value, back;
        memcpy(&value, &bits, sizeof value);
        if (!isfinite(value))
            continue;
        buffer_clear(&out);
        json_number(&out, value);
        back = strtod(buffer_string(&out), NULL);
        assert_memory_equal(&back, &value, sizeof value);
        char shorter[40]; /* one digit less never reads back the same */
        size_t digits = 0;
        for (const char *c = buffer_string(&out); *c && *c != 'e'; c++)
            digits += *c >= '0' && *c <= '9';
        if (i % 50 == 0 && digits > 2 && strchr(buffer_string(&out), 'e')) {
            snprintf(shorter, sizeof shorter, "%.*e", (int)digits - 2, value);
            assert_true(strtod(shorter, NULL) != value);
        }
    }
    buffer_clear(&out);
    json_number(&out, NAN);
    json_number(&out, INFINITY);
    assert_string_equal(buffer_string(&out), "nullnull");
    buffer_release(&out);
}

static void test_strings(void **state)
{
    (void)state;
    struct buffer out = {0};
    json_string(&out, "a\"b\\c\nd\te\x01 </script> \xC2\xB5");
    assert_string_equal(buffer_string(&out), "\"a\\\"b\\\\c\\nd\\te\\u0001 </script> \xC2\xB5\"");
    buffer_clear(&out);
    json_string(&out, NULL);
    assert_string_equal(buffer_string(&out), "null");
    buffer_release(&out);
}

static const char text[] =
    "job: T-1\nset:\n  maker: Pellworth\n  supply: transformer\n  mains: 230 V\n"
    "  frequency: 50 Hz\n  year: about 1951\nowner:\n  name: Zacharias Quill\n"
    "received: 2031-02-03\nreturned: 2031-03-19\nconditions:\n  bench: 20 C\n  working: 45 C\n"
    "private: |\n  between us\ninstruments:\n  leakage:\n    accuracy: 2 % + 0.02 uA\n"
    "    volts: 25 V, 100 V\n"
    "stages:\n  output:\n    valve: V4 6V6GT\n    supply: 262.5 V\n    cathode: R1\n"
    "    grid_leak: 470k\n    measured:\n      found: cathode 13 V\n"
    "cans:\n  CAN1:\n    holds: C2\n    done: reformed\n"
    "capacitors:\n  C1:\n    type: paper\n    marked: 0.02 uF 400 V\n    place: coupling\n"
    "    stage: output\n    source: 100 V\n    price: 12.50\n    readings:\n"
    "      - 100 V 60 s over 2000 M, 5 min 0.1 uA\n    done: kept\n"
    "  C2:\n    type: electrolytic\n    marked: 16 uF 450 V\n    place: reservoir\n"
    "    current: 60 mA\n    service: 300 V\n"
    "resistors:\n  R1: {marked: 250 ohm 1 W, measured: 266 ohm, done: kept}\n"
    "windings:\n  T2: {marked: 310 ohm, insulation: over 100 M, done: kept}\n"
    "valves:\n  V4: {tested: 78 %, done: kept}\n"
    "reforms:\n  - capacitor: C2\n    limiter: 47k\n    log:\n      - 50 V 30 s 170 uA\n"
    "    after_rest: 300 V 5 min 0.1 mA\n"
    "removed:\n  bag 1: C15\n";

static void write_copy(enum copy copy, struct arena *arena, struct buffer *out)
{
    struct diagnostics diagnostics = diagnostics_in(arena);
    struct source *source = arena_get(arena, sizeof *source);
    *source = (struct source){"somewhere/T-1.yaml", text, strlen(text)};
    struct shop *shop = arena_get(arena, sizeof *shop);
    *shop = shop_default();
    const struct job *job = job_read(source, arena, &diagnostics);
    assert_int_equal(diagnostics.errors, 0);
    diagnostic_add(&diagnostics, source, (struct position){1, 1}, DIAGNOSTIC_UNIT_OLD, NULL, "x");
    struct findings *findings = assess_job(job, shop, "0.1.0", arena, &diagnostics);
    json_write_findings(findings_for_copy(findings, copy, arena), out);
}

static void assert_has(struct buffer *out, const char *part)
{
    if (!strstr(buffer_string(out), part))
        fail_msg("no %s in %s", part, buffer_string(out));
}

static void test_findings(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    write_copy(COPY_SHOP, &arena, &out);
    const char *json = buffer_string(&out);
    assert_true(strncmp(json,
                        "{\"findings\":1,\"program\":\"0.1.0\",\"copy\":\"shop\",\"job\":\"T-1\"",
                        40) == 0);
    /* one line */
    assert_ptr_equal(strchr(json, '\n'), json + out.length - 1);
    static const char *const parts[] = {
        "\"maker\":\"Pellworth\"",
        "\"year_first\":1951",
        "\"name\":\"Zacharias Quill\"",
        "\"ref\":\"C1\"",
        "\"value_f\":2e-8",
        "\"rated_v\":400",
        "\"bound\":\"under\"",
        "\"price\":\"12.50\"",
        "\"private\":\"between us",
        "\"can\":\"CAN1\"",
        "\"key\":\"cathode current rise\"",
        "\"source\":\"policy\"",
        "\"trust\":\"shop policy\"",
        "\"effect\":{\"key\":\"grid_volts\"",
        "\"designed\":{\"judged\":true",
        "\"measured_ohm\":266",
        "\"insulation_bound\":\"over\"",
        "\"tested\":\"78 %\"",
        "\"limiter_ohm\":47000",
        "\"rule\":\"JAN-C-62\"",
        "\"policy\":{\"cathode_current_rise\":0.1",
        "\"path\":\"somewhere/T-1.yaml\"",
        "\"code\":\"unit-old\"",
        "\"originality\":{\"kept\":",
        "\"by_kind\":[",
        "\"removed\":[{\"name\":\"bag 1\"",
        "\"exponent\":null",
        "\"stages\":[\"output\"]",
    };
    for (size_t i = 0; i < sizeof parts / sizeof parts[0]; i++)
        assert_has(&out, parts[i]);
    assert_null(strstr(json, "nan"));
    assert_null(strstr(json, "inf,"));
    buffer_release(&out);
    arena_release(&arena);
}

static void test_a_sale_copy_is_silent(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    write_copy(COPY_SALE, &arena, &out);
    const char *json = buffer_string(&out);
    static const char *const parts[] = {"Quill", "between us", "12.50", "somewhere"};
    for (size_t i = 0; i < sizeof parts / sizeof parts[0]; i++)
        assert_null(strstr(json, parts[i]));
    assert_has(&out, "\"owner\":{\"name\":null");
    buffer_release(&out);
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_numbers_read_back_the_same),
        cmocka_unit_test(test_strings),
        cmocka_unit_test(test_findings),
        cmocka_unit_test(test_a_sale_copy_is_silent),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
