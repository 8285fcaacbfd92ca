#include "archive/dictionary.h"

#include "base/memory.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static uint32_t hash_text_of(const char *text, size_t length)
{
    uint64_t hash = 0x9E3779B97F4A7C15u ^ length;
    for (; length >= 8; length -= 8, text += 8) {
        uint64_t word;
        memcpy(&word, text, 8);
        hash = (hash ^ word) * 0xD6E8FEB86659FD93u;
        hash ^= hash >> 32;
    }
    uint64_t rest = 0;
    memcpy(&rest, text, length);
    hash = (hash ^ rest) * 0xD6E8FEB86659FD93u;
    return (uint32_t)(hash >> 32);
}

static void grow_slots(struct dictionary *dictionary)
{
    dictionary->slot_count = dictionary->slot_count ? dictionary->slot_count * 2 : 64;
    free(dictionary->slots);
    dictionary->slots = memory_get_cleared(dictionary->slot_count, sizeof *dictionary->slots);
    for (uint32_t code = 0; code < dictionary->count; code++) {
        uint32_t slot = dictionary->entries[code].hash & (dictionary->slot_count - 1);
        while (dictionary->slots[slot])
            slot = (slot + 1) & (dictionary->slot_count - 1);
        dictionary->slots[slot] = code + 1;
    }
}

static uint32_t add_entry(struct dictionary *dictionary, struct arena *arena,
                          struct dictionary_entry entry)
{
    if (dictionary->count == dictionary->capacity) {
        dictionary->capacity = dictionary->capacity ? dictionary->capacity * 2 : 16;
        dictionary->entries =
            memory_resize(dictionary->entries, dictionary->capacity * sizeof *dictionary->entries);
    }
    entry.text = arena_text(arena, entry.text, entry.length);
    dictionary->entries[dictionary->count] = entry;
    return dictionary->count++;
}

static uint32_t find_or_add(struct dictionary *dictionary, struct arena *arena, const char *text,
                            size_t length)
{
    if ((dictionary->count + 1) * 2 > dictionary->slot_count)
        grow_slots(dictionary);
    struct dictionary_entry entry = {text, (uint32_t)length, hash_text_of(text, length)};
    uint32_t slot = entry.hash & (dictionary->slot_count - 1);
    for (uint32_t found; (found = dictionary->slots[slot]) != 0;
         slot = (slot + 1) & (dictionary->slot_count - 1)) {
        const struct dictionary_entry *here = &dictionary->entries[found - 1];
        if (here->hash == entry.hash && here->length == length &&
            memcmp(here->text, text, length) == 0)
            return found - 1;
    }
    dictionary->slots[slot] = dictionary->count + 1;
    return add_entry(dictionary, arena, entry);
}

uint32_t dictionary_code(struct dictionary *dictionary, struct arena *arena, const char *text,
                         size_t length)
{
    if (dictionary->count == 0)
        find_or_add(dictionary, arena, "", 0);
    return length ? find_or_add(dictionary, arena, text, length) : 0;
}

uint32_t dictionary_find(const struct dictionary *dictionary, const char *text)
{
    for (uint32_t code = 0; code < dictionary->count; code++)
        if (strcmp(dictionary->entries[code].text, text) == 0)
            return code;
    return UINT32_MAX;
}

void column_reserve(struct column_data *column, size_t more)
{
    if (column->capacity - column->count >= more)
        return;
    size_t capacity = column->capacity ? column->capacity * 2 : 256;
    column->capacity = capacity > column->count + more ? capacity : column->count + more;
    column->codes = memory_resize(column->codes, column->capacity * sizeof *column->codes);
}

void column_push_code(struct column_data *column, uint32_t code)
{
    column_reserve(column, 1);
    column->codes[column->count++] = code;
}

void column_push(struct column_data *column, struct arena *arena, const char *text, size_t length)
{
    column_push_code(column, dictionary_code(&column->dictionary, arena, text, length));
}

double column_number(const struct column_data *column, size_t index)
{
    const char *text = column_text(column, index);
    char *end;
    double value = strtod(text, &end);
    return end == text ? NAN : value;
}

void dictionary_release(struct dictionary *dictionary)
{
    free(dictionary->entries);
    free(dictionary->slots);
    *dictionary = (struct dictionary){0};
}

void column_release(struct column_data *column)
{
    free(column->codes);
    dictionary_release(&column->dictionary);
    *column = (struct column_data){0};
}
