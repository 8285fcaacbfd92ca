/* Keys of readings' lists, photographs and reforming. */
#include "job/part.h"
#include "job/reader.h"
#include "job/tables.h"

#include <math.h>
#include <string.h>

/* ---- readings ---- */

/* Where a list of readings goes; kept until the instruments are known. */
struct reading_list {
    const char *key;
    const struct reading **readings;
    size_t *count;
    size_t capacity;
    enum reading_state state;
    bool in_brackets; /* a list in flow style */
    bool of_part;     /* `readings`: a log is read on a supply of its own */
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

/* The volts of a run are said once, and carried on. */
static bool volts_are_new(const struct reading *reading, const struct reading *before)
{
    return !before || before->set_volts.at.line != reading->set_volts.at.line ||
           before->set_volts.at.column != reading->set_volts.at.column;
}

static const char *settings_text(struct arena *arena, const struct instrument *instrument)
{
    const char *list = "";
    for (size_t i = 0; i < instrument->volt_count; i++)
        list = arena_print(arena, "%s%s%g V", list, i > 0 ? ", " : "", instrument->volts_v[i]);
    return list;
}

/* Volts that the instrument cannot be set to: a slip, or another instrument's reading. */
static void check_setting(struct reader *reader, const struct instrument *instrument,
                          const struct reading *reading)
{
    enum { SHOWN_AT_TERMINALS_PERCENT = 5 }; /* volts may be written as a meter showed them */
    double volts = reading->set_volts.value;
    bool known = instrument->volt_count == 0;
    for (size_t i = 0; i < instrument->volt_count && !known; i++)
        known = !(instrument->volts_v[i] > 0) || /* told already */
                fabs(volts - instrument->volts_v[i]) <=
                    instrument->volts_v[i] * SHOWN_AT_TERMINALS_PERCENT / 100;
    if (!known)
        reader_tell(reader, reading->set_volts.at, DIAGNOSTIC_INSTRUMENT_VOLTS,
                    arena_print(reader->arena, "it can be set to %s",
                                settings_text(reader->arena, instrument)),
                    "'%s' cannot be set to %s", instrument->name, reading->set_volts.written);
}

/* A little below nought is the meter's own error, more is a meter off its zero. */
static void check_sign(struct reader *reader, const struct instrument *instrument,
                       const struct reading *reading)
{
    double error = instrument->resolution.value;
    if (instrument->accuracy_unit == UNIT_CURRENT)
        error += instrument->accuracy_absolute;
    if (reading->value.unit == UNIT_CURRENT && reading->value.value < -error)
        reader_tell(reader, reading->value.at, DIAGNOSTIC_READING_BELOW_NOUGHT,
                    "set the meter to zero and look at its leads, or leave the reading out",
                    "a leakage below nought counts as 0: '%s'", reading->value.written);
}

static void check_instrument(struct reader *reader, const struct reading *reading,
                             const struct reading *before)
{
    static const struct instrument unknown = {0};
    const struct job *job = reader->job;
    bool listed = reading->instrument >= 0 && (size_t)reading->instrument < job->instrument_count;
    const struct instrument *instrument =
        listed ? &job->instruments[reading->instrument] : &unknown;
    if (volts_are_new(reading, before))
        check_setting(reader, instrument, reading);
    check_sign(reader, instrument, reading);
}

/* Between [ ] the commas of a line are YAML's, and cut it into pieces. */
static void tell_line(struct reader *reader, const struct reading_list *list,
                      const struct line *line)
{
    if (list->in_brackets)
        reader_tell(reader, line->problem.at, DIAGNOSTIC_YAML_NOTATION,
                    "write each line below the key, beginning with '- '",
                    "%s; between [ ] a comma begins a new item of '%s'", line->problem.text,
                    list->key);
    else
        reader_tell_line(reader, line);
}

/* false: the line cannot be read, and that is told. */
static bool one_line(struct reader *reader, struct reading_list *list, const struct node *node,
                     unsigned number)
{
    struct job *job = reader->job;
    struct reading_form form = {number, list->state, job->instruments, job->instrument_count,
                                leakage_instrument(job)};
    const struct reading *found;
    size_t count;
    struct line line;
    if (node_is_empty(node))
        return true;
    if (!reader_line(reader, list->key, node, &line))
        return false;
    if (node->style == STYLE_PLAIN && strstr(node->text, " - ")) {
        /* YAML takes a deeper line for more of the one above it. */
        reader_tell(reader, line.at, DIAGNOSTIC_YAML_NOTATION,
                    "the items of a list begin with '- ' in the same column",
                    "the '- ' below this line stands deeper, and goes on with it");
        return false;
    }
    if (!line_readings(&line, &form, &found, &count)) {
        tell_line(reader, list, &line);
        return false;
    }
    reader_note_units(reader, &line);
    struct reading *all = (struct reading *)*list->readings;
    for (size_t i = 0; i < count; i++) {
        check_reading(reader, &found[i]);
        if (list->of_part)
            check_instrument(reader, &found[i], i > 0 ? &found[i - 1] : NULL);
        all = arena_grow(reader->arena, all, *list->count, &list->capacity, sizeof *all);
        all[(*list->count)++] = found[i];
    }
    *list->readings = all;
    return true;
}

static void readings_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct reading_list *list = target;
    unsigned number = 0;
    list->in_brackets = node->kind == NODE_SEQUENCE && node->style == STYLE_FLOW;
    if (node->kind == NODE_SEQUENCE) {
        bool good = true;
        for (const struct node *item = node->first; item && (good || !list->in_brackets);
             item = item->next)
            good = one_line(reader, list, item, number++);
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
    list->of_part = strcmp(field->key, "readings") == 0;
    list->state = list->of_part ? READING_FOUND : READING_REFORMED;
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
