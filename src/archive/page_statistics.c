/* statistics.html, and the same numbers as CSV beside it. */
#include "archive/page_frame.h"
#include "archive/statistics.h"
#include "report/typography.h"

#include <math.h>
#include <string.h>

enum {
    TYPICAL_PARTS = 20,
    PLOT_ROWS_MAX = 24, /* of makers there may be hundreds: the CSV has all */
    TABLE_ROWS_MAX = 60,
    RECALL_JOBS_MAX = 10 /* named in the table; the list of the archive finds the rest */
};

struct statistics_work {
    struct page_frame *frame;
    struct statistics statistics;
    struct mustache_value *values;
};

static const char *say(const struct statistics_work *work, const char *key)
{
    return phrase_in(&work->frame->say, "statistics", key);
}

static const char *number_text(const struct statistics_work *work, double value)
{
    return figures_scaled(work->frame->arena, value, 1, "", 0).whole;
}

static struct figures whole_figures(const struct statistics_work *work, double value)
{
    return figures_scaled(work->frame->arena, value, 1, "", 0);
}

/* The shop's words for a label of the summaries. */
static const char *label_text(const struct statistics_work *work, enum grouping grouping,
                              const char *label)
{
    if (!*label)
        return say(work, "not_given");
    switch (grouping) {
    case BY_TYPE:
        return phrase_in(&work->frame->say, "type", label);
    case BY_PLACE:
        return phrase_in(&work->frame->say, "place", label);
    case BY_DECADE:
    case BY_MAKER:
    case GROUPING_COUNT:
        break;
    }
    return label;
}

/* ---- shares: a plot and a table for each grouping */

static size_t shown_rows(const struct share_groups *groups, size_t most)
{
    size_t rows = 0;
    while (rows < groups->count && rows < most && !isnan(groups->groups[rows].share.low))
        rows++;
    return rows;
}

static void fill_share_row(const struct statistics_work *work, enum grouping grouping,
                           const struct share_group *group, struct share_row *row)
{
    struct arena *arena = work->frame->arena;
    bool unread = group->sums.unread > 0;
    *row = (struct share_row){
        .label = label_text(work, grouping, group->label),
        .share = group->share.share,
        .low = group->share.low,
        .high = group->share.high,
        .bracket_low = unread ? group->share.best : NAN,
        .bracket_high = unread ? group->share.worst : NAN,
    };
    row->counts[0] =
        phrase(&work->frame->say, "statistics.failed_of", "failed",
               number_text(work, group->sums.x), "read", number_text(work, group->sums.n), NULL);
    row->counts[1] = phrase(&work->frame->say, "statistics.in_sets", "sets",
                            number_text(work, group->sums.sets), NULL);
    row->counts[2] = arena_copy(arena, number_text(work, group->sums.unread));
}

static bool add_plot(struct statistics_work *work, enum grouping grouping)
{
    static const char *const axis_keys[] = {"axis.none", "axis.two",   "axis.four",
                                            "axis.six",  "axis.eight", "axis.all"};
    const struct share_groups *groups = &work->statistics.groups[grouping];
    struct arena *arena = work->frame->arena;
    size_t rows = shown_rows(groups, PLOT_ROWS_MAX);
    if (rows == 0)
        return false;
    struct exhibit *exhibit = page_exhibit(work->frame, EXHIBIT_PLOT,
                                           arena_print(arena, "plot_%s", grouping_names[grouping]));
    struct shares shares = {arena_array(arena, rows, sizeof *shares.rows), rows, {0}, {0}};
    for (size_t i = 0; i < rows; i++)
        fill_share_row(work, grouping, &groups->groups[i], &shares.rows[i]);
    for (size_t i = 0; i < sizeof axis_keys / sizeof *axis_keys; i++)
        shares.axis_words[i] = say(work, axis_keys[i]);
    shares.count_heads[0] = say(work, "count_failed");
    shares.count_heads[1] = say(work, "count_sets");
    shares.count_heads[2] = say(work, "count_unread");
    exhibit->plot = (struct plot){
        .kind = PLOT_SHARES,
        .shares = shares,
        .title = say(work, arena_print(arena, "title.%s", grouping_names[grouping])),
        .caption = say(work, arena_print(arena, "caption.%s", grouping_names[grouping])),
    };
    return true;
}

