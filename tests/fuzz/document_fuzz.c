/*
 * Whole documents of changed jobs: read, assessed, composed and written in every format. Whatever a
 * job says, HTML is well-formed and runs nothing, every section of the document is in every format,
 * texts of the job take no other section away, JSON can be read, and no copy shows what it keeps
 * back.
 *
 * document_fuzz AMOUNT SEED SHARE FILE..., SHARE: the folder with templates/ and fonts/. A failing
 * job is left in document_fuzz.failed.yaml of the working folder.
 */
#include "assess/findings.h"
#include "assess/visit.h"
#include "base/file.h"
#include "fuzz.h"
#include "html_check.h"
#include "job_change.h"
#include "report/report.h"
#include "write/json.h"
#include "write/picture.h"
#include "write/writer.h"

#include <cjson/cJSON.h>

enum { JOB_MAX = 1 << 20, COLUMNS = 80 };

/* Of every job's `private` and the owner's `contact`: in no copy that keeps them back. */
static const char private_word[] = "Wvutsrq", contact_word[] = "Zyxwvut";

/* What all inputs share. */
struct bench {
    struct arena arena;
    const struct shop *shop;
    struct templates *templates;
    struct pdf_resources *pdf;
    const char *style, *page;
    struct job_stock stock;
    const char **paths; /* of the files of the stock */
};

/* ---- texts of any kind */

static const char *const hostile[] = {
    "<script>",
    "</script>",
    "<img src=x onerror=1>",
    "</p></div></main>",
    "</style>",
    "</title>",
    "<!--",
    "-->",
    "<![CDATA[",
    "]]>",
    "<?php",
    "&",
    "&amp;",
    "&#0;",
    "&#x3c;script>",
    "\\\"",
    "'",
    "[a](javascript:x)",
    "[a](http://b/\\\"><script>)",
    "![x](y)",
    "[main](#main)",
    "<http://a.b/c>",
    "\\n# h",
    "\\n\\n## Capacitors\\n",
    "\\n\\n",
    "\\n===\\n",
    "\\n---\\n",
    "\\n- a\\n  - b",
    "\\n> q",
    "\\n```\\n",
    "\\n    code",
    "{{title}}",
    "{{> leakage}}",
    "{{#a}}",
    "{{/a}}",
    "|",
    "**",
    "_",
    "`",
    "\\\\",
    "\\u200B",
    "\\u00A0",
    "\\u0301\\u0301\\u0301",
    "\\u4E00\\u4E8C",
    "\\U0001F4FB",
    "\\u0645\\u0631",
    "\\uFFFD",
    "\\uFB01",
    "wwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwwww",
    "C14",
    "R12",
    "1.",
    "1)",
    "http://a.b/c",
    "a",
    " ",
    ". ",
};

static bool is_block_text(const char *line)
{
    return line[strlen(line) - 1] == '|';
}

/* Keys of which the value is a text and nothing more. */
static bool is_text_key(const char *line)
{
    static const char *const keys[] = {
        "maker:",      "model:",   "chassis:", "serial:",  "description:",
        "note:",       "reason:",  "arrival:", "request:", "plan:",
        "approvals:",  "private:", "work:",    "hazards:", "shows:",
        "technician:", "caption:", "name:",    "left:",    "next_service:",
        "notes:",      "removed:", "sources:", "safety:",  NULL};
    const char *key = line + line_indent(line);
    if (line_key(line) && !key[line_key(line)])
        return false; /* lines or keys of its own below */
    for (const char *const *text_key = keys; *text_key; text_key++)
        if (strncmp(key, *text_key, strlen(*text_key)) == 0)
            return true;
    return false;
}

