/*
 * The keys of a tree, each with the mapping it stands in: finds a key that is there twice. libyaml
 * lets them pass; in a record the second would silently hide the first.
 */
#ifndef JOB_YAML_KEYS_H
#define JOB_YAML_KEYS_H

#include "job/yaml_tree.h"

struct yaml_key_entry;

/* Open addressing; {0} is empty and valid. Entries belong to the arena. */
struct yaml_keys {
    struct yaml_key_entry *entries;
    size_t capacity, count;
};

/* The child of the mapping that has the key of `child` already; else NULL, and it is noted. */
const struct node *yaml_keys_put(struct yaml_keys *keys, struct arena *arena,
                                 const struct node *mapping, const struct node *child);

#endif
