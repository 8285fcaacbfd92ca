/* Words: reading, overlays, phrases; and that the shipped files say all that the program asks. */
#include "sample.h"

#include "base/file.h"
#include "kit.h"

#include <ctype.h>

struct fixture {
    struct arena arena;
    struct diagnostics diagnostics;
};

static struct source source_of(const char *text)
{
    return (struct source){"words.yaml", text, strlen(text)};
}

static void begin(struct fixture *fixture)
{
    *fixture = (struct fixture){0};
    fixture->diagnostics = diagnostics_in(&fixture->arena);
}

static const char *const base_text =
    "term:\n  valve: valve\n"
    "place:\n  avc bypass: AVC bypass\n"
    "deep:\n  a:\n    b: \"{{term.valve}} <{{x}}> {{#y}}and {{y}}{{/y}}\"\n";

static void test_keys_and_phrases(void **state)
{
    (void)state;
    struct fixture fixture;
    begin(&fixture);
    struct source source = source_of(base_text);
    const struct words *words = words_read(&source, NULL, &fixture.arena, &fixture.diagnostics);
    struct phrasing say = {words, &fixture.arena, &fixture.diagnostics};
    assert_string_equal(words_get(words, "place.avc bypass"), "AVC bypass");
    assert_null(words_get(words, "place"));
    assert_string_equal(phrase_in(&say, "place", "avc bypass"), "AVC bypass");
    assert_string_equal(phrase(&say, "deep.a.b", "x", "1 & 2", "y", NULL, NULL), "valve <1 & 2> ");
    assert_string_equal(phrase(&say, "deep.a.b", "x", "{{y}}", "y", "*", NULL),
                        "valve <{{y}}> and *");
    assert_int_equal(fixture.diagnostics.count, 0);
    assert_string_equal(phrase(&say, "no.such", NULL), "no.such");
    assert_int_equal(fixture.diagnostics.count, 1);
    assert_int_equal(fixture.diagnostics.items[0].code, DIAGNOSTIC_WORD_MISSING);
    arena_release(&fixture.arena);
}

static void test_overlay(void **state)
{
    (void)state;
    struct fixture fixture;
    begin(&fixture);
    struct source below = source_of(base_text);
    struct source over = source_of("term:\n  valve: tube\nplace:\n  unheard: x\nlist:\n  - a\n");
    const struct words *words = words_read(&below, NULL, &fixture.arena, &fixture.diagnostics);
    words = words_read(&over, words, &fixture.arena, &fixture.diagnostics);
    struct phrasing say = {words, &fixture.arena, &fixture.diagnostics};
    assert_string_equal(phrase(&say, "deep.a.b", "x", "", NULL), "tube <> ");
    assert_string_equal(words_get(words, "place.avc bypass"), "AVC bypass");
    assert_int_equal(fixture.diagnostics.count, 2);
    assert_int_equal(fixture.diagnostics.items[0].code, DIAGNOSTIC_UNKNOWN_KEY);
    assert_int_equal(fixture.diagnostics.items[0].at.line, 4);
    assert_int_equal(fixture.diagnostics.items[1].code, DIAGNOSTIC_WRONG_SHAPE);
    arena_release(&fixture.arena);
}

static void assert_all(const struct words *words, struct arena *arena, const char *group,
                       const char *const *names, size_t from)
{
    for (size_t i = from; names[i]; i++) {
        const char *key = arena_print(arena, "%s.%s", group, names[i]);
        if (!words_get(words, key))
            fail_msg("words.yaml has no '%s'", key);
    }
}

/* The keys of effects that findings.h lists. */
static const char *const effects[] = {"grid_volts",
                                      "cathode_current",
                                      "anode_watts",
                                      "grid_shift",
                                      "line_loss",
                                      "line_volts",
                                      "screen_fall",
                                      "rail_drop",
                                      "part_watts",
                                      "bias_loss",
                                      "ht_share",
                                      "short_watts",
                                      "control_volts",
                                      "circuit_ratio",
                                      "battery_share",
                                      "mains_fire",
                                      "earth_current",
                                      "touch_current",
                                      "discharge_resistor",
                                      "pulse_peak",
                                      "shift",
                                      "linear_ratio",
                                      NULL};

