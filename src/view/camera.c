/* The camera: angles to axes, projection in double, and the one matrix GL gets. */
#include "view/camera.h"

#include <cglm/cglm.h>
#include <string.h>

static const double field_of_view = 22.0 * EV_PI / 180.0; /* of the place's height */
static const double pitch_limit = 89.0 * EV_PI / 180.0;

ev_camera ev_default_camera(void)
{
    return (ev_camera){
        .yaw = -57.0 * EV_PI / 180.0, .pitch = 14.0 * EV_PI / 180.0, .distance = 5.0};
}

ev_eye ev_camera_eye(const ev_camera *camera, ev_rect place)
{
    double cp = cos(camera->pitch), sp = sin(camera->pitch);
    double cy = cos(camera->yaw), sy = sin(camera->yaw);
    ev_vec3 back = {sp, cp * sy, cp * cy};
    ev_vec3 right = {0.0, -cy, sy};
    ev_eye eye = {.position = ev_vec3_along(camera->target, camera->distance, back),
                  .right = right,
                  .up = ev_vec3_cross(back, right),
                  .back = back,
                  .scale = 0.5 * place.height / tan(0.5 * field_of_view),
                  .x = place.x + 0.5 * place.width,
                  .y = place.y + 0.5 * place.height};
    return eye;
}

bool ev_eye_project(const ev_eye *eye, ev_vec3 point, double *x, double *y)
{
    ev_vec3 from = ev_vec3_sub(point, eye->position);
    double depth = -ev_vec3_dot(from, eye->back);
    if (!(depth > 0.0)) {
        return false;
    }
    *x = eye->x + eye->scale * ev_vec3_dot(from, eye->right) / depth;
    *y = eye->y - eye->scale * ev_vec3_dot(from, eye->up) / depth;
    return true;
}

double ev_eye_pixels(const ev_eye *eye, ev_vec3 point, double length)
{
    double depth = -ev_vec3_dot(ev_vec3_sub(point, eye->position), eye->back);
    return depth > 0.0 ? eye->scale * length / depth : 0.0;
}

void ev_eye_matrix(const ev_eye *eye, ev_rect place, ev_vec3 origin, double near_m, double far_m,
                   float matrix[16])
{
    ev_vec3 from = ev_vec3_sub(origin, eye->position);
    const ev_vec3 rows[3] = {eye->right, eye->up, eye->back};
    mat4 view = GLM_MAT4_IDENTITY_INIT, projection, product;
    for (int i = 0; i < 3; ++i) {
        view[0][i] = (float)rows[i].x;
        view[1][i] = (float)rows[i].y;
        view[2][i] = (float)rows[i].z;
        view[3][i] = (float)ev_vec3_dot(rows[i], from);
    }
    glm_perspective((float)field_of_view, (float)(place.width / place.height), (float)near_m,
                    (float)far_m, projection);
    glm_mat4_mul(projection, view, product);
    memcpy(matrix, product, sizeof product);
}

void ev_camera_orbit(ev_camera *camera, double yaw, double pitch)
{
    camera->yaw = remainder(camera->yaw + yaw, 2.0 * EV_PI);
    camera->pitch = fmax(-pitch_limit, fmin(pitch_limit, camera->pitch + pitch));
}

void ev_camera_pan(ev_camera *camera, ev_rect place, double dx, double dy)
{
    ev_eye eye = ev_camera_eye(camera, place);
    double metres = camera->distance / eye.scale;
    camera->target = ev_vec3_along(camera->target, -dx * metres, eye.right);
    camera->target = ev_vec3_along(camera->target, dy * metres, eye.up);
}

void ev_camera_zoom(ev_camera *camera, ev_rect place, double factor, double x, double y)
{
    ev_eye eye = ev_camera_eye(camera, place);
    double dx = x - eye.x, dy = y - eye.y;
    ev_camera_pan(camera, place, -dx, -dy);
    camera->distance = fmax(1e-3, fmin(1e5, camera->distance / factor));
    ev_camera_pan(camera, place, dx, dy);
}

/* Extent on the page of all points; false when one is behind the eye. */
static bool find_extent(const ev_eye *eye, const ev_vec3 *points, int count, ev_rect *extent)
{
    double left = INFINITY, right = -INFINITY, top = INFINITY, bottom = -INFINITY;
    for (int i = 0; i < count; ++i) {
        double x, y;
        if (!ev_eye_project(eye, points[i], &x, &y)) {
            return false;
        }
        left = fmin(left, x);
        right = fmax(right, x);
        top = fmin(top, y);
        bottom = fmax(bottom, y);
    }
    *extent = (ev_rect){left, top, right - left, bottom - top};
    return true;
}

void ev_camera_fit(ev_camera *camera, ev_rect place, ev_rect inside, const ev_vec3 *points,
                   int count)
{
    if (count < 2) {
        return;
    }
    ev_vec3 centre = {0};
    for (int i = 0; i < count; ++i) {
        centre = ev_vec3_along(centre, 1.0 / count, points[i]);
    }
    double radius = 0.0;
    for (int i = 0; i < count; ++i) {
        radius = fmax(radius, ev_vec3_length(ev_vec3_sub(points[i], centre)));
    }
    camera->target = centre;
    camera->distance = fmax(1e-3, 8.0 * radius);
    for (int turn = 0; turn < 12; ++turn) { /* converges by a factor of about 5 a turn */
        ev_eye eye = ev_camera_eye(camera, place);
        ev_rect extent;
        if (!find_extent(&eye, points, count, &extent)) {
            camera->distance *= 2.0;
            continue;
        }
        ev_camera_pan(camera, place, inside.x + 0.5 * inside.width - extent.x - 0.5 * extent.width,
                      inside.y + 0.5 * inside.height - extent.y - 0.5 * extent.height);
        double scale = fmax(extent.width / inside.width, extent.height / inside.height);
        camera->distance = fmax(camera->distance * scale, 1.2 * radius);
    }
}
