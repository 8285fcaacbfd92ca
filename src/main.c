/*
 * The command line: one function per command, and the only place that prints.
 * Exit 0 done; 1 the answer is no; 2 wrong input; 3 the system failed.
 */
#include "command_rows.h"

#include "archive/archive.h"
#include "archive/find.h"
#include "archive/job_files.h"
#include "archive/new_job.h"
#include "archive/publish.h"
#include "archive/seal.h"
#include "base/options.h"
#include "job/manual.h"
#include "job/schema.h"
#include "write/json.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

enum { EXIT_DONE = 0, EXIT_NO = 1, EXIT_INPUT = 2, EXIT_SYSTEM = 3 };
enum { TERMINAL_COLUMNS = 80 };

/* What every command works with. */
struct session {
    struct arena arena;
    struct diagnostics diagnostics;
    struct options options;
    char **operands;
    int operand_count;
};

static int complain(const struct buffer *message)
{
    fprintf(stderr, "gridleak: %.*s\n", (int)message->length, message->data ? message->data : "");
    return EXIT_INPUT;
}

static int system_failure(const char *path, enum file_status status)
{
    fprintf(stderr, "gridleak: cannot write '%s': %s\n", path ? path : "",
            status == FILE_MISSING ? "no such folder" : file_status_text(status));
    return EXIT_SYSTEM;
}

static void show_diagnostics(const struct diagnostics *list, bool quiet)
{
    struct diagnostics shown = *list;
    struct arena arena = {0};
    if (quiet) {
        /* Errors and warnings are shown even so; notes are not. */
        shown.items = arena_array(&arena, list->count, sizeof *list->items);
        shown.count = 0;
        for (size_t i = 0; i < list->count; i++)
            if (list->items[i].severity != SEVERITY_NOTE)
                shown.items[shown.count++] = list->items[i];
    }
    struct buffer text = {0};
    diagnostics_format(&shown, &text);
    if (text.length)
        fwrite(text.data, 1, text.length, stderr);
    buffer_release(&text);
    arena_release(&arena);
}

/* Standard output, whole; a full disk or a closed pipe is a failure of the system. */
static int print(const struct buffer *text)
{
    bool whole = !text->length || fwrite(text->data, 1, text->length, stdout) == text->length;
    if (fflush(stdout) == 0 && whole)
        return EXIT_DONE;
    fprintf(stderr, "gridleak: cannot write to standard output: %s\n", strerror(errno));
    return EXIT_SYSTEM;
}

static bool bold_allowed(void)
{
    const char *no_colour = getenv("NO_COLOR");
    return isatty(STDOUT_FILENO) && !(no_colour && *no_colour);
}

/* The archive that --archive names must be one; false, and told. */
static bool archive_option_is_good(const struct session *session)
{
    const char *folder = session->options.archive;
    bool good = !folder || archive_is_at(folder);
    if (!good)
        fprintf(stderr,
                "gridleak: '%s' is no archive: it holds no shop.yaml (an empty one will do)\n",
                folder);
    return good;
}

static bool open_archive(struct session *session, const char *job_path, struct archive *archive)
{
    const char *share = archive_share_folder(&session->arena);
    if (!share) {
        fputs("gridleak: the templates are not where they were installed\n", stderr);
        exit(EXIT_SYSTEM);
    }
    if (!archive_option_is_good(session))
        return false;
    const char *folder = session->options.archive ? session->options.archive
                         : job_path && strcmp(job_path, "-") != 0
                             ? archive_folder_of(job_path, &session->arena)
                             : ".";
    bool good = archive_open(archive, folder, share, &session->arena, &session->diagnostics);
    show_diagnostics(&session->diagnostics, session->options.quiet);
    session->diagnostics = diagnostics_in(&session->arena); /* what is told of shop.yaml is told */
    return good;
}

