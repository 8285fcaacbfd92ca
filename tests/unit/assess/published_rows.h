/*
 * Figures that others published, for the unit tests and for the table of tests/oracle: NIST's fits,
 * the examples of the GUM, Newcombe's intervals.
 */
#ifndef TESTS_PUBLISHED_ROWS_H
#define TESTS_PUBLISHED_ROWS_H

#include "assess/numeric.h"
#include "assess/uncertainty.h"
#include "nist_data.h"

#include <math.h>

#define PUBLISHED_COUNT(rows) (sizeof(rows) / sizeof(rows)[0])

/* ---- NIST StRD, nonlinear regression: certified parameters, standard errors, sum of squares and
   residual standard deviation, with both published starts */

static inline double saturating(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * (1 - exp(-b[1] * x));
}
static inline double rational(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * (x * x + b[1] * x) / (x * x + b[2] * x + b[3]);
}
static inline double three_exponentials(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * exp(-b[1] * x) + b[2] * exp(-b[3] * x) + b[4] * exp(-b[5] * x);
}
static inline double chwirut(double x, const double *b, const void *context)
{
    (void)context;
    return exp(-b[0] * x) / (b[1] + b[2] * x);
}
static inline double bennett(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * pow(b[1] + x, -1 / b[2]);
}

#define PUBLISHED_DATA(name) name, sizeof name / sizeof name[0]
static const struct published_fit {
    const char *name;
    numeric_model model;
    const double (*data)[2];
    size_t count, parameter_count;
    double starts[2][6];
    double certified[6], errors[6];
    double sum, sd;
} published_fits[] = {
    {"Misra1a",
     saturating,
     PUBLISHED_DATA(misra1a),
     2,
     {{500, 1e-4}, {250, 5e-4}},
     {2.3894212918E+02, 5.5015643181E-04},
     {2.7070075241E+00, 7.2668688436E-06},
     1.2455138894E-01,
     1.0187876330E-01},
    {"BoxBOD",
     saturating,
     PUBLISHED_DATA(box_bod),
     2,
     {{1, 1}, {100, 0.75}},
     {2.1380940889E+02, 5.4723748542E-01},
     {1.2354515176E+01, 1.0455993237E-01},
     1.1680088766E+03,
     1.7088072423E+01},
    {"MGH09",
     rational,
     PUBLISHED_DATA(mgh09),
     4,
     {{25, 39, 41.5, 39}, {0.25, 0.39, 0.415, 0.39}},
     {1.9280693458E-01, 1.9128232873E-01, 1.2305650693E-01, 1.3606233068E-01},
     {1.1435312227E-02, 1.9633220911E-01, 8.0842031232E-02, 9.0025542308E-02},
     3.0750560385E-04,
     6.6279236551E-03},
    {"Lanczos3",
     three_exponentials,
     PUBLISHED_DATA(lanczos3),
     6,
     {{1.2, 0.3, 5.6, 5.5, 6.5, 7.6}, {0.5, 0.7, 3.6, 4.2, 4, 6.3}},
     {8.6816414977E-02, 9.5498101505E-01, 8.4400777463E-01, 2.9515951832E+00, 1.5825685901E+00,
      4.9863565084E+00},
     {1.7197908859E-02, 9.7041624475E-02, 4.1488663282E-02, 1.0766312506E-01, 5.8371576281E-02,
      3.4436403035E-02},
     1.6117193594E-08,
     2.9923229172E-05},
    {"Chwirut2",
     chwirut,
     PUBLISHED_DATA(chwirut2),
     3,
     {{0.1, 0.01, 0.02}, {0.15, 0.008, 0.010}},
     {1.6657666537E-01, 5.1653291286E-03, 1.2150007096E-02},
     {3.8303286810E-02, 6.6621605126E-04, 1.5304234767E-03},
     5.1304802941E+02,
     3.1717133040E+00},
    {"Bennett5",
     bennett,
     PUBLISHED_DATA(bennett5),
     3,
     {{-2000, 50, 0.8}, {-1500, 45, 0.85}},
     {-2.5235058043E+03, 4.6736564644E+01, 9.3218483193E-01},
     {2.9715175411E+02, 1.2448871856E+00, 2.0272299378E-02},
     5.2404744073E-04,
     1.8629312528E-03},
};

