#include "job/part.h"
#include "write/json_pieces.h"

#include <math.h>

static void write_criterion(const struct criterion *criterion, struct buffer *out)
{
    const struct source_row *source = source_row(criterion->source);
    json_open(out, NULL, '{');
    json_text_member(out, "key", criterion_key_text(criterion->key));
    json_number_member(out, "value", criterion->value);
    json_choice_member(out, "unit",
                       criterion->unit == UNIT_NONE ? NULL : unit_name(criterion->unit));
    json_text_member(out, "bound", json_bound(criterion->bound));
    json_number_member(out, "uncertainty", criterion->uncertainty);
    json_number_member(out, "limit", criterion->limit);
    json_flag_member(out, "upper", criterion->upper);
    json_flag_member(out, "joint", criterion->joint);
    json_text_member(out, "outcome", outcome_text(criterion->outcome));
    json_choice_member(out, "why", reason_text(criterion->why));
    json_text_member(out, "source", source->key);
    json_text_member(out, "trust", trust_text(source->trust));
    json_text_member(out, "rule", criterion->rule);
    json_close(out, '}');
}

static void write_criteria(const char *key, const struct criterion *criteria, size_t count,
                           struct buffer *out)
{
    json_open(out, key, '[');
    for (size_t i = 0; i < count; i++)
        write_criterion(&criteria[i], out);
    json_close(out, ']');
}

static void write_effect(const char *key, const struct effect *effect, struct buffer *out)
{
    json_open(out, key, '{');
    json_text_member(out, "key", effect->key);
    json_number_member(out, "value", effect->value);
    json_choice_member(out, "unit", effect->unit == UNIT_NONE ? NULL : unit_name(effect->unit));
    /* A leak of at most so much is a ratio of at least so much. */
    bool ratio = effect->unit == UNIT_NONE;
    json_flag_member(out, "at_most", effect->at_most && !ratio);
    json_flag_member(out, "at_least", effect->at_most && ratio);
    json_number_member(out, "of", effect->of);
    json_text_member(out, "subject", effect->subject);
    json_text_member(out, "text", effect->text);
    json_close(out, '}');
}

static const char *state_text(enum reading_state state)
{
    switch (state) {
    case READING_FOUND:
        return "found";
    case READING_REFORMED:
        return "reformed";
    case READING_LEFT:
        return "left";
    }
    return NULL;
}

static void write_reading(const struct reading_findings *found, const struct job *job,
                          struct buffer *out)
{
    const struct reading *reading = found->reading;
    bool named = reading->instrument >= 0 && (size_t)reading->instrument < job->instrument_count;
    json_open(out, NULL, '{');
    json_text_member(out, "written", reading->written);
    json_count_member(out, "run", reading->line);
    json_text_member(out, "state", state_text(reading->state));
    json_quantity_member(out, "set_v", &reading->set_volts);
    json_number_member(out, "part_v", found->part_v);
    json_quantity_member(out, "time_s", &reading->time);
    json_number_member(out, "current_a", found->current_a);
    json_text_member(out, "bound", json_bound(found->bound));
    json_number_member(out, "uncertainty_a", found->uncertainty_a);
    json_number_member(out, "repeatability_a", found->repeatability_a);
    json_number_member(out, "temperature_c", found->temperature_c);
    json_flag_member(out, "hot", reading->hot.set);
    json_flag_member(out, "in_circuit", reading->in_circuit);
    json_date_member(out, "date", &reading->date);
    json_text_member(out, "instrument", named ? job->instruments[reading->instrument].name : NULL);
    json_number_member(out, "t_min_s", found->t_min_s);
    json_flag_member(out, "may_fail", found->may_fail);
    json_number_member(out, "service_a", found->service_a);
    json_flag_member(out, "service_lower_bound", found->service_lower_bound);
    json_number_member(out, "warm_a", found->warm_a);
    json_close(out, '}');
}

static const char *trend_text(enum trend trend)
{
    switch (trend) {
    case TREND_UNKNOWN:
        return NULL;
    case TREND_FALLING:
        return "falling";
    case TREND_LEVEL:
        return "level";
    case TREND_RISING:
        return "rising";
    }
    return NULL;
}

static const char *absorption_text(enum absorption_status status)
{
    switch (status) {
    case ABSORPTION_NONE:
        return NULL;
    case ABSORPTION_RESOLVED:
        return "resolved";
    case ABSORPTION_NOT_RESOLVED:
        return "not resolved";
    }
    return NULL;
}

