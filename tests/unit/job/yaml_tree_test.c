/* The tree: places, styles, bounds, repairs. Positions were counted by hand in the text. */
#include "job/yaml_tree.h"

#include "base/buffer.h"
#include "job/job.h"
#include "kit.h"

#include <stdlib.h>
#include <string.h>

struct tree {
    struct arena arena;
    struct diagnostics diagnostics;
    struct node *root;
};

static struct source source_of(const char *text)
{
    return (struct source){"1.yaml", text, strlen(text)};
}

static void tree_read(struct tree *tree, const struct source *source)
{
    memset(tree, 0, sizeof *tree);
    tree->diagnostics = diagnostics_in(&tree->arena);
    tree->root = yaml_tree_read(source, &tree->arena, &tree->diagnostics);
}

static void test_places(void **state)
{
    (void)state;
    struct source source = source_of("job: 80\nset:\n  maker: 'x y'\n  µ: [a, b]\nwork: |\n  two\n"
                                     "  lines\nnext: 6E5\n");
    struct tree tree;
    tree_read(&tree, &source);
    assert_int_equal(tree.diagnostics.count, 0);
    const struct node *job = node_child(tree.root, "job");
    assert_string_equal(job->text, "80"); /* text, no number */
    assert_int_equal(job->key_at.line, 1);
    assert_int_equal(job->key_at.column, 1);
    assert_int_equal(job->at.column, 6);
    const struct node *set = node_child(tree.root, "set");
    const struct node *maker = node_child(set, "maker");
    assert_int_equal(maker->style, STYLE_QUOTED);
    assert_int_equal(maker->at.line, 3);
    assert_int_equal(maker->at.column, 11); /* of the x, behind the quote */
    const struct node *list = node_child(set, "\xC2\xB5");
    assert_int_equal(list->kind, NODE_SEQUENCE);
    assert_int_equal(list->count, 2);
    assert_int_equal(list->first->next->at.column, 10); /* code points, not bytes */
    assert_int_equal(set->end_line, 5);
    const struct node *work = node_child(tree.root, "work");
    assert_int_equal(work->style, STYLE_BLOCK);
    assert_string_equal(work->text, "two\nlines\n");
    assert_int_equal(work->at.line, work->key_at.line + 1); /* of the text, not of the | */
    assert_int_equal(work->at.column, 3);
    assert_string_equal(node_child(tree.root, "next")->text, "6E5");
    assert_null(node_child(tree.root, "other"));
    arena_release(&tree.arena);
}

static void test_comments(void **state)
{
    (void)state;
    struct source source = source_of("a: x   # apart\nb: x # near\nc: stock #4\nd: x\ne: µ #4\n");
    static const enum comment_place expected[] = {COMMENT_APART, COMMENT_NEAR, COMMENT_TIGHT,
                                                  COMMENT_NONE, COMMENT_TIGHT};
    struct tree tree;
    tree_read(&tree, &source);
    const struct node *node = tree.root->first;
    for (size_t i = 0; i < 5; i++, node = node->next)
        assert_int_equal(node->comment, expected[i]);
    arena_release(&tree.arena);
}

/* All mistakes in one run, and what is left is there. */
static void test_repairs(void **state)
{
    (void)state;
    struct source source = source_of("a: {x: 1, y: 2\nb: note: more\nc: \"x\" y\nd:\n  e: 5\n"
                                     "   f: 6\ng: last\n");
    struct tree tree;
    tree_read(&tree, &source);
    assert_int_equal(tree.diagnostics.errors, 4);
    assert_non_null(tree.root);
    assert_string_equal(node_child(tree.root, "g")->text, "last");
    assert_string_equal(node_child(node_child(tree.root, "d"), "e")->text, "5");
    assert_true(node_is_empty(node_child(tree.root, "b")));
    assert_true(node_child(tree.root, "b")->damaged);
    assert_false(node_child(tree.root, "g")->damaged);
    arena_release(&tree.arena);
}

/* More mistakes than repairs: it ends, and says so. */
static void test_repairs_end(void **state)
{
    (void)state;
    struct buffer text = {0};
    for (int i = 0; i < 100; i++)
        buffer_text(&text, "a:\n  - x\n b\n");
    struct source source = source_of(buffer_string(&text));
    struct tree tree;
    tree_read(&tree, &source);
    assert_true(tree.diagnostics.errors >= 1);
    assert_true(tree.diagnostics.errors <= 200);
    arena_release(&tree.arena);
    buffer_release(&text);
}

static void repeat(struct buffer *text, const char *piece, int count)
{
    for (int i = 0; i < count; i++)
        buffer_text(text, piece);
}