/* The block of a text key says something else: in `wild` signs of every kind, in `tame` a word. */
static void put_text(struct fuzz *fuzz, struct job_lines *wild, struct job_lines *tame, size_t at,
                     struct arena *arena)
{
    struct buffer text = {0};
    size_t count = 1 + fuzz_below(fuzz, 12), repeats = fuzz_below(fuzz, 30) == 0 ? 60 : 1;
    for (size_t i = 0; i < count; i++) {
        const char *piece = hostile[fuzz_below(fuzz, sizeof hostile / sizeof *hostile)];
        if (!is_block_text(wild->lines[at]) && strstr(piece, "\\n"))
            piece = "#"; /* that key takes one line */
        for (size_t n = 0; n < repeats; n++)
            buffer_text(&text, piece);
    }
    size_t end = block_end(wild, at);
    const char *line = wild->lines[at];
    int length = (int)(line_indent(line) + line_key(line));
    struct job_lines wild_line = {0}, tame_line = {0};
    job_lines_add(&wild_line,
                  arena_print(arena, "%.*s \"word %s\"", length, line, buffer_string(&text)),
                  arena);
    job_lines_add(&tame_line, arena_print(arena, "%.*s word", length, line), arena);
    lines_exchange(wild, at, end, &wild_line, arena);
    lines_exchange(tame, at, end, &tame_line, arena);
    buffer_release(&text);
}

/* ---- what comes of a job */

struct opened {
    struct diagnostics diagnostics;
    struct source source;
    const struct job *job;
    struct findings *findings;
};

static void open_lines(const struct bench *bench, const struct job_lines *lines, const char *path,
                       struct arena *arena, struct opened *opened)
{
    struct buffer text = {0};
    job_lines_write(lines, &text);
    opened->diagnostics = diagnostics_in(arena);
    opened->source = (struct source){path, arena_text(arena, text.data, text.length), text.length};
    buffer_release(&text);
    opened->job = job_read(&opened->source, arena, &opened->diagnostics);
    opened->findings = assess_job(opened->job, bench->shop, "0", arena, &opened->diagnostics);
    opened->findings->diagnostics = &opened->diagnostics;
    opened->findings->fingerprint = "0123456789abcdef";
}

static void fail(const char *what, const char *where)
{
    fprintf(stderr, "%s: %.200s\n", what, where);
    abort();
}

static size_t count_of(const struct buffer *text, const char *word)
{
    size_t count = 0, length = strlen(word);
    if (text->length == 0)
        return 0;
    for (const char *at = text->data, *end = at + text->length;
         (at = memmem(at, (size_t)(end - at), word, length)); at += length)
        count++;
    return count;
}

struct census {
    size_t sections, exhibits, headings;
};

static struct census census_of(const struct document *document)
{
    struct census census = {0};
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        bool heading = cmark_node_get_type(node) == CMARK_NODE_HEADING;
        census.exhibits += document_exhibit(node) != NULL;
        census.headings += heading;
        census.sections += heading && cmark_node_get_heading_level(node) <= 2;
    }
    return census;
}

/* ---- the formats */

static void check_kept_back(const struct buffer *out, enum copy copy)
{
    if (copy != COPY_SHOP && count_of(out, private_word))
        fail("the private note is in a copy", copy_text(copy));
    if (copy == COPY_SALE && count_of(out, contact_word))
        fail("the owner's contact is in a copy", copy_text(copy));
}

static void try_html(const struct bench *bench, const struct document *document,
                     struct arena *arena, struct buffer *out)
{
    html_write(document, bench->style, bench->page, out);
    struct html_check check = html_check(buffer_string(out), arena);
    if (check.problem)
        fail(check.problem, check.at);
    if (count_of(out, "<h2 id=") != census_of(document).sections)
        fail("HTML has other sections", document->title);
}

/* Texts of level 2 headings, a line each. */
static void list_sections(cmark_node *root, struct buffer *list)
{
    for (cmark_node *node = cmark_node_first_child(root); node; node = cmark_node_next(node)) {
        if (cmark_node_get_type(node) != CMARK_NODE_HEADING ||
            cmark_node_get_heading_level(node) != 2)
            continue;
        document_plain_text(node, list);
        buffer_byte(list, '\n');
    }
}

