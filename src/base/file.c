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

enum { PIECE_BYTES = 1 << 18 };

enum file_status file_status_of(int error)
{
    switch (error) {
    case ENOENT:
    case ENOTDIR:
        return FILE_MISSING;
    case EACCES:
    case EPERM:
        return FILE_FORBIDDEN;
    case EROFS:
        return FILE_DISK_READ_ONLY;
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
    case FILE_DISK_READ_ONLY:
        return "the disk is read-only";
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
        return file_status_of(errno);
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
            return file_status_of(errno);
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
        return file_status_of(errno);
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
            return file_status_of(errno);
        data += written;
        length -= (size_t)written;
    }
    return FILE_OK;
}

static const char aside_mark[] = ".part-";

void file_begin(struct file_writer *writer, const char *path)
{
    *writer = (struct file_writer){0};
    buffer_text(&writer->path, path);
    buffer_print(&writer->aside, "%s%s%ld", path, aside_mark, (long)getpid());
    writer->file =
        open(buffer_string(&writer->aside), O_RDWR | O_CREAT | O_TRUNC | O_CLOEXEC, 0666);
    writer->status = writer->file < 0 ? file_status_of(errno) : FILE_OK;
}

void file_put(struct file_writer *writer, const void *data, size_t length)
{
    if (writer->status == FILE_OK)
        writer->status = write_all(writer->file, data, length);
}

void file_put_old(struct file_writer *writer, uint64_t offset, uint64_t length)
{
    int old = open(buffer_string(&writer->path), O_RDONLY | O_CLOEXEC);
    if (old < 0 && writer->status == FILE_OK)
        writer->status = file_status_of(errno);
    char *piece = memory_get(PIECE_BYTES);
    while (length > 0 && writer->status == FILE_OK) {
        size_t wanted = length < PIECE_BYTES ? (size_t)length : PIECE_BYTES;
        ssize_t got = pread(old, piece, wanted, (off_t)offset);
        if (got < 0 && errno == EINTR)
            continue;
        if (got <= 0) {
            writer->status = got < 0 ? file_status_of(errno) : FILE_FAILED;
            break;
        }
        file_put(writer, piece, (size_t)got);
        offset += (uint64_t)got;
        length -= (uint64_t)got;
    }
    free(piece);
    if (old >= 0)
        close(old);
}

/* Remove what was written aside; errno keeps saying what went wrong before. */
static void drop_aside(const struct buffer *aside)
{
    int error = errno;
    unlink(aside->data);
    errno = error;
}

/* Close what was written aside; the name is not yet given. */
static void close_aside(struct file_writer *writer)
{
    buffer_string(&writer->aside); /* ends with NUL */
    if (writer->file >= 0 && close(writer->file) != 0 && writer->status == FILE_OK)
        writer->status = file_status_of(errno);
}

static enum file_status release_writer(struct file_writer *writer)
{
    buffer_release(&writer->path);
    buffer_release(&writer->aside);
    return writer->status;
}

/* Give the file its name, over the one that has it. */
static enum file_status rename_aside(struct file_writer *writer)
{
    if (writer->status == FILE_OK && rename(writer->aside.data, buffer_string(&writer->path)) != 0)
        writer->status = file_status_of(errno);
    if (writer->status != FILE_OK)
        drop_aside(&writer->aside);
    return release_writer(writer);
}

static bool are_alike(int one, int other)
{
    char *pieces = memory_get((size_t)2 * PIECE_BYTES);
    ssize_t length, other_length;
    off_t offset = 0;
    do {
        length = pread(one, pieces, PIECE_BYTES, offset);
        other_length = pread(other, pieces + PIECE_BYTES, PIECE_BYTES, offset);
        offset += length;
    } while (length > 0 && length == other_length &&
             memcmp(pieces, pieces + PIECE_BYTES, (size_t)length) == 0);
    free(pieces);
    return length == 0 && other_length == 0;
}

