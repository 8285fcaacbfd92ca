/* Current against time: soaking under voltage, and reforming step by step. */
#include "report/composition.h"

#include "assess/absorption.h"

#include <string.h>

enum { FIT_POINTS = 40 };

/* ---- soak curves */

static const struct reading *deciding_reading(const struct capacitor_findings *part)
{
    return part->deciding < 0 ? NULL : part->readings[part->deciding].reading;
}

/* In the run under voltage that decides, with a time and a current. */
static bool in_run(const struct capacitor_findings *part, size_t reading)
{
    const struct reading_findings *item = &part->readings[reading];
    const struct reading *deciding = deciding_reading(part);
    return deciding && item->reading->line == deciding->line &&
           item->reading->set_volts.value == deciding->set_volts.value && item->reading->time.set &&
           item->reading->time.value > 0 && isfinite(item->current_a) && item->current_a > 0;
}

static bool has_curve(const struct capacitor_findings *part)
{
    return part->absorption.status != ABSORPTION_NONE && deciding_reading(part);
}

bool has_soak_curves(const struct composition *composition)
{
    for (size_t i = 0; i < composition->findings->capacitor_count; i++)
        if (has_curve(&composition->findings->capacitors[i]))
            return true;
    return false;
}

static void fill_points(const struct composition *composition,
                        const struct capacitor_findings *part, struct curve *curve)
{
    curve->points = arena_array(composition->arena, part->reading_count, sizeof *curve->points);
    for (size_t i = 0; i < part->reading_count; i++)
        if (in_run(part, i))
            curve->points[curve->point_count++] = (struct curve_point){
                .x_s = part->readings[i].reading->time.value,
                .y = part->readings[i].current_a,
                .deciding = (int)i == part->deciding,
                .bound = part->readings[i].bound != BOUND_NONE,
            };
}

/* I_s + A*(t/60 s)^-n at evenly spaced log t. */
static void fill_fit(const struct composition *composition, const struct absorption *absorption,
                     struct curve *curve)
{
    curve->fit_from_s = curve->fit_to_s = NAN;
    if (absorption->status != ABSORPTION_RESOLVED || curve->point_count < 2)
        return;
    curve->fit_from_s = curve->points[0].x_s;
    curve->fit_to_s = curve->points[curve->point_count - 1].x_s;
    curve->fit_count = FIT_POINTS;
    curve->fit_y = arena_array(composition->arena, FIT_POINTS, sizeof *curve->fit_y);
    double step = log(curve->fit_to_s / curve->fit_from_s) / (FIT_POINTS - 1);
    for (size_t i = 0; i < FIT_POINTS; i++) {
        double time_s = curve->fit_from_s * exp(step * (double)i);
        curve->fit_y[i] = absorption->steady_a + absorption->a_a * pow(time_s / 60, -absorption->n);
    }
}

static const struct column_plan numbers_plan[] = {
    {"step", NULL, NULL, COLUMN_TEXT, 0, 1},
    {"volts_on_part", "V", NULL, COLUMN_NUMBER, 0, 1},
    {"time", NULL, NULL, COLUMN_NUMBER, 0, 1},
    {"current", "µA", NULL, COLUMN_NUMBER, 0, 1},
};

static struct table_builder numbers_begin(struct composition *composition, const char *id)
{
    return table_begin(composition, arena_print(composition->arena, "%s-numbers", id), numbers_plan,
                       sizeof numbers_plan / sizeof *numbers_plan);
}

static void add_number(struct table_builder *builder, const char *step, double volts, double time_s,
                       double current_a)
{
    const struct composition *composition = builder->composition;
    struct cell *cells = table_row(builder);
    cells[0].text = step;
    cells[1].figures = figures_plain(composition, volts, 1, volts < 100 ? 1 : 0);
    cells[2].figures = figures_unit(composition, time_s, UNIT_TIME, 3);
    cells[3].figures = figures_micro(composition, current_a, 3);
}

static void begin_curves(const struct composition *composition, struct curves *curves)
{
    curves->y_log = true;
    curves->y_scale = 1e-6;
    curves->y_unit = "µA";
    curves->limit = NAN;
    curves->limit_word = phrase(&composition->say, "plot.limit", NULL);
    curves->volts_word = phrase(&composition->say, "plot.volts", NULL);
}

static void set_limit(const struct composition *composition, struct curves *curves, double limit_a)
{
    if (!isfinite(limit_a) || limit_a <= 0)
        return;
    curves->limit = limit_a;
    curves->limit_text = text_micro(composition->arena, limit_a, 2);
}

