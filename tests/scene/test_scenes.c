/* The example scenes: they load without a complaint, cover every layout, and open with words about
 * whose problem they are. */
#include "support.h"

#include <dirent.h>

static void are_all_listed(void **state)
{
    (void)state;
    DIR *folder = opendir(EV_SCENES);
    assert_non_null(folder);
    int found = 0;
    for (struct dirent *entry = readdir(folder); entry; entry = readdir(folder)) {
        size_t length = strlen(entry->d_name);
        found += length > 5 && strcmp(entry->d_name + length - 5, ".yaml") == 0;
    }
    closedir(folder);
    assert_int_equal(found, SCENE_COUNT);
}

static void load_without_a_complaint(void **state)
{
    (void)state;
    for (int i = 0; i < SCENE_COUNT; i++) {
        char path[512];
        ev_diagnostics d;
        ev_diagnostics_init(&d);
        snprintf(path, sizeof path, "%s/%s.yaml", EV_SCENES, scene_names[i]);
        ev_scene *scene = ev_scene_load(path, &d);
        assert_non_null(scene);
        for (int k = 0; k < d.count; k++) {
            if (strcmp(d.items[k].id, "table_ends") != 0)
                fail_msg("%s: %s", scene_names[i], d.items[k].text);
        }
        ev_diagnostics_clear(&d);
        ev_scene_destroy(scene);
    }
}

static void cover_every_layout(void **state)
{
    (void)state;
    int seen[EV_LAYOUT_OFFSET_GREGORIAN + 1] = {0}, several_feeds = 0, misplaced = 0;
    for (int i = 0; i < SCENE_COUNT; i++) {
        ev_scene *scene = load_example(scene_names[i]);
        const ev_design *design = ev_scene_design(scene);
        seen[ev_design_layout(design)]++;
        several_feeds += design->feed_count > 1;
        misplaced += design->feeds[0].defocus != 0.0 || design->sub.shift.z != 0.0;
        ev_scene_destroy(scene);
    }
    for (int i = 0; i <= EV_LAYOUT_OFFSET_GREGORIAN; i++)
        assert_true(seen[i] > 0);
    assert_true(several_feeds > 0 && misplaced > 1);
}

static void open_with_whose_problem_it_is(void **state)
{
    (void)state;
    for (int i = 0; i < SCENE_COUNT; i++) {
        ev_scene *scene = load_example(scene_names[i]);
        size_t size;
        char *text = ev_scene_text(scene, ev_scene_design(scene), &size);
        char *end = strstr(text, "evenpath: 1");
        assert_non_null(end);
        *end = 0;
        assert_true(text[0] == '#' && strlen(text) > 150);
        assert_non_null(strstr(text, "invented"));
        free(text);
        ev_scene_destroy(scene);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(are_all_listed),
        cmocka_unit_test(load_without_a_complaint),
        cmocka_unit_test(cover_every_layout),
        cmocka_unit_test(open_with_whose_problem_it_is),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
