/*
 * A job and its findings made by hand, so that documents are tested without the calculations. The
 * figures are invented and agree with nothing but one another.
 */
#ifndef TESTS_REPORT_SAMPLE_H
#define TESTS_REPORT_SAMPLE_H

#include "assess/reforming.h"
#include "report/report.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

struct sample {
    struct arena arena;
    struct diagnostics diagnostics;
    struct job job;
    struct shop shop;
    struct findings findings;
    struct capacitor capacitors[5];
    struct capacitor_findings parts[5];
    struct reading readings[6];
    struct reading_findings judged[6];
    struct effect effects[2];
    struct criterion criteria[2], other_rules[1];
    struct stage stage;
    struct stage_findings stage_findings;
    struct instrument instrument;
    struct resistor resistor;
    struct photo photos[2];
    struct report_picture pictures[3]; /* two photographs, no logo */
    struct named_prose removed;
    struct reform reform;
    struct reading log[4];
    int stage_index;
};

static inline struct quantity sample_quantity(double value, enum unit unit, const char *written)
{
    return (struct quantity){.set = true, .value = value, .unit = unit, .written = written};
}

static inline struct prose sample_prose(const char *text, unsigned line)
{
    return (struct prose){text, {line, 3}};
}

static inline void sample_part(struct sample *sample, size_t index, const char *ref,
                               enum place place, double farad, double volts)
{
    struct capacitor *part = &sample->capacitors[index];
    *part = (struct capacitor){
        .ref = ref,
        .at = {20 + (unsigned)index, 3},
        .can = NOT_LISTED,
        .type = DIELECTRIC_WAXED_PAPER,
        .place = place,
        .seen = SEEN_BELOW,
        .source_resistance = {.resistor = NOT_LISTED, .winding = NOT_LISTED},
        .marked = {.set = true,
                   .written = "as typed",
                   .value = sample_quantity(farad, UNIT_CAPACITANCE, "as typed"),
                   .rated = sample_quantity(volts, UNIT_VOLTAGE, "as typed")},
    };
    sample->parts[index] = (struct capacitor_findings){
        .part = part,
        .deciding = -1,
        .deciding_found = -1,
        .service_v = volts / 2,
        .test_v = NAN,
        .test_s = NAN,
        .test_leakage_a = NAN,
        .test_limit_a = NAN,
        .test_uncertainty_a = NAN,
        .test_c = NAN,
        .found_leakage_a = NAN,
        .found_limit_a = NAN,
        .sheet_voltage_v = 100,
        .sheet_soak_s = 60,
        .sheet_limit_a = 0.13e-6,
        .sheet_limit_ohm = 763e6,
        .sheet_series_max_ohm = NAN,
        .limit_a = NAN,
        .bench_limit_a = NAN,
        .exponent = NAN,
        .theta_k = 10,
        .working_c = 45,
        .ageing_margin = 2,
        .absorption = {.wait_until_s = NAN},
        .outcome = OUTCOME_NOT_JUDGED,
        .outcome_found = OUTCOME_NOT_JUDGED,
        .why = WHY_NO_READING,
        .advice = ADVICE_MEASURE_AGAIN,
    };
}

static inline void sample_reading(struct sample *sample, size_t index, double volts,
                                  double leakage_a, double limit_a)
{
    struct reading *reading = &sample->readings[index];
    struct reading_findings *judged = &sample->judged[index];
    struct capacitor_findings *part = &sample->parts[index];
    *reading = (struct reading){.set_volts = sample_quantity(volts, UNIT_VOLTAGE, ""),
                                .time = sample_quantity(60, UNIT_TIME, ""),
                                .value = sample_quantity(leakage_a, UNIT_CURRENT, "")};
    *judged = (struct reading_findings){
        .reading = reading, .part_v = volts, .current_a = leakage_a, .temperature_c = 19};
    part->readings = judged;
    part->reading_count = 1;
    part->deciding = part->deciding_found = 0;
    part->test_v = volts;
    part->test_s = 60;
    part->test_leakage_a = leakage_a;
    part->test_limit_a = part->bench_limit_a = limit_a;
    part->test_uncertainty_a = 0.02e-6;
    part->why = WHY_NONE;
}

