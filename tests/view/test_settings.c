/* The drawer of all settings in the real window: finding, typing, resetting, adding and removing;
 * each a change that undo takes back and saving keeps; words in their places at two sizes. */
#include "faces.h"

#include "scene/scene.h"
#include "study/study.h"

static ev_design load(const char *path)
{
    static ev_diagnostics diagnostics;
    ev_diagnostics_init(&diagnostics);
    ev_scene *scene = ev_scene_load(path, &diagnostics);
    assert_non_null(scene);
    ev_design design = *ev_scene_design(scene);
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&diagnostics);
    return design;
}

/* A value typed into a row is in the numbers at once: those of the study. */
static void test_numbers_of_a_setting(void **state)
{
    static ev_study study;
    (void)state;
    run_result run = run_scene("quarry_link", "settle\nkey t\ntext hole\n"
                                              "click row.main.hole\ntext 20 cm\nkey Return\n"
                                              "settle\nprint main.hole\nprint budget\n");
    assert_int_equal(run.code, 0);
    ev_design design = load(EV_SCENES "/quarry_link.yaml");
    assert_true(design.main.hole != 0.2);
    design.main.hole = 0.2;
    ev_design_resolve(&design);
    ev_study_compute(&design, design.frequencies[0], (ev_study_want){.feed = 0}, &study);
    assert_true(number_in(run.text, "main.hole") == 0.2);
    assert_true(fabs(number_in(run.text, "gain_on_axis_dbi") -
                     study.budget.feeds[0].gain_on_axis_dbi) < 1e-9);
    free(run.text);
}

static void test_typing(void **state)
{
    (void)state;
    expect_steps("quarry_link",
                 "settle\nclick action.settings\n"
                 "text defocus\n"
                 "point row.feeds.main.defocus\n"
                 "key Return\n" /* the first row found */
                 "text 3/8 in\nkey Return\n"
                 "expect feed.defocus 9.525 mm\n"
                 "key ctrl+z\n"
                 "expect feed.defocus 14 mm\n"
                 "click row.feeds.main.defocus\n"
                 "text 7 furlong\nkey Return\n" /* complains and stays */
                 "point text.drawer.edit\n"
                 "expect feed.defocus 14 mm\n"
                 "key ctrl+a\ntext 2\nkey Return\n" /* the unit that was shown */
                 "expect feed.defocus 2 mm\n"
                 "click row.feeds.main.defocus\nkey Escape\n"
                 "expect feed.defocus 2 mm\n"
                 "click reset.feeds.main.defocus\n"
                 "expect feed.defocus 0 mm\n"
                 "key ctrl+a\nkey BackSpace\n"
                 "text polarization\nclick choice.feeds.main.polarization.rhcp\n"
                 "expect feed.polarization 2\n"
                 "key ctrl+z\nkey ctrl+z\n"
                 "expect feed.defocus 2 mm\n"
                 "key ctrl+a\ntext title\nclick row.title\ntext Another name\nkey Return\n"
                 "expect title Another name\n"
                 "key ctrl+z\n"
                 "expect title Quarry link, offset 1.2 m\n"
                 "type frequency 18 GHz\n" /* the Strip is still there */
                 "expect frequency 18 GHz\n"
                 "key Escape\nsettle\npoint plate.aperture\n");
}

