/* Keys of a capacitor and of a can. */
#include "job/reader.h"
#include "job/tables.h"

#define AT(member)     offsetof(struct capacitor, member)
#define IN_CAN(member) offsetof(struct can, member)

static void prepare_capacitor(void *record)
{
    struct capacitor *capacitor = record;
    capacitor->can = NOT_LISTED;
    capacitor->source_resistance.resistor = capacitor->source_resistance.winding = NOT_LISTED;
    capacitor->feed.resistor = capacitor->feed.winding = NOT_LISTED;
}

/* `source: 90 V 220k`: the volts behind the part and the resistance that they come through. */
static void source_read(struct reader *reader, const struct field *field, const struct node *node,
                        void *record)
{
    struct capacitor *capacitor = record;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    const struct value_slot slots[] = {
        {"source volts", UNIT_VOLTAGE, true, &capacitor->source_volts, NULL},
        {"source resistance", UNIT_RESISTANCE, false, NULL, &capacitor->source_resistance},
    };
    capacitor->source_at = line.at;
    if (!line_values(&line, slots, FIELD_COUNT_OF(slots))) {
        reader_tell_line(reader, &line);
        return;
    }
    if (capacitor->source_resistance.set)
        reader_later(reader, resistance_resolve, node, &capacitor->source_resistance);
}

static void stages_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct capacitor *capacitor = target;
    struct line line;
    const struct line_name *names;
    size_t count;
    if (!reader_line(reader, "stage", node, &line))
        return;
    capacitor->stages_at = line.at;
    if (!line_names(&line, &names, &count)) {
        reader_tell_line(reader, &line);
        return;
    }
    int *stages = arena_array(reader->arena, count, sizeof *stages);
    size_t known = 0;
    for (size_t i = 0; i < count; i++) {
        int index = ref_index(reader, REF_STAGE, names[i].text, names[i].at);
        if (index != NOT_LISTED)
            stages[known++] = index;
    }
    capacitor->stages = stages;
    capacitor->stage_count = known;
}

static void stage_names_read(struct reader *reader, const struct field *field,
                             const struct node *node, void *record)
{
    (void)field;
    reader_later(reader, stages_resolve, node, record);
}

static void measured_read(struct reader *reader, const struct field *field, const struct node *node,
                          void *record)
{
    struct measured_capacitor *measured = &((struct capacitor *)record)->measured;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_measured_capacitor(&line, measured)) {
        reader_tell_line(reader, &line);
        return;
    }
    reader_note_units(reader, &line);
    quantity_check(reader, &measured->value, "a capacitance", LIMIT_ABOVE_ZERO);
    quantity_check(reader, &measured->esr, "a series resistance", LIMIT_NOT_NEGATIVE);
    quantity_check(reader, &measured->tan_delta, "a loss", LIMIT_NOT_NEGATIVE);
}

/* Volts, or per cent of what stands there. */
static void shift_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    struct quantity *shift = &((struct capacitor *)record)->shift;
    const struct quantity_form any = {.unit = UNIT_COUNT};
    struct quantity quantity = {0};
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    if (!line_quantity(&line, &any, &quantity))
        reader_tell_line(reader, &line);
    else if (quantity.unit != UNIT_VOLTAGE && quantity.unit != UNIT_PERCENT)
        reader_tell(reader, line.at, DIAGNOSTIC_UNIT_WRONG, "write it so: 0.1 V, or 5 %",
                    "the shift allowed is volts or per cent, not %s", unit_name(quantity.unit));
    else
        *shift = quantity;
    quantity_check(reader, shift, "the shift allowed", LIMIT_ABOVE_ZERO);
}

static void hum_read(struct reader *reader, const struct field *field, const struct node *node,
                     void *record)
{
    struct capacitor *part = record;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    const struct named_value names[] = {
        {"found", UNIT_VOLTAGE, true, &part->hum_found, NULL},
        {"left", UNIT_VOLTAGE, true, &part->hum_left, NULL},
    };
    if (!line_named_values(&line, names, FIELD_COUNT_OF(names)))
        reader_tell_line(reader, &line);
    quantity_check(reader, &part->hum_found, "hum", LIMIT_NOT_NEGATIVE);
    quantity_check(reader, &part->hum_left, "hum", LIMIT_NOT_NEGATIVE);
}

