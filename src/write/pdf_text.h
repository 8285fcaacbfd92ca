/*
 * Text in faces with fallbacks: measured while lines are broken, encoded while pages are drawn.
 *
 * Each character is taken from the first face that has it: Open Sans, then DejaVu Sans Condensed.
 * What none has is drawn and measured as U+FFFD and noted, since PDF/A refuses .notdef in a text.
 * No shaping: no kerning, no ligatures, no joining of right-to-left letters.
 */
#ifndef WRITE_PDF_TEXT_H
#define WRITE_PDF_TEXT_H

#include "write/font_charset.h"
#include "write/pdf_archive.h"
#include "write/writer.h"

#include <hpdf.h>

enum text_face {
    FACE_REGULAR,
    FACE_SEMIBOLD,
    FACE_ITALIC,
    FACE_SEMIBOLD_ITALIC,
    FACE_MONO,
    FACE_FALLBACK,
    FACE_FALLBACK_BOLD,
    FACE_FALLBACK_OBLIQUE,
    FACE_COUNT
};

/* What shows a character: a glyph of one of the faces. */
struct glyph_place {
    enum text_face face;
    uint32_t code_point; /* U+FFFD in place of a missing one */
    uint16_t glyph;
    uint16_t advance; /* in thousandths of the size */
    bool missing;     /* no face has the character */
};

enum { LATIN_COUNT = 256 }; /* U+0000 to U+00FF: nearly all of a text */

struct pdf_resources {
    struct font_face *faces[FACE_COUNT];
    struct glyph_place latin[FACE_COUNT][LATIN_COUNT]; /* found once and for all */
    struct colour_profile srgb;
};

enum { MISSING_MAX = 32 };

/* The fonts of one document: a set of characters and a font object for each face that it shows. */
struct pdf_fonts {
    HPDF_Doc document;
    const struct pdf_resources *resources;
    struct font_charset *sets[FACE_COUNT]; /* NULL until needed */
    HPDF_Dict fonts[FACE_COUNT];
    uint32_t missing[MISSING_MAX]; /* characters that no face has, each once, as they come */
    size_t missing_count;
    size_t ill_formed; /* bytes that are not UTF-8 */
};

/* Find the places of the Latin characters, once the faces are open. */
void pdf_text_prepare(struct pdf_resources *resources);

/* Width in thousandths of the size: exactly what showing the text moves the pen by. */
unsigned long pdf_text_width(const struct pdf_resources *resources, enum text_face face,
                             const char *text, size_t length);

/* Where the character is found, UTF8_ILL_FORMED allowed. */
struct glyph_place pdf_find_glyph(const struct pdf_resources *resources, enum text_face face,
                                  uint32_t code_point);

/* The same as pdf_text_width for one character, UTF8_ILL_FORMED allowed. */
static inline unsigned pdf_character_width(const struct pdf_resources *resources,
                                           enum text_face face, uint32_t code_point)
{
    if (code_point < LATIN_COUNT)
        return resources->latin[face][code_point].advance;
    return pdf_find_glyph(resources, face, code_point).advance;
}

/*
 * Append the codes (two bytes each) of the characters from *text on that one face shows, and move
 * *text behind them. *text must be below end. The answer is that face.
 */
enum text_face pdf_text_encode(struct pdf_fonts *fonts, enum text_face face, const char **text,
                               const char *end, struct buffer *codes);

/* Complete the font objects and name them F0, F1 ... by face in `resources_dict`. */
enum font_status pdf_fonts_finish(struct pdf_fonts *fonts, HPDF_Dict resources_dict,
                                  struct deflater *deflater);

/* After the document is freed. */
void pdf_fonts_release(struct pdf_fonts *fonts);

#endif