static const char *fit_sentence(const struct composition *composition,
                                const struct absorption *absorption)
{
    const struct phrasing *say = &composition->say;
    if (absorption->status != ABSORPTION_RESOLVED)
        return phrase(say, "soak.not_resolved", NULL);
    double error_a = 2 * absorption->steady_error_a;
    struct figures steady = figures_scaled(composition->arena, absorption->steady_a, 1e-6, "µA",
                                           decimals_for(error_a, 1e-6, 1));
    return phrase(say, "soak.resolved", "steady", figures_text(composition->arena, &steady),
                  "error", text_micro(composition->arena, error_a, 1), NULL);
}

static void place_soak(struct composition *composition, size_t index)
{
    const struct capacitor_findings *part = &composition->findings->capacitors[index];
    const char *id = arena_print(composition->arena, "soak-%zu", index + 1);
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_PLOT, id);
    exhibit->plot.kind = PLOT_CURVES;
    struct curves *curves = &exhibit->plot.curves;
    begin_curves(composition, curves);
    set_limit(composition, curves, part->test_limit_a);
    struct curve_panel *panel = &curves->panels[0];
    curves->panel_count = 1;
    panel->curves = arena_array(composition->arena, 1, sizeof *panel->curves);
    panel->curve_count = 1;
    panel->x_log = true;
    struct curve *curve = panel->curves;
    fill_points(composition, part, curve);
    fill_fit(composition, &part->absorption, curve);
    struct table_builder numbers = numbers_begin(composition, id);
    for (size_t i = 0; i < curve->point_count; i++) {
        panel->x_max_s = fmax(panel->x_max_s, curve->points[i].x_s);
        add_number(&numbers, NULL, part->test_v, curve->points[i].x_s, curve->points[i].y);
    }
    curves->deciding_text = text_micro(composition->arena, part->test_leakage_a, 3);
    exhibit->plot.numbers = numbers.table;
    exhibit->plot.title = phrase(&composition->say, "soak.title", "ref", part->part->ref, NULL);
    exhibit->plot.caption = phrase(&composition->say, "caption.soak", "ref", part->part->ref,
                                   "volts", text_unit(composition, part->test_v, UNIT_VOLTAGE, 3),
                                   "fit", fit_sentence(composition, &part->absorption), NULL);
    exhibit->number = exhibit_number(composition, NUMBERED_FIGURE);
    exhibit_place(composition, exhibit);
}

void exhibit_soak_curves(struct composition *composition, size_t index)
{
    (void)index;
    for (size_t i = 0; i < composition->findings->capacitor_count; i++)
        if (has_curve(&composition->findings->capacitors[i]))
            place_soak(composition, i);
}

/* ---- reforming */

static double limiter_ohm(const struct composition *composition, const struct reform *reform)
{
    double ohm = 0;
    bool measured;
    if (reform->limiter.set &&
        job_resistance(composition->job, &reform->limiter, PHASE_LEFT, &ohm, &measured))
        return ohm;
    return 0;
}

static double volts_on_part(const struct reading *reading, double limiter, bool across_part)
{
    double volts =
        reading->set_volts.value - (across_part ? 0 : reading_current(reading) * limiter);
    return volts > 0 ? volts : 0;
}

/* One curve for each line of the log, set behind one another on the time axis when `chained`. */
static struct curve_panel panel_of(const struct composition *composition,
                                   const struct reading *readings, size_t count, bool chained)
{
    struct curve_panel panel = {
        .curves = arena_array(composition->arena, count + 1, sizeof *panel.curves)};
    double begun_s = 0, ended_s = 0;
    for (size_t i = 0; i < count; i++) {
        const struct reading *reading = &readings[i];
        double current = reading_current(reading);
        if (i == 0 || reading->line != readings[i - 1].line) {
            begun_s = chained ? ended_s : 0;
            struct curve *fresh = &panel.curves[panel.curve_count++];
            *fresh = (struct curve){.broken = true, .fit_from_s = NAN, .fit_to_s = NAN};
            fresh->points = arena_array(composition->arena, count - i, sizeof *fresh->points);
            fresh->label = arena_print(composition->arena, "%zu", panel.curve_count);
        }
        double at_s = begun_s + quantity_or(&reading->time, 0);
        ended_s = fmax(ended_s, at_s);
        struct curve *curve = &panel.curves[panel.curve_count - 1];
        if (isfinite(current) && current > 0)
            curve->points[curve->point_count++] =
                (struct curve_point){at_s, current, false, reading->value.bound != BOUND_NONE};
    }
    panel.x_max_s = ended_s;
    return panel;
}

/* The volts set in each step, for the lower axis and the words on it. */
static void add_step_volts(const struct composition *composition, const struct reading *readings,
                           size_t count, struct curve_panel *panel)
{
    panel->step_volts =
        arena_array(composition->arena, panel->curve_count + 1, sizeof *panel->step_volts);
    size_t step = 0;
    for (size_t i = 0; i < count; i++)
        if (i == 0 || readings[i].line != readings[i - 1].line)
            panel->step_volts[step++] = readings[i].set_volts.value;
}

