/* What no single key can tell: things that must agree with each other. */
#include "job/place_needs.h"
#include "job/reader.h"

#include <stdio.h>
#include <string.h>
#include <strings.h>

/* ---- ranges ---- */

void quantity_check(struct reader *reader, const struct quantity *quantity, const char *what,
                    enum field_limit limit)
{
    if (!quantity->set)
        return;
    bool bad = false;
    const char *must = "";
    switch (limit) {
    case LIMIT_NONE:
    case LIMIT_RANGE:
        break;
    case LIMIT_ABOVE_ZERO:
        bad = !(quantity->value > 0);
        must = "above zero";
        break;
    case LIMIT_NOT_NEGATIVE:
        bad = quantity->value < 0;
        must = "zero or more";
        break;
    }
    if (bad)
        reader_tell(reader, quantity->at, DIAGNOSTIC_VALUE_IMPOSSIBLE, NULL,
                    "'%s' is impossible: %s must be %s", quantity->written, what, must);
}

void quantity_check_range(struct reader *reader, const struct quantity *quantity,
                          const struct field *field)
{
    if (field->limit != LIMIT_RANGE) {
        quantity_check(reader, quantity, arena_print(reader->arena, "'%s'", field->key),
                       field->limit);
        return;
    }
    if (quantity->set && (quantity->value < field->min || quantity->value > field->max))
        reader_tell(reader, quantity->at, DIAGNOSTIC_VALUE_IMPOSSIBLE, NULL,
                    "'%s' is impossible: '%s' lies between %g and %g %s", quantity->written,
                    field->key, field->min, field->max,
                    field->form.unit_written               ? field->form.unit_written
                    : field->form.unit == UNIT_TEMPERATURE ? "C"
                                                           : "");
}

/* ---- number ---- */

static bool is_alphanumeric(char byte)
{
    return (byte >= 'A' && byte <= 'Z') || (byte >= 'a' && byte <= 'z') ||
           (byte >= '0' && byte <= '9');
}

bool job_number_is_valid(const char *number)
{
    size_t length = strlen(number);
    bool good = length > 0 && length <= 64 && is_alphanumeric(number[0]);
    for (size_t i = 0; i < length && good; i++)
        good = is_alphanumeric(number[i]) || number[i] == '.' || number[i] == '-';
    return good;
}

static void check_number(struct reader *reader)
{
    const struct job *job = reader->job;
    if (!job->number)
        return;
    if (!job_number_is_valid(job->number)) {
        reader_tell(reader, job->number_at, DIAGNOSTIC_JOB_NAME,
                    "letters, digits, '.' and '-', beginning with a letter or digit",
                    "'%s' cannot be a job number", job->number);
        return;
    }
    const char *path = reader->source->path;
    if (!path || strcmp(path, "-") == 0 || path[0] == '<')
        return; /* from standard input: no file name to agree with */
    const char *slash = strrchr(path, '/');
    const char *name = slash ? slash + 1 : path;
    size_t length = strlen(job->number);
    if (strncmp(name, job->number, length) == 0 && strcmp(name + length, ".yaml") == 0)
        return;
    reader_tell(
        reader, job->number_at, DIAGNOSTIC_JOB_NAME,
        arena_print(reader->arena, "name the file %s.yaml, or change the number", job->number),
        "job '%s' is in a file named '%s'", job->number, name);
}

/* ---- dates ---- */

static void check_order(struct reader *reader, const struct date *first, const char *first_name,
                        const struct date *second, const char *second_name)
{
    if (first->set && second->set && date_days(first) > date_days(second))
        reader_tell(reader, second->at.line ? second->at : first->at, DIAGNOSTIC_DATES_OUT_OF_ORDER,
                    NULL, "%s %s is before %s %s", second_name, second->written, first_name,
                    first->written);
}

/* A date of the work lies between coming and going; an earlier visit's readings may be older. */
static void check_within(struct reader *reader, const struct date *date, const char *name)
{
    const struct job *job = reader->job;
    if (!date->set)
        return;
    if (!job->continues.text && job->received.set && date_days(date) < date_days(&job->received))
        reader_tell(reader, date->at, DIAGNOSTIC_DATES_OUT_OF_ORDER, NULL,
                    "%s of %s is before the set was received, %s", name, date->written,
                    job->received.written);
    bool coming_and_going_agree =
        !job->received.set || date_days(&job->received) <= date_days(&job->returned);
    if (job->returned.set && coming_and_going_agree && date_days(date) > date_days(&job->returned))
        reader_tell(reader, date->at, DIAGNOSTIC_DATES_OUT_OF_ORDER, NULL,
                    "%s of %s is after the set was returned, %s", name, date->written,
                    job->returned.written);
}

