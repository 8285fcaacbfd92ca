#include "job/yaml_parse.h"

#include "base/memory.h"
#include "job/job.h"
#include "job/yaml_keys.h"
#include "job/yaml_text.h"

#include <string.h>
#include <yaml.h>

enum { KEY_BYTES_MAX = 128 };

/* One parse of the text. */
struct parse {
    const struct source *source;
    struct arena *arena;
    const char *text, *end;
    yaml_parser_t parser;
    struct node *root;
    struct node *open[JOB_DEPTH_MAX]; /* mappings and sequences not yet closed, from the root */
    struct node *newest[JOB_DEPTH_MAX + 1];
    size_t depth;
    struct node *waiting; /* a key whose value comes next */
    size_t key_count;
    struct yaml_keys keys;
    const char *line_start; /* of line_number: follows the events, for comments */
    unsigned line_number;
    struct diagnostics told; /* goes to the caller's list only when this parse was the last */
    struct parse_failure failure;
    bool ended;
};

static struct position position_of(yaml_mark_t mark)
{
    return (struct position){(unsigned)mark.line + 1, (unsigned)mark.column + 1};
}

static bool stop_for_good(struct parse *parse, enum diagnostic_code code, struct position at,
                          const char *text)
{
    parse->failure = (struct parse_failure){.code = code, .at = at, .text = text, .final = true};
    return false;
}

/* ---- comments ---- */

static const char *line_at(struct parse *parse, unsigned number)
{
    while (parse->line_number < number && parse->line_start) {
        const char *stop =
            memchr(parse->line_start, '\n', (size_t)(parse->end - parse->line_start));
        parse->line_start = stop ? stop + 1 : NULL;
        parse->line_number++;
    }
    return parse->line_start;
}

static enum comment_place comment_behind(struct parse *parse, yaml_mark_t mark)
{
    const char *start = line_at(parse, (unsigned)mark.line + 1);
    if (!start)
        return COMMENT_NONE;
    const char *stop = memchr(start, '\n', (size_t)(parse->end - start));
    stop = stop ? stop : parse->end;
    if (!memchr(start, '#', (size_t)(stop - start)))
        return COMMENT_NONE;
    const char *at = start;
    for (size_t column = 0; column < mark.column && at < stop; column++) {
        for (at++; at < stop && ((unsigned char)*at & 0xC0) == 0x80;)
            at++;
    }
    const char *hash = at;
    while (hash < stop && (*hash == ' ' || *hash == '\t'))
        hash++;
    if (hash == at || hash == stop || *hash != '#')
        return COMMENT_NONE;
    if (hash + 1 < stop && hash[1] != ' ' && hash[1] != '\r')
        return COMMENT_TIGHT;
    return hash - at == 1 ? COMMENT_NEAR : COMMENT_APART;
}

/* ---- nodes ---- */

/* Of the text that is parsed: the source may hold bytes that no message can. */
static const char *quoted_line(struct parse *parse, unsigned line)
{
    const struct source parsed = {parse->source->path, parse->text,
                                  (size_t)(parse->end - parse->text)};
    return yaml_quoted_line_hint(parse->arena, &parsed, line);
}

static bool refuse_marks(struct parse *parse, const yaml_char_t *anchor, const yaml_char_t *tag,
                         struct position at, bool of_scalar)
{
    if (!anchor && !tag)
        return false;
    diagnostic_add(
        &parse->told, parse->source, at, anchor ? DIAGNOSTIC_YAML_ALIAS : DIAGNOSTIC_YAML_TAG,
        of_scalar ? quoted_line(parse, at.line) : "write the keys out wherever they are needed",
        anchor ? "'&' begins an anchor, which a job file has no use for"
               : "'!' begins a tag, which a job file has no use for");
    return true;
}

/* A key longer than its line would be is a value out of place. */
/* The value without what may not be in it; *damaged (may be NULL) is set when something was. */
static const char *scalar_text(struct parse *parse, const yaml_event_t *event, struct position at,
                               bool *damaged)
{
    char *text =
        arena_text(parse->arena, (const char *)event->data.scalar.value, event->data.scalar.length);
    uint32_t first;
    if (event->data.scalar.style == YAML_DOUBLE_QUOTED_SCALAR_STYLE &&
        yaml_value_mend(text, event->data.scalar.length, &first)) {
        diagnostic_add(&parse->told, parse->source, at, DIAGNOSTIC_CONTROL_CHARACTER, "delete it",
                       "invisible character U+%04X, written as an escape", (unsigned)first);
        if (damaged)
            *damaged = true;
    }
    return text;
}

