#include "quantity/format.h"

#include <assert.h>
#include <math.h>
#include <string.h>

#define THIN_SPACE     "\xE2\x80\x89"
#define NO_BREAK_SPACE "\xC2\xA0"
#define HALF           "\xC2\xBD"
#define MINUS          "\xE2\x88\x92"
#define MICRO          "\xC2\xB5"
#define OHM            "\xCE\xA9"

enum { DIGITS_MOST = 12, DECIMALS_MOST = 18 };

/* From which value on a unit is written so; the last row of a unit takes what is smaller. */
struct step {
    double from, scale;
    const char *text;
};

static const struct step none_steps[] = {{0, 1, ""}};
/* The trade writes 0.005 uF rather than 5 nF, and 540 pF. */
static const struct step capacitance_steps[] = {
    {1, 1, "F"}, {1e-9, 1e-6, MICRO "F"}, {0, 1e-12, "pF"}};
static const struct step resistance_steps[] = {
    {1e9, 1e9, "G" OHM}, {1e6, 1e6, "M" OHM}, {1e3, 1e3, "k" OHM}, {0, 1, OHM}};
static const struct step inductance_steps[] = {
    {1, 1, "H"}, {1e-3, 1e-3, "mH"}, {0, 1e-6, MICRO "H"}};
static const struct step voltage_steps[] = {
    {1e4, 1e3, "kV"}, {0.1, 1, "V"}, {1e-4, 1e-3, "mV"}, {0, 1e-6, MICRO "V"}};
/* Leakage is read in uA: 0.62 uA, not 620 nA. */
static const struct step current_steps[] = {{1, 1, "A"},
                                            {1e-3, 1e-3, "mA"},
                                            {1e-7, 1e-6, MICRO "A"},
                                            {1e-10, 1e-9, "nA"},
                                            {0, 1e-12, "pA"}};
static const struct step power_steps[] = {
    {1e4, 1e3, "kW"}, {0.1, 1, "W"}, {1e-4, 1e-3, "mW"}, {0, 1e-6, MICRO "W"}};
static const struct step frequency_steps[] = {
    {1e9, 1e9, "GHz"}, {1e6, 1e6, "MHz"}, {1e3, 1e3, "kHz"}, {0, 1, "Hz"}};
static const struct step duration_steps[] = {
    {172800, 86400, "d"}, {7200, 3600, "h"}, {120, 60, "min"}, {0, 1, "s"}};
static const struct step temperature_steps[] = {{0, 1,
                                                 "\xC2\xB0"
                                                 "C"}};
static const struct step percent_steps[] = {{0, 1, "%"}};
static const struct step conductance_steps[] = {{1e-4, 1e-3, "mA/V"}, {0, 1e-6, MICRO "A/V"}};
static const struct step length_steps[] = {{1, 1, "m"}, {0, 1e-3, "mm"}};
static const struct step sensitivity_steps[] = {{1e4, 1e3, "k" OHM "/V"}, {0, 1, OHM "/V"}};
static const struct step decibel_steps[] = {{0, 1, "dB"}};

static const struct step *const steps_of[UNIT_COUNT] = {
    [UNIT_NONE] = none_steps,
    [UNIT_CAPACITANCE] = capacitance_steps,
    [UNIT_RESISTANCE] = resistance_steps,
    [UNIT_INDUCTANCE] = inductance_steps,
    [UNIT_VOLTAGE] = voltage_steps,
    [UNIT_CURRENT] = current_steps,
    [UNIT_POWER] = power_steps,
    [UNIT_FREQUENCY] = frequency_steps,
    [UNIT_TIME] = duration_steps,
    [UNIT_TEMPERATURE] = temperature_steps,
    [UNIT_PERCENT] = percent_steps,
    [UNIT_CONDUCTANCE] = conductance_steps,
    [UNIT_LENGTH] = length_steps,
    [UNIT_SENSITIVITY] = sensitivity_steps,
    [UNIT_DECIBEL] = decibel_steps,
};

