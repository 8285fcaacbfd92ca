#include "archive/fold.h"

#include <stdlib.h>
#include <string.h>
#include <utf8proc.h>

static bool is_ascii(const char *text)
{
    for (; *text; text++)
        if ((unsigned char)*text >= 0x80)
            return false;
    return true;
}

static void fold_ascii(struct buffer *out, const char *text)
{
    for (; *text; text++)
        buffer_byte(out, *text >= 'A' && *text <= 'Z' ? (char)(*text + 32) : *text);
}

void fold(struct buffer *out, const char *text)
{
    utf8proc_uint8_t *folded = NULL;
    if (!is_ascii(text) && utf8proc_map((const utf8proc_uint8_t *)text, 0, &folded,
                                        UTF8PROC_NULLTERM | UTF8PROC_COMPAT | UTF8PROC_DECOMPOSE |
                                            UTF8PROC_CASEFOLD | UTF8PROC_STRIPMARK) >= 0)
        buffer_text(out, (const char *)folded);
    else
        fold_ascii(out, text);
    free(folded);
}

/* Every byte of a sign beyond ASCII counts as part of a word. */
static bool in_word(char byte)
{
    return (byte >= 'a' && byte <= 'z') || (byte >= '0' && byte <= '9') ||
           (unsigned char)byte >= 0x80;
}

bool fold_begins_word(const char *text, const char *word)
{
    for (const char *at = text; (at = strstr(at, word)) != NULL; at++)
        if (at == text || !in_word(at[-1]) || !in_word(word[0]))
            return true;
    return false;
}