static struct node *node_of_key(struct parse *parse, const yaml_event_t *event)
{
    struct position at = position_of(event->start_mark);
    if (event->type != YAML_SCALAR_EVENT || event->data.scalar.length > KEY_BYTES_MAX) {
        parse->failure =
            (struct parse_failure){.code = DIAGNOSTIC_YAML_SYNTAX,
                                   .at = at,
                                   .text = "a key must be a word or two",
                                   .hint = "values that hold { [ ? or : stand in quotes"};
        return NULL;
    }
    struct node *node = arena_get(parse->arena, sizeof *node);
    refuse_marks(parse, event->data.scalar.anchor, event->data.scalar.tag, at, true);
    node->key = scalar_text(parse, event, at, NULL);
    node->key_at = node->at = at;
    node->text = "";
    return node;
}

/* A ref that stands among the keys of the record above it: `C15:` with nothing behind it, and then
   keys that are there already. */
static bool is_swallowed_ref(const struct node *node)
{
    size_t length = strlen(node->key);
    return node_is_empty(node) && length > 1 && node->key[length - 1] >= '0' &&
           node->key[length - 1] <= '9';
}

/* Of all the keys that follow such a ref one is told: the ref. */
static bool tell_swallowed(struct parse *parse)
{
    struct node *mapping = parse->open[parse->depth - 1], *newest = parse->newest[parse->depth];
    if (mapping->damaged)
        return true;
    if (!newest || !is_swallowed_ref(newest))
        return false;
    diagnostic_add(&parse->told, parse->source, newest->key_at, DIAGNOSTIC_YAML_SYNTAX,
                   "begin it in the column of the ref above it",
                   "'%s' stands among the keys of another record", newest->key);
    return newest->damaged = mapping->damaged = true;
}

static void tell_duplicate(struct parse *parse, const struct node *node, const struct node *before)
{
    if (tell_swallowed(parse))
        return;
    diagnostic_add(&parse->told, parse->source, node->key_at, DIAGNOSTIC_DUPLICATE_KEY,
                   arena_print(parse->arena, "it stands in line %u already", before->key_at.line),
                   "the key '%s' is here twice", node->key);
}

/* Hang the node below the mapping or sequence that is open; not so a second of its key. */
static bool attach(struct parse *parse, struct node *node, bool first)
{
    if (++parse->key_count > JOB_KEYS_MAX)
        return stop_for_good(
            parse, DIAGNOSTIC_YAML_TOO_MANY_KEYS, node->at,
            arena_print(parse->arena, "more than %d keys and list items", JOB_KEYS_MAX));
    if (parse->depth == 0)
        parse->root = node;
    if (parse->depth == 0 || !first)
        return true;
    struct node *parent = parse->open[parse->depth - 1];
    struct node *newest = parse->newest[parse->depth];
    if (newest) {
        newest->end_line = node->key ? node->key_at.line : node->at.line;
        newest->next = node;
    } else {
        parent->first = node;
    }
    parse->newest[parse->depth] = node;
    parent->count++;
    return true;
}

/* The node that an event begins: the one whose key was just read, or a new one. NULL: stop. Of a
   key that is there twice the first counts; the second is parsed, but hangs nowhere. */
static struct node *node_begin(struct parse *parse, const yaml_event_t *event)
{
    struct node *node = parse->waiting;
    const struct node *before = NULL;
    parse->waiting = NULL;
    if (node) {
        before = yaml_keys_put(&parse->keys, parse->arena, parse->open[parse->depth - 1], node);
    } else {
        node = arena_get(parse->arena, sizeof *node);
        node->text = "";
    }
    node->at = position_of(event->start_mark);
    if (before)
        tell_duplicate(parse, node, before);
    return attach(parse, node, before == NULL) ? node : NULL;
}

static bool wants_key(const struct parse *parse)
{
    return parse->depth && !parse->waiting && parse->open[parse->depth - 1]->kind == NODE_MAPPING;
}

/* Where the text behind a | begins: libyaml marks the | itself. */
static struct position block_start(struct parse *parse, yaml_mark_t mark)
{
    struct position at = {(unsigned)mark.line + 2, 1};
    const char *line = line_at(parse, at.line);
    for (; line && line < parse->end && *line == ' '; line++)
        at.column++;
    return line && line < parse->end ? at : position_of(mark);
}

