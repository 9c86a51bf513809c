/* Conics of revolution: paraboloid, ellipsoid, hyperboloid (one sheet of two), sphere.
 *
 * Vertex form, which stays exact for axial rays and for huge focal lengths: with s the distance
 * from the vertex along the axis, rho the distance from the axis, c the vertex curvature and e the
 * eccentricity,
 *
 *     c (rho^2 + (1 - e^2) s^2) = 2 s ,    c = 1 / (f (1 + e)) ,
 *
 * f being the distance from the vertex to the near focus (at s = +f). The sheet meant is the one
 * through the vertex. */
#pragma once

#include "base/vec3.h"

#include <stdbool.h>

typedef struct ev_conic {
    ev_vec3 vertex;
    ev_vec3 axis; /* unit, from the vertex toward the near focus */
    double eccentricity;
    double curvature; /* 1/m, at the vertex, > 0 */
} ev_conic;

/* From the near focus, the unit axis (vertex toward that focus) and their distance (> 0). */
ev_conic ev_conic_make(ev_vec3 near_focus, ev_vec3 axis, double vertex_to_focus,
                       double eccentricity);

ev_vec3 ev_conic_near_focus(const ev_conic *conic);

/* The other focus: beyond the near one for an ellipsoid, behind the vertex for a hyperboloid.
 * Infinite for a paraboloid. */
ev_vec3 ev_conic_far_focus(const ev_conic *conic);

/* Distances t0 <= t1 (m) along origin + t direction (unit) at which the ray crosses the sheet
 * through the vertex; returns 0, 1 or 2. Every t is reported, also behind the origin. */
int ev_conic_intersect(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double t[2]);

/* The farther of them alone, for conics that are not hyperboloids: where the ray leaves the side of
 * the near focus. */
bool ev_conic_exit(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double *t);

/* Gradient of ev_conic_side; its length is 1 at the vertex. */
static inline ev_vec3 ev_conic_gradient(const ev_conic *conic, ev_vec3 point)
{
    ev_vec3 x = ev_vec3_sub(point, conic->vertex);
    double e = conic->eccentricity, s = ev_vec3_dot(x, conic->axis);
    return ev_vec3_along(ev_vec3_scale(conic->curvature, x), -1.0 - conic->curvature * e * e * s,
                         conic->axis);
}

/* Unit normal at a point of the surface, on the side of the near focus. Every ray asks for it. */
static inline ev_vec3 ev_conic_normal(const ev_conic *conic, ev_vec3 point)
{
    return ev_vec3_scale(-1.0, ev_vec3_unit(ev_conic_gradient(conic, point)));
}

/* A direction mirrored at a point of the surface: no square root, unlike by way of the normal. */
static inline ev_vec3 ev_conic_reflect(const ev_conic *conic, ev_vec3 point, ev_vec3 direction)
{
    ev_vec3 g = ev_conic_gradient(conic, point);
    return ev_vec3_along(direction, -2.0 * ev_vec3_dot(direction, g) / ev_vec3_dot(g, g), g);
}

/* The point of the surface on the half line from the near focus through `toward`:
 * r = f (1 + e) / (1 + e cos psi). False where the half line misses the sheet (hyperboloid). */
bool ev_conic_project(const ev_conic *conic, ev_vec3 toward, ev_vec3 *point);

/* Second fundamental form: curvature of the surface at `point` along the tangent vectors a and b,
 * positive where it bends toward the side of ev_conic_normal. */
double ev_conic_bend(const ev_conic *conic, ev_vec3 point, ev_vec3 a, ev_vec3 b);

/* Whether a point lies on the near focus's side of the sheet through the vertex. */
bool ev_conic_contains(const ev_conic *conic, ev_vec3 point);

/* Signed residual of the vertex form times 1/2, in metres: negative on the focus side of the
 * surface near the vertex, 0 on it. */
double ev_conic_side(const ev_conic *conic, ev_vec3 point);
