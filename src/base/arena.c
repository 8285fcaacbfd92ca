#include "base/arena.h"

#include "base/memory.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { BLOCK_BYTES = 32768, ALIGNMENT = 16 };

struct arena_block {
    struct arena_block *older;
    size_t used, capacity;
    _Alignas(ALIGNMENT) unsigned char data[];
};

static struct arena_block *block_with_room(struct arena *arena, size_t size_bytes)
{
    struct arena_block *block = arena->newest;
    if (block && block->capacity - block->used >= size_bytes)
        return block;
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

void *arena_get(struct arena *arena, size_t size_bytes)
{
    size_t rounded = (size_bytes + ALIGNMENT - 1) & ~(size_t)(ALIGNMENT - 1);
    if (rounded < size_bytes)
        memory_exhausted();
    struct arena_block *block = block_with_room(arena, rounded);
    void *piece = block->data + block->used;
    block->used += rounded;
    arena->used_bytes += rounded;
    return memset(piece, 0, rounded);
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
    void *larger = arena_array(arena, *capacity, item_bytes);
    if (count)
        memcpy(larger, items, count * item_bytes);
    return larger;
}

char *arena_text(struct arena *arena, const char *text, size_t length)
{
    char *copy = arena_get(arena, length + 1);
    if (length)
        memcpy(copy, text, length);
    return copy;
}

char *arena_copy(struct arena *arena, const char *text)
{
    return text ? arena_text(arena, text, strlen(text)) : NULL;
}

char *arena_print_list(struct arena *arena, const char *format, va_list arguments)
{
    va_list again;
    va_copy(again, arguments);
    int length = vsnprintf(NULL, 0, format, again);
    va_end(again);
    if (length < 0)
        return arena_text(arena, "", 0);
    char *text = arena_get(arena, (size_t)length + 1);
    vsnprintf(text, (size_t)length + 1, format, arguments);
    return text;
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
