/* The second opinion: its near field against Maxwell's equations, its far field against the ray
 * field where edges are dark and large, and what only it can show. */
#include "beam_fixture.h"
#include "optics/diffraction.h"
#include "optics/diffraction_sub.h"

static ev_antenna dual(double frequency, double taper)
{
    return ev_test_antenna(ev_test_cassegrain(taper), frequency);
}

static ev_cvec3 h_at(const ev_sub_currents *currents, ev_vec3 p, double dx, double dy, double dz)
{
    p = ev_vec3_add(p, ev_vec3_make(dx, dy, dz));
    return ev_sub_currents_field(currents, p, false).h;
}

/* In free space curl h = jk e (both by their roots of impedance), a few wavelengths from the sub
 * as well as at the dish: the two sums were written apart. Differences of fourth order. */
static void test_maxwell(void **state)
{
    (void)state;
    ev_antenna antenna = dual(2e9, 12.0);
    ev_sub_currents currents;
    int radial, around;
    ev_sub_currents_order(&antenna, 0, &radial, &around);
    ev_sub_currents_make(&antenna, 0, radial, around, 0.0, &currents);
    double k = antenna.wavenumber, d = antenna.wavelength / 400.0;
    const ev_vec3 places[] = {{0.3, 0.2, 4.3}, {1.0, -0.4, 3.0}, {3.0, 2.0, 0.8}, {-5.0, 1.0, 1.4}};
    for (int i = 0; i < 4; i++) {
        ev_vec3 p = places[i];
        ev_cvec3 e = ev_sub_currents_field(&currents, p, true).e;
        ev_cvec3 xp = h_at(&currents, p, d, 0, 0), xm = h_at(&currents, p, -d, 0, 0);
        ev_cvec3 yp = h_at(&currents, p, 0, d, 0), ym = h_at(&currents, p, 0, -d, 0);
        ev_cvec3 zp = h_at(&currents, p, 0, 0, d), zm = h_at(&currents, p, 0, 0, -d);
        double _Complex cx = (yp.z - ym.z - zp.y + zm.y) / (2.0 * d);
        double _Complex cy = (zp.x - zm.x - xp.z + xm.z) / (2.0 * d);
        double _Complex cz = (xp.y - xm.y - yp.x + ym.x) / (2.0 * d);
        double size = sqrt(ev_test_power(e.x) + ev_test_power(e.y) + ev_test_power(e.z));
        assert_near(cabs(cx / (I * k) - e.x) / size, 0.0, 3e-4);
        assert_near(cabs(cy / (I * k) - e.y) / size, 0.0, 3e-4);
        assert_near(cabs(cz / (I * k) - e.z) / size, 0.0, 3e-4);
        assert_true(size > 0.0);
    }
    ev_sub_currents_free(&currents);
}

static ev_beam opinion(const ev_antenna *antenna, ev_diffraction *result, ev_beam *rays)
{
    ev_feed_budget budget;
    ev_beam beam;
    ev_budget_compute_feed(antenna, 0, &budget);
    ev_beam_source *source = ev_diffraction_source(antenna, 0, NULL, NULL, result);
    assert_non_null(source);
    ev_beam_compute_from(source, antenna, 0, &budget, &beam);
    ev_beam_compute(antenna, 0, &budget, EV_BEAM_EXACT, rays);
    ev_beam_source_destroy(source);
    return beam;
}

/* A dark rim: no edge to speak of, and the two must meet. Phase and absolute level at once. */
static void test_dark_rim_agrees(void **state)
{
    (void)state;
    ev_antenna antenna = dual(12e9, 40.0);
    ev_diffraction result;
    ev_beam rays, full = opinion(&antenna, &result, &rays);
    assert_near(full.gain_dbi, rays.gain_dbi, 0.02);
    assert_near(full.width_x / rays.width_x, 1.0, 4e-3);
    assert_true(result.residual < 1e-5);
    ev_beam_source *a = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    ev_beam_source *b = ev_diffraction_source(&antenna, 0, NULL, NULL, &result);
    double _Complex one = ev_test_field(a, ev_test_direction(0.03, 20.0)).co;
    double _Complex two = ev_test_field(b, ev_test_direction(0.03, 20.0)).co;
    assert_near(carg(two / one), 0.0, 0.03);
    ev_beam_source_destroy(a);
    ev_beam_source_destroy(b);
}

/* A bright rim: loss, and more of it the fewer wavelengths the subreflector has; what arrives on
 * the dish is less than what the subreflector caught. */
