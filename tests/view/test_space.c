/* Meshes and ink of the space view: surfaces lie where the optics has them, the Front bends by what
 * the path error says, and what stands behind a mirror is hidden. */
#include "view/ink.h"
#include "view/mesh.h"

#include "scene/scene.h"
#include "study/study.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>

#include <cmocka.h>

/* A scene with all that a sheet needs. */
typedef struct fixture {
    ev_scene *scene;
    ev_study *study;
    ev_sheet sheet;
} fixture;

static fixture open_scene(const char *name)
{
    static ev_diagnostics diagnostics;
    fixture f = {0};
    char path[512];
    snprintf(path, sizeof path, "%s/%s", EV_SCENES, name);
    ev_diagnostics_init(&diagnostics);
    f.scene = ev_scene_load(path, &diagnostics);
    assert_non_null(f.scene);
    f.study = calloc(1, sizeof *f.study);
    assert_non_null(f.study);
    const ev_design *design = ev_scene_design(f.scene);
    ev_study_want want = {.aperture = true, .rays = EV_STUDY_RAYS_SPACE, .ray_count = 60};
    ev_study_compute(design, design->frequencies[0], want, f.study);
    f.sheet = (ev_sheet){.design = design,
                         .antenna = &f.study->antenna,
                         .budget = &f.study->budget,
                         .verdict = &f.study->verdict,
                         .rays = f.study->rays,
                         .ray_count = f.study->ray_count,
                         .aperture = f.study->aperture,
                         .front = f.study->front,
                         .front_x = f.study->front_x,
                         .front_count = EV_STUDY_FRONT_COUNT,
                         .front_exaggeration = 20.0,
                         .aperture_range = 1e-3};
    return f;
}

static void close_scene(fixture *f)
{
    ev_scene_destroy(f->scene);
    free(f->study);
}

static void test_dish(void **state)
{
    fixture f = open_scene("quarry_link.yaml");
    const ev_antenna *antenna = f.sheet.antenna;
    ev_mesh mesh = {0};
    (void)state;
    assert_true(ev_mesh_main(&mesh, antenna));
    for (int row = 0; row <= mesh.rows; ++row) {
        for (int column = 0; column <= mesh.columns; ++column) {
            int i = row * (mesh.columns + 1) + column;
            ev_vec3 p = mesh.points[i];
            double z = (p.x * p.x + p.y * p.y) / (4.0 * antenna->focal_length);
            double r = hypot(p.x - antenna->offset, p.y);
            assert_true(fabs(p.z - z) < 1e-12);
            assert_true(r < antenna->radius * (1.0 + 1e-12));
            assert_true(row < mesh.rows || fabs(r - antenna->radius) < 1e-12);
            assert_true(fabs((double)mesh.vertices[i].position[0] + mesh.origin.x - p.x) < 1e-6);
            assert_true(fabs((double)mesh.vertices[i].polar[0] - r / antenna->radius) < 1e-6);
            assert_true(fabs(ev_vec3_length(mesh.normals[i]) - 1.0) < 1e-12);
        }
    }
    ev_mesh_free(&mesh);
    close_scene(&f);
}

static void test_sub(void **state)
{
    fixture f = open_scene("snow_line.yaml");
    ev_mesh mesh = {0};
    (void)state;
    assert_true(ev_mesh_sub(&mesh, f.sheet.antenna));
    for (int i = 0; i < (mesh.rows + 1) * (mesh.columns + 1); ++i) {
        assert_true(fabs(ev_conic_side(&f.sheet.antenna->sub.placed, mesh.points[i])) < 1e-9);
        assert_true(ev_sub_inside(&f.sheet.antenna->sub, mesh.points[i]) > -1e-6);
    }
    ev_mesh_free(&mesh);
    close_scene(&f);
}

static void test_horn_looks_along_its_axis(void **state)
{
    fixture f = open_scene("quarry_link.yaml");
    const ev_feed *feed = &f.sheet.antenna->feeds[0];
    ev_mesh mesh = {0};
    ev_vec3 mouth = {0}, end = {0};
    (void)state;
    assert_true(ev_mesh_horn(&mesh, f.sheet.antenna, 0));
    for (int column = 0; column < mesh.columns; ++column) {
        mouth = ev_vec3_along(mouth, 1.0 / mesh.columns, *ev_mesh_point(&mesh, 0, column));
        end = ev_vec3_along(end, 1.0 / mesh.columns, *ev_mesh_point(&mesh, mesh.rows, column));
    }
    ev_vec3 wanted = ev_vec3_along(feed->position, feed->phase_centre, feed->axis);
    assert_true(ev_vec3_length(ev_vec3_sub(mouth, wanted)) < 1e-9);
    assert_true(ev_vec3_angle(ev_vec3_sub(mouth, end), feed->axis) < 1e-6);
    ev_mesh_free(&mesh);
    close_scene(&f);
}

