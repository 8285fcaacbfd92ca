/* Keys of the sections that hold one fact a line: voltages, performance, safety. */
#include "job/reader.h"
#include "job/tables.h"
#include "reference/safety_figure.h"

#include <string.h>
#include <strings.h>

/* A segment of a line as a line, in its place. */
static struct line line_of_segment(const struct line *line, const struct segment *segment)
{
    return line_of(line->arena, segment->text, segment->length,
                   line_position(line, segment->offset));
}

static bool segment_quantity(struct reader *reader, const struct line *line,
                             const struct segment *segment, const struct quantity_form *form,
                             struct quantity *quantity)
{
    struct line part = line_of_segment(line, segment);
    if (line_quantity(&part, form, quantity))
        return true;
    reader_tell_line(reader, &part);
    return false;
}

static struct prose prose_of(const struct line *line, const struct segment *segment)
{
    return (struct prose){arena_text(line->arena, segment->text, segment->length),
                          line_position(line, segment->offset)};
}

/* ---- voltages ---- */

#define IN_POINT(member) offsetof(struct voltage_point, member)

static void prepare_point(void *record)
{
    struct voltage_point *point = record;
    point->source.resistor = point->source.winding = NOT_LISTED;
}

static void source_segment(struct reader *reader, const struct line *line,
                           const struct segment *rest, const struct node *node,
                           struct voltage_point *point)
{
    struct line part = line_of_segment(line, rest);
    if (!line_resistance(&part, &point->source))
        reader_tell_line(reader, &part);
    else
        reader_later(reader, resistance_resolve, node, &point->source);
}

static void point_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    (void)field;
    struct voltage_point *point = record;
    const struct quantity_form volts = FORM_VOLTS;
    struct {
        const char *name;
        struct quantity *quantity;
    } names[] = {{"sheet", &point->sheet},
                 {"range", &point->range},
                 {"found", &point->found},
                 {"left", &point->left}};
    struct line line;
    struct segment segment, rest;
    if (!reader_line(reader, node->key, node, &line))
        return;
    for (size_t offset = 0; segment_next(&line, &offset, &segment);) {
        bool known = segment_after(&segment, "source", &rest);
        if (known)
            source_segment(reader, &line, &rest, node, point);
        for (size_t i = 0; i < FIELD_COUNT_OF(names) && !known; i++) {
            if ((known = segment_after(&segment, names[i].name, &rest)))
                segment_quantity(reader, &line, &rest, &volts, names[i].quantity);
        }
        if (!known)
            reader_tell(reader, line_position(&line, segment.offset), DIAGNOSTIC_UNKNOWN_KEY,
                        "one of: sheet, range, source, found, left, each with its value",
                        "'%.*s' is not known here", (int)segment.length, segment.text);
    }
    quantity_check(reader, &point->range, "a meter range", LIMIT_ABOVE_ZERO);
}

static const struct record point_record = {
    .name = "point",
    .section = "points (of voltages)",
    .text = "Keyed by where; volts to chassis. sheet: what the service sheet prints; range: of the "
            "sheet's meter there; source: resistance seen from the point; found, left: today's.",
    .size = sizeof(struct voltage_point),
    .read = point_read,
    .example = "sheet 248 V, range 500 V, source 100k, found 255 V, left 257 V",
    .keyed = true,
    .key_offset = IN_POINT(name),
    .has_at = true,
    .at_offset = IN_POINT(at),
    .prepare = prepare_point,
    .key_example = "V4 anode",
};

#define AT(member) offsetof(struct voltages, member)

static const struct field voltages_fields[] = {
    {.key = "meter",
     .kind = FIELD_QUANTITY,
     .offset = AT(meter),
     .form = {.unit = UNIT_SENSITIVITY},
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .start = START_EXAMPLE,
     .text = "the service sheet's meter",
     .example = "1000 ohm/V"},
    {.key = "sheet_mains",
     .kind = FIELD_QUANTITY,
     .offset = AT(sheet_mains),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .chassis = true,
     .start = START_EXAMPLE,
     .text = "mains that the sheet's figures were taken at",
     .example = "230 V"},
    {.key = "found_mains",
     .kind = FIELD_QUANTITY,
     .offset = AT(found_mains),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .start = START_EXAMPLE,
     .text = "mains when the set was measured as found",
     .example = "236 V"},
    {.key = "left_mains",
     .kind = FIELD_QUANTITY,
     .offset = AT(left_mains),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .start = START_EXAMPLE,
     .text = "the same as left",
     .example = "234 V"},
    {.key = "points",
     .kind = FIELD_TABLE,
     .offset = AT(points),
     .count_offset = AT(point_count),
     .record = &point_record,
     .chassis = true,
     .start = START_EXAMPLE,
     .text = "the points, one a line",
     .example = "V4 anode: sheet 248 V, range 500 V, source 100k, found 255 V, left 257 V"},
};

