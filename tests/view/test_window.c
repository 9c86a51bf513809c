/* The real window, driven by replays where nobody can see it: in every example scene it opens,
 * moves the feed, shows the numbers that the study gives for that very design, takes it back, and
 * keeps every word in its place at two sizes. */
#include "program.h"

#include "scene/scene.h"
#include "study/study.h"

#include <dirent.h>
#include <jansson.h>
#include <math.h>

static const char no_display[] = "env -u DISPLAY -u WAYLAND_DISPLAY";
static char folder[] = "/tmp/evenpath_window_XXXXXX";

static int make_folder(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}

static int remove_folder(void **state)
{
    char command[600];
    (void)state;
    snprintf(command, sizeof command, "rm -rf '%s'", folder);
    return system(command);
}

static int is_scene(const struct dirent *entry)
{
    const char *dot = strrchr(entry->d_name, '.');
    return dot && strcmp(dot, ".yaml") == 0;
}

/* Calls `check` on the path of each example scene. */
static void for_each_scene(void (*check)(const char *path))
{
    struct dirent **entries;
    int count = scandir(EV_SCENES, &entries, is_scene, alphasort);
    assert_true(count >= 9);
    for (int i = 0; i < count; ++i) {
        char path[600];
        snprintf(path, sizeof path, "%s/%s", EV_SCENES, entries[i]->d_name);
        check(path);
        free(entries[i]);
    }
    free(entries);
}

static double number_in(const char *text, const char *name)
{
    double value = NAN;
    if (!find_number(text, name, &value)) {
        fail_msg("no %s in:\n%s", name, text);
    }
    return value;
}

/* The design as the window left it: the scene's, with the feed where the window says. */
static void take_feed(const char *text, ev_feed_design *feed)
{
    feed->shift.x = number_in(text, "feed.shift.x");
    feed->shift.y = number_in(text, "feed.shift.y");
    feed->shift.z = number_in(text, "feed.shift.z");
    feed->defocus = number_in(text, "feed.defocus");
}

static void compare_budget(const char *path, const char *text, const ev_feed_budget *budget)
{
    const struct {
        const char *name;
        double want;
    } rows[] = {
        {"power.aperture", budget->power[EV_FATE_APERTURE]},
        {"power.past_sub", budget->power[EV_FATE_PAST_SUB]},
        {"power.past_main", budget->power[EV_FATE_PAST_MAIN]},
        {"power.shadow_sub", budget->power[EV_FATE_SHADOW_SUB]},
        {"power.shadow_feed", budget->power[EV_FATE_SHADOW_FEED]},
        {"power.shadow_struts", budget->power[EV_FATE_SHADOW_STRUTS]},
        {"path_error.rms_area_m", budget->path_error.rms_area},
        {"efficiency.spillover", budget->efficiency.spillover},
        {"efficiency.taper", budget->efficiency.taper},
        {"efficiency.phase", budget->efficiency.phase},
        {"efficiency.pointing", budget->efficiency.pointing},
        {"efficiency.blockage", budget->efficiency.blockage},
        {"efficiency.total", budget->efficiency.total},
        {"gain_dbi", budget->gain_dbi},
        {"gain_on_axis_dbi", budget->gain_on_axis_dbi},
    };
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; ++i) {
        double got = number_in(text, rows[i].name);
        if (got != rows[i].want) {
            print_error("%s: %s is %.17g, the study says %.17g\n", path, rows[i].name, got,
                        rows[i].want);
        }
        assert_true(got == rows[i].want);
    }
}

static void check_drag(const char *path)
{
    static ev_diagnostics diagnostics;
    static ev_antenna antenna;
    static ev_budget budget;
    run_result run = run_replay(no_display, folder, path,
                                "settle\n"
                                "print feed.defocus\n"
                                "drag feed +10 mm along z\n"
                                "print feed.shift.x\nprint feed.shift.y\nprint feed.shift.z\n"
                                "print feed.defocus\nprint budget\n");
    if (run.code != 0) {
        print_error("%s: %s\n", path, run.text);
    }
    assert_int_equal(run.code, 0);
    ev_diagnostics_init(&diagnostics);
    ev_scene *scene = ev_scene_load(path, &diagnostics);
    assert_non_null(scene);
    ev_design design = *ev_scene_design(scene);
    ev_antenna_build(&design, design.frequencies[0], &antenna);
    ev_vec3 before = antenna.feeds[0].position;
    take_feed(run.text, &design.feeds[0]);
    ev_antenna_build(&design, design.frequencies[0], &antenna);
    ev_vec3 moved = ev_vec3_sub(antenna.feeds[0].position, before);
    /* to the tenth of a tick that places are rounded to */
    double grain = 0.1 * antenna.wavelength / 50.0;
    bool right = fabs(moved.z - 0.01) <= grain && fabs(moved.x) <= grain && fabs(moved.y) < 1e-12;
    if (!right) {
        print_error("%s: moved by %g %g %g\n", path, moved.x, moved.y, moved.z);
    }
    assert_true(right);
    ev_budget_compute(&antenna, &budget);
    compare_budget(path, run.text, &budget.feeds[0]);
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&diagnostics);
    free(run.text);
}

