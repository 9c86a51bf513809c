/* Limits, the pedestal, cuts, maps and notes. */
#include "beam_fixture.h"
#include "optics/beam_limit.h"
#include "optics/beam_pedestal.h"

#include <gsl/gsl_integration.h>

enum { CUT = 2001 };

/* Lobes one degree apart under an envelope that lies `over` dB above 29 - 25 log(phi) in lobes of
 * odd tens, and 2 dB below it elsewhere. */
static void make_lobes(double over, double *angle, double *level)
{
    for (int i = 0; i < CUT; i++) {
        double phi = 20.0 * (i - 1000) / 1000.0, far = fmax(fabs(phi), 0.3);
        double height = (int)far % 10 == 5 ? over : -2.0;
        angle[i] = ev_test_rad(phi);
        level[i] = 29.0 - 25.0 * log10(far) + height + 20.0 * log10(fabs(sin(EV_PI * phi)) + 1e-6);
    }
}

static void test_nine_tenths_of_the_peaks(void **state)
{
    (void)state;
    static double angle[CUT], level[CUT];
    ev_limit limit = ev_limit_s580(100.0);
    make_lobes(3.0, angle, level);
    ev_limit_result result = ev_limit_check(&limit, angle, level, CUT);
    assert_true(result.applies);
    assert_true(result.peak_count >= 36 && result.peak_count <= 40);
    assert_int_equal(result.peaks_over, 4); /* 5 and 15 degrees, both sides: more than a tenth */
    assert_false(result.met);
    assert_near(result.worst_db, 3.0, 0.2);
    assert_near(fmod(fabs(ev_test_deg(result.worst_angle)), 10.0), 5.5, 0.1);
    /* one lobe of the four brought down: 3 of 38 are within the tenth */
    for (int i = 0; i < CUT; i++)
        if (fabs(ev_test_deg(angle[i]) - 15.5) < 0.5)
            level[i] -= 5.0;
    result = ev_limit_check(&limit, angle, level, CUT);
    assert_int_equal(result.peaks_over, 3);
    assert_true(result.met);
    assert_true(result.worst_db > 2.0); /* still told */
    limit.share = 1.0;
    assert_false(ev_limit_check(&limit, angle, level, CUT).met);
    make_lobes(-1.0, angle, level);
    result = ev_limit_check(&limit, angle, level, CUT);
    assert_true(result.met);
    assert_near(result.worst_db, -1.0, 0.2);
}

static void test_peak_between_samples(void **state)
{
    (void)state;
    double angle[3] = {0.20, 0.21, 0.22}, level[3], at = 0.213;
    ev_limit limit;
    assert_true(ev_limit_table((double[]){0.1, 0.3}, (double[]){-4.99, -4.99}, 2, &limit));
    for (int i = 0; i < 3; i++)
        level[i] = -5.0 - 400.0 * (angle[i] - at) * (angle[i] - at) + 0.02;
    ev_limit_result result = ev_limit_check(&limit, angle, level, 3);
    assert_near(result.worst_peak_db, 0.01, 1e-9);
    assert_near(result.worst_peak_angle, at, 1e-9);
    assert_false(result.met);
}

static void test_tables(void **state)
{
    (void)state;
    ev_limit limit;
    double angle[] = {ev_test_rad(1.0), ev_test_rad(10.0), ev_test_rad(10.0), ev_test_rad(180.0)};
    double level[] = {30.0, 5.0, 0.0, -10.0};
    assert_true(ev_limit_table(angle, level, 4, &limit));
    assert_near(ev_limit_at(&limit, ev_test_rad(sqrt(10.0))), 17.5, 1e-9); /* straight in log */
    assert_near(ev_limit_at(&limit, ev_test_rad(-9.999999)), 5.0, 1e-5);
    assert_near(ev_limit_at(&limit, ev_test_rad(10.0)), 0.0, 1e-9);
    assert_near(ev_limit_at(&limit, EV_PI), -10.0, 1e-9);
    assert_true(isnan(ev_limit_at(&limit, ev_test_rad(0.99))));
    assert_true(isnan(ev_limit_at(&limit, NAN)));
    double zero[] = {0.0, 0.2}, flat[] = {1.0, 3.0};
    assert_true(ev_limit_table(zero, flat, 2, &limit));
    assert_near(ev_limit_at(&limit, 0.05), 1.5, 1e-12);
    assert_false(ev_limit_table(angle, level, 1, &limit));
    double falling[] = {0.2, 0.1}, broken[] = {NAN, 0.0}, outside[] = {0.0, 4.0};
    assert_false(ev_limit_table(falling, flat, 2, &limit));
    assert_false(ev_limit_table(zero, broken, 2, &limit));
    assert_false(ev_limit_table(outside, flat, 2, &limit));
}