static void check_markdown_tree(cmark_node *root)
{
    cmark_iter *walk = cmark_iter_new(root);
    while (cmark_iter_next(walk) != CMARK_EVENT_DONE) {
        cmark_node_type type = cmark_node_get_type(cmark_iter_get_node(walk));
        if (type == CMARK_NODE_HTML_BLOCK || type == CMARK_NODE_HTML_INLINE)
            fail("Markdown has raw HTML", cmark_node_get_literal(cmark_iter_get_node(walk)));
    }
    cmark_iter_free(walk);
}

/* Read again, it has the same sections and no HTML. */
static void try_markdown(const struct document *document, struct buffer *out)
{
    struct buffer meant = {0}, read = {0};
    markdown_write(document, out);
    cmark_node *root = cmark_parse_document(out->data, out->length, CMARK_OPT_DEFAULT);
    check_markdown_tree(root);
    list_sections(document->root, &meant);
    list_sections(root, &read);
    /* a number stands before each section's words */
    if (count_of(&meant, "\n") != count_of(&read, "\n"))
        fail("Markdown has other sections", buffer_string(&read));
    cmark_node_free(root);
    buffer_release(&meant);
    buffer_release(&read);
}

static void try_terminal(const struct document *document, struct buffer *out)
{
    terminal_write(document, COLUMNS, false, out);
    for (size_t i = 0; i < out->length; i++)
        if ((unsigned char)out->data[i] < 0x20 && out->data[i] != '\n')
            fail("a control character for the terminal", out->data + i);
    if (!html_is_utf8(buffer_string(out)))
        fail("no UTF-8 for the terminal", document->title);
}

static void try_pdf(const struct bench *bench, const struct document *document,
                    struct diagnostics *diagnostics, struct buffer *out)
{
    size_t errors = diagnostics->errors;
    if (!pdf_write(document, bench->pdf, 1, out, diagnostics) || diagnostics->errors != errors)
        fail("no PDF", document->title);
    if (out->length < 1000 || memcmp(out->data, "%PDF-1.4", 8) != 0 || !count_of(out, "%%EOF"))
        fail("not a whole PDF", document->title);
    /* an outline entry each, and the title of the whole */
    if (count_of(out, "/Title") != census_of(document).headings + 1)
        fail("PDF has other sections", document->title);
}

static void try_svg(const struct document *document, struct buffer *out)
{
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node))
        if (document_exhibit(node))
            svg_write_file(document_exhibit(node), "#1b4b6b", out);
    if (count_of(out, "<script"))
        fail("a script in SVG", document->title);
}

static void try_formats(const struct bench *bench, const struct document *document, enum copy copy,
                        struct diagnostics *diagnostics)
{
    struct arena arena = {0};
    struct buffer html = {0}, markdown = {0}, terminal = {0}, pdf = {0}, svg = {0};
    try_html(bench, document, &arena, &html);
    try_markdown(document, &markdown);
    try_terminal(document, &terminal);
    try_svg(document, &svg);
    check_kept_back(&html, copy);
    check_kept_back(&markdown, copy);
    check_kept_back(&terminal, copy);
    check_kept_back(&svg, copy);
    if (document->kind == DOCUMENT_RECORD ? copy == COPY_SHOP : document->kind == DOCUMENT_SHEET)
        try_pdf(bench, document, diagnostics, &pdf);
    buffer_release(&html);
    buffer_release(&markdown);
    buffer_release(&terminal);
    buffer_release(&pdf);
    buffer_release(&svg);
    arena_release(&arena);
}

static void try_json(const struct findings *findings)
{
    struct buffer json = {0};
    json_write_findings(findings, &json);
    cJSON *read = cJSON_ParseWithLength(json.data, json.length);
    if (!read)
        fail("JSON that cannot be read", buffer_string(&json));
    check_kept_back(&json, findings->copy);
    cJSON_Delete(read);
    buffer_release(&json);
}

