#include "job/yaml_tree.h"

#include "base/utf8.h"
#include "job/yaml_parse.h"
#include "job/yaml_text.h"

#include <string.h>

enum {
    REPAIRS_MAX = 20,
    PARSED_BYTES_MAX = 24 << 20, /* of all attempts together: a large broken file takes no minute */
    DAMAGE_MAX = 200
};

/* The copy that is blanked, and where. */
struct repair {
    const struct source *source;
    struct arena *arena;
    struct diagnostics *diagnostics;
    const char *text; /* what is parsed: the source's own bytes until something is blanked */
    char *copy;
    size_t length;
    unsigned damage[DAMAGE_MAX]; /* lines */
    size_t damage_count;
};

static void blank(struct repair *repair, size_t from, size_t to, unsigned line)
{
    if (!repair->copy) {
        repair->copy = arena_text(repair->arena, repair->text, repair->length);
        repair->text = repair->copy;
    }
    /* Only whole lines and ends of lines are blanked, so no column moves. */
    for (size_t i = from; i < to; i++) {
        if (repair->copy[i] != '\r')
            repair->copy[i] = ' ';
    }
    if (repair->damage_count < DAMAGE_MAX)
        repair->damage[repair->damage_count++] = line;
}

static bool is_blank(const char *start, const char *end)
{
    while (start < end && (*start == ' ' || *start == '\r' || *start == '\t'))
        start++;
    return start == end;
}

/* Blank the line of the failure, or the nearest above it that still holds something: an error is
   often noticed only behind the line that made it. */
static bool blank_failure(struct repair *repair, const struct parse_failure *failure)
{
    const char *start = repair->text, *end = repair->text + repair->length, *found = NULL;
    unsigned found_line = 0;
    for (unsigned line = 1; line <= failure->at.line && start < end; line++) {
        const char *stop = memchr(start, '\n', (size_t)(end - start));
        stop = stop ? stop : end;
        if (!is_blank(start, stop)) {
            found = start;
            found_line = line;
        }
        start = stop < end ? stop + 1 : end;
    }
    if (!found)
        return false;
    const char *stop = memchr(found, '\n', (size_t)(end - found));
    stop = stop ? stop : end;
    const char *from = found;
    if (failure->from_here && found_line == failure->at.line) {
        for (unsigned column = 1; column < failure->at.column && from < stop; column++)
            utf8_next(&from, stop);
        if (is_blank(from, stop))
            from = found;
    }
    blank(repair, (size_t)(from - repair->text), (size_t)(stop - repair->text), found_line);
    return true;
}

/* Tell and blank every bite up to the failure; false: there was none. */
static bool blank_bites(struct repair *repair, unsigned last_line)
{
    bool any = false;
    struct bite bite;
    struct bite_search search = {
        .arena = repair->arena, .length = repair->length, .from_line = 1, .last_line = last_line};
    while (repair->damage_count < DAMAGE_MAX) {
        search.text = repair->text; /* the copy, from the first repair on */
        if (!yaml_bite_find(&search, &bite))
            break;
        diagnostic_add(repair->diagnostics, repair->source, bite.at, DIAGNOSTIC_YAML_NOTATION,
                       bite.hint, "%s", bite.text);
        blank(repair, bite.blank_from, bite.blank_to, bite.at.line);
        any = true;
        search.from = bite.blank_to;
        while (search.from < search.length && repair->text[search.from++] != '\n')
            continue;
        search.from_line = bite.at.line + 1;
    }
    return any;
}

/* A line behind the reported one may be at fault: libyaml reads a line ahead. */
static bool mend(struct repair *repair, const struct parse_failure *failure)
{
    if (blank_bites(repair, failure->at.line))
        return true;
    diagnostic_add(repair->diagnostics, repair->source, failure->at, failure->code, failure->hint,
                   "%s", failure->text);
    return blank_failure(repair, failure);
}

static void take_told(struct repair *repair, const struct diagnostics *told)
{
    for (size_t i = 0; i < told->count; i++) {
        const struct diagnostic *item = &told->items[i];
        diagnostic_add(repair->diagnostics, repair->source, item->at, item->code, item->hint, "%s",
                       item->text);
    }
}