/* A command line that its command cannot use. */
static int wrong_usage(const struct command_row *command)
{
    fprintf(stderr, "gridleak: usage: gridleak %s %s\n", command->name, command->usage);
    return EXIT_INPUT;
}

static int exit_of(const struct session *session, size_t errors, size_t warnings)
{
    if (errors)
        return EXIT_INPUT;
    return session->options.strict && warnings ? EXIT_NO : EXIT_DONE;
}

/* ---- assess */

static int assess_one(struct session *session, const struct archive *archive, const char *path,
                      struct buffer *out, struct diagnostics *diagnostics)
{
    struct opened_job opened = job_open(archive, path, diagnostics->arena, diagnostics);
    diagnostics_sort(diagnostics);
    if (session->options.json) {
        json_write_findings(opened.findings, out);
        return EXIT_DONE;
    }
    if (diagnostics->errors)
        return EXIT_INPUT;
    struct document *document =
        session->options.working
            ? report_compose_working(opened.findings, session->options.working, archive->templates,
                                     diagnostics->arena, diagnostics)
            : report_compose(opened.findings, DOCUMENT_ASSESSMENT, archive->templates, NULL,
                             diagnostics->arena, diagnostics);
    if (!document)
        return EXIT_INPUT;
    terminal_write(document, TERMINAL_COLUMNS, bold_allowed(), out);
    document_release(document);
    return EXIT_DONE;
}

static int command_assess(struct session *session)
{
    struct archive archive;
    size_t errors = 0, warnings = 0;
    if (session->options.json && session->options.working) {
        fputs("gridleak: --json has all parts, --working shows one: give one of them\n", stderr);
        return EXIT_INPUT;
    }
    if (!open_archive(session, session->operands[0], &archive))
        return EXIT_INPUT;
    for (int i = 0; i < session->operand_count; i++) {
        struct arena arena = {0};
        struct diagnostics diagnostics = diagnostics_in(&arena);
        struct buffer out = {0};
        assess_one(session, &archive, session->operands[i], &out, &diagnostics);
        show_diagnostics(&diagnostics, session->options.quiet);
        errors += diagnostics.errors;
        warnings += diagnostics.warnings;
        int printed = print(&out);
        buffer_release(&out);
        arena_release(&arena);
        if (printed != EXIT_DONE)
            return printed;
    }
    archive_close(&archive);
    return exit_of(session, errors, warnings);
}

/* ---- sheet */

static bool ends_with(const char *name, const char *ending)
{
    size_t length = strlen(name), end_length = strlen(ending);
    return length > end_length && strcmp(name + length - end_length, ending) == 0;
}

/* Write the sheet in the format of the file's name; EXIT_INPUT for a name of no format. */
static int write_sheet(struct session *session, struct archive *archive,
                       const struct document *document, struct buffer *out)
{
    const char *name = session->options.output;
    if (!name) {
        terminal_write(document, TERMINAL_COLUMNS, bold_allowed(), out);
        return print(out);
    }
    if (ends_with(name, ".html")) {
        html_write(document, archive->style, archive->page_template, out);
    } else if (ends_with(name, ".md")) {
        markdown_write(document, out);
    } else if (ends_with(name, ".pdf")) {
        if (!archive_open_pdf(archive, &session->arena, &session->diagnostics) ||
            !pdf_write(document, archive->pdf, JOB_DEFLATE_LEVEL, out, &session->diagnostics))
            return EXIT_SYSTEM;
    } else {
        fprintf(stderr, "gridleak: '%s' should end in .html, .pdf or .md\n", name);
        return EXIT_INPUT;
    }
    enum file_status status = file_write(name, out->data, out->length, NULL);
    return status == FILE_OK ? EXIT_DONE : system_failure(name, status);
}

