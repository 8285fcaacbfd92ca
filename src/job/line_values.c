/* Values told apart by their units: slots, a measured capacitor, an instrument's accuracy. */
#include "job/line_scan.h"

#include <string.h>

/* ---- slots ---- */

static bool slot_set(const struct value_slot *slot)
{
    return slot->quantity != NULL ? slot->quantity->set : slot->resistance->set;
}

static const char *slot_words(struct line *line, const struct value_slot *slots, size_t slot_count)
{
    char *all = "";
    for (size_t i = 0; i < slot_count; i++)
        all = arena_print(line->arena, "%s%s%s, as in %s", all, i > 0 ? "; " : "", slots[i].what,
                          unit_example(slots[i].unit));
    return all;
}

static const struct value_slot *slot_for(const struct value_slot *slots, size_t slot_count,
                                         enum unit unit)
{
    for (size_t i = 0; i < slot_count; i++)
        if (slots[i].unit == unit)
            return &slots[i];
    return NULL;
}

static bool number_into_slot(struct line *line, struct span span, const struct value_slot *slots,
                             size_t slot_count)
{
    struct quantity_form form = {.unit = slot_count == 1 ? slots[0].unit : UNIT_COUNT};
    struct quantity quantity = {0};
    if (!line_take_quantity(line, span, &form, &quantity))
        return false;
    const struct value_slot *slot = slot_for(slots, slot_count, quantity.unit);
    if (slot == NULL)
        return line_fail(line, span, DIAGNOSTIC_UNIT_WRONG, slot_words(line, slots, slot_count),
                         "'%s' has no place here", line_quote(line, span));
    if (slot_set(slot))
        return line_fail(line, span, DIAGNOSTIC_DUPLICATE_KEY, slot_words(line, slots, slot_count),
                         "a second %s: '%s'", unit_name(quantity.unit), line_quote(line, span));
    if (slot->quantity != NULL)
        *slot->quantity = quantity;
    else
        *slot->resistance = (struct resistance){
            .set = true, .quantity = quantity, .resistor = NOT_LISTED, .winding = NOT_LISTED};
    return true;
}

static bool words_into_slot(struct line *line, struct span span, const struct value_slot *slots,
                            size_t slot_count)
{
    const struct value_slot *slot = slot_for(slots, slot_count, UNIT_RESISTANCE);
    if (slot == NULL || slot->resistance == NULL)
        return line_fail(line, span, DIAGNOSTIC_QUANTITY_UNREADABLE,
                         slot_words(line, slots, slot_count), "'%s' has no place here",
                         line_quote(line, span));
    if (slot_set(slot))
        return line_fail(line, span, DIAGNOSTIC_DUPLICATE_KEY, NULL, "a second resistance: '%s'",
                         line_quote(line, span));
    return line_take_resistance(line, span, slot->resistance);
}

bool line_values(struct line *line, const struct value_slot *slots, size_t slot_count)
{
    if (line_too_long(line))
        return false;
    const char *cursor = line->text, *end = line->text + line->length;
    struct quantity_token token;
    bool more = quantity_token_next(&cursor, end, &token);
    while (more) {
        struct span span = span_of_token(&token);
        bool number = token.is_number;
        /* Words that follow each other are one ref: `T2 primary`. */
        while ((more = quantity_token_next(&cursor, end, &token)) && !number && !token.is_number &&
               !token.after_comma)
            span.length = (size_t)(token.start + token.length - span.start);
        if (!(number ? number_into_slot(line, span, slots, slot_count)
                     : words_into_slot(line, span, slots, slot_count)))
            return false;
    }
    for (size_t i = 0; i < slot_count; i++)
        if (slots[i].required && !slot_set(&slots[i]))
            return line_fail(line, line_span(line), DIAGNOSTIC_QUANTITY_UNREADABLE,
                             arena_print(line->arena, "add the %s, as in %s", slots[i].what,
                                         unit_example(slots[i].unit)),
                             "no %s", slots[i].what);
    if (line_span(line).length == 0)
        return line_fail(line, line_span(line), DIAGNOSTIC_QUANTITY_UNREADABLE,
                         slot_words(line, slots, slot_count), "nothing stands here");
    return true;
}

