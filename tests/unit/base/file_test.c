/* Files whole or not at all; command lines. */
#include "base/file.h"
#include "base/options.h"
#include "kit.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static char folder[] = "/tmp/gridleak-file-XXXXXX";

static int make_folder(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}

static int drop_folder(void **state)
{
    (void)state;
    return folder_remove(folder) == FILE_OK ? 0 : -1;
}

static const char *in_folder(const char *name)
{
    static char path[256];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static void a_folder_is_listed_by_name(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct folder_names names;
    assert_int_equal(folder_make(in_folder("listed/b")), FILE_OK);
    assert_int_equal(file_write(in_folder("listed/c"), "", 0, NULL), FILE_OK);
    assert_int_equal(file_write(in_folder("listed/a"), "", 0, NULL), FILE_OK);
    assert_int_equal(file_write(in_folder("listed/.d"), "", 0, NULL), FILE_OK);
    assert_int_equal(folder_list(in_folder("listed"), &arena, &names), FILE_OK);
    assert_int_equal(names.count, 4);
    assert_string_equal(names.names[0], ".d");
    assert_string_equal(names.names[1], "a");
    assert_string_equal(names.names[2], "b");
    assert_string_equal(names.names[3], "c");
    assert_int_equal(folder_list(in_folder("listed/b"), &arena, &names), FILE_OK);
    assert_int_equal(names.count, 0);
    assert_int_equal(folder_list(in_folder("listed/no"), &arena, &names), FILE_MISSING);
    assert_int_equal(names.count, 0);
    arena_release(&arena);
}

static void a_file_is_written_and_read(void **state)
{
    (void)state;
    bool changed;
    assert_int_equal(file_write(in_folder("a"), "abc", 3, &changed), FILE_OK);
    assert_true(changed);
    struct stat before, after;
    assert_int_equal(stat(in_folder("a"), &before), 0);
    assert_int_equal(file_write(in_folder("a"), "abc", 3, &changed), FILE_OK);
    assert_false(changed);
    assert_int_equal(stat(in_folder("a"), &after), 0);
    assert_int_equal(before.st_ino, after.st_ino); /* untouched: not even renamed over */
    struct buffer contents = {0};
    assert_int_equal(file_read(in_folder("a"), 3, &contents), FILE_OK);
    assert_int_equal(file_read(in_folder("a"), 2, &contents), FILE_LARGE);
    assert_int_equal(contents.length, 3);
    assert_memory_equal(contents.data, "abc", 3);
    assert_int_equal(file_read(in_folder("none"), 10, &contents), FILE_MISSING);
    assert_int_equal(file_read(folder, 10, &contents), FILE_NOT_REGULAR);
    assert_int_equal(folder_flush_names(folder), FILE_OK);
    assert_int_equal(folder_flush(folder), FILE_OK);
    buffer_release(&contents);
}

/* A file of pieces, some from what it was. */
static enum file_status patch(const char *path, const char *begins, uint64_t offset,
                              uint64_t length, const char *ends)
{
    struct file_writer writer;
    file_begin(&writer, path);
    file_put(&writer, begins, strlen(begins));
    file_put_old(&writer, offset, length);
    file_put(&writer, ends, strlen(ends));
    file_flush(&writer);
    return file_finish(&writer);
}

static void a_file_is_written_in_pieces(void **state)
{
    (void)state;
    struct buffer large = {0}, contents = {0};
    for (unsigned i = 0; i < 300000; i++)
        buffer_decimal(&large, i);
    assert_int_equal(file_write(in_folder("p"), large.data, large.length, NULL), FILE_OK);
    assert_int_equal(patch(in_folder("p"), "<", 5, large.length - 10, ">"), FILE_OK);
    assert_int_equal(file_read(in_folder("p"), large.length, &contents), FILE_OK);
    assert_int_equal(contents.length, large.length - 8);
    assert_int_equal(contents.data[0], '<');
    assert_memory_equal(contents.data + 1, large.data + 5, large.length - 10);
    assert_int_equal(contents.data[contents.length - 1], '>');
    struct stat before, after;
    assert_int_equal(stat(in_folder("p"), &before), 0);
    /* The same again is not touched; more than there was is a failure that leaves it alone. */
    assert_int_equal(patch(in_folder("p"), "<", 1, large.length - 10, ">"), FILE_OK);
    assert_int_equal(patch(in_folder("p"), "", 1, large.length, ""), FILE_FAILED);
    assert_int_equal(stat(in_folder("p"), &after), 0);
    assert_int_equal(before.st_ino, after.st_ino);
    assert_int_equal(patch(in_folder("p"), "a", 0, 0, "b"), FILE_OK);
    assert_int_equal(patch(in_folder("none"), "a", 0, 1, "b"), FILE_MISSING);
    assert_int_equal(access(in_folder("none"), F_OK), -1);
    buffer_release(&large);
    buffer_release(&contents);
}

static void a_failure_is_told(void **state)
{
    (void)state;
    assert_int_equal(folder_flush_names("/proc/none/x"), FILE_MISSING);
    assert_int_equal(folder_flush(in_folder("none")), FILE_MISSING);
    assert_int_equal(file_write("/proc/none/x", "x", 1, NULL), FILE_MISSING);
    for (enum file_status status = FILE_OK; status <= FILE_FAILED; status++)
        assert_true(strlen(file_status_text(status)) > 0);
}

static void folders_are_made_and_removed(void **state)
{
    (void)state;
    assert_int_equal(folder_make(in_folder("x/y/z")), FILE_OK);
    assert_int_equal(folder_make(in_folder("x/y/z")), FILE_OK);
    assert_int_equal(file_write(in_folder("x/y/f"), "", 0, NULL), FILE_OK);
    assert_int_equal(folder_make(in_folder("x/y/f")), FILE_NOT_REGULAR);
    assert_int_equal(symlink("/etc", in_folder("x/link")), 0);
    assert_int_equal(folder_remove(in_folder("x")), FILE_OK);
    assert_int_equal(access(in_folder("x"), F_OK), -1);
    assert_int_equal(access("/etc/passwd", F_OK), 0);
    assert_int_equal(folder_remove(in_folder("x")), FILE_OK);
}

struct values {
    bool flag;
    const char *name;
};
static const struct option_row rows[] = {
    {"flag", 'f', NULL, "a flag", offsetof(struct values, flag), 1},
    {"name", 'n', "NAME", "a name", offsetof(struct values, name), 1},
    {"other", 0, NULL, "of another command", offsetof(struct values, flag), 2},
    {0},
};
static const struct command_row commands[] = {
    {"do", "FILE", "does it", "At length.\n", 1, 1, 1},
    {0},
};

static int parse(struct values *values, char **words, int count, struct buffer *message)
{
    *values = (struct values){0};
    buffer_clear(message);
    return options_parse(rows, commands, count, words, values, message);
}

static void options_are_parsed(void **state)
{
    (void)state;
    struct values values;
    struct buffer message = {0};
    char *good[] = {"a", "-f", "--name=x", "-", "-n", "y", "--", "-z"};
    assert_int_equal(parse(&values, good, 8, &message), 3);
    assert_true(values.flag);
    assert_string_equal(values.name, "y");
    assert_string_equal(good[1], "-");
    assert_string_equal(good[2], "-z");
    char *unknown[] = {"--other"};
    assert_int_equal(parse(&values, unknown, 1, &message), -1);
    assert_string_equal(buffer_string(&message), "unknown option '--other' of do");
    char *lacking[] = {"--name"};
    assert_int_equal(parse(&values, lacking, 1, &message), -1);
    assert_string_equal(buffer_string(&message), "--name needs NAME");
    char *surplus[] = {"--flag=1"};
    assert_int_equal(parse(&values, surplus, 1, &message), -1);
    assert_string_equal(buffer_string(&message), "--flag takes no value");
    buffer_release(&message);
}

static void help_names_every_option(void **state)
{
    (void)state;
    struct buffer out = {0};
    options_help_command(rows, commands, &out);
    assert_non_null(strstr(buffer_string(&out), "  -n, --name NAME"));
    assert_null(strstr(buffer_string(&out), "other"));
    options_help_program(commands, "head", &out);
    assert_non_null(strstr(buffer_string(&out), "gridleak do FILE"));
    static const struct manual_page page = {"gridleak", "1", "a - b", ".dot\n'quote \\", "f", "c"};
    buffer_clear(&out);
    options_man_page(rows, commands, &page, &out);
    assert_non_null(strstr(buffer_string(&out), "\\&.dot\n\\&'quote \\e"));
    assert_non_null(strstr(buffer_string(&out), ".B \\-f, \\-\\-flag"));
    buffer_release(&out);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_folder_is_listed_by_name),
        cmocka_unit_test(a_file_is_written_and_read),
        cmocka_unit_test(a_file_is_written_in_pieces),
        cmocka_unit_test(a_failure_is_told),
        cmocka_unit_test(folders_are_made_and_removed),
        cmocka_unit_test(options_are_parsed),
        cmocka_unit_test(help_names_every_option),
    };
    return cmocka_run_group_tests_name("file", tests, make_folder, drop_folder);
}
