/*
 * Sealing: a copy of a record is set aside for good, and a chain of lines says when. Each line of
 * ARCHIVE/seals.txt is `number date folder sha256-of-manifest sha256-of-the-line-before`; the same
 * line lies in the sealed folder as seal.txt, so every copy handed out pins the chain up to it.
 *
 * What it shows: nothing has changed since a line was handed to somebody. What it cannot show: that
 * a shop did not write everything anew before it handed anything out.
 */
#ifndef ARCHIVE_SEAL_H
#define ARCHIVE_SEAL_H

#include "base/arena.h"
#include "base/file.h"
#include "job/choices.h"

enum seal_status {
    SEAL_DONE,
    SEAL_NOT_PUBLISHED, /* no such copy below the output folder */
    SEAL_DIFFERS,       /* the published folder does not agree with its manifest */
    SEAL_CHAIN_BROKEN,  /* seals.txt is damaged: prove first */
    SEAL_FAILED         /* a file could not be written: *failure, path */
};

struct seal_request {
    const char *archive_folder, *output, *job;
    enum copy copy;   /* client or sale */
    const char *date; /* ISO 8601 */
};
struct seal_result {
    enum seal_status status;
    const char *folder; /* the sealed folder; of a failure what could not be written */
    const char *line;   /* its line of seals.txt, without line end */
    enum file_status failure;
};

/* Copy output/jobs/<job>/<copy>/ to archive/sealed/<job>-<copy>-<n>/ and append the line. Texts
   belong to the arena. */
struct seal_result seal(const struct seal_request *request, struct arena *arena);

enum proof_kind {
    PROOF_MANIFEST_MISSING,
    PROOF_MANIFEST_UNREADABLE, /* a line of it: name */
    PROOF_FILE_CHANGED,
    PROOF_FILE_LOST,
    PROOF_FILE_ADDED,
    PROOF_FINGERPRINT,   /* the record's does not belong to findings.json: name is the record */
    PROOF_SEAL_MANIFEST, /* seal.txt names another manifest */
    PROOF_SEAL_UNREADABLE,
    PROOF_CHAIN_LINE,   /* line `number` of seals.txt does not follow from the one before */
    PROOF_CHAIN_MISSING /* the folder's own line is not in seals.txt */
};
struct proof_difference {
    enum proof_kind kind;
    const char *name;
    unsigned number;
};
struct proof {
    struct proof_difference *differences;
    size_t count, capacity;
    size_t files;          /* agreed with the manifest */
    const char *seal_line; /* NULL: the folder is not sealed */
    bool chain_checked;    /* seals.txt was at hand */
    unsigned chain_lines;
};

/* Check manifest, added and lost files, fingerprint and, where seals.txt lies two folders up, the
   chain. Texts belong to the arena. */
struct proof prove(const char *folder, struct arena *arena);

#endif
