#include "write/json_pieces.h"

#include <math.h>
#include <string.h>

static void write_escape(struct buffer *out, char c)
{
    switch (c) {
    case '"':
        buffer_text(out, "\\\"");
        break;
    case '\\':
        buffer_text(out, "\\\\");
        break;
    case '\n':
        buffer_text(out, "\\n");
        break;
    case '\t':
        buffer_text(out, "\\t");
        break;
    default:
        buffer_text(out, "\\u");
        buffer_hex(out, (unsigned char)c, 4);
    }
}

static bool is_plain(char c)
{
    unsigned char byte = (unsigned char)c;
    return byte >= 0x20 && byte != '"' && byte != '\\' && byte != 0x7F;
}

void json_string(struct buffer *out, const char *text)
{
    if (!text) {
        buffer_text(out, "null");
        return;
    }
    buffer_byte(out, '"');
    while (*text) {
        const char *plain = text;
        while (is_plain(*text))
            text++;
        buffer_append(out, plain, (size_t)(text - plain));
        if (*text)
            write_escape(out, *text++);
    }
    buffer_byte(out, '"');
}

static bool needs_comma(const struct buffer *out)
{
    char last = out->length > 0 ? out->data[out->length - 1] : '[';
    return last != '{' && last != '[' && last != ':' && last != '\n';
}

static void comma(struct buffer *out)
{
    if (needs_comma(out))
        buffer_byte(out, ',');
}

/* Written as one piece: a job's findings have ten thousand keys. */
static void write_key(struct buffer *out, const char *key)
{
    size_t length = strlen(key);
    bool apart = needs_comma(out);
    buffer_reserve(out, length + 4);
    char *at = out->data + out->length;
    if (apart)
        *at++ = ',';
    *at++ = '"';
    memcpy(at, key, length);
    at += length;
    *at++ = '"';
    *at++ = ':';
    out->length = (size_t)(at - out->data);
}

void json_open(struct buffer *out, const char *key, char bracket)
{
    if (key)
        write_key(out, key);
    else
        comma(out);
    buffer_byte(out, bracket);
}

void json_close(struct buffer *out, char bracket)
{
    buffer_byte(out, bracket);
}

void json_text_member(struct buffer *out, const char *key, const char *text)
{
    write_key(out, key);
    json_string(out, text);
}

void json_number_member(struct buffer *out, const char *key, double value)
{
    write_key(out, key);
    json_number(out, value);
}

void json_count_member(struct buffer *out, const char *key, long long value)
{
    write_key(out, key);
    buffer_decimal(out, value);
}

void json_flag_member(struct buffer *out, const char *key, bool value)
{
    write_key(out, key);
    buffer_text(out, value ? "true" : "false");
}

void json_choice_member(struct buffer *out, const char *key, const char *choice)
{
    json_text_member(out, key, choice && *choice ? choice : NULL);
}

void json_prose_member(struct buffer *out, const char *key, const struct prose *prose)
{
    json_text_member(out, key, prose->text);
}

void json_date_member(struct buffer *out, const char *key, const struct date *date)
{
    json_text_member(out, key, date->set ? date->written : NULL);
}

void json_quantity_member(struct buffer *out, const char *key, const struct quantity *quantity)
{
    json_number_member(out, key, quantity->set ? quantity->value : NAN);
}

const char *json_bound(enum bound bound)
{
    switch (bound) {
    case BOUND_NONE:
        return NULL;
    case BOUND_OVER:
        return "over";
    case BOUND_UNDER:
        return "under";
    }
    return NULL;
}

void json_measured_members(struct buffer *out, const char *key, const char *key_written,
                           const char *key_bound, const struct quantity *quantity)
{
    json_quantity_member(out, key, quantity);
    json_text_member(out, key_written, quantity->set ? quantity->written : NULL);
    json_text_member(out, key_bound, quantity->set ? json_bound(quantity->bound) : NULL);
}
