/* A sheet of current over a round aperture, and its expansion in modes. Private to optics (and to
 * the tests that prescribe aperture fields).
 *
 * The sheet lies on z = bend (x^2 + y^2) over the circle of `radius` about (offset, 0), outside
 * hole_radius. A point carries the complex vector j(x, y), the current per unit of PROJECTED area
 * in units that make the gain of direction s, for one watt radiated by the feed,
 *
 *     G = k^2 / 4 pi |I_t(s)|^2,   I(s) = integral j exp(jk (s - reference).P) dA,
 *
 * I_t the part of I square to s (S. Silver, "Microwave Antenna Theory and Design", 1949, ch. 5: the
 * field of a current sheet at infinity). A physical-optics current J = 2 n x H gives
 * j = 2 [i (N.e) - e (N.i)], N = n / n_z, i the direction of arrival, |e|^2 |N.i| = dP/dA. */
#pragma once

#include "base/vec3.h"

#include <stdbool.h>

typedef struct ev_sheet {
    double wavenumber, radius, hole_radius, offset, bend;
    ev_vec3 reference; /* unit; the currents' own tilt points near it, so that j varies slowly */
    /* Currents j exp(jk reference.P) at `count` points. Writes whether each is lit; an unlit one
     * carries none. False: given up (cancelled), results void. */
    bool (*currents)(const void *context, const double *x, const double *y, int count,
                     ev_cvec3 *current, bool *lit);
    const void *context;
    double tolerance;         /* of the expansion, in amplitude, against the whole */
    int first_radial, around; /* samples to begin with; 0: a few. around: a power of two */
} ev_sheet;

enum { EV_MODE_ROWS = 12, EV_MODE_RADIAL_LIMIT = 512, EV_MODE_AROUND_LIMIT = 1024 };

/* j(r, phi) = sum over m and n of a_mn exp(jm phi) P_n(2t - 1), t = (r - hole) / (radius - hole).
 * Row m holds, for each degree, twelve numbers: x, y, z of +m, then of -m, real and imaginary.
 *
 * Sampled on Gauss radii x uniform angles; both are raised until the energy in the highest quarter
 * of the degrees, and of the orders, is below tolerance^2 of all. The expansion separates how fine
 * the LIGHTING is (some 40 x 64 samples for a well focused dish of any size) from how fine the
 * phase toward a direction is, which beam_rings.h does with Bessel functions and no further rays.
 */
typedef struct ev_modes {
    double *coefficients; /* [m][row][degree] */
    int highest, degrees;
    int radial, around; /* samples used */
    double residual;    /* of the expansion, amplitude, relative */
    bool edged;         /* a sample is unlit: the currents end within the sheet, no expansion */
    bool given_up;
} ev_modes;

void ev_modes_make(const ev_sheet *sheet, ev_modes *modes);
void ev_modes_free(ev_modes *modes);
