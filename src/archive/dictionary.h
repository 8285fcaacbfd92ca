/*
 * Texts as small numbers: a dictionary gives each distinct text a code in the order of their first
 * coming, and a column is an array of codes with its dictionary. "" is unknown and always code 0.
 */
#ifndef ARCHIVE_DICTIONARY_H
#define ARCHIVE_DICTIONARY_H

#include "base/arena.h"

#include <stddef.h>
#include <stdint.h>

struct dictionary_entry {
    const char *text;
    uint32_t length, hash;
};
struct dictionary {
    struct dictionary_entry *entries; /* by code; entries[0] is "" */
    uint32_t count, capacity;
    uint32_t *slots; /* code + 1, 0: free */
    uint32_t slot_count;
};
struct column_data {
    uint32_t *codes;
    size_t count, capacity;
    struct dictionary dictionary;
};

/* The code of a text, added when new; its letters are copied into the arena. */
uint32_t dictionary_code(struct dictionary *dictionary, struct arena *arena, const char *text,
                         size_t length);

/* The code of a text, letter by letter; UINT32_MAX: it has none. Looks through all of them. */
uint32_t dictionary_find(const struct dictionary *dictionary, const char *text);

/* Make room for `more` rows behind those of a column. */
void column_reserve(struct column_data *column, size_t more);
/* Put one more row behind a column: a code that its dictionary has, or a text. */
void column_push_code(struct column_data *column, uint32_t code);
void column_push(struct column_data *column, struct arena *arena, const char *text, size_t length);

/* The text of row `index`. */
static inline const char *column_text(const struct column_data *column, size_t index)
{
    return column->dictionary.entries[column->codes[index]].text;
}
/* Its number; NaN: unknown. */
double column_number(const struct column_data *column, size_t index);

/* {0} is empty and valid; these give the memory back that is not the arena's. */
void dictionary_release(struct dictionary *dictionary);
void column_release(struct column_data *column);

#endif