static void check_readings_dates(struct reader *reader, const struct reading *readings,
                                 size_t count)
{
    for (size_t i = 0; i < count; i++) {
        bool carried = i > 0 && readings[i].date.set && readings[i - 1].date.set &&
                       readings[i].date.at.line == readings[i - 1].date.at.line &&
                       readings[i].date.at.column == readings[i - 1].date.at.column;
        if (!carried)
            check_within(reader, &readings[i].date, "a reading");
    }
}

static void check_dates(struct reader *reader)
{
    const struct job *job = reader->job;
    check_order(reader, &job->received, "received", &job->returned, "returned");
    check_order(reader, &job->returned, "returned", &job->call_back, "call_back");
    for (size_t i = 0; i < job->capacitor_count; i++)
        check_readings_dates(reader, job->capacitors[i].readings, job->capacitors[i].reading_count);
    for (size_t i = 0; i < job->reform_count; i++) {
        check_within(reader, &job->reforms[i].date, "a reform log");
        check_readings_dates(reader, job->reforms[i].log, job->reforms[i].log_count);
        check_readings_dates(reader, job->reforms[i].after_rest, job->reforms[i].after_rest_count);
    }
}

/* ---- parts ---- */

static void check_place(struct reader *reader, const struct capacitor *capacitor,
                        const struct node *node)
{
    const char *key = place_missing_key(reader->job, capacitor);
    if (!capacitor->reading_count || capacitor->place == PLACE_UNKNOWN || !key)
        return;
    /* A key that is there but could not be read has been told about. */
    const struct node *given = node_child(node, key);
    if (node->damaged || (given && !node_is_empty(given)))
        return;
    const struct node *set = node_child(reader->root, "set");
    if (strcmp(key, "mains") == 0) {
        const struct node *mains = node_child(set, "mains");
        if (set && !set->damaged && (!mains || node_is_empty(mains)))
            reader_tell(reader, capacitor->place_at, DIAGNOSTIC_MISSING_KEY,
                        "write it so, under set: mains: 230 V",
                        "%s is judged by the mains, which 'set' does not give", capacitor->ref);
        return;
    }
    reader_tell(reader, capacitor->place_at, DIAGNOSTIC_MISSING_KEY,
                arena_print(reader->arena, "place %s needs: %s", place_text(capacitor->place),
                            capacitor->pulse ? "pulse_peak" : place_needs_text(capacitor->place)),
                "%s has readings, but '%s' is missing", capacitor->ref, key);
}

/* What is said of a can is not said again of its sections. */
static void check_section(struct reader *reader, const struct capacitor *capacitor,
                          const struct node *node)
{
    static const char *const keys[] = {"seen", "was", "done", "case", "signed"};
    for (size_t i = 0; i < FIELD_COUNT_OF(keys); i++) {
        const struct node *child = node_child(node, keys[i]);
        if (child && !node_is_empty(child))
            reader_tell(reader, child->key_at, DIAGNOSTIC_CONTRADICTION,
                        arena_print(reader->arena, "write it under cans, %s",
                                    reader->job->cans[capacitor->can].ref),
                        "%s is a section of %s: '%s' is the can's", capacitor->ref,
                        reader->job->cans[capacitor->can].ref, keys[i]);
    }
}

static void check_capacitors(struct reader *reader)
{
    const struct job *job = reader->job;
    const struct node *section = node_child(reader->root, "capacitors");
    const struct node *node = section ? section->first : NULL;
    for (size_t i = 0; i < job->capacitor_count && node; i++, node = node->next) {
        check_place(reader, &job->capacitors[i], node);
        if (job->capacitors[i].can != NOT_LISTED)
            check_section(reader, &job->capacitors[i], node);
    }
}

/* ---- what was done ---- */

static bool node_says(const struct node *node, const char *key, const char *text)
{
    const struct node *child = node_child(node, key);
    return child && child->kind == NODE_SCALAR && strcasecmp(child->text, text) == 0;
}

static void check_done(struct reader *reader, const struct node *node)
{
    static const char *const staying[] = {"kept", "kept untested", "reformed"};
    const struct node *fitted = node_child(node, "fitted");
    for (size_t i = 0; i < FIELD_COUNT_OF(staying); i++) {
        if (!node_says(node, "done", staying[i]))
            continue;
        if (fitted && !node_is_empty(fitted))
            reader_tell(reader, fitted->key_at, DIAGNOSTIC_CONTRADICTION,
                        "'fitted' goes with replaced, restuffed or disconnected",
                        "%s is %s, and something else was fitted", node->key, staying[i]);
        if (node_says(node, "was", "missing"))
            reader_tell(reader, node_child(node, "done")->key_at, DIAGNOSTIC_CONTRADICTION, NULL,
                        "%s was missing, and is %s", node->key, staying[i]);
    }
}

