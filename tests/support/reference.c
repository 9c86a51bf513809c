/* Geometry and rays of the second way; see reference.h. */
#include "reference.h"

#include <gsl/gsl_integration.h>
#include <math.h>

static ev_vec3 apply(const ev_vec3 rows[3], ev_vec3 v)
{
    return ev_vec3_make(ev_vec3_dot(rows[0], v), ev_vec3_dot(rows[1], v), ev_vec3_dot(rows[2], v));
}

static ev_vec3 apply_transposed(const ev_vec3 rows[3], ev_vec3 v)
{
    ev_vec3 sum = ev_vec3_scale(v.x, rows[0]);
    return ev_vec3_along(ev_vec3_along(sum, v.y, rows[1]), v.z, rows[2]);
}

/* About x by a, then about y by b: Ry(b) Rx(a). */
static void make_turn(double a, double b, ev_vec3 rows[3])
{
    double ca = cos(a), sa = sin(a), cb = cos(b), sb = sin(b);
    rows[0] = ev_vec3_make(cb, sb * sa, sb * ca);
    rows[1] = ev_vec3_make(0.0, ca, -sa);
    rows[2] = ev_vec3_make(-sb, cb * sa, cb * ca);
}

/* |Q - A| of a point of the sub's surface is linear in Q, for squares of the two distances cancel:
 * |Q - A| = base + slope . (Q - A). */
static double near_distance(const ev_reference *r, ev_vec3 *slope)
{
    ev_vec3 w = ev_vec3_sub(r->other, r->prime);
    double sign = r->ellipsoid ? 1.0 : -1.0, twice = 2.0 * r->major;
    *slope = ev_vec3_scale(sign * 2.0 / twice, w);
    return sign * (r->major * r->major - ev_vec3_dot(w, w)) / twice;
}

/* Crossings of o + t d with the sub as designed, on the sheet meant; rising t. */
static int cross_sub(const ev_reference *r, ev_vec3 o, ev_vec3 d, double t[2])
{
    ev_vec3 x = ev_vec3_sub(o, r->prime), rise;
    double constant = near_distance(r, &rise);
    double base = constant + ev_vec3_dot(rise, x), slope = ev_vec3_dot(rise, d);
    double a = 1.0 - slope * slope, b = ev_vec3_dot(x, d) - base * slope;
    double c = ev_vec3_dot(x, x) - base * base, disc = b * b - a * c;
    if (!(disc >= 0.0))
        return 0;
    double q = b > 0.0 ? -b - sqrt(disc) : -b + sqrt(disc), roots[2] = {q / a, c / q};
    int count = 0, swapped = roots[0] > roots[1];
    for (int i = 0; i < 2; i++) {
        double root = roots[swapped ? 1 - i : i];
        if (isfinite(root) && base + root * slope > 0.0)
            t[count++] = root;
    }
    return count;
}

static ev_vec3 main_point(const ev_reference *r, double x, double y)
{
    return ev_vec3_make(x, y, (x * x + y * y) / (4.0 * r->focal_length));
}

/* The sub's point on the line from the prime focus to a main point (its far side: ellipsoid). */
static ev_vec3 nominal_sub_point(const ev_reference *r, double x, double y)
{
    ev_vec3 d = ev_vec3_unit(ev_vec3_sub(main_point(r, x, y), r->prime));
    double t[2] = {NAN, NAN};
    if (r->ellipsoid)
        d = ev_vec3_scale(-1.0, d);
    int count = cross_sub(r, r->prime, d, t);
    return ev_vec3_along(r->prime, count == 2 && t[0] < 0.0 ? t[1] : t[0], d);
}

