/*
 * From findings to a document: templates, words, values and exhibits.
 */
#ifndef REPORT_REPORT_H
#define REPORT_REPORT_H

#include "assess/findings.h"
#include "report/document.h"
#include "report/words.h"

/*
 * Templates and words of one archive, read once per process and then only read (threads may share
 * them). Each file is looked for in `archive_folder`/templates/, then in `share_folder`/templates/.
 */
struct templates;
struct templates *templates_open(const char *archive_folder, const char *share_folder,
                                 const struct shop *shop, struct arena *arena,
                                 struct diagnostics *diagnostics);

/* The text of a template file ("style.css", "page.html"), NULL with a diagnostic when missing. */
const char *templates_text(const struct templates *templates, const char *name,
                           struct diagnostics *diagnostics);
const struct words *templates_words(const struct templates *templates);

/* Fill the text members of findings (effect texts, why, advice) with words; before JSON. */
void report_explain(struct findings *findings, const struct words *words, struct arena *arena);

/* Pictures of a record, decoded and renamed 01.jpg ... by the caller (write/picture.h), in the
   order of job->photos, and behind them the shop's logo. file NULL: left out (missing or damaged; a
   diagnostic said so). */
struct report_picture {
    const char *file;
    unsigned width_px, height_px;
    const struct picture *picture;
};

/*
 * Compose the document of one kind: DOCUMENT_RECORD from record.md, DOCUMENT_SHEET from sheet.md,
 * DOCUMENT_ASSESSMENT from assessment.md. pictures may be NULL. Template mistakes and dropped raw
 * HTML are diagnostics; NULL after a template error. document_release gives the tree back, the
 * rest belongs to the arena.
 */
struct document *report_compose(const struct findings *findings, enum document_kind kind,
                                const struct templates *templates,
                                const struct report_picture *pictures, struct arena *arena,
                                struct diagnostics *diagnostics);

/* The calculation of one part line by line, from working.md; NULL after a template error, or when
   the job has no part of that ref (a diagnostic). */
struct document *report_compose_working(const struct findings *findings, const char *ref,
                                        const struct templates *templates, struct arena *arena,
                                        struct diagnostics *diagnostics);

/* The manual, DOCUMENT_MANUAL from manual.md, which speaks of no job; NULL after a template error.
 */
struct document *report_compose_manual(const struct shop *shop, const struct templates *templates,
                                       struct arena *arena, struct diagnostics *diagnostics);

/* The name of the owner, its last word or the contact found in text of the job that a sale copy
   would show: a diagnostic each. true when the sale copy may be written. */
bool report_sale_copy_is_clean(const struct job *job, struct arena *arena,
                               struct diagnostics *diagnostics);

#endif
