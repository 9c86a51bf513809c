/* Conics of revolution in vertex form. Called by everything that meets a mirror; knows nothing of
 * rims or antennas. With X the vector from the vertex and s its component along the axis, the
 * surface is f(X) = c/2 (|X|^2 - e^2 s^2) - s = 0. */
#include "optics/conic.h"

ev_conic ev_conic_make(ev_vec3 near_focus, ev_vec3 axis, double vertex_to_focus,
                       double eccentricity)
{
    return (ev_conic){.vertex = ev_vec3_along(near_focus, -vertex_to_focus, axis),
                      .axis = axis,
                      .eccentricity = eccentricity,
                      .curvature = 1.0 / (vertex_to_focus * (1.0 + eccentricity))};
}

static double near_distance(const ev_conic *conic)
{
    return 1.0 / (conic->curvature * (1.0 + conic->eccentricity));
}

ev_vec3 ev_conic_near_focus(const ev_conic *conic)
{
    return ev_vec3_along(conic->vertex, near_distance(conic), conic->axis);
}

ev_vec3 ev_conic_far_focus(const ev_conic *conic)
{
    double e = conic->eccentricity;
    return ev_vec3_along(conic->vertex, near_distance(conic) * (1.0 + e) / (1.0 - e), conic->axis);
}

/* A hyperboloid has another sheet behind the vertex; the other conics are whole. */
static bool on_sheet(const ev_conic *conic, double s)
{
    double e = conic->eccentricity;
    return e <= 1.0 || 1.0 + conic->curvature * (e * e - 1.0) * s > 0.0;
}

double ev_conic_side(const ev_conic *conic, ev_vec3 point)
{
    ev_vec3 x = ev_vec3_sub(point, conic->vertex);
    double s = ev_vec3_dot(x, conic->axis), es = conic->eccentricity * s;
    return 0.5 * conic->curvature * (ev_vec3_dot(x, x) - es * es) - s;
}

bool ev_conic_contains(const ev_conic *conic, ev_vec3 point)
{
    double s = ev_vec3_dot(ev_vec3_sub(point, conic->vertex), conic->axis);
    return ev_conic_side(conic, point) < 0.0 && on_sheet(conic, s);
}

static ev_vec3 gradient(const ev_conic *conic, ev_vec3 point)
{
    ev_vec3 x = ev_vec3_sub(point, conic->vertex);
    double e = conic->eccentricity, s = ev_vec3_dot(x, conic->axis);
    return ev_vec3_along(ev_vec3_scale(conic->curvature, x), -1.0 - conic->curvature * e * e * s,
                         conic->axis);
}

/* One Newton step on f along the ray takes out what cancellation left in the closed form. */
static double polish(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double t)
{
    ev_vec3 point = ev_vec3_along(origin, t, direction);
    double slope = ev_vec3_dot(gradient(conic, point), direction);
    double step = ev_conic_side(conic, point) / slope;
    return isfinite(step) && fabs(step) < 1e-6 * (fabs(t) + 1.0) ? t - step : t;
}

int ev_conic_intersect(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double t[2])
{
    double c = conic->curvature, e2 = conic->eccentricity * conic->eccentricity;
    ev_vec3 o = ev_vec3_sub(origin, conic->vertex);
    double os = ev_vec3_dot(o, conic->axis), ds = ev_vec3_dot(direction, conic->axis);
    /* a t^2 + 2 b t + k = 0; a vanishes for a ray along the axis of a paraboloid, and has to do so
     * from above: a rounded 1 - ds^2 below 0 would put the far crossing at the wrong end */
    ev_vec3 across = ev_vec3_along(direction, -ds, conic->axis);
    double a = c * (ev_vec3_dot(across, across) + (1.0 - e2) * ds * ds);
    double b = c * (ev_vec3_dot(o, direction) - e2 * os * ds) - ds;
    double k = c * (ev_vec3_dot(o, o) - e2 * os * os) - 2.0 * os;
    double disc = b * b - a * k;
    if (!(disc >= 0.0))
        return 0;
    double q = -(b + copysign(sqrt(disc), b));
    double roots[2] = {q / a, k / q};
    int count = 0;
    for (int i = 0; i < 2; i++) {
        if (!isfinite(roots[i]) || !on_sheet(conic, os + roots[i] * ds))
            continue;
        t[count++] = polish(conic, origin, direction, roots[i]);
    }
    if (count == 2 && t[0] > t[1]) {
        double swap = t[0];
        t[0] = t[1];
        t[1] = swap;
    }
    return count;
}

ev_vec3 ev_conic_normal(const ev_conic *conic, ev_vec3 point)
{
    return ev_vec3_scale(-1.0, ev_vec3_unit(gradient(conic, point)));
}

bool ev_conic_project(const ev_conic *conic, ev_vec3 toward, ev_vec3 *point)
{
    ev_vec3 focus = ev_conic_near_focus(conic);
    ev_vec3 direction = ev_vec3_unit(ev_vec3_sub(toward, focus));
    double open = 1.0 - conic->eccentricity * ev_vec3_dot(direction, conic->axis);
    if (!(open > 0.0))
        return false;
    *point = ev_vec3_along(focus, 1.0 / (conic->curvature * open), direction);
    return true;
}

double ev_conic_bend(const ev_conic *conic, ev_vec3 point, ev_vec3 a, ev_vec3 b)
{
    double e2 = conic->eccentricity * conic->eccentricity;
    double along = ev_vec3_dot(a, conic->axis) * ev_vec3_dot(b, conic->axis);
    double hessian = conic->curvature * (ev_vec3_dot(a, b) - e2 * along);
    return hessian / ev_vec3_length(gradient(conic, point));
}
