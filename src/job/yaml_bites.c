/* The bites of YAML on the notation of the trade, line by line. */
#include "job/yaml_text.h"

#include "base/utf8.h"

#include <string.h>

enum { HINT_BYTES_MAX = 120 }; /* a longer line is not typed again for anybody */

/* A line of the file, cut into its parts. */
struct cut_line {
    const char *start, *end; /* without line end */
    const char *body;        /* behind the indent and a list dash */
    const char *value;       /* behind `key: `; the body where there is no key */
    const char *value_end;   /* without a comment and trailing spaces */
    bool has_key, is_item;
};

static const char *trimmed_end(const char *start, const char *end)
{
    while (end > start && (end[-1] == ' ' || end[-1] == '\t'))
        end--;
    return end;
}

/* Where the text ends and ` #` begins a comment. */
static const char *comment_start(const char *start, const char *end)
{
    for (const char *at = start; at < end; at++) {
        if (*at == '#' && (at == start || at[-1] == ' ' || at[-1] == '\t'))
            return at;
    }
    return end;
}

/* The first `: ` or colon at the end; NULL: none. */
static const char *colon_in(const char *start, const char *end)
{
    for (const char *at = start; at < end; at++) {
        if (*at == ':' && (at + 1 == end || at[1] == ' ' || at[1] == '\t'))
            return at;
    }
    return NULL;
}

static struct cut_line cut(const char *start, const char *end)
{
    struct cut_line line = {.start = start, .end = end, .body = start};
    while (line.body < end && *line.body == ' ')
        line.body++;
    if (line.body + 1 < end && line.body[0] == '-' && line.body[1] == ' ') {
        line.is_item = true;
        for (line.body++; line.body < end && *line.body == ' ';)
            line.body++;
    }
    line.value = line.body;
    const char *text_end = trimmed_end(line.body, comment_start(line.body, end));
    const char *colon =
        line.body < end && strchr("\"'{[", *line.body) ? NULL : colon_in(line.body, text_end);
    if (colon) {
        line.has_key = true;
        for (line.value = colon + 1; line.value < end && *line.value == ' ';)
            line.value++;
        text_end = trimmed_end(line.value, comment_start(line.value, end));
    }
    line.value_end = text_end > line.value ? text_end : line.value;
    return line;
}

/* `|`, `>-`, `|2`: text follows on deeper lines. */
static bool is_block_header(const struct cut_line *line)
{
    const char *at = line->value;
    if (at == line->value_end || (*at != '|' && *at != '>'))
        return false;
    for (at++; at < line->value_end; at++) {
        if (!strchr("+-123456789", *at))
            return false;
    }
    return true;
}

static size_t indent_of(const struct cut_line *line)
{
    const char *at = line->start;
    while (at < line->end && *at == ' ')
        at++;
    return (size_t)(at - line->start);
}

/* The line with its value in quotes: in double ones where that spares doubling the single. */
static const char *quoted(struct arena *arena, const struct cut_line *line)
{
    struct buffer text = {0};
    size_t length = (size_t)(line->value_end - line->value);
    if (length > HINT_BYTES_MAX)
        return "put the value in quotes, or on lines of its own behind |";
    bool double_quotes = memchr(line->value, '\'', length) && !memchr(line->value, '"', length) &&
                         !memchr(line->value, '\\', length);
    char quote = double_quotes ? '"' : '\'';
    buffer_append(&text, line->body, (size_t)(line->value - line->body));
    buffer_byte(&text, quote);
    for (const char *at = line->value; at < line->value_end; at++) {
        if (*at == quote)
            buffer_byte(&text, quote);
        buffer_byte(&text, *at);
    }
    buffer_byte(&text, quote);
    const char *hint =
        arena_print(arena, "write it so: %s%s", line->is_item ? "- " : "", buffer_string(&text));
    buffer_release(&text);
    return hint;
}

