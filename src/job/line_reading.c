/* Readings: `100 V 60 s 1.1 uA, 5 min 0.9 uA`. */
#include "job/line_scan.h"
#include "job/meant_word.h"

#include <string.h>
#include <strings.h>

static const char reading_hint[] =
    "write volts, time and current or insulation, as in 100 V 60 s 1.1 uA";

static const char *const reading_words[] = {"found",      "reformed", "left", "hot",
                                            "in circuit", "by",       NULL};

/* One reading of the line, and what this part of the line has said itself. */
struct reading_reader {
    struct line *line;
    const struct reading_form *form;
    const char *cursor, *end; /* of the segment */
    struct reading reading;
    bool volts_said, time_said, value_said, hot_said, state_said, date_said, instrument_said;
};

static bool twice(struct reading_reader *reader, struct span span, bool *said, const char *what)
{
    if (!*said) {
        *said = true;
        return false;
    }
    line_fail(reader->line, span, DIAGNOSTIC_DUPLICATE_KEY,
              "put a comma and a space between readings", "a second %s: '%s'", what,
              line_quote(reader->line, span));
    return true;
}

static bool impossible(struct reading_reader *reader, struct span span, const char *why)
{
    return line_fail(reader->line, span, DIAGNOSTIC_VALUE_IMPOSSIBLE, NULL, "'%s': %s",
                     line_quote(reader->line, span), why);
}

/* A minus sign is `-` or U+2212. */
static const char *without_minus(const char *written)
{
    return written + (*written == '-' ? 1 : strlen("\xE2\x88\x92"));
}

static bool set_volts(struct reading_reader *reader, struct span span,
                      const struct quantity *quantity)
{
    if (twice(reader, span, &reader->volts_said, "voltage"))
        return false;
    if (quantity->bound == BOUND_NONE && quantity->value < 0)
        return line_fail(reader->line, span, DIAGNOSTIC_VALUE_IMPOSSIBLE,
                         arena_print(reader->line->arena,
                                     "write %s; a dash that begins an item has a space behind it",
                                     without_minus(quantity->written)),
                         "'%s': the volts set are a positive value",
                         line_quote(reader->line, span));
    if (quantity->bound != BOUND_NONE || !(quantity->value > 0))
        return impossible(reader, span, "the volts set are a positive value");
    reader->reading.set_volts = *quantity;
    return true;
}

static bool set_time(struct reading_reader *reader, struct span span,
                     const struct quantity *quantity)
{
    if (twice(reader, span, &reader->time_said, "time"))
        return false;
    if (quantity->bound != BOUND_NONE || !(quantity->value >= 0))
        return impossible(reader, span, "the time since the volts were set is not negative");
    reader->reading.time = *quantity;
    return true;
}

static bool set_value(struct reading_reader *reader, struct span span,
                      const struct quantity *quantity)
{
    if (twice(reader, span, &reader->value_said, "current or insulation"))
        return false;
    if (quantity->unit == UNIT_RESISTANCE && !(quantity->value > 0))
        return impossible(reader, span, "an insulation resistance is positive");
    reader->reading.value = *quantity;
    return true;
}

static bool is_date(struct span span)
{
    return span.length == 10 && span.start[4] == '-' && span.start[7] == '-';
}

static bool take_date(struct reading_reader *reader, struct span span)
{
    struct date date = {0};
    if (twice(reader, span, &reader->date_said, "date"))
        return false;
    if (!date_read(reader->line->arena, span.start, span.length, &date))
        return line_fail(reader->line, span, DIAGNOSTIC_DATE_UNREADABLE,
                         date_hint(reader->line->arena, span.start, span.length), "'%s' is no date",
                         line_quote(reader->line, span));
    date.at = line_position(reader->line, (size_t)(span.start - reader->line->text));
    reader->reading.date = date;
    return true;
}

