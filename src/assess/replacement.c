#include "assess/replacement.h"

#include "assess/assessment.h"
#include "assess/held.h"
#include "assess/mains.h"
#include "assess/resistor.h"
#include "assess/temperature.h"

#include <math.h>

static const double pulse_times_peak = 2, plain_tolerance = 20;
/* Peak of the secondary with the mains a tenth high. */
static const double no_load_rise = 1.414 * 1.1;

struct replacement_case {
    const struct findings *findings;
    const struct policy *policy;
    struct replacement_findings *found;
};

static void check(const struct replacement_case *given, enum replacement_check which,
                  struct held held)
{
    struct replacement_findings *found = given->found;
    held.uncertainty = 0; /* markings, not measurements */
    if (held.outcome != OUTCOME_FAIL && held.outcome != OUTCOME_PASS)
        held_judge(&held, given->policy, BOUND_NONE);
    found->checks[which] = held;
    found->checked[which] = true;
    found->outcome = held_worse(found->outcome, held.outcome);
}

static struct held at_least(double value, double low, enum unit unit, enum source_key source)
{
    return (struct held){.value = value,
                         .low = low,
                         .high = NAN,
                         .unit = unit,
                         .outcome = OUTCOME_NOT_JUDGED,
                         .source = source};
}

/* ---- value */

static void check_value(const struct replacement_case *given, const struct marking *marked,
                        const struct marking *fitted, double low_percent, double high_percent)
{
    if (!marked->value.set || !fitted->value.set || !(marked->value.value > 0))
        return;
    double value = fitted->value.value;
    if (fitted->class_count == 2) /* two in series */
        value /= 2;
    check(
        given, REPLACEMENT_VALUE,
        (struct held){.value = 100 * (value / marked->value.value - 1),
                      .low = marked->tolerance_set ? marked->tolerance_low_percent : low_percent,
                      .high = marked->tolerance_set ? marked->tolerance_high_percent : high_percent,
                      .unit = UNIT_PERCENT,
                      .outcome = OUTCOME_NOT_JUDGED,
                      .source = marked->tolerance_set ? SOURCE_MARKED_TOLERANCE
                                                      : SOURCE_CAPACITOR_TOLERANCE});
}

/* ---- ratings */

static void check_ratings(const struct replacement_case *given,
                          const struct capacitor_findings *part, const struct marking *fitted)
{
    const struct job *job = given->findings->job;
    const struct capacitor *capacitor = part->part;
    if (place_is_mains(capacitor->place)) {
        if (job->set.mains.set && fitted->rated.set)
            check(given, REPLACEMENT_AC,
                  at_least(fitted->rated_ac || fitted->safety_class != CLASS_NONE
                               ? fitted->rated.value
                               : 0,
                           given->policy->mains_rise * job->set.mains.value, UNIT_VOLTAGE,
                           SOURCE_POLICY));
        bool borne = mains_class_borne(job, capacitor->place, fitted);
        struct held class = held_unknown(UNIT_NONE, WHY_NONE, NULL);
        class.outcome = borne ? OUTCOME_PASS : OUTCOME_FAIL;
        class.source = SOURCE_SAFETY_CLASS;
        check(given, REPLACEMENT_CLASS, class);
        return;
    }
    if (!fitted->rated.set)
        return;
    if (capacitor->pulse && capacitor->pulse_peak.set)
        check(given, REPLACEMENT_PULSE,
              at_least(fitted->rated.value, pulse_times_peak * capacitor->pulse_peak.value,
                       UNIT_VOLTAGE, SOURCE_POLICY));
    if (part->service_v > 0)
        check(given, REPLACEMENT_RATING,
              at_least(fitted->rated.value, part->service_v, UNIT_VOLTAGE, SOURCE_MARKED_RATING));
    const struct quantity *secondary = &job->set.ht_secondary;
    if ((capacitor->place == PLACE_RESERVOIR || capacitor->place == PLACE_SMOOTHING) &&
        secondary->set)
        check(given, REPLACEMENT_NO_LOAD,
              at_least(fitted->rated.value, no_load_rise * secondary->value, UNIT_VOLTAGE,
                       SOURCE_NO_LOAD));
}

/* ---- the old shell */

/* The most by which a measure of the new part exceeds the old one's, m; negative: it fits. */
static double over_shell(const struct dimensions *shell, const struct dimensions *part)
{
    double over = part->length_m - shell->length_m;
    if (part->diameter_m > 0 && shell->diameter_m > 0)
        return fmax(over, part->diameter_m - shell->diameter_m);
    if (part->diameter_m > 0)
        return fmax(over, part->diameter_m - fmin(shell->width_m, shell->height_m));
    if (shell->diameter_m > 0) /* a block in a tube: its diagonal */
        return fmax(over, hypot(part->width_m, part->height_m) - shell->diameter_m);
    return fmax(over, fmax(part->width_m - shell->width_m, part->height_m - shell->height_m));
}

