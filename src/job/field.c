#include "job/field.h"

#include "job/meant_word.h"
#include "job/reader.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>
#include <strings.h>

enum { KEYS_MAX = 96, HINT_BYTES_MAX = 160 };

static const char *const yes_and_no[] = {"no", "yes", NULL};

/* ---- what the readers share ---- */

void reader_tell(struct reader *reader, struct position at, enum diagnostic_code code,
                 const char *hint, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    const char *text = arena_print_list(reader->arena, format, arguments);
    va_end(arguments);
    diagnostic_add(reader->diagnostics, reader->source, at, code, hint, "%s", text);
}

void reader_tell_line(struct reader *reader, const struct line *line)
{
    const struct line_problem *problem = &line->problem;
    reader_tell(reader, problem->at, problem->code, problem->hint, "%s",
                problem->text ? problem->text : "cannot be read");
}

void reader_note_units(struct reader *reader, const struct line *line)
{
    if (line->old_unit)
        reader_tell(reader, line->old_unit_at, DIAGNOSTIC_UNIT_OLD, NULL,
                    "MF is read as microfarads, as it was meant");
}

static bool is_space(char byte)
{
    return byte == ' ' || byte == '\t' || byte == '\n' || byte == '\r';
}

/* A short list of words as one value: `C20, C21`. NULL: it is none. */
static const char *list_as_value(struct arena *arena, const struct node *node)
{
    const char *value = "";
    for (const struct node *item = node->first; item; item = item->next) {
        if (item->kind != NODE_SCALAR || strlen(value) > HINT_BYTES_MAX ||
            item->length > HINT_BYTES_MAX)
            return NULL;
        value = arena_print(arena, "%s%s%s", value, *value ? ", " : "", item->text);
    }
    return node->kind == NODE_SEQUENCE && *value ? value : NULL;
}

static const char *value_hint(struct arena *arena, const char *key, const struct node *node)
{
    const char *value = list_as_value(arena, node);
    if (value)
        return arena_print(arena, "write it so: %s: %s", key, value);
    if (node->style == STYLE_FLOW)
        return "a value that begins with [ or { stands in quotes";
    if (!node->key && node->kind == NODE_MAPPING)
        return "leave the colon out, or put the line in quotes";
    return "write it behind the key, on the same line";
}

bool reader_line(struct reader *reader, const char *key, const struct node *node, struct line *line)
{
    if (node->kind != NODE_SCALAR) {
        reader_tell(reader, node->at, DIAGNOSTIC_WRONG_SHAPE, value_hint(reader->arena, key, node),
                    "'%s' takes one value, no %s", key,
                    node->kind == NODE_MAPPING ? "keys of its own" : "list");
        return false;
    }
    const char *start = node->text, *end = node->text + node->length;
    while (end > start && is_space(end[-1]))
        end--;
    struct position at = node->at;
    for (; start < end && is_space(*start); at.column++)
        start++;
    if (memchr(start, '\n', (size_t)(end - start))) {
        reader_tell(reader, at, DIAGNOSTIC_WRONG_SHAPE, NULL, "'%s' is one line", key);
        return false;
    }
    *line = line_of(reader->arena, start, (size_t)(end - start), at);
    return true;
}

void reader_later(struct reader *reader, later_read *read, const struct node *node, void *target)
{
    reader->later = arena_grow(reader->arena, reader->later, reader->later_count,
                               &reader->later_capacity, sizeof *reader->later);
    reader->later[reader->later_count++] = (struct later){read, node, target};
}

/* ---- values ---- */

static void *member(void *record, size_t offset)
{
    return (char *)record + offset;
}

static void tell_cut_text(struct reader *reader, const struct field *field, const struct node *node)
{
    bool free_text = field->kind == FIELD_PROSE || field->kind == FIELD_TEXT;
    if (node->comment != COMMENT_TIGHT && !(free_text && node->comment == COMMENT_NEAR))
        return;
    reader_tell(reader, node->at, DIAGNOSTIC_TEXT_CUT,
                "put the whole value in quotes, or two spaces before a comment",
                "the value ends before ' #': YAML takes the rest of the line for a comment");
}

