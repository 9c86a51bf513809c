/* Random numbers for property tests: a small generator of our own (xorshift64* seeded through a
 * splitmix step), so that a printed seed gives the same antenna on every machine. */
#pragma once

#include <stdint.h>

typedef struct ev_random {
    uint64_t state;
} ev_random;

ev_random ev_random_seeded(uint64_t seed);

/* [0, 1) */
double ev_random_unit(ev_random *random);
double ev_random_between(ev_random *random, double low, double high);

/* Log-uniform between two positive ends. */
double ev_random_log(ev_random *random, double low, double high);

/* 0 .. count - 1 */
int ev_random_pick(ev_random *random, int count);

/* True with the given probability. */
int ev_random_chance(ev_random *random, double probability);
