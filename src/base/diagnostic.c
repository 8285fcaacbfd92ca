#include "base/diagnostic.h"

#include "base/utf8.h"

#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

enum { KEPT_MAX = 200, SHOWN_LINE_MAX = 160 };

static const struct {
    const char *text;
    enum severity severity;
} codes[] = {
#define DIAGNOSTIC(name, severity, text) [DIAGNOSTIC_##name] = {text, severity},
#include "base/diagnostic_codes.h"
#undef DIAGNOSTIC
};

struct diagnostics diagnostics_in(struct arena *arena)
{
    return (struct diagnostics){.arena = arena};
}

const char *diagnostic_code_text(enum diagnostic_code code)
{
    return codes[code].text;
}

const char *severity_text(enum severity severity)
{
    switch (severity) {
    case SEVERITY_NOTE:
        return "note";
    case SEVERITY_WARNING:
        return "warning";
    case SEVERITY_ERROR:
        return "error";
    }
    return "";
}

static const char *source_line(struct arena *arena, const struct source *source, unsigned line)
{
    if (!source || !source->text || line == 0)
        return NULL;
    const char *start = source->text, *end = source->text + source->length;
    while (--line > 0) {
        start = memchr(start, '\n', (size_t)(end - start));
        if (!start)
            return NULL;
        start++;
    }
    const char *stop = memchr(start, '\n', (size_t)(end - start));
    stop = stop ? stop : end;
    if (stop > start && stop[-1] == '\r')
        stop--;
    return arena_text(arena, start, (size_t)(stop - start));
}

static void keep(struct diagnostics *list, const struct diagnostic *item)
{
    list->items = arena_grow(list->arena, list->items, list->count, &list->capacity, sizeof *item);
    list->items[list->count++] = *item;
}

void diagnostic_add(struct diagnostics *list, const struct source *source, struct position at,
                    enum diagnostic_code code, const char *hint, const char *format, ...)
{
    enum severity severity = codes[code].severity;
    list->errors += severity == SEVERITY_ERROR;
    list->warnings += severity == SEVERITY_WARNING;
    if (list->count == KEPT_MAX)
        return;
    va_list arguments;
    va_start(arguments, format);
    struct diagnostic item = {
        .code = code,
        .severity = severity,
        .path = source ? source->path : NULL,
        .at = at,
        .text = arena_print_list(list->arena, format, arguments),
        .hint = arena_copy(list->arena, hint),
        .line = source_line(list->arena, source, at.line),
    };
    va_end(arguments);
    keep(list, &item);
}

void diagnostics_append(struct diagnostics *list, const struct diagnostics *more)
{
    list->errors += more->errors;
    list->warnings += more->warnings;
    for (size_t i = 0; i < more->count && list->count < KEPT_MAX; i++) {
        struct diagnostic item = more->items[i];
        item.path = arena_copy(list->arena, item.path);
        item.text = arena_copy(list->arena, item.text);
        item.hint = arena_copy(list->arena, item.hint);
        item.line = arena_copy(list->arena, item.line);
        keep(list, &item);
    }
}

static bool comes_before(const struct diagnostic *a, const struct diagnostic *b)
{
    int paths = strcmp(a->path ? a->path : "", b->path ? b->path : "");
    if (paths != 0)
        return paths < 0;
    if (a->at.line != b->at.line)
        return a->at.line < b->at.line;
    return a->at.column < b->at.column;
}

void diagnostics_sort(struct diagnostics *list)
{
    /* Insertion keeps equal ones in order; the list is short and nearly sorted. */
    for (size_t i = 1; i < list->count; i++) {
        struct diagnostic moving = list->items[i];
        size_t place = i;
        for (; place > 0 && comes_before(&moving, &list->items[place - 1]); place--)
            list->items[place] = list->items[place - 1];
        list->items[place] = moving;
    }
}

/* Broken bytes, control characters, and signs that turn the direction of writing. */
static bool is_unseen(uint32_t code_point)
{
    return code_point == UTF8_ILL_FORMED || (code_point < 0x20 && code_point != '\t') ||
           (code_point >= 0x7F && code_point < 0xA0) ||
           (code_point >= 0x2028 && code_point <= 0x202E) ||
           (code_point >= 0x2066 && code_point <= 0x2069) || code_point == 0xFEFF;
}