/* Nothing to judge, NaN, and too small a dish: told, never met by accident or crashed. */
static void test_poor_cuts(void **state)
{
    (void)state;
    double angle[3] = {-0.001, 0.0, 0.001}, level[3] = {10.0, 40.0, 10.0};
    ev_limit limit = ev_limit_s465(300.0);
    ev_limit_result result = ev_limit_check(&limit, angle, level, 3);
    assert_int_equal(result.sample_count, 0);
    assert_true(isnan(result.worst_db));
    double wide[3] = {0.1, 0.2, 0.3}, nothing[3] = {NAN, NAN, NAN};
    result = ev_limit_check(&limit, wide, nothing, 3);
    assert_int_equal(result.sample_count, 0);
    result = ev_limit_check(&limit, wide, nothing, 0);
    assert_int_equal(result.peak_count, 0);
    limit = ev_limit_s580(30.0);
    assert_false(ev_limit_check(&limit, wide, level, 3).met);
}

/* J. Ruze 1966: all the pedestal carries is what the coherent beam lost, 1 - exp(-d^2), and for a
 * small error it is its first term. */
static double ring(double theta, void *context)
{
    return 0.5 * sin(theta) * ev_pedestal_gain(context, theta);
}

static void test_pedestal(void **state)
{
    (void)state;
    gsl_integration_workspace *work = gsl_integration_workspace_alloc(400);
    for (double rms = 0.002; rms < 0.2; rms *= 2.3) {
        ev_pedestal pedestal = {.wavelength = 1.0, .rms = rms, .correlation = 60.0, .power = 0.8};
        gsl_function f = {ring, &pedestal};
        double sum, error, d = 4.0 * EV_PI * rms;
        gsl_integration_qag(&f, 0.0, 0.5 * EV_PI, 1e-12, 1e-9, 400, GSL_INTEG_GAUSS61, work, &sum,
                            &error);
        assert_near(sum / (0.8 * (1.0 - exp(-d * d))), 1.0, 2e-3); /* sin for theta: 1/(2 kc)^2 */
    }
    gsl_integration_workspace_free(work);
    ev_pedestal small = {.wavelength = 0.01, .rms = 2e-5, .correlation = 0.2, .power = 1.0};
    double d = 4.0 * EV_PI * 2e-3, reach = 2.0 * EV_PI * 20.0;
    double first = reach * reach * d * d * exp(-d * d);
    assert_near(ev_pedestal_gain(&small, 0.0) / first, 1.0, 2e-4);
    double e_fold = asin(1.0 / (EV_PI * 20.0));
    assert_near(ev_pedestal_gain(&small, e_fold) / first, exp(-1.0), 2e-4);
    assert_near(ev_pedestal_add_dbi(&small, 0.0, -300.0), ev_test_db(first), 1e-3);
    small.rms = 0.0;
    assert_near(ev_pedestal_add_dbi(&small, 0.0, 3.0), 3.0, 1e-12);
    small.rms = 1.0; /* absurd: 100 wavelengths */
    assert_true(isfinite(ev_pedestal_gain(&small, 0.1)));
}

