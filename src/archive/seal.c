#include "archive/seal.h"

#include "archive/lock.h"
#include "archive/manifest.h"
#include "archive/seal_chain.h"
#include "base/hash.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>

/* The first number for which sealed/<job>-<copy>-<n> is free. */
static const char *free_folder(const struct seal_request *request, struct arena *arena)
{
    for (unsigned number = 1;; number++) {
        const char *folder = arena_print(arena, "%s/sealed/%s-%s-%u", request->archive_folder,
                                         request->job, copy_text(request->copy), number);
        if (access(folder, F_OK) != 0)
            return folder;
    }
}

static struct seal_result failed(enum file_status failure, const char *path)
{
    return (struct seal_result){.status = SEAL_FAILED, .folder = path, .failure = failure};
}

/* Copy the manifest's files and the manifest into a folder aside. */
static enum file_status copy_files(const char *from, const char *to,
                                   const struct manifest *manifest, struct arena *arena,
                                   const char **path)
{
    enum file_status status = FILE_OK;
    for (size_t i = 0; i <= manifest->count && status == FILE_OK; i++) {
        const char *name = i < manifest->count ? manifest->lines[i].name : MANIFEST_NAME;
        struct buffer contents = {0};
        *path = arena_print(arena, "%s/%s", to, name);
        const char *slash = strrchr(*path, '/');
        status = folder_make(arena_text(arena, *path, (size_t)(slash - *path)));
        if (status == FILE_OK)
            status = file_read(arena_print(arena, "%s/%s", from, name), MANIFEST_FILE_BYTES_MAX,
                               &contents);
        if (status == FILE_OK)
            status = file_write(*path, contents.data, contents.length, NULL);
        buffer_release(&contents);
    }
    return status;
}

/* With sealed/ held alone: what an earlier seal that was killed left aside goes, and no other
   writes into the chain between its reading and its new line. */
static struct seal_result seal_folder(const struct seal_request *request, const char *from,
                                      const struct manifest *manifest, struct arena *arena)
{
    struct seal_chain chain;
    const char *chain_path = arena_print(arena, "%s/seals.txt", request->archive_folder);
    if (!seal_chain_read(chain_path, arena, &chain))
        return (struct seal_result){.status = SEAL_CHAIN_BROKEN, .folder = chain_path};
    const char *folder = free_folder(request, arena);
    const char *aside =
        arena_print(arena, "%s/sealed/.part-%ld", request->archive_folder, (long)getpid());
    const char *name = folder + strlen(request->archive_folder) + 1;
    const char *line = seal_chain_next(&chain, request->date, name, manifest->hash, arena);
    const char *path = aside;
    folder_clear_aside(arena_print(arena, "%s/sealed", request->archive_folder));
    enum file_status status = copy_files(from, aside, manifest, arena, &path);
    /* A publish at the same time may have changed a file between the proof and the copy. */
    if (status == FILE_OK && prove(aside, arena).count) {
        folder_remove(aside);
        return (struct seal_result){.status = SEAL_DIFFERS, .folder = from};
    }
    if (status == FILE_OK) {
        path = arena_print(arena, "%s/%s", aside, SEAL_NAME);
        const char *text = arena_print(arena, "%s\n", line);
        status = file_write(path, text, strlen(text), NULL);
    }
    if (status == FILE_OK)
        status = folder_flush(aside);
    if (status == FILE_OK && rename(aside, folder) != 0)
        status = FILE_FAILED;
    if (status == FILE_OK) {
        path = chain_path;
        status = seal_chain_append(chain_path, &chain, line);
        /* A folder without its line would count as sealed and is not. */
        if (status != FILE_OK)
            folder_remove(folder);
    }
    if (status != FILE_OK) {
        folder_remove(aside);
        return failed(status, path);
    }
    /* The seal stands; a disk that cannot say that it has the new names undoes nothing. */
    folder_flush_names(arena_print(arena, "%s/sealed", request->archive_folder));
    folder_flush_names(request->archive_folder);
    return (struct seal_result){.status = SEAL_DONE, .folder = folder, .line = line};
}

struct seal_result seal(const struct seal_request *request, struct arena *arena)
{
    const char *from = arena_print(arena, "%s/jobs/%s/%s", request->output, request->job,
                                   copy_text(request->copy));
    struct proof proof = prove(from, arena);
    struct manifest manifest;
    if (!manifest_read(from, arena, &manifest))
        return (struct seal_result){.status = SEAL_NOT_PUBLISHED, .folder = from};
    if (proof.count)
        return (struct seal_result){.status = SEAL_DIFFERS, .folder = from};
    const char *sealed = arena_print(arena, "%s/sealed", request->archive_folder);
    struct lock lock;
    long holder;
    enum file_status status = folder_make(sealed);
    if (status == FILE_OK)
        lock_take(sealed, LOCK_ALONE, true, &lock, &holder, &status);
    if (status != FILE_OK)
        return failed(status, sealed);
    struct seal_result result = seal_folder(request, from, &manifest, arena);
    lock_release(&lock);
    return result;
}
