/* Feed patterns: normalisation, shares and their inverse, tables between their entries. */
#include "check.h"

#include "optics/pattern.h"

#include <gsl/gsl_integration.h>
#include <stdlib.h>

static const double degree = EV_PI / 180.0;

static ev_pattern cosine(double exponent)
{
    ev_feed_design feed = {.pattern = EV_PATTERN_COS_POWER, .exponent = exponent};
    return ev_pattern_make(&feed, 1.0);
}

static ev_pattern gaussian(double taper, double half_extent)
{
    ev_feed_design feed = {.pattern = EV_PATTERN_GAUSSIAN, .edge_taper = taper};
    return ev_pattern_make(&feed, half_extent);
}

/* E plane cos^2, H plane cos^3 (power), every `step` degrees from `first` to 80, with a phase. */
static ev_pattern_table *make_table(double first, double step)
{
    ev_pattern_table *table = calloc(1, sizeof *table);
    for (double theta = first; theta < 80.0 + 1e-9; theta += step) {
        int i = table->count++;
        table->theta[i] = theta * degree;
        table->e_db[i] = 20.0 * log10(cos(theta * degree));
        table->h_db[i] = 30.0 * log10(cos(theta * degree));
        table->phase[i] = 0.3 * pow(theta * degree, 2.0);
    }
    table->has_phase = true;
    ev_pattern_table_prepare(table);
    return table;
}

static ev_pattern tabled(const ev_pattern_table *table)
{
    ev_feed_design feed = {.pattern = EV_PATTERN_TABLE, .table = table};
    return ev_pattern_make(&feed, 1.0);
}

static double ring(double theta, void *context)
{
    ev_pattern_level level = ev_pattern_at(context, theta);
    return 0.25 * (level.e + level.h) * sin(theta);
}

/* Share of the sphere's power within theta, by adaptive quadrature. */
static double share(ev_pattern *pattern, double theta)
{
    gsl_integration_workspace *work = gsl_integration_workspace_alloc(2000);
    gsl_function function = {ring, pattern};
    double knots[] = {0.0, 0.05 * theta, 0.3 * theta, theta}, sum = 0.0, part, error;
    for (int i = 0; i < 3; i++) {
        gsl_integration_qag(&function, knots[i], knots[i + 1], 1e-10, 1e-9, 2000, GSL_INTEG_GAUSS31,
                            work, &part, &error);
        sum += part;
    }
    gsl_integration_workspace_free(work);
    return sum;
}

static void test_mean_over_the_sphere_is_one(void **state)
{
    (void)state;
    ev_pattern_table *table = make_table(0.0, 2.0), *late = make_table(6.0, 5.0);
    ev_pattern patterns[] = {cosine(0.0),         cosine(0.5),          cosine(2.0),
                             cosine(40.0),        cosine(2000.0),       gaussian(3.0, 1.4),
                             gaussian(12.0, 0.6), gaussian(15.0, 0.04), tabled(table),
                             tabled(late)};
    for (size_t i = 0; i < sizeof patterns / sizeof patterns[0]; i++)
        assert_near(share(&patterns[i], patterns[i].end), 1.0, 5e-9);
    free(table);
    free(late);
}

static void test_share_and_its_inverse(void **state)
{
    (void)state;
    ev_pattern_table *table = make_table(0.0, 3.0);
    ev_pattern patterns[] = {cosine(0.0), cosine(3.3), cosine(150.0), gaussian(11.0, 0.5),
                             tabled(table)};
    for (size_t i = 0; i < sizeof patterns / sizeof patterns[0]; i++) {
        ev_pattern *pattern = &patterns[i];
        for (double part = 0.05; part < 1.0; part += 0.1) {
            double theta = part * fmin(pattern->end, 1.5);
            double found = ev_pattern_share_within(pattern, theta);
            assert_near(found, share(pattern, theta), 5e-9);
            if (found < 1.0 - 1e-9)
                assert_near(ev_pattern_angle_of_share(pattern, found), theta, 1e-6);
        }
        assert_near(ev_pattern_share_within(pattern, EV_PI), 1.0, 1e-12);
        assert_near(ev_pattern_share_within(pattern, 0.0), 0.0, 1e-15);
    }
    free(table);
}

static void test_taper_and_exponent(void **state)
{
    (void)state;
    for (double angle = 0.1; angle < 1.5; angle += 0.2)
        for (double taper = 1.0; taper < 25.0; taper += 4.0) {
            ev_pattern pattern = cosine(ev_pattern_exponent_from_taper(taper, angle));
            double level = ev_pattern_at(&pattern, angle).e / ev_pattern_at(&pattern, 0.0).e;
            assert_ratio(-10.0 * log10(level), taper, 1e-9);
            assert_ratio(ev_pattern_taper_from_exponent(pattern.exponent, angle), taper, 1e-9);
        }
    assert_true(isnan(ev_pattern_exponent_from_taper(10.0, 1.6)));
    ev_pattern bell = gaussian(9.0, 0.7);
    assert_ratio(ev_pattern_at(&bell, 0.7).h / ev_pattern_at(&bell, 0.0).h, pow(10.0, -0.9), 1e-9);
}

/* No power behind a cos^n feed, nor beyond a table's last angle. */
static void test_ends(void **state)
{
    (void)state;
    ev_pattern_table *table = make_table(0.0, 2.0);
    ev_pattern front = cosine(0.0), cut = tabled(table);
    assert_ratio(ev_pattern_at(&front, 1.57).e, 2.0, 1e-12);
    assert_near(ev_pattern_at(&front, 1.58).e, 0.0, 0.0);
    assert_true(ev_pattern_at(&cut, 80.0 * degree - 1e-9).e > 0.0);
    assert_near(ev_pattern_at(&cut, 80.0 * degree + 1e-9).e, 0.0, 0.0);
    assert_near(ev_pattern_at(&cut, NAN).e, 0.0, 0.0);
    free(table);
}

