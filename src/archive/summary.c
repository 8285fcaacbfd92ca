#include "archive/summary.h"

#include "archive/columns.h"
#include "assess/visit.h"
#include "job/part.h"
#include "write/json.h"

#include <math.h>
#include <string.h>

/* A part's facts by column; NULL: unknown. */
struct row {
    const char *texts[PART_COLUMN_COUNT];
};
struct again_row {
    const char *texts[AGAIN_COLUMN_COUNT];
};
struct summary_work {
    const struct findings *findings;
    struct arena arena;
    struct buffer *out;
    struct row *rows;
    size_t row_count;
};

/* ---- the parts as columns */

/* uA to two figures, without an exponent: few different texts, and what the record shows. */
static const char *micro_text(struct arena *arena, double ampere, enum bound bound)
{
    static const char *const signs[] = {[BOUND_NONE] = "", [BOUND_OVER] = ">", [BOUND_UNDER] = "<"};
    if (!isfinite(ampere))
        return NULL;
    double micro = ampere * 1e6;
    if (micro <= 0)
        return arena_print(arena, "%s0", signs[bound]);
    int first = (int)floor(log10(micro));
    double unit = pow(10, first - 1);
    double rounded = round(micro / unit * (1 + 1e-13)) * unit;
    first = (int)floor(log10(rounded * (1 + 1e-13)));
    return arena_print(arena, "%s%.*f", signs[bound], first < 1 ? 1 - first : 0, rounded);
}

static const char *valves_of_part(struct summary_work *work, const struct capacitor *part)
{
    const struct job *job = work->findings->job;
    const char *text = NULL;
    for (size_t i = 0; i < part->stage_count; i++) {
        const char *type = job->stages[part->stages[i]].valve_type;
        if (type && (!text || !strstr(text, type)))
            text = text ? arena_print(&work->arena, "%s, %s", text, type) : type;
    }
    return text;
}

static void take_capacitor(struct summary_work *work, size_t index)
{
    const struct capacitor_findings *found = &work->findings->capacitors[index];
    const struct capacitor *part = found->part;
    const struct job *job = work->findings->job;
    const struct can *can = part_can(job, part);
    bool as_found = !isnan(found->found_leakage_a);
    struct row *row = &work->rows[work->row_count++];
    *row = (struct row){{
        [PART_REF] = part->ref,
        [PART_KIND] = part_kind_text(KIND_CAPACITOR),
        [PART_TYPE] = dielectric_text(part->type),
        [PART_MAKER] = part->maker || !can ? part->maker : can->maker,
        [PART_MARKED] = part->marked.written,
        [PART_PLACE] = place_text(part->place),
        [PART_VALVES] = valves_of_part(work, part),
        [PART_WAS] = origin_text(part_origin(job, part)),
        [PART_DONE] = action_text(part_action(job, part)),
        [PART_OUTCOME] = outcome_text(found->outcome_found),
        [PART_LEFT] = outcome_text(found->outcome),
        [PART_LEAKAGE] =
            micro_text(&work->arena, as_found ? found->found_leakage_a : found->test_leakage_a,
                       as_found ? BOUND_NONE : found->test_bound),
        [PART_LIMIT] = micro_text(
            &work->arena, as_found ? found->found_limit_a : found->test_limit_a, BOUND_NONE),
        [PART_UNREAD] = found->replaced_unmeasured ? "unread" : NULL,
        [PART_FITTED] = part_fitted(job, part)->written,
        [PART_BATCH] = part->batch || !can ? part->batch : can->batch,
    }};
}