static const struct field capacitor_fields[] = {
    {.key = "type",
     .kind = FIELD_CHOICE,
     .offset = AT(type),
     .choices = dielectric_choices,
     .chassis = true,
     .start = START_BLANK,
     .text = "what it is made of",
     .example = "waxed paper"},
    {.key = "maker",
     .kind = FIELD_TEXT,
     .offset = AT(maker),
     .chassis = true,
     .text = "name on it",
     .example = "Dunmere"},
    {.key = "marked",
     .kind = FIELD_LINE,
     .offset = AT(marked),
     .read = capacitor_marking_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "what is printed on it: capacitance, volts, tolerance, class, in any order",
     .example = "0.02 uF 400 V 20 %"},
    {.key = "date_code",
     .kind = FIELD_PROSE,
     .offset = AT(date_code),
     .text = "date stamped on it",
     .example = "FEB 51"},
    {.key = "seen",
     .kind = FIELD_CHOICE,
     .offset = AT(seen),
     .choices = seen_choices,
     .chassis = true,
     .text = "where it shows; default below",
     .example = "below"},
    {.key = "was",
     .kind = FIELD_CHOICE,
     .offset = AT(was),
     .choices = origin_choices,
     .text = "how it came in; default original",
     .example = "earlier repair"},
    {.key = "place",
     .kind = FIELD_CHOICE,
     .offset = AT(place),
     .at_offset = AT(place_at),
     .choices = place_choices,
     .chassis = true,
     .start = START_BLANK,
     .text = "what it does where it sits; decides what the leak is judged by",
     .example = "coupling"},
    {.key = "stage",
     .kind = FIELD_LINE,
     .offset = AT(stages),
     .read = stage_names_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "stage that it acts on; several with commas",
     .example = "output"},
    {.key = "source",
     .kind = FIELD_LINE,
     .offset = AT(source_volts),
     .read = source_read,
     .chassis = true,
     .start = START_BLANK,
     .text = "coupling, avc feed: d.c. volts behind it, and the resistance they come through",
     .example = "90 V 220k"},
    {.key = "feed",
     .kind = FIELD_RESISTANCE,
     .offset = AT(feed),
     .chassis = true,
     .text = "d.c. resistance that the part hangs on: of the avc line, bias or rail",
     .example = "1 meg"},
    {.key = "line",
     .kind = FIELD_TEXT,
     .offset = AT(line),
     .chassis = true,
     .text = "avc bypass: name of its line",
     .example = "avc"},
    {.key = "delay",
     .kind = FIELD_QUANTITY,
     .offset = AT(delay),
     .form = FORM_VOLTS,
     .chassis = true,
     .text = "avc feed: volts of delay",
     .example = "3 V"},
    {.key = "current",
     .kind = FIELD_QUANTITY,
     .offset = AT(current),
     .form = FORM_AMPERES,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "current of the HT line, rail or battery there",
     .example = "62 mA"},
    {.key = "rule",
     .kind = FIELD_PROSE,
     .offset = AT(rule),
     .chassis = true,
     .text = "electrolytic: leakage rule, when not the shop's",
     .example = "JAN-C-62"},
    {.key = "ripple",
     .kind = FIELD_QUANTITY,
     .offset = AT(ripple),
     .form = FORM_HERTZ,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "ripple frequency; default twice the mains, on a live chassis once",
     .example = "100 Hz"},
    {.key = "hum",
     .kind = FIELD_LINE,
     .offset = AT(hum_found),
     .read = hum_read,
     .text = "reservoir, smoothing: a.c. volts measured across it, found and left",
     .example = "found 2.1 V, left 1.4 V"},
    {.key = "circuit",
     .kind = FIELD_QUANTITY,
     .offset = AT(circuit),
     .form = FORM_OHMS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "tuning: resistance of the circuit at resonance",
     .example = "150k"},
    {.key = "shift",
     .kind = FIELD_LINE,
     .offset = AT(shift),
     .read = shift_read,
     .chassis = true,
     .text = "place other: change that is allowed, volts or per cent",
     .example = "0.1 V"},
    {.key = "service",
     .kind = FIELD_QUANTITY,
     .offset = AT(service),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "highest d.c. volts that it sees, switching on included",
     .example = "275 V"},
    {.key = "near_heat",
     .kind = FIELD_FLAG,
     .offset = AT(near_heat),
     .chassis = true,
     .text = "within 50 mm of an output valve, rectifier or dropper",
     .example = "yes"},
    {.key = "pulse",
     .kind = FIELD_FLAG,
     .offset = AT(pulse),
     .chassis = true,
     .text = "vibrator timing, buffer: no d.c. reading passes it",
     .example = "yes"},
    {.key = "pulse_peak",
     .kind = FIELD_QUANTITY,
     .offset = AT(pulse_peak),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .text = "peak volts there",
     .example = "800 V"},
    {.key = "plug_side",
     .kind = FIELD_FLAG,
     .offset = AT(plug_side),
     .chassis = true,
     .text = "across mains: on the plug's side of the switch",
     .example = "no"},
    {.key = "readings",
     .kind = FIELD_LINES,
     .offset = AT(readings),
     .count_offset = AT(reading_count),
     .read = readings_read,
     .start = START_BLANK,
     .text = "leakage with one lead lifted: volts set, time, current or insulation; behind a comma "
             "only what changed; also hot 45 C, reformed, left, in circuit, a date, by INSTRUMENT",
     .example = "100 V 60 s 1.1 uA, 5 min 0.9 uA"},
    {.key = "measured",
     .kind = FIELD_LINE,
     .offset = AT(measured),
     .read = measured_read,
     .start = START_BLANK,
     .text = "capacitance; of an electrolytic also esr 2.4 ohm or tan delta",
     .example = "0.023 uF"},
    {.key = "case",
     .kind = FIELD_SIZE,
     .offset = AT(case_size),
     .chassis = true,
     .text =
         "diameter x length, or three sides; an electrolytic without it is limited as a small one",
     .example = "12 x 35 mm"},
    {.key = "done",
     .kind = FIELD_CHOICE,
     .offset = AT(done),
     .at_offset = AT(done_at),
     .choices = action_choices,
     .start = START_BLANK,
     .text = "what was done; without it the part is open",
     .example = "restuffed"},
    {.key = "fitted",
     .kind = FIELD_LINE,
     .offset = AT(fitted),
     .read = capacitor_marking_read,
     .text = "what was put in: type and values",
     .example = "polypropylene 0.022 uF 630 V"},
    {.key = "age",
     .kind = FIELD_CHOICE,
     .offset = AT(age),
     .choices = age_choices,
     .text = "of what was fitted; default modern",
     .example = "modern"},
    {.key = "batch",
     .kind = FIELD_TEXT,
     .offset = AT(batch),
     .text = "where the new part came from",
     .example = "2029-W14"},
    {.key = "signed",
     .kind = FIELD_PROSE,
     .offset = AT(signed_where),
     .text = "where the mark of the restuffing is",
     .example = "inside end cap"},
    {.key = "price",
     .kind = FIELD_PROSE,
     .offset = AT(price),
     .text = "not in the sale copy",
     .example = "1.20"},
    {.key = "reason",
     .kind = FIELD_PROSE,
     .offset = AT(reason),
     .text = "why, when what was done is not what was advised",
     .example = "owner keeps the original can"},
    {.key = "note",
     .kind = FIELD_PROSE,
     .offset = AT(note),
     .text = "anything else",
     .example = "wax has run"},
};

