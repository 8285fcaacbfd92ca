/*
 * output/manual.html, the manual beside the list of the archive: the document that manual.md and
 * its partials make, in the wording, colours and paper of the shop.
 */
#ifndef ARCHIVE_MANUAL_PAGE_H
#define ARCHIVE_MANUAL_PAGE_H

#include "archive/page_frame.h"

/* Mistakes of its templates are appended to frame->diagnostics, and the page is left as it was. */
enum file_status manual_page_write(struct page_frame *frame);

#endif