const struct record voltages_record = {
    .name = "voltages",
    .section = "voltages",
    .text = "The service sheet's voltages, before and after.",
    .size = sizeof(struct voltages),
    .fields = voltages_fields,
    .field_count = FIELD_COUNT_OF(voltages_fields),
};

/* ---- performance ---- */

#define IN_PERFORMANCE(member) offsetof(struct performance_row, member)

/* `found 120 uV, left 35 uV`: a figure where it begins like one, else a word (`found dead`). */
static void figure_read(struct reader *reader, const struct line *line, const struct segment *rest,
                        struct quantity *quantity, const char **written)
{
    const struct quantity_form any = {.unit = UNIT_COUNT};
    *written = arena_text(reader->arena, rest->text, rest->length);
    char first = rest->text[0];
    bool is_figure = (first >= '0' && first <= '9') || strchr("+-.<>", first) ||
                     strncasecmp(*written, "over ", 5) == 0 ||
                     strncasecmp(*written, "under ", 6) == 0;
    if (is_figure)
        segment_quantity(reader, line, rest, &any, quantity);
}

static void performance_read(struct reader *reader, const struct field *field,
                             const struct node *node, void *record)
{
    (void)field;
    struct performance_row *row = record;
    struct line line;
    struct segment segment, rest;
    if (!reader_line(reader, node->key, node, &line))
        return;
    for (size_t offset = 0; segment_next(&line, &offset, &segment);) {
        if (segment_after(&segment, "found", &rest)) {
            figure_read(reader, &line, &rest, &row->found, &row->written_found);
        } else if (segment_after(&segment, "left", &rest)) {
            figure_read(reader, &line, &rest, &row->left, &row->written_left);
        } else {
            segment.length = line.length - segment.offset; /* the rest of the line is words */
            row->conditions = prose_of(&line, &segment);
            break;
        }
    }
    if (!row->written_found && !row->written_left)
        reader_tell(reader, line.at, DIAGNOSTIC_MISSING_KEY,
                    "write it so: found 120 uV, left 35 uV, for 50 mW out",
                    "neither found nor left is given");
    if (row->found.set && row->left.set && row->found.unit != row->left.unit)
        reader_tell(reader, row->left.at, DIAGNOSTIC_UNIT_WRONG, NULL, "found is %s, left is %s",
                    unit_name(row->found.unit), unit_name(row->left.unit));
}

const struct record performance_record = {
    .name = "performance",
    .section = "performance",
    .text = "Keyed by what was measured, before and after; behind the figures the conditions.",
    .size = sizeof(struct performance_row),
    .read = performance_read,
    .example = "found 120 uV, left 35 uV, for 50 mW out",
    .keyed = true,
    .key_offset = IN_PERFORMANCE(name),
    .has_at = true,
    .at_offset = IN_PERFORMANCE(at),
    .key_example = "sensitivity 1 Mc/s",
};

/* ---- safety ---- */

#define IN_SAFETY(member) offsetof(struct safety_row, member)

static bool is_at(const struct quantity_token *token)
{
    return (token->length == 2 && strncasecmp(token->start, "at", 2) == 0) ||
           (token->length == 1 && *token->start == '@');
}

