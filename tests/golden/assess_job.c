/* assess_job FILE: what the assessment says about a job file, warnings and notes. */
#include "assess/findings.h"

#include <stdio.h>

int main(int argc, char **argv)
{
    if (argc != 2)
        return 2;
    static char text[1 << 20];
    FILE *file = fopen(argv[1], "rb");
    if (!file)
        return 3;
    size_t length = fread(text, 1, sizeof text - 1, file);
    fclose(file);
    struct arena arena = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {argv[1], text, length};
    struct shop shop = shop_default();
    const struct job *job = job_read(&source, &arena, &diagnostics);
    assess_job(job, &shop, "golden", &arena, &diagnostics);
    diagnostics_sort(&diagnostics);
    struct buffer said = {0};
    diagnostics_format(&diagnostics, &said);
    for (size_t i = 0; i < diagnostics.count; i++)
        buffer_print(&said, "%s\n", diagnostic_code_text(diagnostics.items[i].code));
    fwrite(said.data, 1, said.length, stdout);
    buffer_release(&said);
    arena_release(&arena);
    return 0;
}
