#include "archive/statistics.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

const char *const grouping_names[] = {"type", "place", "decade", "maker"};
_Static_assert(sizeof grouping_names / sizeof *grouping_names == GROUPING_COUNT, "one name each");

/* What is counted of one group in one set, until the next set begins. */
struct tally {
    struct share_group group;
    uint32_t job; /* of the set being counted, + 1; 0: none */
    double failed, read;
};

static void close_set(struct tally *tally)
{
    if (tally->read > 0)
        share_add_set(&tally->group.sums, tally->failed, tally->read);
    tally->failed = tally->read = 0;
}

/* The outcome of each code of the dictionary; OUTCOME_COUNT: none. */
static enum outcome *outcomes_by_code(const struct dictionary *dictionary, struct arena *arena)
{
    enum outcome *outcomes = arena_array(arena, dictionary->count + 1, sizeof *outcomes);
    for (uint32_t code = 0; code < dictionary->count; code++) {
        outcomes[code] = OUTCOME_COUNT;
        for (int outcome = 0; outcome < OUTCOME_COUNT; outcome++)
            if (strcmp(dictionary->entries[code].text, outcome_text((enum outcome)outcome)) == 0)
                outcomes[code] = (enum outcome)outcome;
    }
    return outcomes;
}

static void count_part(struct tally *tally, uint32_t job, enum outcome outcome, bool unread)
{
    if (tally->job != job + 1) {
        close_set(tally);
        tally->job = job + 1;
    }
    if (unread) {
        tally->group.sums.unread += 1;
        return;
    }
    if (outcome == OUTCOME_COUNT)
        return;
    tally->group.outcomes[outcome]++;
    if (outcome == OUTCOME_NOT_JUDGED)
        return;
    tally->read += 1;
    tally->failed += outcome == OUTCOME_FAIL;
}

/* Worst first; groups too small for an interval behind them, by their size. */
static int worst_first(const void *a, const void *b)
{
    const struct share_group *left = a, *right = b;
    bool left_shown = !isnan(left->share.low), right_shown = !isnan(right->share.low);
    if (left_shown != right_shown)
        return left_shown ? -1 : 1;
    if (left_shown && left->share.share != right->share.share)
        return left->share.share > right->share.share ? -1 : 1;
    if (left->sums.n != right->sums.n)
        return left->sums.n > right->sums.n ? -1 : 1;
    return strcmp(left->label, right->label);
}

static bool is_empty(const struct share_group *group)
{
    double total = group->sums.n + group->sums.unread + group->outcomes[OUTCOME_NOT_JUDGED];
    return total <= 0;
}

static struct share_groups settle(struct tally *tallies, const struct dictionary *dictionary,
                                  struct arena *arena)
{
    struct share_groups groups = {arena_array(arena, dictionary->count + 1, sizeof *groups.groups),
                                  0};
    for (uint32_t code = 0; code < dictionary->count; code++) {
        close_set(&tallies[code]);
        struct share_group *group = &tallies[code].group;
        if (is_empty(group))
            continue;
        group->label = dictionary->entries[code].text;
        group->share = share_of(&group->sums);
        groups.groups[groups.count++] = *group;
    }
    if (groups.count)
        qsort(groups.groups, groups.count, sizeof *groups.groups, worst_first);
    return groups;
}

