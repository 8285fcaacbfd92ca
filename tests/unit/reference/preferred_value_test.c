/*
 * E series against IEC 60063 as listed.
 */
#include "reference/preferred_value.h"

#include "kit.h"

static void lists(void **state)
{
    (void)state;
    static const int e3[] = {10, 22, 47}, e6[] = {10, 15, 22, 33, 47, 68};
    static const int e12[] = {10, 12, 15, 18, 22, 27, 33, 39, 47, 56, 68, 82};
    static const int e24[] = {10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30,
                              33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91};
    static const int e48[] = {100, 105, 110, 115, 121, 127, 133, 140, 147, 154, 162, 169,
                              178, 187, 196, 205, 215, 226, 237, 249, 261, 274, 287, 301,
                              316, 332, 348, 365, 383, 402, 422, 442, 464, 487, 511, 536,
                              562, 590, 619, 649, 681, 715, 750, 787, 825, 866, 909, 953};
    static const struct {
        enum e_series series;
        const int *values;
        size_t size;
        double tolerance;
    } rows[] = {{E_SERIES_3, e3, 3, 40},
                {E_SERIES_6, e6, 6, 20},
                {E_SERIES_12, e12, 12, 10},
                {E_SERIES_24, e24, 24, 5},
                {E_SERIES_48, e48, 48, 2}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        assert_int_equal(e_series_size(rows[i].series), rows[i].size);
        assert_close(e_series_tolerance_percent(rows[i].series), rows[i].tolerance, 0);
        for (size_t k = 0; k < rows[i].size; k++)
            assert_int_equal(e_series_value(rows[i].series, k), rows[i].values[k]);
    }
    assert_close(e_series_tolerance_percent(E_SERIES_96), 1, 0);
    assert_close(e_series_tolerance_percent(E_SERIES_192), 0.5, 0);
}

/* Every second E192 is E96, every second E96 is E48; 920, not 919 (IEC 60063). Values of E96 and
   E192 as resistor lists print them. */
static void fine_series(void **state)
{
    (void)state;
    for (size_t i = 0; i < 96; i++)
        assert_int_equal(e_series_value(E_SERIES_96, i), e_series_value(E_SERIES_192, 2 * i));
    for (size_t i = 0; i < 48; i++)
        assert_int_equal(e_series_value(E_SERIES_48, i), e_series_value(E_SERIES_96, 2 * i));
    assert_int_equal(e_series_value(E_SERIES_192, 185), 920);
    assert_int_equal(e_series_value(E_SERIES_192, 191), 988);
    assert_int_equal(e_series_value(E_SERIES_192, 1), 101);
    assert_int_equal(e_series_value(E_SERIES_96, 95), 976);
    assert_int_equal(e_series_value(E_SERIES_96, 67), 499);
    for (size_t i = 1; i < 192; i++)
        assert_true(e_series_value(E_SERIES_192, i) > e_series_value(E_SERIES_192, i - 1));
}

static void nearest(void **state)
{
    (void)state;
    static const struct {
        enum e_series series;
        double value, nearest;
    } rows[] = {{E_SERIES_12, 50e3, 47e3},       {E_SERIES_24, 50e3, 51e3},
                {E_SERIES_6, 0.5e6, 0.47e6},     {E_SERIES_12, 9.6, 10},
                {E_SERIES_6, 0.02e-6, 0.022e-6}, {E_SERIES_12, 266, 270},
                {E_SERIES_3, 99e-12, 100e-12},   {E_SERIES_96, 4.98e3, 4.99e3}};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++)
        assert_relative(e_series_nearest(rows[i].series, rows[i].value), rows[i].nearest, 1e-9);
    assert_true(e_series_holds(E_SERIES_12, 270) && e_series_holds(E_SERIES_24, 4.7e-9));
    assert_false(e_series_holds(E_SERIES_24, 50e3) || e_series_holds(E_SERIES_24, 0.25e6));
    assert_false(e_series_holds(E_SERIES_24, 0) || e_series_holds(E_SERIES_24, -10));
    assert_int_equal(e_series_of(470e3), E_SERIES_3);
    assert_int_equal(e_series_of(330), E_SERIES_6);
    assert_int_equal(e_series_of(270), E_SERIES_12);
    assert_int_equal(e_series_of(51e3), E_SERIES_24);
    assert_int_equal(e_series_of(953), E_SERIES_48);
    assert_int_equal(e_series_of(9.2e3), E_SERIES_192);
    assert_int_equal(e_series_of(503e3), E_SERIES_COUNT);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(lists),
        cmocka_unit_test(fine_series),
        cmocka_unit_test(nearest),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
