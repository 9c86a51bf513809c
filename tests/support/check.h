/* Comparisons of doubles that say both values when they fail. Include after cmocka. */
#pragma once

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

/* |actual - expected| <= tolerance; NaN fails. */
#define assert_near(actual, expected, tolerance)                                                   \
    ev_check_near((actual), (expected), (tolerance), #actual, __FILE__, __LINE__)

/* The same with a tolerance relative to |expected|. */
#define assert_ratio(actual, expected, relative)                                                   \
    ev_check_ratio((actual), (expected), (relative), #actual, __FILE__, __LINE__)

void ev_check_near(double actual, double expected, double tolerance, const char *what,
                   const char *file, int line);
void ev_check_ratio(double actual, double expected, double relative, const char *what,
                    const char *file, int line);
