/*
 * The words of the command line: a row for each command and option, which parser, help and man page
 * are made from. For main.c alone.
 */
#ifndef COMMAND_ROWS_H
#define COMMAND_ROWS_H

#include "base/options.h"

/* What the options of all commands fill. */
struct options {
    bool help, quiet, json, strict, schema, pages, wait;
    const char *archive, *output, *like, *threads, *working;
};

enum command_bit {
    COMMAND_START = 1 << 0,
    COMMAND_SHEET = 1 << 1,
    COMMAND_ASSESS = 1 << 2,
    COMMAND_PUBLISH = 1 << 3,
    COMMAND_FIELDS = 1 << 4,
    COMMAND_SEAL = 1 << 5,
    COMMAND_PROVE = 1 << 6,
    COMMAND_FIND = 1 << 7,
    COMMAND_ALL = (1 << 8) - 1
};

#define OPTION_AT(member) offsetof(struct options, member)
static const struct option_row option_rows[] = {
    {"archive", 'a', "DIR", "the folder that holds shop.yaml; else found from the job file",
     OPTION_AT(archive),
     COMMAND_START | COMMAND_SHEET | COMMAND_ASSESS | COMMAND_PUBLISH | COMMAND_SEAL},
    {"like", 0, "JOB", "keep the chassis' parts of this job, blank its readings", OPTION_AT(like),
     COMMAND_START},
    {"output", 'o', "PATH", "sheet: a file .html, .pdf or .md; else the output folder, \"output\"",
     OPTION_AT(output), COMMAND_SHEET | COMMAND_PUBLISH | COMMAND_SEAL | COMMAND_FIND},
    {"json", 0, NULL, "one object a job, or a hit, on one line", OPTION_AT(json),
     COMMAND_ASSESS | COMMAND_FIND},
    {"working", 0, "REF", "the calculation of this part, line by line", OPTION_AT(working),
     COMMAND_ASSESS},
    {"strict", 0, NULL, "exit 1 when there is a warning", OPTION_AT(strict),
     COMMAND_ASSESS | COMMAND_PUBLISH},
    {"threads", 0, "N", "jobs made at the same time, else 2", OPTION_AT(threads), COMMAND_PUBLISH},
    {"wait", 0, NULL, "wait for another publish into the same folder to end", OPTION_AT(wait),
     COMMAND_PUBLISH},
    {"pages", 0, NULL, "only the pages over all jobs", OPTION_AT(pages), COMMAND_PUBLISH},
    {"schema", 0, NULL, "JSON Schema (draft-07) for editors", OPTION_AT(schema), COMMAND_FIELDS},
    {"quiet", 'q', NULL, "no notes and no progress", OPTION_AT(quiet), COMMAND_ALL},
    {"help", 'h', NULL, "this help", OPTION_AT(help), COMMAND_ALL},
    {0},
};

static const struct command_row command_rows[] = {
    {"start", "JOB [--like JOB]", "begin a job file, never over one that is there",
     "Writes JOB.yaml into the archive, with every section ready to be filled in. With\n"
     "--like the parts of an earlier job on the same chassis are kept and its readings,\n"
     "dates and actions left out.\n",
     COMMAND_START, 1, 1},
    {"sheet", "JOB.yaml [-o FILE]", "bench sheet before measuring",
     "What to lift, at which volts to test, how long to wait, and the limit of each part in\n"
     "microamperes and in megohms, with blanks to write in. On the terminal, or in the\n"
     "format of FILE's name: .html, .pdf or .md.\n",
     COMMAND_SHEET, 1, 1},
    {"assess", "JOB.yaml... [--working REF]", "findings, part by part",
     "What each capacitor leaks, what that does where it sits, whether it may stay, and why.\n"
     "`-` reads standard input. A failed capacitor is a finding, never an exit status.\n",
     COMMAND_ASSESS, 1, OPERANDS_MANY},
    {"publish", "ARCHIVE | JOB.yaml... [-o DIR]", "records, bench sheets and pages",
     "Makes the shop's, the client's and the sale copy of every job as Markdown, HTML and\n"
     "PDF, the bench sheets, and the list of the archive. A job file with mistakes is told\n"
     "and left out; the others are made.\n",
     COMMAND_PUBLISH, 1, OPERANDS_MANY},
    {"find", "WORDS... [key=value ...] [-o DIR]", "parts and jobs, one line each",
     "A word finds what has a word that begins so, whatever its case and accents; several\n"
     "must all be met. `place=coupling outcome=fail` asks for facts by name: maker, model,\n"
     "chassis, serial, valve, supply, year (1948..1952), decade, kind, type, marked, place,\n"
     "was, done, outcome (as found), left, batch, fitted, from and to (date of return) and\n"
     "due (call-back by then). A part is listed when it meets what its set does not, a job\n"
     "when it meets all. Reads what publish last wrote into DIR. Exit 1 without a hit.\n",
     COMMAND_FIND, 1, OPERANDS_MANY},
    {"seal", "JOB.yaml client|sale [-o DIR]", "set a published copy aside for good",
     "Copies the client's or the sale copy, as last published, into the archive's folder\n"
     "sealed/, which no command writes again, and appends a line to seals.txt. The same\n"
     "line lies in the sealed folder: whoever holds it can show that nothing written before\n"
     "it has changed since. It cannot show that the shop did not write everything anew\n"
     "before it handed anything out. To sign a sealed folder:\n"
     "ssh-keygen -Y sign -f KEY -n gridleak FOLDER/manifest.sha256\n",
     COMMAND_SEAL, 2, 2},
    {"prove", "FOLDER", "has anything in a copy been changed?",
     "Holds every file against manifest.sha256, looks for files added or lost, checks the\n"
     "record's fingerprint and, inside the archive, the chain of seals.txt. `sha256sum -c\n"
     "manifest.sha256` checks the files alone. Exit 1 when something differs. No difference\n"
     "means that nothing was changed since the copy was written, or sealed, unless all of it\n"
     "was written anew; it does not mean that the figures are true.\n",
     COMMAND_PROVE, 1, 1},
    {"fields", "[--schema]", "every key of a job file",
     "Each key with its unit, choices and an example, or a JSON Schema for editors.\n",
     COMMAND_FIELDS, 0, 0},
    {0},
};

static const char headline[] = "gridleak - assess, restore and record valve radios, part by part";

#endif
