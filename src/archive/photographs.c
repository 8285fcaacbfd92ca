#include "archive/photographs.h"

#include "write/picture_file.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

enum {
    LONGEST_SIDE_PX = 1600,
    JPEG_QUALITY = 85,
    PHOTO_BYTES_MAX = 64 << 20,
};
static const uint64_t OPENED_PX_MAX = 60000000; /* a camera's 50 megapixels; above it is a bomb */

/* Whether path, all links followed, lies inside the archive. */
static bool is_inside(const char *archive_folder, const char *path)
{
    char *folder = realpath(archive_folder, NULL), *file = realpath(path, NULL);
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

static bool read_one(const struct archive *archive, const struct job *job,
                     const struct photo *photo, struct picture *picture,
                     struct diagnostics *diagnostics)
{
    if (photo->file[0] == '/' || has_parent_step(photo->file)) {
        diagnostic_add(diagnostics, &job->source, photo->at, DIAGNOSTIC_PHOTO_OUTSIDE,
                       "name it from the job file's folder, without a leading / or ..",
                       "the photograph '%s' is not inside the archive", photo->file);
        return false;
    }
    const char *path = photograph_path(job, photo, diagnostics->arena);
    struct buffer file = {0};
    enum file_status status = file_read(path, PHOTO_BYTES_MAX, &file);
    bool good = false;
    if (status != FILE_OK) {
        diagnostic_add(diagnostics, &job->source, photo->at, DIAGNOSTIC_PHOTO_UNREADABLE, NULL,
                       "cannot read the photograph '%s': %s", photo->file,
                       file_status_text(status));
    } else if (!is_inside(archive->folder, path)) {
        diagnostic_add(diagnostics, &job->source, photo->at, DIAGNOSTIC_PHOTO_OUTSIDE,
                       "copy it into the archive", "the photograph '%s' is not inside the archive",
                       photo->file);
    } else {
        const struct picture_limits limits = {.longest_side_px = LONGEST_SIDE_PX,
                                              .opened_px = OPENED_PX_MAX,
                                              .jpeg_quality = JPEG_QUALITY,
                                              .file_bytes = PHOTO_BYTES_MAX};
        enum picture_status decoded =
            picture_decode((const unsigned char *)file.data, file.length, &limits, picture);
        good = decoded == PICTURE_OK;
        if (!good)
            diagnostic_add(diagnostics, &job->source, photo->at, DIAGNOSTIC_PHOTO_DAMAGED,
                           "save it again as JPEG or PNG from the original",
                           "cannot use the photograph '%s': %s", photo->file,
                           picture_status_text(decoded));
    }
    buffer_release(&file);
    return good;
}

struct photographs photographs_read(const struct archive *archive, const struct job *job,
                                    struct arena *arena, struct diagnostics *diagnostics)
{
    struct photographs photographs = {
        .pictures = arena_array(arena, job->photo_count, sizeof(struct picture)),
        .usable = arena_array(arena, job->photo_count, sizeof(bool)),
        .count = job->photo_count,
    };
    for (size_t i = 0; i < job->photo_count; i++)
        if (job->photos[i].file)
            photographs.usable[i] =
                read_one(archive, job, &job->photos[i], &photographs.pictures[i], diagnostics);
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

const struct report_picture *photographs_for_copy(const struct photographs *photographs,
                                                  const struct job *whole,
                                                  const struct job *filtered,
                                                  struct folder_image *image, struct arena *arena)
{
    struct report_picture *shown =
        arena_array(arena, filtered->photo_count, sizeof(struct report_picture));
    size_t from = 0;
    for (size_t i = 0; i < filtered->photo_count; i++) {
        size_t index = index_in_whole(whole, &filtered->photos[i], from);
        if (index == whole->photo_count || !photographs->usable[index])
            continue;
        from = index + 1;
        const struct picture *picture = &photographs->pictures[index];
        shown[i].file = arena_print(arena, "%02zu.%s", i + 1, picture_file_extension(picture));
        shown[i].width_px = picture->width_px;
        shown[i].height_px = picture->height_px;
        shown[i].picture = picture;
        picture_file_write(
            picture, folder_image_add(image, arena_print(arena, "pictures/%s", shown[i].file)));
    }
    return shown;
}

void photographs_release(struct photographs *photographs)
{
    for (size_t i = 0; i < photographs->count; i++)
        if (photographs->usable[i])
            picture_release(&photographs->pictures[i]);
}
