/*
 * Findings as JSON, written directly: one object on one line (JSON Lines). Doubles in SI in the
 * shortest form that reads back the same, unknown is null and never left out.
 */
#ifndef WRITE_JSON_H
#define WRITE_JSON_H

#include "assess/findings.h"
#include "base/buffer.h"

#include <stdbool.h>

/* {"findings": 1, "program": ..., "copy": ..., "job": ...} and a line end. report_explain first. */
void json_write_findings(const struct findings *findings, struct buffer *out);

/* Values. */
void json_string(struct buffer *out, const char *text); /* quoted and escaped; NULL: null */
void json_number(struct buffer *out, double value);     /* NaN, infinity: null */

/*
 * Members and items, one call each. Commas look after themselves: one is set unless the text ends
 * with an opening bracket or a line end.
 */
void json_open(struct buffer *out, const char *key, char bracket); /* key NULL: in a list */
void json_close(struct buffer *out, char bracket);
void json_text_member(struct buffer *out, const char *key, const char *text);
void json_number_member(struct buffer *out, const char *key, double value);
void json_count_member(struct buffer *out, const char *key, long long value);
void json_flag_member(struct buffer *out, const char *key, bool value);
/* Nothing chosen or written, "": null. */
void json_choice_member(struct buffer *out, const char *key, const char *choice);

#endif
