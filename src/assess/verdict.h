/*
 * From a figure with its uncertainty and a limit to an outcome: ILAC-G8:09/2019 with guard band.
 */
#ifndef ASSESS_VERDICT_H
#define ASSESS_VERDICT_H

#include "assess/findings.h"

/* What is judged. For a figure that must not fall below its limit: upper false. */
struct verdict_case {
    double value, limit;
    double guard; /* w >= 0, in the unit of the value: multiple of U */
    bool upper;
    enum bound bound; /* of the value: UNDER at most this, OVER at least this */
};

/*
 * pass (value <= limit - w), conditional pass (<= limit), conditional fail (<= limit + w), fail. A
 * bound passes when it passes itself, or fails when it fails itself; else not judged. Mirrored for
 * a lower limit. NaN anywhere: not judged.
 */
enum outcome verdict_of(const struct verdict_case *judged);

/* The worse of two: fail, conditional fail, not judged, conditional pass, pass. */
enum outcome verdict_worse(enum outcome a, enum outcome b);

#endif