static void write_absorption(const struct absorption *fit, struct buffer *out)
{
    json_open(out, "absorption", '{');
    json_text_member(out, "status", absorption_text(fit->status));
    json_count_member(out, "readings", (long long)fit->reading_count);
    json_number_member(out, "steady_a", fit->steady_a);
    json_number_member(out, "steady_error_a", fit->steady_error_a);
    json_number_member(out, "a_a", fit->a_a);
    json_number_member(out, "n", fit->n);
    json_number_member(out, "chi2", fit->chi2);
    json_count_member(out, "freedom", (long long)fit->freedom);
    json_number_member(out, "wait_until_s", fit->wait_until_s);
    json_close(out, '}');
}

/* Who and what the part is, as the job says. */
static void write_identity(const struct findings *findings, const struct capacitor *part,
                           struct buffer *out)
{
    const struct job *job = findings->job;
    const struct can *can = part_can(job, part);
    json_text_member(out, "ref", part->ref);
    json_text_member(out, "can", can ? can->ref : NULL);
    json_text_member(out, "was", origin_text(part_origin(job, part)));
    json_choice_member(out, "type", dielectric_text(part->type));
    json_text_member(out, "maker", part->maker ? part->maker : can ? can->maker : NULL);
    json_text_member(out, "marked", part->marked.set ? part->marked.written : NULL);
    json_quantity_member(out, "value_f", &part->marked.value);
    json_quantity_member(out, "rated_v", &part->marked.rated);
    json_flag_member(out, "rated_ac", part->marked.rated_ac);
    json_number_member(out, "tolerance_low_percent",
                       part->marked.tolerance_set ? part->marked.tolerance_low_percent : NAN);
    json_number_member(out, "tolerance_high_percent",
                       part->marked.tolerance_set ? part->marked.tolerance_high_percent : NAN);
    json_choice_member(out, "class", safety_class_text(part->marked.safety_class));
    json_prose_member(out, "date_code", &part->date_code);
    json_choice_member(out, "place", place_text(part->place));
    json_open(out, "stages", '[');
    for (size_t i = 0; i < part->stage_count; i++) {
        if (i > 0)
            buffer_byte(out, ',');
        json_string(out, job->stages[part->stages[i]].name);
    }
    json_close(out, ']');
    json_text_member(out, "stage",
                     part->stage_count > 0 ? job->stages[part->stages[0]].name : NULL);
    json_text_member(out, "line", part->line);
    json_text_member(out, "seen", seen_text(can ? can->seen : part->seen));
    json_quantity_member(out, "measured_f", &part->measured.value);
    json_quantity_member(out, "esr_ohm", &part->measured.esr);
    json_quantity_member(out, "tan_delta_percent", &part->measured.tan_delta);
    json_text_member(out, "case", part->case_size.set ? part->case_size.written : NULL);
}

/* A section says what was done where the can does not. */
static void write_action(const struct job *job, const struct capacitor *part, struct buffer *out)
{
    const struct can *can = part_can(job, part);
    /* what was done to the can was done to it */
    const struct can *of = part->done == DONE_OPEN ? can : NULL;
    const struct marking *fitted = part_fitted(job, part);
    json_choice_member(out, "done", action_text(part_action(job, part)));
    json_text_member(out, "fitted", fitted->set ? fitted->written : NULL);
    json_choice_member(out, "fitted_type", fitted->set ? dielectric_text(fitted->type) : NULL);
    json_quantity_member(out, "fitted_f", &fitted->value);
    json_quantity_member(out, "fitted_rated_v", &fitted->rated);
    json_choice_member(out, "fitted_class", safety_class_text(fitted->safety_class));
    json_text_member(out, "age", fitted->set ? age_text(of ? of->age : part->age) : NULL);
    json_text_member(out, "batch", part->batch || !can ? part->batch : can->batch);
    json_prose_member(out, "signed",
                      part->signed_where.text || !can ? &part->signed_where : &can->signed_where);
    json_prose_member(out, "price", &part->price);
    json_prose_member(out, "reason", part->reason.text || !can ? &part->reason : &can->reason);
    json_prose_member(out, "note", &part->note);
}

static void write_verdict(const struct capacitor_findings *found, struct buffer *out)
{
    json_text_member(out, "state", part_state_text(found->state));
    json_flag_member(out, "replaced_unmeasured", found->replaced_unmeasured);
    json_text_member(out, "outcome_found", outcome_text(found->outcome_found));
    json_text_member(out, "outcome", outcome_text(found->outcome));
    json_choice_member(out, "why", reason_text(found->why));
    json_text_member(out, "why_text", found->why_text);
    json_text_member(out, "missing", found->missing);
    json_choice_member(out, "advice", advice_text(found->advice));
    json_text_member(out, "advice_text", found->advice_text);
    json_flag_member(out, "against_advice", found->against_advice);
    json_flag_member(out, "no_reading_passes", found->no_reading_passes);
    json_choice_member(out, "class_needed", safety_class_text(found->class_needed));
    json_flag_member(out, "turns_on_temperature", found->turns_on_temperature);
    json_flag_member(out, "service_above_marked", found->service_above_marked);
    json_flag_member(out, "tested_above_marked", found->tested_above_marked);
}