static void test_shipped_words_are_complete(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    const struct words *words = templates_words(sample_templates(sample));
    struct arena *arena = &sample->arena;
    assert_int_equal(sample->diagnostics.count, 0);
    assert_all(words, arena, "place", place_choices, 0);
    assert_all(words, arena, "lift", place_choices, 0);
    assert_all(words, arena, "short", place_choices, 0);
    assert_all(words, arena, "type", dielectric_choices, 1);
    assert_all(words, arena, "outcome", outcome_choices, 0);
    assert_all(words, arena, "done", action_choices, 1);
    assert_all(words, arena, "reason", reason_choices, 1);
    assert_all(words, arena, "why", reason_choices, 0);
    assert_all(words, arena, "again", reason_choices, 1);
    assert_all(words, arena, "advice", advice_choices, 1);
    assert_all(words, arena, "advice_short", advice_choices, 1);
    assert_all(words, arena, "over", criterion_key_choices, 0);
    assert_all(words, arena, "copy", copy_choices, 0);
    assert_all(words, arena, "supply", supply_choices, 1);
    assert_all(words, arena, "effect", effects, 0);
    for (int trust = TRUST_SEEN; trust <= TRUST_DERIVED; trust++) {
        const char *names[] = {trust_text((enum trust)trust), NULL};
        assert_all(words, arena, "trust", names, 0);
    }
    sample_end(sample, NULL);
}

static bool has_word(const char *text, const char *word)
{
    size_t length = strlen(word);
    for (const char *at = text; (at = strcasestr(at, word)) != NULL; at++)
        if ((at == text || !isalnum((unsigned char)at[-1])) && !isalnum((unsigned char)at[length]))
            return true;
    return false;
}

/* A record gives what was measured; it never says that a set or a part is one of these. */
static void test_no_verdicts_on_the_set(void **state)
{
    (void)state;
    static const char *const files[] = {"record.md",   "sheet.md",   "assessment.md",
                                        "cautions.md", "words.yaml", "words-us.yaml"};
    static const char *const words[] = {"safe", "good", "bad", "OK", "perfect", "guaranteed"};
    for (size_t i = 0; i < sizeof files / sizeof *files; i++) {
        struct buffer text = {0};
        char path[80];
        snprintf(path, sizeof path, "templates/%s", files[i]);
        assert_int_equal(file_read(path, 1 << 20, &text), FILE_OK);
        for (size_t j = 0; j < sizeof words / sizeof *words; j++)
            if (has_word(buffer_string(&text), words[j]))
                fail_msg("%s says '%s'", path, words[j]);
        buffer_release(&text);
    }
}

static void collect(struct buffer *text, const char *more)
{
    buffer_text(text, more ? more : "");
    buffer_byte(text, '\n');
}

static void collect_exhibit(struct buffer *text, const struct exhibit *exhibit)
{
    if (exhibit->kind != EXHIBIT_TABLE)
        return;
    const struct table *table = &exhibit->table;
    collect(text, table->caption);
    collect(text, table->remark);
    for (size_t i = 0; i < table->note_count; i++)
        collect(text, table->notes[i]);
    for (size_t i = 0; i < table->column_count; i++)
        collect(text, table->columns[i].head);
    for (size_t i = 0; i < table->row_count; i++)
        for (size_t j = 0; j < table->column_count; j++)
            collect(text, table->rows[i].cells[j].text);
}

/* With the American overlay no British term of the trade is left in a record. */
static void test_american_wording(void **state)
{
    (void)state;
    static const char *const british[] = {"valve", "valves", "HT",     "anode",
                                          "earth", "mains",  "aerial", "moulded"};
    struct sample *sample = sample_begin();
    sample->shop.wording = "us";
    sample->capacitors[2].place = PLACE_EARTH_ISOLATOR;
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    assert_non_null(document);
    struct buffer text = {0};
    document_plain_text(document->root, &text);
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node))
        if (document_exhibit(node) && strcmp(document_exhibit(node)->id, "sources") != 0)
            collect_exhibit(&text, document_exhibit(node));
    for (size_t i = 0; i < sizeof british / sizeof *british; i++)
        if (has_word(buffer_string(&text), british[i]))
            fail_msg("the American record says '%s'", british[i]);
    assert_true(has_word(buffer_string(&text), "tube"));
    assert_true(has_word(buffer_string(&text), "chassis"));
    buffer_release(&text);
    sample_end(sample, document);
}

static void test_unknown_wording(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->shop.wording = "klingon";
    sample_templates(sample);
    assert_int_equal(sample->diagnostics.count, 1);
    assert_int_equal(sample->diagnostics.items[0].code, DIAGNOSTIC_FILE_UNREADABLE);
    sample_end(sample, NULL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_keys_and_phrases),
        cmocka_unit_test(test_overlay),
        cmocka_unit_test(test_shipped_words_are_complete),
        cmocka_unit_test(test_no_verdicts_on_the_set),
        cmocka_unit_test(test_american_wording),
        cmocka_unit_test(test_unknown_wording),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
