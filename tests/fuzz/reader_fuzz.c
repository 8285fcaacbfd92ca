/*
 * The reader, and what starts a job from another, on any bytes: no crash, no leak, no text that is
 * not UTF-8, bounded time; a job started from a sound one is sound.
 *
 * reader_fuzz AMOUNT SEED FILE... changes the files at random; reader_fuzz file FILE reads one as
 * it is. With libFuzzer: clang -fsanitize=fuzzer,address -DLIBFUZZER. A failing input is left in
 * reader_fuzz.failed of the working folder.
 */
#include "base/file.h"
#include "base/utf8.h"
#include "fuzz.h"
#include "job/job.h"
#include "job/shop.h"
#include "job/start.h"

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void check_utf8(const char *text)
{
    const char *end = text + strlen(text);
    while (text < end) {
        if (utf8_next(&text, end) == UTF8_ILL_FORMED)
            abort();
    }
}

/* What the records promise of a job: texts are UTF-8, indices are within their lists. */
static void check_job(const struct job *job)
{
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        check_utf8(part->ref);
        if (part->can != NOT_LISTED && (size_t)part->can >= job->can_count)
            abort();
        for (size_t j = 0; j < part->stage_count; j++) {
            if ((size_t)part->stages[j] >= job->stage_count)
                abort();
        }
        for (size_t j = 0; j < part->reading_count; j++) {
            int instrument = part->readings[j].instrument;
            if (instrument != NOT_LISTED && (size_t)instrument >= job->instrument_count)
                abort();
        }
        double ohm;
        for (int phase = 0; phase < PHASE_COUNT; phase++)
            job_resistance(job, &part->feed, (enum phase)phase, &ohm, NULL);
    }
    if (job->work.text)
        check_utf8(job->work.text);
}

/* A job started from a sound one is sound, and starting one from that gives the same again. */
static void check_start(const struct source *like, struct arena *arena, bool sound)
{
    struct buffer first = {0}, second = {0};
    struct diagnostics told = diagnostics_in(arena), of_start = diagnostics_in(arena);
    start_write(&first, &(struct start){"2", NULL, like}, arena, &told);
    check_utf8(buffer_string(&first));
    const struct source started = {"2.yaml", buffer_string(&first), first.length};
    job_read(&started, arena, &of_start);
    start_write(&second, &(struct start){"2", NULL, &started}, arena, &told);
    if (sound && (of_start.errors || strcmp(buffer_string(&first), buffer_string(&second)) != 0))
        abort();
    buffer_release(&first);
    buffer_release(&second);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct arena arena = {0};
    struct buffer shown = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {
        .path = "1.yaml", .text = arena_text(&arena, (const char *)data, size), .length = size};
    const struct job *job = job_read(&source, &arena, &diagnostics);
    check_job(job);
    for (int copy = 0; copy < COPY_COUNT; copy++)
        job_for_copy(job, (enum copy)copy, &arena);
    diagnostics_sort(&diagnostics);
    diagnostics_format(&diagnostics, &shown);
    check_utf8(buffer_string(&shown));
    buffer_clear(&shown);
    check_start(&source, &arena, diagnostics.errors == 0);
    source.path = "shop.yaml";
    shop_read(&source, &arena, &diagnostics);
    buffer_release(&shown);
    arena_release(&arena);
    return 0;
}

#ifndef LIBFUZZER

enum { INPUT_MAX = 1 << 18 };

static const char *const pieces[] = {": ",
                                     " #",
                                     "- ",
                                     "\n",
                                     "\t",
                                     "{",
                                     "}",
                                     "[",
                                     "]",
                                     "'",
                                     "\"",
                                     "|",
                                     ">",
                                     "&a",
                                     "*a",
                                     "!!",
                                     "%",
                                     "@",
                                     "---\n",
                                     "...",
                                     "\xB5",
                                     "\xC2\xB5",
                                     "\r\n",
                                     "\0x",
                                     "1,000",
                                     "12:30",
                                     "over",
                                     "-",
                                     "open",
                                     "M",
                                     "0",
                                     "1e99",
                                     "lifted",
                                     "R12",
                                     "C14",
                                     ", ",
                                     "\n    ",
                                     "? ",
                                     "\x07",
                                     "V4",
                                     "uF",
                                     "999999999999",
                                     "\xE2\x80\xAE",
                                     ""};

static void insert(struct buffer *text, size_t at, const char *piece, size_t length)
{
    buffer_append(text, piece, length);
    memmove(text->data + at + length, text->data + at, text->length - length - at);
    memcpy(text->data + at, piece, length);
}

static void change(struct buffer *text, struct fuzz *fuzz)
{
    size_t at = fuzz_below(fuzz, text->length + 1);
    size_t length = fuzz_below(fuzz, 40);
    const char *piece = pieces[fuzz_below(fuzz, sizeof pieces / sizeof *pieces)];
    if (at + length > text->length)
        length = text->length - at;
    switch (fuzz_below(fuzz, 5)) {
    case 0: /* a byte */
        if (at < text->length)
            text->data[at] = (char)fuzz_draw(fuzz);
        break;
    case 1: /* something that means something */
    case 2:
        insert(text, at, piece, strlen(piece));
        break;
    case 3: /* cut out */
        memmove(text->data + at, text->data + at + length, text->length - at - length);
        text->length -= length;
        break;
    case 4: { /* said twice */
        char copy[40];
        memcpy(copy, text->data + at, length);
        insert(text, fuzz_below(fuzz, text->length + 1), copy, length);
        break;
    }
    }
}

static void keep_input(const struct buffer *text)
{
    FILE *file = fopen("reader_fuzz.failed", "wb");
    if (!file)
        return;
    fwrite(text->data, 1, text->length, file);
    fclose(file);
}

static int read_as_is(const char *path)
{
    struct buffer text = {0};
    if (file_read(path, INPUT_MAX, &text) != FILE_OK)
        return 2;
    LLVMFuzzerTestOneInput((const uint8_t *)text.data, text.length);
    buffer_release(&text);
    return 0;
}

int main(int count, char **words)
{
    if (count == 3 && strcmp(words[1], "file") == 0)
        return read_as_is(words[2]);
    if (count < 4)
        return 2;
    struct fuzz fuzz = fuzz_begin(words[1], words[2]);
    while (fuzz_next(&fuzz)) {
        struct buffer text = {0};
        const char *path = words[3 + fuzz_below(&fuzz, (size_t)count - 3)];
        if (file_read(path, INPUT_MAX, &text) != FILE_OK)
            return 2;
        for (size_t changes = 1 + fuzz_below(&fuzz, 12); changes > 0; changes--)
            change(&text, &fuzz);
        keep_input(&text);
        LLVMFuzzerTestOneInput((const uint8_t *)text.data, text.length);
        buffer_release(&text);
    }
    remove("reader_fuzz.failed");
    return fuzz_end(&fuzz, "inputs");
}

#endif
