#include "quantity/scan.h"

#include <math.h>
#include <string.h>
#include <strings.h>

/* A number with its unit, before it is compared with what was wanted. */
struct magnitude {
    double value;
    enum unit unit;
    bool has_unit;
    enum unit_kind kind;
    unsigned seconds;
};

static enum bound bound_word(const char **cursor, const char *end)
{
    if (*cursor < end && (**cursor == '<' || **cursor == '>'))
        return *(*cursor)++ == '<' ? BOUND_UNDER : BOUND_OVER;
    if (scan_word(cursor, end, "over"))
        return BOUND_OVER;
    return scan_word(cursor, end, "under") ? BOUND_UNDER : BOUND_NONE;
}

/* Where the unit that begins at cursor ends: at the next number of `1 h 10 min`. */
static const char *unit_end(const char *cursor, const char *end)
{
    while (cursor < end && !(*cursor >= '0' && *cursor <= '9'))
        cursor++;
    return cursor;
}

static bool in_si(const struct decimal *number, const struct unit_spelling *spelling, double *value)
{
    if (!decimal_value(number, spelling->exponent, value))
        return false;
    switch ((enum unit_kind)spelling->kind) {
    case UNIT_KIND_FACTOR:
        *value *= spelling->factor;
        break;
    case UNIT_KIND_FAHRENHEIT:
        *value = (*value - 32) * 5 / 9;
        break;
    case UNIT_KIND_PLAIN:
    case UNIT_KIND_OLD:
    case UNIT_KIND_BARE_M:
        break;
    }
    return true;
}

/* `4k7`, `4k7 ohm`, `4n7F`: the letter is prefix and point. */
static enum quantity_status coded_magnitude(const struct decimal *number, const char *text,
                                            const char *end, struct magnitude *magnitude)
{
    static const struct {
        char code;
        enum unit unit;
        int exponent;
    } codes[] = {{'R', UNIT_RESISTANCE, 0},    {'k', UNIT_RESISTANCE, 3},
                 {'M', UNIT_RESISTANCE, 6},    {'G', UNIT_RESISTANCE, 9},
                 {'p', UNIT_CAPACITANCE, -12}, {'n', UNIT_CAPACITANCE, -9},
                 {'u', UNIT_CAPACITANCE, -6}};
    size_t i = 0;
    while (codes[i].code != number->code)
        i++;
    if (text < end) {
        const struct unit_spelling *unit = unit_find(text, (size_t)(end - text), codes[i].unit);
        if (unit == NULL || unit->unit != codes[i].unit || unit->exponent != 0 ||
            unit->text[0] == 'R')
            return QUANTITY_UNREADABLE;
    }
    magnitude->unit = codes[i].unit;
    magnitude->has_unit = true;
    return decimal_value(number, codes[i].exponent, &magnitude->value) ? QUANTITY_OK
                                                                       : QUANTITY_UNREADABLE;
}

/* `230 V a.c.`: what kind of volts or current it is says nothing about how many. */
static const struct unit_spelling *unit_of(const char *unit, const char *end, enum unit wanted)
{
    static const char *const kinds[] = {" a.c.", " ac", " d.c.", " dc", " rms", " r.m.s."};
    const struct unit_spelling *found = unit_find(unit, (size_t)(end - unit), wanted);
    for (size_t i = 0; found == NULL && i < sizeof kinds / sizeof kinds[0]; i++) {
        size_t length = strlen(kinds[i]);
        if ((size_t)(end - unit) <= length || strncasecmp(end - length, kinds[i], length) != 0)
            continue;
        found = unit_find(unit, (size_t)(end - unit) - length, wanted);
        if (found != NULL && found->unit != UNIT_VOLTAGE && found->unit != UNIT_CURRENT)
            return NULL;
    }
    return found;
}

