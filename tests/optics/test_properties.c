/* Properties that hold for every antenna, tried on 10,000 random ones of all six layouts with parts
 * out of place, holes, bodies, struts and sites. On each: powers sum to 1, nothing is NaN or out of
 * range, rays obey the law of reflection and come back when reversed, aimed and traced rays are
 * one, and with every part in place all paths are equal. On every tenth, 167 a layout: the six
 * shares against contour integrals on the feed's sphere. (With sanitizers: a tenth of all this.)
 *
 * EV_SEED in the environment tries other antennas; a failure names the seed and the number. */
#include "check.h"
#include "fixture.h"
#include "random_antenna.h"
#include "reference.h"

#include "optics/aperture.h"
#include "optics/budget.h"
#include "optics/trace.h"

#include <omp.h>
#include <stdlib.h>
#include <string.h>

#ifdef __SANITIZE_ADDRESS__
enum { ANTENNAS = 1002 };
#else
enum { ANTENNAS = 10002 };
#endif
enum { LAYOUTS = EV_LAYOUT_OFFSET_GREGORIAN + 1 };

static uint64_t seed(void)
{
    const char *given = getenv("EV_SEED");
    return given ? strtoull(given, NULL, 10) : 20261201u;
}

/* One random antenna; `number` also chooses its layout. */
typedef struct trial {
    int number;
    ev_random random;
    ev_design design;
    ev_antenna antenna;
} trial;

static void draw(uint64_t from_seed, int number, trial *out)
{
    out->number = number;
    out->random = ev_random_seeded(from_seed * 1000003u + (uint64_t)number);
    out->design = ev_random_design(&out->random, (ev_layout_kind)(number % LAYOUTS), NULL);
    ev_antenna_build(&out->design, out->design.frequencies[0], &out->antenna);
}

/* Runs a check on each of `count` antennas, `step` apart; a check that fails returns false. */
static void each(int count, int step, bool (*check)(trial *))
{
    static trial at;
    for (int i = 0; i < count; i++) {
        draw(seed(), i * step + i % step % LAYOUTS, &at);
        if (!check(&at))
            fail_msg("antenna %d of seed %llu", at.number, (unsigned long long)seed());
    }
}

static bool within(double value, double low, double high)
{
    return value >= low && value <= high;
}

static bool all_finite(const double *values, size_t size)
{
    for (size_t i = 0; i < size / sizeof *values; i++)
        if (!isfinite(values[i]))
            return false;
    return true;
}

/* A shadow over a part that works against the rest makes the blockage a gain: with the phase it is
 * at most 1, alone it may be more. */
static bool efficiencies_in_range(const ev_efficiency *efficiency)
{
    const double *eta = &efficiency->spillover;
    bool sound = within(efficiency->blockage * efficiency->phase, 0.0, 1.0 + 1e-12);
    for (size_t i = 0; i < sizeof *efficiency / sizeof *eta; i++)
        sound &= within(eta[i], 0.0, &eta[i] == &efficiency->blockage ? 1e3 : 1.0 + 1e-12);
    return sound;
}

static bool powers_sum_to_one(trial *at)
{
    ev_feed_budget budget;
    ev_budget_compute_feed(&at->antenna, 0, &budget);
    double sum = 0.0;
    bool sound = true;
    for (int fate = 0; fate < EV_FATE_COUNT; fate++) {
        sum += budget.power[fate];
        sound &= within(budget.power[fate], 0.0, 1.0);
    }
    sound &= within(sum, 1.0 - 1e-12, 1.0 + 1e-12);
    sound &= efficiencies_in_range(&budget.efficiency);
    sound &= all_finite(&budget.path_error.rms_area, sizeof budget.path_error);
    sound &= all_finite(&budget.untilted.rms_area, sizeof budget.untilted);
    sound &= all_finite(&budget.peak.x, sizeof budget.peak) && isfinite(budget.gain_on_axis_dbi);
    sound &= budget.untilted.rms_area <= budget.path_error.rms_area * (1.0 + 1e-9);
    if (at->antenna.site.present)
        sound &= all_finite(&budget.noise.spill_ground, sizeof budget.noise) &&
                 within(budget.noise.spill_ground, 0.0, 1.0);
    if (!sound)
        print_error("powers sum to 1 %+.3g\n", sum - 1.0);
    return sound;
}