static void test_numbers_after_a_drag(void **state)
{
    (void)state;
    for_each_scene(check_drag);
}

/* Undo brings back the very numbers the window opened with. */
static void check_undo(const char *path)
{
    static const char *const steps[] = {"print budget\n", "drag feed +10 mm along x\n"
                                                          "drag handle +3 mm along out\n"
                                                          "key u\nkey ctrl+z\nprint budget\n"};
    char text[400];
    double gain[2];
    for (int i = 0; i < 2; ++i) {
        snprintf(text, sizeof text, "settle\n%s", steps[i]);
        run_result run = run_replay(no_display, folder, path, text);
        assert_int_equal(run.code, 0);
        gain[i] = number_in(run.text, "gain_on_axis_dbi");
        free(run.text);
    }
    assert_true(gain[0] == gain[1]);
}

static void test_undo_restores(void **state)
{
    (void)state;
    for_each_scene(check_undo);
}

/* Every text of a boxes file lies in its place. */
static void check_boxes(const char *scene, const char *file)
{
    char path[600], line[1200];
    int texts = 0;
    snprintf(path, sizeof path, "%s/%s", folder, file);
    FILE *stream = fopen(path, "r");
    assert_non_null(stream);
    while (fgets(line, sizeof line, stream)) {
        char name[100], kind[20];
        double r[4], w[4];
        int got = sscanf(line, "%99[^\t]\t%19s %lf %lf %lf %lf %lf %lf %lf %lf", name, kind, &r[0],
                         &r[1], &r[2], &r[3], &w[0], &w[1], &w[2], &w[3]);
        assert_int_equal(got, 10);
        if (strcmp(kind, "text") != 0) {
            continue;
        }
        ++texts;
        bool inside = r[0] >= w[0] - 0.6 && r[1] >= w[1] - 0.6 &&
                      r[0] + r[2] <= w[0] + w[2] + 0.6 && r[1] + r[3] <= w[1] + w[3] + 0.6;
        if (!inside) {
            print_error("%s, %s: %s", scene, file, line);
        }
        assert_true(inside);
    }
    fclose(stream);
    assert_true(texts > 40);
}

static void check_picture(const char *scene, const char *file)
{
    char path[600];
    snprintf(path, sizeof path, "%s/%s", folder, file);
    int colours = count_colours(path);
    if (colours < 100) {
        print_error("%s: %s has %d colours\n", scene, file, colours);
    }
    assert_true(colours >= 100);
}

static void check_pictures(const char *path)
{
    run_result run = run_replay(no_display, folder, path,
                                "settle\nshot section.png\nboxes section.boxes\n"
                                "key 2\nsettle\nshot space.png\nboxes space.boxes\n"
                                "size 1100 700\nsettle\nshot small_space.png\n"
                                "boxes small_space.boxes\n"
                                "key 1\nkey d\nsettle\nboxes small_section.boxes\n"
                                "shot small_section.png\n"
                                "click tab.beam\nsettle\nboxes small_beam.boxes\n"
                                "click tab.cut\nsettle\nboxes small_cut.boxes\n");
    if (run.code != 0) {
        print_error("%s: %s\n", path, run.text);
    }
    assert_int_equal(run.code, 0);
    check_picture(path, "section.png");
    check_picture(path, "space.png");
    check_picture(path, "small_section.png");
    check_picture(path, "small_space.png");
    check_boxes(path, "section.boxes");
    check_boxes(path, "space.boxes");
    check_boxes(path, "small_section.boxes");
    check_boxes(path, "small_space.boxes");
    check_boxes(path, "small_beam.boxes");
    check_boxes(path, "small_cut.boxes");
    free(run.text);
}

static void test_pictures_and_places(void **state)
{
    (void)state;
    for_each_scene(check_pictures);
}

