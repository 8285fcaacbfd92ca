/* shop.yaml: defaults, and what the shop changes. */
#include "job/shop.h"

#include "job/field.h"
#include "kit.h"
#include "reading.h"

#include <stdlib.h>

struct shop_of_text {
    struct arena arena;
    struct diagnostics diagnostics;
    struct source source;
    const struct shop *shop;
};

static void shop_text(struct shop_of_text *reading, const char *text)
{
    *reading = (struct shop_of_text){.source = {"shop.yaml", text, text ? strlen(text) : 0}};
    reading->diagnostics = diagnostics_in(&reading->arena);
    reading->shop = shop_read(&reading->source, &reading->arena, &reading->diagnostics);
}

static void test_defaults(void **state)
{
    (void)state;
    static const char *const nothing[] = {NULL, "", "\n\n", "# the shop's file\n"};
    for (size_t i = 0; i < sizeof nothing / sizeof *nothing; i++) {
        struct shop_of_text reading;
        shop_text(&reading, nothing[i]);
        assert_int_equal(reading.diagnostics.count, 0);
        assert_close(reading.shop->policy.guard_band, 1, 0);
        assert_close(reading.shop->policy.touch_current_a, 0.5e-3, 0);
        assert_string_equal(reading.shop->policy.leakage_rule, "JAN-C-62");
        assert_string_equal(reading.shop->accent, "#1b4b6b");
        arena_release(&reading.arena);
    }
}

/* The example of each policy row is its default, to the last digit. */
static void test_examples_are_defaults(void **state)
{
    (void)state;
    struct buffer text = {0};
    struct shop_of_text reading;
    const struct record *policy = NULL;
    for (size_t i = 0; i < shop_record.field_count; i++) {
        if (strcmp(shop_record.fields[i].key, "policy") == 0)
            policy = shop_record.fields[i].record;
    }
    assert_non_null(policy);
    buffer_text(&text, "policy:\n");
    for (size_t i = 0; i < policy->field_count; i++)
        buffer_print(&text, "  %s: %s\n", policy->fields[i].key, policy->fields[i].example);
    shop_text(&reading, buffer_string(&text));
    assert_int_equal(reading.diagnostics.count, 0);
    const struct shop usual = shop_default();
    for (size_t i = 0; i < policy->field_count; i++) {
        const struct field *field = &policy->fields[i];
        if (field->kind == FIELD_TEXT)
            continue;
        double own = *(const double *)((const char *)&reading.shop->policy + field->offset);
        double default_value = *(const double *)((const char *)&usual.policy + field->offset);
        assert_relative(own, default_value, 1e-15);
        assert_true(default_value > 0);
    }
    arena_release(&reading.arena);
    buffer_release(&text);
}

static void test_changes(void **state)
{
    (void)state;
    struct shop_of_text reading;
    shop_text(&reading, "name: Hollins & Wray\npage: Letter\nwording: us\naddress: |\n"
                        "  4 Tanner Row\n  Wexbridge\naccent: '#004400'\naccent_dark: a0f0a0\n"
                        "policy:\n  cathode_current_rise: 5 %\n  guard_band: 0\n"
                        "  battery_before_switch: 5 uA\n  leakage_rule: maker\n");
    const struct shop *shop = reading.shop;
    assert_int_equal(reading.diagnostics.count, 0);
    assert_string_equal(shop->name, "Hollins & Wray");
    assert_string_equal(shop->address, "4 Tanner Row\nWexbridge");
    assert_int_equal(shop->page, PAGE_LETTER);
    assert_string_equal(shop->wording, "us");
    assert_string_equal(shop->accent, "#004400");
    assert_string_equal(shop->accent_dark, "#a0f0a0");
    assert_close(shop->policy.cathode_current_rise, 0.05, 1e-15);
    assert_close(shop->policy.guard_band, 0, 0);
    assert_close(shop->policy.battery_before_switch_a, 5e-6, 1e-15);
    size_t changed = 0;
    for (size_t i = 0; i < 64; i++)
        changed += shop->policy_changed[i];
    assert_int_equal(changed, 4);
    assert_true(shop->policy_changed[0]);
    arena_release(&reading.arena);
}

/* WCAG's own figures: black on white is 21 to 1, #777777 on white 4.48 and thus just too light;
   our paper is a little darker than white. */
static void test_accents(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        size_t errors;
    } rows[] = {{"accent: '#000000'\n", 0},      {"accent: '#777777'\n", 1},
                {"accent: '#666666'\n", 0},      {"accent: red\n", 1},
                {"accent_dark: '#1b4b6b'\n", 1}, {"accent_dark: '#ffffff'\n", 0}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct shop_of_text reading;
        shop_text(&reading, rows[i].text);
        assert_int_equal(reading.diagnostics.errors, rows[i].errors);
        arena_release(&reading.arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_defaults),
        cmocka_unit_test(test_examples_are_defaults),
        cmocka_unit_test(test_changes),
        cmocka_unit_test(test_accents),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
