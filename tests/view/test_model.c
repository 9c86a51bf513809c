/* The scene in hand without a window: moving parts, typing values, undo, saving, and the worker's
 * answers. Works on copies of the example scenes. */
#include "view/fields.h"
#include "view/model.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <cmocka.h>

static char folder[] = "/tmp/evenpath_model_XXXXXX";
static ev_diagnostics diagnostics;

static int make_folder(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}

static int remove_folder(void **state)
{
    (void)state;
    return rmdir(folder);
}

/* A scene's text under another name, so that saving does not touch the original. */
static void copy_scene(const char *name, char path[512])
{
    char from[512], buffer[4096];
    snprintf(from, sizeof from, "%s/%s", EV_SCENES, name);
    snprintf(path, 512, "%s/%s", folder, name);
    FILE *in = fopen(from, "r"), *out = fopen(path, "w");
    assert_non_null(in);
    assert_non_null(out);
    for (size_t got; (got = fread(buffer, 1, sizeof buffer, in)) > 0;) {
        fwrite(buffer, 1, got, out);
    }
    fclose(in);
    assert_int_equal(fclose(out), 0);
}

static void open_scene(ev_model *model, const char *name, char path[512])
{
    copy_scene(name, path);
    ev_diagnostics_init(&diagnostics);
    assert_true(ev_model_start(model));
    assert_true(ev_model_open(model, path, NULL, 0, &diagnostics));
    assert_true(ev_model_compute(model, EV_STAGE_SECTION, false));
    ev_diagnostics_clear(&diagnostics);
}

static void close_scene(ev_model *model, const char *path)
{
    ev_model_end(model);
    unlink(path);
}

static ev_field_row find_row(const ev_model *model, const char *address)
{
    ev_field_row rows[EV_FIELD_CAPACITY];
    int count = ev_fields_list(model, rows);
    for (int i = 0; i < count; ++i) {
        if (strcmp(rows[i].address, address) == 0) {
            return rows[i];
        }
    }
    fail_msg("no field %s", address);
    return rows[0];
}

static void settle(ev_model *model)
{
    for (int i = 0; i < 100; ++i) {
        ev_model_compute(model, EV_STAGE_SECTION, false);
        ev_model_ask(model, false);
        ev_worker_settle(model->worker);
        ev_model_fetch(model);
        if (!ev_model_waiting(model)) {
            return;
        }
    }
    fail_msg("never settled");
}

static const char *const scenes[] = {"quarry_link.yaml",     "ridge_station.yaml",
                                     "harbour_gateway.yaml", "snow_line.yaml",
                                     "two_satellites.yaml",  "moonbounce_mesh.yaml"};

/* Each axis goes where it is told, the others stay; and the study agrees on where that is. */
static void test_moves(void **state)
{
    static ev_model model;
    char path[512];
    (void)state;
    for (size_t s = 0; s < sizeof scenes / sizeof scenes[0]; ++s) {
        open_scene(&model, scenes[s], path);
        for (int part = 0; part < (model.design.sub.present ? 2 : 1); ++part) {
            double want[EV_AXIS_COUNT];
            for (int axis = 0; axis < EV_AXIS_COUNT; ++axis) {
                want[axis] = ev_model_place(&model, (ev_part)part, (ev_part_axis)axis);
            }
            for (int axis = 0; axis < EV_AXIS_COUNT; ++axis) {
                want[axis] = 1e-3 * (axis + 1.5) * (axis == 1 ? -1 : 1);
                ev_design moved = ev_model_moved(&model, &model.design, (ev_part)part,
                                                 (ev_part_axis)axis, want[axis]);
                assert_true(ev_model_try(&model, &moved, true));
                ev_model_compute(&model, EV_STAGE_SECTION, false);
                for (int k = 0; k < EV_AXIS_COUNT; ++k) {
                    double place = ev_model_place(&model, (ev_part)part, (ev_part_axis)k);
                    double study = ev_part_place(&model.design, &model.study->antenna,
                                                 (ev_part)part, 0, (ev_part_axis)k);
                    assert_true(fabs(place - want[k]) < 1e-15);
                    assert_true(fabs(study - want[k]) < 1e-12);
                }
            }
        }
        close_scene(&model, path);
    }
}

static void test_spelling_is_kept(void **state)
{
    static ev_model model;
    char path[512], complaint[96], text[20000];
    (void)state;
    open_scene(&model, "quarry_link.yaml", path);
    ev_field_row row = find_row(&model, "feed.defocus");
    assert_true(ev_field_commit(&model, &row, "3/8 in", complaint, sizeof complaint));
    assert_string_equal(complaint, "");
    assert_true(model.design.feeds[0].defocus == 0.009525);
    assert_true(ev_model_unsaved(&model));
    ev_model_save(&model);
    ev_worker_settle(model.worker);
    assert_true(ev_model_fetch(&model));
    assert_string_equal(model.message, "Saved");
    assert_false(ev_model_unsaved(&model));
    FILE *file = fopen(path, "r");
    assert_non_null(file);
    text[fread(text, 1, sizeof text - 1, file)] = '\0';
    fclose(file);
    assert_non_null(strstr(text, "defocus: 3/8 in"));
    assert_non_null(strstr(text, "# and slid out"));
    close_scene(&model, path);
}

