/* The camera: projection against its own matrix, and what orbit, pan, zoom and fit promise. */
#include "view/camera.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

static const ev_rect place = {0.0, 120.0, 888.0, 542.0};

static void assert_near(double got, double want, double tolerance)
{
    if (!(fabs(got - want) <= tolerance)) {
        print_error("%.9g, expected %.9g\n", got, want);
    }
    assert_true(fabs(got - want) <= tolerance);
}

static void test_target_in_the_middle(void **state)
{
    ev_camera camera = ev_default_camera();
    double x, y;
    (void)state;
    camera.target = ev_vec3_make(3.0, -2.0, 7.0);
    ev_eye eye = ev_camera_eye(&camera, place);
    assert_true(ev_eye_project(&eye, camera.target, &x, &y));
    assert_near(x, 444.0, 1e-9);
    assert_near(y, 391.0, 1e-9);
    assert_near(ev_vec3_length(ev_vec3_sub(eye.position, camera.target)), camera.distance, 1e-12);
}

/* From the sky, +x is up and +y to the left. */
static void test_directions_from_the_sky(void **state)
{
    ev_camera camera = {.distance = 10.0};
    double x, y;
    (void)state;
    ev_eye eye = ev_camera_eye(&camera, place);
    assert_near(eye.position.z, 10.0, 1e-12);
    ev_eye_project(&eye, ev_vec3_make(1.0, 0.0, 0.0), &x, &y);
    assert_near(x, 444.0, 1e-9);
    assert_true(y < 391.0);
    ev_eye_project(&eye, ev_vec3_make(0.0, 1.0, 0.0), &x, &y);
    assert_true(x < 444.0);
    assert_near(y, 391.0, 1e-9);
    assert_false(ev_eye_project(&eye, ev_vec3_make(0.0, 0.0, 11.0), &x, &y));
}

static void test_axes_are_square(void **state)
{
    (void)state;
    for (int i = 0; i < 100; ++i) {
        ev_camera camera = {.yaw = 0.37 * i, .pitch = sin(1.7 * i), .distance = 4.0};
        ev_eye eye = ev_camera_eye(&camera, place);
        ev_vec3 cross = ev_vec3_cross(eye.right, eye.up);
        assert_near(ev_vec3_length(ev_vec3_sub(cross, eye.back)), 0.0, 1e-12);
        assert_near(ev_vec3_length(eye.up), 1.0, 1e-12);
    }
}

/* Page pixels by way of the matrix that GL gets. */
static void project_by_matrix(const ev_eye *eye, ev_vec3 origin, ev_vec3 point, double *x,
                              double *y)
{
    float m[16];
    ev_eye_matrix(eye, place, origin, 0.1, 100.0, m);
    ev_vec3 p = ev_vec3_sub(point, origin);
    double clip[4];
    for (int row = 0; row < 4; ++row) {
        clip[row] = (double)m[row] * p.x + (double)m[4 + row] * p.y + (double)m[8 + row] * p.z +
                    (double)m[12 + row];
    }
    *x = place.x + 0.5 * place.width * (1.0 + clip[0] / clip[3]);
    *y = place.y + 0.5 * place.height * (1.0 - clip[1] / clip[3]);
}

/* Also when the antenna stands kilometres from the origin: only differences are demoted. */
static void test_matrix_agrees(void **state)
{
    (void)state;
    for (int i = 0; i < 50; ++i) {
        double far = i % 2 ? 1e6 : 0.0;
        ev_camera camera = {.target = {far, 2.0 * far, -far},
                            .yaw = 0.6 * i,
                            .pitch = 0.9 * sin(2.1 * i),
                            .distance = 6.0};
        ev_eye eye = ev_camera_eye(&camera, place);
        ev_vec3 origin = ev_vec3_add(camera.target, ev_vec3_make(0.3, -0.2, 0.1));
        ev_vec3 point = ev_vec3_add(origin, ev_vec3_make(cos(i), sin(3.0 * i), 0.4 * cos(5.0 * i)));
        double x, y, mx, my;
        assert_true(ev_eye_project(&eye, point, &x, &y));
        project_by_matrix(&eye, origin, point, &mx, &my);
        assert_near(mx, x, 2e-3);
        assert_near(my, y, 2e-3);
    }
}

