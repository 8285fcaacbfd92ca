/*
 * A TrueType face, read once per process through HarfBuzz.
 *
 * After font_face_open nothing in a face changes: any number of threads may use
 * the same face at the same time, subsetting included.
 *
 * Lengths are in thousandths of the em, the unit of PDF font dictionaries.
 * No shaping is done: no kerning, no ligatures, no combining of accents. Text
 * should be in normal form C.
 */
#ifndef WRITE_FONT_FACE_H
#define WRITE_FONT_FACE_H

#include "base/buffer.h"

#include <stdbool.h>
#include <stdint.h>

struct font_face;

enum font_status {
    FONT_OK,
    FONT_NOT_READABLE,   /* no such file, or no permission */
    FONT_NOT_TRUETYPE,   /* damaged, a bitmap font, or outlines other than glyf (CFF) */
    FONT_NOT_EMBEDDABLE, /* OS/2 fsType forbids embedding or subsetting */
    FONT_SUBSET_FAILED   /* HarfBuzz refused; the file's tables contradict each other */
};

/* English, without capital or full stop; for a message after "cannot use font 'x': ". */
const char *font_status_text(enum font_status status);

struct font_metrics {
    int ascent;  /* above the baseline, positive */
    int descent; /* below the baseline, negative */
    int cap_height;
    int x_height;
    int left, bottom, right, top; /* box around all glyphs */
    int stem_v;                   /* thickness of vertical stems, estimated from the weight */
    int weight;                   /* 100 to 900; 400 regular, 700 bold */
    double italic_angle_deg;      /* 0 upright, negative leaning right */
    bool fixed_pitch;
};

/*
 * Read the face in the file `path` (.ttf; of a collection, the first).
 * *face is set on FONT_OK only, and then belongs to the caller: font_face_close.
 * The file is mapped, so it must not be cut while the face is open.
 */
enum font_status font_face_open(const char *path, struct font_face **face);

void font_face_close(struct font_face *face);

/* PostScript name, ASCII, as for /BaseFont. Belongs to the face. */
const char *font_face_name(const struct font_face *face);

const struct font_metrics *font_face_metrics(const struct font_face *face);

/* Glyph of a code point; 0 (.notdef) when the face has none. Planes 0 to 2 are looked up. */
uint16_t font_face_glyph(const struct font_face *face, uint32_t code_point);

/* Advance of a glyph, rounded to a whole thousandth of the em. */
uint16_t font_face_advance(const struct font_face *face, uint16_t glyph);

/*
 * A TrueType program with only .notdef, the given glyphs and the parts they are
 * composed of, at any depth; without hinting and without cmap, name, post, OS/2.
 * Glyphs are renumbered: subset_glyphs[i] is the new number of glyphs[i].
 *
 * Appends to *program. On failure *program and subset_glyphs are untouched.
 */
enum font_status font_face_subset(const struct font_face *face, const uint16_t *glyphs,
                                  size_t count, struct buffer *program, uint16_t *subset_glyphs);

#endif
