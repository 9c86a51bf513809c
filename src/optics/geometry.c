/* Derived geometry of single and dual layouts. Subreflector relations: P. Hannan, "Microwave
 * antennas derived from the Cassegrain telescope", IRE Trans. AP-9, 1961. */
#include "optics/geometry.h"

ev_span ev_main_span(const ev_main_design *main)
{
    double radius = 0.5 * main->diameter, twice = 2.0 * main->focal_length;
    return (ev_span){2.0 * atan((main->offset + radius) / twice),
                     2.0 * atan((main->offset - radius) / twice)};
}

static ev_vec3 main_rim_point(const ev_main_design *main, double x)
{
    return ev_vec3_make(x, 0.0, x * x / (4.0 * main->focal_length));
}

bool ev_sub_point_for(const ev_sub *sub, ev_vec3 main_point, ev_vec3 *point)
{
    ev_vec3 along = ev_vec3_sub(main_point, sub->prime_focus);
    double side = sub->shape == EV_SUB_HYPERBOLOID ? 1.0 : -1.0;
    return ev_conic_project(&sub->nominal, ev_vec3_along(sub->prime_focus, side, along), point);
}

/* Half width across (along y) of the conic's section square to y = 0, at a point of its middle. */
static double half_width_at(const ev_conic *conic, ev_vec3 centre)
{
    ev_vec3 x = ev_vec3_sub(centre, conic->vertex);
    double e = conic->eccentricity, s = ev_vec3_dot(x, conic->axis);
    double rho2 = 2.0 * s / conic->curvature - (1.0 - e * e) * s * s;
    return sqrt(rho2 - (ev_vec3_dot(x, x) - s * s));
}

/* A line square to the rim plane meets the conic at most twice: once where it faces that way. */
static bool on_mirror_half(const ev_sub *sub, ev_vec3 nominal)
{
    return ev_vec3_dot(ev_conic_normal(&sub->nominal, nominal), sub->rim_normal) > 0.0;
}

static bool build_rim(const ev_main_design *main, ev_sub *sub)
{
    double radius = 0.5 * main->diameter;
    ev_vec3 top, bottom, middle;
    if (!ev_sub_point_for(sub, main_rim_point(main, main->offset + radius), &top) ||
        !ev_sub_point_for(sub, main_rim_point(main, main->offset - radius), &bottom) ||
        !ev_sub_point_for(sub, main_rim_point(main, main->offset), &middle))
        return false;
    ev_vec3 chord = ev_vec3_sub(top, bottom);
    sub->rim_centre = ev_vec3_scale(0.5, ev_vec3_add(top, bottom));
    sub->semi_long = 0.5 * ev_vec3_length(chord);
    sub->semi_short = half_width_at(&sub->nominal, sub->rim_centre);
    sub->rim_long = ev_vec3_unit(chord);
    sub->rim_short = ev_vec3_make(0.0, 1.0, 0.0);
    sub->rim_normal = ev_vec3_cross(sub->rim_long, sub->rim_short);
    if (!on_mirror_half(sub, middle))
        sub->rim_normal = ev_vec3_scale(-1.0, sub->rim_normal);
    return sub->semi_long > 0.0 && sub->semi_short > 0.0;
}

static ev_vec3 turn_xy(ev_vec3 v, double tilt_x, double tilt_y)
{
    v = ev_vec3_turn(v, ev_vec3_make(1.0, 0.0, 0.0), tilt_x);
    return ev_vec3_turn(v, ev_vec3_make(0.0, 1.0, 0.0), tilt_y);
}

static ev_vec3 turn_back(const ev_sub *sub, ev_vec3 v)
{
    return ev_vec3_make(ev_vec3_dot(sub->turned[0], v), ev_vec3_dot(sub->turned[1], v),
                        ev_vec3_dot(sub->turned[2], v));
}

static ev_vec3 turn(const ev_sub *sub, ev_vec3 v)
{
    ev_vec3 sum = ev_vec3_along(ev_vec3_scale(v.x, sub->turned[0]), v.y, sub->turned[1]);
    return ev_vec3_along(sum, v.z, sub->turned[2]);
}

ev_vec3 ev_sub_place(const ev_sub *sub, ev_vec3 point)
{
    ev_vec3 arm = turn(sub, ev_vec3_sub(point, sub->nominal.vertex));
    return ev_vec3_add(ev_vec3_add(sub->nominal.vertex, arm), sub->shift);
}

ev_vec3 ev_sub_unplace(const ev_sub *sub, ev_vec3 point)
{
    ev_vec3 arm = ev_vec3_sub(ev_vec3_sub(point, sub->shift), sub->nominal.vertex);
    return ev_vec3_add(sub->nominal.vertex, turn_back(sub, arm));
}