/* What is added counts, goes again with undo, and is in the file once saved. */
static void test_lists(void **state)
{
    char command[1200], path[600];
    (void)state;
    snprintf(command, sizeof command, "cp '%s/quarry_link.yaml' '%s/mine.yaml'", EV_SCENES, folder);
    assert_int_equal(system(command), 0);
    snprintf(path, sizeof path, "%s/mine.yaml", folder);
    run_result run = run_replay(no_display, folder, path,
                                "settle\nkey t\ntext feed\nclick copy.feed.0\nsettle\n"
                                "expect feeds.main_2.defocus 14 mm\n"
                                "key ctrl+z\nsettle\n"
                                "expect notice Undid: copy feed\n"
                                "key ctrl+y\nsettle\n"
                                "expect feeds.main_2.defocus 14 mm\n"
                                "key ctrl+a\ntext add\nclick add.feed\nsettle\n"
                                "key ctrl+a\ntext main_3\nclick remove.feed.2\nsettle\n"
                                "key ctrl+a\ntext strut\nclick add.strut\nsettle\n"
                                "click copy.strut.0\nsettle\nexpect struts.legs_2.count 4\n"
                                "click remove.strut.0\nsettle\nexpect struts.legs_2.count 4\n"
                                "key ctrl+a\ntext site\nclick remove.site\nsettle\n"
                                "click add.site\nsettle\nexpect site.elevation 30 deg\n"
                                "key ctrl+s\nsettle\nexpect notice Saved\n");
    if (run.code != 0) {
        print_error("%s\n", run.text);
    }
    assert_int_equal(run.code, 0);
    free(run.text);
    ev_design saved = load(path);
    assert_int_equal(saved.feed_count, 2);
    assert_string_equal(saved.feeds[1].name, "main_2");
    assert_int_equal(saved.strut_count, 1);
    assert_string_equal(saved.struts[0].name, "legs_2");
    assert_true(saved.site.present);
}

/* The part in hand may be the one that goes. */
static void test_what_is_in_hand_may_go(void **state)
{
    (void)state;
    expect_steps("two_satellites", "settle\nkey k\nkey Tab\nsettle\nkey t\ntext feed\n"
                                   "click remove.feed.1\nsettle\nprint budget\n"
                                   "key ctrl+z\nsettle\nprint budget\n");
    expect_steps("ridge_station", "settle\n" /* the subreflector is in hand */
                                  "key t\ntext subref\nclick remove.sub\nsettle\n"
                                  "print budget\nkey ctrl+z\nsettle\n"
                                  "expect verdict sub_misplaced\n");
    expect_steps("rooftop_terminal", "settle\nkey 2\nkey t\ntext subref\nclick add.sub\n"
                                     "settle\nexpect sub.magnification 5\nprint budget\n"
                                     "key Escape\nkey Tab\nsettle\nkey w\nsettle\n"
                                     "drag handle +2 mm along up\nsettle\n"
                                     "key u\nkey u\nsettle\npoint handle.feed\n");
}

/* A design that cannot be is refused, and why is said. */
static void test_the_impossible_is_refused(void **state)
{
    (void)state;
    run_result run = run_scene("quarry_link", "settle\nkey t\ntext pattern\n"
                                              "click choice.feeds.main.pattern.table\n"
                                              "expect feed.pattern 0\nprint notice\n"
                                              "key ctrl+a\ntext hole\nclick row.main.hole\n"
                                              "text 3 m\nkey Return\nexpect main.hole 0 m\n"
                                              "click search.drawer\nprint notice\n"
                                              "expect main.hole 0 m\n");
    assert_int_equal(run.code, 0);
    assert_non_null(strstr(run.text, "table"));
    free(run.text);
}

static void test_words_in_place(void **state)
{
    static const char *const scenes[] = {"two_satellites", "ridge_station", "campus_gregorian"};
    (void)state;
    for (size_t i = 0; i < sizeof scenes / sizeof scenes[0]; ++i) {
        expect_steps(scenes[i], "settle\nkey t\nsettle\nboxes top.boxes\n"
                                "scroll place.drawer -4\nkey PageDown\npoint place.drawer\n"
                                "settle\nboxes middle.boxes\n"
                                "size 1100 700\nkey Tab\nsettle\nboxes small.boxes\n"
                                "scroll place.drawer -90\nkey Escape\nkey d\nsettle\n"
                                "boxes end.boxes\n");
        check_texts("top.boxes", "text.row.", 10);
        check_texts("middle.boxes", "text.row.", 10);
        check_texts("small.boxes", "text.row.", 8);
        check_texts("end.boxes", "text.row.", 8);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_numbers_of_a_setting),
        cmocka_unit_test(test_typing),
        cmocka_unit_test(test_lists),
        cmocka_unit_test(test_what_is_in_hand_may_go),
        cmocka_unit_test(test_the_impossible_is_refused),
        cmocka_unit_test(test_words_in_place),
    };
    return cmocka_run_group_tests(tests, make_folder, remove_folder);
}
