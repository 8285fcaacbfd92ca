/*
 * Members and items of a JSON text, one call each. Commas look after themselves: one is set unless
 * the text ends with an opening bracket. Seen by json*.c only.
 */
#ifndef WRITE_JSON_PIECES_H
#define WRITE_JSON_PIECES_H

#include "job/job.h"
#include "write/json.h"

#include <stdbool.h>

void json_open(struct buffer *out, const char *key, char bracket); /* key NULL: in a list */
void json_close(struct buffer *out, char bracket);
void json_key(struct buffer *out, const char *key);

void json_text_member(struct buffer *out, const char *key, const char *text);
void json_number_member(struct buffer *out, const char *key, double value);
void json_count_member(struct buffer *out, const char *key, long long value);
void json_flag_member(struct buffer *out, const char *key, bool value);

/* "" is no choice: null. */
void json_choice_member(struct buffer *out, const char *key, const char *choice);
void json_prose_member(struct buffer *out, const char *key, const struct prose *prose);
void json_date_member(struct buffer *out, const char *key, const struct date *date);

/* The number of a quantity, null when not given. */
void json_quantity_member(struct buffer *out, const char *key, const struct quantity *quantity);

/* "key": value, "key_written": text, "key_bound": "over" | "under" | null. */
void json_measured_members(struct buffer *out, const char *key, const char *key_written,
                           const char *key_bound, const struct quantity *quantity);

const char *json_bound(enum bound bound); /* NULL: none */

/* json_job.c: all that the job itself says; json_parts.c: capacitors; json_stages.c. */
void json_write_job(const struct findings *findings, struct buffer *out);
void json_write_other_parts(const struct findings *findings, struct buffer *out);
void json_write_work(const struct findings *findings, struct buffer *out);
void json_write_capacitors(const struct findings *findings, struct buffer *out);
void json_write_stages(const struct findings *findings, struct buffer *out);
void json_write_bench(const struct findings *findings, struct buffer *out);
void json_write_visits(const struct findings *findings, struct buffer *out);

#endif
