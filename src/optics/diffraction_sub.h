/* Currents on the subreflector and the near field they make. Private to optics.
 *
 * J = 2 n x H with H of the feed at infinity's form (S. Silver 1949, ch. 5), within the rim with
 * its oversize. The field of a current element at distance R along the unit vector u, with g =
 * exp(-jkR) / 4 pi R (exact, no far-zone approximation):
 *
 *   H = (jk + 1/R) g J x u
 *   E = -jkZ g [J (1 - j/kR - 1/(kR)^2) - u (u.J) (1 - 3j/kR - 3/(kR)^2)]
 *
 * Fields here are divided by sqrt(2 Z) (E) and sqrt(2 / Z) (H): the power flow is Re(e x h*), per
 * watt that the feed radiates. */
#pragma once

#include "optics/antenna.h"

typedef struct ev_sub_currents {
    double *table; /* blocks of EV_LANES: x, y, z, J real x y z, J imaginary x y z; weighted */
    int count, blocks;
    double wavenumber;
} ev_sub_currents;

typedef struct ev_near_field {
    ev_cvec3 e, h;
} ev_near_field;

/* Largest spread (m) of the path feed - Q - P over Q on the subreflector, for any P on the rim of
 * the main reflector. */
double ev_sub_currents_spread(const ev_antenna *antenna, int feed);

/* Radii x angles enough for the path feed - Q - P to be followed over the subreflector for every P
 * of the main reflector. */
void ev_sub_currents_order(const ev_antenna *antenna, int feed, int *radial, int *around);

/* base: m of path taken off all phases. */
void ev_sub_currents_make(const ev_antenna *antenna, int feed, int radial, int around, double base,
                          ev_sub_currents *currents);
void ev_sub_currents_free(ev_sub_currents *currents);

/* At a point; e is left zero unless asked for. */
ev_near_field ev_sub_currents_field(const ev_sub_currents *currents, ev_vec3 point, bool with_e);