const struct record capacitor_record = {
    .name = "capacitor",
    .section = "capacitors",
    .text = "Keyed by ref. A reading is with one lead lifted unless it says in circuit.",
    .size = sizeof(struct capacitor),
    .fields = capacitor_fields,
    .field_count = FIELD_COUNT_OF(capacitor_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = AT(ref),
    .has_at = true,
    .at_offset = AT(at),
    .prepare = prepare_capacitor,
    .key_example = "C14",
};

/* ---- cans ---- */

static void holds_resolve(struct reader *reader, const struct node *node, void *target)
{
    struct can *can = target;
    int number = (int)(can - reader->job->cans);
    struct line line;
    const struct line_name *refs;
    size_t count;
    if (!reader_line(reader, "holds", node, &line))
        return;
    if (!line_refs(&line, &refs, &count)) {
        reader_tell_line(reader, &line);
        return;
    }
    struct capacitor *capacitors = (struct capacitor *)reader->job->capacitors;
    int *holds = arena_array(reader->arena, count, sizeof *holds);
    size_t known = 0;
    for (size_t i = 0; i < count; i++) {
        int index = ref_index(reader, REF_CAPACITOR, refs[i].text, refs[i].at);
        if (index == NOT_LISTED)
            continue;
        if (capacitors[index].can != NOT_LISTED) {
            reader_tell(reader, refs[i].at, DIAGNOSTIC_CONTRADICTION, NULL,
                        "%s is in the can %s already", capacitors[index].ref,
                        reader->job->cans[capacitors[index].can].ref);
            continue;
        }
        capacitors[index].can = number;
        holds[known++] = index;
    }
    can->holds = holds;
    can->hold_count = known;
}

static void holds_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    (void)field;
    reader_later(reader, holds_resolve, node, record);
}

