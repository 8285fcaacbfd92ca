#include "base/mustache.h"

#include <string.h>

enum token_kind { TOKEN_TEXT, TOKEN_VARIABLE, TOKEN_SECTION, TOKEN_INVERTED, TOKEN_PARTIAL };

/* A template cut up; a section knows the token behind its end. */
struct token {
    enum token_kind kind;
    const char *text; /* TEXT: the run itself; else the name, NUL-terminated */
    size_t length;
    size_t behind; /* SECTION, INVERTED: index of the first token behind it */
    bool standalone;
    const char *indent; /* standalone PARTIAL: the white space before it */
    size_t indent_length;
    struct position at;
};

struct tokens {
    struct token *items;
    size_t count, capacity;
};

/* State of cutting up one template. */
struct parser {
    const struct source *source;
    const struct mustache_target *target;
    struct tokens tokens;
    const char *cursor, *end;
    size_t open[MUSTACHE_SECTIONS_MAX];
    size_t open_count;
    bool failed;
    /* positions are counted onwards from here */
    const char *counted;
    struct position position;
};

static struct position position_of(struct parser *parser, const char *place)
{
    for (; parser->counted < place; parser->counted++) {
        if (*parser->counted == '\n') {
            parser->position.line++;
            parser->position.column = 1;
        } else if (((unsigned char)*parser->counted & 0xC0) != 0x80) {
            parser->position.column++;
        }
    }
    return parser->position;
}

static void fail(struct parser *parser, struct position at, const char *text, const char *hint)
{
    parser->failed = true;
    diagnostic_add(parser->target->diagnostics, parser->source, at, DIAGNOSTIC_TEMPLATE_SYNTAX,
                   hint, "%s", text);
}

static struct token *add_token(struct parser *parser, enum token_kind kind)
{
    struct tokens *tokens = &parser->tokens;
    tokens->items = arena_grow(parser->target->arena, tokens->items, tokens->count,
                               &tokens->capacity, sizeof *tokens->items);
    struct token *token = &tokens->items[tokens->count++];
    *token = (struct token){.kind = kind};
    return token;
}

static void add_text(struct parser *parser, const char *start, const char *stop)
{
    if (start == stop)
        return;
    struct token *token = add_token(parser, TOKEN_TEXT);
    token->text = start;
    token->length = (size_t)(stop - start);
}

static bool is_blank(char c)
{
    return c == ' ' || c == '\t';
}

static bool is_white(char c)
{
    return is_blank(c) || c == '\n' || c == '\r';
}

/* A tag as found: from "{{" to behind "}}", its sign and its name. */
struct tag {
    const char *start, *stop;
    char sign; /* '#', '^', '/', '>', '!', '=', '&', '{'; 0: a variable */
    const char *name;
    size_t name_length;
};

static bool find_tag(struct parser *parser, struct tag *tag)
{
    const char *start = memmem(parser->cursor, (size_t)(parser->end - parser->cursor), "{{", 2);
    if (!start)
        return false;
    *tag = (struct tag){.start = start};
    const char *inside = start + 2;
    const char *close = memmem(inside, (size_t)(parser->end - inside), "}}", 2);
    if (!close) {
        fail(parser, position_of(parser, start), "tag is never closed", "close it with }}");
        return false;
    }
    tag->stop = close + 2;
    while (inside < close && is_white(*inside))
        inside++;
    if (inside < close && strchr("#^/>!=&{", *inside))
        tag->sign = *inside++;
    while (inside < close && is_white(*inside))
        inside++;
    const char *last = close;
    while (last > inside && is_white(last[-1]))
        last--;
    tag->name = inside;
    tag->name_length = (size_t)(last - inside);
    return true;
}

