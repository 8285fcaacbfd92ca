#include "archive/seal_chain.h"

#include "base/hash.h"

#include <stdlib.h>
#include <string.h>

enum { CHAIN_BYTES_MAX = 64 << 20, FIELDS = 5 };

bool seal_line_read(const char *line, struct arena *arena, struct seal_line *read)
{
    char *fields[FIELDS], *cursor = arena_copy(arena, line);
    for (size_t i = 0; i < FIELDS; i++) {
        fields[i] = cursor;
        char *space = strchr(cursor, ' ');
        if ((space == NULL) != (i == FIELDS - 1))
            return false;
        if (space)
            *space = '\0';
        cursor = space ? space + 1 : cursor;
    }
    char *end;
    unsigned long number = strtoul(fields[0], &end, 10);
    if (*end || number == 0 || strlen(fields[3]) != HASH_TEXT_BYTES - 1 ||
        strlen(fields[4]) != HASH_TEXT_BYTES - 1)
        return false;
    *read = (struct seal_line){(unsigned)number, fields[1], fields[2], fields[3], fields[4]};
    return true;
}

static void hash_before(const struct seal_chain *chain, size_t index, char text[HASH_TEXT_BYTES])
{
    memset(text, '0', HASH_TEXT_BYTES - 1);
    text[HASH_TEXT_BYTES - 1] = '\0';
    if (index == 0)
        return;
    const char *before = chain->lines[index - 1];
    struct hash hash = hash_of(before, strlen(before));
    hash_text(&hash, text);
}

static bool follows(const struct seal_chain *chain, size_t index, struct arena *arena)
{
    struct seal_line line;
    char before[HASH_TEXT_BYTES];
    hash_before(chain, index, before);
    return seal_line_read(chain->lines[index], arena, &line) && line.number == index + 1 &&
           strcmp(line.before_hash, before) == 0;
}

bool seal_chain_read(const char *path, struct arena *arena, struct seal_chain *chain)
{
    *chain = (struct seal_chain){0};
    struct buffer contents = {0};
    enum file_status status = file_read(path, CHAIN_BYTES_MAX, &contents);
    if (status == FILE_OK) {
        size_t capacity = 0;
        char *line = arena_text(arena, contents.data, contents.length);
        for (char *end; *line; line = end) {
            end = strchr(line, '\n');
            if (end)
                *end++ = '\0';
            else
                end = line + strlen(line);
            chain->lines =
                arena_grow(arena, chain->lines, chain->count, &capacity, sizeof *chain->lines);
            chain->lines[chain->count++] = line;
        }
    }
    buffer_release(&contents);
    for (size_t i = 0; i < chain->count && !chain->broken_at; i++)
        if (!follows(chain, i, arena))
            chain->broken_at = (unsigned)i + 1;
    return (status == FILE_OK || status == FILE_MISSING) && !chain->broken_at;
}

const char *seal_chain_next(const struct seal_chain *chain, const char *date, const char *folder,
                            const char *manifest_hash, struct arena *arena)
{
    char before[HASH_TEXT_BYTES];
    hash_before(chain, chain->count, before);
    return arena_print(arena, "%zu %s %s %s %s", chain->count + 1, date, folder, manifest_hash,
                       before);
}

enum file_status seal_chain_append(const char *path, const struct seal_chain *chain,
                                   const char *line)
{
    struct buffer text = {0};
    for (size_t i = 0; i < chain->count; i++)
        buffer_print(&text, "%s\n", chain->lines[i]);
    buffer_print(&text, "%s\n", line);
    struct file_writer chain_file;
    file_begin(&chain_file, path);
    file_put(&chain_file, text.data, text.length);
    file_flush(&chain_file);
    buffer_release(&text);
    return file_finish(&chain_file);
}
