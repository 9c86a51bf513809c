/* The antenna as built: the subreflector's place and rim, where feeds stand and look, what moves
 * when a part is shifted, turned or tilted. */
#include "check.h"
#include "fixture.h"

#include "optics/geometry.h"

static const double degree = EV_PI / 180.0;

static ev_antenna build(const ev_design *design)
{
    ev_antenna antenna;
    ev_fixture_build(design, &antenna);
    return antenna;
}

static void assert_vectors_near(ev_vec3 a, ev_vec3 b, double tolerance)
{
    assert_near(ev_vec3_length(ev_vec3_sub(a, b)), 0.0, tolerance);
}

/* The rim lies on the conic, in one plane, on the cone from the prime focus over the main rim. */
static void test_rim_of_the_sub(void **state)
{
    (void)state;
    for (int fixture = EV_FIXTURE_CASSEGRAIN; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        ev_antenna antenna = build(&design);
        const ev_sub *sub = &antenna.sub;
        double size = sub->semi_long;
        for (int k = 0; k < 72; k++) {
            double phi = 5.0 * k * degree;
            ev_vec3 rim = ev_sub_rim_point(sub, phi), on_main, point;
            assert_near(ev_conic_side(&sub->nominal, rim), 0.0, 1e-12 * size);
            assert_near(ev_vec3_dot(ev_vec3_sub(rim, sub->rim_centre), sub->rim_normal), 0.0,
                        1e-12 * size);
            assert_near(ev_sub_inside(sub, rim), 0.0, 1e-12);
            on_main = ev_main_point(&antenna, antenna.offset + antenna.radius * cos(phi),
                                    antenna.radius * sin(phi));
            assert_true(ev_sub_point_for(sub, on_main, &point));
            assert_near(ev_sub_inside(sub, point), 0.0, 1e-12);
        }
        assert_near(ev_sub_inside(sub, ev_sub_point(sub, 0.0, 0.0)), 1.0, 1e-12);
        assert_near(ev_sub_inside(sub, ev_sub_point(sub, 0.6, 1.0)), 0.4, 1e-12);
    }
}

/* Oversize is added to both semi-axes. */
static void test_oversize(void **state)
{
    (void)state;
    for (int fixture = EV_FIXTURE_CASSEGRAIN; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        design.sub.oversize = 0.05 * design.sub.diameter;
        ev_antenna antenna = build(&design);
        const ev_sub *sub = &antenna.sub;
        ev_vec3 end = ev_vec3_sub(ev_sub_rim_point(sub, 0.0), sub->rim_centre);
        ev_vec3 side = ev_vec3_sub(ev_sub_rim_point(sub, 0.5 * EV_PI), sub->rim_centre);
        assert_ratio(ev_vec3_dot(end, sub->rim_long), sub->semi_long + sub->oversize, 1e-12);
        assert_ratio(ev_vec3_dot(side, sub->rim_short), sub->semi_short + sub->oversize, 1e-12);
        assert_near(ev_conic_side(&sub->nominal, ev_sub_rim_point(sub, 0.7)), 0.0, 1e-12);
    }
}

/* The far half of an ellipsoid is not the mirror, whatever its foot. */
static void test_far_half_of_an_ellipsoid(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_GREGORIAN);
    ev_antenna antenna = build(&design);
    const ev_sub *sub = &antenna.sub;
    double t[2];
    ev_vec3 feed = sub->feed_focus;
    ev_vec3 up = ev_vec3_unit(ev_vec3_sub(sub->nominal.vertex, feed));
    assert_int_equal(ev_conic_intersect(&sub->nominal, feed, up, t), 2);
    assert_true(ev_sub_inside(sub, ev_vec3_along(feed, t[1], up)) > 0.9);
    assert_true(ev_sub_inside(sub, ev_vec3_along(feed, t[0], up)) < 0.0);
}