static void place_sub(ev_sub *sub)
{
    static const ev_vec3 axes[3] = {{1.0, 0.0, 0.0}, {0.0, 1.0, 0.0}, {0.0, 0.0, 1.0}};
    for (int i = 0; i < 3; i++)
        sub->turned[i] = turn_xy(axes[i], sub->tilt_x, sub->tilt_y);
    sub->placed = sub->nominal;
    sub->placed.vertex = ev_sub_place(sub, sub->nominal.vertex);
    sub->placed.axis = turn(sub, sub->nominal.axis);
}

static void place_rim(ev_sub *sub)
{
    sub->placed_centre = ev_sub_place(sub, sub->rim_centre);
    sub->placed_long = turn(sub, sub->rim_long);
    sub->placed_short = turn(sub, sub->rim_short);
    sub->placed_normal = turn(sub, sub->rim_normal);
}

bool ev_sub_build(const ev_main_design *main, const ev_sub_design *design, ev_sub *sub)
{
    double e = design->eccentricity, half = 0.5 * design->interfocal;
    bool hyperboloid = design->shape == EV_SUB_HYPERBOLOID;
    if (!(half > 0.0 && isfinite(half)) || !(hyperboloid ? e > 1.0 : e > 0.0 && e < 1.0))
        return false;
    ev_vec3 line = {sin(design->axis_tilt), 0.0, cos(design->axis_tilt)};
    *sub = (ev_sub){.shape = design->shape,
                    .prime_focus = {0.0, 0.0, main->focal_length},
                    .oversize = design->oversize,
                    .shift = design->shift,
                    .tilt_x = design->tilt_x,
                    .tilt_y = design->tilt_y};
    sub->feed_focus = ev_vec3_along(sub->prime_focus, -2.0 * half, line);
    ev_vec3 axis = hyperboloid ? line : ev_vec3_scale(-1.0, line);
    sub->nominal = ev_conic_make(sub->prime_focus, axis, half * fabs(1.0 - 1.0 / e), e);
    place_sub(sub);
    if (!build_rim(main, sub))
        return false;
    place_rim(sub);
    return true;
}

/* Signed angle at the feed focus, in the symmetry plane, from the line to the prime focus. */
static double angle_from_line(const ev_sub *sub, ev_vec3 point)
{
    ev_vec3 line = ev_vec3_unit(ev_vec3_sub(sub->prime_focus, sub->feed_focus));
    ev_vec3 arm = ev_vec3_sub(point, sub->feed_focus);
    return atan2(arm.x * line.z - arm.z * line.x, ev_vec3_dot(arm, line));
}

ev_span ev_sub_span(const ev_sub *sub)
{
    double a = angle_from_line(sub, ev_vec3_along(sub->rim_centre, sub->semi_long, sub->rim_long));
    double b = angle_from_line(sub, ev_vec3_along(sub->rim_centre, -sub->semi_long, sub->rim_long));
    return (ev_span){fmax(a, b), fmin(a, b)};
}

double ev_design_half_extent(const ev_design *design)
{
    ev_span span = ev_main_span(&design->main);
    if (design->sub.present) {
        ev_sub sub;
        if (!ev_sub_build(&design->main, &design->sub, &sub))
            return NAN;
        span = ev_sub_span(&sub);
    }
    return 0.5 * (span.top - span.bottom);
}

/* Sub rim points and the test for being within it. */
double ev_sub_inside(const ev_sub *sub, ev_vec3 point)
{
    ev_vec3 arm = ev_vec3_sub(point, sub->placed_centre);
    double u = ev_vec3_dot(arm, sub->placed_long) / (sub->semi_long + sub->oversize);
    double v = ev_vec3_dot(arm, sub->placed_short) / (sub->semi_short + sub->oversize);
    if (sub->shape == EV_SUB_ELLIPSOID &&
        ev_vec3_dot(ev_conic_normal(&sub->placed, point), sub->placed_normal) <= 0.0)
        return -1.0;
    return 1.0 - sqrt(u * u + v * v);
}

ev_vec3 ev_sub_point(const ev_sub *sub, double r, double t)
{
    double along = r * cos(t) * (sub->semi_long + sub->oversize);
    double aside = r * sin(t) * (sub->semi_short + sub->oversize);
    ev_vec3 foot = ev_vec3_along(sub->placed_centre, along, sub->placed_long);
    foot = ev_vec3_along(foot, aside, sub->placed_short);
    double roots[2];
    int count = ev_conic_intersect(&sub->placed, foot, sub->placed_normal, roots);
    for (int i = 0; i < count; i++) {
        ev_vec3 point = ev_vec3_along(foot, roots[i], sub->placed_normal);
        if (ev_vec3_dot(ev_conic_normal(&sub->placed, point), sub->placed_normal) > 0.0)
            return point;
    }
    return foot;
}

ev_vec3 ev_sub_rim_point(const ev_sub *sub, double t)
{
    return ev_sub_point(sub, 1.0, t);
}
