/* Used by tests and benchmarks. */
#include "fixture.h"

static ev_main_design main_of(double diameter, double focal_length, double offset)
{
    return (ev_main_design){.diameter = diameter,
                            .focal_length = focal_length,
                            .focal_given = EV_GIVEN_FOCAL_LENGTH,
                            .offset = offset};
}

static ev_design single(double diameter, double focal_length, double offset, double frequency)
{
    ev_design design = ev_default_design();
    design.frequencies[0] = frequency;
    design.main = main_of(diameter, focal_length, offset);
    return design;
}

static ev_design dual(ev_design design, ev_sub_shape shape, double magnification, double interfocal)
{
    design.sub = ev_default_sub();
    design.sub.shape = shape;
    design.sub.magnification = magnification;
    design.sub.interfocal = interfocal;
    return design;
}

static ev_design unresolved(ev_fixture fixture)
{
    const double degree = EV_PI / 180.0;
    ev_design design;
    switch (fixture) {
    case EV_FIXTURE_PRIME:
        design = single(10.0, 5.0, 0.0, 3e9);
        design.feeds[0].taper_given = EV_GIVEN_EXPONENT;
        design.feeds[0].exponent = 2.0;
        return design;
    case EV_FIXTURE_OFFSET:
        return single(1.2, 0.72, 0.66, 12e9);
    case EV_FIXTURE_CASSEGRAIN:
        design = dual(single(12.0, 4.8, 0.0, 12e9), EV_SUB_HYPERBOLOID, 20.0, 0.0);
        design.sub.diameter = 0.75;
        design.sub.derived = EV_DERIVED_INTERFOCAL;
        return design;
    case EV_FIXTURE_GREGORIAN:
        return dual(single(6.0, 2.1, 0.0, 8e9), EV_SUB_ELLIPSOID, 8.0, 1.6);
    case EV_FIXTURE_OFFSET_CASSEGRAIN:
        design = dual(single(2.4, 1.5, 1.45, 20e9), EV_SUB_HYPERBOLOID, 3.0, 0.7);
        design.sub.axis_tilt = 6.0 * degree;
        return design;
    default:
        design = dual(single(100.0, 60.0, 54.0, 1.4e9), EV_SUB_ELLIPSOID, 0.0, 11.0);
        design.sub.shape_given = EV_GIVEN_ECCENTRICITY;
        design.sub.eccentricity = 0.528;
        design.sub.axis_tilt = 5.57 * degree;
        return design;
    }
}

ev_design ev_fixture_design(ev_fixture fixture)
{
    ev_design design = unresolved(fixture);
    ev_design_resolve(&design);
    return design;
}

ev_design ev_fixture_worn_design(ev_fixture fixture)
{
    ev_design design = ev_fixture_design(fixture);
    ev_feed_design *feed = &design.feeds[0];
    double wave = EV_LIGHT_SPEED / design.frequencies[0], diameter = design.main.diameter;
    feed->shift = ev_vec3_make(0.3 * wave, -0.4 * wave, 0.2 * wave);
    feed->defocus = 0.3 * wave;
    feed->tilt_x = 0.02;
    feed->body = 0.03 * diameter;
    if (design.sub.present) {
        design.sub.shift = ev_vec3_make(0.1 * wave, 0.15 * wave, -0.1 * wave);
        design.sub.tilt_y = 0.2 * wave / diameter;
        design.sub.oversize = 0.002 * diameter;
    }
    design.main.hole = 0.04 * diameter;
    design.strut_count = 1;
    design.struts[0] = ev_default_strut();
    design.struts[0].width = 0.004 * diameter;
    design.struts[0].from = 0.06 * diameter;
    design.struts[0].to = 0.5 * diameter;
    design.site = ev_default_site();
    ev_design_resolve(&design);
    return design;
}

void ev_fixture_build(const ev_design *design, ev_antenna *antenna)
{
    ev_design copy = *design;
    ev_design_resolve(&copy);
    ev_antenna_build(&copy, copy.frequencies[0], antenna);
}

ev_feed_budget ev_fixture_budget(const ev_design *design)
{
    ev_antenna antenna;
    ev_feed_budget budget;
    ev_fixture_build(design, &antenna);
    ev_budget_compute_feed(&antenna, 0, &budget);
    return budget;
}