static double in_db(const ev_pattern *pattern, double theta, bool h_plane)
{
    ev_pattern_level level = ev_pattern_at(pattern, theta), axis = ev_pattern_at(pattern, 0.0);
    return 10.0 * log10((h_plane ? level.h : level.e) / axis.e);
}

/* Through every entry, close to the smooth pattern between them, and E, H and phase apart. */
static void test_table_follows_its_entries(void **state)
{
    (void)state;
    ev_pattern_table *table = make_table(0.0, 5.0);
    ev_pattern pattern = tabled(table);
    for (int i = 0; i < table->count; i++) {
        assert_near(in_db(&pattern, table->theta[i], false), table->e_db[i], 1e-9);
        assert_near(in_db(&pattern, table->theta[i], true), table->h_db[i], 1e-9);
        assert_near(ev_pattern_at(&pattern, table->theta[i]).phase, table->phase[i], 1e-12);
    }
    for (double theta = 0.01; theta < 1.2; theta += 0.01) {
        assert_near(in_db(&pattern, theta, false), 20.0 * log10(cos(theta)), 0.01);
        assert_near(in_db(&pattern, theta, true), 30.0 * log10(cos(theta)), 0.015);
        assert_near(ev_pattern_at(&pattern, theta).phase, 0.3 * theta * theta, 2e-3);
    }
    free(table);
}

/* Between entries that fall, the curve falls: no overshoot beside a step. */
static void test_table_does_not_overshoot(void **state)
{
    (void)state;
    ev_pattern_table *table = calloc(1, sizeof *table);
    const double levels[] = {0.0, -0.1, -0.1, -20.0, -20.0, -20.5};
    table->count = 6;
    for (int i = 0; i < 6; i++) {
        table->theta[i] = 10.0 * i * degree;
        table->e_db[i] = table->h_db[i] = levels[i];
    }
    ev_pattern_table_prepare(table);
    ev_pattern pattern = tabled(table);
    double last = 1e-9;
    for (double theta = 0.0; theta <= 50.0 * degree; theta += 0.1 * degree) {
        double level = in_db(&pattern, theta, false);
        assert_true(level <= last + 1e-9 && level >= -20.5 - 1e-9);
        last = level;
    }
    free(table);
}

/* A gentle fall beside a steep one: the steep one's slope does not leak into it. */
static void test_table_beside_a_cliff(void **state)
{
    (void)state;
    ev_pattern_table *table = calloc(1, sizeof *table);
    const double levels[] = {0.0, -0.5, -0.6, -25.0, -25.1};
    table->count = 5;
    for (int i = 0; i < 5; i++) {
        table->theta[i] = 10.0 * i * degree;
        table->e_db[i] = table->h_db[i] = levels[i];
    }
    ev_pattern_table_prepare(table);
    ev_pattern pattern = tabled(table);
    for (int i = 0; i + 1 < 5; i++)
        for (double part = 0.01; part < 1.0; part += 0.01) {
            double level = in_db(&pattern, (10.0 * i + 10.0 * part) * degree, false);
            assert_true(level <= levels[i] + 1e-9 && level >= levels[i + 1] - 1e-9);
        }
    free(table);
}

/* Entries at any spacing: a level that falls with the square of the angle is followed between them.
 */
static void test_uneven_spacing(void **state)
{
    (void)state;
    ev_pattern_table *table = calloc(1, sizeof *table);
    const double angles[] = {0.0, 4.0, 6.0, 14.0, 16.0, 26.0, 29.0, 40.0};
    table->count = 8;
    for (int i = 0; i < 8; i++) {
        table->theta[i] = angles[i] * degree;
        table->e_db[i] = -0.01 * angles[i] * angles[i];
        table->h_db[i] = -0.02 * angles[i] * angles[i];
    }
    ev_pattern_table_prepare(table);
    ev_pattern pattern = tabled(table);
    for (double angle = 0.0; angle <= 29.0; angle += 0.5) {
        assert_near(in_db(&pattern, angle * degree, false), -0.01 * angle * angle, 1e-9);
        assert_near(in_db(&pattern, angle * degree, true), -0.02 * angle * angle, 1e-9);
    }
    free(table);
}

/* A table that starts off the axis holds its first level inward; one entry is a disc. */
static void test_odd_tables(void **state)
{
    (void)state;
    ev_pattern_table *late = make_table(10.0, 5.0), *one = calloc(1, sizeof *one);
    ev_pattern pattern = tabled(late);
    assert_ratio(ev_pattern_at(&pattern, 0.0).e, ev_pattern_at(&pattern, 10.0 * degree).e, 1e-12);
    one->count = 1;
    one->theta[0] = 0.5;
    ev_pattern_table_prepare(one);
    ev_pattern disc = tabled(one);
    assert_ratio(ev_pattern_at(&disc, 0.3).e, 2.0 / (1.0 - cos(0.5)), 1e-9);
    free(late);
    free(one);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_mean_over_the_sphere_is_one),
        cmocka_unit_test(test_share_and_its_inverse),
        cmocka_unit_test(test_taper_and_exponent),
        cmocka_unit_test(test_ends),
        cmocka_unit_test(test_table_follows_its_entries),
        cmocka_unit_test(test_table_does_not_overshoot),
        cmocka_unit_test(test_table_beside_a_cliff),
        cmocka_unit_test(test_uneven_spacing),
        cmocka_unit_test(test_odd_tables),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