/* The enum's integer by the order of its choices; -1: none of them. */
static int choice_of(const char *const *choices, const struct line *line)
{
    for (int i = 0; choices[i]; i++) {
        if (choices[i][0] && strlen(choices[i]) == line->length &&
            strncasecmp(choices[i], line->text, line->length) == 0)
            return i;
    }
    return -1;
}

static const char *choice_list(struct arena *arena, const char *const *choices)
{
    const char *list = "";
    for (; *choices; choices++) {
        if (**choices)
            list = arena_print(arena, "%s%s%s", list, *list ? ", " : "", *choices);
    }
    return list;
}

static int choice_read(struct reader *reader, const struct field *field, const struct line *line,
                       const char *const *choices)
{
    int choice = choice_of(choices, line);
    if (choice >= 0)
        return choice;
    const char *word = arena_text(reader->arena, line->text, line->length);
    const char *meant = meant_word_hint(reader->arena, word, choices, "nearest");
    const char *list = choice_list(reader->arena, choices);
    reader_tell(reader, line->at, DIAGNOSTIC_UNKNOWN_CHOICE,
                meant ? meant : arena_print(reader->arena, "one of: %s", list),
                "'%s' is no choice for '%s'", word, field->key);
    return -1;
}

static bool whole_read(struct reader *reader, const struct field *field, const struct line *line,
                       unsigned *whole)
{
    unsigned value = 0;
    bool good = line->length > 0 && line->length < 7;
    for (size_t i = 0; i < line->length && good; i++) {
        good = line->text[i] >= '0' && line->text[i] <= '9';
        value = value * 10 + (unsigned)(line->text[i] - '0');
    }
    if (good)
        *whole = value;
    else
        reader_tell(reader, line->at, DIAGNOSTIC_QUANTITY_UNREADABLE, "write it so: 12",
                    "'%.*s' is no whole number for '%s'", (int)line->length, line->text,
                    field->key);
    return good;
}

static void number_read(struct reader *reader, const struct field *field, struct line *line,
                        double *number)
{
    struct quantity quantity = {0};
    if (!line_quantity(line, &field->form, &quantity)) {
        reader_tell_line(reader, line);
        return;
    }
    quantity_check_range(reader, &quantity, field);
    *number = field->kind == FIELD_FRACTION ? quantity.value / 100 : quantity.value;
}

static void resistance_read(struct reader *reader, struct line *line, const struct node *node,
                            struct resistance *resistance)
{
    if (!line_resistance(line, resistance)) {
        reader_tell_line(reader, line);
        return;
    }
    quantity_check(reader, &resistance->quantity, "a resistance", LIMIT_NOT_NEGATIVE);
    reader_later(reader, resistance_resolve, node, resistance);
}

static void text_read(struct reader *reader, const struct field *field, const struct node *node,
                      void *record)
{
    if (node->kind != NODE_SCALAR) {
        reader_tell(reader, node->at, DIAGNOSTIC_WRONG_SHAPE,
                    arena_print(reader->arena, "write %s: | and the text on the lines below it",
                                field->key),
                    "'%s' takes text, no %s", field->key,
                    node->kind == NODE_MAPPING ? "keys of its own" : "list");
        return;
    }
    *(struct prose *)member(record, field->offset) = (struct prose){node->text, node->at};
}

