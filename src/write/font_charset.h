/*
 * The characters of one face that a PDF font holds, and the streams it needs.
 *
 * Each character has its own number, the CID of PDF; CID 0 is .notdef. Numbers
 * are given by character, not by glyph, so that two characters drawn with the
 * same glyph (ohm sign and Omega, space and no-break space) stay apart when
 * text is copied out of the document.
 *
 * A set belongs to one document: it grows with the text shown, is sealed while the document is
 * saved, and never changes again.
 */
#ifndef WRITE_FONT_CHARSET_H
#define WRITE_FONT_CHARSET_H

#include "base/buffer.h"
#include "write/deflate.h"
#include "write/font_face.h"

#include <stdbool.h>
#include <stdint.h>

struct font_charset;

/* What a sealed set gives to the writer of the PDF. Belongs to the set. */
struct font_streams {
    char name[80];            /* "ABCDEF+Face-Name"; same characters, same six letters */
    struct buffer program;    /* TrueType subset, deflated */
    size_t program_length;    /* the same before deflating */
    struct buffer glyph_map;  /* CIDToGIDMap, deflated */
    struct buffer to_unicode; /* ToUnicode CMap, deflated */
    struct buffer cid_set;    /* CIDSet, deflated */
    struct buffer widths;     /* text of the W array */
};

/* An empty set on a face, which must outlive it. */
struct font_charset *font_charset_create(const struct font_face *face);
void font_charset_destroy(struct font_charset *set);

/* The face that the set was made on. */
const struct font_face *font_charset_face(const struct font_charset *set);

/*
 * Number of a character, added if need be. 0 when the face has no glyph for it,
 * the set is full (65,535), or it is sealed and the character is not in it.
 */
uint16_t font_charset_add(struct font_charset *set, uint32_t code_point);

/* The numbers of U+0000 to U+00FF that the set has already, 0 for the others; for its lifetime. */
const uint16_t *font_charset_latin(const struct font_charset *set);

/*
 * Make the streams and seal the set.
 * On failure the set stays open and as it was. Sealing twice does nothing.
 */
enum font_status font_charset_seal(struct font_charset *set, struct deflater *deflater);

/* NULL before the set is sealed. */
const struct font_streams *font_charset_streams(const struct font_charset *set);

#endif
