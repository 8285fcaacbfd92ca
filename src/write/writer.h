/*
 * Writers: a document in one format, appended to a buffer. They touch no file, never change the
 * tree, and see of report only document.h and exhibit.h.
 */
#ifndef WRITE_WRITER_H
#define WRITE_WRITER_H

#include "base/buffer.h"
#include "base/diagnostic.h"
#include "report/document.h"

/* CommonMark; plots as links to pictures/<id>.svg with their numbers as a table, tables as pipe
   tables padded to line up in a pager. */
void markdown_write(const struct document *document, struct buffer *out);

/* A whole HTML page with its style inside. style: contents of style.css; page_template: contents of
   page.html, which sees {{language}}, {{title}}, {{author}}, {{subject}}, {{kind}} (record, sheet,
   page, assessment), {{skip}}, {{footer}}, and the partials {{> style}}, {{> page_style}} (accent,
   paper, running head) and {{> document}}, each alone on its line. What the template gets wrong is
   left out here: html_check_page says it. */
void html_write(const struct document *document, const char *style, const char *page_template,
                struct buffer *out);

/* The mistakes of a page template, once per process, appended to diagnostics; false: it has some.
 */
bool html_check_page(const struct source *page, struct arena *arena,
                     struct diagnostics *diagnostics);

/* Only the document's body, without page: for pages of the archive. */
void html_write_body(const struct document *document, struct buffer *out);

/* One exhibit by itself, for pages that are made from templates of their own; any but
   EXHIBIT_CONTENTS, which speaks of a document. */
void html_write_exhibit(const struct exhibit *exhibit, struct buffer *out);

/* Plain text for a terminal `columns` wide; colour: ANSI bold allowed (isatty, no NO_COLOR). */
void terminal_write(const struct document *document, unsigned columns, bool bold_allowed,
                    struct buffer *out);

/* A plot or headline as a standalone SVG file, light colours, accent "#1b4b6b". Nothing for
   other exhibits. */
void svg_write_file(const struct exhibit *exhibit, const char *accent, struct buffer *out);

/* What PDFs share: faces and colour profile, opened once per process, then only read. */
struct pdf_resources;

/* Open fonts and profile in `folder` (OpenSans-Regular.ttf, ... , sRGB.icc). NULL with a
   diagnostic when one is missing or damaged. */
struct pdf_resources *pdf_resources_open(const char *folder, struct diagnostics *diagnostics);
void pdf_resources_close(struct pdf_resources *resources);

/* PDF/A-1b. false with a diagnostic when the library failed; *out is then as before. A sign that
   no face has is a diagnostic (warning) and drawn as U+FFFD. level: of deflation. */
bool pdf_write(const struct document *document, const struct pdf_resources *resources, int level,
               struct buffer *out, struct diagnostics *diagnostics);

#endif
