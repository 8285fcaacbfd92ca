#include "job/yaml_text.h"

#include "base/utf8.h"
#include "job/job.h"

#include <string.h>

enum { SHOWN_MAX = 10 }; /* invisible characters: more of the same helps nobody */

struct check {
    const struct source *source;
    struct diagnostics *diagnostics;
    struct buffer *mended;
    const char *copied; /* how far the text has gone to `mended` */
    struct position at;
    struct position first_foreign;
    unsigned char first_foreign_byte;
    unsigned foreign, control;
};

/* Everything up to `cursor` goes over as it is; what stands there is replaced by code_point. */
static void mend(struct check *check, const char *cursor, size_t length, uint32_t code_point)
{
    buffer_append(check->mended, check->copied, (size_t)(cursor - check->copied));
    utf8_append(check->mended, code_point);
    check->copied = cursor + length;
}

static void note_foreign(struct check *check, unsigned char byte)
{
    if (check->foreign++ > 0)
        return;
    check->first_foreign = check->at;
    check->first_foreign_byte = byte;
}

/* One mistake, however many bytes show it: the file was saved in another coding. */
static void tell_foreign(const struct check *check)
{
    unsigned char byte = check->first_foreign_byte;
    struct buffer shown = {0};
    if (byte >= 0xA0)
        utf8_append(&shown, byte);
    if (check->foreign > 1)
        buffer_print(&shown, byte >= 0xA0 ? ", and %u more" : "%u more", check->foreign - 1);
    diagnostic_add(check->diagnostics, check->source, check->first_foreign, DIAGNOSTIC_NOT_UTF8,
                   "save the file as UTF-8",
                   byte >= 0xA0         ? "0x%02X: this file looks like Latin-1 (%s)"
                   : check->foreign > 1 ? "0x%02X: this byte is not UTF-8, and %s"
                                        : "0x%02X: this byte is not UTF-8%s",
                   byte, buffer_string(&shown));
    buffer_release(&shown);
}

static void tell_control(struct check *check, uint32_t code_point)
{
    if (++check->control > SHOWN_MAX)
        return;
    diagnostic_add(check->diagnostics, check->source, check->at, DIAGNOSTIC_CONTROL_CHARACTER,
                   code_point == '\r' ? "end every line with a line feed" : "delete it",
                   "invisible character U+%04X", (unsigned)code_point);
}

/* Control characters, signs that turn the direction of writing, and line ends that only YAML
   counts as such: none of them is seen on a screen, all of them change what a record says. */
static bool is_refused(uint32_t code_point)
{
    return (code_point >= 0x7F && code_point < 0xA0) || code_point == 0x2028 ||
           code_point == 0x2029 || (code_point >= 0x202A && code_point <= 0x202E) ||
           (code_point >= 0x2066 && code_point <= 0x2069) || code_point == 0xFEFF ||
           (code_point & 0xFFFE) == 0xFFFE;
}

/* One character that is not plain printable ASCII; gives the byte behind it. */
static const char *check_character(struct check *check, const char *cursor, const char *end)
{
    unsigned char byte = (unsigned char)*cursor;
    if (byte < 0x20) {
        if (byte == '\t' || (byte == '\r' && cursor + 1 < end && cursor[1] == '\n'))
            return cursor + 1;
        tell_control(check, byte);
        mend(check, cursor, 1, ' ');
        return cursor + 1;
    }
    const char *next = cursor;
    uint32_t code_point = utf8_next(&next, end);
    if (code_point == UTF8_ILL_FORMED) {
        note_foreign(check, byte);
        mend(check, cursor, 1, byte >= 0xA0 ? byte : '?');
    } else if (is_refused(code_point)) {
        tell_control(check, code_point);
        mend(check, cursor, (size_t)(next - cursor), ' ');
    }
    return next;
}

static void tell_the_rest(const struct check *check)
{
    if (check->foreign)
        tell_foreign(check);
    if (check->control > SHOWN_MAX)
        diagnostic_add(check->diagnostics, check->source, (struct position){0},
                       DIAGNOSTIC_CONTROL_CHARACTER, NULL, "and %u more invisible characters",
                       check->control - SHOWN_MAX);
}

static bool is_text_at_all(const struct source *source, struct diagnostics *diagnostics)
{
    struct position whole = {0};
    if (!source->text) {
        diagnostic_add(diagnostics, source, whole, DIAGNOSTIC_FILE_UNREADABLE, NULL,
                       "cannot be read");
        return false;
    }
    if (source->length > JOB_BYTES_MAX) {
        diagnostic_add(diagnostics, source, whole, DIAGNOSTIC_FILE_TOO_LARGE, NULL,
                       "%zu bytes, more than the %d that a job may have", source->length,
                       JOB_BYTES_MAX);
        return false;
    }
    if (source->length == 0) {
        diagnostic_add(diagnostics, source, whole, DIAGNOSTIC_FILE_EMPTY,
                       "gridleak start makes a new job", "the file is empty");
        return false;
    }
    if (memchr(source->text, '\0', source->length)) {
        diagnostic_add(diagnostics, source, whole, DIAGNOSTIC_NOT_UTF8, "save the file as UTF-8",
                       "the file holds NUL bytes: UTF-16, or no text at all");
        return false;
    }
    if (memchr(source->text, '\r', source->length) && !memchr(source->text, '\n', source->length)) {
        diagnostic_add(diagnostics, source, whole, DIAGNOSTIC_CONTROL_CHARACTER,
                       "save the file with the line ends of Unix or Windows",
                       "its lines end in a carriage return alone");
        return false;
    }
    return true;
}

bool yaml_text_check(const struct source *source, struct diagnostics *diagnostics,
                     struct buffer *mended)
{
    if (!is_text_at_all(source, diagnostics))
        return false;
    struct check check = {.source = source,
                          .diagnostics = diagnostics,
                          .mended = mended,
                          .copied = source->text,
                          .at = {1, 1}};
    const char *cursor = source->text, *end = source->text + source->length;
    if (source->length >= 3 && memcmp(cursor, "\xEF\xBB\xBF", 3) == 0)
        cursor += 3; /* the byte order mark that some editors write */
    while (cursor < end) {
        unsigned char byte = (unsigned char)*cursor;
        if (byte == '\n') {
            check.at.line++;
            check.at.column = 0;
            cursor++;
        } else if (byte >= 0x20 && byte < 0x7F) {
            cursor++;
        } else {
            cursor = check_character(&check, cursor, end);
        }
        check.at.column++;
    }
    tell_the_rest(&check);
    if (check.copied != source->text)
        buffer_append(mended, check.copied, (size_t)(end - check.copied));
    return true;
}

bool yaml_value_mend(char *text, size_t length, uint32_t *first)
{
    bool found = false;
    for (char *cursor = text, *end = text + length; cursor < end;) {
        const char *next = cursor;
        uint32_t code_point = utf8_next(&next, end);
        size_t bytes = (size_t)(next - cursor);
        bool control = code_point < 0x20 && code_point != '\n' && code_point != '\t';
        if (control || is_refused(code_point)) {
            *first = found ? *first : code_point;
            found = true;
            memset(cursor, ' ', bytes);
        }
        cursor += bytes;
    }
    return found;
}
