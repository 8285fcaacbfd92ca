#include "assess/temperature.h"

#include <math.h>

static const struct doubling doublings[DIELECTRIC_COUNT] = {
    [DIELECTRIC_UNKNOWN] = {10, SOURCE_DEFAULT_TEMPERATURE},
    [DIELECTRIC_PAPER] = {10, SOURCE_OIL_PAPER_TEMPERATURE},
    [DIELECTRIC_WAXED_PAPER] = {10, SOURCE_OIL_PAPER_TEMPERATURE},
    [DIELECTRIC_MOULDED_PAPER] = {10, SOURCE_OIL_PAPER_TEMPERATURE},
    [DIELECTRIC_OIL_PAPER] = {10, SOURCE_OIL_PAPER_TEMPERATURE},
    [DIELECTRIC_METALLISED_PAPER] = {10, SOURCE_OIL_PAPER_TEMPERATURE},
    [DIELECTRIC_MICA] = {10, SOURCE_DEFAULT_TEMPERATURE},
    [DIELECTRIC_CERAMIC] = {10, SOURCE_DEFAULT_TEMPERATURE},
    [DIELECTRIC_POLYSTYRENE] = {15, SOURCE_FILM_TEMPERATURE},
    [DIELECTRIC_POLYESTER] = {15, SOURCE_FILM_TEMPERATURE},
    [DIELECTRIC_POLYPROPYLENE] = {15, SOURCE_FILM_TEMPERATURE},
    /* 2.5 times from 20 to 60 C: 40 K/log2(2.5) = 30.3 K */
    [DIELECTRIC_ELECTROLYTIC] = {30.3, SOURCE_ELECTROLYTIC_TEMPERATURE},
    [DIELECTRIC_WET_ELECTROLYTIC] = {30.3, SOURCE_ELECTROLYTIC_TEMPERATURE},
    [DIELECTRIC_TANTALUM] = {10, SOURCE_DEFAULT_TEMPERATURE},
    [DIELECTRIC_AIR] = {10, SOURCE_DEFAULT_TEMPERATURE},
};

struct doubling temperature_doubling(enum dielectric dielectric)
{
    return doublings[dielectric];
}

bool dielectric_is_electrolytic(enum dielectric dielectric)
{
    return dielectric == DIELECTRIC_ELECTROLYTIC || dielectric == DIELECTRIC_WET_ELECTROLYTIC ||
           dielectric == DIELECTRIC_TANTALUM;
}

static bool is_film(enum dielectric dielectric)
{
    return dielectric == DIELECTRIC_POLYSTYRENE || dielectric == DIELECTRIC_POLYESTER ||
           dielectric == DIELECTRIC_POLYPROPYLENE;
}

double temperature_factor(enum dielectric dielectric, double reading_c, double working_c, bool hot)
{
    if (hot && reading_c >= working_c - TEMPERATURE_HOT_ENOUGH_K)
        return 1;
    if (is_film(dielectric))
        reading_c = fmax(reading_c, 20);
    return fmax(1, exp2((working_c - reading_c) / doublings[dielectric].theta_k));
}

double temperature_to_20c(enum dielectric dielectric, double reading_c)
{
    return exp2((20 - reading_c) / doublings[dielectric].theta_k);
}
