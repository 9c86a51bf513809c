/* Aimed rays: the field at chosen points of the main reflector.
 *
 * Single mirror: the ray is the straight line from the phase centre. Two mirrors: the point Q on
 * the subreflector makes the path feed - Q - P stationary (Fermat); solved by damped Newton on the
 * gradient from the closed form of the undisplaced system. The conic is continued beyond its rim.
 *
 * Amplitude: sqrt(dP/dA), P the share of the feed's power, A the projected aperture area, from the
 * Jacobian of the ray map (conservation of power along a tube). */
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
    ev_cvec3 field;    /* unit polarization vector after the last reflection */
    double sub_inside; /* dual: ev_sub_inside(Q), else 1 */
    bool lit;          /* false when no ray reaches P */
} ev_sample;

ev_sample ev_aperture_sample(const ev_antenna *antenna, int feed, double x, double y);

/* Quadrature nodes over the aperture outside the hole: Gauss in radius, uniform in angle. Fields
 * are separate arrays of `count`. */
typedef struct ev_nodes {
    int radial, around, count;
    double *x, *y, *weight; /* m, m, m^2 */
    double *path;           /* m */
    double *density;        /* 1/m^2 */
    double *phase;          /* rad */
    double *co;             /* |E_co| / |E| signed for linear, real part of the co field */
    void *block;            /* one allocation behind all of it */
} ev_nodes;