static void fill_cells(const struct statistics_work *work, enum grouping grouping,
                       const struct share_group *group, struct cell *cells)
{
    struct arena *arena = work->frame->arena;
    bool shown = !isnan(group->share.low);
    cells[0].text = label_text(work, grouping, group->label);
    cells[1].figures = whole_figures(work, group->sums.x);
    cells[2].figures = whole_figures(work, group->sums.n);
    cells[3].figures = whole_figures(work, group->sums.sets);
    if (shown) {
        cells[4].figures = figures_scaled(arena, group->share.share, 0.01, "", 1);
        cells[5].text = phrase(&work->frame->say, "statistics.between", "low",
                               arena_print(arena, "%.1f", 100 * group->share.low), "high",
                               arena_print(arena, "%.1f", 100 * group->share.high), NULL);
    } else if (group->sums.n > 0) {
        cells[5].text = say(work, "too_few");
    }
    cells[6].figures = whole_figures(work, group->sums.unread);
    if (group->sums.unread > 0 && shown)
        cells[7].text = phrase(&work->frame->say, "statistics.between", "low",
                               arena_print(arena, "%.1f", 100 * group->share.best), "high",
                               arena_print(arena, "%.1f", 100 * group->share.worst), NULL);
    cells[8].figures = whole_figures(work, group->outcomes[OUTCOME_NOT_JUDGED]);
}

/* A table of the page with these columns; its cells are empty. */
static struct table *begin_table(struct page_frame *frame, const char *id,
                                 const struct column *columns, size_t column_count, size_t rows)
{
    struct table *table = &page_exhibit(frame, EXHIBIT_TABLE, id)->table;
    *table = (struct table){.column_count = column_count, .row_count = rows, .lined = true};
    table->columns = arena_array(frame->arena, column_count, sizeof *table->columns);
    memcpy(table->columns, columns, column_count * sizeof *columns);
    table->rows = arena_array(frame->arena, rows + 1, sizeof *table->rows);
    for (size_t i = 0; i < rows; i++)
        table->rows[i].cells = arena_array(frame->arena, column_count, sizeof(struct cell));
    return table;
}

static void add_table(struct statistics_work *work, enum grouping grouping)
{
    struct page_frame *frame = work->frame;
    const struct share_groups *groups = &work->statistics.groups[grouping];
    size_t rows = groups->count < TABLE_ROWS_MAX ? groups->count : TABLE_ROWS_MAX;
    const char *name = grouping_names[grouping];
    const struct column columns[] = {
        page_column(frame, name, COLUMN_REF, 19, 1),
        page_column(frame, "failed", COLUMN_NUMBER, 8, 1),
        page_column(frame, "read", COLUMN_NUMBER, 9, 1),
        page_column(frame, "sets", COLUMN_NUMBER, 8, 2),
        page_column(frame, "share", COLUMN_NUMBER, 10, 1),
        page_column(frame, "interval", COLUMN_TEXT, 14, 2),
        page_column(frame, "unread", COLUMN_NUMBER, 10, 2),
        page_column(frame, "if_unread", COLUMN_TEXT, 14, 2),
        page_column(frame, "not_judged", COLUMN_NUMBER, 8, 2),
    };
    struct table *table = begin_table(frame, arena_print(frame->arena, "table_%s", name), columns,
                                      sizeof columns / sizeof *columns, rows);
    table->columns[4].unit = table->columns[5].unit = table->columns[7].unit = "%";
    for (size_t i = 0; i < rows; i++)
        fill_cells(work, grouping, &groups->groups[i], table->rows[i].cells);
    table->caption = say(work, arena_print(frame->arena, "table.%s", name));
    if (rows < groups->count)
        table->remark = phrase(&frame->say, "statistics.more_rows", "count",
                               number_text(work, (double)(groups->count - rows)), NULL);
}

