/*
 * For the tests of PDFs: faces and pictures of the build that a test program belongs to.
 */
#ifndef TESTS_PDF_KIT_H
#define TESTS_PDF_KIT_H

#include "base/file.h"
#include "write/picture.h"
#include "write/writer.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Of BUILD/tests/unit/write/x_test: BUILD/share/gridleak/fonts, where make copies the fonts.
   Belongs to the caller (free). */
static inline char *pdf_fonts_folder(const char *program)
{
    const char *tests = strstr(program, "/tests/unit/");
    size_t length = tests ? (size_t)(tests - program) : 0;
    char *folder = malloc(length + 64);
    sprintf(folder, "%.*s%sshare/gridleak/fonts", (int)length, program, tests ? "/" : "build/");
    return folder;
}

/* Faces and profile for a test program; says why there are none, and ends it. pdf_resources_close.
 */
static inline struct pdf_resources *pdf_resources_of(const char *program)
{
    struct arena arena = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    char *folder = pdf_fonts_folder(program);
    struct pdf_resources *resources = pdf_resources_open(folder, &diagnostics);
    free(folder);
    if (!resources) {
        fprintf(stderr, "%s\n", diagnostics.items[0].text);
        exit(1);
    }
    arena_release(&arena);
    return resources;
}

static inline struct picture pdf_picture(const char *path)
{
    const struct picture_limits limits = {1600, 40000000, 85};
    struct picture picture = {0};
    struct buffer file = {0};
    enum file_status read = file_read(path, 40000000, &file);
    enum picture_status status =
        picture_decode((const unsigned char *)file.data, file.length, &limits, &picture);
    buffer_release(&file);
    if (read != FILE_OK || status != PICTURE_OK) {
        fprintf(stderr, "%s: %s\n", path,
                read != FILE_OK ? file_status_text(read) : picture_status_text(status));
        exit(1);
    }
    return picture;
}

#endif
