#include "assess/valve_law.h"

#include <math.h>

/* Where the anode takes less than its share: the knee of a screen valve in parts of the screen
   volts, and of a triode in volts. Below a fifth of the screen volts no split is claimed. */
static const double knee_of_screen = 0.1;
static const double triode_knee_v = 5;
static const double bottomed_of_screen = 0.2;
/* Near its cathode a screen takes next to nothing; the floor keeps ratio and knee finite. */
static const double least_screen_v = 0.5;

static const double grid_current_at_zero_a = 15e-6;
static const double grid_slope_v = 0.23;
static const double grid_linear_from_v = 0.5;

static bool given(double value)
{
    return isfinite(value) && value > 0;
}

/* 1 - exp(-volts/scale), from 0 at the cathode's volts to 1. */
static double knee(double volts, double scale_v)
{
    if (volts <= 0)
        return 0;
    double ratio = volts / scale_v;
    return ratio > 40 ? 1 : -expm1(-ratio); /* beyond 40 a double shows no difference */
}

static double exponent_m(enum valve_kind kind)
{
    switch (kind) {
    case VALVE_BEAM:
        return 1;
    case VALVE_OUTPUT_PENTODE:
        return 0.4;
    case VALVE_SMALL_PENTODE:
    case VALVE_REMOTE_PENTODE:
    case VALVE_TRIODE:
    case VALVE_POWER_TRIODE:
        return 0;
    }
    return 0;
}

static enum law_status fit_triode(const struct valve_row *row, struct valve_law *law)
{
    law->mu = given(row->mu) ? row->mu : row->gm_s * row->ra_ohm;
    if (!given(law->mu))
        return LAW_NO_GAIN;
    law->ik0_a = row->ia_a;
    law->d0_v = law->without_gm ? row->vg1_v + row->va_v / law->mu : 1.5 * row->ia_a / row->gm_s;
    return given(law->d0_v) ? LAW_OK : LAW_IMPOSSIBLE;
}

static enum law_status fit_screen_valve(const struct valve_row *row, struct valve_law *law)
{
    if (!given(row->vg2_v) || !given(row->ig2_a))
        return LAW_NO_CURRENT;
    law->vg20_v = row->vg2_v;
    law->q0 = row->ig2_a / row->ia_a;
    law->knee0 = knee(row->va_v, knee_of_screen * row->vg2_v);
    law->m = exponent_m(row->kind);
    law->ik0_a = row->ia_a + row->ig2_a;
    if (law->without_gm) {
        if (!given(row->mu12))
            return LAW_NO_GAIN;
        law->mu12 = row->mu12;
        law->d0_v = row->vg1_v + row->vg2_v / row->mu12;
        return given(law->d0_v) ? LAW_OK : LAW_IMPOSSIBLE;
    }
    law->d0_v = 1.5 * row->ia_a / row->gm_s;
    if (given(row->ra_ohm)) {
        /* What the share of the screen does not explain of the anode's own slope. */
        double shared_s = law->m * row->ia_a * law->q0 / (row->va_v * (1 + law->q0));
        law->ka = fmax(0, 1 / row->ra_ohm - shared_s) / row->gm_s;
    }
    law->mu12 = row->vg2_v / (law->d0_v - row->vg1_v - law->ka * row->va_v);
    if (!given(law->mu12) || !given(law->d0_v))
        return LAW_IMPOSSIBLE;
    double ratio = given(row->mu12) ? law->mu12 / row->mu12 : 1;
    return ratio < 0.8 || ratio > 1.1 ? LAW_WARN_MU12 : LAW_OK;
}

enum law_status valve_law_fit(const struct valve_row *row, struct valve_law *law)
{
    if (!given(row->ia_a) || !given(row->va_v) || !isfinite(row->vg1_v))
        return LAW_NO_CURRENT;
    struct valve_law fitted = {
        .triode = valve_kind_is_triode(row->kind),
        .without_gm = !given(row->gm_s),
        .va0_v = row->va_v,
        .vg10_v = row->vg1_v,
        .pa_max_w = row->pa_max_w,
        .pg2_max_w = row->pg2_max_w,
    };
    fitted.exponent = fitted.without_gm ? 1.3 : 1.5;
    enum law_status status =
        fitted.triode ? fit_triode(row, &fitted) : fit_screen_valve(row, &fitted);
    if (status == LAW_OK || status == LAW_WARN_MU12)
        *law = fitted;
    return status;
}

