/* What stands before the aperture, as outlines in the aperture plane (x, y in m, antenna frame).
 *
 * Plane-wave shadows: the subreflector's rim and the feed bodies are projected along z; struts are
 * straight strips about the aperture centre, cut by the circles of their radii. Precedence, once a
 * point over the hole is out: subreflector, feed body, struts. Shadow integrals never run on a
 * mask: each obstacle is swept by lines of its own (radii of an outline from its own centre, lines
 * along a strip), exactly cut where another obstacle rules (ev_shadow_slice). */
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
    double angle;                /* rad, about the aperture centre */
    double cos_angle, sin_angle; /* its direction: every ray asks for it */
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

ev_strip ev_strip_make(double angle, double width, double from, double to, int strut);

/* Fate of a point of the aperture plane: aperture, past_main (hole or outside), or a shadow. */
ev_fate ev_shadow_at(const ev_shadows *shadows, double x, double y);

/* Obstacles in order of precedence: sub, bodies, strips. */
int ev_shadow_count(const ev_shadows *shadows);
ev_fate ev_shadow_fate(const ev_shadows *shadows, int obstacle);
bool ev_shadow_is_strip(const ev_shadows *shadows, int obstacle);

/* A line of an obstacle's sweep: the points (x + v dx, y + v dy). Outlines: u is an angle in
 * [0, 2 pi), v in [0, 1] from the centre to the outline, and areas are `scale` v dv du. Strips: u
 * is the place across, in [-half width, half width], v the distance along, and areas are dv du. */
typedef struct ev_line {
    double x, y, dx, dy;
} ev_line;

ev_line ev_shadow_line(const ev_shadows *shadows, int obstacle, double u);

/* The line that runs through a point (outlines: from their centre through it). */
double ev_shadow_line_through(const ev_shadows *shadows, int obstacle, double x, double y);

double ev_shadow_scale(const ev_shadows *shadows, int obstacle);

/* Size of an obstacle along its lines and across them, m, for choosing numbers of nodes. */
void ev_shadow_extent(const ev_shadows *shadows, int obstacle, double extent[2]);

typedef struct ev_shadow_interval {
    double from, to;
    ev_fate fate;
    int from_id, to_id; /* which curve ends it there: equal ids, same make-up */
} ev_shadow_interval;

/* What of line u the obstacle shadows and nothing that ranks before it does: rising, not
 * overlapping; the hole and what lies outside the rim are left out. Returns their number. */
int ev_shadow_slice(const ev_shadows *shadows, int obstacle, double u,
                    ev_shadow_interval intervals[EV_SLICE_CAPACITY]);

/* Values of u, rising, the first and the last the ends of the sweep, near which the make-up of a
 * slice can change: tangents of other outlines. Crossings lie between them and are found by
 * bisection (quadrature.h). Returns their number. */
int ev_shadow_seeds(const ev_shadows *shadows, int obstacle, double *seeds, int capacity);
