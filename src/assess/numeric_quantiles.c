#include "assess/numeric.h"

#include <assert.h>
#include <float.h>
#include <math.h>

/* Regularised lower incomplete gamma P(a, x): the series below a + 1, Lentz's continued fraction
   above (Abramowitz and Stegun 6.5.29 and 6.5.31). */
static double gamma_p(double a, double x)
{
    if (x <= 0)
        return 0;
    int sign;
    double front = exp(a * log(x) - x - lgamma_r(a, &sign));
    if (x < a + 1) {
        double term = 1 / a, sum = term;
        for (int k = 1; k < 10000 && term > sum * DBL_EPSILON; k++) {
            term *= x / (a + k);
            sum += term;
        }
        return sum * front;
    }
    double b = x + 1 - a, c = 1e300, d = 1 / b, fraction = d;
    for (int k = 1; k < 10000; k++) {
        double numerator = -k * (k - a);
        b += 2;
        d = 1 / (numerator * d + b);
        c = b + numerator / c;
        fraction *= d * c;
        if (fabs(d * c - 1) < DBL_EPSILON)
            break;
    }
    return 1 - front * fraction;
}

/* Regularised incomplete beta I_x(a, b) for x below (a+1)/(a+b+2), by Lentz's continued fraction
   (Abramowitz and Stegun 26.5.8). */
static double beta_fraction(double x, double a, double b)
{
    double c = 1, d = 1 / (1 - (a + b) * x / (a + 1)), fraction = d;
    for (int m = 1; m < 10000; m++) {
        double even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m));
        d = 1 / (1 + even * d);
        c = 1 + even / c;
        fraction *= d * c;
        double odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1));
        d = 1 / (1 + odd * d);
        c = 1 + odd / c;
        fraction *= d * c;
        if (fabs(d * c - 1) < DBL_EPSILON)
            break;
    }
    int sign;
    double front = lgamma_r(a + b, &sign) - lgamma_r(a, &sign) - lgamma_r(b, &sign) + a * log(x) +
                   b * log1p(-x);
    return exp(front) * fraction / a;
}

static double beta_i(double x, double a, double b)
{
    if (x <= 0 || x >= 1)
        return x <= 0 ? 0 : 1;
    return x < (a + 1) / (a + b + 2) ? beta_fraction(x, a, b) : 1 - beta_fraction(1 - x, b, a);
}

struct quantile {
    double p, freedom;
};

/* Two-sided probability of |t| <= x, less the one wanted. x = exp(u) would be no better: the
   bracket below is narrow. */
static double t_gap(double x, const void *context)
{
    const struct quantile *wanted = context;
    if (isinf(wanted->freedom))
        return erf(x / sqrt(2)) - wanted->p;
    double tails = beta_i(wanted->freedom / (wanted->freedom + x * x), wanted->freedom / 2, 0.5);
    return (1 - tails) - wanted->p;
}

double numeric_t_quantile(double p, double freedom)
{
    assert(freedom >= 1 && p > 0 && p < 1);
    struct quantile wanted = {p, freedom > 1e6 ? INFINITY : freedom};
    double high = 2, root = NAN;
    while (t_gap(high, &wanted) < 0 && high < 1e9)
        high *= 2;
    numeric_root(t_gap, &wanted, 0, high, &root);
    return root;
}

double numeric_t95(double freedom)
{
    return numeric_t_quantile(0.95, freedom);
}

static double chi2_gap(double x, const void *context)
{
    const struct quantile *wanted = context;
    return gamma_p(wanted->freedom / 2, x / 2) - wanted->p;
}

double numeric_chi2_quantile(double p, size_t freedom)
{
    assert(freedom >= 1 && p > 0 && p < 1);
    struct quantile wanted = {p, (double)freedom};
    double high = wanted.freedom + 10, root = NAN;
    while (chi2_gap(high, &wanted) < 0 && high < 1e9)
        high *= 2;
    numeric_root(chi2_gap, &wanted, 0, high, &root);
    return root;
}
