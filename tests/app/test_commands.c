/* The program from outside: exit codes, streams, the keys of its JSON, and that the same numbers
 * come out of every form. Runs the real executable on the scenes. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

#include <dirent.h>
#include <jansson.h>
#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

/* What a run printed and how it ended. */
typedef struct outcome {
    char *out; /* malloc'd */
    char err[4096];
    int code;
} outcome;

static char scratch[] = "/tmp/evenpath_commands_XXXXXX";

static char *read_all(FILE *stream)
{
    size_t size = 0, capacity = 1 << 16;
    char *text = malloc(capacity);
    assert_non_null(text);
    for (size_t got; (got = fread(text + size, 1, capacity - size - 1, stream)) > 0;) {
        size += got;
        if (capacity - size < 2) {
            text = realloc(text, capacity *= 2);
            assert_non_null(text);
        }
    }
    text[size] = '\0';
    return text;
}

static outcome run(const char *arguments)
{
    char name[256], *command = NULL;
    size_t size = 0;
    outcome result = {0};
    snprintf(name, sizeof name, "%s/stderr", scratch);
    FILE *words = open_memstream(&command, &size);
    assert_non_null(words);
    fprintf(words, "%s %s 2>%s", EV_PROGRAM, arguments, name);
    fclose(words);
    FILE *pipe = popen(command, "r");
    free(command);
    assert_non_null(pipe);
    result.out = read_all(pipe);
    int status = pclose(pipe);
    assert_true(WIFEXITED(status));
    result.code = WEXITSTATUS(status);
    FILE *messages = fopen(name, "r");
    assert_non_null(messages);
    size_t length = fread(result.err, 1, sizeof result.err - 1, messages);
    result.err[length] = '\0';
    fclose(messages);
    return result;
}

static outcome run_on(const char *before, const char *scene, const char *after)
{
    char arguments[16384];
    snprintf(arguments, sizeof arguments, "%s " EV_SCENES "/%s %s", before, scene, after);
    return run(arguments);
}

static json_t *json_of(const char *scene, const char *options)
{
    outcome result = run_on("budget --json", scene, options);
    assert_int_equal(result.code, 0);
    json_error_t error;
    json_t *tree = json_loads(result.out, 0, &error);
    if (!tree)
        fail_msg("%s: %s", scene, error.text);
    free(result.out);
    return tree;
}

static json_t *at(json_t *tree, const char *path)
{
    char copy[256];
    snprintf(copy, sizeof copy, "%s", path);
    for (char *save = NULL, *key = strtok_r(copy, ".", &save); key && tree;
         key = strtok_r(NULL, ".", &save))
        tree = key[0] >= '0' && key[0] <= '9' ? json_array_get(tree, (size_t)atoi(key))
                                              : json_object_get(tree, key);
    return tree;
}

static double number_at(json_t *tree, const char *path)
{
    json_t *value = at(tree, path);
    if (!json_is_number(value))
        fail_msg("no number at %s", path);
    return json_number_value(value);
}

static int list_scenes(char names[64][128])
{
    DIR *folder = opendir(EV_SCENES);
    assert_non_null(folder);
    int count = 0;
    for (struct dirent *entry; (entry = readdir(folder)) && count < 64;) {
        const char *dot = strrchr(entry->d_name, '.');
        if (dot && strcmp(dot, ".yaml") == 0)
            snprintf(names[count++], 128, "%.120s", entry->d_name);
    }
    closedir(folder);
    assert_true(count >= 9);
    return count;
}

