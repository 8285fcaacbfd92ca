/*
 * Sentences about one part, from keys and numbers: effects, reasons, advice.
 */
#ifndef REPORT_PHRASES_H
#define REPORT_PHRASES_H

#include "report/report.h"

/* Values that phrases about this part may use: missing, volts, service, wait, class, limit ... */
struct mustache_value *part_values(const struct phrasing *say, const struct job *job,
                                   const struct capacitor_findings *part);

#endif
