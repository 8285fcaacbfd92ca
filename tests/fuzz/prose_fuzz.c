/*
 * Notes and templates of any bytes. A note: every section and exhibit of the record is still there,
 * no raw HTML and no link but the allowed ones are left. A template: no crash, bounded time.
 *
 * prose_fuzz AMOUNT SEED, from the top folder.
 */
#include "base/mustache.h"
#include "fuzz.h"
#include "unit/report/sample.h"

static const char *const pieces[] = {
    "<!--",
    "-->",
    "```",
    "~~~",
    "**",
    "_",
    "[a](",
    "javascript:",
    ")",
    "![",
    "](x)",
    "[a]: x",
    "<b ",
    ">",
    "</b>",
    "<script>",
    "<?",
    "<![CDATA[",
    "# ",
    "## ",
    "===",
    "---",
    "- ",
    "1. ",
    "> ",
    "\n",
    "\n\n",
    "\t",
    "    ",
    "{{",
    "}}",
    "{{#has}}",
    "{{/has}}",
    "{{> leakage}}",
    "{{> self}}",
    "{{!",
    "{{{",
    "{{&",
    "{{=",
    "\\",
    "&lt;",
    "&#0;",
    "http://a",
    "<mailto:a@b>",
    "data:x",
    "\xC3",
    "\xE2\x80\xAE",
    "\xF0\x9F\x93\xBB",
    "`",
    "``",
    "|",
    "Cautions",
    "a",
    " ",
};
enum { PIECES = sizeof pieces / sizeof *pieces };

static void draw_text(struct fuzz *fuzz, struct buffer *text)
{
    size_t count = 1 + fuzz_below(fuzz, 60), repeats = fuzz_below(fuzz, 20) == 0 ? 40 : 1;
    buffer_clear(text);
    for (size_t i = 0; i < count; i++) {
        const char *piece = pieces[fuzz_below(fuzz, PIECES)];
        for (size_t n = 0; n < repeats; n++)
            buffer_text(text, piece);
    }
}

struct census {
    size_t sections, exhibits;
};

static bool is_forbidden(cmark_node *node)
{
    cmark_node_type type = cmark_node_get_type(node);
    if (type == CMARK_NODE_HTML_BLOCK || type == CMARK_NODE_HTML_INLINE || type == CMARK_NODE_IMAGE)
        return true;
    const char *url = type == CMARK_NODE_LINK ? cmark_node_get_url(node) : "http:";
    return strncasecmp(url, "http:", 5) != 0 && strncasecmp(url, "https:", 6) != 0 &&
           strncasecmp(url, "mailto:", 7) != 0 && strncasecmp(url, "tel:", 4) != 0;
}

static struct census census_of(const struct document *document)
{
    struct census census = {0};
    cmark_iter *walk = cmark_iter_new(document->root);
    for (cmark_event_type event; (event = cmark_iter_next(walk)) != CMARK_EVENT_DONE;) {
        cmark_node *node = cmark_iter_get_node(walk);
        if (event == CMARK_EVENT_ENTER && is_forbidden(node))
            abort();
        if (event != CMARK_EVENT_ENTER)
            continue;
        census.exhibits += document_exhibit(node) != NULL;
        census.sections += cmark_node_get_type(node) == CMARK_NODE_HEADING &&
                           cmark_node_get_heading_level(node) <= 2;
    }
    cmark_iter_free(walk);
    return census;
}

static void try_note(const char *text, const struct census *usual)
{
    struct sample *sample = sample_begin();
    sample->job.work = sample_prose(text, 70);
    sample->job.arrival = sample_prose(text, 60);
    sample->job.hazards = sample_prose(text, 65);
    sample->capacitors[0].note = sample_prose(text, 22);
    sample->job.set.model = sample_prose(text, 4);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    if (!document)
        abort();
    struct census census = census_of(document);
    if (usual && (census.sections != usual->sections || census.exhibits != usual->exhibits))
        abort();
    sample_end(sample, document);
}

static enum mustache_partial_answer self(void *data, const struct mustache_partial *partial,
                                         const struct source **found)
{
    if (strcmp(partial->name, "self") != 0)
        return MUSTACHE_PARTIAL_UNKNOWN;
    *found = data;
    return MUSTACHE_PARTIAL_TEMPLATE;
}

static void try_template(struct buffer *text)
{
    struct arena arena = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {"fuzz.md", buffer_string(text), text->length};
    struct mustache_target target = {mustache_escape_commonmark, self, &source, &arena,
                                     &diagnostics};
    struct mustache_value *values = mustache_map(&arena);
    mustache_set_flag(&arena, values, "has", true);
    struct buffer out = {0};
    bool rendered = mustache_render(&source, values, &target, &out);
    if (rendered == (diagnostics.errors > 0))
        abort();
    buffer_release(&out);
    arena_release(&arena);
}

int main(int count, char **words)
{
    if (count != 3)
        return 2;
    struct fuzz fuzz = fuzz_begin(words[1], words[2]);
    struct buffer text = {0};
    struct sample *sample = sample_begin();
    sample->job.work = sample->job.arrival = sample->job.hazards = sample_prose("plain", 70);
    struct document *document = sample_compose(sample, DOCUMENT_RECORD);
    if (!document)
        abort();
    struct census usual = census_of(document);
    sample_end(sample, document);
    while (fuzz_next(&fuzz)) {
        draw_text(&fuzz, &text);
        if (strstr(buffer_string(&text), "\xC3") == NULL) /* a job's texts are UTF-8 */
            try_note(buffer_string(&text), &usual);
        try_template(&text);
    }
    buffer_release(&text);
    return fuzz_end(&fuzz, "texts");
}
