/*
 * floor FONTS MANIFEST [faces]: the least that the libraries alone need for the work of publishing
 * a job, with nothing of the program: libyaml's events of the job file, cmark from the records'
 * Markdown to HTML, libharu pages with the same lines, deflated, in two embedded faces and, by
 * themselves, in a built-in one. MANIFEST has one line a job: the job file, then its Markdown
 * files, with tabs. Prints seconds: yaml, cmark, libharu with faces, libharu without.
 */
#include <cmark.h>
#include <hpdf.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <yaml.h>

enum { LINES_A_PAGE = 58, FILES_MAX = 16 };

struct text {
    char *data;
    size_t length;
};
struct seconds {
    double yaml, cmark, haru, plain;
};

static struct text read_file(const char *path)
{
    struct text text = {0};
    FILE *file = fopen(path, "rb");
    if (!file || fseek(file, 0, SEEK_END) != 0) {
        fprintf(stderr, "floor: cannot read %s\n", path);
        exit(3);
    }
    text.length = (size_t)ftell(file);
    rewind(file);
    text.data = malloc(text.length + 1);
    if (!text.data || fread(text.data, 1, text.length, file) != text.length)
        exit(3);
    text.data[text.length] = '\0';
    fclose(file);
    return text;
}

static double now(void)
{
    struct timespec time;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &time);
    return (double)time.tv_sec + 1e-9 * (double)time.tv_nsec;
}

static void parse_yaml(const struct text *text)
{
    yaml_parser_t parser;
    yaml_event_t event;
    yaml_parser_initialize(&parser);
    yaml_parser_set_input_string(&parser, (const unsigned char *)text->data, text->length);
    for (int done = 0; !done;) {
        if (!yaml_parser_parse(&parser, &event)) {
            fprintf(stderr, "floor: YAML\n");
            exit(3);
        }
        done = event.type == YAML_STREAM_END_EVENT;
        yaml_event_delete(&event);
    }
    yaml_parser_delete(&parser);
}

static void render(const struct text *text)
{
    cmark_node *root = cmark_parse_document(text->data, text->length, CMARK_OPT_DEFAULT);
    free(cmark_render_html(root, CMARK_OPT_DEFAULT));
    cmark_node_free(root);
}

static void refuse(HPDF_STATUS error, HPDF_STATUS detail, void *data)
{
    (void)data;
    fprintf(stderr, "floor: libharu 0x%04X %u\n", (unsigned)error, (unsigned)detail);
    exit(3);
}

static const char *load_face(HPDF_Doc pdf, const char *folder, const char *name)
{
    char path[4096];
    snprintf(path, sizeof path, "%s/%s.ttf", folder, name);
    return HPDF_LoadTTFontFromFile(pdf, path, HPDF_TRUE);
}

/* fonts NULL: a built-in face, nothing embedded. */
static void set_pages(const struct text *text, const char *fonts)
{
    HPDF_Doc pdf = HPDF_New(refuse, NULL);
    HPDF_SetCompressionMode(pdf, HPDF_COMP_ALL);
    HPDF_Font regular, strong;
    if (fonts) {
        HPDF_UseUTFEncodings(pdf);
        regular = HPDF_GetFont(pdf, load_face(pdf, fonts, "OpenSans-Regular"), "UTF-8");
        strong = HPDF_GetFont(pdf, load_face(pdf, fonts, "OpenSans-Semibold"), "UTF-8");
    } else {
        regular = HPDF_GetFont(pdf, "Helvetica", "WinAnsiEncoding");
        strong = HPDF_GetFont(pdf, "Helvetica-Bold", "WinAnsiEncoding");
    }
    HPDF_Page page = NULL;
    char *copy = strdup(text->data);
    unsigned line_number = 0;
    for (char *line = strtok(copy, "\n"); line; line = strtok(NULL, "\n"), line_number++) {
        if (line_number % LINES_A_PAGE == 0) {
            if (page)
                HPDF_Page_EndText(page);
            page = HPDF_AddPage(pdf);
            HPDF_Page_BeginText(page);
        }
        HPDF_Page_SetFontAndSize(page, line_number % 8 ? regular : strong, 9);
        HPDF_Page_TextOut(page, 60, 800 - 13 * (float)(line_number % LINES_A_PAGE), line);
    }
    if (page)
        HPDF_Page_EndText(page);
    HPDF_SaveToStream(pdf);
    free(copy);
    HPDF_Free(pdf);
}

static void work_on(char *line, const char *fonts, int faces_only, struct seconds *seconds)
{
    char *files[FILES_MAX];
    size_t count = 0;
    for (char *file = line; file && count < FILES_MAX; count++) {
        char *tab = strchr(file, '\t');
        files[count] = file;
        if (tab)
            *tab++ = '\0';
        file = tab;
    }
    for (size_t i = 0; i < count; i++) {
        struct text text = read_file(files[i]);
        double start = now();
        if (i == 0) {
            parse_yaml(&text);
            seconds->yaml += now() - start;
        } else {
            render(&text);
            double middle = now();
            seconds->cmark += middle - start;
            set_pages(&text, fonts);
            double last = now();
            seconds->haru += last - middle;
            if (!faces_only)
                set_pages(&text, NULL);
            seconds->plain += now() - last;
        }
        free(text.data);
    }
}

int main(int argc, char **argv)
{
    if (argc != 3 && argc != 4)
        return 2;
    struct text manifest = read_file(argv[2]);
    struct seconds seconds = {0};
    for (char *line = manifest.data, *end; (end = strchr(line, '\n')); line = end + 1) {
        *end = '\0';
        work_on(line, argv[1], argc == 4, &seconds);
    }
    printf("%.6f %.6f %.6f %.6f\n", seconds.yaml, seconds.cmark, seconds.haru, seconds.plain);
    free(manifest.data);
    return 0;
}
