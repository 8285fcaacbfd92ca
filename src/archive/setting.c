#include "archive/setting.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

enum { PIECE_BYTES_MAX = 64 << 20 };

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

/* The program and the fonts are megabytes that only an installation changes: size and time do. */
static void add_stamp(struct buffer *all, const char *name, const char *path)
{
    struct stat about = {0};
    if (stat(path, &about) == 0)
        buffer_print(all, "%s %lld %lld.%09ld\n", name, (long long)about.st_size,
                     (long long)about.st_mtim.tv_sec, about.st_mtim.tv_nsec);
}

typedef void (*add_one)(struct buffer *all, const char *name, const char *path);

static void add_folder(struct buffer *all, const char *folder, add_one add)
{
    struct arena arena = {0};
    struct folder_names found;
    folder_list(folder, &arena, &found);
    for (size_t i = 0; i < found.count; i++)
        if (found.names[i][0] != '.')
            add(all, found.names[i], arena_print(&arena, "%s/%s", folder, found.names[i]));
    arena_release(&arena);
}

void setting_hash(const struct archive *archive, char hash[HASH_TEXT_BYTES])
{
    struct arena arena = {0};
    struct buffer all = {0};
    buffer_text(&all, GRIDLEAK_VERSION);
    add_stamp(&all, "program", "/proc/self/exe");
    add_file(&all, "shop.yaml", arena_print(&arena, "%s/shop.yaml", archive->folder));
    if (archive->shop->logo)
        add_file(&all, "logo", arena_print(&arena, "%s/%s", archive->folder, archive->shop->logo));
    add_folder(&all, arena_print(&arena, "%s/templates", archive->folder), add_file);
    add_folder(&all, arena_print(&arena, "%s/templates", archive->share_folder), add_file);
    add_folder(&all, arena_print(&arena, "%s/fonts", archive->share_folder), add_stamp);
    struct hash sum = hash_of(all.data, all.length);
    hash_text(&sum, hash);
    buffer_release(&all);
    arena_release(&arena);
}