static bool take_scalar(struct parse *parse, const yaml_event_t *event)
{
    struct node *node = node_begin(parse, event);
    if (!node)
        return false;
    yaml_scalar_style_t style = event->data.scalar.style;
    bool plain = style == YAML_PLAIN_SCALAR_STYLE;
    bool block = style == YAML_LITERAL_SCALAR_STYLE || style == YAML_FOLDED_SCALAR_STYLE;
    node->style = plain ? STYLE_PLAIN : block ? STYLE_BLOCK : STYLE_QUOTED;
    if (node->style == STYLE_QUOTED)
        node->at.column++;
    node->damaged =
        refuse_marks(parse, event->data.scalar.anchor, event->data.scalar.tag, node->at, true);
    node->end_line = (unsigned)event->end_mark.line + 2;
    if (event->data.scalar.length > JOB_PROSE_BYTES_MAX) {
        diagnostic_add(&parse->told, parse->source, node->at, DIAGNOSTIC_TEXT_TOO_LONG, NULL,
                       "%zu bytes of text, more than the %d that one may have",
                       event->data.scalar.length, JOB_PROSE_BYTES_MAX);
        node->damaged = true;
        return true;
    }
    if (block && event->data.scalar.length)
        node->at = block_start(parse, event->start_mark);
    node->length = event->data.scalar.length;
    node->text = scalar_text(parse, event, node->at, &node->damaged);
    if (plain && node->length)
        node->comment = comment_behind(parse, event->end_mark);
    return true;
}

static bool take_start(struct parse *parse, const yaml_event_t *event)
{
    struct position at = position_of(event->start_mark);
    if (parse->depth == JOB_DEPTH_MAX)
        return stop_for_good(parse, DIAGNOSTIC_YAML_TOO_DEEP, at,
                             arena_print(parse->arena, "more than %d levels deep", JOB_DEPTH_MAX));
    struct node *node = node_begin(parse, event);
    if (!node)
        return false;
    bool mapping = event->type == YAML_MAPPING_START_EVENT;
    node->kind = mapping ? NODE_MAPPING : NODE_SEQUENCE;
    if (mapping) {
        node->style =
            event->data.mapping_start.style == YAML_FLOW_MAPPING_STYLE ? STYLE_FLOW : STYLE_PLAIN;
        refuse_marks(parse, event->data.mapping_start.anchor, event->data.mapping_start.tag, at,
                     false);
    } else {
        node->style =
            event->data.sequence_start.style == YAML_FLOW_SEQUENCE_STYLE ? STYLE_FLOW : STYLE_PLAIN;
        refuse_marks(parse, event->data.sequence_start.anchor, event->data.sequence_start.tag, at,
                     false);
    }
    parse->open[parse->depth++] = node;
    parse->newest[parse->depth] = NULL;
    return true;
}

static void take_end(struct parse *parse, const yaml_event_t *event)
{
    unsigned end_line = (unsigned)event->start_mark.line + 1;
    struct node *newest = parse->newest[parse->depth];
    struct node *closed = parse->open[--parse->depth];
    closed->end_line = closed->style == STYLE_FLOW ? end_line + 1 : end_line;
    if (newest)
        newest->end_line = closed->end_line;
}

static bool take_alias(struct parse *parse, const yaml_event_t *event)
{
    struct node *node = node_begin(parse, event);
    if (!node)
        return false;
    diagnostic_add(&parse->told, parse->source, node->at, DIAGNOSTIC_YAML_ALIAS,
                   quoted_line(parse, node->at.line),
                   "'*' begins an alias, which a job file has no use for");
    node->damaged = true;
    node->end_line = node->at.line + 1;
    return true;
}

static bool take_document(struct parse *parse, const yaml_event_t *event)
{
    if (parse->root)
        return stop_for_good(parse, DIAGNOSTIC_YAML_SECOND_DOCUMENT, position_of(event->start_mark),
                             "a second document begins here; a job file is one");
    return true;
}

static bool take_event(struct parse *parse, const yaml_event_t *event)
{
    if (event->type != YAML_MAPPING_END_EVENT && event->type != YAML_STREAM_END_EVENT &&
        event->type != YAML_DOCUMENT_END_EVENT && wants_key(parse))
        return (parse->waiting = node_of_key(parse, event)) != NULL;
    switch (event->type) {
    case YAML_NO_EVENT:
    case YAML_STREAM_START_EVENT:
    case YAML_DOCUMENT_END_EVENT:
        return true;
    case YAML_STREAM_END_EVENT:
        parse->ended = true;
        return true;
    case YAML_DOCUMENT_START_EVENT:
        return take_document(parse, event);
    case YAML_ALIAS_EVENT:
        return take_alias(parse, event);
    case YAML_SCALAR_EVENT:
        return take_scalar(parse, event);
    case YAML_SEQUENCE_START_EVENT:
    case YAML_MAPPING_START_EVENT:
        return take_start(parse, event);
    case YAML_SEQUENCE_END_EVENT:
    case YAML_MAPPING_END_EVENT:
        take_end(parse, event);
        return true;
    }
    return true;
}

