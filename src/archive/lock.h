/*
 * Who may write into an output folder. A whole publish and the pages hold the folder alone; the
 * publishing of single jobs shares it and holds each job's folder alone (fcntl record locks, which
 * end with the process however it ends).
 */
#ifndef ARCHIVE_LOCK_H
#define ARCHIVE_LOCK_H

#include "base/arena.h"
#include "base/file.h"

#include <stdbool.h>

enum lock_kind { LOCK_SHARED, LOCK_ALONE };

enum lock_status {
    LOCK_HELD,
    LOCK_BUSY,  /* another process holds it: *holder is its number */
    LOCK_FAILED /* the lock file cannot be made: *failure */
};

struct lock {
    int file; /* -1: none */
};

/*
 * Lock `folder`/.gridleak/lock, made if need be; wait: until it is free. The folder must exist.
 * On LOCK_HELD *lock must be given back with lock_release.
 */
enum lock_status lock_take(const char *folder, enum lock_kind kind, bool wait, struct lock *lock,
                           long *holder, enum file_status *failure);

/* Within a shared lock: one job's folder alone, against other processes; waits. A range of the lock
   file by the hash of the name, so that no file a job is left behind. */
void lock_job(const struct lock *lock, const char *job);
void unlock_job(const struct lock *lock, const char *job);

void lock_release(struct lock *lock);

#endif
