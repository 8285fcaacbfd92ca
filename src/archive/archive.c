#include "archive/archive.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static const char usual_share[] = "/usr/local/share/gridleak";

const char *archive_share_folder(struct arena *arena)
{
    char program[4096];
    ssize_t length = readlink("/proc/self/exe", program, sizeof program - 1);
    if (length > 0) {
        program[length] = '\0';
        char *slash = strrchr(program, '/');
        *(slash ? slash : program) = '\0';
        /* in the build folder, then as `make install` lays it out under any prefix */
        static const char *const beside[] = {"share/gridleak", "../share/gridleak"};
        for (size_t i = 0; i < sizeof beside / sizeof *beside; i++) {
            const char *folder = arena_print(arena, "%s/%s", program, beside[i]);
            if (folder_exists(folder))
                return folder;
        }
    }
    return folder_exists(usual_share) ? usual_share : NULL;
}

const char *archive_folder_of(const char *job_path, struct arena *arena)
{
    const char *slash = strrchr(job_path, '/');
    const char *own = !slash              ? "."
                      : slash == job_path ? "/"
                                          : arena_text(arena, job_path, (size_t)(slash - job_path));
    char *whole = realpath(own, NULL);
    if (!whole)
        return own;
    const char *folder = own;
    size_t levels = 0;
    for (char *end = whole + strlen(whole);; levels++) {
        *end = '\0';
        const char *candidate = arena_print(arena, "%s/shop.yaml", *whole ? whole : "");
        if (access(candidate, F_OK) == 0) {
            /* Name it from where the user stands when it is the file's own folder. */
            folder = levels == 0 ? own : arena_copy(arena, *whole ? whole : "/");
            break;
        }
        end = strrchr(whole, '/');
        if (!end)
            break;
    }
    free(whole);
    return folder;
}

bool archive_is_at(const char *folder)
{
    struct buffer path = {0};
    buffer_print(&path, "%s/shop.yaml", folder);
    bool there = access(buffer_string(&path), F_OK) == 0;
    buffer_release(&path);
    return there;
}

static const struct shop *read_shop(const char *folder, struct arena *arena,
                                    struct diagnostics *diagnostics)
{
    const char *path = arena_print(arena, "%s/shop.yaml", folder);
    struct buffer contents = {0};
    struct source *source = arena_get(arena, sizeof *source);
    source->path = path;
    enum file_status status = file_read(path, JOB_BYTES_MAX, &contents);
    if (status == FILE_OK) {
        source->length = contents.length;
        source->text = arena_text(arena, contents.data, contents.length);
    } else if (status != FILE_MISSING) {
        diagnostic_add(diagnostics, source, (struct position){0},
                       status == FILE_LARGE ? DIAGNOSTIC_FILE_TOO_LARGE
                                            : DIAGNOSTIC_FILE_UNREADABLE,
                       NULL, "cannot read it: %s", file_status_text(status));
    }
    buffer_release(&contents);
    return shop_read(source, arena, diagnostics);
}

bool archive_open(struct archive *archive, const char *folder, const char *share_folder,
                  struct arena *arena, struct diagnostics *diagnostics)
{
    size_t errors_before = diagnostics->errors;
    *archive = (struct archive){.folder = folder, .share_folder = share_folder};
    archive->shop = read_shop(folder, arena, diagnostics);
    archive->templates = templates_open(folder, share_folder, archive->shop, arena, diagnostics);
    if (archive->templates) {
        archive->style = templates_text(archive->templates, "style.css", diagnostics);
        archive->page_template = templates_text(archive->templates, "page.html", diagnostics);
    }
    if (archive->page_template) {
        struct source *page = arena_get(arena, sizeof *page);
        *page =
            (struct source){"page.html", archive->page_template, strlen(archive->page_template)};
        html_check_page(page, arena, diagnostics);
    }
    return diagnostics->errors == errors_before && archive->templates;
}

bool archive_open_pdf(struct archive *archive, struct arena *arena, struct diagnostics *diagnostics)
{
    if (!archive->pdf)
        archive->pdf =
            pdf_resources_open(arena_print(arena, "%s/fonts", archive->share_folder), diagnostics);
    return archive->pdf != NULL;
}

void archive_close(struct archive *archive)
{
    if (archive->pdf)
        pdf_resources_close(archive->pdf);
    archive->pdf = NULL;
}

/* The length of the job's name in a file name; 0: no job file. */
static size_t job_name_length(const char *file_name)
{
    size_t length = strlen(file_name);
    bool is_job = length > 5 && strcmp(file_name + length - 5, ".yaml") == 0 &&
                  file_name[0] != '.' && strcmp(file_name, "shop.yaml") != 0;
    return is_job ? length - 5 : 0;
}

static int by_name(const void *a, const void *b)
{
    return strcmp(*(const char *const *)a, *(const char *const *)b);
}

enum file_status archive_job_names(const char *folder, struct arena *arena, struct job_names *names)
{
    struct folder_names found;
    enum file_status status = folder_list(folder, arena, &found);
    *names = (struct job_names){arena_array(arena, found.count, sizeof *names->names), 0};
    for (size_t i = 0; i < found.count; i++) {
        size_t length = job_name_length(found.names[i]);
        if (length)
            names->names[names->count++] = arena_text(arena, found.names[i], length);
    }
    if (names->count) /* `a` before `a-1`, which their files do not stand in */
        qsort(names->names, names->count, sizeof *names->names, by_name);
    return status;
}