static inline void sample_stage(struct sample *sample)
{
    sample->stage = (struct stage){.name = "output", .valve_ref = "V4", .valve_type = "6V6GT"};
    struct stage_findings *stage = &sample->stage_findings;
    *stage = (struct stage_findings){.stage = &sample->stage,
                                     .row_name = "A1-250",
                                     .row_source_text = "a valve manual",
                                     .row_trust = TRUST_RECALLED,
                                     .anode_max_w = 12,
                                     .screen_max_w = 2,
                                     .grid_current_a = NAN};
    for (int phase = 0; phase < PHASE_COUNT; phase++) {
        double rise = phase == PHASE_FOUND ? 1.2 : 1;
        stage->phases[phase] =
            (struct stage_phase){.judged = true,
                                 .solution = {.grid_v = phase == PHASE_FOUND ? 2.37 : 0,
                                              .cathode_v = 12.5 * rise,
                                              .anode_v = 250,
                                              .screen_v = 250,
                                              .anode_a = 0.045 * rise,
                                              .screen_a = 0.0045 * rise,
                                              .cathode_a = 0.0495 * rise,
                                              .anode_w = 11.2 * rise,
                                              .screen_w = 1.1 * rise}};
    }
}

static inline void sample_parts(struct sample *sample)
{
    sample_part(sample, 0, "C14", PLACE_COUPLING, 0.02e-6, 400);
    sample_reading(sample, 0, 100, 0.62e-6, 0.13e-6);
    sample->effects[0] = (struct effect){
        .key = "grid_volts", .value = 2.4, .unit = UNIT_VOLTAGE, .of = NAN, .subject = "output"};
    sample->effects[1] =
        (struct effect){.key = "cathode_current", .value = 22, .unit = UNIT_PERCENT, .of = NAN};
    sample->criteria[0] = (struct criterion){.key = CRITERION_CATHODE_CURRENT,
                                             .value = 22,
                                             .limit = 10,
                                             .unit = UNIT_PERCENT,
                                             .upper = true,
                                             .outcome = OUTCOME_FAIL,
                                             .source = SOURCE_POLICY};
    sample->parts[0].effects = sample->effects;
    sample->parts[0].effect_count = 2;
    sample->parts[0].criteria = sample->criteria;
    sample->parts[0].criterion_count = 1;
    sample->parts[0].outcome = sample->parts[0].outcome_found = OUTCOME_FAIL;
    sample->parts[0].advice = ADVICE_REPLACE;
    sample->capacitors[0].stages = &sample->stage_index;
    sample->capacitors[0].stage_count = 1;
    sample->capacitors[0].done = DONE_RESTUFFED;
    sample->capacitors[0].fitted =
        (struct marking){.set = true,
                         .written = "polypropylene 0.022 uF 630 V",
                         .type = DIELECTRIC_POLYPROPYLENE,
                         .value = sample_quantity(0.022e-6, UNIT_CAPACITANCE, ""),
                         .rated = sample_quantity(630, UNIT_VOLTAGE, "")};
    sample->capacitors[0].signed_where = sample_prose("inside end cap", 30);

    sample_part(sample, 1, "C20", PLACE_RESERVOIR, 16e-6, 450);
    sample_reading(sample, 1, 440, 310e-6, 1100e-6);
    sample->capacitors[1].type = DIELECTRIC_ELECTROLYTIC;
    sample->capacitors[1].done = DONE_REFORMED;
    sample->parts[1].state = STATE_REFORMED;
    sample->parts[1].outcome = OUTCOME_PASS;
    sample->parts[1].advice = ADVICE_KEEP;
    sample->parts[1].found_leakage_a = 2500e-6;
    sample->parts[1].found_limit_a = 1100e-6;
    sample->criteria[1] = (struct criterion){.key = CRITERION_LEAKAGE_RULE,
                                             .value = 310e-6,
                                             .limit = 1100e-6,
                                             .unit = UNIT_CURRENT,
                                             .outcome = OUTCOME_PASS,
                                             .source = SOURCE_JAN_C_62,
                                             .rule = "JAN-C-62"};
    sample->other_rules[0] = (struct criterion){.key = CRITERION_LEAKAGE_RULE,
                                                .limit = 25e-6,
                                                .unit = UNIT_CURRENT,
                                                .source = SOURCE_VISHAY_038,
                                                .rule = "0.002 CV + 3 µA"};
    sample->parts[1].criteria = &sample->criteria[1];
    sample->parts[1].criterion_count = 1;
    sample->parts[1].other_rules = sample->other_rules;
    sample->parts[1].other_rule_count = 1;

    sample_part(sample, 2, "C9", PLACE_AVC_BYPASS, 0.05e-6, 350);
    sample_reading(sample, 2, 50, 0.01e-6, 0.22e-6);
    sample->parts[2].test_bound = BOUND_UNDER;
    sample->parts[2].outcome = OUTCOME_PASS;
    sample->parts[2].advice = ADVICE_KEEP;
    sample->capacitors[2].done = DONE_KEPT;
    sample->capacitors[2].was = WAS_EARLIER_REPAIR;

    sample_part(sample, 3, "C22", PLACE_ACROSS_MAINS, 0.01e-6, 1000);
    sample->parts[3].outcome = OUTCOME_FAIL;
    sample->parts[3].why = WHY_NO_READING_PASSES;
    sample->parts[3].no_reading_passes = true;
    sample->parts[3].class_needed = CLASS_X2;
    sample->parts[3].advice = ADVICE_REPLACE_SAFETY_CLASS;
    sample->capacitors[3].done = DONE_REPLACED;

    sample_part(sample, 4, "C7", PLACE_TUNING, 110e-12, 500);
    sample->capacitors[4].type = DIELECTRIC_MICA;
    sample->capacitors[4].done = DONE_KEPT_UNTESTED;
}

