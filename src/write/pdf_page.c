#include "write/pdf_page.h"

#include "base/utf8.h"
#include "write/pdf_drawing.h"
#include "write/pdf_object.h"

#include <hpdf_pages.h>
#include <stdio.h>
#include <string.h>

static const double hairline_pt = 0.35;

struct page_geometry page_geometry_of(const struct document *document)
{
    bool letter = document->page == PAGE_LETTER;
    struct page_geometry page = {
        .width = mm(letter ? 215.9 : 210), .height = mm(letter ? 279.4 : 297), .measure = mm(122)};
    if (document->kind == DOCUMENT_SHEET) {
        page.left = mm(18);
        page.text_width = page.width - mm(18 + 12);
        page.top = mm(17);
        page.bottom = page.height - mm(12);
        page.head_baseline = mm(11);
    } else {
        page.left = mm(25);
        page.text_width = mm(letter ? 174 : 168);
        page.top = mm(21);
        page.bottom = mm(letter ? 262 : 280);
        page.head_baseline = mm(15);
    }
    return page;
}

/* ---- images */

/* FNV-1a, twice with different starts: an identifier, not a seal. */
static void hash_contents(struct page_writer *writer, const struct buffer *contents)
{
    if (writer->document->fingerprint)
        return;
    for (size_t i = 0; i < contents->length; i++) {
        unsigned char byte = (unsigned char)contents->data[i];
        writer->hash[0] = (writer->hash[0] ^ byte) * 0x100000001B3u;
        writer->hash[1] = (writer->hash[1] ^ writer->hash[0] >> 56) * 0x100000001B3u;
    }
}

static unsigned image_number(struct page_writer *writer, const struct picture *picture)
{
    for (size_t i = 0; i < writer->picture_count; i++)
        if (writer->pictures[i] == picture)
            return (unsigned)i;
    writer->pictures = arena_grow(writer->arena, writer->pictures, writer->picture_count,
                                  &writer->picture_capacity, sizeof *writer->pictures);
    writer->pictures[writer->picture_count] = picture;
    if (!writer->images) {
        writer->images = HPDF_Dict_New(writer->file->mmgr);
        HPDF_Dict_Add(writer->resources, "XObject", writer->images);
    }
    hash_contents(writer, &picture->data);
    char name[24];
    snprintf(name, sizeof name, "I%zu", writer->picture_count);
    HPDF_Dict_Add(writer->images, name, pdf_image(writer->file, picture, writer->deflater));
    return (unsigned)writer->picture_count++;
}

/* ---- one page */

struct page {
    struct page_writer *writer;
    struct pdf_canvas canvas;
    HPDF_Page page;
};

static void add_link(struct page *page, const struct item *item, struct point at)
{
    HPDF_REAL top = (HPDF_REAL)(page->writer->geometry->height - at.y);
    HPDF_Rect area = {(HPDF_REAL)at.x, top - (HPDF_REAL)item->link.height,
                      (HPDF_REAL)(at.x + item->link.width), top};
    pdf_link_to_uri(page->writer->file, page->page, area, item->link.uri);
}

static void add_outline(struct page *page, const struct item *item, double y)
{
    struct page_writer *writer = page->writer;
    struct pdf_target target = {page->page, (HPDF_REAL)(writer->geometry->height - y + 4)};
    bool below = item->outline.level > 2 && writer->section;
    HPDF_Outline entry =
        pdf_outline(writer->file, below ? writer->section : NULL, item->outline.text, target);
    if (!below)
        writer->section = entry;
}

static void draw_item(struct page *page, const struct item *item, struct point origin)
{
    struct point at = {origin.x + item->at.x, origin.y + item->at.y};
    struct pdf_canvas *canvas = &page->canvas;
    switch (item->kind) {
    case ITEM_TEXT:
        if (item->text.copied)
            pdf_canvas_actual_text(canvas, item->text.copied);
        pdf_canvas_text(canvas, at, &item->text.style, item->text.text, item->text.length);
        if (item->text.copied)
            pdf_canvas_actual_text_end(canvas);
        break;
    case ITEM_RULE:
        pdf_canvas_line(canvas, at,
                        (struct point){origin.x + item->rule.to.x, origin.y + item->rule.to.y},
                        item->rule.line_pt, item->rule.ink);
        break;
    case ITEM_IMAGE:
        pdf_canvas_image(canvas, image_number(page->writer, item->image.picture), at,
                         item->image.width, item->image.height);
        break;
    case ITEM_DRAWING:
        pdf_drawing(canvas, item->drawing.drawing, at, item->drawing.scale);
        break;
    case ITEM_LINK:
        add_link(page, item, at);
        break;
    case ITEM_OUTLINE:
        add_outline(page, item, at.y);
        break;
    }
}

