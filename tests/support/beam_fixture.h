/* Dishes and small conveniences that the tests of the beam share. */
#pragma once

#include "optics/beam.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

/* cmocka's own comparison of reals is single precision. NaN is near nothing. */
#define assert_near(got, want, tolerance)                                                          \
    ev_test_near((got), (want), (tolerance), #got, __FILE__, __LINE__)

static inline void ev_test_near(double got, double want, double tolerance, const char *what,
                                const char *file, int line)
{
    if (fabs(got - want) <= tolerance)
        return;
    print_error("%s:%d: %s is %.12g, expected %.12g within %.3g\n", file, line, what, got, want,
                tolerance);
    _fail(file, line);
}

static inline double ev_test_deg(double radians)
{
    return radians * 180.0 / EV_PI;
}

static inline double ev_test_rad(double degrees)
{
    return degrees * EV_PI / 180.0;
}

static inline double ev_test_db(double ratio)
{
    return 10.0 * log10(ratio);
}

static inline double ev_test_power(double _Complex field)
{
    return creal(field) * creal(field) + cimag(field) * cimag(field);
}

/* A single mirror lit by a cos^n feed at its focus. */
static inline ev_design ev_test_dish(double diameter, double focal_length, double offset,
                                     double exponent)
{
    ev_design design = ev_default_design();
    design.main.diameter = diameter;
    design.main.focal_given = EV_GIVEN_FOCAL_LENGTH;
    design.main.focal_length = focal_length;
    design.main.offset = offset;
    design.feeds[0].taper_given = EV_GIVEN_EXPONENT;
    design.feeds[0].exponent = exponent;
    ev_design_resolve(&design);
    return design;
}

/* The 12 m Cassegrain of J. Baars 2007, without obstacles. */
static inline ev_design ev_test_cassegrain(double edge_taper_db)
{
    ev_design design = ev_test_dish(12.0, 4.8, 0.0, 2.0);
    design.sub = ev_default_sub();
    design.sub.magnification = 20.0;
    design.sub.diameter = 0.75;
    design.sub.derived = EV_DERIVED_INTERFOCAL;
    design.feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
    design.feeds[0].edge_taper = edge_taper_db;
    ev_design_resolve(&design);
    return design;
}

static inline ev_antenna ev_test_antenna(ev_design design, double frequency)
{
    ev_antenna antenna;
    ev_design_resolve(&design);
    ev_antenna_build(&design, frequency, &antenna);
    return antenna;
}

static inline ev_beam ev_test_beam(const ev_antenna *antenna)
{
    ev_feed_budget budget;
    ev_beam beam;
    ev_budget_compute_feed(antenna, 0, &budget);
    ev_beam_compute(antenna, 0, &budget, EV_BEAM_EXACT, &beam);
    return beam;
}

static inline ev_vec3 ev_test_direction(double theta_deg, double phi_deg)
{
    double t = ev_test_rad(theta_deg), p = ev_test_rad(phi_deg);
    return ev_vec3_make(sin(t) * cos(p), sin(t) * sin(p), cos(t));
}

static inline ev_beam_field ev_test_field(ev_beam_source *source, ev_vec3 direction)
{
    ev_beam_field field;
    ev_beam_fields(source, &direction, 1, &field);
    return field;
}
