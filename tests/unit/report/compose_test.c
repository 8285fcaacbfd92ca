/* Whole documents: every section is there, and no text of a job can hide, forge or redirect one. */
#include "sample.h"

#include "kit.h"

static const char *const sections[] = {
    "All capacitors at a glance",
    "Condition on arrival",
    "Leakage",
    "Replaced and restuffed",
    "Work done",
    "Reforming",
    "Stages",
    "Resistors, windings and controls",
    "Plates",
    "What can be undone",
    "Methods and sources",
    "Cautions",
    "Fingerprint",
};
enum { SECTIONS = sizeof sections / sizeof *sections };

/* Level-2 headings are exactly the sections, in their order. */
static void assert_sections(const struct document *document)
{
    size_t found = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        if (cmark_node_get_type(node) != CMARK_NODE_HEADING ||
            cmark_node_get_heading_level(node) > 2)
            continue;
        struct buffer text = {0};
        document_plain_text(node, &text);
        assert_int_equal(cmark_node_get_heading_level(node), 2);
        assert_true(found < SECTIONS);
        assert_string_equal(buffer_string(&text), sections[found]);
        buffer_release(&text);
        found++;
    }
    assert_int_equal(found, SECTIONS);
}

/* Items of the list under the heading "Cautions". */
static size_t count_cautions(const struct document *document)
{
    bool inside = false;
    size_t items = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        if (cmark_node_get_type(node) == CMARK_NODE_HEADING &&
            cmark_node_get_heading_level(node) == 2) {
            struct buffer text = {0};
            document_plain_text(node, &text);
            inside = strcmp(buffer_string(&text), "Cautions") == 0;
            buffer_release(&text);
        }
        if (!inside || cmark_node_get_type(node) != CMARK_NODE_LIST)
            continue;
        for (cmark_node *item = cmark_node_first_child(node); item; item = cmark_node_next(item))
            items++;
    }
    return items;
}

static size_t count_exhibits(const struct document *document)
{
    size_t count = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node))
        count += document_exhibit(node) != NULL;
    return count;
}

static size_t count_type(cmark_node *tree, cmark_node_type type)
{
    size_t count = 0;
    cmark_iter *walk = cmark_iter_new(tree);
    for (cmark_event_type event; (event = cmark_iter_next(walk)) != CMARK_EVENT_DONE;)
        count +=
            event == CMARK_EVENT_ENTER && cmark_node_get_type(cmark_iter_get_node(walk)) == type;
    cmark_iter_free(walk);
    return count;
}

static size_t count_code(const struct sample *sample, enum diagnostic_code code)
{
    size_t count = 0;
    for (size_t i = 0; i < sample->diagnostics.count; i++)
        count += sample->diagnostics.items[i].code == code;
    return count;
}

static void show(const struct sample *sample)
{
    struct buffer text = {0};
    diagnostics_format(&sample->diagnostics, &text);
    if (text.length)
        print_message("%s", buffer_string(&text));
    buffer_release(&text);
}

enum { CAUTIONS = 9 }; /* of a set with a transformer, counted in cautions.md */

static void test_record(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->job.work = sample_prose("2034-05-08 Looked at it.", 70);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    show(sample);
    assert_int_equal(sample->diagnostics.count, 0);
    assert_non_null(document);
    assert_sections(document);
    assert_int_equal(count_cautions(document), CAUTIONS);
    assert_string_equal(document->running_head, "Record 2034-027, client’s copy");
    assert_string_equal(document->title, "Record 2034-027, Lindmere Tern A42");
    static const char *const ids[] = {
        "title",         "facts",   "kept",      "glance",  "leakage",     "changed", "reform-1",
        "stage-figures", "plate-1", "resistors", "removed", "instruments", "sha-256", "contents"};
    for (size_t i = 0; i < sizeof ids / sizeof *ids; i++) {
        if (!sample_exhibit(document, ids[i]))
            fail_msg("no exhibit '%s'", ids[i]);
    }
    sample_end(sample, document);
}

static void test_sheet_and_assessment(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    struct document *sheet = sample_compose(sample, DOCUMENT_SHEET);
    show(sample);
    assert_int_equal(sample->diagnostics.count, 0);
    assert_int_equal(count_cautions(sheet), CAUTIONS);
    const struct exhibit *table = sample_exhibit(sheet, "sheet-leakage");
    assert_string_equal(table->number, "Sheet 1");
    assert_int_equal(table->table.row_count, 5);
    /* 763 MΩ: two figures, rounded up */
    assert_string_equal(table->table.rows[0].cells[6].figures.whole, "770");
    assert_string_equal(table->table.rows[0].cells[5].figures.fraction, ".13");
    assert_non_null(sample_exhibit(sheet, "sheet-reform-2"));
    assert_non_null(sample_exhibit(sheet, "sheet-bleed"));
    assert_non_null(sample_exhibit(sheet, "write-on"));
    document_release(sheet);
    struct document *assessment = sample_compose(sample, DOCUMENT_ASSESSMENT);
    assert_int_equal(sample->diagnostics.count, 0);
    assert_non_null(sample_exhibit(assessment, "leakage"));
    assert_non_null(sample_exhibit(assessment, "stages"));
    sample_end(sample, assessment);
}

