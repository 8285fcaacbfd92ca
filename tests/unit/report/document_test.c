#include "kit.h"

#include "report/document.h"

#include <string.h>

static cmark_node *parsed(const char *text)
{
    return cmark_parse_document(text, strlen(text), CMARK_OPT_DEFAULT);
}

static void ids_of_sections(void **state)
{
    (void)state;
    static const char *const expected[] = {
        "all-capacitors-at-a-glance", "leakage", "leakage--2", "stage",     "stage-2",   "stage--2",
        "the-makers-sheet",           "section", "main--2",    "reform--2", "leakage--3"};
    cmark_node *root = parsed("## All capacitors *at a glance*\n\n## Leakage\n\n## Leakage\n\n"
                              "## Stage\n\n## Stage 2\n\n## Stage\n\n## The maker's `sheet`!\n\n"
                              "## Ψ\n\n## Main\n\n## Reform\n\n## --leakage--\n");
    struct exhibit exhibit = {.kind = EXHIBIT_PLOT, .id = "reform"};
    cmark_node *node = cmark_node_new(CMARK_NODE_CUSTOM_BLOCK);
    cmark_node_set_user_data(node, &exhibit);
    cmark_node_append_child(root, node);
    assert_ptr_equal(document_exhibit(node), &exhibit);
    size_t count = 0;
    for (cmark_node *heading = cmark_node_first_child(root);
         cmark_node_get_type(heading) == CMARK_NODE_HEADING; heading = cmark_node_next(heading)) {
        struct buffer id = {0};
        assert_null(document_exhibit(heading));
        document_section_id(heading, &id);
        assert_string_equal(buffer_string(&id), expected[count++]);
        buffer_release(&id);
    }
    assert_int_equal(count, sizeof expected / sizeof expected[0]);
    cmark_node_free(root);
}

static void plain_text(void **state)
{
    (void)state;
    cmark_node *root = parsed("One *two*\n`three` [four](https://x.example)  \nfive");
    struct buffer text = {0};
    document_plain_text(root, &text);
    assert_string_equal(buffer_string(&text), "One two three four five");
    buffer_release(&text);
    cmark_node_free(root);
}

static void released(void **state)
{
    (void)state;
    struct document document = {.root = parsed("text")};
    document_release(&document);
    assert_null(document.root);
    document_release(&document);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(ids_of_sections),
        cmocka_unit_test(plain_text),
        cmocka_unit_test(released),
    };
    return cmocka_run_group_tests_name("document", tests, NULL, NULL);
}
