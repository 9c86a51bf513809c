/* Time for benchmarks: this thread alone, so that a busy machine does not count. */
#pragma once

#include <time.h>

static inline double seconds_now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_THREAD_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}
