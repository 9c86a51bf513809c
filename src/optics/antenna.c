/* From a checked design to the antenna: mirrors, feeds, obstacles, and the layout's figures.
 * Called once an edit; reads the design and nothing else. */
#include "optics/antenna.h"

#include "optics/aperture.h"
#include "optics/geometry.h"

ev_vec3 ev_main_point(const ev_antenna *antenna, double x, double y)
{
    return ev_vec3_make(x, y, (x * x + y * y) / (4.0 * antenna->focal_length));
}

ev_vec3 ev_antenna_up(const ev_antenna *antenna)
{
    return ev_vec3_make(cos(antenna->site.elevation), 0.0, sin(antenna->site.elevation));
}

/* In the symmetry plane, `angle` from `line` toward +x. */
static ev_vec3 lean(ev_vec3 line, double angle)
{
    ev_vec3 side = {fabs(line.z), 0.0, line.z > 0.0 ? -line.x : line.x};
    return ev_vec3_along(ev_vec3_scale(cos(angle), line), sin(angle), side);
}

/* The ray a feed takes for the middle of what it lights, from the feed focus, and the two extreme
 * rim rays as signed angles from it. */
static ev_vec3 feed_line(const ev_antenna *antenna)
{
    if (!antenna->dual)
        return ev_vec3_make(0.0, 0.0, -1.0);
    return ev_vec3_unit(ev_vec3_sub(antenna->sub.prime_focus, antenna->sub.feed_focus));
}

static ev_vec3 aim_of(const ev_antenna *antenna, const ev_feed_design *design, ev_span span,
                      ev_vec3 focus)
{
    if (design->aim == EV_AIM_DIRECTION)
        return ev_vec3_unit(design->aim_direction);
    if (design->aim == EV_AIM_BISECT)
        return lean(feed_line(antenna), 0.5 * (span.top + span.bottom));
    ev_vec3 target = ev_main_point(antenna, antenna->offset, 0.0);
    if (antenna->dual)
        ev_sub_point_for(&antenna->sub, target, &target);
    return ev_vec3_unit(ev_vec3_sub(target, focus));
}

static ev_vec3 mispoint(ev_vec3 v, const ev_feed_design *design)
{
    v = ev_vec3_turn(v, ev_vec3_make(1.0, 0.0, 0.0), design->tilt_x);
    return ev_vec3_turn(v, ev_vec3_make(0.0, 1.0, 0.0), design->tilt_y);
}

/* Unit vector square to the axis, nearest to +x (or to +z where the axis lies along x). */
static ev_vec3 square_to(ev_vec3 axis)
{
    ev_vec3 hint =
        fabs(axis.x) < 0.999999 ? ev_vec3_make(1.0, 0.0, 0.0) : ev_vec3_make(0.0, 0.0, 1.0);
    return ev_vec3_unit(ev_vec3_along(hint, -ev_vec3_dot(hint, axis), axis));
}

static ev_vec3 direction_from(double x_angle, double y_angle)
{
    double x = sin(x_angle), y = sin(y_angle);
    return ev_vec3_make(x, y, sqrt(fmax(0.0, 1.0 - x * x - y * y)));
}

static double taper_at(const ev_pattern *pattern, double angle)
{
    ev_pattern_level axis = ev_pattern_at(pattern, 0.0), edge = ev_pattern_at(pattern, angle);
    return -10.0 * log10((edge.e + edge.h) / (axis.e + axis.h));
}

