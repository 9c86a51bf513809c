/* The verdict: a known fault is named, its opposite is the move, and what the move is said to win
 * is what the budget gains. */
#include "check.h"
#include "fixture.h"

#include "study/verdict.h"

#include <string.h>

static ev_verdict judge(const ev_design *design)
{
    ev_verdict verdict;
    ev_verdict_find(design, design->frequencies[0], 0, &verdict);
    return verdict;
}

static double gain_of(const ev_design *design)
{
    return ev_fixture_budget(design).gain_on_axis_dbi;
}

static void displace(ev_design *design, ev_part part, ev_part_axis axis, double by)
{
    ev_antenna antenna;
    ev_fixture_build(design, &antenna);
    ev_part_move(design, &antenna, part, 0, axis, by);
}

static void follow(ev_design *design, const ev_verdict *verdict)
{
    for (int i = 0; i < verdict->move_count; i++)
        displace(design, verdict->moves[i].part, verdict->moves[i].axis, verdict->moves[i].by);
}

static void test_words(void **state)
{
    (void)state;
    const char *const words[] = {"in_place", "feed_misplaced", "sub_misplaced", "turned",
                                 "as_meant", "struts",         "too_small",     "dark"};
    for (int id = 0; id <= EV_VERDICT_DARK; id++)
        assert_string_equal(ev_verdict_word((ev_verdict_id)id), words[id]);
}

static void test_in_place(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        ev_verdict verdict = judge(&design);
        assert_int_equal(verdict.id, EV_VERDICT_IN_PLACE);
        assert_int_equal(verdict.move_count, 0);
        assert_near(verdict.now_dbi, gain_of(&design), 1e-9);
        assert_near(verdict.after_dbi, verdict.now_dbi, 1e-9);
        assert_near(verdict.loss_db, 0.0, 0.0);
        assert_non_null(strstr(verdict.text, "in place"));
        assert_non_null(strstr(verdict.advice, "moving the feed wins nothing"));
    }
}

/* How far to displace a part along an axis for some tenths of a decibel. */
static double some_way(const ev_design *design, ev_part part, ev_part_axis axis)
{
    const double none[EV_AXIS_COUNT] = {0};
    double by[EV_AXIS_COUNT] = {0}, step = 0.02 * EV_LIGHT_SPEED / design->frequencies[0];
    double clean = ev_part_gain_at(design, design->frequencies[0], part, 0, none);
    for (; step < 10.0; step *= 1.3) {
        by[axis] = step;
        if (clean - ev_part_gain_at(design, design->frequencies[0], part, 0, by) > 0.5)
            break;
    }
    return step;
}

/* One part, one axis, one way: that axis comes first among the moves, and the other way. */
static void check_fault(ev_fixture fixture, ev_part part, ev_part_axis axis, double sign)
{
    ev_design design = ev_fixture_design(fixture);
    double by = sign * some_way(&design, part, axis), clean = gain_of(&design);
    displace(&design, part, axis, by);
    ev_verdict verdict = judge(&design);
    assert_int_equal(verdict.id,
                     part == EV_PART_FEED ? EV_VERDICT_FEED_MISPLACED : EV_VERDICT_SUB_MISPLACED);
    assert_true(verdict.move_count >= 1);
    assert_int_equal(verdict.moves[0].part, part);
    assert_int_equal(verdict.moves[0].axis, axis);
    assert_near(verdict.moves[0].by, -by, 0.3 * fabs(by));
    assert_near(verdict.now_dbi, gain_of(&design), 1e-9);
    double before = verdict.now_dbi;
    ev_design alone = design;
    displace(&alone, verdict.moves[0].part, verdict.moves[0].axis, verdict.moves[0].by);
    assert_near(verdict.moves[0].wins_db, gain_of(&alone) - before, 1e-9);
    follow(&design, &verdict);
    double after = gain_of(&design);
    assert_near(verdict.loss_db, after - before, 1e-9);
    assert_near(verdict.after_dbi, after, 1e-9);
    assert_near(after, clean, 0.05);
}

static void test_faults(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int part = 0; part < 2; part++)
            for (int axis = 0; axis < EV_AXIS_COUNT; axis++) {
                if (part == EV_PART_SUB && fixture < EV_FIXTURE_CASSEGRAIN)
                    continue;
                check_fault((ev_fixture)fixture, (ev_part)part, (ev_part_axis)axis, 1.0);
                check_fault((ev_fixture)fixture, (ev_part)part, (ev_part_axis)axis, -1.0);
            }
}

/* Worn antennas: all moves together win what is promised, each alone what is said of it, and the
 * order is by decibels. */
