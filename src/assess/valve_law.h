/*
 * The direct current of a valve by the three-halves law, pinned to one row of a valve manual.
 * Pure functions. Law voltages are to the cathode, currents in ampere. Formulas, constants and
 * stated bounds: the manual, "Stage".
 */
#ifndef ASSESS_VALVE_LAW_H
#define ASSESS_VALVE_LAW_H

#include "reference/valve_book.h"

#include <stdbool.h>
#include <stddef.h>

struct valve_law {
    bool triode;
    double exponent; /* 1.5; 1.3 for a row without g_m */
    double d0_v;     /* drive at the row */
    double ik0_a;    /* cathode current at the row */
    double va0_v, vg20_v, vg10_v;
    double mu;                  /* triode */
    double mu12, ka;            /* screen valve */
    double q0, m;               /* screen share */
    double knee0;               /* screen valve: how far past its knee the row is, of 1 */
    double pa_max_w, pg2_max_w; /* NaN: not known */
    bool without_gm;            /* stated +-30 % */
};

enum law_status {
    LAW_OK,
    LAW_WARN_MU12,  /* outside 0.8 to 1.1 of a printed mu12; *law is set */
    LAW_NO_CURRENT, /* the row lacks anode current, anode or grid volts; screen volts or current */
    LAW_NO_GAIN,    /* neither g_m nor mu (mu12) */
    LAW_IMPOSSIBLE  /* mu12 or the drive would be zero or negative */
};

/* Fit the law to a row. *law is set on LAW_OK and LAW_WARN_MU12 only. */
enum law_status valve_law_fit(const struct valve_row *row, struct valve_law *law);

/* The row to use: of the rows with g_m the nearest in |ln Va| + |ln Vg2|; of none with g_m the
   nearest of all. va_v, vg2_v: what the stage is designed for (vg2_v ignored for a triode). */
const struct valve_row *valve_row_nearest(const struct valve_row *rows, size_t count, double va_v,
                                          double vg2_v);

struct valve_currents {
    double cathode_a, anode_a, screen_a;
    bool bottomed; /* V_a below V_g2/5: no figure for the split */
};
struct valve_currents valve_law_currents(const struct valve_law *law, double vg1_v, double vg2_v,
                                         double va_v);

/* Grid current, labelled default: 15 uA * exp(Vgk/0.23 V), linear beyond +0.5 V. */
double valve_grid_current(double vgk_v);

/* Where the grid settles, to the cathode, fed from emf_v (to the cathode too) behind ohm >= 0, with
   that grid current flowing. */
double valve_grid_volts(double emf_v, double ohm);

#endif