static void test_illegal_text_changes_nothing(void **state)
{
    static const char *const illegal[] = {"3 furlong", "",     "mm",   "two mm", "1e400 mm",
                                          "nan mm",    "5 km", "-3 m", "12 GHz"};
    static ev_model model;
    char path[512], complaint[96];
    (void)state;
    open_scene(&model, "quarry_link.yaml", path);
    ev_design before = model.design;
    unsigned id = ev_history_id(model.history);
    for (size_t i = 0; i < sizeof illegal / sizeof illegal[0]; ++i) {
        ev_field_row row = find_row(&model, "feed.defocus");
        complaint[0] = '\0';
        if (ev_field_commit(&model, &row, illegal[i], complaint, sizeof complaint)) {
            print_error("\"%s\" was taken\n", illegal[i]);
        }
        assert_memory_equal(&before.feeds[0], &model.design.feeds[0], sizeof before.feeds[0]);
        assert_true(complaint[0] != '\0');
        assert_int_equal(ev_history_id(model.history), id);
    }
    close_scene(&model, path);
}

static void test_bare_number_takes_the_unit_shown(void **state)
{
    static ev_model model;
    char path[512], complaint[96];
    (void)state;
    open_scene(&model, "ridge_station.yaml", path);
    ev_model_select(&model, EV_PART_SUB, 0);
    ev_field_row row = find_row(&model, "sub.tilt.y");
    assert_true(ev_field_commit(&model, &row, "0.25", complaint, sizeof complaint));
    assert_true(fabs(model.design.sub.tilt_y - 0.25 * EV_PI / 180.0) < 1e-15);
    row = find_row(&model, "frequency");
    assert_true(ev_field_commit(&model, &row, "11", complaint, sizeof complaint));
    assert_true(model.design.frequencies[0] == 11e9);
    row = find_row(&model, "sub.shift.z");
    assert_true(ev_field_commit(&model, &row, "-2.5", complaint, sizeof complaint));
    assert_true(model.design.sub.shift.z == -0.0025);
    close_scene(&model, path);
}

static void test_undo_says_what(void **state)
{
    static ev_model model;
    char path[512], complaint[96];
    (void)state;
    open_scene(&model, "quarry_link.yaml", path);
    ev_design before = model.design;
    ev_field_row row = find_row(&model, "feed.defocus");
    ev_field_commit(&model, &row, "5 mm", complaint, sizeof complaint);
    row = find_row(&model, "feed.up");
    ev_field_commit(&model, &row, "1 mm", complaint, sizeof complaint);
    ev_model_undo(&model);
    assert_string_equal(model.message, "Undid: feed up");
    ev_model_undo(&model);
    assert_string_equal(model.message, "Undid: feed out");
    assert_memory_equal(&before.feeds[0], &model.design.feeds[0], sizeof before.feeds[0]);
    assert_false(ev_model_unsaved(&model));
    ev_model_undo(&model);
    assert_string_equal(model.message, "Nothing to undo");
    ev_model_redo(&model);
    assert_string_equal(model.message, "Did again: feed out");
    assert_true(model.design.feeds[0].defocus == 0.005);
    close_scene(&model, path);
}

/* Doing what the verdict says brings the gain it promises. */
static void test_obey(void **state)
{
    static ev_model model;
    char path[512];
    (void)state;
    for (size_t s = 0; s < 2; ++s) {
        open_scene(&model, scenes[s], path);
        settle(&model);
        assert_true(model.verdict.move_count > 0);
        double promised = model.verdict.after_dbi;
        ev_model_obey(&model);
        settle(&model);
        double got = model.study->budget.feeds[0].gain_on_axis_dbi;
        if (fabs(got - promised) > 0.05) {
            print_error("%s: %g dBi, promised %g\n", scenes[s], got, promised);
        }
        assert_true(fabs(got - promised) <= 0.05);
        assert_int_equal(model.verdict.id, EV_VERDICT_IN_PLACE);
        ev_model_undo(&model);
        assert_string_equal(model.message, "Undid: moved where it belongs");
        close_scene(&model, path);
    }
}

