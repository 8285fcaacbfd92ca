#include "kit.h"

#include "quantity/quantity.h"

#include <string.h>
#include <time.h>

static void dates(void **state)
{
    (void)state;
    /* Days: GNU date, `date -u -d DAY +%s` / 86400. */
    static const struct {
        const char *text;
        bool good;
        long days;
    } rows[] = {
        {"1970-01-01", true, 0},
        {"2031-02-10", true, 22320},
        {" 2000-02-29 ", true, 11016},
        {"1951-07-04", true, -6756},
        {"1800-03-01", true, -62032},
        {"2100-02-28", true, 47540},
        {"2100-02-29", false, 0},
        {"2031-02-30", false, 0},
        {"2031-13-01", false, 0},
        {"2031-00-10", false, 0},
        {"2031-01-00", false, 0},
        {"2031-1-10", false, 0},
        {"10.02.2031", false, 0},
        {"2031/02/10", false, 0},
        {"2031-02-10x", false, 0},
        {"0031-02-10", false, 0},
        {"", false, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct date date = {0};
        bool good = date_read(&arena, rows[i].text, strlen(rows[i].text), &date);
        if (good != rows[i].good)
            print_error("'%s'\n", rows[i].text);
        assert_int_equal(good, rows[i].good);
        assert_int_equal(date.set, good);
        if (good)
            assert_int_equal(date_days(&date), rows[i].days);
    }
    arena_release(&arena);
}

/* Every day of four centuries against the C library's own calendar. */
static void days_agree_with_the_c_library(void **state)
{
    (void)state;
    struct arena arena = {0};
    for (long day = -62032; day < 84000; day++) {
        time_t seconds = (time_t)day * 86400;
        struct tm calendar;
        char text[16];
        gmtime_r(&seconds, &calendar);
        strftime(text, sizeof text, "%Y-%m-%d", &calendar);
        struct date date = {0};
        assert_true(date_read(&arena, text, 10, &date));
        assert_int_equal(date_days(&date), day);
    }
    arena_release(&arena);
}

static void years(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        bool good, about;
        int first, last;
    } rows[] = {
        {"1951", true, false, 1951, 1951},
        {"about 1951", true, true, 1951, 1951},
        {"About 1951", true, true, 1951, 1951},
        {"1948 to 1950", true, false, 1948, 1950},
        {"about 1948 to 1950", true, true, 1948, 1950},
        {"1948-1950", true, false, 1948, 1950},
        {"1948\xE2\x80\x93"
         "1950",
         true, false, 1948, 1950},
        {"1950 to 1948", false, false, 0, 0},
        {"19511", false, false, 0, 0},
        {"951", false, false, 0, 0},
        {"1951 or so", false, false, 0, 0},
        {"1951 to", false, false, 0, 0},
        {"about", false, false, 0, 0},
        {"0x1951", false, false, 0, 0},
        {"", false, false, 0, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct year_span span = {0};
        bool good = year_read(&arena, rows[i].text, strlen(rows[i].text), &span);
        if (good != rows[i].good)
            print_error("'%s'\n", rows[i].text);
        assert_int_equal(good, rows[i].good);
        assert_int_equal(span.about, rows[i].about);
        assert_int_equal(span.first, rows[i].first);
        assert_int_equal(span.last, rows[i].last);
        if (good)
            assert_string_equal(span.written, rows[i].text);
    }
    arena_release(&arena);
}

static void sizes(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        bool good;
        double diameter, width, height, length; /* mm */
    } rows[] = {
        {"22 mm x 51 mm", true, 22, 0, 0, 51},
        {"22 x 51 mm", true, 22, 0, 0, 51},
        {"22x51mm", true, 22, 0, 0, 51},
        {"22,5 x 51 mm", true, 22.5, 0, 0, 51},
        {"35 x 12 x 60 mm", true, 0, 35, 12, 60},
        {"35 \xC3\x97 12 \xC3\x97 60 mm", true, 0, 35, 12, 60},
        {"3.5 cm x 60 mm", true, 35, 0, 0, 60},
        {"1 in x 2 1/2 in", true, 25.4, 0, 0, 63.5},
        {"1/2 x 2 in", true, 12.7, 0, 0, 50.8},
        {"22 x 51", false, 0, 0, 0, 0},
        {"22 mm x 51", false, 0, 0, 0, 0},
        {"22 mm", false, 0, 0, 0, 0},
        {"22 x 51 V", false, 0, 0, 0, 0},
        {"0 x 51 mm", false, 0, 0, 0, 0},
        {"-22 x 51 mm", false, 0, 0, 0, 0},
        {"1 x 2 x 3 x 4 mm", false, 0, 0, 0, 0},
        {"22 x mm", false, 0, 0, 0, 0},
        {"x", false, 0, 0, 0, 0},
        {"", false, 0, 0, 0, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct dimensions size = {0};
        bool good = dimensions_read(&arena, rows[i].text, strlen(rows[i].text), &size);
        if (good != rows[i].good)
            print_error("'%s'\n", rows[i].text);
        assert_int_equal(good, rows[i].good);
        assert_close(size.diameter_m * 1e3, rows[i].diameter, 1e-9);
        assert_close(size.width_m * 1e3, rows[i].width, 1e-9);
        assert_close(size.height_m * 1e3, rows[i].height, 1e-9);
        assert_close(size.length_m * 1e3, rows[i].length, 1e-9);
    }
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(dates),
        cmocka_unit_test(days_agree_with_the_c_library),
        cmocka_unit_test(years),
        cmocka_unit_test(sizes),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
