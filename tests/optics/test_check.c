/* Every problem of a design can be reached, names the parameter to change, and none is found in a
 * sound one. */
#include "check.h"
#include "fixture.h"

#include <stdlib.h>
#include <string.h>

enum { CAPACITY = 24 };

typedef void (*spoil)(ev_design *design);

/* Spoils a fixture, resolves it as the scene does, and looks for the problem. */
static bool finds(ev_fixture fixture, spoil change, ev_problem_id id, const char *parameter,
                  ev_problem *found)
{
    ev_problem problems[CAPACITY];
    ev_design design = ev_fixture_design(fixture);
    if (change)
        change(&design);
    ev_design_resolve(&design);
    int count = ev_design_check(&design, problems, CAPACITY);
    for (int i = 0; i < count; i++)
        if (problems[i].id == id && (!parameter || strcmp(problems[i].parameter, parameter) == 0)) {
            *found = problems[i];
            return true;
        }
    return false;
}

static ev_pattern_table *disc_table(double end)
{
    static ev_pattern_table table;
    memset(&table, 0, sizeof table);
    table.count = 2;
    table.theta[1] = end;
    ev_pattern_table_prepare(&table);
    return &table;
}

static void no_diameter(ev_design *d)
{
    d->main.diameter = 0.0;
}
static void nan_frequency(ev_design *d)
{
    d->frequencies[0] = NAN;
}
static void endless_focal_length(ev_design *d)
{
    d->main.focal_length = INFINITY;
}
static void deep_offset(ev_design *d)
{
    d->main.focal_given = EV_GIVEN_DEPTH;
}
static void ellipsoid_outside_itself(ev_design *d)
{
    d->sub.shape_given = EV_GIVEN_ECCENTRICITY;
    d->sub.eccentricity = 1.5;
}
static void weak_magnification(ev_design *d)
{
    d->sub.magnification = 1.0;
}
static void no_such_sub(ev_design *d)
{
    d->sub.derived = EV_DERIVED_SHAPE;
    d->sub.diameter = 20.0; /* a shape that magnifies less than once */
}
static void vast_sub(ev_design *d)
{
    d->sub.interfocal = 120.0;
    d->sub.derived = EV_DERIVED_DIAMETER;
}
static void wide_as_the_ellipsoid(ev_design *d)
{
    d->sub.oversize = 0.6 * d->sub.interfocal;
}
static void nan_sub_tilt(ev_design *d)
{
    d->sub.tilt_y = NAN;
}
static void tilted_symmetric(ev_design *d)
{
    d->sub.axis_tilt = 0.1;
}
static void offset_by_diameter(ev_design *d)
{
    d->sub.derived = EV_DERIVED_INTERFOCAL;
}
static void all_hole(ev_design *d)
{
    d->main.hole = d->main.diameter;
}
static void feed_behind_dish(ev_design *d)
{
    d->feeds[0].shift.z = -1.01 * d->main.focal_length;
}
static void feed_behind_sub(ev_design *d)
{
    d->feeds[0].shift.z = d->sub.interfocal;
}
static void aimless(ev_design *d)
{
    d->feeds[0].aim = EV_AIM_DIRECTION;
    d->feeds[0].aim_direction = ev_vec3_make(0.0, 0.0, 0.0);
}
static void without_table(ev_design *d)
{
    d->feeds[0].pattern = EV_PATTERN_TABLE;
}
static void very_deep(ev_design *d)
{
    d->main.focal_length = 0.2 * d->main.diameter;
    d->feeds[0].taper_given = EV_GIVEN_EDGE_TAPER;
}
static void toward_behind(ev_design *d)
{
    d->feeds[0].toward_x = 2.0;
}
static void inside_out_strut(ev_design *d)
{
    d->strut_count = 1;
    d->struts[0] = ev_default_strut();
    d->struts[0].from = 2.0 * d->struts[0].to;
}
static void feedless(ev_design *d)
{
    d->feed_count = 0;
}
static void nan_shift(ev_design *d)
{
    d->feeds[0].shift.y = NAN;
}
static void negative_exponent(ev_design *d)
{
    d->feeds[0].taper_given = EV_GIVEN_EXPONENT;
    d->feeds[0].exponent = -1.0;
}
static void low_frequency(ev_design *d)
{
    d->frequencies[0] = 9.0 * EV_LIGHT_SPEED / d->main.diameter;
}
static void wide_hole(ev_design *d)
{
    d->main.hole = 1.0;
}
static void looks_away(ev_design *d)
{
    d->feeds[0].aim = EV_AIM_DIRECTION;
    d->feeds[0].aim_direction = ev_vec3_make(0.0, 0.0, 1.0);
}
static void short_table(ev_design *d)
{
    d->feeds[0].pattern = EV_PATTERN_TABLE;
    d->feeds[0].table = disc_table(1.0);
}
static void low_offset(ev_design *d)
{
    d->main.offset = 0.4;
}
static void feed_close(ev_design *d)
{
    d->feeds[0].shift.z = -0.98 * d->main.focal_length;
}

