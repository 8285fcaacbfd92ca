/*
 * The valve book: names, and rows spot-checked against the manuals named beside them.
 */
#include "reference/valve_book.h"

#include <string.h>

#include "kit.h"

static const struct valve_row *row_of(const char *type, const char *name)
{
    size_t count;
    const struct valve_row *rows = valve_rows_of(type, &count);
    for (size_t i = 0; rows && i < count; i++)
        if (strcmp(rows[i].name, name) == 0)
            return &rows[i];
    print_error("no row %s %s\n", type, name);
    fail();
    return NULL;
}

static void rows_as_printed(void **state)
{
    (void)state;
    /* RCA RC-19: 250 V, 250 V, -12.5 V, 45 mA, 4.5 mA, 4100 umho, 50 000 ohm, 12 W, 2 W */
    const struct valve_row *r = row_of("6V6GT", "A1-250");
    assert_int_equal(r->kind, VALVE_BEAM);
    assert_close(r->va_v, 250, 0);
    assert_close(r->vg2_v, 250, 0);
    assert_close(r->vg1_v, -12.5, 0);
    assert_close(r->ia_a, 45e-3, 1e-12);
    assert_close(r->ig2_a, 4.5e-3, 1e-12);
    assert_close(r->gm_s, 4.1e-3, 1e-12);
    assert_close(r->ra_ohm, 50e3, 0);
    assert_close(r->pa_max_w, 12, 0);
    assert_close(r->pg2_max_w, 2, 0);
    assert_close(r->grid_leak_max_cathode_ohm, 500e3, 0);
    assert_true(isnan(r->mu));
    assert_int_equal(r->row_trust, TRUST_SEEN);
    /* Philips/Mullard EL84, 1-1969: 48 + 5.5 mA, 11.3 mA/V, 38 k, 12 W, 1 M with cathode bias */
    r = row_of("EL84", "A-250");
    assert_int_equal(r->kind, VALVE_OUTPUT_PENTODE);
    assert_close(r->vg1_v, -7.3, 0);
    assert_close(r->ia_a, 48e-3, 1e-12);
    assert_close(r->gm_s, 11.3e-3, 1e-12);
    assert_close(r->grid_leak_max_cathode_ohm, 1e6, 0);
    /* Telefunken EF804S: 250 V and 140 V less 1.9 V at 500 ohm, 3.2 + 0.6 mA */
    r = row_of("EF804S", "250/140 Rk500");
    assert_close(r->va_v, 248.1, 0);
    assert_close(r->ia_a, 3.2e-3, 1e-12);
    assert_true(isnan(r->grid_leak_max_fixed_ohm));
    /* a row only recalled says so; where issues of the sheet disagree too */
    r = row_of("UL41", "A-165");
    assert_int_equal(r->row_trust, TRUST_RECALLED);
    assert_true(r->doubtful);
}

/* Every row: a type, a name of its own within the type, anode volts and current, a source; the rows
   of a type together and of one kind. */
static void every_row_is_whole(void **state)
{
    (void)state;
    size_t count;
    const struct valve_row *rows = valve_book(&count);
    assert_int_equal(count, 189);
    size_t types = 0;
    for (size_t i = 0; i < count; i++) {
        const struct valve_row *r = &rows[i];
        bool triode = valve_kind_is_triode(r->kind);
        assert_true(r->va_v > 0 && r->ia_a > 0 && r->vg1_v <= 0 && r->source[0]);
        assert_true(triode == isnan(r->vg2_v) && triode == isnan(r->ig2_a));
        assert_true(triode || r->ig2_a < r->ia_a);
        size_t own;
        const struct valve_row *first = valve_rows_of(r->type, &own);
        assert_true(first && first <= r && r < first + own);
        types += first == r;
        for (const struct valve_row *other = first; other < r; other++) {
            assert_string_not_equal(other->name, r->name);
            assert_int_equal(other->kind, r->kind);
        }
    }
    assert_int_equal(types, 73);
}

static void names(void **state)
{
    (void)state;
    static const char *const pairs[][2] = {{"6V6", "6V6GT"},
                                           {"6v6gt", "6V6GT"},
                                           {"6 V6-GT", "6V6GT"},
                                           {"ECC83", "12AX7"},
                                           {"ecc 83", "12AX7"},
                                           {"6BQ5", "EL84"},
                                           {"12AX7A", "12AX7"},
                                           {"6BM8 pentode", "ECL82 pentode"},
                                           {"ECL82 Triode", "ECL82 triode"},
                                           {"PCL86 triode", "ECL86 triode"},
                                           {"EABC80", "EABC80 triode"},
                                           {"6AK8", "EABC80 triode"},
                                           {"ECC83 triode", "12AX7"},
                                           {"EL84 pentode", "EL84"},
                                           {"6V6 triode-conn", "6V6GT triode-conn"},
                                           {"6V6GT triode connected", "6V6GT triode-conn"},
                                           {"6SN7GT", "6SN7"},
                                           {"EF94", "6AU6"},
                                           {"UX-245", "45"},
                                           {"2A5", "42"},
                                           {"6K7G", "6K7"},
                                           {"DL92", "3S4"}};
    for (size_t i = 0; i < sizeof pairs / sizeof pairs[0]; i++) {
        size_t count;
        const struct valve_row *rows = valve_rows_of(pairs[i][0], &count);
        if (!rows)
            print_error("%s is not in the book\n", pairs[i][0]);
        assert_non_null(rows);
        assert_string_equal(rows->type, pairs[i][1]);
    }
    static const char *const strangers[] = {"6SA7",
                                            "",
                                            "ECL82",
                                            "triode",
                                            "12AX7 pentode",
                                            "EL84 triode",
                                            "6L6GC",
                                            "EL84 triode-conn",
                                            "a name far longer than that of any valve ever made"};
    for (size_t i = 0; i < sizeof strangers / sizeof strangers[0]; i++) {
        size_t count = 9;
        assert_null(valve_rows_of(strangers[i], &count));
        assert_int_equal(count, 0);
    }
}

static void kinds(void **state)
{
    (void)state;
    for (int kind = VALVE_TRIODE; kind <= VALVE_REMOTE_PENTODE; kind++)
        assert_true(valve_kind_text((enum valve_kind)kind)[0]);
    assert_string_equal(valve_kind_text(VALVE_BEAM), "beam tetrode");
    assert_true(valve_kind_is_output(VALVE_POWER_TRIODE) && !valve_kind_is_output(VALVE_TRIODE));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_as_printed),
        cmocka_unit_test(every_row_is_whole),
        cmocka_unit_test(names),
        cmocka_unit_test(kinds),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
