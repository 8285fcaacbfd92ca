/*
 * The font object of a PDF, made on libharu's object layer: a Type0 font over a CIDFontType2 with
 * a TrueType subset, right W, CIDSet, CIDToGIDMap and ToUnicode (PDF 1.4, 5.6; PDF/A-1, 6.3).
 * libharu's own way embeds whole tables, loses nested composites and writes a wrong ToUnicode.
 */
#ifndef WRITE_PDF_FONT_H
#define WRITE_PDF_FONT_H

#include "write/font_charset.h"

#include <hpdf.h>

/* An empty font that resources may name already. The document owns it. */
HPDF_Dict pdf_font_begin(HPDF_Doc document);

/*
 * All text is shown: subset the face, seal the set and fill the font in. The set must outlive the
 * document. On failure the font stays empty and the file must not be saved.
 */
enum font_status pdf_font_finish(HPDF_Doc document, HPDF_Dict font, struct font_charset *set,
                                 struct deflater *deflater);

#endif
