/*
 * The table of sources: every row can be named in a record.
 */
#include "reference/source.h"

#include <string.h>

#include "kit.h"

static void keys_are_stable_names(void **state)
{
    (void)state;
    for (int i = 0; i < SOURCE_COUNT; i++) {
        const struct source_row *row = source_row((enum source_key)i);
        assert_true(row->key && row->key[0] && row->title);
        assert_true(i == SOURCE_NONE || row->title[0]);
        assert_int_equal(strspn(row->key, "abcdefghijklmnopqrstuvwxyz0123456789-"),
                         strlen(row->key));
        for (int k = 0; k < i; k++)
            assert_string_not_equal(row->key, source_row((enum source_key)k)->key);
        assert_true(trust_text(row->trust)[0]);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(keys_are_stable_names)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