static void test_powers_and_ranges(void **state)
{
    (void)state;
    each(ANTENNAS, 1, powers_sum_to_one);
}

static bool shares_agree(trial *at)
{
    ev_reference reference = ev_reference_make(&at->design, 0);
    double shares[EV_FATE_COUNT];
    ev_feed_budget budget;
    if (!ev_reference_shares(&reference, shares)) {
        print_error("the contours of the second way do not close\n");
        return false;
    }
    ev_budget_compute_feed(&at->antenna, 0, &budget);
    for (int fate = 0; fate < EV_FATE_COUNT; fate++)
        if (!(fabs(shares[fate] - budget.power[fate]) <= 1e-6)) {
            print_error("fate %d: %.9f by areas, %.9f by contours\n", fate, budget.power[fate],
                        shares[fate]);
            return false;
        }
    return true;
}

static void test_shares_integrated_another_way(void **state)
{
    (void)state;
    each(ANTENNAS / 10, 10, shares_agree);
}

/* Antennas that once disagreed: slivers of a sub's shadow cut by its own rim, bodies half under it
 * at the dish's rim, a centre of shadow close to where the lighting ends. */
static void test_shares_that_were_wrong_once(void **state)
{
    (void)state;
    const struct {
        uint64_t seed;
        int number;
    } cases[] = {{7, 1174},  {12, 179},        {12, 455}, {13, 394},
                 {13, 1060}, {20261201, 3460}, {21, 1414}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        static trial at;
        draw(cases[i].seed, cases[i].number, &at);
        assert_true(shares_agree(&at));
    }
}

/* And one whose subreflector shadows all of a small dish: the shares summed to 1 + 5e-11. */
static void test_nothing_left(void **state)
{
    (void)state;
    static trial at;
    draw(8, 8649, &at);
    assert_true(powers_sum_to_one(&at));
}

/* Unit normal of the sub where it sits, from its foci. */
static ev_vec3 sub_normal(const ev_antenna *antenna, ev_vec3 point)
{
    const ev_sub *sub = &antenna->sub;
    ev_vec3 a = ev_vec3_unit(ev_vec3_sub(point, ev_sub_place(sub, sub->prime_focus)));
    ev_vec3 b = ev_vec3_unit(ev_vec3_sub(point, ev_sub_place(sub, sub->feed_focus)));
    return ev_vec3_unit(sub->shape == EV_SUB_ELLIPSOID ? ev_vec3_add(a, b) : ev_vec3_sub(b, a));
}

static ev_vec3 main_normal(const ev_antenna *antenna, ev_vec3 point)
{
    double twice = 2.0 * antenna->focal_length;
    return ev_vec3_unit(ev_vec3_make(-point.x / twice, -point.y / twice, 1.0));
}

/* What the law of reflection misses by. */
static double bend_error(ev_vec3 in, ev_vec3 out, ev_vec3 normal)
{
    double a = ev_vec3_dot(in, normal);
    return ev_vec3_length(ev_vec3_sub(ev_vec3_sub(in, out), ev_vec3_scale(2.0 * a, normal)));
}

static ev_vec3 leg(const ev_ray *ray, int from)
{
    return ev_vec3_unit(ev_vec3_sub(ray->points[from + 1], ray->points[from]));
}

/* A leg that is short against the antenna's size has rounding of its own. */
static double leg_rounding(const ev_antenna *antenna, const ev_ray *ray, int from)
{
    double length = ev_vec3_length(ev_vec3_sub(ray->points[from + 1], ray->points[from]));
    double size = antenna->radius + antenna->focal_length + fabs(antenna->offset);
    return 1e-12 * fmax(1.0, size / length);
}