static void test_promises_are_kept(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture), mended = design;
        design.feeds[0].shift = ev_vec3_scale(2.0, design.feeds[0].shift);
        mended = design;
        ev_verdict verdict = judge(&design);
        follow(&mended, &verdict);
        assert_true(verdict.move_count > 0);
        assert_near(gain_of(&mended) - gain_of(&design), verdict.loss_db, 1e-9);
        for (int i = 0; i < verdict.move_count; i++) {
            ev_design alone = design;
            displace(&alone, verdict.moves[i].part, verdict.moves[i].axis, verdict.moves[i].by);
            assert_near(gain_of(&alone) - gain_of(&design), verdict.moves[i].wins_db, 1e-9);
            if (i > 0)
                assert_true(verdict.moves[i].wins_db <= verdict.moves[i - 1].wins_db);
        }
    }
}

/* The sentences name the side that the part is on, and the way back. */
static void test_sides(void **state)
{
    (void)state;
    const struct {
        ev_fixture fixture;
        ev_part part;
        ev_part_axis axis;
        double sign;
        const char *fault, *remedy;
    } cases[] = {
        {EV_FIXTURE_OFFSET, EV_PART_FEED, EV_AXIS_OUT, 1, "too far out", "toward the dish"},
        {EV_FIXTURE_OFFSET, EV_PART_FEED, EV_AXIS_OUT, -1, "too far in", "away from the dish"},
        {EV_FIXTURE_OFFSET, EV_PART_FEED, EV_AXIS_UP, 1, "too high", "down"},
        {EV_FIXTURE_OFFSET, EV_PART_FEED, EV_AXIS_ACROSS, 1, "too far left", "right"},
        {EV_FIXTURE_PRIME, EV_PART_FEED, EV_AXIS_ACROSS, -1, "too far right", "left"},
        {EV_FIXTURE_CASSEGRAIN, EV_PART_FEED, EV_AXIS_OUT, 1, "too far out",
         "toward the subreflector"},
        {EV_FIXTURE_CASSEGRAIN, EV_PART_SUB, EV_AXIS_OUT, 1, "too far from the dish",
         "toward the dish"},
        {EV_FIXTURE_GREGORIAN, EV_PART_SUB, EV_AXIS_OUT, -1, "too near the dish",
         "away from the dish"},
        {EV_FIXTURE_GREGORIAN, EV_PART_SUB, EV_AXIS_UP, -1, "too low", "up"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_design design = ev_fixture_design(cases[i].fixture);
        double by = some_way(&design, cases[i].part, cases[i].axis);
        displace(&design, cases[i].part, cases[i].axis, cases[i].sign * by);
        ev_verdict verdict = judge(&design);
        if (!strstr(verdict.text, cases[i].fault) || !strstr(verdict.advice, cases[i].remedy))
            fail_msg("case %d: \"%s %s\"", (int)i, verdict.text, verdict.advice);
    }
}

static void test_emphasis(void **state)
{
    (void)state;
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_OFFSET);
    ev_verdict verdict = judge(&design);
    int length = (int)strlen(verdict.text), last = 0;
    assert_true(verdict.bold_count > 0);
    for (int i = 0; i < verdict.bold_count; i++) {
        assert_in_range(verdict.bold[i][0], last, length);
        assert_in_range(verdict.bold[i][1], verdict.bold[i][0] + 1, length);
        last = verdict.bold[i][1];
    }
    assert_null(strstr(verdict.text, "**"));
    assert_null(strstr(verdict.advice, "**"));
}

/* Struts that cost more than 0.3 dB are named when nothing can be moved. */
static void test_struts(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_CASSEGRAIN), bare = design, thin;
    design.strut_count = 1;
    design.struts[0] = ev_default_strut();
    design.struts[0].width = 0.3;
    design.struts[0].from = 0.375;
    design.struts[0].to = 6.0;
    thin = design;
    thin.struts[0].width = 0.15;
    ev_verdict verdict = judge(&design);
    assert_int_equal(verdict.id, EV_VERDICT_STRUTS);
    assert_near(verdict.strut_db, gain_of(&bare) - gain_of(&design), 1e-9);
    assert_near(verdict.strut_half_db, gain_of(&bare) - gain_of(&thin), 1e-9);
    assert_near(verdict.strut_width, 0.3, 1e-12);
    assert_non_null(strstr(verdict.text, "300 mm"));
    design.struts[0].width = 0.01;
    assert_int_equal(judge(&design).id, EV_VERDICT_IN_PLACE);
}