/* Every key of the output contract that each antenna has. */
static const char *const keys[] = {
    "frequency_hz",
    "wavelength_m",
    "layout.diameter_m",
    "layout.focal_length_m",
    "layout.offset_m",
    "layout.half_angle_deg",
    "layout.equivalent_focal_length_m",
    "layout.edge_space_loss_db",
    "layout.rim.long_axis_m",
    "layout.rim.short_axis_m",
    "layout.rim.tilt_deg",
    "layout.rim.depth_m",
    "layout.rim.focus_to_top_m",
    "layout.rim.focus_to_bottom_m",
    "layout.rim.focus_to_side_m",
    "layout.rim.focus_to_centre_m",
    "layout.feed_tilt_deg",
    "feeds.0.position_m.2",
    "feeds.0.axis.2",
    "feeds.0.edge_taper_db",
    "feeds.0.power.aperture",
    "feeds.0.power.past_sub",
    "feeds.0.power.past_main",
    "feeds.0.power.shadow_sub",
    "feeds.0.power.shadow_feed",
    "feeds.0.power.shadow_struts",
    "feeds.0.path_error.rms_area_m",
    "feeds.0.path_error.rms_power_m",
    "feeds.0.path_error.rms_amplitude_m",
    "feeds.0.path_error.peak_to_valley_m",
    "feeds.0.path_error.untilted.rms_area_m",
    "feeds.0.path_error.untilted.peak_to_valley_m",
    "feeds.0.efficiency.spillover",
    "feeds.0.efficiency.taper",
    "feeds.0.efficiency.phase",
    "feeds.0.efficiency.pointing",
    "feeds.0.efficiency.polarization",
    "feeds.0.efficiency.blockage",
    "feeds.0.efficiency.surface",
    "feeds.0.efficiency.ohmic",
    "feeds.0.efficiency.mismatch",
    "feeds.0.efficiency.total",
    "feeds.0.full_aperture_gain_dbi",
    "feeds.0.gain_dbi",
    "feeds.0.gain_on_axis_dbi",
    "verdict.loss_db",
};

static const char *const sub_keys[] = {
    "layout.sub.eccentricity",   "layout.sub.magnification", "layout.sub.interfocal_m",
    "layout.sub.half_angle_deg", "layout.sub.axis_tilt_deg", "layout.sub.vertex_m.2",
    "layout.sub.feed_focus_m.2", "layout.sub.long_axis_m",   "layout.sub.short_axis_m",
};

static void check_sums(json_t *tree, const char *name)
{
    json_t *power = at(tree, "feeds.0.power"), *value;
    const char *key;
    double sum = 0.0;
    json_object_foreach(power, key, value) sum += json_number_value(value);
    if (fabs(sum - 1.0) > 1e-12)
        fail_msg("%s: powers sum to %.17g", name, sum);
    static const char *const factors[] = {"spillover", "taper",   "phase", "polarization",
                                          "blockage",  "surface", "ohmic", "mismatch"};
    json_t *eta = at(tree, "feeds.0.efficiency");
    double product = 1.0;
    for (size_t i = 0; i < sizeof factors / sizeof factors[0]; i++)
        product *= number_at(eta, factors[i]);
    assert_true(fabs(product / number_at(eta, "total") - 1.0) < 1e-12);
    double gain = number_at(tree, "feeds.0.full_aperture_gain_dbi") + 10.0 * log10(product);
    assert_true(fabs(gain - number_at(tree, "feeds.0.gain_dbi")) < 1e-9);
}

static void json_has_the_contract_keys(void **state)
{
    (void)state;
    char names[64][128];
    int count = list_scenes(names);
    for (int i = 0; i < count; i++) {
        json_t *tree = json_of(names[i], "");
        assert_int_equal(json_integer_value(at(tree, "evenpath")), 1);
        for (size_t k = 0; k < sizeof keys / sizeof keys[0]; k++)
            number_at(tree, keys[k]);
        bool dual = at(tree, "layout.sub") != NULL;
        const char *kind = json_string_value(at(tree, "layout.kind"));
        assert_int_equal(dual, strstr(kind, "cassegrain") || strstr(kind, "gregorian"));
        for (size_t k = 0; dual && k < sizeof sub_keys / sizeof sub_keys[0]; k++)
            number_at(tree, sub_keys[k]);
        assert_true(json_is_string(at(tree, "verdict.text")));
        assert_true(json_is_array(at(tree, "warnings")));
        assert_null(at(tree, "feeds.0.beam.never"));
        check_sums(tree, names[i]);
        json_decref(tree);
    }
}

static void set_changes_what_it_names(void **state)
{
    (void)state;
    json_t *tree = json_of("quarry_link.yaml", "--set main.f_over_d=0.5 --set feed.exponent=3");
    assert_true(fabs(number_at(tree, "layout.focal_length_m") - 0.6) < 1e-12);
    assert_true(fabs(number_at(tree, "feeds.0.exponent") - 3.0) < 1e-12);
    json_decref(tree);
}

