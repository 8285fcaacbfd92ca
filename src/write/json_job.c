/* The job itself: particulars, texts, instruments, and every part but capacitors. */
#include "job/part.h"
#include "write/json_pieces.h"

#include <math.h>

static void write_set(const struct job *job, struct buffer *out)
{
    json_open(out, "set", '{');
    json_prose_member(out, "maker", &job->set.maker);
    json_prose_member(out, "model", &job->set.model);
    json_prose_member(out, "chassis", &job->set.chassis);
    json_prose_member(out, "serial", &job->set.serial);
    json_prose_member(out, "description", &job->set.description);
    json_text_member(out, "year", job->set.year.set ? job->set.year.written : NULL);
    json_number_member(out, "year_first", job->set.year.set ? (double)job->set.year.first : NAN);
    json_number_member(out, "year_last", job->set.year.set ? (double)job->set.year.last : NAN);
    json_choice_member(out, "supply", supply_text(job->set.supply));
    json_quantity_member(out, "mains_v", &job->set.mains);
    json_quantity_member(out, "frequency_hz", &job->set.frequency);
    json_quantity_member(out, "ht_secondary_v", &job->set.ht_secondary);
    json_close(out, '}');
    json_open(out, "owner", '{');
    json_prose_member(out, "name", &job->owner.name);
    json_prose_member(out, "contact", &job->owner.contact);
    json_close(out, '}');
}