static int command_sheet(struct session *session)
{
    struct archive archive;
    const char *path = session->operands[0];
    if (!open_archive(session, path, &archive))
        return EXIT_INPUT;
    struct opened_job opened = job_open(&archive, path, &session->arena, &session->diagnostics);
    int answer = EXIT_INPUT;
    if (session->diagnostics.errors == 0) {
        struct document *document =
            report_compose(opened.findings, DOCUMENT_SHEET, archive.templates, NULL,
                           &session->arena, &session->diagnostics);
        if (document) {
            struct buffer out = {0};
            answer = write_sheet(session, &archive, document, &out);
            buffer_release(&out);
            document_release(document);
        }
    }
    diagnostics_sort(&session->diagnostics);
    show_diagnostics(&session->diagnostics, session->options.quiet);
    archive_close(&archive);
    return answer;
}

/* ---- publish */

static void tell_job(const struct publish_event *event, void *context)
{
    const struct session *session = context;
    show_diagnostics(event->diagnostics, session->options.quiet);
    if (!session->options.quiet && isatty(STDERR_FILENO))
        fprintf(stderr, "\r%zu of %zu%s", event->done, event->of,
                event->done == event->of ? "\n" : "");
}

/* Whether the operands are one archive, or job files; false after a mistake, told. */
static bool publish_operands(const struct session *session, unsigned *threads)
{
    const char *word = session->options.threads;
    char *end = NULL;
    unsigned long wanted = word ? strtoul(word, &end, 10) : 2;
    if (wanted < 1 || wanted > PUBLISH_THREADS_MAX || (end && *end)) {
        fprintf(stderr, "gridleak: --threads is a number from 1 to %d, not '%s'\n",
                PUBLISH_THREADS_MAX, word);
        return false;
    }
    *threads = (unsigned)wanted;
    for (int i = 0; i < session->operand_count; i++) {
        const char *word_at = session->operands[i];
        bool job = ends_with(word_at, ".yaml");
        if (job && !session->options.pages)
            continue;
        if (!job && session->operand_count == 1)
            continue;
        fprintf(stderr, "gridleak: '%s': publish takes one archive, or job files%s\n", word_at,
                session->options.pages ? "; --pages one archive" : "");
        return false;
    }
    return true;
}

static bool output_is_good(struct session *session, const char *output)
{
    const char *folder;
    switch (publish_output_kind(output, &session->arena, &folder)) {
    case OUTPUT_GOOD:
        return true;
    case OUTPUT_IS_ARCHIVE:
        fprintf(stderr, "gridleak: '%s' is an archive: publish into a folder of its own\n", folder);
        return false;
    case OUTPUT_IS_FOREIGN:
        fprintf(stderr,
                "gridleak: '%s' was made by something else: publish into a folder of its own\n",
                folder);
        return false;
    }
    return false;
}

static int command_publish(struct session *session)
{
    const char *first = session->operands[0];
    bool whole = !ends_with(first, ".yaml");
    unsigned threads;
    const char *output = session->options.output ? session->options.output : "output";
    if (!publish_operands(session, &threads) || !output_is_good(session, output))
        return EXIT_INPUT;
    if (whole)
        session->options.archive = first;
    struct archive archive;
    if (!open_archive(session, first, &archive))
        return EXIT_INPUT;
    if (!archive_open_pdf(&archive, &session->arena, &session->diagnostics)) {
        show_diagnostics(&session->diagnostics, session->options.quiet);
        return EXIT_SYSTEM;
    }
    struct publish_request request = {
        .output = output,
        .job_paths = whole ? NULL : (const char *const *)session->operands,
        .job_path_count = whole ? 0 : (size_t)session->operand_count,
        .pages_only = session->options.pages,
        .wait = session->options.wait,
        .threads = threads,
        .listener = tell_job,
        .listener_context = session,
    };
    struct publish_result result = publish(&archive, &request, &session->arena);
    archive_close(&archive);
    if (result.failure != FILE_OK)
        return system_failure(result.failed_path, result.failure);
    if (result.busy) {
        fprintf(stderr, "gridleak: '%s' is being published by process %ld; --wait waits for it\n",
                request.output, result.holder);
        return EXIT_SYSTEM;
    }
    if (!session->options.quiet && !request.pages_only)
        fprintf(stderr, "%zu job%s: %zu made, %zu unchanged, %zu left out for mistakes\n",
                result.jobs, result.jobs == 1 ? "" : "s",
                result.jobs - result.broken - result.unchanged, result.unchanged, result.broken);
    return exit_of(session, result.broken + result.pages_wrong, result.warned);
}