static enum quantity_status magnitude_part(const char **cursor, const char *end, enum unit wanted,
                                           struct magnitude *magnitude)
{
    struct decimal number;
    const char *first = *cursor;
    enum quantity_status status = scan_number(cursor, end, &number);
    if (status != QUANTITY_OK || *cursor == first)
        return status == QUANTITY_OK ? QUANTITY_UNREADABLE : status;
    const char *unit = scan_spaces(*cursor, end), *behind = unit_end(unit, end);
    const char *last = scan_trim_end(unit, behind);
    *cursor = behind;
    if (number.code != 0)
        return coded_magnitude(&number, unit, last, magnitude);
    if (unit == last) {
        magnitude->has_unit = false;
        return decimal_value(&number, 0, &magnitude->value) ? QUANTITY_OK : QUANTITY_UNREADABLE;
    }
    const struct unit_spelling *spelling = unit_of(unit, last, wanted);
    if (spelling == NULL || !in_si(&number, spelling, &magnitude->value))
        return QUANTITY_UNREADABLE;
    magnitude->unit = spelling->unit;
    magnitude->has_unit = true;
    magnitude->kind = spelling->kind;
    magnitude->seconds = unit_seconds(spelling);
    return QUANTITY_OK;
}

/* One number and unit, or a time in falling units: each part less than one of the unit before. */
static enum quantity_status read_magnitude(const char *cursor, const char *end, enum unit wanted,
                                           struct magnitude *magnitude)
{
    enum quantity_status status = magnitude_part(&cursor, end, wanted, magnitude);
    unsigned seconds = magnitude->seconds;
    while (status == QUANTITY_OK && cursor < end) {
        struct magnitude part = {0};
        if (seconds <= 1 || magnitude->value < 0 || scan_sign(&cursor, end) != 0)
            return QUANTITY_UNREADABLE;
        status = magnitude_part(&cursor, end, UNIT_TIME, &part);
        if (status == QUANTITY_OK && (part.seconds == 0 || part.value >= seconds))
            return QUANTITY_UNREADABLE;
        magnitude->value += part.value;
        seconds = part.seconds;
    }
    return status;
}

static enum quantity_status fit(const struct quantity_form *form, struct magnitude *magnitude)
{
    if (!magnitude->has_unit) {
        bool any = form->unit == UNIT_COUNT;
        if (form->unit != UNIT_NONE && !form->unit_optional)
            return QUANTITY_NO_UNIT;
        magnitude->unit = any ? UNIT_NONE : form->unit;
        return QUANTITY_OK;
    }
    if (form->unit != UNIT_COUNT && form->unit != magnitude->unit)
        return QUANTITY_WRONG_UNIT;
    if (magnitude->kind == UNIT_KIND_BARE_M && form->bare_m_refused)
        return QUANTITY_MEGA_OR_KILO;
    return QUANTITY_OK;
}

enum quantity_status quantity_read(struct arena *arena, const char *text, size_t length,
                                   const struct quantity_form *form, struct quantity *quantity,
                                   bool *old_unit)
{
    const char *end = scan_trim_end(text, text + length), *start = scan_spaces(text, end);
    const char *cursor = start;
    enum bound bound = bound_word(&cursor, end);
    cursor = scan_spaces(cursor, end);
    struct magnitude magnitude = {0};
    enum quantity_status status = read_magnitude(cursor, end, form->unit, &magnitude);
    if (status == QUANTITY_OK)
        status = fit(form, &magnitude);
    if (status != QUANTITY_OK && status != QUANTITY_WRONG_UNIT)
        return status;
    *quantity = (struct quantity){.set = true,
                                  .value = magnitude.value,
                                  .unit = magnitude.unit,
                                  .bound = bound,
                                  .written = arena_text(arena, start, (size_t)(end - start))};
    if (old_unit != NULL)
        *old_unit = magnitude.kind == UNIT_KIND_OLD;
    return status;
}

/* Where the first number of a text begins and ends. */
struct cut {
    const char *number, *rest;
};

