/* What templates see: strings made once from the findings, each number with its unit. */
#include "base/memory.h"
#include "report/composition.h"

#include <stdlib.h>
#include <string.h>
#include <utf8proc.h>

/* Short names for the file's one pattern: put a text, a flag, a number under a key. */
struct filler {
    struct composition *composition;
    struct arena *arena;
    struct mustache_value *map;
};

static struct filler fill(struct composition *composition)
{
    return (struct filler){composition, composition->arena, mustache_map(composition->arena)};
}

static void put(const struct filler *filler, const char *key, const char *text)
{
    mustache_set_text(filler->arena, filler->map, key, text);
}

static void put_flag(const struct filler *filler, const char *key, bool flag)
{
    mustache_set_flag(filler->arena, filler->map, key, flag);
}

static void put_quantity(const struct filler *filler, const char *key,
                         const struct quantity *quantity)
{
    put(filler, key, text_quantity(filler->composition, quantity));
}

static void put_number(const struct filler *filler, const char *key, double value, enum unit unit,
                       unsigned digits)
{
    put(filler, key, text_unit(filler->composition, value, unit, digits));
}

static void put_count(const struct filler *filler, const char *key, size_t count)
{
    if (count)
        put(filler, key, arena_print(filler->arena, "%zu", count));
}

static void put_map(const struct filler *filler, const char *key, const struct filler *inner)
{
    if (inner->map->count)
        mustache_set(filler->arena, filler->map, key, inner->map);
}

/* ---- the set, the people, the shop */

static void put_set(const struct filler *root)
{
    const struct job *job = root->composition->job;
    struct filler set = fill(root->composition);
    put(&set, "maker", job->set.maker.text);
    put(&set, "model", job->set.model.text);
    put(&set, "chassis", job->set.chassis.text);
    put(&set, "serial", job->set.serial.text);
    put(&set, "description", job->set.description.text);
    put(&set, "year", job->set.year.set ? job->set.year.written : NULL);
    put_quantity(&set, "mains", &job->set.mains);
    put_quantity(&set, "frequency", &job->set.frequency);
    put_flag(&set, "live_chassis", job->set.supply == SUPPLY_LIVE_CHASSIS);
    put_flag(&set, "transformer", job->set.supply == SUPPLY_TRANSFORMER);
    put_flag(&set, "battery", job->set.supply == SUPPLY_BATTERY);
    put_flag(&set, "vibrator", job->set.supply == SUPPLY_VIBRATOR);
    put_flag(&set, "on_mains",
             job->set.supply == SUPPLY_LIVE_CHASSIS || job->set.supply == SUPPLY_TRANSFORMER ||
                 job->set.supply == SUPPLY_UNKNOWN);
    put_map(root, "set", &set);
}

static void put_shop(const struct filler *root)
{
    const struct shop *shop = root->composition->shop;
    struct filler map = fill(root->composition);
    put(&map, "name", shop->name);
    put(&map, "trade", shop->trade);
    put(&map, "address", shop->address);
    put(&map, "contact", shop->contact);
    put_map(root, "shop", &map);
}

static void put_people(const struct filler *root)
{
    const struct job *job = root->composition->job;
    struct filler owner = fill(root->composition);
    put(&owner, "name", job->owner.name.text);
    put(&owner, "contact", job->owner.contact.text);
    put_map(root, "owner", &owner);
    put(root, "technician", job->technician.text);
    put(root, "received", date_text(&job->received));
    put(root, "returned", date_text(&job->returned));
    put(root, "call_back", date_text(&job->call_back));
    put(root, "continues", job->continues.text);
}

/* The visit before: since.earlier, since.then (a date), since.years. */
static void put_since(const struct filler *root)
{
    const struct visit_changes *since = root->composition->findings->since;
    struct filler map = fill(root->composition);
    if (!since)
        return;
    put(&map, "earlier", since->earlier);
    put(&map, "then", since->then_date);
    if (since->years > 0)
        put(&map, "years", arena_print(root->composition->arena, "%.1f", since->years));
    put_map(root, "since", &map);
}

