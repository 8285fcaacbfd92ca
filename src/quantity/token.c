#include "quantity/scan.h"

#include "base/utf8.h"

#include <string.h>

static bool is_digit_at(const char *cursor, const char *end)
{
    return cursor < end && *cursor >= '0' && *cursor <= '9';
}

static bool is_space_at(const char *cursor, const char *end)
{
    return scan_spaces(cursor, end) > cursor;
}

/* A comma that separates: before a space or at the end. */
static bool is_separator(const char *cursor, const char *end)
{
    return cursor < end && *cursor == ',' && (cursor + 1 == end || is_space_at(cursor + 1, end));
}

static bool is_boundary(const char *cursor, const char *end)
{
    return cursor == end || is_space_at(cursor, end) || is_separator(cursor, end);
}

static void skip_character(const char **cursor, const char *end)
{
    if ((unsigned char)**cursor < 0x80)
        ++*cursor;
    else
        utf8_next(cursor, end);
}

static const char *run_end(const char *cursor, const char *end)
{
    while (!is_boundary(cursor, end))
        skip_character(&cursor, end);
    return cursor;
}

/* As run_end, but a digit ends it too: no unit has one. */
static const char *letters_end(const char *cursor, const char *end)
{
    while (!is_boundary(cursor, end) && !is_digit_at(cursor, end))
        skip_character(&cursor, end);
    return cursor;
}

/* Letters that read as the sign between the sizes of a case. */
static bool skip_times_sign(const char **cursor, const char *end)
{
    const char *at = scan_spaces(*cursor, end);
    if (at == end)
        return false;
    uint32_t sign = utf8_next(&at, end);
    at = scan_spaces(at, end);
    if ((sign != 'x' && sign != 'X' && sign != 0xD7) || !is_digit_at(at, end))
        return false;
    *cursor = at;
    return true;
}

/* A lone `in` before a word is no unit: `in circuit`, `in series`. */
static bool is_preposition(const char *unit, const char *unit_end, const char *end)
{
    const char *next = scan_spaces(unit_end, end);
    return unit_end - unit == 2 && memcmp(unit, "in", 2) == 0 && next < end && next > unit_end &&
           *next != 'x' && !is_digit_at(next, end);
}

/* The longest unit of up to three words at cursor; NULL: none. *behind is its end. */
static const struct unit_spelling *longest_unit(const char *cursor, const char *end,
                                                const char **behind)
{
    const struct unit_spelling *found = NULL;
    const char *word = cursor;
    for (int words = 0; words < 3; words++) {
        const char *stop = letters_end(word, end);
        if (stop == word)
            break;
        const struct unit_spelling *unit = unit_find(cursor, (size_t)(stop - cursor), UNIT_COUNT);
        bool joined = is_digit_at(stop, end);
        if (unit != NULL && (!joined || unit_seconds(unit) > 1)) {
            found = unit;
            *behind = stop;
        }
        word = scan_spaces(stop, end);
        if (word == stop)
            break;
    }
    return found;
}

/* `1 h 10 min`: behind a time, more of it in a lesser unit. */
static const char *more_time(const char *cursor, const char *end, unsigned seconds)
{
    while (seconds > 1) {
        struct decimal number;
        const char *at = scan_spaces(cursor, end), *behind;
        if (!is_digit_at(at, end) || scan_number(&at, end, &number) != QUANTITY_OK)
            break;
        const struct unit_spelling *unit = longest_unit(scan_spaces(at, end), end, &behind);
        if (unit == NULL || unit_seconds(unit) == 0 || unit_seconds(unit) >= seconds)
            break;
        cursor = behind;
        seconds = unit_seconds(unit);
    }
    return cursor;
}

/* `100 V,60 s`: a unit, a comma and no space; to be refused as one. */
static bool lacks_space_after_comma(const char *unit, const char *end)
{
    const char *comma = memchr(unit, ',', (size_t)(run_end(unit, end) - unit));
    return comma != NULL && unit_find(unit, (size_t)(comma - unit), UNIT_COUNT) != NULL;
}

/* Behind one number: its unit, more time, or nothing. */
static const char *unit_behind(const char *cursor, const char *end,
                               const struct unit_spelling **unit)
{
    const char *at = scan_spaces(cursor, end), *behind = cursor;
    *unit = longest_unit(at, end, &behind);
    if (*unit != NULL && at > cursor && is_preposition(at, behind, end))
        *unit = NULL;
    if (*unit == NULL)
        return lacks_space_after_comma(at, end) ? run_end(at, end) : cursor;
    return more_time(behind, end, unit_seconds(*unit));
}

/* `±`, `+/-`, `+-`. */
static void skip_plus_minus(const char **cursor, const char *end)
{
    static const char *const signs[] = {"±", "+/-", "+/−", "+-"};
    for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++) {
        size_t length = strlen(signs[i]);
        if ((size_t)(end - *cursor) > length && memcmp(*cursor, signs[i], length) == 0) {
            *cursor = scan_spaces(*cursor + length, end);
            return;
        }
    }
}

/* `-20/+100`: a second number behind a stroke, when it has a sign. */
static void second_limit(const char **cursor, const char *end)
{
    struct decimal number;
    const char *at = scan_spaces(*cursor, end);
    if (at == end || *at != '/')
        return;
    at = scan_spaces(at + 1, end);
    const char *sign = at;
    if (scan_sign(&sign, end) != 0 && scan_begins_number(at, end)) {
        scan_number(&at, end, &number);
        *cursor = at;
    }
}

/* `22 mm x 51 mm`: behind the first side, the others, when a length it is. */
static const char *more_sides(const char *cursor, const char *end)
{
    const struct unit_spelling *unit = NULL;
    struct decimal number;
    const char *behind = cursor;
    while (skip_times_sign(&behind, end)) {
        scan_number(&behind, end, &number);
        behind = unit_behind(behind, end, &unit);
        if (unit != NULL && unit->unit == UNIT_LENGTH)
            cursor = behind;
    }
    return cursor;
}

/* The end of a quantity, a tolerance, a size or a date that begins at cursor. */
static const char *value_end(const char *cursor, const char *end)
{
    const struct unit_spelling *unit;
    struct decimal number;
    skip_plus_minus(&cursor, end);
    scan_number(&cursor, end, &number);
    second_limit(&cursor, end);
    const char *behind = unit_behind(cursor, end, &unit);
    if (unit == NULL || unit->unit == UNIT_LENGTH)
        behind = more_sides(behind, end);
    /* What hangs on it without a space belongs to it, so that it is refused as a whole. */
    return run_end(behind, end);
}

static bool begins_value(const char *cursor, const char *end)
{
    const char *at = cursor;
    skip_plus_minus(&at, end);
    return scan_begins_number(at, end);
}

bool quantity_token_next(const char **cursor, const char *end, struct quantity_token *token)
{
    const char *at = scan_spaces(*cursor, end);
    *token = (struct quantity_token){0};
    while (is_separator(at, end)) {
        token->after_comma = true;
        at = scan_spaces(at + 1, end);
    }
    *cursor = at;
    if (at == end)
        return false;
    token->start = at;
    const char *bound = at;
    bool bounded = scan_word(&bound, end, "over") || scan_word(&bound, end, "under");
    if (!bounded && (*at == '<' || *at == '>')) {
        bounded = true;
        bound = at + 1;
    }
    bound = scan_spaces(bound, end);
    if (bounded && begins_value(bound, end))
        at = bound;
    token->is_number = begins_value(at, end);
    at = token->is_number ? value_end(at, end) : run_end(at, end);
    token->length = (size_t)(at - token->start);
    *cursor = at;
    return true;
}