static void take_others(struct summary_work *work)
{
    static const enum part_kind kinds[] = {KIND_RESISTOR, KIND_WINDING, KIND_CONTROL, KIND_VALVE};
    const struct job *job = work->findings->job;
    for (size_t k = 0; k < sizeof kinds / sizeof *kinds; k++)
        for (size_t i = 0; i < part_count(job, kinds[k]); i++) {
            struct part part = part_of(job, kinds[k], i);
            work->rows[work->row_count++] = (struct row){{
                [PART_REF] = part.ref,
                [PART_KIND] = part_kind_text(kinds[k]),
                [PART_MAKER] = part.maker,
                [PART_MARKED] = part.marked_text,
                [PART_VALVES] = kinds[k] == KIND_VALVE ? part.marked_text : NULL,
                [PART_WAS] = origin_text(part.was),
                [PART_DONE] = action_text(part.done),
                [PART_FITTED] = part.fitted_text,
                [PART_BATCH] = part.batch,
            }};
        }
}

/* One column of `count` rows, `stride` texts apart; one without any text is left out. */
static void write_column(struct buffer *out, const char *name, const char *const *texts,
                         size_t stride, size_t count)
{
    bool any = false;
    for (size_t i = 0; i < count && !any; i++)
        any = texts[i * stride] && *texts[i * stride];
    if (!any)
        return;
    json_open(out, name, '[');
    for (size_t i = 0; i < count; i++) {
        const char *text = texts[i * stride];
        if (i)
            buffer_byte(out, ',');
        json_string(out, text ? text : "");
    }
    json_close(out, ']');
}

static void write_parts(struct summary_work *work)
{
    const struct findings *findings = work->findings;
    const struct job *job = findings->job;
    work->rows = arena_array(&work->arena,
                             findings->capacitor_count + job->resistor_count + job->winding_count +
                                 job->control_count + job->valve_count,
                             sizeof *work->rows);
    for (size_t i = 0; i < findings->capacitor_count; i++)
        take_capacitor(work, i);
    take_others(work);
    json_open(work->out, "parts", '{');
    for (int i = 0; i < PART_COLUMN_COUNT && work->row_count; i++)
        write_column(work->out, part_column_keys[i], &work->rows[0].texts[i], PART_COLUMN_COUNT,
                     work->row_count);
    json_close(work->out, '}');
}

/* ---- parts measured again */

static const char *factor_text(struct arena *arena, double then, double now)
{
    double factor = now / then;
    return then > 0 && isfinite(factor) && factor > 0 ? arena_print(arena, "%.4g", factor) : NULL;
}

static struct again_row again_of(struct summary_work *work, const struct visit_changes *since,
                                 const struct visit_change *change)
{
    static const char *const kinds[] = {[VISIT_CAPACITOR] = "capacitor",
                                        [VISIT_RESISTOR] = "resistor",
                                        [VISIT_WINDING] = "winding"};
    bool bound = change->then_bound != BOUND_NONE || change->now_bound != BOUND_NONE;
    const struct capacitor_findings *found =
        change->capacitor == NOT_LISTED ? NULL : &work->findings->capacitors[change->capacitor];
    struct arena *arena = &work->arena;
    return (struct again_row){{
        [AGAIN_REF] = change->ref,
        [AGAIN_TYPE] = found ? dielectric_text(found->part->type) : kinds[change->kind],
        [AGAIN_YEARS] = isnan(since->years) ? NULL : arena_print(arena, "%.2f", since->years),
        [AGAIN_LEAKAGE_FACTOR] = bound ? NULL : factor_text(arena, change->then_a, change->now_a),
        [AGAIN_VALUE_FACTOR] = factor_text(arena, change->then_value, change->now_value),
        [AGAIN_OUTCOME] = found ? outcome_text(found->outcome_found) : NULL,
    }};
}

static void write_again(struct summary_work *work)
{
    const struct visit_changes *since = work->findings->since;
    if (!since)
        return;
    struct again_row *rows = arena_array(&work->arena, since->count, sizeof *rows);
    size_t count = 0;
    for (size_t i = 0; i < since->count; i++)
        if (visit_was_kept(since->items[i].done_then))
            rows[count++] = again_of(work, since, &since->items[i]);
    if (count == 0)
        return;
    json_open(work->out, "again", '{');
    for (int i = 0; i < AGAIN_COLUMN_COUNT; i++)
        write_column(work->out, again_column_keys[i], &rows[0].texts[i], AGAIN_COLUMN_COUNT, count);
    json_close(work->out, '}');
}

