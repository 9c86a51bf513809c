/* Saving: only what changed is touched. Each case is a text, edits, and the whole text expected. */
#include "support.h"

#include "random_edit.h"
#include "scene/field.h"

#define BLOCK                                                                                      \
    "# whose problem it is\nevenpath: 1   # format\nfrequency: 12 GHz # licensed\nmain:\n"         \
    "    diameter:   1.2 m\n    # from the tape\n    focal_length: 28 3/8 in  # tape\n"            \
    "    offset: 0.66 m\nfeeds:\n  - name: main\n    exponent: 8    # guess\n"                     \
    "    shift: [0 mm, 0 in, 0 mm]  # x, y, z\n"
#define FLOW                                                                                       \
    "{\"evenpath\": 1, frequency: [12 GHz, 14 GHz], main: {diameter: 2 m, f_over_d: 0.4},\n"       \
    " feeds: [{name: a}, {name: b}]}\n"
#define QUOTED                                                                                     \
    "evenpath: 1\ntitle: \"old: one\"  # t\nfrequency: '12 GHz' # f\n"                             \
    "main: {diameter: 2 m, f_over_d: 0.4}\nfeeds: [{name: a}]\n"
#define LITERAL                                                                                    \
    "evenpath: 1\ntitle: |\n  two\n  lines\nfrequency: # up, down\n- 12 GHz\n- 14 GHz # down\n"    \
    "main: {diameter: 2 m, f_over_d: 0.4}\nfeeds: [{name: a}]\n"

/* Expected texts are given as what is replaced by what in `before`. */
typedef struct change {
    const char *from, *to;
} change;

static char *apply_change(char *text, change c)
{
    char *at = strstr(text, c.from);
    assert_non_null(at);
    size_t size = strlen(text) + strlen(c.to) + 1;
    char *changed = malloc(size);
    assert_non_null(changed);
    snprintf(changed, size, "%.*s%s%s", (int)(at - text), text, c.to, at + strlen(c.from));
    free(text);
    return changed;
}

static const struct {
    const char *text, *edits[4];
    change changes[4];
} cases[] = {
    /* values keep their unit, their comment and the blanks around them */
    {BLOCK, {"frequency=18.7 GHz"}, {{"12 GHz", "18.7 GHz"}}},
    {BLOCK, {"main.focal_length=0.762 m"}, {{"28 3/8 in", "30 in"}}},
    {BLOCK, {"feed.shift.y=25.4 mm"}, {{"0 in,", "1 in,"}}},
    {BLOCK, {"feed.shift=[-4 mm, 0 mm, 2 mm]"}, {{"[0 mm, 0 in, 0 mm]", "[-4 mm, 0 in, 2 mm]"}}},
    {BLOCK, {"feed.exponent=9.5"}, {{"exponent: 8 ", "exponent: 9.5 "}}},
    /* choices rename the key in place */
    {BLOCK, {"main.f_over_d=0.5"}, {{"focal_length: 28 3/8 in", "f_over_d: 0.5"}}},
    {BLOCK, {"main.clearance=0.1 m"}, {{"offset: 0.66 m", "clearance: 0.1 m"}}},
    {BLOCK, {"feed.edge_taper=11 dB"}, {{"exponent: 8", "edge_taper: 11 dB"}}},
    {BLOCK,
     {"feed.pattern=gaussian", "feed.edge_taper=10 dB"},
     {{"exponent: 8", "edge_taper: 10 dB"},
      {"  - name: main\n", "  - name: main\n    pattern: gaussian\n"}}},
    /* keys that were not there go to their neighbours */
    {BLOCK, {"title=Hall: west"}, {{"# format\n", "# format\ntitle: \"Hall: west\"\n"}}},
    {BLOCK, {"main.hole=50 mm"}, {{"offset: 0.66 m\n", "offset: 0.66 m\n    hole: 50 mm\n"}}},
    {BLOCK, {"feed.defocus=-0.5 mm"}, {{"# x, y, z\n", "# x, y, z\n    defocus: -0.5 mm\n"}}},
    {BLOCK, {"feed.toward=peak"}, {{"# x, y, z\n", "# x, y, z\n    toward: peak\n"}}},
    {BLOCK, {"feed.aim=[0,0,-1]"}, {{"# guess\n", "# guess\n    aim: [0, 0, -1]\n"}}},
    {BLOCK, {"feed.name=horn"}, {{"name: main", "name: horn"}}},
    {BLOCK, {"frequency=[1 GHz, 2 GHz]"}, {{"12 GHz", "[1 GHz, 2 GHz]"}}},
    /* whole sections */
    {BLOCK,
     {"site.elevation=40 deg"},
     {{"# x, y, z\n", "# x, y, z\nsite:\n    elevation: 40 deg\n"}}},
    {BLOCK, {"losses.ohmic=0.1 dB"}, {{"# x, y, z\n", "# x, y, z\nlosses:\n    ohmic: 0.1 dB\n"}}},
    {BLOCK,
     {"sub.shape=ellipsoid"},
     {{"0.66 m\n",
       "0.66 m\nsub:\n    shape: ellipsoid\n    magnification: 5\n    interfocal: 400 mm\n"}}},
    /* quotes and lines of their own */
    {QUOTED, {"title=new # two"}, {{"old: one", "new # two"}}},
    {QUOTED, {"title=new"}, {{"old: one", "new"}}},
    {QUOTED, {"frequency=13 GHz"}, {{"'12 GHz'", "13 GHz"}}},
    {LITERAL, {"title=one"}, {{" |\n  two\n  lines", " one"}}},
    {LITERAL, {"frequency=[12 GHz, 15 GHz]"}, {{"14 GHz", "15 GHz"}}},
    {LITERAL, {"frequency=[1 GHz]"}, {{" # up, down\n- 12 GHz\n- 14 GHz", " 1 GHz"}}},
    /* flow style stays flow style */
    {FLOW, {"frequency=[12 GHz, 15 GHz]"}, {{"14 GHz", "15 GHz"}}},
    {FLOW, {"main.hole=50 mm"}, {{"f_over_d: 0.4", "f_over_d: 0.4, hole: 50 mm"}}},
    {FLOW, {"feeds.b.roll=3 deg"}, {{"{name: b}", "{name: b, roll: 3 deg}"}}},
    {FLOW, {"title=a, b"}, {{"\"evenpath\": 1", "\"evenpath\": 1, title: \"a, b\""}}},
    {FLOW, {"site.sky=4 K"}, {{"{name: b}]", "{name: b}], site: {sky: 4 K}"}}},
    {FLOW, {"main.depth=0.3 m"}, {{"f_over_d: 0.4", "depth: 300 mm"}}},
};

