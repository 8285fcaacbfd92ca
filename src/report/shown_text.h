/*
 * Every text of a job that a sale copy would show.
 */
#ifndef REPORT_SHOWN_TEXT_H
#define REPORT_SHOWN_TEXT_H

#include "job/job.h"

/* text is never NULL; at: where the text, or the part that it belongs to, stands in the file;
   what: "the note of C14". */
typedef void shown_text_visitor(void *data, const char *text, struct position at, const char *what);

/* Call visit for each of them; data is handed on. */
void shown_text_visit(const struct job *job, shown_text_visitor *visit, void *data);

#endif
