#include "assess/component_date.h"

#include <math.h>

/* Years of a reading before the set's first (negative) or after its last (positive); 0 within. */
static double years_off(const struct date_reading *reading, const struct year_span *years)
{
    /* months count: a part of December in a set of the next year is normal stock */
    double at = reading->year;
    if (reading->month)
        at += (reading->month - 1) / 12.0;
    else if (reading->week)
        at += (reading->week - 1) / 52.0;
    double end = years->last + 1;
    if (at < years->first)
        return at - years->first;
    return at >= end ? at - end + 1.0 / 52 : 0;
}

struct dated {
    const char *ref;
    const struct prose *stamp;
    struct position at;
    enum origin was;
};

static struct date_findings assess_one(const struct job *job, const struct dated *part)
{
    struct date_findings found = {.ref = part->ref,
                                  .written = part->stamp->text,
                                  .nearest = -1,
                                  .years_off = NAN,
                                  .original = part->was == WAS_ORIGINAL};
    found.known = date_code_read(part->stamp->text, &found.code);
    if (!found.known || !job->set.year.set)
        return found;
    found.refutes = true;
    for (size_t i = 0; i < found.code.count; i++) {
        double off = years_off(&found.code.readings[i], &job->set.year);
        found.refutes = found.refutes && off > 0;
        bool nearer = found.nearest < 0 || fabs(off) < fabs(found.years_off);
        if (nearer) {
            found.nearest = (int)i;
            found.years_off = off;
        }
    }
    found.refutes = found.refutes && !found.code.decade_open;
    return found;
}

static void warn(const struct job *job, const struct date_findings *found, struct position at,
                 struct diagnostics *diagnostics)
{
    const struct date_reading *reading = &found->code.readings[found->nearest];
    diagnostic_add(diagnostics, &job->source, at, DIAGNOSTIC_LATER_THAN_SET,
                   "say `was: earlier repair`, or mend the year of the set",
                   "%s is dated %d ('%s'), later than the set, %s, and counted as original",
                   found->ref, reading->year, found->written, job->set.year.written);
}

static size_t list(const struct job *job, struct dated *parts)
{
    size_t count = 0;
    for (size_t i = 0; i < job->can_count; i++)
        parts[count++] = (struct dated){job->cans[i].ref, &job->cans[i].date_code,
                                        job->cans[i].date_code.at, job->cans[i].was};
    for (size_t i = 0; i < job->capacitor_count; i++)
        parts[count++] = (struct dated){job->capacitors[i].ref, &job->capacitors[i].date_code,
                                        job->capacitors[i].date_code.at, job->capacitors[i].was};
    for (size_t i = 0; i < job->resistor_count; i++)
        parts[count++] = (struct dated){job->resistors[i].ref, &job->resistors[i].date_code,
                                        job->resistors[i].date_code.at, job->resistors[i].was};
    for (size_t i = 0; i < job->valve_count; i++)
        parts[count++] = (struct dated){job->valves[i].ref, &job->valves[i].date_code,
                                        job->valves[i].date_code.at, job->valves[i].was};
    return count;
}

const struct date_findings *component_dates_assess(const struct job *job, struct arena *arena,
                                                   struct diagnostics *diagnostics, size_t *count)
{
    size_t most = job->can_count + job->capacitor_count + job->resistor_count + job->valve_count;
    struct dated *parts = arena_array(arena, most + 1, sizeof *parts);
    struct date_findings *found = arena_array(arena, most + 1, sizeof *found);
    size_t listed = list(job, parts);
    *count = 0;
    for (size_t i = 0; i < listed; i++) {
        if (!parts[i].stamp->text)
            continue;
        found[*count] = assess_one(job, &parts[i]);
        if (found[*count].refutes && found[*count].original)
            warn(job, &found[*count], parts[i].at, diagnostics);
        (*count)++;
    }
    return found;
}
