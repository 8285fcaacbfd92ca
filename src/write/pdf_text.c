#include "write/pdf_text.h"

#include "base/memory.h"
#include "base/utf8.h"
#include "write/pdf_font.h"

#include <stdio.h>
#include <stdlib.h>

enum { CHAIN_MAX = 4 };

/* Faces to try in order; the regular fallback ends each row and has U+FFFD. */
static const enum text_face chains[FACE_COUNT][CHAIN_MAX] = {
    [FACE_REGULAR] = {FACE_REGULAR, FACE_FALLBACK, FACE_MONO, FACE_FALLBACK},
    [FACE_SEMIBOLD] = {FACE_SEMIBOLD, FACE_FALLBACK_BOLD, FACE_MONO, FACE_FALLBACK},
    [FACE_ITALIC] = {FACE_ITALIC, FACE_FALLBACK_OBLIQUE, FACE_MONO, FACE_FALLBACK},
    [FACE_SEMIBOLD_ITALIC] = {FACE_SEMIBOLD_ITALIC, FACE_FALLBACK_BOLD, FACE_MONO, FACE_FALLBACK},
    [FACE_MONO] = {FACE_MONO, FACE_FALLBACK, FACE_REGULAR, FACE_FALLBACK},
    [FACE_FALLBACK] = {FACE_FALLBACK, FACE_FALLBACK, FACE_MONO, FACE_FALLBACK},
    [FACE_FALLBACK_BOLD] = {FACE_FALLBACK_BOLD, FACE_FALLBACK, FACE_MONO, FACE_FALLBACK},
    [FACE_FALLBACK_OBLIQUE] = {FACE_FALLBACK_OBLIQUE, FACE_FALLBACK, FACE_MONO, FACE_FALLBACK},
};

static struct glyph_place find_in_chain(const struct pdf_resources *resources, enum text_face face,
                                        uint32_t code_point)
{
    struct glyph_place place = {.face = FACE_FALLBACK, .code_point = code_point};
    for (size_t i = 0; i < CHAIN_MAX && place.glyph == 0; i++) {
        place.glyph = font_face_glyph(resources->faces[chains[face][i]], code_point);
        if (place.glyph != 0)
            place.face = chains[face][i];
    }
    place.advance = font_face_advance(resources->faces[place.face], place.glyph);
    place.missing = place.glyph == 0;
    return place;
}

/* Controls have glyphs of no width in some faces; a reader should see that there is something. */
static bool is_control(uint32_t code_point)
{
    return code_point < 0x20 || (code_point >= 0x7F && code_point < 0xA0);
}

struct glyph_place pdf_find_glyph(const struct pdf_resources *resources, enum text_face face,
                                  uint32_t code_point)
{
    struct glyph_place place = {.missing = true};
    if (!is_control(code_point))
        place = find_in_chain(resources, face, code_point);
    if (place.missing) {
        place = find_in_chain(resources, face, 0xFFFD);
        place.missing = true;
    }
    return place;
}

void pdf_text_prepare(struct pdf_resources *resources)
{
    for (int face = 0; face < FACE_COUNT; face++)
        for (uint32_t code_point = 0; code_point < LATIN_COUNT; code_point++)
            resources->latin[face][code_point] =
                pdf_find_glyph(resources, (enum text_face)face, code_point);
}

unsigned long pdf_text_width(const struct pdf_resources *resources, enum text_face face,
                             const char *text, size_t length)
{
    const struct glyph_place *latin = resources->latin[face];
    unsigned long total = 0;
    for (const char *end = text + length; text < end;) {
        unsigned char byte = (unsigned char)*text;
        if (byte < 0x80) {
            total += latin[byte].advance;
            text++;
        } else {
            total += pdf_character_width(resources, face, utf8_next_long(&text, end));
        }
    }
    return total;
}

static void note_missing(struct pdf_fonts *fonts, uint32_t code_point)
{
    if (code_point == UTF8_ILL_FORMED) {
        fonts->ill_formed++;
        return;
    }
    for (size_t i = 0; i < fonts->missing_count; i++)
        if (fonts->missing[i] == code_point)
            return;
    if (fonts->missing_count < MISSING_MAX)
        fonts->missing[fonts->missing_count++] = code_point;
}

static struct font_charset *set_of(struct pdf_fonts *fonts, enum text_face face)
{
    if (!fonts->sets[face]) {
        fonts->sets[face] = font_charset_create(fonts->resources->faces[face]);
        fonts->fonts[face] = pdf_font_begin(fonts->document);
    }
    return fonts->sets[face];
}

/* Codes of Latin characters that the set has already: nearly all, once a page is drawn. Stops at
   the first other one. */
static void encode_known(struct pdf_fonts *fonts, enum text_face face, const char **text,
                         const char *end, struct buffer *codes)
{
    const uint16_t *known = font_charset_latin(set_of(fonts, face));
    buffer_reserve(codes, 2 * (size_t)(end - *text));
    char *code = codes->data + codes->length;
    while (*text < end) {
        const char *next = *text;
        uint32_t code_point = utf8_next(&next, end);
        if (code_point >= LATIN_COUNT || known[code_point] == 0)
            break;
        *code++ = (char)(known[code_point] >> 8);
        *code++ = (char)(known[code_point] & 255);
        *text = next;
    }
    codes->length = (size_t)(code - codes->data);
}

enum text_face pdf_text_encode(struct pdf_fonts *fonts, enum text_face face, const char **text,
                               const char *end, struct buffer *codes)
{
    enum text_face shown = FACE_COUNT;
    while (*text < end) {
        const char *next = *text;
        uint32_t code_point = utf8_next(&next, end);
        struct glyph_place place = pdf_find_glyph(fonts->resources, face, code_point);
        if (shown != FACE_COUNT && place.face != shown)
            break;
        shown = place.face;
        if (place.missing)
            note_missing(fonts, code_point);
        buffer_be16(codes, font_charset_add(set_of(fonts, shown), place.code_point));
        *text = next;
        if (shown == face)
            encode_known(fonts, face, text, end, codes);
    }
    return shown;
}

enum font_status pdf_fonts_finish(struct pdf_fonts *fonts, HPDF_Dict resources_dict,
                                  struct deflater *deflater)
{
    HPDF_Dict names = HPDF_Dict_New(fonts->document->mmgr);
    HPDF_Dict_Add(resources_dict, "Font", names);
    for (int face = 0; face < FACE_COUNT; face++) {
        if (!fonts->sets[face])
            continue;
        enum font_status status =
            pdf_font_finish(fonts->document, fonts->fonts[face], fonts->sets[face], deflater);
        if (status != FONT_OK)
            return status;
        char name[16];
        snprintf(name, sizeof name, "F%d", face);
        HPDF_Dict_Add(names, name, fonts->fonts[face]);
    }
    return FONT_OK;
}

void pdf_fonts_release(struct pdf_fonts *fonts)
{
    for (int face = 0; face < FACE_COUNT; face++)
        font_charset_destroy(fonts->sets[face]);
}
