/*
 * What the calculation of a capacitor went through, kept so that it can be shown line by line.
 */
#ifndef ASSESS_PART_WORKING_H
#define ASSESS_PART_WORKING_H

#include "assess/assessment.h"

/* Of the part with this index, from its deciding reading (the last one that decides). */
struct part_working part_working_of(const struct assessment *assessment,
                                    const struct stage_findings *stages, size_t index);

#endif