static void test_bounds(void **state)
{
    (void)state;
    static const struct {
        const char *before, *piece;
        int count;
        const char *after;
        enum diagnostic_code code;
        size_t errors;
    } rows[] = {
        {"a: ", "[", 32, "", DIAGNOSTIC_YAML_TOO_DEEP, 1},
        {"", "[", 100000, "", DIAGNOSTIC_YAML_TOO_DEEP, 1},
        {"", "- ", 50000, "", DIAGNOSTIC_YAML_TOO_DEEP, 1},
        {"a: [", "x,", 20000, "]", DIAGNOSTIC_YAML_TOO_MANY_KEYS, 1},
        {"a: ", "x", JOB_PROSE_BYTES_MAX, "", DIAGNOSTIC_TEXT_TOO_LONG, 0},
        {"a: ", "x", JOB_PROSE_BYTES_MAX + 1, "", DIAGNOSTIC_TEXT_TOO_LONG, 1},
        {"a: ", "x", JOB_BYTES_MAX, "", DIAGNOSTIC_FILE_TOO_LARGE, 1},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct buffer text = {0};
        struct tree tree;
        buffer_text(&text, rows[i].before);
        repeat(&text, rows[i].piece, rows[i].count);
        buffer_text(&text, rows[i].after);
        struct source source = source_of(buffer_string(&text));
        tree_read(&tree, &source);
        assert_int_equal(tree.diagnostics.errors, rows[i].errors);
        if (rows[i].errors)
            assert_int_equal(tree.diagnostics.items[0].code, rows[i].code);
        arena_release(&tree.arena);
        buffer_release(&text);
    }
}

/* A key that is there twice is found among thousands, whatever the mapping; the first counts. */
static void test_duplicates(void **state)
{
    (void)state;
    struct buffer text = {0};
    struct tree tree;
    buffer_text(&text, "a:\n");
    for (int i = 0; i < 4000; i++)
        buffer_print(&text, "  k%d: {x: %d}\n", i, i);
    buffer_text(&text, "  k7: {x: other}\nb: {k7: 1}\nA: 1\n");
    struct source source = source_of(buffer_string(&text));
    tree_read(&tree, &source);
    assert_int_equal(tree.diagnostics.count, 1);
    assert_int_equal(tree.diagnostics.items[0].code, DIAGNOSTIC_DUPLICATE_KEY);
    assert_int_equal(tree.diagnostics.items[0].at.line, 4002);
    const struct node *table = node_child(tree.root, "a");
    assert_int_equal(table->count, 4000);
    assert_string_equal(node_child(node_child(table, "k7"), "x")->text, "7");
    arena_release(&tree.arena);
    buffer_release(&text);
}

/* 31 levels under the root mapping are allowed. */
static void test_depth_allowed(void **state)
{
    (void)state;
    struct buffer text = {0};
    struct tree tree;
    buffer_text(&text, "a: ");
    repeat(&text, "[", 31);
    repeat(&text, "]", 31);
    struct source source = source_of(buffer_string(&text));
    tree_read(&tree, &source);
    assert_int_equal(tree.diagnostics.errors, 0);
    arena_release(&tree.arena);
    buffer_release(&text);
}

/* What is written reads back the same. */
static void test_scalars_round_trip(void **state)
{
    (void)state;
    static const char *const texts[] = {
        "plain",   "with: colon", "with #hash", "it's",    "'quoted'",   "\"double\"",
        "> 100 M", "-19 V",       "- 28 V",     "",        "two\nlines", "two\nlines\n",
        " led",    "trail ",      "%x",         "&x",      "*x",         "!x",
        "[x",      "{x",          "---",        "...",     "key:",       "?",
        "? x",     "~",           "null",       "µ 0.1 F", "a, b",       "  in\nblock\n",
        "-",       "=",           "x\n\ny\n",   "#x",      "--- x",      "|",
    };
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        struct buffer text = {0};
        struct tree tree;
        buffer_text(&text, "m:\n  key: ");
        yaml_scalar_write(&text, texts[i], 4);
        buffer_text(&text, "\n  next: y\n");
        struct source source = source_of(buffer_string(&text));
        tree_read(&tree, &source);
        if (tree.diagnostics.count)
            print_error("%s: %s\n", source.text, tree.diagnostics.items[0].text);
        assert_int_equal(tree.diagnostics.count, 0);
        const struct node *mapping = node_child(tree.root, "m");
        assert_string_equal(node_child(mapping, "key")->text, texts[i]);
        assert_string_equal(node_child(mapping, "next")->text, "y");
        arena_release(&tree.arena);
        buffer_release(&text);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_places),
        cmocka_unit_test(test_comments),
        cmocka_unit_test(test_repairs),
        cmocka_unit_test(test_repairs_end),
        cmocka_unit_test(test_bounds),
        cmocka_unit_test(test_depth_allowed),
        cmocka_unit_test(test_scalars_round_trip),
        cmocka_unit_test(test_duplicates),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
