/* The signs of print in a text as typed. */
#include "kit.h"
#include "report/typography.h"

#define NB "\xC2\xA0"

static void signs(void **state)
{
    (void)state;
    static const struct {
        const char *typed, *printed;
    } rows[] = {
        {"the maker's name", "the maker’s name"},
        {"C4 has gone from 0.12 uA to 0.44uA", "C4 has gone from 0.12" NB "µA to 0.44µA"},
        {"13.7 V at its cathode, 38 C", "13.7" NB "V at its cathode, 38" NB "C"},
        {"insulation 2 MΩ, 500 V, 5 %", "insulation 2" NB "MΩ, 500" NB "V, 5" NB "%"},
        {"12 W/(m² K)", "12" NB "W/(m² K)"},
        {"75 µA (3 √(CV))", "75" NB "µA (3" NB "√(CV))"},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        assert_string_equal(text_typeset(&arena, rows[i].typed), rows[i].printed);
    arena_release(&arena);
}

static void all_else_is_as_typed(void **state)
{
    (void)state;
    static const char *const texts[] = {
        "",          "'as found'", "the owners' own", "5' long", "V4 6V6GT", "3 makers",
        "2 minutes", "U 12",       "14 C7",           "uA",
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++)
        assert_ptr_equal(text_typeset(&arena, texts[i]), texts[i]);
    assert_null(text_typeset(&arena, NULL));
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(signs),
        cmocka_unit_test(all_else_is_as_typed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
