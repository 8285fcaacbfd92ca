#include "write/json_pieces.h"

#include <math.h>

static const char *solve_text(enum solve_status status)
{
    switch (status) {
    case SOLVE_OK:
        return "ok";
    case SOLVE_BOTTOMED:
        return "bottomed";
    case SOLVE_BELOW_BOUNDS:
        return "below bounds";
    case SOLVE_IMPOSSIBLE:
        return NULL;
    }
    return NULL;
}

static void write_phase(const char *key, const struct stage_phase *phase, struct buffer *out)
{
    const struct stage_solution *s = &phase->solution;
    const struct {
        const char *key;
        double value;
    } members[] = {
        {"grid_v", s->grid_v},
        {"cathode_v", s->cathode_v},
        {"anode_v", s->anode_v},
        {"screen_v", s->screen_v},
        {"anode_a", s->anode_a},
        {"screen_a", s->screen_a},
        {"cathode_a", s->cathode_a},
        {"grid_a", s->grid_a},
        {"anode_w", s->anode_w},
        {"screen_w", s->screen_w},
        {"screen_resistor_w", s->screen_resistor_w},
        {"return_v", s->return_v},
        {"no_leak_cathode_a", phase->no_leak_cathode_a},
        {"grid_cold_v", phase->grid_cold_v},
        {"grid_warm_v", phase->grid_warm_v},
    };
    json_open(out, key, '{');
    json_flag_member(out, "judged", phase->judged);
    json_choice_member(out, "why", reason_text(phase->why));
    json_text_member(out, "missing", phase->missing);
    json_text_member(out, "status", solve_text(s->status));
    for (size_t i = 0; i < sizeof members / sizeof members[0]; i++)
        json_number_member(out, members[i].key, members[i].value);
    json_close(out, '}');
}

static void write_measured(const char *key, const struct stage_reading *reading, struct buffer *out)
{
    json_open(out, key, '{');
    json_text_member(out, "written", reading->set ? reading->written : NULL);
    json_quantity_member(out, "grid_v", &reading->grid);
    json_quantity_member(out, "cathode_v", &reading->cathode);
    json_quantity_member(out, "anode_v", &reading->anode);
    json_quantity_member(out, "screen_v", &reading->screen);
    json_flag_member(out, "lifted", reading->parts_lifted);
    json_close(out, '}');
}

static const char *bias_text(enum bias_kind bias)
{
    switch (bias) {
    case BIAS_CATHODE:
        return "cathode";
    case BIAS_FIXED:
        return "fixed";
    case BIAS_CONTACT:
        return "contact";
    case BIAS_BACK:
        return "back";
    }
    return NULL;
}

static void write_row(const struct stage_findings *found, struct buffer *out)
{
    json_text_member(out, "row", found->row_name);
    json_flag_member(out, "row_given", found->row_given);
    json_text_member(out, "row_source",
                     found->row_name ? source_row(found->row_source)->key : NULL);
    json_text_member(out, "row_source_text", found->row_source_text);
    json_text_member(out, "row_trust", found->row_name ? trust_text(found->row_trust) : NULL);
    json_flag_member(out, "row_doubtful", found->law_status == LAW_WARN_MU12);
    json_number_member(out, "anode_max_w", found->anode_max_w);
    json_number_member(out, "screen_max_w", found->screen_max_w);
}

void json_write_stages(const struct findings *findings, struct buffer *out)
{
    json_open(out, "stages", '[');
    for (size_t i = 0; i < findings->stage_count; i++) {
        const struct stage_findings *found = &findings->stages[i];
        json_open(out, NULL, '{');
        json_text_member(out, "name", found->stage->name);
        json_text_member(out, "valve_ref", found->stage->valve_ref);
        json_text_member(out, "valve", found->stage->valve_type);
        json_text_member(out, "use", found->is_output ? "output" : "amplifier");
        json_text_member(out, "bias", bias_text(found->stage->bias));
        json_text_member(out, "pushpull_with", found->stage->pushpull_with);
        write_row(found, out);
        write_phase("designed", &found->phases[PHASE_DESIGNED], out);
        write_phase("found", &found->phases[PHASE_FOUND], out);
        write_phase("left", &found->phases[PHASE_LEFT], out);
        write_measured("measured_found", &found->stage->found, out);
        write_measured("measured_left", &found->stage->left, out);
        json_flag_member(out, "near_rating", found->near_rating);
        json_number_member(out, "grid_current_a", found->grid_current_a);
        json_number_member(out, "grid_current_error_a", found->grid_current_error_a);
        json_flag_member(out, "grid_current_advice", found->grid_current_advice);
        json_close(out, '}');
    }
    json_close(out, ']');
}
