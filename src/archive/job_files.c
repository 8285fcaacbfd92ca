#include "archive/job_files.h"

#include "archive/photographs.h"
#include "archive/summary.h"
#include "archive/visits.h"
#include "write/json.h"

#include <string.h>

static const char *read_text(const char *path, struct source *source, struct arena *arena,
                             struct diagnostics *diagnostics)
{
    struct buffer contents = {0};
    bool from_stdin = strcmp(path, "-") == 0;
    enum file_status status = file_read(from_stdin ? "/dev/stdin" : path, JOB_BYTES_MAX, &contents);
    const char *text = NULL;
    if (status == FILE_OK) {
        text = arena_text(arena, contents.data, contents.length);
        source->length = contents.length;
    } else {
        diagnostic_add(diagnostics, source, (struct position){0},
                       status == FILE_LARGE ? DIAGNOSTIC_FILE_TOO_LARGE
                                            : DIAGNOSTIC_FILE_UNREADABLE,
                       NULL, "cannot read it: %s", file_status_text(status));
    }
    buffer_release(&contents);
    return text;
}

struct opened_job job_open(const struct archive *archive, const char *path, struct arena *arena,
                           struct diagnostics *diagnostics)
{
    struct source *source = arena_get(arena, sizeof *source);
    source->path = arena_copy(arena, path);
    source->text = read_text(path, source, arena, diagnostics);
    struct opened_job opened = {0};
    /* An unreadable file is told once, not as an empty one besides. */
    struct diagnostics *silent = arena_get(arena, sizeof *silent);
    *silent = diagnostics_in(arena);
    opened.job = job_read(source, arena, source->text ? diagnostics : silent);
    /* What an assessment warns of hangs on what the file says: of a file with mistakes it would
       tell each of them again by its consequences. */
    struct diagnostics *of_findings = diagnostics->errors ? silent : diagnostics;
    opened.findings = assess_job(opened.job, archive->shop, GRIDLEAK_VERSION, arena, of_findings);
    opened.findings->diagnostics = diagnostics;
    struct visits visits = visits_follow(archive->folder, opened.findings, arena, diagnostics);
    opened.visit_paths = visits.paths;
    opened.visit_count = visits.count;
    report_explain(opened.findings, templates_words(archive->templates), arena);
    return opened;
}

/* What making one folder of copies needs to know. */
struct copy_work {
    const struct archive *archive;
    const struct opened_job *opened;
    const struct photographs *photographs;
    struct arena *arena;
    struct diagnostics *diagnostics;
};

static void add_plots(const struct document *document, const char *accent,
                      struct folder_image *image)
{
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        if (!exhibit || exhibit->kind != EXHIBIT_PLOT)
            continue;
        struct buffer name = {0};
        buffer_print(&name, "pictures/%s.svg", exhibit->id);
        svg_write_file(exhibit, accent, folder_image_add(image, buffer_string(&name)));
        buffer_release(&name);
    }
}

/* What writing a PDF tells, of the job's file; what another of its documents told is not said
 * again. */
static void tell_once(const struct copy_work *work, const struct diagnostics *told)
{
    for (size_t i = 0; i < told->count; i++) {
        const struct diagnostic *item = &told->items[i];
        bool known = false;
        for (size_t k = 0; k < work->diagnostics->count && !known; k++)
            known = work->diagnostics->items[k].code == item->code &&
                    strcmp(work->diagnostics->items[k].text, item->text) == 0;
        if (!known)
            diagnostic_add(work->diagnostics, &work->opened->job->source, item->at, item->code,
                           item->hint, "%s", item->text);
    }
}

/* One document as files stem.html, stem.pdf and, for records, stem.md with its plots. */
static bool add_document(const struct copy_work *work, const struct document *document,
                         const char *stem, struct folder_image *image)
{
    const struct archive *archive = work->archive;
    html_write(document, archive->style, archive->page_template,
               folder_image_add(image, arena_print(work->arena, "%s.html", stem)));
    struct diagnostics told = diagnostics_in(work->arena);
    bool good = pdf_write(document, archive->pdf, JOB_DEFLATE_LEVEL,
                          folder_image_add(image, arena_print(work->arena, "%s.pdf", stem)), &told);
    tell_once(work, &told);
    if (document->kind == DOCUMENT_RECORD) {
        markdown_write(document, folder_image_add(image, arena_print(work->arena, "%s.md", stem)));
        add_plots(document, archive->shop->accent, image);
    }
    return good;
}

/* The diagnostics so far, each file by its name alone: what is published does not depend on where
   the archive lies, nor on how its folder was typed. */
static const struct diagnostics *placeless(const struct copy_work *work)
{
    struct diagnostics *list = arena_get(work->arena, sizeof *list);
    *list = *work->diagnostics;
    list->items = arena_array(work->arena, list->count + 1, sizeof *list->items);
    for (size_t i = 0; i < list->count; i++) {
        list->items[i] = work->diagnostics->items[i];
        const char *path = list->items[i].path, *slash = path ? strrchr(path, '/') : NULL;
        list->items[i].path = slash ? slash + 1 : path;
    }
    return list;
}

static bool add_record(const struct copy_work *work, enum copy copy, const char *stem,
                       struct folder_image *image)
{
    struct findings *findings = findings_for_copy(work->opened->findings, copy, work->arena);
    findings->diagnostics = placeless(work);
    json_write_findings(findings, folder_image_add(image, "findings.json"));
    struct hash hash = folder_image_hash_last(image);
    char *fingerprint = arena_get(work->arena, HASH_TEXT_BYTES);
    hash_text(&hash, fingerprint);
    findings->fingerprint = fingerprint;
    const struct report_picture *pictures = photographs_for_copy(
        work->photographs, work->opened->job, findings->job, image, work->arena);
    struct document *document = report_compose(findings, DOCUMENT_RECORD, work->archive->templates,
                                               pictures, work->arena, work->diagnostics);
    if (!document)
        return false;
    bool good = add_document(work, document, stem, image);
    document_release(document);
    return good;
}