static void build_feed(const ev_antenna *antenna, const ev_feed_design *design, int index,
                       ev_feed *feed)
{
    ev_span span;
    if (antenna->dual) {
        span = ev_sub_span(&antenna->sub);
    } else {
        double radius = antenna->radius, twice = 2.0 * antenna->focal_length;
        span = (ev_span){2.0 * atan((antenna->offset + radius) / twice),
                         2.0 * atan((antenna->offset - radius) / twice)};
    }
    *feed = (ev_feed){.index = index, .polarization = design->polarization};
    feed->nominal =
        antenna->dual ? antenna->sub.feed_focus : ev_vec3_make(0.0, 0.0, antenna->focal_length);
    feed->nominal_axis = aim_of(antenna, design, span, feed->nominal);
    feed->axis = mispoint(feed->nominal_axis, design);
    feed->ex =
        ev_vec3_turn(mispoint(square_to(feed->nominal_axis), design), feed->axis, design->roll);
    feed->ey = ev_vec3_cross(feed->axis, feed->ex);
    feed->position =
        ev_vec3_along(ev_vec3_add(feed->nominal, design->shift), -design->defocus, feed->axis);
    feed->half_extent = 0.5 * (span.top - span.bottom);
    feed->pattern = ev_pattern_make(design, feed->half_extent);
    feed->exponent = design->pattern == EV_PATTERN_COS_POWER ? design->exponent : NAN;
    feed->edge_taper_db = taper_at(&feed->pattern, feed->half_extent);
    feed->toward_peak = design->toward_peak;
    feed->wanted = design->toward_peak ? ev_vec3_make(0.0, 0.0, 1.0)
                                       : direction_from(design->toward_x, design->toward_y);
    feed->body = design->body;
    feed->phase_centre = design->phase_centre;
}

static ev_outline sub_outline(const ev_sub *sub)
{
    ev_vec3 centre = ev_sub_place(sub, sub->rim_centre);
    ev_vec3 u = ev_sub_place(
        sub, ev_vec3_along(sub->rim_centre, sub->semi_long + sub->oversize, sub->rim_long));
    ev_vec3 v = ev_sub_place(
        sub, ev_vec3_along(sub->rim_centre, sub->semi_short + sub->oversize, sub->rim_short));
    return (ev_outline){.x = centre.x,
                        .y = centre.y,
                        .ux = u.x - centre.x,
                        .uy = u.y - centre.y,
                        .vx = v.x - centre.x,
                        .vy = v.y - centre.y};
}

static void build_shadows(const ev_design *design, ev_antenna *antenna)
{
    ev_shadows *shadows = &antenna->shadows;
    *shadows = (ev_shadows){.centre_x = antenna->offset,
                            .radius = antenna->radius,
                            .hole_radius = antenna->hole_radius,
                            .has_sub = antenna->dual};
    if (antenna->dual)
        shadows->sub = sub_outline(&antenna->sub);
    for (int i = 0; i < antenna->feed_count; i++) {
        const ev_feed *feed = &antenna->feeds[i];
        if (feed->body > 0.0)
            shadows->bodies[shadows->body_count++] = (ev_outline){.x = feed->position.x,
                                                                  .y = feed->position.y,
                                                                  .ux = 0.5 * feed->body,
                                                                  .vy = 0.5 * feed->body};
    }
    for (int i = 0; i < design->strut_count; i++) {
        const ev_strut_design *strut = &design->struts[i];
        for (int k = 0; k < strut->count && shadows->strip_count < EV_SHADOW_STRIP_CAPACITY; k++)
            shadows->strips[shadows->strip_count++] =
                ev_strip_make(strut->first + 2.0 * EV_PI * k / strut->count, strut->width,
                              strut->from, strut->to, i);
    }
}

void ev_antenna_build(const ev_design *design, double frequency, ev_antenna *antenna)
{
    const ev_main_design *main = &design->main;
    double wavelength = EV_LIGHT_SPEED / frequency;
    *antenna = (ev_antenna){.frequency = frequency,
                            .wavelength = wavelength,
                            .wavenumber = 2.0 * EV_PI / wavelength,
                            .focal_length = main->focal_length,
                            .offset = main->offset,
                            .radius = 0.5 * main->diameter,
                            .hole_radius = 0.5 * main->hole,
                            .surface_rms = main->surface_rms,
                            .surface_correlation = main->surface_correlation,
                            .ohmic = pow(10.0, -0.1 * design->ohmic),
                            .mismatch = pow(10.0, -0.1 * design->mismatch),
                            .feed_count = design->feed_count,
                            .site = design->site};
    antenna->main = ev_conic_make(ev_vec3_make(0.0, 0.0, main->focal_length),
                                  ev_vec3_make(0.0, 0.0, 1.0), main->focal_length, 1.0);
    antenna->dual = design->sub.present && ev_sub_build(&design->main, &design->sub, &antenna->sub);
    for (int i = 0; i < design->feed_count; i++)
        build_feed(antenna, &design->feeds[i], i, &antenna->feeds[i]);
    build_shadows(design, antenna);
    ev_layout_fill(design, antenna);
}
