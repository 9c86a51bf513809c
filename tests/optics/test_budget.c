/* The budget beyond its shares: extremes of the path, the highest peak, what `toward` changes,
 * agreement of its parts, ground seen by duals, several feeds. */
#include "check.h"
#include "fixture.h"
#include "random_antenna.h"
#include "reference.h"

#include "optics/aperture.h"

#include <stdlib.h>

/* Path error over a fine grid to the rims, less the plane given. */
static void brute_span(const ev_antenna *antenna, const ev_feed_budget *budget, double *raw,
                       double *untilted)
{
    enum { RADII = 60, ANGLES = 360 };
    double low[2] = {INFINITY, INFINITY}, high[2] = {-INFINITY, -INFINITY};
    for (int i = 0; i <= RADII; i++)
        for (int k = 0; k < ANGLES; k++) {
            double r = antenna->hole_radius +
                       (antenna->radius - antenna->hole_radius) * sin(0.5 * EV_PI * i / RADII);
            double x = r * cos(2.0 * EV_PI * k / ANGLES), y = r * sin(2.0 * EV_PI * k / ANGLES);
            ev_sample sample = ev_aperture_sample(antenna, 0, antenna->offset + x, y);
            double error = ev_sample_error(&sample, budget->wanted), values[2] = {error, error};
            values[1] -= budget->tilt_x * x + budget->tilt_y * y;
            for (int j = 0; j < 2; j++) {
                low[j] = fmin(low[j], values[j]);
                high[j] = fmax(high[j], values[j]);
            }
        }
    *raw = high[0] - low[0];
    *untilted = high[1] - low[1];
}

static void test_peak_to_valley(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(31);
    for (int i = 0; i < 60; i++) {
        ev_design design = ev_random_design(&random, (ev_layout_kind)(i % 6), NULL);
        ev_antenna antenna;
        double raw, untilted;
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        brute_span(&antenna, &budget, &raw, &untilted);
        double rounding = 1e-12 * (antenna.radius + antenna.focal_length);
        /* the grid may miss the extremes a little, the product may not */
        assert_near(budget.path_error.peak_to_valley, raw, 1e-3 * raw + rounding);
        assert_near(budget.untilted.peak_to_valley, untilted, 3e-3 * untilted + rounding);
        assert_true(budget.path_error.peak_to_valley >= raw * (1.0 - 1e-9) - rounding);
        assert_true(budget.untilted.peak_to_valley >= untilted * (1.0 - 1e-9) - rounding);
    }
}

/* Moments of the path over a plain grid of equal areas. */
static void test_rms_against_a_plain_grid(void **state)
{
    (void)state;
    enum { RADII = 400, ANGLES = 180 };
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        double sums[3][3] = {{0}}; /* by area, power, amplitude: weight, mean, square */
        double base = budget.mean_path_error, flat = 0.0; /* flat: squares less the tilt, by area */
        for (int i = 0; i < RADII * ANGLES; i++) {
            double inner = pow(antenna.hole_radius / antenna.radius, 2.0);
            double part = inner + (1.0 - inner) * (i / ANGLES + 0.5) / RADII;
            double r = antenna.radius * sqrt(part), phi = 2.0 * EV_PI * (i % ANGLES) / ANGLES;
            ev_sample sample =
                ev_aperture_sample(&antenna, 0, antenna.offset + r * cos(phi), r * sin(phi));
            double error = ev_sample_error(&sample, budget.wanted) - base;
            double rest = error - budget.tilt_x * r * cos(phi) - budget.tilt_y * r * sin(phi);
            flat += rest * rest;
            const double weights[3] = {1.0, sample.density, sqrt(sample.density)};
            for (int j = 0; j < 3; j++) {
                sums[j][0] += weights[j];
                sums[j][1] += weights[j] * error;
                sums[j][2] += weights[j] * error * error;
            }
        }
        const double *found = &budget.path_error.rms_area;
        for (int j = 0; j < 3; j++) {
            double mean = sums[j][1] / sums[j][0];
            assert_ratio(found[j], sqrt(sums[j][2] / sums[j][0] - mean * mean), 1e-4);
        }
        assert_near(sums[0][1] / sums[0][0], 0.0, 1e-4 * budget.path_error.rms_area);
        assert_ratio(budget.untilted.rms_area, sqrt(flat / sums[0][0]), 1e-3);
    }
}

