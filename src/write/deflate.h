/*
 * Deflation for PDF streams. The only place that knows which library does it.
 */
#ifndef WRITE_DEFLATE_H
#define WRITE_DEFLATE_H

#include "base/buffer.h"

/* Kept for all streams of a file: to make one costs as much as to deflate some kilobytes. */
struct deflater {
    struct libdeflate_compressor *compressor;
};

/* level: 1 fastest to 12 smallest. */
struct deflater deflater_open(int level);
void deflater_close(struct deflater *deflater);

/*
 * Append the zlib stream (RFC 1950; FlateDecode of PDF) of plain[0..length). The same input and
 * level give the same bytes with the same version of libdeflate, whatever was deflated before.
 */
void deflate_append(struct deflater *deflater, struct buffer *buffer, const void *plain,
                    size_t length);

#endif