static char *text_of(const ev_scene *scene, const ev_design *design)
{
    size_t size;
    char *text = ev_scene_text(scene, design, &size);
    assert_int_equal(strlen(text), size);
    return text;
}

static void expect_same_after_reading(const char *text, const ev_design *design)
{
    ev_scene *again = parse_good(text);
    if (!ev_design_same(ev_scene_design(again), design))
        fail_msg("reads back as another design:\n%s", text);
    ev_scene_destroy(again);
}

static void splices_only_what_changed(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_scene *scene = parse_good(cases[i].text);
        ev_design design = *ev_scene_design(scene);
        char *expected = strdup(cases[i].text);
        for (int k = 0; k < 4 && cases[i].edits[k]; k++)
            assign_good(scene, &design, cases[i].edits[k]);
        for (int k = 0; k < 4 && cases[i].changes[k].from; k++)
            expected = apply_change(expected, cases[i].changes[k]);
        char *text = text_of(scene, &design);
        assert_string_equal(text, expected);
        expect_same_after_reading(text, &design);
        free(text);
        free(expected);
        ev_scene_destroy(scene);
    }
}

/* Entries come and go in the document's own style. */
static void inserts_and_removes_entries(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(BLOCK "  - name: second\n    toward: [0 deg, 3 deg]  # east\n"
                                       "struts:\n# steel\n- {name: legs, width: 10 mm, to: 0.6 m}\n"
                                       "- {name: stay, width: 2 mm, to: 0.6 m} # wire\n");
    ev_design design = *ev_scene_design(scene);
    design.feeds[2] = design.feeds[1];
    design.feeds[1] = ev_default_feed();
    strcpy(design.feeds[1].name, "middle");
    design.feed_count = 3;
    design.struts[0] = design.struts[1];
    design.struts[1] = ev_default_strut();
    strcpy(design.struts[1].name, "new");
    ev_design_resolve(&design);
    char *text = text_of(scene, &design);
    assert_string_equal(text, BLOCK "  - name: middle\n"
                                    "  - name: second\n    toward: [0 deg, 3 deg]  # east\n"
                                    "struts:\n# steel\n"
                                    "- {name: stay, width: 2 mm, to: 0.6 m} # wire\n"
                                    "- {name: new}\n");
    expect_same_after_reading(text, &design);
    free(text);
    design.feeds[0] = design.feeds[2];
    design.feed_count = 1;
    design.strut_count = 0;
    text = text_of(scene, &design);
    assert_non_null(strstr(text, "feeds:\n  - name: second\n    toward"));
    assert_null(strstr(text, "struts"));
    expect_same_after_reading(text, &design);
    free(text);
    ev_scene_destroy(scene);
}

