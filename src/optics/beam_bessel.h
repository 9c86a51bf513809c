/* Bessel functions of the first kind, whole orders, for many arguments at once. Private to optics.
 */
#pragma once

#include "optics/beam_lanes.h"

/* J_0 .. J_highest at EV_LANES rising arguments x >= 0, all finite;
 * values[m * EV_LANES + lane]. Absolute error below 1e-13 up to x = 1e5.
 *
 * Where every argument is above both `highest` and 25: J_0 and J_1 from Hankel's asymptotic series
 * (M. Abramowitz, I. Stegun, "Handbook of Mathematical Functions", 1964, 9.2.5) and the recurrence
 * upward, stable there. Else J. Miller's recurrence downward (ibid., 9.12), normalised by
 * J_0 + 2 (J_2 + J_4 + ...) = 1; orders far above an argument come out as 0. */
void ev_bessel_lanes(const double *x, int highest, double *values);