static const double powers[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,
                                1e8,  1e9,  1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
                                1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};

#define LOG10_OF_2 0.30102999566398119

static double times_power(double value, int exponent)
{
    for (; exponent > 22; exponent -= 22)
        value *= 1e22;
    for (; exponent < -22; exponent += 22)
        value /= 1e22;
    return exponent < 0 ? value / powers[-exponent] : value * powers[exponent];
}

/* Half away from zero. What is a half but for the last bits of a double (0.0995 to 2 digits) counts
   as the half that was meant. value >= 0. */
static double round_half_up(double value)
{
    return floor(value + 0.5 + value * 1e-13);
}

/* The power of ten of the first figure after rounding to `digits` figures; value > 0. */
static int leading_power(double value, unsigned digits)
{
    /* From the power of two: never too high, and too low by one at most. */
    int exponent = (int)floor(ilogb(value) * LOG10_OF_2);
    while (times_power(value, -exponent) >= 10 * (1 - 1e-13))
        exponent++;
    double figures = round_half_up(times_power(value, (int)digits - 1 - exponent));
    return figures >= powers[digits] ? exponent + 1 : exponent;
}

static unsigned clamp_digits(unsigned digits)
{
    return digits < 1 ? 1 : digits > DIGITS_MOST ? DIGITS_MOST : digits;
}

static double rounded_to(double value, unsigned digits)
{
    if (value == 0)
        return 0;
    int shift = (int)digits - 1 - leading_power(value, digits);
    return times_power(round_half_up(times_power(value, shift)), -shift);
}

unsigned decimals_for(double value, double scale, unsigned digits)
{
    double scaled = fabs(value / scale);
    digits = clamp_digits(digits);
    if (scaled == 0 || !isfinite(scaled))
        return digits - 1;
    int decimals = (int)digits - 1 - leading_power(scaled, digits);
    return decimals < 0 ? 0 : decimals > DECIMALS_MOST ? DECIMALS_MOST : (unsigned)decimals;
}

/* The whole part with thin spaces from five figures on. */
static const char *whole_text(struct arena *arena, unsigned long long whole, bool negative)
{
    char reversed[24];
    size_t count = 0, length = 0;
    do
        reversed[count++] = (char)('0' + whole % 10);
    while ((whole /= 10) > 0);
    char *text = arena_get(arena, 4 * count + sizeof MINUS);
    if (negative) {
        memcpy(text, MINUS, 3);
        length = 3;
    }
    for (size_t i = count; i-- > 0;) {
        text[length++] = reversed[i];
        if (count >= 5 && i > 0 && i % 3 == 0) {
            memcpy(text + length, THIN_SPACE, 3);
            length += 3;
        }
    }
    return text;
}

static const char *fraction_text(struct arena *arena, unsigned long long part, unsigned decimals)
{
    if (decimals == 0)
        return "";
    char *text = arena_get(arena, decimals + 2);
    text[0] = '.';
    for (unsigned i = decimals; i > 0; i--, part /= 10)
        text[i] = (char)('0' + part % 10);
    return text;
}

struct figures figures_scaled(struct arena *arena, double value, double scale,
                              const char *unit_text, unsigned decimals)
{
    double size = fabs(value / scale);
    assert(!isnan(value));
    decimals = decimals > DECIMALS_MOST ? DECIMALS_MOST : decimals;
    while (size * powers[decimals] >= 1e15 && decimals > 0)
        decimals--; /* beyond what a double holds */
    if (size >= 1e18)
        size = 1e18;
    double figures = round_half_up(size * powers[decimals]);
    unsigned long long all = (unsigned long long)figures;
    unsigned long long unit = (unsigned long long)powers[decimals];
    return (struct figures){.bound = "",
                            .whole = whole_text(arena, all / unit, value < 0 && all > 0),
                            .fraction = fraction_text(arena, all % unit, decimals),
                            .unit = unit_text};
}

