#include "assess/absorption.h"

#include "assess/numeric.h"
#include "base/memory.h"

#include <math.h>
#include <stdlib.h>

static const double power_time_s = 60;
static const double n_low = 0.20, n_high = 1.30, n_step = 0.01;
/* The time constant is looked for well beyond the readings on both sides. */
static const double tau_of_first = 0.3, tau_of_last = 10;
enum { TAU_STEPS = 120 };
static const double least_span = 10;
static const double least_sigma_a = 1e-15;

double absorption_sigma(double current_a, double repeatability_share, double resolution_a)
{
    return fmax(hypot(repeatability_share * current_a, resolution_a / sqrt(12)), least_sigma_a);
}

/* The dying part at A = 1. */
static double decay_basis(enum decay_law law, double time_s, double shape)
{
    switch (law) {
    case DECAY_POWER:
        return pow(time_s / power_time_s, -shape);
    case DECAY_EXPONENTIAL:
        return exp(-time_s / shape);
    case DECAY_COUNT:
        break;
    }
    return NAN;
}

/* Readings with what every trial of a shape needs again. */
struct series {
    const struct absorption_reading *readings;
    size_t count;
    double *weights, *basis;
    double
        *steps; /* from one place of the grid of n to the next the basis is multiplied by these */
};

static void set_basis(const struct decay *decay, const struct series *series)
{
    for (size_t i = 0; i < series->count; i++)
        series->basis[i] = decay_basis(decay->law, series->readings[i].time_s, decay->shape);
}

/* I_s and A for the basis of a given shape: a weighted straight line. false: the readings do not
   tell them apart. */
static bool fit_line(struct decay *decay, const struct series *series)
{
    double w = 0, wx = 0, wy = 0, wxx = 0, wxy = 0;
    for (size_t i = 0; i < series->count; i++) {
        w += series->weights[i];
        wx += series->weights[i] * series->basis[i];
        wy += series->weights[i] * series->readings[i].current_a;
    }
    double mean_x = wx / w, mean_y = wy / w;
    for (size_t i = 0; i < series->count; i++) {
        double x = series->basis[i] - mean_x;
        wxx += series->weights[i] * x * x;
        wxy += series->weights[i] * x * (series->readings[i].current_a - mean_y);
    }
    if (!(wxx > 0) || !isfinite(wxx))
        return false;
    decay->amplitude_a = wxy / wxx;
    decay->steady_a = (wy - decay->amplitude_a * wx) / w;
    decay->chi2 = 0;
    for (size_t i = 0; i < series->count; i++) {
        double r =
            series->readings[i].current_a - decay->steady_a - decay->amplitude_a * series->basis[i];
        decay->chi2 += series->weights[i] * r * r;
    }
    return isfinite(decay->chi2);
}

/* The places of the grid: even steps of n, or equal ratios of tau. */
static size_t grid_size(enum decay_law law)
{
    switch (law) {
    case DECAY_POWER:
        return (size_t)lround((n_high - n_low) / n_step) + 1;
    case DECAY_EXPONENTIAL:
        return TAU_STEPS + 1;
    case DECAY_COUNT:
        break;
    }
    return 0;
}

static double grid_shape(enum decay_law law, size_t place, double first_s, double last_s)
{
    double fraction = (double)place / (double)(grid_size(law) - 1);
    if (law == DECAY_POWER)
        return n_low + fraction * (n_high - n_low);
    double low = tau_of_first * first_s, high = tau_of_last * last_s;
    return low * pow(high / low, fraction);
}

/* Parameters of the refined fit: I_s and A in units of the largest current, ln of the shape. */
struct refined_model {
    enum decay_law law;
};

static double refined_current(double time_s, const double *parameters, const void *context)
{
    const struct refined_model *model = context;
    return parameters[0] + parameters[1] * decay_basis(model->law, time_s, exp(parameters[2]));
}

/* From the best place of the grid to the least chi^2, for the shape between its places and for the
   errors. false: the grid's figures stand, without an error. */