static void test_small_sub_loses_more(void **state)
{
    (void)state;
    double last = 0.0;
    for (double frequency = 10e9; frequency > 1e9; frequency /= 2.5) {
        ev_antenna antenna = dual(frequency, 11.0);
        ev_feed_budget budget;
        ev_diffraction result;
        ev_beam rays, full = opinion(&antenna, &result, &rays);
        double loss = rays.gain_dbi - full.gain_dbi;
        assert_true(loss > last + 0.05 && loss < 2.0);
        last = loss;
        ev_budget_compute_feed(&antenna, 0, &budget);
        assert_true(result.caught_by_main < 1.0 - budget.power[EV_FATE_PAST_SUB]);
        assert_true(result.caught_by_main > 0.75);
        /* no more gain than what arrives can give */
        assert_true(full.gain_dbi <
                    budget.full_aperture_gain_dbi + ev_test_db(result.caught_by_main) + 1e-9);
    }
}

/* A subreflector moved sideways throws both beams to the same place. */
static void test_misplaced_sub(void **state)
{
    (void)state;
    ev_design design = ev_test_cassegrain(20.0);
    design.sub.shift.x = 0.01;
    ev_antenna antenna = ev_test_antenna(design, 8e9);
    ev_diffraction result;
    ev_beam rays, full = opinion(&antenna, &result, &rays);
    assert_true(fabs(rays.x) > 0.3 * rays.width_x);
    assert_near(full.x / rays.x, 1.0, 0.02);
}

/* Twice the points on the subreflector change nothing. */
static void test_sub_is_sampled_enough(void **state)
{
    (void)state;
    ev_antenna antenna = dual(10e9, 11.0);
    int radial, around;
    ev_sub_currents few, many;
    ev_sub_currents_order(&antenna, 0, &radial, &around);
    ev_sub_currents_make(&antenna, 0, radial, around, 0.0, &few);
    ev_sub_currents_make(&antenna, 0, 2 * radial, 2 * around, 0.0, &many);
    double middle = 0.0;
    for (double x = 0.0; x <= 6.0; x += 0.23) {
        ev_vec3 p = ev_main_point(&antenna, x * cos(x), x * sin(x));
        ev_cvec3 a = ev_sub_currents_field(&few, p, false).h;
        ev_cvec3 b = ev_sub_currents_field(&many, p, false).h;
        middle = fmax(middle, cabs(b.y));
        assert_near(cabs(a.y - b.y) / middle, 0.0, 1e-7);
    }
    ev_sub_currents_free(&few);
    ev_sub_currents_free(&many);
}

typedef struct watch {
    int calls, stop_at;
    double last;
    bool rising;
} watch;

static bool watch_progress(void *context, double share)
{
    watch *seen = context;
    seen->rising &= share >= seen->last && share <= 1.0;
    seen->last = share;
    return ++seen->calls != seen->stop_at;
}

static void test_progress_and_cancel(void **state)
{
    (void)state;
    ev_antenna antenna = dual(2e9, 11.0);
    ev_diffraction result;
    ev_diffraction_plan plan = ev_diffraction_plan_for(&antenna, 0);
    watch all = {.rising = true}, some = {.rising = true};
    ev_beam_source *source = ev_diffraction_source(&antenna, 0, watch_progress, &all, &result);
    assert_non_null(source);
    ev_beam_source_destroy(source);
    assert_true(all.rising && all.last == 1.0);
    assert_near(result.pairs / plan.pairs, 1.0, 0.5); /* the estimate is one */
    for (some.stop_at = 1; some.stop_at < all.calls; some.stop_at += all.calls / 3) {
        some.calls = 0;
        some.last = 0.0;
        assert_null(ev_diffraction_source(&antenna, 0, watch_progress, &some, &result));
        assert_int_equal(some.calls, some.stop_at);
    }
    double worked = ev_diffraction_probe(&antenna, 0, 2e5);
    assert_true(worked >= 2e5 && worked < 4e5);
    ev_antenna single = ev_test_antenna(ev_test_dish(1.2, 0.5, 0.0, 3.0), 12e9);
    assert_null(ev_diffraction_source(&single, 0, NULL, NULL, &result));
    assert_near(ev_diffraction_plan_for(&single, 0).pairs, 0.0, 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_maxwell),
        cmocka_unit_test(test_dark_rim_agrees),
        cmocka_unit_test(test_small_sub_loses_more),
        cmocka_unit_test(test_misplaced_sub),
        cmocka_unit_test(test_sub_is_sampled_enough),
        cmocka_unit_test(test_progress_and_cancel),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