static void check_shell(const struct replacement_case *given, const struct capacitor *part,
                        const struct marking *fitted)
{
    if (!part->case_size.set || !fitted->size.set)
        return;
    check(given, REPLACEMENT_SHELL,
          (struct held){.value = over_shell(&part->case_size, &fitted->size),
                        .low = NAN,
                        .high = 0,
                        .unit = UNIT_LENGTH,
                        .outcome = OUTCOME_NOT_JUDGED,
                        .source = SOURCE_JOB});
}

/* ---- all */

static void warn_unfit(const struct findings *findings, const struct replacement_findings *found,
                       struct position at, struct diagnostics *diagnostics)
{
    static const struct {
        enum replacement_check check;
        const char *text;
    } told[] = {
        {REPLACEMENT_RATING, "%s: what was fitted is rated %g V, its place sees up to %.0f V"},
        {REPLACEMENT_NO_LOAD,
         "%s: what was fitted is rated %g V, at switch-on it sees up to %.0f V"},
        {REPLACEMENT_AC, "%s: what was fitted is rated %g V a.c., its place needs %.0f V"},
        {REPLACEMENT_PULSE, "%s: what was fitted is rated %g V, its place needs %.0f V for pulses"},
        {REPLACEMENT_WATTS, "%s: what was fitted is rated %g W, the original %g W"},
    };
    bool without_class = found->checked[REPLACEMENT_CLASS] &&
                         found->checks[REPLACEMENT_CLASS].outcome == OUTCOME_FAIL;
    if (without_class)
        diagnostic_add(diagnostics, &findings->job->source, at, DIAGNOSTIC_REPLACEMENT_UNFIT,
                       "if it has one, write class and volts: ceramic 2.2 nF Y1 300 V",
                       "%s: what was fitted does not bear the class that its place demands",
                       found->ref);
    for (size_t i = 0; i < sizeof told / sizeof *told; i++) {
        const struct held *held = &found->checks[told[i].check];
        if (!found->checked[told[i].check] || held->outcome != OUTCOME_FAIL)
            continue;
        if (told[i].check == REPLACEMENT_AC && without_class) /* which brings its a.c. volts */
            continue;
        diagnostic_add(diagnostics, &findings->job->source, at, DIAGNOSTIC_REPLACEMENT_UNFIT, NULL,
                       told[i].text, found->ref, held->value, held->low);
    }
}

static void assess_capacitor(const struct replacement_case *given,
                             const struct capacitor_findings *part, const struct marking *fitted)
{
    bool electrolytic = dielectric_is_electrolytic(part->part->type);
    /* at the mains a smaller value than the original may be what the touch current asks for */
    struct marking marked = part->part->marked;
    if (place_is_mains(part->part->place))
        marked.tolerance_low_percent = -100;
    check_value(given, &marked, fitted, place_is_mains(part->part->place) ? -100 : -plain_tolerance,
                electrolytic ? 100 : plain_tolerance);
    check_ratings(given, part, fitted);
    check_shell(given, part->part, fitted);
}

static void assess_resistor(const struct replacement_case *given, const struct resistor *part)
{
    check_value(given, &part->marked, &part->fitted, -RESISTOR_TOLERANCE_PERCENT,
                RESISTOR_TOLERANCE_PERCENT);
    if (part->marked.rated.set && part->fitted.rated.set)
        check(given, REPLACEMENT_WATTS,
              at_least(part->fitted.rated.value, part->marked.rated.value, UNIT_POWER,
                       SOURCE_MARKED_RATING));
}

const struct replacement_findings *replacements_assess(const struct findings *findings,
                                                       struct arena *arena,
                                                       struct diagnostics *diagnostics,
                                                       size_t *count)
{
    const struct job *job = findings->job;
    struct replacement_findings *all =
        arena_array(arena, job->capacitor_count + job->resistor_count + 1, sizeof *all);
    *count = 0;
    for (size_t i = 0; i < job->capacitor_count + job->resistor_count; i++) {
        bool is_capacitor = i < job->capacitor_count;
        size_t resistor = i - job->capacitor_count;
        const struct capacitor *part = is_capacitor ? &job->capacitors[i] : NULL;
        const struct marking *fitted =
            is_capacitor ? part_fitted(job, part) : &job->resistors[resistor].fitted;
        enum action done = is_capacitor ? part_action(job, part) : job->resistors[resistor].done;
        if (!fitted->set || !part_is_new(done, fitted))
            continue;
        struct replacement_findings *found = &all[(*count)++];
        *found = (struct replacement_findings){
            .ref = is_capacitor ? part->ref : job->resistors[resistor].ref,
            .capacitor = is_capacitor ? (int)i : NOT_LISTED,
            .resistor = is_capacitor ? NOT_LISTED : (int)resistor,
            .outcome = OUTCOME_PASS};
        struct replacement_case given = {findings, &findings->shop->policy, found};
        if (is_capacitor)
            assess_capacitor(&given, &findings->capacitors[i], fitted);
        else
            assess_resistor(&given, &job->resistors[resistor]);
        warn_unfit(findings, found, fitted->at, diagnostics);
    }
    return all;
}
