/* Refs: what is keyed by one, found again without regard to case. */
#include "job/reader.h"

#include <stdlib.h>
#include <string.h>
#include <strings.h>

enum { CANDIDATES_MAX = 400 }; /* for "nearest ref": enough for any set */

static const struct {
    const char *name;
    const char *section;
} kinds[REF_KIND_COUNT] = {
    [REF_STAGE] = {"stage", "stages"},
    [REF_CAN] = {"can", "cans"},
    [REF_CAPACITOR] = {"capacitor", "capacitors"},
    [REF_RESISTOR] = {"resistor", "resistors"},
    [REF_WINDING] = {"winding", "windings"},
    [REF_CONTROL] = {"control", "controls"},
    [REF_VALVE] = {"valve", "valves"},
};

/* ---- listing ---- */

static int compare(const void *a, const void *b)
{
    const struct ref_entry *left = a, *right = b;
    int names = strcasecmp(left->ref, right->ref);
    if (names != 0)
        return names;
    return left->at.line < right->at.line ? -1 : left->at.line > right->at.line;
}

static void list_section(struct reader *reader, enum ref_kind kind)
{
    const struct node *section = node_child(reader->root, kinds[kind].section);
    if (!section) {
        reader->damaged[kind] = reader->root->damaged;
        return;
    }
    reader->damaged[kind] = section->damaged;
    int index = 0;
    for (const struct node *child = section->first; section->kind == NODE_MAPPING && child;
         child = child->next) {
        if (!line_is_ref(child->key, strlen(child->key)))
            reader_tell(reader, child->key_at, DIAGNOSTIC_REF_INVALID,
                        "letters, digits, space, '.', '-' and '/', 32 at most",
                        "'%s' cannot be the ref of a %s", child->key, kinds[kind].name);
        reader->refs[reader->ref_count++] =
            (struct ref_entry){child->key, kind, index++, child->key_at};
    }
}

static size_t count_refs(const struct reader *reader)
{
    size_t count = 0;
    for (int kind = 0; kind < REF_KIND_COUNT; kind++) {
        const struct node *section = node_child(reader->root, kinds[kind].section);
        count += section ? section->count : 0;
    }
    return count;
}

void refs_collect(struct reader *reader)
{
    reader->refs = arena_array(reader->arena, count_refs(reader), sizeof *reader->refs);
    for (int kind = 0; kind < REF_KIND_COUNT; kind++)
        list_section(reader, (enum ref_kind)kind);
    qsort(reader->refs, reader->ref_count, sizeof *reader->refs, compare);
    for (size_t i = 1; i < reader->ref_count; i++) {
        const struct ref_entry *first = &reader->refs[i - 1], *second = &reader->refs[i];
        if (strcasecmp(first->ref, second->ref) != 0)
            continue;
        /* The same key twice in one section is a duplicate key and told as such. */
        if (first->kind == second->kind && strcmp(first->ref, second->ref) == 0)
            continue;
        reader_tell(reader, second->at, DIAGNOSTIC_REF_DUPLICATE,
                    "refs are unique in the job, without regard to case",
                    "'%s' is a %s in line %u already", second->ref, kinds[first->kind].name,
                    first->at.line);
    }
}

/* ---- finding ---- */

const struct ref_entry *ref_find(const struct reader *reader, const char *ref)
{
    size_t low = 0, high = reader->ref_count;
    while (low < high) {
        size_t middle = low + (high - low) / 2;
        if (strcasecmp(reader->refs[middle].ref, ref) < 0)
            low = middle + 1;
        else
            high = middle;
    }
    if (low < reader->ref_count && strcasecmp(reader->refs[low].ref, ref) == 0)
        return &reader->refs[low];
    return NULL;
}

static const char *nearest_ref(struct reader *reader, const char *ref, bool (*fits)(enum ref_kind),
                               enum ref_kind kind)
{
    const char *candidates[CANDIDATES_MAX + 1];
    size_t count = 0;
    for (size_t i = 0; i < reader->ref_count && count < CANDIDATES_MAX; i++) {
        enum ref_kind its = reader->refs[i].kind;
        if (fits ? fits(its) : its == kind)
            candidates[count++] = reader->refs[i].ref;
    }
    candidates[count] = NULL;
    const char *near = nearest_word(ref, candidates);
    return near ? arena_print(reader->arena, "nearest: %s", near) : NULL;
}

