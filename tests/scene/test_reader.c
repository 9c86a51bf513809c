/* The loader: defaults, every form a value may take, and for every mistake its id, line and
 * column; several mistakes in one go. */
#include "support.h"

#include <math.h>
#include <sys/stat.h>
#include <unistd.h>

#define HEAD "evenpath: 1\nfrequency: 12 GHz\n"
#define MAIN "main: {diameter: 2 m, f_over_d: 0.4}\n"
#define FEEDS "feeds: [{name: a}]\n"
#define REST MAIN FEEDS

typedef struct bad_scene {
    const char *id;
    int line, column;
    const char *text;
} bad_scene;

static const bad_scene bad_scenes[] = {
    /* text */
    {"scene_empty", 1, 1, ""},
    {"scene_empty", 1, 1, "# only a comment\n"},
    {"not_utf8", 2, 8, "evenpath: 1\ntitle: \xFFx\n"},
    {"control_character", 2, 9, "evenpath: 1\ntitle: a\x01\n"},
    {"yaml_syntax", 2, 1, "evenpath: 1\nmain\nfrequency: 3 GHz\n"},
    {"yaml_syntax", 3, 1, "evenpath: 1\nmain: {diameter: 1 m\n"},
    {"yaml_alias", 2, 8, "evenpath: 1\nmain: &m {diameter: 2 m}\n"},
    {"yaml_alias", 2, 8, "evenpath: 1\nmain: *m\n"},
    {"yaml_alias", 2, 8, "evenpath: 1\ntitle: !!str x\n"},
    {"yaml_several", 2, 1, "evenpath: 1\n---\nevenpath: 1\n"},
    {"yaml_too_deep", 1, 19, "a: [[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[\n"},
    {"key_not_plain", 1, 3, "? [a]\n: b\n"},
    {"not_mapping", 1, 1, "just words\n"},
    {"not_mapping", 1, 1, "- a list\n"},
    /* version */
    {"version_missing", 1, 1, "frequency: 12 GHz\n" REST},
    {"version_wrong", 1, 11, "evenpath: 2\nfrequency: 12 GHz\n" REST},
    {"version_wrong", 1, 11, "evenpath: [1]\nfrequency: 12 GHz\n" REST},
    /* keys */
    {"key_unknown", 3, 1, HEAD "titel: x\n" REST},
    {"key_unknown", 4, 3, HEAD "main:\n  diamter: 3 m\n  diameter: 2 m\n  f_over_d: 0.4\n" FEEDS},
    {"key_unknown_list", 3, 1, HEAD "zzzzzzzz: x\n" REST},
    {"key_misplaced", 3, 1, HEAD "edge_taper: 11 dB\n" REST},
    {"key_misplaced", 4, 19, HEAD MAIN "feeds: [{name: a, offset: 1 m}]\n"},
    {"key_duplicate", 3, 1, HEAD "frequency: 13 GHz\n" REST},
    {"key_duplicate", 5, 1, HEAD REST "main: {diameter: 1 m, depth: 1 m}\n"},
    {"key_missing", 1, 1, "evenpath: 1\n" REST},
    {"key_missing", 3, 1, HEAD "main: {f_over_d: 0.4}\n" FEEDS},
    {"key_missing_choice", 3, 1, HEAD "main: {diameter: 2 m}\n" FEEDS},
    {"key_missing", 1, 1, HEAD FEEDS},
    {"key_missing", 1, 1, HEAD MAIN},
    {"key_missing", 4, 8, HEAD MAIN "feeds: []\n"},
    {"choice_two", 3, 38, HEAD "main: {diameter: 2 m, f_over_d: 0.4, depth: 1 m}\n" FEEDS},
    {"choice_two", 3, 51,
     HEAD "main: {diameter: 2 m, f_over_d: 0.4, offset: 1 m, clearance: 0 m}\n" FEEDS},
    {"choice_two", 4, 32, HEAD MAIN "feeds: [{name: a, exponent: 2, edge_taper: 11 dB}]\n"},
    {"sub_one", 5, 1, HEAD REST "sub: {shape: ellipsoid, magnification: 5}\n"},
    {"sub_one", 5, 1, HEAD REST "sub: {shape: ellipsoid}\n"},
    {"sub_three", 9, 3,
     HEAD REST "sub:\n  shape: hyperboloid\n  magnification: 5\n  interfocal: 0.5 m\n"
               "  diameter: 0.2 m\n"},
    {"key_missing", 5, 1, HEAD REST "sub: {magnification: 5, diameter: 0.2 m}\n"},
    /* values */
    {"not_mapping", 3, 7, HEAD "main: 3\n" FEEDS},
    {"not_mapping", 3, 6, HEAD "main:\n" FEEDS},
    {"not_list", 4, 8, HEAD MAIN "feeds: {name: a}\n"},
    {"not_mapping", 4, 9, HEAD MAIN "feeds: [a]\n"},
    {"not_value", 2, 12, "evenpath: 1\nfrequency: {a: 1}\n" REST},
    {"not_value", 2, 12, "evenpath: 1\nfrequency: []\n" REST},
    {"not_value", 2, 13, "evenpath: 1\nfrequency: [[1 GHz]]\n" REST},
    {"not_value", 3, 7, HEAD "title:\n" REST},
    {"not_value", 4, 26, HEAD MAIN "feeds: [{name: a, shift: 3 mm}]\n"},
    {"not_value", 4, 28, HEAD MAIN "feeds: [{name: a, pattern: [x]}]\n"},
    {"vector_count", 4, 26, HEAD MAIN "feeds: [{name: a, shift: [1 mm, 2 mm]}]\n"},
    {"vector_count", 4, 27, HEAD MAIN "feeds: [{name: a, toward: []}]\n"},
    {"not_number", 3, 18, HEAD "main: {diameter: wide, f_over_d: 0.4}\n" FEEDS},
    {"not_number", 3, 18, HEAD "main: {diameter: \"1,2 m\", f_over_d: 0.4}\n" FEEDS},
    {"unit_missing", 3, 18, HEAD "main: {diameter: 2, f_over_d: 0.4}\n" FEEDS},
    {"unit_missing", 2, 12, "evenpath: 1\nfrequency: 12\n" REST},
    {"unit_unknown", 3, 20, HEAD "main: {diameter: 2 yd, f_over_d: 0.4}\n" FEEDS},
    {"unit_unknown", 2, 15, "evenpath: 1\nfrequency: 12 ghz\n" REST},
    {"unit_unknown", 4, 33, HEAD MAIN "feeds: [{name: a, edge_taper: 3 m}]\n"},
    {"unit_unwanted", 3, 37, HEAD "main: {diameter: 2 m, f_over_d: 0.4 m}\n" FEEDS},
    {"not_finite", 3, 18, HEAD "main: {diameter: .nan m, f_over_d: 0.4}\n" FEEDS},
    {"not_finite", 3, 18, HEAD "main: {diameter: 1e999 m, f_over_d: 0.4}\n" FEEDS},
    {"out_of_range", 3, 18, HEAD "main: {diameter: -2 m, f_over_d: 0.4}\n" FEEDS},
    {"out_of_range", 3, 37, HEAD "main: {diameter: 2 m, focal_length: 0 m}\n" FEEDS},
    {"out_of_range", 4, 29, HEAD MAIN "feeds: [{name: a, exponent: 1e9}]\n"},
    {"out_of_range", 5, 27, HEAD REST "struts: [{to: 1 m, count: 0}]\n"},
    {"not_whole", 5, 27, HEAD REST "struts: [{to: 1 m, count: 2.5}]\n"},
    {"word_unknown", 4, 28, HEAD MAIN "feeds: [{name: a, pattern: cosine}]\n"},
    {"word_unknown", 4, 24, HEAD MAIN "feeds: [{name: a, aim: up}]\n"},
    {"word_is_vector", 4, 24, HEAD MAIN "feeds: [{name: a, aim: direction}]\n"},
    {"exponent_on_gaussian", 4, 38,
     HEAD MAIN "feeds: [{name: a, pattern: gaussian, exponent: 2}]\n"},
    {"name_illegal", 4, 16, HEAD MAIN "feeds: [{name: a.b}]\n"},
    {"name_illegal", 4, 16, HEAD MAIN "feeds: [{name: ' a'}]\n"},
    {"text_empty", 4, 16, HEAD MAIN "feeds: [{name: ''}]\n"},
    {"name_twice", 4, 27, HEAD MAIN "feeds: [{name: a}, {name: a}]\n"},
    {"text_too_long", 4, 16,
     HEAD MAIN "feeds: [{name: aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa}]\n"},
    {"list_count", 4, 1, HEAD MAIN "feeds: [{},{},{},{},{},{},{},{},{}]\n"},
    {"file_missing", 0, 0, HEAD MAIN "feeds: [{name: a, pattern: table, table: none.csv}]\n"},
    /* geometry, at the line of the parameter */
    {"depth_with_offset", 3, 30, HEAD "main: {diameter: 2 m, depth: 0.4 m, offset: 1.1 m}\n" FEEDS},
    {"hole_too_large", 3, 44, HEAD "main: {diameter: 2 m, f_over_d: 0.4, hole: 3 m}\n" FEEDS},
    {"strut_radii", 5, 17, HEAD REST "struts: [{from: 2 m, to: 1 m}]\n"},
    {"feed_without_table", 4, 10, HEAD MAIN "feeds: [{name: a, pattern: table}]\n"},
};

