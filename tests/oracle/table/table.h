/*
 * One row for each check of the program against something outside it. A program made of these
 * prints them as lines of tab-separated fields:
 *   group, what, source with clause or page, known, expected, got, tolerance, ok | DIFFERS
 */
#ifndef ORACLE_TABLE_H
#define ORACLE_TABLE_H

#include "reference/source.h"

#include <math.h>
#include <stdbool.h>
#include <stddef.h>

/* Where the rows that follow come from. */
struct origin_of_rows {
    const char *group, *source;
    enum trust trust;
};

/* |got - expected| <= tolerance, absolute. */
void row_close(const struct origin_of_rows *origin, const char *what, double expected, double got,
               double tolerance);
/* |got - expected| <= share * |expected|. */
void row_relative(const struct origin_of_rows *origin, const char *what, double expected,
                  double got, double share);
/* got lies between low and high, as stated. */
void row_between(const struct origin_of_rows *origin, const char *what, double low, double high,
                 double got);

/* Deterministic numbers: xoshiro256** (Blackman and Vigna), seeded by splitmix64. */
struct draws {
    unsigned long long state[4];
};
struct draws draws_from(unsigned long long seed);
double draw_uniform(struct draws *draws); /* 0 to 1, neither included */
double draw_normal(struct draws *draws);  /* mean 0, sd 1 */
double draw_rectangular(struct draws *draws, double half_width);

void rows_of_fits(void);
void rows_of_uncertainty(void);
void rows_of_reference(void);
void rows_of_bench(void);
void rows_of_valves(void);
void rows_of_monte_carlo(void);

/* How many rows differed so far. */
unsigned rows_differing(void);

#endif
