#include "job/line_scan.h"

#include <string.h>
#include <strings.h>

struct line line_of(struct arena *arena, const char *text, size_t length, struct position at)
{
    return (struct line){.arena = arena, .text = text, .length = length, .at = at};
}

struct position line_position(const struct line *line, size_t offset)
{
    struct position at = line->at;
    const char *cursor = line->text, *end = line->text + offset;
    /* One column for each byte that does not continue a character. */
    for (; cursor < end; cursor++)
        at.column += ((unsigned char)*cursor & 0xC0) != 0x80;
    return at;
}

/* ---- pieces ---- */

static bool is_space(char c)
{
    return c == ' ' || c == '\t';
}

static bool is_letter_or_digit(char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9');
}

struct span span_trim(struct span span)
{
    while (span.length > 0 && is_space(span.start[0]))
        span = span_from(span, 1);
    while (span.length > 0 && is_space(span.start[span.length - 1]))
        span.length--;
    return span;
}

struct span span_of_token(const struct quantity_token *token)
{
    return (struct span){token->start, token->length};
}

struct span span_from(struct span span, size_t offset)
{
    return (struct span){span.start + offset, span.length - offset};
}

bool span_is(struct span span, const char *word)
{
    return span.length == strlen(word) && strncasecmp(span.start, word, span.length) == 0;
}

bool span_begins(struct span span, const char *words)
{
    size_t length = strlen(words);
    return span.length >= length && strncasecmp(span.start, words, length) == 0 &&
           (span.length == length || is_space(span.start[length]));
}

bool span_is_any(struct span span, const char *const *words)
{
    for (; *words != NULL; words++)
        if (span_is(span, *words))
            return true;
    return false;
}

struct span line_span(const struct line *line)
{
    return span_trim((struct span){line->text, line->length});
}

bool line_segment_next(const struct line *line, size_t *offset, struct span *segment)
{
    while (*offset < line->length) {
        size_t start = *offset, stop = start;
        while (stop < line->length &&
               !(line->text[stop] == ',' &&
                 (stop + 1 == line->length || is_space(line->text[stop + 1]))))
            stop++;
        *offset = stop + 1;
        *segment = span_trim((struct span){line->text + start, stop - start});
        if (segment->length > 0)
            return true;
    }
    return false;
}

/* ---- problems ---- */

const char *line_written(struct line *line, struct span span)
{
    return arena_text(line->arena, span.start, span.length);
}

const char *line_quote(struct line *line, struct span span)
{
    enum { SHOWN_BYTES = 60 };
    if (span.length <= SHOWN_BYTES)
        return line_written(line, span);
    size_t length = SHOWN_BYTES;
    while (length > 0 && ((unsigned char)span.start[length] & 0xC0) == 0x80)
        length--;
    return arena_print(line->arena, "%.*s...", (int)length, span.start);
}

bool line_fail(struct line *line, struct span span, enum diagnostic_code code, const char *hint,
               const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    size_t offset = (size_t)(span.start - line->text);
    line->problem = (struct line_problem){.code = code,
                                          .offset = offset,
                                          .length = span.length,
                                          .at = line_position(line, offset),
                                          .text = arena_print_list(line->arena, format, arguments),
                                          .hint = hint};
    va_end(arguments);
    return false;
}

bool line_too_long(struct line *line)
{
    struct span all = line_span(line);
    if (all.length <= LINE_BYTES_MAX)
        return false;
    line_fail(line, (struct span){all.start, 1}, DIAGNOSTIC_TEXT_TOO_LONG,
              "split it over several lines", "this line has more than %d bytes", LINE_BYTES_MAX);
    return true;
}

static const char *article(enum unit unit)
{
    return unit == UNIT_INDUCTANCE ? "an" : "a";
}

/* Which unit a text was read as, for "'80 V' is a voltage". */
static enum unit unit_read(struct line *line, struct span span)
{
    struct quantity quantity = {0};
    struct quantity_form any = {.unit = UNIT_COUNT, .unit_optional = true};
    quantity_read(line->arena, span.start, span.length, &any, &quantity, NULL);
    return quantity.unit;
}

