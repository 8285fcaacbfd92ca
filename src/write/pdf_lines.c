#include "write/pdf_lines.h"

#include "base/utf8.h"

#include <string.h>

enum { EN_DASH = 0x2013, EM_DASH = 0x2014 };

/* Characters that steer a layout and have no picture: soft hyphen, joiners, direction marks. */
static bool is_invisible(uint32_t code_point)
{
    return code_point == 0xAD || (code_point >= 0x200B && code_point <= 0x200F) ||
           (code_point >= 0x202A && code_point <= 0x202E) ||
           (code_point >= 0x2060 && code_point <= 0x2069) || code_point == 0xFEFF;
}

/* Whether no byte needs a look: controls do, and the first bytes of all invisible characters. */
static bool is_clean(const char *text, size_t length)
{
    for (size_t i = 0; i < length; i++) {
        unsigned char byte = (unsigned char)text[i];
        if (byte >= 0x20 && byte < 0xC2)
            continue;
        unsigned char next = i + 1 < length ? (unsigned char)text[i + 1] : 0;
        if (byte < 0x20 || (byte == 0xC2 && next == 0xAD) || byte == 0xEF ||
            (byte == 0xE2 && (next == 0x80 || next == 0x81)))
            return false;
    }
    return true;
}

static const char *clean(struct arena *arena, const char *text, size_t *length)
{
    if (is_clean(text, *length))
        return text;
    char *copy = arena_get(arena, *length + 1);
    size_t kept = 0;
    const char *end = text + *length;
    while (text < end) {
        const char *character = text;
        uint32_t code_point = utf8_next(&text, end);
        if (code_point >= '\t' && code_point <= '\r') {
            copy[kept++] = ' ';
        } else if (!is_invisible(code_point)) {
            memcpy(copy + kept, character, (size_t)(text - character));
            kept += (size_t)(text - character);
        }
    }
    *length = kept;
    return copy;
}

void text_runs_add_part(struct text_runs *runs, const char *text, size_t length,
                        struct text_style style, const char *uri)
{
    runs->items =
        arena_grow(runs->arena, runs->items, runs->count, &runs->capacity, sizeof *runs->items);
    text = clean(runs->arena, text, &length);
    runs->items[runs->count++] =
        (struct text_run){.text = text, .length = length, .style = style, .uri = uri};
}

void text_runs_add(struct text_runs *runs, const char *text, struct text_style style)
{
    if (text && *text)
        text_runs_add_part(runs, text, strlen(text), style, NULL);
}

/* A place in the runs, and the line's width before it. */
struct spot {
    size_t run;
    const char *at;
    double width;
};

struct breaker {
    const struct text_runs *runs;
    const struct pdf_resources *resources;
    struct arena *arena;
    double limit;
    struct text_lines lines;
};

static bool is_letter(uint32_t code_point)
{
    return (code_point >= 'a' && code_point <= 'z') || (code_point >= 'A' && code_point <= 'Z') ||
           (code_point >= 0xC0 && code_point < 0x2000);
}

static uint32_t look_ahead(const char *at, const char *end)
{
    return at < end ? utf8_next(&at, end) : 0;
}

/*
 * Whether a space between a figure and its unit is at `at`: people type it, and it is not the
 * no-break space that our own figures carry.
 */
static bool is_before_unit(uint32_t before, const char *at, const char *end)
{
    static const char *const units[] = {"V", "kV", "mV", "A",  "mA",  "µA", "W",  "mW",
                                        "Ω", "kΩ", "MΩ", "µF", "nF",  "pF", "Hz", "kHz",
                                        "%", "°C", "K",  "s",  "min", "h",  "mm", "ohm"};
    if (!((before >= '0' && before <= '9') || before == 0xBD))
        return false;
    for (size_t i = 0; i < sizeof units / sizeof units[0]; i++) {
        size_t length = strlen(units[i]);
        if ((size_t)(end - at) < length || memcmp(at, units[i], length) != 0)
            continue;
        unsigned char next = at + length < end ? (unsigned char)at[length] : ' ';
        if (next < 0x80 && !(next >= 'a' && next <= 'z') && !(next >= 'A' && next <= 'Z'))
            return true;
    }
    return false;
}

