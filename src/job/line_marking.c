/* What is written on a part, or was fitted. */
#include "job/line_scan.h"
#include "reference/colour_code.h"

#include <string.h>

enum { TOKENS_MAX = 64 };

/* The line cut into tokens, and what has been understood of it. */
struct marking_reader {
    struct line *line;
    enum marking_kind kind;
    bool fitted;
    struct quantity_token tokens[TOKENS_MAX];
    size_t count, next;
    struct marking marking;
    bool low_set, high_set;
};

static struct span token_span(const struct marking_reader *reader, size_t index)
{
    return index < reader->count ? span_of_token(&reader->tokens[index])
                                 : (struct span){reader->line->text, 0};
}

static bool next_is(const struct marking_reader *reader, const char *const *words)
{
    return reader->next < reader->count && span_is_any(token_span(reader, reader->next), words);
}

static const char *kind_hint(enum marking_kind kind)
{
    switch (kind) {
    case MARKING_CAPACITOR:
        return "write capacitance, volts, tolerance, as in 0.02 uF 400 V 20 %";
    case MARKING_RESISTOR:
        return "write resistance, watts, tolerance, as in 270 ohm 1 W 10 %";
    case MARKING_WINDING:
        return "write the resistance, as in 310 ohm";
    }
    return NULL;
}

static bool second(struct marking_reader *reader, struct span span, const char *what)
{
    return line_fail(reader->line, span, DIAGNOSTIC_DUPLICATE_KEY,
                     strcmp(what, unit_name(UNIT_CAPACITANCE)) == 0
                         ? "each section of a can has a 'marked' and a 'fitted' of its own"
                         : NULL,
                     "a second %s: '%s'", what, line_quote(reader->line, span));
}

static void add_words(struct marking_reader *reader, struct span span)
{
    const char *before = reader->marking.other_words;
    const char *word = line_written(reader->line, span);
    reader->marking.other_words =
        before == NULL ? word : arena_print(reader->line->arena, "%s %s", before, word);
}

/* ---- tolerance ---- */

static bool has_sign(struct span span)
{
    return span.length > 0 && (span.start[0] == '-' || span.start[0] == '+' ||
                               (span.length > 3 && memcmp(span.start, "\xE2\x88\x92", 3) == 0));
}

/* The stroke of `-20/+100`, a sign behind it; NULL: none. */
static const char *limits_stroke(struct span span)
{
    const char *stroke = memchr(span.start, '/', span.length);
    bool found =
        stroke != NULL && has_sign(span_trim(span_from(span, (size_t)(stroke + 1 - span.start))));
    return found ? stroke : NULL;
}

static struct span without_plus_minus(struct span span, bool *both)
{
    static const char *const signs[] = {"\xC2\xB1", "+/-", "+/\xE2\x88\x92", "+-"};
    *both = true;
    for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++) {
        size_t length = strlen(signs[i]);
        if (span.length > length && memcmp(span.start, signs[i], length) == 0)
            return span_trim(span_from(span, length));
    }
    *both = false;
    return span;
}

/* `-20` in front of `+100 %`: the sign of per cent stands behind the second. */
static bool is_first_limit(struct marking_reader *reader, struct span span)
{
    struct quantity_form form = {.unit = UNIT_NONE};
    struct quantity quantity;
    return has_sign(span) && reader->next < reader->count &&
           has_sign(token_span(reader, reader->next)) &&
           quantity_read(reader->line->arena, span.start, span.length, &form, &quantity, NULL) ==
               QUANTITY_OK;
}

/* span is the token before `next`. */
static bool is_tolerance(struct marking_reader *reader, struct span span)
{
    bool both;
    struct span number = without_plus_minus(span, &both);
    struct quantity_form form = {.unit = UNIT_PERCENT};
    struct quantity quantity;
    return both || limits_stroke(number) != NULL || is_first_limit(reader, span) ||
           quantity_read(reader->line->arena, number.start, number.length, &form, &quantity,
                         NULL) == QUANTITY_OK;
}

