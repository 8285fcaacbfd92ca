/* HTML. With a folder as argument: writes the pages that tests/web looks at, and tests nothing. */
#include "golden.h"
#include "sample_document.h"

#include "write/escape.h"
#include "write/writer.h"

#include <stdio.h>

static void page_of(const struct document *document, const char *style, struct buffer *out)
{
    struct buffer page = golden_read("templates/page.html");
    html_write(document, style, buffer_string(&page), out);
    buffer_release(&page);
}

static void sample_as_before(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, 1);
    page_of(document, "/* the style stands here */", &out);
    golden_compare(&out, "tests/golden/write/sample.html");
    buffer_release(&out);
    sample_document_release(document);
    arena_release(&arena);
}

static const char hostile[] = "</script><img src=x onerror=alert(1)>\"'&lt; ]]> {{title}}\x01";

/* A document in which every text is hostile: none of it may become markup. */
static struct document *hostile_document(struct arena *arena)
{
    struct document *document = sample_document(arena, 1);
    document->title = document->author = document->subject = hostile;
    document->footer = document->skip_word = document->contents_word = hostile;
    document->running_head = "\"}</style><script>\\";
    document->page_word = document->page_word_of = hostile;
    document->accent = "red;}</style>";
    document->language = "en\" onload=\"x";
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        struct exhibit *exhibit = cmark_node_get_type(node) == CMARK_NODE_CUSTOM_BLOCK
                                      ? cmark_node_get_user_data(node)
                                      : NULL;
        if (!exhibit)
            continue;
        exhibit->number = hostile;
        if (exhibit->kind == EXHIBIT_TABLE) {
            exhibit->table.caption = exhibit->table.remark = hostile;
            for (size_t i = 0; i < exhibit->table.column_count; i++) {
                exhibit->table.columns[i].head = exhibit->table.columns[i].unit = hostile;
                exhibit->table.columns[i].label = hostile;
            }
            for (size_t i = 0; i < exhibit->table.row_count; i++)
                for (size_t j = 0; j < exhibit->table.column_count; j++) {
                    struct cell *cell = &exhibit->table.rows[i].cells[j];
                    cell->text = cell->second = cell->notes = hostile;
                    cell->figures = sample_figures(hostile, hostile, hostile, hostile);
                }
        } else if (exhibit->kind == EXHIBIT_PLOT) {
            exhibit->plot.title = exhibit->plot.caption = hostile;
            if (exhibit->plot.kind == PLOT_GLANCE)
                for (size_t i = 0; i < exhibit->plot.glance.row_count; i++)
                    exhibit->plot.glance.rows[i].ref = exhibit->plot.glance.rows[i].outcome =
                        hostile;
        } else if (exhibit->kind == EXHIBIT_PLATE) {
            exhibit->plate.pictures[0].text = exhibit->plate.pictures[0].when = hostile;
        } else if (exhibit->kind == EXHIBIT_TITLE) {
            exhibit->title.title = exhibit->title.shop_name = hostile;
        }
    }
    return document;
}

static size_t count_of(const char *text, const char *word)
{
    size_t count = 0;
    for (const char *place = text; (place = strstr(place, word)) != NULL; place++)
        count++;
    return count;
}

/* HTML Living Standard, 13.3 (escaping a string) and 13.2.3.5 (control characters are errors). */
static void every_byte_is_escaped(void **state)
{
    (void)state;
    for (int byte = 1; byte < 256; byte++) {
        char text[] = {'a', (char)byte, 'b', '\0'}, expected[16];
        const char *middle = byte == '&'    ? "&amp;"
                             : byte == '<'  ? "&lt;"
                             : byte == '>'  ? "&gt;"
                             : byte == '"'  ? "&quot;"
                             : byte == '\t' ? "\t"
                             : byte == '\n' ? "\n"
                             : byte < 0x20  ? "\xef\xbf\xbd"
                             : byte == 0x7f ? "\xef\xbf\xbd"
                                            : NULL;
        snprintf(expected, sizeof expected, "a%sb", middle ? middle : (char[]){(char)byte, '\0'});
        struct buffer out = {0};
        escape_html(&out, text);
        assert_string_equal(buffer_string(&out), expected);
        buffer_release(&out);
    }
}

static void nothing_becomes_markup(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = hostile_document(&arena);
    page_of(document, "", &out);
    const char *page = buffer_string(&out);
    assert_int_equal(count_of(page, "<script"), 0);
    assert_int_equal(count_of(page, "</script"), 0);
    assert_int_equal(count_of(page, "<img src=x"), 0);
    assert_int_equal(count_of(page, "\x01"), 0);
    assert_int_equal(count_of(page, "</style>"), 1);
    assert_int_equal(count_of(page, "\" onload=\""), 0);
    assert_int_equal(count_of(page, "red;"), 0);
    assert_true(count_of(page, "&lt;/script&gt;") > 300);
    assert_true(count_of(page, "{{title}}") > 300); /* values are not rendered again */
    buffer_release(&out);
    sample_document_release(document);
    arena_release(&arena);
}

