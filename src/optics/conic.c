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

/* A ray in the conic's own terms: from the vertex, with its components along the axis. */
typedef struct local_ray {
    ev_vec3 o, d;
    double os, ds;
} local_ray;

static inline local_ray localize(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction)
{
    ev_vec3 o = ev_vec3_sub(origin, conic->vertex);
    return (local_ray){o, direction, ev_vec3_dot(o, conic->axis),
                       ev_vec3_dot(direction, conic->axis)};
}

/* One Newton step on f along the ray takes out what cancellation left in the closed form. */
static inline double polish(const ev_conic *conic, const local_ray *ray, double t)
{
    double c = conic->curvature, e2 = conic->eccentricity * conic->eccentricity;
    ev_vec3 x = ev_vec3_along(ray->o, t, ray->d);
    double s = ray->os + t * ray->ds;
    double value = 0.5 * c * (ev_vec3_dot(x, x) - e2 * s * s) - s;
    double slope = c * (ev_vec3_dot(x, ray->d) - e2 * s * ray->ds) - ray->ds;
    double step = value / slope;
    return fabs(step) < 1e-6 * (fabs(t) + 1.0) ? t - step : t;
}

/* a t^2 + 2 b t + k = 0. */
typedef struct quadratic {
    double a, b, k, disc;
} quadratic;

static inline quadratic quadratic_of(const ev_conic *conic, const local_ray *ray)
{
    double c = conic->curvature, e2 = conic->eccentricity * conic->eccentricity, ds = ray->ds;
    /* a vanishes for a ray along the axis of a paraboloid, and has to do so from above: a rounded
     * 1 - ds^2 below 0 would put the far crossing at the wrong end */
    ev_vec3 across = ev_vec3_along(ray->d, -ds, conic->axis);
    quadratic q = {.a = c * (ev_vec3_dot(across, across) + (1.0 - e2) * ds * ds),
                   .b = c * (ev_vec3_dot(ray->o, ray->d) - e2 * ray->os * ds) - ds,
                   .k = c * (ev_vec3_dot(ray->o, ray->o) - e2 * ray->os * ray->os) - 2.0 * ray->os};
    q.disc = q.b * q.b - q.a * q.k;
    return q;
}

int ev_conic_intersect(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double t[2])
{
    local_ray ray = localize(conic, origin, direction);
    quadratic form = quadratic_of(conic, &ray);
    if (!(form.disc >= 0.0))
        return 0;
    double q = -(form.b + copysign(sqrt(form.disc), form.b));
    double roots[2] = {q / form.a, form.k / q};
    int first = roots[0] > roots[1], count = 0;
    for (int i = 0; i < 2; i++) {
        double root = roots[i ^ first];
        if (isfinite(root) && on_sheet(conic, ray.os + root * ray.ds))
            t[count++] = polish(conic, &ray, root);
    }
    return count;
}

bool ev_conic_exit(const ev_conic *conic, ev_vec3 origin, ev_vec3 direction, double *t)
{
    local_ray ray = localize(conic, origin, direction);
    quadratic form = quadratic_of(conic, &ray);
    if (!(form.disc >= 0.0))
        return false;
    double root = sqrt(form.disc);
    double last = form.b > 0.0 ? -form.k / (form.b + root) : (root - form.b) / form.a;
    *t = polish(conic, &ray, last);
    return isfinite(*t);
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
    return hessian / ev_vec3_length(ev_conic_gradient(conic, point));
}