/* What a note may try, and how many warnings of each kind it earns: one a line. */
static void test_forging(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        size_t html, links;
    } rows[] = {
        {"<!-- swallow the rest\n", 1, 0},
        {"before\n\n<!-- never closed\n\n## Cautions\n\nnone\n", 1, 0},
        {"```\nnever closed\n", 0, 0},
        {"~~~~ html\n<script>\n", 0, 0},
        {"[Cautions]: https://elsewhere.example\n[prove]: javascript:alert(1)\n", 0, 0},
        {"{{> cautions}}\n{{#in_progress}}\n{{{x}}}\n{{=<% %>=}}", 0, 0},
        {"Cautions\n========\n\nnone\n\nLeakage\n-------\n", 0, 0},
        {"# Cautions\n## Cautions\n> ## Cautions\n- # Cautions\n", 0, 0},
        {"<script>alert(1)</script>\n\ntext <b onclick=x>bold</b>", 2, 0},
        {"<details>\n<summary>\n\n## Methods and sources", 1, 0},
        {"[a](javascript:alert(1)) [b](JaVaScRiPt:x) [c](data:text/html,x) <file:///etc/passwd>", 0,
         1},
        {"[a](https://a.example) [b](HTTP://b.example) [c](mailto:c@d.example) [t](tel:1)", 0, 0},
        {"[a](#cautions) [b](other.html) [c](&#106;avascript:x) [d](//e.example)", 0, 1},
        {"[out\n\n](x", 0, 0},
        {"* * *\n\n1. a\n2. b\n\n    code\n", 0, 0},
        {"\\", 0, 0},
        {"\xEF\xBF\xBD\xE2\x80\xAE bidi", 0, 0},
        {"<?php ?>\n\n<!DOCTYPE html>\n\n<![CDATA[ x ]]>", 3, 0},
    };
    size_t usual_exhibits = 0;
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct sample *sample = sample_begin();
        sample->job.work = sample_prose(rows[i].text, 70);
        sample->job.set.description = sample_prose(rows[i].text, 6);
        sample->removed.value = sample_prose(rows[i].text, 40);
        sample->capacitors[0].reason = sample_prose(rows[i].text, 22);
        struct document *document = sample_compose(sample, DOCUMENT_RECORD);
        assert_non_null(document);
        assert_sections(document);
        assert_int_equal(count_cautions(document), CAUTIONS);
        assert_int_equal(count_type(document->root, CMARK_NODE_HTML_BLOCK), 0);
        assert_int_equal(count_type(document->root, CMARK_NODE_HTML_INLINE), 0);
        assert_int_equal(count_code(sample, DIAGNOSTIC_RAW_HTML_DROPPED), rows[i].html);
        assert_int_equal(count_code(sample, DIAGNOSTIC_LINK_DROPPED), rows[i].links);
        assert_int_equal(sample->diagnostics.errors, 0);
        usual_exhibits = usual_exhibits ? usual_exhibits : count_exhibits(document);
        assert_int_equal(count_exhibits(document), usual_exhibits);
        sample_end(sample, document);
    }
}

/* A definition in one field means nothing in another, nor in the template. */
static void test_definitions_stay_at_home(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->job.work = sample_prose("[gridleak prove]: https://elsewhere.example\n\nwork", 70);
    sample->job.arrival = sample_prose("see [gridleak prove] and [prove]", 60);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    assert_non_null(document);
    assert_int_equal(count_type(document->root, CMARK_NODE_LINK), 0);
    sample_end(sample, document);
}

/* Of 2048 bytes the longest, of one more none. */
static void test_long_link(void **state)
{
    (void)state;
    char text[2100];
    for (int length = 2048; length <= 2049; length++) {
        struct sample *sample = sample_begin();
        snprintf(text, sizeof text, "[word](http://%0*d)", length - 7, 0);
        sample->job.work = sample_prose(text, 70);
        struct document *document = sample_compose(sample, DOCUMENT_RECORD);
        assert_non_null(document);
        assert_int_equal(count_type(document->root, CMARK_NODE_LINK), length == 2048);
        assert_int_equal(count_code(sample, DIAGNOSTIC_LINK_DROPPED), length != 2048);
        sample_end(sample, document);
    }
}