static bool reflects(const ev_antenna *antenna, const ev_ray *ray)
{
    bool sound = true;
    int on_main = antenna->dual ? 2 : 1;
    for (int i = 1; i < ray->point_count && i <= on_main; i++) {
        bool last = i + 1 == ray->point_count || i == on_main;
        ev_vec3 out = last ? ray->leaving : leg(ray, i), in = leg(ray, i - 1), p = ray->points[i];
        ev_vec3 n = antenna->dual && i == 1 ? sub_normal(antenna, p) : main_normal(antenna, p);
        double rounding = leg_rounding(antenna, ray, i - 1);
        rounding += last ? 0.0 : leg_rounding(antenna, ray, i);
        if (last && ray->fate == EV_FATE_PAST_MAIN && i == on_main)
            continue; /* through the hole: not reflected */
        sound &= bend_error(in, out, n) <= rounding;
    }
    if (ray->point_count > on_main) {
        ev_vec3 p = ray->points[on_main];
        double sag = p.z - (p.x * p.x + p.y * p.y) / (4.0 * antenna->focal_length);
        sound &= fabs(sag) <= 1e-12 * (antenna->radius + antenna->focal_length);
    }
    return sound;
}

/* From where it left the antenna back over the mirrors: distance at which it passes the feed. */
static double comes_back(const ev_antenna *antenna, const ev_ray *ray)
{
    int on_main = antenna->dual ? 2 : 1;
    ev_vec3 direction = ev_vec3_scale(-1.0, ray->leaving), feed = ray->points[0];
    ev_vec3 at = ev_vec3_along(ray->points[on_main], antenna->radius, ray->leaving);
    double t[2];
    int count = ev_conic_intersect(&antenna->main, at, direction, t);
    at = ev_vec3_along(at, t[count - 1], direction);
    direction = ev_vec3_reflect(direction, ev_conic_normal(&antenna->main, at));
    if (antenna->dual) {
        count = ev_conic_intersect(&antenna->sub.placed, at, direction, t);
        double along = NAN, away = INFINITY;
        for (int i = 0; i < count; i++) {
            ev_vec3 hit = ev_vec3_along(at, t[i], direction);
            double miss = ev_vec3_length(ev_vec3_sub(hit, ray->points[1]));
            along = miss < away ? t[i] : along;
            away = fmin(away, miss);
        }
        at = ev_vec3_along(at, along, direction);
        direction = ev_vec3_reflect(direction, ev_conic_normal(&antenna->sub.placed, at));
    }
    ev_vec3 arm = ev_vec3_sub(feed, at);
    return ev_vec3_length(ev_vec3_cross(arm, direction));
}

enum { RAYS = 12 };

static bool rays_are_sound(trial *at)
{
    const ev_antenna *antenna = &at->antenna;
    ev_ray rays[RAYS];
    double size = antenna->radius + antenna->focal_length + fabs(antenna->offset);
    ev_trace_fan(antenna, 0, RAYS, rays);
    for (int i = 0; i < RAYS; i++) {
        if (!reflects(antenna, &rays[i])) {
            print_error("ray %d breaks the law of reflection\n", i);
            return false;
        }
        bool through = rays[i].fate != EV_FATE_PAST_SUB && rays[i].fate != EV_FATE_PAST_MAIN;
        if (through && !(comes_back(antenna, &rays[i]) <= 1e-9 * size)) {
            print_error("ray %d passes its feed at %.3g m\n", i, comes_back(antenna, &rays[i]));
            return false;
        }
    }
    return true;
}

static void test_rays_reflect_and_come_back(void **state)
{
    (void)state;
    each(ANTENNAS, 1, rays_are_sound);
}

static void random_point(trial *at, double *x, double *y)
{
    const ev_antenna *antenna = &at->antenna;
    double inner = pow(antenna->hole_radius / antenna->radius, 2.0);
    double r = antenna->radius * sqrt(ev_random_between(&at->random, inner, 1.0));
    double phi = ev_random_between(&at->random, 0.0, 2.0 * EV_PI);
    *x = antenna->offset + r * cos(phi);
    *y = r * sin(phi);
}

static bool aimed_is_traced(trial *at)
{
    const ev_antenna *antenna = &at->antenna;
    for (int i = 0; i < 4; i++) {
        double x, y;
        random_point(at, &x, &y);
        ev_sample sample = ev_aperture_sample(antenna, 0, x, y);
        if (!sample.reached)
            return false;
        if (sample.sub_inside < 1e-9)
            continue; /* beyond the sub's rim only aimed rays go on */
        ev_ray ray = ev_trace(antenna, 0, sample.direction);
        int on_main = antenna->dual ? 2 : 1;
        ev_vec3 miss = ev_vec3_sub(ray.points[on_main], sample.point);
        if (ray.point_count <= on_main || !(ev_vec3_length(miss) <= 1e-9 * antenna->radius) ||
            !(fabs(ray.path - sample.path) <= 1e-12 * sample.path)) {
            print_error("aimed at (%g, %g), hit %.3g m beside it\n", x, y, ev_vec3_length(miss));
            return false;
        }
    }
    return true;
}

