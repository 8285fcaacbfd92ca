/*
 * Allocation that cannot fail: out of memory ends the program in one place (exit 3),
 * so no caller carries an error path for it.
 */
#ifndef BASE_MEMORY_H
#define BASE_MEMORY_H

#include <stddef.h>

/* A block of size_bytes, contents undefined. Free with free(). */
void *memory_get(size_t size_bytes);

/* A block for count items of item_bytes each, all zero. Free with free(). */
void *memory_get_cleared(size_t count, size_t item_bytes);

/* The block with its size changed; it may move. block may be NULL. */
void *memory_resize(void *block, size_t size_bytes);

/* Say "gridleak: out of memory" and exit 3. For libraries whose own allocator failed. */
_Noreturn void memory_exhausted(void);

#endif