static bool refine(struct decay *decay, const struct absorption_reading *readings, size_t count)
{
    double unit = 0;
    for (size_t i = 0; i < count; i++)
        unit = fmax(unit, fabs(readings[i].current_a));
    if (unit == 0)
        return false;
    double *space = memory_get_cleared(3 * count, sizeof *space);
    double *times = space, *currents = space + count, *sigmas = space + 2 * count;
    for (size_t i = 0; i < count; i++) {
        times[i] = readings[i].time_s;
        currents[i] = readings[i].current_a / unit;
        sigmas[i] = readings[i].sigma_a / unit;
    }
    struct refined_model model = {decay->law};
    double start[] = {decay->steady_a / unit, decay->amplitude_a / unit, log(decay->shape)};
    struct numeric_fit fit;
    enum numeric_status status = numeric_least_squares(refined_current, &model, times, currents,
                                                       sigmas, count, start, 3, &fit);
    free(space);
    if (status != NUMERIC_OK || fit.sum_of_squares > decay->chi2 * (1 + 1e-9) + 1e-12)
        return false;
    decay->steady_a = fit.parameters[0] * unit;
    decay->amplitude_a = fit.parameters[1] * unit;
    decay->shape = exp(fit.parameters[2]);
    decay->chi2 = fit.sum_of_squares;
    decay->steady_error_a =
        fit.standard_errors[0] * unit * fmax(1, sqrt(fit.sum_of_squares / (double)fit.freedom));
    return true;
}

/* The place of the grid with the least chi^2; *best is set when any fits. */
static size_t search_grid(enum decay_law law, const struct series *series, struct decay *best)
{
    double first_s = series->readings[0].time_s;
    double last_s = series->readings[series->count - 1].time_s;
    size_t best_place = 0;
    for (size_t i = 0; law == DECAY_POWER && i < series->count; i++)
        series->steps[i] = pow(series->readings[i].time_s / power_time_s, -n_step);
    for (size_t place = 0; place < grid_size(law); place++) {
        struct decay trial = {.fitted = true,
                              .law = law,
                              .freedom = series->count - 3,
                              .steady_error_a = NAN,
                              .shape = grid_shape(law, place, first_s, last_s)};
        if (law == DECAY_POWER && place > 0)
            for (size_t i = 0; i < series->count; i++)
                series->basis[i] *= series->steps[i];
        else
            set_basis(&trial, series);
        if (fit_line(&trial, series) && trial.chi2 < best->chi2) {
            *best = trial;
            best_place = place;
        }
    }
    return best_place;
}

struct decay decay_fit(enum decay_law law, const struct absorption_reading *readings, size_t count)
{
    struct decay best = {.law = law, .chi2 = INFINITY};
    if (count <= 3)
        return best;
    double *space = memory_get_cleared(3 * count, sizeof *space);
    struct series series = {readings, count, space, space + count, space + 2 * count};
    for (size_t i = 0; i < count; i++)
        series.weights[i] = 1 / (readings[i].sigma_a * readings[i].sigma_a);
    size_t place = search_grid(law, &series, &best);
    free(space);
    if (!best.fitted)
        return best;
    size_t last = grid_size(law) - 1;
    double first_s = readings[0].time_s, last_s = readings[count - 1].time_s;
    best.at_end = place == 0 || place == last;
    if (!best.at_end) {
        refine(&best, readings, count);
        best.at_end = best.shape <= grid_shape(law, 0, first_s, last_s) ||
                      best.shape >= grid_shape(law, last, first_s, last_s);
    }
    return best;
}

double decay_current(const struct decay *decay, double time_s)
{
    return decay->steady_a + decay->amplitude_a * decay_basis(decay->law, time_s, decay->shape);
}

double decay_time_to(const struct decay *decay, double limit_a, double steady_shift_a)
{
    double room_a = limit_a - (decay->steady_a + steady_shift_a);
    if (!(room_a > 0))
        return INFINITY;
    if (decay->amplitude_a <= 0)
        return 0;
    switch (decay->law) {
    case DECAY_POWER:
        return power_time_s * pow(decay->amplitude_a / room_a, 1 / decay->shape);
    case DECAY_EXPONENTIAL:
        return fmax(0, decay->shape * log(decay->amplitude_a / room_a));
    case DECAY_COUNT:
        break;
    }
    return NAN;
}

