/* Showing mode in the real window: coming and going, moving the part there by hand, by key and with
 * Space, numbers that are those of the study, words in their places at two sizes. */
#include "faces.h"

#include "scene/scene.h"
#include "study/study.h"

/* The scene's design with the parts where the window says. */
static ev_design design_in(const char *scene, const char *text)
{
    static ev_diagnostics diagnostics;
    char path[600];
    snprintf(path, sizeof path, "%s/%s.yaml", EV_SCENES, scene);
    ev_diagnostics_init(&diagnostics);
    ev_scene *loaded = ev_scene_load(path, &diagnostics);
    assert_non_null(loaded);
    ev_design design = *ev_scene_design(loaded);
    ev_feed_design *feed = &design.feeds[0];
    feed->shift.x = number_in(text, "feed.shift.x");
    feed->shift.y = number_in(text, "feed.shift.y");
    feed->shift.z = number_in(text, "feed.shift.z");
    feed->defocus = number_in(text, "feed.defocus");
    if (design.sub.present) {
        design.sub.shift.x = number_in(text, "sub.shift.x");
        design.sub.shift.z = number_in(text, "sub.shift.z");
    }
    ev_scene_destroy(loaded);
    ev_diagnostics_clear(&diagnostics);
    return design;
}

/* The ring is dragged, the arrows nudge; what is shown then is the study of that very design. */
static void test_numbers_after_moves(void **state)
{
    static const char *const scenes[] = {"quarry_link", "rooftop_terminal", "ridge_station"};
    static ev_study study;
    (void)state;
    for (size_t i = 0; i < sizeof scenes / sizeof scenes[0]; ++i) {
        run_result before = run_scene(scenes[i], "settle\nprint budget\n");
        char steps[400];
        bool dual = strcmp(scenes[i], "ridge_station") == 0;
        snprintf(steps, sizeof steps,
                 "settle\nkey w\nsettle\nhold alt\ndrag handle +3 mm along out\n"
                 "hold none\nkey Up\nkey shift+Left\nsettle\n"
                 "print feed.shift.x\nprint feed.shift.y\nprint feed.shift.z\n"
                 "print feed.defocus\n%sprint budget\n",
                 dual ? "print sub.shift.x\nprint sub.shift.z\n" : "");
        run_result run = run_scene(scenes[i], steps);
        assert_int_equal(run.code, 0);
        ev_design design = design_in(scenes[i], run.text);
        ev_study_compute(&design, design.frequencies[0], (ev_study_want){.feed = 0}, &study);
        const ev_feed_budget *feed = &study.budget.feeds[0];
        double gain = number_in(run.text, "gain_on_axis_dbi");
        assert_true(fabs(gain - feed->gain_on_axis_dbi) < 1e-9);
        assert_true(fabs(number_in(run.text, "efficiency.phase") - feed->efficiency.phase) < 1e-12);
        assert_true(fabs(gain - number_in(before.text, "gain_on_axis_dbi")) > 1e-4);
        free(before.text);
        free(run.text);
    }
}

static void test_keys_and_hands(void **state)
{
    (void)state;
    expect_steps("rooftop_terminal",
                 "settle\ntype feed.defocus 8 mm\nkey Escape\n"
                 "click action.show\nsettle\n"
                 "drag handle -7.6 mm along out\nsettle\n" /* it catches the best here too */
                 "expect verdict in_place\n"
                 "key u\n"
                 "expect feed.defocus 8 mm\n"
                 "drag part.feed.0 30 0 px\n" /* the part itself, as on the section */
                 "key u\n"
                 "expect feed.defocus 8 mm\n"
                 "key 2\nkey v\nkey e\nkey b\n" /* mean nothing here */
                 "key Escape\nsettle\n"
                 "click action.undo\n"
                 "expect notice Undid: feed out\n"
                 "click tab.space\nsettle\nkey w\nsettle\nclick button.back\n"
                 "settle\norbit 10 0 deg\n" /* back to the space it came from */);
}

static void test_space_puts_it_right(void **state)
{
    (void)state;
    expect_steps("ridge_station", "settle\nkey w\nsettle\n"
                                  "expect verdict sub_misplaced\n"
                                  "key Space\nsettle\n"
                                  "expect verdict in_place\n"
                                  "key u\nsettle\n"
                                  "expect verdict sub_misplaced\n"
                                  "click button.move\nsettle\n"
                                  "expect verdict in_place\n"
                                  "key Tab\nsettle\npoint handle.feed\n"
                                  "key Escape\nsettle\npoint action.show\n");
}

/* A question has to be seen: it is asked on the page that shows it. */
static void test_leaving_unsaved_from_there(void **state)
{
    (void)state;
    expect_steps("quarry_link", "settle\nkey w\nsettle\nkey Up\nkey q\nsettle\n"
                                "point text.bar.notice\nkey w\nsettle\n"
                                "drop " EV_SCENES "/ridge_station.yaml\nsettle\n"
                                "point text.bar.notice\n");
}

static void test_words_in_place(void **state)
{
    static const char *const scenes[] = {"quarry_link", "ridge_station", "campus_gregorian"};
    (void)state;
    for (size_t i = 0; i < sizeof scenes / sizeof scenes[0]; ++i) {
        expect_steps(scenes[i], "settle\nkey w\nsettle\nboxes large.boxes\nshot show.png\n"
                                "size 1100 700\nsettle\nboxes small.boxes\nkey d\nsettle\n");
        check_texts("large.boxes", "text.show.", 4);
        check_texts("small.boxes", "text.show.", 4);
        char path[600];
        snprintf(path, sizeof path, "%s/show.png", folder);
        assert_true(count_colours(path) >= 100);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_numbers_after_moves),
        cmocka_unit_test(test_keys_and_hands),
        cmocka_unit_test(test_space_puts_it_right),
        cmocka_unit_test(test_leaving_unsaved_from_there),
        cmocka_unit_test(test_words_in_place),
    };
    return cmocka_run_group_tests(tests, make_folder, remove_folder);
}
