/*
 * The text of a new job file: the keys that every job has, with what goes behind them in comments.
 */
#ifndef JOB_START_H
#define JOB_START_H

#include "base/buffer.h"
#include "base/diagnostic.h"

struct start {
    const char *number;        /* of the new job */
    const char *received;      /* its date, "2031-02-03"; NULL: left blank */
    const struct source *like; /* an earlier job on this kind of chassis: its parts are kept as
                                  typed, readings, what was done and dates are not; NULL: none */
};

/*
 * Append the file. A `like` that has errors is used as far as it could be read; its mistakes are
 * appended to diagnostics (which belongs to the caller, as does the arena).
 */
void start_write(struct buffer *buffer, const struct start *start, struct arena *arena,
                 struct diagnostics *diagnostics);

#endif
