/* What was done and shown on the bench: reforms, voltages, performance, safety, photographs. */
#include "write/json_pieces.h"

#include <math.h>

static void write_readings(const char *key, const struct reading *readings, size_t count,
                           struct buffer *out)
{
    json_open(out, key, '[');
    for (size_t i = 0; i < count; i++) {
        json_open(out, NULL, '{');
        json_text_member(out, "written", readings[i].written);
        json_count_member(out, "step", readings[i].line);
        json_quantity_member(out, "set_v", &readings[i].set_volts);
        json_quantity_member(out, "time_s", &readings[i].time);
        json_quantity_member(out, "value", &readings[i].value);
        json_text_member(out, "unit", unit_name(readings[i].value.unit));
        json_text_member(out, "bound", json_bound(readings[i].value.bound));
        json_date_member(out, "date", &readings[i].date);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_reforms(const struct job *job, struct buffer *out)
{
    json_open(out, "reforms", '[');
    for (size_t i = 0; i < job->reform_count; i++) {
        const struct reform *reform = &job->reforms[i];
        double limiter_ohm = NAN, ohm;
        if (job_resistance(job, &reform->limiter, PHASE_LEFT, &ohm, NULL))
            limiter_ohm = ohm;
        json_open(out, NULL, '{');
        json_text_member(out, "capacitor",
                         reform->capacitor >= 0 ? job->capacitors[reform->capacitor].ref : NULL);
        json_date_member(out, "date", &reform->date);
        json_number_member(out, "limiter_ohm", limiter_ohm);
        json_flag_member(out, "across_part", reform->across_part);
        write_readings("log", reform->log, reform->log_count, out);
        json_quantity_member(out, "rest_s", &reform->rest);
        write_readings("after_rest", reform->after_rest, reform->after_rest_count, out);
        json_prose_member(out, "note", &reform->note);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_voltages(const struct job *job, struct buffer *out)
{
    const struct voltages *voltages = &job->voltages;
    json_open(out, "voltages", '{');
    json_quantity_member(out, "meter_ohm_per_v", &voltages->meter);
    json_quantity_member(out, "sheet_mains_v", &voltages->sheet_mains);
    json_quantity_member(out, "found_mains_v", &voltages->found_mains);
    json_quantity_member(out, "left_mains_v", &voltages->left_mains);
    json_open(out, "points", '[');
    for (size_t i = 0; i < voltages->point_count; i++) {
        const struct voltage_point *point = &voltages->points[i];
        double source_ohm = NAN, ohm;
        if (job_resistance(job, &point->source, PHASE_LEFT, &ohm, NULL))
            source_ohm = ohm;
        json_open(out, NULL, '{');
        json_text_member(out, "name", point->name);
        json_quantity_member(out, "sheet_v", &point->sheet);
        json_quantity_member(out, "range_v", &point->range);
        json_number_member(out, "source_ohm", source_ohm);
        json_quantity_member(out, "found_v", &point->found);
        json_quantity_member(out, "left_v", &point->left);
        json_close(out, '}');
    }
    json_close(out, ']');
    json_close(out, '}');
}

static void write_performance(const struct job *job, struct buffer *out)
{
    json_open(out, "performance", '[');
    for (size_t i = 0; i < job->performance_count; i++) {
        const struct performance_row *row = &job->performance[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", row->name);
        json_prose_member(out, "conditions", &row->conditions);
        json_quantity_member(out, "found", &row->found);
        json_quantity_member(out, "left", &row->left);
        json_text_member(out, "found_written", row->written_found);
        json_text_member(out, "left_written", row->written_left);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_safety(const struct job *job, struct buffer *out)
{
    json_open(out, "safety", '[');
    for (size_t i = 0; i < job->safety_count; i++) {
        const struct safety_row *row = &job->safety[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", row->name);
        json_text_member(out, "written", row->written);
        json_quantity_member(out, "value", &row->value);
        json_text_member(out, "unit", row->value.set ? unit_name(row->value.unit) : NULL);
        json_text_member(out, "bound", row->value.set ? json_bound(row->value.bound) : NULL);
        json_quantity_member(out, "second", &row->second);
        json_quantity_member(out, "at_v", &row->at_volts);
        json_quantity_member(out, "time_s", &row->time);
        json_prose_member(out, "conditions", &row->conditions);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_photos(const struct job *job, struct buffer *out)
{
    json_open(out, "photos", '[');
    for (size_t i = 0; i < job->photo_count; i++) {
        const struct photo *photo = &job->photos[i];
        json_open(out, NULL, '{');
        json_prose_member(out, "shows", &photo->shows);
        json_prose_member(out, "caption", &photo->caption);
        json_number_member(out, "pair", photo->pair > 0 ? (double)photo->pair : NAN);
        json_flag_member(out, "after", photo->after);
        json_text_member(out, "copies", copy_text(photo->copies));
        json_date_member(out, "taken", &photo->taken);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_counts(const struct counts *counts, struct buffer *out)
{
    json_open(out, "counts", '{');
    json_number_member(out, "capacitors",
                       counts->capacitors_set ? counts->capacitors : (double)NAN);
    json_number_member(out, "resistors", counts->resistors_set ? counts->resistors : (double)NAN);
    json_number_member(out, "windings", counts->windings_set ? counts->windings : (double)NAN);
    json_number_member(out, "controls", counts->controls_set ? counts->controls : (double)NAN);
    json_close(out, '}');
}

void json_write_work(const struct findings *findings, struct buffer *out)
{
    write_counts(&findings->job->counts, out);
    write_reforms(findings->job, out);
    write_voltages(findings->job, out);
    write_performance(findings->job, out);
    write_safety(findings->job, out);
    write_photos(findings->job, out);
}