/* Highest phase efficiency on a grid of directions, `reach` beamwidths about the peak found. */
static double highest_on_grid(const ev_antenna *antenna, const ev_feed_budget *budget, double reach)
{
    enum { RADII = 28, ANGLES = 80, SIDE = 37 };
    static ev_sample samples[RADII * ANGLES];
    static double weights[RADII * ANGLES];
    double amplitude = 0.0, highest = 0.0, span = antenna->radius - antenna->hole_radius;
    for (int k = 0; k < RADII * ANGLES; k++) {
        double r = antenna->hole_radius + span * (k / ANGLES + 0.5) / RADII;
        double phi = 2.0 * EV_PI * (k % ANGLES) / ANGLES;
        samples[k] = ev_aperture_sample(antenna, 0, antenna->offset + r * cos(phi), r * sin(phi));
        weights[k] = r * sqrt(samples[k].density);
        amplitude += weights[k];
    }
    for (int k = 0; k < SIDE * SIDE; k++) {
        double step = reach * antenna->wavelength / antenna->radius;
        double u = budget->peak.x + step * (2.0 * (k % SIDE) / (SIDE - 1) - 1.0);
        double v = budget->peak.y + step * (2.0 * (k / SIDE) / (SIDE - 1) - 1.0);
        double _Complex sum = 0.0;
        if (u * u + v * v > 0.9)
            continue;
        ev_vec3 s = {u, v, sqrt(1.0 - u * u - v * v)};
        for (int j = 0; j < RADII * ANGLES; j++) {
            double phase = antenna->wavenumber * ev_sample_error(&samples[j], s);
            sum += weights[j] * (cos(phase) - I * sin(phase));
        }
        highest = fmax(highest, pow(cabs(sum) / amplitude, 2.0));
    }
    return highest;
}

static void test_peak_is_the_highest(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(77);
    for (int i = 0; i < 18; i++) {
        ev_design design = ev_random_design(&random, (ev_layout_kind)(i % 6), NULL);
        ev_antenna antenna;
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        double highest = highest_on_grid(&antenna, &budget, 4.0);
        assert_true(budget.efficiency.phase >= highest * 0.99 - 1e-3);
    }
}

/* So far out of place that the lobe is broken up. */
static void test_peak_of_a_broken_lobe(void **state)
{
    (void)state;
    for (int i = 0; i < 12; i++) {
        ev_design design = ev_fixture_design(i % 2 ? EV_FIXTURE_PRIME : EV_FIXTURE_OFFSET);
        ev_antenna antenna;
        double wave = EV_LIGHT_SPEED / design.frequencies[0];
        design.feeds[0].defocus = (1.5 + 0.5 * (i / 2)) * wave;
        design.feeds[0].shift = ev_vec3_make(1.5 * wave, (i - 6) * wave, 0.0);
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        double highest = highest_on_grid(&antenna, &budget, 3.0);
        assert_true(budget.efficiency.phase >= highest * 0.99 - 1e-4);
    }
}

/* toward: peak is judged by where it points: no pointing loss, and the path about that direction.
 */
static void test_toward_peak(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_feed_budget fixed = ev_fixture_budget(&design);
        design.feeds[0].toward_peak = true;
        ev_feed_budget free_beam = ev_fixture_budget(&design);
        assert_true(fixed.efficiency.pointing < 1.0 - 1e-6);
        assert_near(free_beam.efficiency.pointing, 1.0, 1e-9);
        assert_near(free_beam.gain_on_axis_dbi, free_beam.gain_dbi, 1e-8);
        assert_near(ev_vec3_length(ev_vec3_sub(free_beam.peak, fixed.peak)), 0.0, 1e-8);
        assert_memory_equal(&free_beam.wanted, &free_beam.peak, sizeof free_beam.peak);
        assert_true(free_beam.path_error.rms_amplitude < fixed.path_error.rms_amplitude);
    }
}

