#include "base/mustache.h"

#include <string.h>

static struct mustache_value *value_of(struct arena *arena, enum mustache_kind kind)
{
    struct mustache_value *value = arena_get(arena, sizeof *value);
    value->kind = kind;
    return value;
}

struct mustache_value *mustache_map(struct arena *arena)
{
    return value_of(arena, MUSTACHE_MAP);
}

struct mustache_value *mustache_list(struct arena *arena)
{
    return value_of(arena, MUSTACHE_LIST);
}

struct mustache_value *mustache_text(struct arena *arena, const char *text)
{
    struct mustache_value *value = value_of(arena, MUSTACHE_TEXT);
    value->text = arena_copy(arena, text);
    return value;
}

void mustache_set(struct arena *arena, struct mustache_value *map, const char *key,
                  const struct mustache_value *value)
{
    if (!value)
        return;
    map->members =
        arena_grow(arena, map->members, map->count, &map->capacity, sizeof *map->members);
    map->members[map->count++] = (struct mustache_member){arena_copy(arena, key), value};
}

void mustache_set_text(struct arena *arena, struct mustache_value *map, const char *key,
                       const char *text)
{
    if (text)
        mustache_set(arena, map, key, mustache_text(arena, text));
}

void mustache_set_flag(struct arena *arena, struct mustache_value *map, const char *key, bool flag)
{
    static const struct mustache_value yes = {.kind = MUSTACHE_TRUE};
    if (flag)
        mustache_set(arena, map, key, &yes);
}

void mustache_push(struct arena *arena, struct mustache_value *list,
                   const struct mustache_value *value)
{
    list->items = arena_grow(arena, list->items, list->count, &list->capacity, sizeof *list->items);
    list->items[list->count++] = value;
}

void mustache_escape_nothing(struct buffer *out, const char *text, size_t length)
{
    buffer_append(out, text, length);
}

void mustache_escape_html(struct buffer *out, const char *text, size_t length)
{
    for (size_t i = 0; i < length; i++) {
        switch (text[i]) {
        case '&':
            buffer_text(out, "&amp;");
            break;
        case '<':
            buffer_text(out, "&lt;");
            break;
        case '>':
            buffer_text(out, "&gt;");
            break;
        case '"':
            buffer_text(out, "&quot;");
            break;
        case '\'':
            buffer_text(out, "&#39;");
            break;
        default:
            buffer_byte(out, text[i]);
        }
    }
}

static bool is_space(char c)
{
    return c == ' ' || c == '\t' || c == '\n' || c == '\r' || c == '\v' || c == '\f';
}

static bool is_punctuation(char c)
{
    return (c >= '!' && c <= '/') || (c >= ':' && c <= '@') || (c >= '[' && c <= '`') ||
           (c >= '{' && c <= '~');
}

void mustache_escape_commonmark(struct buffer *out, const char *text, size_t length)
{
    while (length && is_space(text[0])) {
        text++;
        length--;
    }
    while (length && is_space(text[length - 1]))
        length--;
    for (size_t i = 0; i < length; i++) {
        if (is_space(text[i])) {
            /* Two spaces before a line end would be a hard break once the template adds one. */
            if (!is_space(text[i - 1]))
                buffer_byte(out, ' ');
            continue;
        }
        if (is_punctuation(text[i]))
            buffer_byte(out, '\\');
        buffer_byte(out, text[i]);
    }
}