/* ---- libyaml's own mistakes, in the words of somebody who types ---- */

static const struct {
    const char *problem, *context; /* how libyaml's texts begin */
    bool at_context, at_bracket, indent_wrong;
    const char *text, *hint;
} explanations[] = {
    {.problem = "did not find expected ',' or '}'",
     .context = "",
     .at_context = true,
     .at_bracket = true,
     .text = "'{' is not closed",
     .hint = "one record on one line: R12: {marked: 270 ohm 1 W 10 %, done: kept}"},
    {.problem = "did not find expected ',' or ']'",
     .context = "",
     .at_context = true,
     .at_bracket = true,
     .text = "'[' is not closed"},
    {.problem = "found unexpected",
     .context = "while scanning a quoted scalar",
     .at_context = true,
     .at_bracket = true,
     .text = "the quote is not closed"},
    {.problem = "did not find expected node content",
     .context = "",
     .text = "a value is missing, or a bracket above is not closed"},
    {.problem = "did not find expected '-' indicator",
     .context = "",
     .text = "this line does not fit the list above it",
     .hint = "the items of a list begin with '- ' in the same column"},
    {.problem = "did not find expected key",
     .context = "",
     .indent_wrong = true,
     .text = "this line does not fit the lines above it",
     .hint = "keys of one record begin in the same column"},
    {.problem = "could not find expected ':'",
     .context = "",
     .at_context = true,
     .text = "no colon and space behind the key",
     .hint = "a fact is written 'key: value', a record begins with 'C14:'"},
    {.problem = "mapping values are not allowed",
     .context = "",
     .indent_wrong = true,
     .text = "no key may stand here",
     .hint = "begin it in the same column as the keys beside it"},
    {.problem = "block sequence entries are not allowed",
     .context = "",
     .text = "no list item may stand here",
     .hint = "a list stands on lines of its own below its key"},
    {.problem = "found character that cannot start any token",
     .context = "",
     .text = "nothing begins with this character",
     .hint = "put the value in quotes"},
};

static void explain_failure(struct parse *parse)
{
    const yaml_parser_t *parser = &parse->parser;
    if (parser->error == YAML_MEMORY_ERROR)
        memory_exhausted();
    const char *problem = parser->problem ? parser->problem : "not YAML";
    const char *context = parser->context ? parser->context : "";
    parse->failure = (struct parse_failure){.code = DIAGNOSTIC_YAML_SYNTAX,
                                            .at = position_of(parser->problem_mark),
                                            .text = arena_copy(parse->arena, problem)};
    if (parser->error == YAML_READER_ERROR)
        parse->failure.final = true;
    for (size_t i = 0; i < sizeof explanations / sizeof *explanations; i++) {
        if (strncmp(problem, explanations[i].problem, strlen(explanations[i].problem)) != 0 ||
            strncmp(context, explanations[i].context, strlen(explanations[i].context)) != 0)
            continue;
        parse->failure.text = explanations[i].text;
        parse->failure.hint = explanations[i].hint;
        parse->failure.from_here = explanations[i].at_bracket;
        parse->failure.indent_wrong = explanations[i].indent_wrong;
        if (explanations[i].at_context)
            parse->failure.at = position_of(parser->context_mark);
        return;
    }
}

static bool run(struct parse *parse)
{
    if (!yaml_parser_initialize(&parse->parser))
        memory_exhausted();
    yaml_parser_set_encoding(&parse->parser, YAML_UTF8_ENCODING);
    yaml_parser_set_input_string(&parse->parser, (const unsigned char *)parse->text,
                                 (size_t)(parse->end - parse->text));
    bool good = true;
    while (good && !parse->ended) {
        yaml_event_t event;
        if (!yaml_parser_parse(&parse->parser, &event)) {
            explain_failure(parse);
            good = false;
        } else {
            good = take_event(parse, &event);
            yaml_event_delete(&event);
        }
    }
    yaml_parser_delete(&parse->parser);
    return good;
}

struct parse_result yaml_parse(const struct source *source, const char *text, size_t length,
                               struct arena *arena)
{
    struct parse parse = {.source = source,
                          .arena = arena,
                          .text = text,
                          .end = text + length,
                          .line_start = text,
                          .line_number = 1,
                          .told = diagnostics_in(arena)};
    bool good = run(&parse);
    return (struct parse_result){parse.root, parse.told, good, parse.failure};
}
