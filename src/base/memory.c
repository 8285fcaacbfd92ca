#include "base/memory.h"

#include <stdlib.h>
#include <unistd.h>

void memory_exhausted(void)
{
    static const char message[] = "gridleak: out of memory\n";
    ssize_t written = write(STDERR_FILENO, message, sizeof message - 1);
    (void)written;
    _Exit(3);
}

static void *checked(void *block)
{
    if (!block)
        memory_exhausted();
    return block;
}

void *memory_get(size_t size_bytes)
{
    return checked(malloc(size_bytes ? size_bytes : 1));
}

void *memory_get_cleared(size_t count, size_t item_bytes)
{
    return checked(calloc(count ? count : 1, item_bytes ? item_bytes : 1));
}

void *memory_resize(void *block, size_t size_bytes)
{
    return checked(realloc(block, size_bytes ? size_bytes : 1));
}
