#include "job/schema.h"

#include "job/field.h"

#include <string.h>

struct schema {
    struct buffer *out;
    unsigned indent;
};

static void string_write(struct buffer *out, const char *text)
{
    buffer_byte(out, '"');
    for (; *text; text++) {
        if (*text == '"' || *text == '\\')
            buffer_byte(out, '\\');
        buffer_byte(out, *text);
    }
    buffer_byte(out, '"');
}

static void line_begin(struct schema *schema, bool first)
{
    buffer_text(schema->out, first ? "\n" : ",\n");
    buffer_print(schema->out, "%*s", (int)schema->indent, "");
}

static void key_write(struct schema *schema, bool first, const char *key)
{
    line_begin(schema, first);
    string_write(schema->out, key);
    buffer_text(schema->out, ": ");
}

static void open(struct schema *schema)
{
    buffer_byte(schema->out, '{');
    schema->indent += 2;
}

static void close(struct schema *schema)
{
    schema->indent -= 2;
    line_begin(schema, true);
    buffer_byte(schema->out, '}');
}

static const char scalar_types[] = "[\"string\", \"number\", \"boolean\"]";

static void choices_write(struct schema *schema, const struct field *field)
{
    bool first = true;
    key_write(schema, false, "enum");
    buffer_byte(schema->out, '[');
    if (!field->choices) /* yes and no are booleans to many editors */
        buffer_text(schema->out, "\"yes\", \"no\", true, false");
    for (const char *const *choice = field->choices; choice && *choice; choice++) {
        if (!**choice)
            continue;
        buffer_text(schema->out, first ? "" : ", ");
        string_write(schema->out, *choice);
        first = false;
    }
    buffer_byte(schema->out, ']');
}

static void example_write(struct schema *schema, const char *example)
{
    key_write(schema, false, "examples");
    buffer_byte(schema->out, '[');
    string_write(schema->out, example);
    buffer_byte(schema->out, ']');
}

static void description_write(struct schema *schema, const struct field *field)
{
    struct buffer text = {0};
    buffer_text(&text, field->text);
    bool has_unit = field->kind == FIELD_QUANTITY || field->kind == FIELD_NUMBER ||
                    field->kind == FIELD_RESISTANCE || field->kind == FIELD_FRACTION;
    if (has_unit)
        buffer_print(&text, " (%s)", field_value_text(field));
    key_write(schema, false, "description");
    string_write(schema->out, buffer_string(&text));
    buffer_release(&text);
}

static void scalar_write(struct schema *schema, const struct field *field)
{
    key_write(schema, true, "type");
    buffer_text(schema->out, scalar_types);
    description_write(schema, field);
    if (field->kind == FIELD_CHOICE || field->kind == FIELD_FLAG)
        choices_write(schema, field);
    if (field->example)
        example_write(schema, field->example);
}

static void record_write(struct schema *schema, const struct record *record);

/* The items of a table or list. */
static void items_write(struct schema *schema, const struct record *record)
{
    open(schema);
    if (record->fields) {
        record_write(schema, record);
    } else {
        key_write(schema, true, "type");
        buffer_text(schema->out, scalar_types);
        example_write(schema, record->example);
    }
    close(schema);
}

static void lines_write(struct schema *schema, const struct field *field)
{
    key_write(schema, true, "anyOf");
    buffer_print(schema->out, "[{\"type\": %s}, {\"type\": \"array\", \"items\": {\"type\": %s}}]",
                 scalar_types, scalar_types);
    description_write(schema, field);
    if (field->example)
        example_write(schema, field->example);
}

static void compound_write(struct schema *schema, const struct field *field, const char *type,
                           const char *items)
{
    key_write(schema, true, "type");
    string_write(schema->out, type);
    description_write(schema, field);
    key_write(schema, false, items);
    if (field->record)
        items_write(schema, field->record);
    else
        buffer_print(schema->out, "{\"type\": %s}", scalar_types);
}

static void field_write(struct schema *schema, const struct field *field)
{
    open(schema);
    switch (field->kind) {
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
        scalar_write(schema, field);
        break;
    case FIELD_LINES:
        lines_write(schema, field);
        break;
    case FIELD_FREE:
    case FIELD_TABLE:
        compound_write(schema, field, "object", "additionalProperties");
        break;
    case FIELD_LIST:
        compound_write(schema, field, "array", "items");
        break;
    case FIELD_RECORD:
        record_write(schema, field->record);
        break;
    }
    close(schema);
}

static void record_write(struct schema *schema, const struct record *record)
{
    bool first = true;
    key_write(schema, true, "type");
    buffer_text(schema->out, "\"object\"");
    key_write(schema, false, "description");
    string_write(schema->out, record->text);
    key_write(schema, false, "properties");
    open(schema);
    for (size_t i = 0; i < record->field_count; i++) {
        key_write(schema, i == 0, record->fields[i].key);
        field_write(schema, &record->fields[i]);
    }
    close(schema);
    for (size_t i = 0; i < record->field_count; i++) {
        if (!record->fields[i].required)
            continue;
        if (first)
            key_write(schema, false, "required");
        buffer_text(schema->out, first ? "[" : ", ");
        string_write(schema->out, record->fields[i].key);
        first = false;
    }
    buffer_text(schema->out, first ? "" : "]");
    key_write(schema, false, "additionalProperties");
    buffer_text(schema->out, "false");
}

void schema_write(struct buffer *buffer)
{
    struct schema schema = {buffer, 0};
    open(&schema);
    key_write(&schema, true, "$schema");
    string_write(buffer, "http://json-schema.org/draft-07/schema#");
    key_write(&schema, false, "title");
    string_write(buffer, "gridleak job file");
    buffer_byte(buffer, ',');
    record_write(&schema, &job_record);
    close(&schema);
    buffer_byte(buffer, '\n');
}
