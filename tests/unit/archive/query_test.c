/* Summaries as columns, and what a query finds in them. */
#include "archive/query.h"

#include "archive/find.h"
#include "archive/fold.h"

#include "kit.h"

#include <string.h>

static const char lines[] =
    "{\"summary\":2,\"job\":\"2030-001\",\"broken\":false,\"in_progress\":false,"
    "\"maker\":\"Pellworth\",\"model\":\"Curlew 56\",\"serial\":\"118204\",\"year\":\"1948 to "
    "1950\","
    "\"year_first\":1948,\"year_last\":1950,\"decade\":\"1940s\",\"supply\":\"transformer\","
    "\"received\":\"2030-01-02\",\"returned\":\"2030-02-11\",\"call_back\":\"2035-01-01\","
    "\"valves\":\"6SK7, 6V6GT\",\"kept\":3,\"of\":4,\"failed\":1,\"capacitors\":2,"
    "\"unheard_of\":{\"a\":[1,{\"b\":\"]\"}]},"
    "\"parts\":{\"ref\":[\"C1\",\"C2\",\"R1\"],\"kind\":[\"capacitor\",\"capacitor\",\"resistor\"],"
    "\"type\":[\"waxed paper\",\"mica\",\"\"],\"place\":[\"coupling\",\"avc bypass\",\"\"],"
    "\"outcome\":[\"fail\",\"conditional fail\",\"\"],\"batch\":[\"2029-W14\",\"\",\"\"]}}\n"
    "{\"summary\":2,\"job\":\"2031-002\",\"broken\":false,\"in_progress\":true,"
    "\"maker\":\"\\u00d6stlund \\\"\\u00e9lite\\\"\",\"model\":null,\"year\":null,"
    "\"supply\":\"live chassis\",\"received\":\"2031-05-06\",\"returned\":null,"
    "\"parts\":{\"ref\":[\"C1\",\"V1\"],\"kind\":[\"capacitor\",\"valve\"],"
    "\"maker\":[\"Pellworth\",\"\"],\"place\":[\"coupling\",\"\"],\"outcome\":[\"pass\",\"\"],"
    "\"valves\":[\"UL41\",\"UL41\"]}}\n"
    "{\"summary\":2,\"job\":\"bad\",\"broken\":true,\"diagnostics\":[{\"line\":1,\"text\":\"x\"}]}"
    "\n"
    "{\"summary\":1,\"job\":\"old\",\"broken\":false}\n"
    "{\"summary\":2,\"job\":\"cut\",\"broken\":false,\"parts\":{\"ref\":[\"C1\n";

static struct columns columns;
static size_t bad;

static int set_up(void **state)
{
    (void)state;
    bad = columns_add(&columns, lines, strlen(lines));
    return 0;
}
static int tear_down(void **state)
{
    (void)state;
    columns_release(&columns);
    return 0;
}

static void lines_become_columns(void **state)
{
    (void)state;
    assert_int_equal(bad, 2); /* another version, and a line cut short: nothing of them stays */
    assert_int_equal(columns.job_count, 2);
    assert_int_equal(columns.part_count, 5);
    assert_int_equal(columns.broken_count, 1);
    assert_string_equal(columns.broken[0].name, "bad");
    assert_string_equal(column_text(&columns.jobs[JOB_MAKER], 1), "Östlund \"élite\"");
    assert_string_equal(column_text(&columns.jobs[JOB_MODEL], 1), "");
    assert_string_equal(column_text(&columns.parts[PART_TYPE], 4), ""); /* column left out */
    assert_string_equal(column_text(&columns.parts[PART_BATCH], 0), "2029-W14");
    assert_close(column_number(&columns.jobs[JOB_YEAR_LAST], 0), 1950, 0);
    assert_true(isnan(column_number(&columns.jobs[JOB_YEAR_LAST], 1)));
    for (int i = 0; i < JOB_COLUMN_COUNT - 1; i++)
        assert_int_equal(columns.jobs[i].count, 2);
    for (int i = 0; i < PART_COLUMN_COUNT; i++)
        assert_int_equal(columns.parts[i].count, 5);
    assert_int_equal(columns.part_job.codes[2], 0);
    assert_int_equal(columns.part_job.codes[3], 1);
}

/* Hits as "C1@0 C2@0 | 0 1": parts with their job, then jobs. */
static void hits_text(const char *const *terms, size_t count, struct buffer *text)
{
    struct arena arena = {0};
    struct query_hits hits = query_run(&columns, terms, count, &arena);
    for (size_t i = 0; i < hits.part_count; i++)
        buffer_print(text, "%s@%u ", column_text(&columns.parts[PART_REF], hits.parts[i]),
                     columns.part_job.codes[hits.parts[i]]);
    buffer_text(text, "|");
    for (size_t i = 0; i < hits.job_count; i++)
        buffer_print(text, " %zu", hits.jobs[i]);
    if (hits.unknown_key)
        buffer_print(text, " ?%s", hits.unknown_key);
    arena_release(&arena);
}

