#include "table.h"

#include <stdio.h>

static unsigned differing;

static void print_row(const struct origin_of_rows *origin, const char *what, const char *expected,
                      double got, const char *tolerance, bool good)
{
    if (!good)
        differing++;
    printf("%s\t%s\t%s\t%s\t%s\t%.6g\t%s\t%s\n", origin->group, what, origin->source,
           trust_text(origin->trust), expected, got, tolerance, good ? "ok" : "DIFFERS");
}

void row_close(const struct origin_of_rows *origin, const char *what, double expected, double got,
               double tolerance)
{
    char wanted[40], allowed[40];
    snprintf(wanted, sizeof wanted, "%.8g", expected);
    snprintf(allowed, sizeof allowed, "%.2g", tolerance);
    print_row(origin, what, wanted, got, allowed, fabs(got - expected) <= tolerance);
}

void row_relative(const struct origin_of_rows *origin, const char *what, double expected,
                  double got, double share)
{
    char wanted[40], allowed[40];
    snprintf(wanted, sizeof wanted, "%.8g", expected);
    snprintf(allowed, sizeof allowed, "%.2g %%", 100 * share);
    print_row(origin, what, wanted, got, allowed, fabs(got - expected) <= share * fabs(expected));
}

void row_between(const struct origin_of_rows *origin, const char *what, double low, double high,
                 double got)
{
    char wanted[60];
    snprintf(wanted, sizeof wanted, "%.4g to %.4g", low, high);
    print_row(origin, what, wanted, got, "as stated", got >= low && got <= high);
}

unsigned rows_differing(void)
{
    return differing;
}

/* ---- numbers */

struct draws draws_from(unsigned long long seed)
{
    struct draws draws;
    for (int i = 0; i < 4; i++) {
        unsigned long long z = (seed += 0x9E3779B97F4A7C15ULL);
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ULL;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EBULL;
        draws.state[i] = z ^ (z >> 31);
    }
    return draws;
}

static unsigned long long rotate(unsigned long long x, int by)
{
    return (x << by) | (x >> (64 - by));
}

double draw_uniform(struct draws *draws)
{
    unsigned long long *s = draws->state, result = rotate(s[1] * 5, 7) * 9, t = s[1] << 17;
    s[2] ^= s[0];
    s[3] ^= s[1];
    s[1] ^= s[2];
    s[0] ^= s[3];
    s[2] ^= t;
    s[3] = rotate(s[3], 45);
    return ((double)(result >> 11) + 0.5) / 9007199254740992.0;
}

double draw_normal(struct draws *draws)
{
    double radius = sqrt(-2 * log(draw_uniform(draws)));
    return radius * cos(6.283185307179586 * draw_uniform(draws));
}

double draw_rectangular(struct draws *draws, double half_width)
{
    return half_width * (2 * draw_uniform(draws) - 1);
}

int main(void)
{
    rows_of_fits();
    rows_of_uncertainty();
    rows_of_reference();
    rows_of_bench();
    rows_of_valves();
    rows_of_monte_carlo();
    return rows_differing() ? 1 : 0;
}