const struct valve_row *valve_row_nearest(const struct valve_row *rows, size_t count, double va_v,
                                          double vg2_v)
{
    const struct valve_row *nearest = NULL;
    double least = INFINITY;
    bool least_has_gm = false;
    for (size_t i = 0; i < count; i++) {
        double distance = fabs(log(rows[i].va_v / va_v));
        if (!valve_kind_is_triode(rows[i].kind) && given(rows[i].vg2_v))
            distance += fabs(log(rows[i].vg2_v / vg2_v));
        if (isnan(distance))
            distance = 1e9; /* nothing to compare by: any row rather than none */
        bool has_gm = given(rows[i].gm_s);
        if (!nearest || (has_gm && !least_has_gm) || (has_gm == least_has_gm && distance < least)) {
            nearest = &rows[i];
            least = distance;
            least_has_gm = has_gm;
        }
    }
    return nearest;
}

/* Cathode current at a drive in volts. */
static double space_current(const struct valve_law *law, double drive_v)
{
    if (!(drive_v > 0))
        return 0;
    double ratio = drive_v / law->d0_v;
    /* The ordinary row: a root is much cheaper than a power. */
    return law->ik0_a * (law->without_gm ? pow(ratio, law->exponent) : ratio * sqrt(ratio));
}

static double power(double base, double exponent)
{
    return exponent == 0 ? 1 : exponent == 1 ? base : pow(base, exponent);
}

static struct valve_currents screen_valve_currents(const struct valve_law *law, double vg1_v,
                                                   double vg2_v, double va_v)
{
    struct valve_currents currents = {.bottomed = va_v < bottomed_of_screen * vg2_v};
    currents.cathode_a =
        space_current(law, law->d0_v + (vg1_v - law->vg10_v) + (vg2_v - law->vg20_v) / law->mu12 +
                               law->ka * (va_v - law->va0_v));
    double screen_v = fmax(vg2_v, least_screen_v);
    double floored_v = fmax(va_v, bottomed_of_screen * screen_v);
    double share = law->q0 * power((screen_v / floored_v) / (law->vg20_v / law->va0_v), law->m);
    /* No further below the knee than the row itself: nothing is lost (and no exponential needed).
     */
    bool past_knee = va_v * law->vg20_v >= law->va0_v * screen_v;
    double taken = past_knee ? 1 : knee(va_v, knee_of_screen * screen_v) / law->knee0;
    currents.anode_a = currents.cathode_a * taken / (1 + share);
    currents.screen_a = currents.cathode_a - currents.anode_a;
    return currents;
}

struct valve_currents valve_law_currents(const struct valve_law *law, double vg1_v, double vg2_v,
                                         double va_v)
{
    if (!law->triode)
        return screen_valve_currents(law, vg1_v, vg2_v, va_v);
    double drive_v = law->d0_v + (vg1_v - law->vg10_v) + (va_v - law->va0_v) / law->mu;
    double current_a = space_current(law, drive_v) * knee(va_v, triode_knee_v);
    return (struct valve_currents){.cathode_a = current_a, .anode_a = current_a};
}

double valve_grid_current(double vgk_v)
{
    if (vgk_v <= grid_linear_from_v)
        return grid_current_at_zero_a * exp(vgk_v / grid_slope_v);
    double at_corner_a = grid_current_at_zero_a * exp(grid_linear_from_v / grid_slope_v);
    return at_corner_a * (1 + (vgk_v - grid_linear_from_v) / grid_slope_v);
}

/*
 * With u = ohm*i_g the drop in volts: emf - u = 0.23 V*ln(u/(ohm*15 uA)). In ln u that is convex
 * and rising, so Newton's steps close in from above after the first, from anywhere.
 */
double valve_grid_volts(double emf_v, double ohm)
{
    double drop_at_zero_v = ohm * grid_current_at_zero_a;
    if (ohm == 0 || (emf_v <= 0 && drop_at_zero_v * exp(emf_v / grid_slope_v) < 1e-14))
        return emf_v;
    double corner_a = valve_grid_current(grid_linear_from_v);
    if (emf_v - grid_linear_from_v >= ohm * corner_a) {
        double slope_s = corner_a / grid_slope_v;
        double over_v = (emf_v - grid_linear_from_v - ohm * corner_a) / (1 + ohm * slope_s);
        return grid_linear_from_v + over_v;
    }
    double ln_u = log(drop_at_zero_v) + fmin(emf_v, grid_linear_from_v) / grid_slope_v;
    if (emf_v > 0)
        ln_u = fmin(ln_u, log(emf_v + 1));
    for (int round = 0; round < 60; round++) {
        double u = exp(ln_u);
        double gap = u + grid_slope_v * (ln_u - log(drop_at_zero_v)) - emf_v;
        double step = gap / (u + grid_slope_v);
        ln_u -= step;
        if (fabs(step) < 1e-13)
            break;
    }
    return emf_v - exp(ln_u);
}