/* Every photograph is the same four pixels. */
static const struct report_picture *pictures_of(const struct job *job, struct arena *arena)
{
    static char pixels[] = "abcdefghijkl";
    static const struct picture picture = {PICTURE_PIXELS, 2, 2, 3, {pixels, 12, 12}};
    struct report_picture *pictures = arena_array(arena, job->photo_count + 1, sizeof *pictures);
    for (size_t i = 0; i < job->photo_count; i++)
        pictures[i] = (struct report_picture){"01.png", 2, 2, &picture};
    return pictures;
}

static struct census try_document(const struct bench *bench, const struct findings *findings,
                                  enum document_kind kind, struct arena *arena)
{
    struct diagnostics diagnostics = diagnostics_in(arena);
    struct document *document = report_compose(
        findings, kind, bench->templates, pictures_of(findings->job, arena), arena, &diagnostics);
    if (!document)
        fail("no document", findings->job->number ? findings->job->number : "");
    struct census census = census_of(document);
    try_formats(bench, document, findings->copy, &diagnostics);
    document_release(document);
    return census;
}

static void try_working(const struct bench *bench, const struct findings *findings, size_t part,
                        struct arena *arena)
{
    struct diagnostics diagnostics = diagnostics_in(arena);
    struct document *document = report_compose_working(
        findings, findings->job->capacitors[part].ref, bench->templates, arena, &diagnostics);
    if (!document)
        fail("no working", findings->job->capacitors[part].ref);
    try_formats(bench, document, COPY_SHOP, &diagnostics);
    document_release(document);
}

static struct census try_job(const struct bench *bench, struct fuzz *fuzz,
                             const struct opened *opened, struct arena *arena)
{
    struct census census = {0};
    report_explain(opened->findings, templates_words(bench->templates), arena);
    try_json(opened->findings); /* shown of jobs with mistakes as well */
    if (opened->diagnostics.errors)
        return census;
    for (int copy = COPY_COUNT - 1; copy >= 0; copy--) {
        struct findings *findings = findings_for_copy(opened->findings, (enum copy)copy, arena);
        struct diagnostics silent = diagnostics_in(arena);
        if (copy == COPY_SALE && !report_sale_copy_is_clean(opened->job, arena, &silent))
            continue;
        try_json(findings);
        struct census of_copy = try_document(bench, findings, DOCUMENT_RECORD, arena);
        if (copy == COPY_SHOP)
            census = of_copy;
    }
    try_document(bench, opened->findings, DOCUMENT_SHEET, arena);
    try_document(bench, opened->findings, DOCUMENT_ASSESSMENT, arena);
    if (opened->job->capacitor_count)
        try_working(bench, opened->findings, fuzz_below(fuzz, opened->job->capacitor_count), arena);
    return census;
}

/* ---- one input */

static void keep_input(const struct source *source)
{
    FILE *file = fopen("document_fuzz.failed.yaml", "wb");
    if (!file)
        return;
    fwrite(source->text, 1, source->length, file);
    fclose(file);
}