static void ids_stand_once(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, 1);
    sample_prose(document, "## Leakage\n\n## Leakage\n\n## Main\n\n## ψ\n");
    html_write_body(document, &out);
    const char *body = buffer_string(&out);
    size_t ids = 0;
    for (const char *place = body; (place = strstr(place, " id=\"")) != NULL; place += 5, ids++) {
        char *id = arena_text(&arena, place, 5 + strcspn(place + 5, "\"") + 1);
        if (count_of(body, id) != 1)
            print_error("%s stands twice\n", id);
        assert_int_equal(count_of(body, id), 1);
    }
    assert_true(ids > 20);
    /* Every link of the contents leads to one of them. */
    size_t links = 0;
    for (const char *place = body; (place = strstr(place, "href=\"#")) != NULL;
         place += 7, links++) {
        char *id = arena_print(&arena, " id=\"%.*s\"", (int)strcspn(place + 7, "\""), place + 7);
        assert_int_equal(count_of(body, id), 1);
    }
    assert_int_equal(links, 17);
    buffer_release(&out);
    sample_document_release(document);
    arena_release(&arena);
}

static void page_mistakes_are_said(void **state)
{
    (void)state;
    static const struct {
        const char *page;
        bool good;
    } rows[] = {{"<title>{{title}}</title>\n{{> document}}\n", true},
                {"{{> header}}\n", false},
                {"{{{title}}}", false},
                {"{{#title}}", false}};
    for (size_t i = 0; i < SAMPLE_COUNT(rows); i++) {
        struct arena arena = {0};
        struct diagnostics diagnostics = diagnostics_in(&arena);
        struct source source = {"page.html", rows[i].page, strlen(rows[i].page)};
        assert_int_equal(html_check_page(&source, &arena, &diagnostics), rows[i].good);
        assert_int_equal(diagnostics.errors == 0, rows[i].good);
        arena_release(&arena);
    }
    struct buffer page = golden_read("templates/page.html");
    struct arena arena = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {"page.html", buffer_string(&page), page.length};
    assert_true(html_check_page(&source, &arena, &diagnostics));
    arena_release(&arena);
    buffer_release(&page);
}

/* Syntax of CSS, CSS Syntax Module Level 3, 4.3.5 and 4.3.7: a backslash and six digits. */
static void css_strings(void **state)
{
    (void)state;
    struct buffer out = {0};
    escape_css(&out, "Record 7, client’s \"<copy>\"\n");
    assert_string_equal(buffer_string(&out),
                        "Record 7, client’s \\000022\\00003Ccopy\\00003E\\000022\\00FFFD");
    buffer_release(&out);
}

static void letter_paper(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct buffer out = {0};
    struct document *document = sample_document(&arena, 1);
    document->page = PAGE_LETTER;
    page_of(document, "", &out);
    assert_non_null(strstr(buffer_string(&out), "@page { size: letter;"));
    buffer_release(&out);
    sample_document_release(document);
    arena_release(&arena);
}

static void write_page(const struct document *document, const char *folder, const char *name)
{
    struct buffer style = golden_read("templates/style.css"), out = {0}, path = {0};
    page_of(document, buffer_string(&style), &out);
    buffer_print(&path, "%s/%s", folder, name);
    assert_int_equal(file_write(buffer_string(&path), out.data, out.length, NULL), FILE_OK);
    buffer_release(&style);
    buffer_release(&out);
    buffer_release(&path);
}

static void write_drawings(const struct document *document, const char *folder)
{
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        struct buffer out = {0}, path = {0};
        if (exhibit && (exhibit->kind == EXHIBIT_PLOT || exhibit->kind == EXHIBIT_HEADLINE)) {
            svg_write_file(exhibit, document->accent, &out);
            buffer_print(&path, "%s/%s.svg", folder, exhibit->id);
            assert_int_equal(file_write(buffer_string(&path), out.data, out.length, NULL), FILE_OK);
        }
        buffer_release(&out);
        buffer_release(&path);
    }
}

static int write_pages(const char *folder)
{
    struct arena arena = {0};
    struct document *documents[] = {sample_document(&arena, 1), sample_document(&arena, 3),
                                    hostile_document(&arena), sample_document(&arena, 1)};
    static const char *const names[] = {"sample.html", "long.html", "hostile.html", "sheet.html"};
    documents[2]->language = "en";
    documents[3]->kind = DOCUMENT_SHEET;
    documents[3]->sections_numbered = false;
    for (size_t i = 0; i < SAMPLE_COUNT(names); i++) {
        write_page(documents[i], folder, names[i]);
        if (i == 0)
            write_drawings(documents[i], folder);
        sample_document_release(documents[i]);
    }
    arena_release(&arena);
    return 0;
}

int main(int count, char **arguments)
{
    if (count > 1)
        return write_pages(arguments[1]);
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sample_as_before),       cmocka_unit_test(every_byte_is_escaped),
        cmocka_unit_test(nothing_becomes_markup), cmocka_unit_test(ids_stand_once),
        cmocka_unit_test(page_mistakes_are_said), cmocka_unit_test(css_strings),
        cmocka_unit_test(letter_paper),
    };
    return cmocka_run_group_tests_name("html", tests, NULL, NULL);
}
