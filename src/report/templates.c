#include "report/templates.h"

#include "base/file.h"
#include "report/words_check.h"

#include <string.h>

enum { TEMPLATE_BYTES_MAX = 4 << 20 };

struct named_source {
    const char *name;
    struct source source;
};

/* All files are read when opened: threads share them without a lock. */
struct templates {
    struct named_source *items;
    size_t count, capacity;
    const struct words *words;
};

static bool is_template_name(const char *name)
{
    const char *point = strrchr(name, '.');
    static const char *const endings[] = {".md", ".yaml", ".html", ".css", ".js"};
    for (size_t i = 0; point && i < sizeof endings / sizeof *endings; i++)
        if (strcmp(point, endings[i]) == 0)
            return name[0] != '.';
    return false;
}

static struct named_source *find(const struct templates *templates, const char *name)
{
    for (size_t i = 0; i < templates->count; i++)
        if (strcmp(templates->items[i].name, name) == 0)
            return &templates->items[i];
    return NULL;
}

/* Read folder/name unless a file of that name was found before. */
static void take_file(struct templates *templates, const char *folder, const char *name,
                      struct arena *arena, struct diagnostics *diagnostics)
{
    if (!is_template_name(name) || find(templates, name))
        return;
    struct buffer contents = {0};
    const char *path = arena_print(arena, "%s/templates/%s", folder, name);
    enum file_status status = file_read(path, TEMPLATE_BYTES_MAX, &contents);
    if (status == FILE_OK) {
        templates->items = arena_grow(arena, templates->items, templates->count,
                                      &templates->capacity, sizeof *templates->items);
        templates->items[templates->count++] = (struct named_source){
            arena_copy(arena, name),
            {path, arena_text(arena, contents.data, contents.length), contents.length}};
    } else {
        diagnostic_add(diagnostics, &(struct source){.path = path}, (struct position){0, 0},
                       DIAGNOSTIC_FILE_UNREADABLE, NULL, "cannot read the template: %s",
                       file_status_text(status));
    }
    buffer_release(&contents);
}

static void take_folder(struct templates *templates, const char *folder, struct arena *arena,
                        struct diagnostics *diagnostics)
{
    if (!folder)
        return;
    const char *path = arena_print(arena, "%s/templates", folder);
    struct folder_names names;
    enum file_status status = folder_list(path, arena, &names);
    if (status != FILE_OK && status != FILE_MISSING)
        diagnostic_add(diagnostics, &(struct source){.path = path}, (struct position){0, 0},
                       DIAGNOSTIC_FILE_UNREADABLE, NULL, "cannot read the folder: %s",
                       file_status_text(status));
    for (size_t i = 0; i < names.count; i++)
        take_file(templates, folder, names.names[i], arena, diagnostics);
}

static const struct words *open_words(const struct templates *templates, const struct shop *shop,
                                      struct arena *arena, struct diagnostics *diagnostics)
{
    static const struct source nothing = {.path = "words.yaml", .text = "", .length = 0};
    const struct named_source *base = find(templates, "words.yaml");
    if (!base)
        diagnostic_add(diagnostics, NULL, (struct position){0, 0}, DIAGNOSTIC_FILE_UNREADABLE, NULL,
                       "there is no templates/words.yaml");
    const struct words *words =
        words_read(base ? &base->source : &nothing, NULL, arena, diagnostics);
    if (!shop->wording || !*shop->wording)
        return words;
    const char *name = arena_print(arena, "words-%s.yaml", shop->wording);
    const struct named_source *overlay = find(templates, name);
    if (overlay)
        return words_read(&overlay->source, words, arena, diagnostics);
    diagnostic_add(diagnostics, &shop->source, (struct position){0, 0}, DIAGNOSTIC_FILE_UNREADABLE,
                   "write wording: us, or make that file in the archive's templates",
                   "there is no templates/%s for the wording '%s'", name, shop->wording);
    return words;
}

struct templates *templates_open(const char *archive_folder, const char *share_folder,
                                 const struct shop *shop, struct arena *arena,
                                 struct diagnostics *diagnostics)
{
    struct templates *templates = arena_get(arena, sizeof *templates);
    take_folder(templates, archive_folder, arena, diagnostics);
    take_folder(templates, share_folder, arena, diagnostics);
    templates->words = open_words(templates, shop, arena, diagnostics);
    words_check(templates->words, arena, diagnostics);
    return templates;
}

const struct source *templates_find(const struct templates *templates, const char *name)
{
    const struct named_source *item = find(templates, name);
    return item ? &item->source : NULL;
}

const char *templates_text(const struct templates *templates, const char *name,
                           struct diagnostics *diagnostics)
{
    const struct source *source = templates_find(templates, name);
    if (!source)
        diagnostic_add(diagnostics, NULL, (struct position){0, 0}, DIAGNOSTIC_FILE_UNREADABLE, NULL,
                       "there is no templates/%s", name);
    return source ? source->text : NULL;
}

const struct words *templates_words(const struct templates *templates)
{
    return templates->words;
}
