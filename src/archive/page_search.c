/*
 * search.js, and search-data.js: the columns of jobs and parts as the search script reads them. A
 * page opened as a file may not fetch, but may load a script. Each column is its dictionary and one
 * string of codes, 0 to 3 letters each: a tenth of JSON's size, and parsed at the speed of copying.
 */
#include "archive/page_frame.h"
#include "archive/query.h"

#include "base/utf8.h"

#include <string.h>

/* Letters for the digits 0 to 90: from `#` on, without backslash and `<`. */
enum { CODE_BASE = 91, CODE_FIRST = '#', CODE_LETTERS_MAX = 5 };

static char letter_of(uint32_t digit)
{
    char letter = (char)(CODE_FIRST + digit);
    return letter == '\\' ? '!' : letter == '<' ? '~' : letter;
}

/* A string for JavaScript that nothing around it can take for its end: no `<`, no line separators.
 */
static void write_string(struct buffer *out, const char *text)
{
    buffer_byte(out, '"');
    for (const char *end = text + strlen(text); text < end;) {
        const char *start = text;
        uint32_t code = utf8_next(&text, end);
        if (code < 0x20 || code == '"' || code == '\\' || code == '<' || code == '>' ||
            code == '&' || code == 0x7F || code == 0x2028 || code == 0x2029) {
            buffer_text(out, "\\u");
            buffer_hex(out, code, 4);
        } else if (code == UTF8_ILL_FORMED) {
            utf8_append(out, 0xFFFD);
        } else {
            buffer_append(out, start, (size_t)(text - start));
        }
    }
    buffer_byte(out, '"');
}

/* None for a column that says one thing everywhere: its codes take no room. */
static unsigned letters_for(uint32_t count)
{
    unsigned letters = 0;
    for (uint64_t reach = 1; reach < count; reach *= CODE_BASE)
        letters++;
    return letters;
}

static void write_codes(struct buffer *out, const uint32_t *codes, size_t count, unsigned letters)
{
    buffer_reserve(out, count * letters + 2);
    char *at = out->data + out->length;
    *at++ = '"';
    for (size_t i = 0; i < count; i++) {
        uint32_t code = codes[i];
        for (unsigned place = letters; place > 0; place--, code /= CODE_BASE)
            at[place - 1] = letter_of(code % CODE_BASE);
        at += letters;
    }
    *at++ = '"';
    out->length = (size_t)(at - out->data);
}

static void write_column(struct buffer *out, const char *key, const struct column_data *column)
{
    unsigned letters = letters_for(column->dictionary.count);
    buffer_print(out, "\n\"%s\":{\"letters\":%u,\"texts\":[", key, letters);
    for (uint32_t code = 0; code < column->dictionary.count; code++) {
        if (code)
            buffer_byte(out, ',');
        write_string(out, column->dictionary.entries[code].text);
    }
    buffer_text(out, "],\"codes\":");
    write_codes(out, column->codes, column->count, letters);
    buffer_byte(out, '}');
}

static void write_columns(struct buffer *out, const struct column_data *group,
                          const char *const *keys)
{
    for (size_t i = 0; keys[i]; i++) {
        if (i)
            buffer_byte(out, ',');
        write_column(out, keys[i], &group[i]);
    }
}

/* How many parts each job has, in order. */
static void write_part_counts(struct buffer *out, const struct columns *columns)
{
    size_t part = 0;
    for (size_t job = 0; job < columns->job_count; job++) {
        size_t start = part;
        while (part < columns->part_count && columns->part_job.codes[part] == job)
            part++;
        if (job)
            buffer_byte(out, ',');
        buffer_decimal(out, (long long)(part - start));
    }
}

/* Where words are looked for, and which keys are met whole: the rules of find. */
static void write_rules(struct buffer *out)
{
    buffer_text(out, ",\n\"jobWords\":[");
    for (size_t i = 0; query_job_words[i] != JOB_COLUMN_COUNT; i++)
        buffer_print(out, "%s\"%s\"", i ? "," : "", job_column_keys[query_job_words[i]]);
    buffer_text(out, "],\"partWords\":[");
    for (size_t i = 0; query_part_words[i] != PART_COLUMN_COUNT; i++)
        buffer_print(out, "%s\"%s\"", i ? "," : "", part_column_keys[query_part_words[i]]);
    buffer_text(out, "],\"exact\":[");
    for (size_t i = 0; query_exact_keys[i]; i++)
        buffer_print(out, "%s\"%s\"", i ? "," : "", query_exact_keys[i]);
    buffer_byte(out, ']');
}

enum file_status page_search_write(struct page_frame *frame)
{
    const struct columns *columns = frame->columns;
    const char *script = templates_text(frame->archive->templates, "search.js", frame->diagnostics);
    struct buffer data = {0}, code = {0};
    buffer_text(&data, "var gridleakArchive={\"jobs\":{");
    write_columns(&data, columns->jobs, job_column_keys);
    buffer_text(&data, "},\n\"parts\":{");
    write_columns(&data, columns->parts, part_column_keys);
    buffer_text(&data, "},\n\"partCounts\":[");
    write_part_counts(&data, columns);
    buffer_byte(&data, ']');
    write_rules(&data);
    buffer_text(&data, "};\n");
    buffer_text(&code, script ? script : "");
    enum file_status status = page_write_file(frame, "search-data.js", &data);
    if (status == FILE_OK)
        status = page_write_file(frame, "search.js", &code);
    buffer_release(&data);
    buffer_release(&code);
    return status;
}
