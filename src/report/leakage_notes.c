#include "report/leakage_notes.h"

#include "report/phrases.h"

#include <string.h>

/* One condition and the phrase `note.<key>` that tells it. */
typedef bool condition(const struct composition *composition, size_t index);

static const struct capacitor_findings *part_of(const struct composition *composition, size_t index)
{
    return &composition->findings->capacitors[index];
}

static bool is_repair(const struct composition *composition, size_t index)
{
    return capacitor_was(composition, index) == WAS_EARLIER_REPAIR;
}

static bool was_missing(const struct composition *composition, size_t index)
{
    return capacitor_was(composition, index) == WAS_MISSING;
}

static bool no_reading_passes(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->no_reading_passes;
}

static bool within_uncertainty(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    return part->why == WHY_WITHIN_UNCERTAINTY && part->outcome != OUTCOME_NOT_JUDGED;
}

static bool instrument_too_coarse(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->why == WHY_INSTRUMENT;
}

static bool tested_above_marked(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->tested_above_marked;
}

static bool service_above_marked(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->service_above_marked;
}

static bool is_rising(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->trend == TREND_RISING;
}

static bool must_wait(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    return part->why == WHY_WAIT && isfinite(part->absorption.wait_until_s);
}

static bool fails_jointly(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->why == WHY_JOINT;
}

static bool turns_on_temperature(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->turns_on_temperature;
}

static bool read_hot(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    return part->deciding >= 0 && isfinite(part->test_c);
}

static bool exponent_warning(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->exponent_warning;
}

static bool limit_is_heat(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->limit_is_heat;
}

static bool limit_none(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->limit_none;
}

static bool is_reformed(const struct composition *composition, size_t index)
{
    return part_of(composition, index)->state == STATE_REFORMED;
}

static bool replaced_unmeasured(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    return part->replaced_unmeasured && !part->no_reading_passes;
}

static const struct {
    condition *holds;
    const char *key;
} notes[] = {
    {is_repair, "note.earlier_repair"},
    {was_missing, "note.missing"},
    {no_reading_passes, "note.no_reading_passes"},
    {within_uncertainty, "note.within_uncertainty"},
    {instrument_too_coarse, "note.instrument"},
    {tested_above_marked, "note.tested_above_marked"},
    {service_above_marked, "note.service_above_marked"},
    {is_rising, "note.rising"},
    {must_wait, "note.wait"},
    {fails_jointly, "note.joint"},
    {turns_on_temperature, "note.turns_on_temperature"},
    {read_hot, "note.read_hot"},
    {exponent_warning, "note.exponent"},
    {limit_is_heat, "note.limit_is_heat"},
    {limit_none, "note.limit_none"},
    {is_reformed, "note.reformed"},
    {replaced_unmeasured, "note.replaced_unmeasured"},
};

static const struct criterion *rule_used(const struct capacitor_findings *part)
{
    for (size_t i = 0; i < part->criterion_count; i++)
        if (part->criteria[i].key == CRITERION_LEAKAGE_RULE)
            return &part->criteria[i];
    return NULL;
}

/* The rule by name, the others beside it: for one capacitor they differ by a factor of fifty. */
static const char *rule_note(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    const struct criterion *used = rule_used(part);
    if (!used || !used->rule)
        return NULL;
    struct arena *arena = composition->arena;
    struct buffer others = {0};
    for (size_t i = 0; i < part->other_rule_count; i++) {
        const struct criterion *other = &part->other_rules[i];
        if (isfinite(other->limit) && other->rule && strcmp(other->rule, used->rule) != 0)
            buffer_print(&others, "%s%s (%s)", others.length ? ", " : "",
                         text_micro(arena, other->limit, 2), text_with_micro(arena, other->rule));
    }
    const char *list = others.length ? arena_text(arena, others.data, others.length) : NULL;
    buffer_release(&others);
    return phrase(&composition->say, "note.rule", "rule", text_with_micro(arena, used->rule),
                  "limit", text_micro(arena, used->limit, 2), "marked",
                  text_marking(composition, &part->part->marked), "others", list, NULL);
}

/* A part may fail by another figure than its leakage: the table alone would not show why. */
static const char *other_figure_note(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    bool failed = part->outcome == OUTCOME_FAIL || part->outcome == OUTCOME_CONDITIONAL_FAIL;
    bool by_leakage = part->test_leakage_a > part->test_limit_a;
    if (!failed || by_leakage || part->why != WHY_NONE || !part->why_text)
        return NULL;
    return text_stopped(composition->arena, text_sentence(composition->arena, part->why_text));
}

/* The part's own, or that of the can it is in. */
static const char *reason_given(const struct composition *composition,
                                const struct capacitor_findings *part)
{
    if (part->part->reason.text || part->part->can == NOT_LISTED)
        return part->part->reason.text;
    return composition->job->cans[part->part->can].reason.text;
}

static const char *against_advice_note(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = part_of(composition, index);
    if (!part->against_advice)
        return NULL;
    return phrase(
        &composition->say, "note.against_advice", "advice", part->advice_text, "done",
        phrase_in(&composition->say, "done", action_text(capacitor_done(composition, index))),
        "reason", text_stopped(composition->arena, reason_given(composition, part)), NULL);
}

void leakage_notes(struct table_builder *builder, struct cell *cell, size_t index)
{
    const struct composition *composition = builder->composition;
    const struct capacitor_findings *part = part_of(composition, index);
    for (size_t i = 0; i < sizeof notes / sizeof *notes; i++)
        if (notes[i].holds(composition, index))
            table_note(builder, cell,
                       phrase_of(&composition->say, notes[i].key,
                                 part_values(&composition->say, composition->job, part)));
    table_note(builder, cell, rule_note(composition, index));
    table_note(builder, cell, other_figure_note(composition, index));
    table_note(builder, cell, against_advice_note(composition, index));
    table_note(
        builder, cell,
        text_stopped(composition->arena, text_sentence(composition->arena, part->part->note.text)));
}