static struct cut cut_number(const char *text)
{
    const char *end = text + strlen(text);
    struct cut cut = {text, text};
    struct decimal number;
    while (cut.number < end && !scan_begins_number(cut.number, end))
        cut.number++;
    cut.rest = cut.number;
    if (cut.number < end)
        scan_number(&cut.rest, end, &number);
    return cut;
}

/* The number without its marks, but for a point where the one at `point` stands. */
static const char *without_marks(struct arena *arena, const struct cut *cut, const char *point)
{
    char *text = arena_get(arena, (size_t)(cut->rest - cut->number) + 1);
    size_t length = 0;
    for (const char *at = cut->number; at < cut->rest; at++)
        if (at == point)
            text[length++] = '.';
        else if (*at != ',' && *at != '.')
            text[length++] = *at;
    return text;
}

/* `1,000 V`: a decimal sign or not. Of several marks only a last one that differs can be one. */
static const char *comma_hint(struct arena *arena, const char *text)
{
    struct cut cut = cut_number(text);
    int before = (int)(cut.number - text);
    const char *first = cut.number, *last = cut.rest;
    while (first < last && *first != ',' && *first != '.')
        first++;
    do
        last--;
    while (last > first && *last != ',' && *last != '.');
    const char *whole = without_marks(arena, &cut, cut.rest);
    const char *broken = without_marks(arena, &cut, last);
    if (first != last)
        return arena_print(arena, "write %.*s%s%s, without marks between thousands", before, text,
                           *first != *last ? broken : whole, cut.rest);
    return arena_print(arena, "write %.*s%s%s or %.*s%s%s", before, text, whole, cut.rest, before,
                       text, broken, cut.rest);
}

static const char *clock_hint(struct arena *arena, const char *text)
{
    struct cut cut = cut_number(text);
    const char *colon = memchr(cut.number, ':', (size_t)(cut.rest - cut.number));
    if (!colon) /* it stands further on, as in `1 h 12:30` */
        return "write 12 min 30 s or 12 h 30 min";
    int first = (int)(colon - cut.number);
    const char *second = colon + 1;
    const char *again = memchr(second, ':', (size_t)(cut.rest - second));
    if (again != NULL)
        return arena_print(arena, "write %.*s h %.*s min %.*s s", first, cut.number,
                           (int)(again - second), second, (int)(cut.rest - again - 1), again + 1);
    int minutes = (int)(cut.rest - second);
    return arena_print(arena, "write %.*s min %.*s s or %.*s h %.*s min", first, cut.number,
                       minutes, second, first, cut.number, minutes, second);
}

const char *quantity_hint(struct arena *arena, enum quantity_status status, const char *text,
                          const struct quantity_form *form)
{
    struct cut cut;
    switch (status) {
    case QUANTITY_OK:
    case QUANTITY_UNREADABLE:
        return NULL;
    case QUANTITY_NO_UNIT:
        if (form->unit == UNIT_RESISTANCE) { /* the two that the trade writes beside each other */
            cut = cut_number(text);
            return arena_print(arena, "write %.*s ohm or %.*sk", (int)(cut.rest - cut.number),
                               cut.number, (int)(cut.rest - cut.number), cut.number);
        }
        return form->unit == UNIT_COUNT
                   ? NULL
                   : arena_print(arena, "add the unit, as in %s", unit_example(form->unit));
    case QUANTITY_WRONG_UNIT:
        return arena_print(arena, "%s %s is wanted, as in %s",
                           form->unit == UNIT_INDUCTANCE ? "an" : "a", unit_name(form->unit),
                           unit_example(form->unit));
    case QUANTITY_COMMA:
        return comma_hint(arena, text);
    case QUANTITY_CLOCK:
        return clock_hint(arena, text);
    case QUANTITY_MEGA_OR_KILO:
        cut = cut_number(text);
        return arena_print(arena, "write %.*sk or %.*s meg", (int)(cut.rest - cut.number),
                           cut.number, (int)(cut.rest - cut.number), cut.number);
    }
    return NULL;
}
