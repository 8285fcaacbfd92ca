#include "assess/stage_row.h"

#include "reference/valve_book.h"

#include <math.h>
#include <string.h>
#include <strings.h>

/* Small-signal valves draw less at their row. */
static const double output_from_a = 15e-3;

static const char *type_of(const struct job *job, const struct stage *stage)
{
    if (stage->valve_type || !stage->valve_ref)
        return stage->valve_type;
    for (size_t i = 0; i < job->valve_count; i++)
        if (strcmp(job->valves[i].ref, stage->valve_ref) == 0)
            return job->valves[i].type;
    return NULL;
}

/* A type that the book does not know is an output valve when its stage is one, or by its current.
 */
static enum valve_kind guessed_kind(const struct stage *stage)
{
    bool output = stage->use == USE_OUTPUT ||
                  (stage->use == USE_BY_VALVE && stage->row.ia.value >= output_from_a);
    if (stage->row.vg2.set)
        return output ? VALVE_OUTPUT_PENTODE : VALVE_SMALL_PENTODE;
    return output ? VALVE_POWER_TRIODE : VALVE_TRIODE;
}

/* The row that the job gives, with what it leaves out about the type taken from the book. */
static struct valve_row given_row(const struct stage *stage, const char *type,
                                  const struct valve_row *book)
{
    const struct given_row *given = &stage->row;
    return (struct valve_row){
        .type = type ? type : "",
        .kind = book ? book->kind : guessed_kind(stage),
        .name = "given",
        .va_v = quantity_or(&given->va, NAN),
        .vg2_v = quantity_or(&given->vg2, NAN),
        .vg1_v = quantity_or(&given->vg1, NAN),
        .ia_a = quantity_or(&given->ia, NAN),
        .ig2_a = quantity_or(&given->ig2, NAN),
        .gm_s = quantity_or(&given->gm, NAN),
        .mu = given->vg2.set ? NAN : quantity_or(&given->mu, NAN),
        .mu12 = given->vg2.set ? quantity_or(&given->mu, NAN) : NAN,
        .ra_ohm = quantity_or(&given->ra, NAN),
        .pa_max_w = quantity_or(&given->pa_max, book ? book->pa_max_w : NAN),
        .pg2_max_w = quantity_or(&given->pg2_max, book ? book->pg2_max_w : NAN),
        .grid_leak_max_fixed_ohm = book ? book->grid_leak_max_fixed_ohm : NAN,
        .grid_leak_max_cathode_ohm = book ? book->grid_leak_max_cathode_ohm : NAN,
        .source = given->source.text ? given->source.text : "",
        .row_trust = TRUST_SEEN,
        .limits_trust = book ? book->limits_trust : TRUST_SEEN,
    };
}

static const struct valve_row *named_row(const struct row_telling *telling,
                                         const struct stage *stage, const struct valve_row *rows,
                                         size_t count)
{
    for (size_t i = 0; i < count; i++)
        if (strcasecmp(rows[i].name, stage->row_name) == 0)
            return &rows[i];
    const char **names = arena_array(telling->arena, count + 1, sizeof *names);
    for (size_t i = 0; i < count; i++)
        names[i] = rows[i].name;
    const char *near = nearest_word(stage->row_name, names);
    diagnostic_add(telling->diagnostics, &telling->job->source, stage->at,
                   DIAGNOSTIC_VALVE_ROW_UNKNOWN,
                   near ? arena_print(telling->arena, "nearest row: %s", near) : NULL,
                   "the valve book has no row '%s' of %s", stage->row_name, rows[0].type);
    return NULL;
}

static void choose_row(const struct row_telling *telling, struct stage_model *model)
{
    const struct stage *stage = model->stage;
    size_t count = 0;
    const struct valve_row *rows =
        model->valve_type ? valve_rows_of(model->valve_type, &count) : NULL;
    if (!rows)
        count = 0;
    if (stage->row.set) {
        model->given = given_row(stage, model->valve_type, count ? rows : NULL);
        model->row = &model->given;
        return;
    }
    if (count == 0)
        return;
    if (stage->row_name)
        model->row = named_row(telling, stage, rows, count);
    if (!model->row)
        model->row = valve_row_nearest(rows, count, stage->supply.value,
                                       quantity_or(&stage->screen_volts, stage->supply.value));
}

static void fit_law(const struct row_telling *telling, struct stage_model *model)
{
    model->law_status = valve_law_fit(model->row, &model->law);
    const char *what = NULL;
    switch (model->law_status) {
    case LAW_OK:
        return;
    case LAW_WARN_MU12:
        diagnostic_add(telling->diagnostics, &telling->job->source, model->stage->at,
                       DIAGNOSTIC_VALVE_ROW_DOUBTFUL, NULL,
                       "row %s of %s: its figures give another screen amplification than printed",
                       model->row->name, model->row->type);
        return;
    case LAW_NO_CURRENT:
        what = "anode current or volts are missing";
        break;
    case LAW_NO_GAIN:
        what = "neither gm nor mu is given";
        break;
    case LAW_IMPOSSIBLE:
        what = "its figures contradict each other";
        break;
    }
    diagnostic_add(telling->diagnostics, &telling->job->source, model->stage->at,
                   DIAGNOSTIC_VALVE_ROW_UNUSABLE, NULL, "row %s of %s cannot be used: %s",
                   model->row->name, model->row->type, what);
    model->why = WHY_NO_ROW;
}

void stage_row_fit(const struct row_telling *telling, struct stage_model *model)
{
    model->valve_type = type_of(telling->job, model->stage);
    model->law_status = LAW_NO_CURRENT;
    choose_row(telling, model);
    if (model->row)
        fit_law(telling, model);
    else
        model->why = WHY_NO_ROW;
    model->is_triode = model->row && valve_kind_is_triode(model->row->kind);
    model->is_output =
        model->stage->use == USE_OUTPUT ||
        (model->stage->use == USE_BY_VALVE && model->row && valve_kind_is_output(model->row->kind));
}

/* A valve with two halves was named without saying which: "ECL82" where the book has its triode. */
static const char *half_of(const char *type)
{
    size_t count, length = strlen(type);
    const struct valve_row *book = valve_book(&count);
    for (size_t i = 0; i < count; i++)
        if (strncasecmp(book[i].type, type, length) == 0 && book[i].type[length] == ' ')
            return book[i].type;
    return NULL;
}

void stage_row_tell_unknown(const struct row_telling *telling, const struct stage_model *model,
                            bool needed)
{
    const struct stage *stage = model->stage;
    struct position at = stage->valve_at.line ? stage->valve_at : stage->at;
    const char *half = model->valve_type ? half_of(model->valve_type) : NULL;
    enum diagnostic_code code = needed ? DIAGNOSTIC_VALVE_UNKNOWN : DIAGNOSTIC_VALVE_NOT_NEEDED;
    if (!model->valve_type)
        diagnostic_add(telling->diagnostics, &telling->job->source, at, code,
                       "say `valve: V4 6V6GT`", "stage '%s' names no valve", stage->name);
    else if (half)
        diagnostic_add(telling->diagnostics, &telling->job->source, at, DIAGNOSTIC_VALVE_AMBIGUOUS,
                       arena_print(telling->arena, "say which half: %s", half),
                       "'%s' has more than one system", model->valve_type);
    else
        diagnostic_add(telling->diagnostics, &telling->job->source, at, code,
                       needed ? "give a row of its manual: `row: va 250 V, vg1 -12.5 V, ia 45 mA, "
                                "gm ...`"
                              : "every part that was read is judged without it",
                       "no row for '%s' in the valve book", model->valve_type);
}