static void test_every_problem_is_reached(void **state)
{
    (void)state;
    const struct {
        ev_problem_id id;
        ev_fixture fixture;
        spoil change;
        const char *parameter;
    } cases[] = {
        {EV_PROBLEM_NOT_POSITIVE, EV_FIXTURE_PRIME, no_diameter, "main.diameter"},
        {EV_PROBLEM_NOT_POSITIVE, EV_FIXTURE_PRIME, negative_exponent, "feeds.main.exponent"},
        {EV_PROBLEM_NOT_FINITE, EV_FIXTURE_PRIME, nan_frequency, "frequency"},
        {EV_PROBLEM_NOT_FINITE, EV_FIXTURE_PRIME, endless_focal_length, "main.focal_length"},
        {EV_PROBLEM_NOT_FINITE, EV_FIXTURE_OFFSET, nan_shift, "feeds.main.shift"},
        {EV_PROBLEM_DEPTH_WITH_OFFSET, EV_FIXTURE_OFFSET, deep_offset, "main.depth"},
        {EV_PROBLEM_SUB_SHAPE, EV_FIXTURE_GREGORIAN, ellipsoid_outside_itself, "sub.eccentricity"},
        {EV_PROBLEM_SUB_SHAPE, EV_FIXTURE_CASSEGRAIN, weak_magnification, "sub.magnification"},
        {EV_PROBLEM_SUB_IMPOSSIBLE, EV_FIXTURE_CASSEGRAIN, no_such_sub, NULL},
        {EV_PROBLEM_SUB_LARGER_THAN_DISH, EV_FIXTURE_CASSEGRAIN, vast_sub, NULL},
        {EV_PROBLEM_NOT_FINITE, EV_FIXTURE_GREGORIAN, nan_sub_tilt, "sub.shift"},
        {EV_PROBLEM_SUB_OVERSIZE, EV_FIXTURE_GREGORIAN, wide_as_the_ellipsoid, "sub.oversize"},
        {EV_PROBLEM_SUB_TILT_ON_SYMMETRIC, EV_FIXTURE_CASSEGRAIN, tilted_symmetric,
         "sub.axis_tilt"},
        {EV_PROBLEM_SUB_DIAMETER_ON_OFFSET, EV_FIXTURE_OFFSET_GREGORIAN, offset_by_diameter,
         "sub.diameter"},
        {EV_PROBLEM_HOLE_TOO_LARGE, EV_FIXTURE_OFFSET, all_hole, "main.hole"},
        {EV_PROBLEM_FEED_IN_MIRROR, EV_FIXTURE_PRIME, feed_behind_dish, "feeds.main.shift"},
        {EV_PROBLEM_FEED_IN_MIRROR, EV_FIXTURE_CASSEGRAIN, feed_behind_sub, "feeds.main.shift"},
        {EV_PROBLEM_FEED_AIM, EV_FIXTURE_PRIME, aimless, "feeds.main.aim"},
        {EV_PROBLEM_FEED_WITHOUT_TABLE, EV_FIXTURE_PRIME, without_table, "feeds.main.table"},
        {EV_PROBLEM_TAPER_IMPOSSIBLE, EV_FIXTURE_PRIME, very_deep, "feeds.main.edge_taper"},
        {EV_PROBLEM_TOWARD, EV_FIXTURE_PRIME, toward_behind, "feeds.main.toward"},
        {EV_PROBLEM_STRUT_RADII, EV_FIXTURE_PRIME, inside_out_strut, "struts.legs.from"},
        {EV_PROBLEM_NO_FEED, EV_FIXTURE_PRIME, feedless, "feeds"},
        {EV_PROBLEM_DISH_SMALL, EV_FIXTURE_PRIME, low_frequency, "main.diameter"},
        {EV_PROBLEM_SUB_SMALL, EV_FIXTURE_CASSEGRAIN, low_frequency, NULL},
        {EV_PROBLEM_HOLE_IN_CONE, EV_FIXTURE_CASSEGRAIN, wide_hole, "main.hole"},
        {EV_PROBLEM_FEED_MISSES, EV_FIXTURE_PRIME, looks_away, "feeds.main.aim"},
        {EV_PROBLEM_TABLE_ENDS, EV_FIXTURE_PRIME, short_table, "feeds.main.table"},
        {EV_PROBLEM_CLEARANCE, EV_FIXTURE_OFFSET, low_offset, "main.offset"},
        {EV_PROBLEM_FEED_NEAR, EV_FIXTURE_PRIME, feed_close, "feeds.main.shift"},
    };
    bool reached[EV_PROBLEM_COUNT] = {false};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_problem problem;
        if (!finds(cases[i].fixture, cases[i].change, cases[i].id, cases[i].parameter, &problem))
            fail_msg("case %d: problem %d is not found", (int)i, cases[i].id);
        reached[cases[i].id] = true;
        assert_false(finds(cases[i].fixture, NULL, cases[i].id, NULL, &problem));
    }
    for (int id = EV_PROBLEM_NONE + 1; id < EV_PROBLEM_COUNT; id++)
        if (!reached[id])
            fail_msg("problem %d is never reached", id);
}

