/* For a terminal: everything besides leakage that is outside its figure or was not judged. */
#include "report/held_words.h"

enum { ITEM, VALUE, LIMIT, OUTCOME, COLUMNS };

static const struct column_plan plan[COLUMNS] = {
    [ITEM] = {"item", NULL, NULL, COLUMN_REF, 30, 1},
    [VALUE] = {"value", NULL, NULL, COLUMN_TEXT, 18, 1},
    [LIMIT] = {"limit_of", NULL, NULL, COLUMN_TEXT, 18, 2},
    [OUTCOME] = {"outcome", NULL, NULL, COLUMN_OUTCOME, 34, 1},
};

static const char *value_text(const struct composition *composition, const struct held *held)
{
    if (!isfinite(held->value))
        return NULL;
    return held->unit == UNIT_PERCENT
               ? text_signed(composition->arena, held->value, UNIT_PERCENT, 2)
               : text_unit(composition, held->value, held->unit, 3);
}

/* What passes, what nobody publishes a figure for and what was not read is not listed. */
static void add(struct table_builder *builder, const char *item, const struct held *held)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    if (held->outcome == OUTCOME_PASS || held->outcome == OUTCOME_CONDITIONAL_PASS)
        return;
    if (held->outcome == OUTCOME_NOT_JUDGED &&
        (held->why == WHY_NO_FIGURE || held->why == WHY_NO_READING ||
         (held->why == WHY_MISSING_FACT && !isfinite(held->value))))
        return;
    struct cell *cells = table_row(builder);
    cells[ITEM].text = item;
    cells[VALUE].text = value_text(composition, held);
    cells[LIMIT].text = held_limits(composition, held);
    cells[OUTCOME] = (struct cell){
        .text = phrase_in(say, "held", outcome_text(held->outcome)),
        .second = held->why == WHY_NONE || held->why == WHY_WITHIN_UNCERTAINTY
                      ? NULL
                      : phrase_in(say, "reason", reason_text(held->why)),
        .mark = mark_of(held->outcome),
        .strong = held->outcome == OUTCOME_FAIL,
    };
}

static void add_reform(struct table_builder *builder, const struct reform_findings *found)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    struct held held = found->rest;
    if (!found->reform)
        return;
    held.outcome = found->outcome;
    held.why = found->why == WHY_NO_READING ? WHY_MISSING_FACT : found->why;
    if (!isfinite(held.value))
        held.value = found->plateau_a;
    add(builder,
        phrase(say, "item.reform", "ref", composition->job->capacitors[found->capacitor].ref, NULL),
        &held);
}

static void add_parts(struct table_builder *builder)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    const struct bench_findings *bench = &composition->findings->bench;
    const struct job *job = composition->job;
    for (size_t i = 0; i < job->resistor_count; i++) {
        add(builder, job->resistors[i].ref, &bench->resistors[i].tolerance);
        add(builder, phrase(say, "item.watts", "ref", job->resistors[i].ref, NULL),
            &bench->resistors[i].dissipation);
    }
    for (size_t i = 0; i < job->winding_count; i++) {
        add(builder, job->windings[i].ref, &bench->windings[i].resistance);
        add(builder, phrase(say, "item.insulation", "ref", job->windings[i].ref, NULL),
            &bench->windings[i].insulation);
    }
    for (size_t i = 0; i < job->valve_count; i++)
        add(builder, job->valves[i].ref, &bench->valves[i].share);
    for (size_t i = 0; i < bench->replacement_count; i++)
        for (size_t k = 0; k < REPLACEMENT_CHECK_COUNT; k++)
            if (bench->replacements[i].checked[k])
                add(builder, phrase(say, "item.fitted", "ref", bench->replacements[i].ref, NULL),
                    &bench->replacements[i].checks[k]);
}

static void add_set(struct table_builder *builder)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    const struct bench_findings *bench = &composition->findings->bench;
    const struct job *job = composition->job;
    for (size_t i = 0; i < job->voltages.point_count; i++) {
        const char *point = job->voltages.points[i].name;
        add(builder, phrase(say, "item.found", "point", point, NULL),
            &bench->voltages[i].compared[0]);
        add(builder, phrase(say, "item.left", "point", point, NULL),
            &bench->voltages[i].compared[1]);
    }
    for (size_t i = 0; i < job->safety_count; i++)
        add(builder, job->safety[i].name, &bench->safety[i].value);
}

void exhibit_assessed_bench(struct composition *composition, size_t index)
{
    (void)index;
    const struct bench_findings *bench = &composition->findings->bench;
    if (!bench->resistors) /* not assessed */
        return;
    struct table_builder builder = table_begin(composition, "bench", plan, COLUMNS);
    builder.table->lined = true;
    for (size_t i = 0; i < composition->job->reform_count; i++)
        add_reform(&builder, &bench->reforms[i]);
    add_parts(&builder);
    add_set(&builder);
    table_drop_empty(&builder);
    table_place(&builder, NUMBERED_TABLE,
                phrase(&composition->say, "caption.assessed_bench", NULL));
}
