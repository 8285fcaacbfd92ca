/*
 * What an output folder was made from: .gridleak/state, a line a job with the setting (program,
 * templates, words, shop.yaml), the hash of its summary that the pages show, and every input file
 * (job file, photographs) by size, time of change and hash. A file counts as changed when size or
 * time differ and then its hash differs.
 *
 * It is written when a whole publish ends. A job made since, by a publish of named jobs or one that
 * did not come to its end, is unsettled: it has a file of its name in .gridleak/unsettled/.
 */
#ifndef ARCHIVE_STATE_H
#define ARCHIVE_STATE_H

#include "base/arena.h"
#include "base/file.h"
#include "base/hash.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

struct state_input {
    const char *path;
    uint64_t size, changed_ns;
    char hash[HASH_TEXT_BYTES];
};

struct state_job {
    const char *name;
    char setting[HASH_TEXT_BYTES], summary[HASH_TEXT_BYTES];
    bool broken; /* its file had mistakes: told again in every run */
    bool warned; /* it had warnings: told again too */
    struct state_input *inputs;
    size_t input_count;
};

struct state {
    struct arena arena; /* owns all; state_release */
    struct state_job *jobs;
    size_t count;
};

/* Read the state of an output folder; a missing or damaged file is an empty state. */
void state_read(const char *output, struct state *state);

/* The job's line, NULL: none. Jobs are sorted by name. */
struct state_job *state_find(const struct state *state, const char *name);

/* Whether nothing that the job was made from has changed. Times that moved while the hash stayed
   are put right in *job. */
bool state_is_current(struct state_job *job, const char *setting);

/* Note an input file as it is now, also that it is not there. false when it cannot be read. */
bool state_note_input(const char *path, struct arena *arena, struct state_input *input);

/* The hash of jobs/<name>/summary.json as it is now; zeros when there is none. */
void state_note_summary(const char *output, const char *name, char hash[HASH_TEXT_BYTES]);

/* Mark a job that is about to be made; whether it was; and unmark all. */
enum file_status state_unsettle(const char *output, const char *name);
bool state_is_unsettled(const char *output, const char *name);
enum file_status state_settle(const char *output);

/* Write the lines of jobs[count], sorted by name; entries that are NULL are left out. */
enum file_status state_write(const char *output, const struct state_job *const *jobs, size_t count);

void state_release(struct state *state);

#endif
