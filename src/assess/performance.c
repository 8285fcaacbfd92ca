#include "assess/performance.h"

#include <math.h>

static double in_db(double factor, double left, double found)
{
    return left > 0 && found > 0 ? factor * log10(left / found) : NAN;
}

struct performance_findings performance_assess(const struct performance_row *row)
{
    struct performance_findings change = {NAN, NAN};
    if (!row->found.set || !row->left.set || row->found.bound != BOUND_NONE ||
        row->left.bound != BOUND_NONE || row->found.unit != row->left.unit)
        return change;
    double found = row->found.value, left = row->left.value;
    switch (row->found.unit) {
    case UNIT_VOLTAGE:
    case UNIT_CURRENT:
        change.db = in_db(20, left, found);
        break;
    case UNIT_POWER:
        change.db = in_db(10, left, found);
        break;
    case UNIT_DECIBEL:
        change.db = left - found;
        break;
    case UNIT_NONE:
    case UNIT_CAPACITANCE:
    case UNIT_RESISTANCE:
    case UNIT_INDUCTANCE:
    case UNIT_FREQUENCY:
    case UNIT_TIME:
    case UNIT_TEMPERATURE:
    case UNIT_PERCENT:
    case UNIT_CONDUCTANCE:
    case UNIT_LENGTH:
    case UNIT_SENSITIVITY:
    case UNIT_COUNT:
        change.percent = found != 0 ? 100 * (left / found - 1) : NAN;
        break;
    }
    return change;
}
