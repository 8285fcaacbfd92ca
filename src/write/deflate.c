#include "write/deflate.h"

#include "base/memory.h"

#include <assert.h>
#include <libdeflate.h>

/* libdeflate rather than zlib: half the time for the same size, and no state between streams. */
struct deflater deflater_open(int level)
{
    assert(level >= 1 && level <= 12);
    struct deflater deflater = {libdeflate_alloc_compressor(level)};
    if (!deflater.compressor)
        memory_exhausted();
    return deflater;
}

void deflater_close(struct deflater *deflater)
{
    libdeflate_free_compressor(deflater->compressor);
}

void deflate_append(struct deflater *deflater, struct buffer *buffer, const void *plain,
                    size_t length)
{
    size_t bound = libdeflate_zlib_compress_bound(deflater->compressor, length);
    buffer_reserve(buffer, bound);
    buffer->length += libdeflate_zlib_compress(deflater->compressor, plain, length,
                                               buffer->data + buffer->length, bound);
}
