/* Faces and colour profile, opened once per process and then only read. */
#include "base/memory.h"
#include "write/pdf_text.h"

#include <stdlib.h>

static const char *const face_files[FACE_COUNT] = {
    [FACE_REGULAR] = "OpenSans-Regular.ttf",
    [FACE_SEMIBOLD] = "OpenSans-Semibold.ttf",
    [FACE_ITALIC] = "OpenSans-Italic.ttf",
    [FACE_SEMIBOLD_ITALIC] = "OpenSans-SemiboldItalic.ttf",
    [FACE_MONO] = "DejaVuSansMono.ttf",
    [FACE_FALLBACK] = "DejaVuSansCondensed.ttf",
    [FACE_FALLBACK_BOLD] = "DejaVuSansCondensed-Bold.ttf",
    [FACE_FALLBACK_OBLIQUE] = "DejaVuSansCondensed-Oblique.ttf",
};

static const struct position nowhere = {0, 0};

static bool open_faces(struct pdf_resources *resources, const char *folder,
                       struct diagnostics *diagnostics)
{
    for (int face = 0; face < FACE_COUNT; face++) {
        char *path = arena_print(diagnostics->arena, "%s/%s", folder, face_files[face]);
        enum font_status status = font_face_open(path, &resources->faces[face]);
        if (status == FONT_OK)
            continue;
        diagnostic_add(diagnostics, NULL, nowhere, DIAGNOSTIC_FONT_UNUSABLE, NULL,
                       "cannot use font '%s': %s", path, font_status_text(status));
        return false;
    }
    return true;
}

struct pdf_resources *pdf_resources_open(const char *folder, struct diagnostics *diagnostics)
{
    struct pdf_resources *resources = memory_get_cleared(1, sizeof *resources);
    bool good = open_faces(resources, folder, diagnostics);
    if (good) {
        pdf_text_prepare(resources);
        char *path = arena_print(diagnostics->arena, "%s/sRGB.icc", folder);
        good = colour_profile_read(path, &resources->srgb);
        if (!good)
            diagnostic_add(diagnostics, NULL, nowhere, DIAGNOSTIC_FONT_UNUSABLE, NULL,
                           "cannot use colour profile '%s': no RGB profile of ICC version 2", path);
    }
    if (!good) {
        pdf_resources_close(resources);
        return NULL;
    }
    return resources;
}

void pdf_resources_close(struct pdf_resources *resources)
{
    if (!resources)
        return;
    for (int face = 0; face < FACE_COUNT; face++)
        font_face_close(resources->faces[face]);
    buffer_release(&resources->srgb.deflated);
    free(resources);
}
