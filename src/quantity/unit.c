#include "quantity/scan.h"

#include "base/utf8.h"

#include <string.h>
#include <strings.h>

/* How the case of a spelling's letters counts. */
enum {
    ANY_CASE,
    FIRST_AS_SPELT, /* the prefix tells milli from mega, the rest does not matter */
    AS_SPELT
};

#define ROW(text, letters, unit, exponent)                                                         \
    {                                                                                              \
        text, letters, UNIT_KIND_PLAIN, unit, exponent, 0                                          \
    }
#define TIME_ROW(text, letters, seconds)                                                           \
    {                                                                                              \
        text, letters, UNIT_KIND_FACTOR, UNIT_TIME, 0, seconds                                     \
    }

/*
 * Old and new spellings. Micro is `u` here, the ohm sign `ohm`, the degree sign `deg`; full stops
 * are dropped before the search. `mF` in any case is microfarads: on old parts it always was, and
 * no part or meter of this trade shows millifarads; the note about it lets a mistake be seen.
 */
static const struct unit_spelling spellings[] = {
    /* The most frequent first: a job has hundreds of them. */
    ROW("V", ANY_CASE, UNIT_VOLTAGE, 0),
    TIME_ROW("s", AS_SPELT, 1),
    ROW("uA", ANY_CASE, UNIT_CURRENT, -6),
    TIME_ROW("min", ANY_CASE, 60),
    ROW("%", AS_SPELT, UNIT_PERCENT, 0),
    ROW("k", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("mA", FIRST_AS_SPELT, UNIT_CURRENT, -3),
    ROW("C", AS_SPELT, UNIT_TEMPERATURE, 0),

    ROW("uF", ANY_CASE, UNIT_CAPACITANCE, -6),
    ROW("pF", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("nF", ANY_CASE, UNIT_CAPACITANCE, -9),
    ROW("mfd", AS_SPELT, UNIT_CAPACITANCE, -6),
    ROW("mmf", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("mmfd", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("uuF", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("uufd", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("ufd", ANY_CASE, UNIT_CAPACITANCE, -6),
    ROW("nfd", ANY_CASE, UNIT_CAPACITANCE, -9),
    ROW("pfd", ANY_CASE, UNIT_CAPACITANCE, -12),
    {"mfd", ANY_CASE, UNIT_KIND_OLD, UNIT_CAPACITANCE, -6, 0},
    {"mf", ANY_CASE, UNIT_KIND_OLD, UNIT_CAPACITANCE, -6, 0},
    ROW("kpF", ANY_CASE, UNIT_CAPACITANCE, -9),
    ROW("u", AS_SPELT, UNIT_CAPACITANCE, -6),
    ROW("n", AS_SPELT, UNIT_CAPACITANCE, -9),
    ROW("p", AS_SPELT, UNIT_CAPACITANCE, -12),
    ROW("F", AS_SPELT, UNIT_CAPACITANCE, 0),
    ROW("farad", ANY_CASE, UNIT_CAPACITANCE, 0),
    ROW("farads", ANY_CASE, UNIT_CAPACITANCE, 0),
    ROW("microfarad", ANY_CASE, UNIT_CAPACITANCE, -6),
    ROW("microfarads", ANY_CASE, UNIT_CAPACITANCE, -6),
    ROW("nanofarad", ANY_CASE, UNIT_CAPACITANCE, -9),
    ROW("nanofarads", ANY_CASE, UNIT_CAPACITANCE, -9),
    ROW("picofarad", ANY_CASE, UNIT_CAPACITANCE, -12),
    ROW("picofarads", ANY_CASE, UNIT_CAPACITANCE, -12),

    ROW("ohm", ANY_CASE, UNIT_RESISTANCE, 0),
    ROW("ohms", ANY_CASE, UNIT_RESISTANCE, 0),
    ROW("R", ANY_CASE, UNIT_RESISTANCE, 0),
    ROW("kohm", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("kohms", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("k ohm", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("k ohms", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("kilohm", ANY_CASE, UNIT_RESISTANCE, 3),
    ROW("kilohms", ANY_CASE, UNIT_RESISTANCE, 3),
    {"M", AS_SPELT, UNIT_KIND_BARE_M, UNIT_RESISTANCE, 6, 0},
    ROW("meg", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("megs", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("megohm", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("megohms", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("meg ohm", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("meg ohms", ANY_CASE, UNIT_RESISTANCE, 6),
    ROW("Mohm", FIRST_AS_SPELT, UNIT_RESISTANCE, 6),
    ROW("Mohms", FIRST_AS_SPELT, UNIT_RESISTANCE, 6),
    ROW("M ohm", FIRST_AS_SPELT, UNIT_RESISTANCE, 6),
    ROW("M ohms", FIRST_AS_SPELT, UNIT_RESISTANCE, 6),
    ROW("mohm", FIRST_AS_SPELT, UNIT_RESISTANCE, -3),
    ROW("mohms", FIRST_AS_SPELT, UNIT_RESISTANCE, -3),
    ROW("milliohm", ANY_CASE, UNIT_RESISTANCE, -3),
    ROW("milliohms", ANY_CASE, UNIT_RESISTANCE, -3),
    ROW("G", AS_SPELT, UNIT_RESISTANCE, 9),
    ROW("Gohm", FIRST_AS_SPELT, UNIT_RESISTANCE, 9),
    ROW("T", AS_SPELT, UNIT_RESISTANCE, 12),
    ROW("Tohm", FIRST_AS_SPELT, UNIT_RESISTANCE, 12),

    ROW("volt", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("volts", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("Vdc", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("Vac", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("V~", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("WV", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("VW", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("WVDC", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("VDCW", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("Vrms", ANY_CASE, UNIT_VOLTAGE, 0),
    ROW("kV", ANY_CASE, UNIT_VOLTAGE, 3),
    ROW("mV", FIRST_AS_SPELT, UNIT_VOLTAGE, -3),
    ROW("uV", ANY_CASE, UNIT_VOLTAGE, -6),

    ROW("nA", ANY_CASE, UNIT_CURRENT, -9),
    ROW("pA", ANY_CASE, UNIT_CURRENT, -12),
    ROW("A", ANY_CASE, UNIT_CURRENT, 0),
    ROW("amp", ANY_CASE, UNIT_CURRENT, 0),
    ROW("amps", ANY_CASE, UNIT_CURRENT, 0),
    ROW("ampere", ANY_CASE, UNIT_CURRENT, 0),
    ROW("amperes", ANY_CASE, UNIT_CURRENT, 0),
    ROW("milliamp", ANY_CASE, UNIT_CURRENT, -3),
    ROW("milliamps", ANY_CASE, UNIT_CURRENT, -3),
    ROW("microamp", ANY_CASE, UNIT_CURRENT, -6),
    ROW("microamps", ANY_CASE, UNIT_CURRENT, -6),

    ROW("W", ANY_CASE, UNIT_POWER, 0),
    ROW("watt", ANY_CASE, UNIT_POWER, 0),
    ROW("watts", ANY_CASE, UNIT_POWER, 0),
    ROW("mW", FIRST_AS_SPELT, UNIT_POWER, -3),
    ROW("uW", ANY_CASE, UNIT_POWER, -6),
    ROW("kW", ANY_CASE, UNIT_POWER, 3),

    ROW("Hz", ANY_CASE, UNIT_FREQUENCY, 0),
    ROW("kHz", ANY_CASE, UNIT_FREQUENCY, 3),
    ROW("MHz", ANY_CASE, UNIT_FREQUENCY, 6),
    ROW("c/s", ANY_CASE, UNIT_FREQUENCY, 0),
    ROW("kc/s", ANY_CASE, UNIT_FREQUENCY, 3),
    ROW("Mc/s", ANY_CASE, UNIT_FREQUENCY, 6),
    ROW("kc", ANY_CASE, UNIT_FREQUENCY, 3),
    ROW("Mc", ANY_CASE, UNIT_FREQUENCY, 6),
    ROW("cps", ANY_CASE, UNIT_FREQUENCY, 0),
    ROW("kcps", ANY_CASE, UNIT_FREQUENCY, 3),
    ROW("mcps", ANY_CASE, UNIT_FREQUENCY, 6),
    ROW("cycles", ANY_CASE, UNIT_FREQUENCY, 0),

    TIME_ROW("sec", ANY_CASE, 1),
    TIME_ROW("secs", ANY_CASE, 1),
    TIME_ROW("second", ANY_CASE, 1),
    TIME_ROW("seconds", ANY_CASE, 1),
    TIME_ROW("mins", ANY_CASE, 60),
    TIME_ROW("minute", ANY_CASE, 60),
    TIME_ROW("minutes", ANY_CASE, 60),
    TIME_ROW("h", AS_SPELT, 3600),
    TIME_ROW("hr", ANY_CASE, 3600),
    TIME_ROW("hrs", ANY_CASE, 3600),
    TIME_ROW("hour", ANY_CASE, 3600),
    TIME_ROW("hours", ANY_CASE, 3600),
    TIME_ROW("d", AS_SPELT, 86400),
    TIME_ROW("day", ANY_CASE, 86400),
    TIME_ROW("days", ANY_CASE, 86400),
    TIME_ROW("week", ANY_CASE, 604800),
    TIME_ROW("weeks", ANY_CASE, 604800),
    ROW("ms", AS_SPELT, UNIT_TIME, -3),
    ROW("us", AS_SPELT, UNIT_TIME, -6),

    ROW("degC", ANY_CASE, UNIT_TEMPERATURE, 0),
    ROW("deg C", ANY_CASE, UNIT_TEMPERATURE, 0),
    ROW("degrees C", ANY_CASE, UNIT_TEMPERATURE, 0),
    ROW("celsius", ANY_CASE, UNIT_TEMPERATURE, 0),
    {"degF", ANY_CASE, UNIT_KIND_FAHRENHEIT, UNIT_TEMPERATURE, 0, 0},
    {"deg F", ANY_CASE, UNIT_KIND_FAHRENHEIT, UNIT_TEMPERATURE, 0, 0},
    {"degrees F", ANY_CASE, UNIT_KIND_FAHRENHEIT, UNIT_TEMPERATURE, 0, 0},
    {"fahrenheit", ANY_CASE, UNIT_KIND_FAHRENHEIT, UNIT_TEMPERATURE, 0, 0},

    ROW("percent", ANY_CASE, UNIT_PERCENT, 0),
    ROW("per cent", ANY_CASE, UNIT_PERCENT, 0),
    ROW("pct", ANY_CASE, UNIT_PERCENT, 0),

    ROW("mA/V", FIRST_AS_SPELT, UNIT_CONDUCTANCE, -3),
    ROW("uA/V", ANY_CASE, UNIT_CONDUCTANCE, -6),
    ROW("A/V", ANY_CASE, UNIT_CONDUCTANCE, 0),
    ROW("S", AS_SPELT, UNIT_CONDUCTANCE, 0),
    ROW("mS", AS_SPELT, UNIT_CONDUCTANCE, -3),
    ROW("uS", AS_SPELT, UNIT_CONDUCTANCE, -6),
    ROW("mho", ANY_CASE, UNIT_CONDUCTANCE, 0),
    ROW("mhos", ANY_CASE, UNIT_CONDUCTANCE, 0),
    ROW("mmho", FIRST_AS_SPELT, UNIT_CONDUCTANCE, -3),
    ROW("mmhos", FIRST_AS_SPELT, UNIT_CONDUCTANCE, -3),
    ROW("umho", ANY_CASE, UNIT_CONDUCTANCE, -6),
    ROW("umhos", ANY_CASE, UNIT_CONDUCTANCE, -6),
    ROW("micromho", ANY_CASE, UNIT_CONDUCTANCE, -6),
    ROW("micromhos", ANY_CASE, UNIT_CONDUCTANCE, -6),

    ROW("ohm/V", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("ohms/V", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("ohm/volt", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("ohms/volt", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("ohm per volt", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("ohms per volt", ANY_CASE, UNIT_SENSITIVITY, 0),
    ROW("k/V", ANY_CASE, UNIT_SENSITIVITY, 3),
    ROW("kohm/V", ANY_CASE, UNIT_SENSITIVITY, 3),
    ROW("kohms/V", ANY_CASE, UNIT_SENSITIVITY, 3),
    ROW("kohm/volt", ANY_CASE, UNIT_SENSITIVITY, 3),

    ROW("dB", ANY_CASE, UNIT_DECIBEL, 0),
    ROW("decibel", ANY_CASE, UNIT_DECIBEL, 0),
    ROW("decibels", ANY_CASE, UNIT_DECIBEL, 0),

    ROW("H", AS_SPELT, UNIT_INDUCTANCE, 0),
    ROW("Hy", ANY_CASE, UNIT_INDUCTANCE, 0),
    ROW("henry", ANY_CASE, UNIT_INDUCTANCE, 0),
    ROW("henries", ANY_CASE, UNIT_INDUCTANCE, 0),
    ROW("henrys", ANY_CASE, UNIT_INDUCTANCE, 0),
    ROW("mH", FIRST_AS_SPELT, UNIT_INDUCTANCE, -3),
    ROW("uH", ANY_CASE, UNIT_INDUCTANCE, -6),

    ROW("mm", AS_SPELT, UNIT_LENGTH, -3),
    ROW("cm", AS_SPELT, UNIT_LENGTH, -2),
    ROW("m", AS_SPELT, UNIT_LENGTH, 0),
};

/* Inches are 25.4 mm exactly; the factor is no power of ten and 0.0254 = 254 * 10^-4. */
static const struct unit_spelling inches = {"in", ANY_CASE, UNIT_KIND_FACTOR, UNIT_LENGTH, -4, 254};
static const struct unit_spelling fahrenheit = {
    "F", AS_SPELT, UNIT_KIND_FAHRENHEIT, UNIT_TEMPERATURE, 0, 0};

enum { SPELLING_BYTES = 24 };

static bool put(char *plain, size_t *length, const char *text)
{
    size_t more = strlen(text);
    if (*length + more >= SPELLING_BYTES)
        return false;
    memcpy(plain + *length, text, more);
    *length += more;
    return true;
}

/* One spelling for each sign: see the table. false: too long or foreign letters, so no unit. */
static bool plain_spelling(const char *text, size_t text_length, char *plain)
{
    const char *cursor = text, *end = text + text_length;
    size_t length = 0;
    while (cursor < end) {
        const char *behind = scan_spaces(cursor, end);
        if (behind > cursor) {
            cursor = behind;
            if (!put(plain, &length, " "))
                return false;
            continue;
        }
        uint32_t sign = utf8_next(&cursor, end);
        char letter[2] = {(char)sign, 0};
        const char *as = sign == 0xB5 || sign == 0x3BC     ? "u"
                         : sign == 0x3A9 || sign == 0x2126 ? "ohm"
                         : sign == 0xB0 || sign == 0xBA    ? "deg"
                         : sign == 0x2103                  ? "degC"
                         : sign == 0x2109                  ? "degF"
                         : sign == '.'                     ? ""
                         : sign < 0x80                     ? letter
                                                           : NULL;
        if (as == NULL || !put(plain, &length, as))
            return false;
    }
    plain[length] = '\0';
    return length > 0;
}

static bool spelt(const struct unit_spelling *row, const char *plain)
{
    /* Most rows differ in their first letter; 0x20 sets the case of ASCII letters apart. */
    if ((row->text[0] | 0x20) != (plain[0] | 0x20))
        return false;
    if (row->letters == AS_SPELT)
        return strcmp(row->text, plain) == 0;
    if (row->letters == FIRST_AS_SPELT && row->text[0] != plain[0])
        return false;
    return strcasecmp(row->text, plain) == 0;
}

const struct unit_spelling *unit_find(const char *text, size_t length, enum unit wanted)
{
    static const char *const inch_words[] = {"in", "inch", "inches", "\""};
    char plain[SPELLING_BYTES];
    if (length == 0 || length > (size_t)3 * SPELLING_BYTES || !plain_spelling(text, length, plain))
        return NULL;
    if (wanted == UNIT_TEMPERATURE && strcmp(plain, "F") == 0)
        return &fahrenheit;
    for (size_t i = 0; i < sizeof spellings / sizeof spellings[0]; i++)
        if (spelt(&spellings[i], plain))
            return &spellings[i];
    for (size_t i = 0; i < sizeof inch_words / sizeof inch_words[0]; i++)
        if (strcasecmp(inch_words[i], plain) == 0)
            return &inches;
    return NULL;
}

unsigned unit_seconds(const struct unit_spelling *spelling)
{
    return spelling->unit == UNIT_TIME ? spelling->factor : 0;
}

static const struct {
    const char *name, *example;
} unit_words[UNIT_COUNT] = {
    [UNIT_NONE] = {"plain number", "20"},
    [UNIT_CAPACITANCE] = {"capacitance", "0.05 uF"},
    [UNIT_RESISTANCE] = {"resistance", "470k"},
    [UNIT_INDUCTANCE] = {"inductance", "10 H"},
    [UNIT_VOLTAGE] = {"voltage", "250 V"},
    [UNIT_CURRENT] = {"current", "2.4 uA"},
    [UNIT_POWER] = {"power", "1/2 W"},
    [UNIT_FREQUENCY] = {"frequency", "465 kc/s"},
    [UNIT_TIME] = {"time", "5 min"},
    [UNIT_TEMPERATURE] = {"temperature", "19 C"},
    [UNIT_PERCENT] = {"percentage", "20 %"},
    [UNIT_CONDUCTANCE] = {"conductance", "6 mA/V"},
    [UNIT_LENGTH] = {"length", "51 mm"},
    [UNIT_SENSITIVITY] = {"meter sensitivity", "1000 ohm/V"},
    [UNIT_DECIBEL] = {"level", "-6 dB"},
};

const char *unit_name(enum unit unit)
{
    return unit < UNIT_COUNT ? unit_words[unit].name : "quantity";
}

const char *unit_example(enum unit unit)
{
    return unit < UNIT_COUNT ? unit_words[unit].example : "0.05 uF";
}