static void write_texts(const struct job *job, struct buffer *out)
{
    json_prose_member(out, "arrival", &job->arrival);
    json_prose_member(out, "request", &job->request);
    json_prose_member(out, "private", &job->private_note);
    json_prose_member(out, "plan", &job->plan);
    json_prose_member(out, "approvals", &job->approvals);
    json_prose_member(out, "work", &job->work);
    json_prose_member(out, "not_done", &job->not_done);
    json_prose_member(out, "hazards", &job->hazards);
    json_open(out, "removed", '[');
    for (size_t i = 0; i < job->removed_count; i++) {
        json_open(out, NULL, '{');
        json_text_member(out, "name", job->removed[i].name);
        json_prose_member(out, "text", &job->removed[i].value);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_instrument(const struct instrument *instrument, struct buffer *out)
{
    json_open(out, NULL, '{');
    json_text_member(out, "name", instrument->name);
    json_text_member(out, "description", instrument->description);
    json_text_member(out, "accuracy",
                     instrument->accuracy_set ? instrument->accuracy_written : NULL);
    json_measured_members(out, "resolution", "resolution_written", "resolution_bound",
                          &instrument->resolution);
    json_quantity_member(out, "series_ohm", &instrument->series);
    json_quantity_member(out, "burden_ohm", &instrument->burden);
    json_quantity_member(out, "input_ohm", &instrument->input);
    json_quantity_member(out, "sensitivity_ohm_per_v", &instrument->sensitivity);
    json_quantity_member(out, "supply_current_a", &instrument->supply_current);
    json_quantity_member(out, "volts_accuracy_percent", &instrument->volts_accuracy);
    json_open(out, "volts", '[');
    for (size_t i = 0; i < instrument->volt_count; i++) {
        if (i > 0)
            buffer_byte(out, ',');
        json_number(out, instrument->volts_v[i]);
    }
    json_close(out, ']');
    json_date_member(out, "compared", &instrument->compared);
    json_close(out, '}');
}

void json_write_job(const struct findings *findings, struct buffer *out)
{
    const struct job *job = findings->job;
    json_text_member(out, "job", job->number);
    json_flag_member(out, "in_progress", findings->in_progress);
    write_set(job, out);
    json_date_member(out, "received", &job->received);
    json_date_member(out, "returned", &job->returned);
    json_date_member(out, "call_back", &job->call_back);
    json_prose_member(out, "continues", &job->continues);
    json_prose_member(out, "technician", &job->technician);
    json_open(out, "conditions", '{');
    json_number_member(out, "bench_c", findings->bench_c);
    json_number_member(out, "working_c", findings->working_c);
    json_quantity_member(out, "working_near_heat_c", &job->conditions.working_near_heat);
    json_quantity_member(out, "humidity_percent", &job->conditions.humidity);
    json_close(out, '}');
    write_texts(job, out);
    json_open(out, "instruments", '[');
    for (size_t i = 0; i < job->instrument_count; i++)
        write_instrument(&job->instruments[i], out);
    json_close(out, ']');
}

/* ---- parts */

/* What every part has in common. */
static void write_part(const struct part *part, struct buffer *out)
{
    bool fitted = part->fitted && part->fitted->set;
    json_text_member(out, "ref", part->ref);
    json_text_member(out, "maker", part->maker);
    json_text_member(out, "seen", seen_text(part->seen));
    json_text_member(out, "was", origin_text(part->was));
    json_choice_member(out, "done", action_text(part->done));
    json_text_member(out, "fitted", fitted ? part->fitted_text : NULL);
    json_text_member(out, "age", fitted ? age_text(part->age) : NULL);
    json_text_member(out, "batch", part->batch);
    json_text_member(out, "price", part->price);
    json_text_member(out, "reason", part->reason);
    json_text_member(out, "note", part->note);
}

static void write_cans(const struct job *job, struct buffer *out)
{
    json_open(out, "cans", '[');
    for (size_t i = 0; i < job->can_count; i++) {
        const struct can *can = &job->cans[i];
        json_open(out, NULL, '{');
        struct part common = part_of(job, KIND_CAN, i);
        write_part(&common, out);
        json_open(out, "holds", '[');
        for (size_t k = 0; k < can->hold_count; k++) {
            if (k > 0)
                buffer_byte(out, ',');
            json_string(out, job->capacitors[can->holds[k]].ref);
        }
        json_close(out, ']');
        json_prose_member(out, "date_code", &can->date_code);
        json_prose_member(out, "signed", &can->signed_where);
        json_text_member(out, "case", can->case_size.set ? can->case_size.written : NULL);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_resistors(const struct job *job, struct buffer *out)
{
    json_open(out, "resistors", '[');
    for (size_t i = 0; i < job->resistor_count; i++) {
        const struct resistor *part = &job->resistors[i];
        json_open(out, NULL, '{');
        struct part common = part_of(job, KIND_RESISTOR, i);
        write_part(&common, out);
        json_text_member(out, "marked", part->marked.set ? part->marked.written : NULL);
        json_quantity_member(out, "marked_ohm", &part->marked.value);
        json_quantity_member(out, "rated_w", &part->marked.rated);
        json_number_member(out, "tolerance_percent",
                           part->marked.tolerance_set ? part->marked.tolerance_high_percent : NAN);
        json_measured_members(out, "measured_ohm", "measured", "measured_bound", &part->measured);
        json_quantity_member(out, "volts_v", &part->volts);
        json_prose_member(out, "date_code", &part->date_code);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_windings(const struct job *job, struct buffer *out)
{
    json_open(out, "windings", '[');
    for (size_t i = 0; i < job->winding_count; i++) {
        const struct winding *part = &job->windings[i];
        json_open(out, NULL, '{');
        struct part common = part_of(job, KIND_WINDING, i);
        write_part(&common, out);
        json_text_member(out, "marked", part->marked.set ? part->marked.written : NULL);
        json_quantity_member(out, "marked_ohm", &part->marked.value);
        json_measured_members(out, "measured_ohm", "measured", "measured_bound", &part->measured);
        json_quantity_member(out, "temperature_c", &part->temperature);
        json_measured_members(out, "insulation_ohm", "insulation", "insulation_bound",
                              &part->insulation);
        json_quantity_member(out, "inductance_h", &part->inductance);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_controls(const struct job *job, struct buffer *out)
{
    json_open(out, "controls", '[');
    for (size_t i = 0; i < job->control_count; i++) {
        const struct control *part = &job->controls[i];
        json_open(out, NULL, '{');
        struct part common = part_of(job, KIND_CONTROL, i);
        write_part(&common, out);
        json_prose_member(out, "what", &part->what);
        json_prose_member(out, "fitted_text", &part->fitted);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_valves(const struct job *job, struct buffer *out)
{
    json_open(out, "valves", '[');
    for (size_t i = 0; i < job->valve_count; i++) {
        const struct valve *part = &job->valves[i];
        json_open(out, NULL, '{');
        struct part common = part_of(job, KIND_VALVE, i);
        write_part(&common, out);
        json_text_member(out, "type", part->type);
        json_prose_member(out, "tested", &part->tested);
        json_prose_member(out, "date_code", &part->date_code);
        json_prose_member(out, "fitted_text", &part->fitted);
        json_close(out, '}');
    }
    json_close(out, ']');
}

void json_write_other_parts(const struct findings *findings, struct buffer *out)
{
    write_cans(findings->job, out);
    write_resistors(findings->job, out);
    write_windings(findings->job, out);
    write_controls(findings->job, out);
    write_valves(findings->job, out);
}
