/* What stands before the aperture, as outlines in the aperture plane (x, y in m, antenna frame).
 *
 * Plane-wave shadows: the subreflector's rim and the feed bodies are projected along z; struts are
 * straight strips about the aperture centre, cut by the circles of their radii. Precedence, once a
 * point over the hole is out: subreflector, feed body, struts. Shadow integrals run on the exact
 * outlines (ev_shadow_slice), never on a mask. */
#pragma once

#include "base/vec3.h"

#include <stdbool.h>

/* Fates: how each ray, and each watt, ends. */
typedef enum {
    EV_FATE_APERTURE,
    EV_FATE_PAST_SUB,
    EV_FATE_PAST_MAIN, /* outside the rim or through the hole */
    EV_FATE_SHADOW_SUB,
    EV_FATE_SHADOW_FEED,
    EV_FATE_SHADOW_STRUTS,
    EV_FATE_COUNT,
} ev_fate;

enum { EV_SHADOW_BODY_CAPACITY = 8, EV_SHADOW_STRIP_CAPACITY = 256, EV_SLICE_CAPACITY = 600 };

/* An ellipse in the aperture plane: centre + semi-axis vectors u, v (need not be orthogonal). */
typedef struct ev_outline {
    double x, y;
    double ux, uy, vx, vy;
} ev_outline;

typedef struct ev_strip {
    double angle; /* rad, about the aperture centre */
    double half_width, from, to;
    int strut; /* index into design.struts */
} ev_strip;

typedef struct ev_shadows {
    double centre_x, radius, hole_radius; /* the aperture */
    bool has_sub;
    ev_outline sub;
    ev_outline bodies[EV_SHADOW_BODY_CAPACITY];
    int body_count;
    ev_strip strips[EV_SHADOW_STRIP_CAPACITY];
    int strip_count;
} ev_shadows;

/* Fate of a point of the aperture plane: aperture, past_main (hole or outside), or a shadow. */
ev_fate ev_shadow_at(const ev_shadows *shadows, double x, double y);

/* Along the radius at angle phi from the aperture centre, the shadowed intervals [from, to] with
 * their fate, not overlapping, rising; the hole and what lies outside the rim are left out.
 * Returns their number. */
typedef struct ev_shadow_interval {
    double from, to;
    ev_fate fate;
    int from_id, to_id; /* which curve ends it there: equal ids, same make-up */
} ev_shadow_interval;

int ev_shadow_slice(const ev_shadows *shadows, double phi,
                    ev_shadow_interval intervals[EV_SLICE_CAPACITY]);

/* Angles (rad, rising, in [0, 2 pi]; first 0, last 2 pi) near which the make-up of a slice can
 * change: ends of strips, tangents and extremes of outlines. Crossings between outlines fall
 * between them and are found by bisection (quadrature.h). Returns their number. */
int ev_shadow_seeds(const ev_shadows *shadows, double *angles, int capacity);