/* What no figure is named for is printed, and held against nothing: a slip must not do that. */
static void check_kind(struct reader *reader, const struct safety_row *row)
{
    enum safety_kind kind = safety_kind_named(row->name, false);
    if (kind == SAFETY_KIND_COUNT) {
        reader_tell(reader, row->at, DIAGNOSTIC_SAFETY_UNKNOWN,
                    "figures are known for touch current, earth current, earth bond, insulation, "
                    "residual",
                    "'%s' is printed, and held against no figure", row->name);
        return;
    }
    enum unit unit = safety_figure(kind)->unit;
    if (row->value.set && unit != UNIT_NONE && row->value.unit != unit)
        reader_tell(reader, row->value.at, DIAGNOSTIC_UNIT_WRONG,
                    arena_print(reader->arena, "it is given as in %s", unit_example(unit)),
                    "'%s' is no %s", row->value.written, row->name);
}

/* `180 M at 500 V 60 s`: the value, then what it was taken at. */
static void safety_values(struct reader *reader, struct line *part, struct safety_row *row)
{
    const struct quantity_form any = {.unit = UNIT_COUNT};
    const char *cursor = part->text, *end = part->text + part->length;
    struct quantity_token token;
    while (quantity_token_next(&cursor, end, &token)) {
        struct segment words = {token.start, (size_t)(end - token.start),
                                (size_t)(token.start - part->text)};
        if (!token.is_number) {
            if (is_at(&token))
                continue;
            if (token.length == 1 && *token.start == '/') {
                reader_tell(reader, line_position(part, words.offset),
                            DIAGNOSTIC_QUANTITY_UNREADABLE,
                            "the other polarity stands behind a comma: 0.06 mA, second 0.05 mA",
                            "'%.*s' has no place here", (int)words.length, words.text);
                return;
            }
            row->conditions = prose_of(part, &words);
            return;
        }
        struct segment figure = {token.start, token.length, words.offset};
        struct quantity quantity = {0};
        if (!segment_quantity(reader, part, &figure, &any, &quantity))
            return;
        if (!row->value.set)
            row->value = quantity;
        else if (quantity.unit == UNIT_VOLTAGE)
            row->at_volts = quantity;
        else if (quantity.unit == UNIT_TIME)
            row->time = quantity;
        else
            reader_tell(reader, quantity.at, DIAGNOSTIC_UNIT_WRONG,
                        "write it so: 180 M at 500 V 60 s",
                        "only volts and a time stand behind the value");
    }
}

/* The worse first: of insulation the lower, of everything else the higher. */
static void worse_first(struct safety_row *row)
{
    bool low_is_worse = strncasecmp(row->name, "insulation", 10) == 0;
    if (!row->second.set || (row->second.value > row->value.value) == low_is_worse)
        return;
    struct quantity better = row->value;
    row->value = row->second;
    row->second = better;
}

static void safety_read(struct reader *reader, const struct field *field, const struct node *node,
                        void *record)
{
    (void)field;
    struct safety_row *row = record;
    const struct quantity_form any = {.unit = UNIT_COUNT};
    struct line line;
    struct segment segment, rest;
    if (!reader_line(reader, node->key, node, &line))
        return;
    row->written = arena_text(reader->arena, line.text, line.length);
    for (size_t offset = 0; segment_next(&line, &offset, &segment);) {
        struct line part = line_of_segment(&line, &segment);
        if (segment_after(&segment, "second", &rest)) {
            segment_quantity(reader, &line, &rest, &any, &row->second);
        } else if (!row->value.set && !row->conditions.text) {
            safety_values(reader, &part, row);
        } else {
            segment.length = line.length - segment.offset;
            row->conditions = prose_of(&line, &segment);
            break;
        }
    }
    quantity_check(reader, &row->value, node->key, LIMIT_NOT_NEGATIVE);
    quantity_check(reader, &row->second, node->key, LIMIT_NOT_NEGATIVE);
    check_kind(reader, row);
    worse_first(row);
}

const struct record safety_record = {
    .name = "safety",
    .section = "safety",
    .text = "Keyed by what was measured: touch current, earth current, earth bond, insulation, "
            "residual, fuse, polarity, and where. The value, 'at' volts and time; 'second' for the "
            "other polarity of the plug; then words.",
    .size = sizeof(struct safety_row),
    .read = safety_read,
    .example = "0.06 mA, second 0.05 mA",
    .keyed = true,
    .key_offset = IN_SAFETY(name),
    .has_at = true,
    .at_offset = IN_SAFETY(at),
    .key_example = "touch current",
};
