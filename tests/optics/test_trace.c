/* Traced rays: each fate on purpose, fans that share the power out, the rays of the section. */
#include "check.h"
#include "fixture.h"

#include "optics/aperture.h"
#include "optics/trace.h"

#include <stdlib.h>

static void build(ev_fixture fixture, bool worn, ev_antenna *antenna)
{
    ev_design design = worn ? ev_fixture_worn_design(fixture) : ev_fixture_design(fixture);
    ev_fixture_build(&design, antenna);
}

static ev_ray aimed(const ev_antenna *antenna, double x, double y)
{
    return ev_trace(antenna, 0, ev_aperture_sample(antenna, 0, x, y).direction);
}

static void test_fates_of_a_single_mirror(void **state)
{
    (void)state;
    ev_antenna antenna;
    build(EV_FIXTURE_PRIME, true, &antenna);
    const struct {
        double x, y;
        ev_fate fate;
        int points;
    } cases[] = {
        {2.0, 0.3, EV_FATE_APERTURE, 3},
        {5.1, 0.0, EV_FATE_PAST_MAIN, 1},
        {0.17, 0.1, EV_FATE_PAST_MAIN, 2},
        {1.5, 1.5, EV_FATE_SHADOW_STRUTS, 3},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_ray ray = aimed(&antenna, cases[i].x, cases[i].y);
        assert_int_equal(ray.fate, cases[i].fate);
        assert_int_equal(ray.point_count, cases[i].points);
        assert_int_equal(isnan(ray.path), cases[i].points == 1);
        assert_int_equal(isnan(ray.path_error), ray.fate == EV_FATE_PAST_MAIN);
    }
    antenna.hole_radius = antenna.shadows.hole_radius = 0.0;
    assert_int_equal(aimed(&antenna, antenna.feeds[0].position.x, 0.0).fate, EV_FATE_SHADOW_FEED);
    ev_ray up = ev_trace(&antenna, 0, ev_vec3_make(0.0, 0.0, 1.0));
    assert_int_equal(up.fate, EV_FATE_PAST_MAIN);
    assert_int_equal(up.point_count, 1);
}

static void test_fates_of_two_mirrors(void **state)
{
    (void)state;
    ev_antenna antenna;
    build(EV_FIXTURE_CASSEGRAIN, true, &antenna);
    assert_int_equal(aimed(&antenna, 3.0, 0.5).fate, EV_FATE_APERTURE);
    assert_int_equal(aimed(&antenna, 3.0, 0.5).point_count, 4);
    assert_int_equal(aimed(&antenna, 0.1, 0.0).fate, EV_FATE_PAST_MAIN); /* the hole */
    assert_int_equal(aimed(&antenna, 0.3, 0.0).fate, EV_FATE_SHADOW_SUB);
    assert_int_equal(aimed(&antenna, 2.0, 2.0).fate, EV_FATE_SHADOW_STRUTS);
    /* oversize lights a ring outside the dish */
    ev_ray beyond = aimed(&antenna, 6.05, 0.0);
    assert_int_equal(beyond.fate, EV_FATE_PAST_MAIN);
    assert_int_equal(beyond.point_count, 2);
    assert_int_equal(ev_trace(&antenna, 0, ev_vec3_make(0.3, 0.0, 0.95)).fate, EV_FATE_PAST_SUB);
    assert_int_equal(ev_trace(&antenna, 0, ev_vec3_make(0.0, 0.0, -1.0)).fate, EV_FATE_PAST_SUB);
}

/* A ray that reached the aperture ends on the plane z = F; a shadowed one below or on it. */
static void test_where_rays_end(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_antenna antenna;
        build((ev_fixture)fixture, true, &antenna);
        for (int k = 0; k < 400; k++) {
            double r = antenna.radius * sqrt((k + 0.5) / 400.0), phi = 2.4 * k;
            ev_ray ray = aimed(&antenna, antenna.offset + r * cos(phi), r * sin(phi));
            ev_vec3 end = ray.points[ray.point_count - 1], hit = ray.points[ray.point_count - 2];
            if (ray.fate == EV_FATE_APERTURE)
                assert_near(end.z, antenna.focal_length, 1e-12 * antenna.focal_length);
            else if (ray.fate != EV_FATE_PAST_MAIN && ray.fate != EV_FATE_PAST_SUB)
                assert_true(end.z >= hit.z - 1e-12);
        }
    }
}

