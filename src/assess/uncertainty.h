/*
 * The uncertainty of a result, propagated through the function that computes it
 * (JCGM 100:2008, 5.1 and 5.2). Pure: knows nothing of capacitors.
 *
 * Derivatives are taken by moving each input by its own standard uncertainty (5.1.3, note 2). Where
 * the two halves of that step disagree by more than a factor of two, or in sign, the function has a
 * kink there (a leakage clamped at 0, a factor never below 1) and the larger half is taken: the
 * mean of both would understate the slope of the side that matters.
 */
#ifndef ASSESS_UNCERTAINTY_H
#define ASSESS_UNCERTAINTY_H

#include <stddef.h>

enum { UNCERTAINTY_INPUTS_MAX = 32 };

/* The result as a function of inputs[], in the order of struct uncertain. */
typedef double (*uncertainty_function)(const double *inputs, const void *context);

/* One input: value and standard uncertainty (k = 1) in the same unit. */
struct uncertain {
    double value, standard;
    double freedom; /* degrees of freedom; 0 or INFINITY: type B, taken as known */
};

/* Two inputs that share a cause: one instrument's accuracy, one mean of the same series. Pairs not
   listed are independent. */
struct correlation {
    size_t first, second;
    double coefficient; /* -1 to 1 */
};

struct uncertainty_budget {
    const struct uncertain *inputs;
    size_t input_count; /* 1 to UNCERTAINTY_INPUTS_MAX */
    const struct correlation *correlations;
    size_t correlation_count;
};

struct uncertainty_result {
    double value;
    double standard; /* combined, k = 1 */
    double expanded; /* k = 2 */
    double freedom;  /* Welch-Satterthwaite (G.4.1); INFINITY when no input has a finite one */
    /* per input: what it adds, c*u with the sign of c */
    double contributions[UNCERTAINTY_INPUTS_MAX];
};

enum uncertainty_status {
    UNCERTAINTY_OK,
    UNCERTAINTY_UNDEFINED, /* the function has no finite value at the inputs, or on neither side */
    UNCERTAINTY_INCONSISTENT /* the correlations cannot all hold: the variance would be negative */
};

/* *result is set on UNCERTAINTY_OK only. Inputs with standard 0 cost no call of the function. */
enum uncertainty_status uncertainty_propagate(uncertainty_function function, const void *context,
                                              const struct uncertainty_budget *budget,
                                              struct uncertainty_result *result);

/*
 * The standard uncertainty of an instrument's reading (JCGM 100:2008, 4.3.7): accuracy as a
 * half-width accuracy_share*|reading| + accuracy_absolute, and one step of the display; all in the
 * unit of the reading. `accuracy` apart is what all readings of one instrument share (correlation
 * 1), `resolution` is each reading's own.
 */
double uncertainty_of_accuracy(double reading, double accuracy_share, double accuracy_absolute);
double uncertainty_of_resolution(double resolution);

#endif