/* `stage: V4` where the stage of V4 is called output. */
static const char *stage_of_valve(struct reader *reader, const char *ref)
{
    const struct node *section = node_child(reader->root, kinds[REF_STAGE].section);
    size_t length = strlen(ref);
    const char *stages = NULL;
    for (const struct node *stage = section ? section->first : NULL; stage; stage = stage->next) {
        const struct node *valve = node_child(stage, "valve");
        if (!valve || valve->kind != NODE_SCALAR || strncasecmp(valve->text, ref, length) != 0 ||
            (valve->text[length] && valve->text[length] != ' '))
            continue;
        stages = stages ? arena_print(reader->arena, "%s or %s", stages, stage->key) : stage->key;
    }
    return stages ? arena_print(reader->arena, "write the name of its stage: %s", stages) : NULL;
}

int ref_index(struct reader *reader, enum ref_kind kind, const char *ref, struct position at)
{
    const struct ref_entry *entry = ref_find(reader, ref);
    if (entry && entry->kind == kind)
        return entry->index;
    const char *stages = kind == REF_STAGE ? stage_of_valve(reader, ref) : NULL;
    if (entry)
        reader_tell(reader, at, DIAGNOSTIC_REF_UNKNOWN, stages, "'%s' is a %s, no %s", ref,
                    kinds[entry->kind].name, kinds[kind].name);
    else if (!reader->damaged[kind])
        reader_tell(reader, at, DIAGNOSTIC_REF_UNKNOWN,
                    stages                 ? stages
                    : strstr(ref, " and ") ? "several stand with commas between"
                                           : nearest_ref(reader, ref, NULL, kind),
                    "'%s' is not listed under '%s'", ref, kinds[kind].section);
    return NOT_LISTED;
}

/* ---- resistances ---- */

static bool has_resistance(enum ref_kind kind)
{
    return kind == REF_RESISTOR || kind == REF_WINDING;
}

/* `R33` is 0.33 ohm by IEC 60062, and a slip for R3 or R13 more often. */
static void tell_ref_or_value(struct reader *reader, const struct quantity *quantity)
{
    const char *written = quantity->written;
    size_t digits = strspn(written + 1, "0123456789");
    if ((*written != 'R' && *written != 'r') || digits == 0 || written[1 + digits] ||
        reader->damaged[REF_RESISTOR])
        return;
    reader_tell(reader, quantity->at, DIAGNOSTIC_QUANTITY_AMBIGUOUS,
                arena_print(reader->arena, "list %s under 'resistors', or write %g ohm", written,
                            quantity->value),
                "'%s' is no listed resistor, and %g ohm by its letters", written, quantity->value);
}

void resistance_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct resistance *resistance = target;
    const char *written = resistance->quantity.written;
    (void)node;
    if (!written)
        return;
    const struct ref_entry *entry = ref_find(reader, written);
    struct quantity only_written = {.written = written, .at = resistance->quantity.at};
    if (entry && has_resistance(entry->kind)) {
        /* A listed R12 wins over the 0.12 ohm of IEC 60062. */
        resistance->set = true;
        resistance->resistor = entry->kind == REF_RESISTOR ? entry->index : NOT_LISTED;
        resistance->winding = entry->kind == REF_WINDING ? entry->index : NOT_LISTED;
        resistance->quantity = only_written;
        return;
    }
    if (resistance->quantity.set) {
        tell_ref_or_value(reader, &resistance->quantity);
        return;
    }
    resistance->set = false;
    if (reader->damaged[REF_RESISTOR] || reader->damaged[REF_WINDING])
        return;
    const char *near = nearest_ref(reader, written, has_resistance, REF_RESISTOR);
    if (entry)
        reader_tell(reader, only_written.at, DIAGNOSTIC_REF_UNKNOWN, near,
                    "'%s' is a %s, no resistor or winding", written, kinds[entry->kind].name);
    else
        reader_tell(reader, only_written.at, DIAGNOSTIC_REF_UNKNOWN,
                    near ? near : "write a value, such as 470k, or list it under 'resistors'",
                    "'%s' is no resistance and no listed resistor or winding", written);
}
