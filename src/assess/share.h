/*
 * Shares of parts with intervals, parts of one set counted as alike.
 *
 * Parts of one set failed together or not at all more often than chance: an interval from the count
 * of parts alone would be too narrow. The design effect widens it:
 *   p = x/n, v = m/(m-1) * sum((x_i - p*n_i)^2)/n^2, deff = max(1, v*n/(p(1-p))),
 *   n_eff = (n/deff)*(1.960/t95(m-1))^2, Wilson's interval at (p*n_eff, n_eff); p = 0 or 1: n_eff =
 * m. Source: Wilson 1927; Newcombe 1998, Statistics in Medicine 17, 857, method 3; the variance is
 * the ratio estimator's for clusters (Cochran, Sampling Techniques, 3rd ed., 3.12).
 */
#ifndef ASSESS_SHARE_H
#define ASSESS_SHARE_H

#include <stdbool.h>
#include <stddef.h>

/* Fewer sets: counts only. */
enum { SHARE_SETS_MIN = 5 };

/* Sums over sets i of x_i failed of n_i parts. {0} is empty. */
struct share_sums {
    double x, n;                   /* failed, read */
    double sets;                   /* with at least one part read */
    double sum_xx, sum_xn, sum_nn; /* of x_i*x_i, x_i*n_i, n_i*n_i */
    double unread;                 /* replaced without a reading: not among n */
};

/* One set with n_i > 0 parts. */
void share_add_set(struct share_sums *sums, double failed, double read);

struct share {
    double share;       /* x/n; NaN: n is 0 */
    double low, high;   /* 95 %; NaN: fewer than SHARE_SETS_MIN sets */
    double effective_n; /* NaN likewise */
    double design_effect;
    double best, worst; /* x/(n+u), (x+u)/(n+u): all unread good, or all bad; NaN: nothing */
};
struct share share_of(const struct share_sums *sums);

/* Wilson's interval without correction for p of n, z = 1.959964 (95 %). n > 0, 0 <= p <= 1; n need
   not be whole. */
void share_wilson(double p, double n, double *low, double *high);

#endif
