/* What a page gets: the same numbers as asked for singly, the Front, the picture of the aperture,
 * the ledger's rows. */
#include "check.h"
#include "fixture.h"

#include "optics/aperture.h"
#include "study/ledger.h"
#include "study/study.h"

#include <stdlib.h>
#include <string.h>

static ev_study *study_of(const ev_design *design, ev_study_rays rays, int ray_count)
{
    ev_study *study = calloc(1, sizeof *study);
    ev_study_want want = {.verdict = true, .aperture = true, .rays = rays, .ray_count = ray_count};
    ev_study_compute(design, design->frequencies[0], want, study);
    return study;
}

static void test_same_numbers_as_singly(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_study *study = study_of(&design, EV_STUDY_RAYS_SPACE, 50);
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_verdict verdict;
        ev_verdict_find(&design, design.frequencies[0], 0, &verdict);
        assert_memory_equal(&study->budget.feeds[0], &budget, sizeof budget);
        assert_string_equal(study->verdict.text, verdict.text);
        assert_int_equal(study->ray_count, 50);
        free(study);
    }
}

/* The Front is the path error along x less its area mean, with nothing over the hole. */
static void test_front(void **state)
{
    (void)state;
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_OFFSET);
    ev_study *study = study_of(&design, EV_STUDY_RAYS_SECTION, 10);
    const ev_antenna *antenna = &study->antenna;
    int holes = 0;
    for (int i = 0; i < EV_STUDY_FRONT_COUNT; i++) {
        double x = study->front_x[i];
        if (isnan(study->front[i])) {
            holes++;
            assert_true(fabs(x - antenna->offset) < antenna->hole_radius);
            continue;
        }
        ev_sample sample = ev_aperture_sample(antenna, 0, x, 0.0);
        double error = ev_sample_error(&sample, study->budget.feeds[0].wanted);
        assert_near(study->front[i], error - study->budget.feeds[0].mean_path_error, 1e-12);
    }
    assert_true(holes > 0);
    assert_near(study->front_x[0], antenna->offset - antenna->radius, 1e-12);
    assert_near(study->front_x[EV_STUDY_FRONT_COUNT - 1], antenna->offset + antenna->radius, 1e-12);
    free(study);
}

/* Row 0 is at +x, column 0 at -y; the mean over the aperture is zero, the hole and the corners are
 * nothing. */
static void test_aperture_picture(void **state)
{
    (void)state;
    enum { SIDE = EV_STUDY_APERTURE_SIDE };
    ev_design design = ev_fixture_worn_design(EV_FIXTURE_GREGORIAN);
    ev_study *study = study_of(&design, EV_STUDY_RAYS_SECTION, 10);
    double sum = 0.0, squares = 0.0, radius = study->antenna.radius;
    int count = 0;
    for (int i = 0; i < SIDE * SIDE; i++) {
        double up = 1.0 - 2.0 * (i / SIDE) / (SIDE - 1), y = 2.0 * (i % SIDE) / (SIDE - 1) - 1.0;
        double r = hypot(up, y) * radius;
        if (r > radius || r < study->antenna.hole_radius)
            continue;
        ev_sample sample = ev_aperture_sample(&study->antenna, 0, up * radius, y * radius);
        double error = ev_sample_error(&sample, study->budget.feeds[0].wanted) -
                       study->budget.feeds[0].mean_path_error;
        assert_near(study->aperture[i], error, 1e-6 * fabs(error) + 1e-9);
        sum += study->aperture[i];
        squares += study->aperture[i] * study->aperture[i];
        count++;
    }
    double rms = study->budget.feeds[0].path_error.rms_area;
    assert_near(sum / count, 0.0, 0.02 * rms);
    assert_near(sqrt(squares / count), rms, 0.02 * rms);
    assert_true(isnan(study->aperture[0]));
    assert_true(isnan(study->aperture[(SIDE / 2) * SIDE + SIDE / 2]));
    free(study);
}

/* A feed that is not there is the first one; more rays than there is room for are not written. */
static void test_odd_wants(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_study *study = calloc(1, sizeof *study);
    ev_study_want want = {.feed = 5, .rays = EV_STUDY_RAYS_SPACE, .ray_count = 1000000};
    ev_study_compute(&design, design.frequencies[0], want, study);
    assert_int_equal(study->feed, 0);
    assert_int_equal(study->ray_count, EV_STUDY_RAY_CAPACITY);
    free(study);
}

/* The rows add up from the full aperture to the gain on the axis. */
static void test_ledger_adds_up(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        design.ohmic = 0.2;
        design.main.surface_rms = 2e-4;
        ev_antenna antenna;
        ev_ledger_row rows[EV_LEDGER_ROW_COUNT];
        ev_feed_budget budget = ev_fixture_budget(&design);
        ev_fixture_build(&design, &antenna);
        ev_ledger_list(&antenna, &budget, 0, rows);
        double sum = 0.0;
        for (int i = 0; i < EV_LEDGER_ROW_COUNT; i++) {
            sum += rows[i].db;
            assert_true(rows[i].db <= 1e-9);
        }
        assert_near(sum, ev_ledger_total_db(&budget), 1e-9);
        assert_near(budget.full_aperture_gain_dbi + sum, budget.gain_on_axis_dbi, 1e-9);
        assert_int_equal(rows[0].applies, antenna.dual);
    }
}

static void test_rows_that_do_not_apply(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    ev_antenna antenna;
    ev_ledger_row rows[EV_LEDGER_ROW_COUNT];
    design.feeds[0].toward_peak = true;
    design.feeds[0].polarization = EV_POLARIZATION_LHCP;
    ev_feed_budget budget = ev_fixture_budget(&design);
    ev_fixture_build(&design, &antenna);
    ev_ledger_list(&antenna, &budget, 0, rows);
    for (int i = 0; i < EV_LEDGER_ROW_COUNT; i++) {
        const char *id = rows[i].id;
        bool dash = strcmp(id, "past_sub") == 0 || strcmp(id, "pointing") == 0 ||
                    strcmp(id, "polarization") == 0 || strcmp(id, "blockage") == 0;
        assert_int_equal(rows[i].applies, !dash);
        if (dash)
            assert_near(rows[i].db, 0.0, 1e-9);
    }
}

static void test_watts_rows(void **state)
{
    (void)state;
    const char *const ids[] = {"aperture",   "past_sub",    "past_main",
                               "shadow_sub", "shadow_feed", "shadow_struts"};
    for (int fate = 0; fate < EV_FATE_COUNT; fate++) {
        assert_string_equal(ev_watts_of((ev_fate)fate).id, ids[fate]);
        assert_int_equal(ev_watts_of((ev_fate)fate).fate, fate);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_same_numbers_as_singly),
        cmocka_unit_test(test_front),
        cmocka_unit_test(test_aperture_picture),
        cmocka_unit_test(test_odd_wants),
        cmocka_unit_test(test_ledger_adds_up),
        cmocka_unit_test(test_rows_that_do_not_apply),
        cmocka_unit_test(test_watts_rows),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