/* One error, of that id, at that place. */
static bool is_refused(const bad_scene *bad)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_parse(bad->text, strlen(bad->text), "bad.yaml", &d);
    const ev_diagnostic *item = &d.items[0];
    bool right = scene == NULL && d.error_count == 1 && strcmp(item->id, bad->id) == 0 &&
                 item->line == bad->line && item->column == bad->column;
    if (!right) {
        print_error("expected %s at %d:%d, found %s at %d:%d, of %d\n", bad->id, bad->line,
                    bad->column, d.count ? item->id : "nothing", d.count ? item->line : 0,
                    d.count ? item->column : 0, d.error_count);
        ev_diagnostics_print(&d, stderr);
    }
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&d);
    return right;
}

static void refuses_and_points(void **state)
{
    (void)state;
    int wrong = 0;
    for (size_t i = 0; i < sizeof bad_scenes / sizeof bad_scenes[0]; i++)
        wrong += !is_refused(&bad_scenes[i]);
    assert_int_equal(wrong, 0);
}

/* A zero byte ends a C string but not a file. */
static void refuses_a_zero_byte(void **state)
{
    (void)state;
    static const char text[] = HEAD REST "\0title: x\n";
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_null(ev_scene_parse(text, sizeof text - 1, "bad.yaml", &d));
    assert_string_equal(d.items[0].id, "control_character");
    ev_diagnostics_clear(&d);
}