static void make_sub(const ev_sub_design *sub, ev_reference *r)
{
    ev_vec3 line = {sin(sub->axis_tilt), 0.0, cos(sub->axis_tilt)};
    r->ellipsoid = sub->shape == EV_SUB_ELLIPSOID;
    r->other = ev_vec3_along(r->prime, -sub->interfocal, line);
    r->major = sub->interfocal / sub->eccentricity;
    ev_vec3 top = nominal_sub_point(r, r->offset + r->radius, 0.0);
    ev_vec3 bottom = nominal_sub_point(r, r->offset - r->radius, 0.0);
    ev_vec3 chord = ev_vec3_sub(top, bottom);
    r->rim_centre = ev_vec3_scale(0.5, ev_vec3_add(top, bottom));
    r->rim_long = ev_vec3_unit(chord);
    r->rim_short = ev_vec3_make(0.0, 1.0, 0.0);
    r->rim_normal = ev_vec3_cross(r->rim_long, r->rim_short);
    double t[2] = {NAN, NAN};
    cross_sub(r, r->rim_centre, r->rim_short, t);
    r->semi_long = 0.5 * ev_vec3_length(chord) + sub->oversize;
    r->semi_short = t[1] + sub->oversize;
    /* the vertex: on the axis, a - c before the prime focus or a - c (c - a) the other way */
    double short_arm = 0.5 * fabs(r->major - sub->interfocal);
    r->pivot = ev_vec3_along(r->prime, r->ellipsoid ? short_arm : -short_arm, line);
    r->shift = sub->shift;
    make_turn(sub->tilt_x, sub->tilt_y, r->turn);
}

static ev_vec3 place(const ev_reference *r, ev_vec3 point)
{
    ev_vec3 arm = apply(r->turn, ev_vec3_sub(point, r->pivot));
    return ev_vec3_add(ev_vec3_add(r->pivot, arm), r->shift);
}

static ev_vec3 unplace(const ev_reference *r, ev_vec3 point)
{
    ev_vec3 arm = ev_vec3_sub(ev_vec3_sub(point, r->shift), r->pivot);
    return ev_vec3_add(r->pivot, apply_transposed(r->turn, arm));
}

static void make_feed(const ev_feed_design *feed, ev_reference *r)
{
    ev_vec3 focus = r->dual ? r->other : r->prime, turn[3];
    double top_x = r->offset + r->radius, bottom_x = r->offset - r->radius;
    ev_vec3 top = r->dual ? nominal_sub_point(r, top_x, 0.0) : main_point(r, top_x, 0.0);
    ev_vec3 bottom = r->dual ? nominal_sub_point(r, bottom_x, 0.0) : main_point(r, bottom_x, 0.0);
    ev_vec3 middle = r->dual ? nominal_sub_point(r, r->offset, 0.0) : main_point(r, r->offset, 0.0);
    ev_vec3 to_top = ev_vec3_unit(ev_vec3_sub(top, focus));
    ev_vec3 to_bottom = ev_vec3_unit(ev_vec3_sub(bottom, focus));
    r->half_extent = 0.5 * ev_vec3_angle(to_top, to_bottom);
    ev_vec3 nominal = ev_vec3_unit(ev_vec3_add(to_top, to_bottom));
    if (feed->aim == EV_AIM_CENTRE)
        nominal = ev_vec3_unit(ev_vec3_sub(middle, focus));
    if (feed->aim == EV_AIM_DIRECTION)
        nominal = ev_vec3_unit(feed->aim_direction);
    make_turn(feed->tilt_x, feed->tilt_y, turn);
    r->axis = apply(turn, nominal);
    ev_vec3 hint = fabs(r->axis.y) < 0.7 ? ev_vec3_make(0, 1, 0) : ev_vec3_make(1, 0, 0);
    r->ex = ev_vec3_unit(ev_vec3_cross(hint, r->axis));
    r->ey = ev_vec3_cross(r->axis, r->ex);
    r->feed = ev_vec3_along(ev_vec3_add(focus, feed->shift), -feed->defocus, r->axis);
}

static double gauss_bell(double theta, void *context)
{
    return 0.5 * exp(-*(const double *)context * theta * theta) * sin(theta);
}