static void put_conditions(const struct filler *root)
{
    const struct findings *findings = root->composition->findings;
    const struct job *job = root->composition->job;
    put_number(root, "bench", findings->bench_c, UNIT_TEMPERATURE, 3);
    put_number(root, "working", findings->working_c, UNIT_TEMPERATURE, 3);
    put_number(root, "working_near_heat", findings->shop->policy.working_near_heat_c,
               UNIT_TEMPERATURE, 3);
    put_quantity(root, "humidity", &job->conditions.humidity);
}

/* ---- which sections there are */

/* Prose fields by their names in templates. */
static const struct {
    const char *name;
    size_t offset;
} prose_fields[] = {
    {"arrival", offsetof(struct job, arrival)},      {"request", offsetof(struct job, request)},
    {"private", offsetof(struct job, private_note)}, {"plan", offsetof(struct job, plan)},
    {"approvals", offsetof(struct job, approvals)},  {"work", offsetof(struct job, work)},
    {"not_done", offsetof(struct job, not_done)},    {"hazards", offsetof(struct job, hazards)},
};
enum { PROSE_FIELDS = sizeof prose_fields / sizeof *prose_fields };

static const char reform_note[] = "reform_note"; /* of the reform that a section stands at */

bool composition_is_prose(const char *name)
{
    for (size_t i = 0; i < PROSE_FIELDS; i++)
        if (strcmp(prose_fields[i].name, name) == 0)
            return true;
    return strcmp(name, reform_note) == 0;
}

static const struct prose *prose_field(const struct job *job, size_t field)
{
    const char *place = (const char *)job + prose_fields[field].offset;
    const struct prose *prose = (const struct prose *)(const void *)place;
    return prose->text && *prose->text ? prose : NULL;
}

const struct prose *composition_prose(const struct composition *composition, const char *name,
                                      size_t index)
{
    const struct job *job = composition->job;
    if (strcmp(name, reform_note) == 0 && index < job->reform_count &&
        job->reforms[index].note.text)
        return &job->reforms[index].note;
    for (size_t i = 0; i < PROSE_FIELDS; i++)
        if (strcmp(prose_fields[i].name, name) == 0)
            return prose_field(job, i);
    return NULL;
}

static bool prose_present(const struct job *job, const char *name)
{
    for (size_t i = 0; i < PROSE_FIELDS; i++)
        if (strcmp(prose_fields[i].name, name) == 0)
            return prose_field(job, i) != NULL;
    return false;
}

static bool uses_rule(const struct findings *findings)
{
    for (size_t i = 0; i < findings->capacitor_count; i++)
        for (size_t j = 0; j < findings->capacitors[i].criterion_count; j++)
            if (findings->capacitors[i].criteria[j].key == CRITERION_LEAKAGE_RULE)
                return true;
    return false;
}

static void put_sections(const struct filler *root)
{
    enum { LARGE_SET = 40 };
    const struct composition *composition = root->composition;
    const struct job *job = composition->job;
    struct filler has = fill(root->composition);
    for (size_t i = 0; i < PROSE_FIELDS; i++)
        put_flag(&has, prose_fields[i].name, prose_field(job, i) != NULL);
    put_flag(&has, "agreement", prose_present(job, "plan") || prose_present(job, "approvals"));
    put_flag(&has, "capacitors", job->capacitor_count > 0);
    put_flag(&has, "many_capacitors", job->capacitor_count > LARGE_SET);
    put_flag(&has, "soak_curves", has_soak_curves(composition));
    put_flag(&has, "changed", has_changed(composition));
    put_flag(&has, "visits", composition->findings->since && composition->findings->since->count);
    put_flag(&has, "replacements", has_replacements(composition));
    put_flag(&has, "hum", composition->findings->bench.node_count > 0);
    put_flag(&has, "date_codes", composition->findings->bench.date_count > 0);
    put_flag(&has, "removed", job->removed_count > 0);
    put_flag(&has, "stages", composition->findings->stage_count > 0);
    put_flag(&has, "resistors", job->resistor_count > 0);
    put_flag(&has, "windings", job->winding_count > 0);
    put_flag(&has, "controls", job->control_count > 0);
    put_flag(&has, "parts", job->resistor_count + job->winding_count + job->control_count > 0);
    put_flag(&has, "valves", job->valve_count > 0);
    put_flag(&has, "voltages", job->voltages.point_count > 0);
    put_flag(&has, "performance", job->performance_count > 0);
    put_flag(&has, "safety", job->safety_count > 0);
    put_flag(&has, "plates", has_plates(composition));
    put_flag(&has, "instruments", job->instrument_count > 0);
    put_flag(&has, "reforms", job->reform_count > 0);
    put_flag(&has, "leakage_rule", uses_rule(composition->findings));
    put_flag(&has, "fingerprint", composition->findings->fingerprint != NULL);
    put_flag(&has, "kept", composition->findings->originality.total.of > 0);
    put_map(root, "has", &has);
}

