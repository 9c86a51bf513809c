/* For the tests of what the window lays over its page: a folder of their own, replays that must end
 * as expected, and words that must lie in their places. */
#pragma once

#include "program.h"

#include <math.h>

static const char no_display[] = "env -u DISPLAY -u WAYLAND_DISPLAY";
static char folder[] = "/tmp/evenpath_faces_XXXXXX";

static inline int make_folder(void **state)
{
    (void)state;
    return mkdtemp(folder) ? 0 : -1;
}

static inline int remove_folder(void **state)
{
    char command[600];
    (void)state;
    snprintf(command, sizeof command, "rm -rf '%s'", folder);
    return system(command);
}

/* `scene` by its name among the examples; the caller frees the text. */
static inline run_result run_scene(const char *scene, const char *steps)
{
    char path[600];
    snprintf(path, sizeof path, "%s/%s.yaml", EV_SCENES, scene);
    run_result run = run_replay(no_display, folder, path, steps);
    if (run.code != 0) {
        print_error("%s: exit %d:\n%s\n%s\n", scene, run.code, steps, run.text);
    }
    return run;
}

static inline void expect_steps(const char *scene, const char *steps)
{
    run_result run = run_scene(scene, steps);
    assert_int_equal(run.code, 0);
    free(run.text);
}

static inline double number_in(const char *text, const char *name)
{
    double value = NAN;
    if (!find_number(text, name, &value)) {
        fail_msg("no %s in:\n%s", name, text);
    }
    return value;
}

/* Every text of a boxes file lies in its place; at least `least` of them have a name that starts
 * so. */
static inline void check_texts(const char *file, const char *start, int least)
{
    char path[600], line[1200];
    int found = 0;
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
        found += strncmp(name, start, strlen(start)) == 0;
        bool inside = r[0] >= w[0] - 0.6 && r[1] >= w[1] - 0.6 &&
                      r[0] + r[2] <= w[0] + w[2] + 0.6 && r[1] + r[3] <= w[1] + w[3] + 0.6;
        if (!inside) {
            fail_msg("%s: %s", file, line);
        }
    }
    fclose(stream);
    assert_true(found >= least);
}
