/*
 * The service sheet's voltages in terms of today's meter and today's mains. Methods: "Service-sheet
 * voltages".
 */
#ifndef ASSESS_SHEET_VOLTAGE_H
#define ASSESS_SHEET_VOLTAGE_H

#include "assess/findings.h"

/* What a meter of meter_ohm shows of true_v behind source_ohm; INFINITY: the meter loads nothing.
 */
double meter_reading(double true_v, double source_ohm, double meter_ohm);

/* What such a reading stands for. */
double meter_true_volts(double reading_v, double source_ohm, double meter_ohm);

/*
 * All points, as job->voltages.points. Figures of the sheet without its meter (or a point without
 * the meter's range) are a warning, and that comparison is not judged. Today's meter is the first
 * instrument for volts; one of so many ohms per volt is taken on the sheet's range, the range that
 * the point asks for today too. Resistance seen: `source`; not given, the point is taken as low.
 */
const struct voltage_findings *sheet_voltages_assess(const struct job *job,
                                                     const struct policy *policy,
                                                     struct arena *arena,
                                                     struct diagnostics *diagnostics);

#endif
