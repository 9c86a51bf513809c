/* Aimed rays. Called for every node of every integral, so it allocates nothing and branches little;
 * knows nothing of quadrature or shadows. */
#include "optics/aperture.h"

#include "optics/fermat.h"

static ev_cvec3 complex_of(ev_vec3 v)
{
    return (ev_cvec3){v.x, v.y, v.z};
}

static ev_cvec3 combine(double _Complex a, ev_vec3 u, double _Complex b, ev_vec3 v)
{
    return (ev_cvec3){a * u.x + b * v.x, a * u.y + b * v.y, a * u.z + b * v.z};
}

/* Ludwig-3 reference vector: `reference` turned by the rotation that takes axis to direction. */
static ev_vec3 carry(ev_vec3 reference, ev_vec3 axis, ev_vec3 direction)
{
    double open = 1.0 + ev_vec3_dot(axis, direction);
    double part = ev_vec3_dot(reference, direction) / fmax(open, 1e-300);
    return ev_vec3_along(reference, -part, ev_vec3_add(axis, direction));
}

/* Weights of the feed's own x and y polarization. A reflection turns a circular wave's sense, so
 * the feed radiates the other one when there is a single mirror. exp(+jwt): x - jy is right-hand.
 */
static void excitation(const ev_antenna *antenna, ev_polarization polarization,
                       double _Complex weight[2])
{
    double turn = antenna->dual ? 1.0 : -1.0;
    weight[0] = polarization == EV_POLARIZATION_Y ? 0.0 : 1.0;
    weight[1] = polarization == EV_POLARIZATION_Y ? 1.0 : 0.0;
    if (polarization == EV_POLARIZATION_RHCP || polarization == EV_POLARIZATION_LHCP) {
        double sense = polarization == EV_POLARIZATION_RHCP ? -turn : turn;
        weight[0] = sqrt(0.5);
        weight[1] = sense * sqrt(0.5) * I;
    }
}

ev_launch ev_feed_launch(const ev_antenna *antenna, int index, ev_vec3 direction)
{
    const ev_feed *feed = &antenna->feeds[index];
    double ux = ev_vec3_dot(direction, feed->ex), uy = ev_vec3_dot(direction, feed->ey);
    double uz = ev_vec3_dot(direction, feed->axis), across = sqrt(ux * ux + uy * uy);
    ev_pattern_level level = ev_pattern_toward(&feed->pattern, uz, across);
    ev_vec3 lx = carry(feed->ex, feed->axis, direction),
            ly = carry(feed->ey, feed->axis, direction);
    double _Complex weight[2];
    excitation(antenna, feed->polarization, weight);
    ev_launch launch = {.phase = level.phase, .level = level.e};
    if (level.e == level.h) {
        launch.field = combine(weight[0], lx, weight[1], ly);
        return launch;
    }
    /* E cos(phi) theta^ - H sin(phi) phi^ for x, E sin(phi) theta^ + H cos(phi) phi^ for y */
    double c = across > 0.0 ? ux / across : 1.0, s = across > 0.0 ? uy / across : 0.0;
    double e = sqrt(level.e), h = sqrt(level.h), mixed = (e - h) * s * c;
    double _Complex along_x = weight[0] * (e * c * c + h * s * s) + weight[1] * mixed;
    double _Complex along_y = weight[0] * mixed + weight[1] * (e * s * s + h * c * c);
    double size = hypot(cabs(along_x), cabs(along_y));
    launch.level = size * size;
    if (size > 0.0)
        launch.field = combine(along_x / size, lx, along_y / size, ly);
    return launch;
}

ev_cvec3 ev_copolar(ev_polarization polarization, ev_vec3 s)
{
    ev_vec3 z = {0.0, 0.0, 1.0};
    ev_vec3 x = carry(ev_vec3_make(1.0, 0.0, 0.0), z, s);
    ev_vec3 y = carry(ev_vec3_make(0.0, 1.0, 0.0), z, s);
    switch (polarization) {
    case EV_POLARIZATION_X:
        return complex_of(x);
    case EV_POLARIZATION_Y:
        return complex_of(y);
    case EV_POLARIZATION_RHCP:
        return combine(sqrt(0.5), x, -sqrt(0.5) * I, y);
    case EV_POLARIZATION_LHCP:
        break;
    }
    return combine(sqrt(0.5), x, sqrt(0.5) * I, y);
}

/* The field of a wave mirrored at a perfect conductor: -e + 2 (e.n) n. */
static ev_cvec3 mirror_field(ev_cvec3 e, ev_vec3 n)
{
    double _Complex along = 2.0 * (e.x * n.x + e.y * n.y + e.z * n.z);
    return (ev_cvec3){along * n.x - e.x, along * n.y - e.y, along * n.z - e.z};
}

static ev_vec3 square_part(ev_vec3 v, ev_vec3 u)
{
    return ev_vec3_along(v, -ev_vec3_dot(v, u), u);
}

