/* All capacitors at a glance: leakage over each part's own limit. */
#include "report/composition.h"

static bool has_ratio(const struct capacitor_findings *part)
{
    return part->deciding >= 0 && !part->no_reading_passes && isfinite(part->test_leakage_a) &&
           isfinite(part->test_limit_a) && part->test_limit_a > 0;
}

static const char *outcome_text_of(const struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    enum action done = capacitor_done(composition, index);
    const char *words[] = {
        phrase_in(&composition->say, "outcome", outcome_text(part->outcome)),
        done == DONE_OPEN ? NULL : phrase_in(&composition->say, "done", action_text(done)),
    };
    return text_join(composition->arena, ", ", words, 2);
}

static void set_ratio(const struct composition *composition, const struct capacitor_findings *part,
                      struct glance_row *row)
{
    double limit = part->test_limit_a;
    double band = composition->shop->policy.guard_band * part->test_uncertainty_a / limit;
    row->ratio = part->test_leakage_a / limit;
    row->at_most = part->test_bound == BOUND_UNDER;
    row->at_least = part->test_bound == BOUND_OVER;
    if (band > 0) {
        row->band_low = band < 1 ? 1 - band : 0;
        row->band_high = 1 + band;
    }
    if (part->state == STATE_REFORMED && isfinite(part->found_leakage_a) && part->found_limit_a > 0)
        row->found_ratio = part->found_leakage_a / part->found_limit_a;
}

static void add_row(const struct composition *composition, size_t index, struct glance_row *row)
{
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    *row = (struct glance_row){
        .place = phrase_in(&composition->say, "place", place_text(part->part->place)),
        .ref = part->part->ref,
        .ratio = NAN,
        .band_low = NAN,
        .band_high = NAN,
        .found_ratio = NAN,
        .mark = mark_of(part->outcome),
        .outcome = outcome_text_of(composition, index),
        .outcome_narrow = phrase_in(&composition->say, "outcome", outcome_text(part->outcome)),
        .strong = part->outcome == OUTCOME_FAIL,
    };
    if (has_ratio(part))
        set_ratio(composition, part, row);
}

void exhibit_glance(struct composition *composition, size_t index)
{
    (void)index;
    const struct phrasing *say = &composition->say;
    size_t count = composition->findings->capacitor_count;
    if (count == 0)
        return;
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_PLOT, "glance");
    exhibit->plot.kind = PLOT_GLANCE;
    struct glance *glance = &exhibit->plot.glance;
    glance->row_count = count;
    glance->rows = arena_array(composition->arena, count, sizeof *glance->rows);
    const size_t *order = capacitors_by_place(composition);
    for (size_t i = 0; i < count; i++)
        add_row(composition, order[i], &glance->rows[i]);
    glance->axis_text = phrase(say, "glance.axis", NULL);
    glance->limit_word = phrase(say, "plot.limit", NULL);
    glance->no_ratio_word = phrase(say, "glance.no_ratio", NULL);
    glance->times_sign = "×";
    exhibit->plot.title = phrase(say, "glance.title", NULL);
    exhibit->plot.caption = phrase(say, "glance.caption", NULL);
    exhibit->number = exhibit_number(composition, NUMBERED_FIGURE);
    exhibit_place(composition, exhibit);
}
