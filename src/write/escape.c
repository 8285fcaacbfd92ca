#include "write/escape.h"

#include <stdbool.h>
#include <string.h>

static const char replacement[] = "\xef\xbf\xbd";

static const char *html_entity(unsigned char c)
{
    switch (c) {
    case '&':
        return "&amp;";
    case '<':
        return "&lt;";
    case '>':
        return "&gt;";
    case '"':
        return "&quot;";
    default:
        return (c < 0x20 && c != '\n' && c != '\t') || c == 0x7f ? replacement : NULL;
    }
}

void escape_html(struct buffer *out, const char *text)
{
    if (!text)
        return;
    const char *run = text;
    for (; *text; text++) {
        const char *entity = html_entity((unsigned char)*text);
        if (!entity)
            continue;
        buffer_append(out, run, (size_t)(text - run));
        buffer_text(out, entity);
        run = text + 1;
    }
    buffer_append(out, run, (size_t)(text - run));
}

/* Signs that begin something in the middle of a line; + - . and digits only do at its start, which
   a cell never is. */
static bool is_markup(char c)
{
    return c != '\0' && strchr("\\`*_{}[]<>#|~&!", c) != NULL;
}

void escape_markdown(struct buffer *out, const char *text)
{
    for (; text && *text; text++) {
        unsigned char c = (unsigned char)*text;
        if (c == '\n' || c == '\r' || c == '\t') {
            buffer_byte(out, ' ');
        } else if (c < 0x20 || c == 0x7f) {
            buffer_text(out, replacement);
        } else {
            if (is_markup(*text))
                buffer_byte(out, '\\');
            buffer_byte(out, *text);
        }
    }
}

void escape_css(struct buffer *out, const char *text)
{
    for (; text && *text; text++) {
        unsigned char c = (unsigned char)*text;
        bool plain = c >= 0x80 || (c >= '0' && c <= '9') || (c >= 'a' && c <= 'z') ||
                     (c >= 'A' && c <= 'Z') || c == ' ' || c == ',' || c == '.' || c == '-';
        if (plain) {
            buffer_byte(out, *text);
        } else {
            /* Six digits end the escape by themselves. */
            buffer_byte(out, '\\');
            buffer_hex(out, c < 0x20 || c == 0x7f ? 0xfffd : c, 6);
        }
    }
}