static void test_orbit_keeps_short_of_the_poles(void **state)
{
    ev_camera camera = ev_default_camera();
    (void)state;
    ev_camera_orbit(&camera, 0.0, 100.0);
    assert_true(camera.pitch < 0.5 * EV_PI && camera.pitch > 1.5);
    ev_camera_orbit(&camera, 1000.0, -200.0);
    assert_true(camera.pitch > -0.5 * EV_PI && camera.pitch < -1.5);
    assert_true(fabs(camera.yaw) <= EV_PI);
}

static void test_pan_follows_the_hand(void **state)
{
    ev_camera camera = ev_default_camera();
    double x, y;
    (void)state;
    ev_vec3 held = camera.target;
    ev_camera_pan(&camera, place, 37.0, -21.0);
    ev_eye eye = ev_camera_eye(&camera, place);
    ev_eye_project(&eye, held, &x, &y);
    assert_near(x, 444.0 + 37.0, 1e-6);
    assert_near(y, 391.0 - 21.0, 1e-6);
}

static void test_zoom_holds_what_is_pointed_at(void **state)
{
    ev_camera camera = ev_default_camera();
    double x, y;
    (void)state;
    ev_eye eye = ev_camera_eye(&camera, place);
    /* the point of the target's plane under (600, 300) */
    double metres = camera.distance / eye.scale;
    ev_vec3 point = ev_vec3_along(camera.target, (600.0 - 444.0) * metres, eye.right);
    point = ev_vec3_along(point, (391.0 - 300.0) * metres, eye.up);
    ev_camera_zoom(&camera, place, 2.5, 600.0, 300.0);
    eye = ev_camera_eye(&camera, place);
    ev_eye_project(&eye, point, &x, &y);
    assert_near(x, 600.0, 1e-6);
    assert_near(y, 300.0, 1e-6);
    assert_near(camera.distance, ev_default_camera().distance / 2.5, 1e-12);
}

static void test_fit(void **state)
{
    static const double sizes[] = {0.01, 1.0, 100.0, 3000.0};
    const ev_rect inside = {40.0, 180.0, 600.0, 440.0};
    (void)state;
    for (size_t s = 0; s < sizeof sizes / sizeof sizes[0]; ++s) {
        ev_camera camera = ev_default_camera();
        ev_vec3 points[64];
        double left = INFINITY, right = -INFINITY, top = INFINITY, bottom = -INFINITY;
        for (int i = 0; i < 64; ++i) {
            points[i] =
                ev_vec3_scale(sizes[s], ev_vec3_make(cos(1.1 * i) + 3.0, sin(2.3 * i), i % 3));
        }
        ev_camera_fit(&camera, place, inside, points, 64);
        ev_eye eye = ev_camera_eye(&camera, place);
        for (int i = 0; i < 64; ++i) {
            double x, y;
            assert_true(ev_eye_project(&eye, points[i], &x, &y));
            left = fmin(left, x);
            right = fmax(right, x);
            top = fmin(top, y);
            bottom = fmax(bottom, y);
        }
        assert_true(left > inside.x - 1.0 && right < inside.x + inside.width + 1.0);
        assert_true(top > inside.y - 1.0 && bottom < inside.y + inside.height + 1.0);
        /* and fills it one way */
        assert_true(right - left > 0.97 * inside.width || bottom - top > 0.97 * inside.height);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_target_in_the_middle),
        cmocka_unit_test(test_directions_from_the_sky),
        cmocka_unit_test(test_axes_are_square),
        cmocka_unit_test(test_matrix_agrees),
        cmocka_unit_test(test_orbit_keeps_short_of_the_poles),
        cmocka_unit_test(test_pan_follows_the_hand),
        cmocka_unit_test(test_zoom_holds_what_is_pointed_at),
        cmocka_unit_test(test_fit),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