static void add_numbers(struct table_builder *numbers, const struct reform *reform, double limiter)
{
    const struct composition *composition = numbers->composition;
    size_t step = 0;
    for (size_t i = 0; i < reform->log_count; i++) {
        const struct reading *reading = &reform->log[i];
        if (i == 0 || reading->line != reform->log[i - 1].line)
            step++;
        add_number(numbers, arena_print(composition->arena, "%zu", step),
                   volts_on_part(reading, limiter, reform->across_part),
                   quantity_or(&reading->time, NAN), reading_current(reading));
    }
    for (size_t i = 0; i < reform->after_rest_count; i++) {
        const struct reading *reading = &reform->after_rest[i];
        add_number(numbers, phrase(&composition->say, "reform.after_rest_short", NULL),
                   volts_on_part(reading, limiter, reform->across_part),
                   quantity_or(&reading->time, NAN), reading_current(reading));
    }
}

static void add_after_rest(const struct composition *composition, const struct reform *reform,
                           struct curves *curves)
{
    struct curve_panel *panel = &curves->panels[curves->panel_count++];
    *panel = panel_of(composition, reform->after_rest, reform->after_rest_count, false);
    add_step_volts(composition, reform->after_rest, reform->after_rest_count, panel);
    panel->title = phrase(&composition->say, "reform.after_rest", "rest",
                          text_quantity(composition, &reform->rest), NULL);
    for (size_t i = 0; i < panel->curve_count; i++)
        panel->curves[i].label = NULL;
    struct curve *last = &panel->curves[panel->curve_count - 1];
    if (last->point_count == 0)
        return;
    struct curve_point *decides = &last->points[last->point_count - 1];
    decides->deciding = true;
    curves->deciding_text = text_micro(composition->arena, decides->y, 2);
}

/* The better law of each step that has one, over the readings it was fitted to. */
static void add_fits(const struct composition *composition, const struct reform_findings *found,
                     struct curve_panel *panel)
{
    for (size_t i = 0; i < found->step_count && i < panel->curve_count; i++) {
        const struct reform_step *step = &found->steps[i];
        struct curve *curve = &panel->curves[i];
        if (step->decay.better < 0 || curve->point_count < 2)
            continue;
        const struct decay *decay = &step->decay.laws[step->decay.better];
        double from_s = curve->points[0].x_s, to_s = curve->points[curve->point_count - 1].x_s;
        double begun_s = to_s - step->duration_s;
        curve->fit_from_s = from_s;
        curve->fit_to_s = to_s;
        curve->fit_count = FIT_POINTS;
        curve->fit_y = arena_array(composition->arena, FIT_POINTS, sizeof *curve->fit_y);
        for (size_t k = 0; k < FIT_POINTS; k++)
            curve->fit_y[k] = decay_current(
                decay, from_s + (to_s - from_s) * (double)k / (FIT_POINTS - 1) - begun_s);
    }
}

void exhibit_reform_curves(struct composition *composition, size_t index)
{
    if (index >= composition->job->reform_count)
        return;
    const struct reform *reform = &composition->job->reforms[index];
    if (reform->log_count == 0 || reform->capacitor < 0)
        return;
    const struct capacitor_findings *part = &composition->findings->capacitors[reform->capacitor];
    const char *id = arena_print(composition->arena, "reform-%zu", index + 1);
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_PLOT, id);
    exhibit->plot.kind = PLOT_CURVES;
    struct curves *curves = &exhibit->plot.curves;
    double limiter = limiter_ohm(composition, reform);
    begin_curves(composition, curves);
    set_limit(composition, curves,
              isfinite(part->test_limit_a) ? part->test_limit_a : part->bench_limit_a);
    curves->panels[curves->panel_count++] =
        panel_of(composition, reform->log, reform->log_count, true);
    add_step_volts(composition, reform->log, reform->log_count, &curves->panels[0]);
    if (composition->findings->bench.reforms)
        add_fits(composition, &composition->findings->bench.reforms[index], &curves->panels[0]);
    if (reform->after_rest_count)
        add_after_rest(composition, reform, curves);
    struct table_builder numbers = numbers_begin(composition, id);
    add_numbers(&numbers, reform, limiter);
    exhibit->plot.numbers = numbers.table;
    exhibit->plot.title = phrase(&composition->say, "reform.title", "ref", part->part->ref, NULL);
    exhibit->plot.caption =
        phrase(&composition->say, "caption.reform", "ref", part->part->ref, "marked",
               text_marking(composition, &part->part->marked), "limiter",
               limiter > 0 ? text_unit(composition, limiter, UNIT_RESISTANCE, 3) : NULL, "date",
               date_text(&reform->date), NULL);
    exhibit->number = exhibit_number(composition, NUMBERED_FIGURE);
    exhibit_place(composition, exhibit);
}
