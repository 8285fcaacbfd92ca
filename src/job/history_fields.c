/* Keys of readings' lists, photographs and reforming. */
#include "job/reader.h"
#include "job/tables.h"

#include <string.h>

/* ---- readings ---- */

/* Where a list of readings goes; kept until the instruments are known. */
struct reading_list {
    const char *key;
    const struct reading **readings;
    size_t *count;
    size_t capacity;
    enum reading_state state;
};

static void check_reading(struct reader *reader, const struct reading *reading)
{
    if (reading->time.set)
        quantity_check(reader, &reading->time, "the time of a reading", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &reading->set_volts, "the volts of a reading", LIMIT_ABOVE_ZERO);
    if (reading->value.set && reading->value.unit == UNIT_RESISTANCE)
        quantity_check(reader, &reading->value, "insulation", LIMIT_ABOVE_ZERO);
    if (reading->hot.set && (reading->hot.value < -20 || reading->hot.value > 105))
        reader_tell(reader, reading->hot.at, DIAGNOSTIC_VALUE_IMPOSSIBLE, NULL,
                    "%s is no temperature to read a part at", reading->hot.written);
}

static void one_line(struct reader *reader, struct reading_list *list, const struct node *node,
                     unsigned number)
{
    struct job *job = reader->job;
    struct reading_form form = {number, list->state, job->instruments, job->instrument_count,
                                job->instrument_count ? 0 : NOT_LISTED};
    const struct reading *found;
    size_t count;
    struct line line;
    if (node_is_empty(node) || !reader_line(reader, list->key, node, &line))
        return;
    if (!line_readings(&line, &form, &found, &count)) {
        reader_tell_line(reader, &line);
        return;
    }
    reader_note_units(reader, &line);
    struct reading *all = (struct reading *)*list->readings;
    for (size_t i = 0; i < count; i++) {
        check_reading(reader, &found[i]);
        all = arena_grow(reader->arena, all, *list->count, &list->capacity, sizeof *all);
        all[(*list->count)++] = found[i];
    }
    *list->readings = all;
}

static void readings_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct reading_list *list = target;
    unsigned number = 0;
    if (node->kind == NODE_SEQUENCE) {
        for (const struct node *item = node->first; item; item = item->next)
            one_line(reader, list, item, number++);
    } else {
        one_line(reader, list, node, 0);
    }
}

void readings_read(struct reader *reader, const struct field *field, const struct node *node,
                   void *record)
{
    struct reading_list *list = arena_get(reader->arena, sizeof *list);
    list->key = field->key;
    list->readings = (const struct reading **)(void *)((char *)record + field->offset);
    list->count = (size_t *)(void *)((char *)record + field->count_offset);
    list->state = strcmp(field->key, "readings") == 0 ? READING_FOUND : READING_REFORMED;
    reader_later(reader, readings_resolve, node, list);
}

/* ---- photographs ---- */

#define IN_PHOTO(member) offsetof(struct photo, member)

static void prepare_photo(void *record)
{
    ((struct photo *)record)->copies = COPY_SALE;
}

static const char *const when_choices[] = {"before", "after", NULL};

static const struct field photo_fields[] = {
    {.key = "file",
     .kind = FIELD_TEXT,
     .offset = IN_PHOTO(file),
     .required = true,
     .start = START_EXAMPLE,
     .text = "JPEG or PNG inside the archive, as seen from the job file",
     .example = "photos/2031-014/before.jpg"},
    {.key = "shows",
     .kind = FIELD_PROSE,
     .offset = IN_PHOTO(shows),
     .start = START_EXAMPLE,
     .text = "refs of what it shows",
     .example = "C14 C20"},
    {.key = "caption",
     .kind = FIELD_PROSE,
     .offset = IN_PHOTO(caption),
     .text = "words below it",
     .example = "underside as it came"},
    {.key = "pair",
     .kind = FIELD_WHOLE,
     .offset = IN_PHOTO(pair),
     .start = START_EXAMPLE,
     .text = "two with the same number are before and after, in this order",
     .example = "1"},
    {.key = "when",
     .kind = FIELD_FLAG,
     .offset = IN_PHOTO(after),
     .choices = when_choices,
     .text = "before or after, when the order does not say it",
     .example = "after"},
    {.key = "copies",
     .kind = FIELD_CHOICE,
     .offset = IN_PHOTO(copies),
     .choices = copy_choices,
     .text = "widest copy that shows it; default sale: all",
     .example = "shop"},
    {.key = "taken",
     .kind = FIELD_DATE,
     .offset = IN_PHOTO(taken),
     .text = "date",
     .example = "2031-02-03"},
};