static void draw_hairline(struct page *page, double y)
{
    const struct page_geometry *geometry = page->writer->geometry;
    pdf_canvas_line(&page->canvas, (struct point){geometry->left, y},
                    (struct point){geometry->left + geometry->text_width, y}, hairline_pt,
                    INK_HAIR);
}

static void draw_strip(struct page *page, const struct placed *placed)
{
    const struct page_geometry *geometry = page->writer->geometry;
    const struct strip *strip = placed->strip;
    struct point origin = {geometry->left, placed->y};
    if (strip->top_rule && !placed->begins)
        draw_hairline(page, placed->y);
    if (placed->ends)
        draw_hairline(page, placed->y + strip->height);
    for (size_t i = 0; i < strip->item_count; i++)
        draw_item(page, &strip->items[i], origin);
}

static double width_of(const struct page *page, const struct text_style *style, const char *text,
                       size_t length)
{
    return (double)pdf_text_width(page->writer->fonts->resources, style->face, text, length) *
           style->size_pt / 1000;
}

/* How much of text fits this width: all of it, or less with room for an ellipsis. */
static size_t fitting_length(const struct page *page, const struct text_style *style,
                             const char *text, double width)
{
    const char *end = text + strlen(text), *fitting = text;
    double used = 0;
    for (const char *at = text; at < end;) {
        uint32_t code_point = utf8_next(&at, end);
        used += pdf_character_width(page->writer->fonts->resources, style->face, code_point) *
                style->size_pt / 1000;
        if (used <= width - style->size_pt)
            fitting = at;
        if (used > width)
            return (size_t)(fitting - text);
    }
    return (size_t)(end - text);
}

static void draw_running_head(struct page *page, unsigned number, unsigned count)
{
    static const struct text_style style = {FACE_REGULAR, 7.5, 0, INK_SOFT};
    const struct page_geometry *geometry = page->writer->geometry;
    const struct document *document = page->writer->document;
    const char *label = arena_print(page->writer->arena, "%s %u %s %u",
                                    document->page_word ? document->page_word : "", number,
                                    document->page_word_of ? document->page_word_of : "", count);
    double label_width = width_of(page, &style, label, strlen(label));
    struct point at = {geometry->left, geometry->head_baseline};
    const char *head = document->running_head ? document->running_head : "";
    double room = geometry->text_width - label_width - mm(5);
    size_t length = fitting_length(page, &style, head, room);
    if (head[length]) {
        head = arena_print(page->writer->arena, "%.*s…", (int)length, head);
        length = strlen(head);
    }
    pdf_canvas_text(&page->canvas, at, &style, head, length);
    at.x = geometry->left + geometry->text_width - label_width;
    pdf_canvas_text(&page->canvas, at, &style, label, strlen(label));
}

static void finish_page(struct page *page)
{
    pdf_canvas_end(&page->canvas);
    hash_contents(page->writer, &page->canvas.contents);
    HPDF_PageAttr attributes = page->page->attr;
    pdf_stream_fill(attributes->contents, &page->canvas.contents, page->writer->deflater);
    pdf_canvas_release(&page->canvas);
}

static struct page begin_page(struct page_writer *writer)
{
    struct page page = {.writer = writer, .page = HPDF_AddPage(writer->file)};
    if (!page.page)
        return page;
    HPDF_Page_SetWidth(page.page, (HPDF_REAL)writer->geometry->width);
    HPDF_Page_SetHeight(page.page, (HPDF_REAL)writer->geometry->height);
    HPDF_Dict_Add(page.page, "Resources", writer->resources);
    page.canvas = pdf_canvas_begin(writer->fonts, writer->geometry->height, writer->accent);
    return page;
}

void pdf_pages_draw(struct page_writer *writer, const struct page_plan *plan)
{
    writer->resources = HPDF_Dict_New(writer->file->mmgr);
    HPDF_Xref_Add(writer->file->xref, writer->resources);
    size_t next = 0;
    for (unsigned number = 0; number < plan->page_count; number++) {
        struct page page = begin_page(writer);
        if (!page.page)
            return; /* the library failed; saving says so */
        draw_running_head(&page, number + 1, plan->page_count);
        for (; next < plan->count && plan->items[next].page == number; next++)
            draw_strip(&page, &plan->items[next]);
        finish_page(&page);
    }
}