static bool rim_cuts(const ev_antenna *antenna)
{
    for (int k = 0; k < 72; k++) {
        double phi = EV_PI * k / 36.0, r = antenna->radius;
        if (ev_aperture_sample(antenna, 0, antenna->offset + r * cos(phi), r * sin(phi))
                .sub_inside < 0.0)
            return true;
    }
    return false;
}

/* The cheap gain on the axis is the budget's, shadows, surface, ohmic and mismatch apart, where the
 * sub's rim cuts nothing off (it continues the subreflector). */
static void test_axis_gain(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(5);
    for (int i = 0; i < 120; i++) {
        ev_design design = ev_random_design(&random, (ev_layout_kind)(i % 6), NULL);
        ev_antenna antenna;
        design.sub.oversize = 0.1 * design.sub.diameter;
        ev_problem problem;
        if (ev_design_check(&design, &problem, 1) > 0 && ev_problem_is_error(problem.id))
            continue; /* the conic is not that wide */
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        const ev_efficiency *eta = &budget.efficiency;
        double smooth = budget.gain_on_axis_dbi -
                        10.0 * log10(eta->blockage * eta->surface * eta->ohmic * eta->mismatch);
        if (eta->total * eta->pointing > 1e-3 && !rim_cuts(&antenna))
            assert_near(ev_axis_gain_dbi(&antenna, 0), smooth, 0.01);
    }
}

/* total is the product, gains follow from it, losses in decibels come back as factors. */
static void test_the_product(void **state)
{
    (void)state;
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_GREGORIAN);
    design.ohmic = 0.3;
    design.mismatch = 0.1;
    design.main.surface_rms = 0.5e-3;
    ev_feed_budget budget = ev_fixture_budget(&design);
    const ev_efficiency *eta = &budget.efficiency;
    assert_ratio(-10.0 * log10(eta->ohmic), 0.3, 1e-9);
    assert_ratio(-10.0 * log10(eta->mismatch), 0.1, 1e-9);
    assert_ratio(eta->total,
                 eta->spillover * eta->taper * eta->phase * eta->polarization * eta->blockage *
                     eta->surface * eta->ohmic * eta->mismatch,
                 1e-12);
    assert_ratio(eta->spillover, eta->spillover_sub * eta->spillover_main, 1e-12);
    assert_near(eta->spillover_sub, 1.0 - budget.power[EV_FATE_PAST_SUB], 1e-12);
    assert_near(budget.gain_on_axis_dbi - budget.gain_dbi, 10.0 * log10(eta->pointing), 1e-9);
    double shadows = budget.power[EV_FATE_SHADOW_SUB] + budget.power[EV_FATE_SHADOW_FEED] +
                     budget.power[EV_FATE_SHADOW_STRUTS];
    assert_ratio(budget.shadow_share, shadows / eta->spillover, 1e-9);
}

/* Ohmic loss radiates at the ground's temperature, the rest comes from outside. */
static void test_ohmic_noise(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.site = (ev_site_design){true, 0.5, 300.0, 20.0};
    ev_noise cold = ev_fixture_budget(&design).noise;
    design.ohmic = 10.0 * log10(2.0);
    ev_noise warm = ev_fixture_budget(&design).noise;
    assert_near(warm.spill_k, cold.spill_k, 1e-9);
    assert_near(warm.antenna_k, 0.5 * cold.antenna_k + 150.0, 1e-9);
    double spill = cold.spill_ground + cold.spill_sky;
    assert_near(cold.antenna_k, cold.spill_k + 20.0 * (1.0 - spill), 1e-9);
    design.site.present = false;
    assert_true(isnan(ev_fixture_budget(&design).noise.antenna_k));
}

