/* Whole antennas against published and independently computed figures. */
#include "beam_fixture.h"
#include "optics/beam_limit.h"

/* C. Balanis, "Antenna Theory", example 15.3: D 10 m, f/D 0.5, 3 GHz, n = 2: 48.6975 dB with a
 * wavelength of 0.1 m [seen]; 48.703539 dBi with the exact speed of light [computed]. */
static void test_balanis_gain(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(10.0, 5.0, 0.0, 2.0);
    ev_antenna antenna = ev_test_antenna(design, 3e9);
    assert_near(ev_test_beam(&antenna).gain_dbi, 48.703539, 1e-6);
    antenna = ev_test_antenna(design, EV_LIGHT_SPEED / 0.1);
    assert_near(ev_test_beam(&antenna).gain_dbi, 48.6975, 1e-4);
}

/* The same dish with a feed of -10 dB at the rim, by surface currents [computed]. */
static ev_design misplaced(double along, double across)
{
    ev_design design = ev_test_dish(10.0, 5.0, 0.0, 2.0);
    design.feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
    design.feeds[0].edge_taper = 10.0;
    design.feeds[0].shift = ev_vec3_make(across, 0.0, along);
    return design;
}

static void test_misplacement(void **state)
{
    (void)state;
    ev_antenna focused = ev_test_antenna(misplaced(0.0, 0.0), 3e9);
    ev_antenna axial = ev_test_antenna(misplaced(0.02, 0.0), 3e9);
    ev_antenna lateral = ev_test_antenna(misplaced(0.0, 0.05), 3e9);
    double best = ev_test_beam(&focused).gain_dbi;
    ev_beam moved = ev_test_beam(&lateral);
    assert_near(best - ev_test_beam(&axial).gain_dbi, 0.0830, 1e-3);
    assert_near(best - moved.gain_dbi, 0.0204, 1e-4);
    assert_near(ev_test_deg(moved.x), -0.5014, 1e-4);
    assert_near(moved.y, 0.0, 1e-9);
}

/* Y. Lo, IRE Trans. AP-8, 1960: (1 + k q) / (1 + q), q = (D / 4F)^2, k about 0.36 [memory]: 0.820
 * at f/D 0.4, 0.872 at 0.5. An empirical fit over tapers: 0.01. */
static void test_deviation_factor(void **state)
{
    (void)state;
    static const double cases[][2] = {{4.0, 0.820}, {5.0, 0.872}};
    for (int i = 0; i < 2; i++) {
        ev_design design = ev_test_dish(10.0, cases[i][0], 0.0, 2.0);
        design.feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
        design.feeds[0].edge_taper = 10.0;
        design.feeds[0].shift.y = 0.03;
        ev_antenna antenna = ev_test_antenna(design, 3e9);
        ev_beam beam = ev_test_beam(&antenna);
        assert_near(beam.deviation_factor, cases[i][1], 0.01);
        double seen = atan(0.03 / cases[i][0]);
        assert_near(-beam.y / seen, beam.deviation_factor, 1e-4);
    }
}

/* Adatia and Rudge 1975 [memory]: squint asin(lambda sin(theta_0) / 4 pi F); 0.109 deg by the
 * formula, 0.1078 by surface currents [computed] for D 1.2, F 0.72, offset 0.66 m, 12 GHz. */
static void test_circular_squint(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(1.2, 0.72, 0.66, 2.0);
    design.feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
    design.feeds[0].edge_taper = 11.0;
    double beam_y[2];
    for (int sense = 0; sense < 2; sense++) {
        design.feeds[0].polarization = sense ? EV_POLARIZATION_LHCP : EV_POLARIZATION_RHCP;
        ev_antenna antenna = ev_test_antenna(design, 12e9);
        ev_beam beam = ev_test_beam(&antenna);
        assert_near(ev_test_deg(beam.squint), 0.1078, 1e-4);
        double tilt = antenna.layout.feed_tilt;
        double formula = asin(antenna.wavelength * sin(tilt) / (4.0 * EV_PI * 0.72));
        assert_near(ev_test_deg(formula), 0.109, 2e-3);
        assert_near(beam.squint, formula, 0.02 * formula);
        beam_y[sense] = beam.y;
    }
    assert_near(beam_y[0], -beam_y[1], 1e-9);
    assert_true(beam_y[0] < 0.0); /* right-hand leans to -y for an aperture at +x */
}

/* J. Ruze, Proc. IEEE 54, 1966: lambda/16 2.679 dB, lambda/30 0.762 dB. */
static void test_rough_surface(void **state)
{
    (void)state;
    static const double cases[][2] = {{16.0, 2.679}, {30.0, 0.762}};
    ev_design design = ev_test_dish(3.0, 1.2, 0.0, 2.0);
    ev_antenna smooth = ev_test_antenna(design, 10e9);
    for (int i = 0; i < 2; i++) {
        design.main.surface_rms = smooth.wavelength / cases[i][0];
        ev_antenna rough = ev_test_antenna(design, 10e9);
        double loss = ev_test_beam(&smooth).gain_dbi - ev_test_beam(&rough).gain_dbi;
        assert_near(loss, cases[i][1], 6e-4);
    }
}

/* ITU-R S.465-6 and S.580-6 as read publicly [seen]: breakpoints and levels. */
static void test_itu_levels(void **state)
{
    (void)state;
    ev_limit s465 = ev_limit_s465(200.0), small = ev_limit_s465(40.0), s580 = ev_limit_s580(200.0);
    assert_near(ev_test_deg(ev_limit_start(&s465)), 1.0, 1e-12);
    ev_limit fifty = ev_limit_s465(50.0);
    assert_near(ev_test_deg(ev_limit_start(&fifty)), 2.0, 1e-12);
    assert_near(ev_test_deg(ev_limit_start(&small)), 114.0 * pow(40.0, -1.09), 1e-12);
    assert_near(ev_limit_at(&s465, ev_test_rad(1.0)), 32.0, 1e-9);
    assert_near(ev_limit_at(&s465, ev_test_rad(-10.0)), 7.0, 1e-9);
    assert_near(ev_limit_at(&s465, ev_test_rad(48.0)), -10.03, 2e-3);
    assert_near(ev_limit_at(&s465, ev_test_rad(90.0)), -10.0, 1e-12);
    assert_true(isnan(ev_limit_at(&s465, ev_test_rad(0.99))));
    assert_near(ev_limit_at(&s580, ev_test_rad(1.0)), 29.0, 1e-9);
    assert_near(ev_limit_at(&s580, ev_test_rad(10.0)), 4.0, 1e-9);
    assert_near(ev_limit_at(&s580, ev_test_rad(24.0)), -3.5, 1e-12);
    assert_near(ev_limit_at(&s580, ev_test_rad(40.0)), 32.0 - 25.0 * log10(40.0), 1e-9);
    assert_near(ev_limit_at(&s580, ev_test_rad(60.0)), -10.0, 1e-12);
    ev_limit too_small = ev_limit_s580(49.0);
    assert_false(ev_limit_applies(&too_small));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_balanis_gain),     cmocka_unit_test(test_misplacement),
        cmocka_unit_test(test_deviation_factor), cmocka_unit_test(test_circular_squint),
        cmocka_unit_test(test_rough_surface),    cmocka_unit_test(test_itu_levels),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
