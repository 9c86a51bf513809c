/* Stationary paths over the subreflector: derivatives against differences, and the point found
 * against brute search, a minimum over hyperboloids and a maximum over ellipsoids. */
#include "check.h"
#include "fixture.h"
#include "random_antenna.h"

#include "optics/aperture.h"
#include "optics/fermat.h"

static const ev_fixture duals[] = {EV_FIXTURE_CASSEGRAIN, EV_FIXTURE_GREGORIAN,
                                   EV_FIXTURE_OFFSET_CASSEGRAIN, EV_FIXTURE_OFFSET_GREGORIAN};
enum { DUALS = 4 };

static void build_worn(ev_fixture fixture, ev_antenna *antenna)
{
    ev_design design = ev_fixture_worn_design(fixture);
    ev_fixture_build(&design, antenna);
}

static double path_over(ev_vec3 from, ev_vec3 over, ev_vec3 to)
{
    return ev_vec3_length(ev_vec3_sub(over, from)) + ev_vec3_length(ev_vec3_sub(to, over));
}

/* A point of the placed conic beside q: by (a, b) along its tangents, brought back to the surface.
 */
static ev_vec3 beside(const ev_conic *conic, const ev_fermat *at, double a, double b)
{
    ev_vec3 point = ev_vec3_along(ev_vec3_along(at->q, a, at->tangent[0]), b, at->tangent[1]);
    ev_vec3 normal = ev_conic_normal(conic, point);
    double t[2];
    int count = ev_conic_intersect(conic, point, normal, t);
    double nearest = count == 2 && fabs(t[1]) < fabs(t[0]) ? t[1] : t[0];
    return ev_vec3_along(point, nearest, normal);
}

static void test_derivatives(void **state)
{
    (void)state;
    for (int i = 0; i < DUALS; i++) {
        ev_antenna antenna;
        build_worn(duals[i], &antenna);
        const ev_conic *conic = &antenna.sub.placed;
        for (int k = 0; k < 24; k++) {
            double phi = 0.26 * k, r = antenna.radius * (0.1 + 0.035 * k);
            ev_vec3 p = ev_main_point(&antenna, antenna.offset + r * cos(phi), r * sin(phi));
            ev_vec3 q = ev_sub_point(&antenna.sub, 0.04 * k, 1.0 + phi), from;
            ev_fermat at;
            from = antenna.feeds[0].position;
            ev_fermat_at(conic, from, p, q, &at);
            double h = 1e-4 / conic->curvature, middle = path_over(from, q, p), f[3][3];
            for (int a = 0; a < 3; a++)
                for (int b = 0; b < 3; b++)
                    f[a][b] = path_over(from, beside(conic, &at, h * (a - 1), h * (b - 1)), p);
            double size = 1.0 / at.to_q + 1.0 / at.from_q + conic->curvature;
            assert_near(at.gradient[0], (f[2][1] - f[0][1]) / (2.0 * h), 1e-6);
            assert_near(at.gradient[1], (f[1][2] - f[1][0]) / (2.0 * h), 1e-6);
            assert_near(at.h00, (f[2][1] - 2.0 * middle + f[0][1]) / (h * h), 2e-5 * size);
            assert_near(at.h11, (f[1][2] - 2.0 * middle + f[1][0]) / (h * h), 2e-5 * size);
            assert_near(at.h01, (f[2][2] - f[2][0] - f[0][2] + f[0][0]) / (4.0 * h * h),
                        2e-5 * size);
        }
    }
}

/* Shrinking compass search for the extreme of the path over the surface, from the rim's middle. */
static double brute_extreme(const ev_antenna *antenna, ev_vec3 p, double sign)
{
    ev_vec3 from = antenna->feeds[0].position, start = ev_sub_point(&antenna->sub, 0.0, 0.0);
    ev_fermat frame;
    ev_fermat_at(&antenna->sub.placed, from, p, start, &frame);
    double a = 0.0, b = 0.0, best = sign * path_over(from, start, p);
    for (double step = 0.3 * antenna->sub.semi_long; step > 1e-9 * antenna->sub.semi_long;) {
        const double tries[4][2] = {{step, 0}, {-step, 0}, {0, step}, {0, -step}};
        bool moved = false;
        for (int i = 0; i < 4; i++) {
            ev_vec3 q = beside(&antenna->sub.placed, &frame, a + tries[i][0], b + tries[i][1]);
            double value = sign * path_over(from, q, p);
            if (value < best) {
                best = value;
                a += tries[i][0];
                b += tries[i][1];
                moved = true;
                break;
            }
        }
        step *= moved ? 1.0 : 0.5;
    }
    return sign * best;
}

static void test_against_brute_search(void **state)
{
    (void)state;
    for (int i = 0; i < DUALS; i++) {
        ev_antenna antenna;
        build_worn(duals[i], &antenna);
        double sign = antenna.sub.shape == EV_SUB_HYPERBOLOID ? 1.0 : -1.0;
        for (int k = 0; k < 12; k++) {
            double phi = 0.5 * k, r = antenna.radius * 0.08 * (k + 0.5);
            double x = antenna.offset + r * cos(phi), y = r * sin(phi);
            ev_sample sample = ev_aperture_sample(&antenna, 0, x, y);
            assert_true(sample.reached);
            double extreme = brute_extreme(&antenna, sample.point, sign);
            assert_ratio(sample.path, extreme, 1e-12);
            assert_near(path_over(antenna.feeds[0].position, sample.sub_point, sample.point),
                        sample.path, 1e-12 * sample.path);
        }
    }
}

/* In place, the closed form is the solution: the ray's extension runs through the prime focus. */
static void test_in_place_is_closed_form(void **state)
{
    (void)state;
    for (int i = 0; i < DUALS; i++) {
        ev_design design = ev_fixture_design(duals[i]);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        for (int k = 0; k < 20; k++) {
            double r = antenna.radius * k / 20.0;
            ev_sample sample =
                ev_aperture_sample(&antenna, 0, antenna.offset + r * cos(k), r * sin(k));
            ev_vec3 arm = ev_vec3_sub(antenna.sub.prime_focus, sample.point);
            double miss = ev_vec3_length(ev_vec3_cross(arm, sample.incident));
            assert_near(miss, 0.0, 1e-11 * antenna.focal_length);
        }
    }
}

/* Where no ray comes, it says so: a main point behind a hyperboloid's asymptotes. */
static void test_no_path(void **state)
{
    (void)state;
    ev_antenna antenna;
    build_worn(EV_FIXTURE_CASSEGRAIN, &antenna);
    ev_fermat at;
    ev_vec3 above = {0.0, 0.0, 100.0}, nan = {NAN, 0.0, 0.0};
    assert_false(ev_fermat_solve(&antenna.sub, antenna.feeds[0].position, above, &at));
    assert_false(ev_fermat_solve(&antenna.sub, antenna.feeds[0].position, nan, &at));
    ev_sample sample = ev_aperture_sample(&antenna, 0, NAN, 0.0);
    assert_false(sample.reached);
    assert_true(isnan(sample.path));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_derivatives),
        cmocka_unit_test(test_against_brute_search),
        cmocka_unit_test(test_in_place_is_closed_form),
        cmocka_unit_test(test_no_path),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
