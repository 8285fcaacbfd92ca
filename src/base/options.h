/*
 * Command lines from one table: the row of an option gives its parsing, its help and its line in
 * the man page.
 */
#ifndef BASE_OPTIONS_H
#define BASE_OPTIONS_H

#include "base/buffer.h"

#include <stdbool.h>
#include <stddef.h>

struct option_row {
    const char *name;     /* "output": --output; NULL ends the table */
    char letter;          /* 'o': -o; 0: none */
    const char *argument; /* "DIR"; NULL: a flag */
    const char *text;     /* one line of help, no capital, no full stop */
    size_t offset; /* in the caller's struct: a bool, or a const char * when it has an argument */
    unsigned commands; /* bit of each command that knows it */
};

struct command_row {
    const char *name;
    const char *usage;   /* what follows the name: "JOB.yaml... [--working REF]" */
    const char *summary; /* one line */
    const char *details; /* paragraphs for the help and the man page; lines under 78 columns */
    unsigned bit;
    int operands_least, operands_most; /* how many words besides the options it takes */
};

enum { OPERANDS_MANY = 1 << 20 };

/*
 * Parse argv[0..argc) (behind the command's name) by the rows of that command into *values.
 * Operands (a lone `-` among them) are moved to the front of argv; their count is returned, -1
 * after a mistake, told in *message without line end. Their number is not looked at.
 */
int options_parse(const struct option_row *options, const struct command_row *command, int argc,
                  char **argv, void *values, struct buffer *message);

/* Help of the program, of one command, and the whole as a man page (mdoc is not needed: man(7)). */
void options_help_program(const struct command_row *commands, const char *headline,
                          struct buffer *out);
void options_help_command(const struct option_row *options, const struct command_row *command,
                          struct buffer *out);
struct manual_page {
    const char *name, *version, *headline;
    const char *exit_status, *files, *caution; /* paragraphs */
};
void options_man_page(const struct option_row *options, const struct command_row *commands,
                      const struct manual_page *page, struct buffer *out);

#endif