static bool set_limit(struct marking_reader *reader, struct span span, double percent, bool high)
{
    bool *set = high ? &reader->high_set : &reader->low_set;
    if (*set)
        return second(reader, span, "tolerance");
    *set = reader->marking.tolerance_set = true;
    *(high ? &reader->marking.tolerance_high_percent : &reader->marking.tolerance_low_percent) =
        percent;
    return true;
}

static bool one_limit(struct marking_reader *reader, struct span span, struct span number,
                      bool unit_optional)
{
    struct quantity_form form = {.unit = UNIT_PERCENT, .unit_optional = unit_optional};
    struct quantity percent = {0};
    return line_take_quantity(reader->line, number, &form, &percent) &&
           set_limit(reader, span, percent.value, number.start[0] == '+');
}

/* `20 %`, `+/-20 %`, `-20/+100 %`, or `-20 %` with `+100 %` elsewhere. */
static bool take_tolerance(struct marking_reader *reader, struct span span)
{
    bool both;
    struct span number = without_plus_minus(span, &both);
    const char *stroke = limits_stroke(number);
    if (!both && stroke != NULL && has_sign(number)) {
        size_t length = (size_t)(stroke - number.start);
        struct span first = span_trim((struct span){number.start, length});
        struct span last = span_trim(span_from(number, length + 1));
        return one_limit(reader, span, first, true) && one_limit(reader, span, last, false);
    }
    if (!both && has_sign(number))
        return one_limit(reader, span, number, is_first_limit(reader, span));
    struct quantity_form form = {.unit = UNIT_PERCENT};
    struct quantity percent = {0};
    return line_take_quantity(reader->line, number, &form, &percent) &&
           set_limit(reader, span, -percent.value, false) &&
           set_limit(reader, span, percent.value, true);
}

/* ---- values ---- */

static bool wrong_unit(struct marking_reader *reader, struct span span)
{
    return line_fail(reader->line, span, DIAGNOSTIC_UNIT_WRONG, kind_hint(reader->kind),
                     "'%s' has no place here", line_quote(reader->line, span));
}

static bool set_quantity(struct marking_reader *reader, struct span span,
                         const struct quantity *quantity, struct quantity *place)
{
    if (place->set)
        return second(reader, span, unit_name(quantity->unit));
    *place = *quantity;
    return true;
}

/* `310 VAC`, `310 V~`. */
static bool unit_says_ac(struct span span)
{
    struct span unit = span.length > 3 ? span_from(span, span.length - 3) : span;
    return span_is(unit, "vac") || span_is(unit, "rms") || unit.start[unit.length - 1] == '~';
}

static const char *const no_rating[] = {"test",  "tested", "surge",  "peak",
                                        "flash", "proof",  "flash.", NULL};

/* The volts that the token at `index` says; 0: none. */
static double volts_at(const struct marking_reader *reader, size_t index)
{
    struct quantity_form form = {.unit = UNIT_VOLTAGE};
    struct quantity volts = {0};
    struct span span = token_span(reader, index);
    enum quantity_status status =
        quantity_read(reader->line->arena, span.start, span.length, &form, &volts, NULL);
    return status == QUANTITY_OK ? volts.value : 0;
}

/* Whether `test` behind these volts speaks of them. In `400 V test 1000 V` it speaks of the second,
   since a part is tested above its rating. */
static bool test_word_follows(const struct marking_reader *reader, double volts)
{
    return next_is(reader, no_rating) && !reader->tokens[reader->next].after_comma &&
           volts_at(reader, reader->next + 1) <= volts;
}

/* Words behind the volts: a test or surge voltage is no rating, a.c. is kept, d.c. goes by. */
static bool take_volts(struct marking_reader *reader, struct span span,
                       const struct quantity *volts)
{
    static const char *const ac_words[] = {"a.c.", "a.c", "ac", "~", "rms", "r.m.s.", NULL};
    static const char *const dc_words[] = {"d.c.", "d.c",     "dc", "wkg",    "wkg.",
                                           "w",    "working", "wv", "d.c.w.", NULL};
    bool is_ac = unit_says_ac(span);
    for (;;) {
        if (next_is(reader, ac_words))
            is_ac = true;
        else if (!next_is(reader, dc_words))
            break;
        reader->next++;
    }
    if (test_word_follows(reader, volts->value)) {
        add_words(reader, span);
        add_words(reader, token_span(reader, reader->next++));
        return true;
    }
    if (!set_quantity(reader, span, volts, &reader->marking.rated))
        return false;
    reader->marking.rated_ac = is_ac;
    return true;
}

