/* What must hold for any beam: symmetry, bounds, conservation, convergence, the same bits. */
#include "beam_fixture.h"
#include "optics/beam_rings.h"
#include "optics/beam_source.h"
#include "optics/quadrature.h"
#include "random.h"

#include <stdlib.h>
#include <string.h>

extern void omp_set_num_threads(int count); /* the OpenMP runtime's, to run with one thread */

static void test_symmetric_dish(void **state)
{
    (void)state;
    ev_antenna antenna = ev_test_antenna(ev_test_dish(2.0, 0.9, 0.0, 2.5), 12e9);
    ev_beam beam = ev_test_beam(&antenna);
    ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    ev_beam_field axis = ev_test_field(source, ev_test_direction(0.0, 0.0));
    assert_true(cabs(axis.cross) < 1e-10 * cabs(axis.co));
    assert_near(beam.x, 0.0, 1e-9);
    assert_near(beam.y, 0.0, 1e-9);
    /* E and H planes: all that differs is the currents along z */
    assert_near(beam.width_x / beam.width_y, 1.0, 1e-3);
    assert_near(beam.first_sidelobe_x_db, beam.first_sidelobe_y_db, 0.02);
    /* cross-polarization only in the 45 degree planes, and none in the principal ones */
    assert_near(fabs(beam.cross_polar_x), fabs(beam.cross_polar_y), 1e-5);
    for (double theta = 0.2; theta < 40.0; theta *= 1.7)
        for (int plane = 0; plane < 4; plane++) {
            ev_beam_field f = ev_test_field(source, ev_test_direction(theta, 90.0 * plane));
            assert_true(cabs(f.cross) < 1e-10 * cabs(axis.co));
        }
    ev_beam_source_destroy(source);
}

/* The offset dish depolarizes in the plane of its asymmetry's normal: two lobes beside the beam,
 * of the size that T.-S. Chu and R. Turrin, IEEE Trans. AP-21, 1973, show for this geometry
 * (about -20 to -25 dB); the sign of y turns with the offset. */
static void test_offset_cross_polarization(void **state)
{
    (void)state;
    double levels[3];
    for (int i = 0; i < 3; i++) {
        ev_antenna antenna = ev_test_antenna(ev_test_dish(1.2, 0.72 + 0.48 * i, 0.66, 8.0), 12e9);
        ev_beam beam = ev_test_beam(&antenna);
        levels[i] = beam.cross_polar_db;
        assert_near(fabs(beam.cross_polar_y) / beam.width_y, 0.65, 0.15);
        assert_near(beam.cross_polar_x / beam.width_x, 0.0, 0.05);
    }
    assert_true(levels[0] > -26.0 && levels[0] < -19.0);
    assert_true(levels[1] < levels[0] - 3.0 && levels[2] < levels[1] - 1.5);
}

static ev_design any_dish(ev_random *random)
{
    double diameter = ev_random_log(random, 0.3, 3.0);
    ev_design design = ev_test_dish(
        diameter, diameter * ev_random_between(random, 0.3, 1.0),
        ev_random_chance(random, 0.5) ? diameter * ev_random_between(random, 0.5, 0.7) : 0.0,
        ev_random_log(random, 0.5, 40.0));
    design.feeds[0].polarization = (ev_polarization)ev_random_pick(random, 4);
    double shift = 0.02 * diameter;
    design.feeds[0].shift.x = ev_random_between(random, -shift, shift);
    design.feeds[0].shift.y = ev_random_between(random, -shift, shift);
    design.feeds[0].defocus = ev_random_between(random, -shift, shift);
    return design;
}

/* No directivity above that of the uniform aperture, whatever the lighting; and never more power
 * against the ledger than its product can be blamed for. */
static void test_gain_is_bounded(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(20261201);
    for (int i = 0; i < 30; i++) {
        ev_antenna antenna = ev_test_antenna(any_dish(&random), 12e9);
        ev_feed_budget budget;
        ev_beam beam;
        ev_budget_compute_feed(&antenna, 0, &budget);
        assert_true(ev_beam_compute(&antenna, 0, &budget, EV_BEAM_COARSE, &beam));
        assert_true(beam.gain_dbi < budget.full_aperture_gain_dbi);
        assert_true(beam.gain_on_axis_dbi <= beam.gain_dbi + 1e-6);
        assert_true(beam.cross_polar_db < 0.0);
        assert_true(fabs(beam.ledger_gap_db) < 0.3);
    }
}

/* All power that leaves into z > 0, against what the dish catches. Currents of 2 n x H on a dish of
 * 24 wavelengths radiate a little less forward, the rest behind. */
