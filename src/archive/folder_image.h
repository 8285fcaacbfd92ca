/*
 * A folder to be: files by name with their bytes, made in memory, then laid down so that the folder
 * holds exactly these. An unchanged file is not touched.
 */
#ifndef ARCHIVE_FOLDER_IMAGE_H
#define ARCHIVE_FOLDER_IMAGE_H

#include "base/buffer.h"
#include "base/file.h"
#include "base/hash.h"

struct image_file {
    char *name; /* relative, "pictures/01.jpg" */
    struct buffer contents;
    bool hashed; /* the contents are complete and `hash` is theirs */
    struct hash hash;
};

/* {0} is empty and valid. */
struct folder_image {
    struct image_file *files;
    size_t count, capacity;
};

/* A new empty file; fill what is returned before the next call. name is copied. */
struct buffer *folder_image_add(struct folder_image *image, const char *name);

/* The hash of the file added last, now that it is complete; the manifest takes it from here. */
struct hash folder_image_hash_last(struct folder_image *image);

/* Append the lines of `sha256sum` for all files, sorted by name. */
void folder_image_manifest(struct folder_image *image, struct buffer *manifest);

/*
 * Write all files below `folder` and remove what else lies in it, but for sub-folders named in
 * `kept_folders` (NULL at the end; NULL: none). *failed is the file that could not be written.
 */
enum file_status folder_image_lay(struct folder_image *image, const char *folder,
                                  const char *const *kept_folders, struct buffer *failed);

void folder_image_release(struct folder_image *image);

#endif
