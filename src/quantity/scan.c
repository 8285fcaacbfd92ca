#include "quantity/scan.h"

#include "base/utf8.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

static bool is_letter(char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

static uint32_t peek(const char *cursor, const char *end, const char **behind)
{
    *behind = cursor;
    if (cursor == end)
        return 0;
    if ((unsigned char)*cursor >= 0x80)
        return utf8_next(behind, end);
    *behind = cursor + 1;
    return (uint32_t)*cursor;
}

const char *scan_spaces(const char *cursor, const char *end)
{
    const char *behind;
    for (;;) {
        /* Nearly always a plain letter or digit: no need to decode it. */
        if (cursor == end || (*cursor > ' ' && *cursor < 0x7F))
            return cursor;
        uint32_t sign = peek(cursor, end, &behind);
        if (sign != ' ' && sign != '\t' && sign != 0xA0 && sign != 0x2009 && sign != 0x202F)
            return cursor;
        cursor = behind;
    }
}

const char *scan_trim_end(const char *start, const char *end)
{
    const char *last = start;
    for (const char *cursor = start; cursor < end;) {
        const char *behind = scan_spaces(cursor, end);
        if (behind > cursor) {
            cursor = behind;
            continue;
        }
        peek(cursor, end, &behind);
        last = cursor = behind;
    }
    return last;
}

bool scan_word(const char **cursor, const char *end, const char *word)
{
    const char *at = *cursor;
    for (; *word != '\0'; word++, at++) {
        if (at == end)
            return false;
        char letter = *at >= 'A' && *at <= 'Z' ? (char)(*at - 'A' + 'a') : *at;
        if (letter != *word)
            return false;
    }
    if (at < end && (is_letter(*at) || is_digit(*at)))
        return false;
    *cursor = at;
    return true;
}

int scan_sign(const char **cursor, const char *end)
{
    const char *behind;
    uint32_t sign = peek(*cursor, end, &behind);
    if (sign != '-' && sign != 0x2212 && sign != '+')
        return 0;
    *cursor = behind;
    return sign == '+' ? 1 : -1;
}

/* A vulgar fraction sign as numerator and denominator. */
static bool vulgar(const char **cursor, const char *end, unsigned *numerator, unsigned *denominator)
{
    static const struct {
        uint32_t sign;
        unsigned numerator, denominator;
    } fractions[] = {{0xBC, 1, 4},   {0xBD, 1, 2},   {0xBE, 3, 4},   {0x2153, 1, 3}, {0x2154, 2, 3},
                     {0x215B, 1, 8}, {0x215C, 3, 8}, {0x215D, 5, 8}, {0x215E, 7, 8}};
    const char *behind;
    uint32_t sign = peek(*cursor, end, &behind);
    for (size_t i = 0; i < sizeof fractions / sizeof fractions[0]; i++) {
        if (sign == fractions[i].sign) {
            *numerator = fractions[i].numerator;
            *denominator = fractions[i].denominator;
            *cursor = behind;
            return true;
        }
    }
    return false;
}

bool scan_begins_number(const char *cursor, const char *end)
{
    unsigned numerator, denominator;
    if (scan_sign(&cursor, end) != 0)
        cursor = scan_spaces(cursor, end);
    if (cursor == end)
        return false;
    if (*cursor == '.')
        return cursor + 1 < end && is_digit(cursor[1]);
    return is_digit(*cursor) || vulgar(&cursor, end, &numerator, &denominator);
}

/* false: more digits than anybody measures. */
static bool add_digit(struct decimal *number, char digit, bool behind_point)
{
    if (behind_point)
        number->exponent--;
    if (number->count == 0 && digit == '0')
        return number->exponent > -40;
    if (number->count + 1 >= sizeof number->digits - 4)
        return false;
    number->digits[number->count++] = digit;
    number->digits[number->count] = '\0';
    return true;
}

static bool digits(const char **cursor, const char *end, struct decimal *number, bool behind_point)
{
    bool fits = true;
    while (*cursor < end && is_digit(**cursor))
        fits = add_digit(number, *(*cursor)++, behind_point) && fits;
    return fits;
}

static size_t digits_ahead(const char *cursor, const char *end)
{
    size_t count = 0;
    while (cursor + count < end && is_digit(cursor[count]))
        count++;
    return count;
}

/* The whole part; a thin space may stand before each group of three, as this program writes it. */
static bool whole_part(const char **cursor, const char *end, struct decimal *number)
{
    bool fits = digits(cursor, end, number, false);
    for (;;) {
        const char *behind;
        uint32_t sign = peek(*cursor, end, &behind);
        if ((sign != 0x2009 && sign != 0x202F) || digits_ahead(behind, end) != 3)
            return fits;
        *cursor = behind;
        fits = digits(cursor, end, number, false) && fits;
    }
}

static bool small_whole(const char **cursor, const char *end, unsigned *value)
{
    size_t count = digits_ahead(*cursor, end);
    if (count == 0 || count > 3)
        return false;
    *value = 0;
    while (count-- > 0)
        *value = *value * 10 + (unsigned)(*(*cursor)++ - '0');
    return true;
}

static void set_fraction(struct decimal *number, unsigned whole, unsigned numerator,
                         unsigned denominator)
{
    unsigned value = whole * denominator + numerator;
    char reversed[12];
    size_t count = 0;
    for (; value > 0; value /= 10)
        reversed[count++] = (char)('0' + value % 10);
    number->count = 0;
    number->digits[0] = '\0';
    number->exponent = 0;
    number->divisor = denominator;
    while (count > 0)
        add_digit(number, reversed[--count], false);
}

/* `1/2`, `1 1/2`, `½`, `1½`. false, cursor unmoved: none. */
static bool fraction(const char **cursor, const char *end, struct decimal *number)
{
    const char *at = *cursor;
    unsigned whole = 0, numerator, denominator;
    bool has_whole = small_whole(&at, end, &whole);
    if (has_whole && at < end && *at == '/') {
        numerator = whole;
        whole = 0;
    } else {
        at = has_whole ? scan_spaces(at, end) : at;
        if (vulgar(&at, end, &numerator, &denominator)) {
            set_fraction(number, whole, numerator, denominator);
            *cursor = at;
            return true;
        }
        if (!has_whole || !small_whole(&at, end, &numerator) || at == end || *at != '/')
            return false;
    }
    at++;
    if (!small_whole(&at, end, &denominator) || denominator < 2 || denominator > 100 ||
        numerator >= denominator)
        return false;
    set_fraction(number, whole, numerator, denominator);
    *cursor = at;
    return true;
}

/* The letter of IEC 60062 that stands here for the decimal point; 0: none. */
static char point_letter(const char *cursor, const char *end, bool leads, const char **behind)
{
    uint32_t sign = peek(cursor, end, behind);
    if (digits_ahead(*behind, end) == 0)
        return 0;
    switch (sign) {
    case 'R':
    case 'r':
        return leads && sign == 'r' ? 0 : 'R';
    case 'k':
    case 'K':
        return 'k';
    case 'M':
    case 'G':
    case 'p':
    case 'n':
    case 'u':
        return (char)sign;
    case 0xB5:
    case 0x3BC:
        return 'u';
    default:
        return 0;
    }
}

/* Behind a point letter come its digits and then no letter but that of the unit. */
static enum quantity_status coded(const char **cursor, const char *end, struct decimal *number)
{
    return digits(cursor, end, number, true) ? QUANTITY_OK : QUANTITY_UNREADABLE;
}

/*
 * A comma between digits is the decimal sign; before exactly three digits it could part thousands,
 * unless what stands before it is 0 or has more than three digits.
 */
static enum quantity_status comma_part(const char **cursor, const char *end, const char *first,
                                       struct decimal *number)
{
    size_t before = (size_t)(*cursor - first), after = digits_ahead(*cursor + 1, end);
    bool leading_zero = number->count == 0;
    ++*cursor;
    bool fits = digits(cursor, end, number, true);
    bool again =
        *cursor < end && (**cursor == ',' || **cursor == '.') && digits_ahead(*cursor + 1, end) > 0;
    while (*cursor + 1 < end && (**cursor == ',' || **cursor == '.') && is_digit((*cursor)[1]))
        *cursor += 1 + digits_ahead(*cursor + 1, end);
    if (again || (after == 3 && before <= 3 && !leading_zero))
        return QUANTITY_COMMA;
    return fits ? QUANTITY_OK : QUANTITY_UNREADABLE;
}

static enum quantity_status clock_part(const char **cursor, const char *end)
{
    while (*cursor + 1 < end && **cursor == ':' && is_digit((*cursor)[1]))
        *cursor += 1 + digits_ahead(*cursor + 1, end);
    return QUANTITY_CLOCK;
}

/* `e-6`: a sign is required, so that the valve 6E5 is no number. */
static bool exponent_part(const char **cursor, const char *end, struct decimal *number)
{
    const char *at = *cursor;
    if (at == end || (*at != 'e' && *at != 'E'))
        return true;
    at++;
    int sign = scan_sign(&at, end);
    unsigned power;
    if (sign == 0 || digits_ahead(at, end) == 0)
        return true;
    bool fits = small_whole(&at, end, &power) && power <= 99;
    *cursor = at + digits_ahead(at, end);
    if (fits)
        number->exponent += sign * (int)power;
    return fits;
}

enum quantity_status scan_number(const char **cursor, const char *end, struct decimal *number)
{
    const char *at = *cursor, *behind;
    *number = (struct decimal){.divisor = 1};
    if (!scan_begins_number(at, end)) {
        number->code = point_letter(at, end, true, &behind);
        if (number->code == 0)
            return QUANTITY_UNREADABLE;
        *cursor = behind;
        return coded(cursor, end, number);
    }
    number->negative = scan_sign(&at, end) < 0;
    const char *first = at = scan_spaces(at, end);
    if (fraction(&at, end, number)) {
        *cursor = at;
        return QUANTITY_OK;
    }
    bool fits = whole_part(&at, end, number);
    enum quantity_status status = QUANTITY_OK;
    number->code = at > first ? point_letter(at, end, false, &behind) : 0;
    if (number->code != 0) {
        at = behind;
        status = coded(&at, end, number);
    } else if (at + 1 < end && *at == '.' && is_digit(at[1])) {
        at++;
        fits = digits(&at, end, number, true) && fits;
        if (at + 1 < end && *at == ',' && is_digit(at[1])) {
            comma_part(&at, end, first, number);
            status = QUANTITY_COMMA;
        }
    } else if (at + 1 < end && *at == ',' && is_digit(at[1])) {
        status = comma_part(&at, end, first, number);
    } else if (at + 1 < end && *at == ':' && is_digit(at[1])) {
        status = clock_part(&at, end);
    }
    fits = exponent_part(&at, end, number) && fits;
    *cursor = at;
    return status == QUANTITY_OK && !fits ? QUANTITY_UNREADABLE : status;
}

static const double powers[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,
                                1e8,  1e9,  1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
                                1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};

/* A product or quotient of two exact doubles is correctly rounded. */
static bool exact_value(const struct decimal *number, int exponent, double *value)
{
    unsigned long long whole = 0;
    if (number->count > 15 || exponent < -22 || exponent > 22)
        return false;
    for (unsigned i = 0; i < number->count; i++)
        whole = whole * 10 + (unsigned)(number->digits[i] - '0');
    *value = exponent < 0 ? (double)whole / powers[-exponent] : (double)whole * powers[exponent];
    return true;
}

bool decimal_value(const struct decimal *number, int exponent, double *value)
{
    double result = 0;
    exponent += number->exponent;
    if (number->count > 0 && !exact_value(number, exponent, &result)) {
        if (exponent < -99 || exponent > 99)
            return false;
        /* Without a decimal point strtod is the same in every locale. */
        char text[sizeof number->digits + 8];
        size_t length = number->count;
        memcpy(text, number->digits, length);
        text[length++] = 'e';
        text[length++] = exponent < 0 ? '-' : '+';
        text[length++] = (char)('0' + abs(exponent) / 10);
        text[length++] = (char)('0' + abs(exponent) % 10);
        text[length] = '\0';
        result = strtod(text, NULL);
    }
    result /= number->divisor;
    if (result != 0 && !(result >= 1e-30 && result <= 1e30))
        return false;
    *value = number->negative && result != 0 ? -result : result;
    return true;
}
