/* Bessel functions in lanes; see the header for the methods. Called once for every block of rings
 * and every direction, so it allocates nothing. */
#include "optics/beam_bessel.h"

#include <math.h>
#include <string.h>

enum { HANKEL_PAIRS = 9, HANKEL_FROM = 25 };

/* Terms a_k(nu) / x^k, a_k = (4 nu^2 - 1)(4 nu^2 - 9) ... (4 nu^2 - (2k - 1)^2) / (k! 8^k), summed
 * by Horner: P takes the even, Q the odd ones, with alternating signs. */
static void hankel_sums(double four_nu2, const double *restrict x, double *restrict p,
                        double *restrict q)
{
    double even[HANKEL_PAIRS], odd[HANKEL_PAIRS], a = 1.0;
    for (int k = 0; k < 2 * HANKEL_PAIRS; k++) {
        double sign = (k / 2) % 2 ? -1.0 : 1.0;
        *(k % 2 ? &odd[k / 2] : &even[k / 2]) = sign * a;
        double root = 2.0 * k + 1.0;
        a *= (four_nu2 - root * root) / (8.0 * (k + 1.0));
    }
    double square[EV_LANES];
    for (int i = 0; i < EV_LANES; i++) {
        square[i] = 1.0 / (x[i] * x[i]);
        p[i] = even[HANKEL_PAIRS - 1];
        q[i] = odd[HANKEL_PAIRS - 1];
    }
    for (int k = HANKEL_PAIRS - 2; k >= 0; k--)
        for (int i = 0; i < EV_LANES; i++) {
            p[i] = even[k] + square[i] * p[i];
            q[i] = odd[k] + square[i] * q[i];
        }
    for (int i = 0; i < EV_LANES; i++)
        q[i] /= x[i];
}

/* J_nu = sqrt(2 / pi x) (P cos(chi) - Q sin(chi)), chi = x - (nu/2 + 1/4) pi. */
static void first_two(const double *restrict x, double *restrict j0, double *restrict j1)
{
    double t[EV_LANES], c[EV_LANES], s[EV_LANES], size[EV_LANES];
    double p0[EV_LANES], q0[EV_LANES], p1[EV_LANES], q1[EV_LANES];
    hankel_sums(0.0, x, p0, q0);
    hankel_sums(4.0, x, p1, q1);
    for (int i = 0; i < EV_LANES; i++) {
        t[i] = x[i] * 0.15915494309189533577 - 0.125;
        size[i] = sqrt(0.63661977236758134308 / x[i]);
    }
    ev_lanes_turn(t, c, s);
    for (int i = 0; i < EV_LANES; i++) {
        j0[i] = size[i] * (p0[i] * c[i] - q0[i] * s[i]);
        j1[i] = size[i] * (p1[i] * s[i] + q1[i] * c[i]);
    }
}

static void upward(const double *restrict x, int highest, double *restrict values)
{
    double inverse[EV_LANES], spare[EV_LANES];
    first_two(x, values, highest > 0 ? values + EV_LANES : spare);
    for (int i = 0; i < EV_LANES; i++)
        inverse[i] = 2.0 / x[i];
    for (int m = 1; m < highest; m++) {
        double *now = values + m * EV_LANES;
        for (int i = 0; i < EV_LANES; i++)
            now[i + EV_LANES] = m * inverse[i] * now[i] - now[i - EV_LANES];
    }
}

/* Order from which on J_n(x) is below 1e-18: a margin over the turning point at n = x, and few for
 * tiny arguments, where (2 n / x)^n would overflow. Rises with x. */
static int start_order(double x)
{
    return x < 1e-3 ? 8 : (int)(x + 22.0 + 14.0 * cbrt(x));
}

/* One order down; `sum` collects the even orders. */
static void step_down(double order, double even, const double *restrict inverse,
                      const double *restrict above, const double *restrict now,
                      double *restrict next, double *restrict sum)
{
    for (int i = 0; i < EV_LANES; i++) {
        next[i] = (order + 1.0) * inverse[i] * now[i] - above[i];
        sum[i] += even * next[i];
    }
}

/* Each lane starts at an order of its own; above it, it is zero. */
static void downward(const double *restrict x, int highest, double *restrict values)
{
    double inverse[EV_LANES], sum[EV_LANES] = {0}, rows[3][EV_LANES] = {{0}};
    int start[EV_LANES], lane = EV_LANES - 1;
    for (int i = 0; i < EV_LANES; i++) {
        double argument = fmax(x[i], 1e-20);
        inverse[i] = 2.0 / argument;
        start[i] = start_order(argument);
    }
    int top = start[lane];
    for (int m = highest; m > top; m--)
        memset(values + m * EV_LANES, 0, sizeof sum);
    for (int m = top; m >= 0; m--) {
        double *next = rows[m % 3];
        step_down(m,
                  m == 0  ? 1.0
                  : m % 2 ? 0.0
                          : 2.0,
                  inverse, rows[(m + 2) % 3], rows[(m + 1) % 3], next, sum);
        for (; lane >= 0 && start[lane] == m; lane--)
            next[lane] = 1e-40;
        if (m <= highest)
            memcpy(values + m * EV_LANES, next, sizeof sum);
    }
    for (int i = 0; i < EV_LANES; i++)
        sum[i] = 1.0 / sum[i];
    for (int m = 0; m <= highest && m <= top; m++)
        for (int i = 0; i < EV_LANES; i++)
            values[m * EV_LANES + i] *= sum[i];
}

void ev_bessel_lanes(const double *x, int highest, double *values)
{
    if (x[0] > HANKEL_FROM && x[0] > highest)
        upward(x, highest, values);
    else
        downward(x, highest, values);
}
