/*
 * From a template to a document's tree. The template is rendered in runs: wherever it names an
 * exhibit or a prose field the run ends, and each run is parsed by itself. No text stands for an
 * exhibit, so no text can be taken for one.
 */
#include "report/prose.h"
#include "report/templates.h"
#include "report/tree_memory.h"

#include "base/memory.h"

#include <stdlib.h>
#include <string.h>

static const struct {
    const char *name;
    exhibit_builder *build;
} exhibits[] = {
    {"title", exhibit_title},
    {"facts", exhibit_facts},
    {"headline", exhibit_headline},
    {"contents", exhibit_contents},
    {"page_break", exhibit_page_break},
    {"small", exhibit_small},
    {"two_columns", exhibit_two_columns},
    {"side_by_side", exhibit_side_by_side},
    {"fingerprint", exhibit_fingerprint},
    {"glance", exhibit_glance},
    {"leakage", exhibit_leakage},
    {"soak_curves", exhibit_soak_curves},
    {"changed", exhibit_changed},
    {"removed", exhibit_removed},
    {"resistors", exhibit_resistors},
    {"windings", exhibit_windings},
    {"controls", exhibit_controls},
    {"valves", exhibit_valves},
    {"stages", exhibit_stages},
    {"voltages", exhibit_voltages},
    {"performance", exhibit_performance},
    {"safety", exhibit_safety},
    {"visits", exhibit_visits},
    {"plates", exhibit_plates},
    {"reform_curves", exhibit_reform_curves},
    {"reform_steps", exhibit_reform_steps},
    {"hum", exhibit_hum},
    {"replacements", exhibit_replacements},
    {"date_codes", exhibit_date_codes},
    {"instruments", exhibit_instruments},
    {"write_on", exhibit_write_on},
    {"sheet_leakage", exhibit_sheet_leakage},
    {"sheet_reform", exhibit_sheet_reform},
    {"sheet_bleed", exhibit_sheet_bleed},
    {"assessed_capacitors", exhibit_assessed_capacitors},
    {"assessed_stages", exhibit_assessed_stages},
    {"assessed_bench", exhibit_assessed_bench},
    {"working", exhibit_working},
    {"fields", exhibit_fields},
    {"policy_limits", exhibit_policy_limits},
    {"rule_sources", exhibit_rule_sources},
};

static exhibit_builder *builder_of(const char *name)
{
    for (size_t i = 0; i < sizeof exhibits / sizeof *exhibits; i++)
        if (strcmp(exhibits[i].name, name) == 0)
            return exhibits[i].build;
    return NULL;
}

/* ---- partials */

/* Which of several a section stands at: its `index`, 0 outside of sections. */
static size_t index_at(const struct mustache_context *context)
{
    const struct mustache_value *value = mustache_find(context, "index");
    return value && value->kind == MUSTACHE_TEXT ? strtoul(value->text, NULL, 10) : 0;
}

static bool stands_alone(struct composition *composition, const struct mustache_partial *partial)
{
    if (partial->standalone && partial->indent == 0)
        return true;
    diagnostic_add(composition->diagnostics, partial->template, partial->at,
                   DIAGNOSTIC_TEMPLATE_PARTIAL, NULL,
                   "{{> %s}} must stand alone on its line, at the margin", partial->name);
    return false;
}

static void place_prose(struct composition *composition, const struct prose *prose)
{
    if (!prose)
        return;
    composition->pieces =
        arena_grow(composition->arena, composition->pieces, composition->piece_count,
                   &composition->piece_capacity, sizeof *composition->pieces);
    composition->pieces[composition->piece_count++] =
        (struct piece){.offset = composition->text->length, .prose = *prose};
}