/* Rays of equal power: their fates count the shares of the budget, to the evenness of the fan. */
static void test_fan_counts_the_shares(void **state)
{
    (void)state;
    enum { COUNT = 40000 };
    ev_ray *rays = malloc(COUNT * sizeof *rays);
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_antenna antenna;
        ev_feed_budget budget;
        double shares[EV_FATE_COUNT] = {0}, sum = 0.0;
        build((ev_fixture)fixture, true, &antenna);
        ev_budget_compute_feed(&antenna, 0, &budget);
        assert_int_equal(ev_trace_fan(&antenna, 0, COUNT, rays), COUNT);
        for (int i = 0; i < COUNT; i++) {
            shares[rays[i].fate] += rays[i].power;
            sum += rays[i].power;
        }
        assert_near(sum, 1.0, 1e-9);
        for (int fate = 0; fate < EV_FATE_COUNT; fate++)
            assert_near(shares[fate], budget.power[fate], 1e-3);
    }
    free(rays);
}

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Between neighbouring rays on the main reflector, along x. */
static double widest_gap(const ev_ray *rays, int count)
{
    double at[64], widest = 0.0;
    size_t found = 0;
    for (int i = 0; i < count; i++)
        if (rays[i].fate != EV_FATE_PAST_SUB && rays[i].fate != EV_FATE_PAST_MAIN)
            at[found++] = rays[i].points[rays[i].point_count - 2].x;
    qsort(at, found, sizeof at[0], compare_doubles);
    for (size_t i = 1; i < found; i++)
        widest = fmax(widest, at[i] - at[i - 1]);
    return widest;
}

/* As many rays of each fate as its share, all through the symmetry plane, none twice. */
static void test_section(void **state)
{
    (void)state;
    enum { COUNT = 60 };
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_antenna antenna;
        ev_feed_budget budget;
        ev_ray rays[COUNT];
        int found[EV_FATE_COUNT] = {0};
        build((ev_fixture)fixture, false, &antenna);
        ev_budget_compute_feed(&antenna, 0, &budget);
        int count = ev_trace_section(&antenna, 0, COUNT, budget.power, rays);
        assert_in_range(count, COUNT / 2, COUNT);
        for (int i = 0; i < count; i++) {
            found[rays[i].fate]++;
            assert_near(rays[i].power, 1.0 / COUNT, 1e-15);
            for (int k = 0; k < rays[i].point_count; k++)
                assert_near(rays[i].points[k].y, 0.0, 1e-9 * antenna.radius);
            for (int k = 0; k < i; k++)
                assert_true(ev_vec3_angle(rays[i].direction, rays[k].direction) > 0.0);
        }
        assert_true(widest_gap(rays, count) < 0.12 * 2.0 * antenna.radius);
        for (int fate = 0; fate < EV_FATE_COUNT; fate++)
            assert_in_range(abs(found[fate] - (int)lround(budget.power[fate] * COUNT)), 0, 1);
    }
}

/* Feed to focal plane over two mirrors in place: 2F + 2a, to the last digits. */
static void test_paths_to_rounding(void **state)
{
    (void)state;
    enum { COUNT = 20000 };
    ev_antenna antenna;
    ev_ray *rays = malloc(COUNT * sizeof *rays);
    build(EV_FIXTURE_CASSEGRAIN, false, &antenna);
    double truth = 2.0 * antenna.focal_length +
                   antenna.layout.sub_interfocal / antenna.layout.sub_eccentricity;
    ev_trace_fan(&antenna, 0, COUNT, rays);
    for (int i = 0; i < COUNT; i++)
        if (rays[i].point_count == 4)
            assert_ratio(rays[i].path + antenna.focal_length - rays[i].points[2].z, truth, 1.2e-15);
    free(rays);
}

/* A direction that is no direction is past everything, without a trap. */
static void test_nasty_directions(void **state)
{
    (void)state;
    const ev_vec3 nasty[] = {{NAN, 0, 1}, {0, 0, 0}, {INFINITY, 0, 0}, {1e300, 1e300, -1e300}};
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_antenna antenna;
        build((ev_fixture)fixture, true, &antenna);
        for (int i = 0; i < 3; i++) {
            ev_ray ray = ev_trace(&antenna, 0, nasty[i]);
            assert_true(ray.fate == EV_FATE_PAST_SUB || ray.fate == EV_FATE_PAST_MAIN);
            assert_true(isnan(ray.path));
        }
        ev_trace(&antenna, 0, nasty[3]);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_fates_of_a_single_mirror),
        cmocka_unit_test(test_fates_of_two_mirrors),
        cmocka_unit_test(test_where_rays_end),
        cmocka_unit_test(test_fan_counts_the_shares),
        cmocka_unit_test(test_section),
        cmocka_unit_test(test_paths_to_rounding),
        cmocka_unit_test(test_nasty_directions),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
