#include "base/file.h"

#include "base/memory.h"

#include <dirent.h>
#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static enum file_status status_of(int error)
{
    switch (error) {
    case ENOENT:
    case ENOTDIR:
        return FILE_MISSING;
    case EACCES:
    case EPERM:
    case EROFS:
        return FILE_FORBIDDEN;
    case ENOSPC:
    case EDQUOT:
        return FILE_DISK_FULL;
    case EEXIST:
        return FILE_EXISTS;
    default:
        return FILE_FAILED;
    }
}

const char *file_status_text(enum file_status status)
{
    switch (status) {
    case FILE_OK:
        return "no error";
    case FILE_MISSING:
        return "no such file";
    case FILE_FORBIDDEN:
        return "not permitted";
    case FILE_NOT_REGULAR:
        return "not a regular file";
    case FILE_LARGE:
        return "too large";
    case FILE_DISK_FULL:
        return "the disk is full";
    case FILE_EXISTS:
        return "it is there already";
    case FILE_FAILED:
        return strerror(errno);
    }
    return "";
}

static enum file_status read_all(int file, size_t limit_bytes, struct buffer *contents)
{
    struct stat about;
    if (fstat(file, &about) != 0)
        return status_of(errno);
    if (S_ISDIR(about.st_mode))
        return FILE_NOT_REGULAR;
    size_t before = contents->length;
    for (;;) {
        size_t expected =
            about.st_size > 0 && contents->length == before ? (size_t)about.st_size + 1 : 65536;
        if (expected > limit_bytes + 1)
            expected = limit_bytes + 1;
        buffer_reserve(contents, expected);
        ssize_t got = read(file, contents->data + contents->length, expected);
        if (got < 0 && errno == EINTR)
            continue;
        if (got < 0) {
            contents->length = before;
            return status_of(errno);
        }
        if (got == 0)
            return FILE_OK;
        contents->length += (size_t)got;
        if (contents->length - before > limit_bytes) {
            contents->length = before;
            return FILE_LARGE;
        }
    }
}

enum file_status file_read(const char *path, size_t limit_bytes, struct buffer *contents)
{
    /* Without waiting, for a pipe that nobody writes to must not hold a publish up; but what comes
       through one that somebody writes to is waited for. */
    int file = open(path, O_RDONLY | O_CLOEXEC | O_NONBLOCK);
    if (file < 0)
        return status_of(errno);
    fcntl(file, F_SETFL, O_RDONLY);
    enum file_status status = read_all(file, limit_bytes, contents);
    close(file);
    return status;
}

static bool holds_already(const char *path, const void *data, size_t length)
{
    struct stat about;
    if (lstat(path, &about) != 0 || !S_ISREG(about.st_mode) || (size_t)about.st_size != length)
        return false;
    struct buffer old = {0};
    bool same = file_read(path, length, &old) == FILE_OK && old.length == length &&
                (length == 0 || memcmp(old.data, data, length) == 0);
    buffer_release(&old);
    return same;
}

static enum file_status write_all(int file, const char *data, size_t length)
{
    while (length > 0) {
        ssize_t written = write(file, data, length);
        if (written < 0 && errno == EINTR)
            continue;
        if (written < 0)
            return status_of(errno);
        data += written;
        length -= (size_t)written;
    }
    return FILE_OK;
}

static const char aside_mark[] = ".part-";

/* Write the bytes into a new file beside `path`, whose name is appended to *aside. */
static enum file_status write_aside(const char *path, const void *data, size_t length,
                                    struct buffer *aside)
{
    buffer_print(aside, "%s%s%ld", path, aside_mark, (long)getpid());
    int file = open(buffer_string(aside), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0666);
    if (file < 0)
        return status_of(errno);
    enum file_status status = write_all(file, data, length);
    if (close(file) != 0 && status == FILE_OK)
        status = status_of(errno);
    return status;
}

/* Remove what was written aside; errno keeps saying what went wrong before. */
static void drop_aside(struct buffer *aside)
{
    int error = errno;
    unlink(buffer_string(aside));
    buffer_release(aside);
    errno = error;
}

enum file_status file_write(const char *path, const void *data, size_t length, bool *changed)
{
    if (changed)
        *changed = false;
    if (holds_already(path, data, length))
        return FILE_OK;
    struct buffer aside = {0};
    enum file_status status = write_aside(path, data, length, &aside);
    if (status == FILE_OK && rename(buffer_string(&aside), path) != 0)
        status = status_of(errno);
    if (status == FILE_OK)
        buffer_release(&aside);
    else
        drop_aside(&aside);
    if (changed)
        *changed = status == FILE_OK;
    return status;
}