/* Entries without a name are called by their place; one that moves up must be named. */
static void names_what_was_called_by_its_place(void **state)
{
    (void)state;
    ev_scene *scene = parse_good("evenpath: 1\nfrequency: 12 GHz\n"
                                 "main: {diameter: 2 m, f_over_d: 0.4}\n"
                                 "feeds: [{roll: 1 deg}, {roll: 2 deg}, {roll: 3 deg}]\n");
    ev_design design = *ev_scene_design(scene);
    design.feeds[0] = design.feeds[1];
    design.feeds[1] = design.feeds[2];
    design.feed_count = 2;
    char *text = text_of(scene, &design);
    assert_non_null(
        strstr(text, "feeds: [{name: main2, roll: 2 deg}, {name: main3, roll: 3 deg}]"));
    expect_same_after_reading(text, &design);
    free(text);
    ev_scene_destroy(scene);
}

static void removes_sections(void **state)
{
    (void)state;
    ev_scene *scene = parse_good("evenpath: 1\nfrequency: 12 GHz\nsub: # later\n"
                                 "  {shape: hyperboloid, magnification: 5, diameter: 0.3 m}\n"
                                 "main: {diameter: 3 m, f_over_d: 0.4}\n\nfeeds: [{}]\n"
                                 "site: {sky: 4 K} # cold\n# the end\n");
    ev_design design = *ev_scene_design(scene);
    design.sub.present = design.site.present = false;
    ev_design_resolve(&design);
    char *text = text_of(scene, &design);
    assert_string_equal(text, "evenpath: 1\nfrequency: 12 GHz\n"
                              "main: {diameter: 3 m, f_over_d: 0.4}\n\nfeeds: [{}]\n"
                              "# the end\n");
    free(text);
    ev_scene_destroy(scene);
}

static void keeps_line_ends(void **state)
{
    (void)state;
    ev_scene *scene = parse_good("evenpath: 1\r\nfrequency: 12 GHz\r\nmain:\r\n  diameter: 2 m\r\n"
                                 "  f_over_d: 0.4\r\nfeeds:\r\n- name: a");
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "main.hole=5 mm");
    assign_good(scene, &design, "feed.roll=1 deg");
    char *text = text_of(scene, &design);
    assert_string_equal(text, "evenpath: 1\r\nfrequency: 12 GHz\r\nmain:\r\n  diameter: 2 m\r\n"
                              "  f_over_d: 0.4\r\n  hole: 5 mm\r\nfeeds:\r\n- name: a\r\n"
                              "  roll: 1 deg");
    free(text);
    ev_scene_destroy(scene);
}

static void renames_of_three_in_place(void **state)
{
    (void)state;
    ev_scene *scene =
        parse_good("evenpath: 1\nfrequency: 12 GHz\nmain: {diameter: 3 m, f_over_d: 0.4}\n"
                   "feeds: [{}]\nsub:\n  magnification: 5   # wish\n  diameter: 0.3 m  # stock\n"
                   "  shape: hyperboloid\n");
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "sub.eccentricity=1.6");
    assign_good(scene, &design, "sub.interfocal=0.8 m");
    char *text = text_of(scene, &design);
    assert_non_null(strstr(text, "  eccentricity: 1.6   # wish\n  interfocal: 0.8 m  # stock\n"));
    expect_same_after_reading(text, &design);
    free(text);
    assign_good(scene, &design, "sub.diameter=0.28 m");
    text = text_of(scene, &design);
    assert_non_null(strstr(text, "  interfocal: 800 mm   # wish\n  diameter: 0.28 m  # stock\n"));
    expect_same_after_reading(text, &design);
    free(text);
    ev_scene_destroy(scene);
}

/* A person's own spelling is written, and only for the value it was of. */
static void keeps_a_remembered_spelling(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(BLOCK);
    ev_design design = *ev_scene_design(scene);
    ev_scene_remember_spelling(scene, "feeds.main.defocus", 0.009525, "3/8 in");
    ev_scene_remember_spelling(scene, "feeds.main.shift.x", 0.0254, "1 in # not a value");
    ev_scene_remember_spelling(scene, "feeds.main.shift.z", 0.5, "2 in"); /* of another value */
    assign_good(scene, &design, "feed.shift.z=50.8 mm");
    assign_good(scene, &design, "feed.defocus=9.525 mm");
    assign_good(scene, &design, "feed.shift.x=25.4 mm");
    char *text = text_of(scene, &design);
    assert_non_null(strstr(text, "    defocus: 3/8 in\n"));
    assert_non_null(strstr(text, "[25.4 mm, 0 in, 50.8 mm]"));
    free(text);
    assign_good(scene, &design, "feed.defocus=10 mm");
    text = text_of(scene, &design);
    assert_non_null(strstr(text, "    defocus: 10 mm\n"));
    free(text);
    ev_scene_destroy(scene);
}

