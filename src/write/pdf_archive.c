#include "write/pdf_archive.h"

#include "base/file.h"
#include "base/utf8.h"
#include "write/deflate.h"
#include "write/pdf_object.h"

#include <hpdf_annotation.h>
#include <stdio.h>
#include <string.h>

enum { COMPRESSION_LEVEL = 9, IDENTIFIER_LENGTH = 16, PROFILE_MAX_BYTES = 1 << 20 };

/*
 * UTF-8 fit for XML and for an Info string alike, so that both say the same: controls
 * become spaces, ill-formed bytes and noncharacters U+FFFD, what is too long is cut.
 */
static void append_clean(struct buffer *clean, const char *utf8)
{
    const char *end = utf8 + strlen(utf8);
    while (utf8 < end && clean->length + 4 <= PDF_TEXT_STRING_MAX) {
        const char *start = utf8;
        uint32_t code_point = utf8_next(&utf8, end);
        if (code_point < 0x20 || (code_point >= 0x7F && code_point < 0xA0))
            buffer_text(clean, " ");
        else if (code_point == UTF8_ILL_FORMED || (code_point & 0xFFFE) == 0xFFFE)
            buffer_text(clean, "\xEF\xBF\xBD");
        else
            buffer_append(clean, start, (size_t)(utf8 - start));
    }
}

static void append_xml(struct buffer *xml, const char *text, size_t length)
{
    for (size_t i = 0; i < length; i++) {
        switch (text[i]) {
        case '<':
            buffer_text(xml, "&lt;");
            break;
        case '>':
            buffer_text(xml, "&gt;");
            break;
        case '&':
            buffer_text(xml, "&amp;");
            break;
        default:
            buffer_append(xml, &text[i], 1);
        }
    }
}

/* One field in both places. before and after are the XMP elements around the text. */
struct field {
    const char *info_key;
    const char *text;
    const char *before;
    const char *after;
};

static void write_field(HPDF_Doc document, struct buffer *xmp, const struct field *field)
{
    if (!field->text)
        return;
    struct buffer clean = {0};
    append_clean(&clean, field->text);
    HPDF_Dict_Add(document->info, field->info_key,
                  pdf_text_string(document, clean.data, clean.length));
    buffer_text(xmp, field->before);
    append_xml(xmp, clean.data, clean.length);
    buffer_text(xmp, field->after);
    buffer_release(&clean);
}

static bool time_is_valid(const struct pdf_time *time)
{
    static const int days[] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
    if (time->year < 0 || time->year > 9999 || time->month < 1 || time->month > 12)
        return false;
    bool leap = (time->year % 4 == 0 && time->year % 100 != 0) || time->year % 400 == 0;
    int last = days[time->month - 1] + (leap && time->month == 2);
    return time->day >= 1 && time->day <= last && time->hour >= 0 && time->hour <= 23 &&
           time->minute >= 0 && time->minute <= 59 && time->second >= 0 && time->second <= 59 &&
           time->utc_offset_min > -24 * 60 && time->utc_offset_min < 24 * 60;
}

static void write_time(HPDF_Doc document, struct buffer *xmp, const struct pdf_time *time)
{
    if (!time_is_valid(time)) {
        HPDF_RaiseError(&document->error, HPDF_INVALID_DATE_TIME, 0);
        return;
    }
    char text[64];
    char sign = time->utc_offset_min < 0 ? '-' : '+';
    int offset = time->utc_offset_min < 0 ? -time->utc_offset_min : time->utc_offset_min;
    snprintf(text, sizeof text, "D:%04d%02d%02d%02d%02d%02d%c%02d'%02d'", time->year, time->month,
             time->day, time->hour, time->minute, time->second, sign, offset / 60, offset % 60);
    HPDF_Dict_Add(document->info, "CreationDate", HPDF_String_New(document->mmgr, text, NULL));
    snprintf(text, sizeof text, "%04d-%02d-%02dT%02d:%02d:%02d%c%02d:%02d", time->year, time->month,
             time->day, time->hour, time->minute, time->second, sign, offset / 60, offset % 60);
    buffer_text(xmp, "<xmp:CreateDate>");
    buffer_text(xmp, text);
    buffer_text(xmp, "</xmp:CreateDate>\n");
}