static void count_shares(const struct columns *columns, struct statistics *statistics,
                         struct arena *arena)
{
    const struct column_data *const by[GROUPING_COUNT] = {
        &columns->parts[PART_TYPE], &columns->parts[PART_PLACE], &columns->jobs[JOB_DECADE],
        &columns->parts[PART_MAKER]};
    struct tally *tallies[GROUPING_COUNT], all = {0};
    for (int i = 0; i < GROUPING_COUNT; i++)
        tallies[i] = arena_array(arena, by[i]->dictionary.count + 1, sizeof *tallies[i]);
    const struct column_data *outcome = &columns->parts[PART_OUTCOME];
    const enum outcome *outcomes = outcomes_by_code(&outcome->dictionary, arena);
    const uint32_t *kinds = columns->parts[PART_KIND].codes;
    const uint32_t capacitor = dictionary_find(&columns->parts[PART_KIND].dictionary, "capacitor");
    for (size_t part = 0; part < columns->part_count; part++) {
        uint32_t job = columns->part_job.codes[part];
        if (kinds[part] != capacitor || columns->jobs[JOB_CONTINUES].codes[job] != 0)
            continue;
        bool unread = columns->parts[PART_UNREAD].codes[part] != 0;
        enum outcome found = outcomes[outcome->codes[part]];
        for (int i = 0; i < GROUPING_COUNT; i++)
            count_part(&tallies[i][by[i]->codes[i == BY_DECADE ? job : part]], job, found, unread);
        count_part(&all, job, found, unread);
    }
    for (int i = 0; i < GROUPING_COUNT; i++)
        statistics->groups[i] = settle(tallies[i], &by[i]->dictionary, arena);
    close_set(&all);
    statistics->all = all.group;
    statistics->all.share = share_of(&all.group.sums);
    for (size_t job = 0; job < columns->job_count; job++)
        statistics->first_visits += columns->jobs[JOB_CONTINUES].codes[job] == 0;
}

/* ---- parts measured again */

static int by_number(const void *a, const void *b)
{
    double left = *(const double *)a, right = *(const double *)b;
    return (left > right) - (left < right);
}

/* Linear between the ranks (the usual type 7). values are sorted. */
static double quantile(const double *values, size_t count, double share)
{
    if (count == 0)
        return NAN;
    double rank = share * (double)(count - 1);
    size_t below = (size_t)rank;
    double next = below + 1 < count ? values[below + 1] : values[below];
    return values[below] + (rank - (double)below) * (next - values[below]);
}

static void set_quartiles(double *values, size_t count, double quartiles[3])
{
    if (count)
        qsort(values, count, sizeof *values, by_number);
    for (int i = 0; i < 3; i++)
        quartiles[i] = quantile(values, count, 0.25 * (i + 1));
}

static struct drift_group drift_of(const struct columns *columns, uint32_t type, double *leakages,
                                   double *values)
{
    struct drift_group group = {.label = columns->again[AGAIN_TYPE].dictionary.entries[type].text};
    for (size_t i = 0; i < columns->again_count; i++) {
        if (columns->again[AGAIN_TYPE].codes[i] != type)
            continue;
        const char *outcome = column_text(&columns->again[AGAIN_OUTCOME], i);
        double years = column_number(&columns->again[AGAIN_YEARS], i);
        double leakage = column_number(&columns->again[AGAIN_LEAKAGE_FACTOR], i);
        double value = column_number(&columns->again[AGAIN_VALUE_FACTOR], i);
        bool judged = *outcome && strcmp(outcome, outcome_text(OUTCOME_NOT_JUDGED)) != 0;
        group.parts++;
        group.read += judged;
        group.failed += strcmp(outcome, outcome_text(OUTCOME_FAIL)) == 0;
        if (years > 0 && leakage > 0)
            leakages[group.leakages++] = pow(leakage, 1 / years);
        if (years > 0 && value > 0)
            values[group.values++] = (value - 1) / years;
    }
    double quartiles[3];
    set_quartiles(leakages, group.leakages, quartiles);
    group.leakage_low = quartiles[0];
    group.leakage_median = quartiles[1];
    group.leakage_high = quartiles[2];
    set_quartiles(values, group.values, quartiles);
    group.value_low = quartiles[0];
    group.value_median = quartiles[1];
    group.value_high = quartiles[2];
    return group;
}

static int by_parts(const void *a, const void *b)
{
    const struct drift_group *left = a, *right = b;
    if (left->parts != right->parts)
        return left->parts > right->parts ? -1 : 1;
    return strcmp(left->label, right->label);
}

