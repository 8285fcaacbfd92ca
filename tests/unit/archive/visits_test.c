/* The chain of visits of one set. */
#include "archive/visits.h"

#include "base/file.h"

#include "kit.h"

#include <stdlib.h>
#include <string.h>

struct visit_file {
    const char *number, *serial, *received, *returned, *continues;
};

static char folder[] = "/tmp/gridleak-visits-XXXXXX";

static void write_job(const struct visit_file *file)
{
    struct buffer text = {0}, path = {0};
    buffer_print(&text,
                 "job: %s\nset:\n  maker: M\n  model: X\n  serial: %s\n  supply: transformer\n"
                 "  mains: 230 V\n  frequency: 50 Hz\nreceived: %s\n",
                 file->number, file->serial, file->received);
    if (file->returned)
        buffer_print(&text, "returned: %s\n", file->returned);
    if (file->continues)
        buffer_print(&text, "continues: %s\n", file->continues);
    buffer_print(&path, "%s/%s.yaml", folder, file->number);
    assert_int_equal(file_write(buffer_string(&path), text.data, text.length, NULL), FILE_OK);
    buffer_release(&text);
    buffer_release(&path);
}

/* Write the files, follow the chain of the first; its diagnostics. */
static struct visits follow(const struct visit_file *files, size_t count,
                            struct findings **findings, struct arena *arena,
                            struct diagnostics *diagnostics)
{
    assert_int_equal(folder_remove(folder), FILE_OK);
    assert_int_equal(folder_make(folder), FILE_OK);
    for (size_t i = 0; i < count; i++)
        write_job(&files[i]);
    struct source *source = arena_get(arena, sizeof *source);
    struct buffer text = {0};
    source->path = arena_print(arena, "%s/%s.yaml", folder, files[0].number);
    assert_int_equal(file_read(source->path, 1 << 16, &text), FILE_OK);
    source->text = arena_text(arena, text.data, text.length);
    source->length = text.length;
    buffer_release(&text);
    struct shop *shop = arena_get(arena, sizeof *shop);
    *shop = shop_default();
    struct diagnostics own = diagnostics_in(arena);
    const struct job *job = job_read(source, arena, &own);
    assert_int_equal(own.errors, 0);
    *findings = assess_job(job, shop, "test", arena, &own);
    *diagnostics = diagnostics_in(arena);
    return visits_follow(folder, *findings, arena, diagnostics);
}

#define FOLLOW(...)                                                                                \
    const struct visit_file files[] = {__VA_ARGS__};                                               \
    struct arena arena = {0};                                                                      \
    struct diagnostics diagnostics;                                                                \
    struct findings *findings;                                                                     \
    struct visits visits =                                                                         \
        follow(files, sizeof files / sizeof *files, &findings, &arena, &diagnostics);              \
    (void)visits

static void a_whole_chain_is_silent(void **state)
{
    (void)state;
    FOLLOW({"2040-003", "7", "2040-01-01", NULL, "2035-002"},
           {"2035-002", "7", "2035-01-01", "2035-02-01", "2030-001"},
           {"2030-001", "7", "2030-01-01", "2030-02-01", NULL});
    assert_int_equal(diagnostics.count, 0);
    assert_int_equal(visits.count, 2); /* both are what the job depends on */
    assert_non_null(findings->since);
    assert_string_equal(findings->since->earlier, "2035-002");
    arena_release(&arena);
}

static void one_warning(const struct diagnostics *diagnostics, enum diagnostic_code code,
                        const char *words)
{
    assert_int_equal(diagnostics->count, 1);
    assert_int_equal(diagnostics->items[0].code, code);
    assert_int_equal(diagnostics->items[0].severity, SEVERITY_WARNING);
    assert_true(diagnostics->items[0].at.line > 0);
    assert_non_null(strstr(diagnostics->items[0].text, words));
}

static void an_unknown_number(void **state)
{
    (void)state;
    FOLLOW({"2040-003", "7", "2040-01-01", NULL, "2035-404"});
    one_warning(&diagnostics, DIAGNOSTIC_VISIT_UNKNOWN, "no job '2035-404'");
    assert_null(findings->since);
    assert_int_equal(visits.count, 1); /* its coming is to be noticed */
    arena_release(&arena);
}

static void a_number_never_leads_out(void **state)
{
    (void)state;
    FOLLOW({"2040-003", "7", "2040-01-01", NULL, "../../etc/passwd"});
    one_warning(&diagnostics, DIAGNOSTIC_VISIT_UNKNOWN, "no job");
    assert_int_equal(visits.count, 0);
    arena_release(&arena);
}

static void loops(void **state)
{
    (void)state;
    {
        FOLLOW({"2040-003", "7", "2040-01-01", NULL, "2040-003"});
        one_warning(&diagnostics, DIAGNOSTIC_VISIT_LOOP, "continues itself");
        arena_release(&arena);
    }
    {
        FOLLOW({"2040-003", "7", "2040-01-01", NULL, "2035-002"},
               {"2035-002", "7", "2035-01-01", "2035-02-01", "2030-001"},
               {"2030-001", "7", "2030-01-01", "2030-02-01", "2035-002"});
        assert_true(diagnostics.count >= 1);
        assert_int_equal(diagnostics.items[diagnostics.count - 1].code, DIAGNOSTIC_VISIT_LOOP);
        arena_release(&arena);
    }
}

static void another_set(void **state)
{
    (void)state;
    FOLLOW({"2040-003", "7", "2040-01-01", NULL, "2035-002"},
           {"2035-002", "8", "2035-01-01", "2035-02-01", NULL});
    one_warning(&diagnostics, DIAGNOSTIC_VISIT_OTHER_SET, "serial '8'");
    arena_release(&arena);
}

static void dates_out_of_order(void **state)
{
    (void)state;
    FOLLOW({"2040-003", "7", "2035-01-15", NULL, "2035-002"},
           {"2035-002", "7", "2035-01-01", "2035-02-01", NULL});
    one_warning(&diagnostics, DIAGNOSTIC_VISIT_ORDER, "returned on 2035-02-01");
    arena_release(&arena);
}

static int set_up(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}
static int tear_down(void **state)
{
    (void)state;
    return folder_remove(folder) == FILE_OK ? 0 : -1;
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(a_whole_chain_is_silent),
                                       cmocka_unit_test(an_unknown_number),
                                       cmocka_unit_test(a_number_never_leads_out),
                                       cmocka_unit_test(loops),
                                       cmocka_unit_test(another_set),
                                       cmocka_unit_test(dates_out_of_order)};
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
