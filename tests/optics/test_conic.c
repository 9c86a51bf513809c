/* Conics of revolution: intersections, normals, projection and bend, also where it gets nasty. */
#include "check.h"
#include "random.h"

#include "optics/conic.h"

static const double eccentricities[] = {0.0, 0.3, 0.9, 1.0, 1.1, 2.5};
enum { SHAPES = 6 };

static ev_vec3 random_unit_vector(ev_random *random)
{
    double z = ev_random_between(random, -1.0, 1.0), r = sqrt(1.0 - z * z);
    double phi = ev_random_between(random, 0.0, 2.0 * EV_PI);
    return ev_vec3_make(r * cos(phi), r * sin(phi), z);
}

static ev_conic random_conic(ev_random *random, int shape)
{
    double size = ev_random_log(random, 0.05, 50.0);
    ev_vec3 focus = ev_vec3_scale(size, random_unit_vector(random));
    return ev_conic_make(focus, random_unit_vector(random), size, eccentricities[shape]);
}

/* A point of the surface, in a random direction from the near focus. */
static ev_vec3 random_point(ev_random *random, const ev_conic *conic)
{
    for (;;) {
        ev_vec3 toward = ev_vec3_add(ev_conic_near_focus(conic), random_unit_vector(random)), point;
        bool met = ev_conic_project(conic, toward, &point);
        ev_vec3 arm = ev_vec3_sub(point, conic->vertex);
        if (met && ev_vec3_length(arm) < 20.0 / conic->curvature)
            return point;
    }
}

/* Distances to the two foci: the sum (ellipsoid) or difference (hyperboloid) is 2a; a paraboloid's
 * point is as far from the focus as from the directrix. */
static double off_surface(const ev_conic *conic, ev_vec3 point)
{
    double e = conic->eccentricity;
    double near = ev_vec3_length(ev_vec3_sub(point, ev_conic_near_focus(conic)));
    double f = 1.0 / (conic->curvature * (1.0 + e));
    if (e == 1.0)
        return near - f - ev_vec3_dot(ev_vec3_sub(point, conic->vertex), conic->axis);
    double far = ev_vec3_length(ev_vec3_sub(point, ev_conic_far_focus(conic)));
    double twice_a = 2.0 * f / fabs(1.0 - e);
    return e < 1.0 ? near + far - twice_a : far - near - twice_a;
}

static void test_points_lie_on_the_locus_of_foci(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(1);
    for (int i = 0; i < 6000; i++) {
        ev_conic conic = random_conic(&random, i % SHAPES);
        ev_vec3 point = random_point(&random, &conic);
        double size = 1.0 / conic.curvature;
        assert_near(off_surface(&conic, point), 0.0, 1e-12 * 40.0 * size);
        assert_near(ev_conic_side(&conic, point), 0.0, 1e-12 * 400.0 * size);
    }
}

/* A ray through two chosen points of the surface meets it there and nowhere else. */
static void test_chords(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(2);
    for (int i = 0; i < 6000; i++) {
        ev_conic conic = random_conic(&random, i % SHAPES);
        ev_vec3 a = random_point(&random, &conic), b = random_point(&random, &conic);
        double length = ev_vec3_length(ev_vec3_sub(b, a)), back, t[2];
        ev_vec3 direction = ev_vec3_unit(ev_vec3_sub(b, a));
        back = ev_random_between(&random, -1.0, 1.0) * length;
        assert_int_equal(
            ev_conic_intersect(&conic, ev_vec3_along(a, -back, direction), direction, t), 2);
        assert_near(t[0], back, 1e-9 * (length + 1.0 / conic.curvature));
        assert_near(t[1], back + length, 1e-9 * (length + 1.0 / conic.curvature));
    }
}

/* Within a hair of tangency: two hits on the inner side, none on the outer. */
static void test_grazing_rays(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(3);
    for (int i = 0; i < 3000; i++) {
        ev_conic conic = random_conic(&random, i % SHAPES);
        ev_vec3 point = random_point(&random, &conic), n = ev_conic_normal(&conic, point);
        ev_vec3 along = ev_vec3_unit(ev_vec3_cross(n, random_unit_vector(&random)));
        double hair = 1e-9 / conic.curvature, t[2];
        ev_vec3 inner = ev_vec3_along(point, hair, n), outer = ev_vec3_along(point, -hair, n);
        int count = ev_conic_intersect(&conic, inner, along, t);
        assert_in_range(count, 1, 2); /* one when the other crossing is out of reach */
        for (int k = 0; k < count; k++)
            assert_near(off_surface(&conic, ev_vec3_along(inner, t[k], along)), 0.0,
                        1e-10 / conic.curvature);
        assert_int_equal(ev_conic_intersect(&conic, outer, along, t), 0);
    }
}