/* ---- twenty typical parts */

/* `total` places handed out by the largest remainders. */
static void apportion(const unsigned *counts, size_t kinds, unsigned total, unsigned *places)
{
    double sum = 0;
    unsigned given = 0;
    for (size_t i = 0; i < kinds; i++)
        sum += counts[i];
    double remainders[OUTCOME_COUNT] = {0};
    for (size_t i = 0; i < kinds; i++) {
        double exact = total * counts[i] / sum;
        places[i] = (unsigned)exact;
        remainders[i] = exact - places[i];
        given += places[i];
    }
    for (; given < total; given++) {
        size_t largest = 0;
        for (size_t i = 1; i < kinds; i++)
            if (remainders[i] > remainders[largest])
                largest = i;
        remainders[largest] = -1;
        places[largest]++;
    }
}

static const char *mark_name(struct arena *arena, enum outcome outcome)
{
    char *name = arena_copy(arena, outcome_text(outcome));
    for (char *at = name; *at; at++)
        *at = *at == ' ' ? '-' : *at;
    return name;
}

static struct mustache_value *typical_row(const struct statistics_work *work,
                                          const struct share_group *group)
{
    struct arena *arena = work->frame->arena;
    struct mustache_value *row = mustache_map(arena), *marks = mustache_list(arena);
    unsigned places[OUTCOME_COUNT];
    apportion(group->outcomes, OUTCOME_COUNT, TYPICAL_PARTS, places);
    const char *says = NULL;
    for (int i = OUTCOME_COUNT - 1; i >= 0; i--) {
        enum outcome outcome = (enum outcome)i;
        for (unsigned place = 0; place < places[i]; place++) {
            struct mustache_value *mark = mustache_map(arena);
            mustache_set_text(arena, mark, "mark", mark_name(arena, outcome));
            mustache_push(arena, marks, mark);
        }
        if (places[i]) {
            const char *word = phrase_in(&work->frame->say, "outcome", outcome_text(outcome));
            says = says ? arena_print(arena, "%s, %u %s", says, places[i], word)
                        : arena_print(arena, "%u %s", places[i], word);
        }
    }
    mustache_set_text(arena, row, "label", label_text(work, BY_TYPE, group->label));
    mustache_set_text(arena, row, "says", says);
    mustache_set(arena, row, "marks", marks);
    return row;
}

static void add_typical(struct statistics_work *work)
{
    struct arena *arena = work->frame->arena;
    const struct share_groups *groups = &work->statistics.groups[BY_TYPE];
    struct mustache_value *rows = mustache_list(arena);
    size_t count = shown_rows(groups, PLOT_ROWS_MAX);
    for (size_t i = 0; i < count; i++)
        mustache_push(arena, rows, typical_row(work, &groups->groups[i]));
    mustache_set(arena, work->values, "typical", rows);
    mustache_set_flag(arena, work->values, "any_typical", count > 0);
}

/* ---- revisits */

/* With a true minus. */
static const char *signed_text(const struct statistics_work *work, const char *format, double value)
{
    const char *text = arena_print(work->frame->arena, format, value);
    return *text == '-' ? arena_print(work->frame->arena, "\u2212%s", text + 1) : text;
}

static const char *drift_text(const struct statistics_work *work, const char *format, double middle,
                              double low, double high)
{
    if (isnan(middle))
        return NULL;
    return phrase(&work->frame->say, "statistics.median", "median",
                  signed_text(work, format, middle), "low", signed_text(work, format, low), "high",
                  signed_text(work, format, high), NULL);
}

