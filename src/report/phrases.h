/*
 * Sentences about one part, from keys and numbers: effects, reasons, advice.
 */
#ifndef REPORT_PHRASES_H
#define REPORT_PHRASES_H

#include "report/report.h"

/* "cathode current rises by 22 %, 10 % allowed": one criterion that is not met. */
const char *criterion_phrase(const struct phrasing *say, const struct criterion *criterion);

/* The criterion that made the outcome what it is; NULL: none. */
const struct criterion *criterion_deciding(const struct capacitor_findings *part);

/* Values that phrases about this part may use: missing, volts, service, wait, class, limit ... */
struct mustache_value *part_values(const struct phrasing *say, const struct job *job,
                                   const struct capacitor_findings *part);

#endif