/* Give the file its name unless that is taken. FAT and some shares know no links: there the
   question and the renaming are two steps. */
static enum file_status name_if_free(const char *aside, const char *path)
{
    if (link(aside, path) == 0)
        return FILE_OK;
    if (errno == EEXIST)
        return FILE_EXISTS;
    struct stat about;
    if (lstat(path, &about) == 0)
        return FILE_EXISTS;
    return rename(aside, path) == 0 ? FILE_OK : status_of(errno);
}

enum file_status file_create(const char *path, const void *data, size_t length)
{
    struct buffer aside = {0};
    enum file_status status = write_aside(path, data, length, &aside);
    if (status == FILE_OK)
        status = name_if_free(buffer_string(&aside), path);
    drop_aside(&aside);
    return status;
}

enum file_status folder_make(const char *path)
{
    if (mkdir(path, 0777) == 0)
        return FILE_OK;
    if (errno == EEXIST) {
        struct stat about;
        return stat(path, &about) == 0 && S_ISDIR(about.st_mode) ? FILE_OK : FILE_NOT_REGULAR;
    }
    const char *slash = strrchr(path, '/');
    if (errno != ENOENT || !slash || slash == path)
        return status_of(errno);
    char *above = memory_get((size_t)(slash - path) + 1);
    memcpy(above, path, (size_t)(slash - path));
    above[slash - path] = '\0';
    enum file_status status = folder_make(above);
    free(above);
    if (status != FILE_OK)
        return status;
    return mkdir(path, 0777) == 0 || errno == EEXIST ? FILE_OK : status_of(errno);
}

static int by_name(const void *a, const void *b)
{
    return strcmp(*(const char *const *)a, *(const char *const *)b);
}

enum file_status folder_list(const char *path, struct arena *arena, struct folder_names *names)
{
    *names = (struct folder_names){0};
    struct folder_names found = {0};
    size_t capacity = 0;
    DIR *folder = opendir(path);
    if (!folder && errno == ENOMEM)
        memory_exhausted();
    if (!folder)
        return status_of(errno);
    for (struct dirent *entry; errno = 0, (entry = readdir(folder));) {
        if (strcmp(entry->d_name, ".") == 0 || strcmp(entry->d_name, "..") == 0)
            continue;
        found.names = arena_grow(arena, found.names, found.count, &capacity, sizeof *found.names);
        found.names[found.count++] = arena_copy(arena, entry->d_name);
    }
    int error = errno;
    closedir(folder);
    errno = error;
    if (error)
        return status_of(error);
    if (found.count)
        qsort(found.names, found.count, sizeof *found.names, by_name);
    *names = found;
    return FILE_OK;
}

static enum file_status remove_entry(const char *folder, const char *name)
{
    struct buffer path = {0};
    buffer_print(&path, "%s/%s", folder, name);
    struct stat about;
    enum file_status status = FILE_OK;
    if (lstat(buffer_string(&path), &about) != 0)
        status = errno == ENOENT ? FILE_OK : status_of(errno);
    else if (S_ISDIR(about.st_mode))
        status = folder_remove(buffer_string(&path));
    else if (unlink(buffer_string(&path)) != 0)
        status = status_of(errno);
    buffer_release(&path);
    return status;
}

enum file_status folder_remove(const char *path)
{
    struct stat about;
    if (stat(path, &about) != 0 && errno == ENOENT)
        return FILE_OK;
    struct arena arena = {0};
    struct folder_names found;
    enum file_status status = folder_list(path, &arena, &found);
    for (size_t i = 0; i < found.count && status == FILE_OK; i++)
        status = remove_entry(path, found.names[i]);
    if (status == FILE_OK && rmdir(path) != 0)
        status = status_of(errno);
    arena_release(&arena);
    return status;
}

static bool is_aside(const char *name)
{
    const char *mark = strstr(name, aside_mark);
    const char *digits = mark ? mark + sizeof aside_mark - 1 : "";
    return *digits && digits[strspn(digits, "0123456789")] == '\0';
}

void folder_clear_aside(const char *path)
{
    struct arena arena = {0};
    struct folder_names found;
    folder_list(path, &arena, &found);
    for (size_t i = 0; i < found.count; i++)
        if (is_aside(found.names[i]))
            remove_entry(path, found.names[i]);
    arena_release(&arena);
}
