/*
 * An archive: the folder that holds shop.yaml and the job files, and what all its jobs share
 * (shop, templates, fonts). Opened once per process, then only read: threads may share it.
 */
#ifndef ARCHIVE_ARCHIVE_H
#define ARCHIVE_ARCHIVE_H

#include "base/diagnostic.h"
#include "base/file.h"
#include "job/shop.h"
#include "report/report.h"
#include "write/writer.h"

struct archive {
    const char *folder;       /* as the user named it; "." at the least */
    const char *share_folder; /* templates and fonts as installed */
    const struct shop *shop;
    struct templates *templates;
    struct pdf_resources *pdf; /* NULL until archive_open_pdf */
    const char *style, *page_template;
};

/* The folder with templates/ and fonts/ beside the program, or where it was installed; NULL when
   neither is there. */
const char *archive_share_folder(struct arena *arena);

/* The archive of a job file: the nearest folder at or above its own that holds shop.yaml, else its
   own folder. */
const char *archive_folder_of(const char *job_path, struct arena *arena);

/* Whether the folder is there and holds shop.yaml. */
bool archive_is_at(const char *folder);

/* false when templates or shop.yaml have errors; diagnostics tell. */
bool archive_open(struct archive *archive, const char *folder, const char *share_folder,
                  struct arena *arena, struct diagnostics *diagnostics);

/* Fonts and colour profile, for PDFs. false with a diagnostic. */
bool archive_open_pdf(struct archive *archive, struct arena *arena,
                      struct diagnostics *diagnostics);

/* Give back what archive_open_pdf opened; all else belongs to the arena. */
void archive_close(struct archive *archive);

/* Names of the job files directly in the folder, without ".yaml", sorted. */
struct job_names {
    const char **names;
    size_t count;
};
enum file_status archive_job_names(const char *folder, struct arena *arena,
                                   struct job_names *names);

#endif
