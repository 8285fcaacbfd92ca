/*
 * Test volts are not service volts: bringing a current from one to the other, and the exponent of
 * I ~ V^b from two readings. Methods: "Voltage and temperature".
 */
#ifndef ASSESS_VOLTAGE_H
#define ASSESS_VOLTAGE_H

#include <stdbool.h>
#include <stddef.h>

/* A reading is "at voltage" from this share of the service volts on. */
#define VOLTAGE_SHARE_AT 0.95

/* A current brought to service volts. */
struct scaled_current {
    double factor;    /* service current = factor * current */
    double exponent;  /* factor = (service/part volts)^exponent */
    bool lower_bound; /* scaled up beyond 1/0.95: the true current is this or more */
};

/*
 * part_v: volts across the part when read; service_v; exponent: b of I ~ V^b (NaN: 1).
 * x = service/part. x <= 1: x^min(b, 1). Up to 1/0.95: x^2, electrolytic x^5, an allowance.
 * Beyond: x, a lower bound. All volts > 0.
 */
struct scaled_current voltage_scale(double part_v, double service_v, double exponent,
                                    bool electrolytic);

/*
 * The same law at other volts of one reading, for its uncertainty: the volts are not certain, which
 * side of 1/0.95 the reading lies on is. The step there is one of the rule, not of the part.
 */
double voltage_factor_near(double part_v, double service_v, double exponent, bool electrolytic,
                           bool lower_bound);

/*
 * The current at part_v that just comes to limit_a at service_v: the inverse of voltage_scale.
 * Where that gives a lower bound the answer is what proves a fail, not what passes.
 */
double voltage_limit_at(double limit_a, double part_v, double service_v, double exponent,
                        bool electrolytic);

/* b = ln(I2/I1)/ln(V2/V1), and its standard uncertainty from the relative ones (k = 1). false when
   V2/V1 < 1.5 or a current is not positive; *b, *u_b are then untouched. */
bool voltage_exponent(const double part_v[2], const double current_a[2], const double relative[2],
                      double *b, double *u_b);

#endif
