/* Keys of a stage. */
#include "job/reader.h"
#include "job/tables.h"

#include <string.h>
#include <strings.h>

#define AT(member) offsetof(struct stage, member)

static void prepare_stage(void *record)
{
    struct stage *stage = record;
    struct resistance *resistances[] = {&stage->anode, &stage->screen, &stage->cathode,
                                        &stage->bias_resistance, &stage->grid_leak};
    for (size_t i = 0; i < FIELD_COUNT_OF(resistances); i++)
        resistances[i]->resistor = resistances[i]->winding = NOT_LISTED;
}

/* ---- valve: V4 6V6GT ---- */

static bool is_valve_ref(const char *text)
{
    size_t digits = strspn(text + 1, "0123456789");
    return (*text == 'V' || *text == 'v') && digits > 0 && digits <= 2 &&
           strlen(text + 1 + digits) <= 1;
}

bool valve_is_half(const char *word)
{
    static const char *const halves[] = {"triode", "pentode", "tetrode", "heptode",
                                         "hexode", "diode",   "a",       "b"};
    for (size_t i = 0; i < FIELD_COUNT_OF(halves); i++) {
        if (strcasecmp(word, halves[i]) == 0)
            return true;
    }
    return false;
}

/* The first word is a ref when it is listed under valves or looks like one. Else `6V6 GT`, `EL 84`
   and `ECL82 triode` are types, and `PL1 EL84` begins with a ref of another kind. */
static bool begins_with_ref(const struct reader *reader, const char *word, const char *rest)
{
    const struct ref_entry *entry = ref_find(reader, word);
    if ((entry && entry->kind == REF_VALVE) || is_valve_ref(word))
        return true;
    bool is_type = (word[0] >= '0' && word[0] <= '9') || !strpbrk(word, "0123456789");
    return *rest && !is_type && !valve_is_half(rest);
}

static void valve_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct stage *stage = target;
    struct line line;
    if (!reader_line(reader, "valve", node, &line))
        return;
    const char *whole = arena_text(reader->arena, line.text, line.length);
    size_t length = strcspn(whole, " ");
    const char *word = arena_text(reader->arena, whole, length);
    const char *rest = whole + length + strspn(whole + length, " ");
    stage->valve_at = line.at;
    if (begins_with_ref(reader, word, rest)) {
        stage->valve_ref = word;
        stage->valve_type = *rest ? rest : NULL;
    } else {
        stage->valve_type = whole;
    }
}

static void valve_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    (void)field;
    reader_later(reader, valve_resolve, node, record);
}

/* ---- row ---- */

static bool begins_named_value(const struct line *line)
{
    static const char *const names[] = {"va", "vg2", "vg1", "ia", "ig2",
                                        "gm", "mu",  "ra",  "pa", "pg2"};
    for (size_t i = 0; i < FIELD_COUNT_OF(names); i++) {
        size_t length = strlen(names[i]);
        if (line->length > length && line->text[length] == ' ' &&
            strncasecmp(line->text, names[i], length) == 0)
            return true;
    }
    return false;
}

static void row_read(struct reader *reader, const struct field *field, const struct node *node,
                     void *record)
{
    struct stage *stage = record;
    struct given_row *row = &stage->row;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    row->at = line.at;
    if (!begins_named_value(&line)) {
        stage->row_name = arena_text(reader->arena, line.text, line.length);
        return;
    }
    const struct named_value names[] = {
        {"va", UNIT_VOLTAGE, false, &row->va, NULL},
        {"vg2", UNIT_VOLTAGE, false, &row->vg2, NULL},
        {"vg1", UNIT_VOLTAGE, false, &row->vg1, NULL},
        {"ia", UNIT_CURRENT, false, &row->ia, NULL},
        {"ig2", UNIT_CURRENT, false, &row->ig2, NULL},
        {"gm", UNIT_CONDUCTANCE, false, &row->gm, NULL},
        {"mu", UNIT_NONE, true, &row->mu, NULL},
        {"ra", UNIT_RESISTANCE, false, &row->ra, NULL},
        {"pa", UNIT_POWER, false, &row->pa_max, NULL},
        {"pg2", UNIT_POWER, false, &row->pg2_max, NULL},
    };
    if (!line_named_values(&line, names, FIELD_COUNT_OF(names))) {
        reader_tell_line(reader, &line);
        return;
    }
    row->set = true;
    row->written = arena_text(reader->arena, line.text, line.length);
    quantity_check(reader, &row->va, "anode volts", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &row->ia, "anode current", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &row->vg2, "screen volts", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &row->ig2, "screen current", LIMIT_NOT_NEGATIVE);
    quantity_check(reader, &row->gm, "mutual conductance", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &row->mu, "amplification", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &row->ra, "anode resistance", LIMIT_ABOVE_ZERO);
}