/* Alone on its line: the line's text before and behind is white. Gives the line's bounds. */
static bool is_alone(const struct parser *parser, const struct tag *tag, const char **line_start,
                     const char **line_stop)
{
    const char *before = tag->start, *behind = tag->stop;
    while (before > parser->source->text && is_blank(before[-1]))
        before--;
    if (before > parser->source->text && before[-1] != '\n')
        return false;
    while (behind < parser->end && is_blank(*behind))
        behind++;
    if (behind < parser->end && *behind == '\r' && behind + 1 < parser->end && behind[1] == '\n')
        behind++;
    if (behind < parser->end && *behind != '\n')
        return false;
    *line_start = before;
    *line_stop = behind < parser->end ? behind + 1 : behind;
    return true;
}

static void close_section(struct parser *parser, const struct tag *tag, struct position at)
{
    if (parser->open_count == 0) {
        fail(parser, at, "end of a section that is not open", NULL);
        return;
    }
    struct token *open = &parser->tokens.items[parser->open[--parser->open_count]];
    open->behind = parser->tokens.count;
    if (strlen(open->text) != tag->name_length ||
        memcmp(open->text, tag->name, tag->name_length) != 0)
        fail(parser, at, "section is closed under another name",
             arena_print(parser->target->arena, "close {{#%s}} first", open->text));
}

static void open_section(struct parser *parser, struct position at)
{
    if (parser->open_count == MUSTACHE_SECTIONS_MAX) {
        fail(parser, at, "sections are nested too deep", NULL);
        parser->cursor = parser->end;
        return;
    }
    parser->open[parser->open_count++] = parser->tokens.count - 1;
}

static void add_named(struct parser *parser, enum token_kind kind, const struct tag *tag,
                      struct position at)
{
    struct token *token = add_token(parser, kind);
    token->text = arena_text(parser->target->arena, tag->name, tag->name_length);
    token->length = tag->name_length;
    token->at = at;
    if (kind == TOKEN_SECTION || kind == TOKEN_INVERTED)
        open_section(parser, at);
}

static void take_tag(struct parser *parser, const struct tag *tag, struct position at)
{
    if (tag->sign != '!' && tag->name_length == 0) {
        fail(parser, at, "tag has no name", NULL);
        return;
    }
    switch (tag->sign) {
    case 0:
        add_named(parser, TOKEN_VARIABLE, tag, at);
        break;
    case '#':
        add_named(parser, TOKEN_SECTION, tag, at);
        break;
    case '^':
        add_named(parser, TOKEN_INVERTED, tag, at);
        break;
    case '>':
        add_named(parser, TOKEN_PARTIAL, tag, at);
        break;
    case '/':
        close_section(parser, tag, at);
        break;
    case '!':
        break;
    case '=':
        fail(parser, at, "delimiters cannot be changed", "write tags as {{name}}");
        break;
    default:
        fail(parser, at, "there is no unescaped tag", "write {{name}}");
    }
}

/* Cut the whole template up. A tag other than a variable that is alone on its line takes the line
   with it. */
static void parse(struct parser *parser)
{
    struct tag tag;
    while (parser->cursor < parser->end && find_tag(parser, &tag)) {
        const char *line_start = tag.start, *line_stop = tag.stop;
        bool alone = tag.sign != 0 && is_alone(parser, &tag, &line_start, &line_stop);
        struct position at = position_of(parser, tag.start);
        const char *text_stop = alone && line_start >= parser->cursor ? line_start : tag.start;
        add_text(parser, parser->cursor, text_stop);
        size_t count = parser->tokens.count;
        parser->cursor = line_stop;
        take_tag(parser, &tag, at);
        if (alone && tag.sign == '>' && parser->tokens.count > count) {
            parser->tokens.items[count].standalone = true;
            parser->tokens.items[count].indent = line_start;
            parser->tokens.items[count].indent_length = (size_t)(tag.start - line_start);
        }
    }
    if (parser->cursor < parser->end)
        add_text(parser, parser->cursor, parser->end);
    while (parser->open_count > 0) {
        struct token *open = &parser->tokens.items[parser->open[--parser->open_count]];
        open->behind = parser->tokens.count;
        fail(parser, open->at, "section is never closed",
             arena_print(parser->target->arena, "close it with {{/%s}}", open->text));
    }
}