static bool resolved(const struct decay *decay, double last_a)
{
    double s = decay->steady_error_a;
    return decay->amplitude_a > 0 && !decay->at_end && isfinite(s) && decay->steady_a - 2 * s > 0 &&
           numeric_t95((double)decay->freedom) * s <= (last_a - decay->steady_a) / 2 &&
           decay->chi2 <= numeric_chi2_quantile(0.99, decay->freedom);
}

struct absorption absorption_fit(const struct absorption_reading *readings, size_t count,
                                 double limit_a)
{
    struct absorption absorption = {.status = ABSORPTION_NONE,
                                    .reading_count = count,
                                    .steady_a = NAN,
                                    .steady_error_a = NAN,
                                    .a_a = NAN,
                                    .n = NAN,
                                    .chi2 = NAN,
                                    .wait_until_s = NAN};
    if (count < ABSORPTION_READINGS_MIN ||
        !(readings[count - 1].time_s / readings[0].time_s >= least_span))
        return absorption;
    struct decay decay = decay_fit(DECAY_POWER, readings, count);
    if (!decay.fitted)
        return absorption;
    double last_a = readings[count - 1].current_a;
    absorption.status = resolved(&decay, last_a) ? ABSORPTION_RESOLVED : ABSORPTION_NOT_RESOLVED;
    absorption.steady_a = decay.steady_a;
    absorption.steady_error_a = decay.steady_error_a;
    absorption.a_a = decay.amplitude_a;
    absorption.n = decay.shape;
    absorption.chi2 = decay.chi2;
    absorption.freedom = decay.freedom;
    if (absorption.status == ABSORPTION_RESOLVED && limit_a > decay.steady_a && last_a > limit_a)
        absorption.wait_until_s = decay_time_to(&decay, limit_a, 0);
    return absorption;
}

/* The law with the smaller chi^2, unless the readings hardly tell them apart: then the higher
   plateau, the more cautious promise. */
static void choose_law(struct decay_comparison *comparison, size_t count)
{
    const struct decay *power = &comparison->laws[DECAY_POWER];
    const struct decay *exponential = &comparison->laws[DECAY_EXPONENTIAL];
    if (!exponential->fitted || !power->fitted) {
        comparison->better = power->fitted         ? DECAY_POWER
                             : exponential->fitted ? DECAY_EXPONENTIAL
                                                   : -1;
        comparison->preferred = false;
        return;
    }
    double smaller = fmin(power->chi2, exponential->chi2);
    double larger = fmax(power->chi2, exponential->chi2);
    comparison->preferred = larger > smaller * exp(4 / (double)count);
    bool take_power = comparison->preferred ? power->chi2 < exponential->chi2
                                            : power->steady_a >= exponential->steady_a;
    comparison->better = take_power ? DECAY_POWER : DECAY_EXPONENTIAL;
}

struct decay_comparison decay_compare(const struct absorption_reading *readings, size_t count,
                                      double limit_a)
{
    struct decay_comparison c = {.better = -1,
                                 .to_limit_s = NAN,
                                 .to_limit_early_s = NAN,
                                 .to_limit_late_s = NAN,
                                 .horizon_s = NAN};
    if (count < ABSORPTION_READINGS_MIN)
        return c;
    c.horizon_s = 10 * readings[count - 1].time_s;
    c.laws[DECAY_POWER] = decay_fit(DECAY_POWER, readings, count);
    if (count >= DECAY_COMPARE_MIN)
        c.laws[DECAY_EXPONENTIAL] = decay_fit(DECAY_EXPONENTIAL, readings, count);
    choose_law(&c, count);
    if (c.better < 0 || isnan(limit_a))
        return c;
    const struct decay *decay = &c.laws[c.better];
    c.to_limit_s = decay_time_to(decay, limit_a, 0);
    double shift_a = numeric_t95((double)decay->freedom) * decay->steady_error_a;
    c.to_limit_early_s = isnan(shift_a) ? NAN : decay_time_to(decay, limit_a, -shift_a);
    c.to_limit_late_s = isnan(shift_a) ? INFINITY : decay_time_to(decay, limit_a, shift_a);
    return c;
}