static struct node *parse_and_mend(struct repair *repair)
{
    size_t parsed = 0;
    for (int repairs = 0;; repairs++) {
        struct parse_result result =
            yaml_parse(repair->source, repair->text, repair->length, repair->arena);
        const struct parse_failure *failure = &result.failure;
        parsed += repair->length;
        if (!result.good && !failure->final && repairs < REPAIRS_MAX &&
            parsed <= PARSED_BYTES_MAX && mend(repair, failure))
            continue;
        take_told(repair, &result.told);
        if (result.good)
            return result.root;
        diagnostic_add(repair->diagnostics, repair->source, failure->at, failure->code,
                       failure->hint, "%s", failure->text);
        /* A whole document is there to be checked; anything else is a torso. */
        return failure->code == DIAGNOSTIC_YAML_SECOND_DOCUMENT ? result.root : NULL;
    }
}

static void mark_damage(const struct repair *repair, struct node *node)
{
    unsigned first = node->key ? node->key_at.line : node->at.line;
    bool here = false;
    for (size_t i = 0; i < repair->damage_count; i++)
        here |= repair->damage[i] >= first && repair->damage[i] < node->end_line;
    if (!here)
        return;
    node->damaged |= node->kind != NODE_SCALAR || node->length == 0;
    for (struct node *child = node->first; child; child = child->next)
        mark_damage(repair, child);
}

struct node *yaml_tree_read(const struct source *source, struct arena *arena,
                            struct diagnostics *diagnostics)
{
    struct buffer mended = {0};
    if (!yaml_text_check(source, diagnostics, &mended))
        return NULL;
    struct repair repair = {.source = source,
                            .arena = arena,
                            .diagnostics = diagnostics,
                            .text = source->text,
                            .length = source->length};
    if (mended.length) {
        repair.length = mended.length;
        repair.text = repair.copy = arena_text(arena, mended.data, mended.length);
    }
    buffer_release(&mended);
    if (repair.length >= 3 && memcmp(repair.text, "\xEF\xBB\xBF", 3) == 0) {
        repair.text += 3; /* byte order mark */
        repair.length -= 3;
        repair.copy = NULL;
    }
    struct node *root = parse_and_mend(&repair);
    if (root && repair.damage_count) {
        root->at.line = 1;
        mark_damage(&repair, root);
    }
    return root;
}

const struct node *node_child(const struct node *mapping, const char *key)
{
    if (!mapping || mapping->kind != NODE_MAPPING)
        return NULL;
    for (const struct node *child = mapping->first; child; child = child->next) {
        if (strcmp(child->key, key) == 0)
            return child;
    }
    return NULL;
}

bool node_is_empty(const struct node *node)
{
    return node->kind == NODE_SCALAR && node->length == 0;
}

/* Reads back as the same plain scalar, with nothing that YAML would take for its own. */
static bool is_plain(const char *text)
{
    size_t length = strlen(text);
    if (length == 0 || strchr(" -?:,[]{}#&*!|>'\"%@`=~", text[0]) || text[length - 1] == ' ' ||
        text[length - 1] == ':')
        return length > 1 && text[0] == '-' && text[1] != ' ' && !strstr(text, ": ") &&
               !strstr(text, " #") && text[length - 1] != ' ' && text[length - 1] != ':' &&
               strncmp(text, "---", 3) != 0;
    return !strstr(text, ": ") && !strstr(text, " #") && strncmp(text, "...", 3) != 0;
}

void yaml_scalar_write(struct buffer *buffer, const char *text, unsigned indent)
{
    if (strchr(text, '\n')) {
        buffer_text(buffer, text[0] == ' ' ? "|2" : "|");
        if (text[strlen(text) - 1] != '\n')
            buffer_byte(buffer, '-');
        buffer_byte(buffer, '\n');
        for (const char *line = text; *line;) {
            size_t length = strcspn(line, "\n");
            if (length)
                buffer_print(buffer, "%*s", (int)indent, "");
            buffer_append(buffer, line, length);
            buffer_byte(buffer, '\n');
            line += length + (line[length] == '\n');
        }
    } else if (is_plain(text)) {
        buffer_text(buffer, text);
    } else {
        buffer_byte(buffer, '\'');
        for (; *text; text++)
            buffer_print(buffer, *text == '\'' ? "''" : "%c", *text);
        buffer_byte(buffer, '\'');
    }
}
