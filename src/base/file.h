/*
 * Files read whole and written whole. Every file that the program makes appears complete or not at
 * all: written aside, then renamed; one that would not change is not touched. What must outlive a
 * power cut is flushed besides.
 */
#ifndef BASE_FILE_H
#define BASE_FILE_H

#include "base/arena.h"
#include "base/buffer.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

enum file_status {
    FILE_OK,
    FILE_MISSING,
    FILE_FORBIDDEN,
    FILE_NOT_REGULAR, /* a folder, a device */
    FILE_LARGE,       /* more than the limit */
    FILE_DISK_FULL,
    FILE_DISK_READ_ONLY,
    FILE_EXISTS, /* and must not be written over */
    FILE_FAILED  /* any other; errno says why */
};

/* What an errno of a system call on a file comes to. */
enum file_status file_status_of(int error);

/* English, lower case, no full stop: "cannot open 'x': " comes before it. */
const char *file_status_text(enum file_status status);

/* Append the whole file; more than limit_bytes is FILE_LARGE. On failure *contents is as before. */
enum file_status file_read(const char *path, size_t limit_bytes, struct buffer *contents);

/* Make the file hold exactly these bytes. *changed (may be NULL): whether it held others before. */
enum file_status file_write(const char *path, const void *data, size_t length, bool *changed);

/* Make the file hold these bytes, whole or not at all; FILE_EXISTS when its name is taken. */
enum file_status file_create(const char *path, const void *data, size_t length);

/*
 * A file written piece by piece: aside, until file_finish makes it the file `path` as file_write
 * would, or removes it when something failed before. Every file_begin is followed by one
 * file_finish. The pieces may come from another file.
 */
struct file_writer {
    struct buffer path, aside;
    int file;
    enum file_status status; /* of what was done so far; nothing more is written after a failure */
};
void file_begin(struct file_writer *writer, const char *path);
void file_put(struct file_writer *writer, const void *data, size_t length);
/* `length` bytes from `offset` on of the file that `path` is now; fewer there: FILE_FAILED. */
void file_put_old(struct file_writer *writer, uint64_t offset, uint64_t length);
/* Come back when what was put so far is on the disk. */
void file_flush(struct file_writer *writer);
enum file_status file_finish(struct file_writer *writer);

/* Come back when a folder with all it holds, or the list of its names alone, is on the disk, as far
 * as the disk says so. */
enum file_status folder_flush(const char *path);
enum file_status folder_flush_names(const char *path);

bool folder_exists(const char *path);

/* Make a folder and those above it; an existing one is fine. */
enum file_status folder_make(const char *path);

/* What stands in a folder, but `.` and `..`, sorted. It belongs to the arena. FILE_MISSING: there
   is no such folder; after any failure *names is empty. */
struct folder_names {
    const char **names;
    size_t count;
};
enum file_status folder_list(const char *path, struct arena *arena, struct folder_names *names);

/* Remove what programs killed while writing left aside in this folder (not below it). Only for who
 * writes there alone. */
void folder_clear_aside(const char *path);

/* Remove a folder with all it holds; a missing one is fine. Symbolic links are removed, not
 * followed. */
enum file_status folder_remove(const char *path);

#endif