static bool take_number(struct reading_reader *reader, struct span span)
{
    struct quantity_form form = {.unit = UNIT_COUNT};
    struct quantity quantity = {0};
    if (is_date(span))
        return take_date(reader, span);
    if (!line_take_quantity(reader->line, span, &form, &quantity)) {
        if (reader->line->problem.code == DIAGNOSTIC_QUANTITY_UNREADABLE)
            reader->line->problem.hint = memchr(span.start, ',', span.length) != NULL
                                             ? "put a space behind the comma"
                                             : reading_hint;
        return false;
    }
    if (quantity.unit == UNIT_VOLTAGE)
        return set_volts(reader, span, &quantity);
    if (quantity.unit == UNIT_TIME)
        return set_time(reader, span, &quantity);
    if (quantity.unit == UNIT_CURRENT || quantity.unit == UNIT_RESISTANCE)
        return set_value(reader, span, &quantity);
    const char *hint = reading_hint;
    if (quantity.unit == UNIT_TEMPERATURE)
        hint = arena_print(reader->line->arena, "write hot %s", quantity.written);
    return line_fail(reader->line, span, DIAGNOSTIC_UNIT_WRONG, hint, "'%s' has no place here",
                     line_quote(reader->line, span));
}

static bool take_hot(struct reading_reader *reader, struct span span)
{
    struct quantity_form form = {.unit = UNIT_TEMPERATURE};
    struct quantity_token token;
    if (twice(reader, span, &reader->hot_said, "temperature"))
        return false;
    if (!quantity_token_next(&reader->cursor, reader->end, &token))
        return line_fail(reader->line, span, DIAGNOSTIC_QUANTITY_UNREADABLE,
                         "write the temperature, as in hot 45 C", "'hot' without a temperature");
    return line_take_quantity(reader->line, span_of_token(&token), &form, &reader->reading.hot);
}

static bool take_state(struct reading_reader *reader, struct span span, enum reading_state state)
{
    if (twice(reader, span, &reader->state_said, "state"))
        return false;
    reader->reading.state = state;
    return true;
}

static bool unknown_instrument(struct reading_reader *reader, struct span span)
{
    const struct reading_form *form = reader->form;
    const char **names =
        arena_array(reader->line->arena, form->instrument_count + 1, sizeof *names);
    for (size_t i = 0; i < form->instrument_count; i++)
        names[i] = form->instruments[i].name;
    const char *nearest = nearest_word(line_written(reader->line, span), names);
    const char *hint = nearest != NULL
                           ? arena_print(reader->line->arena, "nearest instrument: %s", nearest)
                           : "name one of the job's instruments";
    return line_fail(reader->line, span, DIAGNOSTIC_REF_UNKNOWN, hint, "unknown instrument '%s'",
                     line_quote(reader->line, span));
}

/* The longest of the instruments' names that stands behind `by`. */
static bool take_instrument(struct reading_reader *reader, struct span span)
{
    struct span rest =
        span_trim((struct span){reader->cursor, (size_t)(reader->end - reader->cursor)});
    size_t longest = 0;
    if (twice(reader, span, &reader->instrument_said, "instrument"))
        return false;
    for (size_t i = 0; i < reader->form->instrument_count; i++) {
        const char *name = reader->form->instruments[i].name;
        if (name != NULL && span_begins(rest, name) && strlen(name) > longest) {
            longest = strlen(name);
            reader->reading.instrument = (int)i;
        }
    }
    reader->cursor = rest.start + longest;
    return longest > 0 || unknown_instrument(reader, rest.length > 0 ? rest : span);
}

static bool take_circuit(struct reading_reader *reader, struct span span)
{
    struct quantity_token token;
    const char *behind = reader->cursor;
    if (!quantity_token_next(&behind, reader->end, &token) ||
        !span_is(span_of_token(&token), "circuit"))
        return line_fail(reader->line, span, DIAGNOSTIC_UNKNOWN_CHOICE, "write in circuit",
                         "'in' stands alone");
    reader->cursor = behind;
    reader->reading.in_circuit = true;
    return true;
}

