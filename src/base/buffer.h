/*
 * A growable run of bytes: what writers fill. A struct buffer set to {0} is empty and valid;
 * its owner calls buffer_release. Nothing here fails: out of memory ends the program (memory.h).
 */
#ifndef BASE_BUFFER_H
#define BASE_BUFFER_H

#include <stddef.h>
#include <stdint.h>
#include <string.h>

struct buffer {
    char *data; /* not NUL-terminated, unless buffer_string was called last */
    size_t length;
    size_t capacity;
};

/* Larger memory, for buffer_reserve. */
void buffer_enlarge(struct buffer *buffer, size_t more_bytes);

/* The appends below are inline: a job's files are made of half a million of them, most of a byte or
   a short literal, whose length the compiler then knows. */

/* Make room for more_bytes behind the present end. */
static inline void buffer_reserve(struct buffer *buffer, size_t more_bytes)
{
    if (buffer->capacity - buffer->length < more_bytes)
        buffer_enlarge(buffer, more_bytes);
}

/* Append bytes; a text; one byte; what printf makes; a decimal number. Texts end with NUL, and
   their NUL is not appended. */
static inline void buffer_append(struct buffer *buffer, const void *data, size_t length)
{
    if (length == 0)
        return;
    buffer_reserve(buffer, length);
    memcpy(buffer->data + buffer->length, data, length);
    buffer->length += length;
}

static inline void buffer_text(struct buffer *buffer, const char *text)
{
    buffer_append(buffer, text, strlen(text));
}

static inline void buffer_byte(struct buffer *buffer, char byte)
{
    buffer_reserve(buffer, 1);
    buffer->data[buffer->length++] = byte;
}

void buffer_print(struct buffer *buffer, const char *format, ...)
    __attribute__((format(printf, 2, 3)));
void buffer_decimal(struct buffer *buffer, long long value);

/* Upper-case hexadecimal with exactly `digits` digits, leading zeros kept. */
void buffer_hex(struct buffer *buffer, uint32_t value, unsigned digits);

/* value with at most `decimals` (0 to 6) digits behind the point, trailing zeros dropped, never
   an exponent, never "-0". For coordinates in drawings; |value| below 1e9, not NaN. */
void buffer_fixed(struct buffer *buffer, double value, unsigned decimals);

/* Two bytes, high byte first. */
static inline void buffer_be16(struct buffer *buffer, uint16_t value)
{
    const char bytes[2] = {(char)(value >> 8), (char)(value & 255)};
    buffer_append(buffer, bytes, sizeof bytes);
}

/* The contents with a NUL behind them; valid until the next append. */
const char *buffer_string(struct buffer *buffer);

/* Empty, memory kept for the next use. */
void buffer_clear(struct buffer *buffer);

/* Give the memory back; the buffer is empty and valid again. */
void buffer_release(struct buffer *buffer);

#endif