static void all_frequencies_give_a_list(void **state)
{
    (void)state;
    json_t *tree = json_of("quarry_link.yaml", "--all-frequencies");
    assert_true(json_is_array(tree));
    assert_true(json_array_size(tree) >= 1);
    json_decref(tree);
    outcome result = run_on("budget --json --all-frequencies", "quarry_link.yaml",
                            "--set 'frequency=[10 GHz, 20 GHz]'");
    assert_int_equal(result.code, 0);
    tree = json_loads(result.out, 0, NULL);
    assert_int_equal(json_array_size(tree), 2);
    assert_true(fabs(number_at(tree, "1.frequency_hz") - 2e10) < 1.0);
    json_decref(tree);
    free(result.out);
}

static int fields_in(const char *line)
{
    int count = 1;
    bool quoted = false;
    for (; *line && *line != '\r' && *line != '\n'; line++) {
        if (*line == '"')
            quoted = !quoted;
        count += *line == ',' && !quoted;
    }
    return count;
}

/* Every line has as many fields as the header; returns the number of lines under it. */
static int check_csv(const outcome *result)
{
    assert_int_equal(result->code, 0);
    int columns = fields_in(result->out), lines = 0;
    assert_true(columns > 3);
    for (const char *line = strchr(result->out, '\n'); line && line[1];
         line = strchr(line + 1, '\n'), lines++)
        assert_int_equal(fields_in(line + 1), columns);
    assert_null(strstr(result->out, "nan"));
    return lines;
}

/* One scene a kind: single, two feeds, a table, symmetric and offset dual. */
static void csv_is_rectangular(void **state)
{
    (void)state;
    static const char *const names[] = {"quarry_link.yaml", "two_satellites.yaml",
                                        "borrowed_horn.yaml", "ridge_station.yaml",
                                        "snow_line.yaml"};
    for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
        outcome budget = run_on("budget --csv", names[i], "");
        assert_int_equal(check_csv(&budget), i == 1 ? 2 : 1);
        outcome rays = run_on("rays --rays 200", names[i], "");
        assert_int_equal(check_csv(&rays), 200);
        outcome section = run_on("rays --section --rays 60", names[i], "");
        assert_true(check_csv(&section) > 10);
        outcome aperture = run_on("aperture --grid 21", names[i], "");
        assert_int_equal(check_csv(&aperture), 317);
        outcome cut = run_on("beam --csv --cut 90 --span 3", names[i], "");
        assert_true(check_csv(&cut) > 20);
        free(budget.out);
        free(rays.out);
        free(section.out);
        free(aperture.out);
        free(cut.out);
    }
}

/* A limit that is not met ends with 1, one that is with 0; a user's table is read. */
static void limits_decide_the_exit_code(void **state)
{
    (void)state;
    char name[256], options[512];
    snprintf(name, sizeof name, "%s/limit.csv", scratch);
    static const struct {
        const char *text;
        int code;
    } cases[] = {{"angle_deg,level_dbi\n2,60\n40,60\n", 0},
                 {"angle_deg,level_dbi\n2,-60\n40,-60\n", 1},
                 {"angle_deg,level_dbi\n2,1\n1,1\n", 2},
                 {"angle_deg,level_dbi\n2,1\n", 2},
                 {"angle,level\n2,1\n", 2}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        FILE *file = fopen(name, "w");
        assert_non_null(file);
        fputs(cases[i].text, file);
        fclose(file);
        snprintf(options, sizeof options, "--cut 0 --limits %s", name);
        outcome result = run_on("beam", "rooftop_terminal.yaml", options);
        if (result.code != cases[i].code)
            fail_msg("case %zu ended with %d: %s", i, result.code, result.err);
        free(result.out);
    }
    outcome standard = run_on("beam", "rooftop_terminal.yaml", "--limits s465");
    assert_true(standard.code == 0 || standard.code == 1);
    assert_non_null(strstr(standard.out, "s465, cut at phi 90 deg"));
    free(standard.out);
}