/* The map is asked for again when anything but the part in hand moves, and only then. */
static void test_map_and_verdict_keep_up(void **state)
{
    static ev_model model;
    char path[512];
    (void)state;
    open_scene(&model, "rooftop_terminal.yaml", path);
    assert_true(ev_model_waiting(&model));
    settle(&model);
    assert_true(model.has_map);
    assert_false(ev_model_stale(&model));
    unsigned first = model.map_serial;
    ev_design moved = ev_model_moved(&model, &model.design, EV_PART_FEED, EV_AXIS_OUT, 0.01);
    assert_true(ev_model_try(&model, &moved, true));
    assert_true(ev_model_stale(&model));
    assert_false(ev_model_map_stale(&model));
    settle(&model);
    assert_int_equal(model.map_serial, first);
    moved = model.design;
    moved.frequencies[0] *= 1.1;
    assert_true(ev_model_try(&model, &moved, false));
    assert_true(ev_model_map_stale(&model));
    settle(&model);
    assert_true(model.map_serial > first);
    close_scene(&model, path);
}

/* During a drag words wait until they are a tenth of a decibel off. */
static void test_words_wait_in_a_drag(void **state)
{
    static ev_model model;
    char path[512];
    (void)state;
    open_scene(&model, "rooftop_terminal.yaml", path);
    settle(&model);
    ev_design moved = ev_model_moved(&model, &model.design, EV_PART_FEED, EV_AXIS_OUT, 1e-4);
    ev_model_try(&model, &moved, true);
    ev_model_compute(&model, EV_STAGE_SECTION, false);
    ev_model_ask(&model, true);
    assert_false(ev_worker_busy(model.worker, EV_JOB_VERDICT));
    moved = ev_model_moved(&model, &model.design, EV_PART_FEED, EV_AXIS_OUT, 0.04);
    ev_model_try(&model, &moved, true);
    ev_model_compute(&model, EV_STAGE_SECTION, false);
    ev_model_ask(&model, true);
    ev_worker_settle(model.worker);
    assert_true(ev_model_fetch(&model));
    assert_false(ev_model_stale(&model));
    assert_int_equal(model.verdict.id, EV_VERDICT_FEED_MISPLACED);
    close_scene(&model, path);
}

static void test_bad_scene_leaves_the_open_one(void **state)
{
    static ev_model model;
    char path[512];
    (void)state;
    open_scene(&model, "quarry_link.yaml", path);
    ev_diagnostics_init(&diagnostics);
    assert_false(ev_model_open(&model, "/nowhere/at/all.yaml", NULL, 0, &diagnostics));
    assert_true(diagnostics.error_count > 0);
    assert_non_null(model.scene);
    assert_string_equal(model.design.title, "Quarry link, offset 1.2 m");
    ev_diagnostics_clear(&diagnostics);
    close_scene(&model, path);
}

static void test_assignments(void **state)
{
    static ev_model model;
    static const char *const good[] = {"feed.defocus=5 mm", "frequency=20 GHz"};
    static const char *const bad[] = {"feed.defocus=5 mm", "feed.hue=3"};
    char path[512];
    (void)state;
    copy_scene("quarry_link.yaml", path);
    ev_diagnostics_init(&diagnostics);
    assert_true(ev_model_start(&model));
    assert_false(ev_model_open(&model, path, bad, 2, &diagnostics));
    assert_null(model.scene);
    assert_true(ev_model_open(&model, path, good, 2, &diagnostics));
    assert_true(model.design.feeds[0].defocus == 0.005);
    assert_true(model.design.frequencies[0] == 20e9);
    assert_true(ev_model_unsaved(&model));
    ev_diagnostics_clear(&diagnostics);
    close_scene(&model, path);
}

/* What a tape or a drag leaves behind is a number a person would write. */
static void test_round_places(void **state)
{
    static const double steps[] = {1e-4, 2e-4, 5e-4, 1e-3, 5e-3, 0.02, 5e7};
    (void)state;
    assert_true(ev_round_step(0.32e-3) == 2e-4);
    assert_true(ev_round_step(7.3) == 5.0);
    assert_true(ev_round_step(0.0) == 1.0);
    for (size_t s = 0; s < sizeof steps / sizeof steps[0]; ++s) {
        for (int i = -500; i <= 500; ++i) {
            double place = ev_round_place(0.1 * steps[s] * (i + 0.3), steps[s]);
            char text[40];
            snprintf(text, sizeof text, "%.12g", place);
            assert_true(strtod(text, NULL) == place);
            assert_true(fabs(place - 0.1 * steps[s] * i) < 1e-9 * steps[s]);
            assert_false(place == 0.0 && signbit(place));
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_moves),
        cmocka_unit_test(test_spelling_is_kept),
        cmocka_unit_test(test_illegal_text_changes_nothing),
        cmocka_unit_test(test_bare_number_takes_the_unit_shown),
        cmocka_unit_test(test_undo_says_what),
        cmocka_unit_test(test_obey),
        cmocka_unit_test(test_map_and_verdict_keep_up),
        cmocka_unit_test(test_words_wait_in_a_drag),
        cmocka_unit_test(test_bad_scene_leaves_the_open_one),
        cmocka_unit_test(test_assignments),
        cmocka_unit_test(test_round_places),
    };
    return cmocka_run_group_tests(tests, make_folder, remove_folder);
}
