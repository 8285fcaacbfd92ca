#include "write/pdf_object.h"

#include "base/memory.h"
#include "base/utf8.h"

#include <stdlib.h>

static void *allocate(HPDF_UINT size_bytes)
{
    return memory_get(size_bytes);
}

/* libharu calls this again for every call after an error, with other codes: keep the first. */
static void keep_first_error(HPDF_STATUS code, HPDF_STATUS detail, void *user_data)
{
    struct pdf_error *error = user_data;
    if (error->code == HPDF_OK)
        *error = (struct pdf_error){code, detail};
}

HPDF_Doc pdf_file_create(struct pdf_error *error)
{
    *error = (struct pdf_error){HPDF_OK, 0};
    HPDF_Doc document = HPDF_NewEx(keep_first_error, allocate, free, 0, error);
    document->pdf_version = HPDF_VER_14;
    return document;
}

/* libharu's own stream in memory copies byte by byte, once more for the file. */
static HPDF_STATUS append_to_file(HPDF_Stream stream, const HPDF_BYTE *bytes, HPDF_UINT length)
{
    buffer_append(stream->attr, bytes, length);
    return HPDF_OK;
}

HPDF_STATUS pdf_file_save(HPDF_Doc document, struct buffer *file)
{
    const struct pdf_error *error = document->error.user_data;
    if (HPDF_GetError(document) != HPDF_OK)
        return error->code != HPDF_OK ? error->code : HPDF_GetError(document);
    size_t before = file->length;
    document->stream = HPDF_CallbackWriter_New(document->mmgr, append_to_file, file);
    HPDF_STATUS status = HPDF_SaveToStream(document);
    if (status != HPDF_OK)
        file->length = before;
    return status;
}

HPDF_Dict pdf_stream(HPDF_Doc document, const struct buffer *plain)
{
    HPDF_Dict dict = HPDF_DictStream_New(document->mmgr, document->xref);
    HPDF_Stream_Write(dict->stream, (const HPDF_BYTE *)plain->data, (HPDF_UINT)plain->length);
    return dict;
}

static HPDF_STATUS write_flate_filter(HPDF_Dict dict, HPDF_Stream stream)
{
    (void)dict;
    return HPDF_Stream_WriteStr(stream, "/Filter /FlateDecode\n");
}

HPDF_Dict pdf_stream_deflated(HPDF_Doc document, const struct buffer *deflated)
{
    HPDF_Dict dict = pdf_stream(document, deflated);
    dict->write_fn = write_flate_filter;
    return dict;
}

void pdf_stream_fill(HPDF_Dict dict, const struct buffer *plain, struct deflater *deflater)
{
    struct buffer deflated = {0};
    deflate_append(deflater, &deflated, plain->data, plain->length);
    HPDF_Stream_Write(dict->stream, (const HPDF_BYTE *)deflated.data, (HPDF_UINT)deflated.length);
    dict->write_fn = write_flate_filter;
    buffer_release(&deflated);
}

void *pdf_text_string(HPDF_Doc document, const char *utf8, size_t length)
{
    struct buffer ascii = {0};
    struct buffer utf16 = {0};
    buffer_be16(&utf16, 0xFEFF);
    const char *end = utf8 + (length < PDF_TEXT_STRING_MAX ? length : PDF_TEXT_STRING_MAX);
    HPDF_BOOL all_ascii = HPDF_TRUE;
    for (const char *at = utf8; at < end;) {
        uint32_t code_point = utf8_next(&at, end);
        if (code_point >= 0x80 || code_point == 0)
            all_ascii = HPDF_FALSE;
        char character = (char)(code_point & 0x7F);
        buffer_append(&ascii, &character, 1);
        utf8_append_utf16(&utf16, code_point == UTF8_ILL_FORMED ? 0xFFFD : code_point);
    }
    buffer_append(&ascii, "", 1);
    void *object = all_ascii ? (void *)HPDF_String_New(document->mmgr, ascii.data, NULL)
                             : (void *)HPDF_Binary_New(document->mmgr, (HPDF_BYTE *)utf16.data,
                                                       (HPDF_UINT)utf16.length);
    buffer_release(&ascii);
    buffer_release(&utf16);
    return object;
}

HPDF_Image pdf_image(HPDF_Doc document, const struct picture *picture, struct deflater *deflater)
{
    HPDF_Dict image = HPDF_DictStream_New(document->mmgr, document->xref);
    image->header.obj_class |= HPDF_OSUBCLASS_XOBJECT;
    if (picture->kind == PICTURE_JPEG) {
        HPDF_Stream_Write(image->stream, (const HPDF_BYTE *)picture->data.data,
                          (HPDF_UINT)picture->data.length);
        image->filter = HPDF_STREAM_FILTER_DCT_DECODE;
    } else {
        pdf_stream_fill(image, &picture->data, deflater);
    }
    HPDF_Dict_AddName(image, "Type", "XObject");
    HPDF_Dict_AddName(image, "Subtype", "Image");
    HPDF_Dict_AddNumber(image, "Width", (HPDF_INT32)picture->width_px);
    HPDF_Dict_AddNumber(image, "Height", (HPDF_INT32)picture->height_px);
    HPDF_Dict_AddName(image, "ColorSpace", picture->components == 1 ? "DeviceGray" : "DeviceRGB");
    HPDF_Dict_AddNumber(image, "BitsPerComponent", 8);
    return image;
}