static void beam_is_in_the_budget(void **state)
{
    (void)state;
    json_t *tree = json_of("campus_gregorian.yaml", "");
    outcome result = run_on("beam --json", "campus_gregorian.yaml", "");
    assert_int_equal(result.code, 0);
    json_t *beam = json_loads(result.out, 0, NULL);
    static const char *const facts[] = {"x_deg",
                                        "y_deg",
                                        "width_x_deg",
                                        "width_y_deg",
                                        "gain_dbi",
                                        "gain_on_axis_dbi",
                                        "first_sidelobe_x_db",
                                        "first_sidelobe_y_db",
                                        "cross_polar_db"};
    for (size_t i = 0; i < sizeof facts / sizeof facts[0]; i++)
        assert_true(number_at(at(tree, "feeds.0.beam"), facts[i]) ==
                    number_at(at(beam, "beam"), facts[i]));
    /* in focus the far field and the ledger are two ways to one gain */
    assert_true(fabs(number_at(tree, "feeds.0.beam.gain_dbi") -
                     number_at(tree, "feeds.0.gain_dbi")) < 1e-3);
    json_decref(beam);
    json_decref(tree);
    free(result.out);
}

static void compare_subtracts(void **state)
{
    (void)state;
    outcome result =
        run_on("compare --json " EV_SCENES "/quarry_link.yaml", "rooftop_terminal.yaml", "");
    assert_int_equal(result.code, 0);
    json_t *tree = json_loads(result.out, 0, NULL);
    assert_non_null(tree);
    assert_true(fabs(number_at(tree, "second.feed.gain_dbi") -
                     number_at(tree, "first.feed.gain_dbi") -
                     number_at(tree, "change.feed.gain_dbi")) < 1e-12);
    json_decref(tree);
    free(result.out);
}

/* Fan rays stand for equal power, so their fates count the shares. */
static void fan_counts_the_shares(void **state)
{
    (void)state;
    json_t *tree = json_of("ridge_station.yaml", "");
    outcome rays = run_on("rays --rays 20000", "ridge_station.yaml", "");
    static const char *const fates[] = {"aperture", "past_sub", "past_main", "shadow_sub",
                                        "shadow_struts"};
    for (size_t i = 0; i < sizeof fates / sizeof fates[0]; i++) {
        char mark[32], path[64];
        int found = 0;
        snprintf(mark, sizeof mark, ",%s,", fates[i]);
        snprintf(path, sizeof path, "feeds.0.power.%s", fates[i]);
        for (const char *c = rays.out; (c = strstr(c, mark)); c++)
            found++;
        if (fabs(found / 20000.0 - number_at(tree, path)) > 0.004)
            fail_msg("%s: %d of 20000 rays, share %g", fates[i], found, number_at(tree, path));
    }
    free(rays.out);
    json_decref(tree);
}

static void bad_input_ends_with_2(void **state)
{
    (void)state;
    static const char *const bad[] = {
        "budget",
        "budget " EV_SCENES,
        "budget " EV_SCENES "/quarry_link.yaml extra",
        "budget " EV_SCENES "/quarry_link.yaml --jsn",
        "budget " EV_SCENES "/quarry_link.yaml --json --csv",
        "budget " EV_SCENES "/quarry_link.yaml --set feed.exponent=nan",
        "budget " EV_SCENES "/quarry_link.yaml --set main.diameter=-1m",
        "budget " EV_SCENES "/quarry_link.yaml --set main.diameter=1",
        "budget " EV_SCENES "/quarry_link.yaml --set main.focal_length=0m",
        "budget " EV_SCENES "/quarry_link.yaml --set nothing",
        "budget " EV_SCENES "/quarry_link.yaml --set 'feed.shift.z=-2 m'",
        "rays " EV_SCENES "/quarry_link.yaml --rays 0",
        "rays " EV_SCENES "/quarry_link.yaml --rays 1e3",
        "rays " EV_SCENES "/quarry_link.yaml --feed nobody",
        "aperture " EV_SCENES "/quarry_link.yaml --grid 1",
        "picture " EV_SCENES "/quarry_link.yaml",
        "picture " EV_SCENES "/quarry_link.yaml x.png --size 10x10",
        "explain nothing.at.all",
        "budgte scene.yaml",
    };
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
        outcome result = run(bad[i]);
        if (result.code != 2 || result.err[0] == '\0' || result.out[0] != '\0')
            fail_msg("`%s` ended with %d, stderr: %s", bad[i], result.code, result.err);
        free(result.out);
    }
}