static bool add_sheet(const struct copy_work *work, struct folder_image *image)
{
    struct document *document =
        report_compose(work->opened->findings, DOCUMENT_SHEET, work->archive->templates, NULL,
                       work->arena, work->diagnostics);
    if (!document)
        return false;
    bool good = add_document(work, document, "sheet", image);
    document_release(document);
    return good;
}

/* The folder that leaves the house: client/ or sale/. */
static enum file_status lay_copy(const struct copy_work *work, enum copy copy, const char *folder,
                                 struct buffer *failed, bool *good)
{
    struct folder_image image = {0};
    enum file_status status = FILE_OK;
    *good = add_record(work, copy, work->opened->job->number, &image);
    if (*good) {
        struct buffer manifest = {0};
        folder_image_manifest(&image, &manifest);
        struct buffer *file = folder_image_add(&image, "manifest.sha256");
        buffer_append(file, manifest.data, manifest.length);
        buffer_release(&manifest);
        status = folder_image_lay(&image, folder, NULL, failed);
    }
    folder_image_release(&image);
    return status;
}

static enum file_status lay_shop(const struct copy_work *work, const char *folder,
                                 struct buffer *failed)
{
    static const char *const kept[] = {"client", "sale", NULL};
    struct folder_image image = {0};
    enum file_status status = FILE_OK;
    if (add_record(work, COPY_SHOP, "shop", &image) && add_sheet(work, &image)) {
        summary_write(work->opened->findings, folder_image_add(&image, "summary.json"));
        status = folder_image_lay(&image, folder, kept, failed);
    }
    folder_image_release(&image);
    return status;
}

static enum file_status publish_whole(const struct copy_work *work, const char *folder,
                                      struct buffer *failed)
{
    const struct opened_job *opened = work->opened;
    const struct findings *findings = opened->findings;
    const char *client = arena_print(work->arena, "%s/client", folder);
    const char *sale = arena_print(work->arena, "%s/sale", folder);
    bool finished = !findings->in_progress, good = true;
    bool for_sale =
        finished && report_sale_copy_is_clean(opened->job, work->arena, work->diagnostics);
    enum file_status status = FILE_OK;
    if (finished)
        status = lay_copy(work, COPY_CLIENT, client, failed, &good);
    if (status == FILE_OK && good && for_sale)
        status = lay_copy(work, COPY_SALE, sale, failed, &good);
    if (status == FILE_OK && good)
        status = lay_shop(work, folder, failed);
    if (status == FILE_OK && !finished)
        status = folder_remove(client);
    if (status == FILE_OK && !for_sale)
        status = folder_remove(sale);
    return status;
}

static enum file_status lay_broken(const char *folder, const char *name,
                                   const struct diagnostics *diagnostics, struct buffer *failed)
{
    struct buffer summary = {0}, path = {0};
    summary_write_broken(name, diagnostics, &summary);
    buffer_print(&path, "%s/summary.json", folder);
    enum file_status status = folder_make(folder);
    if (status == FILE_OK)
        status = file_write(buffer_string(&path), summary.data, summary.length, NULL);
    if (status != FILE_OK)
        buffer_append(failed, path.data, path.length);
    buffer_release(&summary);
    buffer_release(&path);
    return status;
}

const char *job_name_of(const char *path, struct arena *arena)
{
    const char *slash = strrchr(path, '/');
    const char *name = slash ? slash + 1 : path;
    size_t length = strlen(name);
    if (length > 5 && strcmp(name + length - 5, ".yaml") == 0)
        length -= 5;
    return arena_text(arena, name, length);
}

static void list_inputs(const struct job_files_request *request, const struct opened_job *opened,
                        struct job_files_result *result)
{
    const struct job *job = opened->job;
    result->inputs = arena_array(request->arena, job->photo_count + opened->visit_count + 1,
                                 sizeof *result->inputs);
    result->inputs[result->input_count++] = request->path;
    for (size_t i = 0; i < job->photo_count; i++)
        if (job->photos[i].file)
            result->inputs[result->input_count++] =
                photograph_path(job, &job->photos[i], request->arena);
    for (size_t i = 0; i < opened->visit_count; i++)
        result->inputs[result->input_count++] = opened->visit_paths[i];
}

struct job_files_result job_files_publish(const struct job_files_request *request)
{
    struct job_files_result result = {0};
    struct diagnostics *diagnostics = request->diagnostics;
    struct buffer failed = {0};
    const char *name = job_name_of(request->path, request->arena);
    const char *folder = arena_print(request->arena, "%s/jobs/%s", request->output, name);
    struct opened_job opened =
        job_open(request->archive, request->path, request->arena, diagnostics);
    struct photographs photographs = {0};
    list_inputs(request, &opened, &result);
    if (diagnostics->errors == 0)
        photographs = photographs_read(request->archive, opened.job, request->arena, diagnostics);
    if (diagnostics->errors == 0) {
        struct copy_work work = {request->archive, &opened, &photographs, request->arena,
                                 diagnostics};
        result.failure = publish_whole(&work, folder, &failed);
    }
    photographs_release(&photographs);
    if (diagnostics->errors != 0 && result.failure == FILE_OK)
        result.failure = lay_broken(folder, name, diagnostics, &failed);
    result.failed_path = arena_text(request->arena, failed.data, failed.length);
    buffer_release(&failed);
    return result;
}
