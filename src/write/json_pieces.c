#include "write/json_pieces.h"

#include <math.h>
#include <string.h>

void json_string(struct buffer *out, const char *text)
{
    if (!text) {
        buffer_text(out, "null");
        return;
    }
    buffer_byte(out, '"');
    const char *plain = text;
    for (const char *c = text; *c; c++) {
        unsigned char byte = (unsigned char)*c;
        if (byte >= 0x20 && byte != '"' && byte != '\\' && byte != 0x7F)
            continue;
        buffer_append(out, plain, (size_t)(c - plain));
        plain = c + 1;
        if (byte == '"' || byte == '\\') {
            buffer_byte(out, '\\');
            buffer_byte(out, *c);
        } else if (byte == '\n') {
            buffer_text(out, "\\n");
        } else if (byte == '\t') {
            buffer_text(out, "\\t");
        } else {
            buffer_text(out, "\\u");
            buffer_hex(out, byte, 4);
        }
    }
    buffer_append(out, plain, strlen(plain));
    buffer_byte(out, '"');
}

static void comma(struct buffer *out)
{
    char last = out->length > 0 ? out->data[out->length - 1] : '[';
    if (last != '{' && last != '[' && last != ':' && last != '\n')
        buffer_byte(out, ',');
}

static void write_key(struct buffer *out, const char *key)
{
    comma(out);
    buffer_byte(out, '"');
    buffer_text(out, key);
    buffer_text(out, "\":");
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