static const struct field can_fields[] = {
    {.key = "holds",
     .kind = FIELD_LINE,
     .offset = IN_CAN(holds),
     .read = holds_read,
     .required = true,
     .chassis = true,
     .text = "refs of its sections, each listed under capacitors",
     .example = "C20 C21"},
    {.key = "maker",
     .kind = FIELD_TEXT,
     .offset = IN_CAN(maker),
     .chassis = true,
     .text = "name on it",
     .example = "Dunmere"},
    {.key = "seen",
     .kind = FIELD_CHOICE,
     .offset = IN_CAN(seen),
     .choices = seen_choices,
     .chassis = true,
     .text = "where it shows; default below",
     .example = "above"},
    {.key = "was",
     .kind = FIELD_CHOICE,
     .offset = IN_CAN(was),
     .choices = origin_choices,
     .text = "how it came in; default original",
     .example = "original"},
    {.key = "done",
     .kind = FIELD_CHOICE,
     .offset = IN_CAN(done),
     .choices = action_choices,
     .start = START_BLANK,
     .text = "what was done; without it the can is open",
     .example = "reformed"},
    {.key = "fitted",
     .kind = FIELD_LINE,
     .offset = IN_CAN(fitted),
     .read = capacitor_marking_read,
     .text = "what was put in",
     .example = "electrolytic 22 uF 450 V"},
    {.key = "age",
     .kind = FIELD_CHOICE,
     .offset = IN_CAN(age),
     .choices = age_choices,
     .text = "of what was fitted; default modern",
     .example = "modern"},
    {.key = "date_code",
     .kind = FIELD_PROSE,
     .offset = IN_CAN(date_code),
     .text = "date stamped on it",
     .example = "FEB 51"},
    {.key = "case",
     .kind = FIELD_SIZE,
     .offset = IN_CAN(case_size),
     .chassis = true,
     .text = "diameter x length, or three sides",
     .example = "35 x 75 mm"},
    {.key = "signed",
     .kind = FIELD_PROSE,
     .offset = IN_CAN(signed_where),
     .text = "where the mark of the restuffing is",
     .example = "under the rivet"},
    {.key = "batch",
     .kind = FIELD_TEXT,
     .offset = IN_CAN(batch),
     .text = "where the new part came from",
     .example = "2029-W14"},
    {.key = "price",
     .kind = FIELD_PROSE,
     .offset = IN_CAN(price),
     .text = "not in the sale copy",
     .example = "9.50"},
    {.key = "reason",
     .kind = FIELD_PROSE,
     .offset = IN_CAN(reason),
     .text = "why, when what was done is not what was advised",
     .example = "one section is dead"},
    {.key = "note",
     .kind = FIELD_PROSE,
     .offset = IN_CAN(note),
     .text = "anything else",
     .example = "rivets undisturbed"},
};

const struct record can_record = {
    .name = "can",
    .section = "cans",
    .text = "Several sections in one case: one part. What is done is the can's, everything "
            "electrical is its sections'.",
    .size = sizeof(struct can),
    .fields = can_fields,
    .field_count = FIELD_COUNT_OF(can_fields),
    .keyed = true,
    .key_is_ref = true,
    .key_offset = IN_CAN(ref),
    .has_at = true,
    .at_offset = IN_CAN(at),
    .key_example = "CAN1",
};