/* ---- screen, bias, measured ---- */

static void screen_read(struct reader *reader, const struct field *field, const struct node *node,
                        void *record)
{
    struct stage *stage = record;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    const struct value_slot slots[] = {
        {"screen volts", UNIT_VOLTAGE, false, &stage->screen_volts, NULL},
        {"dropper's rating", UNIT_POWER, false, &stage->screen_rating, NULL},
        {"dropper", UNIT_RESISTANCE, false, NULL, &stage->screen},
    };
    if (!line_values(&line, slots, FIELD_COUNT_OF(slots))) {
        reader_tell_line(reader, &line);
        return;
    }
    quantity_check(reader, &stage->screen_volts, "screen volts", LIMIT_ABOVE_ZERO);
    if (stage->screen.set)
        reader_later(reader, resistance_resolve, node, &stage->screen);
}

static void bias_read(struct reader *reader, const struct field *field, const struct node *node,
                      void *record)
{
    struct stage *stage = record;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (line.length == 7 && strncasecmp(line.text, "contact", 7) == 0) {
        stage->bias = BIAS_CONTACT;
        return;
    }
    const struct value_slot slots[] = {
        {"bias", UNIT_VOLTAGE, false, &stage->bias_volts, NULL},
        {"resistance in the negative lead", UNIT_RESISTANCE, false, NULL, &stage->bias_resistance},
    };
    if (!line_values(&line, slots, FIELD_COUNT_OF(slots))) {
        reader_tell_line(reader, &line);
        return;
    }
    if (stage->bias_volts.set && stage->bias_resistance.set) {
        reader_tell(reader, line.at, DIAGNOSTIC_CONTRADICTION,
                    "give one: the other follows from it",
                    "the bias is given as volts and as a resistance");
        stage->bias_resistance = (struct resistance){false, {0}, NOT_LISTED, NOT_LISTED};
    }
    stage->bias = stage->bias_volts.set ? BIAS_FIXED : BIAS_BACK;
    if (stage->bias_resistance.set)
        reader_later(reader, resistance_resolve, node, &stage->bias_resistance);
}

static void stage_reading_read(struct reader *reader, const struct field *field,
                               const struct node *node, void *record)
{
    struct stage_reading *reading =
        (struct stage_reading *)(void *)((char *)record + field->offset);
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    const struct named_value names[] = {
        {"grid", UNIT_VOLTAGE, true, &reading->grid, NULL},
        {"cathode", UNIT_VOLTAGE, true, &reading->cathode, NULL},
        {"anode", UNIT_VOLTAGE, true, &reading->anode, NULL},
        {"screen", UNIT_VOLTAGE, true, &reading->screen, NULL},
        {"lifted", UNIT_NONE, true, NULL, &reading->parts_lifted},
    };
    if (!line_named_values(&line, names, FIELD_COUNT_OF(names))) {
        reader_tell_line(reader, &line);
        return;
    }
    reading->set = true;
    reading->at = line.at;
    reading->written = arena_text(reader->arena, line.text, line.length);
}

static const struct field measured_fields[] = {
    {.key = "found",
     .kind = FIELD_LINE,
     .offset = AT(found),
     .read = stage_reading_read,
     .start = START_BLANK,
     .text = "volts to chassis as found: grid, cathode, anode, screen; lifted: with the leaking "
             "parts lifted",
     .example = "cathode 16.2 V, anode 238 V"},
    {.key = "left",
     .kind = FIELD_LINE,
     .offset = AT(left),
     .read = stage_reading_read,
     .start = START_BLANK,
     .text = "the same as left",
     .example = "cathode 12.9 V, anode 242 V"},
};
static const struct record measured_record = {
    .name = "measured",
    .section = "measured (of a stage)",
    .text = "What a meter showed in the working set.",
    .size = sizeof(struct stage),
    .fields = measured_fields,
    .field_count = FIELD_COUNT_OF(measured_fields),
};

