/*
 * Deflation for PDF streams. The only place that knows which library does it.
 */
#ifndef WRITE_DEFLATE_H
#define WRITE_DEFLATE_H

#include "base/buffer.h"

/*
 * Append the zlib stream (RFC 1950; FlateDecode of PDF) of plain[0..length).
 * level: 1 fastest to 12 smallest. The same input and level give the same bytes with the same
 * version of libdeflate.
 */
void deflate_append(struct buffer *buffer, const void *plain, size_t length, int level);

#endif
