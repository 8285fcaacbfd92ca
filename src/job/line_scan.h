/*
 * What the readers of lines share; for src/job/line*.c only.
 */
#ifndef JOB_LINE_SCAN_H
#define JOB_LINE_SCAN_H

#include "job/line.h"

/* A piece of a line's text. */
struct span {
    const char *start;
    size_t length;
};

/* Without spaces at both ends. */
struct span span_trim(struct span span);
struct span span_of_token(const struct quantity_token *token);
/* ASCII, without regard to case. */
bool span_is(struct span span, const char *word);
/* span begins with `words`, and a space or its end follows. */
bool span_begins(struct span span, const char *words);
bool span_is_any(struct span span, const char *const *words);
struct span span_from(struct span span, size_t offset);

/* All of the line, trimmed. */
struct span line_span(const struct line *line);

/* Cut the next piece before a comma and a space, trimmed and not empty; false at the end.
 *offset begins at 0. */
bool line_segment_next(const struct line *line, size_t *offset, struct span *segment);

/* Set line->problem at `span`; always false. hint may be NULL. */
bool line_fail(struct line *line, struct span span, enum diagnostic_code code, const char *hint,
               const char *format, ...) __attribute__((format(printf, 5, 6)));

/* Whether a line of several facts is too long to be one, with the problem set. */
bool line_too_long(struct line *line);

/* The same for what quantity_read refused; problem and hint follow from the status. */
bool line_fail_quantity(struct line *line, struct span span, enum quantity_status status,
                        const struct quantity_form *form);

/* quantity_read, with `at` set and MF noted on success; no problem is set. */
enum quantity_status line_try_quantity(struct line *line, struct span span,
                                       const struct quantity_form *form, struct quantity *quantity);

/* The same, with the problem set; true on QUANTITY_OK. */
bool line_take_quantity(struct line *line, struct span span, const struct quantity_form *form,
                        struct quantity *quantity);

/* line_resistance on a piece. */
bool line_take_resistance(struct line *line, struct span span, struct resistance *resistance);

/* "12.5 uA" shortened to what fits a message; quoted by the caller. */
const char *line_quote(struct line *line, struct span span);

/* A text of the arena, as written. */
const char *line_written(struct line *line, struct span span);

#endif