/* `3,3 uA;`: a unit follows, and something hangs on it. NULL: none. */
static const char *unit_behind_hint(struct line *line, struct span span)
{
    const char *cursor = span.start + span.length, *end = line->text + line->length;
    struct quantity_token word;
    struct quantity quantity = {0};
    struct quantity_form any = {.unit = UNIT_COUNT};
    if (!quantity_token_next(&cursor, end, &word) || word.is_number || word.after_comma)
        return NULL;
    size_t length = word.length;
    while (length > 0 && !is_letter_or_digit(word.start[length - 1]))
        length--;
    const char *text =
        arena_print(line->arena, "%s %.*s", line_written(line, span), (int)length, word.start);
    if (length == 0 || quantity_read(line->arena, text, strlen(text), &any, &quantity, NULL))
        return NULL;
    return arena_print(line->arena,
                       length < word.length && word.start[length] == ';' && cursor < end
                           ? "write %s, then a comma and a space"
                           : "write %s",
                       text);
}

bool line_fail_quantity(struct line *line, struct span span, enum quantity_status status,
                        const struct quantity_form *form)
{
    const char *shown = line_quote(line, span), *text = line_written(line, span);
    const char *hint = quantity_hint(line->arena, status, text, form);
    switch (status) {
    case QUANTITY_OK:
        break;
    case QUANTITY_UNREADABLE:
        hint = arena_print(line->arena, "write it as in %s", unit_example(form->unit));
        if (span.length == 0)
            return line_fail(line, span, DIAGNOSTIC_QUANTITY_UNREADABLE, hint,
                             "nothing stands here");
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_UNREADABLE, hint,
                         "cannot read '%s' as %s %s", shown, article(form->unit),
                         unit_name(form->unit));
    case QUANTITY_NO_UNIT: {
        const char *with_unit = unit_behind_hint(line, span);
        return line_fail(line, span, DIAGNOSTIC_UNIT_MISSING,
                         with_unit != NULL ? with_unit
                         : hint != NULL    ? hint
                                           : "add the unit, as in 0.05 uF, 270 ohm, 400 V",
                         "'%s' has no unit", shown);
    }
    case QUANTITY_WRONG_UNIT: {
        enum unit unit = unit_read(line, span);
        return line_fail(line, span, DIAGNOSTIC_UNIT_WRONG, hint, "'%s' is %s %s", shown,
                         article(unit), unit_name(unit));
    }
    case QUANTITY_COMMA:
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_AMBIGUOUS, hint,
                         "the comma in '%s' may part thousands or decimals", shown);
    case QUANTITY_CLOCK:
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_AMBIGUOUS, hint,
                         "'%s' may be hours or minutes", shown);
    case QUANTITY_MEGA_OR_KILO:
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_AMBIGUOUS, hint,
                         "M in '%s' is a thousand on old drawings and a million today", shown);
    }
    return false;
}

/* ---- quantities ---- */

enum quantity_status line_try_quantity(struct line *line, struct span span,
                                       const struct quantity_form *form, struct quantity *quantity)
{
    bool old_unit = false;
    struct quantity read = {0};
    enum quantity_status status =
        quantity_read(line->arena, span.start, span.length, form, &read, &old_unit);
    if (status != QUANTITY_OK)
        return status;
    read.at = line_position(line, (size_t)(span.start - line->text));
    if (old_unit && !line->old_unit) {
        line->old_unit = true;
        line->old_unit_at = read.at;
    }
    *quantity = read;
    return QUANTITY_OK;
}

bool line_take_quantity(struct line *line, struct span span, const struct quantity_form *form,
                        struct quantity *quantity)
{
    enum quantity_status status = line_try_quantity(line, span, form, quantity);
    return status == QUANTITY_OK || line_fail_quantity(line, span, status, form);
}