/* ---- measured capacitor ---- */

static const char *const loss_words[] = {"tan", "delta", "d", "df", "loss", "\xCE\xB4", NULL};
static const char *const esr_words[] = {"esr", "e.s.r.", NULL};

/* A bare number behind `tan` is the tangent itself; with % it is a hundred times that. */
static bool take_loss(struct line *line, struct span span, struct quantity *loss)
{
    struct quantity_form form = {.unit = UNIT_COUNT, .unit_optional = true};
    struct quantity read = {0};
    if (!line_take_quantity(line, span, &form, &read))
        return false;
    if (read.unit != UNIT_PERCENT && read.unit != UNIT_NONE)
        return line_fail_quantity(line, span, QUANTITY_WRONG_UNIT,
                                  &(struct quantity_form){.unit = UNIT_PERCENT});
    if (read.unit == UNIT_NONE)
        read.value *= 100;
    read.unit = UNIT_PERCENT;
    *loss = read;
    return true;
}

static bool take_measured(struct line *line, struct span span, struct measured_capacitor *measured)
{
    static const char hint[] = "write capacitance, ESR, loss, as in 18 uF 2.4 ohm 6 %";
    struct quantity_form form = {.unit = UNIT_COUNT};
    struct quantity quantity = {0};
    if (!line_take_quantity(line, span, &form, &quantity))
        return false;
    struct quantity *place = quantity.unit == UNIT_CAPACITANCE  ? &measured->value
                             : quantity.unit == UNIT_RESISTANCE ? &measured->esr
                             : quantity.unit == UNIT_PERCENT    ? &measured->tan_delta
                                                                : NULL;
    if (place == NULL)
        return line_fail(line, span, DIAGNOSTIC_UNIT_WRONG, hint, "'%s' has no place here",
                         line_quote(line, span));
    if (place->set)
        return line_fail(line, span, DIAGNOSTIC_DUPLICATE_KEY, NULL, "a second %s: '%s'",
                         unit_name(quantity.unit), line_quote(line, span));
    *place = quantity;
    return true;
}

bool line_measured_capacitor(struct line *line, struct measured_capacitor *measured)
{
    if (line_too_long(line))
        return false;
    struct span all = line_span(line);
    struct measured_capacitor read = {.set = true,
                                      .written = line_written(line, all),
                                      .at = line_position(line, (size_t)(all.start - line->text))};
    const char *cursor = line->text, *end = line->text + line->length;
    struct quantity_token token;
    bool loss = false;
    while (quantity_token_next(&cursor, end, &token)) {
        struct span span = span_of_token(&token);
        if (!token.is_number && span_is_any(span, loss_words)) {
            loss = true;
        } else if (token.is_number && loss && !read.tan_delta.set) {
            if (!take_loss(line, span, &read.tan_delta))
                return false;
            loss = false;
        } else if (!token.is_number && !span_is_any(span, esr_words) && !read.value.set) {
            struct quantity_form form = {.unit = UNIT_CAPACITANCE};
            if (!line_take_quantity(line, span, &form, &read.value)) /* `p33` */
                return false;
        } else if (token.is_number) {
            if (!take_measured(line, span, &read))
                return false;
        } else if (!span_is_any(span, esr_words)) {
            return line_fail(line, span, DIAGNOSTIC_UNKNOWN_CHOICE, "words here: esr, tan",
                             "'%s' has no place here", line_quote(line, span));
        }
    }
    if (!read.value.set && !read.esr.set && !read.tan_delta.set)
        return line_fail_quantity(line, all, QUANTITY_UNREADABLE,
                                  &(struct quantity_form){.unit = UNIT_CAPACITANCE});
    *measured = read;
    return true;
}

/* ---- accuracy ---- */

static const char accuracy_hint[] = "write it as in 2 % + 0.02 uA or 1 % of full scale + 2 digits";

static bool accuracy_digits(struct span rest)
{
    static const char *const words[] = {"digit", "digits", "digits.", "dgt", "dgts",
                                        "count", "counts", "lsd",     NULL};
    return span_is_any(rest, words);
}

