/* Vectors of three doubles, by value. Metres or direction cosines in the antenna frame unless a
 * caller says otherwise. Everything here is total: no function traps, a NaN in gives a NaN out. */
#pragma once

#include <complex.h>
#include <math.h>

#define EV_PI 3.14159265358979323846
#define EV_LIGHT_SPEED 299792458.0 /* m/s, exact by the definition of the metre */

typedef struct ev_vec3 {
    double x, y, z;
} ev_vec3;

/* Complex amplitudes of a field vector (time factor exp(+jwt)). */
typedef struct ev_cvec3 {
    double _Complex x, y, z;
} ev_cvec3;

static inline ev_vec3 ev_vec3_make(double x, double y, double z)
{
    return (ev_vec3){x, y, z};
}

static inline ev_vec3 ev_vec3_add(ev_vec3 a, ev_vec3 b)
{
    return (ev_vec3){a.x + b.x, a.y + b.y, a.z + b.z};
}

static inline ev_vec3 ev_vec3_sub(ev_vec3 a, ev_vec3 b)
{
    return (ev_vec3){a.x - b.x, a.y - b.y, a.z - b.z};
}

static inline ev_vec3 ev_vec3_scale(double s, ev_vec3 a)
{
    return (ev_vec3){s * a.x, s * a.y, s * a.z};
}

/* a + s b */
static inline ev_vec3 ev_vec3_along(ev_vec3 a, double s, ev_vec3 b)
{
    return (ev_vec3){a.x + s * b.x, a.y + s * b.y, a.z + s * b.z};
}

static inline double ev_vec3_dot(ev_vec3 a, ev_vec3 b)
{
    return a.x * b.x + a.y * b.y + a.z * b.z;
}

static inline ev_vec3 ev_vec3_cross(ev_vec3 a, ev_vec3 b)
{
    return (ev_vec3){a.y * b.z - a.z * b.y, a.z * b.x - a.x * b.z, a.x * b.y - a.y * b.x};
}

static inline double ev_vec3_length(ev_vec3 a)
{
    return sqrt(ev_vec3_dot(a, a));
}

static inline ev_vec3 ev_vec3_unit(ev_vec3 a)
{
    return ev_vec3_scale(1.0 / ev_vec3_length(a), a);
}

/* Angle between two vectors, [0, pi]; well conditioned near 0 and pi. */
static inline double ev_vec3_angle(ev_vec3 a, ev_vec3 b)
{
    return atan2(ev_vec3_length(ev_vec3_cross(a, b)), ev_vec3_dot(a, b));
}

/* a turned right-handed about the unit vector axis (Rodrigues). */
static inline ev_vec3 ev_vec3_turn(ev_vec3 a, ev_vec3 axis, double angle)
{
    double c = cos(angle), s = sin(angle);
    ev_vec3 turned = ev_vec3_along(ev_vec3_scale(c, a), s, ev_vec3_cross(axis, a));
    return ev_vec3_along(turned, (1.0 - c) * ev_vec3_dot(axis, a), axis);
}

/* v mirrored at a surface with unit normal n, as a ray direction: v - 2 (v.n) n. */
static inline ev_vec3 ev_vec3_reflect(ev_vec3 v, ev_vec3 n)
{
    return ev_vec3_along(v, -2.0 * ev_vec3_dot(v, n), n);
}
