/* Shadows: fates of points, and areas swept along each obstacle's own lines against closed forms
 * and against the fates of a fine grid. */
#include "check.h"
#include "random.h"

#include "optics/quadrature.h"

#include <stdlib.h>
#include <string.h>

static ev_shadows bare(void)
{
    return (ev_shadows){.centre_x = 0.3, .radius = 1.0};
}

static ev_outline disc(double x, double y, double radius)
{
    return (ev_outline){.x = x, .y = y, .ux = radius, .vy = radius};
}

static void add_strip(ev_shadows *shadows, double angle, double width, double from, double to)
{
    shadows->strips[shadows->strip_count++] = ev_strip_make(angle, width, from, to, 0);
}

typedef struct sweep {
    const ev_shadows *shadows;
    int obstacle;
} sweep;

static int slice(const void *context, double phi, ev_shadow_interval *intervals)
{
    const sweep *over = context;
    return ev_shadow_slice(over->shadows, over->obstacle, phi, intervals);
}

/* Areas by fate; every node has to have the fate that its place has. */
static void sweep_areas(const ev_shadows *shadows, double areas[EV_FATE_COUNT])
{
    memset(areas, 0, EV_FATE_COUNT * sizeof *areas);
    for (int obstacle = 0; obstacle < ev_shadow_count(shadows); obstacle++) {
        double seeds[512], scale = ev_shadow_scale(shadows, obstacle);
        sweep over = {shadows, obstacle};
        ev_region_nodes nodes;
        ev_region region = {.slice = slice,
                            .context = &over,
                            .seeds = seeds,
                            .seed_count = ev_shadow_seeds(shadows, obstacle, seeds, 512),
                            .rows = ev_shadow_is_strip(shadows, obstacle),
                            .shared = true};
        ev_region_integrate(&region, 12, 30, &nodes);
        for (int i = 0; i < nodes.count; i++) {
            ev_line line = ev_shadow_line(shadows, obstacle, nodes.items[i].phi);
            double x = line.x + nodes.items[i].r * line.dx, y = line.y + nodes.items[i].r * line.dy;
            assert_int_equal(ev_shadow_at(shadows, x, y), nodes.items[i].tag);
            areas[nodes.items[i].tag] += scale * nodes.items[i].weight;
        }
        free(nodes.items);
    }
}

static void test_precedence(void **state)
{
    (void)state;
    ev_shadows shadows = bare();
    shadows.hole_radius = 0.1;
    shadows.has_sub = true;
    shadows.sub = disc(0.3, 0.0, 0.2);
    shadows.bodies[shadows.body_count++] = disc(0.3, 0.0, 0.3);
    add_strip(&shadows, 0.0, 0.1, 0.0, 2.0);
    const struct {
        double x;
        ev_fate fate;
    } cases[] = {{0.35, EV_FATE_PAST_MAIN},   {0.45, EV_FATE_SHADOW_SUB},
                 {0.55, EV_FATE_SHADOW_FEED}, {0.8, EV_FATE_SHADOW_STRUTS},
                 {1.31, EV_FATE_PAST_MAIN},   {-0.5, EV_FATE_APERTURE},
                 {NAN, EV_FATE_PAST_MAIN}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++)
        assert_int_equal(ev_shadow_at(&shadows, cases[i].x, 0.0), cases[i].fate);
    assert_int_equal(ev_shadow_at(&shadows, 0.8, 0.06), EV_FATE_APERTURE);
}

static void test_outline_areas(void **state)
{
    (void)state;
    double areas[EV_FATE_COUNT];
    ev_shadows shadows = bare();
    shadows.has_sub = true;
    shadows.sub = (ev_outline){0.5, 0.2, 0.2, 0.1, 0.03, 0.15}; /* askew */
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_SUB], EV_PI * (0.2 * 0.15 - 0.1 * 0.03), 1e-12);
    shadows.hole_radius = 0.05;
    shadows.sub = disc(0.3, 0.0, 0.2);
    shadows.bodies[shadows.body_count++] = disc(0.3, 0.0, 0.3);
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_SUB], EV_PI * (0.04 - 0.0025), 1e-12);
    assert_ratio(areas[EV_FATE_SHADOW_FEED], EV_PI * (0.09 - 0.04), 1e-12);
}

