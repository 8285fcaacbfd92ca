/* The program's least squares on NIST's reference data: certified parameters, standard errors. */
#include "table.h"

#include "assess/numeric.h"
#include "nist_data.h"

#include <stdio.h>

static double saturating(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * (1 - exp(-b[1] * x));
}
static double rational(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * (x * x + b[1] * x) / (x * x + b[2] * x + b[3]);
}
static double three_exponentials(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * exp(-b[1] * x) + b[2] * exp(-b[3] * x) + b[4] * exp(-b[5] * x);
}
static double chwirut(double x, const double *b, const void *context)
{
    (void)context;
    return exp(-b[0] * x) / (b[1] + b[2] * x);
}
static double bennett(double x, const double *b, const void *context)
{
    (void)context;
    return b[0] * pow(b[1] + x, -1 / b[2]);
}

#define DATA(name) name, sizeof name / sizeof name[0]
static const struct strd {
    const char *name;
    numeric_model model;
    const double (*data)[2];
    size_t count, parameters;
    double start[6], certified[6], errors[6];
} sets[] = {
    {"Misra1a",
     saturating,
     DATA(misra1a),
     2,
     {500, 1e-4},
     {2.3894212918E+02, 5.5015643181E-04},
     {2.7070075241E+00, 7.2668688436E-06}},
    {"BoxBOD",
     saturating,
     DATA(box_bod),
     2,
     {1, 1},
     {2.1380940889E+02, 5.4723748542E-01},
     {1.2354515176E+01, 1.0455993237E-01}},
    {"MGH09",
     rational,
     DATA(mgh09),
     4,
     {25, 39, 41.5, 39},
     {1.9280693458E-01, 1.9128232873E-01, 1.2305650693E-01, 1.3606233068E-01},
     {1.1435312227E-02, 1.9633220911E-01, 8.0842031232E-02, 9.0025542308E-02}},
    {"Lanczos3",
     three_exponentials,
     DATA(lanczos3),
     6,
     {1.2, .3, 5.6, 5.5, 6.5, 7.6},
     {8.6816414977E-02, 9.5498101505E-01, 8.4400777463E-01, 2.9515951832E+00, 1.5825685901E+00,
      4.9863565084E+00},
     {1.7197908859E-02, 9.7041624475E-02, 4.1488663282E-02, 1.0766312506E-01, 5.8371576281E-02,
      3.4436403035E-02}},
    {"Chwirut2",
     chwirut,
     DATA(chwirut2),
     3,
     {.1, .01, .02},
     {1.6657666537E-01, 5.1653291286E-03, 1.2150007096E-02},
     {3.8303286810E-02, 6.6621605126E-04, 1.5304234767E-03}},
    {"Bennett5",
     bennett,
     DATA(bennett5),
     3,
     {-2000, 50, .8},
     {-2.5235058043E+03, 4.6736564644E+01, 9.3218483193E-01},
     {2.9715175411E+02, 1.2448871856E+00, 2.0272299378E-02}},
};

void rows_of_fits(void)
{
    static const struct origin_of_rows nist = {
        "Fits", "NIST StRD, nonlinear regression, certified values", TRUST_SEEN};
    for (size_t i = 0; i < sizeof sets / sizeof *sets; i++) {
        const struct strd *set = &sets[i];
        double x[160], y[160];
        for (size_t k = 0; k < set->count; k++) {
            x[k] = set->data[k][0];
            y[k] = set->data[k][1];
        }
        struct numeric_fit fit = {.parameters = {NAN, NAN, NAN, NAN, NAN, NAN}};
        numeric_least_squares(set->model, NULL, x, y, NULL, set->count, set->start, set->parameters,
                              &fit);
        for (size_t k = 0; k < set->parameters; k++) {
            char what[60];
            snprintf(what, sizeof what, "%s b%zu", set->name, k + 1);
            row_relative(&nist, what, set->certified[k], fit.parameters[k], 1e-4);
            snprintf(what, sizeof what, "%s b%zu, standard error", set->name, k + 1);
            row_relative(&nist, what, set->errors[k], fit.standard_errors[k], 1e-3);
        }
    }
}
