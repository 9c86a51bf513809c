/* The list of actions in the real window: it finds by words, runs what is chosen by arrows or by a
 * click, lets nothing else through, and leaves without a trace. */
#include "faces.h"

static void test_choosing(void **state)
{
    (void)state;
    expect_steps("rooftop_terminal",
                 "settle\ntype feed.defocus 8 mm\nkey Escape\n"
                 "key /\ntext undo\nkey Return\n"
                 "expect feed.defocus 0 mm\n"
                 "key /\ntext do ag\nkey Return\n" /* the redo, by its words */
                 "expect feed.defocus 8 mm\n"
                 "key /\nclick act.undo\n"
                 "expect feed.defocus 0 mm\n"
                 "key /\ntext undo\nkey Return\n" /* nothing is left to undo: it stays open */
                 "click search.actions\nkey Escape\n"
                 "key ctrl+f\nkey Down\nkey Down\nkey Up\nkey Escape\n"
                 "key /\ntext all settings\nkey Return\nsettle\npoint search.drawer\n"
                 "key Escape\nsettle\npoint plate.aperture\n");
}

/* What it covers is out of reach. */
static void test_nothing_gets_through(void **state)
{
    (void)state;
    run_result run = run_scene("quarry_link", "settle\nkey /\nsettle\nkey u\nkey Left\n"
                                              "scroll stage 3\n"
                                              "expect feed.defocus 14 mm\n"
                                              "text zzz\nkey Return\nkey Escape\nsettle\n"
                                              "point handle.feed\nkey /\nkey Tab\nsettle\n"
                                              "key Escape\npoint handle.feed\n");
    assert_int_equal(run.code, 0);
    free(run.text);
    char path[600];
    snprintf(path, sizeof path, "%s/quarry_link.yaml", EV_SCENES);
    run = run_replay(no_display, folder, path, "settle\nkey /\nsettle\npoint handle.feed\n");
    assert_int_equal(run.code, 2);
    assert_non_null(strstr(run.text, "nothing called"));
    free(run.text);
}

/* Over the example scenes too, where most of it cannot be done. */
static void test_over_the_gallery(void **state)
{
    (void)state;
    run_result run = run_replay(no_display, folder, "",
                                "settle\nkey /\ntext save\nkey Return\nclick search.actions\n"
                                "key ctrl+a\ntext light\nkey Return\nsettle\nclick scene.0\n"
                                "settle\nexpect title Borrowed horn, 1.8 m\n");
    if (run.code != 0) {
        print_error("%s\n", run.text);
    }
    assert_int_equal(run.code, 0);
    free(run.text);
}

static void test_words_in_place(void **state)
{
    (void)state;
    expect_steps("ridge_station", "settle\nboxes before.boxes\nshot before.png\n"
                                  "key /\nsettle\nboxes large.boxes\n"
                                  "size 1100 700\nsettle\nboxes small.boxes\n"
                                  "key Down\nkey Down\nkey Down\ntext o\nsettle\n"
                                  "boxes found.boxes\nkey Escape\nsize 1280 800\nsettle\n"
                                  "boxes after.boxes\nshot after.png\n");
    check_texts("large.boxes", "text.act.", 10);
    check_texts("small.boxes", "text.act.", 10);
    check_texts("found.boxes", "text.act.", 3);
    char command[1400];
    snprintf(command, sizeof command,
             "cd '%s' && cmp before.boxes after.boxes && cmp before.png after.png && "
             "! cmp -s before.boxes large.boxes",
             folder);
    assert_int_equal(system(command), 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_choosing),
        cmocka_unit_test(test_nothing_gets_through),
        cmocka_unit_test(test_over_the_gallery),
        cmocka_unit_test(test_words_in_place),
    };
    return cmocka_run_group_tests(tests, make_folder, remove_folder);
}
