/* pdf_write: a document laid out, drawn and made an archive file. */
#include "write/pdf_layout.h"
#include "write/pdf_object.h"
#include "write/pdf_page.h"

#include <stdio.h>
#include <string.h>

static const struct position nowhere = {0, 0};

static bool is_figure(const struct exhibit *exhibit)
{
    return exhibit && (exhibit->kind == EXHIBIT_PLOT || exhibit->kind == EXHIBIT_PLATE ||
                       exhibit->kind == EXHIBIT_TABLE || exhibit->kind == EXHIBIT_FINGERPRINT);
}

/* A short paragraph is not parted from the figure or table that it introduces. */
static void keep_introduction(struct composer *composer, cmark_node *node, size_t first)
{
    enum { SHORT = 5 };
    cmark_node *next = cmark_node_next(node);
    struct flow *flow = &composer->flow;
    if (cmark_node_get_type(node) != CMARK_NODE_PARAGRAPH || !next ||
        !is_figure(document_exhibit(next)) || flow->count - first > SHORT)
        return;
    for (size_t i = first; i < flow->count; i++)
        flow->strips[i]->keep_next = true;
}

cmark_node *compose_node(struct composer *composer, cmark_node *node)
{
    cmark_node *next = cmark_node_next(node);
    const struct exhibit *exhibit = document_exhibit(node);
    size_t first = composer->flow.count;
    if (cmark_node_get_type(node) == CMARK_NODE_HEADING) {
        composer->body = type_body;
        composer->measure = composer->flow.page->measure;
    }
    if (exhibit)
        compose_exhibit(composer, exhibit, &next);
    else
        compose_prose(composer, node);
    keep_introduction(composer, node, first);
    return next;
}

static void compose_document(struct composer *composer)
{
    for (cmark_node *node = cmark_node_first_child(composer->document->root); node;)
        node = compose_node(composer, node);
}

static int hex_digit(char digit)
{
    if (digit >= '0' && digit <= '9')
        return digit - '0';
    digit = (char)(digit | 0x20);
    return digit >= 'a' && digit <= 'f' ? digit - 'a' + 10 : -1;
}

/* 16 bytes from the fingerprint; false when it has not 32 digits. */
static bool bytes_of_hex(const char *hex, unsigned char bytes[16])
{
    size_t digits = 0;
    for (; hex && *hex && digits < 32; hex++) {
        int value = hex_digit(*hex);
        if (value < 0)
            continue;
        bytes[digits / 2] = (unsigned char)(digits % 2 ? bytes[digits / 2] << 4 | value : value);
        digits++;
    }
    return digits == 32;
}

static void identify(HPDF_Doc file, const struct page_writer *writer)
{
    unsigned char bytes[16];
    if (!bytes_of_hex(writer->document->fingerprint, bytes))
        for (size_t i = 0; i < sizeof bytes; i++)
            bytes[i] = (unsigned char)(writer->hash[i / 8] >> 8 * (i % 8));
    pdf_archive_identify(file, bytes, sizeof bytes);
}

static void describe(HPDF_Doc file, const struct document *document)
{
    struct pdf_info info = {.title = document->title,
                            .author = document->author,
                            .subject = document->subject,
                            .creator = "gridleak " GRIDLEAK_VERSION,
                            .producer = "libharu 2.3.0"};
    info.has_created = document->date.set;
    info.created = (struct pdf_time){
        .year = document->date.year, .month = document->date.month, .day = document->date.day};
    pdf_archive_describe(file, &info);
    if (document->language && *document->language)
        HPDF_Dict_Add(file->catalog, "Lang",
                      pdf_text_string(file, document->language, strlen(document->language)));
}

static double hex_pair(const char *text)
{
    int high = hex_digit(text[0]), low = high < 0 ? -1 : hex_digit(text[1]);
    return low < 0 ? 0 : (high * 16 + low) / 255.0;
}

/* "#1b4b6b"; anything else is black. */
static struct rgb accent_of(const char *text)
{
    if (!text || text[0] != '#' || strlen(text) != 7)
        return (struct rgb){0, 0, 0};
    return (struct rgb){hex_pair(text + 1), hex_pair(text + 3), hex_pair(text + 5)};
}

/* One warning for each sign that no face has, one for all bytes that are no UTF-8. */
static void report_missing(const struct pdf_fonts *fonts, struct diagnostics *diagnostics)
{
    for (size_t i = 0; i < fonts->missing_count; i++)
        diagnostic_add(diagnostics, NULL, nowhere, DIAGNOSTIC_SIGN_MISSING,
                       "write it in other signs",
                       "no font has the sign U+%04X; the PDF shows U+FFFD in its place",
                       (unsigned)fonts->missing[i]);
    if (fonts->ill_formed > 0)
        diagnostic_add(diagnostics, NULL, nowhere, DIAGNOSTIC_SIGN_MISSING, NULL,
                       "%zu bytes are not UTF-8; the PDF shows U+FFFD in their place",
                       fonts->ill_formed);
}

/* What one PDF is made with, from opening to freeing. */
struct making {
    const struct document *document;
    const struct pdf_resources *resources;
    struct deflater deflater;
    struct arena arena;
    struct pdf_error error;
    struct pdf_fonts fonts;
    HPDF_Doc file;
};

static void draw(struct making *making)
{
    struct page_geometry geometry = page_geometry_of(making->document);
    struct composer composer = {.document = making->document,
                                .body = type_body,
                                .measure = geometry.measure,
                                .marks_units = 8.6};
    composer.flow =
        (struct flow){.arena = &making->arena, .resources = making->resources, .page = &geometry};
    compose_document(&composer);
    struct page_plan plan = flow_paginate(&composer.flow);
    struct page_writer writer = {.file = making->file,
                                 .fonts = &making->fonts,
                                 .deflater = &making->deflater,
                                 .document = making->document,
                                 .geometry = &geometry,
                                 .accent = accent_of(making->document->accent),
                                 .arena = &making->arena,
                                 .hash = {0xCBF29CE484222325u, 0x84222325CBF29CE4u}};
    pdf_pages_draw(&writer, &plan);
    enum font_status status = pdf_fonts_finish(&making->fonts, writer.resources, &making->deflater);
    if (status != FONT_OK)
        HPDF_RaiseError(&making->file->error, HPDF_INVALID_FONTDEF_DATA, (HPDF_STATUS)status);
    describe(making->file, making->document);
    pdf_archive_colour(making->file, &making->resources->srgb);
    identify(making->file, &writer);
}

bool pdf_write(const struct document *document, const struct pdf_resources *resources, int level,
               struct buffer *out, struct diagnostics *diagnostics)
{
    struct making making = {
        .document = document, .resources = resources, .deflater = deflater_open(level)};
    making.file = pdf_file_create(&making.error);
    making.fonts = (struct pdf_fonts){.document = making.file, .resources = resources};
    draw(&making);
    HPDF_STATUS status = pdf_file_save(making.file, out);
    if (status == HPDF_OK)
        report_missing(&making.fonts, diagnostics);
    else
        diagnostic_add(diagnostics, NULL, nowhere, DIAGNOSTIC_PDF_FAILED, NULL,
                       "cannot make a PDF of '%s': libharu error 0x%04lX, detail %lu",
                       document->title ? document->title : "", (unsigned long)status,
                       (unsigned long)making.error.detail);
    HPDF_Free(making.file);
    pdf_fonts_release(&making.fonts);
    deflater_close(&making.deflater);
    arena_release(&making.arena);
    return status == HPDF_OK;
}