static void finds_all_mistakes_in_one_go(void **state)
{
    (void)state;
    static const char text[] = "evenpath: 1\nfrequency: 12\nmain:\n  diamter: 2 m\n  f_over_d: x\n"
                               "feeds:\n  - name: a\n    exponent: 2 m\n  - name: a\n"
                               "sub: {shape: round}\nwhat: 3\n";
    static const char *const ids[] = {"unit_missing", "key_unknown",   "not_number",
                                      "key_missing",  "unit_unwanted", "name_twice",
                                      "word_unknown", "sub_one",       "key_unknown_list"};
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_null(ev_scene_parse(text, strlen(text), "bad.yaml", &d));
    assert_int_equal(d.error_count, sizeof ids / sizeof ids[0]);
    for (int i = 0; i < d.count; i++)
        assert_string_equal(d.items[i].id, ids[i]);
    ev_diagnostics_clear(&d);
}

static void the_message_shows_the_line_and_the_nearest_key(void **state)
{
    (void)state;
    static const char text[] = HEAD "main:\n  diameter: 2 m   # wide\n  f_ovr_d: 0.4\n" FEEDS;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_null(ev_scene_parse(text, strlen(text), "s.yaml", &d));
    assert_string_equal(d.items[0].file, "s.yaml");
    assert_string_equal(d.items[0].source, "  f_ovr_d: 0.4");
    assert_int_equal(d.items[0].width, 7);
    assert_non_null(strstr(d.items[0].text, "'f_over_d'"));
    ev_diagnostics_clear(&d);
}

static void reads_every_form(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(
        "\xEF\xBB\xBF" /* a byte order mark, as some editors write it */
        "evenpath: 1\r\ntitle: 'It''s: a \"test\"'\r\nfrequency:\r\n- 12 GHz\r\n- \"14 GHz\"\r\n"
        "main:\r\n  {diameter: 24 in, focal_length: 9 5/8 in, clearance: 1.5 cm,}\r\n"
        "feeds:\r\n- pattern: gaussian\r\n  edge_taper: 10 dB\r\n  shift:\r\n  - 1 mm\r\n"
        "  - -2 mm\r\n  - 3/8 in\r\n  tilt: [1 deg, 60 arcmin]\r\n  toward: peak\r\n"
        "- {aim: [0, 0.5, -1], toward: [0 deg, 3 deg], polarization: lhcp}\r\n"
        "struts: []\r\nsite: {elevation: 20 deg}\r\n");
    const ev_design *design = ev_scene_design(scene);
    assert_string_equal(design->title, "It's: a \"test\"");
    assert_int_equal(design->frequency_count, 2);
    assert_true(design->frequencies[1] == 14e9);
    assert_true(design->main.diameter == 0.6096);
    assert_true(design->main.focal_length == 0.244475);
    assert_true(fabs(design->main.offset - 0.3198) < 1e-15);
    assert_string_equal(design->feeds[0].name, "main");
    assert_string_equal(design->feeds[1].name, "main2");
    assert_int_equal(design->feeds[0].pattern, EV_PATTERN_GAUSSIAN);
    assert_true(design->feeds[0].shift.y == -0.002 && design->feeds[0].shift.z == 0.009525);
    assert_true(design->feeds[0].tilt_x == design->feeds[0].tilt_y);
    assert_true(design->feeds[0].toward_peak);
    assert_int_equal(design->feeds[1].aim, EV_AIM_DIRECTION);
    assert_true(design->feeds[1].aim_direction.y == 0.5);
    assert_false(design->feeds[1].toward_peak);
    assert_int_equal(design->feeds[1].polarization, EV_POLARIZATION_LHCP);
    assert_int_equal(design->strut_count, 0);
    assert_true(design->site.present && design->site.ground == 290.0);
    assert_false(design->sub.present);
    ev_scene_destroy(scene);
}