/* Whether a line may end behind code_point, which is no space; `at` is where the next begins. */
static bool breaks_behind(uint32_t before, uint32_t code_point, const char *at, const char *end)
{
    if (code_point == EM_DASH)
        return true;
    return (code_point == '-' || code_point == EN_DASH || code_point == '/') && is_letter(before) &&
           is_letter(look_ahead(at, end));
}

static const char *run_end(const struct breaker *breaker, size_t run)
{
    return breaker->runs->items[run].text + breaker->runs->items[run].length;
}

static void add_piece(struct breaker *breaker, struct text_line *line, const struct text_run *run,
                      const char *from, const char *to)
{
    if (from >= to)
        return;
    struct line_piece piece = {.text = from,
                               .length = (size_t)(to - from),
                               .style = run->style,
                               .uri = run->uri,
                               .x = line->width};
    piece.width = (double)pdf_text_width(breaker->resources, run->style.face, from, piece.length) *
                  run->style.size_pt / 1000;
    line->width += piece.width;
    line->pieces[line->piece_count++] = piece;
}

/* The line from..to, spaces at its end left out. */
static void add_line(struct breaker *breaker, struct spot from, struct spot to)
{
    struct text_lines *lines = &breaker->lines;
    lines->items = arena_grow(breaker->arena, lines->items, lines->count, &lines->capacity,
                              sizeof *lines->items);
    struct text_line *line = &lines->items[lines->count++];
    *line = (struct text_line){0};
    line->pieces = arena_array(breaker->arena, to.run - from.run + 1, sizeof *line->pieces);
    while (to.at == breaker->runs->items[to.run].text && to.run > from.run) {
        to.run--;
        to.at = run_end(breaker, to.run);
    }
    for (;;) {
        const char *start = to.run == from.run ? from.at : breaker->runs->items[to.run].text;
        while (to.at > start && to.at[-1] == ' ')
            to.at--;
        if (to.at > start || to.run == from.run)
            break;
        to.run--;
        to.at = run_end(breaker, to.run);
    }
    for (size_t run = from.run; run <= to.run; run++) {
        const struct text_run *item = &breaker->runs->items[run];
        const char *start = run == from.run ? from.at : item->text;
        const char *end = run == to.run ? to.at : run_end(breaker, run);
        add_piece(breaker, line, item, start, end);
    }
}

/* Behind the spaces at a place where a line was broken. */
static struct spot skip_spaces(const struct breaker *breaker, struct spot place)
{
    while (place.run < breaker->runs->count) {
        const char *end = run_end(breaker, place.run);
        while (place.at < end && *place.at == ' ')
            place.at++;
        if (place.at < end || breaker->runs->items[place.run].line_end ||
            place.run + 1 == breaker->runs->count)
            break;
        place.run++;
        place.at = breaker->runs->items[place.run].text;
    }
    place.width = 0;
    return place;
}

/* How many thousandths of the run's size still fit behind `width`; 0: none. */
static unsigned long room_left(const struct breaker *breaker, const struct text_run *run,
                               double width)
{
    double room = (breaker->limit + 0.01 - width) * 1000 / run->style.size_pt;
    return room > 0 ? (unsigned long)(room < 1e9 ? room : 1e9) : 0;
}

/* Behind the letters and digits from `at` on that fit: most of a text, and no line ends there. */
static const char *within_word(const struct glyph_place *places, const char *at, const char *end,
                               unsigned long room, unsigned long *used)
{
    for (; at < end && *at >= '0' && *at < 0x7F; at++) {
        unsigned long more = *used + places[(unsigned char)*at].advance;
        if (more > room)
            break;
        *used = more;
    }
    return at;
}

/* A line while its end is looked for. */
struct line_search {
    struct spot from, at;
    struct spot candidate; /* where it may end, the last such place */
    bool has_candidate;
    uint32_t before; /* the character before `at` */
};

static void may_end_here(struct line_search *line)
{
    line->candidate = line->at;
    line->has_candidate = true;
}

