/*
 * Photographs that cannot be used, and job numbers that differ in case only: what is told, and that
 * nothing but a summary is written.
 */
#include "archive/job_files.h"
#include "archive/publish.h"
#include "kit.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static char share_folder[4096];
static char folder[] = "/tmp/gridleak-job-files-XXXXXX";

static const char *in_folder(struct arena *arena, const char *name)
{
    return arena_print(arena, "%s/%s", folder, name);
}

static void put(struct arena *arena, const char *name, const void *bytes, size_t length)
{
    assert_int_equal(file_write(in_folder(arena, name), bytes, length, NULL), FILE_OK);
}

static void put_text(struct arena *arena, const char *name, const char *text)
{
    put(arena, name, text, strlen(text));
}

/* What a publish told: the codes of all jobs. */
struct told {
    bool code[DIAGNOSTIC_COUNT];
    size_t jobs;
};

static void note_told(const struct publish_event *event, void *context)
{
    struct told *told = context;
    told->jobs++;
    for (size_t i = 0; i < event->diagnostics->count; i++)
        told->code[event->diagnostics->items[i].code] = true;
}

/* The whole folder, or these jobs of it. */
static struct told publish_these(struct arena *arena, const char *const *paths, size_t count)
{
    struct archive archive;
    struct told told = {0};
    struct diagnostics diagnostics = diagnostics_in(arena);
    assert_true(archive_open(&archive, folder, share_folder, arena, &diagnostics));
    assert_true(archive_open_pdf(&archive, arena, &diagnostics));
    struct publish_request request = {.output = in_folder(arena, "out"),
                                      .threads = 2,
                                      .job_paths = paths,
                                      .job_path_count = count,
                                      .listener = note_told,
                                      .listener_context = &told};
    struct publish_result result = publish(&archive, &request, arena);
    assert_int_equal(result.failure, FILE_OK);
    archive_close(&archive);
    return told;
}

static struct told publish_folder(struct arena *arena)
{
    return publish_these(arena, NULL, 0);
}

static bool is_there(struct arena *arena, const char *name)
{
    return access(in_folder(arena, name), F_OK) == 0;
}

/* A job with this photograph is told so, and nothing but its summary is written. */
static void refuse_photograph(const char *file, enum diagnostic_code code)
{
    struct arena arena = {0};
    put_text(&arena, "p1.yaml",
             arena_print(&arena,
                         "job: p1\nset:\n  maker: M\nreceived: 2031-02-03\nphotos:\n"
                         "  - file: %s\n    caption: c\n",
                         file));
    struct told told = publish_folder(&arena);
    assert_int_equal(told.jobs, 1);
    assert_true(told.code[code]);
    assert_true(is_there(&arena, "out/jobs/p1/summary.json"));
    assert_false(is_there(&arena, "out/jobs/p1/shop.html"));
    unlink(in_folder(&arena, "p1.yaml"));
    arena_release(&arena);
}

static void photographs_that_cannot_be_used(void **state)
{
    (void)state;
    struct arena arena = {0};
    put_text(&arena, "text.jpg", "no picture");
    put(&arena, "cut.png", "\x89PNG\r\n\x1a\n\0\0\0\rIHDR", 16);
    assert_int_equal(symlink("/etc/hostname", in_folder(&arena, "link.jpg")), 0);
    refuse_photograph("none.jpg", DIAGNOSTIC_PHOTO_UNREADABLE);
    refuse_photograph("../none.jpg", DIAGNOSTIC_PHOTO_OUTSIDE);
    refuse_photograph("a/../../none.jpg", DIAGNOSTIC_PHOTO_OUTSIDE);
    refuse_photograph("/etc/hostname", DIAGNOSTIC_PHOTO_OUTSIDE);
    refuse_photograph("link.jpg", DIAGNOSTIC_PHOTO_OUTSIDE);
    refuse_photograph("text.jpg", DIAGNOSTIC_PHOTO_DAMAGED);
    refuse_photograph("cut.png", DIAGNOSTIC_PHOTO_DAMAGED);
    arena_release(&arena);
}

static void numbers_that_differ_in_case_only(void **state)
{
    (void)state;
    struct arena arena = {0};
    static const char *const numbers[] = {"2031-a", "2031-A"};
    for (size_t i = 0; i < 2; i++)
        put_text(
            &arena, arena_print(&arena, "%s.yaml", numbers[i]),
            arena_print(&arena, "job: %s\nset:\n  maker: M\nreceived: 2031-02-03\n", numbers[i]));
    struct told told = publish_folder(&arena);
    assert_int_equal(told.jobs, 2);
    assert_true(told.code[DIAGNOSTIC_JOB_CASE_TWIN]);
    assert_false(is_there(&arena, "out/jobs/2031-a/shop.html"));
    assert_false(is_there(&arena, "out/jobs/2031-A/shop.html"));
    arena_release(&arena);
}

/* Two threads would write into one folder. */
static void one_job_named_twice(void **state)
{
    (void)state;
    struct arena arena = {0};
    put_text(&arena, "2032-001.yaml", "job: 2032-001\nset:\n  maker: M\nreceived: 2032-02-03\n");
    const char *path = in_folder(&arena, "2032-001.yaml");
    struct told told = publish_these(&arena, (const char *[]){path, path}, 2);
    assert_int_equal(told.jobs, 2);
    assert_true(told.code[DIAGNOSTIC_JOB_CASE_TWIN]);
    assert_false(is_there(&arena, "out/jobs/2032-001"));
    told = publish_these(&arena, &path, 1);
    assert_false(told.code[DIAGNOSTIC_JOB_CASE_TWIN]);
    assert_true(is_there(&arena, "out/jobs/2032-001/summary.json"));
    unlink(path);
    arena_release(&arena);
}

static int begin(void **state)
{
    (void)state;
    struct arena arena = {0};
    if (!mkdtemp(folder))
        return 1;
    put_text(&arena, "shop.yaml", "name: S\n");
    arena_release(&arena);
    return 0;
}

static int end(void **state)
{
    (void)state;
    return folder_remove(folder) == FILE_OK ? 0 : 1;
}

int main(int count, char **words)
{
    /* Of BUILD/tests/unit/archive/x_test: BUILD/share/gridleak. */
    const char *tests = count > 0 ? strstr(words[0], "/tests/unit/") : NULL;
    snprintf(share_folder, sizeof share_folder, "%.*s/share/gridleak",
             tests ? (int)(tests - words[0]) : 1, tests ? words[0] : ".");
    const struct CMUnitTest all[] = {
        cmocka_unit_test(photographs_that_cannot_be_used),
        cmocka_unit_test(numbers_that_differ_in_case_only),
        cmocka_unit_test(one_job_named_twice),
    };
    return cmocka_run_group_tests(all, begin, end);
}