/* A second feed with a beam of its own, where that beam wants it. */
static void test_as_meant(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    design.feeds[1] = design.feeds[0];
    strcpy(design.feeds[1].name, "east");
    design.feeds[1].shift.y = 0.055;
    design.feed_count = 2;
    ev_antenna antenna;
    ev_feed_budget budget;
    design.feeds[1].toward_peak = true;
    ev_fixture_build(&design, &antenna);
    ev_budget_compute_feed(&antenna, 1, &budget);
    design.feeds[1].toward_peak = false;
    design.feeds[1].toward_x = asin(budget.peak.x);
    design.feeds[1].toward_y = asin(budget.peak.y);
    const bool axes[EV_AXIS_COUNT] = {true, true, true};
    ev_best best = ev_part_best(&design, design.frequencies[0], EV_PART_FEED, 1, axes);
    for (int i = 0; i < EV_AXIS_COUNT; i++)
        ev_part_move(&design, &antenna, EV_PART_FEED, 1, (ev_part_axis)i, best.by[i]);
    ev_verdict verdict;
    ev_verdict_find(&design, design.frequencies[0], 1, &verdict);
    assert_int_equal(verdict.id, EV_VERDICT_AS_MEANT);
    ev_fixture_build(&design, &antenna);
    ev_budget_compute_feed(&antenna, 1, &budget);
    assert_near(verdict.below_first_db, gain_of(&design) - budget.gain_on_axis_dbi, 1e-9);
    assert_non_null(strstr(verdict.text, "\"east\""));
}

static void test_too_small_and_dark(void **state)
{
    (void)state;
    ev_design small = ev_fixture_design(EV_FIXTURE_PRIME), dark = small;
    small.frequencies[0] = 8.0 * EV_LIGHT_SPEED / 10.0;
    ev_verdict verdict = judge(&small);
    assert_int_equal(verdict.id, EV_VERDICT_TOO_SMALL);
    assert_near(verdict.wavelengths, 8.0, 1e-9);
    dark.feeds[0].aim = EV_AIM_DIRECTION;
    dark.feeds[0].aim_direction = ev_vec3_make(0.0, 0.0, 1.0);
    verdict = judge(&dark);
    assert_int_equal(verdict.id, EV_VERDICT_DARK);
    assert_non_null(strstr(verdict.text, "almost nothing"));
}

/* What remains in place is what the budget says of lighting, spill, shadows and surface. */
static void test_what_remains(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_GREGORIAN);
    design.main.surface_rms = 1e-3;
    ev_efficiency eta = ev_fixture_budget(&design).efficiency;
    ev_verdict verdict = judge(&design);
    assert_near(verdict.rest.lighting_db, -10.0 * log10(eta.taper), 1e-9);
    assert_near(verdict.rest.spill_db, -10.0 * log10(eta.spillover), 1e-9);
    assert_near(verdict.rest.shadow_db, -10.0 * log10(eta.blockage), 1e-9);
    assert_near(verdict.rest.surface_db, -10.0 * log10(eta.surface), 1e-9);
    assert_non_null(strstr(verdict.advice, "surface"));
}

/* A roll costs cos^2 of its angle and a tilt its own loss; neither is blamed on a move. */
static void test_turned(void **state)
{
    (void)state;
    const double roll = 0.3;
    ev_design design = ev_fixture_design((ev_fixture)0);
    design.feeds[0].polarization = EV_POLARIZATION_X;
    double straight = gain_of(&design);
    design.feeds[0].roll = roll;
    ev_verdict verdict = judge(&design);
    assert_int_equal(verdict.id, EV_VERDICT_TURNED);
    assert_int_equal(verdict.turn, EV_TURN_ROLL);
    assert_int_equal(verdict.move_count, 0);
    assert_near(verdict.after_dbi, straight, 1e-9);
    assert_near(verdict.loss_db, -20.0 * log10(cos(roll)), 1e-3);
    design.feeds[0].roll = 0.0;
    design.feeds[0].tilt_y = 0.25;
    verdict = judge(&design);
    assert_int_equal(verdict.id, EV_VERDICT_TURNED);
    assert_int_equal(verdict.turn, EV_TURN_FEED_TILT);
    assert_near(verdict.turn_by, 0.25, 1e-12);
    assert_non_null(strstr(verdict.text, "14.3 degrees off"));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_words),
        cmocka_unit_test(test_in_place),
        cmocka_unit_test(test_faults),
        cmocka_unit_test(test_promises_are_kept),
        cmocka_unit_test(test_sides),
        cmocka_unit_test(test_emphasis),
        cmocka_unit_test(test_struts),
        cmocka_unit_test(test_as_meant),
        cmocka_unit_test(test_too_small_and_dark),
        cmocka_unit_test(test_what_remains),
        cmocka_unit_test(test_turned),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
