#include "archive/visits.h"

#include "assess/visit.h"
#include "base/file.h"

#include <string.h>
#include <strings.h>
#include <unistd.h>

struct chain {
    const char *folder;
    const struct job *job; /* the one that is being made */
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct visits visits;
    size_t capacity;
};

#define WARN(chain, code, hint, ...)                                                               \
    diagnostic_add((chain)->diagnostics, &(chain)->job->source, (chain)->job->continues.at, code,  \
                   hint, __VA_ARGS__)

/* A job number may be typed with blanks around it, but never leads out of the folder. */
static const char *number_of(const struct chain *chain, const char *text)
{
    static const char allowed[] =
        "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789.-";
    size_t length = strlen(text);
    while (length && strchr(" \n\t", text[length - 1]))
        length--;
    const char *number = arena_text(chain->arena, text, length);
    bool good = length && strspn(number, allowed) == length && number[0] != '.' && number[0] != '-';
    return good ? number : NULL;
}

/* The job file of a number; NULL: it is not there or has mistakes. */
static const struct job *read_visit(struct chain *chain, const char *number)
{
    const char *path = arena_print(chain->arena, "%s/%s.yaml", chain->folder, number);
    chain->visits.paths = arena_grow(chain->arena, chain->visits.paths, chain->visits.count,
                                     &chain->capacity, sizeof *chain->visits.paths);
    chain->visits.paths[chain->visits.count++] = path;
    struct buffer contents = {0};
    const struct job *job = NULL;
    if (file_read(path, JOB_BYTES_MAX, &contents) == FILE_OK) {
        struct source *source = arena_get(chain->arena, sizeof *source);
        source->path = path;
        source->text = arena_text(chain->arena, contents.data, contents.length);
        source->length = contents.length;
        /* Its mistakes are told when it is published itself. */
        struct diagnostics silent = diagnostics_in(chain->arena);
        job = job_read(source, chain->arena, &silent);
        if (silent.errors)
            job = NULL;
    }
    buffer_release(&contents);
    return job;
}

static bool differ(const struct prose *one, const struct prose *other)
{
    return one->text && other->text && strcasecmp(one->text, other->text) != 0;
}

static void check_same_set(struct chain *chain, const struct job *earlier)
{
    const struct job *job = chain->job;
    if (differ(&earlier->set.serial, &job->set.serial))
        WARN(chain, DIAGNOSTIC_VISIT_OTHER_SET, "correct `serial`, or take `continues` out",
             "%s has the serial '%s', this job '%s'", earlier->number, earlier->set.serial.text,
             job->set.serial.text);
    else if (differ(&earlier->set.chassis, &job->set.chassis))
        WARN(chain, DIAGNOSTIC_VISIT_OTHER_SET, "correct `chassis`, or take `continues` out",
             "%s has the chassis '%s', this job '%s'", earlier->number, earlier->set.chassis.text,
             job->set.chassis.text);
}

static void check_order(struct chain *chain, const struct job *earlier, const struct job *later)
{
    const struct date *ended = earlier->returned.set ? &earlier->returned : &earlier->received;
    if (ended->set && later->received.set && date_days(ended) > date_days(&later->received))
        WARN(chain, DIAGNOSTIC_VISIT_ORDER, "correct the dates, or `continues`",
             "%s was %s on %s, after %s came in on %s", earlier->number,
             earlier->returned.set ? "returned" : "received", ended->written, later->number,
             later->received.written);
}

/* From the visit before backwards, until one continues nothing. */
static void check_rest(struct chain *chain, const struct job *visit)
{
    const struct job *passed[VISITS_MAX];
    size_t count = 0;
    while (visit && visit->continues.text && count < VISITS_MAX) {
        passed[count++] = visit;
        const char *number = number_of(chain, visit->continues.text);
        bool loop = number && strcasecmp(number, chain->job->number) == 0;
        for (size_t i = 0; number && i < count; i++)
            loop = loop || strcasecmp(number, passed[i]->number) == 0;
        if (loop) {
            WARN(chain, DIAGNOSTIC_VISIT_LOOP, "a set's first job has no `continues`",
                 "the visits go round in a circle: %s continues %s", visit->number, number);
            return;
        }
        const struct job *earlier = number ? read_visit(chain, number) : NULL;
        if (earlier)
            check_order(chain, earlier, visit);
        visit = earlier;
    }
}

struct visits visits_follow(const char *folder, struct findings *findings, struct arena *arena,
                            struct diagnostics *diagnostics)
{
    struct chain chain = {
        .folder = folder, .job = findings->job, .arena = arena, .diagnostics = diagnostics};
    const struct job *job = findings->job;
    if (!job->continues.text || !job->number)
        return chain.visits;
    const char *number = number_of(&chain, job->continues.text);
    if (number && strcasecmp(number, job->number) == 0) {
        WARN(&chain, DIAGNOSTIC_VISIT_LOOP, "give the number of the earlier job",
             "the job continues itself");
        return chain.visits;
    }
    const struct job *earlier = number ? read_visit(&chain, number) : NULL;
    if (!earlier) {
        bool there = chain.visits.count && access(chain.visits.paths[0], F_OK) == 0;
        WARN(&chain, DIAGNOSTIC_VISIT_UNKNOWN, there ? "correct that file first" : NULL,
             there ? "the earlier job '%s' has mistakes" : "there is no job '%s' in the archive",
             number ? number : job->continues.text);
        return chain.visits;
    }
    check_same_set(&chain, earlier);
    check_order(&chain, earlier, job);
    check_rest(&chain, earlier);
    visits_compare(earlier, findings, arena);
    return chain.visits;
}
