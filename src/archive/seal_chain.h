/*
 * seals.txt: the chain of an archive's seals. Line n carries the hash of line n - 1 (64 zeros in
 * the first), so that a line changed, dropped or moved breaks the chain at the line behind it.
 */
#ifndef ARCHIVE_SEAL_CHAIN_H
#define ARCHIVE_SEAL_CHAIN_H

#include "base/arena.h"
#include "base/file.h"

#include <stdbool.h>

struct seal_chain {
    const char **lines; /* without line ends */
    size_t count;
    unsigned broken_at; /* the first line that does not follow, from 1; 0: whole */
};

/* A missing file is an empty chain. false when the file cannot be read or a link is broken; the
   lines are there all the same. */
bool seal_chain_read(const char *path, struct arena *arena, struct seal_chain *chain);

/* The line that would come next. */
const char *seal_chain_next(const struct seal_chain *chain, const char *date, const char *folder,
                            const char *manifest_hash, struct arena *arena);

/* Write the chain with one line more. */
enum file_status seal_chain_append(const char *path, const struct seal_chain *chain,
                                   const char *line);

/* The parts of a line, copied to the arena; false when it is none. */
struct seal_line {
    unsigned number;
    const char *date, *folder, *manifest_hash, *before_hash;
};
bool seal_line_read(const char *line, struct arena *arena, struct seal_line *read);

#endif