static void check_all_done(struct reader *reader)
{
    static const char *const sections[] = {"cans",     "capacitors", "resistors",
                                           "windings", "controls",   "valves"};
    for (size_t i = 0; i < FIELD_COUNT_OF(sections); i++) {
        const struct node *section = node_child(reader->root, sections[i]);
        if (!section || section->kind != NODE_MAPPING)
            continue;
        for (const struct node *node = section->first; node; node = node->next)
            check_done(reader, node);
    }
}

/* ---- stages and valves ---- */

static void check_pushpull(struct reader *reader)
{
    struct job *job = reader->job;
    const struct node *section = node_child(reader->root, "stages");
    const struct node *node = section ? section->first : NULL;
    for (size_t i = 0; i < job->stage_count && node; i++, node = node->next) {
        struct stage *stage = (struct stage *)&job->stages[i];
        const struct node *key = node_child(node, "pushpull_with");
        if (!stage->pushpull_with || !key)
            continue;
        int other = ref_index(reader, REF_STAGE, stage->pushpull_with, key->at);
        if (other == (int)i)
            reader_tell(reader, key->at, DIAGNOSTIC_CONTRADICTION, NULL,
                        "a stage is not in push-pull with itself");
        stage->pushpull_with = other == NOT_LISTED ? NULL : job->stages[other].name;
    }
}

/* The type of the whole valve: `ECL82 triode` is half of an ECL82. */
static const char *whole_type(struct arena *arena, const char *type)
{
    const char *space = strrchr(type, ' ');
    if (space && valve_is_half(space + 1))
        return arena_text(arena, type, (size_t)(space - type));
    return type;
}

void valves_join(struct reader *reader)
{
    struct job *job = reader->job;
    for (size_t i = 0; i < job->stage_count; i++) {
        struct stage *stage = (struct stage *)&job->stages[i];
        const struct ref_entry *entry =
            stage->valve_ref ? ref_find(reader, stage->valve_ref) : NULL;
        struct valve *valve =
            entry && entry->kind == REF_VALVE ? (struct valve *)&job->valves[entry->index] : NULL;
        if (!stage->valve_type && valve && valve->type)
            stage->valve_type = valve->type;
        else if (!stage->valve_type && stage->valve_ref && !reader->damaged[REF_VALVE])
            reader_tell(
                reader, stage->valve_at, DIAGNOSTIC_MISSING_KEY,
                arena_print(reader->arena, "write it so: valve: %s 6V6GT", stage->valve_ref),
                "nothing says of what type %s is", stage->valve_ref);
        if (!stage->valve_type || !valve)
            continue;
        const char *type = whole_type(reader->arena, stage->valve_type);
        if (!valve->type)
            valve->type = type;
        else if (strcasecmp(valve->type, type) != 0 &&
                 strcasecmp(valve->type, stage->valve_type) != 0)
            reader_tell(reader, stage->valve_at, DIAGNOSTIC_CONTRADICTION,
                        "say the type once, in the stage or under valves",
                        "%s is %s here and %s elsewhere", stage->valve_ref, stage->valve_type,
                        valve->type);
    }
}

/* ---- photographs ---- */

/* The second of a pair is the later one, unless `when` said so of the first. */
static void check_pairs(struct reader *reader)
{
    struct job *job = reader->job;
    for (size_t i = 0; i < job->photo_count; i++) {
        struct photo *photo = (struct photo *)&job->photos[i];
        const struct photo *first = NULL;
        size_t earlier = 0;
        for (size_t j = 0; j < i && photo->pair; j++) {
            if (job->photos[j].pair != photo->pair)
                continue;
            first = first ? first : &job->photos[j];
            earlier++;
        }
        if (earlier == 1)
            photo->after = !first->after;
        if (earlier > 1)
            reader_tell(reader, photo->at, DIAGNOSTIC_CONTRADICTION, NULL,
                        "a third photograph of pair %u", photo->pair);
    }
}

void job_check(struct reader *reader)
{
    check_number(reader);
    check_dates(reader);
    check_capacitors(reader);
    check_all_done(reader);
    check_pushpull(reader);
    check_pairs(reader);
}
