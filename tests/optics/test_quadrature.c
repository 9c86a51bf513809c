/* Gauss rules, and areas of regions with breaks against closed forms. */
#include "check.h"

#include "optics/quadrature.h"

#include <gsl/gsl_integration.h>
#include <stdlib.h>

/* Exact for powers up to 2n - 1, and the nodes of another implementation. */
static void test_gauss_rules(void **state)
{
    (void)state;
    static ev_gauss gauss;
    for (int n = 1; n <= 60; n++) {
        ev_gauss_make(n, &gauss);
        assert_int_equal(gauss.count, n);
        for (int power = 0; power < 2 * n; power++) {
            double sum = 0.0;
            for (int i = 0; i < n; i++)
                sum += gauss.weight[i] * pow(gauss.x[i], power);
            assert_near(sum, 1.0 / (power + 1.0), 1e-13);
        }
    }
    const int sizes[] = {100, 256, EV_GAUSS_CAPACITY}; /* tabulated there to rounding */
    for (int k = 0; k < 3; k++) {
        size_t n = (size_t)sizes[k];
        gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(n);
        ev_gauss_make(sizes[k], &gauss);
        for (size_t i = 0; i < n; i++) {
            double x, weight;
            gsl_integration_glfixed_point(0.0, 1.0, i, &x, &weight, table);
            /* the other one counts from the middle for some sizes: compare as sets, sorted */
            size_t at = 0;
            while (at + 1 < n && fabs(gauss.x[at] - x) > fabs(gauss.x[at + 1] - x))
                at++;
            assert_near(gauss.x[at], x, 1e-14);
            assert_near(gauss.weight[at], weight, 1e-14);
        }
        gsl_integration_glfixed_table_free(table);
    }
    ev_gauss_make(0, &gauss);
    assert_int_equal(gauss.count, 1);
    ev_gauss_make(9999, &gauss);
    assert_int_equal(gauss.count, EV_GAUSS_CAPACITY);
}

/* A circle of radius a whose centre is `away` from the origin, as polar slices. */
typedef struct circle {
    double a, away;
} circle;

static int slice_circle(const void *context, double phi, ev_shadow_interval *intervals)
{
    const circle *c = context;
    double along = c->away * cos(phi), disc = c->a * c->a - pow(c->away * sin(phi), 2.0);
    if (disc <= 0.0 || along + sqrt(disc) <= 0.0)
        return 0;
    double from = fmax(0.0, along - sqrt(disc));
    intervals[0] =
        (ev_shadow_interval){from, along + sqrt(disc), EV_FATE_SHADOW_SUB, from > 0.0, 2};
    return 1;
}

static const double quarters[] = {0.0, 0.5 * EV_PI, EV_PI, 1.5 * EV_PI, 2.0 * EV_PI};

static double area(const ev_region *region, int radial, int around, int *count)
{
    ev_region_nodes nodes;
    double sum = 0.0;
    ev_region_integrate(region, radial, around, &nodes);
    for (int i = 0; i < nodes.count; i++)
        sum += nodes.items[i].weight;
    *count = nodes.count;
    free(nodes.items);
    return sum;
}

/* Around the origin, through it, and beside it, where radii touch: breaks are found by themselves.
 */
static void test_circles_about_another_centre(void **state)
{
    (void)state;
    const circle circles[] = {{1.0, 0.0}, {1.0, 0.5}, {1.0, 0.999}, {1.0, 1.3}, {0.1, 2.0}};
    for (size_t i = 0; i < sizeof circles / sizeof circles[0]; i++)
        for (int shared = 0; shared < 2; shared++) {
            ev_region region = {.slice = slice_circle,
                                .context = &circles[i],
                                .seeds = quarters,
                                .seed_count = 5,
                                .shared = shared};
            int count;
            double found = area(&region, 4, shared ? 60 : 24, &count);
            assert_ratio(found, EV_PI * circles[i].a * circles[i].a, i == 2 ? 1e-4 : 1e-8);
        }
}

