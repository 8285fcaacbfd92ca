/*
 * Earlier visits of a set: `continues` names the job before, that one perhaps another. The chain is
 * followed through the archive and checked; what moved since the last visit goes into the findings.
 */
#ifndef ARCHIVE_VISITS_H
#define ARCHIVE_VISITS_H

#include "assess/findings.h"

enum { VISITS_MAX = 100 };

/* The files that were looked at, there or not: what the job depends on besides its own file. */
struct visits {
    const char **paths;
    size_t count;
};

/*
 * Follow findings->job's chain among the job files in `folder`. An unknown number, a loop, another
 * set and dates out of order are warnings at `continues`. When the visit before can be read without
 * mistakes findings->since is set.
 */
struct visits visits_follow(const char *folder, struct findings *findings, struct arena *arena,
                            struct diagnostics *diagnostics);

#endif
