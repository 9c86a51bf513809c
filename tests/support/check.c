/* Used by every test of numbers. */
#include "check.h"

#include <math.h>

void ev_check_near(double actual, double expected, double tolerance, const char *what,
                   const char *file, int line)
{
    if (fabs(actual - expected) <= tolerance)
        return;
    print_error("%s is %.15g, not %.15g within %.3g (off by %.3g)\n", what, actual, expected,
                tolerance, actual - expected);
    _fail(file, line);
}

void ev_check_ratio(double actual, double expected, double relative, const char *what,
                    const char *file, int line)
{
    ev_check_near(actual, expected, relative * fabs(expected), what, file, line);
}
