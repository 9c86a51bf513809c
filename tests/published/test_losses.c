/* Published losses of misplacement, surface and blockage, and antenna noise. Flags as in
 * test_geometry.c. */
#include "check.h"
#include "fixture.h"

#include "optics/aperture.h"

#include <stdlib.h>

static const double degree = EV_PI / 180.0;

/* D 10 m, F 5 m, 3 GHz, feed pattern -10 dB at the rim. */
static ev_design ten_metre(void)
{
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
    design.feeds[0].edge_taper = 10.0;
    return design;
}

static double decibels(double efficiency)
{
    return -10.0 * log10(efficiency);
}

/* +20 mm axial: path rms (area) 2.29600 mm; 0.0830 dB by surface-current integration. [computed]
 * The aperture integral differs from the currents in amplitude only. */
static void test_axial_misplacement(void **state)
{
    (void)state;
    ev_design design = ten_metre();
    design.feeds[0].defocus = 0.020;
    ev_feed_budget budget = ev_fixture_budget(&design);
    assert_ratio(budget.path_error.rms_area, 2.29600e-3, 1e-4);
    assert_near(budget.peak.x, 0.0, 1e-9);
    design.feeds[0].defocus = 0.0;
    assert_near(ev_fixture_budget(&design).gain_dbi - budget.gain_dbi, 0.0830, 1e-3);
    design.feeds[0].shift.z = 0.020; /* the same place */
    assert_ratio(ev_fixture_budget(&design).path_error.rms_area, 2.29600e-3, 1e-4);
}

/* Axial: path error delta (1 - cos theta) to first order, less its mean. [computed] */
static void test_axial_path_error_to_first_order(void **state)
{
    (void)state;
    ev_design design = ten_metre();
    ev_antenna antenna;
    design.feeds[0].defocus = 1e-6;
    ev_fixture_build(&design, &antenna);
    ev_vec3 up = {0.0, 0.0, 1.0};
    double base = 0.0;
    for (int i = 0; i <= 10; i++) {
        double r = 0.5 * i, theta = 2.0 * atan(r / 10.0);
        ev_sample sample = ev_aperture_sample(&antenna, 0, r, 0.0);
        double error = ev_sample_error(&sample, up);
        base = i == 0 ? error : base;
        /* away from the dish is longer on the axis, so the rest falls behind it */
        assert_near(error - base, -1e-6 * (1.0 - cos(theta)), 1e-12);
    }
}

/* +50 mm lateral: path rms (area) 21.514 mm, 1.1228 mm with tilt removed; beam -0.5014 deg, 0.0204
 * dB by surface-current integration. [computed] */
static void test_lateral_misplacement(void **state)
{
    (void)state;
    ev_design design = ten_metre();
    design.feeds[0].shift.x = 0.050;
    ev_feed_budget budget = ev_fixture_budget(&design);
    assert_ratio(budget.path_error.rms_area, 21.514e-3, 1e-4);
    assert_ratio(budget.untilted.rms_area, 1.1228e-3, 1e-4);
    assert_near(asin(budget.peak.x) / degree, -0.5014, 0.002);
    assert_near(asin(budget.peak.y) / degree, 0.0, 1e-7);
    design.feeds[0].shift.x = 0.0;
    assert_near(ev_fixture_budget(&design).gain_dbi - budget.gain_dbi, 0.0204, 1e-3);
}

/* Beam deviation factor (Y. Lo, IRE Trans. AP-8, 1960): (1 + k q)/(1 + q), q = (D/4F)^2, k about
 * 0.36: 0.820 at f/D 0.4, 0.872 at 0.5. [memory] */
static void test_beam_deviation_factor(void **state)
{
    (void)state;
    const double published[2][2] = {{0.4, 0.820}, {0.5, 0.872}};
    for (int i = 0; i < 2; i++) {
        ev_design design = ten_metre();
        design.main.focal_length = 10.0 * published[i][0];
        design.feeds[0].shift.x = 0.010;
        double beam = -asin(ev_fixture_budget(&design).peak.x);
        double feed = atan(0.010 / design.main.focal_length);
        assert_near(beam / feed, published[i][1], 0.015);
    }
}

/* exp(-(4 pi e/lambda)^2), J. Ruze, "Antenna tolerance theory, a review", Proc. IEEE 54, 1966:
 * lambda/16 2.679 dB, lambda/30 0.762 dB. [computed] */
static void test_ruze(void **state)
{
    (void)state;
    const double published[2][2] = {{16.0, 2.679}, {30.0, 0.762}};
    for (int i = 0; i < 2; i++) {
        ev_design design = ten_metre();
        double before = ev_fixture_budget(&design).gain_dbi;
        design.main.surface_rms = EV_LIGHT_SPEED / 3e9 / published[i][0];
        ev_feed_budget budget = ev_fixture_budget(&design);
        assert_near(decibels(budget.efficiency.surface), published[i][1], 5e-4);
        assert_ratio(budget.efficiency.surface, exp(-pow(4.0 * EV_PI / published[i][0], 2.0)),
                     1e-9);
        assert_near(before - budget.gain_dbi, published[i][1], 5e-4);
    }
}

enum { TABLE_ENTRIES = 2000 };

