/* Saving to disk: one step or nothing, and never over someone else's work. */
#include "support.h"

#include "scene/field.h"

#include <signal.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

static char folder[64], path[128];

static const char text_before[] = "# mine\nevenpath: 1\nfrequency: 12 GHz # licensed\n"
                                  "main: {diameter: 2 m, f_over_d: 0.4}\nfeeds: [{name: a}]\n";
static const char text_after[] = "# mine\nevenpath: 1\nfrequency: 13 GHz # licensed\n"
                                 "main: {diameter: 2 m, f_over_d: 0.4}\nfeeds: [{name: a}]\n";

static void write_file(const char *name, const char *text)
{
    FILE *file = fopen(name, "w");
    assert_non_null(file);
    fputs(text, file);
    fclose(file);
}

static void expect_file(const char *name, const char *text)
{
    char read[4096];
    FILE *file = fopen(name, "r");
    assert_non_null(file);
    size_t size = fread(read, 1, sizeof read - 1, file);
    read[size] = 0;
    fclose(file);
    assert_string_equal(read, text);
}

static ev_scene *load_file(void)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_load(path, &d);
    assert_non_null(scene);
    return scene;
}

static void expect_saved(ev_scene *scene, const ev_design *design, const char *name)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    if (!ev_scene_save(scene, design, name, &d))
        ev_diagnostics_print(&d, stderr);
    assert_int_equal(d.count, 0);
}

static void expect_refused(ev_scene *scene, const ev_design *design, const char *name,
                           const char *id)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_false(ev_scene_save(scene, design, name, &d));
    assert_int_equal(d.error_count, 1);
    assert_string_equal(d.items[0].id, id);
    ev_diagnostics_clear(&d);
}

static void saves_and_saves_again(void **state)
{
    (void)state;
    ev_scene *scene = load_file();
    assert_string_equal(ev_scene_path(scene), path);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "frequency=13 GHz");
    assert_true(ev_scene_design(scene)->frequencies[0] == 12e9);
    expect_saved(scene, &design, NULL);
    expect_file(path, text_after);
    assert_true(ev_scene_design(scene)->frequencies[0] == 13e9);
    assign_good(scene, &design, "frequency=12 GHz");
    expect_saved(scene, &design, NULL);
    expect_file(path, text_before);
    ev_scene_destroy(scene);
}

static void saves_under_another_name(void **state)
{
    (void)state;
    char other[160];
    snprintf(other, sizeof other, "%s/other.yaml", folder);
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "frequency=13 GHz");
    expect_saved(scene, &design, other);
    expect_file(other, text_after);
    expect_file(path, text_before);
    assert_string_equal(ev_scene_path(scene), other);
    ev_scene_destroy(scene);
}

static void a_failing_write_leaves_the_old_file(void **state)
{
    (void)state;
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "frequency=13 GHz");
    struct rlimit before, tight;
    assert_int_equal(getrlimit(RLIMIT_FSIZE, &before), 0);
    tight = before;
    tight.rlim_cur = 10;
    signal(SIGXFSZ, SIG_IGN);
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &tight), 0);
    bool saved = ev_scene_save(scene, &design, NULL, &d);
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &before), 0);
    assert_false(saved);
    assert_string_equal(d.items[0].id, "file_not_written");
    ev_diagnostics_clear(&d);
    expect_file(path, text_before);
    assert_true(ev_scene_design(scene)->frequencies[0] == 12e9);
    expect_saved(scene, &design, NULL); /* with room again it works */
    expect_file(path, text_after);
    ev_scene_destroy(scene);
}

static void respects_the_work_of_others(void **state)
{
    (void)state;
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "frequency=13 GHz");
    write_file(path, "# someone was here\n");
    expect_refused(scene, &design, NULL, "save_changed");
    expect_file(path, "# someone was here\n");
    unlink(path);
    expect_saved(scene, &design, NULL);
    expect_file(path, text_after);
    ev_scene_destroy(scene);
}

/* What could not be opened again is not written. */
static void refuses_an_unsound_design(void **state)
{
    (void)state;
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "main.hole=3 m");
    expect_refused(scene, &design, NULL, "hole_too_large");
    expect_file(path, text_before);
    ev_scene_destroy(scene);
}

/* Explicit keys ("? key") are legal YAML that the splicer does not know how to add to. */
static void refuses_what_would_not_read_back(void **state)
{
    (void)state;
    static const char odd[] = "evenpath: 1\nfrequency: 12 GHz\nmain:\n  ? diameter\n  : 2 m\n"
                              "  ? f_over_d\n  : 0.4\nfeeds: [{name: a}]\n";
    write_file(path, odd);
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "main.hole=10 mm");
    expect_refused(scene, &design, NULL, "save_unfaithful");
    expect_file(path, odd);
    ev_scene_destroy(scene);
}

/* Here the text with the new key is legal, and says two feeds. */
static void refuses_what_would_read_back_as_another(void **state)
{
    (void)state;
    static const char odd[] = "evenpath: 1\nfrequency: 12 GHz\n"
                              "main: {diameter: 2 m, f_over_d: 0.4}\nfeeds: [name: a]\n";
    write_file(path, odd);
    ev_scene *scene = load_file();
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "feed.roll=1 deg");
    expect_refused(scene, &design, NULL, "save_unfaithful");
    expect_file(path, odd);
    ev_scene_destroy(scene);
}

static void a_new_scene_needs_a_name(void **state)
{
    (void)state;
    ev_design design = ev_default_design();
    ev_scene *scene = ev_scene_create(&design);
    expect_refused(scene, &design, NULL, "save_no_path");
    unlink(path);
    expect_saved(scene, &design, path);
    ev_scene *again = load_file();
    assert_true(ev_design_same(ev_scene_design(again), &design));
    ev_scene_destroy(again);
    ev_scene_destroy(scene);
}

/* A relative table is looked for beside the new file. */
static void a_table_must_be_found_from_the_new_place(void **state)
{
    (void)state;
    ev_scene *scene = load_example("borrowed_horn");
    expect_refused(scene, ev_scene_design(scene), path, "file_missing");
    expect_file(path, text_before);
    ev_scene_destroy(scene);
}

static int make_folder(void **state)
{
    (void)state;
    snprintf(folder, sizeof folder, "save_test_XXXXXX");
    if (mkdtemp(folder) == NULL)
        return -1;
    snprintf(path, sizeof path, "%s/scene.yaml", folder);
    write_file(path, text_before);
    return 0;
}

static int remove_folder(void **state)
{
    (void)state;
    char command[128];
    snprintf(command, sizeof command, "rm -rf %s", folder);
    return system(command);
}

#define IN_FOLDER(test) cmocka_unit_test_setup_teardown(test, make_folder, remove_folder)

int main(void)
{
    const struct CMUnitTest tests[] = {
        IN_FOLDER(saves_and_saves_again),
        IN_FOLDER(saves_under_another_name),
        IN_FOLDER(a_failing_write_leaves_the_old_file),
        IN_FOLDER(respects_the_work_of_others),
        IN_FOLDER(refuses_an_unsound_design),
        IN_FOLDER(refuses_what_would_not_read_back),
        IN_FOLDER(refuses_what_would_read_back_as_another),
        IN_FOLDER(a_new_scene_needs_a_name),
        IN_FOLDER(a_table_must_be_found_from_the_new_place),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
