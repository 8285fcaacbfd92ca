#include "assess/originality.h"

enum { KIND_CAPACITORS, KIND_RESISTORS, KIND_WINDINGS, KIND_CONTROLS };
static const char *const kind_names[] = {"capacitors", "resistors", "windings",
                                         "switches and controls"};

static enum part_state kept_state(const struct part_story *story)
{
    if (story->was == WAS_EARLIER_REPAIR)
        return STATE_EARLIER_REPAIR_KEPT;
    return story->tested && story->done == DONE_KEPT ? STATE_TESTED_AND_KEPT : STATE_KEPT_UNTESTED;
}

enum part_state state_of_part(const struct part_story *story)
{
    bool earlier = story->was == WAS_EARLIER_REPAIR;
    if (story->was == WAS_MISSING)
        return STATE_MISSING;
    switch (story->done) {
    case DONE_OPEN:
        return STATE_OPEN;
    case DONE_KEPT:
    case DONE_KEPT_UNTESTED:
        return kept_state(story);
    case DONE_REFORMED:
        return earlier ? STATE_EARLIER_REPAIR_KEPT : STATE_REFORMED;
    case DONE_RESTUFFED:
        return earlier ? STATE_EARLIER_REPAIR_REPLACED : STATE_RESTUFFED;
    case DONE_REPLACED:
        if (earlier)
            return STATE_EARLIER_REPAIR_REPLACED;
        return story->age == AGE_PERIOD ? STATE_REPLACED_PERIOD : STATE_REPLACED_MODERN;
    case DONE_DISCONNECTED:
        return earlier ? STATE_EARLIER_REPAIR_REPLACED : STATE_DISCONNECTED;
    case ACTION_COUNT:
        break;
    }
    return STATE_OPEN;
}

bool state_is_kept(enum part_state state)
{
    return state == STATE_TESTED_AND_KEPT || state == STATE_KEPT_UNTESTED ||
           state == STATE_REFORMED;
}

/* One original part into one line of counts. */
static void count_in(struct kept_count *count, enum part_state state)
{
    count->of++;
    count->kept += state_is_kept(state);
    count->tested += state == STATE_TESTED_AND_KEPT;
    count->untested += state == STATE_KEPT_UNTESTED;
    count->reformed += state == STATE_REFORMED;
    count->disconnected += state == STATE_DISCONNECTED;
    count->restuffed += state == STATE_RESTUFFED;
    count->removed += state == STATE_REPLACED_PERIOD || state == STATE_REPLACED_MODERN;
}

static void count_part(struct originality *counts, int kind, enum seen seen, enum origin was,
                       enum part_state state)
{
    counts->restuffed += state == STATE_RESTUFFED;
    counts->replaced += state == STATE_REPLACED_PERIOD || state == STATE_REPLACED_MODERN;
    counts->earlier_repairs_kept += state == STATE_EARLIER_REPAIR_KEPT;
    counts->earlier_repairs_replaced += state == STATE_EARLIER_REPAIR_REPLACED;
    counts->missing += state == STATE_MISSING;
    counts->open += state == STATE_OPEN;
    if (was != WAS_ORIGINAL)
        return;
    count_in(&counts->total, state);
    count_in(&counts->kinds[kind], state);
    count_in(&counts->seen[seen], state);
}

/* A can is one part: kept only with every section in circuit, tested only with every section. */
static enum part_state can_state(const struct job *job, const struct can *can,
                                 const struct capacitor_findings *capacitors)
{
    struct part_story story = {can->was, can->done, can->age, true};
    bool all_in_circuit = true;
    enum action sections = DONE_OPEN;
    for (size_t i = 0; i < can->hold_count; i++) {
        const struct capacitor_findings *section = &capacitors[can->holds[i]];
        story.tested = story.tested && section->deciding >= 0;
        all_in_circuit = all_in_circuit && job->capacitors[can->holds[i]].done != DONE_DISCONNECTED;
        sections = i == 0 || job->capacitors[can->holds[i]].done == sections
                       ? job->capacitors[can->holds[i]].done
                       : DONE_OPEN;
    }
    if (story.done == DONE_OPEN)
        story.done = sections;
    enum part_state state = state_of_part(&story);
    return state_is_kept(state) && !all_in_circuit ? STATE_DISCONNECTED : state;
}

