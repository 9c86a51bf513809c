/* Arithmetic on EV_LANES values at a time, in loops of fixed length that compilers turn into vector
 * code at -O2 without changing any result: each lane is computed by the same operations whatever
 * the machine. Private to optics; called by the inner sums of the beam, and knows nothing of them.
 */
#pragma once

enum { EV_LANES = 32 };

/* cos and sin of a whole turn times t, |t| < 1e8. The turn is reduced exactly; a quarter of the
 * angle goes through the series to rounding and is doubled twice (error a few 1e-16). */
static inline void ev_lanes_turn(const double *restrict t, double *restrict c, double *restrict s)
{
    const double whole = 6755399441055744.0; /* 1.5 * 2^52: adding it rounds to an integer */
    for (int i = 0; i < EV_LANES; i++) {
        double turn = t[i] - ((t[i] + whole) - whole);
        double a = 1.57079632679489661923 * turn, x = a * a;
        double si =
            a * (1.0 - x * (1.0 / 6 -
                            x * (1.0 / 120 - x * (1.0 / 5040 -
                                                  x * (1.0 / 362880 -
                                                       x * (1.0 / 39916800 -
                                                            x * (1.0 / 6227020800.0 -
                                                                 x * (1.0 / 1307674368000.0))))))));
        double half =
            x * (0.5 - x * (1.0 / 24 - x * (1.0 / 720 -
                                            x * (1.0 / 40320 -
                                                 x * (1.0 / 3628800 -
                                                      x * (1.0 / 479001600 -
                                                           x * (1.0 / 87178291200.0 -
                                                                x * (1.0 / 20922789888000.0))))))));
        double co = 1.0 - half;
        double s2 = 2.0 * si * co, c2 = 1.0 - 2.0 * si * si;
        s[i] = 2.0 * s2 * c2;
        c[i] = 1.0 - 2.0 * s2 * s2;
    }
}
