#include "reference/preferred_value.h"

#include <assert.h>
#include <math.h>

/* IEC 60063. Ten of the values are not the rounded powers of 10^(1/24). */
static const int e24[24] = {10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30,
                            33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91};

static const struct {
    size_t size;
    double tolerance_percent;
    enum source_key source;
} series_rows[E_SERIES_COUNT] = {
    [E_SERIES_3] = {3, 40, SOURCE_IEC_60063_E3},  [E_SERIES_6] = {6, 20, SOURCE_IEC_60063},
    [E_SERIES_12] = {12, 10, SOURCE_IEC_60063},   [E_SERIES_24] = {24, 5, SOURCE_IEC_60063},
    [E_SERIES_48] = {48, 2, SOURCE_IEC_60063},    [E_SERIES_96] = {96, 1, SOURCE_IEC_60063},
    [E_SERIES_192] = {192, 0.5, SOURCE_IEC_60063}};

size_t e_series_size(enum e_series series)
{
    return series_rows[series].size;
}

double e_series_tolerance_percent(enum e_series series)
{
    return series_rows[series].tolerance_percent;
}

enum source_key e_series_source(enum e_series series)
{
    return series_rows[series].source;
}

int e_series_value(enum e_series series, size_t index)
{
    size_t size = series_rows[series].size;
    assert(index < size);
    if (size <= 24)
        return e24[index * (24 / size)];
    size_t place = index * (192 / size);
    if (place == 185)
        return 920; /* the one place of E192 where the standard does not follow the rule: 919 */
    return (int)lround(100 * pow(10, (double)place / 192));
}

double e_series_nearest(enum e_series series, double value)
{
    assert(value > 0 && isfinite(value));
    double unit = series_rows[series].size <= 24 ? 10 : 100;
    double decade = floor(log10(value));
    double nearest = 0, least = INFINITY;
    for (int shift = 0; shift <= 1; shift++)
        for (size_t i = 0; i < series_rows[series].size; i++) {
            double candidate = e_series_value(series, i) * pow(10, decade + shift) / unit;
            double distance = fabs(log(candidate / value));
            if (distance < least) {
                least = distance;
                nearest = candidate;
            }
        }
    return nearest;
}

bool e_series_holds(enum e_series series, double value)
{
    return value > 0 && isfinite(value) && fabs(e_series_nearest(series, value) / value - 1) < 1e-6;
}

enum e_series e_series_of(double value)
{
    enum e_series series = E_SERIES_3;
    while (series < E_SERIES_COUNT && !e_series_holds(series, value))
        series++;
    return series;
}
