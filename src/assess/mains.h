/*
 * Capacitors at the mains: classes, and the current that all isolators of a set pass together.
 * Methods: "Place", the rows of the mains.
 */
#ifndef ASSESS_MAINS_H
#define ASSESS_MAINS_H

#include "job/job.h"
#include "job/shop.h"

#include <stdbool.h>

/* The class that the place demands; CLASS_NONE: not at the mains. Mains to chassis of a live set is
   across the mains. */
enum safety_class mains_class_needed(const struct job *job, enum place place);

/* Whether what is marked or fitted bears it (better ones count; two Y2 in series for a Y1). */
bool mains_class_borne(const struct job *job, enum place place, const struct marking *marking);

/* A: 1.1*V*sqrt((1/R_L)^2 + (2 pi f C)^2); rise: 1.1. */
double mains_touch_current(double rise_v, double frequency_hz, double capacitance_f, double leak_s);

/* F: the largest total that stays within touch_a: touch/(2 pi f * 1.1 * V). */
double mains_touch_capacitance(double rise_v, double frequency_hz, double touch_a);

/* Hz of the set's mains; unknown: 60, the cautious one. */
double mains_frequency(const struct job *job);

/* F: all isolators of the set together, as found or as left (what is fitted counts then). */
double mains_isolators(const struct job *job, bool left);

/* F: its expanded uncertainty, of those that were measured; one bridge read them all. */
double mains_isolators_uncertainty(const struct job *job, const struct policy *policy, bool left);

/* Above 0.1 uF on the plug's side of the switch a discharge resistor is needed besides. */
bool mains_needs_discharge(const struct capacitor *part);

#endif