/* Area common to two circles of radii a and b whose centres are d apart. */
static double lens(double a, double b, double d)
{
    double u = (d * d + a * a - b * b) / (2.0 * d * a), v = (d * d + b * b - a * a) / (2.0 * d * b);
    double kite = (a + b - d) * (d + a - b) * (d - a + b) * (d + a + b);
    return a * a * acos(u) + b * b * acos(v) - 0.5 * sqrt(kite);
}

/* A body half beyond the rim, one over the hole's edge, two that overlap. */
static void test_lenses(void **state)
{
    (void)state;
    double areas[EV_FATE_COUNT];
    ev_shadows shadows = bare();
    shadows.bodies[shadows.body_count++] = disc(1.25, 0.0, 0.2);
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_FEED], lens(1.0, 0.2, 0.95), 3e-7);
    shadows.bodies[0] = disc(0.4, 0.1, 0.12);
    shadows.hole_radius = 0.08;
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_FEED],
                 EV_PI * 0.12 * 0.12 - lens(0.12, 0.08, hypot(0.1, 0.1)), 3e-7);
    shadows.hole_radius = 0.0;
    shadows.bodies[shadows.body_count++] = disc(0.55, 0.1, 0.1);
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_FEED],
                 EV_PI * (0.12 * 0.12 + 0.1 * 0.1) - lens(0.12, 0.1, 0.15), 3e-7);
}

/* Area of a strip of half width w from the centre of a disc of radius r to its edge. */
static double half_strip(double w, double r)
{
    return w * sqrt(r * r - w * w) + r * r * asin(w / r);
}

static void test_strip_areas(void **state)
{
    (void)state;
    double areas[EV_FATE_COUNT], w = 0.02;
    ev_shadows shadows = bare();
    for (int i = 0; i < 4; i++)
        add_strip(&shadows, 0.3 + 0.5 * EV_PI * i, 2.0 * w, 0.1, 3.0);
    sweep_areas(&shadows, areas);
    double one = half_strip(w, 1.0) - half_strip(w, 0.1);
    assert_ratio(areas[EV_FATE_SHADOW_STRUTS], 4.0 * one, 1e-12);
    shadows.strip_count = 0;
    add_strip(&shadows, 1.0, 2.0 * w, 0.1, 0.5);
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_STRUTS], half_strip(w, 0.5) - half_strip(w, 0.1), 1e-12);
}

/* Two strips from the centre at an angle t share a kite of area w^2 / tan(t / 2), counted once. */
static void test_crossing_strips(void **state)
{
    (void)state;
    double areas[EV_FATE_COUNT], w = 0.03, turn = 0.2;
    ev_shadows shadows = bare();
    add_strip(&shadows, 0.0, 2.0 * w, 0.0, 2.0);
    add_strip(&shadows, turn, 2.0 * w, 0.0, 2.0);
    sweep_areas(&shadows, areas);
    assert_ratio(areas[EV_FATE_SHADOW_STRUTS], 2.0 * half_strip(w, 1.0) - w * w / tan(0.5 * turn),
                 1e-9);
}

/* Where y cuts a circle, as an interval of x. */
static bool cut_row(ev_outline circle, double y, double interval[2])
{
    double half = circle.ux * circle.ux - pow(y - circle.y, 2.0);
    interval[0] = circle.x - sqrt(fmax(half, 0.0));
    interval[1] = circle.x + sqrt(fmax(half, 0.0));
    return half > 0.0;
}

/* A body that reaches over the rim and under the sub's shadow, in pieces with corners where three
 * outlines meet: row by row. */
