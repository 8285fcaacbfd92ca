#include "report/typography.h"

#include "base/buffer.h"

#include <stdbool.h>
#include <string.h>

static bool is_figure(char byte)
{
    return byte >= '0' && byte <= '9';
}

/* Every byte of a character beyond ASCII counts as one: é, µ. */
static bool is_letter(char byte)
{
    return (byte >= 'a' && byte <= 'z') || (byte >= 'A' && byte <= 'Z') || (byte & 0x80);
}

/* Length of the unit or root sign that text begins with; 0: none, or a longer word. */
static size_t unit_length(const char *text)
{
    static const char *const units[] = {
        "%",  "A",  "mA", "uA",  "µA", "V",    "mV",   "kV", "W",   "mW",  "ohm", "Ω",  "kΩ", "MΩ",
        "GΩ", "pF", "nF", "uF",  "µF", "H",    "mH",   "Hz", "kHz", "MHz", "s",   "ms", "m",  "min",
        "h",  "mm", "cm", "c/s", "dB", "kc/s", "Mc/s", "K",  "C",   "°C",  "uV",  "µV", "√",
    };
    for (size_t i = 0; i < sizeof units / sizeof *units; i++) {
        size_t length = strlen(units[i]);
        if (strncmp(text, units[i], length) == 0 && !is_letter(text[length]) &&
            !is_figure(text[length]))
            return length;
    }
    return 0;
}

/* The unit of a number with the micro sign that it is typed without. */
static void append_unit(struct buffer *out, const char *unit, size_t length)
{
    bool micro = unit[0] == 'u';
    buffer_text(out, micro ? "µ" : "");
    buffer_append(out, unit + micro, length - micro);
}

/* What stands at `at` in the signs of print; the bytes that it takes, 0: as typed. */
static size_t append_sign(struct buffer *out, const char *text, const char *at)
{
    if (at == text)
        return 0;
    if (*at == '\'' && is_letter(at[-1]) && is_letter(at[1])) {
        buffer_text(out, "’");
        return 1;
    }
    size_t space = *at == ' ' ? 1 : 0;
    size_t length = is_figure(at[-1]) && (space || *at == 'u') ? unit_length(at + space) : 0;
    if (length == 0)
        return 0;
    buffer_text(out, space ? "\xC2\xA0" : "");
    append_unit(out, at + space, length);
    return space + length;
}

const char *text_typeset(struct arena *arena, const char *text)
{
    if (!text || !strpbrk(text, "' u"))
        return text;
    struct buffer out = {0};
    bool changed = false;
    for (const char *at = text; *at;) {
        size_t taken = append_sign(&out, text, at);
        changed |= taken > 0;
        if (taken == 0)
            buffer_byte(&out, *at);
        at += taken ? taken : 1;
    }
    const char *typeset = changed ? arena_text(arena, out.data, out.length) : text;
    buffer_release(&out);
    return typeset;
}