/* ---- rendering */

enum { CONTEXTS_MAX = MUSTACHE_SECTIONS_MAX * (MUSTACHE_PARTIALS_MAX + 1) + 1 };

struct mustache_context {
    const struct mustache_value *values[CONTEXTS_MAX];
    size_t count;
};

struct renderer {
    const struct mustache_target *target;
    struct mustache_context context;
    struct buffer *out;
    unsigned depth; /* partials in partials */
    bool failed;
    bool stopped; /* a template that includes itself: not worth going on */
};

static const struct mustache_value *member_of(const struct mustache_value *map, const char *key,
                                              size_t length)
{
    if (map->kind != MUSTACHE_MAP)
        return NULL;
    for (size_t i = 0; i < map->count; i++) {
        const char *name = map->members[i].key;
        if (strncmp(name, key, length) == 0 && name[length] == '\0')
            return map->members[i].value;
    }
    return NULL;
}

const struct mustache_value *mustache_find(const struct mustache_context *context, const char *name)
{
    if (strcmp(name, ".") == 0)
        return context->values[context->count - 1];
    size_t length = strcspn(name, ".");
    const struct mustache_value *value = NULL;
    for (size_t i = context->count; i > 0 && !value; i--)
        value = member_of(context->values[i - 1], name, length);
    while (value && name[length] == '.') {
        name += length + 1;
        length = strcspn(name, ".");
        value = member_of(value, name, length);
    }
    return value;
}

static bool is_true(const struct mustache_value *value)
{
    if (!value)
        return false;
    switch (value->kind) {
    case MUSTACHE_FALSE:
        return false;
    case MUSTACHE_TRUE:
    case MUSTACHE_MAP:
        return true;
    case MUSTACHE_TEXT:
        return value->text[0] != '\0';
    case MUSTACHE_LIST:
        return value->count > 0;
    }
    return false;
}

static void render_source(struct renderer *renderer, const struct source *source,
                          const struct mustache_value *values);

/* A partial's text with the indent of its tag before each line that is not empty. */
static const struct source *indented(struct renderer *renderer, const struct source *source,
                                     const struct token *token)
{
    if (token->indent_length == 0)
        return source;
    struct buffer text = {0};
    bool line_begins = true;
    for (size_t i = 0; i < source->length; i++) {
        if (line_begins && source->text[i] != '\n')
            buffer_append(&text, token->indent, token->indent_length);
        line_begins = source->text[i] == '\n';
        buffer_byte(&text, source->text[i]);
    }
    struct source *copy = arena_get(renderer->target->arena, sizeof *copy);
    copy->path = source->path;
    copy->length = text.length;
    copy->text = arena_text(renderer->target->arena, text.data, text.length);
    buffer_release(&text);
    return copy;
}

static void refuse(struct renderer *renderer, const struct source *source,
                   const struct token *token, enum diagnostic_code code, const char *text)
{
    renderer->failed = true;
    diagnostic_add(renderer->target->diagnostics, source, token->at, code, NULL, text, token->text);
}

static void render_partial(struct renderer *renderer, const struct source *source,
                           const struct token *token)
{
    const struct mustache_target *target = renderer->target;
    struct mustache_partial partial = {
        .name = token->text,
        .standalone = token->standalone,
        .indent = token->indent_length,
        .template = source,
        .at = token->at,
        .context = &renderer->context,
        .out = renderer->out,
    };
    const struct source *found = NULL;
    size_t errors = target->diagnostics->errors;
    switch (target->partial ? target->partial(target->data, &partial, &found)
                            : MUSTACHE_PARTIAL_UNKNOWN) {
    case MUSTACHE_PARTIAL_UNKNOWN:
        refuse(renderer, source, token, DIAGNOSTIC_TEMPLATE_PARTIAL,
               "there is no exhibit, prose field or template '%s'");
        break;
    case MUSTACHE_PARTIAL_TEMPLATE:
        if (renderer->depth == MUSTACHE_PARTIALS_MAX) {
            refuse(renderer, source, token, DIAGNOSTIC_TEMPLATE_DEPTH,
                   "templates include one another too deep at '%s'");
            renderer->stopped = true;
            break;
        }
        renderer->depth++;
        render_source(renderer, indented(renderer, found, token), NULL);
        renderer->depth--;
        break;
    case MUSTACHE_PARTIAL_DONE:
        renderer->failed |= target->diagnostics->errors > errors;
        break;
    }
}