static bool take_capacitor_value(struct marking_reader *reader, struct span span,
                                 const struct quantity *quantity)
{
    if (quantity->unit == UNIT_CAPACITANCE)
        return set_quantity(reader, span, quantity, &reader->marking.value);
    return quantity->unit == UNIT_VOLTAGE ? take_volts(reader, span, quantity)
                                          : wrong_unit(reader, span);
}

/* Always false. */
static bool better_hint(struct marking_reader *reader, struct span span)
{
    struct line_problem *problem = &reader->line->problem;
    bool several = memchr(span.start + 1, '+', span.length - 1) != NULL ||
                   memchr(span.start + 1, '-', span.length - 1) != NULL;
    if (problem->code == DIAGNOSTIC_QUANTITY_UNREADABLE)
        problem->hint = several ? "each section is a capacitor of its own; a can holds them"
                                : kind_hint(reader->kind);
    return false;
}

static bool take_value(struct marking_reader *reader, struct span span)
{
    struct quantity_form form = {.unit = UNIT_COUNT,
                                 .bare_m_refused = reader->kind == MARKING_RESISTOR};
    struct quantity quantity = {0};
    if (!line_take_quantity(reader->line, span, &form, &quantity))
        return better_hint(reader, span);
    bool other = quantity.unit == UNIT_TEMPERATURE ||
                 (quantity.unit == UNIT_VOLTAGE && reader->kind == MARKING_RESISTOR);
    if (other) { /* `105 C` on a modern part, the limiting volts of a resistor */
        add_words(reader, span);
        return true;
    }
    switch (reader->kind) {
    case MARKING_CAPACITOR:
        return take_capacitor_value(reader, span, &quantity);
    case MARKING_RESISTOR:
        if (quantity.unit == UNIT_POWER)
            return set_quantity(reader, span, &quantity, &reader->marking.rated);
        break;
    case MARKING_WINDING:
        break;
    }
    return quantity.unit == UNIT_RESISTANCE
               ? set_quantity(reader, span, &quantity, &reader->marking.value)
               : wrong_unit(reader, span);
}

/* ---- words ---- */

static bool class_of(struct span span, enum safety_class *class)
{
    static const struct {
        const char *text;
        enum safety_class class;
    } marks[] = {{"X1", CLASS_X1},    {"X2", CLASS_X2},   {"Y1", CLASS_Y1},    {"Y2", CLASS_Y2},
                 {"X1/Y1", CLASS_Y1}, {"X1Y1", CLASS_Y1}, {"X1/Y2", CLASS_Y2}, {"X1Y2", CLASS_Y2},
                 {"X2/Y2", CLASS_Y2}, {"X2Y2", CLASS_Y2}};
    for (size_t i = 0; i < sizeof marks / sizeof marks[0]; i++) {
        if (span_is(span, marks[i].text)) {
            *class = marks[i].class;
            return true;
        }
    }
    return false;
}

static bool take_class(struct marking_reader *reader, struct span span, enum safety_class class)
{
    if (reader->marking.safety_class != CLASS_NONE)
        return second(reader, span, "safety class");
    reader->marking.safety_class = class;
    return true;
}

/* `class`, or `two`, `2`, `2 x` before a class: how many tokens of that stand at `next`. */
static size_t before_class(const struct marking_reader *reader, unsigned *class_count)
{
    static const char *const two[] = {"two", "2", "2x", "2\xC3\x97", "pair", NULL};
    static const char *const between[] = {"x", "\xC3\x97", "class", "of", NULL};
    enum safety_class class;
    size_t at = reader->next;
    *class_count = span_is_any(token_span(reader, at), two) ? 2 : 1;
    if (*class_count == 2)
        at++;
    while (at < reader->count && span_is_any(token_span(reader, at), between))
        at++;
    return at > reader->next && class_of(token_span(reader, at), &class) ? at - reader->next : 0;
}

