#include "job/manual.h"

#include "job/field.h"
#include "job/place_needs.h"

#include <string.h>

enum { WIDTH = 80, KEY_WIDTH = 20 };

/* Words laid into lines of WIDTH, each indented. */
struct wrap {
    struct buffer *out;
    unsigned indent;
    size_t column; /* where the next word would begin; 0: at the start of a line */
};

static void wrap_words(struct wrap *wrap, const char *text)
{
    while (*text) {
        text += strspn(text, " ");
        size_t length = strcspn(text, " ");
        if (!length)
            return;
        if (wrap->column > wrap->indent && wrap->column + 1 + length > WIDTH) {
            buffer_byte(wrap->out, '\n');
            wrap->column = 0;
        }
        if (wrap->column == 0) {
            buffer_print(wrap->out, "%*s", (int)wrap->indent, "");
            wrap->column = wrap->indent;
        } else if (wrap->column > wrap->indent) {
            buffer_byte(wrap->out, ' ');
            wrap->column++;
        }
        buffer_append(wrap->out, text, length);
        wrap->column += length;
        text += length;
    }
}

static void wrap_end(struct wrap *wrap)
{
    buffer_byte(wrap->out, '\n');
    wrap->column = 0;
}

/* What the value is: choices, unit, form. */
static void value_text(struct buffer *out, const struct field *field)
{
    bool first = true;
    if (!field->choices) {
        buffer_text(out, field_value_text(field));
        if (field->record)
            buffer_print(out, ": see %s", field->record->section);
        return;
    }
    buffer_text(out, "one of: ");
    for (const char *const *choice = field->choices; *choice; choice++) {
        if (!**choice)
            continue;
        buffer_print(out, "%s%s", first ? "" : ", ", *choice);
        first = false;
    }
}

static void example_text(struct buffer *out, const struct field *field)
{
    switch (field->kind) {
    case FIELD_LINES:
        buffer_print(out, "- %s", field->example);
        return;
    case FIELD_FREE:
        buffer_text(out, field->example);
        return;
    case FIELD_TABLE:
    case FIELD_LIST:
    case FIELD_RECORD:
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
        buffer_print(out, "%s: ", field->key);
        yaml_scalar_write(out, field->example, 2);
    }
}

/* ---- plain ---- */

static void field_plain(struct buffer *out, const struct field *field)
{
    struct buffer text = {0};
    struct wrap wrap = {out, KEY_WIDTH, 0};
    bool is_long = strlen(field->key) > KEY_WIDTH - 3;
    if (is_long)
        buffer_print(out, "  %s\n", field->key);
    else
        buffer_print(out, "  %-*s", KEY_WIDTH - 2, field->key);
    wrap.column = is_long ? 0 : KEY_WIDTH;
    buffer_print(&text, "%s%s", field->text, field->required ? " (required)" : "");
    wrap_words(&wrap, buffer_string(&text));
    wrap_end(&wrap);
    buffer_clear(&text);
    value_text(&text, field);
    wrap_words(&wrap, buffer_string(&text));
    wrap_end(&wrap);
    buffer_clear(&text);
    example_text(&text, field);
    if (text.length) {
        wrap.indent += 2;
        wrap_words(&wrap, buffer_string(&text));
        wrap_end(&wrap);
    }
    buffer_release(&text);
}

static void places_plain(struct buffer *out)
{
    buffer_text(out, "\n  What a place needs, once there is a reading:\n");
    for (int place = PLACE_UNKNOWN + 1; place < PLACE_COUNT; place++)
        buffer_print(out, "    %-18s %s\n", place_text((enum place)place),
                     place_needs_text((enum place)place));
}

static void record_plain(struct buffer *out, const struct record *record)
{
    struct wrap wrap = {out, 2, 0};
    buffer_print(out, "%s%s\n", out->length ? "\n" : "", record->section);
    wrap_words(&wrap, record->text);
    wrap_end(&wrap);
    if (record->keyed)
        buffer_print(out, "\n  %s:%s%s\n", record->key_example, record->example ? " " : "",
                     record->example ? record->example : "");
    for (size_t i = 0; i < record->field_count; i++) {
        buffer_byte(out, '\n');
        field_plain(out, &record->fields[i]);
    }
    if (strcmp(record->section, "capacitors") == 0)
        places_plain(out);
}

/* ---- Markdown ---- */

static void field_markdown(struct buffer *out, const struct field *field)
{
    struct buffer example = {0};
    buffer_print(out, "- `%s`: %s%s; ", field->key, field->text,
                 field->required ? " (required)" : "");
    value_text(out, field);
    example_text(&example, field);
    if (example.length)
        buffer_print(out, ". `%s`", buffer_string(&example));
    buffer_byte(out, '\n');
    buffer_release(&example);
}

static void record_markdown(struct buffer *out, const struct record *record)
{
    buffer_print(out, "%s## %s\n\n%s\n\n", out->length ? "\n" : "", record->section, record->text);
    if (record->keyed)
        buffer_print(out, "`%s:%s%s`\n\n", record->key_example, record->example ? " " : "",
                     record->example ? record->example : "");
    for (size_t i = 0; i < record->field_count; i++)
        field_markdown(out, &record->fields[i]);
    if (strcmp(record->section, "capacitors") != 0)
        return;
    buffer_text(out, "\nWhat a place needs, once there is a reading:\n\n");
    for (int place = PLACE_UNKNOWN + 1; place < PLACE_COUNT; place++)
        buffer_print(out, "- `%s`: %s\n", place_text((enum place)place),
                     place_needs_text((enum place)place));
}

/* ---- all records, each before those below it ---- */

static void walk(struct buffer *out, const struct record *record,
                 void write(struct buffer *, const struct record *))
{
    write(out, record);
    for (size_t i = 0; i < record->field_count; i++) {
        if (record->fields[i].record)
            walk(out, record->fields[i].record, write);
    }
}

static void all(struct buffer *buffer, void write(struct buffer *, const struct record *))
{
    struct buffer out = {0};
    walk(&out, &job_record, write);
    walk(&out, &shop_record, write);
    buffer_append(buffer, out.data, out.length);
    buffer_release(&out);
}

void manual_write(struct buffer *buffer)
{
    all(buffer, record_plain);
}

void manual_write_markdown(struct buffer *buffer)
{
    all(buffer, record_markdown);
}
