#include "job/start.h"

#include "job/field.h"
#include "job/yaml_tree.h"

#include <string.h>

enum { COMMENT_COLUMN = 33, COMMENT_WIDTH = 100 };

/* Lines of the new file; `comment` puts them behind a #. */
struct draft {
    struct buffer *out;
    unsigned indent;
    bool comment;
    bool bare; /* among parts that are kept: blank keys without a comment, which one has read */
};

static void line_begin(const struct draft *draft)
{
    buffer_print(draft->out, "%s%*s", draft->comment ? "# " : "", (int)draft->indent, "");
}

/* ---- comments ---- */

static void choices_text(struct buffer *text, const struct field *field)
{
    for (const char *const *choice = field->choices; *choice; choice++) {
        if (**choice)
            buffer_print(text, "%s%s", text->length ? " | " : "", *choice);
    }
}

/* `key:` padded, and behind it what may stand there. */
static void blank_write(const struct draft *draft, const struct field *field)
{
    struct buffer text = {0};
    size_t start = draft->out->length;
    line_begin(draft);
    buffer_print(draft->out, "%s:", field->key);
    if (field->choices)
        choices_text(&text, field);
    if (!text.length || text.length > COMMENT_WIDTH - COMMENT_COLUMN) {
        buffer_clear(&text);
        buffer_print(&text, "%s", field->text);
    }
    size_t width = draft->out->length - start;
    if (!draft->bare && text.length <= COMMENT_WIDTH - COMMENT_COLUMN)
        buffer_print(draft->out, "%*s# %s",
                     width < COMMENT_COLUMN ? (int)(COMMENT_COLUMN - width) : 2, "",
                     buffer_string(&text));
    buffer_byte(draft->out, '\n');
    buffer_release(&text);
}

/* ---- examples, in comments ---- */

static void example_write(struct draft draft, const struct field *field);

static void example_record(struct draft draft, const struct record *record, bool in_list)
{
    bool first = true;
    for (size_t i = 0; i < record->field_count; i++) {
        const struct field *field = &record->fields[i];
        bool shown = field->start != START_OMIT || field->required || in_list;
        if (!shown || !field->example)
            continue;
        struct draft item = draft;
        if (in_list && first) {
            item.indent -= 2;
            line_begin(&item);
            buffer_text(item.out, "- ");
            item.comment = false;
            item.indent = 0;
        }
        example_write(item, field);
        first = false;
    }
}

static void example_lines(struct draft draft, const struct field *field)
{
    struct draft below = draft;
    below.indent += 2;
    switch (field->kind) {
    case FIELD_LINES:
        line_begin(&below);
        buffer_print(draft.out, "- %s\n", field->example);
        return;
    case FIELD_FREE:
        line_begin(&below);
        buffer_print(draft.out, "%s\n", field->example);
        return;
    case FIELD_TABLE:
        line_begin(&below);
        buffer_print(draft.out, "%s:%s%s\n", field->record->key_example,
                     field->record->example ? " " : "",
                     field->record->example ? field->record->example : "");
        below.indent += 2;
        example_record(below, field->record, false);
        return;
    case FIELD_LIST:
        below.indent += 2;
        example_record(below, field->record, true);
        return;
    case FIELD_RECORD:
        example_record(below, field->record, false);
        return;
    case FIELD_TEXT:
    case FIELD_PROSE:
    case FIELD_CHOICE:
    case FIELD_FLAG:
    case FIELD_WHOLE:
    case FIELD_QUANTITY:
    case FIELD_NUMBER:
    case FIELD_FRACTION:
    case FIELD_RESISTANCE:
    case FIELD_DATE:
    case FIELD_YEARS:
    case FIELD_SIZE:
    case FIELD_LINE:
        return;
    }
}

static bool is_compound(const struct field *field)
{
    return field->kind >= FIELD_LINES;
}

static void example_write(struct draft draft, const struct field *field)
{
    line_begin(&draft);
    buffer_print(draft.out, "%s:", field->key);
    if (is_compound(field)) {
        buffer_byte(draft.out, '\n');
        example_lines(draft, field);
        return;
    }
    buffer_byte(draft.out, ' ');
    yaml_scalar_write(draft.out, field->example, draft.indent + 2);
    buffer_byte(draft.out, '\n');
}

/* ---- what is kept of another job ---- */

static void node_write(struct draft draft, const struct node *node)
{
    line_begin(&draft);
    if (node->key)
        yaml_scalar_write(draft.out, node->key, 0);
    buffer_text(draft.out, node->key ? ":" : "-");
    if (node->kind == NODE_SCALAR) {
        buffer_byte(draft.out, ' ');
        yaml_scalar_write(draft.out, node->text, draft.indent + 2);
        if (!strchr(node->text, '\n'))
            buffer_byte(draft.out, '\n');
        return;
    }
    buffer_byte(draft.out, '\n');
    draft.indent += 2;
    for (const struct node *child = node->first; child; child = child->next)
        node_write(draft, child);
}