/* Whether the file holds already what was written aside. */
static bool is_unchanged(struct file_writer *writer)
{
    struct stat about, old;
    const char *path = buffer_string(&writer->path);
    if (writer->status != FILE_OK || fstat(writer->file, &about) != 0 || lstat(path, &old) != 0 ||
        !S_ISREG(old.st_mode) || about.st_size != old.st_size)
        return false;
    int file = open(path, O_RDONLY | O_CLOEXEC);
    bool alike = file >= 0 && are_alike(writer->file, file);
    if (file >= 0)
        close(file);
    return alike;
}

enum file_status file_finish(struct file_writer *writer)
{
    bool same = is_unchanged(writer);
    close_aside(writer);
    if (!same || writer->status != FILE_OK)
        return rename_aside(writer);
    drop_aside(&writer->aside);
    return release_writer(writer);
}

enum file_status file_write(const char *path, const void *data, size_t length, bool *changed)
{
    if (changed)
        *changed = false;
    if (holds_already(path, data, length))
        return FILE_OK;
    struct file_writer writer;
    file_begin(&writer, path);
    file_put(&writer, data, length);
    close_aside(&writer);
    enum file_status status = rename_aside(&writer);
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
    return rename(aside, path) == 0 ? FILE_OK : file_status_of(errno);
}

enum file_status file_create(const char *path, const void *data, size_t length)
{
    struct file_writer writer;
    file_begin(&writer, path);
    file_put(&writer, data, length);
    close_aside(&writer);
    if (writer.status == FILE_OK)
        writer.status = name_if_free(writer.aside.data, path);
    drop_aside(&writer.aside);
    return release_writer(&writer);
}

bool folder_exists(const char *path)
{
    struct stat about;
    return stat(path, &about) == 0 && S_ISDIR(about.st_mode);
}

enum file_status folder_make(const char *path)
{
    if (mkdir(path, 0777) == 0)
        return FILE_OK;
    if (errno == EEXIST)
        return folder_exists(path) ? FILE_OK : FILE_NOT_REGULAR;
    const char *slash = strrchr(path, '/');
    if (errno != ENOENT || !slash || slash == path)
        return file_status_of(errno);
    char *above = memory_get((size_t)(slash - path) + 1);
    memcpy(above, path, (size_t)(slash - path));
    above[slash - path] = '\0';
    enum file_status status = folder_make(above);
    free(above);
    if (status != FILE_OK)
        return status;
    return mkdir(path, 0777) == 0 || errno == EEXIST ? FILE_OK : file_status_of(errno);
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
        return file_status_of(errno);
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
        return file_status_of(error);
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
        status = errno == ENOENT ? FILE_OK : file_status_of(errno);
    else if (S_ISDIR(about.st_mode))
        status = folder_remove(buffer_string(&path));
    else if (unlink(buffer_string(&path)) != 0)
        status = file_status_of(errno);
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
        status = file_status_of(errno);
    arena_release(&arena);
    return status;
}

/* Some file systems cannot flush a folder, and need not. */
static enum file_status flush(int file)
{
    return fsync(file) == 0 || errno == EINVAL ? FILE_OK : file_status_of(errno);
}

static enum file_status flush_one(const char *path)
{
    int file = open(path, O_RDONLY | O_CLOEXEC);
    if (file < 0)
        return file_status_of(errno);
    enum file_status status = flush(file);
    close(file);
    return status;
}

enum file_status folder_flush_names(const char *path)
{
    return flush_one(path);
}

void file_flush(struct file_writer *writer)
{
    if (writer->status == FILE_OK)
        writer->status = flush(writer->file);
}

enum file_status folder_flush(const char *path)
{
    struct arena arena = {0};
    struct folder_names found;
    enum file_status status = folder_list(path, &arena, &found);
    for (size_t i = 0; i < found.count && status == FILE_OK; i++) {
        const char *below = arena_print(&arena, "%s/%s", path, found.names[i]);
        struct stat about;
        bool is_folder = lstat(below, &about) == 0 && S_ISDIR(about.st_mode);
        status = is_folder ? folder_flush(below) : flush_one(below);
    }
    arena_release(&arena);
    return status == FILE_OK ? folder_flush_names(path) : status;
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