/* The line as text behind `|`; a list item stays a line and gets quotes. */
static const char *as_block(struct arena *arena, const struct cut_line *line)
{
    if (line->is_item || !line->has_key || line->end - line->value > HINT_BYTES_MAX)
        return quoted(arena, line);
    const char *key_end = trimmed_end(line->body, line->value);
    return arena_print(arena, "write it so: %.*s |\n                   %.*s",
                       (int)(key_end - line->body), line->body,
                       (int)(trimmed_end(line->value, line->end) - line->value), line->value);
}

static const char *with_value(struct arena *arena, const struct cut_line *line, const char *before,
                              const char *value)
{
    return arena_print(arena, "write it so: %s%.*s%s%.*s", line->is_item ? "- " : "",
                       (int)(line->value - line->body), line->body, before,
                       (int)(line->value_end - value), value);
}

/* A quote that does not close at the end of the value. */
static bool quote_is_broken(const struct cut_line *line)
{
    char quote = *line->value;
    const char *end = trimmed_end(line->value, line->end);
    for (const char *at = line->value + 1; at < end; at++) {
        if (*at == '\\' && quote == '"') {
            at++;
        } else if (*at == quote) {
            if (quote == '\'' && at + 1 < end && at[1] == quote) {
                at++;
                continue;
            }
            for (at++; at < end && (*at == ' ' || *at == '\t');)
                at++;
            return at < end && *at != '#';
        }
    }
    return true;
}

static const char *after_spaces(const char *at, const char *end)
{
    while (at < end && *at == ' ')
        at++;
    return at;
}

/* As `quoted`, where a # is no comment: it stands inside the quotes meant. */
static const char *quoted_whole(struct arena *arena, const struct cut_line *line)
{
    struct cut_line whole = *line;
    whole.value_end = trimmed_end(line->value, line->end);
    return quoted(arena, &whole);
}

/* A value whose first character means something to YAML. */
static bool bites_at_start(struct arena *arena, const struct cut_line *line, struct bite *bite)
{
    char first = line->value < line->value_end ? *line->value : ' ';
    const char *second = line->value + 1;
    switch (first) {
    case '"':
    case '\'':
        if (!quote_is_broken(line))
            return false;
        bite->text = arena_print(arena, "a value that begins with %c must end with it", first);
        bite->hint = quoted_whole(arena, line);
        return true;
    case '>':
        bite->text = "a value cannot begin with '>'";
        second = after_spaces(second, line->value_end);
        bite->hint = second < line->value_end && *second >= '0' && *second <= '9'
                         ? with_value(arena, line, "over ", second)
                         : quoted(arena, line);
        return true;
    case '-':
        if (second >= line->value_end || *second != ' ')
            return false;
        bite->text = line->has_key ? "a space after the minus sign makes it a list"
                                   : "two dashes make a list in a list";
        bite->hint = with_value(arena, line, line->has_key ? "-" : "",
                                after_spaces(second, line->value_end));
        return true;
    case '&':
    case '*':
    case '!':
    case '%':
    case '@':
    case '`':
    case ',':
    case ']':
    case '}':
        bite->text = arena_print(arena, "a value cannot begin with '%c'", first);
        bite->hint = quoted(arena, line);
        return true;
    default:
        return false;
    }
}

/* `grid_leak:470k`: the colon in a word that could be a key. */
static const char *tight_colon(const struct cut_line *line)
{
    if (line->has_key || line->is_item)
        return NULL;
    for (const char *at = line->body; at + 1 < line->value_end; at++) {
        if (*at == ':')
            return at > line->body ? at : NULL;
        if (!((*at >= 'a' && *at <= 'z') || (*at >= 'A' && *at <= 'Z') ||
              (*at >= '0' && *at <= '9') || strchr("_./- ", *at)))
            return NULL;
    }
    return NULL;
}

