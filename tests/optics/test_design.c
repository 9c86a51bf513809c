/* Choice groups: the member given holds, the others follow, and resolving twice changes nothing. */
#include "check.h"
#include "fixture.h"
#include "random_antenna.h"

#include <string.h>

static void test_focal_length_three_ways(void **state)
{
    (void)state;
    for (int choice = 0; choice < 3; choice++) {
        ev_design design = ev_default_design();
        ev_main_design *main = &design.main;
        *main = (ev_main_design){.diameter = 3.0, .focal_given = (ev_focal_choice)choice};
        if (choice == EV_GIVEN_FOCAL_LENGTH)
            main->focal_length = 1.2;
        else if (choice == EV_GIVEN_F_OVER_D)
            main->f_over_d = 0.4;
        else
            main->depth = 9.0 / (16.0 * 1.2);
        ev_design_resolve(&design);
        assert_ratio(main->focal_length, 1.2, 1e-14);
        assert_ratio(main->f_over_d, 0.4, 1e-14);
        assert_ratio(main->depth, 0.46875, 1e-14);
        main->diameter = 6.0; /* what was given stays, whatever else changes */
        ev_design_resolve(&design);
        const double kept[] = {main->focal_length / 1.2, main->f_over_d / 0.4,
                               main->depth / 0.46875};
        assert_ratio(kept[choice], 1.0, 1e-14);
        assert_true(fabs(kept[(choice + 1) % 3] - 1.0) > 0.1);
    }
}

static void test_offset_and_clearance(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    assert_ratio(design.main.clearance, 0.06, 1e-12);
    design.main.offset_given = EV_GIVEN_CLEARANCE;
    design.main.clearance = 0.10;
    ev_design_resolve(&design);
    assert_ratio(design.main.offset, 0.70, 1e-14);
}

/* Two of shape, interfocal distance and diameter give the third: all ways lead to one antenna. */
static void test_two_of_three(void **state)
{
    (void)state;
    const ev_fixture fixtures[] = {EV_FIXTURE_CASSEGRAIN, EV_FIXTURE_GREGORIAN};
    for (int i = 0; i < 2; i++)
        for (int derived = 0; derived < 3; derived++)
            for (int shape = 0; shape < 2; shape++) {
                ev_design design = ev_fixture_design(fixtures[i]), other = design;
                other.sub.derived = (ev_sub_derived)derived;
                other.sub.shape_given = (ev_shape_choice)shape;
                double *gone = derived == EV_DERIVED_DIAMETER     ? &other.sub.diameter
                               : derived == EV_DERIVED_INTERFOCAL ? &other.sub.interfocal
                                                                  : &other.sub.magnification;
                *gone = NAN;
                if (shape == EV_GIVEN_MAGNIFICATION || derived == EV_DERIVED_SHAPE)
                    other.sub.eccentricity = NAN;
                else
                    other.sub.magnification = NAN;
                ev_design_resolve(&other);
                assert_ratio(other.sub.diameter, design.sub.diameter, 1e-12);
                assert_ratio(other.sub.interfocal, design.sub.interfocal, 1e-12);
                assert_ratio(other.sub.magnification, design.sub.magnification, 1e-12);
                assert_ratio(other.sub.eccentricity, design.sub.eccentricity, 1e-12);
            }
}

static void test_taper_and_exponent(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        ev_feed_design *feed = &design.feeds[0];
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        double level = pow(cos(antenna.feeds[0].half_extent), feed->exponent);
        assert_ratio(feed->edge_taper, -10.0 * log10(level), 1e-12);
        assert_ratio(antenna.feeds[0].edge_taper_db, feed->edge_taper, 1e-9);
        feed->taper_given = EV_GIVEN_EDGE_TAPER;
        feed->edge_taper = 7.0;
        ev_design_resolve(&design);
        assert_ratio(-10.0 * feed->exponent * log10(cos(antenna.feeds[0].half_extent)), 7.0, 1e-12);
    }
}

static void test_resolving_twice_changes_nothing(void **state)
{
    (void)state;
    ev_random random = ev_random_seeded(12);
    for (int i = 0; i < 600; i++) {
        ev_design once = ev_random_design(&random, (ev_layout_kind)(i % 6), NULL), twice = once;
        ev_design_resolve(&twice);
        assert_memory_equal(&once, &twice, sizeof once);
    }
}

static void test_impossible_numbers_leave_nan(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_CASSEGRAIN);
    design.sub.magnification = 0.5;
    ev_design_resolve(&design);
    assert_true(isnan(design.sub.eccentricity) && isnan(design.sub.interfocal));
    design = ev_fixture_design(EV_FIXTURE_GREGORIAN);
    design.sub.interfocal = -1.0;
    ev_design_resolve(&design);
    assert_true(isnan(design.sub.diameter));
}

static void test_layout_names(void **state)
{
    (void)state;
    const char *const words[] = {"prime_focus",       "offset",          "cassegrain", "gregorian",
                                 "offset_cassegrain", "offset_gregorian"};
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        assert_string_equal(ev_layout_name(ev_design_layout(&design)), words[fixture]);
        assert_int_equal(antenna.layout.kind, ev_design_layout(&design));
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_focal_length_three_ways),
        cmocka_unit_test(test_offset_and_clearance),
        cmocka_unit_test(test_two_of_three),
        cmocka_unit_test(test_taper_and_exponent),
        cmocka_unit_test(test_resolving_twice_changes_nothing),
        cmocka_unit_test(test_impossible_numbers_leave_nan),
        cmocka_unit_test(test_layout_names),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
