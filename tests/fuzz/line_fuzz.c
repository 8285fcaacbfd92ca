/*
 * Quantities and lines of any bytes: no crash, bounded time, and what is read as a quantity is
 * finite, within the bounds that are promised, and read again from its own text to the same double.
 *
 * line_fuzz AMOUNT SEED.
 */
#include "fuzz.h"
#include "job/line.h"

#include <math.h>

static const char *const pieces[] = {
    "0",     "1",          "9",          "4n7",   "470k",     "1.5",          ".05",   ",",
    ", ",    "1,000",      "-",          "+",     "e-6",      "e99",          " ",     " ",
    "uF",    "µF",         "mfd",        "MF",    "pF",       " V",           " kV",   "V",
    " uA",   " mA",        " A",         " M",    "meg",      " ohm",         "Ω",     "k",
    " s",    " min",       " h",         " %",    "20 %",     " C",           " F",    " c/s",
    "over ", "under ",     "about ",     "to ",   "hot ",     "left",         "found", "reformed",
    " by ",  "2031-02-10", "in circuit", "grid ", "anode ",   "paper ",       "X2 ",   "-20/+100 %",
    "/",     "12:30",      "35 x 75 mm", "R12",   "\xC2\xA0", "\xE2\x80\x89", "\xC3",  "(",
    "'",     "\t",
};
enum { PIECES = sizeof pieces / sizeof *pieces };

static void draw_line(struct fuzz *fuzz, struct buffer *text)
{
    size_t count = 1 + fuzz_below(fuzz, 12), long_one = fuzz_below(fuzz, 200) == 0;
    buffer_clear(text);
    for (size_t i = 0; i < (long_one ? 3000 : count); i++)
        buffer_text(text, pieces[fuzz_below(fuzz, PIECES)]);
}

/* What was read is a number, and its own text gives it again. */
static void check_quantity(struct arena *arena, const struct buffer *text, enum unit unit)
{
    const struct quantity_form form = {.unit = unit};
    struct quantity quantity = {0}, again = {0};
    if (quantity_read(arena, buffer_string((struct buffer *)(uintptr_t)text), text->length, &form,
                      &quantity, NULL) != QUANTITY_OK)
        return;
    if (!isfinite(quantity.value) || fabs(quantity.value) > 1e31 || !quantity.written)
        abort();
    if (quantity_read(arena, quantity.written, strlen(quantity.written), &form, &again, NULL) !=
            QUANTITY_OK ||
        again.value != quantity.value)
        abort();
}

static void read_as_everything(struct arena *arena, const struct buffer *text)
{
    const char *bytes = buffer_string((struct buffer *)(uintptr_t)text);
    for (int unit = 0; unit <= UNIT_COUNT; unit++)
        check_quantity(arena, text, (enum unit)unit);
    const char *cursor = bytes, *end = bytes + text->length;
    struct quantity_token token;
    for (size_t count = 0; quantity_token_next(&cursor, end, &token); count++)
        if (count > text->length || token.start < bytes || token.start + token.length > end)
            abort();
    struct date date;
    struct year_span years;
    struct dimensions dimensions;
    if (date_read(arena, bytes, text->length, &date) && (date.month < 1 || date.month > 12))
        abort();
    year_read(arena, bytes, text->length, &years);
    dimensions_read(arena, bytes, text->length, &dimensions);
    for (int kind = 0; kind <= MARKING_WINDING; kind++) {
        struct marking marking;
        struct line line = line_of(arena, bytes, text->length, (struct position){1, 1});
        line_marking(&line, (enum marking_kind)kind, kind & 1, &marking);
    }
    const struct reading_form form = {.line = 1, .instrument = NOT_LISTED};
    const struct reading *readings;
    size_t reading_count;
    struct line several = line_of(arena, bytes, text->length, (struct position){1, 1});
    if (line_readings(&several, &form, &readings, &reading_count) && reading_count == 0)
        abort();
    struct accuracy accuracy;
    struct resistance resistance;
    struct line line = line_of(arena, bytes, text->length, (struct position){1, 1});
    line_accuracy(&line, &accuracy);
    line = line_of(arena, bytes, text->length, (struct position){1, 1});
    line_resistance(&line, &resistance);
}

int main(int count, char **words)
{
    if (count != 3)
        return 2;
    struct fuzz fuzz = fuzz_begin(words[1], words[2]);
    struct buffer text = {0};
    while (fuzz_next(&fuzz)) {
        struct arena arena = {0};
        draw_line(&fuzz, &text);
        read_as_everything(&arena, &text);
        arena_release(&arena);
    }
    buffer_release(&text);
    return fuzz_end(&fuzz, "lines");
}
