/* The derived geometry that people ask for: rim ellipse, plane tilt, tape distances, subreflector.
 * Called once by ev_antenna_build; closed forms of the nominal geometry. */
#include "optics/aperture.h"
#include "optics/geometry.h"

static void fill_rim(const ev_antenna *antenna, ev_layout *layout)
{
    double f = antenna->focal_length, h = antenna->offset, r = antenna->radius;
    /* over (x - h)^2 + y^2 = r^2 the paraboloid is the plane z = (2hx + r^2 - h^2) / 4F */
    layout->rim_tilt = atan(h / (2.0 * f));
    layout->rim_short_axis = 2.0 * r;
    layout->rim_long_axis = 2.0 * r / cos(layout->rim_tilt);
    layout->rim_depth = r * r / (4.0 * f) * cos(layout->rim_tilt);
    layout->focus_to_top = f + (h + r) * (h + r) / (4.0 * f);
    layout->focus_to_bottom = f + (h - r) * (h - r) / (4.0 * f);
    layout->focus_to_side = f + (h * h + r * r) / (4.0 * f);
    layout->focus_to_centre = f + h * h / (4.0 * f);
}

static void fill_sub(const ev_antenna *antenna, const ev_sub_design *design, ev_layout *layout)
{
    const ev_sub *sub = &antenna->sub;
    ev_span span = ev_sub_span(sub);
    layout->sub_eccentricity = design->eccentricity;
    layout->sub_magnification = design->magnification;
    layout->sub_interfocal = design->interfocal;
    layout->sub_axis_tilt = design->axis_tilt;
    layout->sub_half_angle = 0.5 * (span.top - span.bottom);
    layout->sub_vertex = sub->nominal.vertex;
    layout->sub_feed_focus = sub->feed_focus;
    layout->sub_long_axis = 2.0 * fmax(sub->semi_long, sub->semi_short);
    layout->sub_short_axis = 2.0 * fmin(sub->semi_long, sub->semi_short);
}

/* f_eq = F |e^2 - 1| / |e^2 + 1 - 2 e cos(axis tilt)|, which is M F on axis (C. Granet, IEEE AP
 * Magazine 44(3), 2002; W. Rusch et al., "Derivation and application of the equivalent paraboloid
 * for classical offset Cassegrain and Gregorian antennas", IEEE Trans. AP-38, 1990). */
static double equivalent_focal_length(const ev_antenna *antenna, const ev_sub_design *design)
{
    if (!antenna->dual)
        return antenna->focal_length;
    double e = design->eccentricity, e2 = e * e;
    return antenna->focal_length * fabs(e2 - 1.0) /
           fabs(e2 + 1.0 - 2.0 * e * cos(design->axis_tilt));
}

/* Area of aperture that a unit of solid angle feeds, against f_eq^2: sec^4(theta/2) of the
 * equivalent paraboloid, the spreading of the wave on its way to the rim. */
static double space_loss_db(const ev_antenna *antenna, double x)
{
    double spread = ev_aperture_solid_angle(antenna, x, 0.0);
    double f = antenna->layout.equivalent_focal_length;
    return -10.0 * log10(spread * f * f);
}

void ev_layout_fill(const ev_design *design, ev_antenna *antenna)
{
    ev_layout *layout = &antenna->layout;
    ev_span span = ev_main_span(&design->main);
    *layout =
        (ev_layout){.kind = ev_design_layout(design),
                    .diameter = design->main.diameter,
                    .focal_length = antenna->focal_length,
                    .offset = antenna->offset,
                    .half_angle = 0.5 * (span.top - span.bottom),
                    .equivalent_focal_length = equivalent_focal_length(antenna, &design->sub)};
    fill_rim(antenna, layout);
    ev_vec3 line = {0.0, 0.0, -1.0};
    if (antenna->dual) {
        fill_sub(antenna, &design->sub, layout);
        line = ev_vec3_sub(antenna->sub.prime_focus, antenna->sub.feed_focus);
    }
    if (antenna->feed_count > 0)
        layout->feed_tilt = ev_vec3_angle(antenna->feeds[0].nominal_axis, line);
    layout->edge_space_loss_db = fmax(space_loss_db(antenna, antenna->offset + antenna->radius),
                                      space_loss_db(antenna, antenna->offset - antenna->radius));
}