/* What to write instead of a word that a notebook has, and a job file has no use for. */
static const char *notebook_hint(struct span span)
{
    static const char *const endless[] = {"infinity",     "infinite",  "inf",      "open",
                                          "\xE2\x88\x9E", "OL",        "O.L.",     "O/L",
                                          "1---",         "overrange", "offscale", NULL};
    static const char *const nearly[] = {"approx",        "approx.", "about", "roughly", "ca",
                                         "ca.",           "c.",      "circa", "say",     "some",
                                         "approximately", NULL};
    static const char *const joins[] = {"at", "@", "after", "and", "=", "->", "-", "/", NULL};
    if (span_is_any(span, endless))
        return "write over and the end of the scale, as in over 2000 M";
    if (span_is_any(span, nearly) || *span.start == '~' ||
        strncmp(span.start, "\xE2\x89\x88", 3) == 0)
        return "write the figure alone: how sure it is follows from the instrument";
    if (span_is_any(span, joins))
        return "leave it out: the units tell volts, time and current apart";
    return NULL;
}

static bool unknown_word(struct reading_reader *reader, struct span span)
{
    const char *hint = notebook_hint(span);
    if (hint == NULL)
        hint = meant_word_hint(reader->line->arena, line_written(reader->line, span), reading_words,
                               "nearest word");
    if (hint == NULL)
        hint = "words here: found, reformed, left, hot 45 C, in circuit, by INSTRUMENT";
    return line_fail(reader->line, span, DIAGNOSTIC_UNKNOWN_CHOICE, hint, "unknown word '%s'",
                     line_quote(reader->line, span));
}

static bool take_word(struct reading_reader *reader, struct span span)
{
    if (span_is(span, "hot"))
        return take_hot(reader, span);
    if (span_is(span, "found"))
        return take_state(reader, span, READING_FOUND);
    if (span_is(span, "reformed"))
        return take_state(reader, span, READING_REFORMED);
    if (span_is(span, "left"))
        return take_state(reader, span, READING_LEFT);
    if (span_is(span, "in"))
        return take_circuit(reader, span);
    if (span_is(span, "by"))
        return take_instrument(reader, span);
    return unknown_word(reader, span);
}

static bool segment_read(struct reading_reader *reader, struct span segment)
{
    struct quantity_token token;
    while (quantity_token_next(&reader->cursor, reader->end, &token)) {
        struct span span = span_of_token(&token);
        if (!(token.is_number ? take_number(reader, span) : take_word(reader, span)))
            return false;
    }
    if (!reader->value_said)
        return line_fail(reader->line, segment, DIAGNOSTIC_QUANTITY_UNREADABLE, reading_hint,
                         "no current or insulation in '%s'", line_quote(reader->line, segment));
    if (!reader->reading.set_volts.set)
        return line_fail(reader->line, segment, DIAGNOSTIC_QUANTITY_UNREADABLE, reading_hint,
                         "no volts in '%s'", line_quote(reader->line, segment));
    return true;
}

bool line_readings(struct line *line, const struct reading_form *form,
                   const struct reading **readings, size_t *count)
{
    if (line_too_long(line))
        return false;
    struct reading *items = NULL;
    struct reading last = {
        .line = form->line, .state = form->state, .instrument = form->instrument};
    size_t found = 0, capacity = 0, offset = 0;
    struct span segment;
    while (line_segment_next(line, &offset, &segment)) {
        struct reading_reader reader = {.line = line,
                                        .form = form,
                                        .cursor = segment.start,
                                        .end = segment.start + segment.length,
                                        .reading = last};
        reader.reading.at = line_position(line, (size_t)(segment.start - line->text));
        reader.reading.written = line_written(line, segment);
        if (!segment_read(&reader, segment))
            return false;
        items = arena_grow(line->arena, items, found, &capacity, sizeof *items);
        items[found++] = last = reader.reading;
    }
    if (found == 0)
        return line_fail(line, line_span(line), DIAGNOSTIC_QUANTITY_UNREADABLE, reading_hint,
                         "nothing stands here");
    *readings = items;
    *count = found;
    return true;
}
