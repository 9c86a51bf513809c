/* Pattern tables: what is read, and for every mistake its id and line. */
#include "scene/pattern_file.h"

#include "support.h"

#include <math.h>

#define HEADER "theta_deg,e_db,h_db\n"

static void reads_a_table(void **state)
{
    (void)state;
    static const char text[] = "\xEF\xBB\xBF# a horn\r\n theta_deg , e_db, h_db, phase_deg\r\n"
                               "0, 0, 0, 0\r\n\r\n10,-1.5,-1.25, 3 # measured twice\r\n"
                               "90, -20, -21, -180\r\n";
    static ev_pattern_table table;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_true(ev_pattern_table_read(text, "horn.csv", &table, &d));
    assert_int_equal(table.count, 3);
    assert_true(table.has_phase);
    assert_true(fabs(table.theta[1] - 10.0 * EV_PI / 180.0) < 1e-15);
    assert_true(table.e_db[1] == -1.5 && table.h_db[1] == -1.25);
    assert_true(fabs(table.phase[2] + EV_PI) < 1e-15);
    assert_true(table.mean_power > 0.0);
}

static void refuses_and_points(void **state)
{
    (void)state;
    static const struct {
        const char *id;
        int line;
        const char *text;
    } cases[] = {
        {"table_header", 0, ""},
        {"table_header", 0, "# nothing else\n"},
        {"table_header", 1, "0,0,0\n10,-1,-1\n"},
        {"table_header", 2, "# x\ntheta_deg,h_db,e_db\n0,0,0\n"},
        {"table_columns", 3, HEADER "0,0,0\n10,-1\n20,-3,-3\n"},
        {"table_columns", 3, HEADER "0,0,0\n10,-1,-1,5,6,7\n20,-3,-3\n"},
        {"table_number", 3, HEADER "0,0,0\n10,-1 dB,-1\n20,-3,-3\n"},
        {"table_number", 3, HEADER "0,0,0\n10,,-1\n20,-3,-3\n"},
        {"table_number", 3, HEADER "0,0,0\n10,nan,-1\n20,-3,-3\n"},
        {"table_angle", 3, HEADER "0,0,0\n181,-1,-1\n"},
        {"table_angle", 2, HEADER "-1,0,0\n10,-1,-1\n20,-3,-3\n"},
        {"table_order", 3, HEADER "10,0,0\n10,-1,-1\n20,-3,-3\n"},
        {"table_level", 3, HEADER "0,0,0\n10,-1,-301\n20,-3,-3\n"},
        {"table_short", 0, HEADER "0,0,0\n"},
        {"table_no_power", 0, HEADER "0,-299,-299\n10,-299,-299\n"},
    };
    static ev_pattern_table table;
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        ev_diagnostics d;
        ev_diagnostics_init(&d);
        print_message("%s\n", cases[i].text);
        assert_false(ev_pattern_table_read(cases[i].text, "horn.csv", &table, &d));
        assert_int_equal(d.error_count, 1);
        assert_string_equal(d.items[0].id, cases[i].id);
        assert_string_equal(d.items[0].file, "horn.csv");
        assert_int_equal(d.items[0].line, cases[i].line);
        ev_diagnostics_clear(&d);
    }
}

static void refuses_a_table_without_end(void **state)
{
    (void)state;
    static ev_pattern_table table;
    size_t size = (EV_PATTERN_TABLE_CAPACITY + 10) * 24, length;
    char *text = malloc(size);
    assert_non_null(text);
    length = (size_t)snprintf(text, size, HEADER);
    for (int i = 0; i < EV_PATTERN_TABLE_CAPACITY + 5; i++)
        length += (size_t)snprintf(text + length, size - length, "%.4f,0,0\n", i * 0.05);
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_false(ev_pattern_table_read(text, "long.csv", &table, &d));
    assert_int_equal(d.error_count, 1);
    assert_string_equal(d.items[0].id, "table_long");
    ev_diagnostics_clear(&d);
    free(text);
}

/* Found beside the scene, read once, and what it leaves out is said. */
static void is_found_beside_the_scene(void **state)
{
    (void)state;
    char path[512];
    snprintf(path, sizeof path, "%s/borrowed_horn.yaml", EV_SCENES);
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_load(path, &d);
    assert_non_null(scene);
    bool warned = false;
    for (int i = 0; i < d.count; i++)
        warned = warned || strcmp(d.items[i].id, "table_ends") == 0;
    assert_true(warned);
    const ev_pattern_table *table = ev_scene_design(scene)->feeds[0].table;
    assert_non_null(table);
    assert_int_equal(table->count, 33);
    assert_ptr_equal(ev_scene_pattern(scene, "borrowed_horn.csv", &d), table);
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&d);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(reads_a_table),
        cmocka_unit_test(refuses_and_points),
        cmocka_unit_test(refuses_a_table_without_end),
        cmocka_unit_test(is_found_beside_the_scene),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
