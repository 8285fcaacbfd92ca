/* "bench": all that was assessed besides the leakage of the capacitors. */
#include "write/json_pieces.h"

#include <math.h>

static void write_held(struct buffer *out, const char *key, const struct held *held)
{
    json_open(out, key, '{');
    json_number_member(out, "value", held->value);
    json_text_member(out, "unit", unit_name(held->unit));
    json_number_member(out, "uncertainty", held->uncertainty);
    json_number_member(out, "low", held->low);
    json_number_member(out, "high", held->high);
    json_text_member(out, "outcome", outcome_text(held->outcome));
    json_choice_member(out, "why", reason_text(held->why));
    json_text_member(out, "missing", held->missing);
    json_text_member(out, "source", source_row(held->source)->key);
    json_close(out, '}');
}

/* ---- reforming */

static void write_plans(const struct findings *findings, struct buffer *out)
{
    json_open(out, "reform_plans", '[');
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        const struct reform_plan *plan = findings->bench.plans[i];
        if (!plan)
            continue;
        json_open(out, NULL, '{');
        json_text_member(out, "ref", findings->capacitors[i].part->ref);
        json_number_member(out, "end_v", plan->end_v);
        json_number_member(out, "ceiling_a", plan->ceiling_a);
        json_number_member(out, "ceiling_w", plan->ceiling_w);
        json_number_member(out, "limiter_ohm", plan->limiter_ohm);
        json_number_member(out, "limiter_w", plan->limiter_w);
        json_open(out, "step_v", '[');
        for (size_t k = 0; k < REFORM_STEPS; k++) {
            if (k > 0)
                buffer_byte(out, ',');
            json_number(out, plan->step_v[k]);
        }
        json_close(out, ']');
        json_number_member(out, "rest_s", plan->rest_s);
        json_number_member(out, "limit_a", plan->limit_a);
        json_number_member(out, "deciding_ohm", plan->deciding_ohm);
        json_number_member(out, "bleed_ohm", plan->bleed_ohm);
        json_number_member(out, "bleed_w", plan->bleed_w);
        json_number_member(out, "bleed_s", plan->bleed_s);
        json_number_member(out, "energy_j", plan->energy_j);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_decay(const struct reform_step *step, struct buffer *out)
{
    static const char *const laws[DECAY_COUNT] = {"power law", "exponential"};
    json_open(out, "fits", '[');
    for (int law = 0; law < DECAY_COUNT; law++) {
        const struct decay *decay = &step->decay.laws[law];
        if (!decay->fitted)
            continue;
        json_open(out, NULL, '{');
        json_text_member(out, "law", laws[law]);
        json_flag_member(out, "used", law == step->decay.better);
        json_number_member(out, "steady_a", decay->steady_a);
        json_number_member(out, "steady_error_a", decay->steady_error_a);
        json_number_member(out, "amplitude_a", decay->amplitude_a);
        json_number_member(out, "shape", decay->shape);
        json_number_member(out, "chi2", decay->chi2);
        json_count_member(out, "freedom", (long long)decay->freedom);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_reform(const struct findings *findings, const struct reform_findings *reform,
                         struct buffer *out)
{
    static const char *const stops[] = {"", "rising", "plateau", "watts"};
    json_open(out, NULL, '{');
    json_text_member(out, "ref", findings->job->capacitors[reform->capacitor].ref);
    json_open(out, "steps", '[');
    for (size_t i = 0; i < reform->step_count; i++) {
        const struct reform_step *step = &reform->steps[i];
        json_open(out, NULL, '{');
        json_number_member(out, "set_v", step->set_v);
        json_number_member(out, "part_v", step->part_v);
        json_number_member(out, "current_a", step->current_a);
        json_number_member(out, "watts", step->watts);
        json_number_member(out, "duration_s", step->duration_s);
        json_number_member(out, "limit_a", step->limit_a);
        json_flag_member(out, "reached", step->reached);
        json_flag_member(out, "rising", step->rising);
        json_flag_member(out, "in_order", step->in_order);
        json_count_member(out, "fitted", (long long)step->fitted);
        write_decay(step, out);
        json_close(out, '}');
    }
    json_close(out, ']');
    json_number_member(out, "plateau_a", reform->plateau_a);
    json_flag_member(out, "plateau_between_laws", reform->between_laws);
    json_number_member(out, "plateau_uncertainty_a", reform->plateau_error_a);
    json_number_member(out, "to_limit_s", reform->to_limit_s);
    json_number_member(out, "to_limit_early_s", reform->to_limit_early_s);
    json_number_member(out, "to_limit_late_s", reform->to_limit_late_s);
    json_choice_member(out, "stop", stops[reform->stop]);
    write_held(out, "after_rest", &reform->rest);
    json_flag_member(out, "rebound", reform->rebound);
    json_text_member(out, "outcome", outcome_text(reform->outcome));
    json_choice_member(out, "why", reason_text(reform->why));
    json_text_member(out, "missing", reform->missing);
    json_close(out, '}');
}

static void write_reforms(const struct findings *findings, struct buffer *out)
{
    json_open(out, "reforms", '[');
    for (size_t i = 0; i < findings->job->reform_count; i++)
        if (findings->bench.reforms[i].reform)
            write_reform(findings, &findings->bench.reforms[i], out);
    json_close(out, ']');
}

/* ---- supply */

static void write_hum(struct buffer *out, const char *key, const struct hum *hum)
{
    json_open(out, key, '{');
    json_number_member(out, "capacitance_f", hum->capacitance_f);
    json_number_member(out, "esr_ohm", hum->esr_ohm);
    json_number_member(out, "predicted_v", hum->predicted_v);
    json_number_member(out, "share", hum->share);
    json_number_member(out, "textbook_peak_to_peak_v", hum->textbook_v);
    json_number_member(out, "measured_v", hum->measured_v);
    json_close(out, '}');
}

static void write_supply(const struct findings *findings, struct buffer *out)
{
    json_open(out, "supply", '[');
    for (size_t i = 0; i < findings->bench.node_count; i++) {
        const struct supply_node *node = &findings->bench.nodes[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", findings->job->capacitors[node->capacitor].ref);
        json_number_member(out, "frequency_hz", node->frequency_hz);
        json_number_member(out, "current_a", node->current_a);
        json_number_member(out, "series_ohm", node->series_ohm);
        json_number_member(out, "series_h", node->series_h);
        write_hum(out, "found", &node->found);
        write_hum(out, "left", &node->left);
        json_number_member(out, "predicted_db", node->predicted_db);
        json_number_member(out, "measured_db", node->measured_db);
        json_choice_member(out, "why", reason_text(node->why));
        json_text_member(out, "missing", node->missing);
        json_close(out, '}');
    }
    json_close(out, ']');
}

/* ---- parts */

static void write_resistors(const struct findings *findings, struct buffer *out)
{
    static const char *const series[] = {"E3", "E6", "E12", "E24", "E48", "E96", "E192", NULL};
    json_open(out, "resistors", '[');
    for (size_t i = 0; i < findings->job->resistor_count; i++) {
        const struct resistor_findings *found = &findings->bench.resistors[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", findings->job->resistors[i].ref);
        json_text_member(out, "series", series[found->series]);
        write_held(out, "tolerance", &found->tolerance);
        write_held(out, "dissipation", &found->dissipation);
        json_text_member(out, "stage", found->stage);
        json_number_member(out, "effect_percent", found->effect_percent);
        json_flag_member(out, "harmless", found->harmless);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_windings(const struct findings *findings, struct buffer *out)
{
    json_open(out, "windings", '[');
    for (size_t i = 0; i < findings->job->winding_count; i++) {
        const struct winding_findings *found = &findings->bench.windings[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", findings->job->windings[i].ref);
        json_number_member(out, "temperature_c", found->temperature_c);
        json_number_member(out, "expected_ohm", found->expected_ohm);
        write_held(out, "resistance", &found->resistance);
        write_held(out, "insulation", &found->insulation);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_valves(const struct findings *findings, struct buffer *out)
{
    json_open(out, "valves", '[');
    for (size_t i = 0; i < findings->job->valve_count; i++) {
        const struct valve_findings *found = &findings->bench.valves[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", findings->job->valves[i].ref);
        json_number_member(out, "value", found->value);
        json_number_member(out, "good", found->good);
        json_text_member(out, "unit", unit_name(found->unit));
        json_text_member(out, "tester", found->tester);
        write_held(out, "share", &found->share);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_replacements(const struct findings *findings, struct buffer *out)
{
    static const char *const names[REPLACEMENT_CHECK_COUNT] = {
        "value", "rating", "no_load", "ac_rating", "class", "pulse", "watts", "shell"};
    json_open(out, "replacements", '[');
    for (size_t i = 0; i < findings->bench.replacement_count; i++) {
        const struct replacement_findings *found = &findings->bench.replacements[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", found->ref);
        json_text_member(out, "outcome", outcome_text(found->outcome));
        json_open(out, "checks", '{');
        for (size_t k = 0; k < REPLACEMENT_CHECK_COUNT; k++)
            if (found->checked[k])
                write_held(out, names[k], &found->checks[k]);
        json_close(out, '}');
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_dates(const struct findings *findings, struct buffer *out)
{
    json_open(out, "date_codes", '[');
    for (size_t i = 0; i < findings->bench.date_count; i++) {
        const struct date_findings *found = &findings->bench.dates[i];
        json_open(out, NULL, '{');
        json_text_member(out, "ref", found->ref);
        json_text_member(out, "written", found->written);
        json_text_member(out, "source", found->known ? source_row(found->code.source)->key : NULL);
        json_open(out, "readings", '[');
        for (size_t k = 0; k < found->code.count; k++) {
            const struct date_reading *reading = &found->code.readings[k];
            json_open(out, NULL, '{');
            json_count_member(out, "year", reading->year);
            json_number_member(out, "month", reading->month ? reading->month : (double)NAN);
            json_number_member(out, "week", reading->week ? reading->week : (double)NAN);
            json_close(out, '}');
        }
        json_close(out, ']');
        json_number_member(out, "nearest", found->nearest >= 0 ? found->nearest : (double)NAN);
        json_number_member(out, "years_off", found->years_off);
        json_flag_member(out, "later_than_set", found->refutes);
        json_close(out, '}');
    }
    json_close(out, ']');
}

/* ---- the set */

static void write_voltages(const struct findings *findings, struct buffer *out)
{
    json_open(out, "voltages", '[');
    for (size_t i = 0; i < findings->job->voltages.point_count; i++) {
        const struct voltage_findings *found = &findings->bench.voltages[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", findings->job->voltages.points[i].name);
        json_number_member(out, "source_ohm", found->source_ohm);
        json_number_member(out, "sheet_meter_ohm", found->sheet_ohm);
        json_number_member(out, "meter_ohm", found->meter_ohm);
        json_number_member(out, "true_v", found->true_v);
        json_number_member(out, "expected_found_v", found->expected_v[0]);
        json_number_member(out, "expected_left_v", found->expected_v[1]);
        write_held(out, "found", &found->compared[0]);
        write_held(out, "left", &found->compared[1]);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_performance_and_safety(const struct findings *findings, struct buffer *out)
{
    const struct job *job = findings->job;
    json_open(out, "performance", '[');
    for (size_t i = 0; i < job->performance_count; i++) {
        json_open(out, NULL, '{');
        json_text_member(out, "name", job->performance[i].name);
        json_number_member(out, "change_db", findings->bench.performance[i].db);
        json_number_member(out, "change_percent", findings->bench.performance[i].percent);
        json_close(out, '}');
    }
    json_close(out, ']');
    json_open(out, "safety", '[');
    for (size_t i = 0; i < job->safety_count; i++) {
        const struct safety_findings *found = &findings->bench.safety[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", job->safety[i].name);
        json_text_member(out, "kind",
                         found->kind == SAFETY_KIND_COUNT ? NULL : safety_figure(found->kind)->key);
        write_held(out, "value", &found->value);
        write_held(out, "second", &found->second);
        json_number_member(out, "predicted_a", found->predicted_a);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_phase(const struct reconciled_phase *phase, const char *key, struct buffer *out)
{
    static const char *const names[STAGE_NODE_COUNT] = {"grid", "cathode", "anode", "screen"};
    json_open(out, key, '{');
    json_flag_member(out, "compared", phase->compared);
    for (int i = 0; i < STAGE_NODE_COUNT; i++) {
        const struct reconciled_node *node = &phase->nodes[i];
        json_open(out, names[i], '{');
        json_number_member(out, "measured_v", node->measured_v);
        json_number_member(out, "low_v", node->low_v);
        json_number_member(out, "high_v", node->high_v);
        json_number_member(out, "bound_v", node->bound_v);
        json_number_member(out, "unexplained_v", node->unexplained_v);
        json_close(out, '}');
    }
    json_number_member(out, "grid_current_a", phase->grid_current_a);
    json_number_member(out, "grid_current_uncertainty_a", phase->grid_current_error_a);
    json_number_member(out, "measured_cathode_a", phase->measured_cathode_a);
    json_close(out, '}');
}

static void write_reconciled(const struct findings *findings, struct buffer *out)
{
    json_open(out, "stages", '[');
    for (size_t i = 0; i < findings->stage_count; i++) {
        const struct reconciled_findings *found = &findings->bench.reconciled[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", findings->stages[i].stage->name);
        json_flag_member(out, "anchored", found->anchored);
        json_number_member(out, "anchor_scale", found->anchor_scale);
        json_number_member(out, "law_bound", found->law_bound);
        json_number_member(out, "valve_bound", found->valve_bound);
        write_phase(&found->phases[PHASE_FOUND], "found", out);
        write_phase(&found->phases[PHASE_LEFT], "left", out);
        json_close(out, '}');
    }
    json_close(out, ']');
}

void json_write_bench(const struct findings *findings, struct buffer *out)
{
    if (!findings->bench.plans) { /* not assessed */
        json_text_member(out, "bench", NULL);
        return;
    }
    json_open(out, "bench", '{');
    write_plans(findings, out);
    write_reforms(findings, out);
    write_supply(findings, out);
    write_resistors(findings, out);
    write_windings(findings, out);
    write_valves(findings, out);
    write_replacements(findings, out);
    write_dates(findings, out);
    write_voltages(findings, out);
    write_performance_and_safety(findings, out);
    write_reconciled(findings, out);
    json_close(out, '}');
}