/* Which kinds of action there were: says what can be undone. */
static void put_actions(const struct filler *root)
{
    const struct composition *composition = root->composition;
    const struct job *job = composition->job;
    bool done[ACTION_COUNT] = {false};
    for (size_t i = 0; i < job->capacitor_count; i++)
        done[capacitor_done(composition, i)] = true;
    for (size_t i = 0; i < job->can_count; i++)
        done[job->cans[i].done] = true;
    for (size_t i = 0; i < job->resistor_count; i++)
        done[job->resistors[i].done] = true;
    for (size_t i = 0; i < job->winding_count; i++)
        done[job->windings[i].done] = true;
    struct filler actions = fill(root->composition);
    put_flag(&actions, "reformed", done[DONE_REFORMED]);
    put_flag(&actions, "restuffed", done[DONE_RESTUFFED]);
    put_flag(&actions, "replaced", done[DONE_REPLACED]);
    put_flag(&actions, "disconnected", done[DONE_DISCONNECTED]);
    put_flag(&actions, "untested", done[DONE_KEPT_UNTESTED]);
    put_flag(&actions, "any",
             done[DONE_RESTUFFED] || done[DONE_REPLACED] || done[DONE_REFORMED] ||
                 done[DONE_DISCONNECTED]);
    put_map(root, "actions", &actions);
}

/* ---- methods */

static void put_decision(const struct filler *root)
{
    const struct policy *policy = &root->composition->shop->policy;
    struct filler decision = fill(root->composition);
    put_flag(&decision, "guarded", policy->guard_band == 1);
    put_flag(&decision, "simple", policy->guard_band == 0);
    if (policy->guard_band != 0 && policy->guard_band != 1)
        put_number(&decision, "multiple", policy->guard_band, UNIT_NONE, 2);
    put_number(&decision, "instrument_share", 100 * policy->instrument_share, UNIT_PERCENT, 2);
    put_map(root, "decision", &decision);
}

/* Which laws of temperature were used. */
static void put_temperature(const struct filler *root)
{
    struct filler used = fill(root->composition);
    bool paper = false, film = false, electrolytic = false;
    for (size_t i = 0; i < root->composition->findings->capacitor_count; i++) {
        switch (root->composition->findings->capacitors[i].part->type) {
        case DIELECTRIC_POLYSTYRENE:
        case DIELECTRIC_POLYESTER:
        case DIELECTRIC_POLYPROPYLENE:
            film = true;
            break;
        case DIELECTRIC_ELECTROLYTIC:
        case DIELECTRIC_WET_ELECTROLYTIC:
            electrolytic = true;
            break;
        case DIELECTRIC_UNKNOWN:
        case DIELECTRIC_PAPER:
        case DIELECTRIC_WAXED_PAPER:
        case DIELECTRIC_MOULDED_PAPER:
        case DIELECTRIC_OIL_PAPER:
        case DIELECTRIC_METALLISED_PAPER:
        case DIELECTRIC_MICA:
        case DIELECTRIC_CERAMIC:
        case DIELECTRIC_TANTALUM:
        case DIELECTRIC_AIR:
        case DIELECTRIC_COUNT:
            paper = true;
            break;
        }
    }
    put_flag(&used, "paper", paper);
    put_flag(&used, "film", film);
    put_flag(&used, "electrolytic", electrolytic);
    put_map(root, "temperature", &used);
}

