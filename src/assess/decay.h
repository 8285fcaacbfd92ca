/*
 * What a fit of a dying current gives: absorption.h makes it, findings carry it.
 */
#ifndef ASSESS_DECAY_H
#define ASSESS_DECAY_H

#include <stdbool.h>
#include <stddef.h>

enum decay_law { DECAY_POWER, DECAY_EXPONENTIAL, DECAY_COUNT };

struct decay {
    bool fitted;
    enum decay_law law;
    double steady_a, steady_error_a; /* standard: s(I_s)*max(1, sqrt(chi2/nu)) */
    double amplitude_a;
    double shape; /* n, or tau in seconds */
    bool at_end;  /* the shape ran into an end of its grid: not resolved */
    double chi2;
    size_t freedom;
};

/* Both laws through one series. */
struct decay_comparison {
    struct decay laws[DECAY_COUNT];
    int better; /* of laws[]; -1: no fit */
    bool preferred;
    double to_limit_s;                        /* of the better one; INFINITY: never; NaN: no fit */
    double to_limit_early_s, to_limit_late_s; /* with the plateau lower and higher by t95*s */
    double horizon_s; /* 10 x the last time: beyond it nothing is to be printed */
};

#endif
