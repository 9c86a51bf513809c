/* --set: every form of address and value, and what is refused. */
#include "support.h"

#include <math.h>

static const char offset_scene[] =
    "evenpath: 1\nfrequency: [12 GHz, 14 GHz]\n"
    "main: {diameter: 1.2 m, focal_length: 0.72 m, clearance: 60 mm}\n"
    "feeds: [{name: main, exponent: 8}, {name: second}]\n"
    "struts: [{name: legs, width: 20 mm, to: 0.6 m}]\n";

static void sets_every_form(void **state)
{
    (void)state;
    static const struct {
        const char *assignment, *address;
        double value;
    } cases[] = {
        {"feed.defocus=3/8 in", "feeds.main.defocus", 0.009525},
        {" feed.defocus = -5 mm ", "feed.defocus", -0.005},
        {"feeds.second.exponent=3", "feeds.second.exponent", 3.0},
        {"feeds.second.shift.y=5mm", "feeds.second.shift.y", 0.005},
        {"feed.shift=[0 mm, 5 mm, 1 cm]", "feed.shift.z", 0.01},
        {"feed.tilt=[0 deg,1 rad]", "feed.tilt.y", 1.0},
        {"feed.toward=peak", "feed.toward", 1.0},
        {"feed.toward=[0 deg, 0.1 rad]", "feed.toward.y", 0.1},
        {"feed.aim=centre", "feed.aim", EV_AIM_CENTRE},
        {"feed.aim=[0,0,-1]", "feed.aim", EV_AIM_DIRECTION},
        {"feed.aim=[0.5,0,-1]", "feed.aim.x", 0.5},
        {"feed.aim=direction", "feed.aim", EV_AIM_DIRECTION},
        {"feed.polarization=lhcp", "feed.polarization", EV_POLARIZATION_LHCP},
        {"frequency=10 GHz", "frequency", 10e9},
        {"frequency=[20 GHz]", "frequency", 20e9},
        {"main.f_over_d=0.5", "main.focal_length", 0.6},
        {"strut.count=3", "struts.legs.count", 3.0},
        {"struts.legs.width=1/2 in", "strut.width", 0.0127},
        {"site.elevation=40 deg", "site.ground", 290.0},
        {"losses.ohmic=0.2 dB", "losses.ohmic", 0.2},
    };
    ev_scene *scene = parse_good(offset_scene);
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_design design = *ev_scene_design(scene);
        print_message("%s\n", cases[i].assignment);
        assign_good(scene, &design, cases[i].assignment);
        assert_true(fabs(get_value(&design, cases[i].address) - cases[i].value) < 1e-15);
    }
    ev_scene_destroy(scene);
}

static void keeps_or_replaces_the_list(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "frequency=10 GHz");
    assert_int_equal(design.frequency_count, 2);
    assert_true(design.frequencies[1] == 14e9);
    assign_good(scene, &design, "frequency=[1 GHz, 2 GHz, 3 GHz]");
    assert_int_equal(design.frequency_count, 3);
    ev_scene_destroy(scene);
}

static void sets_texts_and_names(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "title=A = B: [c]");
    assert_string_equal(design.title, "A = B: [c]");
    assign_good(scene, &design, "feed.name=first horn");
    assign_good(scene, &design, "feeds.first horn.roll=1 deg");
    assert_true(design.feeds[0].roll > 0.0);
    ev_scene_destroy(scene);
}

/* A subreflector comes with its shape and then takes the rest. */
static void adds_a_subreflector(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "sub.shape=ellipsoid");
    assert_true(design.sub.present);
    assert_int_equal(design.sub.shape, EV_SUB_ELLIPSOID);
    assign_good(scene, &design, "sub.magnification=12");
    assert_int_equal(design.sub.shape_given, EV_GIVEN_MAGNIFICATION);
    assign_good(scene, &design, "sub.eccentricity=0.5");
    assert_int_equal(design.sub.shape_given, EV_GIVEN_ECCENTRICITY);
    assert_true(fabs(get_value(&design, "sub.magnification") - 3.0) < 1e-15);
    ev_scene_destroy(scene);
}

