#include "archive/summary.h"

#include "write/json.h"

#include <math.h>
#include <string.h>

enum { SUMMARY_VERSION = 1 };

static void key(struct buffer *out, const char *name)
{
    if (out->length && out->data[out->length - 1] != '{' && out->data[out->length - 1] != '[')
        buffer_byte(out, ',');
    buffer_print(out, "\"%s\":", name);
}

static void text_member(struct buffer *out, const char *name, const char *text)
{
    key(out, name);
    json_string(out, text && *text ? text : NULL);
}

static void number_member(struct buffer *out, const char *name, double value)
{
    key(out, name);
    json_number(out, value);
}

static void flag_member(struct buffer *out, const char *name, bool value)
{
    key(out, name);
    buffer_text(out, value ? "true" : "false");
}

static double quantity_value(const struct quantity *quantity)
{
    return quantity->set ? quantity->value : NAN;
}

static void open_item(struct buffer *out)
{
    if (out->data[out->length - 1] == '}')
        buffer_byte(out, ',');
    buffer_byte(out, '{');
}

static void write_stage_valves(struct buffer *out, const struct job *job,
                               const struct capacitor *part)
{
    key(out, "valves");
    buffer_byte(out, '[');
    for (size_t i = 0; i < part->stage_count; i++) {
        if (i)
            buffer_byte(out, ',');
        json_string(out, job->stages[part->stages[i]].valve_type);
    }
    buffer_byte(out, ']');
}

static void write_capacitor(struct buffer *out, const struct findings *findings, size_t index)
{
    const struct capacitor_findings *found = &findings->capacitors[index];
    const struct capacitor *part = found->part;
    open_item(out);
    text_member(out, "ref", part->ref);
    text_member(out, "kind", "capacitor");
    text_member(out, "type", dielectric_text(part->type));
    text_member(out, "maker", part->maker);
    text_member(out, "marked", part->marked.written);
    number_member(out, "value_f", quantity_value(&part->marked.value));
    number_member(out, "rated_v", quantity_value(&part->marked.rated));
    text_member(out, "place", place_text(part->place));
    write_stage_valves(out, findings->job, part);
    text_member(out, "was", origin_text(part->was));
    text_member(out, "state", part_state_text(found->state));
    text_member(out, "done", action_text(part->done));
    text_member(out, "outcome_found", outcome_text(found->outcome_found));
    text_member(out, "outcome", outcome_text(found->outcome));
    number_member(out, "leakage_a", found->test_leakage_a);
    number_member(out, "limit_a", found->test_limit_a);
    number_member(out, "found_leakage_a", found->found_leakage_a);
    number_member(out, "found_limit_a", found->found_limit_a);
    flag_member(out, "measured", found->reading_count > 0);
    flag_member(out, "replaced_unmeasured", found->replaced_unmeasured);
    text_member(out, "fitted", part->fitted.written);
    text_member(out, "batch", part->batch);
    buffer_byte(out, '}');
}

/* Resistors, windings and valves: only what a search asks for. */
static void write_part(struct buffer *out, const char *kind, const char *ref, const char *maker,
                       const char *marked, enum action done)
{
    open_item(out);
    text_member(out, "ref", ref);
    text_member(out, "kind", kind);
    text_member(out, "maker", maker);
    text_member(out, "marked", marked);
    text_member(out, "done", action_text(done));
}

static void write_parts(struct buffer *out, const struct findings *findings)
{
    const struct job *job = findings->job;
    key(out, "parts");
    buffer_byte(out, '[');
    for (size_t i = 0; i < findings->capacitor_count; i++)
        write_capacitor(out, findings, i);
    for (size_t i = 0; i < job->resistor_count; i++) {
        const struct resistor *part = &job->resistors[i];
        write_part(out, "resistor", part->ref, part->maker, part->marked.written, part->done);
        text_member(out, "fitted", part->fitted.written);
        text_member(out, "batch", part->batch);
        buffer_byte(out, '}');
    }
    for (size_t i = 0; i < job->winding_count; i++) {
        const struct winding *part = &job->windings[i];
        write_part(out, "winding", part->ref, part->maker, part->marked.written, part->done);
        text_member(out, "fitted", part->fitted.written);
        text_member(out, "batch", part->batch);
        buffer_byte(out, '}');
    }
    for (size_t i = 0; i < job->valve_count; i++) {
        const struct valve *part = &job->valves[i];
        write_part(out, "valve", part->ref, part->maker, part->type, part->done);
        buffer_byte(out, '}');
    }
    buffer_byte(out, ']');
}

static void write_valves(struct buffer *out, const struct job *job)
{
    key(out, "valves");
    buffer_byte(out, '[');
    for (size_t i = 0; i < job->valve_count; i++) {
        if (i)
            buffer_byte(out, ',');
        json_string(out, job->valves[i].type);
    }
    buffer_byte(out, ']');
}

static void write_set(struct buffer *out, const struct job *job)
{
    text_member(out, "maker", job->set.maker.text);
    text_member(out, "model", job->set.model.text);
    text_member(out, "chassis", job->set.chassis.text);
    text_member(out, "serial", job->set.serial.text);
    text_member(out, "description", job->set.description.text);
    text_member(out, "year", job->set.year.written);
    number_member(out, "year_first", job->set.year.set ? (double)job->set.year.first : NAN);
    number_member(out, "year_last", job->set.year.set ? (double)job->set.year.last : NAN);
    text_member(out, "supply", supply_text(job->set.supply));
    text_member(out, "received", job->received.written);
    text_member(out, "returned", job->returned.written);
    text_member(out, "technician", job->technician.text);
    text_member(out, "call_back", job->call_back.written);
    text_member(out, "continues", job->continues.text);
}

void summary_write(const struct findings *findings, struct buffer *out)
{
    unsigned failed = 0;
    for (size_t i = 0; i < findings->capacitor_count; i++)
        failed += findings->capacitors[i].outcome_found == OUTCOME_FAIL;
    buffer_print(out, "{\"summary\":%d", SUMMARY_VERSION);
    text_member(out, "job", findings->job->number);
    flag_member(out, "broken", false);
    flag_member(out, "in_progress", findings->in_progress);
    write_set(out, findings->job);
    number_member(out, "kept", findings->originality.total.kept);
    number_member(out, "of", findings->originality.total.of);
    number_member(out, "capacitors_failed", failed);
    number_member(out, "capacitors", (double)findings->capacitor_count);
    write_valves(out, findings->job);
    write_parts(out, findings);
    buffer_text(out, "}\n");
}

void summary_write_broken(const char *name, const struct diagnostics *diagnostics,
                          struct buffer *out)
{
    buffer_print(out, "{\"summary\":%d", SUMMARY_VERSION);
    text_member(out, "job", name);
    flag_member(out, "broken", true);
    key(out, "diagnostics");
    buffer_byte(out, '[');
    for (size_t i = 0; i < diagnostics->count; i++) {
        const struct diagnostic *item = &diagnostics->items[i];
        if (item->severity != SEVERITY_ERROR)
            continue;
        open_item(out);
        number_member(out, "line", item->at.line);
        number_member(out, "column", item->at.column);
        text_member(out, "text", item->text);
        buffer_byte(out, '}');
    }
    buffer_text(out, "]}\n");
}