static inline enum numeric_status published_fit_solve(const struct published_fit *set, int start,
                                                      struct numeric_fit *fit)
{
    double x[160], y[160];
    for (size_t k = 0; k < set->count; k++) {
        x[k] = set->data[k][0];
        y[k] = set->data[k][1];
    }
    return numeric_least_squares(set->model, NULL, x, y, NULL, set->count, set->starts[start],
                                 set->parameter_count, fit);
}

/* ---- JCGM 100:2008, H.1: length of an end gauge in nm: standard, difference, difference of
   expansion coefficients, temperature, expansion coefficient, difference of temperatures */

static inline double gum_h1_length(const double *x, const void *context)
{
    (void)context;
    return x[0] + x[1] - x[0] * (x[2] * x[3] + x[4] * x[5]);
}

static const struct uncertain gum_h1_inputs[] = {
    {50000623, 25, 18},          {215, 9.7, 25.6}, {0, 0.58e-6, 50}, {-0.1, 0.41, 0},
    {11.5e-6, 1.2e-6, INFINITY}, {0, 0.029, 2}};
#define GUM_H1_LENGTH_NM 50000838.0
#define GUM_H1_U_NM      32.0
#define GUM_H1_FREEDOM   16.7

static inline struct uncertainty_budget gum_h1_budget(void)
{
    return (struct uncertainty_budget){.inputs = gum_h1_inputs,
                                       .input_count = PUBLISHED_COUNT(gum_h1_inputs)};
}

/* ---- JCGM 100:2008, H.2: five simultaneous readings of V, I (mA) and phase; means, their errors
   and correlations from them */

static const double gum_h2_readings[5][3] = {{5.007, 19.663, 1.0456},
                                             {4.994, 19.639, 1.0438},
                                             {5.005, 19.640, 1.0468},
                                             {4.990, 19.685, 1.0428},
                                             {4.999, 19.678, 1.0433}};

struct gum_h2 {
    struct uncertain inputs[3]; /* V, A, rad */
    struct correlation pairs[3];
};

static inline void gum_h2_means(struct gum_h2 *h2)
{
    *h2 = (struct gum_h2){.pairs = {{0, 1, 0}, {0, 2, 0}, {1, 2, 0}}};
    double products[3][3] = {{0}};
    for (int q = 0; q < 3; q++)
        for (int i = 0; i < 5; i++)
            h2->inputs[q].value += gum_h2_readings[i][q] / 5;
    for (int p = 0; p < 3; p++)
        for (int q = 0; q < 3; q++)
            for (int i = 0; i < 5; i++)
                products[p][q] += (gum_h2_readings[i][p] - h2->inputs[p].value) *
                                  (gum_h2_readings[i][q] - h2->inputs[q].value) / 20;
    for (int q = 0; q < 3; q++)
        h2->inputs[q].standard = sqrt(products[q][q]);
    for (int i = 0; i < 3; i++) {
        struct correlation *pair = &h2->pairs[i];
        pair->coefficient = products[pair->first][pair->second] /
                            (h2->inputs[pair->first].standard * h2->inputs[pair->second].standard);
    }
    h2->inputs[1].value *= 1e-3;
    h2->inputs[1].standard *= 1e-3;
}

static inline double gum_h2_resistance(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1] * cos(x[2]);
}
static inline double gum_h2_reactance(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1] * sin(x[2]);
}
static inline double gum_h2_impedance_of(const double *x, const void *context)
{
    (void)context;
    return x[0] / x[1];
}

/* As printed; of X the exact u is 0.2956. */
static const struct gum_h2_result {
    const char *name;
    uncertainty_function function;
    double value, u, u_tolerance;
} gum_h2_results[] = {{"R (ohm)", gum_h2_resistance, 127.732, 0.071, 0.0005},
                      {"X (ohm)", gum_h2_reactance, 219.847, 0.295, 0.001},
                      {"Z (ohm)", gum_h2_impedance_of, 254.260, 0.236, 0.0005}};

/* ---- Newcombe, Statistics in Medicine 17 (1998) 857, table I, method 3 (score without
   correction): x of n, 95 % */

static const struct newcombe_row {
    double x, n, low, high;
} newcombe_rows[] = {
    {81, 263, .2553, .3662}, {15, 148, .0624, .1605}, {0, 20, 0, .1611}, {1, 29, .0061, .1718}};

#endif