/* The step by what will be printed: 7190 s to two figures are 2 h, not 120 min. Every step begins
   at one figure, 0.1 or 2, so rounding never leads below it, and to it from no less than half. */
static const struct step *step_for(double size, enum unit unit, unsigned digits)
{
    const struct step *step = steps_of[unit];
    while (size < step->from / 2 ||
           (size < step->from &&
            rounded_to(size / step->scale, digits) * step->scale < step->from * (1 - 1e-12)))
        step++;
    return step;
}

/* Nothing is written in the unit itself: 0 V, not 0 uV. */
static const struct step *step_for_zero(enum unit unit)
{
    const struct step *step = steps_of[unit];
    while (step->from > 0 && step->scale != 1)
        step++;
    return step;
}

static const struct step *step_of(double value, enum unit unit, unsigned digits)
{
    return value == 0 ? step_for_zero(unit) : step_for(fmin(fabs(value), 1e18), unit, digits);
}

struct figures figures_of(struct arena *arena, double value, enum unit unit, unsigned digits)
{
    assert(!isnan(value) && unit < UNIT_COUNT);
    digits = clamp_digits(digits);
    if (unit == UNIT_TIME && digits < 2)
        digits = 2; /* one figure would make 2 min of 90 s */
    double size = fmin(fabs(value), 1e18);
    const struct step *step = step_of(value, unit, digits);
    double scaled = rounded_to(size / step->scale, digits);
    if (unit == UNIT_POWER && digits == 1 && step->scale == 1 && scaled == 0.5)
        return (struct figures){
            .bound = "", .whole = value < 0 ? MINUS HALF : HALF, .fraction = "", .unit = "W"};
    unsigned decimals = decimals_for(scaled, 1, digits);
    /* A time is what was set, 5 min, and no measured figure; nor has nothing any figures. */
    if (scaled == 0 || (unit == UNIT_TIME && scaled == floor(scaled)))
        decimals = 0;
    return figures_scaled(arena, value < 0 ? -scaled : scaled, 1, step->text, decimals);
}

const char *figures_text(struct arena *arena, const struct figures *figures)
{
    const char *parts[] = {
        figures->bound,    figures->bound[0] != '\0' ? THIN_SPACE : "",    figures->whole,
        figures->fraction, figures->unit[0] != '\0' ? NO_BREAK_SPACE : "", figures->unit};
    enum { PARTS = sizeof parts / sizeof parts[0] };
    size_t lengths[PARTS], length = 1;
    for (size_t i = 0; i < PARTS; i++)
        length += lengths[i] = strlen(parts[i]);
    char *text = arena_get(arena, length), *at = text;
    for (size_t i = 0; i < PARTS; i++) {
        memcpy(at, parts[i], lengths[i]);
        at += lengths[i];
    }
    return text;
}

const char *quantity_text(struct arena *arena, double value, enum unit unit, unsigned digits)
{
    struct figures figures = figures_of(arena, value, unit, digits);
    return figures_text(arena, &figures);
}

const char *uncertain_text(struct arena *arena, double value, double uncertainty, enum unit unit,
                           unsigned digits)
{
    enum { UNCERTAINTY_DIGITS = 2 };
    struct figures figures = figures_of(arena, value, unit, digits);
    const struct step *step = step_of(value, unit, digits);
    double scaled = rounded_to(fmin(uncertainty, 1e18) / step->scale, UNCERTAINTY_DIGITS);
    struct figures spread =
        figures_scaled(arena, scaled, 1, step->text,
                       scaled == 0 ? 0 : decimals_for(scaled, 1, UNCERTAINTY_DIGITS));
    return arena_print(arena, "%s ± %s", figures_text(arena, &figures),
                       figures_text(arena, &spread));
}
