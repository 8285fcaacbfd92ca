/*
 * A folder's manifest.sha256 (the format of sha256sum, sorted by name): every file but itself,
 * seal.txt and a detached signature of the manifest.
 */
#ifndef ARCHIVE_MANIFEST_H
#define ARCHIVE_MANIFEST_H

#include "base/arena.h"
#include "base/hash.h"

#include <stdbool.h>

#define MANIFEST_NAME  "manifest.sha256"
#define SEAL_NAME      "seal.txt"
#define SIGNATURE_NAME "manifest.sha256.sig"

enum { MANIFEST_FILE_BYTES_MAX = 256 << 20 };

struct manifest_line {
    char hash[HASH_TEXT_BYTES];
    const char *name;
};
struct manifest {
    struct manifest_line *lines;
    size_t count;
    const char *unreadable;     /* the first line that is none, NULL: all are */
    char hash[HASH_TEXT_BYTES]; /* of the manifest itself */
};

/* false when the folder has none. */
bool manifest_read(const char *folder, struct arena *arena, struct manifest *manifest);

/* The hash of a file in the folder; false when it cannot be read. */
bool manifest_hash_file(const char *folder, const char *name, char hash[HASH_TEXT_BYTES]);

#endif