static enum mustache_partial_answer partial_of(void *data, const struct mustache_partial *partial,
                                               const struct source **found)
{
    struct composition *composition = data;
    exhibit_builder *build = builder_of(partial->name);
    bool prose = composition_is_prose(partial->name);
    if (build || prose) {
        if (!stands_alone(composition, partial))
            return MUSTACHE_PARTIAL_DONE;
        size_t index = index_at(partial->context);
        if (build)
            build(composition, index);
        else
            place_prose(composition, composition_prose(composition, partial->name, index));
        return MUSTACHE_PARTIAL_DONE;
    }
    *found = templates_find(composition->templates,
                            arena_print(composition->arena, "%s.md", partial->name));
    return *found ? MUSTACHE_PARTIAL_TEMPLATE : MUSTACHE_PARTIAL_UNKNOWN;
}

/* ---- the tree */

/* Level 1 is the title, which is an exhibit; a template's own headings begin at 2. */
static int settle_headings(cmark_node *run, int level)
{
    for (cmark_node *node = cmark_node_first_child(run); node; node = cmark_node_next(node)) {
        if (cmark_node_get_type(node) != CMARK_NODE_HEADING)
            continue;
        if (cmark_node_get_heading_level(node) == 1)
            cmark_node_set_heading_level(node, 2);
        level = cmark_node_get_heading_level(node);
    }
    return level;
}

static void append_exhibit(cmark_node *root, const struct exhibit *exhibit)
{
    cmark_node *node = tree_node(CMARK_NODE_CUSTOM_BLOCK);
    /* cmark carries the pointer and never looks behind it. */
    if (!node || !cmark_node_set_user_data(node, (void *)(uintptr_t)exhibit) ||
        !cmark_node_append_child(root, node))
        memory_exhausted();
}

static cmark_node *build_tree(struct composition *composition, const struct source *template)
{
    cmark_node *root = tree_node(CMARK_NODE_DOCUMENT);
    const struct buffer *text = composition->text;
    size_t from = 0;
    int level = 2;
    if (!root)
        memory_exhausted();
    for (size_t i = 0; i <= composition->piece_count; i++) {
        const struct piece *piece = i < composition->piece_count ? &composition->pieces[i] : NULL;
        size_t to = piece ? piece->offset : text->length;
        if (to > from) {
            cmark_node *run = tree_of(text->data + from, to - from);
            prose_clean(composition, run, template, (struct position){0, 0});
            level = settle_headings(run, level);
            prose_move(run, root);
        }
        from = to;
        if (piece && piece->exhibit)
            append_exhibit(root, piece->exhibit);
        else if (piece)
            prose_graft(composition, root, &piece->prose, level);
    }
    return root;
}

/* ---- the document around it */

static const char *template_name(enum document_kind kind)
{
    switch (kind) {
    case DOCUMENT_RECORD:
        return "record.md";
    case DOCUMENT_SHEET:
        return "sheet.md";
    case DOCUMENT_ASSESSMENT:
        return "assessment.md";
    case DOCUMENT_WORKING:
        return "working.md";
    case DOCUMENT_MANUAL:
        return "manual.md";
    }
    return "";
}

static const char *title_key(enum document_kind kind)
{
    switch (kind) {
    case DOCUMENT_RECORD:
        return "document.record";
    case DOCUMENT_SHEET:
        return "document.sheet";
    case DOCUMENT_ASSESSMENT:
        return "document.assessment";
    case DOCUMENT_WORKING:
        return "document.working";
    case DOCUMENT_MANUAL:
        return "document.manual";
    }
    return "";
}

static const char *document_phrase(struct composition *composition, const char *key)
{
    const struct job *job = composition->job;
    const struct date *date = job->returned.set ? &job->returned : &job->received;
    const char *names[] = {job->set.maker.text, job->set.model.text};
    return phrase(&composition->say, key, "job", job->number, "copy",
                  phrase_in(&composition->say, "copy", copy_text(composition->findings->copy)),
                  "set", text_join(composition->arena, " ", names, 2), "date",
                  composition->findings->in_progress ? NULL : date_text(date), NULL);
}