/* `of full scale`, `of reading`, `of 50 uA` behind a percentage. */
static bool percent_term(struct line *line, double percent, struct span rest,
                         struct accuracy *accuracy)
{
    static const char *const reading[] = {"", "reading", "rdg", "rdg.", "value", NULL};
    static const char *const full[] = {"full scale", "fs", "f.s.", "fsd", "f.s.d.", "range", NULL};
    if (span_begins(rest, "of"))
        rest = span_trim(span_from(rest, 2));
    bool of_reading = span_is_any(rest, reading);
    double *place = of_reading ? &accuracy->reading_percent : &accuracy->full_scale_percent;
    if (*place != 0)
        return line_fail(line, line_span(line), DIAGNOSTIC_DUPLICATE_KEY, accuracy_hint,
                         "two percentages of the same");
    *place = percent;
    if (of_reading || span_is_any(rest, full))
        return true;
    struct quantity_form form = {.unit = UNIT_COUNT};
    return line_take_quantity(line, rest, &form, &accuracy->full_scale);
}

static bool absolute_term(struct line *line, struct span term, const struct quantity *quantity,
                          struct accuracy *accuracy)
{
    if (accuracy->absolute_unit != UNIT_NONE)
        return line_fail(line, term, DIAGNOSTIC_DUPLICATE_KEY, accuracy_hint,
                         "two fixed parts of an accuracy");
    accuracy->absolute = quantity->value;
    accuracy->absolute_unit = quantity->unit;
    return true;
}

static bool accuracy_term(struct line *line, struct span term, struct accuracy *accuracy)
{
    const char *cursor = term.start, *end = term.start + term.length;
    struct quantity_token token;
    struct quantity_form form = {.unit = UNIT_COUNT, .unit_optional = true};
    struct quantity quantity = {0};
    if (!quantity_token_next(&cursor, end, &token) || !token.is_number)
        return line_fail(line, term, DIAGNOSTIC_QUANTITY_UNREADABLE, accuracy_hint,
                         "cannot read '%s' as an accuracy", line_quote(line, term));
    if (!line_take_quantity(line, span_of_token(&token), &form, &quantity))
        return false;
    struct span rest = span_trim(span_from(term, (size_t)(cursor - term.start)));
    if (quantity.value < 0 || quantity.bound != BOUND_NONE)
        return line_fail(line, span_of_token(&token), DIAGNOSTIC_VALUE_IMPOSSIBLE, accuracy_hint,
                         "'%s' is no accuracy", line_quote(line, span_of_token(&token)));
    if (quantity.unit == UNIT_PERCENT)
        return percent_term(line, quantity.value, rest, accuracy);
    if (quantity.unit == UNIT_NONE && accuracy_digits(rest)) {
        accuracy->digits += quantity.value;
        return true;
    }
    if (quantity.unit != UNIT_NONE && rest.length == 0)
        return absolute_term(line, term, &quantity, accuracy);
    return line_fail(line, term, DIAGNOSTIC_QUANTITY_UNREADABLE, accuracy_hint,
                     "cannot read '%s' as an accuracy", line_quote(line, term));
}

/* `+/-` and `±` in front say nothing more. */
static struct span without_sign(struct span span)
{
    static const char *const signs[] = {"+/-", "\xC2\xB1", "+-", "+"};
    for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++) {
        size_t length = strlen(signs[i]);
        if (span.length > length && memcmp(span.start, signs[i], length) == 0)
            return span_trim(span_from(span, length));
    }
    return span;
}

bool line_accuracy(struct line *line, struct accuracy *accuracy)
{
    if (line_too_long(line))
        return false;
    struct accuracy read = {0};
    struct span rest = without_sign(line_span(line));
    do {
        const char *plus = memchr(rest.start, '+', rest.length);
        size_t length = plus != NULL ? (size_t)(plus - rest.start) : rest.length;
        struct span term = span_trim((struct span){rest.start, length});
        if (!accuracy_term(line, term, &read))
            return false;
        rest = span_from(rest, plus != NULL ? length + 1 : length);
        if (plus != NULL && span_trim(rest).length == 0)
            return line_fail(line, (struct span){plus, 1}, DIAGNOSTIC_QUANTITY_UNREADABLE,
                             accuracy_hint, "nothing stands behind '+'");
    } while (rest.length > 0);
    *accuracy = read;
    return true;
}
