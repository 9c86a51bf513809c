/* A second way to the same physics, for tests only: written from the definitions, on nothing but
 * the numbers of a design, and sharing no code with src/optics (vectors apart).
 *
 * Mirrors are kept by their foci: a subreflector is the locus |Q - B| + |Q - A| = 2a (ellipsoid) or
 * |Q - B| - |Q - A| = 2a (hyperboloid about A), A the prime focus, B the feed focus. Rays to a
 * point of the aperture are found by shooting, not by Fermat's path. Powers are contour integrals
 * on the feed's sphere (reference_shares.c), where the product integrates areas. */
#pragma once

#include "optics/design.h"
#include "optics/shadow.h"

typedef struct ev_reference {
    const ev_design *design;
    double focal_length, offset, radius, hole; /* m; hole and aperture by radius */
    bool dual, ellipsoid;
    ev_vec3 prime, other; /* foci of the sub as designed */
    double major;         /* 2a */
    ev_vec3 rim_centre, rim_long, rim_short, rim_normal;
    double semi_long, semi_short; /* with oversize */
    ev_vec3 turn[3];              /* rows; of the misplaced sub, about `pivot` */
    ev_vec3 pivot, shift;
    ev_vec3 feed, axis, ex, ey; /* phase centre and frame of the feed */
    double half_extent;         /* rad */
    double exponent, rate, norm;
    bool gaussian;
    ev_vec3 bodies[EV_FEED_CAPACITY]; /* x, y and, as z, the radius of their shadows */
    int body_count;
} ev_reference;

/* Of the design's feed number `feed`, cos_power or gaussian. */
ev_reference ev_reference_make(const ev_design *design, int feed);

/* Share of the power within theta of the axis. */
double ev_reference_share(const ev_reference *reference, double theta);

/* Gain (mean over the sphere 1) at theta. */
double ev_reference_gain(const ev_reference *reference, double theta);

/* One ray through the mirrors. `inside` > 0 within the sub's rim (1 for single mirrors); x, y where
 * it meets the main paraboloid; path from the phase centre to there. False when it meets none. */
typedef struct ev_reference_ray {
    ev_vec3 on_sub, on_main, leaving_sub;
    double inside, path;
} ev_reference_ray;

bool ev_reference_trace(const ev_reference *reference, ev_vec3 direction, ev_reference_ray *ray);

/* Direction from the feed whose ray lands over (x, y), and that ray. False when none is found. */
bool ev_reference_aim(const ev_reference *reference, double x, double y, ev_vec3 *direction,
                      ev_reference_ray *ray);

/* Direction from the feed to a point of the placed sub's rim at the angle t. */
ev_vec3 ev_reference_rim(const ev_reference *reference, double t);

/* The six shares, each a contour integral; they are not made to sum to 1. False where the outlines
 * found do not close. */
bool ev_reference_shares(const ev_reference *reference, double shares[EV_FATE_COUNT]);