/* Rays along the axis, also displaced and with a direction that is off by rounding. */
static void test_axial_rays(void **state)
{
    (void)state;
    for (int shape = 0; shape < SHAPES; shape++) {
        ev_vec3 up = {0.0, 0.0, 1.0}, down = {0.0, 0.0, -1.0}, over = {0.1, -0.05, 0.4};
        ev_conic conic = ev_conic_make(ev_vec3_make(0.0, 0.0, 1.0), up, 1.0, eccentricities[shape]);
        double e2 = pow(eccentricities[shape], 2.0), c = conic.curvature, t[2];
        double rho2 = 0.1 * 0.1 + 0.05 * 0.05;
        double sag = c * rho2 / (1.0 + sqrt(1.0 - (1.0 - e2) * c * c * rho2));
        int count = ev_conic_intersect(&conic, over, down, t);
        assert_near(t[eccentricities[shape] < 1.0 ? 1 : 0], 0.4 - sag, 1e-15);
        assert_int_equal(count, eccentricities[shape] < 1.0 ? 2 : 1);
        count = ev_conic_intersect(&conic, ev_vec3_make(0.0, 0.0, 0.5), down, t);
        assert_near(t[count - 1], 0.5, 1e-15);
        /* 1 ulp longer than 1: the far crossing of a paraboloid must not come before the near one
         */
        ev_vec3 long_down = {0.0, 0.0, -1.0 - 2.3e-16};
        count = ev_conic_intersect(&conic, over, long_down, t);
        assert_near(t[count - 1], 0.4 - sag, 1e-14);
    }
}

/* F = 1e6 m: the sag over a metre is a quarter of a micrometre, and is found to its last digits. */
static void test_huge_focal_length(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0};
    ev_conic conic = ev_conic_make(ev_vec3_make(0.0, 0.0, 1e6), up, 1e6, 1.0);
    double t[2];
    ev_vec3 from = {1.0, 0.0, 1.0}, down = {0.0, 0.0, -1.0};
    assert_int_equal(ev_conic_intersect(&conic, from, down, t), 1);
    assert_near(1.0 - t[0], 2.5e-7, 1e-15);
    ev_vec3 n = ev_conic_normal(&conic, ev_vec3_make(1.0, 0.0, 2.5e-7));
    assert_ratio(n.x, -5e-7, 1e-9);
    ev_vec3 focus = ev_conic_near_focus(&conic);
    assert_near(focus.z, 1e6, 1e-9);
    int count = ev_conic_intersect(&conic, focus, ev_vec3_unit(ev_vec3_make(1e-6, 0.0, -1.0)), t);
    assert_ratio(t[count - 1], 1e6, 1e-12);
}

static void test_nan_meets_nothing(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0}, at = {0.1, 0.2, 0.3}, nan = {NAN, 0.0, 1.0};
    for (int shape = 0; shape < SHAPES; shape++) {
        ev_conic conic = ev_conic_make(ev_vec3_make(0, 0, 1), up, 1.0, eccentricities[shape]);
        double t[2];
        assert_int_equal(ev_conic_intersect(&conic, nan, up, t), 0);
        assert_int_equal(ev_conic_intersect(&conic, at, nan, t), 0);
        conic.curvature = NAN;
        assert_int_equal(ev_conic_intersect(&conic, at, up, t), 0);
    }
}

/* Only the sheet through the vertex: a ray along a hyperboloid's axis meets it once. */
static void test_other_sheet_is_not_there(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0};
    ev_conic conic = ev_conic_make(ev_vec3_make(0.0, 0.0, 1.0), up, 1.0, 1.5);
    double t[2];
    assert_int_equal(ev_conic_intersect(&conic, ev_vec3_make(0.0, 0.0, -100.0), up, t), 1);
    assert_near(t[0], 100.0, 1e-12);
    ev_vec3 far = ev_conic_far_focus(&conic);
    assert_near(far.z, -5.0, 1e-12); /* 2c = 2 e a, a = f / (e - 1) */
    assert_false(ev_conic_contains(&conic, far));
    assert_false(ev_conic_contains(&conic, ev_vec3_make(0.0, 0.0, -0.1)));
    assert_true(ev_conic_contains(&conic, ev_vec3_make(0.0, 0.0, 0.1)));
}

