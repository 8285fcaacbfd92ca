/*
 * Bench temperature is not chassis temperature: how leakage rises with it, by dielectric.
 * Methods: "Voltage and temperature".
 */
#ifndef ASSESS_TEMPERATURE_H
#define ASSESS_TEMPERATURE_H

#include "job/choices.h"
#include "reference/source.h"

#include <stdbool.h>

/* K in which the leakage doubles, and the source of that figure. */
struct doubling {
    double theta_k;
    enum source_key source;
};
struct doubling temperature_doubling(enum dielectric dielectric);

/* A reading this close below the working temperature replaces the factor. */
#define TEMPERATURE_HOT_ENOUGH_K 3.0

/*
 * Factor from a reading at reading_c to working_c: 2^((working - reading)/theta), never below 1; of
 * a film the reading is taken at 20 C at least (their insulation peaks below that). 1 for a hot
 * reading within TEMPERATURE_HOT_ENOUGH_K of working_c.
 */
double temperature_factor(enum dielectric dielectric, double reading_c, double working_c, bool hot);

/* Factor from reading_c to the 20 C that leakage rules are written for; may be below 1. */
double temperature_to_20c(enum dielectric dielectric, double reading_c);

/* Wet and tantalum ones too. */
bool dielectric_is_electrolytic(enum dielectric dielectric);

#endif