/* ---- find */

static bool terms_are_good(struct session *session)
{
    for (int i = 0; i < session->operand_count; i++) {
        const char *mistake = query_mistake(session->operands[i], &session->arena);
        if (mistake) {
            fprintf(stderr, "gridleak: %s\n", mistake);
            return false;
        }
    }
    return true;
}

static int show_hits(struct session *session, const struct columns *columns)
{
    struct buffer out = {0};
    struct query_hits hits = query_run(columns, (const char *const *)session->operands,
                                       (size_t)session->operand_count, &session->arena);
    (session->options.json ? find_write_json : find_write)(columns, &hits, &out);
    int answer = print(&out);
    buffer_release(&out);
    if (hits.unknown_key) {
        fprintf(stderr, "gridleak: no fact is named '%s'; see gridleak find --help\n",
                hits.unknown_key);
        return EXIT_INPUT;
    }
    return answer == EXIT_DONE && hits.part_count + hits.job_count == 0 ? EXIT_NO : answer;
}

static int command_find(struct session *session)
{
    const char *output = session->options.output ? session->options.output : "output";
    if (!terms_are_good(session))
        return EXIT_INPUT;
    struct columns columns = {0};
    size_t damaged;
    int answer = EXIT_INPUT;
    enum file_status read = find_read(output, &columns, &damaged);
    if (read == FILE_OK) {
        answer = show_hits(session, &columns);
    } else if (read == FILE_MISSING) {
        fprintf(stderr, "gridleak: there is no '%s/summaries.jsonl': publish first\n", output);
    } else {
        fprintf(stderr, "gridleak: cannot read '%s/summaries.jsonl': %s\n", output,
                file_status_text(read));
        answer = EXIT_SYSTEM;
    }
    if (damaged)
        fprintf(stderr,
                "gridleak: %zu lines of '%s/summaries.jsonl' are of another version or damaged: "
                "publish again\n",
                damaged, output);
    columns_release(&columns);
    return answer;
}

/* ---- seal, prove */

static const char *today(struct arena *arena)
{
    time_t now = time(NULL);
    struct tm parts;
    char text[sizeof "2031-02-10"];
    if (!localtime_r(&now, &parts) || strftime(text, sizeof text, "%Y-%m-%d", &parts) == 0)
        return "0000-00-00";
    return arena_copy(arena, text);
}

static int show_seal(const struct seal_result *result)
{
    switch (result->status) {
    case SEAL_DONE:
        printf("%s\n%s\n", result->folder, result->line);
        return EXIT_DONE;
    case SEAL_NOT_PUBLISHED:
        fprintf(stderr,
                "gridleak: '%s' is not there: publish first; a job without 'returned' has the "
                "shop's copy only\n",
                result->folder);
        return EXIT_INPUT;
    case SEAL_DIFFERS:
        fprintf(stderr, "gridleak: '%s' is not as it was published: publish again\n",
                result->folder);
        return EXIT_INPUT;
    case SEAL_CHAIN_BROKEN:
        fprintf(stderr, "gridleak: '%s' is broken: prove says where\n", result->folder);
        return EXIT_INPUT;
    case SEAL_FAILED:
        return system_failure(result->folder, result->failure);
    }
    return EXIT_SYSTEM;
}