/* Cuts and maps show the same field; through the peak, angles count from it. */
static void test_cuts_and_maps(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(1.2, 0.5, 0.0, 3.0);
    design.feeds[0].shift = ev_vec3_make(0.02, -0.01, 0.0);
    ev_antenna antenna = ev_test_antenna(design, 12e9);
    ev_beam beam = ev_test_beam(&antenna);
    ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    double co[181], across[181];
    ev_beam_cut cut = {.centre = beam.peak, .phi = 0.7, .from = -EV_PI, .to = EV_PI, .count = 181};
    ev_beam_cut_compute(source, &cut, co, across);
    assert_near(ev_beam_cut_angle(&cut, 90), 0.0, 1e-15);
    assert_near(co[90], beam.gain_dbi, 1e-9);
    assert_true(isnan(co[0]) && isnan(across[180])); /* behind the dish */
    for (int i = 0; i < 181; i++) {
        ev_vec3 s = ev_beam_cut_direction(&cut, i);
        assert_near(ev_vec3_angle(s, beam.peak), fabs(ev_beam_cut_angle(&cut, i)), 1e-9);
        assert_true(!(co[i] > beam.gain_dbi));
    }
    cut.centre = ev_vec3_make(0.0, 0.0, 1.0);
    ev_vec3 s = ev_beam_cut_direction(&cut, 100);
    assert_near(atan2(s.y, s.x), 0.7, 1e-12);
    enum { SIDE = 41 };
    static float map_co[SIDE * SIDE], map_cross[SIDE * SIDE];
    ev_beam_map map = {.x = beam.peak.x, .y = beam.peak.y, .half_width = 0.1, .side = SIDE};
    ev_beam_map_compute(source, &map, map_co, map_cross);
    assert_near(map_co[SIDE * SIDE / 2], beam.gain_dbi, 1e-5);
    double u = map.x - 0.1, v = map.y + 0.1; /* first sample: low x, high y */
    ev_beam_field corner = ev_test_field(source, ev_vec3_make(u, v, sqrt(1.0 - u * u - v * v)));
    assert_near(map_co[0], ev_test_db(ev_test_power(corner.co)), 1e-4);
    assert_near(map_cross[0], ev_test_db(ev_test_power(corner.cross)), 1e-4);
    map.half_width = 1.2;
    ev_beam_map_compute(source, &map, map_co, NULL);
    assert_true(isnan(map_co[0]));
    ev_beam_source_destroy(source);
}

static int find_note(const ev_beam_note *notes, int count, ev_beam_note_id id)
{
    for (int i = 0; i < count; i++)
        if (notes[i].id == id)
            return i;
    return -1;
}

static void test_notes(void **state)
{
    (void)state;
    ev_beam_note notes[EV_BEAM_NOTE_COUNT];
    ev_feed_budget budget;
    ev_antenna good = ev_test_antenna(ev_test_dish(3.0, 1.2, 0.0, 2.5), 12e9);
    ev_budget_compute_feed(&good, 0, &budget);
    ev_beam beam = ev_test_beam(&good);
    assert_true(beam.nodes.converged);
    assert_int_equal(ev_beam_notes(&good, 0, &budget, &beam, notes), 0);
    beam.nodes.converged = false;
    beam.nodes.residual = 1e-3;
    beam.ledger_gap_db = -0.2;
    assert_int_equal(ev_beam_notes(&good, 0, &budget, &beam, notes), 2);
    assert_int_equal(notes[0].id, EV_BEAM_NOTE_UNCONVERGED);
    assert_near(notes[0].value, 1e-3, 1e-15);
    assert_near(notes[1].value, 0.2, 1e-15);
    ev_design design = ev_test_cassegrain(12.0);
    design.strut_count = 1;
    design.struts[0] = ev_default_strut();
    design.struts[0].from = 0.4;
    design.struts[0].to = 6.0;
    design.struts[0].width = 0.1;
    ev_antenna poor = ev_test_antenna(design, 0.2e9);
    ev_budget_compute_feed(&poor, 0, &budget);
    int count = ev_beam_notes(&poor, 0, &budget, NULL, notes);
    int dish = find_note(notes, count, EV_BEAM_NOTE_DISH_SMALL);
    assert_int_equal(dish, 0);
    assert_near(notes[dish].value, 12.0 * 0.2e9 / EV_LIGHT_SPEED, 1e-9);
    int strut = find_note(notes, count, EV_BEAM_NOTE_STRUT_THIN);
    assert_true(strut > 0);
    assert_near(notes[strut].value, 0.1 * 0.2e9 / EV_LIGHT_SPEED, 1e-9);
    assert_true(find_note(notes, count, EV_BEAM_NOTE_SUB_SMALL) > 0);
    int spill = find_note(notes, count, EV_BEAM_NOTE_WIDE_ANGLE);
    assert_true(spill > 0); /* past the sub: its half angle from the feed */
    assert_near(notes[spill].value, poor.layout.sub_half_angle, 1e-6);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_nine_tenths_of_the_peaks),
        cmocka_unit_test(test_peak_between_samples),
        cmocka_unit_test(test_tables),
        cmocka_unit_test(test_poor_cuts),
        cmocka_unit_test(test_pedestal),
        cmocka_unit_test(test_cuts_and_maps),
        cmocka_unit_test(test_notes),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