static const char xmp_head[] =
    "<?xpacket begin=\"\xEF\xBB\xBF\" id=\"W5M0MpCehiHzreSzNTczkc9d\"?>\n"
    "<x:xmpmeta xmlns:x=\"adobe:ns:meta/\">\n"
    "<rdf:RDF xmlns:rdf=\"http://www.w3.org/1999/02/22-rdf-syntax-ns#\">\n"
    "<rdf:Description rdf:about=\"\"\n"
    " xmlns:dc=\"http://purl.org/dc/elements/1.1/\"\n"
    " xmlns:xmp=\"http://ns.adobe.com/xap/1.0/\"\n"
    " xmlns:pdf=\"http://ns.adobe.com/pdf/1.3/\"\n"
    " xmlns:pdfaid=\"http://www.aiim.org/pdfa/ns/id/\">\n"
    "<pdfaid:part>1</pdfaid:part>\n<pdfaid:conformance>B</pdfaid:conformance>\n"
    "<dc:format>application/pdf</dc:format>\n";

static const char xmp_tail[] =
    "</rdf:Description>\n</rdf:RDF>\n</x:xmpmeta>\n<?xpacket end=\"w\"?>\n";

void pdf_archive_describe(HPDF_Doc document, const struct pdf_info *info)
{
    const struct field fields[] = {
        {"Title", info->title, "<dc:title><rdf:Alt><rdf:li xml:lang=\"x-default\">",
         "</rdf:li></rdf:Alt></dc:title>\n"},
        {"Author", info->author, "<dc:creator><rdf:Seq><rdf:li>",
         "</rdf:li></rdf:Seq></dc:creator>\n"},
        {"Subject", info->subject, "<dc:description><rdf:Alt><rdf:li xml:lang=\"x-default\">",
         "</rdf:li></rdf:Alt></dc:description>\n"},
        {"Keywords", info->keywords, "<pdf:Keywords>", "</pdf:Keywords>\n"},
        {"Creator", info->creator, "<xmp:CreatorTool>", "</xmp:CreatorTool>\n"},
        {"Producer", info->producer, "<pdf:Producer>", "</pdf:Producer>\n"},
    };
    struct buffer xmp = {0};
    buffer_text(&xmp, xmp_head);
    if (!info->producer)
        HPDF_Dict_RemoveElement(document->info, "Producer"); /* libharu's own */
    for (size_t i = 0; i < sizeof fields / sizeof fields[0]; i++)
        write_field(document, &xmp, &fields[i]);
    if (info->has_created)
        write_time(document, &xmp, &info->created);
    buffer_text(&xmp, xmp_tail);

    HPDF_Dict metadata = pdf_stream(document, &xmp);
    HPDF_Dict_AddName(metadata, "Type", "Metadata");
    HPDF_Dict_AddName(metadata, "Subtype", "XML");
    HPDF_Dict_Add(document->catalog, "Metadata", metadata);
    buffer_release(&xmp);
}

bool colour_profile_read(const char *path, struct colour_profile *profile)
{
    *profile = (struct colour_profile){{0}};
    struct buffer plain = {0};
    bool good = file_read(path, PROFILE_MAX_BYTES, &plain) == FILE_OK;
    /* ICC.1 header: byte 8 major version, 16-19 colour space, 36-39 signature */
    good = good && plain.length >= 128 && plain.data[8] == 2 &&
           memcmp(plain.data + 16, "RGB ", 4) == 0 && memcmp(plain.data + 36, "acsp", 4) == 0;
    if (good) {
        struct deflater deflater = deflater_open(COMPRESSION_LEVEL);
        deflate_append(&deflater, &profile->deflated, plain.data, plain.length);
        deflater_close(&deflater);
    }
    buffer_release(&plain);
    return good;
}

void pdf_archive_colour(HPDF_Doc document, const struct colour_profile *srgb)
{
    static const char name[] = "sRGB IEC61966-2.1";
    HPDF_MMgr mmgr = document->mmgr;
    HPDF_Dict profile = pdf_stream_deflated(document, &srgb->deflated);
    HPDF_Dict_AddNumber(profile, "N", 3);
    HPDF_Dict intent = HPDF_Dict_New(mmgr);
    HPDF_Dict_AddName(intent, "Type", "OutputIntent");
    HPDF_Dict_AddName(intent, "S", "GTS_PDFA1");
    HPDF_Dict_Add(intent, "OutputConditionIdentifier", HPDF_String_New(mmgr, name, NULL));
    HPDF_Dict_Add(intent, "RegistryName", HPDF_String_New(mmgr, "http://www.color.org", NULL));
    HPDF_Dict_Add(intent, "Info", HPDF_String_New(mmgr, name, NULL));
    HPDF_Dict_Add(intent, "DestOutputProfile", profile);
    HPDF_Array intents = HPDF_Array_New(mmgr);
    HPDF_Dict_Add(document->catalog, "OutputIntents", intents);
    HPDF_Array_Add(intents, intent);
}