static bool bites_inside(struct arena *arena, const struct cut_line *line, struct bite *bite)
{
    if (line->value < line->value_end && strchr("\"'{[", *line->value))
        return false;
    if ((line->has_key || line->is_item) && colon_in(line->value, line->value_end)) {
        bite->text = "a colon and a space inside a value begin a new key";
        bite->hint = as_block(arena, line);
        return true;
    }
    const char *colon = tight_colon(line);
    if (colon) {
        bite->text = "no space after the colon";
        bite->hint = arena_print(arena, "write it so: %.*s: %.*s", (int)(colon - line->body),
                                 line->body, (int)(line->value_end - colon - 1), colon + 1);
        return true;
    }
    return false;
}

static bool bites_in_indent(struct arena *arena, const struct cut_line *line, struct bite *bite)
{
    static const char no_break[] = "\xC2\xA0"; /* a space that a word processor leaves behind */
    const char *at = line->start;
    bool tab = false, broken = false;
    for (;; at++) {
        if (line->end - at >= 2 && memcmp(at, no_break, 2) == 0) {
            broken = true;
            at++;
        } else if (at < line->end && (*at == ' ' || *at == '\t')) {
            tab |= *at == '\t';
        } else {
            break;
        }
    }
    if (at == line->end || *at == '#' || !(tab || broken))
        return false;
    bite->text = tab ? "a tab at the start of a line" : "a no-break space at the start of a line";
    bite->hint = arena_print(arena, "write spaces: %.*s", (int)(line->end - at), at);
    return true;
}

static struct position position_in(const struct cut_line *line, unsigned number, const char *at)
{
    struct position position = {number, 1};
    for (const char *cursor = line->start; cursor < at; position.column++)
        utf8_next(&cursor, line->end);
    return position;
}

static bool bites(const struct bite_search *search, const struct cut_line *line, unsigned number,
                  struct bite *bite)
{
    const char *at = line->value;
    *bite = (struct bite){0};
    if (bites_in_indent(search->arena, line, bite))
        at = line->start;
    else if (!bites_at_start(search->arena, line, bite) && !bites_inside(search->arena, line, bite))
        return false;
    /* With a key the rest of the record stays readable when only the value goes. */
    const char *from = line->has_key && at != line->start ? line->value : line->start;
    bite->at = position_in(line, number, at);
    bite->blank_from = (size_t)(from - search->text);
    bite->blank_to = (size_t)(line->end - search->text);
    return true;
}

bool yaml_bite_find(const struct bite_search *search, struct bite *bite)
{
    const char *cursor = search->text + search->from, *end = search->text + search->length;
    bool in_block = false;
    size_t block_indent = 0;
    for (unsigned number = search->from_line; cursor < end && number <= search->last_line;
         number++) {
        const char *stop = memchr(cursor, '\n', (size_t)(end - cursor));
        stop = stop ? stop : end;
        const char *line_end = stop > cursor && stop[-1] == '\r' ? stop - 1 : stop;
        struct cut_line line = cut(cursor, line_end);
        bool blank = line.body == line_end && !line.is_item;
        if (in_block && !blank && indent_of(&line) <= block_indent)
            in_block = false;
        if (!in_block && !blank && *line.body != '#') {
            if (is_block_header(&line)) {
                in_block = true;
                block_indent = indent_of(&line);
            } else if (bites(search, &line, number, bite)) {
                return true;
            }
        }
        cursor = stop < end ? stop + 1 : end;
    }
    return false;
}

const char *yaml_quoted_line_hint(struct arena *arena, const struct source *source, unsigned line)
{
    const char *cursor = source->text, *end = source->text + source->length;
    for (; line > 1 && cursor; line--) {
        cursor = memchr(cursor, '\n', (size_t)(end - cursor));
        cursor = cursor ? cursor + 1 : NULL;
    }
    if (!cursor)
        return NULL;
    const char *stop = memchr(cursor, '\n', (size_t)(end - cursor));
    struct cut_line parts = cut(cursor, stop ? stop : end);
    if (parts.value == parts.value_end || strchr("{[", *parts.value))
        return "put the value in quotes";
    return quoted(arena, &parts);
}
