/* Aimed rays: the field at chosen points of the main reflector.
 *
 * Single mirror: the ray is the straight line from the phase centre. Two mirrors: the point Q on
 * the subreflector makes the path feed - Q - P stationary (Fermat); solved by damped Newton on the
 * gradient from the closed form of the undisplaced system. The conic is continued beyond its rim.
 *
 * Amplitude: sqrt(dP/dA), P the share of the feed's power, A the projected aperture area, from the
 * Jacobian of the ray map (conservation of power along a tube). Path and amplitude belong to the
 * fixed point P, also for misplaced parts. */
#pragma once

#include "optics/antenna.h"

typedef struct ev_sample {
    ev_vec3 point;     /* P on the main reflector */
    ev_vec3 sub_point; /* Q; dual only */
    ev_vec3 direction; /* unit, leaving the feed */
    ev_vec3 incident;  /* unit, arriving at P */
    double path;       /* m, feed over the mirrors to P */
    double density;    /* 1/m^2, dP/dA; 0 where the feed does not light */
    double phase;      /* rad, of the feed's table, + is late */
    ev_cvec3 arriving; /* unit polarization vector arriving at P */
    ev_cvec3 field;    /* unit polarization vector after the reflection at P */
    double sub_inside; /* dual: ev_sub_inside(Q), else 1 */
    bool reached;      /* false when no ray reaches P */
} ev_sample;

/* The aimed ray of a feed to the main reflector over (x, y). Any (x, y), also outside the rim. */
ev_sample ev_aperture_sample(const ev_antenna *antenna, int feed, double x, double y);

/* Only the path (m) and where the ray left: cheaper, for statistics and roots. NaN if none. */
double ev_aperture_path(const ev_antenna *antenna, int feed, double x, double y, ev_vec3 *direction,
                        ev_vec3 *sub_point);

/* Solid angle at the nominal feed focus per projected aperture area (sr/m^2), nominal geometry. */
double ev_aperture_solid_angle(const ev_antenna *antenna, double x, double y);

/* path - s.P for a sample. */
double ev_sample_error(const ev_sample *sample, ev_vec3 wanted);

/* Field of the feed in a direction: unit polarization vector, power level (mean over the sphere 1)
 * and phase (rad). The level is 0 outside the pattern. */
typedef struct ev_launch {
    ev_cvec3 field;
    double level, phase;
} ev_launch;

ev_launch ev_feed_launch(const ev_antenna *antenna, int feed, ev_vec3 direction);

/* Unit co-polar vector of the feed's polarization for the direction s (Ludwig's third definition:
 * A. Ludwig, IEEE Trans. AP-21, 1973), x or y, rhcp or lhcp. */
ev_cvec3 ev_copolar(ev_polarization polarization, ev_vec3 s);