/* "250 V, 250 V, −7 V, 36 mA": the figures of the row a stage is pinned to. */
static const char *row_text(const struct composition *composition,
                            const struct stage_findings *stage)
{
    const struct valve_row *row = stage->row;
    if (!row)
        return stage->stage->row.set
                   ? text_with_micro(composition->arena, stage->stage->row.written)
                   : NULL;
    const char *figures[] = {
        text_unit(composition, row->va_v, UNIT_VOLTAGE, 3),
        text_unit(composition, row->vg2_v, UNIT_VOLTAGE, 3),
        text_unit(composition, row->vg1_v, UNIT_VOLTAGE, 3),
        text_unit(composition, row->ia_a, UNIT_CURRENT, 3),
        text_unit(composition, row->ig2_a, UNIT_CURRENT, 2),
        text_unit(composition, row->gm_s, UNIT_CONDUCTANCE, 3),
    };
    return text_join(composition->arena, ", ", figures, sizeof figures / sizeof *figures);
}

/* Why a stage has no figures at all; NULL: it has some. */
static const char *unjudged_text(const struct composition *composition,
                                 const struct stage_findings *stage)
{
    for (int phase = 0; phase < PHASE_COUNT; phase++)
        if (stage->phases[phase].judged)
            return NULL;
    return phrase(
        &composition->say,
        arena_print(composition->arena, "why.%s", reason_text(stage->phases[PHASE_DESIGNED].why)),
        "valve", stage->stage->valve_type, NULL);
}

/* "RCA RC-19; seen in a text that quotes it"; NULL: the row has no source. */
static const char *row_source(const struct composition *composition,
                              const struct stage_findings *stage)
{
    if (!stage->row_source_text)
        return NULL;
    return arena_print(composition->arena, "%s; %s", stage->row_source_text,
                       stage->row_given ? phrase(&composition->say, "methods.row_given", NULL)
                                        : trust_words(composition, stage->row_trust));
}

static void put_stages(const struct filler *root)
{
    struct mustache_value *list = mustache_list(root->arena);
    for (size_t i = 0; i < root->composition->findings->stage_count; i++) {
        const struct stage_findings *stage = &root->composition->findings->stages[i];
        struct filler item = fill(root->composition);
        put(&item, "index", arena_print(root->arena, "%zu", i));
        put(&item, "name", stage->stage->name);
        put(&item, "valve", stage->stage->valve_type);
        put(&item, "valve_ref", stage->stage->valve_ref);
        put(&item, "row", row_text(root->composition, stage));
        put(&item, "row_source", row_source(root->composition, stage));
        put(&item, "unjudged", unjudged_text(root->composition, stage));
        put_flag(&item, "without_gm", stage->row && isnan(stage->row->gm_s));
        mustache_push(root->arena, list, item.map);
    }
    mustache_set(root->arena, root->map, "stages", list);
}

/* Parts whose working the shop's copy folds away: those that were read or solved. */
static void put_workings(const struct filler *root)
{
    const struct findings *findings = root->composition->findings;
    struct mustache_value *list = mustache_list(root->arena);
    for (size_t i = 0; i < findings->capacitor_count && findings->bench.workings; i++) {
        if (findings->copy != COPY_SHOP || findings->capacitors[i].deciding < 0)
            continue;
        struct filler item = fill(root->composition);
        put(&item, "index", arena_print(root->arena, "%zu", i));
        put(&item, "ref", findings->capacitors[i].part->ref);
        mustache_push(root->arena, list, item.map);
    }
    mustache_set(root->arena, root->map, "workings", list);
    put_flag(root, "any_working", list->count > 0);
}

static void put_reforms(const struct filler *root)
{
    const struct job *job = root->composition->job;
    struct mustache_value *list = mustache_list(root->arena);
    for (size_t i = 0; i < job->reform_count; i++) {
        const struct reform *reform = &job->reforms[i];
        struct filler item = fill(root->composition);
        put(&item, "index", arena_print(root->arena, "%zu", i));
        put(&item, "ref", reform->capacitor < 0 ? NULL : job->capacitors[reform->capacitor].ref);
        put(&item, "date", date_text(&reform->date));
        put(&item, "limiter", reform->limiter.set ? reform->limiter.quantity.written : NULL);
        put_quantity(&item, "rest", &reform->rest);
        put_flag(&item, "note", reform->note.text != NULL);
        put_flag(&item, "after_rest", reform->after_rest_count > 0);
        mustache_push(root->arena, list, item.map);
    }
    mustache_set(root->arena, root->map, "reforms", list);
}

