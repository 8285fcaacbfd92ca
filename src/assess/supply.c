#include "assess/supply.h"

#include "assess/assessment.h"

#include <complex.h>
#include <math.h>

static const double two_pi = 6.283185307179586;
static const double ripple_full_wave = 1.7, ripple_half_wave = 2.7;

double supply_ripple(double current_a, double frequency_hz, double capacitance_f, double esr_ohm)
{
    return sqrt(2) * current_a * hypot(esr_ohm, 1 / (two_pi * frequency_hz * capacitance_f));
}

double supply_sawtooth(double current_a, double frequency_hz, double capacitance_f)
{
    return current_a / (frequency_hz * capacitance_f);
}

double supply_ripple_watts(double load_a, bool full_wave, double esr_ohm)
{
    double ripple_a = (full_wave ? ripple_full_wave : ripple_half_wave) * load_a;
    return ripple_a * ripple_a * esr_ohm;
}

bool supply_is_full_wave(const struct job *job)
{
    return job->set.full_wave_set ? job->set.full_wave : job->set.supply != SUPPLY_LIVE_CHASSIS;
}

double supply_section_share(const struct supply_section *section, double frequency_hz)
{
    double omega = two_pi * frequency_hz;
    double complex series = section->series_ohm + I * omega * section->series_h;
    double complex branch = section->esr_ohm - I / (omega * section->capacitance_f);
    double complex smoothed = 1 / (1 / branch + 1 / section->load_ohm);
    return cabs(smoothed / (series + smoothed));
}

/* ---- the job */

struct supply_case {
    const struct job *job;
    struct diagnostics *diagnostics;
};

/* Hz of the ripple; NaN: neither it nor the mains' frequency is given. */
static double ripple_frequency(const struct job *job, const struct capacitor *part)
{
    if (part->ripple.set)
        return part->ripple.value;
    if (!job->set.frequency.set)
        return NAN;
    return (supply_is_full_wave(job) ? 2 : 1) * job->set.frequency.value;
}

static struct hum unknown_hum(const struct quantity *measured)
{
    return (struct hum){.capacitance_f = NAN,
                        .esr_ohm = NAN,
                        .predicted_v = NAN,
                        .share = NAN,
                        .textbook_v = NAN,
                        .measured_v = measured->set ? measured->value : NAN};
}

/* What smooths in a phase: as found the part as measured, else marked; as left what was fitted. */
static void take_values(const struct job *job, const struct capacitor *part, bool left,
                        struct hum *hum)
{
    const struct marking *fitted = part_fitted(job, part);
    bool fresh = left && part_is_new(part_action(job, part), fitted);
    const struct quantity *value = fresh && fitted->value.set ? &fitted->value
                                   : part->measured.value.set ? &part->measured.value
                                                              : &part->marked.value;
    hum->capacitance_f = value->set && value->value > 0 ? value->value : NAN;
    hum->esr_ohm = fresh ? 0 : quantity_or(&part->measured.esr, 0);
}

static const struct winding *choke_of(const struct job *job, const struct capacitor *part)
{
    return part->feed.set && part->feed.winding != NOT_LISTED ? &job->windings[part->feed.winding]
                                                              : NULL;
}

static void predict(const struct supply_node *node, const struct capacitor *part,
                    const struct hum *before, struct hum *hum)
{
    if (!before) {
        hum->predicted_v =
            supply_ripple(node->current_a, node->frequency_hz, hum->capacitance_f, hum->esr_ohm);
        hum->textbook_v = supply_sawtooth(node->current_a, node->frequency_hz, hum->capacitance_f);
        return;
    }
    struct supply_section section = {.series_ohm = node->series_ohm,
                                     .series_h = node->series_h,
                                     .capacitance_f = hum->capacitance_f,
                                     .esr_ohm = hum->esr_ohm,
                                     .load_ohm = part->service.set && node->current_a > 0
                                                     ? part->service.value / node->current_a
                                                     : (double)INFINITY};
    hum->share = supply_section_share(&section, node->frequency_hz);
    hum->predicted_v = before->predicted_v * hum->share;
}

static const char *missing_key(const struct supply_node *node, const struct capacitor *part,
                               const struct supply_node *before)
{
    if (isnan(node->frequency_hz))
        return "frequency";
    if (isnan(node->found.capacitance_f) || isnan(node->left.capacitance_f))
        return "marked";
    if (part->place == PLACE_RESERVOIR)
        return isnan(node->current_a) ? "current" : NULL;
    if (!before)
        return "reservoir";
    return isnan(node->series_ohm) ? "feed" : NULL;
}

static double in_db(double left_v, double found_v)
{
    return left_v > 0 && found_v > 0 ? 20 * log10(left_v / found_v) : NAN;
}

static struct supply_node assess_node(const struct supply_case *given, size_t index,
                                      const struct supply_node *before)
{
    const struct job *job = given->job;
    const struct capacitor *part = &job->capacitors[index];
    struct supply_node node = {.capacitor = (int)index,
                               .frequency_hz = ripple_frequency(job, part),
                               .current_a = quantity_or(&part->current, NAN),
                               .series_ohm = NAN,
                               .series_h = 0,
                               .found = unknown_hum(&part->hum_found),
                               .left = unknown_hum(&part->hum_left)};
    double ohm;
    bool measured;
    if (part->feed.set && job_resistance(job, &part->feed, PHASE_FOUND, &ohm, &measured))
        node.series_ohm = ohm;
    const struct winding *choke = choke_of(job, part);
    if (choke && choke->inductance.set)
        node.series_h = choke->inductance.value;
    take_values(job, part, false, &node.found);
    take_values(job, part, true, &node.left);
    node.missing = missing_key(&node, part, before);
    if (!node.missing && before && !before->judged)
        node.missing = before->missing;
    node.judged = node.missing == NULL;
    node.why = node.judged ? WHY_NONE : WHY_MISSING_FACT;
    if (node.judged) {
        bool reservoir = part->place == PLACE_RESERVOIR;
        predict(&node, part, reservoir ? NULL : &before->found, &node.found);
        predict(&node, part, reservoir ? NULL : &before->left, &node.left);
    }
    node.predicted_db = in_db(node.left.predicted_v, node.found.predicted_v);
    node.measured_db = in_db(node.left.measured_v, node.found.measured_v);
    bool measured_hum = part->hum_found.set || part->hum_left.set;
    if (measured_hum && isnan(node.frequency_hz))
        diagnostic_add(given->diagnostics, &job->source,
                       part->hum_found.set ? part->hum_found.at : part->hum_left.at,
                       DIAGNOSTIC_RIPPLE_WITHOUT_FREQUENCY,
                       "give `frequency` of the set's mains, or `ripple` of the part",
                       "%s: hum was measured, but its frequency is not known", part->ref);
    return node;
}

const struct supply_node *supply_assess(const struct job *job, struct arena *arena,
                                        struct diagnostics *diagnostics, size_t *count)
{
    struct supply_case given = {job, diagnostics};
    struct supply_node *nodes = arena_array(arena, job->capacitor_count + 1, sizeof *nodes);
    *count = 0;
    for (int place = 0; place < 2; place++) /* the reservoir is before all others */
        for (size_t i = 0; i < job->capacitor_count; i++) {
            if (job->capacitors[i].place != (place ? PLACE_SMOOTHING : PLACE_RESERVOIR))
                continue;
            const struct supply_node *before = place && *count ? &nodes[*count - 1] : NULL;
            nodes[*count] = assess_node(&given, i, before);
            (*count)++;
        }
    return nodes;
}