static struct document *make_document(struct composition *composition, cmark_node *root)
{
    const struct shop *shop = composition->shop;
    const struct job *job = composition->job;
    const struct phrasing *say = &composition->say;
    const char *key = title_key(composition->kind);
    struct document *document = arena_get(composition->arena, sizeof *document);
    *document = (struct document){
        .kind = composition->kind,
        .root = root,
        .arena = composition->arena,
        .language = phrase(say, "document.language", NULL),
        .title = document_phrase(composition, arena_print(composition->arena, "%s.title", key)),
        .author = shop->name,
        .subject = document_phrase(composition, arena_print(composition->arena, "%s.subject", key)),
        .running_head =
            document_phrase(composition, arena_print(composition->arena, "%s.running", key)),
        .page_word = phrase(say, "document.page_word", NULL),
        .page_word_of = phrase(say, "document.page_word_of", NULL),
        .continued = phrase(say, "document.continued", NULL),
        .contents_word = phrase(say, "document.contents", NULL),
        .skip_word = phrase(say, "document.skip", NULL),
        .footer = document_phrase(composition, arena_print(composition->arena, "%s.footer", key)),
        .page = shop->page,
        .sections_numbered =
            composition->kind == DOCUMENT_RECORD || composition->kind == DOCUMENT_MANUAL,
        .accent = shop->accent,
        .accent_dark = shop->accent_dark,
        .date = job->returned.set ? job->returned : job->received,
        .fingerprint = composition->findings->fingerprint,
    };
    return document;
}

static bool render(struct composition *composition, const struct source *template)
{
    struct mustache_target target = {
        .escape = mustache_escape_commonmark,
        .partial = partial_of,
        .data = composition,
        .arena = composition->arena,
        .diagnostics = composition->diagnostics,
    };
    return mustache_render(template, values_of(composition), &target, composition->text);
}

static struct document *compose(struct composition composition)
{
    struct buffer text = {0};
    size_t errors = composition.diagnostics->errors;
    const char *name = template_name(composition.kind);
    const struct source *template = templates_find(composition.templates, name);
    struct document *document = NULL;
    composition.text = &text;
    if (!template)
        diagnostic_add(composition.diagnostics, NULL, (struct position){0, 0},
                       DIAGNOSTIC_FILE_UNREADABLE, NULL, "there is no templates/%s", name);
    else if (render(&composition, template))
        document = make_document(&composition, build_tree(&composition, template));
    buffer_release(&text);
    if (document && composition.diagnostics->errors > errors) {
        document_release(document);
        document = NULL;
    }
    return document;
}

struct document *report_compose(const struct findings *findings, enum document_kind kind,
                                const struct templates *templates,
                                const struct report_picture *pictures, struct arena *arena,
                                struct diagnostics *diagnostics)
{
    struct composition composition = {
        .findings = findings,
        .job = findings->job,
        .shop = findings->shop,
        .kind = kind,
        .templates = templates,
        .pictures = pictures,
        .arena = arena,
        .diagnostics = diagnostics,
        .say = {templates_words(templates), arena, diagnostics},
    };
    return compose(composition);
}

struct document *report_compose_working(const struct findings *findings, const char *ref,
                                        const struct templates *templates, struct arena *arena,
                                        struct diagnostics *diagnostics)
{
    struct composition composition = {
        .findings = findings,
        .job = findings->job,
        .shop = findings->shop,
        .kind = DOCUMENT_WORKING,
        .templates = templates,
        .arena = arena,
        .diagnostics = diagnostics,
        .say = {templates_words(templates), arena, diagnostics},
    };
    size_t number;
    if (!working_find(&composition, ref, &number)) {
        diagnostic_add(diagnostics, &findings->job->source, (struct position){0, 0},
                       DIAGNOSTIC_REF_UNKNOWN, NULL, "no part '%s' in this job", ref);
        return NULL;
    }
    composition.working_of = number + 1;
    return compose(composition);
}

struct document *report_compose_manual(const struct shop *shop, const struct templates *templates,
                                       struct arena *arena, struct diagnostics *diagnostics)
{
    struct job *nothing = arena_get(arena, sizeof *nothing);
    struct findings *findings = arena_get(arena, sizeof *findings);
    findings->job = nothing;
    findings->shop = shop;
    return report_compose(findings, DOCUMENT_MANUAL, templates, NULL, arena, diagnostics);
}