/* The order of keys means nothing. */
static void reads_sub_pairs(void **state)
{
    (void)state;
    static const struct {
        const char *given;
        ev_sub_derived derived;
    } cases[] = {
        {"magnification: 5, interfocal: 0.4 m", EV_DERIVED_DIAMETER},
        {"interfocal: 0.4 m, eccentricity: 1.5", EV_DERIVED_DIAMETER},
        {"diameter: 0.2 m, magnification: 5", EV_DERIVED_INTERFOCAL},
        {"eccentricity: 1.5, diameter: 0.2 m", EV_DERIVED_INTERFOCAL},
        {"interfocal: 0.4 m, diameter: 0.2 m", EV_DERIVED_SHAPE},
        {"diameter: 0.2 m, interfocal: 0.4 m", EV_DERIVED_SHAPE},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        char text[400];
        snprintf(text, sizeof text, HEAD REST "sub: {%s, shape: hyperboloid}\n", cases[i].given);
        ev_scene *scene = parse_good(text);
        assert_int_equal(ev_scene_design(scene)->sub.derived, cases[i].derived);
        ev_scene_destroy(scene);
    }
}

static void expect_load_failure(const char *path, const char *id)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_null(ev_scene_load(path, &d));
    assert_int_equal(d.count, 1);
    assert_string_equal(d.items[0].id, id);
    ev_diagnostics_clear(&d);
}

static void refuses_what_is_no_scene_file(void **state)
{
    (void)state;
    expect_load_failure(".", "file_is_folder");
    expect_load_failure("no-such-scene.yaml", "file_missing");
    expect_load_failure("/dev/zero", "file_not_regular");
    char path[] = "large_XXXXXX";
    int file = mkstemp(path);
    assert_true(file >= 0);
    expect_load_failure(path, "scene_empty");
    assert_int_equal(ftruncate(file, 100 << 20), 0);
    close(file);
    expect_load_failure(path, "file_too_large");
    unlink(path);
}

/* Thousands of values in a file that is not too large. */
static void refuses_too_many_values(void **state)
{
    (void)state;
    char *text = malloc(200000);
    assert_non_null(text);
    strcpy(text, "evenpath: 1\nfrequency: [");
    size_t length = strlen(text);
    for (int i = 0; i < 60000; i++) {
        text[length++] = '1';
        text[length++] = ',';
    }
    strcpy(text + length, "]\n");
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_null(ev_scene_parse(text, strlen(text), "bad.yaml", &d));
    assert_string_equal(d.items[0].id, "yaml_too_many");
    ev_diagnostics_clear(&d);
    free(text);
}

/* A small dish is a caution, not a refusal. */
static void warnings_still_load(void **state)
{
    (void)state;
    static const char text[] =
        "evenpath: 1\nfrequency: 1 GHz\nmain: {diameter: 2 m, f_over_d: 0.4}\n" FEEDS;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_parse(text, strlen(text), "small.yaml", &d);
    assert_non_null(scene);
    assert_int_equal(d.error_count, 0);
    assert_string_equal(d.items[0].id, "dish_small");
    assert_int_equal(d.items[0].line, 3);
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&d);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(refuses_and_points),
        cmocka_unit_test(refuses_a_zero_byte),
        cmocka_unit_test(finds_all_mistakes_in_one_go),
        cmocka_unit_test(the_message_shows_the_line_and_the_nearest_key),
        cmocka_unit_test(reads_every_form),
        cmocka_unit_test(reads_sub_pairs),
        cmocka_unit_test(refuses_what_is_no_scene_file),
        cmocka_unit_test(refuses_too_many_values),
        cmocka_unit_test(warnings_still_load),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