static inline void sample_history(struct sample *sample)
{
    sample->removed = (struct named_prose){"bag 1", sample_prose("C22 R8", 40)};
    sample->photos[0] = (struct photo){.file = "photos/x/after.jpg",
                                       .shows = sample_prose("underside of the chassis", 50),
                                       .caption = sample_prose("Seams closed.", 51),
                                       .pair = 1,
                                       .after = true,
                                       .copies = COPY_SALE};
    sample->photos[1] = (struct photo){.file = "photos/x/before.jpg",
                                       .shows = sample_prose("underside of the chassis", 54),
                                       .pair = 1,
                                       .copies = COPY_SALE};
    sample->pictures[0] = (struct report_picture){"01.jpg", 800, 600, NULL};
    sample->pictures[1] = (struct report_picture){"02.jpg", 800, 600, NULL};
    for (size_t i = 0; i < 4; i++)
        sample->log[i] =
            (struct reading){.line = (unsigned)i / 2,
                             .set_volts = sample_quantity(i < 2 ? 50 : 160, UNIT_VOLTAGE, ""),
                             .time = sample_quantity(i % 2 ? 300 : 30, UNIT_TIME, ""),
                             .value = sample_quantity(i % 2 ? 21e-6 : 170e-6, UNIT_CURRENT, "")};
    sample->reform = (struct reform){
        .capacitor = 1,
        .limiter = {.set = true,
                    .quantity = sample_quantity(47e3, UNIT_RESISTANCE, "47k"),
                    .resistor = NOT_LISTED,
                    .winding = NOT_LISTED},
        .log = sample->log,
        .log_count = 4,
        .rest = sample_quantity(43200, UNIT_TIME, "12 h"),
        .after_rest = &sample->log[3],
        .after_rest_count = 1,
    };
}

static inline void sample_kept(struct sample *sample)
{
    struct originality *kept = &sample->findings.originality;
    kept->total = (struct kept_count){.name = "all",
                                      .kept = 13,
                                      .of = 21,
                                      .tested = 12,
                                      .reformed = 1,
                                      .restuffed = 6,
                                      .removed = 2};
    kept->kinds[0] = (struct kept_count){
        .name = "capacitors", .kept = 10, .of = 18, .restuffed = 6, .removed = 2};
    kept->kinds[1] = (struct kept_count){.name = "resistors", .kept = 2, .of = 2};
    kept->kinds[2] = (struct kept_count){.name = "windings", .kept = 1, .of = 1};
    kept->seen[SEEN_BELOW] = (struct kept_count){.name = "below", .kept = 13, .of = 21};
    kept->valves = (struct kept_count){.name = "valves", .kept = 3, .of = 3};
    kept->earlier_repairs_kept = 1;
}