/* A feed that lights the 10 m dish with E(r): power sec^4(theta/2) E^2, none beyond the rim. */
static ev_pattern_table *table_for(double (*field)(double))
{
    ev_pattern_table *table = calloc(1, sizeof *table);
    double rim = 2.0 * atan(0.5);
    table->count = TABLE_ENTRIES;
    for (int i = 0; i < TABLE_ENTRIES; i++) {
        double theta = rim * i / (TABLE_ENTRIES - 1.0), r = 2.0 * tan(0.5 * theta);
        double level = -40.0 * log10(cos(0.5 * theta)) + 20.0 * log10(fmax(field(r), 1e-7));
        table->theta[i] = theta;
        table->e_db[i] = table->h_db[i] = level;
    }
    ev_pattern_table_prepare(table);
    return table;
}

static double uniform(double r)
{
    (void)r;
    return 1.0;
}

static double parabolic(double r)
{
    return 1.0 - r * r;
}

static double squared(double r)
{
    return pow(parabolic(r), 2.0);
}

static double on_pedestal(double r)
{
    double edge = pow(10.0, -0.5);
    return edge + (1.0 - edge) * parabolic(r);
}

static double squared_on_pedestal(double r)
{
    double edge = pow(10.0, -0.5);
    return edge + (1.0 - edge) * squared(r);
}

static ev_feed_budget with_lighting(double (*field)(double), double body, double strut_width)
{
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_pattern_table *table = table_for(field);
    design.feeds[0].pattern = EV_PATTERN_TABLE;
    design.feeds[0].table = table;
    design.feeds[0].body = body;
    design.strut_count = strut_width > 0.0 ? 1 : 0;
    design.struts[0] = ev_default_strut();
    design.struts[0].width = strut_width;
    design.struts[0].from = 0.5 * body;
    design.struts[0].to = 5.0;
    ev_feed_budget budget = ev_fixture_budget(&design);
    free(table);
    return budget;
}

/* Beam of a round aperture: taper efficiency 1 uniform, 0.75 for 1 - r^2, 0.5556 for its square, on
 * a pedestal of -10 dB 0.9175 and 0.8769 (Silver 1949; Balanis ch. 12). [computed] */
static void test_taper_of_round_apertures(void **state)
{
    (void)state;
    assert_near(with_lighting(uniform, 0.0, 0.0).efficiency.taper, 1.0, 1e-6);
    assert_near(with_lighting(parabolic, 0.0, 0.0).efficiency.taper, 0.75, 1e-6);
    assert_near(with_lighting(squared, 0.0, 0.0).efficiency.taper, 0.5556, 5e-5);
    assert_near(with_lighting(on_pedestal, 0.0, 0.0).efficiency.taper, 0.9175, 5e-5);
    assert_near(with_lighting(squared_on_pedestal, 0.0, 0.0).efficiency.taper, 0.8769, 5e-5);
}

/* Central disc d/D 0.1: uniform 0.0873 dB, 1 - r^2 0.1746 dB (null field). [computed] */
static void test_central_disc(void **state)
{
    (void)state;
    ev_feed_budget even = with_lighting(uniform, 1.0, 0.0);
    ev_feed_budget tapered = with_lighting(parabolic, 1.0, 0.0);
    assert_near(decibels(even.efficiency.blockage), 0.0873, 5e-5);
    assert_near(even.efficiency.blockage, pow(0.99, 2.0), 1e-6);
    assert_near(even.shadow_share, 0.01, 1e-6);
    assert_near(decibels(tapered.efficiency.blockage), 0.1746, 5e-5);
    assert_near(tapered.efficiency.blockage, pow(0.9801, 2.0), 1e-6);
}

/* Four straight radial struts 0.02 D wide from that disc to the rim: 4.5867 % of the area; with the
 * disc 0.4993 dB uniform. [computed] Under uniform lighting the share of the captured power is the
 * share of the area. */
static void test_struts(void **state)
{
    (void)state;
    ev_feed_budget budget = with_lighting(uniform, 1.0, 0.2);
    double captured = budget.efficiency.spillover;
    assert_ratio(budget.power[EV_FATE_SHADOW_STRUTS] / captured, 0.045867, 1e-3);
    assert_near(budget.power[EV_FATE_SHADOW_STRUTS] / captured, 0.045867, 5e-7);
    assert_near(decibels(budget.efficiency.blockage), 0.4993, 5e-5);
}

/* D 10 m, F 5 m, cos^2 feed, elevation 30 deg, flat ground 290 K below the horizon, sky 10 K:
 * spillover 0.216, of which 0.128996 meets the ground: 38.279 K. [computed] */
static void test_noise(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.site = (ev_site_design){true, 30.0 * degree, 290.0, 10.0};
    ev_feed_budget budget = ev_fixture_budget(&design);
    assert_near(budget.power[EV_FATE_PAST_MAIN], 0.216, 1e-9);
    assert_near(budget.noise.spill_ground, 0.128996, 5e-7);
    assert_near(budget.noise.spill_ground + budget.noise.spill_sky, 0.216, 1e-9);
    assert_near(budget.noise.spill_k, 38.279, 5e-4);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_axial_misplacement),
        cmocka_unit_test(test_axial_path_error_to_first_order),
        cmocka_unit_test(test_lateral_misplacement),
        cmocka_unit_test(test_beam_deviation_factor),
        cmocka_unit_test(test_ruze),
        cmocka_unit_test(test_taper_of_round_apertures),
        cmocka_unit_test(test_central_disc),
        cmocka_unit_test(test_struts),
        cmocka_unit_test(test_noise),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