static int command_seal(struct session *session)
{
    const char *word = session->operands[1];
    enum copy copy = strcmp(word, copy_text(COPY_SALE)) == 0 ? COPY_SALE : COPY_CLIENT;
    if (strcmp(word, copy_text(copy)) != 0) {
        fputs("gridleak: usage: gridleak seal JOB.yaml client|sale\n", stderr);
        return EXIT_INPUT;
    }
    const char *path = session->operands[0];
    struct seal_request request = {
        .archive_folder = session->options.archive ? session->options.archive
                                                   : archive_folder_of(path, &session->arena),
        .output = session->options.output ? session->options.output : "output",
        .job = job_name_of(path, &session->arena),
        .copy = copy,
        .date = today(&session->arena),
    };
    struct seal_result result = seal(&request, &session->arena);
    return show_seal(&result);
}

static void show_difference(const struct proof_difference *difference)
{
    static const char *const texts[] = {
        [PROOF_MANIFEST_MISSING] = "there is no",
        [PROOF_MANIFEST_UNREADABLE] = "no line of a manifest:",
        [PROOF_FILE_CHANGED] = "changed:",
        [PROOF_FILE_LOST] = "lost:",
        [PROOF_FILE_ADDED] = "added:",
        [PROOF_FINGERPRINT] = "the fingerprint is not that of findings.json:",
        [PROOF_SEAL_MANIFEST] = "the manifest is not the one sealed:",
        [PROOF_SEAL_UNREADABLE] = "no seal line:",
        [PROOF_CHAIN_LINE] = "the chain breaks:",
        [PROOF_CHAIN_MISSING] = "the folder's seal is not in its place:",
    };
    printf("%s %s", texts[difference->kind], difference->name);
    if (difference->number)
        printf(", line %u", difference->number);
    putchar('\n');
}

static int command_prove(struct session *session)
{
    const char *folder = session->operands[0];
    if (!folder_exists(folder)) {
        fprintf(stderr, "gridleak: '%s' is no folder\n", folder);
        return EXIT_INPUT;
    }
    struct proof proof = prove(folder, &session->arena);
    for (size_t i = 0; i < proof.count; i++)
        show_difference(&proof.differences[i]);
    printf("%zu files as in the manifest; ", proof.files);
    if (!proof.seal_line)
        puts("not sealed");
    else if (proof.chain_checked)
        printf("sealed, chain of %u checked\n", proof.chain_lines);
    else
        puts("sealed, chain not checked: seals.txt not at hand");
    return proof.count ? EXIT_NO : EXIT_DONE;
}

/* ---- start */

static int show_new_job(const struct new_job *made)
{
    switch (made->status) {
    case NEW_JOB_DONE:
        printf("%s\n", made->path);
        return EXIT_DONE;
    case NEW_JOB_NUMBER:
        fprintf(stderr,
                "gridleak: '%s' cannot be a job number: letters, digits, '.' and '-', beginning "
                "with a letter or digit\n",
                made->path);
        return EXIT_INPUT;
    case NEW_JOB_THERE:
        fprintf(stderr, "gridleak: '%s' is there already\n", made->path);
        return EXIT_INPUT;
    case NEW_JOB_LIKE_MISSING:
        fprintf(stderr, "gridleak: cannot read '%s': %s\n", made->path,
                file_status_text(made->failure));
        return EXIT_INPUT;
    case NEW_JOB_FAILED:
        return system_failure(made->path, made->failure);
    }
    return EXIT_SYSTEM;
}

static int command_start(struct session *session)
{
    const char *number = session->operands[0];
    if (!archive_option_is_good(session))
        return EXIT_INPUT;
    if (!strchr(number, '/')) /* `2031-014.yaml` is meant as `2031-014` */
        number = job_name_of(number, &session->arena);
    struct new_job_request request = {
        .archive_folder = session->options.archive ? session->options.archive
                                                   : archive_folder_of("job.yaml", &session->arena),
        .number = number,
        .received = today(&session->arena),
        .like = session->options.like,
    };
    struct new_job made = new_job(&request, &session->arena, &session->diagnostics);
    diagnostics_sort(&session->diagnostics);
    show_diagnostics(&session->diagnostics, session->options.quiet);
    return show_new_job(&made);
}