/* Turned about x, then y, through the vertex, then shifted; and back. */
static void test_misplaced_sub(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET_GREGORIAN);
    design.sub.shift = ev_vec3_make(0.1, -0.2, 0.3);
    design.sub.tilt_x = 0.5 * EV_PI;
    design.sub.tilt_y = 0.5 * EV_PI;
    ev_antenna antenna = build(&design);
    const ev_sub *sub = &antenna.sub;
    ev_vec3 vertex = sub->nominal.vertex;
    /* y goes to z by the turn about x and from there to x by the turn about y */
    ev_vec3 moved = ev_sub_place(sub, ev_vec3_add(vertex, ev_vec3_make(0.0, 1.0, 0.0)));
    assert_vectors_near(moved, ev_vec3_add(vertex, ev_vec3_make(1.1, -0.2, 0.3)), 1e-12);
    assert_vectors_near(sub->placed.vertex, ev_vec3_add(vertex, design.sub.shift), 1e-12);
    ev_vec3 any = {3.0, -4.0, 55.0};
    assert_vectors_near(ev_sub_unplace(sub, ev_sub_place(sub, any)), any, 1e-12);
    for (int k = 0; k < 8; k++) {
        ev_vec3 rim = ev_sub_rim_point(sub, k);
        assert_near(ev_conic_side(&sub->placed, rim), 0.0, 1e-10);
        assert_near(ev_sub_inside(sub, rim), 0.0, 1e-12);
    }
}

/* Feed focus = (0, 0, F) - interfocal (sin t, 0, cos t): a positive tilt moves it toward -x, which
 * by which the example Gregorian, as it was designed to, cancels cross-polarization. */
static void test_axis_tilt(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET_GREGORIAN);
    ev_antenna antenna = build(&design);
    double t = 5.57 * degree;
    assert_vectors_near(antenna.sub.feed_focus,
                        ev_vec3_make(-11.0 * sin(t), 0.0, 60.0 - 11.0 * cos(t)), 1e-12);
    ev_feed_budget tilted = ev_fixture_budget(&design);
    design.sub.axis_tilt = 0.0;
    ev_feed_budget straight = ev_fixture_budget(&design);
    design.sub.axis_tilt = -t;
    ev_feed_budget wrong = ev_fixture_budget(&design);
    assert_near(tilted.efficiency.polarization, 1.0, 1e-9);
    assert_in_range((int)(1e7 * (1.0 - straight.efficiency.polarization)), 1000, 5000);
    assert_in_range((int)(1e7 * (1.0 - wrong.efficiency.polarization)), 5000, 20000);
}

/* Aimed at the middle of the rim's rays, or at what is above the aperture centre, or as told. */
static void test_aims(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    ev_antenna antenna = build(&design);
    ev_vec3 focus = antenna.feeds[0].nominal;
    ev_vec3 top = ev_vec3_unit(ev_vec3_sub(ev_main_point(&antenna, 1.26, 0.0), focus));
    ev_vec3 bottom = ev_vec3_unit(ev_vec3_sub(ev_main_point(&antenna, 0.06, 0.0), focus));
    assert_vectors_near(antenna.feeds[0].axis, ev_vec3_unit(ev_vec3_add(top, bottom)), 1e-12);
    assert_near(antenna.feeds[0].half_extent, 0.5 * ev_vec3_angle(top, bottom), 1e-12);
    design.feeds[0].aim = EV_AIM_CENTRE;
    antenna = build(&design);
    ev_vec3 middle = ev_vec3_unit(ev_vec3_sub(ev_main_point(&antenna, 0.66, 0.0), focus));
    assert_vectors_near(antenna.feeds[0].axis, middle, 1e-12);
    assert_near(antenna.layout.feed_tilt, 2.0 * atan(0.66 / 1.44), 1e-12);
    design.feeds[0].aim = EV_AIM_DIRECTION;
    design.feeds[0].aim_direction = ev_vec3_make(0.0, 3.0, -4.0);
    antenna = build(&design);
    assert_vectors_near(antenna.feeds[0].axis, ev_vec3_make(0.0, 0.6, -0.8), 1e-12);
    design = ev_fixture_design(EV_FIXTURE_OFFSET_CASSEGRAIN);
    design.feeds[0].aim = EV_AIM_CENTRE;
    antenna = build(&design);
    ev_vec3 target;
    assert_true(ev_sub_point_for(&antenna.sub, ev_main_point(&antenna, 1.45, 0.0), &target));
    assert_vectors_near(antenna.feeds[0].axis,
                        ev_vec3_unit(ev_vec3_sub(target, antenna.sub.feed_focus)), 1e-12);
}

/* Shift and defocus move the feed without turning it; defocus goes away from what it lights along
 * the axis as it is tilted; the frame stays orthonormal and right-handed. */