/* The longest type that begins at `next`; how many tokens it has, 0: none. */
static size_t type_at(const struct marking_reader *reader, enum dielectric *type)
{
    size_t most = 0;
    struct span first = token_span(reader, reader->next);
    for (size_t tokens = 1; tokens <= 2 && reader->next + tokens <= reader->count; tokens++) {
        struct span last = token_span(reader, reader->next + tokens - 1);
        struct span all = {first.start, (size_t)(last.start + last.length - first.start)};
        for (int i = DIELECTRIC_UNKNOWN + 1; i < DIELECTRIC_COUNT; i++) {
            if (span_is(all, dielectric_choices[i])) {
                *type = (enum dielectric)i;
                most = tokens;
            }
        }
    }
    return most;
}

static bool is_coded_value(struct marking_reader *reader, struct span span)
{
    struct quantity_form form = {.unit = reader->kind == MARKING_CAPACITOR ? UNIT_CAPACITANCE
                                                                           : UNIT_RESISTANCE};
    struct quantity quantity;
    return !reader->marking.value.set && quantity_read(reader->line->arena, span.start, span.length,
                                                       &form, &quantity, NULL) == QUANTITY_OK;
}

/* ---- colours ---- */

/* How many tokens from `next` on are colours, at most COLOURS_MAX; `colours` takes them. */
static size_t colours_at(const struct marking_reader *reader, enum colour *colours)
{
    size_t count = 0;
    while (count < COLOURS_MAX && reader->next + count < reader->count) {
        struct span word = token_span(reader, reader->next + count);
        if (!colour_read(word.start, word.length, &colours[count]))
            break;
        count++;
    }
    return count;
}

/* `body red end violet dot yellow`: the oldest resistors; how many tokens that is, 0: not so. */
static size_t body_end_dot_at(const struct marking_reader *reader, enum colour *colours)
{
    static const char *const names[][4] = {
        {"body", NULL}, {"end", "tip", NULL}, {"dot", "band", NULL}};
    if (reader->next + 6 > reader->count)
        return 0;
    for (size_t i = 0; i < 3; i++) {
        struct span word = token_span(reader, reader->next + 2 * i + 1);
        if (!span_is_any(token_span(reader, reader->next + 2 * i), names[i]) ||
            !colour_read(word.start, word.length, &colours[i]))
            return 0;
    }
    return 6;
}

static void set_colours(struct marking_reader *reader, const struct colour_value *value,
                        struct span span)
{
    struct marking *marking = &reader->marking;
    bool capacitor = reader->kind == MARKING_CAPACITOR;
    marking->value = (struct quantity){
        .set = true,
        .value = value->value,
        .unit = capacitor ? UNIT_CAPACITANCE : UNIT_RESISTANCE,
        .written = marking->colours,
        .at = line_position(reader->line, (size_t)(span.start - reader->line->text))};
    if (value->tolerance_set && !reader->low_set && !reader->high_set) {
        marking->tolerance_set = reader->low_set = reader->high_set = true;
        marking->tolerance_low_percent = -value->tolerance_percent;
        marking->tolerance_high_percent = value->tolerance_percent;
    }
    if (capacitor && value->rated_v > 0 && !marking->rated.set)
        marking->rated = (struct quantity){.set = true,
                                           .value = value->rated_v,
                                           .unit = UNIT_VOLTAGE,
                                           .written = marking->colours,
                                           .at = marking->value.at};
}

/* Colours in the place of the value; false: none stand at `next`. A code that no table has gives no
   value, and the reader says so. */
static bool take_colours(struct marking_reader *reader)
{
    enum { FEWEST = 3 };
    enum colour colours[COLOURS_MAX];
    if (reader->kind == MARKING_WINDING || reader->marking.value.set || reader->marking.colours)
        return false;
    size_t tokens = body_end_dot_at(reader, colours), count = 3;
    if (tokens == 0)
        tokens = count = colours_at(reader, colours);
    if (count < FEWEST)
        return false;
    struct span first = token_span(reader, reader->next);
    struct span last = token_span(reader, reader->next + tokens - 1);
    struct span all = {first.start, (size_t)(last.start + last.length - first.start)};
    struct colour_value value;
    bool known = reader->kind == MARKING_RESISTOR ? colour_resistor(colours, count, &value)
                                                  : colour_capacitor(colours, count, &value);
    reader->marking.colours = line_written(reader->line, all);
    reader->marking.colours_unknown = !known;
    reader->next += tokens;
    if (known)
        set_colours(reader, &value, all);
    return true;
}

