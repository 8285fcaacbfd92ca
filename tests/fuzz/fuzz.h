/*
 * How much a fuzzer tries. AMOUNT is a count, `5000`, and then the inputs are the same on every
 * machine; or a time, `300s`, for as many as it allows. Each input follows from the seed and from
 * its own number alone: `1@1234` makes number 1234 by itself.
 *
 * An input that fails or hangs is told by its number and seed; run.sh asks the sanitizers to abort.
 */
#ifndef TESTS_FUZZ_H
#define TESTS_FUZZ_H

#include <signal.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

enum { FUZZ_SLOW_S = 10, FUZZ_HANGS_S = 120 };

struct fuzz {
    uint64_t seed, next, end; /* numbers of inputs; end 0: none */
    time_t until;
    uint64_t state; /* of the input's own draws */
    unsigned long tried;
    clock_t began;
    double slowest_s;
    uint64_t slowest;
};

static const struct fuzz *fuzz_running;

static void fuzz_stopped(int signal_number)
{
    if (!fuzz_running)
        _exit(1);
    fprintf(stderr, "%s: input 1@%llu of seed %llu\n",
            signal_number == SIGALRM ? "hangs" : "failed",
            (unsigned long long)fuzz_running->next - 1, (unsigned long long)fuzz_running->seed);
    _exit(1);
}

static inline struct fuzz fuzz_begin(const char *amount, const char *seed)
{
    char *rest;
    struct fuzz fuzz = {.seed = strtoull(seed, NULL, 10)};
    uint64_t number = strtoull(amount, &rest, 10);
    if (*rest == '@')
        fuzz.next = strtoull(rest + 1, NULL, 10);
    if (*rest == 's')
        fuzz.until = time(NULL) + (time_t)number;
    else
        fuzz.end = fuzz.next + number;
    signal(SIGABRT, fuzz_stopped);
    signal(SIGALRM, fuzz_stopped);
    return fuzz;
}

/* splitmix64. */
static inline uint64_t fuzz_draw(struct fuzz *fuzz)
{
    uint64_t word = fuzz->state += 0x9E3779B97F4A7C15u;
    word = (word ^ word >> 30) * 0xBF58476D1CE4E5B9u;
    word = (word ^ word >> 27) * 0x94D049BB133111EBu;
    return word ^ word >> 31;
}

/* From 0 to limit - 1; 0 for a limit of 0. */
static inline size_t fuzz_below(struct fuzz *fuzz, size_t limit)
{
    return limit ? (size_t)(fuzz_draw(fuzz) % limit) : 0;
}

static inline void fuzz_finish_input(struct fuzz *fuzz)
{
    double took_s = (double)(clock() - fuzz->began) / CLOCKS_PER_SEC;
    if (fuzz->tried > 0 && took_s > fuzz->slowest_s) {
        fuzz->slowest_s = took_s;
        fuzz->slowest = fuzz->next - 1;
    }
}

/* Begin the next input; false: that was all. */
static inline bool fuzz_next(struct fuzz *fuzz)
{
    fuzz_finish_input(fuzz);
    alarm(0);
    if (fuzz->until ? time(NULL) >= fuzz->until : fuzz->next >= fuzz->end)
        return false;
    fuzz->state = fuzz->seed * 0xD1342543DE82EF95u + fuzz->next;
    fuzz->state = fuzz_draw(fuzz);
    fuzz->next++;
    fuzz->tried++;
    fuzz_running = fuzz;
    fuzz->began = clock();
    alarm(FUZZ_HANGS_S);
    return true;
}

/* What was done, on standard output; the exit status. */
static inline int fuzz_end(const struct fuzz *fuzz, const char *what)
{
    printf("%lu %s, the slowest %.3f s (1@%llu)\n", fuzz->tried, what, fuzz->slowest_s,
           (unsigned long long)fuzz->slowest);
    return fuzz->tried == 0 || fuzz->slowest_s > FUZZ_SLOW_S;
}

#endif
