#include "base/options.h"

#include <string.h>

static const struct option_row *find_row(const struct option_row *options, unsigned bit,
                                         const char *word, size_t length)
{
    for (; options->name; options++) {
        if (!(options->commands & bit))
            continue;
        bool by_letter = length == 2 && word[1] != '-' && word[1] == options->letter;
        bool by_name = length > 2 && word[1] == '-' && strlen(options->name) == length - 2 &&
                       memcmp(options->name, word + 2, length - 2) == 0;
        if (by_letter || by_name)
            return options;
    }
    return NULL;
}

/* One word that begins with '-'; how many further words it took, -1 after a mistake. */
static int take_option(const struct option_row *row, const char *word, const char *next,
                       void *values, struct buffer *message)
{
    char *place = (char *)values + row->offset;
    const char *equals = word[1] == '-' ? strchr(word, '=') : NULL;
    if (!row->argument) {
        if (equals) {
            buffer_print(message, "--%s takes no value", row->name);
            return -1;
        }
        *(bool *)(void *)place = true;
        return 0;
    }
    const char *value = equals ? equals + 1 : next;
    if (!value) {
        buffer_print(message, "--%s needs %s", row->name, row->argument);
        return -1;
    }
    *(const char **)(void *)place = value;
    return equals ? 0 : 1;
}

int options_parse(const struct option_row *options, const struct command_row *command, int argc,
                  char **argv, void *values, struct buffer *message)
{
    int operands = 0;
    bool only_operands = false;
    for (int i = 0; i < argc; i++) {
        const char *word = argv[i];
        if (only_operands || word[0] != '-' || word[1] == '\0') {
            argv[operands++] = argv[i];
            continue;
        }
        if (strcmp(word, "--") == 0) {
            only_operands = true;
            continue;
        }
        const struct option_row *row = find_row(options, command->bit, word, strcspn(word, "="));
        if (!row) {
            buffer_print(message, "unknown option '%s' of %s", word, command->name);
            return -1;
        }
        int taken = take_option(row, word, i + 1 < argc ? argv[i + 1] : NULL, values, message);
        if (taken < 0)
            return -1;
        i += taken;
    }
    return operands;
}

void options_help_program(const struct command_row *commands, const char *headline,
                          struct buffer *out)
{
    buffer_print(out, "%s\n\n", headline);
    for (; commands->name; commands++)
        buffer_print(out, "  gridleak %s %s\n      %s\n", commands->name, commands->usage,
                     commands->summary);
    buffer_text(out, "\n  gridleak COMMAND --help    more about one command\n"
                     "  gridleak --version\n");
}

static void option_words(const struct option_row *row, struct buffer *out)
{
    if (row->letter)
        buffer_print(out, "-%c, ", row->letter);
    buffer_print(out, "--%s%s%s", row->name, row->argument ? " " : "",
                 row->argument ? row->argument : "");
}

void options_help_command(const struct option_row *options, const struct command_row *command,
                          struct buffer *out)
{
    buffer_print(out, "gridleak %s %s\n%s\n\n%s\n", command->name, command->usage, command->summary,
                 command->details);
    for (; options->name; options++) {
        if (!(options->commands & command->bit))
            continue;
        size_t start = out->length;
        buffer_text(out, "  ");
        option_words(options, out);
        size_t width = out->length - start;
        buffer_print(out, "%*s%s\n", width < 26 ? (int)(26 - width) : 2, "", options->text);
    }
}

/* roff reads backslashes, and dots and quotes at the start of a line. */
static void roff_text(const char *text, struct buffer *out)
{
    bool at_start = true;
    for (; *text; text++) {
        if (at_start && (*text == '.' || *text == '\''))
            buffer_text(out, "\\&");
        if (*text == '\\')
            buffer_text(out, "\\e");
        else if (*text == '-')
            buffer_text(out, "\\-");
        else
            buffer_byte(out, *text);
        at_start = *text == '\n';
    }
}

static void roff_section(const char *heading, const char *text, struct buffer *out)
{
    buffer_print(out, ".SH %s\n", heading);
    roff_text(text, out);
    buffer_byte(out, '\n');
}

static void roff_command(const struct option_row *options, const struct command_row *command,
                         struct buffer *out)
{
    buffer_text(out, ".SS \"");
    struct buffer line = {0};
    buffer_print(&line, "gridleak %s %s", command->name, command->usage);
    roff_text(buffer_string(&line), out);
    buffer_release(&line);
    buffer_text(out, "\"\n");
    roff_text(command->summary, out);
    buffer_text(out, ".\n.PP\n");
    roff_text(command->details, out);
    buffer_byte(out, '\n');
    for (; options->name; options++) {
        if (!(options->commands & command->bit))
            continue;
        struct buffer words = {0};
        option_words(options, &words);
        buffer_text(out, ".TP\n.B ");
        roff_text(buffer_string(&words), out);
        buffer_byte(out, '\n');
        roff_text(options->text, out);
        buffer_byte(out, '\n');
        buffer_release(&words);
    }
}

void options_man_page(const struct option_row *options, const struct command_row *commands,
                      const struct manual_page *page, struct buffer *out)
{
    buffer_print(out, ".TH GRIDLEAK 1 \"\" \"%s %s\" \"User commands\"\n", page->name,
                 page->version);
    buffer_text(out, ".SH NAME\n");
    roff_text(page->headline, out);
    buffer_text(out, "\n.SH SYNOPSIS\n.B gridleak\n.I command\n[options] [files]\n"
                     ".SH COMMANDS\n");
    for (const struct command_row *command = commands; command->name; command++)
        roff_command(options, command, out);
    roff_section("EXIT STATUS", page->exit_status, out);
    roff_section("FILES", page->files, out);
    roff_section("CAUTION", page->caution, out);
}
