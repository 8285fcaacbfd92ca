/* Keys of an instrument. */
#include "job/reader.h"
#include "job/tables.h"

#define AT(member) offsetof(struct instrument, member)

static void accuracy_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct instrument *instrument = target;
    struct line line;
    struct accuracy accuracy = {0};
    if (!reader_line(reader, "accuracy", node, &line))
        return;
    if (!line_accuracy(&line, &accuracy)) {
        reader_tell_line(reader, &line);
        return;
    }
    instrument->accuracy_set = true;
    instrument->accuracy_written = arena_text(reader->arena, line.text, line.length);
    instrument->accuracy_percent = accuracy.reading_percent;
    instrument->full_scale_percent = accuracy.full_scale_percent;
    if (accuracy.full_scale.set)
        instrument->full_scale = accuracy.full_scale;
    instrument->accuracy_absolute = accuracy.absolute;
    instrument->accuracy_unit = accuracy.absolute_unit;
    if (accuracy.digits > 0 && !instrument->resolution.set) {
        reader_tell(reader, line.at, DIAGNOSTIC_MISSING_KEY, "write it so: resolution: 0.01 uA",
                    "digits are of the 'resolution', which %s does not give", instrument->name);
        return;
    }
    if (accuracy.digits > 0) {
        if (accuracy.absolute_unit == UNIT_NONE)
            instrument->accuracy_unit = instrument->resolution.unit;
        instrument->accuracy_absolute += accuracy.digits * instrument->resolution.value;
    }
}

static void accuracy_read(struct reader *reader, const struct field *field, const struct node *node,
                          void *record)
{
    (void)field;
    reader_later(reader, accuracy_resolve, node, record);
}

/* In the unit of what it measures: amperes, ohms or volts. */
static void any_quantity_read(struct reader *reader, const struct field *field,
                              const struct node *node, void *record)
{
    struct quantity *quantity = (struct quantity *)(void *)((char *)record + field->offset);
    const struct quantity_form any = {.unit = UNIT_COUNT};
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_quantity(&line, &any, quantity))
        reader_tell_line(reader, &line);
    quantity_check(reader, quantity, field->text, LIMIT_ABOVE_ZERO);
}

static void volts_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    struct instrument *instrument = record;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_list(&line, UNIT_VOLTAGE, &instrument->volts_v, &instrument->volt_count)) {
        reader_tell_line(reader, &line);
        return;
    }
    for (size_t i = 0; i < instrument->volt_count; i++) {
        if (instrument->volts_v[i] <= 0) {
            reader_tell(reader, line.at, DIAGNOSTIC_VALUE_IMPOSSIBLE, NULL,
                        "test volts must be above zero");
            return;
        }
    }
}

static const struct field instrument_fields[] = {
    {.key = "description",
     .kind = FIELD_TEXT,
     .offset = AT(description),
     .start = START_BLANK,
     .chassis = true,
     .text = "model, serial",
     .example = "capacitor bridge, serial 2204"},
    {.key = "accuracy",
     .kind = FIELD_LINE,
     .offset = AT(accuracy_absolute),
     .read = accuracy_read,
     .start = START_BLANK,
     .chassis = true,
     .text = "per cent of the reading, of full scale, digits, or a value; default 3 % + 1 digit",
     .example = "2 % + 0.02 uA"},
    {.key = "full_scale",
     .kind = FIELD_LINE,
     .offset = AT(full_scale),
     .read = any_quantity_read,
     .chassis = true,
     .text = "full scale",
     .example = "50 uA"},
    {.key = "resolution",
     .kind = FIELD_LINE,
     .offset = AT(resolution),
     .read = any_quantity_read,
     .start = START_BLANK,
     .chassis = true,
     .text = "smallest step",
     .example = "0.01 uA"},
    {.key = "series",
     .kind = FIELD_QUANTITY,
     .offset = AT(series),
     .form = FORM_OHMS,
     .limit = LIMIT_NOT_NEGATIVE,
     .start = START_BLANK,
     .chassis = true,
     .text = "resistance in series inside the tester",
     .example = "10k"},
    {.key = "burden",
     .kind = FIELD_QUANTITY,
     .offset = AT(burden),
     .form = FORM_OHMS,
     .limit = LIMIT_NOT_NEGATIVE,
     .chassis = true,
     .text = "resistance of the meter itself, in series",
     .example = "2k"},
    {.key = "sensitivity",
     .kind = FIELD_QUANTITY,
     .offset = AT(sensitivity),
     .form = {.unit = UNIT_SENSITIVITY},
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "of a moving-coil voltmeter",
     .example = "20 kohm/V"},
    {.key = "input",
     .kind = FIELD_QUANTITY,
     .offset = AT(input),
     .form = FORM_OHMS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "input resistance of an electronic voltmeter",
     .example = "10 M"},
    {.key = "supply_current",
     .kind = FIELD_QUANTITY,
     .offset = AT(supply_current),
     .form = FORM_AMPERES,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "the most that its test supply gives",
     .example = "2 mA"},
    {.key = "volts_accuracy",
     .kind = FIELD_QUANTITY,
     .offset = AT(volts_accuracy),
     .form = FORM_PERCENT,
     .limit = LIMIT_RANGE,
     .min = 0,
     .max = 50,
     .chassis = true,
     .text = "of the volts set; default 1 %",
     .example = "1 %"},
    {.key = "volts",
     .kind = FIELD_LINE,
     .offset = AT(volts_v),
     .read = volts_read,
     .start = START_BLANK,
     .chassis = true,
     .text = "what it can be set to; without: anything",
     .example = "25 V, 50 V, 100 V, 250 V"},
    {.key = "compared",
     .kind = FIELD_DATE,
     .offset = AT(compared),
     .chassis = true,
     .text = "last compared against a reference",
     .example = "2030-11-02"},
};

const struct record instrument_record = {
    .name = "instrument",
    .section = "instruments",
    .text = "Keyed by what it is called in readings (by leakage). The first one is meant when a "
            "reading names none.",
    .size = sizeof(struct instrument),
    .fields = instrument_fields,
    .field_count = FIELD_COUNT_OF(instrument_fields),
    .keyed = true,
    .key_offset = AT(name),
    .has_at = true,
    .at_offset = AT(at),
    .key_example = "leakage",
};