static void record_write(struct draft draft, const struct record *record, const struct node *like);

/* `V4 anode: sheet 248 V, found 255 V`: what the chassis' sheet says, without the readings. */
static void line_without_readings(struct draft draft, const struct node *node)
{
    struct buffer kept = {0};
    for (const char *at = node->text; *at;) {
        const char *comma = strstr(at, ", ");
        size_t length = comma ? (size_t)(comma - at) : strlen(at);
        if (strncmp(at, "found ", 6) != 0 && strncmp(at, "left ", 5) != 0) {
            buffer_text(&kept, kept.length ? ", " : "");
            buffer_append(&kept, at, length);
        }
        at += length + (comma ? 2 : 0);
    }
    line_begin(&draft);
    yaml_scalar_write(draft.out, node->key, 0);
    buffer_text(draft.out, ": ");
    yaml_scalar_write(draft.out, buffer_string(&kept), draft.indent + 2);
    buffer_byte(draft.out, '\n');
    buffer_release(&kept);
}

static void table_write(struct draft draft, const struct field *field, const struct node *like)
{
    line_begin(&draft);
    buffer_print(draft.out, "%s:\n", field->key);
    draft.indent += 2;
    for (const struct node *child = like->first; child; child = child->next) {
        if (!field->record->fields) { /* one line an entry; anything else there was a mistake */
            if (child->kind == NODE_SCALAR)
                line_without_readings(draft, child);
            continue;
        }
        line_begin(&draft);
        yaml_scalar_write(draft.out, child->key, 0);
        buffer_text(draft.out, ":\n");
        struct draft below = draft;
        below.indent += 2;
        below.bare = true;
        record_write(below, field->record, child);
    }
}

/* ---- fields ---- */

static void field_write(struct draft draft, const struct field *field, const struct node *like)
{
    bool kept = field->chassis && like && !node_is_empty(like);
    if (kept && field->kind == FIELD_TABLE && like->kind == NODE_MAPPING) {
        table_write(draft, field, like);
    } else if (field->kind == FIELD_RECORD && (kept || field->start == START_BLANK)) {
        line_begin(&draft);
        buffer_print(draft.out, "%s:\n", field->key);
        draft.indent += 2;
        record_write(draft, field->record, like);
    } else if (kept) {
        node_write(draft, like);
    } else if (field->kind == FIELD_TABLE && field->start == START_BLANK) {
        line_begin(&draft);
        buffer_print(draft.out, "%s:\n", field->key);
        draft.comment = true;
        example_lines(draft, field);
    } else if (field->start == START_BLANK) {
        blank_write(&draft, field);
    } else if (field->start == START_EXAMPLE) {
        draft.comment = true;
        example_write(draft, field);
    }
}

/* Of a part that is kept only its own blanks are asked for, not every fact it might have. */
static void record_write(struct draft draft, const struct record *record, const struct node *like)
{
    for (size_t i = 0; record->fields && i < record->field_count; i++) {
        const struct field *field = &record->fields[i];
        const struct node *child = like ? node_child(like, field->key) : NULL;
        bool absent = record->keyed && field->chassis && (!child || node_is_empty(child));
        if (!absent && !(record->keyed && field->start == START_EXAMPLE && !field->chassis))
            field_write(draft, field, child);
    }
}

static const char advice[] =
    "## Lines behind one # are examples: take the # and its blank away to use one. Empty keys may\n"
    "## stay. `gridleak fields` has every key, and what each place needs.\n";

void start_write(struct buffer *buffer, const struct start *start, struct arena *arena,
                 struct diagnostics *diagnostics)
{
    const struct node *like = start->like ? yaml_tree_read(start->like, arena, diagnostics) : NULL;
    struct draft draft = {0};
    bool after_block = false;
    for (size_t i = 0; i < job_record.field_count; i++) {
        const struct field *field = &job_record.fields[i];
        struct buffer text = {0};
        draft.out = &text;
        if (strcmp(field->key, "job") == 0)
            buffer_print(&text, "job: %s\n%s", start->number, advice);
        else if (strcmp(field->key, "received") == 0 && start->received)
            buffer_print(&text, "received: %s\n", start->received);
        else
            field_write(draft, field, like ? node_child(like, field->key) : NULL);
        bool block = field->record != NULL;
        if (text.length) {
            buffer_text(buffer, block || after_block ? "\n" : "");
            buffer_append(buffer, text.data, text.length);
            after_block = block;
        }
        buffer_release(&text);
    }
}