static void put_reform_plans(const struct filler *root)
{
    struct mustache_value *list = mustache_list(root->arena);
    for (size_t i = 0; i < root->composition->findings->capacitor_count; i++) {
        const struct capacitor *part = root->composition->findings->capacitors[i].part;
        struct reform_plan plan;
        if (!reform_planned(root->composition, i, &plan))
            continue;
        struct filler item = fill(root->composition);
        put(&item, "index", arena_print(root->arena, "%zu", i));
        put(&item, "ref", part->ref);
        put(&item, "marked", text_marking(root->composition, &part->marked));
        put(&item, "can",
            part->can == NOT_LISTED ? NULL : root->composition->job->cans[part->can].ref);
        put_number(&item, "end", plan.end_v, UNIT_VOLTAGE, 3);
        put_number(&item, "limiter", plan.limiter_ohm, UNIT_RESISTANCE, 2);
        put_number(&item, "limiter_power", plan.limiter_w, UNIT_POWER, 2);
        put_number(&item, "ceiling", root->composition->shop->policy.reform_current_a, UNIT_CURRENT,
                   2);
        mustache_push(root->arena, list, item.map);
    }
    mustache_set(root->arena, root->map, "reform_plans", list);
    put_flag(root, "any_reform_plan", list->count > 0);
}

/* ---- hazards named in the job choose their caution */

static bool mentions(const char *text, const char *word)
{
    utf8proc_uint8_t *folded = NULL;
    utf8proc_ssize_t length =
        utf8proc_map((const utf8proc_uint8_t *)text, 0, &folded,
                     UTF8PROC_NULLTERM | UTF8PROC_STABLE | UTF8PROC_CASEFOLD | UTF8PROC_COMPOSE);
    if (length == UTF8PROC_ERROR_NOMEM)
        memory_exhausted();
    bool found = length > 0 && strstr((const char *)folded, word) != NULL;
    free(folded);
    return found;
}

static void put_hazards(const struct filler *root)
{
    static const struct {
        const char *key, *words[3];
    } hazards[] = {
        {"asbestos", {"asbestos"}},
        {"pcb", {"pcb", "polychlorinated"}},
        {"selenium", {"selenium"}},
        {"radium", {"radium", "luminous", "radioactive"}},
        {"beryllia", {"beryllia", "beryllium"}},
    };
    const char *text = root->composition->job->hazards.text;
    struct filler map = fill(root->composition);
    for (size_t i = 0; text && i < sizeof hazards / sizeof *hazards; i++) {
        bool named = false;
        for (size_t j = 0; j < 3 && hazards[i].words[j]; j++)
            named |= mentions(text, hazards[i].words[j]);
        put_flag(&map, hazards[i].key, named);
    }
    put_map(root, "hazard", &map);
}

struct mustache_value *values_of(struct composition *composition)
{
    const struct findings *findings = composition->findings;
    struct filler root = fill(composition);
    mustache_set(root.arena, root.map, "term", words_terms(composition->say.words));
    put(&root, "job", composition->job->number);
    put(&root, "copy", phrase_in(&composition->say, "copy", copy_text(findings->copy)));
    put_flag(&root, "shop_copy", findings->copy == COPY_SHOP);
    put_flag(&root, "client_copy", findings->copy == COPY_CLIENT);
    put_flag(&root, "sale_copy", findings->copy == COPY_SALE);
    put_flag(&root, "in_progress", findings->in_progress);
    put(&root, "program", findings->program);
    put_count(&root, "capacitor_count", findings->capacitor_count);
    put_set(&root);
    put_shop(&root);
    put_people(&root);
    put_conditions(&root);
    put_since(&root);
    put_sections(&root);
    put_actions(&root);
    put_decision(&root);
    put_temperature(&root);
    put_stages(&root);
    put_reforms(&root);
    put_workings(&root);
    put_reform_plans(&root);
    put_hazards(&root);
    methods_values(composition, root.map);
    if (composition->kind == DOCUMENT_MANUAL)
        manual_values(composition, root.map);
    return root.map;
}