static void unchanged_is_byte_identical(void **state)
{
    (void)state;
    for (int i = 0; i < SCENE_COUNT; i++) {
        char path[512];
        snprintf(path, sizeof path, "%s/%s.yaml", EV_SCENES, scene_names[i]);
        FILE *file = fopen(path, "r");
        assert_non_null(file);
        char *bytes = calloc(1, 20000);
        size_t size = fread(bytes, 1, 19999, file);
        fclose(file);
        ev_scene *scene = load_example(scene_names[i]);
        char *text = text_of(scene, ev_scene_design(scene));
        assert_int_equal(strlen(text), size);
        assert_memory_equal(text, bytes, size);
        free(text);
        free(bytes);
        ev_scene_destroy(scene);
    }
}

/* A parse that finds pattern tables beside the scenes. */
static ev_scene *parse_beside_scenes(const char *text)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_parse(text, strlen(text), EV_SCENES "/edited.yaml", &d);
    if (scene == NULL) {
        ev_diagnostics_print(&d, stderr);
        fail_msg("does not read back:\n%s", text);
    }
    ev_diagnostics_clear(&d);
    return scene;
}

/* Every comment of the file, in its order, is still there. */
static void expect_comments(const char *before, const char *after)
{
    const char *at = after;
    for (const char *mark = strstr(before, "# "); mark; mark = strstr(mark + 1, "# ")) {
        bool starts_line = mark == before || mark[-1] == '\n';
        char comment[200];
        if (!starts_line)
            continue; /* a comment behind a value goes with an entry that goes */
        snprintf(comment, sizeof comment, "%.*s", (int)strcspn(mark, "\n"), mark);
        at = strstr(at, comment);
        assert_non_null(at);
    }
}

/* Any edits of any scene: the text reads back to the same design, edits upon edits. */
static void random_edits_read_back(void **state)
{
    (void)state;
    uint64_t seed = 20261201;
    print_message("seed 20261201\n");
    for (int i = 0; i < SCENE_COUNT; i++) {
        for (int round = 0; round < 60; round++) {
            ev_scene *scene = load_example(scene_names[i]);
            char *original = text_of(scene, ev_scene_design(scene));
            for (int step = 0; step < 4; step++) {
                ev_design design = *ev_scene_design(scene);
                for (int k = 0; k <= random_below(&seed, 5); k++)
                    random_edit(&seed, scene, &design);
                char *text = text_of(scene, &design);
                ev_scene *again = parse_beside_scenes(text);
                if (!ev_design_same(ev_scene_design(again), &design))
                    fail_msg("reads back as another design:\n%s", text);
                expect_comments(original, text);
                free(text);
                ev_scene_destroy(scene);
                scene = again;
            }
            free(original);
            ev_scene_destroy(scene);
        }
    }
}

/* A design that no file says yet. */
static void writes_a_clean_document(void **state)
{
    (void)state;
    ev_design design = ev_default_design();
    ev_scene *fresh = ev_scene_create(&design);
    char *text = text_of(fresh, &design);
    assert_string_equal(text, "evenpath: 1\nfrequency: 12 GHz\nmain:\n  diameter: 1.2 m\n"
                              "  f_over_d: 0.45\nfeeds:\n  - name: main\n");
    free(text);
    for (int i = 0; i < SCENE_COUNT; i++) {
        ev_scene *scene = load_example(scene_names[i]);
        text = text_of(fresh, ev_scene_design(scene));
        ev_scene *again = parse_beside_scenes(text);
        assert_true(ev_design_same(ev_scene_design(again), ev_scene_design(scene)));
        ev_scene_destroy(again);
        free(text);
        ev_scene_destroy(scene);
    }
    ev_scene_destroy(fresh);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(splices_only_what_changed),
        cmocka_unit_test(inserts_and_removes_entries),
        cmocka_unit_test(names_what_was_called_by_its_place),
        cmocka_unit_test(removes_sections),
        cmocka_unit_test(keeps_line_ends),
        cmocka_unit_test(renames_of_three_in_place),
        cmocka_unit_test(keeps_a_remembered_spelling),
        cmocka_unit_test(unchanged_is_byte_identical),
        cmocka_unit_test(random_edits_read_back),
        cmocka_unit_test(writes_a_clean_document),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