void pdf_archive_identify(HPDF_Doc document, const unsigned char *hash, size_t length)
{
    if (length < IDENTIFIER_LENGTH) {
        HPDF_RaiseError(&document->error, HPDF_INVALID_PARAMETER, 0);
        return;
    }
    HPDF_BYTE identifier[IDENTIFIER_LENGTH];
    memcpy(identifier, hash, sizeof identifier);
    /* the first names the document for all its revisions, the second this one: we have one */
    HPDF_Array pair = HPDF_Array_New(document->mmgr);
    HPDF_Array_Add(pair, HPDF_Binary_New(document->mmgr, identifier, sizeof identifier));
    HPDF_Array_Add(pair, HPDF_Binary_New(document->mmgr, identifier, sizeof identifier));
    HPDF_Dict_Add(document->trailer, "ID", pair);
}

/* An explicit destination written in place: Preflight refuses libharu's indirect arrays. */
static HPDF_Array destination(HPDF_Doc document, struct pdf_target target)
{
    HPDF_Array array = HPDF_Array_New(document->mmgr);
    HPDF_Array_Add(array, target.page);
    HPDF_Array_AddName(array, "XYZ");
    HPDF_Array_AddNumber(array, 0);
    HPDF_Array_AddReal(array, target.top_pt);
    HPDF_Array_AddNumber(array, 0); /* keep the reader's zoom */
    return array;
}

HPDF_Outline pdf_outline(HPDF_Doc document, HPDF_Outline parent, const char *title,
                         struct pdf_target target)
{
    HPDF_Outline entry = HPDF_CreateOutline(document, parent, "", NULL);
    if (!entry)
        return NULL;
    struct buffer clean = {0};
    append_clean(&clean, title);
    HPDF_Dict_Add(entry, "Title", pdf_text_string(document, clean.data, clean.length));
    HPDF_Dict_Add(entry, "Dest", destination(document, target));
    HPDF_Dict_RemoveElement(entry, "Type"); /* libharu says Outlines, which the root is */
    buffer_release(&clean);
    return entry;
}

static HPDF_Dict add_link(HPDF_Doc document, HPDF_Page page, HPDF_Rect area_pt)
{
    HPDF_Annotation link =
        HPDF_Annotation_New(document->mmgr, document->xref, HPDF_ANNOT_LINK, area_pt);
    HPDF_Array border = HPDF_Array_New(document->mmgr);
    HPDF_Dict_Add(link, "Border", border);
    for (int i = 0; i < 3; i++)
        HPDF_Array_AddNumber(border, 0);
    HPDF_Dict_AddNumber(link, "F", 4); /* print; PDF/A-1 wants it set */
    HPDF_Array annotations = HPDF_Dict_GetItem(page, "Annots", HPDF_OCLASS_ARRAY);
    if (!annotations) {
        annotations = HPDF_Array_New(document->mmgr);
        HPDF_Dict_Add(page, "Annots", annotations);
    }
    HPDF_Array_Add(annotations, link);
    return link;
}

static void append_uri(struct buffer *encoded, const char *uri)
{
    for (; *uri; uri++) {
        unsigned char byte = (unsigned char)*uri;
        if (byte > 0x20 && byte < 0x7F && !strchr("\"<>\\^`{|}", byte)) {
            buffer_append(encoded, &byte, 1);
        } else {
            buffer_text(encoded, "%");
            buffer_hex(encoded, byte, 2);
        }
    }
    buffer_append(encoded, "", 1);
}

void pdf_link_to_uri(HPDF_Doc document, HPDF_Page page, HPDF_Rect area_pt, const char *uri)
{
    struct buffer encoded = {0};
    append_uri(&encoded, uri);
    HPDF_Dict action = HPDF_Dict_New(document->mmgr);
    HPDF_Dict_AddName(action, "Type", "Action");
    HPDF_Dict_AddName(action, "S", "URI");
    HPDF_Dict_Add(action, "URI", HPDF_String_New(document->mmgr, encoded.data, NULL));
    HPDF_Dict_Add(add_link(document, page, area_pt), "A", action);
    buffer_release(&encoded);
}
