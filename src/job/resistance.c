/* Ohms of a resistance in the three states of a stage. */
#include "job/job.h"

/* A figure and whether a meter showed it. */
struct ohms {
    bool known, measured;
    double value;
};

static struct ohms ohms_of(const struct quantity *quantity, bool measured)
{
    return (struct ohms){quantity->set, measured, quantity->value};
}

/* The figures of a part: each phase falls back on the one before. */
static struct ohms of_part(const struct marking *marked, const struct quantity *measured,
                           const struct marking *fitted, enum phase phase)
{
    struct ohms ohms = ohms_of(&marked->value, false);
    /* A resistor without a marking is designed as what it measures, if it is to be anything. */
    if (measured->set && (phase != PHASE_DESIGNED || !ohms.known))
        ohms = ohms_of(measured, true);
    if (phase == PHASE_LEFT && fitted->set && fitted->value.set)
        ohms = ohms_of(&fitted->value, false);
    return ohms;
}

bool job_resistance(const struct job *job, const struct resistance *resistance, enum phase phase,
                    double *ohm, bool *measured)
{
    struct ohms ohms = {0};
    if (!resistance->set)
        return false;
    if (resistance->resistor != NOT_LISTED) {
        const struct resistor *part = &job->resistors[resistance->resistor];
        ohms = of_part(&part->marked, &part->measured, &part->fitted, phase);
    } else if (resistance->winding != NOT_LISTED) {
        const struct winding *part = &job->windings[resistance->winding];
        ohms = of_part(&part->marked, &part->measured, &part->fitted, phase);
    } else {
        ohms = ohms_of(&resistance->quantity, false);
    }
    if (!ohms.known)
        return false;
    *ohm = ohms.value;
    if (measured)
        *measured = ohms.measured;
    return true;
}
