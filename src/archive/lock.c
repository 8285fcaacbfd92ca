#include "archive/lock.h"

#include <errno.h>
#include <fcntl.h>
#include <stdint.h>
#include <unistd.h>

static int open_lock_file(const char *folder, enum file_status *failure)
{
    struct buffer path = {0};
    buffer_print(&path, "%s/.gridleak", folder);
    int file = -1;
    *failure = folder_make(buffer_string(&path));
    if (*failure == FILE_OK) {
        buffer_text(&path, "/lock");
        file = open(buffer_string(&path), O_RDWR | O_CREAT | O_CLOEXEC, 0666);
        if (file < 0)
            *failure = file_status_of(errno);
    }
    buffer_release(&path);
    return file;
}

enum lock_status lock_take(const char *folder, enum lock_kind kind, bool wait, struct lock *lock,
                           long *holder, enum file_status *failure)
{
    *lock = (struct lock){-1};
    *holder = 0;
    int file = open_lock_file(folder, failure);
    if (file < 0)
        return LOCK_FAILED;
    /* Byte 0 alone: the bytes behind it are the jobs', which holders of the shared lock take. */
    struct flock wanted = {
        .l_type = kind == LOCK_ALONE ? F_WRLCK : F_RDLCK, .l_whence = SEEK_SET, .l_len = 1};
    int answer;
    do
        answer = fcntl(file, wait ? F_SETLKW : F_SETLK, &wanted);
    while (answer != 0 && errno == EINTR);
    if (answer == 0) {
        lock->file = file;
        return LOCK_HELD;
    }
    bool busy = errno == EACCES || errno == EAGAIN;
    *failure = busy ? FILE_OK : file_status_of(errno);
    if (busy && fcntl(file, F_GETLK, &wanted) == 0 && wanted.l_type != F_UNLCK)
        *holder = wanted.l_pid;
    close(file);
    return busy ? LOCK_BUSY : LOCK_FAILED;
}

/* Byte 0 is the folder's; each job has one of the bytes behind it. Two jobs on one byte only wait
   for each other. */
static off_t byte_of(const char *job)
{
    uint32_t hash = 2166136261u; /* FNV-1a */
    for (; *job; job++)
        hash = (hash ^ (unsigned char)*job) * 16777619u;
    return 1 + (off_t)(hash & 0x3FFFFFFF);
}

static void set_job_lock(const struct lock *lock, const char *job, short type)
{
    struct flock wanted = {
        .l_type = type, .l_whence = SEEK_SET, .l_start = byte_of(job), .l_len = 1};
    while (fcntl(lock->file, F_SETLKW, &wanted) != 0 && errno == EINTR)
        continue;
}

void lock_job(const struct lock *lock, const char *job)
{
    set_job_lock(lock, job, F_WRLCK);
}

void unlock_job(const struct lock *lock, const char *job)
{
    set_job_lock(lock, job, F_UNLCK);
}

void lock_release(struct lock *lock)
{
    if (lock->file >= 0)
        close(lock->file);
    lock->file = -1;
}
