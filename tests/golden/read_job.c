/* read_job FILE...: read each job (or shop.yaml) and print its diagnostics, sorted, and their
   codes. read_job --manual | --schema: what the field tables say. read_job --start
   [LIKE]: a new job file. */
#include "base/file.h"
#include "job/job.h"
#include "job/manual.h"
#include "job/schema.h"
#include "job/shop.h"
#include "job/start.h"

#include <stdbool.h>
#include <stdio.h>
#include <string.h>

enum { LIMIT_BYTES = 2 * JOB_BYTES_MAX }; /* more than a job may have, to see what is said */

/* The stable codes, which the text does not show. */
static void print_codes(const struct diagnostics *diagnostics)
{
    bool seen[DIAGNOSTIC_COUNT] = {false};
    for (size_t i = 0; i < diagnostics->count; i++)
        seen[diagnostics->items[i].code] = true;
    printf("codes:");
    for (int code = 0; code < DIAGNOSTIC_COUNT; code++) {
        if (seen[code])
            printf(" %s", diagnostic_code_text((enum diagnostic_code)code));
    }
    printf("\n");
}

static void read_one(const char *path)
{
    struct arena arena = {0};
    struct buffer text = {0}, out = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {.path = path};
    const char *slash = strrchr(path, '/');
    enum file_status status = file_read(path, LIMIT_BYTES, &text);
    if (status == FILE_OK) {
        source.text = buffer_string(&text);
        source.length = text.length;
    }
    if (strncmp(slash ? slash + 1 : path, "shop", 4) == 0)
        shop_read(&source, &arena, &diagnostics);
    else
        job_read(&source, &arena, &diagnostics);
    diagnostics_sort(&diagnostics);
    diagnostics_format(&diagnostics, &out);
    fwrite(out.data, 1, out.length, stdout);
    print_codes(&diagnostics);
    buffer_release(&out);
    buffer_release(&text);
    arena_release(&arena);
}

static void print_start(const char *like)
{
    struct arena arena = {0};
    struct buffer text = {0}, out = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {.path = like};
    struct start start = {"2032-007", "2032-04-11", like ? &source : NULL};
    if (like && file_read(like, LIMIT_BYTES, &text) == FILE_OK) {
        source.text = buffer_string(&text);
        source.length = text.length;
    }
    start_write(&out, &start, &arena, &diagnostics);
    fwrite(out.data, 1, out.length, stdout);
    buffer_release(&out);
    buffer_release(&text);
    arena_release(&arena);
}

static void print_tables(void write(struct buffer *))
{
    struct buffer out = {0};
    write(&out);
    fwrite(out.data, 1, out.length, stdout);
    buffer_release(&out);
}

int main(int count, char **words)
{
    const char *option = count > 1 ? words[1] : "";
    if (strcmp(option, "--manual") == 0)
        print_tables(manual_write);
    else if (strcmp(option, "--schema") == 0)
        print_tables(schema_write);
    else if (strcmp(option, "--start") == 0)
        print_start(count > 2 ? words[2] : NULL);
    else
        for (int i = 1; i < count; i++)
            read_one(words[i]);
    return 0;
}
