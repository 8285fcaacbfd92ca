/*
 * What the archive shows: counts and shares over all jobs, from their columns.
 *
 * A share counts capacitors as they were found at their set's first visit, one row a part: failed
 * is outcome "fail"; read are those with an outcome from pass to fail; a part replaced without a
 * reading is counted apart. The remaining ones, not judged, are in `outcomes` only.
 */
#ifndef ARCHIVE_STATISTICS_H
#define ARCHIVE_STATISTICS_H

#include "archive/columns.h"
#include "assess/findings.h"
#include "assess/share.h"

enum grouping { BY_TYPE, BY_PLACE, BY_DECADE, BY_MAKER, GROUPING_COUNT };
extern const char *const grouping_names[]; /* "type", "place", "decade", "maker" */

struct share_group {
    const char *label; /* English word of the summary; "" not given */
    struct share_sums sums;
    struct share share;
    unsigned outcomes[OUTCOME_COUNT]; /* as found, unread parts left out */
};
struct share_groups {
    struct share_group *groups; /* worst share first; those without an interval behind */
    size_t count;
};

/* Parts kept at an earlier visit and there again, by type. */
struct drift_group {
    const char *label;
    unsigned parts;
    unsigned read, failed; /* with an outcome from pass to fail now; of these fail */
    unsigned leakages;     /* read at the same volts both times, no bounds, time between known */
    double leakage_low, leakage_median, leakage_high; /* factor a year, quartiles; NaN: none */
    unsigned values;
    double value_low, value_median, value_high; /* change a year as a fraction */
};

/* One batch of replacement parts, and where its parts went. */
struct batch_row {
    const char *batch;
    size_t *parts; /* rows of the part columns, in order of jobs */
    size_t count;
    size_t sets;
};

struct statistics {
    struct share_groups groups[GROUPING_COUNT];
    struct share_group all;
    size_t first_visits; /* jobs that continue no other */
    struct drift_group *drifts;
    size_t drift_count;
    struct batch_row *batches; /* by name */
    size_t batch_count;
    size_t *call_backs; /* jobs, by date, then number */
    size_t call_back_count;
};

/* Everything belongs to the arena, texts to the columns. */
struct statistics statistics_of(const struct columns *columns, struct arena *arena);

/* Append a table as CSV (RFC 4180, lines end with LF), heads in the first line. */
void statistics_csv(const struct statistics *statistics, struct buffer *out);
void drift_csv(const struct columns *columns, struct buffer *out);
void recall_csv(const struct columns *columns, const struct statistics *statistics,
                struct buffer *out);
void call_back_csv(const struct columns *columns, const struct statistics *statistics,
                   struct buffer *out);

#endif
