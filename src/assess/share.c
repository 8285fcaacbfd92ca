#include "assess/share.h"

#include "assess/numeric.h"

#include <math.h>

static const double z95 = 1.959963984540054;

void share_add_set(struct share_sums *sums, double failed, double read)
{
    sums->x += failed;
    sums->n += read;
    sums->sets += 1;
    sums->sum_xx += failed * failed;
    sums->sum_xn += failed * read;
    sums->sum_nn += read * read;
}

void share_wilson(double p, double n, double *low, double *high)
{
    double zz = z95 * z95, middle = p + zz / (2 * n);
    double half = z95 * sqrt(p * (1 - p) / n + zz / (4 * n * n)), scale = 1 + zz / n;
    /* The ends are 0 and 1 exactly where nothing, or all, failed. */
    *low = p <= 0 ? 0 : fmax(0, (middle - half) / scale);
    *high = p >= 1 ? 1 : fmin(1, (middle + half) / scale);
}

static double effective_n(const struct share_sums *sums, double p, double *design_effect)
{
    double m = sums->sets, n = sums->n;
    *design_effect = 1;
    if (p <= 0 || p >= 1) {
        *design_effect = n / m;
        return m;
    }
    double squares = sums->sum_xx - 2 * p * sums->sum_xn + p * p * sums->sum_nn;
    double variance = m / (m - 1) * squares / (n * n);
    *design_effect = fmax(1, variance * n / (p * (1 - p)));
    double widening = z95 / numeric_t95(m - 1);
    return n / *design_effect * widening * widening;
}

struct share share_of(const struct share_sums *sums)
{
    struct share share = {NAN, NAN, NAN, NAN, NAN, NAN, NAN};
    if (sums->n + sums->unread > 0) {
        share.best = sums->x / (sums->n + sums->unread);
        share.worst = (sums->x + sums->unread) / (sums->n + sums->unread);
    }
    if (sums->n <= 0)
        return share;
    share.share = sums->x / sums->n;
    if (sums->sets < SHARE_SETS_MIN)
        return share;
    share.effective_n = effective_n(sums, share.share, &share.design_effect);
    share_wilson(share.share, share.effective_n, &share.low, &share.high);
    return share;
}