static void add_drift(struct statistics_work *work)
{
    struct page_frame *frame = work->frame;
    const struct statistics *statistics = &work->statistics;
    if (statistics->drift_count == 0)
        return;
    const struct column columns[] = {
        page_column(frame, "kept_parts", COLUMN_REF, 20, 1),
        page_column(frame, "parts", COLUMN_NUMBER, 9, 1),
        page_column(frame, "read", COLUMN_NUMBER, 9, 1),
        page_column(frame, "failed", COLUMN_NUMBER, 9, 1),
        page_column(frame, "leakage_drift", COLUMN_TEXT, 27, 2),
        page_column(frame, "value_drift", COLUMN_TEXT, 26, 2),
    };
    struct table *table = begin_table(frame, "table_drift", columns,
                                      sizeof columns / sizeof *columns, statistics->drift_count);
    for (size_t i = 0; i < statistics->drift_count; i++) {
        const struct drift_group *group = &statistics->drifts[i];
        struct cell *cells = table->rows[i].cells;
        bool other = strcmp(group->label, "resistor") == 0 || strcmp(group->label, "winding") == 0;
        cells[0].text = other ? say(work, group->label) : label_text(work, BY_TYPE, group->label);
        cells[1].figures = whole_figures(work, group->parts);
        if (!other) {
            cells[2].figures = whole_figures(work, group->read);
            cells[3].figures = whole_figures(work, group->failed);
        }
        cells[4].text = drift_text(work, "%.2f", group->leakage_median, group->leakage_low,
                                   group->leakage_high);
        cells[5].text = drift_text(work, "%+.2f", 100 * group->value_median, 100 * group->value_low,
                                   100 * group->value_high);
    }
    table->caption = say(work, "table.drift");
    mustache_set_flag(frame->arena, work->values, "any_drift", true);
}

/* ---- recall list and call-backs, with links */

static struct mustache_value *job_link(const struct statistics_work *work, size_t job)
{
    return page_job_row(work->frame, job);
}

/* The query that finds a batch, for the fragment of an address: all but letters and digits as %XX.
 */
static const char *batch_query(const struct statistics_work *work, const char *batch)
{
    struct buffer text = {0}, query = {0};
    bool quoted = strpbrk(batch, " \t") != NULL;
    buffer_print(&text, "batch=%s%s%s", quoted ? "\"" : "", batch, quoted ? "\"" : "");
    for (const char *at = buffer_string(&text); *at; at++) {
        bool plain = (*at >= 'a' && *at <= 'z') || (*at >= 'A' && *at <= 'Z') ||
                     (*at >= '0' && *at <= '9') || *at == '-' || *at == '.';
        if (plain) {
            buffer_byte(&query, *at);
        } else {
            buffer_byte(&query, '%');
            buffer_hex(&query, (unsigned char)*at, 2);
        }
    }
    const char *kept = arena_text(work->frame->arena, query.data, query.length);
    buffer_release(&text);
    buffer_release(&query);
    return kept;
}

static struct mustache_value *batch_row(const struct statistics_work *work,
                                        const struct batch_row *batch)
{
    struct arena *arena = work->frame->arena;
    const struct columns *columns = work->frame->columns;
    struct mustache_value *row = mustache_map(arena), *jobs = mustache_list(arena);
    size_t named = 0, last = SIZE_MAX;
    for (size_t i = 0; i < batch->count && named < RECALL_JOBS_MAX; i++) {
        size_t job = columns->part_job.codes[batch->parts[i]];
        if (job == last)
            continue;
        last = job;
        named++;
        mustache_push(arena, jobs, job_link(work, job));
    }
    mustache_set_text(arena, row, "batch", batch->batch);
    mustache_set_text(arena, row, "query", batch_query(work, batch->batch));
    mustache_set_text(
        arena, row, "fitted",
        text_typeset(arena, column_text(&columns->parts[PART_FITTED], batch->parts[0])));
    mustache_set_text(arena, row, "parts", number_text(work, (double)batch->count));
    mustache_set_text(arena, row, "sets", number_text(work, (double)batch->sets));
    mustache_set(arena, row, "jobs", jobs);
    if (batch->sets > named)
        mustache_set_text(arena, row, "more", number_text(work, (double)(batch->sets - named)));
    return row;
}