static void what_cannot_be_read_or_written_ends_with_3(void **state)
{
    (void)state;
    outcome missing = run("budget /nowhere/at/all.yaml");
    assert_int_equal(missing.code, 3);
    outcome picture = run_on("picture", "quarry_link.yaml", "/nowhere/at/all.png");
    assert_int_equal(picture.code, 3);
    assert_non_null(strstr(picture.err, "/nowhere/at/all.png"));
    outcome full = run_on("budget", "quarry_link.yaml", ">/dev/full");
    assert_int_equal(full.code, 3);
    free(missing.out);
    free(picture.out);
    free(full.out);
}

static void pictures_are_written_in_each_form(void **state)
{
    (void)state;
    static const struct {
        const char *ending, *start;
    } forms[] = {{"png", "\x89PNG"}, {"svg", "<?xml"}, {"pdf", "%PDF-"}};
    for (size_t i = 0; i < 3; i++) {
        char name[256], start[8] = {0};
        snprintf(name, sizeof name, "%s/page.%s", scratch, forms[i].ending);
        outcome result = run_on("picture", "ridge_station.yaml", name);
        assert_int_equal(result.code, 0);
        FILE *file = fopen(name, "rb");
        assert_non_null(file);
        assert_int_equal(fread(start, 1, strlen(forms[i].start), file), strlen(forms[i].start));
        assert_memory_equal(start, forms[i].start, strlen(forms[i].start));
        fclose(file);
        free(result.out);
    }
}

static void explain_knows_every_row(void **state)
{
    (void)state;
    outcome all = run("explain");
    assert_int_equal(all.code, 0);
    int rows = 0;
    for (char *save = NULL, *line = strtok_r(all.out, "\n", &save); line;
         line = strtok_r(NULL, "\n", &save)) {
        char name[64], arguments[128];
        if (sscanf(line, "  %63s", name) != 1 || line[0] != ' ')
            continue;
        snprintf(arguments, sizeof arguments, "explain %s", name);
        outcome one = run(arguments);
        if (one.code != 0 || !strstr(one.out, name))
            fail_msg("explain %s ended with %d", name, one.code);
        free(one.out);
        rows++;
    }
    assert_true(rows > 40);
    free(all.out);
}

static void text_and_json_agree(void **state)
{
    (void)state;
    json_t *tree = json_of("four_legs.yaml", "");
    outcome text = run_on("budget", "four_legs.yaml", "");
    char wanted[64];
    snprintf(wanted, sizeof wanted, "%.2f dBi", number_at(tree, "feeds.0.gain_on_axis_dbi"));
    assert_non_null(strstr(text.out, wanted));
    assert_non_null(strstr(text.out, json_string_value(at(tree, "verdict.text"))));
    json_decref(tree);
    free(text.out);
}

/* Without a display the window says so; it never runs unseen. */
static void no_display_is_said(void **state)
{
    (void)state;
    char command[1024];
    snprintf(command, sizeof command,
             "unset DISPLAY WAYLAND_DISPLAY; %s " EV_SCENES "/quarry_link.yaml 2>&1; echo code $?",
             EV_PROGRAM);
    FILE *pipe = popen(command, "r");
    assert_non_null(pipe);
    char *text = read_all(pipe);
    pclose(pipe);
    assert_non_null(strstr(text, "display"));
    assert_non_null(strstr(text, "code 3"));
    free(text);
}

static int make_scratch(void **state)
{
    (void)state;
    return mkdtemp(scratch) ? 0 : -1;
}

static int remove_scratch(void **state)
{
    (void)state;
    char command[128];
    snprintf(command, sizeof command, "rm -rf '%s'", scratch);
    return system(command);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(json_has_the_contract_keys),
        cmocka_unit_test(set_changes_what_it_names),
        cmocka_unit_test(all_frequencies_give_a_list),
        cmocka_unit_test(csv_is_rectangular),
        cmocka_unit_test(limits_decide_the_exit_code),
        cmocka_unit_test(beam_is_in_the_budget),
        cmocka_unit_test(compare_subtracts),
        cmocka_unit_test(fan_counts_the_shares),
        cmocka_unit_test(bad_input_ends_with_2),
        cmocka_unit_test(what_cannot_be_read_or_written_ends_with_3),
        cmocka_unit_test(pictures_are_written_in_each_form),
        cmocka_unit_test(explain_knows_every_row),
        cmocka_unit_test(text_and_json_agree),
        cmocka_unit_test(no_display_is_said),
    };
    return cmocka_run_group_tests(tests, make_scratch, remove_scratch);
}
