#include "assess/numeric.h"

#include "base/memory.h"

#include <assert.h>
#include <cminpack.h>
#include <float.h>
#include <limits.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* ---- roots */

struct bracket {
    double best, f_best;         /* the end nearer to the root */
    double opposite, f_opposite; /* the other end, of the other sign */
    double before, f_before;     /* the best of the round before */
    double step, step_before;
};

static void order_ends(struct bracket *b)
{
    if (fabs(b->f_opposite) >= fabs(b->f_best))
        return;
    double x = b->best, f = b->f_best;
    b->before = x;
    b->f_before = f;
    b->best = b->opposite;
    b->f_best = b->f_opposite;
    b->opposite = x;
    b->f_opposite = f;
}

/* Brent's step: inverse quadratic or secant where they shrink fast enough, else the middle. */
static void choose_step(struct bracket *b, double tolerance)
{
    double middle = 0.5 * (b->opposite - b->best);
    double p, q;
    double s = b->f_best / b->f_before;
    if (b->before == b->opposite) {
        p = 2 * middle * s;
        q = 1 - s;
    } else {
        double r = b->f_best / b->f_opposite, t = b->f_before / b->f_opposite;
        p = s * (2 * middle * t * (t - r) - (b->best - b->before) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
    }
    if (p > 0)
        q = -q;
    else
        p = -p;
    bool shrinks = fabs(b->step_before) >= tolerance && fabs(b->f_before) > fabs(b->f_best) &&
                   2 * p < fmin(3 * middle * q - fabs(tolerance * q), fabs(b->step_before * q));
    b->step_before = shrinks ? b->step : middle;
    b->step = shrinks ? p / q : middle;
}

bool numeric_root(numeric_function f, const void *context, double low, double high, double *root)
{
    double f_low = f(low, context), f_high = f(high, context);
    if (isnan(f_low) || isnan(f_high) || (f_low != 0 && f_high != 0 && (f_low > 0) == (f_high > 0)))
        return false;
    double tolerance = 1e-12 * fabs(high - low);
    struct bracket b = {high, f_high, low, f_low, low, f_low, high - low, high - low};
    for (int round = 0; round < 200; round++) {
        if (b.f_best != 0 && (b.f_best > 0) == (b.f_opposite > 0)) {
            b.opposite = b.before;
            b.f_opposite = b.f_before;
            b.step = b.step_before = b.best - b.before;
        }
        order_ends(&b);
        double half = 0.5 * (b.opposite - b.best);
        double least = 2 * DBL_EPSILON * fabs(b.best) + 0.5 * tolerance;
        if (fabs(half) <= least || b.f_best == 0)
            break;
        choose_step(&b, least);
        b.before = b.best;
        b.f_before = b.f_best;
        b.best += fabs(b.step) > least ? b.step : copysign(least, half);
        b.f_best = f(b.best, context);
        if (isnan(b.f_best))
            return false;
    }
    *root = b.best;
    return true;
}

/* ---- least squares */

struct fit_task {
    numeric_model model;
    const void *context;
    const double *x, *y, *sigma;
};

static double residual(const struct fit_task *task, size_t i, const double *parameters)
{
    double r = task->y[i] - task->model(task->x[i], parameters, task->context);
    return task->sigma ? r / task->sigma[i] : r;
}

static int residuals(void *task, int count, int parameter_count, const double *parameters,
                     double *values, int flag)
{
    (void)parameter_count, (void)flag;
    for (int i = 0; i < count; i++) {
        values[i] = residual(task, (size_t)i, parameters);
        if (!isfinite(values[i]))
            values[i] = 1e150; /* outside the model's range: the step is refused */
    }
    return 0;
}

/* MINPACK from the start; factor 1 keeps the first step as small as the parameters themselves. */
static bool minimise(struct fit_task *task, size_t count, size_t parameter_count,
                     double *parameters)
{
    int m = (int)count, n = (int)parameter_count, evaluations = 0;
    int pivots[NUMERIC_PARAMETERS_MAX];
    double scale[NUMERIC_PARAMETERS_MAX], qtf[NUMERIC_PARAMETERS_MAX];
    double work[3][NUMERIC_PARAMETERS_MAX];
    double *space = memory_get_cleared(count * (parameter_count + 2), sizeof *space);
    double *values = space, *work_m = space + count, *jacobian = space + 2 * count;
    int info =
        lmdif(residuals, task, m, n, parameters, values, 1e-15, 1e-15, 0, 20000, 0, scale, 1, 1, 0,
              &evaluations, jacobian, m, pivots, qtf, work[0], work[1], work[2], work_m);
    free(space);
    return info >= 1 && info <= 8 && info != 5;
}

/* d residual / d parameter by central differences: forward ones cost half the digits. */
static void fill_jacobian(const struct fit_task *task, const double *parameters,
                          size_t parameter_count, size_t count, double *jacobian)
{
    double moved[NUMERIC_PARAMETERS_MAX];
    memcpy(moved, parameters, parameter_count * sizeof *moved);
    for (size_t p = 0; p < parameter_count; p++) {
        double step = cbrt(DBL_EPSILON) * fmax(fabs(parameters[p]), 1e-8);
        double up = parameters[p] + step, down = parameters[p] - step;
        for (size_t i = 0; i < count; i++) {
            moved[p] = up;
            double above = residual(task, i, moved);
            moved[p] = down;
            jacobian[p * count + i] = (above - residual(task, i, moved)) / (up - down);
        }
        moved[p] = parameters[p];
    }
}

static double dot(const double *a, const double *b, size_t count)
{
    double sum = 0;
    for (size_t i = 0; i < count; i++)
        sum += a[i] * b[i];
    return sum;
}

/* J = Q R: the columns of Q over J, R with the columns' own lengths in it. */
struct factors {
    double r[NUMERIC_PARAMETERS_MAX][NUMERIC_PARAMETERS_MAX];
    double length[NUMERIC_PARAMETERS_MAX];
};

/* What is left of a column of length 1 when it is the sum of others: differences are this coarse.
 */
static const double dependent = 1e-9;

/*
 * Columns are scaled to length 1 first and orthogonalised twice: nearly equal ones (Bennett5) would
 * lose everything in J'J. false: the columns are dependent.
 */
static bool factorise(double *jacobian, size_t count, size_t parameter_count,
                      struct factors *factors)
{
    memset(factors, 0, sizeof *factors);
    for (size_t k = 0; k < parameter_count; k++) {
        double *column = jacobian + k * count;
        double length = sqrt(dot(column, column, count));
        if (!(length > 0) || !isfinite(length))
            return false;
        factors->length[k] = length;
        for (size_t i = 0; i < count; i++)
            column[i] /= length;
        for (int pass = 0; pass < 2; pass++)
            for (size_t j = 0; j < k; j++) {
                double along = dot(jacobian + j * count, column, count);
                factors->r[j][k] += along;
                for (size_t i = 0; i < count; i++)
                    column[i] -= along * jacobian[j * count + i];
            }
        double left = sqrt(dot(column, column, count));
        if (!(left > dependent))
            return false;
        factors->r[k][k] = left;
        for (size_t i = 0; i < count; i++)
            column[i] /= left;
    }
    return true;
}

/* solution = inverse(R) * right, lengths undone. */
static void solve_upper(const struct factors *factors, size_t parameter_count, const double *right,
                        double *solution)
{
    for (size_t j = parameter_count; j-- > 0;) {
        double sum = right[j];
        for (size_t k = j + 1; k < parameter_count; k++)
            sum -= factors->r[j][k] * solution[k];
        solution[j] = sum / factors->r[j][j];
    }
    for (size_t j = 0; j < parameter_count; j++)
        solution[j] /= factors->length[j];
}

/* Square roots of the diagonal of inverse(J'J) = inverse(R)*inverse(R)'. */
static void root_diagonal(const struct factors *factors, size_t parameter_count, double *roots)
{
    double squares[NUMERIC_PARAMETERS_MAX] = {0};
    for (size_t k = 0; k < parameter_count; k++) {
        double unit[NUMERIC_PARAMETERS_MAX] = {0}, column[NUMERIC_PARAMETERS_MAX];
        unit[k] = 1;
        solve_upper(factors, parameter_count, unit, column);
        for (size_t j = 0; j < parameter_count; j++)
            squares[j] += column[j] * column[j];
    }
    for (size_t j = 0; j < parameter_count; j++)
        roots[j] = sqrt(squares[j]);
}

static double sum_of_squares(const struct fit_task *task, const double *parameters, size_t count)
{
    double sum = 0;
    for (size_t i = 0; i < count; i++) {
        double r = residual(task, i, parameters);
        sum += r * r;
    }
    return sum;
}

/*
 * A few Gauss-Newton steps with central differences from where MINPACK stopped: its forward
 * differences leave the fifth digit open (Lanczos3). A step that does not lessen the sum is not
 * taken. Leaves the factors at the end point. false: singular.
 */
static bool polish(const struct fit_task *task, size_t count, size_t parameter_count,
                   double *parameters, struct factors *factors)
{
    double *jacobian = memory_get_cleared(count * (parameter_count + 1), sizeof *jacobian);
    double *values = jacobian + count * parameter_count;
    double sum = sum_of_squares(task, parameters, count);
    bool regular = false;
    for (int round = 0; round < 10; round++) {
        double right[NUMERIC_PARAMETERS_MAX], step[NUMERIC_PARAMETERS_MAX];
        double moved[NUMERIC_PARAMETERS_MAX];
        fill_jacobian(task, parameters, parameter_count, count, jacobian);
        regular = factorise(jacobian, count, parameter_count, factors);
        if (!regular)
            break;
        for (size_t i = 0; i < count; i++)
            values[i] = residual(task, i, parameters);
        for (size_t p = 0; p < parameter_count; p++)
            right[p] = -dot(jacobian + p * count, values, count);
        solve_upper(factors, parameter_count, right, step);
        for (size_t p = 0; p < parameter_count; p++)
            moved[p] = parameters[p] + step[p];
        double moved_sum = sum_of_squares(task, moved, count);
        if (!(moved_sum < sum))
            break;
        memcpy(parameters, moved, parameter_count * sizeof *moved);
        sum = moved_sum;
    }
    free(jacobian);
    return regular;
}

enum numeric_status numeric_least_squares(numeric_model model, const void *context, const double *x,
                                          const double *y, const double *sigma, size_t count,
                                          const double *start, size_t parameter_count,
                                          struct numeric_fit *fit)
{
    assert(parameter_count >= 1 && parameter_count <= NUMERIC_PARAMETERS_MAX && count <= INT_MAX);
    if (count <= parameter_count)
        return NUMERIC_TOO_FEW;
    struct fit_task task = {model, context, x, y, sigma};
    struct numeric_fit found = {.freedom = count - parameter_count};
    memcpy(found.parameters, start, parameter_count * sizeof *start);
    if (!minimise(&task, count, parameter_count, found.parameters))
        return NUMERIC_NOT_CONVERGED;
    struct factors factors;
    bool regular = polish(&task, count, parameter_count, found.parameters, &factors);
    found.sum_of_squares = sum_of_squares(&task, found.parameters, count);
    if (!isfinite(found.sum_of_squares))
        return NUMERIC_NOT_CONVERGED;
    if (!regular)
        return NUMERIC_SINGULAR;
    found.residual_sd = sqrt(found.sum_of_squares / (double)found.freedom);
    root_diagonal(&factors, parameter_count, found.standard_errors);
    for (size_t p = 0; p < parameter_count && !sigma; p++)
        found.standard_errors[p] *= found.residual_sd;
    *fit = found;
    return NUMERIC_OK;
}