static void add_lists(struct statistics_work *work)
{
    struct arena *arena = work->frame->arena;
    const struct columns *columns = work->frame->columns;
    const struct statistics *statistics = &work->statistics;
    struct mustache_value *batches = mustache_list(arena), *calls = mustache_list(arena);
    for (size_t i = 0; i < statistics->batch_count; i++)
        mustache_push(arena, batches, batch_row(work, &statistics->batches[i]));
    for (size_t i = 0; i < statistics->call_back_count; i++) {
        struct mustache_value *row = job_link(work, statistics->call_backs[i]);
        mustache_set_text(arena, row, "date",
                          column_text(&columns->jobs[JOB_CALL_BACK], statistics->call_backs[i]));
        mustache_push(arena, calls, row);
    }
    mustache_set(arena, work->values, "batches", batches);
    mustache_set_flag(arena, work->values, "any_batches", statistics->batch_count > 0);
    mustache_set(arena, work->values, "call_backs", calls);
    mustache_set_flag(arena, work->values, "any_call_backs", statistics->call_back_count > 0);
}

/* ---- the page */

/* "Of ten waxed paper capacitors about six leak too much": the worst type, and the best. */
static void add_lead(struct statistics_work *work)
{
    const struct share_groups *groups = &work->statistics.groups[BY_TYPE];
    struct arena *arena = work->frame->arena;
    size_t count = shown_rows(groups, groups->count);
    if (count == 0)
        return;
    const size_t at[] = {0, count - 1};
    static const char *const keys[] = {"lead_worst", "lead_best"};
    for (size_t i = 0; i < (count > 1 ? 2u : 1u); i++) {
        const struct share_group *group = &groups->groups[at[i]];
        unsigned tenths = (unsigned)lround(10 * group->share.share);
        const char *few = tenths == 0 ? "few" : NULL;
        mustache_set_text(arena, work->values, keys[i],
                          phrase(&work->frame->say, "statistics.lead", "type",
                                 label_text(work, BY_TYPE, group->label), "count",
                                 few ? NULL : arena_print(arena, "%u", tenths), "few", few, NULL));
    }
}

static enum file_status write_tables(struct statistics_work *work)
{
    const struct columns *columns = work->frame->columns;
    struct buffer csv[4] = {{0}};
    static const char *const names[] = {"statistics.csv", "revisits.csv", "recall.csv",
                                        "call-backs.csv"};
    statistics_csv(&work->statistics, &csv[0]);
    drift_csv(columns, &csv[1]);
    recall_csv(columns, &work->statistics, &csv[2]);
    call_back_csv(columns, &work->statistics, &csv[3]);
    enum file_status status = FILE_OK;
    for (int i = 0; i < 4; i++) {
        if (status == FILE_OK)
            status = page_write_file(work->frame, names[i], &csv[i]);
        buffer_release(&csv[i]);
    }
    return status;
}

enum file_status page_statistics_write(struct page_frame *frame)
{
    struct statistics_work work = {.frame = frame,
                                   .statistics = statistics_of(frame->columns, frame->arena),
                                   .values = page_values(frame)};
    const struct share_group *all = &work.statistics.all;
    mustache_set_text(frame->arena, work.values, "parts",
                      number_text(&work, all->sums.n + all->outcomes[OUTCOME_NOT_JUDGED]));
    mustache_set_text(frame->arena, work.values, "sets",
                      number_text(&work, (double)work.statistics.first_visits));
    add_lead(&work);
    add_typical(&work);
    bool any = false;
    for (int i = 0; i < GROUPING_COUNT; i++) {
        bool plot = add_plot(&work, (enum grouping)i);
        mustache_set_flag(frame->arena, work.values,
                          arena_print(frame->arena, "has_%s", grouping_names[i]), plot);
        any = any || plot;
    }
    mustache_set_flag(frame->arena, work.values, "any_plot", any);
    for (int i = 0; i < GROUPING_COUNT; i++)
        if (work.statistics.groups[i].count)
            add_table(&work, (enum grouping)i);
    add_drift(&work);
    add_lists(&work);
    enum file_status status = write_tables(&work);
    if (status == FILE_OK)
        status = page_write(frame, "statistics.html", work.values, "statistics.html");
    return status;
}
