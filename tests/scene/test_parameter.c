/* The table of parameters: every row is whole, its default is the design's, its address leads back
 * to it; the member of a choice set last holds. */
#include "support.h"

#include <math.h>

/* A design that has one of everything. */
static ev_design make_full_design(void)
{
    ev_design design = ev_default_design();
    design.sub = ev_default_sub();
    design.site = ev_default_site();
    design.feeds[design.feed_count] = ev_default_feed();
    strcpy(design.feeds[design.feed_count++].name, "second");
    design.struts[design.strut_count++] = ev_default_strut();
    ev_design_resolve(&design);
    return design;
}

static void rows_are_whole(void **state)
{
    (void)state;
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *row = ev_parameter_at(i);
        print_message("%s\n", row->name);
        assert_true(row->label[0] && row->meaning[0] && row->example[0]);
        assert_null(strchr(row->meaning, '\n'));
        assert_true(row->size > 0);
        if (row->kind == EV_VALUE_TEXT)
            continue;
        assert_true(row->low <= row->initial && row->initial <= row->high && row->low < row->high);
        if (row->kind == EV_VALUE_NUMBER)
            assert_int_equal(row->size, sizeof(double));
        if (row->kind == EV_VALUE_CHOICE) {
            assert_non_null(row->words[(int)row->high]);
            assert_null(row->words[(int)row->high + 1]);
        }
        for (int j = 0; j < i; j++) {
            assert_false(row->owner == ev_parameter_at(j)->owner &&
                         row->offset == ev_parameter_at(j)->offset);
            assert_string_not_equal(row->name, ev_parameter_at(j)->name);
            assert_string_not_equal(row->label, ev_parameter_at(j)->label);
        }
    }
}

/* The table's default is what a scene without the key gets. */
static void defaults_are_the_design_s(void **state)
{
    (void)state;
    ev_design design = make_full_design();
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *row = ev_parameter_at(i);
        ev_parameter_ref ref;
        assert_true(ev_parameter_find(&design, 0, row->name, &ref, NULL));
        if (row->kind == EV_VALUE_TEXT || ev_parameter_is_derived(&design, ref))
            continue;
        double value = ev_parameter_get(&design, ref);
        if (fabs(value - row->initial) > 1e-12 * fabs(row->initial))
            fail_msg("%s is %g, the table says %g", row->name, value, row->initial);
    }
}

static void examples_are_legal(void **state)
{
    (void)state;
    for (int i = 0; i < ev_parameter_count(); i++) {
        ev_design design = make_full_design();
        ev_parameter_ref ref;
        ev_diagnostics d;
        ev_diagnostics_init(&d);
        assert_true(ev_parameter_find(&design, 0, ev_parameter_at(i)->name, &ref, NULL));
        if (!ev_parameter_set_text(&design, ref, ev_parameter_at(i)->example, &d))
            ev_diagnostics_print(&d, stderr);
        assert_int_equal(d.count, 0);
    }
}

static void addresses_lead_back(void **state)
{
    (void)state;
    ev_design design = make_full_design();
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *row = ev_parameter_at(i);
        for (int index = 0; index < (row->owner == EV_OWNER_FEED ? 2 : 1); index++) {
            char address[2 * EV_NAME_CAPACITY];
            ev_parameter_ref ref;
            ev_parameter_address(&design, (ev_parameter_ref){row, index}, address, sizeof address);
            assert_true(ev_parameter_find(&design, 0, address, &ref, NULL));
            assert_ptr_equal(ref.parameter, row);
            assert_int_equal(ref.index, index);
        }
    }
    ev_parameter_ref ref;
    assert_true(ev_parameter_find(&design, 1, "feed.defocus", &ref, NULL));
    assert_int_equal(ref.index, 1);
    assert_true(ev_parameter_find(&design, 1, "feeds.second.shift.x", &ref, NULL));
    assert_int_equal(ref.index, 1);
    assert_true(ev_parameter_find(&design, 1, "struts.legs.width", &ref, NULL));
}

/* Every number set is the number got, and neighbours in memory stay as they are. */
static void sets_and_gets(void **state)
{
    (void)state;
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *row = ev_parameter_at(i);
        if (row->kind == EV_VALUE_TEXT)
            continue;
        ev_design before = make_full_design(), after = before;
        ev_parameter_ref ref;
        assert_true(ev_parameter_find(&after, 0, row->name, &ref, NULL));
        double old = ev_parameter_get(&after, ref);
        double value = row->kind == EV_VALUE_NUMBER ? old * 1.01 + 0.001 * (old == 0.0)
                                                    : (old == row->low ? row->high : row->low);
        ev_parameter_set(&after, ref, value);
        assert_true(ev_parameter_get(&after, ref) == value);
        assert_false(ev_parameter_is_derived(&after, ref));
        assert_string_equal(before.title, after.title);
        assert_int_equal(before.strut_count, after.strut_count);
        assert_int_equal(before.feed_count, after.feed_count);
    }
}

static void clamps_to_the_range(void **state)
{
    (void)state;
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *row = ev_parameter_at(i);
        ev_design design = make_full_design();
        ev_parameter_ref ref;
        assert_true(ev_parameter_find(&design, 0, row->name, &ref, NULL));
        if (row->kind == EV_VALUE_TEXT)
            continue;
        ev_parameter_set(&design, ref, HUGE_VAL);
        assert_true(ev_parameter_get(&design, ref) == row->high);
        ev_parameter_set(&design, ref, -HUGE_VAL);
        assert_true(ev_parameter_get(&design, ref) == row->low);
        ev_parameter_set(&design, ref, NAN);
        assert_true(ev_parameter_get(&design, ref) == row->low);
    }
}

