/* What was changed and where the original is; what was removed. */
#include "report/composition.h"

#include "job/part.h"

#include <string.h>

enum { CHANGED_REF, CHANGED_WAS, CHANGED_NOW, CHANGED_WHY, CHANGED_WHERE, CHANGED_COLUMNS };

static const struct column_plan plan[CHANGED_COLUMNS] = {
    [CHANGED_REF] = {"ref", NULL, NULL, COLUMN_REF, 6, 1},
    [CHANGED_WAS] = {"original", NULL, "was", COLUMN_TEXT, 22.5, 1},
    [CHANGED_NOW] = {"now", NULL, "now", COLUMN_TEXT, 24.5, 1},
    [CHANGED_WHY] = {"why", NULL, "why", COLUMN_TEXT, 27, 1},
    [CHANGED_WHERE] = {"the_original", NULL, "where", COLUMN_TEXT, 20, 1},
};

/* One changed part, of whatever kind. */
struct change {
    const char *ref;
    enum origin was;
    enum action done;
    enum age age;
    const char *original, *measured, *fitted, *batch, *signed_where, *price, *reason;
};

/* The ref stands in the text as a word of its own: C1 is not in "C14 C15". */
static bool names_ref(const char *text, const char *ref)
{
    static const char inside[] = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789";
    size_t length = strlen(ref);
    for (const char *at = text; (at = strcasestr(at, ref)) != NULL; at++) {
        bool begins = at == text || !strchr(inside, at[-1]);
        if (begins && (at[length] == '\0' || !strchr(inside, at[length])))
            return true;
    }
    return false;
}

static const char *kept_where(const struct composition *composition, const struct change *change)
{
    const struct phrasing *say = &composition->say;
    if (change->was == WAS_MISSING)
        return phrase(say, "where.missing", NULL);
    if (change->done == DONE_DISCONNECTED)
        return phrase(say, "where.disconnected", NULL);
    if (change->done == DONE_RESTUFFED)
        return phrase(say, "where.restuffed", "signed", change->signed_where, NULL);
    for (size_t i = 0; i < composition->job->removed_count; i++) {
        const struct named_prose *place = &composition->job->removed[i];
        if (place->value.text && names_ref(place->value.text, change->ref))
            return phrase(say, "where.removed", "place", place->name, NULL);
    }
    return phrase(say, "where.not_recorded", NULL);
}

static const char *now_second(const struct composition *composition, const struct change *change)
{
    const struct phrasing *say = &composition->say;
    const char *parts[] = {
        change->age == AGE_PERIOD ? phrase(say, "part.period", NULL) : NULL,
        change->batch ? phrase(say, "part.batch", "batch", change->batch, NULL) : NULL,
        change->price ? phrase(say, "part.price", "price", change->price, NULL) : NULL,
    };
    return text_join(composition->arena, ", ", parts, 3);
}

static void add_change(struct table_builder *builder, const struct change *change)
{
    const struct composition *composition = builder->composition;
    const struct phrasing *say = &composition->say;
    struct cell *cells = table_row(builder);
    cells[CHANGED_REF].text = change->ref;
    cells[CHANGED_WAS].text =
        change->was == WAS_MISSING ? phrase(say, "origin.missing", NULL) : change->original;
    cells[CHANGED_WAS].second =
        change->was == WAS_EARLIER_REPAIR ? phrase(say, "origin.earlier repair", NULL)
        : change->measured ? phrase(say, "part.measured", "value", change->measured, NULL)
                           : NULL;
    cells[CHANGED_NOW].text = change->fitted
                                  ? change->fitted
                                  : phrase_in(say, "nothing_fitted", action_text(change->done));
    cells[CHANGED_NOW].second = now_second(composition, change);
    cells[CHANGED_WHY].text = change->reason ? change->reason : phrase(say, "part.no_reason", NULL);
    cells[CHANGED_WHERE].text = kept_where(composition, change);
}

/* ---- one reader per kind of part; each gives the change of its index-th part */

static const char *capacitor_words(const struct composition *composition,
                                   const struct capacitor *part)
{
    const char *words[] = {
        text_marking(composition, &part->marked),
        part->type == DIELECTRIC_UNKNOWN
            ? NULL
            : phrase_in(&composition->say, "type", dielectric_text(part->type)),
    };
    return text_join(composition->arena, " ", words, 2);
}

static const char *reason_of(const struct capacitor_findings *findings)
{
    return findings->part->reason.text ? findings->part->reason.text : findings->why_text;
}

/* What a part of any kind says of its change. */
static struct change part_change(const struct composition *composition, enum part_kind kind,
                                 size_t index)
{
    struct part part = part_of(composition->job, kind, index);
    return (struct change){
        .ref = part.ref,
        .was = part.was,
        .done = part.done,
        .age = part.age,
        .original = part.marked ? text_marking(composition, part.marked) : part.marked_text,
        .fitted = part.fitted ? text_marking(composition, part.fitted) : part.fitted_text,
        .batch = part.batch,
        .signed_where = part.signed_where,
        .price = part.price,
        .reason = part.reason,
    };
}

