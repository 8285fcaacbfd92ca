#include "assess/soak.h"

#include "assess/temperature.h"

#include <math.h>

static const double least_s = 15, least_electrolytic_s = 60;
static const double trend_share = 0.10;

double soak_least_s(const struct soak *soak)
{
    double floor_s = soak->electrolytic ? least_electrolytic_s : least_s;
    if (isnan(soak->capacitance_f))
        return floor_s;
    double time_s = 0;
    if (soak->series_ohm > 0 && soak->limit_a > 0) {
        double tau_s = soak->series_ohm * soak->capacitance_f;
        time_s = tau_s * fmax(0, log(soak->set_v / (0.1 * soak->limit_a * soak->series_ohm)));
    }
    if (soak->supply_current_a > 0)
        time_s += soak->capacitance_f * soak->set_v / soak->supply_current_a;
    return fmax(floor_s, time_s);
}

double soak_capacitance(const struct capacitor *part)
{
    double electrolytic = dielectric_is_electrolytic(part->type) ? 2 : 1;
    if (part->measured.value.set)
        return part->measured.value.value * electrolytic;
    if (!part->marked.value.set)
        return NAN;
    double above = part->marked.tolerance_set ? part->marked.tolerance_high_percent / 100 : 0;
    return part->marked.value.value * (1 + above) * electrolytic;
}

enum trend soak_trend(const struct reading_findings *readings, size_t count)
{
    if (count < 2)
        return TREND_UNKNOWN;
    const struct reading_findings *last = &readings[count - 1], *least = readings, *most = readings;
    for (size_t i = 0; i < count; i++) {
        if (readings[i].bound != BOUND_NONE)
            return TREND_UNKNOWN;
        if (readings[i].current_a < least->current_a)
            least = &readings[i];
        if (readings[i].current_a > most->current_a)
            most = &readings[i];
    }
    double rise = last->current_a - least->current_a, fall = most->current_a - last->current_a;
    double noise_rise = 2 * hypot(last->repeatability_a, least->repeatability_a);
    double noise_fall = 2 * hypot(last->repeatability_a, most->repeatability_a);
    if (rise > noise_rise && rise > trend_share * least->current_a)
        return TREND_RISING;
    if (fall > noise_fall && fall > trend_share * last->current_a)
        return TREND_FALLING;
    return TREND_LEVEL;
}
