#include "archive/summary_scan.h"

#include "base/utf8.h"

#include <string.h>

static bool fail(struct summary_scan *scan)
{
    scan->bad = true;
    scan->at = scan->end;
    return false;
}

static bool take(struct summary_scan *scan, char wanted)
{
    if (scan->at < scan->end && *scan->at == wanted) {
        scan->at++;
        return true;
    }
    return fail(scan);
}

static int hex_digit(char digit)
{
    if (digit >= '0' && digit <= '9')
        return digit - '0';
    digit |= 0x20;
    return digit >= 'a' && digit <= 'f' ? digit - 'a' + 10 : -1;
}

/* \uXXXX; -1: none. Our own writer escapes controls only, so pairs of surrogates do not occur. */
static long read_hex(const char *at, const char *end)
{
    long value = 0;
    if (end - at < 4)
        return -1;
    for (int i = 0; i < 4; i++) {
        int digit = hex_digit(at[i]);
        if (digit < 0)
            return -1;
        value = value * 16 + digit;
    }
    return value >= 0xD800 && value <= 0xDFFF ? -1 : value;
}

/* From the first backslash on: the text up to there is already in the buffer. */
static bool unescape(struct summary_scan *scan)
{
    static const char letters[] = "\"\\/bfnrt", meant[] = "\"\\/\b\f\n\r\t";
    while (scan->at < scan->end && *scan->at != '"') {
        char letter = *scan->at++;
        if (letter != '\\') {
            buffer_byte(&scan->unescaped, letter);
            continue;
        }
        letter = scan->at < scan->end ? *scan->at++ : '\0';
        const char *known = letter ? strchr(letters, letter) : NULL;
        if (known) {
            buffer_byte(&scan->unescaped, meant[known - letters]);
            continue;
        }
        long code = letter == 'u' ? read_hex(scan->at, scan->end) : -1;
        if (code < 0)
            return fail(scan);
        utf8_append(&scan->unescaped, (uint32_t)code);
        scan->at += 4;
    }
    return take(scan, '"');
}

static bool read_text(struct summary_scan *scan, struct scan_text *text)
{
    if (!take(scan, '"'))
        return false;
    const char *start = scan->at;
    const char *at = start;
    while (at < scan->end && *at != '"' && *at != '\\')
        at++;
    scan->at = at;
    if (at < scan->end && *at == '"') {
        *text = (struct scan_text){start, (size_t)(at - start), false};
        scan->at++;
        return true;
    }
    buffer_clear(&scan->unescaped);
    buffer_append(&scan->unescaped, start, (size_t)(at - start));
    if (!unescape(scan))
        return false;
    *text = (struct scan_text){scan->unescaped.data ? scan->unescaped.data : "",
                               scan->unescaped.length, true};
    return true;
}

/* Go into an object or list before its first part, to the next one behind a comma, or out. */
static bool enter(struct summary_scan *scan, bool *first, char open, char close)
{
    if (scan->bad)
        return false;
    if (*first && !take(scan, open))
        return false;
    if (scan->at < scan->end && *scan->at == close) {
        scan->at++;
        return false;
    }
    bool was_first = *first;
    *first = false;
    return was_first || take(scan, ',');
}

bool scan_member(struct summary_scan *scan, bool *first, struct scan_text *key)
{
    return enter(scan, first, '{', '}') && read_text(scan, key) && take(scan, ':');
}

bool scan_item(struct summary_scan *scan, bool *first, struct scan_text *text)
{
    return enter(scan, first, '[', ']') && read_text(scan, text);
}

bool scan_scalar(struct summary_scan *scan, struct scan_text *value)
{
    if (scan->at == scan->end)
        return fail(scan);
    if (*scan->at == '"')
        return read_text(scan, value);
    if (*scan->at == '{' || *scan->at == '[')
        return false;
    const char *start = scan->at;
    while (scan->at < scan->end && !strchr(",]}", *scan->at))
        scan->at++;
    *value = (struct scan_text){start, (size_t)(scan->at - start), false};
    if (scan_is(value, "null"))
        value->length = 0;
    return true;
}

void scan_skip(struct summary_scan *scan)
{
    size_t depth = 0;
    struct scan_text ignored;
    do {
        if (scan->at == scan->end) {
            fail(scan);
            return;
        }
        char here = *scan->at;
        if (here == '"') {
            read_text(scan, &ignored);
            continue;
        }
        depth += here == '{' || here == '[';
        if (here == '}' || here == ']') {
            if (depth == 0)
                return; /* the end of what holds it */
            depth--;
        } else if (here == ',' && depth == 0) {
            return;
        }
        scan->at++;
    } while (!scan->bad && (depth || (scan->at < scan->end && !strchr(",]}", *scan->at))));
}

bool scan_is(const struct scan_text *text, const char *word)
{
    return text->length == strlen(word) && memcmp(text->text, word, text->length) == 0;
}
