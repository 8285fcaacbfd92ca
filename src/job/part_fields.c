/* Keys of resistors, windings, controls and valves, and what all markings share. */
#include "job/reader.h"
#include "job/tables.h"

#include <string.h>
#include <strings.h>

/* ---- markings ---- */

/* `polyproplene`: a word that is no type is a maker's as a rule, unless it is long and all but one.
 */
static void tell_mistyped_type(struct reader *reader, const struct marking *marking)
{
    enum { LEAST_LETTERS = 6 };
    const char *words = marking->other_words;
    if (marking->type != DIELECTRIC_UNKNOWN || !words)
        return;
    const char *first = arena_text(reader->arena, words, strcspn(words, " "));
    const char *near =
        strlen(first) < LEAST_LETTERS ? NULL : nearest_word(first, dielectric_choices);
    if (near)
        reader_tell(reader, marking->at, DIAGNOSTIC_FITTED_TYPE,
                    arena_print(reader->arena, "nearest: %s", near),
                    "'%s' is no type of capacitor, and is printed as it stands", first);
}

static void marking_read(struct reader *reader, const struct field *field, const struct node *node,
                         void *record, enum marking_kind kind)
{
    struct marking *marking = (struct marking *)(void *)((char *)record + field->offset);
    bool fitted = strcmp(field->key, "fitted") == 0;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_marking(&line, kind, fitted, marking)) {
        reader_tell_line(reader, &line);
        return;
    }
    reader_note_units(reader, &line);
    if (kind == MARKING_CAPACITOR && fitted)
        tell_mistyped_type(reader, marking);
    if (marking->colours_unknown)
        reader_tell(reader, marking->at, DIAGNOSTIC_COLOURS_UNKNOWN,
                    kind == MARKING_RESISTOR
                        ? "two or three figures, zeros, tolerance: yellow violet yellow silver; or "
                          "write the value"
                        : "six dots, top row first: white brown red grey silver red; or write the "
                          "value",
                    "no table has the colours '%s'", marking->colours);
    quantity_check(reader, &marking->value,
                   kind == MARKING_CAPACITOR ? "a capacitance" : "a resistance",
                   kind == MARKING_CAPACITOR ? LIMIT_ABOVE_ZERO : LIMIT_NOT_NEGATIVE);
    quantity_check(reader, &marking->rated, "a rating", LIMIT_ABOVE_ZERO);
}

void capacitor_marking_read(struct reader *reader, const struct field *field,
                            const struct node *node, void *record)
{
    marking_read(reader, field, node, record, MARKING_CAPACITOR);
}

static void resistor_marking_read(struct reader *reader, const struct field *field,
                                  const struct node *node, void *record)
{
    marking_read(reader, field, node, record, MARKING_RESISTOR);
}

static void winding_marking_read(struct reader *reader, const struct field *field,
                                 const struct node *node, void *record)
{
    marking_read(reader, field, node, record, MARKING_WINDING);
}

/* ---- pieces of a line ---- */

bool segment_next(const struct line *line, size_t *offset, struct segment *segment)
{
    size_t start = *offset;
    while (start < line->length && line->text[start] == ' ')
        start++;
    if (start >= line->length)
        return false;
    size_t end = start;
    while (end < line->length &&
           !(line->text[end] == ',' && (end + 1 == line->length || line->text[end + 1] == ' ')))
        end++;
    *offset = end + 1;
    while (end > start && line->text[end - 1] == ' ')
        end--;
    *segment = (struct segment){line->text + start, end - start, start};
    return true;
}

bool segment_after(const struct segment *segment, const char *name, struct segment *rest)
{
    size_t length = strlen(name);
    if (segment->length < length + 2 || strncasecmp(segment->text, name, length) != 0 ||
        segment->text[length] != ' ')
        return false;
    while (length < segment->length && segment->text[length] == ' ')
        length++;
    *rest = (struct segment){segment->text + length, segment->length - length,
                             segment->offset + length};
    return true;
}

/* ---- resistors ---- */

static void measured_resistance_read(struct reader *reader, const struct field *field,
                                     const struct node *node, void *record)
{
    struct quantity *quantity = (struct quantity *)(void *)((char *)record + field->offset);
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_measured_resistance(&line, quantity))
        reader_tell_line(reader, &line);
    quantity_check(reader, quantity, "a resistance", LIMIT_NOT_NEGATIVE);
}
#define ROW_MAKER(s)                                                                               \
    {                                                                                              \
        .key = "maker", .kind = FIELD_TEXT, .offset = offsetof(struct s, maker), .chassis = true,  \
        .text = "name on it", .example = "Dunmere"                                                 \
    }
