/* Level lines: a circle comes out round, closed and once; lines that leave the grid come out open
 * and whole; a saddle keeps to its mean; NaN ends a line. */
#include "draw/contour.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

enum { SIDE = 41, LINE_CAPACITY = 32 };

typedef struct seen_lines {
    int count, level[LINE_CAPACITY], points[LINE_CAPACITY];
    bool closed[LINE_CAPACITY];
    double length[LINE_CAPACITY], worst; /* worst |value - level| of a point */
    double (*value)(double column, double row);
    const double *levels;
} seen_lines;

static double circle_value(double column, double row)
{
    return hypot(column - 20.3, row - 19.6);
}

static double slope_value(double column, double row)
{
    return 2.0 * column + row;
}

static void see_line(void *context, int level, const double (*points)[2], int count, bool closed)
{
    seen_lines *seen = context;
    assert_in_range(seen->count, 0, LINE_CAPACITY - 1);
    double length = 0.0;
    for (int i = 0; i < count; ++i) {
        if (seen->value)
            seen->worst = fmax(seen->worst,
                               fabs(seen->value(points[i][0], points[i][1]) - seen->levels[level]));
        if (i > 0)
            length += hypot(points[i][0] - points[i - 1][0], points[i][1] - points[i - 1][1]);
    }
    seen->level[seen->count] = level;
    seen->points[seen->count] = count;
    seen->closed[seen->count] = closed;
    seen->length[seen->count++] = length;
}

static seen_lines trace(double (*value)(double, double), const double *levels, int level_count)
{
    static double field[SIDE][SIDE];
    for (int r = 0; r < SIDE; ++r)
        for (int c = 0; c < SIDE; ++c)
            field[r][c] = value(c, r);
    seen_lines seen = {.value = value, .levels = levels};
    ev_contour(&field[0][0], SIDE, SIDE, levels, level_count, see_line, &seen);
    return seen;
}

static void circles_are_round_and_closed(void **state)
{
    (void)state;
    const double levels[] = {4.0, 9.5, 15.0};
    seen_lines seen = trace(circle_value, levels, 3);
    assert_int_equal(seen.count, 3);
    for (int i = 0; i < 3; ++i) {
        assert_int_equal(seen.level[i], i);
        assert_true(seen.closed[i]);
        double round = 2.0 * 3.14159265358979 * levels[i];
        assert_true(fabs(seen.length[i] - round) < 0.05 * round);
    }
    assert_true(seen.worst < 0.05);
}

static void lines_that_leave_are_open_and_whole(void **state)
{
    (void)state;
    const double levels[] = {20.5, 60.5, 100.5};
    seen_lines seen = trace(slope_value, levels, 3);
    assert_int_equal(seen.count, 3);
    for (int i = 0; i < 3; ++i)
        assert_false(seen.closed[i]);
    /* 2c + r = 60.5 crosses all forty rows. */
    assert_true(fabs(seen.length[1] - 40.0 * sqrt(1.25)) < 1e-9);
    assert_true(seen.worst < 1e-9);
}

static void saddle_keeps_to_its_mean(void **state)
{
    (void)state;
    /* Corners 1 0 / 0 1: level 0.4 is under the mean, so the high corners join and each low one is
     * cut off; two lines of two points. At 0.6 it is the other way; two lines again. */
    const double field[4] = {1.0, 0.0, 0.0, 1.0};
    const double levels[] = {0.4, 0.6};
    seen_lines seen = {.levels = levels};
    ev_contour(field, 2, 2, levels, 2, see_line, &seen);
    assert_int_equal(seen.count, 4);
    double cut = hypot(0.4, 0.4);
    for (int i = 0; i < 4; ++i) {
        assert_int_equal(seen.points[i], 2);
        assert_true(fabs(seen.length[i] - cut) < 1e-12);
    }
}

static void nan_ends_a_line(void **state)
{
    (void)state;
    double field[5 * 5];
    for (int i = 0; i < 25; ++i)
        field[i] = i % 5;
    field[2 * 5 + 2] = NAN;
    const double level = 1.5;
    seen_lines seen = {.levels = &level};
    ev_contour(field, 5, 5, &level, 1, see_line, &seen);
    assert_int_equal(seen.count, 2); /* above the gap and below it */
    for (int i = 0; i < 2; ++i)
        assert_true(fabs(seen.length[i] - 1.0) < 1e-12 && !seen.closed[i]);
}

static void odd_grids_are_refused(void **state)
{
    (void)state;
    const double field[4] = {0.0, 1.0, 0.0, 1.0}, level = 0.5;
    seen_lines seen = {.levels = &level};
    ev_contour(field, 1, 4, &level, 1, see_line, &seen);
    ev_contour(field, 4, 1, &level, 1, see_line, &seen);
    ev_contour(field, EV_CONTOUR_SIDE + 1, 2, &level, 1, see_line, &seen);
    assert_int_equal(seen.count, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(circles_are_round_and_closed),
        cmocka_unit_test(lines_that_leave_are_open_and_whole),
        cmocka_unit_test(saddle_keeps_to_its_mean),
        cmocka_unit_test(nan_ends_a_line),
        cmocka_unit_test(odd_grids_are_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
