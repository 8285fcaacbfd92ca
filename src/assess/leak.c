#include "assess/leak.h"

#include "assess/temperature.h"
#include "assess/uncertainty.h"
#include "assess/voltage.h"

#include <math.h>

enum { INPUT_CURRENT, INPUT_STEP, INPUT_VOLTS, INPUT_SERIES, INPUT_TEMPERATURE, INPUT_COUNT };

/* A temperature is known to +-1 K, a rectangle: the bench's, or that of a part read hot. */
static const double temperature_half_width_k = 1;

/* Read hot enough: no factor, and no temperature in the result. */
static bool replaces_factor(const struct leak_case *given)
{
    return given->reading->reading->hot.set &&
           given->reading->temperature_c >= given->working_c - TEMPERATURE_HOT_ENOUGH_K;
}

static double conductance(const double *inputs, const void *context)
{
    const struct leak_case *given = context;
    const struct reading *reading = given->reading->reading;
    double current_a = fmax(inputs[INPUT_CURRENT] + inputs[INPUT_STEP], 0);
    double volts_v = inputs[INPUT_VOLTS];
    if (reading->value.unit == UNIT_RESISTANCE) /* ohms do not depend on the volts set */
        current_a *= volts_v / reading->set_volts.value;
    double part_v = fmax(volts_v - current_a * inputs[INPUT_SERIES], volts_v * 1e-3);
    bool electrolytic = dielectric_is_electrolytic(given->type);
    bool lower_bound =
        voltage_scale(given->reading->part_v, given->service_v, given->exponent, electrolytic)
            .lower_bound;
    double scale =
        voltage_factor_near(part_v, given->service_v, given->exponent, electrolytic, lower_bound);
    /* Which side of "hot enough" the reading lies on is certain; its temperature is not. */
    double factor = temperature_factor(given->type, inputs[INPUT_TEMPERATURE], given->working_c,
                                       replaces_factor(given));
    return current_a * scale * factor / given->service_v;
}

static struct leak without_uncertainty(const struct leak_case *given)
{
    const struct reading_findings *reading = given->reading;
    struct scaled_current scaled = voltage_scale(reading->part_v, given->service_v, given->exponent,
                                                 dielectric_is_electrolytic(given->type));
    double factor = temperature_factor(given->type, reading->temperature_c, given->working_c,
                                       reading->reading->hot.set);
    struct leak leak = {.service_a = reading->current_a * scaled.factor,
                        .lower_bound = scaled.lower_bound};
    leak.warm_a = leak.service_a * factor;
    leak.conductance_s = leak.warm_a / given->service_v;
    return leak;
}

struct leak leak_of(const struct leak_case *given)
{
    struct leak leak = without_uncertainty(given);
    const struct reading_findings *reading = given->reading;
    struct reading_uncertainty u =
        reading_uncertainty(reading->reading, &given->bench, reading->current_a);
    double temperature_u =
        replaces_factor(given) ? 0 : uncertainty_of_accuracy(1, 0, temperature_half_width_k);
    struct uncertain inputs[INPUT_COUNT] = {
        [INPUT_CURRENT] = {reading->current_a, u.accuracy_a, 0},
        [INPUT_STEP] = {0, u.resolution_a, 0},
        [INPUT_VOLTS] = {reading->reading->set_volts.value, u.set_v, 0},
        [INPUT_SERIES] = {reading_series_ohm(given->bench.instrument), u.series_ohm, 0},
        [INPUT_TEMPERATURE] = {reading->temperature_c, temperature_u, 0},
    };
    struct uncertainty_budget budget = {.inputs = inputs, .input_count = INPUT_COUNT};
    struct uncertainty_result result;
    if (uncertainty_propagate(conductance, given, &budget, &result) != UNCERTAINTY_OK)
        return leak;
    double step = result.contributions[INPUT_STEP];
    double temperature = result.contributions[INPUT_TEMPERATURE];
    bool hot = reading->reading->hot.set;
    leak.own_s = hot ? hypot(step, temperature) : fabs(step);
    leak.bench_s = hot ? 0 : fabs(temperature);
    leak.standard_s = result.standard;
    leak.common_s =
        sqrt(fmax(result.standard * result.standard - step * step - temperature * temperature, 0));
    return leak;
}

double leak_reading_u(const struct leak_case *given, double current_a)
{
    struct reading_uncertainty u =
        reading_uncertainty(given->reading->reading, &given->bench, current_a);
    return 2 * hypot(u.accuracy_a, u.resolution_a);
}
