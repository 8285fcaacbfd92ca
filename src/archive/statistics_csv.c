/* The numbers of statistics.html as CSV. */
#include "archive/statistics.h"

#include <math.h>
#include <string.h>

/* A field; quoted when it must be (RFC 4180). */
static void field(struct buffer *out, const char *text)
{
    bool plain = strpbrk(text, ",\"\r\n") == NULL;
    if (out->length && out->data[out->length - 1] != '\n')
        buffer_byte(out, ',');
    if (plain) {
        /* An empty first field still begins its line. */
        buffer_text(out,
                    *text || (out->length && out->data[out->length - 1] == ',') ? text : "\"\"");
        return;
    }
    buffer_byte(out, '"');
    for (; *text; text++) {
        if (*text == '"')
            buffer_byte(out, '"');
        buffer_byte(out, *text);
    }
    buffer_byte(out, '"');
}

static void number_field(struct buffer *out, double value)
{
    buffer_byte(out, ',');
    if (isfinite(value))
        buffer_print(out, "%.6g", value);
}

static void column_fields(struct buffer *out, const struct column_data *group,
                          const unsigned char *wanted, size_t count, size_t row)
{
    for (size_t i = 0; i < count; i++)
        field(out, column_text(&group[wanted[i]], row));
}

static void group_line(const char *grouping, const struct share_group *group, struct buffer *out)
{
    field(out, grouping);
    field(out, group->label ? group->label : "");
    number_field(out, group->sums.x);
    number_field(out, group->sums.n);
    number_field(out, group->sums.sets);
    number_field(out, group->sums.unread);
    for (int outcome = 0; outcome < OUTCOME_COUNT; outcome++)
        number_field(out, group->outcomes[outcome]);
    const struct share *share = &group->share;
    /* Too few sets: only the counts are published. */
    bool shown = !isnan(share->low);
    number_field(out, shown ? share->share : NAN);
    number_field(out, share->low);
    number_field(out, share->high);
    number_field(out, shown ? share->best : NAN);
    number_field(out, shown ? share->worst : NAN);
    number_field(out, share->effective_n);
    number_field(out, shown ? share->design_effect : NAN);
    buffer_byte(out, '\n');
}

void statistics_csv(const struct statistics *statistics, struct buffer *out)
{
    buffer_text(out, "grouping,label,failed,read,sets,unread");
    for (int outcome = 0; outcome < OUTCOME_COUNT; outcome++)
        field(out, outcome_text((enum outcome)outcome));
    buffer_text(out, ",share,low,high,share_if_unread_good,share_if_unread_failed,"
                     "effective_parts,design_effect\n");
    group_line("all", &statistics->all, out);
    for (int i = 0; i < GROUPING_COUNT; i++)
        for (size_t j = 0; j < statistics->groups[i].count; j++)
            group_line(grouping_names[i], &statistics->groups[i].groups[j], out);
}

void drift_csv(const struct columns *columns, struct buffer *out)
{
    static const unsigned char of_job[] = {JOB_NUMBER, JOB_CONTINUES},
                               of_part[] = {AGAIN_REF,          AGAIN_TYPE,
                                            AGAIN_YEARS,        AGAIN_LEAKAGE_FACTOR,
                                            AGAIN_VALUE_FACTOR, AGAIN_OUTCOME};
    buffer_text(out, "job,earlier_job,ref,type,years,leakage_factor,value_factor,outcome\n");
    for (size_t i = 0; i < columns->again_count; i++) {
        column_fields(out, columns->jobs, of_job, sizeof of_job, columns->again_job.codes[i]);
        column_fields(out, columns->again, of_part, sizeof of_part, i);
        buffer_byte(out, '\n');
    }
}

void recall_csv(const struct columns *columns, const struct statistics *statistics,
                struct buffer *out)
{
    static const unsigned char of_job[] = {JOB_NUMBER, JOB_MAKER, JOB_MODEL, JOB_SERIAL},
                               of_part[] = {PART_REF, PART_KIND, PART_PLACE, PART_FITTED,
                                            PART_DONE};
    buffer_text(out, "batch,job,maker,model,serial,ref,kind,place,fitted,done\n");
    for (size_t i = 0; i < statistics->batch_count; i++) {
        const struct batch_row *batch = &statistics->batches[i];
        for (size_t j = 0; j < batch->count; j++) {
            size_t part = batch->parts[j];
            field(out, batch->batch);
            column_fields(out, columns->jobs, of_job, sizeof of_job, columns->part_job.codes[part]);
            column_fields(out, columns->parts, of_part, sizeof of_part, part);
            buffer_byte(out, '\n');
        }
    }
}

void call_back_csv(const struct columns *columns, const struct statistics *statistics,
                   struct buffer *out)
{
    static const unsigned char wanted[] = {JOB_CALL_BACK, JOB_NUMBER, JOB_MAKER,
                                           JOB_MODEL,     JOB_SERIAL, JOB_RETURNED};
    buffer_text(out, "call_back,job,maker,model,serial,returned\n");
    for (size_t i = 0; i < statistics->call_back_count; i++) {
        column_fields(out, columns->jobs, wanted, sizeof wanted, statistics->call_backs[i]);
        buffer_byte(out, '\n');
    }
}