/* Whether it could be read. */
static bool try_input(const struct bench *bench, struct fuzz *fuzz, struct arena *arena)
{
    size_t index = fuzz_below(fuzz, bench->stock.count);
    struct job_lines wild = {0};
    lines_exchange(&wild, 0, 0, &bench->stock.files[index], arena);
    for (size_t changes = fuzz_below(fuzz, 6); changes > 0; changes--)
        job_change(fuzz, &wild, &bench->stock, arena);
    struct job_lines tame = wild;
    for (size_t texts = fuzz_below(fuzz, 4); texts > 0 && wild.count; texts--) {
        size_t at = fuzz_below(fuzz, wild.count);
        for (size_t tried = 0; tried < wild.count && !is_text_key(wild.lines[at]); tried++)
            at = (at + 1) % wild.count;
        if (is_text_key(wild.lines[at]))
            put_text(fuzz, &wild, &tame, at, arena);
    }
    struct opened first, second, earlier;
    open_lines(bench, &wild, bench->paths[index], arena, &first);
    keep_input(&first.source);
    open_lines(bench, &bench->stock.files[index], bench->paths[index], arena, &earlier);
    if (fuzz_below(fuzz, 2))
        visits_compare(earlier.job, first.findings, arena);
    struct census census = try_job(bench, fuzz, &first, arena);
    if (first.diagnostics.errors)
        return false;
    open_lines(bench, &tame, bench->paths[index], arena, &second);
    second.findings->since = first.findings->since;
    if (second.diagnostics.errors)
        return true; /* more was wrong before a text was put in its place */
    report_explain(second.findings, templates_words(bench->templates), arena);
    struct census usual = try_document(bench, second.findings, DOCUMENT_RECORD, arena);
    if (usual.sections != census.sections || usual.exhibits != census.exhibits)
        fail("a text took a section or an exhibit away", bench->paths[index]);
    return true;
}

/* ---- all of them */

/* The words that no other copy may show, where the file has a place for them. */
static void mark_private(struct job_lines *job, struct arena *arena)
{
    for (size_t i = 0; i < job->count; i++) {
        const char *line = job->lines[i];
        if (strncmp(line, "private: |", 10) == 0)
            job->lines[i] = arena_print(arena, "%s\n  %s", line, private_word);
        else if (strncmp(line + line_indent(line), "contact:", 8) == 0)
            job->lines[i] =
                arena_print(arena, "%*scontact: %s", (int)line_indent(line), "", contact_word);
    }
}

static bool load(struct bench *bench, char **paths, size_t count)
{
    bench->stock.count = count;
    bench->stock.files = arena_array(&bench->arena, count, sizeof *bench->stock.files);
    bench->paths = arena_array(&bench->arena, count, sizeof *bench->paths);
    for (size_t i = 0; i < count; i++) {
        struct buffer text = {0};
        if (file_read(paths[i], JOB_MAX, &text) != FILE_OK)
            return false;
        const char *slash = strrchr(paths[i], '/');
        bench->paths[i] = slash ? slash + 1 : paths[i];
        bench->stock.files[i] = job_lines_of(buffer_string(&text), &bench->arena);
        mark_private(&bench->stock.files[i], &bench->arena);
        buffer_release(&text);
    }
    return true;
}

static bool open_bench(struct bench *bench, const char *share)
{
    struct diagnostics diagnostics = diagnostics_in(&bench->arena);
    struct shop *shop = arena_get(&bench->arena, sizeof *shop);
    *shop = shop_default();
    bench->shop = shop;
    bench->templates = templates_open("/nonexistent", share, shop, &bench->arena, &diagnostics);
    bench->pdf = pdf_resources_open(arena_print(&bench->arena, "%s/fonts", share), &diagnostics);
    if (!bench->templates || !bench->pdf)
        return false;
    bench->style = templates_text(bench->templates, "style.css", &diagnostics);
    bench->page = templates_text(bench->templates, "page.html", &diagnostics);
    return diagnostics.errors == 0;
}

int main(int count, char **words)
{
    struct bench bench = {0};
    if (count < 5 || !open_bench(&bench, words[3]) || !load(&bench, words + 4, (size_t)count - 4))
        return 2;
    struct fuzz fuzz = fuzz_begin(words[1], words[2]);
    unsigned long sound = 0;
    while (fuzz_next(&fuzz)) {
        struct arena arena = {0};
        sound += try_input(&bench, &fuzz, &arena);
        arena_release(&arena);
    }
    pdf_resources_close(bench.pdf);
    arena_release(&bench.arena);
    remove("document_fuzz.failed.yaml");
    printf("%lu of them read without mistakes: ", sound);
    return fuzz_end(&fuzz, "jobs") || sound == 0;
}