static void render_tokens(struct renderer *renderer, const struct source *source,
                          const struct token *tokens, size_t from, size_t to);

static void render_inside(struct renderer *renderer, const struct source *source,
                          const struct token *tokens, size_t section,
                          const struct mustache_value *value)
{
    renderer->context.values[renderer->context.count++] = value;
    render_tokens(renderer, source, tokens, section + 1, tokens[section].behind);
    renderer->context.count--;
}

static void render_section(struct renderer *renderer, const struct source *source,
                           const struct token *tokens, size_t section)
{
    const struct mustache_value *value = mustache_find(&renderer->context, tokens[section].text);
    bool inverted = tokens[section].kind == TOKEN_INVERTED;
    if (is_true(value) == inverted)
        return;
    if (inverted)
        render_tokens(renderer, source, tokens, section + 1, tokens[section].behind);
    else if (value->kind != MUSTACHE_LIST)
        render_inside(renderer, source, tokens, section, value);
    else
        for (size_t i = 0; i < value->count && !renderer->stopped; i++)
            render_inside(renderer, source, tokens, section, value->items[i]);
}

static bool goes_on(const struct renderer *renderer)
{
    return !renderer->stopped && renderer->out->length < MUSTACHE_BYTES_MAX;
}

static void render_tokens(struct renderer *renderer, const struct source *source,
                          const struct token *tokens, size_t from, size_t to)
{
    for (size_t i = from; i < to && goes_on(renderer); i++) {
        const struct token *token = &tokens[i];
        switch (token->kind) {
        case TOKEN_TEXT:
            buffer_append(renderer->out, token->text, token->length);
            break;
        case TOKEN_VARIABLE: {
            const struct mustache_value *value = mustache_find(&renderer->context, token->text);
            if (value && value->kind == MUSTACHE_TEXT)
                renderer->target->escape(renderer->out, value->text, strlen(value->text));
            break;
        }
        case TOKEN_SECTION:
        case TOKEN_INVERTED:
            render_section(renderer, source, tokens, i);
            i = token->behind - 1;
            break;
        case TOKEN_PARTIAL:
            render_partial(renderer, source, token);
            break;
        }
    }
}

/* Cut up and render one template; values NULL: in the context as it is. */
static void render_source(struct renderer *renderer, const struct source *source,
                          const struct mustache_value *values)
{
    struct parser parser = {
        .source = source,
        .target = renderer->target,
        .cursor = source->text,
        .end = source->text + source->length,
        .counted = source->text,
        .position = {1, 1},
    };
    parse(&parser);
    renderer->failed |= parser.failed;
    if (parser.failed)
        return;
    if (values)
        renderer->context.values[renderer->context.count++] = values;
    render_tokens(renderer, source, parser.tokens.items, 0, parser.tokens.count);
    if (values)
        renderer->context.count--;
}

bool mustache_render(const struct source *source, const struct mustache_value *values,
                     const struct mustache_target *target, struct buffer *out)
{
    struct renderer renderer; /* the stack of contexts is large and need not be cleared */
    renderer.target = target;
    renderer.context.count = 0;
    renderer.out = out;
    renderer.depth = 0;
    renderer.failed = renderer.stopped = false;
    render_source(&renderer, source, values);
    return !renderer.failed;
}