/* Panels of a fixed Gauss rule, narrow where the bell is. */
static double bell_share(double rate, double theta)
{
    enum { PANELS = 6, NODES = 24 };
    static gsl_integration_glfixed_table *rule;
    double width = fmin(theta, 7.0 / sqrt(rate)), sum = 0.0, r = rate;
    gsl_function bell = {gauss_bell, &r};
    if (!rule)
        rule = gsl_integration_glfixed_table_alloc(NODES);
    for (int i = 0; i < PANELS; i++)
        sum += gsl_integration_glfixed(&bell, width * i / PANELS, width * (i + 1) / PANELS, rule);
    return sum;
}

ev_reference ev_reference_make(const ev_design *design, int feed)
{
    const ev_feed_design *source = &design->feeds[feed];
    ev_reference r = {.design = design,
                      .focal_length = design->main.focal_length,
                      .offset = design->main.offset,
                      .radius = 0.5 * design->main.diameter,
                      .hole = 0.5 * design->main.hole,
                      .dual = design->sub.present,
                      .prime = {0.0, 0.0, design->main.focal_length},
                      .gaussian = source->pattern == EV_PATTERN_GAUSSIAN,
                      .norm = 1.0};
    if (r.dual)
        make_sub(&design->sub, &r);
    for (int i = 0; i < design->feed_count; i++) {
        make_feed(&design->feeds[i], &r);
        if (design->feeds[i].body > 0.0)
            r.bodies[r.body_count++] =
                ev_vec3_make(r.feed.x, r.feed.y, 0.5 * design->feeds[i].body);
    }
    make_feed(source, &r);
    if (r.gaussian) {
        r.rate = 0.1 * source->edge_taper * log(10.0) / pow(r.half_extent, 2.0);
        r.norm = 1.0 / bell_share(r.rate, EV_PI);
    } else {
        r.exponent = source->taper_given == EV_GIVEN_EXPONENT
                         ? source->exponent
                         : -0.1 * source->edge_taper / log10(cos(r.half_extent));
    }
    return r;
}

double ev_reference_share(const ev_reference *r, double theta)
{
    if (r->gaussian)
        return r->norm * bell_share(r->rate, theta);
    double s = sin(theta);
    return theta < 0.5 * EV_PI ? -expm1(0.5 * (r->exponent + 1.0) * log1p(-s * s)) : 1.0;
}

double ev_reference_gain(const ev_reference *r, double theta)
{
    if (r->gaussian)
        return r->norm * exp(-r->rate * theta * theta);
    return theta < 0.5 * EV_PI ? 2.0 * (r->exponent + 1.0) * pow(cos(theta), r->exponent) : 0.0;
}

static double inside_rim(const ev_reference *r, ev_vec3 nominal)
{
    ev_vec3 arm = ev_vec3_sub(nominal, r->rim_centre);
    double u = ev_vec3_dot(arm, r->rim_long) / r->semi_long;
    double v = ev_vec3_dot(arm, r->rim_short) / r->semi_short;
    return 1.0 - sqrt(u * u + v * v);
}

/* Off the sub: mirrored at the bisector of the two focal rays. */
static bool leave_sub(const ev_reference *r, ev_vec3 *from, ev_vec3 *direction,
                      ev_reference_ray *ray)
{
    ev_vec3 o = unplace(r, *from), d = apply_transposed(r->turn, *direction);
    double t[2];
    int count = cross_sub(r, o, d, t);
    int first = count > 0 && t[0] <= 0.0 ? 1 : 0;
    if (first >= count)
        return false;
    ev_vec3 q = ev_vec3_along(o, t[first], d);
    ev_vec3 a = ev_vec3_unit(ev_vec3_sub(q, r->prime)), b = ev_vec3_unit(ev_vec3_sub(q, r->other));
    ev_vec3 n = ev_vec3_unit(r->ellipsoid ? ev_vec3_add(a, b) : ev_vec3_sub(b, a));
    ray->inside = inside_rim(r, q);
    ray->on_sub = place(r, q);
    ray->path = t[first];
    *from = ray->on_sub;
    *direction = apply(r->turn, ev_vec3_along(d, -2.0 * ev_vec3_dot(d, n), n));
    return true;
}