static void line_kinds_read(struct reader *reader, const struct field *field,
                            const struct node *node, void *record)
{
    struct line line;
    void *target = member(record, field->offset);
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (field->at_offset)
        *(struct position *)member(record, field->at_offset) = line.at;
    bool good = true, known = true;
    int choice;
    switch (field->kind) {
    case FIELD_TEXT:
        *(const char **)target = arena_text(reader->arena, line.text, line.length);
        break;
    case FIELD_CHOICE:
        if ((choice = choice_read(reader, field, &line, field->choices)) >= 0)
            memcpy(target, &choice, sizeof choice);
        break;
    case FIELD_FLAG:
        choice = choice_read(reader, field, &line, field->choices ? field->choices : yes_and_no);
        if (choice >= 0)
            *(bool *)target = choice == 1;
        known = choice >= 0;
        break;
    case FIELD_WHOLE:
        known = whole_read(reader, field, &line, target);
        break;
    case FIELD_QUANTITY:
        if ((good = line_quantity(&line, &field->form, target)))
            quantity_check_range(reader, target, field);
        break;
    case FIELD_NUMBER:
    case FIELD_FRACTION:
        number_read(reader, field, &line, target);
        break;
    case FIELD_RESISTANCE:
        resistance_read(reader, &line, node, target);
        break;
    case FIELD_DATE:
        good = line_date(&line, target);
        break;
    case FIELD_YEARS:
        good = line_years(&line, target);
        break;
    case FIELD_SIZE:
        good = line_dimensions(&line, target);
        break;
    case FIELD_PROSE:
    case FIELD_LINE:
    case FIELD_LINES:
    case FIELD_FREE:
    case FIELD_RECORD:
    case FIELD_TABLE:
    case FIELD_LIST:
        break;
    }
    if (!good)
        reader_tell_line(reader, &line);
    else
        reader_note_units(reader, &line);
    if (good && known && field->set_offset)
        *(bool *)member(record, field->set_offset) = true;
}

/* ---- records ---- */

/* A fact as it would stand below a record's key: what it cannot do without, or what is marked on
   the part, else its first. */
static const char *fact_example(struct reader *reader, const struct field *field)
{
    const struct record *record = field->kind == FIELD_RECORD ? field->record : NULL;
    if (!record || !record->field_count)
        return "key: value";
    const struct field *fact = &record->fields[0];
    for (size_t i = 0; i < record->field_count; i++)
        if (record->fields[i].required || strcmp(record->fields[i].key, "marked") == 0)
            fact = &record->fields[i];
    return fact->record ? "key: value"
                        : arena_print(reader->arena, "%s: %s", fact->key, fact->example);
}

static bool expect(struct reader *reader, const struct field *field, const struct node *node,
                   enum node_kind kind)
{
    if (node->kind == kind)
        return true;
    if (kind == NODE_MAPPING)
        reader_tell(reader, node->at, DIAGNOSTIC_WRONG_SHAPE,
                    node->kind == NODE_SCALAR && strchr(node->text, ':')
                        ? "a fact is 'key: value', with a space after the colon"
                        : arena_print(reader->arena,
                                      "write each on a line of its own below it, as '%s'",
                                      fact_example(reader, field)),
                    "'%s' takes keys of its own, no %s", field->key,
                    node->kind == NODE_SCALAR ? "single value" : "list");
    else
        reader_tell(reader, node->at, DIAGNOSTIC_WRONG_SHAPE,
                    "write each below it, beginning with '- '", "'%s' takes a list", field->key);
    return false;
}

static void free_read(struct reader *reader, const struct field *field, const struct node *node,
                      void *record)
{
    if (!expect(reader, field, node, NODE_MAPPING))
        return;
    struct named_prose *items = arena_array(reader->arena, node->count, sizeof *items);
    size_t count = 0;
    for (const struct node *child = node->first; child; child = child->next) {
        if (child->kind != NODE_SCALAR) {
            reader_tell(reader, child->at, DIAGNOSTIC_WRONG_SHAPE, NULL, "'%s' takes text",
                        child->key);
            continue;
        }
        tell_cut_text(reader, field, child);
        items[count++] = (struct named_prose){child->key, {child->text, child->at}};
    }
    *(struct named_prose **)member(record, field->offset) = items;
    *(size_t *)member(record, field->count_offset) = count;
}