bool line_quantity(struct line *line, const struct quantity_form *form, struct quantity *quantity)
{
    return line_take_quantity(line, line_span(line), form, quantity);
}

/* ---- refs and resistances ---- */

bool line_is_ref(const char *text, size_t length)
{
    enum { REF_BYTES_MAX = 32 };
    if (length == 0 || length > REF_BYTES_MAX || !is_letter_or_digit(text[0]) ||
        text[length - 1] == ' ')
        return false;
    for (size_t i = 0; i < length; i++)
        if (!is_letter_or_digit(text[i]) && (text[i] == '\0' || strchr(" .-/", text[i]) == NULL))
            return false;
    return true;
}

/* `T2`, `R12 a`, `1T2`; but `220 kohmm` is a mistyped resistance. */
static bool may_be_ref(struct span span)
{
    bool begins_with_digit = span.length > 0 && span.start[0] >= '0' && span.start[0] <= '9';
    return line_is_ref(span.start, span.length) &&
           !(begins_with_digit && memchr(span.start, ' ', span.length) != NULL);
}

bool line_take_resistance(struct line *line, struct span span, struct resistance *resistance)
{
    struct resistance read = {.set = true, .resistor = NOT_LISTED, .winding = NOT_LISTED};
    struct quantity_form form = {.unit = UNIT_RESISTANCE};
    enum quantity_status status = line_try_quantity(line, span, &form, &read.quantity);
    if (status == QUANTITY_UNREADABLE && may_be_ref(span)) {
        read.quantity.written = line_written(line, span);
        read.quantity.at = line_position(line, (size_t)(span.start - line->text));
    } else if (status != QUANTITY_OK) {
        return line_fail_quantity(line, span, status, &form);
    }
    *resistance = read;
    return true;
}

bool line_resistance(struct line *line, struct resistance *resistance)
{
    return line_take_resistance(line, line_span(line), resistance);
}

bool line_measured_resistance(struct line *line, struct quantity *quantity)
{
    static const char *const open_words[] = {"open", "open circuit", "o/c", NULL};
    struct span span = line_span(line);
    if (!span_is_any(span, open_words)) {
        struct quantity_form form = {.unit = UNIT_RESISTANCE};
        return line_take_quantity(line, span, &form, quantity);
    }
    *quantity = (struct quantity){.set = true,
                                  .value = LINE_OPEN_OHM,
                                  .unit = UNIT_RESISTANCE,
                                  .bound = BOUND_OVER,
                                  .written = line_written(line, span),
                                  .at = line_position(line, (size_t)(span.start - line->text))};
    return true;
}

/* ---- dates and sizes ---- */

bool line_date(struct line *line, struct date *date)
{
    struct span span = line_span(line);
    if (!date_read(line->arena, span.start, span.length, date))
        return line_fail(line, span, DIAGNOSTIC_DATE_UNREADABLE,
                         date_hint(line->arena, span.start, span.length), "'%s' is no date",
                         line_quote(line, span));
    date->at = line_position(line, (size_t)(span.start - line->text));
    return true;
}

bool line_years(struct line *line, struct year_span *years)
{
    struct span span = line_span(line);
    if (!year_read(line->arena, span.start, span.length, years))
        return line_fail(line, span, DIAGNOSTIC_DATE_UNREADABLE,
                         "write 1951, about 1951 or 1948 to 1950", "'%s' is no year",
                         line_quote(line, span));
    years->at = line_position(line, (size_t)(span.start - line->text));
    return true;
}

bool line_dimensions(struct line *line, struct dimensions *dimensions)
{
    struct span span = line_span(line);
    if (!dimensions_read(line->arena, span.start, span.length, dimensions))
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_UNREADABLE,
                         "write diameter x length, as in 22 x 51 mm, or the three sides of a block",
                         "'%s' is no size", line_quote(line, span));
    dimensions->at = line_position(line, (size_t)(span.start - line->text));
    return true;
}