bool ev_reference_trace(const ev_reference *r, ev_vec3 direction, ev_reference_ray *ray)
{
    ev_vec3 from = r->feed;
    *ray = (ev_reference_ray){.inside = 1.0};
    if (r->dual && !leave_sub(r, &from, &direction, ray))
        return false;
    ray->leaving_sub = direction;
    /* x^2 + y^2 = 4 F z along from + t direction */
    double f4 = 4.0 * r->focal_length, a = direction.x * direction.x + direction.y * direction.y;
    double b = from.x * direction.x + from.y * direction.y - 0.5 * f4 * direction.z;
    double c = from.x * from.x + from.y * from.y - f4 * from.z, disc = b * b - a * c;
    if (!(disc >= 0.0))
        return false;
    /* it comes down where it leaves the inside; along the axis a = 0 and one root is infinite */
    double q = b > 0.0 ? -b - sqrt(disc) : -b + sqrt(disc), t1 = q / a, t2 = c / q;
    double t = isfinite(t1) ? fmax(t1, t2) : t2;
    if (!(t > 0.0))
        return false;
    ray->on_main = ev_vec3_along(from, t, direction);
    ray->path += t;
    return true;
}

static ev_vec3 first_guess(const ev_reference *r, double x, double y)
{
    ev_vec3 q = place(r, nominal_sub_point(r, x, y));
    return ev_vec3_unit(ev_vec3_sub(q, r->feed));
}

bool ev_reference_aim(const ev_reference *r, double x, double y, ev_vec3 *direction,
                      ev_reference_ray *ray)
{
    if (!r->dual) {
        *direction = ev_vec3_unit(ev_vec3_sub(main_point(r, x, y), r->feed));
        return ev_reference_trace(r, *direction, ray);
    }
    ev_vec3 d = first_guess(r, x, y);
    double h = 1e-6, miss = INFINITY;
    for (int pass = 0; pass < 30; pass++) {
        ev_vec3 hint = fabs(d.y) < 0.7 ? ev_vec3_make(0, 1, 0) : ev_vec3_make(1, 0, 0);
        ev_vec3 a = ev_vec3_unit(ev_vec3_cross(hint, d)), b = ev_vec3_cross(d, a);
        ev_reference_ray here, by_a, by_b;
        if (!ev_reference_trace(r, d, &here))
            return false;
        double ex = x - here.on_main.x, ey = y - here.on_main.y;
        if (miss < 1e-9 * r->radius && hypot(ex, ey) >= miss)
            break; /* down to rounding */
        miss = hypot(ex, ey);
        *ray = here;
        *direction = d;
        if (miss < 1e-15 * r->radius ||
            !ev_reference_trace(r, ev_vec3_unit(ev_vec3_along(d, h, a)), &by_a) ||
            !ev_reference_trace(r, ev_vec3_unit(ev_vec3_along(d, h, b)), &by_b))
            break;
        double xa = (by_a.on_main.x - here.on_main.x) / h,
               xb = (by_b.on_main.x - here.on_main.x) / h;
        double ya = (by_a.on_main.y - here.on_main.y) / h,
               yb = (by_b.on_main.y - here.on_main.y) / h;
        double det = xa * yb - xb * ya;
        d = ev_vec3_along(d, (ex * yb - ey * xb) / det, a);
        d = ev_vec3_unit(ev_vec3_along(d, (ey * xa - ex * ya) / det, b));
    }
    return miss < 1e-9 * r->radius;
}

ev_vec3 ev_reference_rim(const ev_reference *r, double t)
{
    ev_vec3 foot = ev_vec3_along(r->rim_centre, r->semi_long * cos(t), r->rim_long);
    foot = ev_vec3_along(foot, r->semi_short * sin(t), r->rim_short);
    double roots[2] = {0.0, 0.0};
    int count = cross_sub(r, foot, r->rim_normal, roots);
    double along = count == 2 && fabs(roots[1]) < fabs(roots[0]) ? roots[1] : roots[0];
    ev_vec3 point = place(r, ev_vec3_along(foot, along, r->rim_normal));
    return ev_vec3_unit(ev_vec3_sub(point, r->feed));
}