/* ---- fields */

static int command_fields(struct session *session)
{
    struct buffer out = {0};
    if (session->options.schema)
        schema_write(&out);
    else
        manual_write(&out);
    int answer = print(&out);
    buffer_release(&out);
    return answer;
}

static const struct command_row *find_command(const char *name)
{
    for (const struct command_row *row = command_rows; row->name; row++)
        if (strcmp(row->name, name) == 0)
            return row;
    return NULL;
}

static int run(struct session *session, const struct command_row *command)
{
    if (session->operand_count < command->operands_least ||
        session->operand_count > command->operands_most)
        return wrong_usage(command);
    switch ((enum command_bit)command->bit) {
    case COMMAND_ASSESS:
        return command_assess(session);
    case COMMAND_SHEET:
        return command_sheet(session);
    case COMMAND_PUBLISH:
        return command_publish(session);
    case COMMAND_FIND:
        return command_find(session);
    case COMMAND_SEAL:
        return command_seal(session);
    case COMMAND_PROVE:
        return command_prove(session);
    case COMMAND_START:
        return command_start(session);
    case COMMAND_FIELDS:
        return command_fields(session);
    case COMMAND_ALL:
        break;
    }
    return EXIT_INPUT;
}

static int show_text(void (*fill)(struct buffer *))
{
    struct buffer out = {0};
    fill(&out);
    int answer = print(&out);
    buffer_release(&out);
    return answer;
}

static void fill_help(struct buffer *out)
{
    options_help_program(command_rows, headline, out);
}

static void fill_man_page(struct buffer *out)
{
    static const struct manual_page page = {
        .name = "gridleak",
        .version = GRIDLEAK_VERSION,
        .headline = headline,
        .exit_status =
            "0 done; 1 the answer is no (--strict and a warning, find without a hit,\n"
            "prove with a difference); 2 wrong input (command line, job, template); 3 the\n"
            "system failed.",
        .files = "shop.yaml marks the archive's folder and holds the shop's policy;\n"
                 "<job>.yaml is a job. Templates and words are looked for in the archive's\n"
                 "templates folder first, then where they were installed.",
        .caution = "Mains and high tension kill. The figures say what was measured and what\n"
                   "follows from it; local codes and a licensed person decide what may be\n"
                   "connected to the mains.",
    };
    options_man_page(option_rows, command_rows, &page, out);
}

static int run_command(const struct command_row *command, int argc, char **argv)
{
    struct session session = {.operands = argv};
    session.diagnostics = diagnostics_in(&session.arena);
    struct buffer message = {0};
    int answer;
    session.operand_count =
        options_parse(option_rows, command, argc, argv, &session.options, &message);
    if (session.operand_count < 0) {
        answer = complain(&message);
    } else if (session.options.help) {
        options_help_command(option_rows, command, &message);
        answer = print(&message);
    } else {
        answer = run(&session, command);
    }
    buffer_release(&message);
    arena_release(&session.arena);
    return answer;
}

int main(int argc, char **argv)
{
    if (argc < 2 || strcmp(argv[1], "--help") == 0 || strcmp(argv[1], "-h") == 0) {
        int answer = show_text(fill_help);
        return argc < 2 ? EXIT_INPUT : answer;
    }
    if (strcmp(argv[1], "--version") == 0) {
        puts("gridleak " GRIDLEAK_VERSION);
        return EXIT_DONE;
    }
    if (strcmp(argv[1], "--man-page") == 0) /* for `make man` */
        return show_text(fill_man_page);
    const struct command_row *command = find_command(argv[1]);
    if (!command) {
        fprintf(stderr, "gridleak: no command '%s'; see gridleak --help\n", argv[1]);
        return EXIT_INPUT;
    }
    return run_command(command, argc - 2, argv + 2);
}