/* What the window shows after a drag is what the command line prints for the same settings. */
static void test_same_as_the_command_line(void **state)
{
    char command[2400];
    (void)state;
    run_result window = run_replay(no_display, folder, EV_SCENES "/quarry_link.yaml",
                                   "settle\ndrag feed +10 mm along z\n"
                                   "print feed.shift.x\nprint feed.shift.y\nprint feed.shift.z\n"
                                   "print feed.defocus\nprint budget\n");
    assert_int_equal(window.code, 0);
    snprintf(command, sizeof command,
             "'%s' budget '%s/quarry_link.yaml' --json --set 'feed.shift.x=%.17g m' "
             "--set 'feed.shift.z=%.17g m' --set 'feed.defocus=%.17g m'",
             EV_PROGRAM, EV_SCENES, number_in(window.text, "feed.shift.x"),
             number_in(window.text, "feed.shift.z"), number_in(window.text, "feed.defocus"));
    run_result line = run_command(command);
    assert_int_equal(line.code, 0);
    json_t *root = json_loads(line.text, 0, NULL);
    assert_non_null(root);
    json_t *feed = json_array_get(json_object_get(root, "feeds"), 0);
    double gain = json_real_value(json_object_get(feed, "gain_on_axis_dbi"));
    double taper = json_real_value(json_object_get(json_object_get(feed, "efficiency"), "taper"));
    assert_true(fabs(gain - number_in(window.text, "gain_on_axis_dbi")) < 1e-9);
    assert_true(fabs(taper - number_in(window.text, "efficiency.taper")) < 1e-12);
    json_decref(root);
    free(line.text);
    free(window.text);
}

static void expect_run(const char *scene, const char *steps, int code, const char *words)
{
    run_result run = run_replay(no_display, folder, scene, steps);
    if (run.code != code || (words && !strstr(run.text, words))) {
        print_error("exit %d:\n%s\n%s\n", run.code, steps, run.text);
    }
    assert_int_equal(run.code, code);
    assert_true(!words || strstr(run.text, words));
    free(run.text);
}

static void test_fields(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/quarry_link.yaml",
               "settle\n"
               "type feed.defocus 3/8 in\n"
               "expect feed.defocus 9.525 mm\n"
               "key u\n"
               "expect feed.defocus 14 mm\n"
               "expect notice Undid: feed out\n"
               "key ctrl+y\n"
               "expect feed.defocus 3/8 in\n"
               "type feed.defocus 7 furlong\n" /* complains, changes nothing, stays open */
               "expect feed.defocus 9.525 mm\n"
               "key Escape\n"
               "expect feed.defocus 9.525 mm\n"
               "double-click field.feed.defocus\n"
               "expect feed.defocus 0 mm\n"
               "type feed.defocus 2 mm\n"
               "key Right\n" /* the field is still in hand: one tick */
               "expect feed.defocus 2.2 mm\n"
               "key shift+Right\n"
               "expect feed.defocus 4.2 mm\n"
               "key u\n"
               "expect feed.defocus 2 mm\n" /* the nudges are one change */
               "drag field.feed.defocus -60 0 px\n"
               "expect feed.defocus 4 mm\n"
               "scroll field.frequency 1\n"
               "expect frequency 18.75 GHz\n",
               0, NULL);
}

static void test_typing(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/quarry_link.yaml",
               "settle\n"
               "click field.feed.defocus\n"
               "key End\nkey ctrl+BackSpace\ntext cm\nkey Return\n"
               "expect feed.defocus 16.8 cm\n" /* its unit was replaced */
               "key u\n"
               "click field.feed.defocus\n"
               "key Tab\n" /* on to the next, with nothing changed */
               "text 1 mm\n"
               "key Return\n"
               "expect feed.up 1 mm\n"
               "expect feed.defocus 14 mm\n",
               1, "feed.defocus is");
}

static void test_handle_catches_the_best(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/rooftop_terminal.yaml",
               "settle\n"
               "type feed.defocus 8 mm\n"
               "key Escape\nsettle\n"
               "drag handle -7.6 mm along out\n"
               "print feed.defocus\n"
               "settle\n"
               "expect verdict in_place\n",
               0, NULL);
}

static void test_move_it_there(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/ridge_station.yaml",
               "settle\n"
               "expect verdict sub_misplaced\n"
               "click button.move\n"
               "settle\n"
               "expect verdict in_place\n"
               "key u\n"
               "settle\n"
               "expect verdict sub_misplaced\n"
               "key Return\n"
               "settle\n"
               "expect verdict in_place\n",
               0, NULL);
}

static void test_view_of_the_stage(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/ridge_station.yaml",
               "settle\nboxes a.boxes\n"
               "scroll stage 4\npan 30 20 px\nboxes b.boxes\n"
               "key f\nboxes c.boxes\n"
               "click tab.space\nsettle\norbit 40 -20 deg\nscroll stage -2\npan 30 0 px\n"
               "settle\nshot turned.png\nclick part.feed.0\nsettle\n"
               "drag handle +2 mm along up\nclick tab.section\nkey Tab\nsettle\n",
               0, NULL);
    char command[600];
    snprintf(command, sizeof command,
             "cd '%s' && cmp -s a.boxes c.boxes && ! cmp -s a.boxes b.boxes", folder);
    assert_int_equal(system(command), 0);
    check_picture("ridge_station", "turned.png");
}

