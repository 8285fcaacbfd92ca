/*
 * Doubles in the shortest form that reads back the same.
 *
 * Method: F. Loitsch, "Printing floating-point numbers quickly and accurately with integers", PLDI
 * 2010 (Grisu3). The value and the middles to its two neighbours are scaled by a power of ten that
 * brings them into a range where digits fall out of 64-bit integers; digits are made until the
 * number is told from its neighbours, and the last one is moved towards the value. Where the error
 * of the scaling leaves a doubt (about one number in two hundred) the C library's printf decides.
 * Findings hold thousands of numbers: printf for each would cost more than the assessment.
 */
#include "write/json.h"

#include <assert.h>
#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* significand * 2^exponent */
struct scaled {
    uint64_t significand;
    int exponent;
};

static const struct {
    uint64_t significand;
    int exponent2, exponent10;
} powers[] = {
#include "write/json_powers.h"
};

enum {
    FRACTION_BITS = 52,
    EXPONENT_BIAS = 1023 + FRACTION_BITS,
    SCALED_EXPONENT_MAX = -32, /* of the scaled value: its whole part fits 32 bits */
    SCALED_EXPONENT_MIN = -60,
    POWER_STEP = 8,
    POWER_FIRST = -348,
    DIGITS_MAX = 20
};
static const double log10_of_2 = 0.30102999566398114;

struct digits {
    char text[DIGITS_MAX];
    int count;
    int exponent10; /* the number is digits * 10^exponent10 */
};

static struct scaled normalized(struct scaled x)
{
    int shift = __builtin_clzll(x.significand);
    return (struct scaled){x.significand << shift, x.exponent - shift};
}

/* The upper half of the product, rounded. */
static struct scaled product(struct scaled a, struct scaled b)
{
    unsigned __int128 whole = (unsigned __int128)a.significand * b.significand;
    uint64_t high = (uint64_t)(whole >> 64);
    return (struct scaled){high + ((uint64_t)whole >> 63), a.exponent + b.exponent + 64};
}

static struct scaled from_double(double value)
{
    uint64_t bits;
    memcpy(&bits, &value, sizeof bits);
    uint64_t fraction = bits & ((1ULL << FRACTION_BITS) - 1);
    int exponent = (int)(bits >> FRACTION_BITS) & 0x7FF;
    if (exponent == 0)
        return (struct scaled){fraction, 1 - EXPONENT_BIAS};
    return (struct scaled){fraction | 1ULL << FRACTION_BITS, exponent - EXPONENT_BIAS};
}

/* What is left to decide when digits stop: all in units of the last place of the scaled numbers. */
struct remainder {
    uint64_t to_value; /* from the upper end down to the value itself */
    uint64_t width;    /* from the upper end to the lower */
    uint64_t rest;     /* from the upper end down to the digits made */
    uint64_t place;    /* what one step of the last digit is worth */
    uint64_t doubt;    /* error of the scaling */
};

/* Move the last digit towards the value; false when the doubt leaves two answers. */
static bool settle(struct digits *digits, struct remainder r)
{
    uint64_t nearest = r.to_value - r.doubt, farthest = r.to_value + r.doubt;
    while (r.rest < nearest && r.width - r.rest >= r.place &&
           (r.rest + r.place < nearest || nearest - r.rest >= r.rest + r.place - nearest)) {
        digits->text[digits->count - 1]--;
        r.rest += r.place;
    }
    if (r.rest < farthest && r.width - r.rest >= r.place &&
        (r.rest + r.place < farthest || farthest - r.rest > r.rest + r.place - farthest))
        return false;
    return 2 * r.doubt <= r.rest && r.rest <= r.width - 4 * r.doubt;
}

static void add_digit(struct digits *digits, unsigned digit)
{
    digits->text[digits->count++] = (char)('0' + digit);
}

static uint32_t largest_power(uint32_t whole, int *count)
{
    uint32_t power = 1;
    *count = 1;
    while (whole / power >= 10) {
        power *= 10;
        ++*count;
    }
    return power;
}