static void test_radiated_power(void **state)
{
    (void)state;
    static const double offsets[] = {0.0, 0.35};
    for (int c = 0; c < 2; c++) {
        ev_antenna antenna = ev_test_antenna(ev_test_dish(0.6, 0.5, offsets[c], 5.0), 12e9);
        ev_feed_budget budget;
        ev_budget_compute_feed(&antenna, 0, &budget);
        ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
        ev_gauss *gauss = malloc(sizeof *gauss);
        ev_gauss_make(110, gauss);
        enum { AROUND = 160 };
        double sum = 0.0;
        for (int i = 0; i < gauss->count; i++) {
            ev_vec3 directions[AROUND];
            ev_beam_field fields[AROUND];
            double theta = 0.5 * EV_PI * gauss->x[i];
            for (int j = 0; j < AROUND; j++)
                directions[j] = ev_test_direction(ev_test_deg(theta), 360.0 * j / AROUND);
            ev_beam_fields(source, directions, AROUND, fields);
            for (int j = 0; j < AROUND; j++)
                sum += gauss->weight[i] * 0.5 * EV_PI * sin(theta) * 2.0 * EV_PI / AROUND *
                       (ev_test_power(fields[j].co) + ev_test_power(fields[j].cross));
        }
        double share = sum / (4.0 * EV_PI), caught = 1.0 - budget.power[EV_FATE_PAST_MAIN];
        assert_true(share < caught);
        assert_true(share > 0.97 * caught);
        free(gauss);
        ev_beam_source_destroy(source);
    }
}

/* Twice the rays each way and the next rings but one: nothing above 1e-4 dB, down to 70 dB under
 * the peak; for a single mirror, a Cassegrain, and a dish a thousand wavelengths across. */
static void check_halving(const ev_antenna *antenna)
{
    ev_beam_recipe coarse, fine;
    ev_beam_currents_recipe(antenna, 0, EV_BEAM_EXACT, &coarse);
    ev_beam_currents_recipe(antenna, 0, EV_BEAM_EXACT, &fine);
    ev_modes a, b;
    ev_modes_make(&coarse.sheet, &a);
    fine.sheet.first_radial = 2 * a.radial;
    fine.sheet.around = 2 * a.around;
    ev_modes_make(&fine.sheet, &b);
    double *scratch =
        malloc((size_t)(ev_rings_scratch(&a) + ev_rings_scratch(&b)) * sizeof(double));
    double peak = 0.0;
    for (double theta = 0.0; theta < 86.0; theta = theta * 1.4 + 0.011) {
        ev_vec3 s = ev_test_direction(theta, 37.0);
        double _Complex one[3], two[3];
        int step = ev_rings_step(&a, ev_rings_phase(&coarse.sheet, s));
        ev_rings *few = ev_rings_create(&coarse.sheet, &a, step);
        ev_rings *many = ev_rings_create(&fine.sheet, &b, step + 2);
        ev_rings_sum(few, &coarse.sheet, s, scratch, one);
        ev_rings_sum(many, &fine.sheet, s, scratch, two);
        double here = cabs(two[0]);
        peak = fmax(peak, here);
        if (here > 3e-4 * peak)
            assert_near(20.0 * log10(cabs(one[0]) / here), 0.0, 1e-4);
        assert_near(cabs(one[0] - two[0]) / peak, 0.0, 1e-8);
        ev_rings_destroy(few);
        ev_rings_destroy(many);
    }
    free(scratch);
    ev_modes_free(&a);
    ev_modes_free(&b);
    free(coarse.owned);
    free(fine.owned);
}

static void test_halving_changes_nothing(void **state)
{
    (void)state;
    ev_design single = ev_test_dish(1.2, 0.72, 0.66, 4.0);
    single.feeds[0].shift = ev_vec3_make(0.01, 0.02, -0.01);
    ev_antenna antenna = ev_test_antenna(single, 12e9);
    check_halving(&antenna);
    ev_design dual = ev_test_cassegrain(12.0);
    dual.sub.shift.x = 0.01;
    antenna = ev_test_antenna(dual, 6e9);
    check_halving(&antenna);
    antenna = ev_test_antenna(ev_test_dish(10.0, 4.0, 0.0, 2.5), 30e9);
    assert_true(antenna.radius * 2.0 / antenna.wavelength > 1000.0);
    check_halving(&antenna);
}

/* The gain of the thousand wavelengths, focused: the ledger's to rounding. */
static void test_thousand_wavelengths(void **state)
{
    (void)state;
    ev_antenna antenna = ev_test_antenna(ev_test_dish(10.0, 4.0, 0.0, 2.5), 30e9);
    ev_beam beam = ev_test_beam(&antenna);
    assert_near(beam.ledger_gap_db, 0.0, 1e-8);
    assert_near(ev_test_deg(beam.width_x) * 10.0 / antenna.wavelength, 64.0, 4.0);
}

