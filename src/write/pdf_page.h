/*
 * Pages: their measures, and drawing what was planned on them, with the running head, the outline
 * and the links.
 */
#ifndef WRITE_PDF_PAGE_H
#define WRITE_PDF_PAGE_H

#include "report/document.h"
#include "write/pdf_block.h"

/* Measures for a document's kind and page size. */
struct page_geometry page_geometry_of(const struct document *document);

struct page_writer {
    HPDF_Doc file;
    struct pdf_fonts *fonts;
    struct deflater *deflater;
    const struct document *document;
    const struct page_geometry *geometry;
    struct rgb accent;
    struct arena *arena;
    HPDF_Dict resources; /* shared by all pages */
    HPDF_Dict images;    /* XObjects by name; NULL until needed */
    const struct picture **pictures;
    size_t picture_count, picture_capacity;
    uint64_t hash[2]; /* of all contents, where the document has no fingerprint */
    HPDF_Outline section;
};

/* Draw the planned pages into the file. */
void pdf_pages_draw(struct page_writer *writer, const struct page_plan *plan);

#endif
