#include "job/manual.h"

#include "job/field.h"
#include "job/place_needs.h"

#include <string.h>

enum { WIDTH = 80, MEANING_COLUMN = 34 };

/* Words laid into lines of WIDTH, each indented. */
struct wrap {
    struct buffer *out;
    unsigned indent;
    size_t column; /* where the next word would begin; 0: at the start of a line */
    unsigned hang; /* further in from the second line on: a value goes on deeper than its key */
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
            wrap->indent += wrap->hang;
            wrap->hang = 0;
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

/* Behind the words: the choices, or where the keys below it stand. */
static void takes_text(struct buffer *out, const struct field *field)
{
    if (field->choices) {
        const char *between = ": ";
        for (const char *const *choice = field->choices; *choice; choice++)
            if (**choice) {
                buffer_print(out, "%s%s", between, *choice);
                between = ", ";
            }
        return;
    }
    if (field->kind == FIELD_RESISTANCE)
        buffer_text(out, "; or the ref of a listed resistor or winding");
    if (field->record && strcmp(field->record->section, field->key) != 0)
        buffer_print(out, ": %s", field->record->section);
}

/* The key as typed, with its example where one line holds it. */
static void typed_text(struct buffer *out, const struct field *field)
{
    buffer_print(out, "%s:%s", field->key, field->record ? " ..." : "");
    if (field->record || field->kind == FIELD_LINES || field->kind == FIELD_FREE)
        return;
    buffer_byte(out, ' ');
    yaml_scalar_write(out, field->example, 2);
}

/* What is typed on the lines below the key. */
static void below_text(struct buffer *out, const struct field *field, unsigned indent)
{
    if (field->kind == FIELD_LINES || field->kind == FIELD_FREE)
        buffer_print(out, "%*s%s%s\n", (int)indent + 2, "", field->kind == FIELD_LINES ? "- " : "",
                     field->example);
}

static void field_write(struct buffer *out, const struct field *field, unsigned indent)
{
    struct buffer text = {0};
    typed_text(&text, field);
    bool fits = indent + text.length <= MEANING_COLUMN - 2;
    struct wrap typed = {out, indent, 0, 2};
    wrap_words(&typed, buffer_string(&text));
    if (fits)
        buffer_print(out, "%*s", (int)(MEANING_COLUMN - typed.column), "");
    else
        wrap_end(&typed);
    buffer_clear(&text);
    buffer_print(&text, "%s%s", field->text, field->required ? " (required)" : "");
    takes_text(&text, field);
    struct wrap meaning = {out, MEANING_COLUMN, fits ? MEANING_COLUMN : 0, 0};
    wrap_words(&meaning, buffer_string(&text));
    wrap_end(&meaning);
    below_text(out, field, indent);
    buffer_release(&text);
}

static void places_write(struct buffer *out)
{
    buffer_text(out,
                "\nplaces\n  What a capacitor needs there, once there is a reading or the sheet "
                "is to give\n  a limit.\n\n");
    for (int place = PLACE_UNKNOWN + 1; place < PLACE_COUNT; place++)
        buffer_print(out, "  %-*s%s\n", MEANING_COLUMN - 2, place_text((enum place)place),
                     place_needs_text((enum place)place));
}

static void record_write(struct buffer *out, const struct record *record)
{
    struct wrap wrap = {out, 2, 0, 0};
    buffer_print(out, "\n%s\n", record->section);
    wrap_words(&wrap, record->text);
    wrap_end(&wrap);
    buffer_byte(out, '\n');
    if (record->keyed)
        buffer_print(out, "  %s:%s%s\n", record->key_example, record->example ? " " : "",
                     record->example ? record->example : "");
    for (size_t i = 0; i < record->field_count; i++)
        field_write(out, &record->fields[i], record->keyed ? 4 : 2);
    if (strcmp(record->section, "capacitors") == 0)
        places_write(out);
}

/* Each before those below it. */
static void walk(struct buffer *out, const struct record *record)
{
    record_write(out, record);
    for (size_t i = 0; i < record->field_count; i++)
        if (record->fields[i].record)
            walk(out, record->fields[i].record);
}

void manual_write(struct buffer *buffer)
{
    buffer_text(buffer,
                "Every key as typed, with an example, and what it is. What is not (required) may\n"
                "be left out. ... stands for keys of its own, in the section of that name below.\n"
                "Values are written as the trade does: 0.05 uF, .05mfd, 4n7, 470k, 0.5 meg,\n"
                "2.4 uA, 220 M, 19 C, 5 min, 465 kc/s; off scale: over 2000 M. Text of any length\n"
                "stands behind |, on lines of its own below the key.\n");
    walk(buffer, &job_record);
    walk(buffer, &shop_record);
}
