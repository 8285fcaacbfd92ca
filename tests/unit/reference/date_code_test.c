/* Date codes against codes whose meaning is published; the source stands beside each row. */
#include "reference/date_code.h"

#include <string.h>

#include "kit.h"

struct row {
    const char *stamp;
    int year, month, week;
};

static bool means(const struct date_code *code, const struct row *row)
{
    for (size_t i = 0; i < code->count; i++)
        if (code->readings[i].year == row->year && code->readings[i].month == row->month &&
            code->readings[i].week == row->week)
            return true;
    return false;
}

static void published_codes(void **state)
{
    (void)state;
    static const struct row rows[] = {
        /* British letters, on dated amplifiers of the 1960s (second-hand) */
        {"WH", 1965, 8, 0},
        {"XE", 1966, 5, 0},
        {"YF", 1967, 6, 0},
        {"WD", 1965, 4, 0},
        {"XB", 1966, 2, 0},
        {"SC", 1961, 3, 0},
        {"TL", 1962, 11, 0},
        {"JT", 1962, 9, 0}, /* month first */
        {"YB", 1967, 2, 0},
        {"L6", 1966, 12, 0},
        /* Hunts, key word WHITSUNDAY (second-hand) */
        {"IYT", 1964, 0, 30},
        {"YIU", 1966, 0, 3},
        {"YIW", 1961, 0, 3},
        {"ITD", 1963, 0, 48},
        {"D YW", 1968, 0, 1},
        /* EIA, year and week (recalled) */
        {"235614", 1956, 0, 14},
        {"235-614", 1956, 0, 14},
        {"2355614", 1956, 0, 14},
        {"EIA 606 5231", 1952, 0, 31},
        {"614", 1956, 0, 14},
        {"5614", 1956, 0, 14},
        /* plain: DEC 68 is printed so (second-hand) */
        {"DEC 68", 1968, 12, 0},
        {"3 51", 1951, 3, 0},
        {"March 1951", 1951, 3, 0},
        {"2/51", 1951, 2, 0},
        {"1951", 1951, 0, 0},
        {"1951-03", 1951, 3, 0},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct date_code code;
        if (!date_code_read(rows[i].stamp, &code) || !means(&code, &rows[i]))
            fail_msg("%s does not mean %d", rows[i].stamp, rows[i].year);
        for (size_t k = 1; k < code.count; k++)
            assert_true(code.readings[k - 1].year <= code.readings[k].year);
    }
}

static void a_single_figure_leaves_the_decade_open(void **state)
{
    (void)state;
    struct date_code code;
    assert_true(date_code_read("235614", &code));
    assert_true(code.decade_open);
    assert_int_equal(code.count, 5); /* 1936, 1946 ... 1976 */
    assert_memory_equal(code.maker_code, "235", 3);
    assert_true(date_code_read("2355614", &code));
    assert_false(code.decade_open);
    assert_int_equal(code.count, 1);
}

static void no_date(void **state)
{
    (void)state;
    static const char *const stamps[] = {"",         "Q4",  "13 51",  "ABCD",    "235600",
                                         "?",        "OO",  "235654", "TCC 51",  "1890",
                                         "99999999", "WHX", "800",    "FEB 51 X"};
    for (size_t i = 0; i < sizeof stamps / sizeof *stamps; i++) {
        struct date_code code = {.count = 77};
        if (date_code_read(stamps[i], &code))
            fail_msg("%s is taken as %d", stamps[i], code.readings[0].year);
        assert_int_equal(code.count, 77);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_codes),
        cmocka_unit_test(a_single_figure_leaves_the_decade_open),
        cmocka_unit_test(no_date),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