#define ROW_SEEN(s)                                                                                \
    {                                                                                              \
        .key = "seen", .kind = FIELD_CHOICE, .offset = offsetof(struct s, seen),                   \
        .choices = seen_choices, .chassis = true, .text = "where it shows; default below",         \
        .example = "above"                                                                         \
    }
#define ROW_WAS(s)                                                                                 \
    {                                                                                              \
        .key = "was", .kind = FIELD_CHOICE, .offset = offsetof(struct s, was),                     \
        .choices = origin_choices, .text = "how it came in; default original",                     \
        .example = "earlier repair"                                                                \
    }
#define ROW_DONE(s)                                                                                \
    {                                                                                              \
        .key = "done", .kind = FIELD_CHOICE, .offset = offsetof(struct s, done),                   \
        .choices = action_choices, .start = START_BLANK,                                           \
        .text = "what was done; without it the part is open", .example = "kept"                    \
    }
#define ROW_AGE(s)                                                                                 \
    {                                                                                              \
        .key = "age", .kind = FIELD_CHOICE, .offset = offsetof(struct s, age),                     \
        .choices = age_choices, .text = "of what was fitted; default modern", .example = "period"  \
    }
#define ROW_DATE_CODE(s)                                                                           \
    {                                                                                              \
        .key = "date_code", .kind = FIELD_PROSE, .offset = offsetof(struct s, date_code),          \
        .text = "date stamped on it", .example = "FEB 51"                                          \
    }
#define ROW_BATCH(s)                                                                               \
    {                                                                                              \
        .key = "batch", .kind = FIELD_TEXT, .offset = offsetof(struct s, batch),                   \
        .text = "where the new part came from", .example = "2029-W14"                              \
    }
#define ROW_PRICE(s)                                                                               \
    {                                                                                              \
        .key = "price", .kind = FIELD_PROSE, .offset = offsetof(struct s, price),                  \
        .text = "not in the sale copy", .example = "1.20"                                          \
    }
#define ROW_REASON(s)                                                                              \
    {                                                                                              \
        .key = "reason", .kind = FIELD_PROSE, .offset = offsetof(struct s, reason),                \
        .text = "why it was done", .example = "out of tolerance"                                   \
    }
#define ROW_NOTE(s)                                                                                \
    {                                                                                              \
        .key = "note", .kind = FIELD_PROSE, .offset = offsetof(struct s, note),                    \
        .text = "anything else", .example = "body discoloured"                                     \
    }

static const struct field resistor_fields[] = {
    ROW_MAKER(resistor),
    {.key = "marked",
     .kind = FIELD_LINE,
     .offset = offsetof(struct resistor, marked),
     .read = resistor_marking_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "resistance, watts, tolerance; a bare M is refused, for old drawings write M for "
             "thousand",
     .example = "270 ohm 1 W 10 %"},
    {.key = "measured",
     .kind = FIELD_LINE,
     .offset = offsetof(struct resistor, measured),
     .read = measured_resistance_read,
     .start = START_BLANK,
     .text = "resistance as found, or open",
     .example = "266 ohm"},
    {.key = "volts",
     .kind = FIELD_QUANTITY,
     .offset = offsetof(struct resistor, volts),
     .form = FORM_VOLTS,
     .text = "across it in the working set",
     .example = "12.9 V"},
    ROW_SEEN(resistor),
    ROW_WAS(resistor),
    ROW_DATE_CODE(resistor),
    ROW_DONE(resistor),
    {.key = "fitted",
     .kind = FIELD_LINE,
     .offset = offsetof(struct resistor, fitted),
     .read = resistor_marking_read,
     .text = "what was put in",
     .example = "metal film 270 ohm 2 W 1 %"},
    ROW_AGE(resistor),
    ROW_BATCH(resistor),
    ROW_PRICE(resistor),
    ROW_REASON(resistor),
    ROW_NOTE(resistor),
};

