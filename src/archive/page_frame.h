/*
 * Pages over all jobs in the making: one template each, filled from values, with exhibits and the
 * style put in by name. For src/archive/page*.c only.
 */
#ifndef ARCHIVE_PAGE_FRAME_H
#define ARCHIVE_PAGE_FRAME_H

#include "archive/archive.h"
#include "archive/columns.h"
#include "base/mustache.h"
#include "report/exhibit.h"

struct page_frame {
    const struct archive *archive;
    const char *output;
    const struct columns *columns;
    struct arena *arena; /* of all pages */
    struct phrasing say;
    struct diagnostics *diagnostics; /* mistakes of the templates */
    struct buffer *failed;           /* the path that could not be written */
    /* of the page being made: exhibits by id, for {{> id}} */
    const struct exhibit **exhibits;
    size_t exhibit_count, exhibit_capacity;
    unsigned tables, figures; /* numbered so far */
};

/* Values that every page sees: shop, trade, address, contact, language, term. */
struct mustache_value *page_values(const struct page_frame *frame);

/* A new numbered exhibit of the page, EXHIBIT_TABLE or EXHIBIT_PLOT, for {{> id}}. */
struct exhibit *page_exhibit(struct page_frame *frame, enum exhibit_kind kind, const char *id);

/* A column of a table whose head is the phrase `statistics.head.<head>`; NULL: no head. */
struct column page_column(const struct page_frame *frame, const char *head, enum column_kind kind,
                          double width_percent, unsigned rank);

/* Render the template with values and write it as output/<path>; exhibits are forgotten. */
enum file_status page_write(struct page_frame *frame, const char *template_name,
                            const struct mustache_value *values, const char *path);

/* Write bytes as output/<path>. */
enum file_status page_write_file(struct page_frame *frame, const char *path,
                                 const struct buffer *contents);

/* Rows of jobs for {{#sets}}: job, set, page, year, supply, returned, in_progress, kept, of,
   failed, capacitors; `root` is what leads from the page to the output folder, "" or "../". */
struct mustache_value *page_job_row(const struct page_frame *frame, size_t job);

/* ---- the pages */

/* site-style.css, the style of all of them. */
enum file_status page_style_write(struct page_frame *frame);

enum file_status page_index_write(struct page_frame *frame);
enum file_status page_search_write(struct page_frame *frame);
enum file_status page_statistics_write(struct page_frame *frame);

/* Name the page of each job's model (column JOB_PAGE): [a-z0-9-]+, one for each maker and model. */
void page_models_name(struct columns *columns);
/* Write output/models/<page>.html for every model, remove others. */
enum file_status page_models_write(struct page_frame *frame);

#endif