static void one_record_read(struct reader *reader, const struct field *field,
                            const struct node *node, void *out)
{
    const struct record *record = field->record;
    if (record->prepare)
        record->prepare(out);
    if (record->keyed)
        *(const char **)member(out, record->key_offset) = node->key;
    if (record->has_at)
        *(struct position *)member(out, record->at_offset) = node->key ? node->key_at : node->at;
    if (node_is_empty(node))
        return;
    if (record->read && node->kind == NODE_SCALAR) {
        record->read(reader, field, node, out);
        return;
    }
    struct field named = {
        .key = node->key ? node->key : record->name, .kind = FIELD_RECORD, .record = record};
    if (record->fields && expect(reader, &named, node, NODE_MAPPING))
        record_read(reader, record, node, out);
    else if (!record->fields)
        reader_tell(reader, node->at, DIAGNOSTIC_WRONG_SHAPE,
                    arena_print(reader->arena, "write it so: %s: %s", named.key, record->example),
                    "'%s' is one line", named.key);
}

static void many_read(struct reader *reader, const struct field *field, const struct node *node,
                      void *record)
{
    if (!expect(reader, field, node, field->kind == FIELD_TABLE ? NODE_MAPPING : NODE_SEQUENCE))
        return;
    size_t size = field->record->size;
    char *items = arena_array(reader->arena, node->count, size);
    size_t count = 0;
    for (const struct node *child = node->first; child; child = child->next)
        one_record_read(reader, field, child, items + size * count++);
    *(void **)member(record, field->offset) = items;
    *(size_t *)member(record, field->count_offset) = count;
}

/* Read one value into its member: what the kind says. */
static void value_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    if (node_is_empty(node)) /* nothing written: not given */
        return;
    if (node->kind == NODE_SCALAR)
        tell_cut_text(reader, field, node);
    switch (field->kind) {
    case FIELD_PROSE:
        text_read(reader, field, node, record);
        return;
    case FIELD_LINE:
    case FIELD_LINES:
        field->read(reader, field, node, record);
        return;
    case FIELD_FREE:
        free_read(reader, field, node, record);
        return;
    case FIELD_RECORD:
        if (expect(reader, field, node, NODE_MAPPING))
            record_read(reader, field->record, node, member(record, field->offset));
        return;
    case FIELD_TABLE:
    case FIELD_LIST:
        many_read(reader, field, node, record);
        return;
    case FIELD_TEXT:
    case FIELD_CHOICE:
    case FIELD_FLAG:
    case FIELD_WHOLE:
    case FIELD_QUANTITY:
    case FIELD_NUMBER:
    case FIELD_FRACTION:
    case FIELD_RESISTANCE:
    case FIELD_DATE:
    case FIELD_YEARS:
    case FIELD_SIZE:
        line_kinds_read(reader, field, node, record);
    }
}

/* ---- keys ---- */

/* Inside { } a comma begins a new key, and `key:value` is a key without a value. */
static bool tell_flow_bite(struct reader *reader, const struct node *mapping,
                           const struct node *before, const struct node *node)
{
    if (mapping->style != STYLE_FLOW || !node_is_empty(node))
        return false;
    const char *colon = strchr(node->key, ':');
    if (colon)
        reader_tell(reader, node->key_at, DIAGNOSTIC_YAML_NOTATION,
                    arena_print(reader->arena, "write it so: %.*s: %s", (int)(colon - node->key),
                                node->key, colon + 1),
                    "no space after the colon");
    else if (before && before->kind == NODE_SCALAR)
        reader_tell(reader, node->key_at, DIAGNOSTIC_YAML_NOTATION,
                    arena_print(reader->arena, "write it so: %s: '%s, %s'", before->key,
                                before->text, node->key),
                    "a comma inside { } begins a new key");
    else
        return false;
    return true;
}

