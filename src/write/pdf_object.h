/*
 * Small pieces on libharu's object layer, which its headers ship and its library
 * exports: documents, streams, text strings, images.
 *
 * Errors follow libharu's scheme: what goes wrong is kept in the document, later
 * calls do nothing, and pdf_file_save answers with the first error. So only
 * saving needs a check.
 */
#ifndef WRITE_PDF_OBJECT_H
#define WRITE_PDF_OBJECT_H

#include "base/buffer.h"
#include "write/deflate.h"
#include "write/picture.h"

#include <hpdf.h>
#include <hpdf_doc.h>

#if HPDF_VERSION_ID != 20300
#error "gridleak uses inner parts of libharu and was tested with 2.3.0: please install that version"
#endif

/* The first error of a document; code HPDF_OK: none. */
struct pdf_error {
    HPDF_STATUS code;   /* HPDF_... of hpdf_error.h */
    HPDF_STATUS detail; /* meaning depends on code */
};

/*
 * A new document: PDF 1.4, no pages, libharu's own compression off: streams come
 * deflated, zlib at its default level would take twice the time for the same size. Never NULL: when
 * memory runs out the program ends, here and in every later call on the document. *error is set to
 * none, must outlive the document and belongs to it until HPDF_Free.
 */
HPDF_Doc pdf_file_create(struct pdf_error *error);

/*
 * Append the finished document to *file. Save once, then HPDF_Free.
 * HPDF_OK, or the code of the first error; *file is then as it was.
 */
HPDF_STATUS pdf_file_save(HPDF_Doc document, struct buffer *file);

/* An indirect stream object with these bytes as they are. The document owns it. */
HPDF_Dict pdf_stream(HPDF_Doc document, const struct buffer *plain);

/* The same for bytes that are a zlib stream already; the dictionary says FlateDecode. */
HPDF_Dict pdf_stream_deflated(HPDF_Doc document, const struct buffer *deflated);

/* Deflate the bytes into a stream object that is empty yet: a page's contents. */
void pdf_stream_fill(HPDF_Dict dict, const struct buffer *plain, struct deflater *deflater);

/*
 * A PDF text string of length bytes of UTF-8, at most PDF_TEXT_STRING_MAX: ASCII as
 * it is, anything else as UTF-16 in a binary string; ill-formed bytes become U+FFFD.
 * For HPDF_Dict_Add or HPDF_Array_Add, which take it over.
 */
enum { PDF_TEXT_STRING_MAX = 32000 }; /* a PDF string has at most 65,535 bytes, in UTF-16 */
void *pdf_text_string(HPDF_Doc document, const char *utf8, size_t length);

/* An image object with the pixels or the JPEG file of *picture, copied. */
HPDF_Image pdf_image(HPDF_Doc document, const struct picture *picture, struct deflater *deflater);

#endif
