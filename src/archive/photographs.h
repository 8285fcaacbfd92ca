/*
 * The photographs of a job and the logo of the shop: read from inside the archive only, checked,
 * upright, without camera data, scaled down.
 */
#ifndef ARCHIVE_PHOTOGRAPHS_H
#define ARCHIVE_PHOTOGRAPHS_H

#include "archive/archive.h"
#include "archive/folder_image.h"
#include "job/job.h"
#include "report/report.h"
#include "write/picture.h"

struct photographs {
    struct picture *pictures; /* one for each of job->photos */
    bool *usable;
    size_t count;
    struct picture logo;
    bool has_logo;
};

/* Where a photograph lies: beside the job file. */
const char *photograph_path(const struct job *job, const struct photo *photo, struct arena *arena);

/*
 * Read all. A photograph that is missing, damaged or outside the archive is a diagnostic (error)
 * at its place in the job file; so is a logo, without a place.
 */
struct photographs photographs_read(const struct archive *archive, const struct job *job,
                                    struct arena *arena, struct diagnostics *diagnostics);

/*
 * The pictures that a copy shows, renamed 01.jpg, 02.jpg ... in order, one for each of
 * `filtered->photos` (which is taken from whole->photos by file name and place), and behind them
 * the logo, logo.jpg or logo.png. Their files are
 * added to the image under pictures/.
 */
const struct report_picture *photographs_for_copy(const struct photographs *photographs,
                                                  const struct job *whole,
                                                  const struct job *filtered,
                                                  struct folder_image *image, struct arena *arena);

void photographs_release(struct photographs *photographs);

#endif
