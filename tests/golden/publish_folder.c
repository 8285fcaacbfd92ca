/* publish_folder SHARE OUT FOLDER: publish the archive FOLDER into OUT and print what is said about
   it, and its codes; with SHARE holding templates/ and fonts/. */
#include "archive/archive.h"
#include "archive/publish.h"

#include <stdio.h>

struct told {
    bool code[DIAGNOSTIC_COUNT];
};

static void tell(struct told *told, const struct diagnostics *diagnostics)
{
    struct buffer out = {0};
    diagnostics_format(diagnostics, &out);
    fwrite(out.data, 1, out.length, stdout);
    buffer_release(&out);
    for (size_t i = 0; i < diagnostics->count; i++)
        told->code[diagnostics->items[i].code] = true;
}

static void tell_job(const struct publish_event *event, void *context)
{
    tell(context, event->diagnostics);
}

static enum file_status publish_into(const char *output, struct archive *archive,
                                     struct arena *arena, struct told *told)
{
    struct publish_request request = {
        .output = output, .threads = 1, .listener = tell_job, .listener_context = told};
    struct publish_result result = publish(archive, &request, arena);
    printf("%zu jobs, %zu left out for mistakes\n", result.jobs, result.broken);
    return result.failure;
}

int main(int count, char **words)
{
    if (count != 4)
        return 2;
    struct arena arena = {0};
    struct archive archive = {0};
    struct told told = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    enum file_status status = FILE_OK;
    if (!archive_open(&archive, words[3], words[1], &arena, &diagnostics) ||
        !archive_open_pdf(&archive, &arena, &diagnostics))
        printf("cannot be opened\n");
    tell(&told, &diagnostics);
    if (archive.pdf) {
        status = publish_into(words[2], &archive, &arena, &told);
        archive_close(&archive);
    }
    printf("codes:");
    for (int code = 0; code < DIAGNOSTIC_COUNT; code++) {
        if (told.code[code])
            printf(" %s", diagnostic_code_text((enum diagnostic_code)code));
    }
    printf("\n");
    arena_release(&arena);
    return status == FILE_OK ? 0 : 3;
}