static const char *keys_hint(struct reader *reader, const struct record *record, const char *wrong)
{
    const char *keys[KEYS_MAX + 1];
    size_t count = 0;
    for (; count < record->field_count && count < KEYS_MAX; count++)
        keys[count] = record->fields[count].key;
    keys[count] = NULL;
    const char *meant = meant_word_hint(reader->arena, wrong, keys, "nearest key");
    if (meant)
        return meant;
    const char *list = choice_list(reader->arena, keys);
    return strlen(list) < HINT_BYTES_MAX ? arena_print(reader->arena, "keys here: %s", list)
                                         : "'gridleak fields' lists the keys";
}

static void tell_unknown(struct reader *reader, const struct record *record,
                         const struct node *node, const struct node *child)
{
    reader_tell(reader, child->key_at, DIAGNOSTIC_UNKNOWN_KEY,
                keys_hint(reader, record, child->key), "unknown key '%s'", child->key);
    /* It may be any key of the record: nothing is called missing there any more. */
    ((struct node *)node)->damaged = true;
}

/* Rows are mostly written in the table's order: look from the last hit on. */
static const struct field *field_of(const struct record *record, const char *key, size_t *hit)
{
    for (size_t i = 0; i < record->field_count; i++) {
        size_t at = (*hit + i) % record->field_count;
        if (strcmp(record->fields[at].key, key) == 0) {
            *hit = at;
            return &record->fields[at];
        }
    }
    return NULL;
}

static void tell_missing(struct reader *reader, const struct record *record,
                         const struct node *node)
{
    for (size_t i = 0; i < record->field_count && !node->damaged; i++) {
        const struct field *field = &record->fields[i];
        if (!field->required)
            continue;
        const struct node *child = node_child(node, field->key);
        if (child && (!node_is_empty(child) || child->damaged))
            continue;
        reader_tell(reader,
                    child       ? child->key_at
                    : node->key ? node->key_at
                                : node->at,
                    DIAGNOSTIC_MISSING_KEY,
                    arena_print(reader->arena, "write it so: %s: %s", field->key, field->example),
                    "'%s' is missing in this %s", field->key, record->name);
    }
}

void record_read(struct reader *reader, const struct record *record, const struct node *node,
                 void *out)
{
    const struct node *before = NULL;
    size_t hit = 0;
    for (const struct node *child = node->first; child; before = child, child = child->next) {
        const struct field *field = field_of(record, child->key, &hit);
        if (field)
            value_read(reader, field, child, out);
        else if (!child->damaged && !tell_flow_bite(reader, node, before, child))
            tell_unknown(reader, record, node, child);
    }
    tell_missing(reader, record, node);
}

/* ---- in words ---- */

const char *field_value_text(const struct field *field)
{
    switch (field->kind) {
    case FIELD_TEXT:
        return "one line of text";
    case FIELD_PROSE:
        return "text";
    case FIELD_CHOICE:
        return "one of";
    case FIELD_FLAG:
        return "yes or no";
    case FIELD_WHOLE:
        return "whole number";
    case FIELD_QUANTITY:
    case FIELD_NUMBER:
        return field->form.unit == UNIT_NONE ? "number" : unit_name(field->form.unit);
    case FIELD_FRACTION:
        return "per cent";
    case FIELD_RESISTANCE:
        return "resistance, or a ref";
    case FIELD_DATE:
        return "date";
    case FIELD_YEARS:
        return "year";
    case FIELD_SIZE:
        return "size";
    case FIELD_LINE:
        return "line";
    case FIELD_LINES:
        return "list of lines";
    case FIELD_FREE:
        return "keys of your own, each with text";
    case FIELD_RECORD:
        return "keys of its own";
    case FIELD_TABLE:
        return "keyed, one below the other";
    case FIELD_LIST:
        return "list of records";
    }
    return "";
}
