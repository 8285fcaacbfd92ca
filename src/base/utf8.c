#include "base/utf8.h"

uint32_t utf8_next_long(const char **cursor, const char *end)
{
    const unsigned char *at = (const unsigned char *)*cursor;
    size_t left = (size_t)(end - *cursor);
    uint32_t code_point = at[0];
    if (code_point < 0x80) {
        *cursor += 1;
        return code_point;
    }

    static const uint32_t smallest[5] = {0, 0, 0x80, 0x800, 0x10000};
    size_t length = code_point >= 0xF0 ? 4 : code_point >= 0xE0 ? 3 : 2;
    code_point &= 0x7Fu >> length;
    if (at[0] < 0xC2 || at[0] > 0xF4 || left < length)
        length = 0;
    for (size_t i = 1; i < length; i++) {
        if ((at[i] & 0xC0) != 0x80)
            length = 0;
        else
            code_point = code_point << 6 | (at[i] & 0x3Fu);
    }
    if (length == 0 || code_point < smallest[length] || code_point > 0x10FFFF ||
        (code_point >= 0xD800 && code_point <= 0xDFFF)) {
        *cursor += 1;
        return UTF8_ILL_FORMED;
    }
    *cursor += length;
    return code_point;
}

void utf8_append_utf16(struct buffer *buffer, uint32_t code_point)
{
    if (code_point < 0x10000) {
        buffer_be16(buffer, (uint16_t)code_point);
        return;
    }
    uint32_t offset = code_point - 0x10000;
    buffer_be16(buffer, (uint16_t)(0xD800 + (offset >> 10)));
    buffer_be16(buffer, (uint16_t)(0xDC00 + (offset & 0x3FF)));
}

void utf8_append(struct buffer *buffer, uint32_t code_point)
{
    if (code_point < 0x80) {
        buffer_byte(buffer, (char)code_point);
        return;
    }
    unsigned more = code_point < 0x800 ? 1 : code_point < 0x10000 ? 2 : 3;
    static const unsigned lead[4] = {0, 0xC0, 0xE0, 0xF0};
    buffer_byte(buffer, (char)(lead[more] | code_point >> 6 * more));
    while (more-- > 0)
        buffer_byte(buffer, (char)(0x80 | (code_point >> 6 * more & 0x3F)));
}
