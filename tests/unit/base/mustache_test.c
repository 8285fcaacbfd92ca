/* Mustache: what the published spec (github.com/mustache/spec, mustache(5)) asks of variables,
   sections, inverted sections, partials and comments; and what is refused here on purpose. */
#include "base/mustache.h"

#include "kit.h"

#include <string.h>

struct fixture {
    struct arena arena;
    struct diagnostics diagnostics;
    struct mustache_value *values;
    struct buffer out;
};

static const struct {
    const char *name, *text;
} partials[] = {
    {"plain", "from partial"},
    {"named", "[{{name}}]"},
    {"lines", "one\ntwo {{name}}\n"},
    {"self", "{{> self}}{{> self}}{{> self}}"},
    {"tree", "{{text}}<{{#nodes}}{{>tree}}{{/nodes}}>"},
};

static enum mustache_partial_answer partial_of(void *data, const struct mustache_partial *partial,
                                               const struct source **found)
{
    struct fixture *fixture = data;
    for (size_t i = 0; i < sizeof partials / sizeof *partials; i++) {
        if (strcmp(partials[i].name, partial->name) != 0)
            continue;
        struct source *source = arena_get(&fixture->arena, sizeof *source);
        *source = (struct source){partials[i].name, partials[i].text, strlen(partials[i].text)};
        *found = source;
        return MUSTACHE_PARTIAL_TEMPLATE;
    }
    return MUSTACHE_PARTIAL_UNKNOWN;
}

static void begin(struct fixture *fixture)
{
    *fixture = (struct fixture){0};
    fixture->diagnostics = diagnostics_in(&fixture->arena);
    fixture->values = mustache_map(&fixture->arena);
    struct arena *arena = &fixture->arena;
    struct mustache_value *values = fixture->values, *inner = mustache_map(arena),
                          *list = mustache_list(arena), *nodes = mustache_list(arena),
                          *leaf = mustache_map(arena), *empty = mustache_map(arena);
    mustache_set_text(arena, values, "name", "R. O.");
    mustache_set_text(arena, values, "markup", "a & \"b\" < c > 'd'");
    mustache_set_text(arena, values, "empty", "");
    mustache_set_flag(arena, values, "yes", true);
    mustache_set_flag(arena, values, "no", false);
    mustache_set_text(arena, inner, "name", "inner");
    mustache_set_text(arena, inner, "only", "here");
    mustache_set(arena, values, "inner", inner);
    mustache_set(arena, values, "hollow", empty);
    mustache_push(arena, list, mustache_text(arena, "a"));
    mustache_push(arena, list, mustache_text(arena, "b"));
    mustache_set(arena, values, "list", list);
    mustache_set(arena, values, "none", mustache_list(arena));
    mustache_set_text(arena, leaf, "text", "leaf");
    mustache_set(arena, leaf, "nodes", mustache_list(arena));
    mustache_push(arena, nodes, leaf);
    mustache_set_text(arena, values, "text", "root");
    mustache_set(arena, values, "nodes", nodes);
}

static bool render(struct fixture *fixture, const char *template, mustache_escape *escape)
{
    struct source source = {"test.md", template, strlen(template)};
    struct mustache_target target = {escape, partial_of, fixture, &fixture->arena,
                                     &fixture->diagnostics};
    buffer_clear(&fixture->out);
    return mustache_render(&source, fixture->values, &target, &fixture->out);
}

static void end(struct fixture *fixture)
{
    buffer_release(&fixture->out);
    arena_release(&fixture->arena);
}

static void test_spec(void **state)
{
    (void)state;
    static const struct {
        const char *template, *expected;
    } rows[] = {
        {"Hello, {{name}}!", "Hello, R. O.!"},
        {"{{ name }}|{{\tname\n}}", "R. O.|R. O."},
        {"{{markup}}", "a &amp; &quot;b&quot; &lt; c &gt; &#39;d&#39;"},
        {"[{{missing}}][{{inner.missing}}][{{missing.name}}]", "[][][]"},
        {"{{inner.name}} {{#inner}}{{name}} {{only}}{{/inner}}", "inner inner here"},
        {"{{#inner}}{{text}}{{/inner}}", "root"},
        {"{{#list}}({{.}}){{/list}}", "(a)(b)"},
        {"{{#yes}}on{{/yes}}{{#no}}off{{/no}}{{#empty}}off{{/empty}}", "on"},
        {"{{^yes}}off{{/yes}}{{^no}}on{{/no}}{{^empty}}on{{/empty}}{{^none}}on{{/none}}", "ononon"},
        {"{{#none}}x{{/none}}{{#hollow}}map{{/hollow}}", "map"},
        {"| This Is\n{{#yes}}\n|\n{{/yes}}\n| A Line", "| This Is\n|\n| A Line"},
        {"|\r\n{{#yes}}\r\n{{/yes}}\r\n|", "|\r\n|"},
        {"  {{#yes}}\n#{{/yes}}\n/", "#\n/"},
        {"#{{#yes}}\n/\n  {{/yes}}", "#\n/\n"},
        {" | {{#yes}} \t|\t {{/yes}} | ", " |  \t|\t  | "},
        {"12345{{! a comment\nof two lines }}67890", "1234567890"},
        {"Begin.\n  {{! alone }}\nEnd.\n", "Begin.\nEnd.\n"},
        {"  12 {{! not alone }}\n", "  12 \n"},
        {"\"{{>plain}}\" {{> named }}", "\"from partial\" [R. O.]"},
        {"{{#inner}}{{>named}}{{/inner}}", "[inner]"},
        {">\n  {{> lines}}\n<", ">\n  one\n  two R. O.\n<"},
        {"  {{name}}  {{> plain}}\n", "  R. O.  from partial\n"},
        {"{{>tree}}", "root<leaf<>>"},
        {"{{#list}}\n- {{.}}\n{{/list}}\n", "- a\n- b\n"},
        /* spec, "Dotted Names - Context Precedence": the first name decides */
        {"{{#inner}}{{inner.name}}{{/inner}}", "inner"},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct fixture fixture;
        begin(&fixture);
        assert_true(render(&fixture, rows[i].template, mustache_escape_html));
        assert_string_equal(buffer_string(&fixture.out), rows[i].expected);
        end(&fixture);
    }
}