/* Show a line with a caret under the column; control and broken bytes as '?', long lines cut. */
static void format_line(const struct diagnostic *item, struct buffer *buffer)
{
    const char *cursor = item->line, *end = item->line + strlen(item->line);
    unsigned first = item->at.column > SHOWN_LINE_MAX - 40 ? item->at.column - 40 : 1;
    struct buffer caret = {0};
    buffer_text(buffer, "    ");
    for (unsigned column = 1; cursor < end && column < first + SHOWN_LINE_MAX; column++) {
        uint32_t code_point = utf8_next(&cursor, end);
        if (column < first)
            continue;
        if (is_unseen(code_point))
            code_point = '?';
        utf8_append(buffer, code_point);
        if (column < item->at.column)
            buffer_byte(&caret, code_point == '\t' ? '\t' : ' ');
    }
    buffer_byte(buffer, '\n');
    if (item->at.column > 0) {
        buffer_text(buffer, "    ");
        buffer_append(buffer, caret.data, caret.length);
        buffer_text(buffer, "^\n");
    }
    buffer_release(&caret);
}

void diagnostics_format(const struct diagnostics *list, struct buffer *buffer)
{
    for (size_t i = 0; i < list->count; i++) {
        const struct diagnostic *item = &list->items[i];
        if (item->path)
            buffer_print(buffer, "%s:", item->path);
        if (item->path && item->at.line)
            buffer_print(buffer, "%u:%u:", item->at.line, item->at.column);
        buffer_print(buffer, "%s%s: %s\n",
                     item->path ? " " : "gridleak: ", severity_text(item->severity), item->text);
        if (item->line)
            format_line(item, buffer);
        if (item->hint)
            buffer_print(buffer, "    %s\n", item->hint);
    }
}

/*
 * How far apart two words are, in quarters of a letter. A hand slips in its own ways: two letters
 * change places, one is doubled or not, a 1 is typed as l, a 0 as O. These count less than a letter
 * that is another one, missing or too many.
 */
enum { LETTER = 4, SLIP = 2, LOOK_ALIKE = 1, LONGEST_WORD = 40 };

static char lower(char letter)
{
    return letter >= 'A' && letter <= 'Z' ? (char)(letter - 'A' + 'a') : letter;
}

static size_t exchange_cost(char a, char b)
{
    static const char *const alike[] = {"1li", "0o"};
    a = lower(a);
    b = lower(b);
    if (a == b)
        return 0;
    for (size_t i = 0; i < sizeof alike / sizeof *alike; i++)
        if (strchr(alike[i], a) && strchr(alike[i], b))
            return LOOK_ALIKE;
    return LETTER;
}

/* Of a letter that the other word has not: little when it only doubles the one before. */
static size_t lone_cost(const char *word, size_t at)
{
    return at > 0 && lower(word[at]) == lower(word[at - 1]) ? SLIP : LETTER;
}

static size_t least(size_t a, size_t b)
{
    return a < b ? a : b;
}

static size_t edit_distance(const char *a, const char *b)
{
    size_t length_a = strlen(a), length_b = strlen(b);
    if (length_a > LONGEST_WORD || length_b > LONGEST_WORD)
        return LETTER * LONGEST_WORD;
    size_t rows[3][LONGEST_WORD + 1] = {{0}}; /* of the letters of a: this one, and two before */
    for (size_t j = 1; j <= length_b; j++)
        rows[0][j] = rows[0][j - 1] + lone_cost(b, j - 1);
    for (size_t i = 1; i <= length_a; i++) {
        size_t *row = rows[i % 3], *above = rows[(i + 2) % 3], *second = rows[(i + 1) % 3];
        row[0] = above[0] + lone_cost(a, i - 1);
        for (size_t j = 1; j <= length_b; j++) {
            size_t lone = least(row[j - 1] + lone_cost(b, j - 1), above[j] + lone_cost(a, i - 1));
            row[j] = least(lone, above[j - 1] + exchange_cost(a[i - 1], b[j - 1]));
            if (i > 1 && j > 1 && lower(a[i - 1]) == lower(b[j - 2]) &&
                lower(a[i - 2]) == lower(b[j - 1]))
                row[j] = least(row[j], second[j - 2] + SLIP);
        }
    }
    return rows[length_a % 3][length_b];
}

static size_t length_difference(const char *a, const char *b)
{
    size_t length_a = strlen(a), length_b = strlen(b);
    return length_a > length_b ? length_a - length_b : length_b - length_a;
}

const char *nearest_word(const char *word, const char *const *candidates)
{
    const char *best = NULL;
    size_t most = LETTER * (strlen(word) / 3 + 1); /* beyond it is another word */
    size_t best_distance = most + 1;
    for (; *candidates; candidates++) {
        if (!**candidates)
            continue;
        size_t distance = edit_distance(word, *candidates);
        if (distance < best_distance ||
            (best && distance == best_distance &&
             length_difference(word, *candidates) < length_difference(word, best))) {
            best_distance = distance;
            best = *candidates;
        }
    }
    return best;
}