static void count_drifts(const struct columns *columns, struct statistics *statistics,
                         struct arena *arena)
{
    uint32_t types = columns->again[AGAIN_TYPE].dictionary.count;
    double *leakages = arena_array(arena, columns->again_count + 1, sizeof *leakages);
    double *values = arena_array(arena, columns->again_count + 1, sizeof *values);
    statistics->drifts = arena_array(arena, types + 1, sizeof *statistics->drifts);
    for (uint32_t type = 0; type < types; type++) {
        struct drift_group group = drift_of(columns, type, leakages, values);
        if (group.parts)
            statistics->drifts[statistics->drift_count++] = group;
    }
    if (statistics->drift_count)
        qsort(statistics->drifts, statistics->drift_count, sizeof *statistics->drifts, by_parts);
}

/* ---- batches, call-backs */

static int by_batch(const void *a, const void *b)
{
    return strcmp(((const struct batch_row *)a)->batch, ((const struct batch_row *)b)->batch);
}

static void list_batches(const struct columns *columns, struct statistics *statistics,
                         struct arena *arena)
{
    const struct column_data *batch = &columns->parts[PART_BATCH];
    uint32_t count = batch->dictionary.count;
    struct batch_row *rows = arena_array(arena, count + 1, sizeof *rows);
    for (size_t part = 0; part < columns->part_count; part++)
        rows[batch->codes[part]].count++;
    for (uint32_t code = 1; code < count; code++) {
        rows[code].batch = batch->dictionary.entries[code].text;
        rows[code].parts = arena_array(arena, rows[code].count, sizeof *rows[code].parts);
        rows[code].count = 0;
    }
    for (size_t part = 0; part < columns->part_count; part++) {
        struct batch_row *row = &rows[batch->codes[part]];
        if (!row->parts)
            continue;
        if (row->count == 0 ||
            columns->part_job.codes[row->parts[row->count - 1]] != columns->part_job.codes[part])
            row->sets++;
        row->parts[row->count++] = part;
    }
    for (uint32_t code = 1; code < count; code++)
        if (rows[code].count)
            rows[statistics->batch_count++] = rows[code];
    statistics->batches = rows;
    if (statistics->batch_count)
        qsort(rows, statistics->batch_count, sizeof *rows, by_batch);
}

/* A call-back with the date to sort it by; jobs are in order of their numbers already. */
struct dated_job {
    const char *date;
    size_t job;
};

static int by_date(const void *a, const void *b)
{
    const struct dated_job *left = a, *right = b;
    int order = strcmp(left->date, right->date);
    return order ? order : (left->job > right->job) - (left->job < right->job);
}

static void list_call_backs(const struct columns *columns, struct statistics *statistics,
                            struct arena *arena)
{
    struct dated_job *dated = arena_array(arena, columns->job_count + 1, sizeof *dated);
    size_t count = 0;
    for (size_t job = 0; job < columns->job_count; job++)
        if (columns->jobs[JOB_CALL_BACK].codes[job])
            dated[count++] =
                (struct dated_job){column_text(&columns->jobs[JOB_CALL_BACK], job), job};
    if (count)
        qsort(dated, count, sizeof *dated, by_date);
    statistics->call_backs = arena_array(arena, count + 1, sizeof *statistics->call_backs);
    statistics->call_back_count = count;
    for (size_t i = 0; i < count; i++)
        statistics->call_backs[i] = dated[i].job;
}

struct statistics statistics_of(const struct columns *columns, struct arena *arena)
{
    struct statistics statistics = {0};
    if (columns->job_count == 0)
        return statistics;
    count_shares(columns, &statistics, arena);
    count_drifts(columns, &statistics, arena);
    list_batches(columns, &statistics, arena);
    list_call_backs(columns, &statistics, arena);
    return statistics;
}
