/*
 * The reader on any bytes: no crash, no leak, no text that is not UTF-8, bounded time.
 *
 * With libFuzzer: clang -fsanitize=fuzzer,address -DLIBFUZZER. Else a program of its own:
 * reader_fuzz SECONDS SEED FILE... changes the files at random for so long, by the same seed the
 * same way. A failing input is left in reader_fuzz.failed of the working folder.
 */
#include "base/file.h"
#include "base/utf8.h"
#include "job/job.h"
#include "job/shop.h"
#include "job/start.h"

#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

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

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct arena arena = {0};
    struct buffer shown = {0};
    struct diagnostics diagnostics = diagnostics_in(&arena);
    struct source source = {
        .path = "1.yaml", .text = arena_text(&arena, (const char *)data, size), .length = size};
    const struct start start = {"2", NULL, &source};
    const struct job *job = job_read(&source, &arena, &diagnostics);
    check_job(job);
    for (int copy = 0; copy < COPY_COUNT; copy++)
        job_for_copy(job, (enum copy)copy, &arena);
    diagnostics_sort(&diagnostics);
    diagnostics_format(&diagnostics, &shown);
    check_utf8(buffer_string(&shown));
    buffer_clear(&shown);
    start_write(&shown, &start, &arena, &diagnostics);
    source.path = "shop.yaml";
    shop_read(&source, &arena, &diagnostics);
    buffer_release(&shown);
    arena_release(&arena);
    return 0;
}

#ifndef LIBFUZZER

enum { INPUT_MAX = 1 << 18 };

/* xorshift64*: the same changes for the same seed. */
static uint64_t draw(uint64_t *seed)
{
    *seed ^= *seed >> 12;
    *seed ^= *seed << 25;
    *seed ^= *seed >> 27;
    return *seed * 2685821657736338717u;
}

static size_t below(uint64_t *seed, size_t limit)
{
    return limit ? (size_t)(draw(seed) % limit) : 0;
}

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

static void change(struct buffer *text, uint64_t *seed)
{
    size_t at = below(seed, text->length + 1);
    size_t length = below(seed, 40);
    const char *piece = pieces[below(seed, sizeof pieces / sizeof *pieces)];
    if (at + length > text->length)
        length = text->length - at;
    switch (below(seed, 5)) {
    case 0: /* a byte */
        if (at < text->length)
            text->data[at] = (char)draw(seed);
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
        insert(text, below(seed, text->length + 1), copy, length);
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

int main(int count, char **words)
{
    if (count < 4) {
        fprintf(stderr, "usage: reader_fuzz SECONDS SEED FILE...\n");
        return 2;
    }
    uint64_t seed = strtoull(words[2], NULL, 10) | 1;
    time_t end = time(NULL) + atol(words[1]);
    unsigned long runs = 0;
    double slowest = 0;
    while (time(NULL) < end) {
        struct buffer text = {0};
        const char *path = words[3 + below(&seed, (size_t)count - 3)];
        if (file_read(path, INPUT_MAX, &text) == FILE_OK) {
            for (size_t changes = 1 + below(&seed, 12); changes > 0; changes--)
                change(&text, &seed);
            keep_input(&text);
            clock_t began = clock();
            LLVMFuzzerTestOneInput((const uint8_t *)text.data, text.length);
            double took = (double)(clock() - began) / CLOCKS_PER_SEC;
            slowest = took > slowest ? took : slowest;
            runs++;
        }
        buffer_release(&text);
    }
    remove("reader_fuzz.failed");
    printf("%lu inputs, the slowest %.3f s\n", runs, slowest);
    return runs == 0 || slowest > 5;
}

#endif