static void test_gallery(void **state)
{
    (void)state;
    expect_run("",
               "settle\nshot gallery.png\npoint scene.2\nclick scene.0\nsettle\n"
               "expect title Borrowed horn, 1.8 m\n"
               "key o\nkey Right\nkey Right\nkey Return\nsettle\n"
               "expect title Campus dish, Gregorian 4.5 m\n",
               0, NULL);
    check_picture("gallery", "gallery.png");
}

static void test_leaving_unsaved(void **state)
{
    (void)state;
    expect_run(EV_SCENES "/quarry_link.yaml",
               "settle\ntype feed.defocus 1 mm\nkey Escape\n"
               "key q\n"
               "expect notice Not saved. Press q again to leave without saving, s to save\n"
               "key f\n" /* anything else: asks again */
               "key q\nprint notice\n"
               "key q\n"
               "expect notice this step is never reached\n",
               0, "notice Not saved");
    expect_run(EV_SCENES "/quarry_link.yaml",
               "settle\ntype feed.defocus 1 mm\nkey Escape\n"
               "drop " EV_SCENES "/ridge_station.yaml\n"
               "expect title Quarry link, offset 1.2 m\n"
               "drop " EV_SCENES "/ridge_station.yaml\n"
               "expect title Ridge station, Cassegrain 3.6 m\n"
               "drop /nowhere/at/all.yaml\n"
               "expect title Ridge station, Cassegrain 3.6 m\n"
               "print notice\n",
               0, "notice Not opened");
}

static void test_save_and_picture(void **state)
{
    char command[1200], path[600];
    (void)state;
    snprintf(command, sizeof command, "cp '%s/quarry_link.yaml' '%s/mine.yaml'", EV_SCENES, folder);
    assert_int_equal(system(command), 0);
    snprintf(path, sizeof path, "%s/mine.yaml", folder);
    expect_run(path,
               "settle\ntype feed.defocus 3/8 in\nkey ctrl+s\nsettle\nexpect notice Saved\n"
               "key p\nsettle\nexpect notice Picture written: mine.png\n"
               "key p\nsettle\nexpect notice Picture written: mine-2.png\nkey q\n",
               0, NULL);
    expect_run(path, "settle\nexpect feed.defocus 9.525 mm\n", 0, NULL);
    check_picture("mine", "mine.png");
    check_picture("mine", "mine-2.png");
    snprintf(command, sizeof command, "grep -q 'defocus: 3/8 in *# and slid out' '%s'", path);
    assert_int_equal(system(command), 0);
}

static void test_latency_is_told(void **state)
{
    (void)state;
    run_result run = run_replay(no_display, folder, EV_SCENES "/rooftop_terminal.yaml",
                                "settle\ndrag feed +10 mm along z\nlatency\n");
    assert_int_equal(run.code, 0);
    const char *at = strstr(run.text, "p95_ms ");
    assert_non_null(at);
    double p95 = strtod(at + strlen("p95_ms "), NULL);
    assert_true(p95 > 0.1 && p95 < 60000.0);
    free(run.text);
}

static void test_failures(void **state)
{
    char command[1200];
    (void)state;
    expect_run(EV_SCENES "/quarry_link.yaml", "expect feed.defocus 15 mm\n", 1, "steps.replay:1:1");
    expect_run(EV_SCENES "/quarry_link.yaml", "settle\nclick button.none\n", 2, "steps.replay:2:1");
    expect_run(EV_SCENES "/quarry_link.yaml", "setle\n", 2, "steps.replay:1:1");
    expect_run(EV_SCENES "/quarry_link.yaml", "shot /nowhere/at/all.png\n", 3, "all.png");
    expect_run("/nowhere/at/all.yaml", "settle\n", 2, "all.yaml");
    /* never an invisible window */
    snprintf(command, sizeof command, "%s '%s' '%s/quarry_link.yaml' 2>&1", no_display, EV_PROGRAM,
             EV_SCENES);
    run_result run = run_command(command);
    assert_int_equal(run.code, 3);
    assert_non_null(strstr(run.text, "no display"));
    free(run.text);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_numbers_after_a_drag),
        cmocka_unit_test(test_undo_restores),
        cmocka_unit_test(test_pictures_and_places),
        cmocka_unit_test(test_same_as_the_command_line),
        cmocka_unit_test(test_fields),
        cmocka_unit_test(test_typing),
        cmocka_unit_test(test_handle_catches_the_best),
        cmocka_unit_test(test_move_it_there),
        cmocka_unit_test(test_view_of_the_stage),
        cmocka_unit_test(test_gallery),
        cmocka_unit_test(test_leaving_unsaved),
        cmocka_unit_test(test_save_and_picture),
        cmocka_unit_test(test_latency_is_told),
        cmocka_unit_test(test_failures),
    };
    return cmocka_run_group_tests(tests, make_folder, remove_folder);
}
