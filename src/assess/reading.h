/*
 * A leakage reading as the part saw it: volts across the part, current, uncertainty.
 * Pure; nothing here knows the place of the part. Methods: "A reading and its uncertainty".
 */
#ifndef ASSESS_READING_H
#define ASSESS_READING_H

#include "assess/findings.h"

/* What a reading is judged with. */
struct reading_bench {
    const struct instrument *instrument; /* NULL: none named, the policy's default accuracy */
    const struct policy *policy;
    double bench_c;
};

/* Standard uncertainties (k = 1) of one reading, kept apart because accuracy and the volts set are
   common to all readings of one instrument and the last step of the display is not. */
struct reading_uncertainty {
    double accuracy_a, resolution_a; /* A */
    double set_v;                    /* V */
    double series_ohm;               /* ohm */
};

/* What the reading's instrument states, in ampere for a reading of current_a; not `stated`: the
   policy's default accuracy and one step. */
struct reading_accuracy {
    bool stated;
    double share, absolute_a, step_a;
};
struct reading_accuracy reading_accuracy(const struct reading *reading,
                                         const struct reading_bench *bench, double current_a);

/* Resistance in series with the part, ohm: inside the tester and of the meter itself. */
double reading_series_ohm(const struct instrument *instrument);

/*
 * Given a reading with volts and a value. Returned: volts across the part, current (of a bound the
 * bound, a resistance `over` is a current UNDER), expanded uncertainty and repeatability,
 * temperature. A negative current counts as 0. An insulation reading is taken as the resistance of
 * the part alone. The rest of the struct is NaN or false. false: the current is more than the
 * series resistance lets pass (V_c held at a thousandth of the volts set).
 */
bool reading_evaluate(const struct reading *reading, const struct reading_bench *bench,
                      struct reading_findings *found);

/* Standard uncertainties of a reading of current_a at the volts of `reading` on the same range. */
struct reading_uncertainty reading_uncertainty(const struct reading *reading,
                                               const struct reading_bench *bench, double current_a);

/* One step of the last digit as written, SI: 0.1e-6 for "1.1 uA"; 0 when it cannot be told. */
double reading_last_digit(const struct quantity *value);

#endif
