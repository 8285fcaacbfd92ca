#include "job/reader.h"

#include "job/tables.h"
#include "job/yaml_tree.h"

static void read_all(struct reader *reader)
{
    struct job *job = reader->job;
    record_read(reader, &job_record, reader->root, job);
    refs_collect(reader);
    /* Readings need the instruments, refs need all lists; a later read may ask for nothing more. */
    for (size_t i = 0; i < reader->later_count; i++)
        reader->later[i].read(reader, reader->later[i].node, reader->later[i].target);
    const struct node *counts = node_child(reader->root, "counts");
    job->counts.set = job->counts.capacitors_set || job->counts.resistors_set ||
                      job->counts.windings_set || job->counts.controls_set;
    if (counts)
        job->counts.at = counts->key_at;
    valves_join(reader);
    job_check(reader);
}

const struct job *job_read(const struct source *source, struct arena *arena,
                           struct diagnostics *diagnostics)
{
    struct job *job = arena_get(arena, sizeof *job);
    job->source = *source;
    struct reader reader = {
        .source = source, .arena = arena, .diagnostics = diagnostics, .job = job};
    size_t errors = diagnostics->errors;
    reader.root = yaml_tree_read(source, arena, diagnostics);
    if (!reader.root || node_is_empty(reader.root)) {
        if (diagnostics->errors == errors)
            reader_tell(&reader, (struct position){0}, DIAGNOSTIC_FILE_EMPTY,
                        "gridleak start makes a new job", "the file holds nothing but comments");
    } else if (reader.root->kind != NODE_MAPPING) {
        reader_tell(&reader, reader.root->at, DIAGNOSTIC_WRONG_SHAPE,
                    "a job file begins with: job: 2031-014", "this is no job file");
    } else {
        read_all(&reader);
    }
    return job;
}
