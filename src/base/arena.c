#include "base/arena.h"

#include "base/memory.h"

#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { BLOCK_BYTES = 32768, ALIGNMENT = 16 };

struct arena_block {
    struct arena_block *older;
    size_t used, capacity;
    _Alignas(ALIGNMENT) unsigned char data[];
};

/* Called when the newest has no room. */
static struct arena_block *block_with_room(struct arena *arena, size_t size_bytes)
{
    struct arena_block *block = arena->newest;
    size_t capacity = size_bytes > BLOCK_BYTES / 4 ? size_bytes : (size_t)BLOCK_BYTES;
    struct arena_block *fresh = memory_get(sizeof *fresh + capacity);
    fresh->used = 0;
    fresh->capacity = capacity;
    /* A block for one large piece goes behind the newest, whose room stays in use. */
    if (block && capacity != BLOCK_BYTES) {
        fresh->older = block->older;
        block->older = fresh;
    } else {
        fresh->older = block;
        arena->newest = fresh;
    }
    return fresh;
}

/* A piece whose contents are undefined, for what is filled at once. */
static void *take(struct arena *arena, size_t size_bytes)
{
    size_t rounded = (size_bytes + ALIGNMENT - 1) & ~(size_t)(ALIGNMENT - 1);
    if (rounded < size_bytes)
        memory_exhausted();
    struct arena_block *block = arena->newest;
    if (!block || block->capacity - block->used < rounded)
        block = block_with_room(arena, rounded);
    void *piece = block->data + block->used;
    block->used += rounded;
    arena->used_bytes += rounded;
    return piece;
}

void *arena_get(struct arena *arena, size_t size_bytes)
{
    void *piece = take(arena, size_bytes);
    return size_bytes ? memset(piece, 0, size_bytes) : piece;
}

void *arena_array(struct arena *arena, size_t count, size_t item_bytes)
{
    if (item_bytes && count > (size_t)-1 / item_bytes)
        memory_exhausted();
    return arena_get(arena, count * item_bytes);
}

void *arena_grow(struct arena *arena, void *items, size_t count, size_t *capacity,
                 size_t item_bytes)
{
    if (count < *capacity)
        return items;
    *capacity = *capacity ? *capacity * 2 : 8;
    if (item_bytes && *capacity > (size_t)-1 / item_bytes)
        memory_exhausted();
    size_t used_bytes = count * item_bytes;
    char *larger = take(arena, *capacity * item_bytes);
    if (count)
        memcpy(larger, items, used_bytes);
    memset(larger + used_bytes, 0, *capacity * item_bytes - used_bytes);
    return larger;
}

char *arena_text(struct arena *arena, const char *text, size_t length)
{
    char *copy = take(arena, length + 1);
    if (length)
        memcpy(copy, text, length);
    copy[length] = '\0';
    return copy;
}

char *arena_copy(struct arena *arena, const char *text)
{
    return text ? arena_text(arena, text, strlen(text)) : NULL;
}

/* "%s.%s": nearly all formats only join texts, and printf takes ten times as long over it. */
static bool joins_texts(const char *format)
{
    while ((format = strchr(format, '%'))) {
        if (format[1] != 's')
            return false;
        format += 2;
    }
    return true;
}

/* What printf shows of a text that is not there. */
static const char *shown(const char *text)
{
    return text ? text : "(null)";
}

static char *join_texts(struct arena *arena, const char *format, va_list texts)
{
    va_list again;
    va_copy(again, texts);
    size_t length = strlen(format);
    for (const char *at = format; (at = strchr(at, '%')); at += 2)
        length += strlen(shown(va_arg(again, const char *)));
    va_end(again);
    char *joined = take(arena, length + 1), *end = joined;
    while (*format) {
        const char *text = format;
        size_t run = strcspn(format, "%");
        format += run;
        if (run == 0) {
            text = shown(va_arg(texts, const char *));
            run = strlen(text);
            format += 2;
        }
        memcpy(end, text, run);
        end += run;
    }
    *end = '\0';
    return joined;
}

char *arena_print_list(struct arena *arena, const char *format, va_list arguments)
{
    if (joins_texts(format))
        return join_texts(arena, format, arguments);
    char text[256]; /* nearly everything fits, and is made once only */
    va_list again;
    va_copy(again, arguments);
    int length = vsnprintf(text, sizeof text, format, again);
    va_end(again);
    if (length < 0)
        return arena_text(arena, "", 0);
    if ((size_t)length < sizeof text)
        return arena_text(arena, text, (size_t)length);
    char *longer = take(arena, (size_t)length + 1);
    vsnprintf(longer, (size_t)length + 1, format, arguments);
    return longer;
}

char *arena_print(struct arena *arena, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    char *text = arena_print_list(arena, format, arguments);
    va_end(arguments);
    return text;
}

void arena_release(struct arena *arena)
{
    for (struct arena_block *block = arena->newest; block;) {
        struct arena_block *older = block->older;
        free(block);
        block = older;
    }
    *arena = (struct arena){0};
}
