/*
 * Memory with one owner and one end: what belongs to a job is taken from the job's arena
 * and given back all at once. A struct arena set to {0} is empty and valid.
 */
#ifndef BASE_ARENA_H
#define BASE_ARENA_H

#include <stdarg.h>
#include <stddef.h>

struct arena_block;

struct arena {
    struct arena_block *newest;
    size_t used_bytes; /* handed out in all, for bounds on input */
};

/* size_bytes of zeroed memory, aligned for any type; valid until arena_release. */
void *arena_get(struct arena *arena, size_t size_bytes);

/* An array of count items of item_bytes each, zeroed. */
void *arena_array(struct arena *arena, size_t count, size_t item_bytes);

/* An array grown for one more item: when count has reached *capacity the items are copied to a
   larger place. Returns the array to use from now on. */
void *arena_grow(struct arena *arena, void *items, size_t count, size_t *capacity,
                 size_t item_bytes);

/* A NUL-terminated copy of text[0..length). */
char *arena_text(struct arena *arena, const char *text, size_t length);

/* The same for a whole string. NULL stays NULL. */
char *arena_copy(struct arena *arena, const char *text);

/* printf into the arena. */
char *arena_print(struct arena *arena, const char *format, ...)
    __attribute__((format(printf, 2, 3)));
char *arena_print_list(struct arena *arena, const char *format, va_list arguments);

/* Give everything back; the arena is empty and valid again. */
void arena_release(struct arena *arena);

#endif
