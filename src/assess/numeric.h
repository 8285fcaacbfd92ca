/*
 * Roots and fits. Roots by bracketing; least squares by MINPACK (cminpack lmdif).
 */
#ifndef ASSESS_NUMERIC_H
#define ASSESS_NUMERIC_H

#include <stdbool.h>
#include <stddef.h>

/* A function of one variable with its context. */
typedef double (*numeric_function)(double x, const void *context);

/*
 * A root of f in [low, high], to relative 1e-12 of the bracket. f(low) and f(high) must differ in
 * sign or one be 0; else false and *root untouched.
 */
bool numeric_root(numeric_function f, const void *context, double low, double high, double *root);

/* A model for a fit: y at x for parameters. */
typedef double (*numeric_model)(double x, const double *parameters, const void *context);

enum { NUMERIC_PARAMETERS_MAX = 6 };

struct numeric_fit {
    double parameters[NUMERIC_PARAMETERS_MAX];
    double standard_errors[NUMERIC_PARAMETERS_MAX]; /* with s^2 = sum/dof when unweighted */
    double sum_of_squares;                          /* weighted: chi^2 */
    size_t freedom;
    double residual_sd;
};
enum numeric_status {
    NUMERIC_OK,
    NUMERIC_TOO_FEW, /* not more points than parameters */
    NUMERIC_NOT_CONVERGED,
    NUMERIC_SINGULAR /* parameters cannot be told apart */
};

/*
 * Weighted least squares of y[count] at x[count], from start[parameter_count]. sigma: standard
 * uncertainty of each y, NULL: unweighted (standard errors from the residuals, as NIST StRD does).
 * With sigma the standard errors are those of chi^2 = 1. lmdif: factor 1, ftol = xtol = 1e-15,
 * 20,000 evaluations. *fit is set on NUMERIC_OK only.
 */
enum numeric_status numeric_least_squares(numeric_model model, const void *context, const double *x,
                                          const double *y, const double *sigma, size_t count,
                                          const double *start, size_t parameter_count,
                                          struct numeric_fit *fit);

/* Student's t for a two-sided probability p (0.95), freedom >= 1, INFINITY: normal; the same at
   95 %; and the chi^2 quantile at probability p. */
double numeric_t_quantile(double p, double freedom);
double numeric_t95(double freedom);
double numeric_chi2_quantile(double p, size_t freedom);

#endif
