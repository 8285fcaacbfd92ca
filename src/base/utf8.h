/*
 * UTF-8 reading and writing (The Unicode Standard 15, section 3.9).
 */
#ifndef BASE_UTF8_H
#define BASE_UTF8_H

#include "base/buffer.h"

#include <stdint.h>

/* What utf8_next gives for bytes that are not well-formed UTF-8. */
#define UTF8_ILL_FORMED UINT32_MAX

/* The same as utf8_next, which calls it for what is not ASCII. */
uint32_t utf8_next_long(const char **cursor, const char *end);

/*
 * The code point at *cursor; *cursor moves behind it. *cursor must be below end.
 * Overlong forms, surrogates, values above U+10FFFF and cut sequences are
 * ill-formed: the answer is UTF8_ILL_FORMED and *cursor moves by one byte.
 */
static inline uint32_t utf8_next(const char **cursor, const char *end)
{
    unsigned char byte = (unsigned char)**cursor;
    if (byte >= 0x80)
        return utf8_next_long(cursor, end);
    *cursor += 1;
    return byte;
}

/* Append code_point in UTF-8. It must be a scalar value. */
void utf8_append(struct buffer *buffer, uint32_t code_point);

/* Append code_point in UTF-16, high byte first. */
void utf8_append_utf16(struct buffer *buffer, uint32_t code_point);

#endif
