#include "write/escape.h"

#include "base/utf8.h"

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

/* Nearly every byte of a page, told apart quickly. */
static bool is_plain(unsigned char c)
{
    return (c > '>' && c != 0x7f) || (c > '&' && c < '<') || c == ' ';
}

void escape_html(struct buffer *out, const char *text)
{
    if (!text)
        return;
    const char *run = text;
    for (; *text; text++) {
        unsigned char c = (unsigned char)*text;
        const char *entity = is_plain(c) ? NULL : html_entity(c);
        if (!entity)
            continue;
        buffer_append(out, run, (size_t)(text - run));
        buffer_text(out, entity);
        run = text + 1;
    }
    buffer_append(out, run, (size_t)(text - run));
}

static bool is_letter_or_digit(char c)
{
    return (c >= '0' && c <= '9') || (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

/* Only where CommonMark would read it: a text full of needless backslashes is hard on the eye. */
static bool is_markup(const char *text)
{
    char next = text[1];
    switch (*text) {
    case '\\':
    case '`':
    case '*':
    case '_':
    case '[':
    case ']':
    case '|':
    case '~':
        return true;
    case '&':
        return is_letter_or_digit(next) || next == '#';
    case '<':
        return is_letter_or_digit(next) || next == '/' || next == '!' || next == '?';
    default:
        return false;
    }
}

/* How many bytes at the beginning of a line would make it a heading, quote, rule or list: they need
   a backslash before the last of them. */
static size_t line_markup(const char *text)
{
    if (text[0] == '#' || text[0] == '>' || text[0] == '=')
        return 1;
    if (text[0] == '+' || text[0] == '-')
        return text[1] == ' ' || text[1] == '\0' || text[1] == '-' ? 1 : 0;
    size_t digits = strspn(text, "0123456789");
    bool item = digits > 0 && (text[digits] == '.' || text[digits] == ')') &&
                (text[digits + 1] == ' ' || text[digits + 1] == '\0');
    return item ? digits + 1 : 0;
}

/* Letters, digits, spaces and most signs: nearly every byte, told apart quickly. */
static bool is_harmless(unsigned char c)
{
    if (c >= 'a')
        return c <= 'z' || c >= 0x80;
    return c == ' ' || (c > '&' && c <= 'Z' && c != '*' && c != '<');
}

void escape_markdown(struct buffer *out, const char *text)
{
    if (!text)
        return;
    size_t beginning = line_markup(text);
    if (beginning > 0) {
        buffer_append(out, text, beginning - 1);
        buffer_byte(out, '\\');
        buffer_byte(out, text[beginning - 1]);
        text += beginning;
    }
    const char *run = text;
    for (; *text; text++) {
        unsigned char c = (unsigned char)*text;
        if (is_harmless(c))
            continue;
        bool control = c < 0x20 || c == 0x7f;
        if (!control && !is_markup(text))
            continue;
        buffer_append(out, run, (size_t)(text - run));
        run = control ? text + 1 : text;
        if (c == '\n' || c == '\r' || c == '\t')
            buffer_byte(out, ' ');
        else
            buffer_text(out, control ? replacement : "\\");
    }
    buffer_append(out, run, (size_t)(text - run));
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

void escape_terminal(struct buffer *out, const char *text)
{
    if (!text)
        return;
    const char *end = text + strlen(text);
    while (text < end) {
        const char *start = text;
        while (*text >= 0x20 && *text < 0x7f)
            text++;
        buffer_append(out, start, (size_t)(text - start));
        if (text == end)
            break;
        start = text;
        uint32_t sign = utf8_next(&text, end);
        bool space = sign == '\n' || sign == '\r' || sign == '\t' || sign == 0xa0 ||
                     sign == 0x2009 || sign == 0x202f;
        bool control = sign < 0x20 || (sign >= 0x7f && sign < 0xa0) || sign == UTF8_ILL_FORMED ||
                       (sign >= 0x202a && sign <= 0x202e) || (sign >= 0x2066 && sign <= 0x2069);
        if (space)
            buffer_byte(out, ' ');
        else if (control)
            buffer_text(out, replacement);
        else
            buffer_append(out, start, (size_t)(text - start));
    }
}
