/*
 * Template files of one archive, inside src/report.
 */
#ifndef REPORT_TEMPLATES_H
#define REPORT_TEMPLATES_H

#include "report/report.h"

/* The source of a template file with its path; NULL when there is none. */
const struct source *templates_find(const struct templates *templates, const char *name);

#endif