/* ---- the set */

static const char *all_valves(struct summary_work *work)
{
    const struct job *job = work->findings->job;
    const char *text = NULL;
    for (size_t i = 0; i < job->valve_count; i++)
        if (job->valves[i].type)
            text = text ? arena_print(&work->arena, "%s, %s", text, job->valves[i].type)
                        : job->valves[i].type;
    return text;
}

static void write_years(struct summary_work *work)
{
    const struct year_span *year = &work->findings->job->set.year;
    json_choice_member(work->out, job_column_keys[JOB_YEAR], year->written);
    if (!year->set)
        return;
    json_count_member(work->out, job_column_keys[JOB_YEAR_FIRST], year->first);
    json_count_member(work->out, job_column_keys[JOB_YEAR_LAST], year->last);
    int middle = (year->first + year->last) / 2;
    json_choice_member(work->out, job_column_keys[JOB_DECADE],
                       arena_print(&work->arena, "%ds", middle / 10 * 10));
}

static void write_set(struct summary_work *work)
{
    const struct job *job = work->findings->job;
    const struct {
        enum job_column column;
        const char *text;
    } texts[] = {
        {JOB_MAKER, job->set.maker.text},
        {JOB_MODEL, job->set.model.text},
        {JOB_CHASSIS, job->set.chassis.text},
        {JOB_SERIAL, job->set.serial.text},
        {JOB_DESCRIPTION, job->set.description.text},
        {JOB_SUPPLY, supply_text(job->set.supply)},
        {JOB_RECEIVED, job->received.written},
        {JOB_RETURNED, job->returned.written},
        {JOB_TECHNICIAN, job->technician.text},
        {JOB_CALL_BACK, job->call_back.written},
        {JOB_CONTINUES, job->continues.text},
        {JOB_VALVES, all_valves(work)},
    };
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++)
        json_choice_member(work->out, job_column_keys[texts[i].column], texts[i].text);
    write_years(work);
}

void summary_write(const struct findings *findings, struct buffer *out)
{
    struct summary_work work = {.findings = findings, .out = out};
    unsigned failed = 0;
    for (size_t i = 0; i < findings->capacitor_count; i++)
        failed += findings->capacitors[i].outcome_found == OUTCOME_FAIL;
    json_open(out, NULL, '{');
    json_count_member(out, "summary", SUMMARY_VERSION);
    json_choice_member(out, job_column_keys[JOB_NUMBER], findings->job->number);
    json_flag_member(out, "broken", false);
    json_flag_member(out, job_column_keys[JOB_IN_PROGRESS], findings->in_progress);
    write_set(&work);
    json_count_member(out, job_column_keys[JOB_KEPT], findings->originality.total.kept);
    json_count_member(out, job_column_keys[JOB_OF], findings->originality.total.of);
    json_count_member(out, job_column_keys[JOB_FAILED], failed);
    json_count_member(out, job_column_keys[JOB_CAPACITORS], (long long)findings->capacitor_count);
    write_parts(&work);
    write_again(&work);
    json_close(out, '}');
    buffer_byte(out, '\n');
    arena_release(&work.arena);
}

void summary_write_broken(const char *name, const struct diagnostics *diagnostics,
                          struct buffer *out)
{
    json_open(out, NULL, '{');
    json_count_member(out, "summary", SUMMARY_VERSION);
    json_choice_member(out, "job", name);
    json_flag_member(out, "broken", true);
    json_open(out, "diagnostics", '[');
    for (size_t i = 0; i < diagnostics->count; i++) {
        const struct diagnostic *item = &diagnostics->items[i];
        if (item->severity != SEVERITY_ERROR)
            continue;
        json_open(out, NULL, '{');
        json_count_member(out, "line", item->at.line);
        json_count_member(out, "column", item->at.column);
        json_choice_member(out, "text", item->text);
        json_close(out, '}');
    }
    json_close(out, ']');
    json_close(out, '}');
    buffer_byte(out, '\n');
}