/* Where a line ends that has no room for this character, the one before `at`. */
static struct spot end_of_full(const struct line_search *line, const char *character)
{
    if (line->has_candidate)
        return line->candidate;
    if (line->at.run == line->from.run && character == line->from.at)
        return line->at; /* not even one character fits: it stands alone */
    return (struct spot){line->at.run, character, 0};
}

/* Go to the end of the run; false: the line is full before it, and ends at *end. */
static bool pass_run(const struct breaker *breaker, struct line_search *line, struct spot *end)
{
    const struct text_run *run = &breaker->runs->items[line->at.run];
    const char *behind = run->text + run->length;
    const struct glyph_place *places = breaker->resources->latin[run->style.face];
    unsigned long room = room_left(breaker, run, line->at.width), used = 0;
    while (line->at.at < behind) {
        const char *word = line->at.at;
        line->at.at = within_word(places, word, behind, room, &used);
        if (line->at.at > word)
            line->before = (unsigned char)line->at.at[-1];
        if (line->at.at == behind)
            break;
        const char *character = line->at.at;
        uint32_t code_point = utf8_next(&line->at.at, behind);
        if (code_point == ' ' && !is_before_unit(line->before, line->at.at, behind))
            may_end_here(line);
        used += pdf_character_width(breaker->resources, run->style.face, code_point);
        if (code_point != ' ' && used > room) {
            *end = end_of_full(line, character);
            return false;
        }
        if (breaks_behind(line->before, code_point, line->at.at, behind))
            may_end_here(line);
        line->before = code_point;
    }
    line->at.width += (double)used * run->style.size_pt / 1000;
    return true;
}

/* One line from `from`; the answer is where the next begins. */
static struct spot break_line(struct breaker *breaker, struct spot from)
{
    const struct text_runs *runs = breaker->runs;
    struct line_search line = {.from = from, .at = from};
    for (;;) {
        struct spot end;
        if (!pass_run(breaker, &line, &end)) {
            add_line(breaker, from, end);
            return skip_spaces(breaker, end);
        }
        if (runs->items[line.at.run].line_end || line.at.run + 1 == runs->count)
            break;
        line.at.run++;
        line.at.at = runs->items[line.at.run].text;
    }
    add_line(breaker, from, line.at);
    size_t next = line.at.run + 1;
    return (struct spot){next, next < runs->count ? runs->items[next].text : NULL, 0};
}

/* Cells of tables mostly fit in one line: then there is nothing to look for in them. */
static bool fits_in_one_line(const struct breaker *breaker)
{
    enum { SHORT_BYTES = 120 };
    const struct text_runs *runs = breaker->runs;
    size_t bytes = 0;
    for (size_t i = 0; i < runs->count; i++) {
        bytes += runs->items[i].length;
        if (bytes > SHORT_BYTES || (runs->items[i].line_end && i + 1 < runs->count))
            return false;
    }
    return text_runs_width(runs, breaker->resources) <= breaker->limit;
}

struct text_lines text_lines_break(const struct text_runs *runs,
                                   const struct pdf_resources *resources, double width)
{
    struct breaker breaker = {
        .runs = runs, .resources = resources, .arena = runs->arena, .limit = width};
    if (runs->count == 0)
        return breaker.lines;
    struct spot at = {0, runs->items[0].text, 0};
    if (fits_in_one_line(&breaker)) {
        add_line(&breaker, at,
                 (struct spot){runs->count - 1, run_end(&breaker, runs->count - 1), 0});
        return breaker.lines;
    }
    while (at.run < runs->count) {
        if (at.run + 1 == runs->count && at.at == run_end(&breaker, at.run) &&
            breaker.lines.count > 0)
            break; /* only spaces were left behind the last break */
        at = break_line(&breaker, at);
    }
    return breaker.lines;
}

double text_runs_width(const struct text_runs *runs, const struct pdf_resources *resources)
{
    double width = 0;
    for (size_t i = 0; i < runs->count; i++)
        width += (double)pdf_text_width(resources, runs->items[i].style.face, runs->items[i].text,
                                        runs->items[i].length) *
                 runs->items[i].style.size_pt / 1000;
    return width;
}