const struct record resistor_record = {
    .name = "resistor",
    .section = "resistors",
    .text = "Keyed by ref. Its ref may stand wherever a resistance is asked for.",
    .size = sizeof(struct resistor),
    .fields = resistor_fields,
    .field_count = FIELD_COUNT_OF(resistor_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = offsetof(struct resistor, ref),
    .has_at = true,
    .at_offset = offsetof(struct resistor, at),
    .key_example = "R12",
};

/* ---- windings ---- */

static const struct field winding_fields[] = {
    ROW_MAKER(winding),
    {.key = "marked",
     .kind = FIELD_LINE,
     .offset = offsetof(struct winding, marked),
     .read = winding_marking_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "resistance at 20 C as the service sheet gives it",
     .example = "310 ohm"},
    {.key = "measured",
     .kind = FIELD_LINE,
     .offset = offsetof(struct winding, measured),
     .read = measured_resistance_read,
     .start = START_BLANK,
     .text = "resistance as found, or open",
     .example = "316 ohm"},
    {.key = "temperature",
     .kind = FIELD_QUANTITY,
     .offset = offsetof(struct winding, temperature),
     .form = FORM_CELSIUS,
     .limit = LIMIT_RANGE,
     .min = -20,
     .max = 150,
     .text = "of the winding when measured; default the bench's",
     .example = "24 C"},
    {.key = "insulation",
     .kind = FIELD_QUANTITY,
     .offset = offsetof(struct winding, insulation),
     .form = FORM_OHMS,
     .limit = LIMIT_NOT_NEGATIVE,
     .start = START_BLANK,
     .text = "to chassis or core",
     .example = "over 100 M"},
    {.key = "inductance",
     .kind = FIELD_QUANTITY,
     .offset = offsetof(struct winding, inductance),
     .form = {.unit = UNIT_INDUCTANCE},
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "of a smoothing choke",
     .example = "10 H"},
    ROW_SEEN(winding),
    ROW_WAS(winding),
    ROW_DONE(winding),
    {.key = "fitted",
     .kind = FIELD_LINE,
     .offset = offsetof(struct winding, fitted),
     .read = winding_marking_read,
     .text = "what was put in",
     .example = "rewound 305 ohm"},
    ROW_AGE(winding),
    ROW_BATCH(winding),
    ROW_PRICE(winding),
    ROW_REASON(winding),
    ROW_NOTE(winding),
};

const struct record winding_record = {
    .name = "winding",
    .section = "windings",
    .text = "Transformers, chokes, coils, speaker fields, keyed by ref. A ref may stand wherever a "
            "resistance is asked for.",
    .size = sizeof(struct winding),
    .fields = winding_fields,
    .field_count = FIELD_COUNT_OF(winding_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = offsetof(struct winding, ref),
    .has_at = true,
    .at_offset = offsetof(struct winding, at),
    .key_example = "T2",
};

/* ---- controls and valves ---- */

#define ROW_FITTED_TEXT(s, sample)                                                                 \
    {                                                                                              \
        .key = "fitted", .kind = FIELD_PROSE, .offset = offsetof(struct s, fitted),                \
        .text = "what was put in", .example = sample                                               \
    }

static const struct field control_fields[] = {
    {.key = "what",
     .kind = FIELD_PROSE,
     .offset = offsetof(struct control, what),
     .chassis = true,
     .start = START_BLANK,
     .text = "what it is",
     .example = "volume, 500k with switch"},
    ROW_SEEN(control),
    ROW_WAS(control),
    ROW_DONE(control),
    ROW_FITTED_TEXT(control, "500k log with switch"),
    ROW_AGE(control),
    ROW_PRICE(control),
    ROW_REASON(control),
};

const struct record control_record = {
    .name = "control",
    .section = "controls",
    .text = "Switches and controls, keyed by ref; counted with the original parts.",
    .size = sizeof(struct control),
    .fields = control_fields,
    .field_count = FIELD_COUNT_OF(control_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = offsetof(struct control, ref),
    .has_at = true,
    .at_offset = offsetof(struct control, at),
    .key_example = "VR1",
};

static const struct field valve_fields[] = {
    {.key = "type",
     .kind = FIELD_TEXT,
     .offset = offsetof(struct valve, type),
     .chassis = true,
     .text = "when no stage says it",
     .example = "5Y3GT"},
    ROW_MAKER(valve),
    {.key = "tested",
     .kind = FIELD_PROSE,
     .offset = offsetof(struct valve, tested),
     .start = START_BLANK,
     .text = "what the valve tester showed, against its own good figure",
     .example = "78 %"},
    ROW_DATE_CODE(valve),
    ROW_SEEN(valve),
    ROW_WAS(valve),
    ROW_DONE(valve),
    ROW_FITTED_TEXT(valve, "6V6GT, used, tests 85 %"),
    ROW_PRICE(valve),
    ROW_REASON(valve),
};

const struct record valve_record = {
    .name = "valve",
    .section = "valves",
    .text = "Keyed by ref. A type is said once: in a stage (valve: V4 6V6GT) or here.",
    .size = sizeof(struct valve),
    .fields = valve_fields,
    .field_count = FIELD_COUNT_OF(valve_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = offsetof(struct valve, ref),
    .has_at = true,
    .at_offset = offsetof(struct valve, at),
    .key_example = "V4",
};
