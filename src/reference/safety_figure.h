/*
 * Published figures that a measurement for safety is held against. None of them makes a set safe:
 * they say what one standard allows of one measurement.
 */
#ifndef REFERENCE_SAFETY_FIGURE_H
#define REFERENCE_SAFETY_FIGURE_H

#include "quantity/quantity.h"
#include "reference/source.h"

enum safety_kind {
    SAFETY_TOUCH_CURRENT,
    SAFETY_EARTH_CURRENT, /* in the protective conductor */
    SAFETY_EARTH_BOND,
    SAFETY_INSULATION_EARTHED, /* class I */
    SAFETY_INSULATION_DOUBLE,  /* class II, and a chassis on the mains */
    SAFETY_RESIDUAL_PLUG,      /* at the pins of the plug */
    SAFETY_RESIDUAL_INSIDE,    /* on what the service hand meets */
    SAFETY_FUSE,
    SAFETY_POLARITY,
    SAFETY_KIND_COUNT
};

struct safety_figure {
    const char *key; /* "touch current": of words */
    double limit;    /* SI; NaN: no figure is published, the fact alone is recorded */
    enum unit unit;
    bool upper;     /* passes at or below */
    double after_s; /* V at the plug or inside: the time after which it holds; NaN */
    double test_v;  /* of insulation; NaN */
    enum source_key source;
};

/* The row of a kind below SAFETY_KIND_COUNT. */
const struct safety_figure *safety_figure(enum safety_kind kind);

/*
 * Which measurement a line of the job names: "touch current", "earth bond, chassis to plug",
 * "insulation, mains to chassis", "volts at the plug, 1 s after pulling it", "residual", "fuse
 * ...", "polarity". double_insulated: the set has no protective earth, or its chassis is live.
 * SAFETY_KIND_COUNT: none of these.
 */
enum safety_kind safety_kind_named(const char *name, bool double_insulated);

#endif
