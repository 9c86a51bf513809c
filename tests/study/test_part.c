/* Parts and their axes: directions, moving and reading back, and the best place found. */
#include "check.h"
#include "fixture.h"

#include "study/part.h"

static const bool all_axes[EV_AXIS_COUNT] = {true, true, true};

static ev_antenna build(const ev_design *design)
{
    ev_antenna antenna;
    ev_fixture_build(design, &antenna);
    return antenna;
}

static void test_words(void **state)
{
    (void)state;
    assert_string_equal(ev_part_word(EV_PART_FEED), "feed");
    assert_string_equal(ev_part_word(EV_PART_SUB), "sub");
    assert_string_equal(ev_axis_word(EV_AXIS_OUT), "out");
    assert_string_equal(ev_axis_word(EV_AXIS_UP), "up");
    assert_string_equal(ev_axis_word(EV_AXIS_ACROSS), "across");
}

/* Unit and square to one another; out is away from what the feed lights, up leans to +x, across to
 * +y. */
static void test_directions(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int part = 0; part < 2; part++) {
            ev_design design = ev_fixture_design((ev_fixture)fixture);
            ev_antenna antenna = build(&design);
            ev_vec3 d[EV_AXIS_COUNT];
            for (int i = 0; i < EV_AXIS_COUNT; i++)
                d[i] = ev_part_axis_direction(&antenna, (ev_part)part, 0, (ev_part_axis)i);
            for (int i = 0; i < EV_AXIS_COUNT; i++)
                for (int k = 0; k < EV_AXIS_COUNT; k++)
                    assert_near(ev_vec3_dot(d[i], d[k]), i == k ? 1.0 : 0.0, 1e-12);
            assert_true(d[EV_AXIS_UP].x > 0.5 && d[EV_AXIS_ACROSS].y > 0.5);
            if (part == EV_PART_FEED)
                assert_near(ev_vec3_dot(d[EV_AXIS_OUT], antenna.feeds[0].axis), -1.0, 1e-12);
            else
                assert_near(d[EV_AXIS_OUT].z, 1.0, 1e-12);
        }
}

/* What is moved along an axis reads back on that axis and on no other, also with a feed tilted. */
static void test_moving_and_reading_back(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int part = 0; part < 2; part++)
            for (int axis = 0; axis < EV_AXIS_COUNT; axis++) {
                ev_design design = ev_fixture_worn_design((ev_fixture)fixture), moved = design;
                if (part == EV_PART_SUB && !design.sub.present)
                    continue;
                ev_antenna before = build(&design);
                ev_part_move(&moved, &before, (ev_part)part, 0, (ev_part_axis)axis, 0.003);
                ev_antenna after = build(&moved);
                for (int i = 0; i < EV_AXIS_COUNT; i++) {
                    double was = ev_part_place(&design, &before, (ev_part)part, 0, (ev_part_axis)i);
                    double is = ev_part_place(&moved, &after, (ev_part)part, 0, (ev_part_axis)i);
                    assert_near(is - was, i == axis ? 0.003 : 0.0, 1e-12);
                }
            }
}

static double gain_of(const ev_design *design)
{
    ev_antenna antenna = build(design);
    return ev_axis_gain_dbi(&antenna, 0);
}

static void test_gain_at_is_the_moved_designs(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture), moved = design;
        ev_antenna antenna = build(&design);
        const double by[EV_AXIS_COUNT] = {0.002, -0.001, 0.003}, none[EV_AXIS_COUNT] = {0};
        for (int i = 0; i < EV_AXIS_COUNT; i++)
            ev_part_move(&moved, &antenna, EV_PART_FEED, 0, (ev_part_axis)i, by[i]);
        double at = ev_part_gain_at(&design, design.frequencies[0], EV_PART_FEED, 0, by);
        assert_near(at, gain_of(&moved), 1e-12);
        at = ev_part_gain_at(&design, design.frequencies[0], EV_PART_FEED, 0, none);
        assert_near(at, gain_of(&design), 1e-12);
    }
}

/* A known displacement is what the best place undoes, to what 0.005 dB cannot tell. */
static void test_best_place_undoes_a_displacement(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int part = 0; part < 2; part++) {
            ev_design design = ev_fixture_design((ev_fixture)fixture), off = design;
            if (part == EV_PART_SUB && !design.sub.present)
                continue;
            ev_antenna antenna = build(&design);
            double wave = antenna.wavelength, clean = gain_of(&design);
            const double by[EV_AXIS_COUNT] = {0.4 * wave, -0.3 * wave, 0.25 * wave};
            for (int i = 0; i < EV_AXIS_COUNT; i++)
                ev_part_move(&off, &antenna, (ev_part)part, 0, (ev_part_axis)i, by[i]);
            ev_best best = ev_part_best(&off, off.frequencies[0], (ev_part)part, 0, all_axes);
            assert_near(best.now_dbi, gain_of(&off), 1e-9);
            assert_true(best.best_dbi >= clean - 0.005);
            for (int i = 0; i < EV_AXIS_COUNT; i++) {
                double dull = sqrt(2.0 * 0.02 / fmax(best.bend[i], 1e-9));
                assert_near(best.by[i], -by[i], dull + 1e-4 * wave);
            }
        }
}

/* Axes that are not free stay. */
static void test_only_free_axes_move(void **state)
{
    (void)state;
    const bool only_out[EV_AXIS_COUNT] = {true, false, false};
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_OFFSET);
    ev_best best = ev_part_best(&design, design.frequencies[0], EV_PART_FEED, 0, only_out);
    assert_near(best.by[EV_AXIS_UP], 0.0, 0.0);
    assert_near(best.by[EV_AXIS_ACROSS], 0.0, 0.0);
    assert_true(best.best_dbi >= best.now_dbi);
}

/* No place on a grid about the best one is better by more than a hundredth of a decibel. */
static void test_nothing_beats_the_best_place(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        double wave = EV_LIGHT_SPEED / design.frequencies[0];
        ev_best best = ev_part_best(&design, design.frequencies[0], EV_PART_FEED, 0, all_axes);
        for (int k = 0; k < 125; k++) {
            const double by[EV_AXIS_COUNT] = {best.by[0] + 0.5 * wave * (k % 5 - 2),
                                              best.by[1] + 0.2 * wave * (k / 5 % 5 - 2),
                                              best.by[2] + 0.2 * wave * (k / 25 - 2)};
            double gain = ev_part_gain_at(&design, design.frequencies[0], EV_PART_FEED, 0, by);
            assert_true(gain <= best.best_dbi + 0.01);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_words),
        cmocka_unit_test(test_directions),
        cmocka_unit_test(test_moving_and_reading_back),
        cmocka_unit_test(test_gain_at_is_the_moved_designs),
        cmocka_unit_test(test_best_place_undoes_a_displacement),
        cmocka_unit_test(test_only_free_axes_move),
        cmocka_unit_test(test_nothing_beats_the_best_place),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