/* Everything filled in; a test changes what it is about, then calls sample_compose. */
static inline struct sample *sample_begin(void)
{
    struct sample *sample = calloc(1, sizeof *sample);
    sample->diagnostics = diagnostics_in(&sample->arena);
    sample->shop = shop_default();
    sample->shop.name = "Oxlade & Finch";
    sample_stage(sample);
    sample_parts(sample);
    sample_history(sample);
    sample->instrument = (struct instrument){.name = "leakage",
                                             .description = "electrometer 7",
                                             .accuracy_set = true,
                                             .accuracy_written = "2 % + 0.02 uA",
                                             .resolution = sample_quantity(1e-8, UNIT_CURRENT, "")};
    sample->resistor = (struct resistor){
        .ref = "R8",
        .marked = {.set = true,
                   .written = "47k",
                   .value = sample_quantity(47e3, UNIT_RESISTANCE, "47k"),
                   .tolerance_set = true,
                   .tolerance_low_percent = -20,
                   .tolerance_high_percent = 20},
        .measured = sample_quantity(71e3, UNIT_RESISTANCE, "71k"),
        .done = DONE_REPLACED,
        .reason = sample_prose("rail to V3 low", 60),
    };
    struct job *job = &sample->job;
    job->source = (struct source){"2034-027.yaml", "", 0};
    job->number = "2034-027";
    job->set.maker = sample_prose("Lindmere", 3);
    job->set.model = sample_prose("Tern A42", 4);
    job->set.serial = sample_prose("30771", 5);
    job->set.supply = SUPPLY_TRANSFORMER;
    job->owner.name = sample_prose("Maud Estcourt", 8);
    job->owner.contact = sample_prose("maud@post.example, by post", 9);
    job->received = (struct date){true, 2034, 5, 6, "2034-05-06", {0, 0}};
    job->returned = (struct date){true, 2034, 6, 14, "2034-06-14", {0, 0}};
    job->technician = sample_prose("J. Oxlade", 11);
    job->capacitors = sample->capacitors;
    job->capacitor_count = 5;
    job->stages = &sample->stage;
    job->stage_count = 1;
    job->instruments = &sample->instrument;
    job->instrument_count = 1;
    job->resistors = &sample->resistor;
    job->resistor_count = 1;
    job->photos = sample->photos;
    job->photo_count = 2;
    job->removed = &sample->removed;
    job->removed_count = 1;
    job->reforms = &sample->reform;
    job->reform_count = 1;
    sample->findings = (struct findings){
        .program = "0.1.0",
        .copy = COPY_CLIENT,
        .job = job,
        .shop = &sample->shop,
        .bench_c = 19,
        .working_c = 45,
        .capacitors = sample->parts,
        .capacitor_count = 5,
        .stages = &sample->stage_findings,
        .stage_count = 1,
        .fingerprint = "5d41c7e290ab36f817d24e6bc3905fa1882e6d074bf9a315e06c2d9871f3b54a",
        .diagnostics = &sample->diagnostics,
    };
    sample_kept(sample);
    return sample;
}

static inline const struct templates *sample_templates(struct sample *sample)
{
    return templates_open(NULL, ".", &sample->shop, &sample->arena, &sample->diagnostics);
}

/* The plans of reforming follow from the marked volts and the service volts: they are not made by
   hand. */
static inline void sample_plans(struct sample *sample)
{
    const struct job *job = &sample->job;
    const struct reform_plan **plans =
        arena_array(&sample->arena, sample->findings.capacitor_count + 1, sizeof *plans);
    for (size_t i = 0; i < sample->findings.capacitor_count; i++) {
        const struct capacitor *part = &sample->capacitors[i];
        struct reforming_case given = {job, &sample->shop.policy, &sample->parts[i], 19};
        enum action done = part->done == DONE_OPEN && part->can != NOT_LISTED && job->cans
                               ? job->cans[part->can].done
                               : part->done;
        struct reform_plan *plan = arena_get(&sample->arena, sizeof *plan);
        if (reforming_wanted(&given, done) && reforming_plan(&given, plan))
            plans[i] = plan;
    }
    sample->findings.bench.plans = plans;
}

static inline struct document *sample_compose(struct sample *sample, enum document_kind kind)
{
    sample_plans(sample);
    const struct templates *templates = sample_templates(sample);
    report_explain(&sample->findings, templates_words(templates), &sample->arena);
    return report_compose(&sample->findings, kind, templates, sample->pictures, &sample->arena,
                          &sample->diagnostics);
}

static inline void sample_end(struct sample *sample, struct document *document)
{
    if (document)
        document_release(document);
    arena_release(&sample->arena);
    free(sample);
}

/* The exhibit with this id; NULL: none. */
static inline const struct exhibit *sample_exhibit(const struct document *document, const char *id)
{
    for (cmark_node *node = cmark_node_first_child(document->root); node;
         node = cmark_node_next(node)) {
        const struct exhibit *exhibit = document_exhibit(node);
        if (exhibit && strcmp(exhibit->id, id) == 0)
            return exhibit;
    }
    return NULL;
}

#endif
