/* The manual: every key of a job file and of shop.yaml, and where the shop's limits come from. */
#include "report/composition.h"

#include "job/field.h"
#include "job/place_needs.h"
#include "report/templates.h"

enum { RECORDS_MAX = 64 };

/* All records, each before those below it; the policy has a table of its own. */
struct record_list {
    const struct record *items[RECORDS_MAX];
    size_t count;
};

static bool is_policy(const struct record *record)
{
    return record->field_count > 0 && record->fields[0].why != NULL;
}

static void gather(struct record_list *list, const struct record *record)
{
    if (is_policy(record) || list->count == RECORDS_MAX)
        return;
    list->items[list->count++] = record;
    for (size_t i = 0; i < record->field_count; i++)
        if (record->fields[i].record)
            gather(list, record->fields[i].record);
}

static struct record_list all_records(void)
{
    struct record_list list = {0};
    gather(&list, &job_record);
    gather(&list, &shop_record);
    return list;
}

static const char *choices_text(struct arena *arena, const struct field *field)
{
    const char *text = NULL;
    for (const char *const *choice = field->choices; *choice; choice++)
        if (**choice)
            text = text ? arena_print(arena, "%s, %s", text, *choice) : *choice;
    return text;
}

static const char *takes_text(struct arena *arena, const struct field *field)
{
    if (field->choices)
        return choices_text(arena, field);
    if (field->record)
        return arena_print(arena, "%s: %s", field_value_text(field), field->record->section);
    return field_value_text(field);
}

static const char *example_text(struct arena *arena, const struct field *field)
{
    if (field->record)
        return NULL;
    return field->kind == FIELD_LINES ? arena_print(arena, "- %s", field->example) : field->example;
}

static struct table_builder begin(struct composition *composition, const char *id,
                                  const struct column_plan *plan, size_t columns)
{
    struct table_builder builder = table_begin(composition, id, plan, columns);
    builder.table->lined = builder.table->text_only = true;
    return builder;
}

void exhibit_fields(struct composition *composition, size_t index)
{
    static const struct column_plan plan[] = {
        {"key", NULL, NULL, COLUMN_REF, 18, 1},
        {"meaning", NULL, NULL, COLUMN_TEXT, 34, 1},
        {"takes", NULL, "takes", COLUMN_TEXT, 24, 1},
        {"example", NULL, "example", COLUMN_TEXT, 24, 1},
    };
    struct record_list records = all_records();
    const struct record *record = records.items[index];
    struct table_builder builder =
        begin(composition, arena_print(composition->arena, "keys-%zu", index), plan,
              sizeof plan / sizeof *plan);
    for (size_t i = 0; i < record->field_count; i++) {
        const struct field *field = &record->fields[i];
        struct cell *cells = table_row(&builder);
        cells[0].text = field->key;
        cells[1].text = field->required ? phrase(&composition->say, "manual.required", "meaning",
                                                 field->text, NULL)
                                        : field->text;
        cells[2].text = takes_text(composition->arena, field);
        cells[3].text = example_text(composition->arena, field);
    }
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.fields", "section", record->section, NULL));
}

void exhibit_policy_limits(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"key", NULL, NULL, COLUMN_REF, 22, 1},
        {"usual", NULL, "usual", COLUMN_TEXT, 10, 1},
        {"limits", NULL, NULL, COLUMN_TEXT, 26, 1},
        {"why", NULL, "why", COLUMN_TEXT, 42, 1},
    };
    const struct record *policy = NULL;
    for (size_t i = 0; i < shop_record.field_count; i++)
        if (shop_record.fields[i].record && is_policy(shop_record.fields[i].record))
            policy = shop_record.fields[i].record;
    struct table_builder builder =
        begin(composition, "policy-limits", plan, sizeof plan / sizeof *plan);
    for (size_t i = 0; policy && i < policy->field_count; i++) {
        const struct field *field = &policy->fields[i];
        const struct source_row *source =
            source_row(field->source == SOURCE_NONE ? SOURCE_POLICY : field->source);
        struct cell *cells = table_row(&builder);
        cells[0].text = field->key;
        cells[1].text = text_with_micro(composition->arena, field->example);
        cells[2].text = field->text;
        cells[3].text =
            phrase(&composition->say, "manual.why", "why", field->why, "source",
                   field->source == SOURCE_NONE ? NULL : source->title, "trust",
                   phrase_in(&composition->say, "trust", trust_text(source->trust)), NULL);
    }
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.policy_limits", NULL));
}

void exhibit_rule_sources(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan plan[] = {
        {"stands_in", NULL, NULL, COLUMN_TEXT, 70, 1},
        {"known", NULL, "known", COLUMN_TEXT, 30, 1},
    };
    struct table_builder builder = begin(composition, "sources", plan, sizeof plan / sizeof *plan);
    for (size_t i = 0; i < SOURCE_COUNT; i++) {
        const struct source_row *source = source_row((enum source_key)i);
        if (i == SOURCE_NONE)
            continue;
        struct cell *cells = table_row(&builder);
        cells[0].text = source->title;
        cells[1].text = phrase_in(&composition->say, "trust", trust_text(source->trust));
    }
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.rule_sources", NULL));
}

/* ---- what manual.md sees */

static void put(struct composition *composition, struct mustache_value *map, const char *key,
                const char *text)
{
    if (text && *text)
        mustache_set_text(composition->arena, map, key, text);
}

static const char *key_line(struct arena *arena, const struct record *record)
{
    if (!record->keyed)
        return NULL;
    return record->example ? arena_print(arena, "%s: %s", record->key_example, record->example)
                           : arena_print(arena, "%s:", record->key_example);
}

static struct mustache_value *keys_list(struct composition *composition)
{
    struct record_list records = all_records();
    struct mustache_value *list = mustache_list(composition->arena);
    for (size_t i = 0; i < records.count; i++) {
        const struct record *record = records.items[i];
        struct mustache_value *item = mustache_map(composition->arena);
        put(composition, item, "index", arena_print(composition->arena, "%zu", i));
        put(composition, item, "section", record->section);
        put(composition, item, "text", record->text);
        put(composition, item, "example", key_line(composition->arena, record));
        mustache_set_flag(composition->arena, item, "has_keys", record->field_count > 0);
        mustache_push(composition->arena, list, item);
    }
    return list;
}

static struct mustache_value *places_list(struct composition *composition)
{
    struct mustache_value *list = mustache_list(composition->arena);
    for (int i = PLACE_UNKNOWN + 1; i < PLACE_COUNT; i++) {
        struct mustache_value *item = mustache_map(composition->arena);
        put(composition, item, "place", place_text((enum place)i));
        put(composition, item, "needs", place_needs_text((enum place)i));
        mustache_push(composition->arena, list, item);
    }
    return list;
}

void manual_values(struct composition *composition, struct mustache_value *values)
{
    mustache_set(composition->arena, values, "keys", keys_list(composition));
    mustache_set(composition->arena, values, "places", places_list(composition));
    mustache_set_flag(composition->arena, values, "has_numbers",
                      templates_find(composition->templates, "numbers.md") != NULL);
}
