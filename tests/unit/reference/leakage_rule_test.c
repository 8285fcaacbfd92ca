/*
 * Leakage rules: worked values as published, and the form in which a shop writes its own.
 */
#include "reference/leakage_rule.h"

#include "kit.h"

static double limit_ua(const char *text, double capacitance_uf, double volts)
{
    struct leakage_rule rule;
    double limit_a = NAN;
    assert_true(leakage_rule_read(text, &rule));
    enum leakage_status status = leakage_limit(&rule, capacitance_uf * 1e-6, volts, &limit_a);
    assert_true(status == LEAKAGE_OK || status == LEAKAGE_WARN_VOLTS);
    return limit_a * 1e6;
}

/* JAN-C-62 as quoted on an amateur-radio list: 20 uF 450 V 1.1 mA, 20 uF 250 V 0.7 mA. The others
   computed from its formula by hand. uF, V, uA. */
static void jan_c_62(void **state)
{
    (void)state;
    static const double worked[][3] = {{20, 450, 1100},  {20, 250, 700},  {8, 450, 620},
                                       {40, 450, 1900},  {16, 350, 700},  {10, 25, 400},
                                       {100, 100, 1300}, {100, 101, 2300}};
    for (size_t i = 0; i < sizeof worked / sizeof worked[0]; i++)
        assert_relative(limit_ua("JAN-C-62", worked[i][0], worked[i][1]), worked[i][2], 1e-9);
    struct leakage_rule rule;
    assert_true(leakage_rule_read("jan-c-62", &rule));
    double limit_a = 0;
    assert_int_equal(leakage_limit(&rule, 20e-6, 450, &limit_a), LEAKAGE_OK);
    assert_int_equal(leakage_limit(&rule, 20e-6, 475, &limit_a), LEAKAGE_WARN_VOLTS);
    assert_relative(limit_a, 1.1e-3, 1e-9);
    assert_int_equal(leakage_limit(&rule, 20e-6, 500, &limit_a), LEAKAGE_WARN_VOLTS);
    limit_a = 7;
    assert_int_equal(leakage_limit(&rule, 20e-6, 525, &limit_a), LEAKAGE_REFUSE_VOLTS);
    assert_int_equal(leakage_limit(&rule, 0, 450, &limit_a), LEAKAGE_IMPOSSIBLE);
    assert_int_equal(leakage_limit(&rule, 1e-6, NAN, &limit_a), LEAKAGE_IMPOSSIBLE);
    assert_true(limit_a == 7);
}

/* Vishay BCcomponents 038 RSU, doc 28309: 0.01CV or 3 uA (2 min), 0.002CV + 3 uA (5 min). Large-can
   sheets: 3*sqrt(CV). Nippon Chemi-Con: 35 V 2200 uF, 770 uA = 0.01CV. */
static void makers(void **state)
{
    (void)state;
    const char *two = "0.01 CV or 3 uA at 2 min", *five = "0.002 CV + 3 uA at 5 min";
    assert_relative(limit_ua(two, 100, 25), 25.0, 1e-9);
    assert_relative(limit_ua(five, 100, 25), 8.0, 1e-9);
    assert_relative(limit_ua(two, 10, 25), 3.0, 1e-9);
    assert_relative(limit_ua(five, 10, 25), 3.5, 1e-9);
    assert_relative(limit_ua(two, 40, 450), 180.0, 1e-9);
    assert_relative(limit_ua(five, 40, 450), 39.0, 1e-9);
    assert_relative(limit_ua(two, 2200, 35), 770.0, 1e-9);
    const char *root = "3 sqrt(CV) at 5 min";
    assert_close(limit_ua(root, 20, 450), 284.6, 0.05);
    assert_close(limit_ua(root, 40, 450), 402.5, 0.05);
    assert_close(limit_ua(root, 470, 450), 1379.7, 0.05);
    assert_relative(limit_ua(root, 100, 100), 300.0, 1e-9);
}

/* "From 21 uA to 1.1 mA" for 20 uF 450 V: the rules differ fifty times, all are in the table. */
static void the_rules_side_by_side(void **state)
{
    (void)state;
    size_t count;
    const struct leakage_rule *rules = leakage_rules(&count);
    static const double expected_ua[] = {1100, 90, 21, 284.6};
    assert_int_equal(count, 4);
    for (size_t i = 0; i < count; i++) {
        double limit_a;
        assert_int_equal(leakage_limit(&rules[i], 20e-6, 450, &limit_a), LEAKAGE_OK);
        assert_close(limit_a * 1e6, expected_ua[i], 0.05);
        assert_true(source_row(rules[i].source)->title[0]);
    }
}

static void a_rule_of_the_shop(void **state)
{
    (void)state;
    assert_relative(limit_ua("0.02 CV + 10 uA", 20, 450), 190.0, 1e-9);
    assert_relative(limit_ua("0.03CV", 20, 450), 270.0, 1e-9);
    assert_relative(limit_ua("0,02*C*V + 0.5 mA", 20, 450), 680.0, 1e-9);
    assert_relative(limit_ua("  .02 cv or 0.3 mA  ", 20, 450), 300.0, 1e-9);
    assert_relative(limit_ua("4 \xE2\x88\x9A(C\xC2\xB7V) + 5 \xC2\xB5"
                             "A",
                             100, 100),
                    405.0, 1e-9);
    assert_relative(limit_ua("3 sqrt CV", 100, 100), 300.0, 1e-9);
    struct leakage_rule rule;
    const char *text = "0.02 CV + 10 uA or 50 uA at 3 min";
    assert_true(leakage_rule_read(text, &rule));
    assert_ptr_equal(rule.name, text);
    assert_int_equal(rule.source, SOURCE_POLICY);
    assert_close(rule.soak_s, 180, 0);
    assert_close(rule.floor_ua, 50, 0);
    assert_true(leakage_rule_read("0.02 CV", &rule));
    assert_true(isnan(rule.soak_s));
    /* a published rule written out in figures keeps its source */
    assert_true(leakage_rule_read("0.01CV or 3uA", &rule));
    assert_int_equal(rule.source, SOURCE_VISHAY_038);
    assert_true(leakage_rule_read("0.01 CV or 3 uA at 5 min", &rule));
    assert_int_equal(rule.source, SOURCE_POLICY);
    static const char *const wrong[] = {"",
                                        "CV",
                                        "0.02",
                                        "0.02 C",
                                        "0.02 CV +",
                                        "-0.02 CV",
                                        "0 CV",
                                        "0.02 CV 10 uA",
                                        "0.02 CV + 10",
                                        "0.02 CV + 10 V",
                                        "0.02CV+1uA+1uA",
                                        "nan CV",
                                        "0x2 CV",
                                        "1e-2 CV",
                                        "3 sqrt(CV",
                                        "JAN-C-63",
                                        "0.02 CV at",
                                        "0.02 CV at 5",
                                        "0.02 CV or",
                                        "0.02 CV per month"};
    rule.constant_ua = 77;
    for (size_t i = 0; i < sizeof wrong / sizeof wrong[0]; i++) {
        if (leakage_rule_read(wrong[i], &rule))
            print_error("'%s' was read\n", wrong[i]);
        assert_true(rule.constant_ua == 77);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(jan_c_62),
        cmocka_unit_test(makers),
        cmocka_unit_test(the_rules_side_by_side),
        cmocka_unit_test(a_rule_of_the_shop),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
