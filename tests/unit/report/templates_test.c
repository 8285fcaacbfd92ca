/* Templates that a shop has changed: found file by file, and their mistakes. */
#include "sample.h"

#include "base/file.h"
#include "kit.h"

#include <unistd.h>

struct archive {
    struct sample *sample;
    char folder[40];
};

static struct archive archive_begin(void)
{
    struct archive archive = {sample_begin(), "/tmp/gridleak-templates-XXXXXX"};
    assert_non_null(mkdtemp(archive.folder));
    char path[80];
    snprintf(path, sizeof path, "%s/templates", archive.folder);
    assert_int_equal(folder_make(path), FILE_OK);
    return archive;
}

static void put_template(const struct archive *archive, const char *name, const char *text)
{
    char path[120];
    snprintf(path, sizeof path, "%s/templates/%s", archive->folder, name);
    assert_int_equal(file_write(path, text, strlen(text), NULL), FILE_OK);
}

static struct document *compose(struct archive *archive)
{
    struct sample *sample = archive->sample;
    const struct templates *templates =
        templates_open(archive->folder, ".", &sample->shop, &sample->arena, &sample->diagnostics);
    report_explain(&sample->findings, templates_words(templates), &sample->arena);
    return report_compose(&sample->findings, DOCUMENT_RECORD, templates, sample->pictures,
                          &sample->arena, &sample->diagnostics);
}

static void archive_end(struct archive *archive, struct document *document)
{
    assert_int_equal(folder_remove(archive->folder), FILE_OK);
    sample_end(archive->sample, document);
}

static void test_own_template(void **state)
{
    (void)state;
    struct archive archive = archive_begin();
    put_template(&archive, "record.md",
                 "# Ours {{job}}\n\n{{> glance}}\ntext\n{{> footing}}\n\n{{> work}}\n");
    put_template(&archive, "footing.md", "{{> leakage}}\n\nend of {{set.model}}\n");
    archive.sample->job.work = sample_prose("# done\n\n## twice", 70);
    struct document *document = compose(&archive);
    assert_non_null(document);
    static const struct {
        cmark_node_type type;
        int level;
    } expected[] = {{CMARK_NODE_HEADING, 2},   {CMARK_NODE_CUSTOM_BLOCK, 0},
                    {CMARK_NODE_PARAGRAPH, 0}, {CMARK_NODE_CUSTOM_BLOCK, 0},
                    {CMARK_NODE_PARAGRAPH, 0}, {CMARK_NODE_HEADING, 3},
                    {CMARK_NODE_HEADING, 4}};
    size_t i = 0;
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node), i++) {
        assert_true(i < sizeof expected / sizeof *expected);
        assert_int_equal(cmark_node_get_type(node), expected[i].type);
        if (expected[i].level)
            assert_int_equal(cmark_node_get_heading_level(node), expected[i].level);
    }
    assert_int_equal(i, sizeof expected / sizeof *expected);
    archive_end(&archive, document);
}

static void test_mistakes(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        enum diagnostic_code code;
        struct position at;
    } rows[] = {
        {"text {{> leakage}}\n", DIAGNOSTIC_TEMPLATE_PARTIAL, {1, 6}},
        {"\n  {{> leakage}}\n", DIAGNOSTIC_TEMPLATE_PARTIAL, {2, 3}},
        {"- {{> work}}\n", DIAGNOSTIC_TEMPLATE_PARTIAL, {1, 3}},
        {"{{> no_such}}\n", DIAGNOSTIC_TEMPLATE_PARTIAL, {1, 1}},
        {"{{> record}}\n", DIAGNOSTIC_TEMPLATE_DEPTH, {1, 1}},
        {"{{{job}}}\n", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
        {"{{#has}}\n", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct archive archive = archive_begin();
        put_template(&archive, "record.md", rows[i].text);
        assert_null(compose(&archive));
        const struct diagnostics *diagnostics = &archive.sample->diagnostics;
        assert_int_equal(diagnostics->count, 1);
        assert_int_equal(diagnostics->items[0].code, rows[i].code);
        assert_int_equal(diagnostics->items[0].at.line, rows[i].at.line);
        assert_int_equal(diagnostics->items[0].at.column, rows[i].at.column);
        assert_non_null(strstr(diagnostics->items[0].path, "/templates/record.md"));
        archive_end(&archive, NULL);
    }
}

/* The list of diagnostics keeps the first 200: a key among those. */
static void test_missing_phrase(void **state)
{
    (void)state;
    struct archive archive = archive_begin();
    put_template(&archive, "words.yaml", "document:\n  language: en\n");
    assert_null(compose(&archive));
    bool place_told = false;
    assert_true(archive.sample->diagnostics.errors > 0);
    for (size_t i = 0; i < archive.sample->diagnostics.count; i++)
        place_told |= strstr(archive.sample->diagnostics.items[i].text, "'lift.coupling'") != NULL;
    assert_true(place_told);
    for (size_t i = 0; i < archive.sample->diagnostics.count; i++)
        assert_int_equal(archive.sample->diagnostics.items[i].code, DIAGNOSTIC_WORD_MISSING);
    archive_end(&archive, NULL);
}

/* Raw HTML of a template is dropped like any other; what stands behind it is still there. */
static void test_html_in_template(void **state)
{
    (void)state;
    struct archive archive = archive_begin();
    put_template(&archive, "record.md", "<!-- open\n\n{{> leakage}}\n\nlast\n");
    struct document *document = compose(&archive);
    assert_non_null(document);
    assert_non_null(sample_exhibit(document, "leakage"));
    struct buffer text = {0};
    document_plain_text(document->root, &text);
    assert_string_equal(buffer_string(&text), "last");
    buffer_release(&text);
    assert_int_equal(archive.sample->diagnostics.count, 1);
    assert_int_equal(archive.sample->diagnostics.items[0].code, DIAGNOSTIC_RAW_HTML_DROPPED);
    archive_end(&archive, document);
}

/* An exhibit named twice stands twice, under two anchors. */
static void test_exhibit_twice(void **state)
{
    (void)state;
    struct archive archive = archive_begin();
    put_template(&archive, "record.md", "{{> leakage}}\n{{> leakage}}\n");
    struct document *document = compose(&archive);
    assert_non_null(document);
    assert_non_null(sample_exhibit(document, "leakage"));
    assert_non_null(sample_exhibit(document, "leakage-2"));
    archive_end(&archive, document);
}

static void test_text_of_a_file(void **state)
{
    (void)state;
    struct archive archive = archive_begin();
    put_template(&archive, "style.css", "body {}\n");
    struct sample *sample = archive.sample;
    const struct templates *templates =
        templates_open(archive.folder, ".", &sample->shop, &sample->arena, &sample->diagnostics);
    assert_string_equal(templates_text(templates, "style.css", &sample->diagnostics), "body {}\n");
    assert_int_equal(sample->diagnostics.count, 0);
    assert_null(templates_text(templates, "no.css", &sample->diagnostics));
    assert_int_equal(sample->diagnostics.items[0].code, DIAGNOSTIC_FILE_UNREADABLE);
    archive_end(&archive, NULL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_own_template),   cmocka_unit_test(test_mistakes),
        cmocka_unit_test(test_missing_phrase), cmocka_unit_test(test_html_in_template),
        cmocka_unit_test(test_exhibit_twice),  cmocka_unit_test(test_text_of_a_file),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