static void the_last_of_a_choice_holds(void **state)
{
    (void)state;
    ev_scene *scene = parse_good("evenpath: 1\nfrequency: 12 GHz\n"
                                 "main: {diameter: 2 m, f_over_d: 0.5}\nfeeds: [{name: a}]\n");
    ev_design design = *ev_scene_design(scene);
    assert_true(get_value(&design, "main.focal_length") == 1.0);
    assign_good(scene, &design, "main.depth=250 mm");
    assert_true(get_value(&design, "main.focal_length") == 1.0);
    assign_good(scene, &design, "main.diameter=4 m"); /* the depth holds */
    assert_true(get_value(&design, "main.focal_length") == 4.0);
    assert_true(get_value(&design, "main.f_over_d") == 1.0);
    assign_good(scene, &design, "main.focal_length=2 m");
    assign_good(scene, &design, "main.diameter=2 m"); /* the focal length holds */
    assert_true(get_value(&design, "main.f_over_d") == 1.0);
    assign_good(scene, &design, "main.clearance=0.1 m");
    assert_true(fabs(get_value(&design, "main.offset") - 1.1) < 1e-15);
    assign_good(scene, &design, "feed.exponent=4");
    double taper = get_value(&design, "feed.edge_taper");
    assign_good(scene, &design, "main.focal_length=3 m");
    assert_true(get_value(&design, "feed.exponent") == 4.0);
    assert_true(get_value(&design, "feed.edge_taper") < taper);
    ev_scene_destroy(scene);
}

/* Of three the two set last hold, whichever they are. */
static void two_of_three_hold(void **state)
{
    (void)state;
    static const char *const sets[3] = {"sub.magnification=6", "sub.interfocal=1.5 m",
                                        "sub.diameter=0.5 m"};
    static const double values[3] = {6.0, 1.5, 0.5};
    static const char *const names[3] = {"sub.magnification", "sub.interfocal", "sub.diameter"};
    ev_scene *scene = parse_good("evenpath: 1\nfrequency: 12 GHz\n"
                                 "main: {diameter: 4 m, f_over_d: 0.4}\nfeeds: [{name: a}]\n"
                                 "sub: {shape: hyperboloid, magnification: 5, diameter: 0.4 m}\n");
    for (int first = 0; first < 3; first++) {
        for (int second = 0; second < 3; second++) {
            ev_design design = *ev_scene_design(scene);
            if (first == second)
                continue;
            assign_good(scene, &design, sets[first]);
            assign_good(scene, &design, sets[second]);
            assert_true(get_value(&design, names[first]) == values[first]);
            assert_true(get_value(&design, names[second]) == values[second]);
            ev_parameter_ref ref;
            assert_true(ev_parameter_find(&design, 0, names[3 - first - second], &ref, NULL));
            assert_true(ev_parameter_is_derived(&design, ref));
        }
    }
    ev_scene_destroy(scene);
}

/* Setting a component of a vector that a word stands for makes the vector hold. */
static void numbers_replace_words(void **state)
{
    (void)state;
    ev_design design = ev_default_design();
    ev_parameter_ref ref;
    assert_true(ev_parameter_find(&design, 0, "feed.aim.x", &ref, NULL));
    ev_parameter_set(&design, ref, 0.25);
    assert_int_equal(design.feeds[0].aim, EV_AIM_DIRECTION);
    design.feeds[0].toward_peak = true;
    assert_true(ev_parameter_find(&design, 0, "feed.toward.y", &ref, NULL));
    ev_parameter_set(&design, ref, 0.05);
    assert_false(design.feeds[0].toward_peak);
}

static void says_the_nearest_address(void **state)
{
    (void)state;
    static const char *const cases[][2] = {
        {"main.diamter", "main.diameter"},
        {"feed.defocsu", "feed.defocus"},
        {"feeds.second.sift.x", "feeds.second.shift.x"},
        {"strut.widht", "strut.width"},
        {"frequenzy", "frequency"},
    };
    ev_design design = make_full_design();
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        char nearest[2 * EV_NAME_CAPACITY];
        ev_parameter_ref ref;
        assert_false(ev_parameter_find(&design, 0, cases[i][0], &ref, nearest));
        assert_string_equal(nearest, cases[i][1]);
    }
}

static void formats_all_rows(void **state)
{
    (void)state;
    ev_design design = make_full_design();
    for (int i = 0; i < ev_parameter_count(); i++) {
        char digits[EV_PATH_CAPACITY], unit[8];
        ev_parameter_ref ref;
        assert_true(ev_parameter_find(&design, 0, ev_parameter_at(i)->name, &ref, NULL));
        ev_parameter_format(&design, ref, digits, sizeof digits, unit, sizeof unit);
        assert_true(digits[0] || ref.parameter->kind == EV_VALUE_TEXT);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_are_whole),
        cmocka_unit_test(defaults_are_the_design_s),
        cmocka_unit_test(examples_are_legal),
        cmocka_unit_test(addresses_lead_back),
        cmocka_unit_test(sets_and_gets),
        cmocka_unit_test(clamps_to_the_range),
        cmocka_unit_test(the_last_of_a_choice_holds),
        cmocka_unit_test(two_of_three_hold),
        cmocka_unit_test(numbers_replace_words),
        cmocka_unit_test(says_the_nearest_address),
        cmocka_unit_test(formats_all_rows),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