/* Digits of the upper end until what is left lies within the width. */
static bool make_digits(struct scaled low, struct scaled value, struct scaled high,
                        struct digits *digits)
{
    uint64_t doubt = 1, top = high.significand + doubt;
    uint64_t width = top - (low.significand - doubt);
    int shift = -high.exponent;
    uint64_t one = 1ULL << shift, fraction = top & (one - 1);
    uint32_t whole = (uint32_t)(top >> shift);
    int left;
    uint32_t power = largest_power(whole, &left);
    digits->count = 0;
    while (left > 0) {
        add_digit(digits, whole / power);
        whole %= power;
        left--;
        uint64_t rest = ((uint64_t)whole << shift) + fraction;
        if (rest < width) {
            digits->exponent10 += left;
            return settle(digits, (struct remainder){top - value.significand, width, rest,
                                                     (uint64_t)power << shift, doubt});
        }
        power /= 10;
    }
    while (digits->count < DIGITS_MAX - 1) {
        fraction *= 10;
        doubt *= 10;
        width *= 10;
        add_digit(digits, (unsigned)(fraction >> shift));
        fraction &= one - 1;
        left--;
        if (fraction < width) {
            digits->exponent10 += left;
            return settle(digits, (struct remainder){(top - value.significand) * doubt, width,
                                                     fraction, one, doubt});
        }
    }
    return false;
}

/* value > 0 and finite. */
static bool shortest_digits(double value, struct digits *digits)
{
    struct scaled exact = from_double(value), middle = normalized(exact);
    bool at_power = exact.significand == 1ULL << FRACTION_BITS;
    struct scaled upper =
        normalized((struct scaled){2 * exact.significand + 1, exact.exponent - 1});
    struct scaled lower = at_power ? (struct scaled){4 * exact.significand - 1, exact.exponent - 2}
                                   : (struct scaled){2 * exact.significand - 1, exact.exponent - 1};
    lower.significand <<= lower.exponent - upper.exponent;
    lower.exponent = upper.exponent;
    /* The power that lands the product between the two scaled exponents. */
    double wanted = (SCALED_EXPONENT_MIN - (middle.exponent + 64) + 63) * log10_of_2;
    int index = ((int)ceil(wanted) - POWER_FIRST - 1) / POWER_STEP + 1;
    struct scaled power = {powers[index].significand, powers[index].exponent2};
    struct scaled scaled_high = product(upper, power);
    if (scaled_high.exponent > SCALED_EXPONENT_MAX || scaled_high.exponent < SCALED_EXPONENT_MIN)
        return false;
    digits->exponent10 = -powers[index].exponent10;
    return make_digits(product(lower, power), product(middle, power), scaled_high, digits);
}

/* The slow way: try until it reads back the same. */
static void printed_digits(double value, struct digits *digits)
{
    char text[32];
    for (int count = 1; count <= 17; count++) {
        snprintf(text, sizeof text, "%.*e", count - 1, value);
        if (strtod(text, NULL) == value)
            break;
    }
    digits->count = 0;
    const char *c = text;
    for (; *c != 'e'; c++)
        if (*c != '.')
            digits->text[digits->count++] = *c;
    assert(digits->count > 0); /* %e always prints one */
    digits->exponent10 = (int)strtol(c + 1, NULL, 10) - (digits->count - 1);
}

static char *put_zeros(char *end, int count)
{
    memset(end, '0', (size_t)count);
    return end + count;
}

static char *put_text(char *end, const char *text, size_t length)
{
    memcpy(end, text, length);
    return end + length;
}

/* As people write numbers between 0.0001 and 1e15, else with an exponent. */
static void put_digits(struct buffer *out, const struct digits *digits)
{
    enum { ROOM = DIGITS_MAX + 20 }; /* the longest: 15 zeros, or point and exponent */
    int point = digits->count + digits->exponent10; /* digits before the decimal point */
    size_t count = (size_t)digits->count;
    buffer_reserve(out, ROOM);
    char *end = out->data + out->length;
    if (point > 15 || point < -3) {
        *end++ = digits->text[0];
        if (count > 1) {
            *end++ = '.';
            end = put_text(end, digits->text + 1, count - 1);
        }
        *end++ = 'e';
        out->length = (size_t)(end - out->data);
        buffer_decimal(out, point - 1);
        return;
    }
    if (point <= 0) {
        end = put_zeros(put_text(end, "0.", 2), -point);
        end = put_text(end, digits->text, count);
    } else if ((size_t)point >= count) {
        end = put_zeros(put_text(end, digits->text, count), point - (int)count);
    } else {
        end = put_text(end, digits->text, (size_t)point);
        *end++ = '.';
        end = put_text(end, digits->text + point, count - (size_t)point);
    }
    out->length = (size_t)(end - out->data);
}

void json_number(struct buffer *out, double value)
{
    if (!isfinite(value)) {
        buffer_text(out, "null");
        return;
    }
    if (value == rint(value) && fabs(value) < 1e15) {
        buffer_decimal(out, (long long)value);
        return;
    }
    if (value < 0)
        buffer_byte(out, '-');
    struct digits digits;
    if (!shortest_digits(fabs(value), &digits))
        printed_digits(fabs(value), &digits);
    put_digits(out, &digits);
}