static void terms_find(void **state)
{
    (void)state;
    static const struct {
        const char *terms[3];
        const char *expected;
    } rows[] = {
        {{"curlew"}, "| 0"},
        {{"CURLEW", "coupling"}, "C1@0 | 0"},
        {{"coupling"}, "C1@0 C1@1 | 0 1"},
        {{"place=coupling", "outcome=fail"}, "C1@0 | 0"},
        {{"outcome=conditional fail"}, "C2@0 | 0"}, /* and never by outcome=fail */
        {{"pass"}, "C1@1 | 1"},                     /* no word of "bypass" begins so */
        {{"bypass"}, "C2@0 | 0"},
        {{"ostlund"}, "| 1"},
        {{"ÖSTLUND"}, "| 1"},
        {{"Elite"}, "| 1"},
        {{"waxed paper"}, "C1@0 | 0"},
        {{"paper waxed"}, "|"},
        {{"maker=pellworth"}, "C1@1 | 0 1"}, /* the set's, or the part's */
        {{"pellworth", "kind=valve"}, "|"},
        {{"supply=live chassis"}, "| 1"},
        {{"supply=live"}, "|"}, /* fixed choices whole */
        {{"valve=6v6"}, "| 0"},
        {{"valve=ul41"}, "C1@1 V1@1 | 1"},
        {{"year=1949"}, "| 0"},
        {{"year=1940..1947"}, "|"},
        {{"year=1930..1960"}, "| 0"},
        {{"year=1950..1955"}, "| 0"},
        {{"year=1950.."}, "| 0"},
        {{"decade=1940s"}, "| 0"},
        {{"from=2030-02-11", "to=2030-02"}, "| 0"},
        {{"from=2031"}, "| 1"}, /* in progress: by the day it came */
        {{"to=2030-02-10"}, "|"},
        {{"due=2035-01-01"}, "| 0"},
        {{"due=2034"}, "|"},
        {{"batch=2029"}, "C1@0 | 0"},
        {{"batch="}, "C1@0 | 0"}, /* any */
        {{"c1", "c2"}, "|"},
        {{"nothing=1"}, "| ?nothing"},
        {{"page=x"}, "| ?page"},
        {{"zzz"}, "|"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        size_t count = 0;
        while (count < 3 && rows[i].terms[count])
            count++;
        struct buffer text = {0};
        hits_text(rows[i].terms, count, &text);
        if (strcmp(buffer_string(&text), rows[i].expected) != 0)
            print_error("%s: %s, not %s\n", rows[i].terms[0], buffer_string(&text),
                        rows[i].expected);
        assert_string_equal(buffer_string(&text), rows[i].expected);
        buffer_release(&text);
    }
}

static void folding(void **state)
{
    (void)state;
    struct buffer text = {0};
    fold(&text, "Straße Ångström ½ µF");
    assert_string_equal(buffer_string(&text), "strasse angstrom 1⁄2 μf");
    assert_true(fold_begins_word("avc bypass", "byp"));
    assert_false(fold_begins_word("avc bypass", "pass"));
    assert_true(fold_begins_word("c56/2", "2"));
    assert_false(fold_begins_word("c56", "6"));
    assert_true(fold_begins_word("a (b", "(b"));
    assert_false(fold_begins_word("éa", "a")); /* beyond ASCII is part of a word */
    buffer_release(&text);
}

static void lines_fit_a_terminal(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    const char *terms[] = {"coupling"};
    struct query_hits hits = query_run(&columns, terms, 1, &arena);
    find_write(&columns, &hits, &out);
    assert_string_equal(buffer_string(&out),
                        "2030-001 C1  waxed paper  coupling  fail  Pellworth Curlew 56\n"
                        "2031-002 C1  capacitor    coupling  pass  Östlund \"élite\"\n");
    buffer_clear(&out);
    const char *job_terms[] = {"1940s", "decade=1940s"};
    hits = query_run(&columns, job_terms + 1, 1, &arena);
    find_write(&columns, &hits, &out);
    assert_string_equal(
        buffer_string(&out),
        "2030-001    Pellworth Curlew 56                 1948 to 1950   2030-02-11\n");
    buffer_clear(&out);
    find_write_json(&columns, &hits, &out);
    assert_non_null(strstr(buffer_string(&out), "{\"hit\":\"job\",\"job\":\"2030-001\""));
    assert_non_null(strstr(buffer_string(&out), "\"technician\":null"));
    buffer_release(&out);
    arena_release(&arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(lines_become_columns),
                                       cmocka_unit_test(terms_find), cmocka_unit_test(folding),
                                       cmocka_unit_test(lines_fit_a_terminal)};
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
