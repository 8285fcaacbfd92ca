#include "report/words.h"

#include "job/yaml_tree.h"

#include <stdlib.h>
#include <string.h>

struct word {
    const char *key, *text;
};

struct words {
    const struct source *source;
    struct word *items; /* sorted by key */
    size_t count, capacity;
    const struct mustache_value *terms;
};

static int by_key(const void *a, const void *b)
{
    return strcmp(((const struct word *)a)->key, ((const struct word *)b)->key);
}

static struct word *find(const struct words *words, const char *key, size_t count)
{
    struct word wanted = {.key = key};
    return count ? bsearch(&wanted, words->items, count, sizeof wanted, by_key) : NULL;
}

/* State of reading one file over another. */
struct reading_words {
    struct words *words;
    size_t below_count; /* the sorted ones of the files below */
    struct arena *arena;
    struct diagnostics *diagnostics;
};

static void take_word(struct reading_words *reading, const struct node *node, const char *key)
{
    struct words *words = reading->words;
    struct word *below = find(words, key, reading->below_count);
    if (below) {
        below->text = node->text;
        return;
    }
    if (reading->below_count) {
        diagnostic_add(reading->diagnostics, words->source, node->key_at, DIAGNOSTIC_UNKNOWN_KEY,
                       "an overlay can only change phrases of the file below it",
                       "unknown key '%s'", key);
        return;
    }
    words->items = arena_grow(reading->arena, words->items, words->count, &words->capacity,
                              sizeof *words->items);
    words->items[words->count++] = (struct word){key, node->text};
}

/* Depth is bounded by the YAML reader (JOB_DEPTH_MAX). */
static void take_map(struct reading_words *reading, const struct node *map, const char *prefix)
{
    for (const struct node *child = map->first; child; child = child->next) {
        if (!child->key)
            continue;
        const char *key =
            prefix ? arena_print(reading->arena, "%s.%s", prefix, child->key) : child->key;
        if (child->kind == NODE_MAPPING)
            take_map(reading, child, key);
        else if (child->kind == NODE_SCALAR)
            take_word(reading, child, key);
        else
            diagnostic_add(reading->diagnostics, reading->words->source, child->at,
                           DIAGNOSTIC_WRONG_SHAPE, NULL, "'%s' must be a phrase", key);
    }
}

static const struct mustache_value *terms_of(const struct words *words, struct arena *arena)
{
    static const char prefix[] = "term.";
    struct mustache_value *terms = mustache_map(arena);
    for (size_t i = 0; i < words->count; i++)
        if (strncmp(words->items[i].key, prefix, sizeof prefix - 1) == 0)
            mustache_set_text(arena, terms, words->items[i].key + sizeof prefix - 1,
                              words->items[i].text);
    return terms;
}

const struct words *words_read(const struct source *source, const struct words *below,
                               struct arena *arena, struct diagnostics *diagnostics)
{
    struct words *words = arena_get(arena, sizeof *words);
    words->source = source;
    if (below) {
        words->count = words->capacity = below->count;
        words->items = arena_array(arena, below->count, sizeof *words->items);
        if (below->count)
            memcpy(words->items, below->items, below->count * sizeof *words->items);
    }
    struct reading_words reading = {words, words->count, arena, diagnostics};
    const struct node *root = source->text ? yaml_tree_read(source, arena, diagnostics) : NULL;
    if (root && root->kind == NODE_MAPPING)
        take_map(&reading, root, NULL);
    if (!below && words->count)
        qsort(words->items, words->count, sizeof *words->items, by_key);
    words->terms = terms_of(words, arena);
    return words;
}

const char *words_get(const struct words *words, const char *key)
{
    const struct word *word = find(words, key, words->count);
    return word ? word->text : NULL;
}

const struct mustache_value *words_terms(const struct words *words)
{
    return words->terms;
}

/* ---- phrases */

static void report_missing(const struct phrasing *phrasing, const char *key)
{
    if (phrasing->diagnostics)
        diagnostic_add(phrasing->diagnostics, phrasing->words->source, (struct position){0, 0},
                       DIAGNOSTIC_WORD_MISSING, NULL, "there is no phrase '%s'", key);
}

const char *phrase_of(const struct phrasing *phrasing, const char *key,
                      struct mustache_value *values)
{
    const char *text = words_get(phrasing->words, key);
    if (!text) {
        report_missing(phrasing, key);
        return arena_copy(phrasing->arena, key);
    }
    if (!strstr(text, "{{"))
        return text;
    struct diagnostics unheard = diagnostics_in(phrasing->arena);
    struct mustache_target target = {
        .escape = mustache_escape_nothing,
        .arena = phrasing->arena,
        .diagnostics = phrasing->diagnostics ? phrasing->diagnostics : &unheard,
    };
    struct source source = {phrasing->words->source->path, text, strlen(text)};
    struct buffer out = {0};
    values = values ? values : mustache_map(phrasing->arena);
    mustache_set(phrasing->arena, values, "term", phrasing->words->terms);
    mustache_render(&source, values, &target, &out);
    const char *filled = arena_text(phrasing->arena, out.data, out.length);
    buffer_release(&out);
    return filled;
}

const char *phrase_list(const struct phrasing *phrasing, const char *const *key_and_pairs)
{
    struct mustache_value *values = mustache_map(phrasing->arena);
    for (const char *const *pair = key_and_pairs + 1; pair[0]; pair += 2)
        mustache_set_text(phrasing->arena, values, pair[0], pair[1]);
    return phrase_of(phrasing, key_and_pairs[0], values);
}

const char *phrase_in(const struct phrasing *phrasing, const char *group, const char *name)
{
    return phrase_of(phrasing, arena_print(phrasing->arena, "%s.%s", group, name), NULL);
}
