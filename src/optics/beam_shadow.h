/* Quadrature points over what is shadowed, dense enough for a given phase toward a direction.
 * Private to optics. Each obstacle has points in its own coordinates (shadow.h), so that their
 * number grows with its size in wavelengths and not with the dish's. */
#pragma once

#include "optics/shadow.h"

typedef struct ev_shadow_points {
    double *x, *y, *weight; /* malloc'd; m, m, m^2 */
    int count, capacity;
} ev_shadow_points;

/* phase: radians from the aperture's centre to its rim (ev_rings_phase). */
void ev_shadow_points_make(const ev_shadows *shadows, double phase, ev_shadow_points *points);
void ev_shadow_points_free(ev_shadow_points *points);