/* Against the study's own line of path errors in the plane of symmetry. */
static void test_path_error_of_the_picture(void **state)
{
    static const char *const names[] = {"quarry_link.yaml", "ridge_station.yaml"};
    (void)state;
    for (int n = 0; n < 2; ++n) {
        fixture f = open_scene(names[n]);
        double largest = 0.0;
        for (int i = 0; i < EV_STUDY_FRONT_COUNT; ++i) {
            largest = fmax(largest, isfinite(f.study->front[i]) ? fabs(f.study->front[i]) : 0.0);
        }
        for (int i = 0; i < EV_STUDY_FRONT_COUNT; ++i) {
            double want = f.study->front[i];
            double got = ev_sheet_path_error(&f.sheet, f.study->front_x[i], 0.0);
            bool at_hole = fabs(f.study->front_x[i] - f.sheet.antenna->offset) <
                           f.sheet.antenna->hole_radius + 0.05 * f.sheet.antenna->radius;
            assert_true(at_hole || fabs(got - want) < 0.01 * largest);
        }
        close_scene(&f);
    }
}

static void test_front_bends_by_the_error(void **state)
{
    fixture f = open_scene("quarry_link.yaml");
    ev_mesh mesh = {0};
    (void)state;
    double stand = ev_front_stand(f.sheet.antenna), late = 0.0, early = 0.0;
    assert_true(ev_mesh_front(&mesh, &f.sheet, stand));
    for (int i = 0; i < (mesh.rows + 1) * (mesh.columns + 1); ++i) {
        ev_vec3 p = mesh.points[i];
        double error = ev_sheet_path_error(&f.sheet, p.x, p.y);
        assert_true(fabs(p.z - (stand - 20.0 * error)) < 1e-9);
        late = fmax(late, error);
        early = fmin(early, error);
    }
    assert_true(late > 1e-3 && early < -1e-3);
    ev_mesh_free(&mesh);
    close_scene(&f);
}

static ev_ink ink_from(const fixture *f, double yaw, ev_camera *camera)
{
    const ev_antenna *antenna = f->sheet.antenna;
    *camera = (ev_camera){.target = ev_main_point(antenna, antenna->offset, 0.0),
                          .yaw = yaw,
                          .distance = 40.0 * antenna->radius};
    ev_rect place = {0.0, 0.0, 800.0, 600.0};
    return (ev_ink){.sheet = &f->sheet,
                    .eye = ev_camera_eye(camera, place),
                    .place = place,
                    .scale = 1.0,
                    .stand = ev_front_stand(antenna),
                    .theme = ev_theme_get(false),
                    .emphasis = ev_emphasis_of(&f->sheet)};
}

static void test_what_is_hidden(void **state)
{
    fixture f = open_scene("ridge_station.yaml");
    const ev_antenna *antenna = f.sheet.antenna;
    ev_camera camera;
    (void)state;
    ev_vec3 rim = ev_main_point(antenna, antenna->radius, 0.0);
    ev_vec3 before = ev_main_point(antenna, 0.6 * antenna->radius, 0.0);
    before.z += 0.05 * antenna->radius;
    ev_ink sky = ink_from(&f, 0.0, &camera);
    assert_true(ev_ink_sight(&sky, rim, true) == 1.0);
    assert_true(ev_ink_sight(&sky, before, true) == 1.0);
    assert_true(ev_ink_sight(&sky, before, false) < 1.0); /* through the Front */
    assert_true(ev_ink_sight(&sky, antenna->feeds[0].position, true) == 0.0); /* behind the sub */
    ev_ink behind = ink_from(&f, EV_PI, &camera);
    double through_dish = ev_ink_sight(&behind, before, true);
    assert_true(through_dish > 0.0 && through_dish < 0.5);
    assert_true(ev_ink_sight(&behind, rim, true) == 1.0);
    close_scene(&f);
}

static int count_style(const ev_strokes *strokes, ev_stroke_style style, uint32_t colour)
{
    int count = 0;
    for (int i = 0; i < strokes->count; ++i) {
        count += strokes->items[i].style == style && strokes->items[i].colour == colour ? 1 : 0;
    }
    return count;
}

/* Each fate in its own line, as many as there are rays of it. */
static void test_rays_by_fate(void **state)
{
    fixture f = open_scene("ridge_station.yaml");
    ev_camera camera;
    ev_strokes strokes = {0};
    (void)state;
    ev_ink ink = ink_from(&f, -1.0, &camera);
    ink.strokes = &strokes;
    ev_ink_rays(&ink);
    int past_sub = 0, shadowed = 0, legs = 0;
    for (int i = 0; i < f.sheet.ray_count; ++i) {
        past_sub += f.sheet.rays[i].fate == EV_FATE_PAST_SUB ? 1 : 0;
        shadowed += f.sheet.rays[i].fate >= EV_FATE_SHADOW_SUB ? 1 : 0;
        legs += f.sheet.rays[i].fate == EV_FATE_APERTURE ? f.sheet.rays[i].point_count - 1 : 0;
        legs += f.sheet.rays[i].fate >= EV_FATE_SHADOW_SUB ? f.sheet.rays[i].point_count : 0;
    }
    assert_true(past_sub > 0 && shadowed > 0);
    assert_int_equal(count_style(&strokes, EV_STROKE_DOTS, 0x7C4CB6), past_sub);
    assert_int_equal(count_style(&strokes, EV_STROKE_SOLID, 0x1C2126), legs);
    ev_strokes_free(&strokes);
    close_scene(&f);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_dish),
        cmocka_unit_test(test_sub),
        cmocka_unit_test(test_horn_looks_along_its_axis),
        cmocka_unit_test(test_path_error_of_the_picture),
        cmocka_unit_test(test_front_bends_by_the_error),
        cmocka_unit_test(test_what_is_hidden),
        cmocka_unit_test(test_rays_by_fate),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