static void test_same_bits(void **state)
{
    (void)state;
    enum { COUNT = 300 };
    static ev_beam_field one[COUNT], two[COUNT];
    ev_design design = ev_test_cassegrain(12.0);
    design.strut_count = 1;
    design.struts[0] = ev_default_strut();
    design.struts[0].from = 0.4;
    design.struts[0].to = 6.0;
    ev_antenna antenna = ev_test_antenna(design, 3e9);
    ev_vec3 directions[COUNT];
    for (int i = 0; i < COUNT; i++)
        directions[i] = ev_test_direction(0.08 * i, 3.0 * i);
    for (int threads = 1; threads <= 3; threads += 2) {
        omp_set_num_threads(threads);
        ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
        ev_beam_fields(source, directions, COUNT, threads == 1 ? one : two);
        /* and one at a time, after all */
        ev_beam_field alone = ev_test_field(source, directions[COUNT / 2]);
        assert_memory_equal(&alone, (threads == 1 ? one : two) + COUNT / 2, sizeof alone);
        ev_beam_source_destroy(source);
    }
    assert_memory_equal(one, two, sizeof one);
}

/* A feed that lights nothing, or only a sliver: told, not invented. */
static void test_dark_feed(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(1.2, 0.5, 0.0, 3.0);
    design.feeds[0].aim = EV_AIM_DIRECTION;
    design.feeds[0].aim_direction = ev_vec3_make(0.0, 0.0, 1.0);
    ev_antenna antenna = ev_test_antenna(design, 12e9);
    ev_feed_budget budget;
    ev_beam beam;
    ev_budget_compute_feed(&antenna, 0, &budget);
    assert_false(ev_beam_compute(&antenna, 0, &budget, EV_BEAM_EXACT, &beam));
    assert_true(isnan(beam.gain_dbi) && isnan(beam.x) && isnan(beam.cross_polar_db));
    design.feeds[0].aim_direction = ev_vec3_make(1.0, 0.0, 0.3);
    antenna = ev_test_antenna(design, 12e9);
    ev_budget_compute_feed(&antenna, 0, &budget);
    assert_true(ev_beam_compute(&antenna, 0, &budget, EV_BEAM_EXACT, &beam));
    assert_true(isfinite(beam.gain_dbi) && isfinite(beam.cross_polar_db));
    ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    ev_beam_field lost = ev_test_field(source, ev_vec3_make(NAN, 0.0, 1.0));
    ev_beam_field behind = ev_test_field(source, ev_vec3_make(0.0, 0.0, -1.0));
    assert_true(isnan(creal(lost.co)) && isnan(creal(lost.cross)));
    assert_true(behind.co == 0.0 && behind.cross == 0.0);
    ev_beam_source_destroy(source);
}

/* A table's phase: that of a feed out of focus by a wavelength, turned round, mends the very same
 * feed. On a centred dish path over path in focus is a function of the angle off the axis. */
static void test_phase_of_a_table(void **state)
{
    (void)state;
    static ev_pattern_table table;
    const double focal = 1.0, away = 0.02, k = 2.0 * EV_PI * 12e9 / EV_LIGHT_SPEED;
    ev_antenna focused = ev_test_antenna(ev_test_dish(2.0, focal, 0.0, 2.0), 12e9);
    table.count = 161;
    table.has_phase = true;
    for (int i = 0; i < table.count; i++) {
        double theta = ev_test_rad(0.5 * i); /* seen from the feed, at `away` above the focus */
        double c = cos(theta), s = sin(theta);
        /* r from (0, 0, F + away): F + away - r c = r^2 s^2 / 4F */
        double a = s * s / (4.0 * focal), root = sqrt(c * c + 4.0 * a * (focal + away));
        double r = a > 1e-9 ? (root - c) / (2.0 * a) : (focal + away) / c;
        double ideal = focal + r * r * s * s / (4.0 * focal);
        table.theta[i] = theta;
        table.e_db[i] = table.h_db[i] = 20.0 * log10(c);
        table.phase[i] = -k * (r - ideal - away);
    }
    ev_pattern_table_prepare(&table);
    ev_design design = ev_test_dish(2.0, focal, 0.0, 2.0);
    design.feeds[0].shift.z = away;
    ev_antenna blurred = ev_test_antenna(design, 12e9);
    design.feeds[0].pattern = EV_PATTERN_TABLE;
    design.feeds[0].table = &table;
    ev_antenna mended = ev_test_antenna(design, 12e9);
    double best = ev_test_beam(&focused).gain_dbi;
    assert_true(best - ev_test_beam(&blurred).gain_dbi > 0.3);
    ev_feed_budget budget;
    ev_budget_compute_feed(&mended, 0, &budget);
    assert_near(budget.efficiency.phase, 1.0, 1e-6);
    ev_beam beam = ev_test_beam(&mended);
    assert_near(beam.gain_dbi, budget.gain_dbi, 0.005);
    assert_near(beam.gain_dbi, best, 0.05); /* it lights a little less of the dish from there */
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_symmetric_dish),
        cmocka_unit_test(test_offset_cross_polarization),
        cmocka_unit_test(test_gain_is_bounded),
        cmocka_unit_test(test_radiated_power),
        cmocka_unit_test(test_halving_changes_nothing),
        cmocka_unit_test(test_thousand_wavelengths),
        cmocka_unit_test(test_same_bits),
        cmocka_unit_test(test_dark_feed),
        cmocka_unit_test(test_phase_of_a_table),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
