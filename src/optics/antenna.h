/* The antenna as built: mirrors, feeds, obstacles and the derived geometry, at one frequency.
 * Made from a design by ev_antenna_build; everything downstream (rays, aperture, budget, drawing)
 * reads it and nothing changes it. Plain value, no pointers but the pattern tables. */
#pragma once

#include "optics/conic.h"
#include "optics/design.h"
#include "optics/pattern.h"
#include "optics/shadow.h"

/* The subreflector: its conic twice, as designed and as it sits, and its rim.
 * The geometric rim is where the cone from the prime focus over the main rim cuts the conic; it is
 * a planar ellipse. `oversize` widens both its semi-axes; a point belongs to the mirror when its
 * foot, square to the rim plane, lies in the widened ellipse (and it is not on the far half of an
 * ellipsoid, which such a line meets as well). Rim members are in the frame of the
 * antenna for the mirror AS DESIGNED; ev_sub_place and ev_sub_unplace move points. */
typedef struct ev_sub {
    ev_sub_shape shape;
    ev_conic nominal, placed;
    ev_vec3 prime_focus, feed_focus; /* nominal foci */
    /* unit vectors; long lies in y = 0, normal is on the prime focus's side of the mirror */
    ev_vec3 rim_centre, rim_long, rim_short, rim_normal;
    double semi_long, semi_short; /* m, geometric */
    double oversize;              /* m */
    ev_vec3 shift;
    double tilt_x, tilt_y;
    /* The tilt as images of the three axes, and the rim where it sits: rays ask for them. */
    ev_vec3 turned[3];
    ev_vec3 placed_centre, placed_long, placed_short, placed_normal;
} ev_sub;

typedef struct ev_feed {
    int index;        /* into design.feeds */
    ev_vec3 position; /* phase centre, with shift and defocus */
    ev_vec3 nominal;  /* phase centre where the design wants it: the feed focus */
    ev_vec3 axis;     /* unit, with tilt */
    ev_vec3 nominal_axis;
    ev_vec3 ex, ey; /* unit, with tilt and roll; ex x ey = axis; ex is the polarization 'x' */
    ev_pattern pattern;
    ev_polarization polarization;
    ev_vec3 wanted; /* unit, the beam meant ((0,0,1) for toward_peak, until the peak is known) */
    bool toward_peak;
    double half_extent; /* rad, half the angle between the extreme rim rays in the symmetry plane */
    double exponent;    /* cos_power only, else NaN */
    double edge_taper_db; /* pattern level at half_extent, positive */
    double body;          /* m */
    double phase_centre;  /* m */
} ev_feed;

/* Lengths in m, angles in rad. Dual members are 0 for single mirrors. */
typedef struct ev_layout {
    ev_layout_kind kind;
    double diameter, focal_length, offset;
    double half_angle; /* main's, from the prime focus */
    double equivalent_focal_length;
    double edge_space_loss_db; /* positive; the larger of top and bottom */
    double rim_long_axis, rim_short_axis, rim_tilt, rim_depth;
    double focus_to_top, focus_to_bottom, focus_to_side, focus_to_centre;
    double sub_eccentricity, sub_magnification, sub_interfocal, sub_axis_tilt;
    double sub_half_angle; /* sub rim's, from the feed focus */
    ev_vec3 sub_vertex;    /* where the sub's axis meets its surface, as designed */
    ev_vec3 sub_feed_focus;
    double sub_long_axis, sub_short_axis; /* geometric rim */
    double feed_tilt;
} ev_layout;

typedef struct ev_antenna {
    double frequency, wavelength, wavenumber;
    double focal_length, offset, radius, hole_radius; /* main; radius of the projected aperture */
    double surface_rms, surface_correlation;
    double ohmic, mismatch; /* as power factors, <= 1 */
    ev_conic main;
    bool dual;
    ev_sub sub;
    ev_feed feeds[EV_FEED_CAPACITY];
    int feed_count;
    ev_shadows shadows;
    ev_site_design site;
    ev_layout layout;
} ev_antenna;

/* Builds a checked design (ev_design_check without errors) at `frequency` (Hz). */
void ev_antenna_build(const ev_design *design, double frequency, ev_antenna *antenna);

/* Fills antenna->layout; called by ev_antenna_build. */
void ev_layout_fill(const ev_design *design, ev_antenna *antenna);

/* Up, as a unit vector in the antenna frame: (cos el, 0, sin el). */
ev_vec3 ev_antenna_up(const ev_antenna *antenna);

/* The main reflector over (x, y): z = (x^2 + y^2) / 4F. */
ev_vec3 ev_main_point(const ev_antenna *antenna, double x, double y);

/* A point of the subreflector as designed, moved to where it sits, and back. */
ev_vec3 ev_sub_place(const ev_sub *sub, ev_vec3 point);
ev_vec3 ev_sub_unplace(const ev_sub *sub, ev_vec3 point);

/* Signed distance-like measure of a (placed) point to the sub's rim with oversize: > 0 inside, in
 * units of the semi-axes (1 at the rim's centre, 0 on the rim). */
double ev_sub_inside(const ev_sub *sub, ev_vec3 point);

/* Point of the placed sub's physical rim (with oversize) at angle t, [0, 2 pi). */
ev_vec3 ev_sub_rim_point(const ev_sub *sub, double t);
/* Points of the placed sub within its rim: fraction r in [0,1] of the rim radius, angle t. */
ev_vec3 ev_sub_point(const ev_sub *sub, double r, double t);