static void test_corners(void **state)
{
    (void)state;
    enum { ROWS = 400000 };
    for (int k = 0; k < 8; k++) {
        ev_shadows shadows = bare();
        shadows.has_sub = true;
        shadows.sub = disc(-0.72, 0.0, 0.1);
        shadows.bodies[shadows.body_count++] = disc(-0.66 - 0.006 * k, 0.09 + 0.002 * k, 0.06);
        ev_outline rim = disc(shadows.centre_x, 0.0, shadows.radius), body = shadows.bodies[0];
        double areas[EV_FATE_COUNT], sum = 0.0, step = 2.0 * body.ux / ROWS;
        for (int i = 0; i < ROWS; i++) {
            double y = body.y - body.ux + (i + 0.5) * step, in_body[2], in_rim[2], in_sub[2];
            cut_row(body, y, in_body);
            cut_row(rim, y, in_rim);
            double from = fmax(in_body[0], in_rim[0]), to = fmin(in_body[1], in_rim[1]);
            double length = fmax(0.0, to - from);
            if (cut_row(shadows.sub, y, in_sub))
                length -= fmax(0.0, fmin(to, in_sub[1]) - fmax(from, in_sub[0]));
            sum += step * length;
        }
        sweep_areas(&shadows, areas);
        assert_near(areas[EV_FATE_SHADOW_FEED], sum, 2e-9);
    }
}

static ev_shadows random_shadows(ev_random *random)
{
    ev_shadows shadows = bare();
    if (ev_random_chance(random, 0.5))
        shadows.hole_radius = ev_random_log(random, 0.02, 0.3);
    shadows.has_sub = ev_random_chance(random, 0.7);
    shadows.sub = disc(ev_random_between(random, -0.8, 1.2), ev_random_between(random, -0.5, 0.5),
                       ev_random_log(random, 0.05, 0.4));
    shadows.sub.uy = ev_random_between(random, -0.05, 0.05);
    int bodies = ev_random_pick(random, 3), strips = ev_random_pick(random, 7);
    for (int i = 0; i < bodies; i++)
        shadows.bodies[shadows.body_count++] =
            disc(ev_random_between(random, -0.8, 1.4), ev_random_between(random, -0.5, 0.5),
                 ev_random_log(random, 0.02, 0.3));
    for (int i = 0; i < strips; i++)
        add_strip(&shadows, ev_random_between(random, 0.0, 6.3), ev_random_log(random, 0.01, 0.2),
                  ev_random_between(random, 0.0, 0.4), ev_random_between(random, 0.4, 1.2));
    return shadows;
}

enum { GRID = 500 };

static void count_grid(const ev_shadows *shadows, double areas[EV_FATE_COUNT])
{
    double step = 2.0 * shadows->radius / GRID;
    memset(areas, 0, EV_FATE_COUNT * sizeof *areas);
    for (int i = 0; i < GRID * GRID; i++) {
        double x = shadows->centre_x - shadows->radius + (i % GRID + 0.5) * step;
        double y = -shadows->radius + (i / GRID + 0.5) * step;
        areas[ev_shadow_at(shadows, x, y)] += step * step;
    }
}

/* Anything over anything: the sweeps and a grid of fates count the same. */
static void test_random_shadows(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(8);
    for (int i = 0; i < 60; i++) {
        ev_shadows shadows = random_shadows(&random);
        double swept[EV_FATE_COUNT], counted[EV_FATE_COUNT];
        sweep_areas(&shadows, swept);
        count_grid(&shadows, counted);
        for (int fate = EV_FATE_SHADOW_SUB; fate < EV_FATE_COUNT; fate++)
            assert_near(swept[fate], counted[fate], 1.5e-3);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_precedence),      cmocka_unit_test(test_outline_areas),
        cmocka_unit_test(test_lenses),          cmocka_unit_test(test_strip_areas),
        cmocka_unit_test(test_crossing_strips), cmocka_unit_test(test_corners),
        cmocka_unit_test(test_random_shadows),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