static void test_misplaced_feed(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_feed_design *feed = &design.feeds[0];
    feed->defocus = 0.04;
    ev_antenna antenna = build(&design);
    assert_vectors_near(antenna.feeds[0].position, ev_vec3_make(0.0, 0.0, 5.04), 1e-12);
    feed->shift = ev_vec3_make(0.01, 0.02, 0.03);
    antenna = build(&design);
    assert_vectors_near(antenna.feeds[0].axis, ev_vec3_make(0.0, 0.0, -1.0), 1e-12);
    assert_vectors_near(antenna.feeds[0].nominal, ev_vec3_make(0.0, 0.0, 5.0), 1e-12);
    feed->tilt_x = 0.1;
    feed->roll = 0.2;
    antenna = build(&design);
    const ev_feed *built = &antenna.feeds[0];
    assert_vectors_near(built->axis, ev_vec3_make(0.0, sin(0.1), -cos(0.1)), 1e-12);
    assert_vectors_near(built->position,
                        ev_vec3_make(0.01, 0.02 - 0.04 * sin(0.1), 5.03 + 0.04 * cos(0.1)), 1e-12);
    assert_vectors_near(ev_vec3_cross(built->ex, built->ey), built->axis, 1e-12);
    assert_near(ev_vec3_dot(built->ex, ev_vec3_make(1.0, 0.0, 0.0)), cos(0.2), 1e-12);
    feed->tilt_x = 0.0;
    feed->tilt_y = 0.1;
    antenna = build(&design);
    assert_vectors_near(antenna.feeds[0].axis, ev_vec3_make(-sin(0.1), 0.0, -cos(0.1)), 1e-12);
}

static void test_beam_meant(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.feeds[0].toward_x = 3.0 * degree;
    design.feeds[0].toward_y = -4.0 * degree;
    ev_antenna antenna = build(&design);
    ev_vec3 wanted = antenna.feeds[0].wanted;
    assert_near(asin(wanted.x) / degree, 3.0, 1e-12);
    assert_near(asin(wanted.y) / degree, -4.0, 1e-12);
    assert_near(ev_vec3_length(wanted), 1.0, 1e-14);
}

/* Projected outlines: the sub's rim and bodies along z, struts turned evenly. */
static void test_shadows_as_built(void **state)
{
    (void)state;
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_OFFSET_CASSEGRAIN);
    ev_antenna antenna = build(&design);
    const ev_shadows *shadows = &antenna.shadows;
    for (int k = 0; k < 12; k++) {
        /* the plane ellipse through the rim, not the conic's own edge */
        ev_vec3 u =
            ev_vec3_scale(antenna.sub.semi_long + antenna.sub.oversize, antenna.sub.rim_long);
        ev_vec3 v =
            ev_vec3_scale(antenna.sub.semi_short + antenna.sub.oversize, antenna.sub.rim_short);
        ev_vec3 edge = ev_vec3_along(ev_vec3_along(antenna.sub.rim_centre, cos(k), u), sin(k), v);
        edge = ev_sub_place(&antenna.sub, edge);
        const ev_outline *o = &shadows->sub;
        assert_near(o->x + cos(k) * o->ux + sin(k) * o->vx, edge.x, 1e-12);
        assert_near(o->y + cos(k) * o->uy + sin(k) * o->vy, edge.y, 1e-12);
    }
    assert_int_equal(shadows->body_count, 1);
    assert_near(shadows->bodies[0].x, antenna.feeds[0].position.x, 1e-12);
    assert_near(shadows->bodies[0].ux, 0.5 * design.feeds[0].body, 1e-12);
    assert_int_equal(shadows->strip_count, 4);
    for (int k = 0; k < 4; k++)
        assert_near(shadows->strips[k].angle, (45.0 + 90.0 * k) * degree, 1e-12);
}

static void test_up_leans_as_the_site_says(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    design.site = (ev_site_design){true, 32.0 * degree, 290.0, 10.0};
    ev_antenna antenna = build(&design);
    ev_vec3 up = ev_antenna_up(&antenna);
    assert_near(asin(ev_vec3_dot(up, ev_vec3_make(0.0, 0.0, 1.0))) / degree, 32.0, 1e-12);
    assert_near(up.y, 0.0, 0.0);
    assert_true(up.x > 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_rim_of_the_sub),
        cmocka_unit_test(test_oversize),
        cmocka_unit_test(test_far_half_of_an_ellipsoid),
        cmocka_unit_test(test_misplaced_sub),
        cmocka_unit_test(test_axis_tilt),
        cmocka_unit_test(test_aims),
        cmocka_unit_test(test_misplaced_feed),
        cmocka_unit_test(test_beam_meant),
        cmocka_unit_test(test_shadows_as_built),
        cmocka_unit_test(test_up_leans_as_the_site_says),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
