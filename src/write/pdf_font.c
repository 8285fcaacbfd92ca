#include "write/pdf_font.h"

#include "write/pdf_object.h"

#include <math.h>

HPDF_Dict pdf_font_begin(HPDF_Doc document)
{
    HPDF_Dict font = HPDF_Dict_New(document->mmgr);
    HPDF_Xref_Add(document->xref, font);
    HPDF_Dict_AddName(font, "Type", "Font");
    HPDF_Dict_AddName(font, "Subtype", "Type0");
    HPDF_Dict_AddName(font, "Encoding", "Identity-H");
    return font;
}

static HPDF_Dict create_descriptor(HPDF_Doc document, const struct font_charset *set)
{
    const struct font_streams *streams = font_charset_streams(set);
    const struct font_metrics *metrics = font_face_metrics(font_charset_face(set));
    HPDF_Box box = {(HPDF_REAL)metrics->left, (HPDF_REAL)metrics->bottom, (HPDF_REAL)metrics->right,
                    (HPDF_REAL)metrics->top};
    /* 1 fixed pitch, 4 symbolic (CIDs follow no standard character set), 64 italic */
    int flags = 4 | (metrics->fixed_pitch ? 1 : 0) | (metrics->italic_angle_deg != 0 ? 64 : 0);

    HPDF_Dict program = pdf_stream_deflated(document, &streams->program);
    HPDF_Dict_AddNumber(program, "Length1", (HPDF_INT32)streams->program_length);

    HPDF_Dict descriptor = HPDF_Dict_New(document->mmgr);
    HPDF_Xref_Add(document->xref, descriptor);
    HPDF_Dict_AddName(descriptor, "Type", "FontDescriptor");
    HPDF_Dict_AddName(descriptor, "FontName", streams->name);
    HPDF_Dict_AddNumber(descriptor, "Flags", flags);
    HPDF_Dict_Add(descriptor, "FontBBox", HPDF_Box_Array_New(document->mmgr, box));
    HPDF_Dict_AddNumber(descriptor, "ItalicAngle", (HPDF_INT32)lround(metrics->italic_angle_deg));
    HPDF_Dict_AddNumber(descriptor, "Ascent", metrics->ascent);
    HPDF_Dict_AddNumber(descriptor, "Descent", metrics->descent);
    HPDF_Dict_AddNumber(descriptor, "CapHeight", metrics->cap_height);
    HPDF_Dict_AddNumber(descriptor, "XHeight", metrics->x_height);
    HPDF_Dict_AddNumber(descriptor, "StemV", metrics->stem_v);
    HPDF_Dict_Add(descriptor, "FontFile2", program);
    HPDF_Dict_Add(descriptor, "CIDSet", pdf_stream_deflated(document, &streams->cid_set));
    return descriptor;
}

/* W as ready text: an object for each number would cost more than all the rest of the font. */
static HPDF_STATUS write_widths(HPDF_Dict descendant, HPDF_Stream stream)
{
    const struct font_charset *set = descendant->attr;
    const struct buffer *widths = &font_charset_streams(set)->widths;
    HPDF_Stream_WriteStr(stream, "/W ");
    HPDF_Stream_Write(stream, (const HPDF_BYTE *)widths->data, (HPDF_UINT)widths->length);
    return HPDF_Stream_WriteChar(stream, '\n');
}

static HPDF_Dict create_descendant(HPDF_Doc document, struct font_charset *set)
{
    const struct font_streams *streams = font_charset_streams(set);
    HPDF_MMgr mmgr = document->mmgr;
    HPDF_Dict descendant = HPDF_Dict_New(mmgr);
    HPDF_Xref_Add(document->xref, descendant);
    descendant->attr = set;
    descendant->write_fn = write_widths;
    HPDF_Dict_AddName(descendant, "Type", "Font");
    HPDF_Dict_AddName(descendant, "Subtype", "CIDFontType2");
    HPDF_Dict_AddName(descendant, "BaseFont", streams->name);
    HPDF_Dict system = HPDF_Dict_New(mmgr);
    HPDF_Dict_Add(descendant, "CIDSystemInfo", system);
    HPDF_Dict_Add(system, "Registry", HPDF_String_New(mmgr, "Adobe", NULL));
    HPDF_Dict_Add(system, "Ordering", HPDF_String_New(mmgr, "Identity", NULL));
    HPDF_Dict_AddNumber(system, "Supplement", 0);
    HPDF_Dict_Add(descendant, "FontDescriptor", create_descriptor(document, set));
    HPDF_Dict_Add(descendant, "CIDToGIDMap", pdf_stream_deflated(document, &streams->glyph_map));
    return descendant;
}

enum font_status pdf_font_finish(HPDF_Doc document, HPDF_Dict font, struct font_charset *set,
                                 struct deflater *deflater)
{
    enum font_status status = font_charset_seal(set, deflater);
    if (status != FONT_OK)
        return status;
    const struct font_streams *streams = font_charset_streams(set);
    HPDF_Dict_AddName(font, "BaseFont", streams->name);
    HPDF_Dict_Add(font, "ToUnicode", pdf_stream_deflated(document, &streams->to_unicode));
    HPDF_Array descendants = HPDF_Array_New(document->mmgr);
    HPDF_Dict_Add(font, "DescendantFonts", descendants);
    HPDF_Array_Add(descendants, create_descendant(document, set));
    return FONT_OK;
}