static void write_figures(const struct job *job, const struct capacitor_findings *found,
                          struct buffer *out)
{
    const struct instrument *instrument =
        found->sheet_instrument < 0 ? NULL : &job->instruments[found->sheet_instrument];
    const struct source_row *theta = source_row(found->theta_source);
    const struct {
        const char *key;
        double value;
    } members[] = {
        {"service_v", found->service_v},
        {"leakage_a", found->leakage_a},
        {"leakage_warm_a", found->leakage_warm_a},
        {"uncertainty_a", found->uncertainty_a},
        {"limit_a", found->limit_a},
        {"bench_limit_a", found->bench_limit_a},
        {"sheet_limit_a", found->sheet_limit_a},
        {"sheet_limit_ohm", found->sheet_limit_ohm},
        {"sheet_voltage_v", found->sheet_voltage_v},
        {"sheet_soak_s", found->sheet_soak_s},
        {"sheet_series_max_ohm", found->sheet_series_max_ohm},
        {"sheet_volts_needed_v", found->sheet_volts_needed_v},
        {"sheet_uncertainty_max_a", found->sheet_uncertainty_max_a},
        {"test_v", found->test_v},
        {"test_s", found->test_s},
        {"test_leakage_a", found->test_leakage_a},
        {"test_uncertainty_a", found->test_uncertainty_a},
        {"test_limit_a", found->test_limit_a},
        {"test_c", found->test_c},
        {"found_leakage_a", found->found_leakage_a},
        {"found_limit_a", found->found_limit_a},
        {"exponent", found->exponent},
        {"exponent_error", found->exponent_error},
        {"theta_k", found->theta_k},
        {"temperature_factor", found->temperature_factor},
        {"working_c", found->working_c},
        {"ageing_margin", found->ageing_margin},
    };
    for (size_t i = 0; i < sizeof members / sizeof members[0]; i++)
        json_number_member(out, members[i].key, members[i].value);
    json_text_member(out, "theta_source", theta->key);
    json_text_member(out, "theta_trust", trust_text(theta->trust));
    json_text_member(out, "test_bound", json_bound(found->test_bound));
    json_flag_member(out, "limit_none", found->limit_none);
    json_flag_member(out, "limit_is_heat", found->limit_is_heat);
    json_text_member(out, "sheet_instrument", instrument ? instrument->name : NULL);
    json_flag_member(out, "sheet_proves_fail_only", found->sheet_proves_fail_only);
    json_flag_member(out, "sheet_not_with_this_meter", found->sheet_not_with_this_meter);
    json_flag_member(out, "exponent_warning", found->exponent_warning);
    json_text_member(out, "trend", trend_text(found->trend));
}

static void write_index(const char *key, int index, struct buffer *out)
{
    json_number_member(out, key, index < 0 ? NAN : (double)index);
}

void json_write_capacitors(const struct findings *findings, struct buffer *out)
{
    json_open(out, "capacitors", '[');
    for (size_t i = 0; i < findings->capacitor_count; i++) {
        const struct capacitor_findings *found = &findings->capacitors[i];
        json_open(out, NULL, '{');
        write_identity(findings, found->part, out);
        write_action(findings->job, found->part, out);
        write_verdict(found, out);
        write_figures(findings->job, found, out);
        /* The first is the one that a line of text shows; the rest stand beside it. */
        if (found->effect_count > 0)
            write_effect("effect", &found->effects[0], out);
        else
            json_text_member(out, "effect", NULL);
        json_open(out, "effects", '[');
        for (size_t k = 0; k < found->effect_count; k++)
            write_effect(NULL, &found->effects[k], out);
        json_close(out, ']');
        write_criteria("criteria", found->criteria, found->criterion_count, out);
        write_criteria("other_rules", found->other_rules, found->other_rule_count, out);
        write_index("deciding", found->deciding, out);
        write_index("deciding_found", found->deciding_found, out);
        json_open(out, "readings", '[');
        for (size_t k = 0; k < found->reading_count; k++)
            write_reading(&found->readings[k], findings->job, out);
        json_close(out, ']');
        write_absorption(&found->absorption, out);
        json_close(out, '}');
    }
    json_close(out, ']');
}
