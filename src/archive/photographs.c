#include "archive/photographs.h"

#include "base/memory.h"
#include "write/picture_file.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

enum {
    LONGEST_SIDE_PX = 1600,
    LOGO_SIDE_PX = 600, /* of 12 mm on paper, 48 px on a screen */
    JPEG_QUALITY = 85,
    PHOTO_BYTES_MAX = 64 << 20,
};
static const uint64_t OPENED_PX_MAX = 60000000; /* a camera's 50 megapixels; above it is a bomb */

static char *real_path(const char *path)
{
    char *real = realpath(path, NULL);
    if (!real && errno == ENOMEM)
        memory_exhausted();
    return real;
}

/* Whether path, all links followed, lies inside the archive. */
static bool is_inside(const char *archive_folder, const char *path)
{
    char *folder = real_path(archive_folder), *file = real_path(path);
    size_t length = folder ? strlen(folder) : 0;
    bool inside = folder && file && strncmp(file, folder, length) == 0 &&
                  (file[length] == '/' || strcmp(folder, "/") == 0);
    free(folder);
    free(file);
    return inside;
}

static bool has_parent_step(const char *path)
{
    for (const char *at = path; (at = strstr(at, "..")); at += 2)
        if ((at == path || at[-1] == '/') && (at[2] == '/' || at[2] == '\0'))
            return true;
    return false;
}

const char *photograph_path(const struct job *job, const struct photo *photo, struct arena *arena)
{
    const char *slash = strrchr(job->source.path, '/');
    if (!slash)
        return photo->file;
    return arena_print(arena, "%.*s/%s", (int)(slash - job->source.path), job->source.path,
                       photo->file);
}

/* One picture to be read, and how to speak of it. */
struct named_picture {
    const char *what;            /* "photograph" */
    const char *file;            /* as the user named it */
    const char *path;            /* where that is */
    const struct source *source; /* NULL: no file names it */
    struct position at;
    unsigned longest_side_px;
};

static enum picture_status decode(const struct named_picture *named, const struct buffer *file,
                                  struct picture *picture)
{
    const struct picture_limits limits = {.longest_side_px = named->longest_side_px,
                                          .opened_px = OPENED_PX_MAX,
                                          .jpeg_quality = JPEG_QUALITY};
    return picture_decode((const unsigned char *)file->data, file->length, &limits, picture);
}

static bool read_one(const struct archive *archive, const struct named_picture *named,
                     struct picture *picture, struct diagnostics *diagnostics)
{
    if (named->file[0] == '/' || has_parent_step(named->file)) {
        diagnostic_add(diagnostics, named->source, named->at, DIAGNOSTIC_PHOTO_OUTSIDE,
                       "name it from the file's folder, without a leading / or ..",
                       "the %s '%s' is not inside the archive", named->what, named->file);
        return false;
    }
    struct buffer file = {0};
    enum file_status status = file_read(named->path, PHOTO_BYTES_MAX, &file);
    enum picture_status decoded = PICTURE_OK;
    bool good = false;
    if (status != FILE_OK)
        diagnostic_add(diagnostics, named->source, named->at, DIAGNOSTIC_PHOTO_UNREADABLE, NULL,
                       "cannot read the %s '%s': %s", named->what, named->file,
                       file_status_text(status));
    else if (!is_inside(archive->folder, named->path))
        diagnostic_add(diagnostics, named->source, named->at, DIAGNOSTIC_PHOTO_OUTSIDE,
                       "copy it into the archive", "the %s '%s' is not inside the archive",
                       named->what, named->file);
    else if ((decoded = decode(named, &file, picture)) != PICTURE_OK)
        diagnostic_add(diagnostics, named->source, named->at, DIAGNOSTIC_PHOTO_DAMAGED,
                       "save it again as JPEG or PNG from the original",
                       "cannot use the %s '%s': %s", named->what, named->file,
                       picture_status_text(decoded));
    else
        good = true;
    buffer_release(&file);
    return good;
}

static void read_logo(const struct archive *archive, struct photographs *photographs,
                      struct diagnostics *diagnostics)
{
    const char *file = archive->shop->logo;
    const struct named_picture logo = {
        .what = "logo of shop.yaml",
        .file = file,
        .path = arena_print(diagnostics->arena, "%s/%s", archive->folder, file),
        .longest_side_px = LOGO_SIDE_PX};
    photographs->has_logo = read_one(archive, &logo, &photographs->logo, diagnostics);
}

struct photographs photographs_read(const struct archive *archive, const struct job *job,
                                    struct arena *arena, struct diagnostics *diagnostics)
{
    struct photographs photographs = {
        .pictures = arena_array(arena, job->photo_count, sizeof(struct picture)),
        .usable = arena_array(arena, job->photo_count, sizeof(bool)),
        .count = job->photo_count,
    };
    for (size_t i = 0; i < job->photo_count; i++) {
        const struct photo *photo = &job->photos[i];
        if (!photo->file)
            continue;
        const struct named_picture named = {.what = "photograph",
                                            .file = photo->file,
                                            .path = photograph_path(job, photo, diagnostics->arena),
                                            .source = &job->source,
                                            .at = photo->at,
                                            .longest_side_px = LONGEST_SIDE_PX};
        photographs.usable[i] = read_one(archive, &named, &photographs.pictures[i], diagnostics);
    }
    if (archive->shop->logo)
        read_logo(archive, &photographs, diagnostics);
    return photographs;
}

/* Photographs keep their order in every copy, so each is found behind the one before. */
static size_t index_in_whole(const struct job *whole, const struct photo *photo, size_t from)
{
    for (size_t i = from; i < whole->photo_count; i++)
        if (whole->photos[i].at.line == photo->at.line &&
            whole->photos[i].at.column == photo->at.column)
            return i;
    return whole->photo_count;
}

/* The picture under a name of its copy, its file in the folder. */
static struct report_picture shown_as(const char *name, const struct picture *picture,
                                      struct folder_image *image, struct arena *arena)
{
    struct report_picture shown = {
        .file = arena_print(arena, "%s.%s", name, picture_file_extension(picture)),
        .width_px = picture->width_px,
        .height_px = picture->height_px,
        .picture = picture};
    picture_file_write(picture,
                       folder_image_add(image, arena_print(arena, "pictures/%s", shown.file)));
    return shown;
}

const struct report_picture *photographs_for_copy(const struct photographs *photographs,
                                                  const struct job *whole,
                                                  const struct job *filtered,
                                                  struct folder_image *image, struct arena *arena)
{
    struct report_picture *shown =
        arena_array(arena, filtered->photo_count + 1, sizeof(struct report_picture));
    size_t from = 0;
    for (size_t i = 0; i < filtered->photo_count; i++) {
        size_t index = index_in_whole(whole, &filtered->photos[i], from);
        if (index == whole->photo_count || !photographs->usable[index])
            continue;
        from = index + 1;
        shown[i] = shown_as(arena_print(arena, "%02zu", i + 1), &photographs->pictures[index],
                            image, arena);
    }
    if (photographs->has_logo)
        shown[filtered->photo_count] = shown_as("logo", &photographs->logo, image, arena);
    return shown;
}

void photographs_release(struct photographs *photographs)
{
    for (size_t i = 0; i < photographs->count; i++)
        if (photographs->usable[i])
            picture_release(&photographs->pictures[i]);
    if (photographs->has_logo)
        picture_release(&photographs->logo);
}