static void test_mistakes(void **state)
{
    (void)state;
    static const struct {
        const char *template;
        enum diagnostic_code code;
        struct position at;
    } rows[] = {
        {"a {{{name}}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 3}},
        {"a\n{{&name}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {2, 1}},
        {"{{=<% %>=}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
        {"µ {{#yes}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 3}},
        {"{{/yes}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
        {"{{#yes}}{{/no}}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 9}},
        {"{{name", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
        {"{{ }}", DIAGNOSTIC_TEMPLATE_SYNTAX, {1, 1}},
        {"\n {{> nothing}}", DIAGNOSTIC_TEMPLATE_PARTIAL, {2, 2}},
        {"{{> self}}", DIAGNOSTIC_TEMPLATE_DEPTH, {1, 1}},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct fixture fixture;
        begin(&fixture);
        assert_false(render(&fixture, rows[i].template, mustache_escape_html));
        assert_int_equal(fixture.diagnostics.count, 1);
        assert_int_equal(fixture.diagnostics.items[0].code, rows[i].code);
        assert_int_equal(fixture.diagnostics.items[0].at.line, rows[i].at.line);
        assert_int_equal(fixture.diagnostics.items[0].at.column, rows[i].at.column);
        end(&fixture);
    }
}

static void test_sections_too_deep(void **state)
{
    (void)state;
    struct fixture fixture;
    struct buffer template = {0};
    begin(&fixture);
    for (int i = 0; i <= MUSTACHE_SECTIONS_MAX; i++)
        buffer_text(&template, "{{#yes}}");
    assert_false(render(&fixture, buffer_string(&template), mustache_escape_html));
    buffer_release(&template);
    end(&fixture);
}

static void test_escaping(void **state)
{
    (void)state;
    static const struct {
        mustache_escape *escape;
        const char *text, *expected;
    } rows[] = {
        {mustache_escape_nothing, " <a> *b* ", " <a> *b* "},
        {mustache_escape_commonmark, "  # x *y* \n\n  [z](w)  ", "\\# x \\*y\\* \\[z\\]\\(w\\)"},
        {mustache_escape_commonmark, "<!-- `a` \\ {{> b}}",
         "\\<\\!\\-\\- \\`a\\` \\\\ \\{\\{\\> b\\}\\}"},
        {mustache_escape_commonmark, "1. a\n2. b\r\n===", "1\\. a 2\\. b \\=\\=\\="},
        {mustache_escape_commonmark, "4n7 µF é", "4n7 µF é"},
        {mustache_escape_commonmark, " \t\n ", ""},
    };
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct buffer out = {0};
        rows[i].escape(&out, rows[i].text, strlen(rows[i].text));
        assert_string_equal(buffer_string(&out), rows[i].expected);
        buffer_release(&out);
    }
}

/* What a variable gives is never read as a template again. */
static void test_values_are_not_templates(void **state)
{
    (void)state;
    struct fixture fixture;
    begin(&fixture);
    mustache_set_text(&fixture.arena, fixture.values, "typed", "{{name}}{{> plain}}{{#yes}}");
    assert_true(render(&fixture, "<{{typed}}>", mustache_escape_nothing));
    assert_string_equal(buffer_string(&fixture.out), "<{{name}}{{> plain}}{{#yes}}>");
    end(&fixture);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_spec),
        cmocka_unit_test(test_mistakes),
        cmocka_unit_test(test_sections_too_deep),
        cmocka_unit_test(test_escaping),
        cmocka_unit_test(test_values_are_not_templates),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
