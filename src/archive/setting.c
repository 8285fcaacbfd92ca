#include "archive/setting.h"

#include <dirent.h>
#include <stdlib.h>
#include <string.h>

enum { PIECE_BYTES_MAX = 64 << 20 };

static int by_text(const void *a, const void *b)
{
    return strcmp(*(const char *const *)a, *(const char *const *)b);
}

/* Append the hash of a file's bytes, and its name; a missing file counts as such. */
static void add_file(struct buffer *all, const char *name, const char *path)
{
    struct buffer contents = {0};
    buffer_text(all, name);
    if (file_read(path, PIECE_BYTES_MAX, &contents) == FILE_OK) {
        struct hash hash = hash_of(contents.data, contents.length);
        buffer_append(all, hash.bytes, sizeof hash.bytes);
    }
    buffer_release(&contents);
}

static void add_folder(struct buffer *all, const char *folder)
{
    struct arena arena = {0};
    const char **names = NULL;
    size_t count = 0, capacity = 0;
    DIR *entries = opendir(folder);
    for (struct dirent *entry; entries && (entry = readdir(entries));) {
        if (entry->d_name[0] == '.')
            continue;
        names = arena_grow(&arena, names, count, &capacity, sizeof *names);
        names[count++] = arena_copy(&arena, entry->d_name);
    }
    if (entries)
        closedir(entries);
    if (count)
        qsort(names, count, sizeof *names, by_text);
    for (size_t i = 0; i < count; i++)
        add_file(all, names[i], arena_print(&arena, "%s/%s", folder, names[i]));
    arena_release(&arena);
}

void setting_hash(const struct archive *archive, char hash[HASH_TEXT_BYTES])
{
    struct arena arena = {0};
    struct buffer all = {0};
    add_file(&all, "program", "/proc/self/exe");
    add_file(&all, "shop.yaml", arena_print(&arena, "%s/shop.yaml", archive->folder));
    if (archive->shop->logo)
        add_file(&all, "logo", arena_print(&arena, "%s/%s", archive->folder, archive->shop->logo));
    add_folder(&all, arena_print(&arena, "%s/templates", archive->folder));
    add_folder(&all, arena_print(&arena, "%s/templates", archive->share_folder));
    add_folder(&all, arena_print(&arena, "%s/fonts", archive->share_folder));
    struct hash sum = hash_of(all.data, all.length);
    hash_text(&sum, hash);
    buffer_release(&all);
    arena_release(&arena);
}