static void count_capacitors(const struct job *job, const struct capacitor_findings *capacitors,
                             struct originality *counts)
{
    for (size_t i = 0; i < job->capacitor_count; i++) {
        const struct capacitor *part = &job->capacitors[i];
        counts->replaced_unmeasured += capacitors[i].replaced_unmeasured;
        if (part->can == NOT_LISTED)
            count_part(counts, KIND_CAPACITORS, part->seen, part->was, capacitors[i].state);
    }
    for (size_t i = 0; i < job->can_count; i++)
        count_part(counts, KIND_CAPACITORS, job->cans[i].seen, job->cans[i].was,
                   can_state(job, &job->cans[i], capacitors));
}

static void count_others(const struct job *job, struct originality *counts)
{
    for (size_t i = 0; i < job->resistor_count; i++) {
        const struct resistor *part = &job->resistors[i];
        struct part_story story = {part->was, part->done, part->age, part->measured.set};
        count_part(counts, KIND_RESISTORS, part->seen, part->was, state_of_part(&story));
    }
    for (size_t i = 0; i < job->winding_count; i++) {
        const struct winding *part = &job->windings[i];
        struct part_story story = {part->was, part->done, part->age,
                                   part->measured.set || part->insulation.set};
        count_part(counts, KIND_WINDINGS, part->seen, part->was, state_of_part(&story));
    }
    for (size_t i = 0; i < job->control_count; i++) {
        const struct control *part = &job->controls[i];
        struct part_story story = {part->was, part->done, part->age, part->done == DONE_KEPT};
        count_part(counts, KIND_CONTROLS, part->seen, part->was, state_of_part(&story));
    }
    for (size_t i = 0; i < job->valve_count; i++) {
        const struct valve *part = &job->valves[i];
        struct part_story story = {part->was, part->done, AGE_MODERN, part->tested.text != NULL};
        if (part->was == WAS_ORIGINAL)
            count_in(&counts->valves, state_of_part(&story));
    }
}

static void add_unlisted(struct originality *counts, int kind, bool set, unsigned unlisted)
{
    struct kept_count *lines[] = {&counts->total, &counts->kinds[kind], &counts->seen[SEEN_BELOW]};
    counts->kinds[kind].complete = set;
    for (size_t i = 0; i < sizeof lines / sizeof lines[0]; i++) {
        lines[i]->of += unlisted;
        lines[i]->kept += unlisted;
        lines[i]->untested += unlisted;
    }
    counts->of_the_parts_listed = counts->of_the_parts_listed || !set;
}

struct originality originality_count(const struct job *job,
                                     const struct capacitor_findings *capacitors)
{
    struct originality counts = {.total = {.name = "all"}, .valves = {.name = "valves"}};
    for (int kind = 0; kind < 4; kind++)
        counts.kinds[kind].name = kind_names[kind];
    for (int seen = 0; seen < SEEN_COUNT; seen++)
        counts.seen[seen].name = seen_text(seen);
    count_capacitors(job, capacitors, &counts);
    count_others(job, &counts);
    const struct counts *given = &job->counts;
    add_unlisted(&counts, KIND_CAPACITORS, given->set && given->capacitors_set, given->capacitors);
    add_unlisted(&counts, KIND_RESISTORS, given->set && given->resistors_set, given->resistors);
    add_unlisted(&counts, KIND_WINDINGS, given->set && given->windings_set, given->windings);
    add_unlisted(&counts, KIND_CONTROLS, given->set && given->controls_set, given->controls);
    counts.total.complete = !counts.of_the_parts_listed;
    for (int seen = 0; seen < SEEN_COUNT; seen++)
        counts.seen[seen].complete = counts.total.complete;
    return counts;
}