static void test_aimed_and_traced_rays_are_one(void **state)
{
    (void)state;
    each(ANTENNAS, 1, aimed_is_traced);
}

static bool paths_are_equal(trial *at)
{
    ev_design placed = ev_design_in_place(&at->design);
    ev_vec3 up = {0.0, 0.0, 1.0};
    ev_antenna_build(&placed, placed.frequencies[0], &at->antenna);
    double low = INFINITY, high = -INFINITY;
    for (int i = 0; i < 8; i++) {
        double x, y;
        random_point(at, &x, &y);
        ev_sample sample = ev_aperture_sample(&at->antenna, 0, x, y);
        low = fmin(low, ev_sample_error(&sample, up));
        high = fmax(high, ev_sample_error(&sample, up));
    }
    double total = low + at->antenna.focal_length;
    if (!(high - low <= 1e-12 * total))
        print_error("paths differ by %.3g of %.3g m\n", high - low, total);
    return high - low <= 1e-12 * total;
}

static void test_paths_in_place_are_equal(void **state)
{
    (void)state;
    each(ANTENNAS, 1, paths_are_equal);
}

/* Enough path difference for node counts that are worth threads. */
static ev_design far_out_of_place(ev_fixture fixture)
{
    ev_design design = ev_fixture_worn_design(fixture);
    design.feeds[0].shift.x = 0.05 * design.main.focal_length;
    return design;
}

/* The same bits for any number of threads: budgets of all example antennas, worn and far out of
 * place, and fans of rays. */
static void test_threads_change_no_bit(void **state)
{
    (void)state;
    enum { FAN = 500 };
    static ev_feed_budget budgets[3][2 * EV_FIXTURE_COUNT];
    static ev_ray fans[3][EV_FIXTURE_COUNT][FAN];
    memset(fans, 0, sizeof fans);
    for (int run = 0; run < 3; run++) {
        omp_set_num_threads(1 << run);
        for (int i = 0; i < EV_FIXTURE_COUNT; i++) {
            ev_design worn = ev_fixture_worn_design((ev_fixture)i);
            ev_design far = far_out_of_place((ev_fixture)i);
            static ev_antenna antenna;
            budgets[run][2 * i] = ev_fixture_budget(&worn);
            budgets[run][2 * i + 1] = ev_fixture_budget(&far);
            ev_fixture_build(&worn, &antenna);
            ev_trace_fan(&antenna, 0, FAN, fans[run][i]);
        }
    }
    for (int run = 1; run < 3; run++) {
        assert_memory_equal(budgets[0], budgets[run], sizeof budgets[0]);
        for (int i = 0; i < EV_FIXTURE_COUNT * FAN; i++) {
            const ev_ray *a = &fans[0][i / FAN][i % FAN], *b = &fans[run][i / FAN][i % FAN];
            assert_int_equal(a->fate, b->fate);
            assert_memory_equal(&a->direction, &b->direction, 2 * sizeof a->direction);
            assert_memory_equal(a->points, b->points, (size_t)a->point_count * sizeof a->points[0]);
            assert_memory_equal(&a->path, &b->path, 2 * sizeof a->path);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_rays_reflect_and_come_back),
        cmocka_unit_test(test_aimed_and_traced_rays_are_one),
        cmocka_unit_test(test_paths_in_place_are_equal),
        cmocka_unit_test(test_powers_and_ranges),
        cmocka_unit_test(test_shares_integrated_another_way),
        cmocka_unit_test(test_shares_that_were_wrong_once),
        cmocka_unit_test(test_nothing_left),
        cmocka_unit_test(test_threads_change_no_bit),
    };
    print_message("%d antennas, EV_SEED=%llu\n", ANTENNAS, (unsigned long long)seed());
    return cmocka_run_group_tests(tests, NULL, NULL);
}