/* Normals along the gradient of the locus of foci, by central differences. */
static void test_normals(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(4);
    for (int i = 0; i < 3000; i++) {
        ev_conic conic = random_conic(&random, i % SHAPES);
        ev_vec3 point = random_point(&random, &conic), n = ev_conic_normal(&conic, point);
        double h = 1e-5 / conic.curvature, g[3];
        ev_vec3 steps[3] = {{h, 0, 0}, {0, h, 0}, {0, 0, h}};
        for (int k = 0; k < 3; k++)
            g[k] = off_surface(&conic, ev_vec3_add(point, steps[k])) -
                   off_surface(&conic, ev_vec3_sub(point, steps[k]));
        double side = conic.eccentricity < 1.0 || conic.eccentricity == 1.0 ? -1.0 : 1.0;
        ev_vec3 gradient = ev_vec3_unit(ev_vec3_make(side * g[0], side * g[1], side * g[2]));
        assert_near(ev_vec3_length(ev_vec3_sub(n, gradient)), 0.0, 1e-7);
        assert_ratio(ev_vec3_length(n), 1.0, 1e-14);
        ev_vec3 in = ev_vec3_along(point, 1e-3 / conic.curvature, n);
        assert_true(ev_conic_contains(&conic, in));
    }
}

/* Bend: how fast the normal turns as one walks along the surface, -t.dn/ds. */
static void test_bend(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(5);
    for (int i = 0; i < 3000; i++) {
        ev_conic conic = random_conic(&random, i % SHAPES);
        ev_vec3 point = random_point(&random, &conic), n = ev_conic_normal(&conic, point);
        ev_vec3 a = ev_vec3_unit(ev_vec3_cross(n, random_unit_vector(&random)));
        ev_vec3 b = ev_vec3_unit(ev_vec3_cross(n, random_unit_vector(&random)));
        double h = 1e-5 / conic.curvature;
        /* points of other surfaces of the family have nearly the same normal: no need to project */
        ev_vec3 ahead = ev_conic_normal(&conic, ev_vec3_along(point, h, b));
        ev_vec3 behind = ev_conic_normal(&conic, ev_vec3_along(point, -h, b));
        double turn = -ev_vec3_dot(a, ev_vec3_sub(ahead, behind)) / (2.0 * h);
        assert_near(ev_conic_bend(&conic, point, a, b), turn, 1e-7 * conic.curvature);
    }
    ev_conic ball = ev_conic_make(ev_vec3_make(0, 0, 0), ev_vec3_make(0, 0, 1), 2.0, 0.0);
    ev_vec3 x = {1, 0, 0};
    assert_ratio(ev_conic_bend(&ball, ball.vertex, x, x), 0.5, 1e-12);
}

/* r = f (1 + e)/(1 + e cos psi), psi from the vertex; nothing beyond a hyperboloid's asymptote. */
static void test_projection(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0};
    for (int shape = 0; shape < SHAPES; shape++) {
        double e = eccentricities[shape];
        ev_conic conic = ev_conic_make(ev_vec3_make(0.0, 0.0, 3.0), up, 3.0, e);
        for (double psi = 0.0; psi < 3.1; psi += 0.1) {
            ev_vec3 d = {sin(psi), 0.0, -cos(psi)}, point;
            bool met = ev_conic_project(&conic, ev_vec3_along(ev_conic_near_focus(&conic), 7.0, d),
                                        &point);
            assert_int_equal(met, 1.0 + e * cos(psi) > 0.0);
            if (met)
                assert_ratio(ev_vec3_length(ev_vec3_sub(point, ev_conic_near_focus(&conic))),
                             3.0 * (1.0 + e) / (1.0 + e * cos(psi)), 1e-12);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_points_lie_on_the_locus_of_foci),
        cmocka_unit_test(test_chords),
        cmocka_unit_test(test_grazing_rays),
        cmocka_unit_test(test_axial_rays),
        cmocka_unit_test(test_huge_focal_length),
        cmocka_unit_test(test_nan_meets_nothing),
        cmocka_unit_test(test_other_sheet_is_not_there),
        cmocka_unit_test(test_normals),
        cmocka_unit_test(test_bend),
        cmocka_unit_test(test_projection),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
