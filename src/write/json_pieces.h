/*
 * Members for what a job holds: prose, dates, quantities; and the parts that json.c puts together.
 * Seen by json*.c only.
 */
#ifndef WRITE_JSON_PIECES_H
#define WRITE_JSON_PIECES_H

#include "job/job.h"
#include "write/json.h"

void json_prose_member(struct buffer *out, const char *key, const struct prose *prose);
void json_date_member(struct buffer *out, const char *key, const struct date *date);

/* The number of a quantity, null when not given. */
void json_quantity_member(struct buffer *out, const char *key, const struct quantity *quantity);

/* "key": value, "key_written": text, "key_bound": "over" | "under" | null. */
void json_measured_members(struct buffer *out, const char *key, const char *key_written,
                           const char *key_bound, const struct quantity *quantity);

const char *json_bound(enum bound bound); /* NULL: none */

/* Each from the file of its name: members of the object that json_write_findings opens. */
void json_write_job(const struct findings *findings, struct buffer *out);
void json_write_other_parts(const struct findings *findings, struct buffer *out);
void json_write_work(const struct findings *findings, struct buffer *out);
void json_write_capacitors(const struct findings *findings, struct buffer *out);
void json_write_stages(const struct findings *findings, struct buffer *out);
void json_write_bench(const struct findings *findings, struct buffer *out);
void json_write_visits(const struct findings *findings, struct buffer *out);

#endif
