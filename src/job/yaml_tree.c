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

/* ---- lines ---- */

/* A line that holds something: neither blank nor a comment. */
struct text_line {
    const char *start, *end; /* without the line end */
    unsigned number;         /* 0: there is none */
    size_t indent;
};

static struct text_line line_from(const char *start, const char *end, unsigned number)
{
    const char *stop = memchr(start, '\n', (size_t)(end - start));
    struct text_line line = {.start = start, .end = stop ? stop : end, .number = number};
    while (line.start + line.indent < line.end && line.start[line.indent] == ' ')
        line.indent++;
    return line;
}

static bool holds_something(const struct text_line *line)
{
    return !is_blank(line->start, line->end) && line->start[line->indent] != '#';
}

/* The next line below or above that holds something. */
static struct text_line line_below(const struct repair *repair, struct text_line line)
{
    const char *end = repair->text + repair->length;
    while (line.end < end) {
        line = line_from(line.end + 1, end, line.number + 1);
        if (holds_something(&line))
            return line;
    }
    return (struct text_line){0};
}

static struct text_line line_above(const struct repair *repair, struct text_line line)
{
    while (line.start > repair->text) {
        const char *start = line.start - 1;
        while (start > repair->text && start[-1] != '\n')
            start--;
        line = line_from(start, line.start - 1, line.number - 1);
        if (holds_something(&line))
            return line;
    }
    return (struct text_line){0};
}

static struct text_line line_of_number(const struct repair *repair, unsigned number)
{
    const char *end = repair->text + repair->length;
    struct text_line line = line_from(repair->text, end, 1);
    while (line.number < number && line.end < end)
        line = line_from(line.end + 1, end, line.number + 1);
    return line;
}

/* ---- repairs ---- */

/* Whether keys in this column went on up to the line. */
static bool column_was_open(const struct repair *repair, struct text_line line, size_t column)
{
    do
        line = line_above(repair, line);
    while (line.number && line.indent > column);
    return line.number && line.indent == column;
}

/* Which line to blame where one fits nothing above it: that line, or an earlier one that stands too
   far left, as a ref at the margin does, and so ended what the line would go on with. */
static struct text_line misplaced_line(const struct repair *repair, struct text_line line)
{
    struct text_line parent = line;
    do
        parent = line_above(repair, parent);
    while (parent.number && parent.indent >= line.indent);
    return parent.number && column_was_open(repair, parent, line.indent) ? parent : line;
}

/* `C14:` or, mistyped, `C14`: what is written deeper below it is its own. */
static bool is_key_alone(const struct text_line *line)
{
    const char *end = line->end;
    while (end > line->start && (end[-1] == '\r' || end[-1] == ' '))
        end--;
    const char *colon = memchr(line->start, ':', (size_t)(end - line->start));
    return line->start[line->indent] != '-' && (!colon || colon == end - 1);
}

static void blank_text(struct repair *repair, const struct text_line *line)
{
    blank(repair, (size_t)(line->start - repair->text), (size_t)(line->end - repair->text),
          line->number);
}

/* The line, and what is its own: what stands deeper than the line, and than `indent`. */
static void blank_record(struct repair *repair, unsigned number, size_t indent)
{
    struct text_line line = line_of_number(repair, number), below = line_below(repair, line);
    unsigned last = number;
    indent = indent > line.indent ? indent : line.indent;
    while (is_key_alone(&line) && below.number && below.indent > indent) {
        last = below.number;
        below = line_below(repair, below);
    }
    for (; number <= last; number++) {
        line = line_of_number(repair, number); /* anew: the text may have become a copy */
        blank_text(repair, &line);
    }
}

/* false: nothing stands in the line that libyaml complains of. */
static bool mend_indent(struct repair *repair, const struct parse_failure *failure)
{
    struct text_line line = line_of_number(repair, failure->at.line);
    if (line.number != failure->at.line || !holds_something(&line))
        return false;
    size_t indent = line.indent;
    line = misplaced_line(repair, line);
    diagnostic_add(repair->diagnostics, repair->source,
                   (struct position){line.number, (unsigned)line.indent + 1}, failure->code,
                   failure->hint, "%s", failure->text);
    blank_record(repair, line.number, indent);
    return true;
}

/* Blank the record of the failure, or the nearest line above that still holds something: an error
   is often noticed only behind the line that made it. */
static bool blank_failure(struct repair *repair, const struct parse_failure *failure)
{
    struct text_line line = line_of_number(repair, failure->at.line);
    if (!holds_something(&line))
        line = line_above(repair, line);
    if (!line.number)
        return false;
    const char *from = line.start;
    for (unsigned column = 1; failure->from_here && line.number == failure->at.line &&
                              column < failure->at.column && from < line.end;
         column++)
        utf8_next(&from, line.end);
    if (from == line.start || is_blank(from, line.end))
        blank_record(repair, line.number, 0);
    else
        blank(repair, (size_t)(from - repair->text), (size_t)(line.end - repair->text),
              line.number);
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
    if (failure->indent_wrong && mend_indent(repair, failure))
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