static void refuses(void **state)
{
    (void)state;
    static const char *const cases[][2] = {
        {"", "assignment_form"},
        {"feed.defocus", "assignment_form"},
        {"=3", "assignment_form"},
        {"feed.defocsu=3 mm", "address_unknown"},
        {"feeds.third.defocus=3 mm", "address_unknown"},
        {"feeds.=3 mm", "address_unknown"},
        {"feed.defocus=", "not_number"},
        {"feed.defocus=3", "unit_missing"},
        {"feed.defocus=3 GHz", "unit_unknown"},
        {"feed.exponent=3 m", "unit_unwanted"},
        {"feed.exponent=nan", "not_finite"},
        {"feed.exponent=-1", "out_of_range"},
        {"strut.count=2.5", "not_whole"},
        {"feed.polarization=z", "word_unknown"},
        {"feed.shift=3 mm", "not_value"},
        {"feed.shift=[3 mm]", "vector_count"},
        {"feed.shift=[3 mm, 1, 2 mm]", "unit_missing"},
        {"feed.shift=[3 mm", "yaml_syntax"},
        {"feed.shift.x=[3 mm, 1 mm, 2 mm]", "not_number"},
        {"feed.exponent=[3]", "not_value"},
        {"feed.name=second", "name_twice"},
        {"feed.name=a.b", "name_illegal"},
        {"sub.magnification=12", "sub_absent"},
        {"sub.shape=round", "word_unknown"},
        {"feed.table=none.csv", "no error"},
    };
    ev_scene *scene = parse_good(offset_scene);
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_design design = *ev_scene_design(scene), before = design;
        ev_diagnostics d;
        ev_diagnostics_init(&d);
        print_message("%s\n", cases[i][0]);
        bool wanted = strcmp(cases[i][1], "no error") == 0;
        assert_int_equal(ev_scene_assign(scene, &design, 0, cases[i][0], &d), wanted);
        if (!wanted) {
            assert_int_equal(d.error_count, 1);
            assert_string_equal(d.items[0].id, cases[i][1]);
            assert_memory_equal(&design, &before, sizeof design);
        }
        ev_diagnostics_clear(&d);
    }
    ev_scene_destroy(scene);
}

static void a_gaussian_takes_no_exponent(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "feed.pattern=gaussian");
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_false(ev_scene_assign(scene, &design, 0, "feed.exponent=3", &d));
    assert_string_equal(d.items[0].id, "exponent_on_gaussian");
    ev_diagnostics_clear(&d);
    assign_good(scene, &design, "feed.edge_taper=9 dB");
    assert_true(get_value(&design, "feed.edge_taper") == 9.0);
    ev_scene_destroy(scene);
}

/* The table is read when the pattern asks for it. */
static void refuses_a_pattern_without_its_file(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    assign_good(scene, &design, "feed.table=none.csv");
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_false(ev_scene_assign(scene, &design, 0, "feed.pattern=table", &d));
    assert_string_equal(d.items[0].id, "file_missing");
    ev_diagnostics_clear(&d);
    ev_scene_destroy(scene);
}

static void selects_the_feed(void **state)
{
    (void)state;
    ev_scene *scene = parse_good(offset_scene);
    ev_design design = *ev_scene_design(scene);
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_true(ev_scene_assign(scene, &design, 1, "feed.defocus=7 mm", &d));
    assert_true(design.feeds[1].defocus == 0.007 && design.feeds[0].defocus == 0.0);
    ev_scene_destroy(scene);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sets_every_form),
        cmocka_unit_test(keeps_or_replaces_the_list),
        cmocka_unit_test(sets_texts_and_names),
        cmocka_unit_test(adds_a_subreflector),
        cmocka_unit_test(refuses),
        cmocka_unit_test(a_gaussian_takes_no_exponent),
        cmocka_unit_test(refuses_a_pattern_without_its_file),
        cmocka_unit_test(selects_the_feed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