static void test_positions_and_kept_words(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->job.work =
        sample_prose("one\n\ntwo <b>bold</b>\n\n![the alt](x.png) [the link](ftp:x)", 70);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    assert_int_equal(sample->diagnostics.count, 3);
    assert_int_equal(sample->diagnostics.items[0].code, DIAGNOSTIC_RAW_HTML_DROPPED);
    assert_int_equal(sample->diagnostics.items[0].at.line, 72);
    assert_string_equal(sample->diagnostics.items[0].path, "2034-027.yaml");
    assert_int_equal(sample->diagnostics.items[1].code, DIAGNOSTIC_PICTURE_DROPPED);
    assert_int_equal(sample->diagnostics.items[1].at.line, 74);
    assert_int_equal(sample->diagnostics.items[2].code, DIAGNOSTIC_LINK_DROPPED);
    struct buffer text = {0};
    document_plain_text(document->root, &text);
    assert_non_null(strstr(buffer_string(&text), "two bold"));
    assert_non_null(strstr(buffer_string(&text), "the alt the link"));
    buffer_release(&text);
    assert_int_equal(count_type(document->root, CMARK_NODE_IMAGE), 0);
    sample_end(sample, document);
}

static void test_nesting(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    struct buffer deep = {0};
    for (int i = 0; i < 30000; i++)
        buffer_text(&deep, "> ");
    buffer_text(&deep, "# deep <b>");
    sample->job.work = sample_prose(buffer_string(&deep), 70);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    assert_non_null(document);
    assert_sections(document);
    assert_int_equal(count_code(sample, DIAGNOSTIC_RAW_HTML_DROPPED), 1);
    sample_end(sample, document);
    buffer_release(&deep);
}

static void test_too_long(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    struct buffer text = {0};
    for (int i = 0; i <= JOB_PROSE_BYTES_MAX; i++)
        buffer_byte(&text, 'a');
    sample->job.work = sample_prose(buffer_string(&text), 70);
    assert_null(sample_compose(sample, DOCUMENT_RECORD));
    assert_int_equal(count_code(sample, DIAGNOSTIC_TEXT_TOO_LONG), 1);
    sample_end(sample, NULL);
    buffer_release(&text);
}

static size_t cautions_of(struct sample *sample)
{
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    show(sample);
    assert_non_null(document);
    size_t count = count_cautions(document);
    document_release(document);
    return count;
}

static void test_cautions_by_set(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->job.set.supply = SUPPLY_BATTERY;
    assert_int_equal(cautions_of(sample), CAUTIONS - 1);
    sample->job.set.supply = SUPPLY_LIVE_CHASSIS;
    assert_int_equal(cautions_of(sample), CAUTIONS);
    sample->job.hazards = sample_prose("ASBESTOS lagging; luminous dial", 80);
    assert_int_equal(cautions_of(sample), CAUTIONS + 2);
    sample_end(sample, NULL);
}

static void test_in_progress(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->findings.in_progress = true;
    sample->job.returned = (struct date){0};
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    const struct exhibit *title = sample_exhibit(document, "title");
    const struct exhibit *facts = sample_exhibit(document, "facts");
    assert_non_null(strstr(title->title.subtitle, "in progress"));
    assert_string_equal(facts->facts.right[2].text, "in progress");
    assert_non_null(strstr(document->footer, "in progress"));
    struct buffer text = {0};
    document_plain_text(document->root, &text);
    assert_non_null(strstr(buffer_string(&text), "In progress."));
    buffer_release(&text);
    sample_end(sample, document);
}

/* An empty job still gives a document. */
static void test_empty_job(void **state)
{
    (void)state;
    struct sample *sample = sample_begin();
    sample->job = (struct job){.source = {"x.yaml", "", 0}, .number = "x"};
    sample->findings.capacitor_count = sample->findings.stage_count = 0;
    sample->findings.originality = (struct originality){0};
    sample->findings.fingerprint = NULL;
    sample->findings.in_progress = true;
    for (int kind = DOCUMENT_RECORD; kind <= DOCUMENT_ASSESSMENT; kind++) {
        if (kind == DOCUMENT_MANUAL)
            continue;
        struct document *document = sample_compose(sample, (enum document_kind)kind);
        show(sample);
        assert_non_null(document);
        document_release(document);
    }
    assert_int_equal(sample->diagnostics.count, 0);
    sample_end(sample, NULL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_record),          cmocka_unit_test(test_sheet_and_assessment),
        cmocka_unit_test(test_forging),         cmocka_unit_test(test_definitions_stay_at_home),
        cmocka_unit_test(test_long_link),       cmocka_unit_test(test_positions_and_kept_words),
        cmocka_unit_test(test_nesting),         cmocka_unit_test(test_too_long),
        cmocka_unit_test(test_cautions_by_set), cmocka_unit_test(test_in_progress),
        cmocka_unit_test(test_empty_job),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
