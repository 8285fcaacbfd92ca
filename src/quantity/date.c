#include "quantity/scan.h"

#include "base/utf8.h"

#include <string.h>
#include <strings.h>

static bool fixed_number(const char *text, size_t digit_count, int *value)
{
    *value = 0;
    for (size_t i = 0; i < digit_count; i++) {
        if (text[i] < '0' || text[i] > '9')
            return false;
        *value = *value * 10 + (text[i] - '0');
    }
    return true;
}

static bool is_leap(int year)
{
    return (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
}

static int days_in_month(int year, int month)
{
    static const int days[12] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
    return days[month - 1] + (month == 2 && is_leap(year));
}

bool date_read(struct arena *arena, const char *text, size_t length, struct date *date)
{
    const char *end = scan_trim_end(text, text + length), *start = scan_spaces(text, end);
    struct date read = {.set = true};
    if (end - start != 10 || start[4] != '-' || start[7] != '-' ||
        !fixed_number(start, 4, &read.year) || !fixed_number(start + 5, 2, &read.month) ||
        !fixed_number(start + 8, 2, &read.day))
        return false;
    if (read.year < 1800 || read.month < 1 || read.month > 12 || read.day < 1 ||
        read.day > days_in_month(read.year, read.month))
        return false;
    read.written = arena_text(arena, start, 10);
    *date = read;
    return true;
}

/* ---- what a date typed in another way may mean ---- */

/* A piece of `14 Jan 2031`: a number, or a month by its name. */
struct date_piece {
    int number;
    size_t digits; /* 0: a month's name */
};

static bool is_digit(char byte)
{
    return byte >= '0' && byte <= '9';
}

static bool is_letter(char byte)
{
    return (byte >= 'a' && byte <= 'z') || (byte >= 'A' && byte <= 'Z');
}

static int month_of(const char *word, size_t length)
{
    static const char *const months[12] = {"january",   "february", "march",    "april",
                                           "may",       "june",     "july",     "august",
                                           "september", "october",  "november", "december"};
    for (int i = 0; i < 12; i++)
        if (length >= 3 && length <= strlen(months[i]) && strncasecmp(word, months[i], length) == 0)
            return i + 1;
    return 0;
}

/* The next piece, with what parts it from the one before; false: none that a date may have. */
static bool piece_read(const char **cursor, const char *end, struct date_piece *piece)
{
    while (*cursor < end && strchr("-/., ", **cursor))
        ++*cursor;
    const char *start = *cursor;
    *piece = (struct date_piece){0};
    while (*cursor < end && is_digit(**cursor) && *cursor - start < 4)
        piece->number = piece->number * 10 + (*(*cursor)++ - '0');
    piece->digits = (size_t)(*cursor - start);
    if (piece->digits)
        return *cursor == end || !is_digit(**cursor);
    while (*cursor < end && is_letter(**cursor))
        ++*cursor;
    piece->number = month_of(start, (size_t)(*cursor - start));
    return piece->number > 0;
}

static bool pieces_read(const char *text, size_t length, struct date_piece pieces[3])
{
    const char *end = scan_trim_end(text, text + length), *cursor = scan_spaces(text, end);
    for (size_t i = 0; i < 3; i++)
        if (!piece_read(&cursor, end, &pieces[i]))
            return false;
    return cursor == end;
}

/* "2031-02-03" from the pieces in this order; NULL: no day of the calendar. */
static const char *date_from(struct arena *arena, const struct date_piece *year,
                             const struct date_piece *month, const struct date_piece *day)
{
    if (day->digits == 0 || day->digits > 2 || month->digits > 2 || year->digits < 2)
        return NULL;
    int full_year = year->digits == 2 ? 2000 + year->number : year->number;
    if (full_year < 1800 || month->number < 1 || month->number > 12 || day->number < 1 ||
        day->number > days_in_month(full_year, month->number))
        return NULL;
    return arena_print(arena, "%04d-%02d-%02d", full_year, month->number, day->number);
}

const char *date_hint(struct arena *arena, const char *text, size_t length)
{
    struct date_piece pieces[3];
    const char *first = NULL, *second = NULL;
    if (pieces_read(text, length, pieces)) {
        bool year_first = pieces[0].digits == 4;
        first = year_first ? date_from(arena, &pieces[0], &pieces[1], &pieces[2])
                           : date_from(arena, &pieces[2], &pieces[1], &pieces[0]);
        second = year_first ? NULL : date_from(arena, &pieces[2], &pieces[0], &pieces[1]);
        if (year_first && !first && pieces[1].digits == 2 && pieces[2].digits == 2)
            return "the calendar has no such day";
    }
    if (first && second && strcmp(first, second) != 0)
        return arena_print(arena, "write %s or %s", first, second);
    if (first || second)
        return arena_print(arena, "write %s", first ? first : second);
    return "write year-month-day, as in 2031-02-10";
}

/* Days of the Gregorian calendar from 0000-03-01 to the first of March of a year, less a shift. */
long date_days(const struct date *date)
{
    /* The year begins in March, so that the leap day is its last. */
    int year = date->month < 3 ? date->year - 1 : date->year;
    int month = (date->month + 9) % 12;
    long days_before_month = (153L * month + 2) / 5;
    long days_before_year = 365L * year + year / 4 - year / 100 + year / 400;
    return days_before_year + days_before_month + date->day - 1 - 719468;
}

static bool year_number(const char **cursor, const char *end, int *year)
{
    if (end - *cursor < 4 || !fixed_number(*cursor, 4, year) || *year < 1880 || *year > 2200)
        return false;
    *cursor += 4;
    return *cursor == end || **cursor < '0' || **cursor > '9';
}

/* `to`, `-` or an en dash between two years. */
static bool range_word(const char **cursor, const char *end)
{
    const char *at = scan_spaces(*cursor, end);
    if (!scan_word(&at, end, "to")) {
        uint32_t sign = at < end ? utf8_next(&at, end) : 0;
        if (sign != '-' && sign != 0x2013 && sign != 0x2212)
            return false;
    }
    *cursor = scan_spaces(at, end);
    return true;
}

bool year_read(struct arena *arena, const char *text, size_t length, struct year_span *years)
{
    const char *end = scan_trim_end(text, text + length), *start = scan_spaces(text, end);
    const char *cursor = start;
    struct year_span read = {.set = true, .about = scan_word(&cursor, end, "about")};
    cursor = scan_spaces(cursor, end);
    if (!year_number(&cursor, end, &read.first))
        return false;
    read.last = read.first;
    if (cursor < end && (!range_word(&cursor, end) || !year_number(&cursor, end, &read.last)))
        return false;
    if (cursor != end || read.last < read.first)
        return false;
    read.written = arena_text(arena, start, (size_t)(end - start));
    *years = read;
    return true;
}

/* One measure: a number, and its length unit where it is written. */
static bool measure(const char **cursor, const char *end, struct decimal *number,
                    const struct unit_spelling **unit)
{
    if (!scan_begins_number(*cursor, end) || scan_number(cursor, end, number) != QUANTITY_OK ||
        number->code != 0 || number->negative)
        return false;
    const char *start = scan_spaces(*cursor, end), *stop = start;
    while (stop < end && *stop != 'x' && *stop != 'X' && (unsigned char)*stop != 0xC3)
        stop++;
    const char *last = scan_trim_end(start, stop);
    *cursor = stop;
    *unit = last > start ? unit_find(start, (size_t)(last - start), UNIT_LENGTH) : NULL;
    return last == start || (*unit != NULL && (*unit)->unit == UNIT_LENGTH);
}

static bool times_sign(const char **cursor, const char *end)
{
    uint32_t sign = utf8_next(cursor, end);
    *cursor = scan_spaces(*cursor, end);
    return sign == 'x' || sign == 'X' || sign == 0xD7;
}

static bool metres(const struct decimal *number, const struct unit_spelling *unit, double *value)
{
    if (!decimal_value(number, unit->exponent, value))
        return false;
    if (unit->kind == UNIT_KIND_FACTOR)
        *value *= unit->factor;
    return *value > 0;
}

bool dimensions_read(struct arena *arena, const char *text, size_t length,
                     struct dimensions *dimensions)
{
    const char *end = scan_trim_end(text, text + length), *start = scan_spaces(text, end);
    const char *cursor = start;
    struct decimal numbers[3];
    const struct unit_spelling *units[3];
    double sides[3];
    size_t count = 0;
    do {
        if (count == 3 || !measure(&cursor, end, &numbers[count], &units[count]))
            return false;
        count++;
    } while (cursor < end && times_sign(&cursor, end));
    if (cursor != end || count < 2 || units[count - 1] == NULL)
        return false;
    for (size_t i = 0; i < count; i++)
        if (!metres(&numbers[i], units[i] != NULL ? units[i] : units[count - 1], &sides[i]))
            return false;
    *dimensions = (struct dimensions){.set = true,
                                      .written = arena_text(arena, start, (size_t)(end - start))};
    dimensions->length_m = sides[count - 1];
    if (count == 2) {
        dimensions->diameter_m = sides[0];
    } else {
        dimensions->width_m = sides[0];
        dimensions->height_m = sides[1];
    }
    return true;
}