static struct change capacitor_change(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *findings = &composition->findings->capacitors[index];
    struct change change = part_change(composition, KIND_CAPACITOR, index);
    change.was = capacitor_was(composition, index);
    change.original = capacitor_words(composition, findings->part);
    change.reason = reason_of(findings);
    return change;
}

/* Why a can was changed: the first reason that one of its sections gives. */
static const char *can_reason(const struct composition *composition, const struct can *can)
{
    const char *reason = can->reason.text;
    for (size_t i = 0; i < can->hold_count && !reason; i++) {
        const struct capacitor_findings *section =
            &composition->findings->capacitors[can->holds[i]];
        const char *why = reason_of(section);
        if (why)
            reason = arena_print(composition->arena, "%s: %s", section->part->ref, why);
    }
    return reason;
}

/* "C14 8 uF 350 V; C18 25 uF 25 V": what `words` says of each section; NULL: of none. */
static const char *of_sections(const struct composition *composition, const struct can *can,
                               const char *(*words)(const struct composition *,
                                                    const struct capacitor *))
{
    const char **sections = arena_array(composition->arena, can->hold_count, sizeof *sections);
    for (size_t i = 0; i < can->hold_count; i++) {
        const struct capacitor *section = &composition->job->capacitors[can->holds[i]];
        const char *said = words(composition, section);
        sections[i] = said ? arena_print(composition->arena, "%s %s", section->ref, said) : NULL;
    }
    return text_join(composition->arena, "; ", sections, can->hold_count);
}

static const char *fitted_words(const struct composition *composition, const struct capacitor *part)
{
    return part->fitted.set ? text_marking(composition, &part->fitted) : NULL;
}

static struct change can_change(const struct composition *composition, size_t index)
{
    const struct can *can = &composition->job->cans[index];
    struct change change = part_change(composition, KIND_CAN, index);
    change.original = of_sections(composition, can, capacitor_words);
    if (!can->fitted.set)
        change.fitted = of_sections(composition, can, fitted_words);
    change.reason = can_reason(composition, can);
    return change;
}

static struct change resistor_change(const struct composition *composition, size_t index)
{
    struct change change = part_change(composition, KIND_RESISTOR, index);
    change.measured = text_quantity(composition, &composition->job->resistors[index].measured);
    return change;
}

static struct change winding_change(const struct composition *composition, size_t index)
{
    struct change change = part_change(composition, KIND_WINDING, index);
    change.measured = text_quantity(composition, &composition->job->windings[index].measured);
    return change;
}

static struct change control_change(const struct composition *composition, size_t index)
{
    return part_change(composition, KIND_CONTROL, index);
}

static struct change valve_change(const struct composition *composition, size_t index)
{
    struct change change = part_change(composition, KIND_VALVE, index);
    change.measured = composition->job->valves[index].tested.text;
    return change;
}

typedef void change_visitor(void *data, const struct change *change);

static void visit_changes(const struct composition *composition, change_visitor *visit, void *data)
{
    static struct change (*const change_of[PART_KIND_COUNT])(const struct composition *, size_t) = {
        [KIND_CAPACITOR] = capacitor_change, [KIND_CAN] = can_change,
        [KIND_RESISTOR] = resistor_change,   [KIND_WINDING] = winding_change,
        [KIND_CONTROL] = control_change,     [KIND_VALVE] = valve_change,
    };
    for (enum part_kind kind = 0; kind < PART_KIND_COUNT; kind++)
        for (size_t i = 0; i < part_count(composition->job, kind); i++) {
            struct change change = change_of[kind](composition, i);
            if (action_is_change(change.done))
                visit(data, &change);
        }
}

static void count_change(void *data, const struct change *change)
{
    (void)change;
    ++*(size_t *)data;
}

bool has_changed(const struct composition *composition)
{
    size_t count = 0;
    visit_changes(composition, count_change, &count);
    return count > 0;
}

static void add_visited(void *data, const struct change *change)
{
    add_change(data, change);
}

void exhibit_changed(struct composition *composition, size_t index)
{
    (void)index;
    struct table_builder builder = table_begin(composition, "changed", plan, CHANGED_COLUMNS);
    builder.table->lined = builder.table->text_only = true;
    visit_changes(composition, add_visited, &builder);
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.changed", NULL));
}

void exhibit_removed(struct composition *composition, size_t index)
{
    (void)index;
    static const struct column_plan columns[] = {
        {"where", NULL, "where", COLUMN_REF, 22, 1},
        {"parts", NULL, "parts", COLUMN_TEXT, 78, 1},
    };
    struct table_builder builder = table_begin(composition, "removed", columns, 2);
    builder.table->lined = builder.table->text_only = true;
    for (size_t i = 0; i < composition->job->removed_count; i++) {
        struct cell *cells = table_row(&builder);
        cells[0].text = composition->job->removed[i].name;
        cells[1].text = text_refs(composition->arena, composition->job->removed[i].value.text);
    }
    table_place(&builder, NUMBERED_TABLE, phrase(&composition->say, "caption.removed", NULL));
}
