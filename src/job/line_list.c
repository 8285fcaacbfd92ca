/* Lists: volts, refs, names; and named values. */
#include "job/line_scan.h"
#include "job/meant_word.h"

#include <string.h>
#include <strings.h>

bool line_list(struct line *line, enum unit unit, const double **values, size_t *count)
{
    if (line_too_long(line))
        return false;
    struct quantity_form form = {.unit = unit};
    double *items = NULL;
    size_t found = 0, capacity = 0, offset = 0;
    struct span segment;
    while (line_segment_next(line, &offset, &segment)) {
        struct quantity quantity;
        if (!line_take_quantity(line, segment, &form, &quantity))
            return false;
        if (quantity.bound != BOUND_NONE)
            return line_fail(line, segment, DIAGNOSTIC_QUANTITY_UNREADABLE, NULL,
                             "'%s' is no single value", line_quote(line, segment));
        items = arena_grow(line->arena, items, found, &capacity, sizeof *items);
        items[found++] = quantity.value;
    }
    if (found == 0)
        return line_fail_quantity(line, line_span(line), QUANTITY_UNREADABLE, &form);
    *values = items;
    *count = found;
    return true;
}

/* ---- refs and names ---- */

struct name_list {
    struct line_name *items;
    size_t count, capacity;
};

static bool add_name(struct line *line, struct span span, struct name_list *list)
{
    for (size_t i = 0; i < list->count; i++)
        if (span_is(span, list->items[i].text))
            return line_fail(line, span, DIAGNOSTIC_REF_DUPLICATE, NULL, "'%s' stands here twice",
                             line_quote(line, span));
    list->items =
        arena_grow(line->arena, list->items, list->count, &list->capacity, sizeof *list->items);
    list->items[list->count++] =
        (struct line_name){.text = line_written(line, span),
                           .at = line_position(line, (size_t)(span.start - line->text))};
    return true;
}

static bool add_ref(struct line *line, struct span span, struct name_list *list)
{
    static const char *const joins[] = {"and", "to", "-", "+", "&", NULL};
    if (span_is_any(span, joins) || memchr(span.start, '+', span.length) != NULL ||
        memchr(span.start, '&', span.length) != NULL)
        return line_fail(line, span, DIAGNOSTIC_REF_INVALID,
                         "refs stand side by side, as in C20 C21", "'%s' is no ref",
                         line_quote(line, span));
    if (!line_is_ref(span.start, span.length))
        return line_fail(line, span, DIAGNOSTIC_REF_INVALID,
                         "a ref is letters, digits, space, '.', '-' and '/', at most 32",
                         "'%s' is no ref", line_quote(line, span));
    return add_name(line, span, list);
}

static bool refs_between_spaces(struct line *line, struct name_list *list)
{
    struct span rest = line_span(line);
    while (rest.length > 0) {
        size_t length = 0;
        while (length < rest.length && rest.start[length] != ' ' && rest.start[length] != '\t')
            length++;
        if (!add_ref(line, (struct span){rest.start, length}, list))
            return false;
        rest = span_trim(span_from(rest, length));
    }
    return true;
}

static bool refs_between_commas(struct line *line, struct name_list *list)
{
    size_t offset = 0;
    struct span segment;
    while (line_segment_next(line, &offset, &segment))
        if (!add_ref(line, segment, list))
            return false;
    return true;
}

bool line_refs(struct line *line, const struct line_name **refs, size_t *count)
{
    if (line_too_long(line))
        return false;
    struct name_list list = {0};
    bool commas = memchr(line->text, ',', line->length) != NULL;
    if (!(commas ? refs_between_commas(line, &list) : refs_between_spaces(line, &list)))
        return false;
    if (list.count == 0)
        return line_fail(line, line_span(line), DIAGNOSTIC_REF_INVALID, "write refs, as in C20 C21",
                         "nothing stands here");
    *refs = list.items;
    *count = list.count;
    return true;
}

bool line_names(struct line *line, const struct line_name **names, size_t *count)
{
    if (line_too_long(line))
        return false;
    struct name_list list = {0};
    size_t offset = 0;
    struct span segment;
    while (line_segment_next(line, &offset, &segment))
        if (!add_name(line, segment, &list))
            return false;
    if (list.count == 0)
        return line_fail(line, line_span(line), DIAGNOSTIC_REF_INVALID,
                         "write names, with a comma and a space between", "nothing stands here");
    *names = list.items;
    *count = list.count;
    return true;
}

