#include "job/yaml_keys.h"

#include <stdint.h>
#include <string.h>

enum { FIRST_CAPACITY = 1024 }; /* a power of two, as are all */

struct yaml_key_entry {
    const struct node *mapping, *child;
};

/* FNV-1a over the key, started from the mapping. */
static size_t slot_of(const struct node *mapping, const char *key, size_t capacity)
{
    uint64_t hash = 14695981039346656037u ^ (uint64_t)(uintptr_t)mapping;
    for (; *key; key++)
        hash = (hash ^ (unsigned char)*key) * 1099511628211u;
    return (size_t)(hash ^ hash >> 29) & (capacity - 1);
}

static void grow(struct yaml_keys *keys, struct arena *arena)
{
    struct yaml_keys larger = {.capacity = keys->capacity ? keys->capacity * 4 : FIRST_CAPACITY,
                               .count = keys->count};
    larger.entries = arena_array(arena, larger.capacity, sizeof *larger.entries);
    for (size_t i = 0; i < keys->capacity; i++) {
        const struct yaml_key_entry *entry = &keys->entries[i];
        if (!entry->child)
            continue;
        size_t slot = slot_of(entry->mapping, entry->child->key, larger.capacity);
        while (larger.entries[slot].child)
            slot = (slot + 1) & (larger.capacity - 1);
        larger.entries[slot] = *entry;
    }
    *keys = larger;
}

const struct node *yaml_keys_put(struct yaml_keys *keys, struct arena *arena,
                                 const struct node *mapping, const struct node *child)
{
    if (keys->count * 2 >= keys->capacity)
        grow(keys, arena);
    size_t slot = slot_of(mapping, child->key, keys->capacity);
    for (; keys->entries[slot].child; slot = (slot + 1) & (keys->capacity - 1)) {
        const struct yaml_key_entry *entry = &keys->entries[slot];
        if (entry->mapping == mapping && strcmp(entry->child->key, child->key) == 0)
            return entry->child;
    }
    keys->entries[slot] = (struct yaml_key_entry){mapping, child};
    keys->count++;
    return NULL;
}