/* What it says in numbers. */
static void test_values(void **state)
{
    (void)state;
    ev_problem found;
    assert_true(finds(EV_FIXTURE_PRIME, low_frequency, EV_PROBLEM_DISH_SMALL, NULL, &found));
    assert_ratio(found.value[0], 9.0, 1e-12);
    assert_true(finds(EV_FIXTURE_OFFSET, all_hole, EV_PROBLEM_HOLE_TOO_LARGE, NULL, &found));
    assert_ratio(found.value[0], 1.2, 1e-12);
    assert_true(finds(EV_FIXTURE_PRIME, feed_behind_dish, EV_PROBLEM_FEED_IN_MIRROR, NULL, &found));
    assert_ratio(found.value[0], 0.05, 1e-9);
    assert_true(finds(EV_FIXTURE_PRIME, inside_out_strut, EV_PROBLEM_STRUT_RADII, NULL, &found));
    assert_ratio(found.value[0], 2.0 * found.value[1], 1e-12);
    assert_true(finds(EV_FIXTURE_PRIME, short_table, EV_PROBLEM_TABLE_ENDS, NULL, &found));
    assert_ratio(found.value[0], 1.0, 1e-12);
    assert_true(finds(EV_FIXTURE_OFFSET, low_offset, EV_PROBLEM_CLEARANCE, NULL, &found));
    assert_ratio(found.value[0], 0.2, 1e-12);
}

/* Sound designs have no problems, worn ones no errors; errors come first; room is respected. */
static void test_sound_designs(void **state)
{
    (void)state;
    ev_problem problems[CAPACITY];
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        assert_int_equal(ev_design_check(&design, problems, CAPACITY), 0);
        design = ev_fixture_worn_design((ev_fixture)fixture);
        int count = ev_design_check(&design, problems, CAPACITY);
        for (int i = 0; i < count; i++)
            assert_false(ev_problem_is_error(problems[i].id));
    }
    ev_design bad = ev_fixture_design(EV_FIXTURE_PRIME);
    bad.feeds[0].toward_x = 2.0;
    bad.feeds[0].shift.x = NAN;
    inside_out_strut(&bad);
    assert_int_equal(ev_design_check(&bad, problems, CAPACITY), 3);
    assert_int_equal(ev_design_check(&bad, problems, 2), 2);
    assert_int_equal(ev_design_check(&bad, problems, 0), 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_problem_is_reached),
        cmocka_unit_test(test_values),
        cmocka_unit_test(test_sound_designs),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