/* ---- named values ---- */

/* The row whose name begins the segment, the longest of several; NULL: none. */
static const struct named_value *row_of(const struct named_value *names, size_t name_count,
                                        struct span segment)
{
    const struct named_value *found = NULL;
    for (size_t i = 0; i < name_count; i++)
        if (span_begins(segment, names[i].name) &&
            (found == NULL || strlen(names[i].name) > strlen(found->name)))
            found = &names[i];
    return found;
}

/* The words in front of the first number. */
static struct span leading_words(struct span segment)
{
    const char *cursor = segment.start, *end = segment.start + segment.length;
    struct span words = {segment.start, 0};
    struct quantity_token token;
    while (quantity_token_next(&cursor, end, &token) && !token.is_number)
        words.length = (size_t)(cursor - segment.start);
    return words.length > 0 ? words : segment;
}

static bool unknown_name(struct line *line, struct span segment, const struct named_value *names,
                         size_t name_count)
{
    const char **candidates = arena_array(line->arena, name_count + 1, sizeof *candidates);
    char *all = "";
    for (size_t i = 0; i < name_count; i++) {
        candidates[i] = names[i].name;
        all = arena_print(line->arena, "%s%s%s", all, i > 0 ? ", " : "", names[i].name);
    }
    struct span words = leading_words(segment);
    const char *meant =
        meant_word_hint(line->arena, line_written(line, words), candidates, "nearest name");
    return line_fail(line, words, DIAGNOSTIC_UNKNOWN_KEY,
                     meant != NULL ? meant : arena_print(line->arena, "names here: %s", all),
                     "unknown name '%s'", line_quote(line, words));
}

static bool flag_value(struct line *line, const struct named_value *row, struct span rest)
{
    if (rest.length > 0)
        return line_fail(line, rest, DIAGNOSTIC_QUANTITY_UNREADABLE,
                         arena_print(line->arena, "'%s' stands alone", row->name),
                         "'%s' does not belong here", line_quote(line, rest));
    *row->flag = true;
    return true;
}

static bool number_value(struct line *line, const struct named_value *row, struct span segment,
                         struct span rest)
{
    struct quantity_form form = {.unit = row->unit, .unit_optional = row->unit_optional};
    if (rest.length == 0)
        return line_fail(
            line, segment, DIAGNOSTIC_QUANTITY_UNREADABLE,
            arena_print(line->arena, "write %s %s", row->name, unit_example(row->unit)),
            "'%s' has no value", row->name);
    enum quantity_status status = line_try_quantity(line, rest, &form, row->quantity);
    if (status == QUANTITY_OK)
        return true;
    const char *cursor = rest.start, *end = rest.start + rest.length;
    struct quantity_token token;
    bool some = quantity_token_next(&cursor, end, &token);
    struct span more = span_trim(span_from(rest, (size_t)(cursor - rest.start)));
    if (status == QUANTITY_UNREADABLE && some && token.is_number && more.length > 0)
        return line_fail(line, more, DIAGNOSTIC_QUANTITY_UNREADABLE,
                         "put a comma and a space between named values",
                         "'%s' does not belong to '%s'", line_quote(line, more), row->name);
    return line_fail_quantity(line, rest, status, &form);
}

bool line_named_values(struct line *line, const struct named_value *names, size_t name_count)
{
    if (line_too_long(line))
        return false;
    size_t offset = 0, found = 0;
    struct span segment;
    bool *seen = arena_array(line->arena, name_count + 1, sizeof *seen);
    while (line_segment_next(line, &offset, &segment)) {
        const struct named_value *row = row_of(names, name_count, segment);
        if (row == NULL)
            return unknown_name(line, segment, names, name_count);
        struct span name = {segment.start, strlen(row->name)};
        if (seen[row - names])
            return line_fail(line, name, DIAGNOSTIC_DUPLICATE_KEY, NULL, "'%s' stands here twice",
                             row->name);
        struct span rest = span_trim(span_from(segment, name.length));
        if (!(row->flag != NULL ? flag_value(line, row, rest)
                                : number_value(line, row, segment, rest)))
            return false;
        seen[row - names] = true;
        found++;
    }
    return found > 0 || line_fail(line, line_span(line), DIAGNOSTIC_QUANTITY_UNREADABLE,
                                  "write names and values, as in grid -19 V, anode 380 V",
                                  "nothing stands here");
}
