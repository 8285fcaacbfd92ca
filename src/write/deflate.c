#include "write/deflate.h"

#include "base/memory.h"

#include <assert.h>
#include <libdeflate.h>

/* libdeflate rather than zlib: half the time for the same size, and no state between calls. */
void deflate_append(struct buffer *buffer, const void *plain, size_t length, int level)
{
    assert(level >= 1 && level <= 12);
    struct libdeflate_compressor *compressor = libdeflate_alloc_compressor(level);
    if (!compressor)
        memory_exhausted();
    size_t bound = libdeflate_zlib_compress_bound(compressor, length);
    buffer_reserve(buffer, bound);
    buffer->length +=
        libdeflate_zlib_compress(compressor, plain, length, buffer->data + buffer->length, bound);
    libdeflate_free_compressor(compressor);
}