/* A whole disc without breaks has equal angles, the fewest nodes. */
static void test_unbroken_circle_is_shared_evenly(void **state)
{
    (void)state;
    circle whole = {1.0, 0.0};
    ev_region region = {.slice = slice_circle,
                        .context = &whole,
                        .seeds = quarters,
                        .seed_count = 5,
                        .shared = true};
    int count;
    assert_ratio(area(&region, 3, 7, &count), EV_PI, 1e-12);
    assert_int_equal(count, 21);
}

static int slice_rows(const void *context, double phi, ev_shadow_interval *intervals)
{
    (void)context;
    intervals[0] = (ev_shadow_interval){phi * phi, 2.0 + phi, EV_FATE_SHADOW_STRUTS, 0, 1};
    return 1;
}

/* Rows: area of phi^2 < r < 2 + phi over [-1, 2] is 4.5. */
static void test_rows(void **state)
{
    (void)state;
    const double ends[] = {-1.0, 2.0};
    ev_region region = {
        .slice = slice_rows, .seeds = ends, .seed_count = 2, .rows = true, .shared = true};
    int count;
    assert_near(area(&region, 2, 4, &count), 4.5, 1e-13);
    assert_int_equal(count, 8);
}

/* Inside the circle of radius 0.25 about (0.5, 0), as a margin in polar coordinates. */
static double ball(const void *context, double phi, double r, int *which)
{
    const double *radius = context;
    double x = r * cos(phi) - 0.5, y = r * sin(phi);
    *which = 3;
    return *radius - hypot(x, y);
}

static void test_clipping_by_a_margin(void **state)
{
    (void)state;
    double radius = 0.25;
    ev_margin margin = {.value = ball, .context = &radius, .samples = 5};
    ev_shadow_interval whole = {0.0, 1.0, EV_FATE_APERTURE, 0, 1}, parts[10];
    assert_int_equal(ev_clip_by_margin(&margin, 0.0, whole, parts), 1);
    assert_near(parts[0].from, 0.25, 1e-12);
    assert_near(parts[0].to, 0.75, 1e-12);
    assert_int_equal(parts[0].from_id, parts[0].to_id);
    assert_int_not_equal(parts[0].from_id, whole.from_id);
    assert_int_equal(ev_clip_by_margin(&margin, 0.6, whole, parts), 0);
    whole.from = 0.5;
    assert_int_equal(ev_clip_by_margin(&margin, 0.0, whole, parts), 1);
    assert_near(parts[0].from, 0.5, 0.0);
    assert_int_equal(parts[0].from_id, 0);
}

/* A chord shorter than the step between looks is found as well. */
static void test_short_chords(void **state)
{
    (void)state;
    double radius = 0.03;
    ev_margin margin = {.value = ball, .context = &radius, .samples = 4};
    ev_shadow_interval whole = {0.0, 1.0, EV_FATE_APERTURE, 0, 1}, parts[8];
    for (double phi = 0.0; phi < 0.059; phi += 0.003) {
        double middle = 0.5 * cos(phi), half = sqrt(radius * radius - pow(0.5 * sin(phi), 2.0));
        assert_int_equal(ev_clip_by_margin(&margin, phi, whole, parts), 1);
        assert_near(parts[0].from, middle - half, 1e-11);
        assert_near(parts[0].to, middle + half, 1e-11);
    }
}

static void test_changes_along_a_circle(void **state)
{
    (void)state;
    double radius = 0.25, changes[4];
    ev_margin margin = {.value = ball, .context = &radius, .samples = 5};
    int count = ev_margin_changes(&margin, 0.5, -EV_PI, EV_PI, 40, changes, 4);
    assert_int_equal(count, 2);
    assert_near(changes[0], -2.0 * asin(0.25), 1e-11);
    assert_near(changes[1], 2.0 * asin(0.25), 1e-11);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_gauss_rules),
        cmocka_unit_test(test_circles_about_another_centre),
        cmocka_unit_test(test_unbroken_circle_is_shared_evenly),
        cmocka_unit_test(test_rows),
        cmocka_unit_test(test_clipping_by_a_margin),
        cmocka_unit_test(test_short_chords),
        cmocka_unit_test(test_changes_along_a_circle),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
