/* render DATA FOLDER: every FOLDER/NAME.mustache, filled from DATA, into FOLDER/NAME.ours; partials
   are FOLDER/NAME.partial. DATA is a line a value: KIND KEY TEXT, `end` closes a map or list. */
#include "base/file.h"
#include "base/mustache.h"

#include <dirent.h>
#include <stdio.h>
#include <string.h>

struct work {
    struct arena *arena;
    const char *folder;
};

static const struct source *read_source(struct arena *arena, const char *path)
{
    struct buffer text = {0};
    struct source *source = NULL;
    if (file_read(path, 1 << 20, &text) == FILE_OK) {
        source = arena_get(arena, sizeof *source);
        *source = (struct source){path, arena_text(arena, text.data, text.length), text.length};
    }
    buffer_release(&text);
    return source;
}

static char *unescape(char *text)
{
    char *to = text;
    for (const char *from = text; *from; from++) {
        if (from[0] == '\\' && from[1] == 'n') {
            *to++ = '\n';
            from++;
        } else {
            *to++ = *from;
        }
    }
    *to = '\0';
    return text;
}

static void put(struct arena *arena, struct mustache_value *into, const char *key,
                struct mustache_value *value)
{
    if (into->kind == MUSTACHE_LIST)
        mustache_push(arena, into, value);
    else
        mustache_set(arena, into, key, value);
}

static struct mustache_value *read_data(struct arena *arena, char *text)
{
    struct mustache_value *stack[16] = {mustache_map(arena)};
    size_t depth = 0;
    char *rest = text;
    for (char *line; (line = strsep(&rest, "\n")) != NULL;) {
        char *kind = strsep(&line, " "), *key = strsep(&line, " ");
        if (strcmp(kind, "end") == 0) {
            depth--;
        } else if (strcmp(kind, "text") == 0) {
            put(arena, stack[depth], key, mustache_text(arena, unescape(line ? line : "")));
        } else if (strcmp(kind, "true") == 0) {
            mustache_set_flag(arena, stack[depth], key, true);
        } else if (strcmp(kind, "map") == 0 || strcmp(kind, "list") == 0) {
            struct mustache_value *value =
                kind[0] == 'm' ? mustache_map(arena) : mustache_list(arena);
            put(arena, stack[depth], key, value);
            stack[++depth] = value;
        }
    }
    return stack[0];
}

static enum mustache_partial_answer partial_of(void *data, const struct mustache_partial *partial,
                                               const struct source **found)
{
    const struct work *work = data;
    *found = read_source(work->arena,
                         arena_print(work->arena, "%s/%s.partial", work->folder, partial->name));
    return *found ? MUSTACHE_PARTIAL_TEMPLATE : MUSTACHE_PARTIAL_UNKNOWN;
}

static bool render(const struct work *work, const struct mustache_value *values, const char *name)
{
    struct diagnostics diagnostics = diagnostics_in(work->arena);
    struct mustache_target target = {mustache_escape_html, partial_of, (void *)work, work->arena,
                                     &diagnostics};
    const char *path = arena_print(work->arena, "%s/%s", work->folder, name);
    const struct source *source = read_source(work->arena, path);
    struct buffer out = {0};
    bool good = source && mustache_render(source, values, &target, &out);
    diagnostics_format(&diagnostics, &out);
    const char *ours = arena_print(work->arena, "%.*s.ours", (int)(strlen(path) - 9), path);
    good = file_write(ours, out.data, out.length, NULL) == FILE_OK && good;
    buffer_release(&out);
    return good;
}

int main(int count, char **arguments)
{
    struct arena arena = {0};
    struct work work = {&arena, count > 2 ? arguments[2] : "."};
    const struct source *data = count > 2 ? read_source(&arena, arguments[1]) : NULL;
    DIR *folder = opendir(work.folder);
    bool good = data && folder;
    const struct mustache_value *values =
        data ? read_data(&arena, arena_copy(&arena, data->text)) : NULL;
    for (const struct dirent *entry; folder && (entry = readdir(folder)) != NULL;) {
        const char *point = strrchr(entry->d_name, '.');
        if (good && point && strcmp(point, ".mustache") == 0)
            good = render(&work, values, entry->d_name);
    }
    if (folder)
        closedir(folder);
    if (!good)
        fprintf(stderr, "render: failed\n");
    arena_release(&arena);
    return good ? 0 : 1;
}