/* Ground past a dual's mirrors, ray by ray through the second way: past the sub as they leave the
 * feed, past the main reflector as they leave the sub. */
static void test_ground_of_duals(void **state)
{
    (void)state;
    enum { RAYS = 400000 };
    for (int fixture = EV_FIXTURE_CASSEGRAIN; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        design.site.elevation = 0.3;
        ev_reference reference = ev_reference_make(&design, 0);
        ev_vec3 up = {cos(0.3), 0.0, sin(0.3)};
        double n = reference.exponent, ground = 0.0;
        for (int i = 0; i < RAYS; i++) {
            double theta = acos(pow(1.0 - (i + 0.5) / RAYS, 1.0 / (n + 1.0))), phi = 2.39996323 * i;
            ev_vec3 out =
                ev_vec3_along(ev_vec3_scale(cos(phi), reference.ex), sin(phi), reference.ey);
            ev_vec3 u = ev_vec3_along(ev_vec3_scale(cos(theta), reference.axis), sin(theta), out);
            ev_reference_ray ray;
            bool met = ev_reference_trace(&reference, u, &ray);
            bool on_sub = ray.inside >= 0.0 && ev_vec3_length(ray.on_sub) > 0.0;
            double r = hypot(ray.on_main.x - reference.offset, ray.on_main.y);
            bool on_main = met && r <= reference.radius && r >= reference.hole;
            if (on_sub && on_main)
                continue;
            ground += ev_vec3_dot(on_sub ? ray.leaving_sub : u, up) < 0.0 ? 1.0 / RAYS : 0.0;
        }
        assert_near(ev_fixture_budget(&design).noise.spill_ground, ground, 2e-4);
    }
}

/* Several feeds: each gets its own, and bodies shadow all of them. */
static void test_two_feeds(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    ev_antenna antenna;
    ev_budget both;
    ev_feed_budget alone = ev_fixture_budget(&design);
    design.feeds[1] = design.feeds[0];
    design.feeds[1].name[0] = 'b';
    design.feeds[1].shift.y = 0.06;
    design.feeds[1].toward_y = -4.0 * EV_PI / 180.0;
    design.feed_count = 2;
    ev_fixture_build(&design, &antenna);
    ev_budget_compute(&antenna, &both);
    assert_int_equal(both.feed_count, 2);
    assert_memory_equal(&both.feeds[0], &alone, sizeof alone);
    assert_near(asin(both.feeds[1].peak.y) * 180.0 / EV_PI, -4.0, 0.3);
    assert_true(both.feeds[1].gain_on_axis_dbi > alone.gain_dbi - 1.5);
    assert_true(both.feeds[1].untilted.rms_amplitude < 2e-3);
}

/* A feed that looks away: no gain, no NaN, all power past. */
static void test_dark_feed(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.feeds[0].aim = EV_AIM_DIRECTION;
    design.feeds[0].aim_direction = ev_vec3_make(0.0, 0.0, 1.0);
    ev_feed_budget budget = ev_fixture_budget(&design);
    assert_near(budget.power[EV_FATE_PAST_MAIN], 1.0, 1e-12);
    assert_near(budget.efficiency.total, 0.0, 1e-12);
    assert_true(isfinite(budget.gain_on_axis_dbi) && budget.gain_on_axis_dbi < -200.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_peak_to_valley),      cmocka_unit_test(test_rms_against_a_plain_grid),
        cmocka_unit_test(test_peak_is_the_highest), cmocka_unit_test(test_peak_of_a_broken_lobe),
        cmocka_unit_test(test_toward_peak),         cmocka_unit_test(test_axis_gain),
        cmocka_unit_test(test_the_product),         cmocka_unit_test(test_ohmic_noise),
        cmocka_unit_test(test_ground_of_duals),     cmocka_unit_test(test_two_feeds),
        cmocka_unit_test(test_dark_feed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
