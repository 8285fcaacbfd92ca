/*
 * A small bench for tests of the assessment: a job as text, assessed with the default policy.
 * Bench and chassis are both at 20 C unless a text says otherwise, so that warm is cold.
 */
#ifndef TESTS_ASSESS_BENCH_H
#define TESTS_ASSESS_BENCH_H

#include "assess/findings.h"
#include "kit.h"

#include <string.h>

#define HEAD                                                                                       \
    "job: T-1\nset:\n  maker: Pellworth\n  model: Test\n  supply: transformer\n  mains: 230 V\n"   \
    "  frequency: 50 Hz\nreceived: 2031-02-03\nconditions:\n  bench: 20 C\n  working: 20 C\n"
/* Accurate enough that the guard band does not matter. */
#define METER                                                                                      \
    "instruments:\n  leakage:\n    accuracy: 0.1 % + 0.0001 uA\n    resolution: 0.0001 uA\n"
/* A bypass judged linearly: I*10 k <= 0.5 V at 100 V, limit 50 uA. */
#define BYPASS(ref, type, marked)                                                                  \
    "  " ref ":\n    type: " type "\n    marked: " marked                                          \
    "\n    place: other\n    feed: 10k\n    shift: 0.5 V\n    service: 100 V\n"
/* Of a stage with a 6V6GT. */
#define ROW_6V6                                                                                    \
    "    row: va 250 V, vg2 250 V, vg1 -12.5 V, ia 45 mA, ig2 4.5 mA, gm 4.1 mA/V, ra 50k\n"

struct bench {
    struct arena arena;
    struct diagnostics diagnostics;
    struct source source;
    struct shop shop;
    const struct job *job;
    struct findings *findings;
};

static inline struct findings *bench_assess(struct bench *bench, const char *text)
{
    memset(bench, 0, sizeof *bench);
    bench->diagnostics = diagnostics_in(&bench->arena);
    bench->source = (struct source){"T-1.yaml", text, strlen(text)};
    bench->shop = shop_default();
    bench->job = job_read(&bench->source, &bench->arena, &bench->diagnostics);
    if (bench->diagnostics.errors > 0) {
        struct buffer said = {0};
        diagnostics_format(&bench->diagnostics, &said);
        print_error("%s\n", buffer_string(&said));
        buffer_release(&said);
        fail();
    }
    bench->findings =
        assess_job(bench->job, &bench->shop, "test", &bench->arena, &bench->diagnostics);
    return bench->findings;
}

static inline void bench_release(struct bench *bench)
{
    arena_release(&bench->arena);
}

static inline const struct capacitor_findings *bench_part(const struct bench *bench,
                                                          const char *ref)
{
    for (size_t i = 0; i < bench->findings->capacitor_count; i++)
        if (strcmp(bench->findings->capacitors[i].part->ref, ref) == 0)
            return &bench->findings->capacitors[i];
    fail_msg("no part %s", ref);
    return NULL;
}

/* Assert what the part comes to; the part. */
static inline const struct capacitor_findings *
bench_expect(const struct bench *bench, const char *ref, enum outcome outcome, enum reason why)
{
    const struct capacitor_findings *part = bench_part(bench, ref);
    if (part->outcome != outcome || part->why != why)
        print_error("%s: %s, %s\n", ref, outcome_text(part->outcome), reason_text(part->why));
    assert_int_equal(part->outcome, outcome);
    assert_int_equal(part->why, why);
    return part;
}

static inline const struct criterion *bench_criterion(const struct capacitor_findings *part,
                                                      enum criterion_key key, bool joint)
{
    for (size_t i = 0; i < part->criterion_count; i++)
        if (part->criteria[i].key == key && part->criteria[i].joint == joint)
            return &part->criteria[i];
    return NULL;
}

static inline const struct effect *bench_effect(const struct capacitor_findings *part,
                                                const char *key)
{
    for (size_t i = 0; i < part->effect_count; i++)
        if (strcmp(part->effects[i].key, key) == 0)
            return &part->effects[i];
    return NULL;
}

static inline size_t bench_count(const struct bench *bench, enum diagnostic_code code)
{
    size_t count = 0;
    for (size_t i = 0; i < bench->diagnostics.count; i++)
        count += bench->diagnostics.items[i].code == code;
    return count;
}

#endif
