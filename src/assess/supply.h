/*
 * Hum across the capacitors of a supply. Methods: "Supply and hum". Volts rms unless said.
 */
#ifndef ASSESS_SUPPLY_H
#define ASSESS_SUPPLY_H

#include "assess/findings.h"

/*
 * Reservoir: the first harmonic of the charge that the load takes between two charging pulses,
 * sqrt(2)*I*sqrt(ESR^2 + (1/(2 pi f C))^2). An upper figure: charging takes time. A choke behind it
 * tunes with it, by 1/(1 - 1/(w^2 L C)), which is left out.
 * frequency_hz: of the ripple, twice the mains for full wave.
 */
double supply_ripple(double current_a, double frequency_hz, double capacitance_f, double esr_ohm);

/* Peak to peak of the textbook's sawtooth: I/(f C), f the ripple's (I/(2 f C) by the mains'). */
double supply_sawtooth(double current_a, double frequency_hz, double capacitance_f);

/* W that a reservoir's ripple turns into heat in its series resistance, (k*I)^2*ESR: its current is
   pulses, rms k times the load's, 1.7 by full wave and 2.7 by half wave. ngspice gives 1.60 to 1.72
   and 2.58 to 2.67 for the supplies of tests/oracle; a high source resistance brings it down. */
double supply_ripple_watts(double load_a, bool full_wave, double esr_ohm);

/* What the job says of its rectifier, else half wave on a live chassis. */
bool supply_is_full_wave(const struct job *job);

/* Of one section: what stands in series, what smooths, what loads the smoothed node. */
struct supply_section {
    double series_ohm, series_h;
    double capacitance_f, esr_ohm;
    double load_ohm; /* INFINITY: none */
};

/* Share of the volts before the section that remain behind it: |Z_C/(Z_s + Z_C)|. */
double supply_section_share(const struct supply_section *section, double frequency_hz);

/*
 * The nodes of a job: reservoir, then the smoothing capacitors in the order of the file, each fed
 * from the one before through its `feed`. *count of them in the arena. A hum that was measured, but
 * has no frequency to be compared at, is a warning.
 */
const struct supply_node *supply_assess(const struct job *job, struct arena *arena,
                                        struct diagnostics *diagnostics, size_t *count);

#endif
