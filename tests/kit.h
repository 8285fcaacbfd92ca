/*
 * What cmocka 1.1.5 lacks: asserts on doubles that say where, what and how far off.
 */
#ifndef TESTS_KIT_H
#define TESTS_KIT_H

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>

#include <cmocka.h>

/* |actual - expected| <= tolerance (absolute). */
#define assert_close(actual, expected, tolerance)                                                  \
    kit_assert_close((actual), (expected), (tolerance), #actual, __FILE__, __LINE__)

/* |actual - expected| <= tolerance * |expected|. */
#define assert_relative(actual, expected, tolerance)                                               \
    kit_assert_close((actual), (expected), (tolerance)*fabs((double)(expected)), #actual,          \
                     __FILE__, __LINE__)

static inline void kit_assert_close(double actual, double expected, double tolerance,
                                    const char *what, const char *file, int line)
{
    if (fabs(actual - expected) <= tolerance)
        return;
    print_error("%s is %.10g, not %.10g (off by %.3g, allowed %.3g)\n", what, actual, expected,
                actual - expected, tolerance);
    _fail(file, line);
}

#endif
