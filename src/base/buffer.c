#include "base/buffer.h"

#include "base/memory.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>

void buffer_enlarge(struct buffer *buffer, size_t more_bytes)
{
    size_t needed = buffer->length + more_bytes;
    if (needed < more_bytes)
        memory_exhausted();
    size_t capacity = buffer->capacity ? buffer->capacity : 256;
    while (capacity < needed)
        capacity *= 2;
    buffer->data = memory_resize(buffer->data, capacity);
    buffer->capacity = capacity;
}

void buffer_print(struct buffer *buffer, const char *format, ...)
{
    enum { USUAL_BYTES = 128 };
    va_list arguments, again;
    va_start(arguments, format);
    va_copy(again, arguments);
    buffer_reserve(buffer, USUAL_BYTES);
    size_t room = buffer->capacity - buffer->length;
    int length = vsnprintf(buffer->data + buffer->length, room, format, again);
    va_end(again);
    if (length > 0 && (size_t)length >= room) {
        buffer_reserve(buffer, (size_t)length + 1);
        vsnprintf(buffer->data + buffer->length, (size_t)length + 1, format, arguments);
    }
    if (length > 0)
        buffer->length += (size_t)length;
    va_end(arguments);
}

static void append_digits(struct buffer *buffer, unsigned long long value)
{
    char digits[24];
    size_t start = sizeof digits;
    do {
        digits[--start] = (char)('0' + value % 10);
        value /= 10;
    } while (value);
    buffer_append(buffer, digits + start, sizeof digits - start);
}

void buffer_decimal(struct buffer *buffer, long long value)
{
    if (value < 0)
        buffer_byte(buffer, '-');
    append_digits(buffer, value < 0 ? 0 - (unsigned long long)value : (unsigned long long)value);
}

void buffer_hex(struct buffer *buffer, uint32_t value, unsigned digits)
{
    buffer_reserve(buffer, digits);
    for (unsigned i = digits; i-- > 0;)
        buffer->data[buffer->length++] = "0123456789ABCDEF"[value >> (4 * i) & 15];
}

void buffer_fixed(struct buffer *buffer, double value, unsigned decimals)
{
    static const double scale[] = {1, 10, 100, 1e3, 1e4, 1e5, 1e6};
    long long scaled = llround(value * scale[decimals]);
    if (scaled < 0) {
        buffer_byte(buffer, '-');
        scaled = -scaled;
    }
    while (decimals > 0 && scaled % 10 == 0) {
        scaled /= 10;
        decimals--;
    }
    long long unit = (long long)scale[decimals];
    append_digits(buffer, (unsigned long long)(scaled / unit));
    if (decimals == 0)
        return;
    buffer_byte(buffer, '.');
    long long rest = scaled % unit;
    for (long long place = unit / 10; place > 0; place /= 10)
        buffer_byte(buffer, (char)('0' + rest / place % 10));
}

const char *buffer_string(struct buffer *buffer)
{
    buffer_reserve(buffer, 1);
    buffer->data[buffer->length] = '\0';
    return buffer->data;
}

void buffer_clear(struct buffer *buffer)
{
    buffer->length = 0;
}

void buffer_release(struct buffer *buffer)
{
    free(buffer->data);
    *buffer = (struct buffer){0};
}
