#include "archive/manifest.h"

#include "base/file.h"

#include <string.h>

/* `64 hex digits, two spaces, name`; a name may not leave the folder. */
static bool read_line(char *line, struct manifest_line *read)
{
    enum { DIGITS = HASH_TEXT_BYTES - 1 };
    if (strspn(line, "0123456789abcdef") != DIGITS || strncmp(line + DIGITS, "  ", 2) != 0)
        return false;
    memcpy(read->hash, line, DIGITS);
    read->hash[DIGITS] = '\0';
    read->name = line + DIGITS + 2;
    return read->name[0] && read->name[0] != '/' && !strstr(read->name, "..");
}

bool manifest_read(const char *folder, struct arena *arena, struct manifest *manifest)
{
    *manifest = (struct manifest){0};
    struct buffer contents = {0};
    enum file_status status = file_read(arena_print(arena, "%s/%s", folder, MANIFEST_NAME),
                                        MANIFEST_FILE_BYTES_MAX, &contents);
    if (status == FILE_OK) {
        struct hash hash = hash_of(contents.data, contents.length);
        hash_text(&hash, manifest->hash);
        size_t capacity = 0;
        char *line = arena_text(arena, contents.data, contents.length);
        while (*line) {
            char *end = strchr(line, '\n');
            if (end)
                *end = '\0';
            struct manifest_line read;
            if (read_line(line, &read)) {
                manifest->lines = arena_grow(arena, manifest->lines, manifest->count, &capacity,
                                             sizeof *manifest->lines);
                manifest->lines[manifest->count++] = read;
            } else if (!manifest->unreadable) {
                manifest->unreadable = line;
            }
            line = end ? end + 1 : line + strlen(line);
        }
    }
    buffer_release(&contents);
    return status == FILE_OK;
}

bool manifest_hash_file(const char *folder, const char *name, char hash[HASH_TEXT_BYTES])
{
    struct arena arena = {0};
    struct buffer contents = {0};
    bool good = file_read(arena_print(&arena, "%s/%s", folder, name), MANIFEST_FILE_BYTES_MAX,
                          &contents) == FILE_OK;
    if (good) {
        struct hash sum = hash_of(contents.data, contents.length);
        hash_text(&sum, hash);
    }
    buffer_release(&contents);
    arena_release(&arena);
    return good;
}