static bool take_word(struct marking_reader *reader, struct span span)
{
    enum safety_class class;
    if (take_colours(reader))
        return true;
    enum dielectric type = DIELECTRIC_UNKNOWN;
    size_t tokens =
        reader->fitted && reader->kind == MARKING_CAPACITOR ? type_at(reader, &type) : 0;
    if (tokens > 0) {
        if (reader->marking.type != DIELECTRIC_UNKNOWN)
            return second(reader, span, "type");
        reader->marking.type = type;
        reader->next += tokens;
        return true;
    }
    reader->next++;
    if (reader->kind == MARKING_CAPACITOR && class_of(span, &class))
        return take_class(reader, span, class);
    static const char *const series[] = {"series", NULL};
    if (reader->marking.class_count == 2 && span_is(span, "in") && next_is(reader, series)) {
        reader->next++;
        return true;
    }
    if (reader->kind == MARKING_CAPACITOR && span_is(span, "class"))
        return line_fail(reader->line, span, DIAGNOSTIC_UNKNOWN_CHOICE,
                         "write class X1, X2, Y1 or Y2", "no safety class behind 'class'");
    if (span_is_any(span, no_rating) && volts_at(reader, reader->next) != 0) {
        add_words(reader, span);
        add_words(reader, token_span(reader, reader->next++));
        return true;
    }
    if (is_coded_value(reader, span)) /* `p33`, `R47` */
        return take_value(reader, span);
    add_words(reader, span);
    return true;
}

static bool take_number(struct marking_reader *reader, struct span span)
{
    struct dimensions size = {0};
    reader->next++;
    if (is_tolerance(reader, span))
        return take_tolerance(reader, span);
    if (!dimensions_read(reader->line->arena, span.start, span.length, &size))
        return take_value(reader, span);
    if (reader->marking.size.set)
        return second(reader, span, "size");
    size.at = line_position(reader->line, (size_t)(span.start - reader->line->text));
    reader->marking.size = size;
    return true;
}

static bool take_next(struct marking_reader *reader)
{
    unsigned class_count;
    size_t before = reader->kind == MARKING_CAPACITOR ? before_class(reader, &class_count) : 0;
    if (before > 0) {
        reader->marking.class_count = class_count;
        reader->next += before;
    }
    struct span span = token_span(reader, reader->next);
    return reader->tokens[reader->next].is_number ? take_number(reader, span)
                                                  : take_word(reader, span);
}

/* ---- the whole ---- */

static bool cut_tokens(struct marking_reader *reader)
{
    const struct line *line = reader->line;
    const char *cursor = line->text, *end = line->text + line->length;
    struct quantity_token token;
    while (quantity_token_next(&cursor, end, &token)) {
        if (reader->count == TOKENS_MAX)
            return line_fail(reader->line, span_of_token(&token), DIAGNOSTIC_TEXT_TOO_LONG,
                             kind_hint(reader->kind), "more than %d words", TOKENS_MAX);
        reader->tokens[reader->count++] = token;
    }
    return reader->count > 0 ||
           line_fail(reader->line, line_span(line), DIAGNOSTIC_QUANTITY_UNREADABLE,
                     kind_hint(reader->kind), "nothing stands here");
}

bool line_marking(struct line *line, enum marking_kind kind, bool fitted, struct marking *marking)
{
    if (line_too_long(line))
        return false;
    struct span all = line_span(line);
    struct marking_reader reader = {
        .line = line,
        .kind = kind,
        .fitted = fitted,
        .marking = {.set = true,
                    .written = line_written(line, all),
                    .at = line_position(line, (size_t)(all.start - line->text)),
                    .class_count = 1}};
    if (!cut_tokens(&reader))
        return false;
    while (reader.next < reader.count)
        if (!take_next(&reader))
            return false;
    *marking = reader.marking;
    return true;
}
