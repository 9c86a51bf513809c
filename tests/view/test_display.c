/* The window on a display: an X server of the test's own, driven once by a replay and once by real
 * pointer and keys. Says so and skips where Xvfb or xdotool is missing. */
#include "program.h"

#include "scene/scene.h"

#include <fcntl.h>
#include <math.h>
#include <signal.h>
#include <time.h>

static char folder[] = "/tmp/evenpath_display_XXXXXX";
static pid_t server;
static char environment[64]; /* "env DISPLAY=:7" */

static bool has_program(const char *name)
{
    char command[200];
    snprintf(command, sizeof command, "command -v %s >/dev/null 2>&1", name);
    return system(command) == 0;
}

/* The server says on a pipe which display it took. */
static void start_server(void)
{
    int ends[2];
    char number[16] = "", digits[16];
    assert_int_equal(pipe(ends), 0);
    server = fork();
    assert_true(server >= 0);
    if (server == 0) {
        int null = open("/dev/null", O_WRONLY);
        dup2(null, STDERR_FILENO);
        close(ends[0]);
        snprintf(digits, sizeof digits, "%d", ends[1]);
        execlp("Xvfb", "Xvfb", "-displayfd", digits, "-screen", "0", "1280x800x24", "-noreset",
               "-nolisten", "tcp", (char *)NULL);
        _exit(127);
    }
    close(ends[1]);
    /* to the end of the line; the pipe stays open, for a server that cannot write it ends */
    for (size_t size = 0; size + 1 < sizeof number && !strchr(number, '\n');) {
        ssize_t got = read(ends[0], number + size, sizeof number - 1 - size);
        if (got <= 0) {
            return;
        }
        size += (size_t)got;
    }
    number[strcspn(number, "\n")] = '\0';
    snprintf(environment, sizeof environment, "env DISPLAY=:%s", number);
}

static int set_up(void **state)
{
    (void)state;
    if (!mkdtemp(folder)) {
        return -1;
    }
    if (has_program("Xvfb")) {
        start_server();
    }
    return 0;
}

static int tear_down(void **state)
{
    char command[600];
    (void)state;
    if (server > 0) {
        kill(server, SIGTERM);
        waitpid(server, NULL, 0);
    }
    snprintf(command, sizeof command, "rm -rf '%s'", folder);
    return system(command);
}

static void need_display(void)
{
    if (!environment[0]) {
        print_message("Xvfb is not installed or does not start: no display to test on\n");
        skip();
    }
}

static const char scene[] = EV_SCENES "/quarry_link.yaml";

/* The same steps on a display and without one: the same numbers, the same picture. */
static void test_replay_on_a_display(void **state)
{
    static const char steps[] =
        "settle\nprint driver\ndrag feed +10 mm along z\nsettle\nprint budget\n"
        "boxes drag.boxes\nshot drag.png\n"
        "key 2\nsettle\nshot space.png\nsize 1100 700\nsettle\n";
    (void)state;
    need_display();
    run_result seen = run_replay(environment, folder, scene, steps);
    if (seen.code != 0) {
        print_error("%s\n", seen.text);
    }
    assert_int_equal(seen.code, 0);
    assert_non_null(strstr(seen.text, "driver x11"));
    char path[600];
    snprintf(path, sizeof path, "%s/drag.png", folder);
    assert_true(count_colours(path) > 100);
    snprintf(path, sizeof path, "%s/space.png", folder);
    assert_true(count_colours(path) > 100);
    run_result unseen = run_replay("env -u DISPLAY -u WAYLAND_DISPLAY", folder, scene, steps);
    assert_int_equal(unseen.code, 0);
    assert_non_null(strstr(unseen.text, "driver offscreen"));
    double gain[2] = {0.0, 1.0};
    assert_true(find_number(seen.text, "gain_on_axis_dbi", &gain[0]));
    assert_true(find_number(unseen.text, "gain_on_axis_dbi", &gain[1]));
    assert_true(gain[0] == gain[1]);
    free(seen.text);
    free(unseen.text);
}

/* Middle of a hot box of a boxes file. */
static void find_box(const char *file, const char *wanted, double *x, double *y)
{
    char path[600], line[1200], name[100], kind[20];
    double r[4];
    bool found = false;
    snprintf(path, sizeof path, "%s/%s", folder, file);
    FILE *stream = fopen(path, "r");
    assert_non_null(stream);
    while (fgets(line, sizeof line, stream)) {
        if (sscanf(line, "%99[^\t]\t%19s %lf %lf %lf %lf", name, kind, &r[0], &r[1], &r[2],
                   &r[3]) == 6 &&
            strcmp(name, wanted) == 0) {
            *x = r[0] + 0.5 * r[2];
            *y = r[1] + 0.5 * r[3];
            found = true;
        }
    }
    fclose(stream);
    assert_true(found);
}

static pid_t start_window(const char *path)
{
    pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        setenv("DISPLAY", environment + strlen("env DISPLAY="), 1);
        execl(EV_PROGRAM, EV_PROGRAM, path, (char *)NULL);
        _exit(127);
    }
    return child;
}

