/*
 * What makes a libharu document an archive file: PDF/A-1b (ISO 19005-1:2005, level B).
 *
 * The document must come from pdf_file_create. For a valid file the caller also
 *   - uses embedded fonts only (pdf_font.h),
 *   - uses DeviceRGB and DeviceGray, never DeviceCMYK, and no transparency,
 *   - calls each of pdf_archive_describe, _colour and _identify once.
 *
 * Nothing here reads the clock: the same calls give the same bytes.
 * Errors are kept in the document (pdf_object.h).
 */
#ifndef WRITE_PDF_ARCHIVE_H
#define WRITE_PDF_ARCHIVE_H

#include "base/buffer.h"

#include <hpdf.h>
#include <stdbool.h>

/* A moment in local time with its distance from UTC; month and day count from 1. */
struct pdf_time {
    int year, month, day, hour, minute, second;
    int utc_offset_min; /* east positive; 60 for Central European Time */
};

/*
 * UTF-8; NULL leaves a field out. Line ends and other controls become spaces, a text
 * beyond PDF_TEXT_STRING_MAX bytes is cut.
 */
struct pdf_info {
    const char *title;
    const char *author;
    const char *subject;
    const char *keywords;
    const char *creator;  /* the program that composed the document */
    const char *producer; /* the program that wrote the PDF */
    struct pdf_time created;
    bool has_created; /* false: no date at all */
};

/* An ICC profile, read and deflated once, for any number of documents and threads. */
struct colour_profile {
    struct buffer deflated;
};

/*
 * Write the document information twice, as Info and as XMP metadata, equal as PDF/A
 * asks. A date outside the calendar is HPDF_INVALID_DATE_TIME.
 */
void pdf_archive_describe(HPDF_Doc document, const struct pdf_info *info);

/*
 * Read an RGB profile of ICC version 2 (PDF/A-1 knows no later one). false when the
 * file cannot be read or is another kind of profile; *profile is then empty.
 * Free with buffer_release(&profile->deflated).
 */
bool colour_profile_read(const char *path, struct colour_profile *profile);

/* Declare that the document's RGB is sRGB: the output intent with this profile. */
void pdf_archive_colour(HPDF_Doc document, const struct colour_profile *srgb);

/*
 * The file identifier, from a hash of what the document was made from. The first 16
 * bytes are used; length is at least that.
 */
void pdf_archive_identify(HPDF_Doc document, const unsigned char *hash, size_t length);

/* A place on a page; top_pt counts upwards from the page's lower edge. */
struct pdf_target {
    HPDF_Page page;
    HPDF_REAL top_pt;
};

/*
 * An entry of the outline below parent (NULL: at the top level), in order of calls.
 * title is UTF-8. The document owns the entry.
 */
HPDF_Outline pdf_outline(HPDF_Doc document, HPDF_Outline parent, const char *title,
                         struct pdf_target target);

/*
 * A link without border from a rectangle of a page to a URI. What may not stand in a URI (spaces,
 * letters beyond ASCII) is percent-encoded. Which schemes are fit to link to is the caller's
 * decision.
 */
void pdf_link_to_uri(HPDF_Doc document, HPDF_Page page, HPDF_Rect area_pt, const char *uri);

#endif
