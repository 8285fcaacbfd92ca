/*
 * Findings as JSON, written directly: one object on one line (JSON Lines). Doubles in SI in the
 * shortest form that reads back the same, unknown is null and never left out.
 */
#ifndef WRITE_JSON_H
#define WRITE_JSON_H

#include "assess/findings.h"
#include "base/buffer.h"

/* {"findings": 1, "program": ..., "copy": ..., "job": ...} and a line end. report_explain first. */
void json_write_findings(const struct findings *findings, struct buffer *out);

/* Pieces for other JSON (summaries, statistics). */
void json_string(struct buffer *out, const char *text); /* quoted and escaped; NULL: null */
void json_number(struct buffer *out, double value);     /* NaN, infinity: null */

#endif