static bool try_with_xdotool(const char *arguments)
{
    char command[600];
    snprintf(command, sizeof command, "timeout 60 %s xdotool %s >/dev/null 2>&1", environment,
             arguments);
    return system(command) == 0;
}

static void do_with_xdotool(const char *arguments)
{
    if (!try_with_xdotool(arguments)) {
        print_error("xdotool %s\n", arguments);
        fail();
    }
}

static void wait_ms(long ms)
{
    struct timespec time = {ms / 1000, (ms % 1000) * 1000000};
    nanosleep(&time, NULL);
}

enum { PATIENCE = 60 }; /* s: a sanitizer on a busy machine is slow */

/* Waits for a child; its exit code, or -1. */
static int wait_for(pid_t child)
{
    int status = 0;
    for (int i = 0; i < 20 * PATIENCE; ++i) {
        if (waitpid(child, &status, WNOHANG) == child) {
            return WIFEXITED(status) ? WEXITSTATUS(status) : -1;
        }
        wait_ms(50);
    }
    kill(child, SIGKILL);
    waitpid(child, &status, 0);
    return -1;
}

/* Gives the window the keyboard once it is there to take it. */
static void focus_window(void)
{
    for (int i = 0; i < 4 * PATIENCE; ++i) {
        if (try_with_xdotool("search --onlyvisible --name evenpath windowfocus")) {
            return;
        }
        wait_ms(250);
    }
    fail_msg("no window came up");
}

/* Saves, and waits a while for a shell's test of the file to come true. */
static bool save_and_see(const char *check)
{
    do_with_xdotool("key ctrl+s");
    for (int i = 0; i < 40; ++i) {
        if (system(check) == 0) {
            return true;
        }
        wait_ms(50);
    }
    return false;
}

static void drag_with_xdotool(double x, double y, int dx, int dy)
{
    char words[400];
    snprintf(words, sizeof words, "mousemove %d %d", (int)x, (int)y);
    do_with_xdotool(words);
    do_with_xdotool("mousedown 1");
    for (int i = 1; i <= 8; ++i) {
        snprintf(words, sizeof words, "mousemove %d %d", (int)x + dx * i / 8, (int)y + dy * i / 8);
        do_with_xdotool(words);
        wait_ms(30);
    }
    do_with_xdotool("mouseup 1");
}

static ev_design read_design(const char *path)
{
    static ev_diagnostics diagnostics;
    ev_diagnostics_init(&diagnostics);
    ev_scene *loaded = ev_scene_load(path, &diagnostics);
    assert_non_null(loaded);
    ev_design design = *ev_scene_design(loaded);
    ev_scene_destroy(loaded);
    ev_diagnostics_clear(&diagnostics);
    return design;
}

/* A hand drags the feed in the Detail, types a value, saves and leaves; the file tells. */
static void test_real_hands(void **state)
{
    char path[600], command[1300];
    double x, y;
    (void)state;
    need_display();
    if (!has_program("xdotool")) {
        print_message("xdotool is not installed: no hands to test with\n");
        skip();
    }
    snprintf(path, sizeof path, "%s/hands.yaml", folder);
    snprintf(command, sizeof command, "cp '%s' '%s'", scene, path);
    assert_int_equal(system(command), 0);
    run_result places = run_replay("env -u DISPLAY -u WAYLAND_DISPLAY", folder, path,
                                   "settle\nboxes hands.boxes\n");
    assert_int_equal(places.code, 0);
    free(places.text);

    pid_t child = start_window(path);
    focus_window();
    /* hands are quicker than a first frame can be: they try again until the file shows it */
    bool seen = false;
    snprintf(command, sizeof command, "! cmp -s '%s' '%s'", scene, path);
    for (int i = 0; i < PATIENCE / 2 && !seen; ++i) {
        find_box("hands.boxes", "handle.feed", &x, &y);
        drag_with_xdotool(x, y, 24, 16);
        seen = save_and_see(command);
    }
    assert_true(seen);
    find_box("hands.boxes", "field.feed.shift.y", &x, &y);
    char click[100];
    snprintf(click, sizeof click, "mousemove %d %d click 1", (int)x, (int)y);
    snprintf(command, sizeof command, "grep -q '1/4 in' '%s'", path);
    seen = false;
    for (int i = 0; i < PATIENCE / 4 && !seen; ++i) {
        do_with_xdotool("key Escape");
        do_with_xdotool(click);
        wait_ms(700); /* nobody types before the caret stands there */
        do_with_xdotool("type --delay 30 '1/4 in'");
        do_with_xdotool("key Return");
        seen = save_and_see(command);
    }
    assert_true(seen);
    wait_ms(300); /* until the window knows that it is saved */
    do_with_xdotool("key q");
    wait_ms(500);
    try_with_xdotool("key q"); /* if it asked */
    assert_int_equal(wait_for(child), 0);

    ev_design before = read_design(scene), after = read_design(path);
    double moved = hypot(after.feeds[0].shift.x - before.feeds[0].shift.x,
                         after.feeds[0].defocus - before.feeds[0].defocus);
    assert_true(moved > 1e-4 && moved < 0.2);
    assert_true(after.feeds[0].shift.y == 0.00635);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_replay_on_a_display),
        cmocka_unit_test(test_real_hands),
    };
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
