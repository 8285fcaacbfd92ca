#include "archive/folder_image.h"

#include "base/memory.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

struct buffer *folder_image_add(struct folder_image *image, const char *name)
{
    if (image->count == image->capacity) {
        image->capacity = image->capacity ? image->capacity * 2 : 16;
        image->files = memory_resize(image->files, image->capacity * sizeof *image->files);
    }
    struct image_file *file = &image->files[image->count++];
    size_t length = strlen(name) + 1;
    file->name = memcpy(memory_get(length), name, length);
    file->contents = (struct buffer){0};
    file->hashed = false;
    return &file->contents;
}

static struct hash hash_once(struct image_file *file)
{
    if (!file->hashed)
        file->hash = hash_of(file->contents.data, file->contents.length);
    file->hashed = true;
    return file->hash;
}

struct hash folder_image_hash_last(struct folder_image *image)
{
    return hash_once(&image->files[image->count - 1]);
}

static int by_name(const void *a, const void *b)
{
    return strcmp(((const struct image_file *)a)->name, ((const struct image_file *)b)->name);
}

void folder_image_manifest(struct folder_image *image, struct buffer *manifest)
{
    if (image->count)
        qsort(image->files, image->count, sizeof *image->files, by_name);
    for (size_t i = 0; i < image->count; i++) {
        struct image_file *file = &image->files[i];
        struct hash hash = hash_once(file);
        char text[HASH_TEXT_BYTES];
        hash_text(&hash, text);
        buffer_print(manifest, "%s  %s\n", text, file->name);
    }
}

static bool is_wanted(const struct folder_image *image, const char *relative)
{
    size_t length = strlen(relative);
    for (size_t i = 0; i < image->count; i++) {
        const char *name = image->files[i].name;
        if (strncmp(name, relative, length) == 0 && (name[length] == '\0' || name[length] == '/'))
            return true;
    }
    return false;
}

static bool is_kept(const char *const *kept, const char *name)
{
    for (; kept && *kept; kept++)
        if (strcmp(*kept, name) == 0)
            return true;
    return false;
}

static enum file_status remove_one(const char *path)
{
    struct stat about;
    if (lstat(path, &about) != 0)
        return FILE_OK;
    if (S_ISDIR(about.st_mode))
        return folder_remove(path);
    return unlink(path) == 0 ? FILE_OK : FILE_FAILED;
}

/* Remove what is not wanted in `folder`/`below` ("" or "pictures/"). */
static enum file_status remove_others(const struct folder_image *image, const char *folder,
                                      const char *below, const char *const *kept)
{
    struct buffer path = {0};
    buffer_print(&path, "%s/%s", folder, below);
    struct arena arena = {0};
    struct folder_names found;
    enum file_status status = folder_list(buffer_string(&path), &arena, &found);
    status = status == FILE_MISSING ? FILE_OK : status; /* a copy without pictures/ */
    for (size_t i = 0; i < found.count && status == FILE_OK; i++) {
        if (!*below && is_kept(kept, found.names[i]))
            continue;
        struct buffer relative = {0}, whole = {0};
        buffer_print(&relative, "%s%s", below, found.names[i]);
        buffer_print(&whole, "%s/%s", folder, buffer_string(&relative));
        if (!is_wanted(image, buffer_string(&relative)))
            status = remove_one(buffer_string(&whole));
        buffer_release(&relative);
        buffer_release(&whole);
    }
    arena_release(&arena);
    buffer_release(&path);
    return status;
}

enum file_status folder_image_lay(struct folder_image *image, const char *folder,
                                  const char *const *kept_folders, struct buffer *failed)
{
    enum file_status status = FILE_OK;
    struct buffer path = {0}, last_folder = {0};
    for (size_t i = 0; i < image->count && status == FILE_OK; i++) {
        struct image_file *file = &image->files[i];
        buffer_clear(&path);
        buffer_print(&path, "%s/%s", folder, file->name);
        const char *name = buffer_string(&path);
        size_t folder_length = (size_t)(strrchr(name, '/') - name);
        if (!last_folder.data || last_folder.length != folder_length ||
            memcmp(last_folder.data, name, folder_length) != 0) {
            buffer_clear(&last_folder);
            buffer_append(&last_folder, name, folder_length);
            status = folder_make(buffer_string(&last_folder));
        }
        if (status == FILE_OK)
            status = file_write(name, file->contents.data, file->contents.length, NULL);
    }
    if (status == FILE_OK)
        status = remove_others(image, folder, "", kept_folders);
    if (status == FILE_OK && is_wanted(image, "pictures"))
        status = remove_others(image, folder, "pictures/", NULL);
    if (status != FILE_OK && failed)
        buffer_append(failed, path.data, path.length);
    buffer_release(&path);
    buffer_release(&last_folder);
    return status;
}

void folder_image_release(struct folder_image *image)
{
    for (size_t i = 0; i < image->count; i++) {
        free(image->files[i].name);
        buffer_release(&image->files[i].contents);
    }
    free(image->files);
    *image = (struct folder_image){0};
}
