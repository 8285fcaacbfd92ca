/* The frame of the findings: what is written, in which order. */
#include "write/json.h"

#include "write/json_pieces.h"

#include <string.h>

enum { FINDINGS_VERSION = 1 };

/* A copy that leaves the house does not tell where the shop keeps its files. */
static const char *path_shown(const struct findings *findings, const char *path)
{
    if (!path || findings->copy == COPY_SHOP)
        return path;
    const char *slash = strrchr(path, '/');
    return slash ? slash + 1 : path;
}

static void write_diagnostics(const struct findings *findings, struct buffer *out)
{
    const struct diagnostics *list = findings->diagnostics;
    json_open(out, "diagnostics", '[');
    for (size_t i = 0; list && i < list->count; i++) {
        const struct diagnostic *item = &list->items[i];
        json_open(out, NULL, '{');
        json_text_member(out, "path", path_shown(findings, item->path));
        json_count_member(out, "line", item->at.line);
        json_count_member(out, "column", item->at.column);
        json_text_member(out, "severity", severity_text(item->severity));
        json_text_member(out, "code", diagnostic_code_text(item->code));
        json_text_member(out, "text", item->text);
        json_text_member(out, "hint", item->hint);
        json_close(out, '}');
    }
    json_close(out, ']');
}

static void write_kept(struct buffer *out, const char *key, const struct kept_count *count)
{
    json_open(out, key, '{');
    json_text_member(out, "name", count->name);
    json_count_member(out, "kept", count->kept);
    json_count_member(out, "of", count->of);
    json_count_member(out, "tested", count->tested);
    json_count_member(out, "untested", count->untested);
    json_count_member(out, "reformed", count->reformed);
    json_count_member(out, "disconnected", count->disconnected);
    json_count_member(out, "restuffed", count->restuffed);
    json_count_member(out, "removed", count->removed);
    json_flag_member(out, "complete", count->complete);
    json_close(out, '}');
}

static void write_originality(const struct originality *counts, struct buffer *out)
{
    json_open(out, "originality", '{');
    json_count_member(out, "kept", counts->total.kept);
    json_count_member(out, "of", counts->total.of);
    write_kept(out, "total", &counts->total);
    json_open(out, "by_kind", '[');
    for (size_t i = 0; i < sizeof counts->kinds / sizeof counts->kinds[0]; i++)
        write_kept(out, NULL, &counts->kinds[i]);
    json_close(out, ']');
    json_open(out, "seen", '{');
    for (int side = 0; side < SEEN_COUNT; side++)
        write_kept(out, seen_text(side), &counts->seen[side]);
    json_close(out, '}');
    json_count_member(out, "restuffed", counts->restuffed);
    json_count_member(out, "replaced", counts->replaced);
    json_count_member(out, "replaced_unmeasured", counts->replaced_unmeasured);
    json_count_member(out, "earlier_repairs",
                      counts->earlier_repairs_kept + counts->earlier_repairs_replaced);
    json_count_member(out, "earlier_repairs_kept", counts->earlier_repairs_kept);
    json_count_member(out, "earlier_repairs_replaced", counts->earlier_repairs_replaced);
    json_count_member(out, "missing", counts->missing);
    json_count_member(out, "open", counts->open);
    write_kept(out, "valves", &counts->valves);
    json_flag_member(out, "of_the_parts_listed", counts->of_the_parts_listed);
    json_close(out, '}');
}

static void write_policy(const struct policy *policy, struct buffer *out)
{
    const struct {
        const char *key;
        double value;
    } members[] = {
        {"cathode_current_rise", policy->cathode_current_rise},
        {"dissipation_share", policy->dissipation_share},
        {"pushpull_difference", policy->pushpull_difference},
        {"grid_shift", policy->grid_shift},
        {"avc_line_loss", policy->avc_line_loss},
        {"avc_feed_v", policy->avc_feed_v},
        {"avc_feed_bias_share", policy->avc_feed_bias_share},
        {"screen_fall", policy->screen_fall},
        {"screen_dropper_min_ohm", policy->screen_dropper_min_ohm},
        {"rail_drop", policy->rail_drop},
        {"ht_current_share", policy->ht_current_share},
        {"detector_control_v", policy->detector_control_v},
        {"detector_grid_share", policy->detector_grid_share},
        {"tuning_resistance_ratio", policy->tuning_resistance_ratio},
        {"battery_share", policy->battery_share},
        {"battery_before_switch_a", policy->battery_before_switch_a},
        {"isolator_insulation_ohm", policy->isolator_insulation_ohm},
        {"touch_current_a", policy->touch_current_a},
        {"ageing_margin_waxed", policy->ageing_margin_waxed},
        {"ageing_margin_other", policy->ageing_margin_other},
        {"heat_paper_w", policy->heat_paper_w},
        {"heat_can_w", policy->heat_can_w},
        {"heat_tubular_w", policy->heat_tubular_w},
        {"guard_band", policy->guard_band},
        {"instrument_share", policy->instrument_share},
        {"working_c", policy->working_c},
        {"working_near_heat_c", policy->working_near_heat_c},
        {"mains_rise", policy->mains_rise},
        {"voltage_tolerance", policy->voltage_tolerance},
        {"repeatability", policy->repeatability},
        {"default_accuracy", policy->default_accuracy},
        {"volts_accuracy", policy->volts_accuracy},
        {"reform_current_a", policy->reform_current_a},
        {"reform_power_w", policy->reform_power_w},
        {"winding_tolerance", policy->winding_tolerance},
        {"valve_least", policy->valve_least},
    };
    json_open(out, "policy", '{');
    for (size_t i = 0; i < sizeof members / sizeof members[0]; i++)
        json_number_member(out, members[i].key, members[i].value);
    json_text_member(out, "leakage_rule", policy->leakage_rule);
    json_close(out, '}');
}

void json_write_findings(const struct findings *findings, struct buffer *out)
{
    json_open(out, NULL, '{');
    json_count_member(out, "findings", FINDINGS_VERSION);
    json_text_member(out, "program", findings->program);
    json_text_member(out, "copy", copy_text(findings->copy));
    json_write_job(findings, out);
    json_write_capacitors(findings, out);
    json_write_other_parts(findings, out);
    json_write_stages(findings, out);
    write_originality(&findings->originality, out);
    json_write_work(findings, out);
    json_write_bench(findings, out);
    json_write_visits(findings, out);
    write_policy(&findings->shop->policy, out);
    write_diagnostics(findings, out);
    json_close(out, '}');
    buffer_byte(out, '\n');
}