const struct record photo_record = {
    .name = "photo",
    .section = "photos",
    .text = "A list, in the order of the plates.",
    .size = sizeof(struct photo),
    .fields = photo_fields,
    .field_count = FIELD_COUNT_OF(photo_fields),
    .has_at = true,
    .at_offset = IN_PHOTO(at),
    .prepare = prepare_photo,
};

/* ---- reforming ---- */

#define AT(member) offsetof(struct reform, member)

static void prepare_reform(void *record)
{
    struct reform *reform = record;
    reform->capacitor = NOT_LISTED;
    reform->limiter.resistor = reform->limiter.winding = NOT_LISTED;
}

static void capacitor_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct line line;
    if (reader_line(reader, "capacitor", node, &line))
        *(int *)target = ref_index(reader, REF_CAPACITOR,
                                   arena_text(reader->arena, line.text, line.length), line.at);
}

static void capacitor_ref_read(struct reader *reader, const struct field *field,
                               const struct node *node, void *record)
{
    (void)field;
    reader_later(reader, capacitor_resolve, node, &((struct reform *)record)->capacitor);
}

static const char *const across_choices[] = {"set", "across the part", NULL};

static const struct field reform_fields[] = {
    {.key = "capacitor",
     .kind = FIELD_LINE,
     .offset = AT(capacitor),
     .read = capacitor_ref_read,
     .required = true,
     .text = "ref of the section",
     .example = "C20"},
    {.key = "date",
     .kind = FIELD_DATE,
     .offset = AT(date),
     .text = "of the log",
     .example = "2031-02-10"},
    {.key = "limiter",
     .kind = FIELD_RESISTANCE,
     .offset = AT(limiter),
     .text = "resistor in series",
     .example = "47k"},
    {.key = "volts",
     .kind = FIELD_FLAG,
     .offset = AT(across_part),
     .choices = across_choices,
     .text = "where the volts of the log were read; default set",
     .example = "across the part"},
    {.key = "log",
     .kind = FIELD_LINES,
     .offset = AT(log),
     .count_offset = AT(log_count),
     .read = readings_read,
     .text = "a line a step: volts, time, current; behind a comma only what changed",
     .example = "50 V 30 s 170 uA, 5 min 21 uA, 12 min 30 s 9 uA"},
    {.key = "rest",
     .kind = FIELD_QUANTITY,
     .offset = AT(rest),
     .form = FORM_TIME,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "without volts before the deciding test",
     .example = "12 h"},
    {.key = "after_rest",
     .kind = FIELD_LINES,
     .offset = AT(after_rest),
     .count_offset = AT(after_rest_count),
     .read = readings_read,
     .text = "the deciding test",
     .example = "440 V 5 min 2.0 mA"},
    {.key = "note",
     .kind = FIELD_PROSE,
     .offset = AT(note),
     .text = "anything else",
     .example = "case stayed at 24 C"},
};

const struct record reform_record = {
    .name = "reform log",
    .section = "reforms",
    .text = "A list of logs, one for each run.",
    .size = sizeof(struct reform),
    .fields = reform_fields,
    .field_count = FIELD_COUNT_OF(reform_fields),
    .has_at = true,
    .at_offset = AT(at),
    .prepare = prepare_reform,
};