static const struct field stage_fields[] = {
    {.key = "valve",
     .kind = FIELD_LINE,
     .offset = AT(valve_type),
     .read = valve_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "ref and type; halves of one valve are two stages",
     .example = "V4 6V6GT"},
    {.key = "row",
     .kind = FIELD_LINE,
     .offset = AT(row),
     .read = row_read,
     .chassis = true,
     .text = "a row's name in the valve book, or the row itself; also pa, pg2: watts allowed. "
             "Default the row nearest to the stage's volts",
     .example = "va 250 V, vg2 250 V, vg1 -12.5 V, ia 45 mA, ig2 4.5 mA, gm 4.1 mA/V, ra 50k"},
    {.key = "row_source",
     .kind = FIELD_PROSE,
     .offset = AT(row.source),
     .chassis = true,
     .text = "where that row is printed",
     .example = "maker's sheet 1949"},
    {.key = "supply",
     .kind = FIELD_QUANTITY,
     .offset = AT(supply),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .start = START_BLANK,
     .text = "HT of the stage",
     .example = "262.5 V"},
    {.key = "anode",
     .kind = FIELD_RESISTANCE,
     .offset = AT(anode),
     .chassis = true,
     .start = START_BLANK,
     .text = "d.c. resistance of the load",
     .example = "T2"},
    {.key = "screen",
     .kind = FIELD_LINE,
     .offset = AT(screen),
     .read = screen_read,
     .chassis = true,
     .text = "volts that it is fed from (default the supply), resistance of the dropper (default "
             "0 ohm), and the dropper's watts",
     .example = "250 V 33k 1 W"},
    {.key = "cathode",
     .kind = FIELD_RESISTANCE,
     .offset = AT(cathode),
     .chassis = true,
     .start = START_BLANK,
     .text = "resistance to chassis; 0 ohm is allowed",
     .example = "R12"},
    {.key = "bias",
     .kind = FIELD_LINE,
     .offset = AT(bias_volts),
     .read = bias_read,
     .chassis = true,
     .text = "instead of a cathode resistor: volts at the far end of the grid leak, or contact, or "
             "the resistance in the negative HT lead",
     .example = "-19 V"},
    {.key = "others",
     .kind = FIELD_QUANTITY,
     .offset = AT(bias_others),
     .form = FORM_AMPERES,
     .limit = LIMIT_NOT_NEGATIVE,
     .chassis = true,
     .text = "current of the rest of the set through that resistance",
     .example = "28 mA"},
    {.key = "grid_leak",
     .kind = FIELD_RESISTANCE,
     .offset = AT(grid_leak),
     .chassis = true,
     .start = START_BLANK,
     .text = "resistance from grid to chassis or bias",
     .example = "470k"},
    {.key = "use",
     .kind = FIELD_CHOICE,
     .offset = AT(use),
     .choices = stage_use_choices,
     .chassis = true,
     .text = "default by the kind of valve",
     .example = "output"},
    {.key = "pushpull_with",
     .kind = FIELD_TEXT,
     .offset = AT(pushpull_with),
     .chassis = true,
     .text = "the other stage of a push-pull pair",
     .example = "output 2"},
    {.key = "measured",
     .kind = FIELD_RECORD,
     .offset = 0,
     .record = &measured_record,
     .start = START_BLANK,
     .text = "what a meter showed",
     .example = "found: cathode 16.2 V"},
};

const struct record stage_record = {
    .name = "stage",
    .section = "stages",
    .text = "Keyed by a name of your own. A resistance is a value, or the ref of a listed resistor "
            "or winding; stages that name the same one share it.",
    .size = sizeof(struct stage),
    .fields = stage_fields,
    .field_count = FIELD_COUNT_OF(stage_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = AT(name),
    .has_at = true,
    .at_offset = AT(at),
    .prepare = prepare_stage,
    .key_example = "output",
};