/* Solid angle at `from` per projected area at a point lit straight. */
static double direct_solid_angle(ev_vec3 u, double distance, const ev_vec3 step[2])
{
    return fabs(ev_vec3_dot(u, ev_vec3_cross(step[0], step[1]))) / (distance * distance);
}

/* The same over the sub: as P moves by step_j, the stationary point moves by the tangent vector
 * -H^-1 dg/dP_j, and the direction at the feed with it. */
static double folded_solid_angle(const ev_fermat *f, const ev_vec3 step[2])
{
    double det = f->h00 * f->h11 - f->h01 * f->h01;
    ev_vec3 moved[2];
    for (int j = 0; j < 2; j++) {
        ev_vec3 dv = ev_vec3_scale(-1.0 / f->from_q, square_part(step[j], f->v));
        double g0 = ev_vec3_dot(f->tangent[0], dv), g1 = ev_vec3_dot(f->tangent[1], dv);
        double s0 = -(f->h11 * g0 - f->h01 * g1) / det, s1 = -(f->h00 * g1 - f->h01 * g0) / det;
        moved[j] = ev_vec3_along(ev_vec3_scale(s0, f->tangent[0]), s1, f->tangent[1]);
    }
    return direct_solid_angle(f->u, f->to_q, moved);
}

/* How P moves with x and with y. */
static void main_steps(const ev_antenna *antenna, double x, double y, ev_vec3 step[2])
{
    double twice = 2.0 * antenna->focal_length;
    step[0] = ev_vec3_make(1.0, 0.0, x / twice);
    step[1] = ev_vec3_make(0.0, 1.0, y / twice);
}

ev_sample ev_aperture_sample(const ev_antenna *antenna, int feed, double x, double y)
{
    ev_vec3 from = antenna->feeds[feed].position, step[2];
    ev_sample sample = {.point = ev_main_point(antenna, x, y), .sub_inside = 1.0, .path = NAN};
    ev_fermat fermat;
    double solid_angle;
    main_steps(antenna, x, y, step);
    if (antenna->dual) {
        if (!ev_fermat_solve(&antenna->sub, from, sample.point, &fermat))
            return sample;
        sample.sub_point = fermat.q;
        sample.direction = fermat.u;
        sample.incident = ev_vec3_scale(-1.0, fermat.v);
        sample.path = fermat.to_q + fermat.from_q;
        sample.sub_inside = ev_sub_inside(&antenna->sub, fermat.q);
        solid_angle = folded_solid_angle(&fermat, step);
    } else {
        ev_vec3 arm = ev_vec3_sub(sample.point, from);
        sample.path = ev_vec3_length(arm);
        sample.direction = sample.incident = ev_vec3_scale(1.0 / sample.path, arm);
        solid_angle = direct_solid_angle(sample.direction, sample.path, step);
    }
    ev_launch launch = ev_feed_launch(antenna, feed, sample.direction);
    sample.reached = true;
    sample.density = launch.level * solid_angle / (4.0 * EV_PI);
    sample.phase = launch.phase;
    sample.arriving = antenna->dual ? mirror_field(launch.field, fermat.normal) : launch.field;
    sample.field = mirror_field(sample.arriving, ev_conic_normal(&antenna->main, sample.point));
    return sample;
}

double ev_aperture_path(const ev_antenna *antenna, int feed, double x, double y, ev_vec3 *direction,
                        ev_vec3 *sub_point)
{
    ev_vec3 from = antenna->feeds[feed].position, point = ev_main_point(antenna, x, y);
    if (antenna->dual) {
        ev_fermat fermat;
        if (!ev_fermat_solve(&antenna->sub, from, point, &fermat))
            return NAN;
        *direction = fermat.u;
        *sub_point = fermat.q;
        return fermat.to_q + fermat.from_q;
    }
    ev_vec3 arm = ev_vec3_sub(point, from);
    double path = ev_vec3_length(arm);
    *direction = ev_vec3_scale(1.0 / path, arm);
    *sub_point = point;
    return path;
}

double ev_aperture_solid_angle(const ev_antenna *antenna, double x, double y)
{
    ev_vec3 point = ev_main_point(antenna, x, y), step[2];
    main_steps(antenna, x, y, step);
    if (antenna->dual) {
        ev_sub nominal = antenna->sub;
        nominal.placed = nominal.nominal;
        ev_fermat fermat;
        if (!ev_fermat_solve(&nominal, nominal.feed_focus, point, &fermat))
            return NAN;
        return folded_solid_angle(&fermat, step);
    }
    ev_vec3 arm = ev_vec3_along(point, -antenna->focal_length, ev_vec3_make(0.0, 0.0, 1.0));
    double distance = ev_vec3_length(arm);
    return direct_solid_angle(ev_vec3_scale(1.0 / distance, arm), distance, step);
}

double ev_sample_error(const ev_sample *sample, ev_vec3 wanted)
{
    return sample->path - ev_vec3_dot(wanted, sample->point);
}
